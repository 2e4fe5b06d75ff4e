/* database.c: running SQL on the open database, and saying what went wrong in one sentence. */
#include "store/database.h"

#include <string.h>

/* "CHECK constraint failed: a part needs vds_max" → "a part needs vds_max". */
static const char *constraint_sentence(const char *text)
{
    static const char prefix[] = "CHECK constraint failed: ";
    return strncmp(text, prefix, sizeof prefix - 1) == 0 ? text + sizeof prefix - 1 : text;
}

static pf_status fail_io(pf_store *store, int code, pf_error *error)
{
    if (code == SQLITE_IOERR_DATA)
        return pf_store_damaged(store, error, "a page does not match its checksum");
    if (code == SQLITE_IOERR_NOMEM) return pf_store_no_memory(store, error);
    return pf_error_set(error, PF_DATABASE, "%s: reading or writing failed (%s)", store->path,
                        sqlite3_errmsg(store->db));
}

pf_status pf_store_no_memory(pf_store *store, pf_error *error)
{
    return pf_error_set(error, PF_NO_MEMORY, "%s: out of memory", store->path);
}

pf_status pf_store_damaged(pf_store *store, pf_error *error, const char *what)
{
    return pf_error_set(error, PF_DATABASE, "%s is damaged: %s; go back to a backup", store->path,
                        what);
}

static pf_status fail_busy(pf_store *store, pf_error *error)
{
    char wait[PF_UNIT_ROOM];
    pf_value_print(wait, store->wait_ms / 1000.0, PF_TIME, 3);
    return pf_error_set(error, PF_BUSY,
                        "%s: other processes kept the database busy for %s; try again", store->path,
                        wait);
}

pf_status pf_store_fail(pf_store *store, int code, pf_error *error)
{
    const char *text = store->db ? sqlite3_errmsg(store->db) : sqlite3_errstr(code);
    switch (code & 0xFF) {
    case SQLITE_BUSY:
    case SQLITE_LOCKED:
        return fail_busy(store, error);
    case SQLITE_NOMEM:
        return pf_store_no_memory(store, error);
    case SQLITE_CONSTRAINT:
        return pf_error_set(error, PF_BAD_INPUT, "%s", constraint_sentence(text));
    case SQLITE_CORRUPT:
        return pf_store_damaged(store, error, text);
    case SQLITE_NOTADB:
        return pf_error_set(error, PF_DATABASE, "%s is not a passfet database", store->path);
    case SQLITE_FULL:
        return pf_error_set(error, PF_DATABASE, "%s: the disk is full; nothing was stored",
                            store->path);
    case SQLITE_READONLY:
    case SQLITE_PERM:
    case SQLITE_AUTH:
        return pf_error_set(error, PF_DATABASE, "%s cannot be written (%s)", store->path, text);
    case SQLITE_CANTOPEN:
        return pf_error_set(error, PF_FILE, "%s cannot be opened (%s)", store->path, text);
    case SQLITE_IOERR:
        return fail_io(store, code, error);
    default:
        return pf_error_set(error, PF_DATABASE, "%s: %s", store->path, text);
    }
}

pf_status pf_store_run(pf_store *store, const char *sql, pf_error *error)
{
    int code = sqlite3_exec(store->db, sql, NULL, NULL, NULL);
    return code == SQLITE_OK ? PF_OK : pf_store_fail(store, code, error);
}

pf_status pf_store_prepare(pf_store *store, const char *sql, sqlite3_stmt **statement,
                           pf_error *error)
{
    int code = sqlite3_prepare_v3(store->db, sql, -1, SQLITE_PREPARE_PERSISTENT, statement, NULL);
    return code == SQLITE_OK ? PF_OK : pf_store_fail(store, code, error);
}

pf_status pf_store_step(pf_store *store, sqlite3_stmt *statement, bool *row, pf_error *error)
{
    int code = sqlite3_step(statement);
    *row = code == SQLITE_ROW;
    if (*row) return PF_OK;
    pf_status status = code == SQLITE_DONE ? PF_OK : pf_store_fail(store, code, error);
    sqlite3_reset(statement);
    return status;
}

pf_status pf_store_do(pf_store *store, sqlite3_stmt *statement, pf_error *error)
{
    bool row;
    pf_status status = pf_store_step(store, statement, &row, error);
    if (row) sqlite3_reset(statement);
    return status;
}

pf_status pf_store_number(pf_store *store, const char *sql, int64_t otherwise, int64_t *number,
                          pf_error *error)
{
    sqlite3_stmt *statement;
    bool row;
    *number = otherwise;
    pf_status status = pf_store_prepare(store, sql, &statement, error);
    if (status != PF_OK) return status;
    status = pf_store_step(store, statement, &row, error);
    if (status == PF_OK && row && sqlite3_column_type(statement, 0) != SQLITE_NULL)
        *number = sqlite3_column_int64(statement, 0);
    sqlite3_finalize(statement);
    return status;
}
