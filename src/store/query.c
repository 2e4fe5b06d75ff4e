/* query.c: reading parts, as they are now or as they were known at a time. */
#include "store/query.h"
#include "base/memory.h"
#include "store/log.h"
#include "store/record.h"

struct pf_cursor {
    pf_store *store;
    sqlite3_stmt *statement;
};

pf_status pf_store_read_begin(pf_store *store, pf_error *error)
{
    int64_t version;
    pf_status status = pf_store_run(store, "BEGIN", error);
    if (status == PF_OK) /* the first read takes the lock */
        status = pf_store_number(store, "PRAGMA user_version", 0, &version, error);
    if (status != PF_OK) pf_store_read_end(store);
    return status;
}

void pf_store_read_end(pf_store *store)
{
    if (!sqlite3_get_autocommit(store->db) && !store->import.open)
        sqlite3_exec(store->db, "COMMIT", NULL, NULL, NULL);
}

/* Part ids, `after` not among them. */
typedef struct id_range {
    int64_t after, upto;
} id_range;

static pf_status slice_range(pf_store *store, const pf_query *query, id_range *range,
                             pf_error *error)
{
    int64_t last;
    pf_status status = pf_store_number(store, "SELECT max(id) FROM part", 0, &last, error);
    int64_t step = last / query->slices;
    range->after = step * query->slice;
    range->upto = query->slice + 1 == query->slices ? last : range->after + step;
    return status;
}

/* Appends the conditions of a query; ?1 is the last entry of as_of, ?2 and ?3 the range of ids. */
static void add_where(const pf_query *query, bool range, const char *id, pf_buffer *sql)
{
    pf_buffer_text(sql, " WHERE p.withdrawn = 0");
    if (range) pf_buffer_print(sql, " AND p.%s > ?2 AND p.%s <= ?3", id, id);
    if (query->reviewed_only) pf_buffer_text(sql, " AND verdict = 'accept'");
}

/* The newest state of every part whose entry is not behind ?1. */
static void write_past(const pf_store *store, const pf_query *query, bool range, bool reviews,
                       pf_buffer *sql)
{
    pf_record_select(store, "part", "id", reviews ? "r.entry <= ?1" : NULL, sql);
    add_where(query, range, "id", sql);
    pf_buffer_text(sql, " AND p.entry <= ?1 UNION ALL ");
    pf_record_select(store, "past", "part", reviews ? "r.entry <= ?1" : NULL, sql);
    add_where(query, range, "part", sql);
    pf_buffer_text(sql, " AND p.number = (SELECT max(q.number) FROM past q WHERE q.part = p.part "
                        "AND q.entry <= ?1) AND (SELECT entry FROM part WHERE id = p.part) > ?1");
    pf_buffer_text(sql, query->as_stored ? " ORDER BY part_id" : " ORDER BY name, maker");
}

static void write_now(const pf_store *store, const pf_query *query, bool range, bool reviews,
                      pf_buffer *sql)
{
    pf_record_select(store, "part", "id", reviews ? "1" : NULL, sql);
    add_where(query, range, "id", sql);
    pf_buffer_text(sql,
                   query->as_stored ? " ORDER BY p.id" : " ORDER BY p.name, ifnull(p.maker, '')");
}

static pf_status prepare(pf_store *store, const pf_query *query, bool range, pf_cursor *cursor,
                         pf_error *error)
{
    pf_buffer sql;
    int64_t reviews; /* looking for one per part costs as much as reading its ratings */
    pf_status status = pf_store_number(store, "SELECT 1 FROM review LIMIT 1", 0, &reviews, error);
    if (status != PF_OK) return status;
    pf_buffer_init(&sql, PF_SQL_MAX);
    if (query->as_of)
        write_past(store, query, range, reviews != 0, &sql);
    else
        write_now(store, query, range, reviews != 0, &sql);
    status = pf_buffer_status(&sql);
    if (status == PF_OK)
        status = pf_store_prepare(store, pf_buffer_string(&sql), &cursor->statement, error);
    else
        pf_store_no_memory(store, error);
    pf_buffer_clear(&sql);
    return status;
}

static pf_status bind(pf_store *store, const char *as_of, const id_range *range,
                      sqlite3_stmt *statement, pf_error *error)
{
    char time[24];
    pf_log_head head;
    pf_status status = PF_OK;
    if (as_of) {
        status = pf_log_time(as_of, time, error);
        if (status == PF_OK) status = pf_log_head_read(store, time, &head, error);
        if (status == PF_OK) sqlite3_bind_int64(statement, 1, head.id);
    }
    if (status == PF_OK && range) {
        sqlite3_bind_int64(statement, 2, range->after);
        sqlite3_bind_int64(statement, 3, range->upto);
    }
    return status;
}

/* range NULL: all parts. */
static pf_status open_range(pf_store *store, const pf_query *query, const id_range *range,
                            pf_cursor **out, pf_error *error)
{
    *out = NULL;
    pf_cursor *cursor = pf_allocate(1, sizeof *cursor);
    if (!cursor) return pf_store_no_memory(store, error);
    cursor->store = store;
    pf_status status = prepare(store, query, range != NULL, cursor, error);
    if (status == PF_OK) status = bind(store, query->as_of, range, cursor->statement, error);
    if (status == PF_OK)
        *out = cursor;
    else
        pf_cursor_close(cursor);
    return status;
}

pf_status pf_cursor_open(pf_store *store, const pf_query *query, pf_cursor **out, pf_error *error)
{
    id_range range;
    *out = NULL;
    if (!query->slices) return open_range(store, query, NULL, out, error);
    if (query->slice >= query->slices)
        return pf_error_set(error, PF_BAD_ARGUMENT, "slice %u of %u", query->slice, query->slices);
    pf_status status = slice_range(store, query, &range, error);
    return status == PF_OK ? open_range(store, query, &range, out, error) : status;
}

pf_status pf_part_load(pf_store *store, int64_t part_id, const char *as_of, pf_stored_part *stored,
                       bool *there, pf_error *error)
{
    pf_query query = {.as_of = as_of, .as_stored = true};
    id_range range = {part_id - 1, part_id};
    pf_cursor *cursor;
    pf_status status = open_range(store, &query, &range, &cursor, error);
    if (status == PF_OK) status = pf_cursor_next(cursor, stored, there, error);
    pf_cursor_close(cursor);
    return status;
}

pf_status pf_cursor_next_extra(pf_cursor *cursor, pf_stored_part *stored, pf_record_extra *extra,
                               bool *more, pf_error *error)
{
    pf_status status = pf_store_step(cursor->store, cursor->statement, more, error);
    if (status != PF_OK || !*more) return status;
    return pf_record_read(cursor->store, cursor->statement, stored, extra, error);
}

pf_status pf_cursor_next(pf_cursor *cursor, pf_stored_part *stored, bool *more, pf_error *error)
{
    return pf_cursor_next_extra(cursor, stored, NULL, more, error);
}

void pf_cursor_close(pf_cursor *cursor)
{
    if (!cursor) return;
    sqlite3_finalize(cursor->statement);
    pf_free(cursor);
}

pf_status pf_store_count(pf_store *store, int64_t *parts, pf_error *error)
{
    return pf_store_number(store, "SELECT count(*) FROM part WHERE withdrawn = 0", 0, parts, error);
}
