/* surface.h: rises of the start and of the supply step over the box of a profile's intervals.
**
** At a corner of the box they are known exactly; between, ln rise is taken as multilinear.
*/
#ifndef RANK_SURFACE_H
#define RANK_SURFACE_H

#include "stress/plan.h"

#include <passfet/trials.h>

#define PF_SURFACE_EVENTS 2 /* start_up and supply_step */

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

/* Rises of one event of one part. */
typedef struct pf_rise {
    double hot_K, junction_K; /* NaN where not known */
} pf_rise;

/* The surfaces of one part. */
typedef struct pf_surface {
    const pf_box *box;
    size_t events;
    size_t slot[PF_SURFACE_EVENTS];   /* of the base plan */
    pf_rise *log_rise;                /* [corner][event] */
    pf_rise raise[PF_SURFACE_EVENTS]; /* factors >= 1 */
} pf_surface;

pf_status pf_surface_init(pf_surface *surface, const pf_box *box, const pf_part *part,
                          pf_scratch *scratch) PF_MUST_USE;
void pf_surface_clear(pf_surface *surface);

/* The rise of an event (index into slot) under a profile of single values, raised. */
pf_rise pf_surface_at(const pf_surface *surface, size_t event, const pf_profile *profile);

#endif
