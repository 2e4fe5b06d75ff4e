/* thermal_impedance.c: reading Zth(t). */
#include "device/thermal_impedance.h"
#include "base/number.h"
#include "numeric/curve.h"

#include <math.h>

static double foster_sum(const pf_zth *zth, double time_s)
{
    double sum = 0;
    for (size_t i = 0; i < zth->pairs; i++)
        sum += zth->pair[i].r_KpW * -expm1(-time_s / zth->pair[i].tau_s);
    return sum;
}

double pf_zth_at(const pf_zth *zth, double time_s, double log_time)
{
    if (!pf_zth_stated(zth)) return PF_NONE;
    if (!(time_s > 0)) return 0;
    if (zth->pairs) return foster_sum(zth, time_s);
    /* a time that was read from the same text as a point is that point, whatever its last bit */
    if (log_time > zth->log_t[zth->points - 1] + 1e-12) return zth->beyond_KpW;
    if (log_time < zth->log_t[0]) return exp(zth->log_z[0] + 0.5 * (log_time - zth->log_t[0]));
    return exp(pf_curve_log_at(zth->log_t, zth->log_z, zth->points, log_time));
}

double pf_zth_settled_s(const pf_zth *zth)
{
    return zth->points ? exp(zth->log_t[zth->points - 1]) : INFINITY;
}
