/* duhamel.c: the hot-spot integral by adaptive quadrature. */
#include "reference/duhamel.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_integration.h>
#include <math.h>

#define CURVES_MAX 16
#define MOMENTS 90
#define BREAKS_MAX 80
#define FEW 50

/* One curve's current at a voltage, straight from the points (sorted by pulse, then voltage). */
static double curve_A(const pf_soa_point *point, size_t count, double vds_V)
{
    size_t top = 0;
    for (size_t i = 1; i < count; i++)
        if (point[i].id_A > point[top].id_A) top = i;
    if (vds_V <= point[top].vds_V) return point[top].id_A;
    for (size_t i = top + 1; i < count; i++) {
        if (vds_V > point[i].vds_V) continue;
        double share = log(vds_V / point[i - 1].vds_V) / log(point[i].vds_V / point[i - 1].vds_V);
        return point[i - 1].id_A * pow(point[i].id_A / point[i - 1].id_A, share);
    }
    return vds_V <= point[count - 1].vds_V * (1 + 1e-9) ? point[count - 1].id_A : NAN;
}

/* Currents of all curves at a voltage, by pulse width; a DC line is the last, infinitely long. */
static size_t currents_at(const pf_part *part, double vds_V, double *pulse_s, double *id_A)
{
    size_t curves = 0;
    for (size_t at = 0, end; at < part->soa_count; at = end) {
        for (end = at + 1;
             end < part->soa_count && part->soa[end].pulse_s == part->soa[at].pulse_s;)
            end++;
        pulse_s[curves] = part->soa[at].pulse_s;
        id_A[curves++] = curve_A(part->soa + at, end - at, vds_V);
    }
    return curves;
}

double exact_zth_KpW(const pf_part *part, double time_s)
{
    const pf_thermal_curve *curve = &part->thermal[PF_JUNCTION_CASE];
    const pf_zth_point *p = curve->point;
    double sum = 0;
    if (time_s <= 0) return 0;
    for (size_t i = 0; i < curve->pair_count; i++)
        sum += curve->pair[i].r_KpW * (1 - exp(-time_s / curve->pair[i].tau_s));
    if (curve->pair_count) return sum;
    if (time_s < p[0].time_s) return p[0].zth_KpW * sqrt(time_s / p[0].time_s);
    for (size_t i = 1; i < curve->point_count; i++)
        if (time_s <= p[i].time_s)
            return p[i - 1].zth_KpW *
                   pow(p[i].zth_KpW / p[i - 1].zth_KpW,
                       log(time_s / p[i - 1].time_s) / log(p[i].time_s / p[i - 1].time_s));
    return fmax(p[curve->point_count - 1].zth_KpW, part->rth_jc_KpW);
}

/* Beyond the longest finite line m: the rule of methods, section 2. */
static double beyond_A(const pf_part *part, const double *pulse_s, const double *id_A,
                       size_t curves, double time_s)
{
    size_t m = curves - 2;
    double slope = m ? log(id_A[m] / id_A[m - 1]) / log(pulse_s[m] / pulse_s[m - 1]) : 0;
    double by_slope = pow(time_s / pulse_s[m], fmin(0, slope));
    double by_zth = exact_zth_KpW(part, pulse_s[m]) / exact_zth_KpW(part, time_s);
    double between = id_A[m] * fmin(by_slope, by_zth);
    return fmin(id_A[m], fmax(between, id_A[curves - 1]));
}

double exact_soa_A(const pf_part *part, double vds_V, double time_s)
{
    double pulse_s[CURVES_MAX], id_A[CURVES_MAX];
    size_t curves = currents_at(part, vds_V, pulse_s, id_A);
    if (time_s <= pulse_s[0]) return id_A[0];
    for (size_t i = 1; i < curves; i++) {
        if (isinf(pulse_s[i])) return beyond_A(part, pulse_s, id_A, curves, time_s);
        if (time_s > pulse_s[i]) continue;
        double share = log(time_s / pulse_s[i - 1]) / log(pulse_s[i] / pulse_s[i - 1]);
        return id_A[i - 1] * pow(id_A[i] / id_A[i - 1], share);
    }
    return NAN;
}

static void form_at(const form *wave, double time_s, double *vds_V, double *id_A)
{
    size_t low = 0, high = wave->count - 1;
    while (high - low > 1) {
        size_t middle = (low + high) / 2;
        if (wave->time_s[middle] <= time_s)
            low = middle;
        else
            high = middle;
    }
    double span = wave->time_s[high] - wave->time_s[low];
    double share = span > 0 ? fmin(1, fmax(0, (time_s - wave->time_s[low]) / span)) : 0;
    *vds_V = wave->vds_V[low] + share * (wave->vds_V[high] - wave->vds_V[low]);
    *id_A = wave->id_A[low] + share * (wave->id_A[high] - wave->id_A[low]);
}

