/* query.h: reading one part. */
#ifndef STORE_QUERY_H
#define STORE_QUERY_H

#include "store/database.h"

/* The part with this id as it is, or was known at as_of; *there is false where there was none. */
pf_status pf_part_load(pf_store *store, int64_t part_id, const char *as_of, pf_stored_part *stored,
                       bool *there, pf_error *error) PF_MUST_USE;

#endif
