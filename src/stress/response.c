/* response.c: superposition of one stress on one part. */
#include "stress/response.h"
#include "base/number.h"

#include <math.h>

/* Z_SOA below this share of Zth: the sheet's two curves contradict each other. Reading a chart
 *costs
 ** some 10 % on either; common practice, no source. */
#define CLEARLY_BELOW 0.8

/* Tries summed one by one; later ones are bounded as a block. */
#define TRIES_SUMMED 2000

pf_subject pf_subject_of(const pf_model *model, double start_degC, bool extend, double *sample)
{
    pf_subject subject = {.model = model, .extend = extend, .sample = sample};
    subject.zth = pf_model_zth(model);
    subject.family = pf_model_family(model, start_degC);
    if (subject.family) {
        double longest = pf_soa_longest_log(subject.family);
        subject.log_zth_longest = log(pf_zth_at(subject.zth, exp(longest), longest));
    }
    return subject;
}

/* Reads the SOA at a time beyond the longest curve or not, noting on what it rests. */
static double log_current(const pf_subject *subject, const pf_soa_column *column, double time_s,
                          double log_time, unsigned *remarks)
{
    pf_soa_beyond beyond = {.extend = subject->extend, .log_zth_ratio = PF_NONE};
    if (log_time > pf_soa_longest_log(subject->family) + 1e-12) {
        beyond.log_zth_ratio =
            subject->log_zth_longest - log(pf_zth_at(subject->zth, time_s, log_time));
        *remarks |= subject->family->dc ? PF_REMARK_DC_BOUND : PF_REMARK_EXTENDED;
    }
    return pf_soa_log_current(column, log_time, beyond);
}

/* Why a column says nothing at a time. */
static pf_cause why_silent(const pf_subject *subject, const pf_soa_column *column, double log_time)
{
    const pf_soa_family *family = subject->family;
    bool beyond = log_time > pf_soa_longest_log(family) + 1e-12;
    if (beyond && !family->dc && !subject->extend) return PF_CAUSE_NO_DC_LINE;
    if (beyond && !family->dc && pf_is_stated(column->log_i[family->pulses - 1]) &&
        !pf_is_stated(subject->log_zth_longest))
        return PF_CAUSE_NO_ZTH;
    return PF_CAUSE_BEYOND_VOLTAGE;
}

static bool soa_is_there(const pf_subject *subject, pf_response *response)
{
    response->hot_rise_K = response->worst_s = PF_NONE;
    response->remarks = 0;
    response->cause = !subject->family              ? PF_CAUSE_NO_SOA
                      : subject->family->span_K > 0 ? PF_CAUSE_NONE
                                                    : PF_CAUSE_NO_TJ_MAX;
    if (subject->family && subject->family->case_degC > 25)
        response->remarks |= PF_REMARK_HOT_FAMILY;
    return response->cause == PF_CAUSE_NONE;
}

/* Fills the samples span/I_SOA of a kernel's grid. False with the cause where one is missing. */
static bool sample_soa(const pf_subject *subject, const pf_kernel *kernel, pf_response *response)
{
    pf_soa_column column;
    for (size_t i = 0; i < kernel->levels; i++) {
        pf_soa_column_at(subject->family, kernel->log_level[i], &column);
        for (size_t j = 0; j < kernel->lags; j++) {
            size_t at = i * kernel->lags + j;
            subject->sample[at] = 0;
            if (!kernel->used[at]) continue;
            double log_i = log_current(subject, &column, kernel->lag[j], kernel->log_lag[j],
                                       &response->remarks);
            subject->sample[at] = subject->family->span_K * exp(-log_i);
            if (pf_is_stated(log_i)) continue;
            response->cause = why_silent(subject, &column, kernel->log_lag[j]);
            return false;
        }
    }
    return true;
}

static double junction_rise(const pf_subject *subject, const pf_kernel *kernel)
{
    double when;
    if (!pf_zth_stated(subject->zth)) return PF_NONE;
    for (size_t j = 0; j < kernel->lags; j++)
        subject->sample[j] = pf_zth_at(subject->zth, kernel->lag[j], kernel->log_lag[j]);
    return pf_kernel_total_peak(kernel, subject->sample, &when);
}

void pf_respond_wave(const pf_subject *subject, const pf_wave *wave, pf_response *response)
{
    if (wave->unbounded) {
        *response = (pf_response){PF_NONE, PF_NONE, PF_NONE, PF_CAUSE_UNBOUNDED_CURRENT, 0};
        return;
    }
    if (soa_is_there(subject, response) && sample_soa(subject, &wave->kernel, response))
        response->hot_rise_K = pf_kernel_peak(&wave->kernel, subject->sample, &response->worst_s);
    response->junction_rise_K = junction_rise(subject, &wave->kernel);
}

