/* verify.c: whether everything that the database says holds together. */
#include "base/memory.h"
#include "store/curve_json.h"
#include "store/digest.h"
#include "store/log.h"
#include "store/record.h"

#include <stdarg.h>
#include <stdio.h>
#include <string.h>

typedef struct check {
    pf_store *store;
    pf_finding_visitor *visit;
    void *context;
    size_t *findings;
    pf_stored_part stored;
} check;

static void find(check *on, const char *format, ...) PF_PRINTF(2, 3);

static void find(check *on, const char *format, ...)
{
    char sentence[512];
    va_list arguments;
    va_start(arguments, format);
    vsnprintf(sentence, sizeof sentence, format, arguments);
    va_end(arguments);
    ++*on->findings;
    if (on->visit) on->visit(on->context, sentence);
}

/* Every row of a query is a finding: its columns filled into the format, as texts. */
static pf_status find_rows(check *on, const char *sql, const char *words, pf_error *error)
{
    sqlite3_stmt *statement;
    bool row;
    pf_status status = pf_store_prepare(on->store, sql, &statement, error);
    if (status != PF_OK) return status;
    while ((status = pf_store_step(on->store, statement, &row, error)) == PF_OK && row) {
        const char *text = (const char *)sqlite3_column_text(statement, 0);
        if (!text || strcmp(text, "ok") != 0) find(on, "%s%s", words, text ? text : "");
    }
    sqlite3_finalize(statement);
    return status;
}

static pf_status check_structure(check *on, pf_error *error)
{
    static const char *const queries[][2] = {
        {"PRAGMA integrity_check", "structure: "},
        {"SELECT \"table\" || ' row ' || ifnull(rowid, '?') || ' refers to what is not there' "
         "FROM pragma_foreign_key_check",
         "reference: table "},
        {"SELECT name FROM part p WHERE number <> 1 + (SELECT count(*) FROM past WHERE part = "
         "p.id)",
         "history: revisions are missing of part "},
        {"SELECT r.entry FROM review r JOIN part p ON p.id = r.part WHERE r.number > p.number",
         "review: there is no such revision as is reviewed by entry "},
    };
    pf_status status = PF_OK;
    for (size_t i = 0; i < sizeof queries / sizeof *queries && status == PF_OK; i++)
        status = find_rows(on, queries[i][0], queries[i][1], error);
    return status;
}

/* The JSON beside the packed curves of a row. */
static pf_status check_json(check *on, int64_t curves, pf_error *error)
{
    pf_store *store = on->store;
    sqlite3_stmt *statement;
    bool row;
    pf_buffer_reset(&store->json);
    pf_curves_json(&on->stored.part, &store->json);
    if (pf_buffer_status(&store->json) != PF_OK) return pf_store_no_memory(store, error);
    pf_status status = pf_store_statement(store, PF_SQL_READ_JSON, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, curves);
    status = pf_store_step(store, statement, &row, error);
    const char *json = row ? (const char *)sqlite3_column_text(statement, 0) : NULL;
    if (status == PF_OK && (!json || strcmp(json, store->json.text) != 0))
        find(on, "curves: the JSON of part %s revision %lld differs from its packed form",
             on->stored.part.name, (long long)on->stored.facts.number);
    sqlite3_reset(statement);
    return status;
}

static pf_status check_state(check *on, const pf_record_extra *extra, pf_error *error)
{
    unsigned char digest[PF_DIGEST_BYTES];
    pf_store *store = on->store;
    pf_status status = pf_state_digest(&store->order, &on->stored.part, extra->withdrawn,
                                       extra->packed, extra->packed_bytes, &store->scratch, digest);
    if (status != PF_OK) return pf_store_no_memory(store, error);
    if (memcmp(digest, extra->content, PF_DIGEST_BYTES) != 0)
        find(on, "hash: part %s revision %lld is not what was imported", on->stored.part.name,
             (long long)on->stored.facts.number);
    return extra->curves ? check_json(on, extra->curves, error) : PF_OK;
}

