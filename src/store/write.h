/* write.h: storing states of parts within an open entry. */
#ifndef STORE_WRITE_H
#define STORE_WRITE_H

#include "store/log.h"

/* Where a state goes. */
typedef struct pf_target {
    int64_t part_id; /* 0: a new part */
    int64_t number;  /* of the revision that is there now; 0 for a new part */
    int64_t entry;   /* that made it */
    int64_t curves;  /* its curves, 0: none */
    bool withdrawn;
} pf_target;

/* Begins a transaction as the only writer. After any failure from here on: pf_store_import_rollback;
** at the end: pf_store_import_commit. */
pf_status pf_write_begin(pf_store *store, pf_error *error) PF_MUST_USE;

/* Adds the entry that the states to come belong to. */
pf_status pf_write_entry(pf_store *store, const pf_log_facts *facts, pf_error *error) PF_MUST_USE;

/* Both, with pf_store_import_begin's answer to a repeat; after a failure nothing is open. */
pf_status pf_import_begin_as(pf_store *store, const char *kind, const pf_import_facts *facts,
                             int64_t *already, pf_error *error) PF_MUST_USE;

/* Whether an entry holds: it was not undone, or its undo was itself undone, and so on. */
pf_status pf_entry_holds(pf_store *store, int64_t entry, bool *holding,
                         pf_error *error) PF_MUST_USE;

/* Stores a state as the next revision of the target, or within the revision that this entry already
** made. curves: the row of its curves where they are stored already (0: it has none), or
** PF_CURVES_NEW. After a failure only a rollback is left. */
#define PF_CURVES_NEW (-1)
pf_status pf_write_state(pf_store *store, const pf_target *target, const pf_part *part,
                         bool withdrawn, int64_t curves, pf_error *error) PF_MUST_USE;

/* Reads the part with this id as it is now into store->current. */
pf_status pf_write_load(pf_store *store, int64_t part_id, pf_target *target,
                        pf_error *error) PF_MUST_USE;

#endif
