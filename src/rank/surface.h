/* surface.h: rises of the start over the box of a profile's intervals.
**
** At a corner of the box they are known exactly; between, ln rise is taken as multilinear.
*/
#ifndef RANK_SURFACE_H
#define RANK_SURFACE_H

#include "stress/plan.h"

#include <passfet/trials.h>

/* The box: plans of single values at its corners and at some drawn points within. */
typedef struct pf_box {
    const pf_plan *base;
    size_t dimensions;
    pf_parameter parameter[PF_TRIALS_DIMENSIONS_MAX];
    pf_plan **corner; /* 1 << dimensions */
    pf_plan **inside; /* PF_TRIALS_EXACT */
} pf_box;

pf_status pf_box_init(pf_box *box, const pf_plan *base, const pf_trials_request *request,
                      pf_error *error) PF_MUST_USE;
void pf_box_clear(pf_box *box);

/* Rises of the start of one part. */
typedef struct pf_rise {
    double hot_K, junction_K; /* NaN where not known */
} pf_rise;

/* The surface of one part. */
typedef struct pf_surface {
    const pf_box *box;
    pf_rise *log_rise; /* by corner */
    pf_rise raise;     /* factors >= 1 */
} pf_surface;

pf_status pf_surface_init(pf_surface *surface, const pf_box *box, const pf_part *part,
                          pf_scratch *scratch) PF_MUST_USE;
void pf_surface_clear(pf_surface *surface);

/* The rises under a profile of single values, raised. */
pf_rise pf_surface_at(const pf_surface *surface, const pf_profile *profile);

/* The rises behind an outcome; the start temperature cancels. */
pf_rise pf_rise_of(const pf_stress *stress, size_t slot);

#endif
