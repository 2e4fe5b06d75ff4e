/* market.h: every part of a database evaluated, on several threads.
**
** Each thread reads a slice of the database over a connection of its own and ranks it; the slices are
** then put together and sorted, so that the result does not depend on how many there were. A read
** transaction held meanwhile keeps writers away: all threads see one state.
*/
#ifndef CLI_MARKET_H
#define CLI_MARKET_H

#include "cli/selection.h"

typedef struct pf_market {
    const char *database;
    const pf_selection *selection; /* slices are set by the threads */
    const pf_sort_key *key;
    size_t key_count;
    size_t top;       /* rows to keep; 0: all */
    unsigned remarks; /* added to every part's */
    size_t threads;   /* >= 1 */
    bool all_corners; /* leave none out, also where it pays */
    FILE *progress;   /* a line after a second and then again; NULL: none */
} pf_market;

/* Evaluates under the plans of the ranking, sorts and cuts. plan: the same plans, to be pruned where
** there are many parts. revision is filled with the name of the state that was read. */
pf_status pf_market_rank(const pf_market *market, pf_store *store, pf_plan *const *plan,
                         pf_ranking *ranking, char revision[PF_REVISION_NAME_ROOM],
                         pf_error *error) PF_MUST_USE;

/* The processors of this machine. */
size_t pf_processors(void);

#endif
