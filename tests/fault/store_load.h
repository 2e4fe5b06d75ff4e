/* store_load.h: imports that can be recognised afterwards, for tests with several processes. */
#ifndef TEST_STORE_LOAD_H
#define TEST_STORE_LOAD_H

#include <passfet/store.h>

#define LOAD_PARTS 3 /* parts of one import */

/* How often to do something: `quick` by default, `full` where PF_FAULT_FULL is set. */
unsigned load_count(unsigned quick, unsigned full);

/* Opens path in a mode; NULL, with the message on standard error, where that fails. */
pf_store *load_open(const char *path, pf_store_mode mode);

/* Imports LOAD_PARTS parts "TAG-0" … whose numbers all follow from tag. key may be NULL.
** *number is that of the import, or of the earlier one where *repeated is set. */
pf_status load_import(pf_store *store, unsigned tag, const char *key, int64_t *number,
                      bool *repeated, pf_error *error);

/* Reads every part and checks it against its tag; *parts counts them, imports[tag] (room for tags)
** the parts of each tag. imports may be NULL. PF_BAD_INPUT where something is not as it was
** imported. */
pf_status load_check(pf_store *store, unsigned *imports, unsigned tags, unsigned *parts,
                     pf_error *error);

/* Whether pf_store_verify finds nothing; findings on standard error. */
bool load_sound(pf_store *store);

#endif