/* All rows of part or past. A row that cannot be read is a finding, not the end. */
static pf_status check_states(check *on, const char *table, const char *id, pf_error *error)
{
    sqlite3_stmt *statement = NULL;
    pf_record_extra extra;
    pf_buffer sql;
    bool row;
    pf_buffer_init(&sql, PF_SQL_MAX);
    pf_record_select(on->store, table, id, "1", &sql);
    pf_status status = pf_buffer_status(&sql);
    if (status != PF_OK)
        pf_store_no_memory(on->store, error);
    else
        status = pf_store_prepare(on->store, pf_buffer_string(&sql), &statement, error);
    pf_buffer_clear(&sql);
    while (status == PF_OK &&
           (status = pf_store_step(on->store, statement, &row, error)) == PF_OK && row) {
        pf_error wrong = {0};
        status = pf_record_read(on->store, statement, &on->stored, &extra, &wrong);
        if (status == PF_DATABASE)
            find(on, "row: %s", wrong.text);
        else if (status == PF_OK)
            status = check_state(on, &extra, error);
        if (status == PF_DATABASE && wrong.status)
            status = PF_OK;
        else if (wrong.status)
            pf_error_set(error, status, "%s", wrong.text);
    }
    sqlite3_finalize(statement);
    return status;
}

/* The states of one entry out of a walk over all states by entry; the row at hand stays. */
typedef struct states {
    sqlite3_stmt *statement;
    bool row;
    pf_written *written;
    size_t count, capacity;
} states;

static pf_status gather(check *on, states *all, int64_t entry, pf_error *error)
{
    pf_status status = PF_OK;
    all->count = 0;
    while (status == PF_OK && all->row && sqlite3_column_int64(all->statement, 0) <= entry) {
        pf_written written = {.part = sqlite3_column_int64(all->statement, 1),
                              .number = sqlite3_column_int64(all->statement, 2)};
        if (sqlite3_column_bytes(all->statement, 3) == PF_DIGEST_BYTES)
            memcpy(written.content, sqlite3_column_blob(all->statement, 3), PF_DIGEST_BYTES);
        if (pf_grow((void **)&all->written, &all->capacity, all->count + 1, sizeof *all->written) !=
            PF_OK)
            return pf_store_no_memory(on->store, error);
        all->written[all->count++] = written;
        status = pf_store_step(on->store, all->statement, &all->row, error);
    }
    return status;
}

static pf_status check_entries(check *on, states *all, sqlite3_stmt *entries, pf_error *error)
{
    unsigned char before[PF_DIGEST_BYTES] = {0}, digest[PF_DIGEST_BYTES];
    int64_t expected = 1;
    bool row;
    pf_status status;
    while ((status = pf_store_step(on->store, entries, &row, error)) == PF_OK && row) {
        int64_t id = sqlite3_column_int64(entries, 0);
        if (id != expected) find(on, "log: entry %lld is missing", (long long)expected);
        status = gather(on, all, id, error);
        if (status == PF_OK)
            status = pf_log_digest(on->store, id, before, all->written, all->count, digest, error);
        if (status != PF_OK) return status;
        bool whole = sqlite3_column_bytes(entries, 1) == PF_DIGEST_BYTES;
        if (whole) memcpy(before, sqlite3_column_blob(entries, 1), PF_DIGEST_BYTES);
        if (!whole || memcmp(before, digest, PF_DIGEST_BYTES) != 0)
            find(on, "log: entry %lld, or what it brought in, was changed afterwards",
                 (long long)id);
        expected = id + 1;
    }
    return status;
}

static pf_status check_chain(check *on, pf_error *error)
{
    states all = {0};
    sqlite3_stmt *entries = NULL;
    pf_status status = pf_store_prepare(on->store,
                                        "SELECT entry, id, number, content FROM part UNION ALL "
                                        "SELECT entry, part, number, content FROM past "
                                        "ORDER BY 1, 2, 3",
                                        &all.statement, error);
    if (status == PF_OK)
        status =
            pf_store_prepare(on->store, "SELECT id, hash FROM entry ORDER BY id", &entries, error);
    if (status == PF_OK) status = pf_store_step(on->store, all.statement, &all.row, error);
    if (status == PF_OK) status = check_entries(on, &all, entries, error);
    sqlite3_finalize(all.statement);
    sqlite3_finalize(entries);
    pf_free(all.written);
    return status;
}

pf_status pf_store_verify(pf_store *store, pf_finding_visitor *visit, void *context,
                          size_t *findings, pf_error *error)
{
    check on = {.store = store, .visit = visit, .context = context, .findings = findings};
    *findings = 0;
    pf_stored_part_init(&on.stored);
    bool own = sqlite3_get_autocommit(store->db) != 0;
    pf_status status = own ? pf_store_read_begin(store, error) : PF_OK;
    if (status != PF_OK) return status;
    status = check_structure(&on, error);
    if (status == PF_OK) status = check_states(&on, "part", "id", error);
    if (status == PF_OK) status = check_states(&on, "past", "part", error);
    if (status == PF_OK) status = check_chain(&on, error);
    if (own) pf_store_read_end(store);
    pf_stored_part_clear(&on.stored);
    return status;
}
