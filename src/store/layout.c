/* layout.c: the tables, made from schema/ and fields.def, and the gate for other layouts. */
#include "store/layout.h"
#include "base/memory.h"
#include "base/number.h"
#include "store/schema.h"

#include <string.h>

/* Columns that schema/001_layout.sql writes out: the fields among them, and the rest. */
static const char *const fixed_fields[] = {"name", "maker", "status", "status_reason"};
static const char *const own_columns[] = {"id",      "part",     "number", "entry",     "withdrawn",
                                          "content", "polarity", "rdson",  "soa_top_V", "curves"};

static bool listed(const char *const *list, size_t count, const char *name)
{
    for (size_t i = 0; i < count; i++)
        if (strcmp(list[i], name) == 0) return true;
    return false;
}

bool pf_column_is_fixed(const char *name)
{
    return listed(fixed_fields, sizeof fixed_fields / sizeof *fixed_fields, name);
}

/* `vds_max_V REAL CONSTRAINT "vds_max must lie between 1 and 3000 V" CHECK (…)` */
static void add_rating_column(pf_buffer *sql, const pf_rating_field *field)
{
    char lowest[PF_NUMBER_ROOM], highest[PF_NUMBER_ROOM];
    pf_number_print(lowest, field->lowest, 0);
    pf_number_print(highest, field->highest, 0);
    const char *unit = pf_quantity_unit(field->quantity);
    pf_buffer_print(sql,
                    "%s REAL CONSTRAINT \"%s must lie between %s and %s%s%s\" "
                    "CHECK (%s BETWEEN %s AND %s)",
                    field->name, field->csv, lowest, highest, *unit ? " " : "", unit, field->name,
                    lowest, highest);
}

static void add_text_column(pf_buffer *sql, const pf_text_field *field)
{
    pf_buffer_print(sql, "%s TEXT", field->name);
}

/* What a placeholder of schema/ stands for, comma between. */
static void expand(pf_buffer *sql, bool columns)
{
    size_t texts, ratings;
    const pf_text_field *text = pf_text_fields(&texts);
    const pf_rating_field *rating = pf_rating_fields(&ratings);
    const char *comma = "";
    for (size_t i = 0; i < texts; i++) {
        if (columns ? pf_column_is_fixed(text[i].name) : i < 2) continue; /* name, maker */
        pf_buffer_text(sql, comma);
        if (columns)
            add_text_column(sql, &text[i]);
        else
            pf_buffer_print(sql, "p.%s", text[i].name);
        comma = ", ";
    }
    for (size_t i = 0; i < ratings; i++) {
        pf_buffer_text(sql, comma);
        if (columns)
            add_rating_column(sql, &rating[i]);
        else
            pf_buffer_print(sql, "p.%s", rating[i].name);
        comma = ", ";
    }
}

/* Runs a text of schema/ with its placeholders filled in. */
static pf_status run_schema(pf_store *store, const char *text, pf_error *error)
{
    pf_buffer sql;
    pf_buffer_init(&sql, PF_SQL_MAX);
    for (const char *mark; (mark = strchr(text, '{')); text = strchr(mark, '}') + 1) {
        pf_buffer_add(&sql, text, (size_t)(mark - text));
        expand(&sql, mark[1] == 'c');
    }
    pf_buffer_text(&sql, text);
    pf_status status = pf_buffer_status(&sql);
    if (status == PF_OK)
        status = pf_store_run(store, pf_buffer_string(&sql), error);
    else
        pf_store_no_memory(store, error);
    pf_buffer_clear(&sql);
    return status;
}

/* What leads from each layout to the next; layout 0 is an empty file. */
static const char *const migrations[PF_LAYOUT] = {pf_schema_001_layout};

static pf_status migrate(pf_store *store, int64_t from, pf_error *error)
{
    char header[96];
    sqlite3_snprintf(sizeof header, header, "PRAGMA application_id=%d; PRAGMA user_version=%d",
                     PF_APPLICATION_ID, PF_LAYOUT);
    pf_status status = PF_OK;
    for (int64_t layout = from; layout < PF_LAYOUT && status == PF_OK; layout++)
        status = run_schema(store, migrations[layout], error);
    if (status == PF_OK) status = run_schema(store, pf_schema_views, error);
    if (status == PF_OK) status = pf_store_run(store, header, error);
    return status;
}

