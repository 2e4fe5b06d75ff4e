/* response.c: superposition of one stress on one part. */
#include "stress/response.h"
#include "base/number.h"
#include "numeric/dot.h"

#include <math.h>

/* Z_SOA below this share of Zth: the sheet's two curves contradict each other. Reading a chart
 *costs
 ** some 10 % on either; common practice, no source. */
#define CLEARLY_BELOW 0.8

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

/* A time on the scale of the family, with what bounds the current there. */
typedef struct instant {
    pf_soa_place place;
    pf_soa_beyond beyond;
} instant;

static bool is_beyond(const pf_subject *subject, pf_soa_place place)
{
    return place.right == subject->family->pulses;
}

/* Finds a time among the family's curves, noting on what a reading beyond them rests. */
static instant find_instant(const pf_subject *subject, double time_s, double log_time,
                            unsigned *remarks)
{
    instant at = {pf_soa_place_of(subject->family, log_time), {PF_NONE, subject->extend}};
    if (is_beyond(subject, at.place)) {
        at.beyond.log_zth_ratio =
            subject->log_zth_longest - log(pf_zth_at(subject->zth, time_s, log_time));
        *remarks |= subject->family->dc ? PF_REMARK_DC_BOUND : PF_REMARK_EXTENDED;
    }
    return at;
}

/* Why a column says nothing at a time. */
static pf_cause why_silent(const pf_subject *subject, const pf_soa_column *column, instant at)
{
    const pf_soa_family *family = subject->family;
    bool open = is_beyond(subject, at.place) && !family->dc;
    if (open && !subject->extend) return PF_CAUSE_NO_DC_LINE;
    if (open && pf_is_stated(column->log_i[family->pulses - 1]) &&
        !pf_is_stated(at.beyond.log_zth_ratio))
        return PF_CAUSE_NO_ZTH;
    return PF_CAUSE_BEYOND_VOLTAGE;
}

static bool soa_is_there(const pf_subject *subject, pf_response *response)
{
    *response =
        (pf_response){.hot_rise_K = PF_NONE, .worst_s = PF_NONE, .junction_rise_K = PF_NONE};
    response->cause = !subject->family              ? PF_CAUSE_NO_SOA
                      : subject->family->span_K > 0 ? PF_CAUSE_NONE
                                                    : PF_CAUSE_NO_TJ_MAX;
    if (subject->family && subject->family->case_degC > 25)
        response->remarks |= PF_REMARK_HOT_FAMILY;
    return response->cause == PF_CAUSE_NONE;
}

/* One level of a kernel's grid as ln I_SOA. False with the cause where a sample that is needed is
** missing; *whole becomes false where one that is not needed is. */
static bool sample_level(const pf_subject *subject, const pf_kernel *kernel, size_t level,
                         const instant *at, bool *whole, pf_response *response)
{
    pf_soa_column column;
    double *sample = subject->sample + level * kernel->lags;
    const bool *used = kernel->used + level * kernel->lags;
    pf_soa_column_at(subject->family, kernel->log_level[level], &column);
    for (size_t j = 0; j < kernel->lags; j++) {
        sample[j] = pf_soa_log_current(&column, at[j].place, at[j].beyond);
        if (pf_is_stated(sample[j])) continue;
        if (used[j]) {
            response->cause = why_silent(subject, &column, at[j]);
            return false;
        }
        *whole = false;
        sample[j] = 0;
    }
    return true;
}

/* The lags as instants. Where the current steps down behind the longest curve (a DC line without a
*Zth
** that leads there), the step is taken at the lag before it, never after it. */
static void find_instants(const pf_subject *subject, const pf_kernel *kernel, instant *at,
                          unsigned *remarks)
{
    size_t last = kernel->lags - 1;
    for (size_t j = 0; j <= last; j++)
        at[j] = find_instant(subject, kernel->lag[j], kernel->log_lag[j], remarks);
    if (!subject->family->dc || pf_zth_stated(subject->zth)) return;
    for (size_t j = 0; j < last; j++)
        if (is_beyond(subject, at[j + 1].place)) at[j] = at[j + 1];
}

/* Fills the samples span/I_SOA of a kernel's grid. False with the cause where one is missing. */
static bool sample_soa(const pf_subject *subject, const pf_kernel *kernel, bool *regular,
                       pf_response *response)
{
    instant at[PF_LAGS_MAX];
    bool whole = true;
    find_instants(subject, kernel, at, &response->remarks);
    for (size_t i = 0; i < kernel->levels; i++)
        if (!sample_level(subject, kernel, i, at, &whole, response)) return false;
    pf_exp_negative(subject->sample, kernel->levels * kernel->lags, subject->family->span_K);
    *regular = whole && pf_kernel_is_regular(subject->sample, kernel->levels, kernel->lags);
    return true;
}

