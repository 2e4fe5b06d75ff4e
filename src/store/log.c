/* log.c: the log of acts on the database, and the chain of hashes over it. */
#include "store/log.h"
#include "store/digest.h"

#include <stdlib.h>
#include <string.h>

/* Whether text has the shape of the pattern, where 0 stands for any digit. */
static bool has_shape(const char *text, const char *pattern)
{
    for (; *pattern; pattern++, text++)
        if (*pattern == '0' ? *text < '0' || *text > '9' : *text != *pattern) return false;
    return *text == '\0';
}

pf_status pf_log_time(const char *text, char time[24], pf_error *error)
{
    bool day = has_shape(text, "0000-00-00");
    if (!day && !has_shape(text, "0000-00-00T00:00:00Z"))
        return pf_error_set(error, PF_BAD_ARGUMENT,
                            "%.40s is no time: write a date, 2025-03-01, or a time in UTC, "
                            "2025-03-01T12:00:00Z",
                            text);
    memcpy(time, text, day ? 10 : 21);
    if (day) memcpy(time + 10, "T23:59:59Z", 11);
    return PF_OK;
}

static bool read_head(sqlite3_stmt *row, pf_log_head *head)
{
    const char *time = (const char *)sqlite3_column_text(row, 1);
    const void *hash = sqlite3_column_blob(row, 2);
    if (!time || strlen(time) >= sizeof head->time || !hash ||
        sqlite3_column_bytes(row, 2) != PF_DIGEST_BYTES)
        return false;
    head->id = sqlite3_column_int64(row, 0);
    memcpy(head->time, time, strlen(time) + 1);
    memcpy(head->hash, hash, PF_DIGEST_BYTES);
    return true;
}

pf_status pf_log_head_read(pf_store *store, const char *at, pf_log_head *head, pf_error *error)
{
    sqlite3_stmt *statement;
    bool row;
    *head = (pf_log_head){0};
    pf_status status =
        pf_store_statement(store, at ? PF_SQL_ENTRY_AT : PF_SQL_LAST_ENTRY, &statement, error);
    if (status != PF_OK) return status;
    if (at) sqlite3_bind_text(statement, 1, at, -1, SQLITE_STATIC);
    status = pf_store_step(store, statement, &row, error);
    if (status == PF_OK && row && !read_head(statement, head))
        status = pf_store_damaged(store, error, "an entry of its log says what cannot be");
    sqlite3_reset(statement);
    return status;
}

static pf_status add_sources(pf_store *store, const pf_log_facts *facts, int64_t id,
                             pf_error *error)
{
    sqlite3_stmt *statement;
    pf_status status = pf_store_statement(store, PF_SQL_ADD_SOURCE, &statement, error);
    for (size_t i = 0; i < facts->file_count && status == PF_OK; i++) {
        sqlite3_bind_int64(statement, 1, id);
        sqlite3_bind_int64(statement, 2, (int64_t)i + 1);
        sqlite3_bind_text(statement, 3, facts->file[i].name, -1, SQLITE_STATIC);
        sqlite3_bind_text(statement, 4, facts->file[i].sha256, -1, SQLITE_STATIC);
        status = pf_store_do(store, statement, error);
    }
    return status;
}

static void bind_entry(sqlite3_stmt *statement, const pf_log_facts *facts, int64_t id,
                       const char *time)
{
    sqlite3_bind_int64(statement, 1, id);
    sqlite3_bind_text(statement, 2, facts->kind, -1, SQLITE_STATIC);
    sqlite3_bind_text(statement, 3, facts->author, -1, SQLITE_STATIC);
    sqlite3_bind_text(statement, 4, time, -1, SQLITE_STATIC);
    sqlite3_bind_text(statement, 5, facts->why, -1, SQLITE_STATIC);
    sqlite3_bind_text(statement, 6, facts->key, -1, SQLITE_STATIC);
    if (facts->undoes)
        sqlite3_bind_int64(statement, 7, facts->undoes);
    else
        sqlite3_bind_null(statement, 7);
}