typedef struct integrand {
    const pf_part *part;
    const form *wave;
    double moment_s;
} integrand;

/* P dZ_SOA/d(ln s) at s = exp(u): I times the slope of 1/I_SOA, by a central difference that stays
** within the power law between two lines. */
static double rate(double u, void *context)
{
    const integrand *in = context;
    const double h = 1e-4;
    double vds, id, s = exp(u);
    form_at(in->wave, in->moment_s - s, &vds, &id);
    double later = 1 / exact_soa_A(in->part, vds, s * exp(h));
    double earlier = 1 / exact_soa_A(in->part, vds, s * exp(-h));
    return id * (later - earlier) / (2 * h);
}

/* The ends of smooth pieces of ln s: pulse widths, jumps of the waveform, and, where it has few
** corners (a recording, not an integrated start), every corner. */
static size_t find_breaks(const pf_part *part, const form *wave, double moment_s, double *end_s)
{
    double pulse_s[CURVES_MAX], id_A[CURVES_MAX];
    size_t curves = currents_at(part, 1, pulse_s, id_A), count = 0;
    for (size_t i = 0; i < curves; i++)
        if (pulse_s[i] < moment_s) end_s[count++] = pulse_s[i];
    if (count == 0) return 0;
    for (size_t i = 0; i + 1 < wave->count && count < BREAKS_MAX - 1; i++) {
        double lag = moment_s - wave->time_s[i];
        bool kink = wave->count < FEW || wave->time_s[i + 1] == wave->time_s[i];
        if (kink && lag > pulse_s[0] && lag < moment_s) end_s[count++] = lag;
    }
    end_s[count++] = moment_s;
    for (size_t i = 1; i < count; i++) /* sort by insertion */
        for (size_t k = i; k > 0 && end_s[k - 1] > end_s[k]; k--) {
            double swap = end_s[k];
            end_s[k] = end_s[k - 1];
            end_s[k - 1] = swap;
        }
    return count;
}

double exact_hot_rise_K(const pf_part *part, const form *wave, double moment_s)
{
    static gsl_integration_workspace *space;
    if (!space) {
        gsl_set_error_handler_off(); /* QAG says so when rounding ends its progress: good enough */
        space = gsl_integration_workspace_alloc(2000);
    }
    integrand in = {part, wave, moment_s};
    gsl_function f = {rate, &in};
    double end_s[BREAKS_MAX], vds, id;
    size_t count = find_breaks(part, wave, moment_s, end_s);
    form_at(wave, moment_s * (1 - 1e-12), &vds, &id);
    double sum = id / exact_soa_A(part, vds, 0);
    for (size_t i = 0; i + 1 < count; i++) {
        double piece = 0, error;
        double from = log(end_s[i]) + 1.01e-4, to = log(end_s[i + 1]) - 1.01e-4;
        if (to <= from) continue;
        gsl_integration_qag(&f, from, to, sum * 1e-6, 1e-5, 2000, GSL_INTEG_GAUSS21, space, &piece,
                            &error);
        /* the slivers of one difference step at each end, by their edge values */
        piece += 1.01e-4 * (rate(from, &in) + rate(to, &in));
        sum += piece;
    }
    return sum * (part->tj_max_degC - 25);
}

/* Moments close behind every corner of a recording of few. */
static double peak_at_corners(const pf_part *part, const form *wave, double *when_s,
                              double *width_s)
{
    double highest = 0;
    for (size_t i = 0; i + 1 < wave->count && wave->count < FEW; i++) {
        double length = wave->time_s[i + 1] - wave->time_s[i];
        for (int k = 1; k <= 8; k++) {
            double at = wave->time_s[i] + length * k / 8, rise = exact_hot_rise_K(part, wave, at);
            if (!(rise > highest)) continue;
            highest = rise;
            *when_s = at;
            *width_s = length / 8;
        }
    }
    return highest;
}

double exact_hot_peak_K(const pf_part *part, const form *wave, double *when_s)
{
    double end = wave->time_s[wave->count - 1], width = end;
    double highest = peak_at_corners(part, wave, when_s, &width);
    for (int i = 1; i <= MOMENTS; i++) {
        double share = (double)i / MOMENTS;
        double at[] = {end * share, end * share * share * share};
        for (int k = 0; k < 2; k++) {
            double rise = exact_hot_rise_K(part, wave, at[k]);
            if (rise > highest) {
                highest = rise;
                *when_s = at[k];
                width = k ? fmin(end / MOMENTS, at[k] * 3.0 / i) : end / MOMENTS;
            }
        }
    }
    for (int round = 0; round < 3; round++, width /= 4)
        for (int i = -4; i <= 4; i++) {
            double at = *when_s + width * i / 4;
            double rise = at > 0 && at <= end ? exact_hot_rise_K(part, wave, at) : 0;
            if (rise > highest) {
                highest = rise;
                *when_s = at;
            }
        }
    return highest;
}