/* How far a kink at a pulse width that is no lag lies above the chord between the lags beside it,
*as a
** share: what the grid may miss at moments near it. */
static double kink_share(const pf_kernel *kernel, const double *sample, double pulse_s,
                         double value, double moment)
{
    size_t j = 1;
    while (j < kernel->lags && kernel->lag[j] < pulse_s * (1 - 1e-9))
        j++;
    if (j == kernel->lags || kernel->lag[j] <= pulse_s * (1 + 1e-9)) return 0;
    if (kernel->lag[j - 1] > 2 * moment || kernel->lag[j] < moment / 2) return 0;
    double part = (pulse_s - kernel->lag[j - 1]) / (kernel->lag[j] - kernel->lag[j - 1]);
    double chord = sample[j - 1] + part * (sample[j] - sample[j - 1]);
    return chord > 0 ? fmax(0, value / chord - 1) : 0;
}

/* The largest share over all levels: added to the rise, so that the error goes to the safe side. */
static double kink_allowance(const pf_subject *subject, const pf_kernel *kernel, double moment)
{
    const pf_soa_family *family = subject->family;
    pf_soa_column column;
    double allowance = 0;
    for (size_t i = 1; i < kernel->levels; i++) {
        const double *sample = subject->sample + i * kernel->lags;
        pf_soa_column_at(family, kernel->log_level[i], &column);
        for (size_t k = 0; k < family->pulses; k++) {
            double value = family->span_K * exp(-column.log_i[k]);
            double share = kink_share(kernel, sample, family->curve[k].pulse_s, value, moment);
            allowance = share > allowance ? share : allowance;
        }
    }
    return allowance;
}

/* Whether every pulse width of the family within the kernel's lags is a lag. */
static bool pulses_are_lags(const pf_subject *subject, const pf_kernel *kernel)
{
    const pf_soa_family *family = subject->family;
    for (size_t k = 0, j = 1; k < family->pulses; k++) {
        double pulse_s = family->curve[k].pulse_s;
        while (j < kernel->lags && kernel->lag[j] < pulse_s * (1 - 1e-9))
            j++;
        if (j == kernel->lags) return true;
        if (kernel->lag[j] > pulse_s * (1 + 1e-9)) return false;
    }
    return true;
}

static void respond_soa(const pf_subject *subject, const pf_kernel *kernel, pf_response *response)
{
    bool regular;
    double rise = PF_NONE;
    if (response->cause != PF_CAUSE_NONE) return;
    if (!sample_soa(subject, kernel, &regular, response)) {
        response->hot_rise_K = response->worst_s = PF_NONE;
        return;
    }
    size_t rows = regular ? kernel->rows.kept : kernel->rows.count;
    const pf_kernel_row *row = pf_kernel_peak(kernel, &kernel->rows, rows, subject->sample, &rise);
    if (!pulses_are_lags(subject, kernel)) rise *= 1 + kink_allowance(subject, kernel, row->moment);
    if (rise <= response->hot_rise_K) return;
    response->hot_rise_K = rise;
    response->worst_s = row->moment;
    response->corner = (unsigned)row->trace;
}

static double junction_rise(const pf_subject *subject, const pf_kernel *kernel)
{
    double rise = PF_NONE;
    if (!pf_zth_stated(subject->zth)) return PF_NONE;
    for (size_t j = 0; j < kernel->lags; j++)
        subject->sample[j] = pf_zth_at(subject->zth, kernel->lag[j], kernel->log_lag[j]);
    bool regular = pf_kernel_is_regular(subject->sample, 1, kernel->lags);
    size_t rows = regular ? kernel->total.kept : kernel->total.count;
    pf_kernel_peak(kernel, &kernel->total, rows, subject->sample, &rise);
    return rise;
}

void pf_respond_waves(const pf_subject *subject, const pf_waves *waves, pf_response *response)
{
    soa_is_there(subject, response);
    if (waves->unbounded) response->cause = PF_CAUSE_UNBOUNDED_CURRENT;
    for (size_t i = 0; i < waves->kernels; i++) {
        double junction = junction_rise(subject, &waves->kernel[i]);
        response->junction_rise_K = fmax(response->junction_rise_K, junction);
        respond_soa(subject, &waves->kernel[i], response);
    }
}

/* The smallest current allowed for a pulse and every shorter one; when that is. */
static double pulse_log_current(const pf_subject *subject, const pf_soa_column *column,
                                double log_i, double time_s, pf_response *response)
{
    const pf_soa_family *family = subject->family;
    response->worst_s = time_s;
    for (size_t i = 0; i < family->pulses && family->curve[i].pulse_s < time_s; i++) {
        if (!(column->log_i[i] < log_i)) continue;
        log_i = column->log_i[i];
        response->worst_s = family->curve[i].pulse_s;
    }
    return log_i;
}

static void respond_soa_rectangle(const pf_subject *subject, double vds_V, double id_A,
                                  double time_s, pf_response *response)
{
    pf_soa_column column;
    double log_time = log(time_s);
    instant at = find_instant(subject, time_s, log_time, &response->remarks);
    pf_soa_column_at(subject->family, log(vds_V), &column);
    double log_i = pf_soa_log_current(&column, at.place, at.beyond);
    if (!pf_is_stated(log_i)) {
        response->cause = why_silent(subject, &column, at);
        return;
    }
    log_i = pulse_log_current(subject, &column, log_i, time_s, response);
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
