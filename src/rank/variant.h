/* variant.h: a plan of a profile that differs from another plan's in one parameter.
**
** Waveforms that do not depend on the parameter are borrowed from the base plan; events that do not
** depend on it at all can be left out. The base must outlive the variant.
*/
#ifndef RANK_VARIANT_H
#define RANK_VARIANT_H

#include "stress/plan.h"

#include <passfet/headroom.h>

typedef struct pf_variant {
    pf_plan plan;
    double crss_F;             /* slows gate ramps that are made again; NaN: none */
    bool owns[PF_SLOTS_MAX];   /* waves made for it */
    size_t base[PF_SLOTS_MAX]; /* slot of the base plan, by own slot */
} pf_variant;

/* Which slots of a plan a change of the parameter concerns: those whose corners depend on it; all
** where it moves the running junction, the allowed junction or what is required. */
void pf_variant_concerns(const pf_plan *base, pf_parameter parameter, bool concerned[PF_SLOTS_MAX]);

/* The plan as one part meets it: gate ramps with its C_rss in them, so that no evaluation makes them
** again. *bare is the part without C_rss, to be evaluated; it shares the part's memory. PF_NO_MEMORY. */
pf_status pf_variant_personal(pf_variant *variant, const pf_plan *base, const pf_part *part,
                              pf_part *bare) PF_MUST_USE;

/* The plan of a changed, finished profile with the concerned slots alone. PF_NO_MEMORY. */
pf_status pf_variant_init(pf_variant *variant, const pf_plan *base, const pf_profile *changed,
                          pf_parameter parameter, const bool concerned[PF_SLOTS_MAX],
                          double crss_F) PF_MUST_USE;
void pf_variant_clear(pf_variant *variant);

/* Whether the card stalls: a start that sticks or outlasts the shortest timer. */
bool pf_variant_stalls(const pf_variant *variant);

#endif
