/* query.h: reading one part. */
#ifndef STORE_QUERY_H
#define STORE_QUERY_H

#include "store/record.h"

/* The part with this id as it is, or was known at as_of; *there is false where there was none. */
pf_status pf_part_load(pf_store *store, int64_t part_id, const char *as_of, pf_stored_part *stored,
                       bool *there, pf_error *error) PF_MUST_USE;

/* pf_cursor_next, with what the row says beside the part. */
pf_status pf_cursor_next_extra(pf_cursor *cursor, pf_stored_part *stored, pf_record_extra *extra,
                               bool *more, pf_error *error) PF_MUST_USE;

/* Id of the part called "name" or "maker/name", also of one that is withdrawn when no other has the
** name. Statuses of pf_store_part_find. */
pf_status pf_part_id_find(pf_store *store, const char *name, int64_t *id,
                          pf_error *error) PF_MUST_USE;

#endif
