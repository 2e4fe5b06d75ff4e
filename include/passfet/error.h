/* error.h: how passfet says what went wrong.
**
** Every function that can fail returns a pf_status. Where more than the status is to be said, the
** caller hands in a pf_error of its own: there is no hidden last error. The first cause wins; later
** calls with the same pf_error leave its text alone until pf_error_clear.
*/
#ifndef PASSFET_ERROR_H
#define PASSFET_ERROR_H

#include <stddef.h>

#if defined(__GNUC__)
#define PF_PRINTF(text_at, first) __attribute__((format(printf, text_at, first)))
#define PF_MUST_USE __attribute__((warn_unused_result))
#else
#define PF_PRINTF(text_at, first)
#define PF_MUST_USE
#endif

/* The one list of statuses: code, text. Codes, texts and the manual's table come from it. */
#define PF_STATUS_LIST(X)                                                                          \
    X(PF_OK, "done")                                                                               \
    X(PF_BAD_ARGUMENT, "bad argument")                                                             \
    X(PF_OUTSIDE_DATA, "outside the data")                                                         \
    X(PF_NOT_STATED, "not stated")                                                                 \
    X(PF_NOT_CONVERGED, "did not converge")                                                        \
    X(PF_BAD_INPUT, "bad input data")                                                              \
    X(PF_LIMIT, "over a stated limit")                                                             \
    X(PF_NO_MEMORY, "out of memory")                                                               \
    X(PF_FILE, "the file system refused")                                                          \
    X(PF_DATABASE, "the database refused")                                                         \
    X(PF_BUSY, "the database stayed busy")                                                         \
    X(PF_NOT_FOUND, "not found")

typedef enum pf_status {
#define PF_STATUS_CODE(code, text) code,
    PF_STATUS_LIST(PF_STATUS_CODE)
#undef PF_STATUS_CODE
        PF_STATUS_COUNT
} pf_status;

typedef struct pf_error {
    pf_status status;
    char text[512];
} pf_error;

/* The text of a status, never NULL; "unknown status" for a number that is none. */
const char *pf_status_text(pf_status status);

/* Makes *error say "nothing wrong". error may be NULL. */
void pf_error_clear(pf_error *error);

/* Stores status and the formatted text unless *error already holds a cause; a text that is too long
** is cut. Returns status, so that `return pf_error_set(error, …)` reads well. error may be NULL. */
pf_status pf_error_set(pf_error *error, pf_status status, const char *format, ...) PF_PRINTF(3, 4);

#endif
