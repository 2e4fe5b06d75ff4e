/* draw.c: values drawn from the intervals of a profile. */
#include "rank/draw.h"

#include <math.h>

bool pf_is_drawn(const pf_profile *profile, pf_parameter parameter)
{
    static const pf_parameter fixed[] = {PF_REQUIRED_MARGIN, PF_JUNCTION_LIMIT, PF_VOLTAGE_USE,
                                         PF_GATE_USE,        PF_CURRENT_USE,    PF_PARALLEL_COUNT,
                                         PF_RETRY_COUNT,     PF_CLAMP_VOLTAGE};
    for (size_t i = 0; i < sizeof fixed / sizeof *fixed; i++)
        if (fixed[i] == parameter) return false;
    return profile->value[parameter].min < profile->value[parameter].max;
}

/* Inverse of the distribution function; a typical value that is not stated lies in the middle. */
static double triangular(const pf_interval *interval, double share)
{
    double min = interval->min, max = interval->max, typ = interval->typ;
    if (!(typ >= min && typ <= max)) typ = (min + max) / 2;
    double width = max - min, below = (typ - min) / width;
    if (share < below) return min + sqrt(share * width * (typ - min));
    return max - sqrt((1 - share) * width * (max - typ));
}

void pf_draw(const pf_profile *profile, pf_distribution distribution, pf_random *random,
             pf_profile *drawn)
{
    *drawn = *profile;
    for (int i = 0; i < PF_PARAMETER_COUNT; i++) {
        const pf_interval *interval = &profile->value[i];
        double share = pf_random_share(random);
        if (!pf_is_drawn(profile, (pf_parameter)i)) continue;
        double value = distribution == PF_UNIFORM
                           ? interval->min + share * (interval->max - interval->min)
                           : triangular(interval, share);
        value = fmin(fmax(value, interval->min), interval->max);
        drawn->value[i] = (pf_interval){value, value, value};
    }
}
