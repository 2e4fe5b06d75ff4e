/* backup.c: a consistent copy, made while others work.
**
** The copy is written under a name of its own beside the wanted one, verified there, and only then
** takes the wanted name: a backup that is there is a good one.
*/
#include "base/memory.h"
#include "store/database.h"
#include "store/page_check.h"

#include <errno.h>
#include <stdio.h>
#include <string.h>
#include <unistd.h>

#define PAGES_AT_A_TIME 1024

/* What stopped the copy. */
static pf_status fail_copy(pf_store *store, const char *path, int code, pf_error *error)
{
    switch (code & 0xFF) {
    case SQLITE_NOMEM:
        return pf_store_no_memory(store, error);
    case SQLITE_BUSY:
    case SQLITE_LOCKED:
        return pf_store_fail(store, SQLITE_BUSY, error);
    case SQLITE_FULL:
        return pf_error_set(error, PF_DATABASE, "%s: the disk is full; no copy was made", path);
    case SQLITE_CANTOPEN:
        return pf_error_set(error, PF_FILE, "%s cannot be written", path);
    default:
        if (code == SQLITE_IOERR_NOMEM) return pf_store_no_memory(store, error);
        return pf_error_set(error, PF_DATABASE, "%s: no copy was made (%s)", path,
                            sqlite3_errstr(code));
    }
}

static pf_status copy_pages(pf_store *store, sqlite3 *to, const char *path, pf_error *error)
{
    sqlite3_backup *backup = sqlite3_backup_init(to, "main", store->db, "main");
    if (!backup) return fail_copy(store, path, sqlite3_extended_errcode(to), error);
    int code, waited_ms = 0;
    do {
        code = sqlite3_backup_step(backup, PAGES_AT_A_TIME);
        bool busy = code == SQLITE_BUSY || code == SQLITE_LOCKED;
        if (busy && waited_ms >= store->wait_ms) break;
        if (busy) waited_ms += sqlite3_sleep(50);
    } while (code == SQLITE_OK || code == SQLITE_BUSY || code == SQLITE_LOCKED);
    sqlite3_backup_finish(backup);
    return code == SQLITE_DONE ? PF_OK : fail_copy(store, path, code, error);
}

/* Copies into a file that must not be there yet. */
static pf_status write_copy(pf_store *store, const char *path, pf_error *error)
{
    sqlite3 *to = NULL;
    int reserve = PF_CHECK_BYTES;
    int flags = SQLITE_OPEN_READWRITE | SQLITE_OPEN_CREATE | SQLITE_OPEN_NOMUTEX;
    pf_status status = PF_OK;
    int code = sqlite3_open_v2(path, &to, flags, store->vfs->zName);
    if (code == SQLITE_OK) {
        sqlite3_file_control(to, "main", SQLITE_FCNTL_RESERVE_BYTES, &reserve);
        code =
            sqlite3_exec(to, "PRAGMA page_size=8192; PRAGMA synchronous=EXTRA", NULL, NULL, NULL);
    }
    if (code == SQLITE_OK)
        status = copy_pages(store, to, path, error);
    else
        status = fail_copy(store, path, code, error);
    sqlite3_close(to);
    return status;
}

static void first_finding(void *context, const char *sentence)
{
    char *text = context;
    if (!*text) snprintf(text, 256, "%s", sentence);
}

/* The copy must be sound. It is a state of the original, whatever was imported meanwhile. */
static pf_status verify_copy(const char *path, pf_error *error)
{
    pf_store *copy;
    size_t findings = 0;
    char finding[256] = "";
    pf_status status = pf_store_open(path, PF_STORE_READ, &copy, error);
    if (status == PF_OK) status = pf_store_verify(copy, first_finding, finding, &findings, error);
    pf_store_close(copy);
    if (status == PF_OK && findings)
        status = pf_error_set(error, PF_DATABASE, "backup: the copy is not sound: %s", finding);
    return status;
}

static pf_status take_name(const char *from, const char *path, pf_error *error)
{
    if (link(from, path) == 0) return PF_OK;
    if (errno == EEXIST)
        return pf_error_set(error, PF_FILE, "%s exists already: choose a new name", path);
    if (access(path, F_OK) != 0 && rename(from, path) == 0) return PF_OK;
    return pf_error_set(error, PF_FILE, "%s: %s", path, strerror(errno));
}

pf_status pf_store_backup(pf_store *store, const char *path, pf_error *error)
{
    if (access(path, F_OK) == 0)
        return pf_error_set(error, PF_FILE, "%s exists already: choose a new name", path);
    size_t room = strlen(path) + 40;
    char *copy = pf_allocate(room, 1);
    if (!copy) return pf_store_no_memory(store, error);
    snprintf(copy, room, "%s%s.part-%ld", *path == '/' ? "" : "./", path, (long)getpid());
    pf_status status = write_copy(store, copy, error);
    if (status == PF_OK) status = verify_copy(copy, error);
    if (status == PF_OK) status = take_name(copy, path, error);
    unlink(copy);
    pf_free(copy);
    return status;
}
