/* wave.c: waveforms of starts and captures with their superposition weights.
**
** The grids are chosen so that the weights are within 0.2 % of the exact integral for curves of
*data
** sheets, on the safe side for a falling power (tests/reference holds them to it).
*/
#include "stress/wave.h"
#include "base/memory.h"
#include "base/number.h"

#include <math.h>
#include <stdlib.h>

/* Lags grow as squares of even steps: an impedance that rises with the square root of time is then
** equally well resolved everywhere. STEPS of them, and the pulse widths that sheets like to draw.
 */
#define STEPS 32

static const pf_kernel_size start_size = {.levels = 17, .corners = 64};

/* Waveforms of one kernel: the longest at most this many times the shortest, which then still meets
** more than half of the lags. */
#define GROUP_SPAN 3

/* A recording may hold anything: finer, and looked at more often. */
#define CAPTURE_MOMENTS 64 /* equal steps of time, and as many of energy */
static const pf_kernel_size capture_size = {.levels = 33, .corners = 64};

/* Moves the lag nearest to a pulse width there, or adds one. */
static size_t place_pulse(double lag[PF_LAGS_MAX], size_t lags, double pulse_s)
{
    size_t at = 1;
    while (at < lags && lag[at] < pulse_s)
        at++;
    if (at >= lags || lag[at] == pulse_s) return lags;
    double below = pulse_s - lag[at - 1], above = lag[at] - pulse_s;
    if (above < 0.3 * (below + above) && at < lags - 1) {
        lag[at] = pulse_s;
    } else if (below < 0.3 * (below + above) && at > 1) {
        lag[at - 1] = pulse_s;
    } else if (lags < PF_LAGS_MAX) {
        for (size_t i = lags; i > at; i--)
            lag[i] = lag[i - 1];
        lag[at] = pulse_s;
        return lags + 1;
    }
    return lags;
}

/* The lags of a kernel of waveforms that last up to duration_s; returns how many. A kink of the SOA
*in
** time lies at a pulse width; on a lag it costs nothing. */
static size_t place_lags(double lag[PF_LAGS_MAX], double duration_s)
{
    static const double mantissa[] = {1, 2, 5};
    size_t lags = 0;
    for (; lags <= STEPS; lags++)
        lag[lags] = duration_s * (double)(lags * lags) / (double)(STEPS * STEPS);
    for (int decade = -6; decade <= 2; decade++)
        for (int i = 0; i < 3; i++) {
            double pulse_s =
                decade < 0 ? mantissa[i] / pow(10, -decade) : mantissa[i] * pow(10, decade);
            if (pulse_s > duration_s / 300) lags = place_pulse(lag, lags, pulse_s);
        }
    return lags;
}

static double slew_at(const pf_profile *profile, const pf_corner *corner, double crss_F)
{
    if (profile->stated[PF_OUTPUT_SLEW]) return corner->value[PF_OUTPUT_SLEW];
    double gate_F = corner->value[PF_GATE_CAPACITANCE];
    if (corner->slow_gate && pf_is_stated(crss_F)) gate_F += crss_F;
    return corner->value[PF_GATE_CURRENT] / gate_F;
}

static double or_else(double value, double otherwise)
{
    return pf_is_stated(value) ? value : otherwise;
}

pf_start pf_start_at(const pf_profile *profile, pf_event event, const pf_corner *corner,
                     double crss_F)
{
    const double *value = corner->value;
    pf_start start = {
        .control = profile->control,
        .supply_V = value[PF_SUPPLY_VOLTAGE],
        .capacitance_F = value[PF_OUTPUT_CAPACITANCE],
        .current_limit_A = value[PF_CURRENT_LIMIT],
        .power_limit_W = value[PF_POWER_LIMIT],
        .foldback_A = value[PF_FOLDBACK_CURRENT],
        .load_ohm = or_else(value[PF_START_LOAD_RESISTANCE], INFINITY),
        .load_W = or_else(value[PF_START_LOAD_POWER], 0),
        .load_A = or_else(value[PF_START_LOAD_CURRENT], 0),
        .load_above_V = or_else(value[PF_START_LOAD_ABOVE], 0),
    };
    if (event == PF_SUPPLY_STEP) {
        start.from_V = value[PF_SUPPLY_STEP_FROM];
        start.load_A = value[PF_RUNNING_CURRENT];
        if (profile->control == PF_START_SLEW) start.control = PF_START_CURRENT_LIMIT;
    } else if (profile->control == PF_START_SLEW) {
        start.slew_Vps = slew_at(profile, corner, crss_F);
    }
    return start;
}

