/* comparison.h: inside pf_compare. */
#ifndef RANK_COMPARISON_H
#define RANK_COMPARISON_H

#include <passfet/comparison.h>

/* Both parts under one plan. */
typedef struct pf_pair {
    const pf_plan *plan;
    const pf_part *reference, *candidate;
    pf_scratch *scratch;
    pf_exchange *result; /* its assessments are made */
} pf_pair;

/* The differences of every stage, in order. PF_NO_MEMORY. */
pf_status pf_differences_list(const pf_pair *pair) PF_MUST_USE;

/* The next difference of a stage, its numbers not stated; the last one again where there is no room. */
pf_difference *pf_difference_add(const pf_pair *pair, pf_stage stage, const char *format, ...)
    PF_PRINTF(3, 4);

/* Hot SOA and Zth at the events, and the SOA over the voltage at the design times. PF_NO_MEMORY. */
pf_status pf_differences_hot(const pf_pair *pair) PF_MUST_USE;

#endif
