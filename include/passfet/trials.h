/* trials.h: tolerance analysis beside the worst case.
**
** Every trial draws one value for each interval of the profile and works the part out with it: the
** running card, shorts, trip, retry, turn-off and recordings exactly; start-up from its rises at all
** corners, by multilinear interpolation of ln rise over the values, raised by the largest shortfall
** that exact evaluations at PF_TRIALS_EXACT drawn points show; the supply step always at its worst
** corner, from the start temperature of the draw. Requirements
** (required_margin, junction_limit, the uses, clamp, counts) are not drawn. The worst case stays the
** verdict; trials only say how far away it is.
**
** Draws: PCG32 (XSH-RR 64/32; M. E. O'Neill, "PCG: a family of simple fast space-efficient
** statistically good algorithms for random number generation", 2014), two words a number, one number
** a parameter in the order of parameters.def, whatever the part: the same for a seed everywhere.
*/
#ifndef PASSFET_TRIALS_H
#define PASSFET_TRIALS_H

#include <passfet/ranking.h>
#include <stdint.h>

typedef enum pf_distribution {
    PF_TRIANGULAR, /* min, typ, max */
    PF_UNIFORM     /* min to max */
} pf_distribution;

#define PF_TRIALS_EXACT 16

/* Interval parameters of start-up that can be drawn at once. */
#define PF_TRIALS_DIMENSIONS_MAX 9

typedef struct pf_trials_request {
    size_t count; /* >= 1 */
    uint64_t seed;
    pf_distribution distribution;
} pf_trials_request;

typedef struct pf_trials_result {
    size_t count, passed, unassessed, failed;
    double share;     /* passed/count */
    double low, high; /* 95 % interval of that share: Wilson, J. Am. Stat. Assoc. 22 (1927) 209 */
    double margin_p01, margin_p50; /* percentiles of the SOA margin; an unassessed one counts as the
                                      smallest, and where it falls the percentile is NaN */
    double raised_by; /* by how much interpolated rises were raised, as a share; 0 for none */
} pf_trials_result;

typedef struct pf_trials pf_trials;

/* What all parts share. PF_LIMIT: more intervals than PF_TRIALS_DIMENSIONS_MAX. */
pf_status pf_trials_new(const pf_plan *plan, const pf_trials_request *request, pf_trials **trials,
                        pf_error *error) PF_MUST_USE;
void pf_trials_free(pf_trials *trials);

/* One part. PF_NO_MEMORY is the only failure. */
pf_status pf_trials_run(const pf_trials *trials, const pf_part *part, pf_scratch *scratch,
                        pf_trials_result *result) PF_MUST_USE;

/* Wilson's interval for passed of count at 95 %. */
void pf_wilson_interval(size_t passed, size_t count, double *low, double *high);

#endif