/* A waveform with the corner that it belongs to. */
typedef struct corner_form {
    size_t corner;
    pf_waveform form;
} corner_form;

static pf_wave scalars_of(const pf_waveform *form)
{
    return (pf_wave){
        .duration_s = form->duration_s,
        .energy_J = form->energy_J,
        .peak_power_W = form->peak_power_W,
        .peak_current_A = form->peak_current_A,
        .stuck = form->stuck,
        .unbounded = form->unbounded,
        .stuck_V = form->stuck_V,
    };
}

static pf_status add_kernel(pf_waves *waves, const pf_trace *trace, size_t count,
                            pf_kernel_size size, bool prune)
{
    double lag[PF_LAGS_MAX], longest_s = 0;
    for (size_t i = 0; i < count; i++)
        longest_s = fmax(longest_s, trace[i].time[trace[i].count - 1]);
    size.lag = lag;
    size.lags = place_lags(lag, longest_s);
    pf_kernel *kernel = &waves->kernel[waves->kernels];
    pf_status status = pf_kernel_init(kernel, trace, count, size);
    if (status != PF_OK) return status;
    waves->kernels++;
    if (kernel->levels * kernel->lags > waves->samples)
        waves->samples = kernel->levels * kernel->lags;
    return prune ? pf_kernel_prune(kernel) : PF_OK;
}

static int longest_first(const void *left, const void *right)
{
    const corner_form *a = left, *b = right;
    if (a->form.duration_s != b->form.duration_s)
        return a->form.duration_s > b->form.duration_s ? -1 : 1;
    return (a->corner > b->corner) - (a->corner < b->corner);
}

/* Makes kernels of waveforms whose durations lie within GROUP_SPAN of each other. */
static pf_status group(pf_waves *waves, corner_form *form, pf_trace *trace, bool prune)
{
    size_t first = 0, used = 0;
    pf_status status = PF_OK;
    qsort(form, waves->count, sizeof *form, longest_first);
    for (size_t i = 0; i <= waves->count && status == PF_OK; i++) {
        bool ends = i == waves->count || form[i].form.unbounded ||
                    form[i].form.duration_s * GROUP_SPAN < form[first].form.duration_s;
        if (ends && used > first) {
            status = add_kernel(waves, trace + first, used - first, start_size, prune);
            first = used;
        }
        if (i == waves->count || form[i].form.unbounded) continue;
        const pf_waveform *points = &form[i].form;
        trace[used++] =
            (pf_trace){form[i].corner, points->count, points->time_s, points->vds_V, points->id_A};
    }
    return status;
}

/* The waveforms themselves; everything but the kernels. */
static pf_status integrate(pf_waves *waves, const pf_start *start, double hold_s, corner_form *form)
{
    for (size_t i = 0; i < waves->count; i++) {
        form[i].corner = i;
        pf_status status = pf_start_waveform(&start[i], hold_s, &form[i].form);
        if (status != PF_OK) return status;
        waves->wave[i] = scalars_of(&form[i].form);
        waves->unbounded |= form[i].form.unbounded;
        waves->peak_current_A = fmax(waves->peak_current_A, waves->wave[i].peak_current_A);
    }
    return PF_OK;
}

static pf_status allocate(pf_waves *waves, size_t count)
{
    *waves = (pf_waves){.count = count};
    waves->wave = pf_allocate(count, sizeof *waves->wave);
    waves->kernel = pf_allocate(count, sizeof *waves->kernel);
    return waves->wave && waves->kernel ? PF_OK : PF_NO_MEMORY;
}

