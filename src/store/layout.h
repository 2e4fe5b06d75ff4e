/* layout.h: laying out a new database, and telling whether a file is one of ours. */
#ifndef STORE_LAYOUT_H
#define STORE_LAYOUT_H

#include "store/database.h"

/* Texts and ratings of fields.def that schema/001_layout.sql writes out itself. */
bool pf_column_is_fixed(const char *name);

/* Looks at the first bytes of the file, without SQLite, so that a file that is not ours is never
** opened for writing. PF_OK for ours and for an empty file; PF_NOT_FOUND where there is none. */
pf_status pf_layout_recognise(const char *path, pf_error *error) PF_MUST_USE;

/* Makes the open database of the layout that this program knows: lays out an empty one where create
** is set, adds ratings that an older one lacks where write is set, refuses a newer one. */
pf_status pf_layout_settle(pf_store *store, bool write, bool create, pf_error *error) PF_MUST_USE;

#endif
