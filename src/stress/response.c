/* response.c: superposition of one stress on one part. */
#include "stress/response.h"
#include "base/memory.h"
#include "base/number.h"
#include "numeric/dot.h"

#include <math.h>

/* Z_SOA below this share of Zth: the sheet's two curves contradict each other. Reading a chart
** costs some 10 % on either; common practice, no source. */
#define CLEARLY_BELOW 0.8

pf_subject pf_subject_of(const pf_model *model, double start_degC, bool extend)
{
    pf_subject subject = {.model = model, .extend = extend};
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
        if (subject->family->dc || subject->extend)
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

/* One level of a kernel's grid as ln I_SOA. False with the cause where a sample that some row reads is
** missing; one that none reads is made like its neighbour. */
static bool sample_level(const pf_subject *subject, const pf_kernel *kernel, size_t level,
                         const instant *at, double *sample, pf_response *response)
{
    pf_soa_column column;
    const bool *used = kernel->used + level * kernel->lags;
    pf_soa_column_at(subject->family, kernel->log_level[level], &column);
    for (size_t j = 0; j < kernel->lags; j++) {
        sample[j] = pf_soa_log_current(&column, at[j].place, at[j].beyond);
        if (pf_is_stated(sample[j])) continue;
        if (used[j]) {
            response->cause = why_silent(subject, &column, at[j]);
            return false;
        }
        sample[j] = j ? sample[j - 1] : 0;
    }
    return true;
}

/* The lags as instants. Where the current steps down behind the longest curve (a DC line without a Zth
** that leads there) and that curve's pulse width is no lag, the step is taken at the lag before it,
** never after it. */
static void find_instants(const pf_subject *subject, const pf_kernel *kernel, instant *at,
                          unsigned *remarks)
{
    size_t last = kernel->lags - 1;
    double longest = pf_soa_longest_log(subject->family);
    for (size_t j = 0; j <= last; j++)
        at[j] = find_instant(subject, kernel->lag[j], kernel->log_lag[j], remarks);
    if (!subject->family->dc || pf_zth_stated(subject->zth)) return;
    for (size_t j = 0; j < last; j++) {
        bool lag_is_pulse = fabs(kernel->log_lag[j] - longest) < 1e-9;
        if (is_beyond(subject, at[j + 1].place) && !lag_is_pulse) at[j] = at[j + 1];
    }
}

/* Fills the samples span/I_SOA of a kernel's grid. False with the cause where one is missing. */
static bool sample_soa(const pf_subject *subject, const pf_kernel *kernel, double *sample,
                       pf_response *response)
{
    instant at[PF_LAGS_MAX];
    find_instants(subject, kernel, at, &response->remarks);
    for (size_t i = 0; i < kernel->levels; i++)
        if (!sample_level(subject, kernel, i, at, sample + i * kernel->lags, response))
            return false;
    pf_exp_negative(sample, kernel->levels * kernel->lags, subject->family->span_K);
    return true;
}

/* How far a kink at a pulse width that is no lag lies above the chord between the lags beside it,
** as a share: what the grid may miss at moments near it. */
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
static double kink_allowance(const pf_subject *subject, const pf_kernel *kernel,
                             const double *samples, double moment)
{
    const pf_soa_family *family = subject->family;
    pf_soa_column column;
    double allowance = 0;
    for (size_t i = 1; i < kernel->levels; i++) {
        const double *sample = samples + i * kernel->lags;
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

/* The rows of one kind on all lanes: those that are enough, and all where some lane needs them. */
static void find_peaks(const pf_kernel_rows *rows, bool all, const double *step,
                       double highest[PF_LANES], size_t row[PF_LANES])
{
    for (size_t lane = 0; lane < PF_LANES; lane++) {
        highest[lane] = -INFINITY;
        row[lane] = 0;
    }
    pf_rows_peak(rows, 0, all ? rows->count : rows->kept, step, highest, row);
}

static void clear_lane(double *step, size_t places, size_t lane)
{
    for (size_t i = 0; i < places; i++)
        step[i * PF_LANES + lane] = 0;
}

/* Takes the peak of one lane into its response, unless another kernel's was higher. */
static void take_peak(const pf_subject *subject, const pf_kernel *kernel, const double *sample,
                      double rise, size_t row, pf_response *response)
{
    const pf_kernel_row *at = &kernel->rows.row[row];
    if (!pulses_are_lags(subject, kernel))
        rise *= 1 + kink_allowance(subject, kernel, sample, at->moment);
    if (rise <= response->hot_rise_K) return;
    response->hot_rise_K = rise;
    response->worst_s = at->moment;
    response->corner = (unsigned)at->trace;
}

static void respond_soa(const pf_subject *const *subject, size_t count, const pf_kernel *kernel,
                        const pf_bench *bench, pf_response *response)
{
    double highest[PF_LANES];
    size_t row[PF_LANES], places = kernel->levels * kernel->lags;
    bool all = false, any = false;
    for (size_t lane = 0; lane < PF_LANES; lane++) {
        double *sample = bench->sample + lane * bench->places;
        if (lane < count && response[lane].cause == PF_CAUSE_NONE &&
            sample_soa(subject[lane], kernel, sample, &response[lane])) {
            any = true;
            if (!pf_steps_put(sample, kernel->levels, kernel->lags, bench->step, lane)) all = true;
        } else {
            clear_lane(bench->step, places, lane);
        }
    }
    if (!any) return;
    find_peaks(&kernel->rows, all, bench->step, highest, row);
    for (size_t lane = 0; lane < count; lane++)
        if (response[lane].cause == PF_CAUSE_NONE)
            take_peak(subject[lane], kernel, bench->sample + lane * bench->places, highest[lane],
                      row[lane], &response[lane]);
}

static void respond_zth(const pf_subject *const *subject, size_t count, const pf_kernel *kernel,
                        const pf_bench *bench, pf_response *response)
{
    double highest[PF_LANES], *sample = bench->sample;
    size_t row[PF_LANES];
    bool all = false;
    for (size_t lane = 0; lane < PF_LANES; lane++) {
        clear_lane(bench->step, kernel->lags, lane);
        if (lane >= count || !pf_zth_stated(subject[lane]->zth)) continue;
        for (size_t j = 0; j < kernel->lags; j++)
            sample[j] = pf_zth_at(subject[lane]->zth, kernel->lag[j], kernel->log_lag[j]);
        if (!pf_steps_put(sample, 1, kernel->lags, bench->step, lane)) all = true;
    }
    find_peaks(&kernel->total, all, bench->step, highest, row);
    for (size_t lane = 0; lane < count; lane++)
        if (pf_zth_stated(subject[lane]->zth))
            response[lane].junction_rise_K = fmax(response[lane].junction_rise_K, highest[lane]);
}

void pf_respond_waves(const pf_subject *const *subject, size_t count, const pf_waves *waves,
                      const pf_bench *bench, pf_response *response)
{
    for (size_t lane = 0; lane < count; lane++) {
        soa_is_there(subject[lane], &response[lane]);
        if (waves->unbounded) response[lane].cause = PF_CAUSE_UNBOUNDED_CURRENT;
    }
    for (size_t i = 0; i < waves->kernels; i++) {
        respond_zth(subject, count, &waves->kernel[i], bench, response);
        respond_soa(subject, count, &waves->kernel[i], bench, response);
    }
    for (size_t lane = 0; lane < count; lane++)
        if (response[lane].cause != PF_CAUSE_NONE)
            response[lane].hot_rise_K = response[lane].worst_s = PF_NONE;
}

pf_status pf_bench_reserve(pf_bench *bench, size_t places)
{
    pf_status status = pf_grow((void **)&bench->sample, &bench->sample_room, PF_LANES * places + 1,
                               sizeof *bench->sample);
    if (status == PF_OK)
        status = pf_grow((void **)&bench->step, &bench->step_room, PF_LANES * places + 1,
                         sizeof *bench->step);
    if (status == PF_OK && places > bench->places) bench->places = places;
    return status;
}

void pf_bench_clear(pf_bench *bench)
{
    pf_free(bench->sample);
    pf_free(bench->step);
    *bench = (pf_bench){0};
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
