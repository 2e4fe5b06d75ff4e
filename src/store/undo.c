/* undo.c: taking one entry back as a new one. */
#include "base/memory.h"
#include "store/record.h"
#include "store/write.h"

#include <stdio.h>
#include <string.h>

static pf_status check_kind(pf_store *store, int64_t entry, pf_error *error)
{
    sqlite3_stmt *statement;
    bool row, holding;
    pf_status status = pf_store_statement(store, PF_SQL_READ_ENTRY, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, entry);
    status = pf_store_step(store, statement, &row, error);
    const char *kind = row ? (const char *)sqlite3_column_text(statement, 1) : NULL;
    bool review = kind && strcmp(kind, "review") == 0;
    sqlite3_reset(statement);
    if (status != PF_OK) return status;
    if (!row)
        return pf_error_set(error, PF_NOT_FOUND, "%s: there is no import %lld", store->path,
                            (long long)entry);
    if (review)
        return pf_error_set(error, PF_BAD_INPUT,
                            "entry %lld is a review: review the part again instead",
                            (long long)entry);
    status = pf_entry_holds(store, entry, &holding, error);
    if (status == PF_OK && !holding)
        return pf_error_set(error, PF_BAD_INPUT, "import %lld is undone already", (long long)entry);
    return status;
}

/* A later entry changed parts of this one: says which, and by which entry. */
static pf_status check_later(pf_store *store, int64_t entry, pf_error *error)
{
    sqlite3_stmt *statement;
    bool row;
    char names[256] = "";
    int64_t later = 0;
    size_t count = 0;
    pf_status status = pf_store_statement(store, PF_SQL_CHANGED_SINCE, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, entry);
    while ((status = pf_store_step(store, statement, &row, error)) == PF_OK && row) {
        size_t length = strlen(names);
        if (count++ < 3)
            snprintf(names + length, sizeof names - length, "%s%s", length ? ", " : "",
                     (const char *)sqlite3_column_text(statement, 0));
        if (sqlite3_column_int64(statement, 1) > later) later = sqlite3_column_int64(statement, 1);
    }
    if (status != PF_OK || count == 0) return status;
    return pf_error_set(error, PF_BAD_INPUT,
                        "import %lld cannot be undone: %zu of its parts were changed since (%s%s), "
                        "last by import %lld; undo that first",
                        (long long)entry, count, names, count > 3 ? ", …" : "", (long long)later);
}

/* A part back to the state before the one that the entry made, or out where there was none. */
static pf_status take_back(pf_store *store, const pf_written *made, pf_error *error)
{
    sqlite3_stmt *statement;
    pf_target target;
    pf_record_extra extra = {.withdrawn = true};
    pf_stored_part before;
    bool row = false;
    pf_stored_part_init(&before);
    pf_status status = pf_write_load(store, made->part, &target, error);
    if (status == PF_OK) status = pf_store_statement(store, PF_SQL_LOAD_PAST, &statement, error);
    if (status == PF_OK) {
        sqlite3_bind_int64(statement, 1, made->part);
        sqlite3_bind_int64(statement, 2, made->number - 1);
        status = pf_store_step(store, statement, &row, error);
        if (status == PF_OK && row)
            status = pf_record_read(store, statement, &before, &extra, error);
        sqlite3_reset(statement);
    }
    if (status == PF_OK)
        status = pf_write_state(store, &target, row ? &before.part : &store->current.part,
                                extra.withdrawn, row ? extra.curves : target.curves, error);
    pf_stored_part_clear(&before);
    return status;
}

/* The states that the entry made, gathered before any of them moves. */
static pf_status gather(pf_store *store, int64_t entry, pf_written **made, size_t *count,
                        pf_error *error)
{
    sqlite3_stmt *statement;
    size_t capacity = 0;
    bool row;
    pf_status status = pf_store_statement(store, PF_SQL_STATES_OF, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, entry);
    while ((status = pf_store_step(store, statement, &row, error)) == PF_OK && row) {
        if (pf_grow((void **)made, &capacity, *count + 1, sizeof **made) != PF_OK) {
            sqlite3_reset(statement);
            return pf_store_no_memory(store, error);
        }
        (*made)[*count].part = sqlite3_column_int64(statement, 0);
        (*made)[(*count)++].number = sqlite3_column_int64(statement, 1);
    }
    return status;
}

static pf_status take_all_back(pf_store *store, int64_t entry, pf_error *error)
{
    pf_written *made = NULL;
    size_t count = 0;
    pf_status status = gather(store, entry, &made, &count, error);
    for (size_t i = 0; i < count && status == PF_OK; i++)
        status = take_back(store, &made[i], error);
    pf_free(made);
    return status;
}

pf_status pf_store_undo(pf_store *store, int64_t entry, const pf_import_facts *facts,
                        int64_t *number, pf_error *error)
{
    pf_log_facts log = {.kind = "undo",
                        .author = facts->author,
                        .time = facts->time,
                        .why = facts->why,
                        .undoes = entry};
    pf_status status = pf_write_begin(store, error);
    if (status != PF_OK) return status;
    status = check_kind(store, entry, error);
    if (status == PF_OK) status = check_later(store, entry, error);
    if (status == PF_OK) status = pf_write_entry(store, &log, error);
    if (status == PF_OK) status = take_all_back(store, entry, error);
    if (status == PF_OK) return pf_store_import_commit(store, number, error);
    pf_store_import_rollback(store);
    return status;
}
