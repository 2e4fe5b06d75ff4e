/* value.h: the text of one cell as a number in SI.
**
** Data sheets and spreadsheets write numbers in many ways; each is either read as what it can only
** mean, or refused with what would be right. Nothing is guessed.
*/
#ifndef INTAKE_VALUE_H
#define INTAKE_VALUE_H

#include "intake/text.h"

#include <passfet/error.h>
#include <passfet/units.h>
#include <stdbool.h>

/* Which of `<`, `<=`, `max` (upper) or `>`, `>=`, `min` (lower) may stand before a number. */
typedef enum pf_bound { PF_BOUND_NONE, PF_BOUND_UPPER, PF_BOUND_LOWER } pf_bound;

/* How the numbers of one column are to be read. */
typedef struct pf_value_rule {
    pf_quantity quantity;
    double factor;          /* to SI, of the unit in the header; 0: none is stated there */
    double lowest, highest; /* closed range in SI, of the magnitude where signless */
    bool signless;          /* a sign is dropped (see pf_value.negative) */
    bool plus_minus;        /* `±20` and `-20 to 20` stand for 20 */
    bool range_upper;       /* `-55 to 175` stands for 175 */
    pf_bound bound;
} pf_value_rule;

/* What the file as a whole says about decimal marks. */
typedef struct pf_number_style {
    char decimal;   /* '.' or ',' as told; 0: from the delimiter */
    char delimiter; /* of the file */
    char seen;      /* decimal mark of a number that has both marks, 0 before */
} pf_number_style;

typedef struct pf_value {
    double value;  /* in SI; NaN: not stated */
    bool negative; /* a sign was dropped */
} pf_value;

/* What is wrong with a text and what would be right; right "" where nothing helps. */
typedef struct pf_fault {
    char wrong[200];
    char right[200];
} pf_fault;

pf_status pf_fault_set(pf_fault *fault, const char *right, const char *wrong, ...) PF_PRINTF(3, 4);

/* PF_OK, or PF_BAD_INPUT with *fault. */
pf_status pf_value_read(pf_slice text, const pf_value_rule *rule, pf_number_style *style,
                        pf_value *value, pf_fault *fault) PF_MUST_USE;

/* Reads the number that text begins with, decimal mark and thousands as style says; *taken gets its
** bytes, 0 where no number stands there. PF_BAD_INPUT for one that could be two things. */
pf_status pf_decimal_read(pf_slice text, pf_number_style *style, double *value, size_t *taken,
                          pf_fault *fault) PF_MUST_USE;

/* number * factor, a factor below 1 taken as a division by its whole inverse: 4.7 mOhm is the very
** double that 0.0047 Ohm is. */
double pf_scale(double number, double factor);

/* Reads a unit of a quantity, with brackets or without; the blanks inside a unit do not count. */
pf_status pf_column_unit_read(pf_slice text, pf_quantity quantity, double *factor) PF_MUST_USE;

#endif
