/* column.h: what the columns of a ratings file mean.
**
** A header such as `RDS(on) max @ VGS=10V (mOhm)` is a name, a condition and a unit. Names come
** from fields.def for parts tables and from the lists here for curve files.
*/
#ifndef INTAKE_COLUMN_H
#define INTAKE_COLUMN_H

#include "intake/value.h"

#include <passfet/intake.h>
#include <passfet/part.h>

typedef enum pf_role {
    PF_ROLE_IGNORED,
    PF_ROLE_TEXT,   /* a text field */
    PF_ROLE_RATING, /* a rating */
    PF_ROLE_POLARITY,
    PF_ROLE_RDSON, /* condition: gate drive in V */
    PF_ROLE_SOA_CELL,
    PF_ROLE_SOA_CASE, /* case temperature of the SOA, parts table and SOA points */
    PF_ROLE_ZTH_CELL,
    PF_ROLE_ZTH_PATH,
    PF_ROLE_PULSE,
    PF_ROLE_VDS, /* condition: pulse width in s in a wide sheet, 0 where it is all curves' */
    PF_ROLE_ID,  /* condition: pulse width in s in a wide sheet, else 0 */
    PF_ROLE_TIME,
    PF_ROLE_ZTH,
    PF_ROLE_FOSTER_R,
    PF_ROLE_FOSTER_TAU
} pf_role;

/* One column that a kind of file can have. */
typedef struct pf_column_kind {
    pf_role role;
    const char *csv, *aliases;
    bool required;
    bool numeric;
    pf_value_rule rule;            /* without the header's unit */
    const pf_rating_field *rating; /* PF_ROLE_RATING */
    const pf_text_field *text;     /* PF_ROLE_TEXT */
} pf_column_kind;

#define PF_COLUMN_KINDS_MAX 48

/* The columns of a kind of file; all pointers are static. Returns how many. */
size_t pf_column_kinds(pf_file_kind kind, pf_column_kind list[PF_COLUMN_KINDS_MAX]);

/* One column of the file at hand. */
typedef struct pf_column {
    pf_column_kind kind;
    double condition; /* see pf_role */
    const char *name; /* the header as it stands; borrowed */
    bool unread;      /* its unit or condition was refused: its cells are passed over */
} pf_column;

/* What a header says. PF_OK (a column that no kind knows: PF_ROLE_IGNORED), or PF_BAD_INPUT with
** what is wrong with its unit or condition. *remark gets words about a condition that is not kept, else
 ** NULL. */
pf_status pf_column_read(pf_slice header, pf_file_kind kind, const pf_column_kind *list,
                         size_t count, pf_column *column, const char **remark, pf_fault *fault);

/* The column of the list whose name is nearest to a misspelt header; NULL when none is near. */
const pf_column_kind *pf_column_near(pf_slice header, const pf_column_kind *list, size_t count);

#endif
