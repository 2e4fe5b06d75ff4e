/* review.h: what a design review asks, as text and JSON. Writes, computes nothing.
**
** Streams as in report.h: a full disk or a closed pipe shows in ferror.
*/
#ifndef PASSFET_REVIEW_H
#define PASSFET_REVIEW_H

#include <passfet/explain.h>
#include <passfet/report.h>
#include <passfet/sensitivity.h>

/* Everything that a sheet shows. Borrowed pointers. */
typedef struct pf_sheet_subject {
    const pf_plan *plan;
    const pf_part *part;
    const pf_explanation *explanation;
    const pf_influence *influence;
    size_t influence_count;
    const pf_report_source *source;
} pf_sheet_subject;

/* The calculation of one part. A line of it reads
**
**     label = formula with numbers = value unit
**
** where the formula is arithmetic with + - * / ^ ( ) and the functions ln, sqrt, exp, min and max on
** numbers in SI units and degC; a line that would be too long is broken before its equal signs. Numbers
** in formulas carry 9 digits, values 6: each line can be worked again from what it prints. */
void pf_report_sheet_text(FILE *out, const pf_sheet_subject *subject);

/* The same lines as JSON, with events, checks, window and sensitivity as objects. */
void pf_report_sheet_json(FILE *out, const pf_sheet_subject *subject);

#endif
