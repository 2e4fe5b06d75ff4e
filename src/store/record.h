/* record.h: rows of part and past to parts and back. */
#ifndef STORE_RECORD_H
#define STORE_RECORD_H

#include "store/database.h"

/* The columns that make a state, in the order in which they are bound: number, entry, withdrawn,
** content, polarity, rdson, soa_top_V, curves, the texts, the ratings. NULL behind the last. */
const char *pf_state_column(size_t index);

/* State column `index` is bound as parameter `index + PF_STATE_PARAMETER`; parameter 1 is the id.
 */
#define PF_STATE_PARAMETER 2

/* Binds what a part states, and the row's own facts. curves 0: none. The texts must stay until the
** statement is reset. rdson: the JSON of the part. */
typedef struct pf_state_facts {
    int64_t number, entry, curves;
    bool withdrawn;
    const unsigned char *content; /* PF_DIGEST_BYTES */
    const char *rdson;
} pf_state_facts;

pf_status pf_state_bind(pf_store *store, sqlite3_stmt *statement, const pf_part *part,
                        const pf_state_facts *facts, pf_error *error) PF_MUST_USE;

/* Appends "SELECT … FROM table p …" without WHERE: what pf_record_read expects. id: the column of
** the table that names the part. reviews: condition on reviews r, or "1"; NULL where there are none
** to look for. */
void pf_record_select(const pf_store *store, const char *table, const char *id, const char *reviews,
                      pf_buffer *sql);

/* What a row says beside the part and its facts; borrowed until the statement moves. */
typedef struct pf_record_extra {
    bool withdrawn;
    const void *content; /* PF_DIGEST_BYTES */
    int64_t curves;
    const void *packed;
    size_t packed_bytes;
} pf_record_extra;

/* The current row into *stored. extra may be NULL. PF_DATABASE where it says what cannot be. */
pf_status pf_record_read(pf_store *store, sqlite3_stmt *statement, pf_stored_part *stored,
                         pf_record_extra *extra, pf_error *error) PF_MUST_USE;

#endif