/* Marks the fields that this database lacks; refuses one that this program does not know. */
static pf_status compare_columns(pf_store *store, bool *missing, pf_error *error)
{
    size_t texts, ratings;
    const pf_text_field *text = pf_text_fields(&texts);
    const pf_rating_field *rating = pf_rating_fields(&ratings);
    memset(store->text_missing, 1, texts);
    memset(store->rating_missing, 1, ratings);
    sqlite3_stmt *statement;
    pf_status status =
        pf_store_prepare(store, "SELECT name FROM pragma_table_info('part')", &statement, error);
    if (status != PF_OK) return status;
    bool row = true;
    while (status == PF_OK && (status = pf_store_step(store, statement, &row, error)) == PF_OK &&
           row) {
        const char *name = (const char *)sqlite3_column_text(statement, 0);
        bool known = name && listed(own_columns, sizeof own_columns / sizeof *own_columns, name);
        for (size_t i = 0; name && i < texts; i++)
            if (strcmp(text[i].name, name) == 0) known = true, store->text_missing[i] = 0;
        for (size_t i = 0; name && i < ratings; i++)
            if (strcmp(rating[i].name, name) == 0) known = true, store->rating_missing[i] = 0;
        if (!known)
            status = pf_error_set(error, PF_DATABASE,
                                  "%s was written by a newer passfet (it holds %s, which this one "
                                  "does not know)",
                                  store->path, name ? name : "a column");
    }
    sqlite3_finalize(statement);
    *missing = memchr(store->text_missing, 1, texts) || memchr(store->rating_missing, 1, ratings);
    return status;
}

static pf_status add_column(pf_store *store, const char *table, const pf_text_field *text,
                            const pf_rating_field *rating, pf_error *error)
{
    pf_buffer sql;
    pf_buffer_init(&sql, PF_SQL_MAX);
    pf_buffer_print(&sql, "ALTER TABLE %s ADD COLUMN ", table);
    if (text)
        add_text_column(&sql, text);
    else
        add_rating_column(&sql, rating);
    pf_status status = pf_buffer_status(&sql);
    if (status == PF_OK)
        status = pf_store_run(store, pf_buffer_string(&sql), error);
    else
        pf_store_no_memory(store, error);
    pf_buffer_clear(&sql);
    return status;
}

/* Adds the fields that an older database lacks; the views list all fields, so they are made anew.
 */
static pf_status add_missing(pf_store *store, pf_error *error)
{
    size_t texts, ratings;
    const pf_text_field *text = pf_text_fields(&texts);
    const pf_rating_field *rating = pf_rating_fields(&ratings);
    pf_status status = PF_OK;
    for (int table = 0; table < 2; table++) {
        const char *name = table ? "past" : "part";
        for (size_t i = 0; i < texts && status == PF_OK; i++)
            if (store->text_missing[i]) status = add_column(store, name, &text[i], NULL, error);
        for (size_t i = 0; i < ratings && status == PF_OK; i++)
            if (store->rating_missing[i]) status = add_column(store, name, NULL, &rating[i], error);
    }
    return status == PF_OK ? run_schema(store, pf_schema_views, error) : status;
}

static pf_status read_version(pf_store *store, int64_t *version, pf_error *error)
{
    pf_status status = pf_store_number(store, "PRAGMA user_version", 0, version, error);
    if (status == PF_OK && (*version < 0 || *version > PF_LAYOUT))
        return pf_error_set(error, PF_DATABASE, "%s was written by a newer passfet (layout %d)",
                            store->path, (int)*version);
    return status;
}

/* In a transaction of its own, after looking again at what is to be done: another process may have
** done it in between. */
static pf_status bring_up_to_date(pf_store *store, pf_error *error)
{
    bool missing = false;
    int64_t version;
    pf_status status = pf_store_run(store, "BEGIN IMMEDIATE", error);
    if (status != PF_OK) return status;
    status = read_version(store, &version, error);
    if (status == PF_OK && version < PF_LAYOUT) status = migrate(store, version, error);
    if (status == PF_OK) status = compare_columns(store, &missing, error);
    if (status == PF_OK && missing) status = add_missing(store, error);
    if (status == PF_OK && missing) status = compare_columns(store, &missing, error);
    if (status == PF_OK) status = pf_store_run(store, "COMMIT", error);
    if (status != PF_OK) sqlite3_exec(store->db, "ROLLBACK", NULL, NULL, NULL);
    return status;
}

pf_status pf_layout_settle(pf_store *store, bool write, bool create, pf_error *error)
{
    int64_t version;
    bool missing = false;
    pf_status status = read_version(store, &version, error);
    if (status != PF_OK) return status;
    if (version == 0 && !create)
        return pf_error_set(error, PF_NOT_FOUND, "%s is empty: import ratings first", store->path);
    if (version < PF_LAYOUT && !write)
        return pf_error_set(error, PF_DATABASE,
                            "%s has layout %d: import into it once, which brings it up to date",
                            store->path, (int)version);
    if (version == PF_LAYOUT) status = compare_columns(store, &missing, error);
    bool stale = version < PF_LAYOUT || (missing && write);
    return status == PF_OK && stale ? bring_up_to_date(store, error) : status;
}
