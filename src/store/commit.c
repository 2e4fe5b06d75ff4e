/* commit.c: ending a transaction, and finding out what became of it. */
#include "base/memory.h"
#include "store/log.h"

#include <string.h>

/* Whether the log ends as `expected` says, now that the transaction is over. */
static bool is_stored(pf_store *store, const pf_log_head *expected)
{
    pf_log_head head;
    return pf_log_head_read(store, NULL, &head, NULL) == PF_OK && head.id == expected->id &&
           memcmp(head.hash, expected->hash, sizeof head.hash) == 0;
}

/* A commit can fail at its very last step, when the disk does not confirm that the journal is gone:
** then everything is stored already, and saying the contrary would be wrong. */
static pf_status commit(pf_store *store, pf_error *error)
{
    pf_log_head sealed;
    pf_error why = {0};
    pf_status status = pf_log_head_read(store, NULL, &sealed, error);
    if (status != PF_OK) return status;
    status = pf_store_run(store, "COMMIT", &why);
    if (status == PF_OK) {
        store->import.open = false;
        return PF_OK;
    }
    pf_store_import_rollback(store);
    if (status != PF_BUSY && is_stored(store, &sealed))
        return pf_error_set(error, status,
                            "entry %lld is stored, but the disk did not confirm it and may lose it "
                            "when power fails now (%s)",
                            (long long)sealed.id, why.text);
    return pf_error_set(error, status, "%s", why.text);
}

pf_status pf_store_import_commit(pf_store *store, int64_t *number, pf_error *error)
{
    pf_import *import = &store->import;
    if (!import->open || import->broken) {
        pf_store_import_rollback(store);
        return pf_error_set(error, PF_BAD_ARGUMENT, "%s: no import is open", store->path);
    }
    pf_status status = pf_log_seal(store, import->entry, import->written, import->count, error);
    if (status == PF_OK) status = commit(store, error);
    *number = import->entry;
    pf_store_import_rollback(store);
    return status;
}

void pf_store_import_rollback(pf_store *store)
{
    pf_import *import = &store->import;
    if (import->open) {
        for (int i = 0; i < PF_SQL_COUNT; i++)
            sqlite3_reset(store->statement[i]);
        sqlite3_exec(store->db, "ROLLBACK", NULL, NULL, NULL);
    }
    pf_free(import->why);
    import->why = NULL;
    import->open = false;
}
