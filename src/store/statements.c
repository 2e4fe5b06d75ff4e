/* statements.c: the SQL that is kept prepared.
**
** `@select` stands for what record.c reads of a part as it is now; `@columns`, `@values` and
** `@sets` for what state.c binds: every field of fields.def is in all of them.
*/
#include "store/record.h"

#include <string.h>

static const char *const texts[PF_SQL_COUNT] = {
    [PF_SQL_LAST_ENTRY] = "SELECT id, time, hash FROM entry ORDER BY id DESC LIMIT 1",
    [PF_SQL_ENTRY_AT] = "SELECT id, time, hash FROM entry WHERE time <= ?1 "
                        "ORDER BY id DESC LIMIT 1",
    [PF_SQL_ENTRY_BY_KEY] = "SELECT id FROM entry WHERE \"key\" = ?1 ORDER BY id",
    [PF_SQL_UNDO_OF] = "SELECT id FROM entry WHERE undoes = ?1 ORDER BY id DESC LIMIT 1",
    [PF_SQL_ADD_ENTRY] = "INSERT INTO entry (id, kind, author, time, why, \"key\", undoes, hash) "
                         "VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, zeroblob(32))",
    [PF_SQL_ADD_SOURCE] = "INSERT INTO source (entry, position, name, sha256) "
                          "VALUES (?1, ?2, ?3, ?4)",
    [PF_SQL_SET_HASH] = "UPDATE entry SET hash = ?2 WHERE id = ?1",
    [PF_SQL_READ_HASH] = "SELECT hash FROM entry WHERE id = ?1",
    [PF_SQL_READ_ENTRY] = "SELECT id, kind, author, time, why, \"key\", undoes FROM entry "
                          "WHERE id = ?1",
    [PF_SQL_READ_SOURCES] = "SELECT name, sha256 FROM source WHERE entry = ?1 ORDER BY position",
    [PF_SQL_READ_REVIEW] = "SELECT part, number, verdict FROM review WHERE entry = ?1",
    [PF_SQL_PARTS_NAMED] = "SELECT id, maker, withdrawn FROM part WHERE name = ?1 "
                           "ORDER BY ifnull(maker, '')",
    [PF_SQL_LOAD] = "@select WHERE p.id = ?1",
    [PF_SQL_ADD_PART] = "INSERT INTO part (@columns) VALUES (@values)",
    [PF_SQL_SET_PART] = "UPDATE part SET @sets WHERE id = ?1",
    [PF_SQL_ARCHIVE] = "INSERT INTO past (part, @columns) SELECT id, @columns FROM part "
                       "WHERE id = ?1",
    [PF_SQL_ADD_CURVE] = "INSERT INTO curve (packed) VALUES (?1)",
    [PF_SQL_ADD_CURVE_JSON] = "INSERT INTO curve_json (id, json) VALUES (?1, ?2)",
    [PF_SQL_STATES_OF] = "SELECT id, number FROM part WHERE entry = ?1 "
                         "UNION ALL SELECT part, number FROM past WHERE entry = ?1 ORDER BY 1",
    [PF_SQL_CHANGED_SINCE] = "SELECT p.name, p.entry FROM past s JOIN part p ON p.id = s.part "
                             "WHERE s.entry = ?1 AND s.content <> p.content ORDER BY p.name",
    [PF_SQL_LOAD_PAST] = "@past WHERE p.part = ?1 AND p.number = ?2",
    [PF_SQL_ALL_STATES] = "@past WHERE p.part = ?1 UNION ALL @select WHERE p.id = ?1 "
                          "ORDER BY number",
    [PF_SQL_KNEW] = "SELECT 1 FROM part p WHERE name = ?1 AND ifnull(maker, '') = ?2 AND "
                    "(content = ?3 OR EXISTS (SELECT 1 FROM past q WHERE q.part = p.id AND "
                    "q.content = ?3))",
    [PF_SQL_PART_OF_MAKER] = "SELECT id, content FROM part WHERE name = ?1 AND "
                             "ifnull(maker, '') = ?2",
    [PF_SQL_UNSEEN_AUTHORS] =
        "SELECT s.number, e.author FROM (SELECT number, entry FROM part WHERE id = ?1 UNION ALL "
        "SELECT number, entry FROM past WHERE part = ?1) s JOIN entry e ON e.id = s.entry "
        "WHERE s.number > ifnull((SELECT max(r.number) FROM review r WHERE r.part = ?1 AND "
        "r.number < (SELECT number FROM part WHERE id = ?1) AND r.verdict = 'accept' AND "
        "NOT EXISTS (SELECT 1 FROM review q WHERE q.part = ?1 AND q.number = r.number AND "
        "q.entry > r.entry AND q.verdict = 'question')), 0)",
    [PF_SQL_ADD_REVIEW] = "INSERT INTO review (entry, part, number, verdict) "
                          "VALUES (?1, ?2, ?3, ?4)",
    [PF_SQL_REVIEWS_OF] = "SELECT r.entry, r.verdict, e.author, e.time, e.why FROM review r "
                          "JOIN entry e ON e.id = r.entry WHERE r.part = ?1 AND r.number = ?2 "
                          "ORDER BY r.entry",
    [PF_SQL_READ_JSON] = "SELECT json FROM curve_json WHERE id = ?1",
    [PF_SQL_ENTRY_WORDS] = "SELECT kind, why, (SELECT group_concat(name || ' ' || sha256, '; ') "
                           "FROM (SELECT name, sha256 FROM source WHERE entry = ?1 "
                           "ORDER BY position)) FROM entry WHERE id = ?1",
};

/* Lists all columns of a state: `c` names, `v` parameters, `s` assignments. */
static void add_list(char what, pf_buffer *sql)
{
    const char *name;
    for (size_t i = 0; (name = pf_state_column(i)); i++) {
        if (i) pf_buffer_text(sql, ", ");
        if (what != 'v') pf_buffer_text(sql, name);
        if (what == 's') pf_buffer_text(sql, " = ");
        if (what != 'c') pf_buffer_print(sql, "?%zu", i + PF_STATE_PARAMETER);
    }
}

static void write_sql(const pf_store *store, const char *text, pf_buffer *sql)
{
    for (const char *mark; (mark = strchr(text, '@'));) {
        pf_buffer_add(sql, text, (size_t)(mark - text));
        if (strncmp(mark, "@select", 7) == 0)
            pf_record_select(store, "part", "id", "1", sql);
        else if (strncmp(mark, "@past", 5) == 0)
            pf_record_select(store, "past", "part", "1", sql);
        else
            add_list(mark[1], sql);
        text = mark + 1 + strspn(mark + 1, "abcdefghijklmnopqrstuvwxyz");
    }
    pf_buffer_text(sql, text);
}

static pf_status prepare(pf_store *store, pf_statement which, pf_error *error)
{
    pf_buffer sql;
    pf_buffer_init(&sql, PF_SQL_MAX);
    write_sql(store, texts[which], &sql);
    pf_status status = pf_buffer_status(&sql);
    if (status == PF_OK)
        status = pf_store_prepare(store, pf_buffer_string(&sql), &store->statement[which], error);
    else
        pf_store_no_memory(store, error);
    pf_buffer_clear(&sql);
    return status;
}

pf_status pf_store_statement(pf_store *store, pf_statement which, sqlite3_stmt **statement,
                             pf_error *error)
{
    pf_status status = PF_OK;
    if (!store->statement[which]) status = prepare(store, which, error);
    *statement = store->statement[which];
    if (*statement) sqlite3_reset(*statement);
    return status;
}
