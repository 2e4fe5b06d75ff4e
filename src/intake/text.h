/* text.h: pieces of text as readers meet them: borrowed slices, folded names, near misses. */
#ifndef INTAKE_TEXT_H
#define INTAKE_TEXT_H

#include <stdbool.h>
#include <stddef.h>

/* A piece of somebody else's text. */
typedef struct pf_slice {
    const char *text;
    size_t length;
} pf_slice;

static inline pf_slice pf_slice_from(const char *text, size_t length)
{
    return (pf_slice){text, length};
}

/* Without blanks at both ends; non-breaking and thin spaces are blanks too. */
pf_slice pf_trim(pf_slice slice);

/* The first character is one of ASCII's blanks or a non-breaking or thin space: its bytes, else 0.
 */
size_t pf_blank_length(const char *text, size_t length);

/* Without the `'` that keeps a spreadsheet from running a text as a formula, as our own CSV has it in
** front of = + - @ and of a `'` before one of these. */
pf_slice pf_undefused(pf_slice text);

/* Letters (ASCII) in either case. */
bool pf_same_word(const char *left, const char *right);
bool pf_slice_is(pf_slice slice, const char *word);
bool pf_starts(pf_slice slice, const char *start);

/* Blank, `-`, a dash, `n/a`, `TBD`: not stated. */
bool pf_not_stated(pf_slice slice);

/* The name without blanks, `_`, `-`, `(`, `)`, `.`, `,`, in small letters, cut to room - 1 bytes.
** Returns its length. */
#define PF_FOLDED_ROOM 128
size_t pf_fold(pf_slice name, char folded[PF_FOLDED_ROOM]);

/* Whether a folded name is one of a list with `|` between, each folded before it is compared. */
bool pf_folded_in(const char *folded, const char *names);

/* Number of letters to change, add, drop or swap with a neighbour to get from one to the other;
** anything above most counts as most + 1. */
size_t pf_distance(const char *left, const char *right, size_t most);

/* Whether two folded names are so near that one may be a misspelt other. */
bool pf_near(const char *left, const char *right);

#endif
