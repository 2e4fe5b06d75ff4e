/* safe_area.c: reading the safe operating area. */
#include "device/safe_area.h"
#include "base/number.h"
#include "numeric/curve.h"

#include <math.h>

/* How far right of its last point a curve may still be read: ln 1.005, the width of a pencil line.
 */
#define CHART_READING 0.0049875415110391

/* Pulse widths closer than this are the same, whatever their last bit. */
#define SAME_TIME 1e-12

/* ln current of one curve at ln voltage. In the sliver right of the last point the last slope goes
** on, unless it rises. */
static double curve_at(const pf_soa_curve *curve, double log_vds)
{
    size_t last = curve->points - 1;
    double over = log_vds - curve->log_v[last];
    if (over <= 0) return pf_curve_log_at(curve->log_v, curve->log_i, curve->points, log_vds);
    if (over > CHART_READING * (1 + 1e-9)) return PF_NONE;
    double slope = last == 0 ? 0
                             : pf_slope(curve->log_v[last - 1], curve->log_i[last - 1],
                                        curve->log_v[last], curve->log_i[last]);
    return curve->log_i[last] + fmin(0, slope) * over;
}

void pf_soa_column_at(const pf_soa_family *family, double log_vds, pf_soa_column *column)
{
    column->family = family;
    for (size_t i = 0; i < family->pulses; i++)
        column->log_i[i] = curve_at(&family->curve[i], log_vds);
    column->log_dc = family->dc ? curve_at(&family->curve[family->pulses], log_vds) : PF_NONE;
}

double pf_soa_longest_log(const pf_soa_family *family)
{
    return family->pulses ? family->curve[family->pulses - 1].log_pulse : -INFINITY;
}

/* Slope in time between the two longest finite curves, never rising; 0 where there is only one. */
static double last_slope(const pf_soa_column *column)
{
    const pf_soa_family *family = column->family;
    size_t last = family->pulses - 1;
    if (last == 0) return 0;
    return fmin(0, pf_slope(family->curve[last - 1].log_pulse, column->log_i[last - 1],
                            family->curve[last].log_pulse, column->log_i[last]));
}

/* E(V, t) of equation (6): whichever falls faster of Zth and the slope in time. */
static double extended(const pf_soa_column *column, double log_over, double log_zth_ratio)
{
    size_t last = column->family->pulses - 1;
    double slope = last_slope(column) * log_over;
    double fall = log_zth_ratio < slope ? log_zth_ratio : slope;
    if (!pf_is_stated(log_zth_ratio) || !pf_is_stated(slope)) return PF_NONE;
    return column->log_i[last] + fmin(0, fall);
}

static double beyond_longest(const pf_soa_column *column, double log_over, pf_soa_beyond beyond)
{
    const pf_soa_family *family = column->family;
    if (family->pulses == 0) return column->log_dc;
    double longest = column->log_i[family->pulses - 1];
    if (!family->dc)
        return beyond.extend ? extended(column, log_over, beyond.log_zth_ratio) : PF_NONE;
    if (!pf_is_stated(column->log_dc) || !pf_is_stated(longest)) return PF_NONE;
    double least = fmin(column->log_dc, longest);
    double between = extended(column, log_over, beyond.log_zth_ratio);
    return between > least ? between : least;
}

pf_soa_place pf_soa_place_of(const pf_soa_family *family, double log_time)
{
    const pf_soa_curve *curve = family->curve;
    size_t right = 0;
    while (right < family->pulses && curve[right].log_pulse < log_time - SAME_TIME)
        right++;
    if (right == family->pulses)
        return (pf_soa_place){right, right, 0, log_time - pf_soa_longest_log(family)};
    if (right == 0 || curve[right].log_pulse <= log_time + SAME_TIME)
        return (pf_soa_place){right, right, 0, 0};
    double back = curve[right].log_pulse - log_time;
    double whole = curve[right].log_pulse - curve[right - 1].log_pulse;
    return (pf_soa_place){right - 1, right, back / whole, 0};
}

double pf_soa_log_current(const pf_soa_column *column, pf_soa_place place, pf_soa_beyond beyond)
{
    if (place.right == column->family->pulses)
        return beyond_longest(column, place.log_over, beyond);
    double right = column->log_i[place.right];
    return right + place.share * (column->log_i[place.left] - right);
}
