/* draw.h: values drawn from the intervals of a profile. */
#ifndef RANK_DRAW_H
#define RANK_DRAW_H

#include "rank/random.h"

#include <passfet/profile.h>
#include <passfet/trials.h>

/* Whether a parameter is drawn: an interval, and no requirement. */
bool pf_is_drawn(const pf_profile *profile, pf_parameter parameter);

/* Draws every parameter once. */
void pf_draw(const pf_profile *profile, pf_distribution distribution, pf_random *random,
             pf_profile *drawn);

#endif
