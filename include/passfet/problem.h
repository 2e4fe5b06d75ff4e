/* problem.h: everything that is wrong with an input, gathered in one run.
**
** pf_error holds one cause; a file may have a hundred. Readers add each of theirs here and go on.
*/
#ifndef PASSFET_PROBLEM_H
#define PASSFET_PROBLEM_H

#include <passfet/error.h>
#include <stddef.h>

typedef enum pf_severity {
    PF_SEVERITY_NOTE,    /* something was done that the user may want to know */
    PF_SEVERITY_WARNING, /* accepted, but look at it */
    PF_SEVERITY_REFUSAL  /* not accepted: nothing of the run is stored */
} pf_severity;

typedef struct pf_problem {
    pf_severity severity;
    char *file;   /* as the user named it; "-" for standard input */
    size_t line;  /* 1-based physical line; 0 where none applies */
    char *column; /* column header or parameter name; NULL where none applies */
    char *text;   /* the offending text as it stands in the file; NULL where none applies */
    char *wrong;  /* what is wrong */
    char *right;  /* what would be right; NULL where nothing is to be done */
} pf_problem;

typedef struct pf_problems {
    pf_problem *item;
    size_t count, capacity;
    size_t notes, warnings, refusals;
} pf_problems;

/* Where a problem lies. Any pointer may be NULL; texts are copied (long ones cut). */
typedef struct pf_place {
    const char *file;
    size_t line;
    const char *column;
    const char *text;
} pf_place;

void pf_problems_init(pf_problems *problems);
void pf_problems_clear(pf_problems *problems);

/* Adds one problem; wrong is a printf format. PF_NO_MEMORY is the only failure, but for
** PF_SEVERITY_REFUSAL the return is PF_BAD_INPUT once it is stored, so that a reader can return it.
 */
pf_status pf_problems_add(pf_problems *problems, pf_severity severity, pf_place place,
                          const char *right, const char *wrong, ...) PF_PRINTF(5, 6);

/* One problem as `file:line: column: text: wrong: right` without a newline; parts that do not apply
** are left out. Writes at most room bytes, NUL included; returns the whole length as snprintf does.
 */
int pf_problem_print(const pf_problem *problem, char *text, size_t room);

#endif
