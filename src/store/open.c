/* open.c: opening a database so that neither its content nor its name can surprise us. */
#include "base/memory.h"
#include "store/database.h"
#include "store/digest.h"
#include "store/layout.h"
#include "store/network.h"
#include "store/page_check.h"

#include <stdio.h>
#include <string.h>

/* Longest value of a column that is taken from a file that may be hostile. */
#define VALUE_BYTES_MAX (64 << 20)

/* SQLite would read "file:…" as a URI and ":memory:" as no file: a folder in front settles it. */
static pf_status plain_path(const char *path, char **plain)
{
    size_t length = strlen(path);
    *plain = pf_allocate(length + 3, 1);
    if (!*plain) return PF_NO_MEMORY;
    snprintf(*plain, length + 3, "%s%s", path[0] == '/' ? "" : "./", path);
    return PF_OK;
}

static pf_status allocate(const char *path, pf_store **out, pf_error *error)
{
    pf_store *store = pf_allocate(1, sizeof *store);
    *out = store;
    if (!store) return pf_error_set(error, PF_NO_MEMORY, "%s: out of memory", path);
    pf_stored_part_init(&store->current);
    pf_buffer_init(&store->packed, VALUE_BYTES_MAX);
    pf_buffer_init(&store->json, VALUE_BYTES_MAX);
    pf_buffer_init(&store->scratch, VALUE_BYTES_MAX);
    pf_field_order_make(&store->order);
    pf_status status = pf_text_copy(&store->path, path);
    if (status == PF_OK) status = pf_page_check_new(PF_PAGE_BYTES, &store->vfs);
    if (status == PF_OK) return PF_OK;
    return pf_error_set(error, PF_NO_MEMORY, "%s: out of memory", path);
}

/* Nothing in the file may run code, lie about its structure, or grow without bound. */
static pf_status configure(pf_store *store, bool write, pf_error *error)
{
    int reserve = PF_CHECK_BYTES;
    sqlite3 *db = store->db;
    sqlite3_extended_result_codes(db, 1);
    pf_store_queue(store);
    sqlite3_limit(db, SQLITE_LIMIT_LENGTH, VALUE_BYTES_MAX);
    sqlite3_limit(db, SQLITE_LIMIT_ATTACHED, 0);
    sqlite3_db_config(db, SQLITE_DBCONFIG_ENABLE_LOAD_EXTENSION, 0, (int *)NULL);
    sqlite3_db_config(db, SQLITE_DBCONFIG_DEFENSIVE, 1, (int *)NULL);
    sqlite3_db_config(db, SQLITE_DBCONFIG_TRUSTED_SCHEMA, 0, (int *)NULL);
    sqlite3_db_config(db, SQLITE_DBCONFIG_ENABLE_TRIGGER, 0, (int *)NULL);
    sqlite3_db_config(db, SQLITE_DBCONFIG_ENABLE_VIEW, 0, (int *)NULL);
    sqlite3_db_config(db, SQLITE_DBCONFIG_ENABLE_FKEY, 1, (int *)NULL);
    sqlite3_file_control(db, "main", SQLITE_FCNTL_RESERVE_BYTES, &reserve);
    pf_status status =
        pf_store_run(store,
                     "PRAGMA cell_size_check=ON; PRAGMA page_size=8192; PRAGMA temp_store=2;"
                     "PRAGMA secure_delete=OFF; PRAGMA mmap_size=0",
                     error);
    if (status == PF_OK && write)
        status = pf_store_run(store, "PRAGMA cache_size=-65536; PRAGMA synchronous=EXTRA", error);
    if (status == PF_OK && !write) status = pf_store_run(store, "PRAGMA query_only=ON", error);
    return status;
}

/* Readers open for writing too, since only so can SQLite roll back what a killed import left; where
** the file is read-only, SQLite falls back by itself. */
static pf_status connect_file(pf_store *store, const char *file, pf_store_mode mode,
                              pf_error *error)
{
    int create = mode == PF_STORE_CREATE || mode == PF_STORE_MEMORY ? SQLITE_OPEN_CREATE : 0;
    int flags = SQLITE_OPEN_READWRITE | SQLITE_OPEN_NOMUTEX | create;
    int code = sqlite3_open_v2(file, &store->db, flags, store->vfs->zName);
    if (code != SQLITE_OK) return pf_store_fail(store, code, error);
    if (mode != PF_STORE_READ && sqlite3_db_readonly(store->db, "main") == 1)
        return pf_error_set(error, PF_DATABASE, "%s cannot be written: it is read-only",
                            store->path);
    return PF_OK;
}

static pf_status connect(pf_store *store, pf_store_mode mode, pf_error *error)
{
    char *plain;
    if (mode == PF_STORE_MEMORY) return connect_file(store, ":memory:", mode, error);
    if (plain_path(store->path, &plain) != PF_OK) return pf_store_no_memory(store, error);
    pf_status status = connect_file(store, plain, mode, error);
    store->warning = pf_network_warning_of(plain);
    pf_free(plain);
    return status;
}

/* Whether the mode may go on with what lies at the path. */
static pf_status look(const char *path, pf_store_mode mode, pf_error *error)
{
    pf_error wrong = {0};
    if (!*path) return pf_error_set(error, PF_BAD_ARGUMENT, "the database has no name");
    if (mode == PF_STORE_MEMORY) return PF_OK;
    pf_status status = pf_layout_recognise(path, &wrong);
    if (status == PF_OK || (mode == PF_STORE_CREATE && status == PF_NOT_FOUND)) return PF_OK;
    return pf_error_set(error, status, "%s", wrong.text);
}

pf_status pf_store_open(const char *path, pf_store_mode mode, pf_store **out, pf_error *error)
{
    bool write = mode != PF_STORE_READ;
    bool create = mode == PF_STORE_CREATE || mode == PF_STORE_MEMORY;
    pf_store *store;
    *out = NULL;
    pf_status status = look(path, mode, error);
    if (status != PF_OK) return status;
    status = allocate(path, &store, error);
    if (store) store->wait_ms = PF_STORE_WAIT_S * 1000;
    if (status == PF_OK) status = connect(store, mode, error);
    if (status == PF_OK) status = configure(store, write, error);
    if (status == PF_OK) status = pf_layout_settle(store, write, create, error);
    if (status == PF_OK)
        *out = store;
    else
        pf_store_close(store);
    return status;
}

void pf_store_close(pf_store *store)
{
    if (!store) return;
    for (int i = 0; i < PF_SQL_COUNT; i++)
        sqlite3_finalize(store->statement[i]);
    sqlite3_close(store->db);
    pf_page_check_free(store->vfs);
    pf_stored_part_clear(&store->current);
    pf_buffer_clear(&store->packed);
    pf_buffer_clear(&store->json);
    pf_buffer_clear(&store->scratch);
    pf_free(store->import.written);
    pf_free(store->path);
    pf_free(store);
}

const char *pf_store_warning(const pf_store *store)
{
    return store->warning;
}

void pf_store_wait(pf_store *store, int milliseconds)
{
    store->wait_ms = milliseconds;
}

void pf_store_limit_pages(pf_store *store, int pages)
{
    char sql[64];
    sqlite3_snprintf(sizeof sql, sql, "PRAGMA max_page_count=%d", pages);
    sqlite3_exec(store->db, sql, NULL, NULL, NULL);
}
