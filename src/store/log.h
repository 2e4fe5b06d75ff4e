/* log.h: the log of acts on the database, and the chain of hashes over it.
**
** The hash of an entry covers the hash of the one before, what the entry says, its files, its
** review and every state that it wrote; so nothing earlier can be changed without every later hash.
*/
#ifndef STORE_LOG_H
#define STORE_LOG_H

#include "store/database.h"

typedef struct pf_log_facts {
    const char *kind; /* "import", "undo", "merge", "review" */
    const char *author, *time, *why, *key;
    int64_t undoes; /* 0: none */
    const pf_source_file *file;
    size_t file_count;
} pf_log_facts;

/* The last entry, or the last one of a time (`at` not NULL: a UTC time). */
typedef struct pf_log_head {
    int64_t id;
    char time[24];
    unsigned char hash[PF_DIGEST_BYTES];
} pf_log_head;

/* id 0 and a hash of zeros where there is none. */
pf_status pf_log_head_read(pf_store *store, const char *at, pf_log_head *head,
                           pf_error *error) PF_MUST_USE;

/* Writes "2025-03-01" as the end of that day, a UTC time as it is; PF_BAD_ARGUMENT for others. */
pf_status pf_log_time(const char *text, char time[24], pf_error *error) PF_MUST_USE;

/* Adds an entry within the open transaction; its time is not before that of the last one. */
pf_status pf_log_add(pf_store *store, const pf_log_facts *facts, int64_t *id,
                     pf_error *error) PF_MUST_USE;

/* What an entry's hash must be, given the one before and the states that it wrote, sorted by part
** and number. */
pf_status pf_log_digest(pf_store *store, int64_t id, const unsigned char before[PF_DIGEST_BYTES],
                        const pf_written *written, size_t count,
                        unsigned char hash[PF_DIGEST_BYTES], pf_error *error) PF_MUST_USE;

/* Sets the hash of the last entry, `id`. Sorts written. */
pf_status pf_log_seal(pf_store *store, int64_t id, pf_written *written, size_t count,
                      pf_error *error) PF_MUST_USE;

#endif