pf_status pf_log_add(pf_store *store, const pf_log_facts *facts, int64_t *id, pf_error *error)
{
    pf_log_head last;
    sqlite3_stmt *statement;
    if (!facts->author || !facts->time || !has_shape(facts->time, "0000-00-00T00:00:00Z"))
        return pf_error_set(error, PF_BAD_ARGUMENT,
                            "an entry needs an author, and a time as 2025-03-01T12:00:00Z");
    pf_status status = pf_log_head_read(store, NULL, &last, error);
    if (status == PF_OK) status = pf_store_statement(store, PF_SQL_ADD_ENTRY, &statement, error);
    if (status != PF_OK) return status;
    *id = last.id + 1;
    bind_entry(statement, facts, *id, strcmp(facts->time, last.time) < 0 ? last.time : facts->time);
    status = pf_store_do(store, statement, error);
    sqlite3_clear_bindings(statement);
    return status == PF_OK ? add_sources(store, facts, *id, error) : status;
}

/* Adds all columns of all rows of a statement whose parameter 1 is an entry. */
static pf_status digest_rows(pf_store *store, pf_statement which, int64_t id, SHA2_CTX *sha,
                             pf_error *error)
{
    sqlite3_stmt *statement;
    bool row = true;
    pf_status status = pf_store_statement(store, which, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, id);
    while ((status = pf_store_step(store, statement, &row, error)) == PF_OK && row)
        for (int column = 0; column < sqlite3_column_count(statement); column++)
            pf_digest_text(sha, (const char *)sqlite3_column_text(statement, column));
    return status;
}

pf_status pf_log_digest(pf_store *store, int64_t id, const unsigned char before[PF_DIGEST_BYTES],
                        const pf_written *written, size_t count,
                        unsigned char hash[PF_DIGEST_BYTES], pf_error *error)
{
    SHA2_CTX sha;
    SHA256Init(&sha);
    SHA256Update(&sha, before, PF_DIGEST_BYTES);
    pf_status status = digest_rows(store, PF_SQL_READ_ENTRY, id, &sha, error);
    if (status == PF_OK) status = digest_rows(store, PF_SQL_READ_SOURCES, id, &sha, error);
    if (status == PF_OK) status = digest_rows(store, PF_SQL_READ_REVIEW, id, &sha, error);
    for (size_t i = 0; i < count; i++) {
        pf_digest_number(&sha, (uint64_t)written[i].part);
        pf_digest_number(&sha, (uint64_t)written[i].number);
        SHA256Update(&sha, written[i].content, PF_DIGEST_BYTES);
    }
    SHA256Final(hash, &sha);
    return status;
}

static int compare_written(const void *left, const void *right)
{
    const pf_written *a = left, *b = right;
    if (a->part != b->part) return a->part < b->part ? -1 : 1;
    return (a->number > b->number) - (a->number < b->number);
}

pf_status pf_log_seal(pf_store *store, int64_t id, pf_written *written, size_t count,
                      pf_error *error)
{
    sqlite3_stmt *statement;
    unsigned char before[PF_DIGEST_BYTES] = {0}, hash[PF_DIGEST_BYTES];
    if (count) qsort(written, count, sizeof *written, compare_written);
    bool row;
    pf_status status = pf_store_statement(store, PF_SQL_READ_HASH, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, id - 1);
    status = pf_store_step(store, statement, &row, error);
    if (status == PF_OK && row && sqlite3_column_bytes(statement, 0) == PF_DIGEST_BYTES)
        memcpy(before, sqlite3_column_blob(statement, 0), PF_DIGEST_BYTES);
    sqlite3_reset(statement);
    if (status == PF_OK) status = pf_log_digest(store, id, before, written, count, hash, error);
    if (status == PF_OK) status = pf_store_statement(store, PF_SQL_SET_HASH, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, id);
    sqlite3_bind_blob(statement, 2, hash, sizeof hash, SQLITE_STATIC);
    status = pf_store_do(store, statement, error);
    sqlite3_clear_bindings(statement);
    return status;
}