/* The smallest current allowed for a pulse and every shorter one; when that is. */
static double pulse_log_current(const pf_subject *subject, const pf_soa_column *column,
                                double time_s, double log_time, pf_response *response)
{
    double lowest = log_current(subject, column, time_s, log_time, &response->remarks);
    response->worst_s = time_s;
    const pf_soa_family *family = subject->family;
    for (size_t i = 0; i < family->pulses && family->curve[i].log_pulse < log_time; i++) {
        if (!(column->log_i[i] < lowest)) continue;
        lowest = column->log_i[i];
        response->worst_s = family->curve[i].pulse_s;
    }
    return lowest;
}

static void respond_soa_rectangle(const pf_subject *subject, double vds_V, double id_A,
                                  double time_s, pf_response *response)
{
    pf_soa_column column;
    double log_time = log(time_s);
    pf_soa_column_at(subject->family, log(vds_V), &column);
    double log_i = pulse_log_current(subject, &column, time_s, log_time, response);
    if (!pf_is_stated(log_i)) {
        response->cause = why_silent(subject, &column, log_time);
        response->worst_s = PF_NONE;
        return;
    }
    response->hot_rise_K = subject->family->span_K * id_A * exp(-log_i);
    double zth = pf_zth_at(subject->zth, time_s, log_time);
    if (response->hot_rise_K < CLEARLY_BELOW * zth * vds_V * id_A)
        response->remarks |= PF_REMARK_CONTRADICTION;
}

void pf_respond_rectangle(const pf_subject *subject, double vds_V, double id_A, double time_s,
                          pf_response *response)
{
    if (soa_is_there(subject, response))
        respond_soa_rectangle(subject, vds_V, id_A, time_s, response);
    response->junction_rise_K = vds_V * id_A * pf_zth_at(subject->zth, time_s, log(time_s));
}

static double train_term(const pf_zth *zth, double on_s, double lag_s)
{
    return pf_zth_at(zth, lag_s + on_s, log(lag_s + on_s)) - pf_zth_at(zth, lag_s, log(lag_s));
}

/* Foster pairs: a geometric series per pair. */
static double foster_train(const pf_zth *zth, double on_s, double interval_s, double count)
{
    double sum = 0;
    for (size_t i = 0; i < zth->pairs; i++) {
        double tau = zth->pair[i].tau_s;
        double warm = -expm1(-on_s / tau), all = expm1(-(count - 1) * interval_s / tau);
        sum += zth->pair[i].r_KpW * warm * all / expm1(-interval_s / tau) * exp(-interval_s / tau);
    }
    return sum;
}

/* Tries from the lag from_s on, up to last_s, as a block. Zth bends downwards, so that the mean
 *over
 ** an interval bounds the sum from above: on_s/T (Z(last + on) - Z(from)). */
static double train_rest(const pf_zth *zth, double on_s, double interval_s, double from_s,
                         double last_s)
{
    double end_s = last_s + on_s;
    double rise = pf_zth_at(zth, end_s, log(end_s)) - pf_zth_at(zth, from_s, log(from_s));
    return on_s / interval_s * rise;
}

/* Where the steady resistance is above the last point, Zth steps up there. A step that falls
 *between
 ** two tries would be lost to the sum: its mean share counts instead. */
static double missed_step(const pf_zth *zth, double on_s, double interval_s, double count)
{
    double settled_s = pf_zth_settled_s(zth);
    double step = zth->beyond_KpW - exp(zth->log_z[zth->points - 1]);
    bool met = settled_s >= interval_s && fmod(settled_s, interval_s) < on_s;
    return met || (count - 1) * interval_s <= settled_s ? 0 : on_s / interval_s * step;
}

double pf_train_zth(const pf_zth *zth, double on_s, double interval_s, double count)
{
    if (!pf_zth_stated(zth)) return PF_NONE;
    if (!(count > 1)) return 0;
    if (zth->pairs) return foster_train(zth, on_s, interval_s, count);
    double settled_s = pf_zth_settled_s(zth), sum = 0;
    double last = fmin(count - 1, ceil(settled_s / interval_s));
    double summed = fmin(last, TRIES_SUMMED);
    for (double k = 1; k <= summed; k++)
        sum += train_term(zth, on_s, k * interval_s);
    if (last > summed)
        return sum + train_rest(zth, on_s, interval_s, summed * interval_s, last * interval_s);
    return sum + missed_step(zth, on_s, interval_s, count);
}
