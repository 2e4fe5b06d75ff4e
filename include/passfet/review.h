/* review.h: what a design review asks, as text and JSON. Writes, computes nothing.
**
** Streams as in report.h: a full disk or a closed pipe shows in ferror.
*/
#ifndef PASSFET_REVIEW_H
#define PASSFET_REVIEW_H

#include <passfet/comparison.h>
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

/* --- headroom --- */

/* Rooms as pf_headroom fills them. */
void pf_report_headroom_text(FILE *out, const pf_plan *plan, const pf_part *part,
                             const pf_room *room, size_t count, const pf_report_source *source);
void pf_report_headroom_json(FILE *out, const pf_plan *plan, const pf_part *part,
                             const pf_room *room, size_t count, const pf_report_source *source);

/* One row of headroom --solve over several parts; the parts' texts are borrowed. */
typedef struct pf_solution {
    char *part, *maker, *package;
    pf_verdict verdict; /* under the profile as it is */
    pf_room room;
} pf_solution;

void pf_report_solve_text(FILE *out, const pf_plan *plan, pf_parameter parameter,
                          const pf_solution *solution, size_t count,
                          const pf_report_source *source);
void pf_report_solve_json(FILE *out, const pf_plan *plan, pf_parameter parameter,
                          const pf_solution *solution, size_t count,
                          const pf_report_source *source);

/* --- compare --- */

/* One candidate held against the reference. Borrowed pointers. */
typedef struct pf_exchange_subject {
    const pf_plan *plan;
    const pf_part *reference, *candidate;
    const pf_exchange *exchange;
} pf_exchange_subject;

/* All lines of every candidate, or where brief is true its verdict, conditions and what decides. */
void pf_report_exchange_text(FILE *out, const pf_exchange_subject *subject, size_t count,
                             bool brief, const pf_report_source *source);
void pf_report_exchange_json(FILE *out, const pf_exchange_subject *subject, size_t count,
                             bool brief, const pf_report_source *source);

#endif