pf_status pf_waves_from_starts(pf_waves *waves, const pf_start *start, size_t count, double hold_s,
                               bool prune)
{
    pf_status status = allocate(waves, count);
    corner_form *form = pf_allocate(count, sizeof *form);
    pf_trace *trace = pf_allocate(count, sizeof *trace);
    if (!form || !trace) status = PF_NO_MEMORY;
    if (status == PF_OK) status = integrate(waves, start, hold_s, form);
    if (status == PF_OK) status = group(waves, form, trace, prune);
    for (size_t i = 0; form && i < count; i++)
        pf_waveform_clear(&form[i].form);
    pf_free(form);
    pf_free(trace);
    if (status != PF_OK) pf_waves_clear(waves);
    return status;
}

/* Copies the samples into three arrays in one block, from time 0, without negative values. */
static pf_status copy_samples(const pf_capture *capture, double **time, double **vds, double **id)
{
    if (capture->count < 2) return PF_BAD_ARGUMENT;
    *time = pf_allocate(3 * capture->count, sizeof(double));
    if (!*time) return PF_NO_MEMORY;
    *vds = *time + capture->count;
    *id = *vds + capture->count;
    for (size_t i = 0; i < capture->count; i++) {
        (*time)[i] = capture->time_s[i] - capture->time_s[0];
        (*vds)[i] = fmax(0, capture->vds_V[i]);
        (*id)[i] = fmax(0, capture->id_A[i]);
        if (i && !((*time)[i] > (*time)[i - 1])) {
            pf_free(*time);
            return PF_BAD_ARGUMENT;
        }
    }
    return PF_OK;
}

/* Energy of two straight lines multiplied, between two samples. */
static double segment_energy(const pf_trace *trace, size_t i)
{
    const double *v = trace->level + i, *c = trace->flow + i;
    double mean = (2 * v[0] * c[0] + 2 * v[1] * c[1] + v[0] * c[1] + v[1] * c[0]) / 6;
    return mean * (trace->time[i + 1] - trace->time[i]);
}

/* Scalars of the trace, and the moments at which its energy passes equal shares. */
static pf_wave survey(const pf_trace *trace, double *moment)
{
    pf_wave wave = {.duration_s = trace->time[trace->count - 1]};
    double passed = 0;
    size_t quantile = 0;
    for (size_t i = 0; i < trace->count; i++) {
        wave.peak_power_W = fmax(wave.peak_power_W, trace->level[i] * trace->flow[i]);
        wave.peak_current_A = fmax(wave.peak_current_A, trace->flow[i]);
        if (i + 1 < trace->count) wave.energy_J += segment_energy(trace, i);
    }
    for (size_t i = 0; i + 1 < trace->count; i++) {
        passed += segment_energy(trace, i);
        while (quantile < CAPTURE_MOMENTS &&
               passed * CAPTURE_MOMENTS >= wave.energy_J * (double)(quantile + 1))
            moment[quantile++] = trace->time[i + 1];
    }
    while (quantile < CAPTURE_MOMENTS)
        moment[quantile++] = wave.duration_s;
    for (size_t i = 0; i < CAPTURE_MOMENTS; i++)
        moment[CAPTURE_MOMENTS + i] = wave.duration_s * (double)(i + 1) / CAPTURE_MOMENTS;
    return wave;
}

pf_status pf_waves_from_capture(pf_waves *waves, const pf_capture *capture)
{
    double *time, *vds, *id, moment[2 * CAPTURE_MOMENTS];
    pf_kernel_size size = capture_size;
    *waves = (pf_waves){0};
    pf_status status = copy_samples(capture, &time, &vds, &id);
    if (status != PF_OK) return status;
    const pf_trace trace = {0, capture->count, time, vds, id};
    size.extra = moment;
    size.extra_count = sizeof moment / sizeof *moment;
    status = allocate(waves, 1);
    if (status == PF_OK) {
        waves->wave[0] = survey(&trace, moment);
        waves->peak_current_A = waves->wave[0].peak_current_A;
        status = add_kernel(waves, &trace, 1, size, true);
    }
    pf_free(time);
    if (status != PF_OK) pf_waves_clear(waves);
    return status;
}

void pf_waves_clear(pf_waves *waves)
{
    for (size_t i = 0; i < waves->kernels; i++)
        pf_kernel_clear(&waves->kernel[i]);
    pf_free(waves->kernel);
    pf_free(waves->wave);
    *waves = (pf_waves){0};
}
