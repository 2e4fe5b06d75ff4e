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

static pf_status copy_pages(pf_store *store, sqlite3 *to, pf_error *error)
{
    sqlite3_backup *backup = sqlite3_backup_init(to, "main", store->db, "main");
    if (!backup) return pf_error_set(error, PF_DATABASE, "backup: %s", sqlite3_errmsg(to));
    int code, waited_ms = 0;
    do {
        code = sqlite3_backup_step(backup, PAGES_AT_A_TIME);
        bool busy = code == SQLITE_BUSY || code == SQLITE_LOCKED;
        if (busy && waited_ms >= store->wait_ms) break;
        if (busy) waited_ms += sqlite3_sleep(50);
    } while (code == SQLITE_OK || code == SQLITE_BUSY || code == SQLITE_LOCKED);
    int finish = sqlite3_backup_finish(backup);
    if (code == SQLITE_DONE) return PF_OK;
    if (code == SQLITE_FULL)
        return pf_error_set(error, PF_DATABASE, "backup: the disk is full; no copy was made");
    if (code == SQLITE_BUSY || code == SQLITE_LOCKED) return pf_store_fail(store, code, error);
    return pf_error_set(error, PF_DATABASE, "backup: %s (%s)", sqlite3_errstr(code),
                        sqlite3_errstr(finish));
}

/* Copies into a file that must not be there yet. */
static pf_status write_copy(pf_store *store, const char *path, pf_error *error)
{
    sqlite3 *to = NULL;
    int reserve = PF_CHECK_BYTES;
    int flags = SQLITE_OPEN_READWRITE | SQLITE_OPEN_CREATE | SQLITE_OPEN_NOMUTEX;
    int code = sqlite3_open_v2(path, &to, flags, store->vfs->zName);
    pf_status status = code == SQLITE_OK
                           ? PF_OK
                           : pf_error_set(error, PF_FILE, "%s cannot be written (%s)", path,
                                          to ? sqlite3_errmsg(to) : sqlite3_errstr(code));
    if (status == PF_OK) {
        sqlite3_file_control(to, "main", SQLITE_FCNTL_RESERVE_BYTES, &reserve);
        sqlite3_exec(to, "PRAGMA page_size=8192; PRAGMA synchronous=EXTRA", NULL, NULL, NULL);
        status = copy_pages(store, to, error);
    }
    if (sqlite3_close(to) != SQLITE_OK && status == PF_OK)
        status = pf_error_set(error, PF_DATABASE, "%s could not be closed", path);
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
