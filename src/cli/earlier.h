/* earlier.h: what the database stated before an import, against what the import states. */
#ifndef CLI_EARLIER_H
#define CLI_EARLIER_H

#include "cli/importing.h"

/* Warns where blank cells take curves away that the part had: a parts table that has a column for curves
** speaks for those that came from other files too. merged: the part with the change applied; called before
** it is stored. A look-up for parts that state no curve in a column for it, nothing for others. */
pf_status pf_earlier_warn(pf_import_run *run, pf_store *store, const pf_part_change *change,
                          const pf_part *merged);

/* Of an import that was made before: how many of its parts state something else by now. */
pf_status pf_earlier_moved(const pf_import_run *run, pf_store *store, size_t *moved);

#endif
