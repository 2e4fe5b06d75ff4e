/* reading.c: the SOA and Zth of a loaded part, read with the points that were used.
**
** The rules are those of device/safe_area.c and thermal_impedance.c, which give the numbers that the
** verdict rests on; here the points behind them are found. Tests hold the two against each other.
*/
#include "rank/reading.h"
#include "base/number.h"
#include "numeric/curve.h"

#include <math.h>

pf_subject pf_reading_subject(const pf_model *model, double start_degC, bool extend)
{
    pf_subject subject = {.model = model, .extend = extend, .zth = pf_model_zth(model)};
    subject.family = pf_model_family(model, start_degC);
    if (!subject.family) return subject;
    double longest = pf_soa_longest_log(subject.family);
    subject.log_zth_longest = log(pf_zth_at(subject.zth, exp(longest), longest));
    return subject;
}

/* The points on either side of a voltage on one line, and the current that the column has there. */
static pf_line_reading read_line(const pf_soa_curve *curve, double log_vds, double log_i)
{
    size_t right = 0, last = curve->points - 1;
    while (right < last && curve->log_v[right] < log_vds)
        right++;
    size_t left = right > 0 && curve->log_v[right] != log_vds ? right - 1 : right;
    if (log_vds > curve->log_v[last] && last > 0) left = last - 1;
    pf_line_reading line = {
        .pulse_s = curve->pulse_s,
        .left_V = exp(curve->log_v[left]),
        .left_A = exp(curve->log_i[left]),
        .right_V = exp(curve->log_v[right]),
        .right_A = exp(curve->log_i[right]),
        .slope = pf_slope(curve->log_v[left], curve->log_i[left], curve->log_v[right],
                          curve->log_i[right]),
        .current_A = exp(log_i),
        .flank = log_vds < curve->log_v[0],
    };
    if (log_vds > curve->log_v[last]) line.slope = fmin(0, line.slope);
    return line;
}

static pf_line_reading line_at(const pf_soa_column *column, size_t index, double log_vds)
{
    return read_line(&column->family->curve[index], log_vds, column->log_i[index]);
}

static double time_slope(const pf_line_reading *shorter, const pf_line_reading *longer)
{
    return pf_slope(log(shorter->pulse_s), log(shorter->current_A), log(longer->pulse_s),
                    log(longer->current_A));
}

/* Longer than the longest line: what bounds the current there. */
static void read_beyond(const pf_subject *subject, const pf_soa_column *column, double log_vds,
                        pf_reading *reading)
{
    const pf_soa_family *family = subject->family;
    size_t pulses = family->pulses;
    reading->kind = PF_READ_DC;
    if (family->dc) reading->dc = read_line(&family->curve[pulses], log_vds, column->log_dc);
    if (pulses == 0) return;
    reading->longer = reading->shorter = line_at(column, pulses - 1, log_vds);
    if (pulses > 1) reading->shorter = line_at(column, pulses - 2, log_vds);
    reading->slope = pulses > 1 ? fmin(0, time_slope(&reading->shorter, &reading->longer)) : 0;
    reading->zth_longest_KpW = exp(subject->log_zth_longest);
    reading->zth_KpW = pf_zth_at(subject->zth, reading->time_s, log(reading->time_s));
    if (pf_is_stated(reading->zth_KpW)) reading->kind = PF_READ_BEYOND;
}

/* The line of a shorter pulse that allows less counts. */
static void heed_shorter(const pf_soa_column *column, double log_vds, pf_reading *reading)
{
    const pf_soa_family *family = column->family;
    double least = reading->current_A;
    for (size_t i = 0; i < family->pulses && family->curve[i].pulse_s < reading->time_s; i++) {
        if (!(exp(column->log_i[i]) < least)) continue;
        least = exp(column->log_i[i]);
        reading->shorter = reading->longer = line_at(column, i, log_vds);
    }
    if (least >= reading->current_A * (1 - 1e-12)) return;
    reading->kind = PF_READ_SHORTER_COUNTS;
    reading->current_A = least;
    reading->slope = 0;
}

static void read_within(const pf_soa_column *column, pf_soa_place place, double log_vds,
                        pf_reading *reading)
{
    const pf_soa_curve *curve = column->family->curve;
    reading->shorter = line_at(column, place.left, log_vds);
    reading->longer = line_at(column, place.right, log_vds);
    reading->kind = PF_READ_ON_LINE;
    if (place.left == 0 && place.right == 0 && reading->time_s < curve[0].pulse_s * (1 - 1e-9))
        reading->kind = PF_READ_SHORTER;
    if (place.left == place.right) return;
    reading->kind = PF_READ_BETWEEN;
    reading->slope = time_slope(&reading->shorter, &reading->longer);
}

void pf_reading_take(const pf_subject *subject, double vds_V, double time_s, pf_reading *reading)
{
    pf_soa_column column;
    pf_response response;
    *reading = (pf_reading){.vds_V = vds_V, .time_s = time_s, .current_A = PF_NONE};
    reading->case_degC = subject->family ? subject->family->case_degC : PF_NONE;
    reading->span_K = subject->family ? subject->family->span_K : PF_NONE;
    pf_respond_rectangle(subject, vds_V, 1, time_s, &response);
    reading->cause = response.cause;
    if (response.cause != PF_CAUSE_NONE) return;
    double log_vds = log(vds_V);
    pf_soa_column_at(subject->family, log_vds, &column);
    pf_soa_place place = pf_soa_place_of(subject->family, log(time_s));
    pf_soa_beyond beyond = {PF_NONE, subject->extend};
    if (place.right == subject->family->pulses) {
        beyond.log_zth_ratio =
            subject->log_zth_longest - log(pf_zth_at(subject->zth, time_s, log(time_s)));
        read_beyond(subject, &column, log_vds, reading);
    } else {
        read_within(&column, place, log_vds, reading);
    }
    reading->current_A = exp(pf_soa_log_current(&column, place, beyond));
    heed_shorter(&column, log_vds, reading);
}

/* A time between the points of a curve. */
static void read_points(const pf_zth *zth, double log_time, pf_zth_reading *reading)
{
    size_t right = 0, last = zth->points - 1;
    while (right < last && zth->log_t[right] < log_time)
        right++;
    size_t left = right > 0 && zth->log_t[right] != log_time ? right - 1 : right;
    reading->kind = PF_ZTH_BETWEEN;
    if (log_time < zth->log_t[0]) reading->kind = PF_ZTH_BEFORE;
    if (log_time > zth->log_t[last] + 1e-12) {
        reading->kind = PF_ZTH_BEYOND;
        left = right = last;
    }
    reading->left_s = exp(zth->log_t[left]);
    reading->left_KpW = exp(zth->log_z[left]);
    reading->right_s = exp(zth->log_t[right]);
    reading->right_KpW = exp(zth->log_z[right]);
    reading->slope =
        pf_slope(zth->log_t[left], zth->log_z[left], zth->log_t[right], zth->log_z[right]);
    if (reading->kind == PF_ZTH_BEFORE) reading->slope = 0.5;
}

void pf_zth_reading_take(const pf_zth *zth, double time_s, pf_zth_reading *reading)
{
    *reading = (pf_zth_reading){.path = zth->path, .time_s = time_s};
    reading->zth_KpW = pf_zth_at(zth, time_s, log(time_s));
    if (zth->pairs)
        reading->kind = PF_ZTH_FOSTER;
    else if (zth->points && time_s > 0)
        read_points(zth, log(time_s), reading);
}
