/* flip.h: where a verdict flips as one number moves: widening, then closing in.
**
** The answer of a probe is a state, true or false, with a measure that goes through zero where the
** state flips, or NaN where it jumps. Closing in is the ITP method (Oliveira and Takahashi 2020):
** never slower than bisection by more than a probe, and superlinear where the measure is smooth.
*/
#ifndef RANK_FLIP_H
#define RANK_FLIP_H

#include <passfet/error.h>
#include <stdbool.h>

typedef enum pf_scale { PF_SCALE_LOG, PF_SCALE_LINEAR, PF_SCALE_WHOLE } pf_scale;

typedef struct pf_answer {
    bool state;
    bool valid;     /* false: the number makes no sense there; the search ends before it */
    double measure; /* of opposite sign on the two sides of a flip, 0 at it; NaN where not known */
} pf_answer;

typedef pf_status pf_probe(void *context, double at, pf_answer *answer);

typedef struct pf_search {
    pf_scale scale;
    double from, end; /* end: where the range ends in the direction of the search */
    double tolerance; /* of ln (number), or of the number itself on a linear scale */
    pf_probe *probe;
    void *context;
} pf_search;

typedef struct pf_flip {
    bool found;     /* whether the state flips between from and end */
    bool invalid;   /* whether the search was ended by a number that makes no sense */
    bool state;     /* at from */
    double same;    /* last number found in the state at from */
    double flipped; /* first one found behind the flip, or that makes no sense */
} pf_flip;

/* Some 15 probes where the state never flips, as many again to close in on a smooth flip. The status
** of a probe that failed is returned. */
pf_status pf_flip_find(const pf_search *search, pf_flip *flip) PF_MUST_USE;

#endif
