/* change.h: what the files of one import state about one part.
**
** A parts table states the columns that it has, a curve file states one curve; the rest of the part
** stays as it was. A column that is there with a blank cell states "not stated".
*/
#ifndef PASSFET_CHANGE_H
#define PASSFET_CHANGE_H

#include <passfet/part.h>
#include <stdint.h>

typedef struct pf_part_change {
    pf_part part;         /* the values; name always, maker where the file names one */
    uint64_t texts_given; /* bit i: text field i of pf_text_fields is stated */
    uint64_t ratings_given;
    bool polarity_given, rdson_given, soa_given;
    bool thermal_given[PF_PATH_COUNT];
    bool makerless; /* some file of the run names it without its maker */
    bool refused; /* a row of it was refused and the good rows of the run are kept: not to be stored
                   */
    char *raw_curves; /* curves as they stood in the file where they were repaired, else NULL */
    char *file;       /* where the part stands first, for messages */
    size_t line;
} pf_part_change;

typedef struct pf_changes {
    pf_part_change *item;
    size_t count, capacity;
} pf_changes;

void pf_part_change_init(pf_part_change *change);
void pf_part_change_clear(pf_part_change *change);
void pf_changes_clear(pf_changes *changes);

/* Makes *part (initialised; empty for a new part) say what the change states, and leaves the rest.
** On PF_NO_MEMORY the part may be changed in part. */
pf_status pf_part_apply(pf_part *part, const pf_part_change *change) PF_MUST_USE;

#endif
