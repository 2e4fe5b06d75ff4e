/* wave.c: waveforms of starts and captures with their superposition weights.
**
** The grids are chosen so that the weights are at most 0.3 % below the exact integral and 1 % above it for curves of
** data sheets, on the safe side for a falling power (tests/reference holds them to it).
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

static const pf_kernel_size start_size = {.levels = 17, .falls = 64};

/* Waveforms of one kernel: the longest at most this many times the shortest, which then still meets
** more than half of the lags. */
#define GROUP_SPAN 3

/* A recording may hold anything, a spike of microseconds in a second among it: its lags grow as
** fourth powers of CAPTURE_STEPS even steps. It is looked at at all its samples when it has no more
** than ANCHORS, else at the strongest of equal steps of time and where its energy passes equal
** shares, as many of each; and at moments between two of them, since power peaks between samples
** and a junction goes on heating behind a peak. MOMENTS at most. */
#define CAPTURE_STEPS 100
#define ANCHORS 128
#define MOMENTS 512
static const pf_kernel_size capture_size = {.levels = 33};

static size_t insert_lag(double lag[PF_LAGS_MAX], size_t lags, size_t at, double value_s)
{
    if (lags == PF_LAGS_MAX) return lags;
    for (size_t i = lags; i > at; i--)
        lag[i] = lag[i - 1];
    lag[at] = value_s;
    return lags + 1;
}

/* Adds a lag just behind a pulse width that is one: where a longest SOA line ends and a DC line takes
** over at once, the step lies between the two. */
static size_t place_step(double lag[PF_LAGS_MAX], size_t lags, double pulse_s)
{
    size_t at = 1;
    while (at < lags && lag[at] < pulse_s)
        at++;
    double behind_s = pulse_s * (1 + 1e-4);
    bool fits = at + 1 < lags && lag[at] == pulse_s && lag[at + 1] > behind_s;
    return fits ? insert_lag(lag, lags, at + 1, behind_s) : lags;
}

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
    } else {
        return insert_lag(lag, lags, at, pulse_s);
    }
    return lags;
}

/* The lags of a kernel of waveforms that last up to duration_s, growing with a power of even steps;
** returns how many. A kink of the SOA in time lies at a pulse width; on a lag it costs nothing. */
static size_t place_lags(double lag[PF_LAGS_MAX], double duration_s, size_t steps, int power)
{
    static const double mantissa[] = {1, 2, 5};
    size_t lags = 0;
    for (; lags <= steps; lags++)
        lag[lags] = duration_s * pow((double)lags / (double)steps, power);
    for (int decade = -6; decade <= 2; decade++)
        for (int i = 0; i < 3; i++) {
            double pulse_s =
                decade < 0 ? mantissa[i] / pow(10, -decade) : mantissa[i] * pow(10, decade);
            if (pulse_s > lag[2]) lags = place_pulse(lag, lags, pulse_s);
            if (pulse_s > lag[2] && i == 0) lags = place_step(lag, lags, pulse_s);
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

static double longest_of(const pf_trace *trace, size_t count)
{
    double longest_s = 0;
    for (size_t i = 0; i < count; i++)
        longest_s = fmax(longest_s, trace[i].time[trace[i].count - 1]);
    return longest_s;
}

static pf_status add_kernel(pf_waves *waves, const pf_trace *trace, size_t count,
                            pf_kernel_size size)
{
    pf_kernel *kernel = &waves->kernel[waves->kernels];
    pf_status status = pf_kernel_init(kernel, trace, count, size);
    if (status != PF_OK) return status;
    waves->kernels++;
    if (kernel->levels * kernel->lags > waves->samples)
        waves->samples = kernel->levels * kernel->lags;
    return PF_OK;
}

static int longest_first(const void *left, const void *right)
{
    const corner_form *a = left, *b = right;
    if (a->form.duration_s != b->form.duration_s)
        return a->form.duration_s > b->form.duration_s ? -1 : 1;
    return (a->corner > b->corner) - (a->corner < b->corner);
}

/* Makes kernels of waveforms whose durations lie within GROUP_SPAN of each other. */
static pf_status group(pf_waves *waves, corner_form *form, pf_trace *trace)
{
    double lag[PF_LAGS_MAX];
    pf_kernel_size size = start_size;
    size_t first = 0, used = 0;
    size.lag = lag;
    pf_status status = PF_OK;
    qsort(form, waves->count, sizeof *form, longest_first);
    for (size_t i = 0; i <= waves->count && status == PF_OK; i++) {
        bool ends = i == waves->count || form[i].form.unbounded ||
                    form[i].form.duration_s * GROUP_SPAN < form[first].form.duration_s;
        if (ends && used > first) {
            size.lags = place_lags(lag, longest_of(trace + first, used - first), STEPS, 2);
            status = add_kernel(waves, trace + first, used - first, size);
            first = used;
        }
        if (i == waves->count || form[i].form.unbounded) continue;
        const pf_waveform *points = &form[i].form;
        trace[used++] =
            (pf_trace){form[i].corner, points->count, points->time_s, points->vds_V, points->id_A};
    }
    return status;
}

/* The widest range of V_DS of all starts. */
static double widest_V(const pf_start *start, size_t count)
{
    double widest = 0;
    for (size_t i = 0; i < count; i++)
        widest = fmax(widest, start[i].supply_V - start[i].from_V);
    return widest;
}

/* The waveforms themselves; everything but the kernels. */
static pf_status integrate(pf_waves *waves, const pf_start *start, double hold_s, corner_form *form)
{
    double step_V = widest_V(start, waves->count) / PF_START_CELLS;
    for (size_t i = 0; i < waves->count; i++) {
        form[i].corner = i;
        pf_start stepped = start[i];
        stepped.step_V = step_V;
        pf_status status = pf_start_waveform(&stepped, hold_s, &form[i].form);
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

pf_status pf_waves_from_starts(pf_waves *waves, const pf_start *start, size_t count, double hold_s)
{
    pf_status status = allocate(waves, count);
    corner_form *form = pf_allocate(count, sizeof *form);
    pf_trace *trace = pf_allocate(count, sizeof *trace);
    if (!form || !trace) status = PF_NO_MEMORY;
    if (status == PF_OK) status = integrate(waves, start, hold_s, form);
    if (status == PF_OK) status = group(waves, form, trace);
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

static pf_wave survey(const pf_trace *trace)
{
    pf_wave wave = {.duration_s = trace->time[trace->count - 1]};
    for (size_t i = 0; i < trace->count; i++) {
        wave.peak_power_W = fmax(wave.peak_power_W, trace->level[i] * trace->flow[i]);
        wave.peak_current_A = fmax(wave.peak_current_A, trace->flow[i]);
        if (i + 1 < trace->count) wave.energy_J += segment_energy(trace, i);
    }
    return wave;
}

/* The strongest sample of each of ANCHORS/2 equal steps of time; returns how many steps have one. */
static size_t find_strongest(const pf_trace *trace, double *anchor)
{
    size_t found = 0, at = 0;
    double end = trace->time[trace->count - 1];
    for (int step = 1; step <= ANCHORS / 2; step++) {
        double highest = -1;
        for (; at < trace->count && trace->time[at] <= end * step / (ANCHORS / 2); at++) {
            double power = trace->level[at] * trace->flow[at];
            if (!(power > highest)) continue;
            highest = power;
            anchor[found] = trace->time[at];
        }
        if (highest >= 0) found++;
    }
    return found;
}

/* Where the energy passes ANCHORS/2 equal shares. */
static size_t find_shares(const pf_trace *trace, double energy_J, double *anchor)
{
    double passed = 0;
    size_t found = 0;
    for (size_t i = 0; i + 1 < trace->count; i++) {
        passed += segment_energy(trace, i);
        while (found < ANCHORS / 2 && passed * (ANCHORS / 2) >= energy_J * (double)(found + 1))
            anchor[found++] = trace->time[i + 1];
    }
    return found;
}

static int by_size(const void *left, const void *right)
{
    double a = *(const double *)left, b = *(const double *)right;
    return (a > b) - (a < b);
}

static size_t place_anchors(const pf_trace *trace, double energy_J, double anchor[ANCHORS])
{
    if (trace->count <= ANCHORS) {
        for (size_t i = 0; i < trace->count; i++)
            anchor[i] = trace->time[i];
        return trace->count;
    }
    size_t found = find_strongest(trace, anchor);
    found += find_shares(trace, energy_J, anchor + found);
    qsort(anchor, found, sizeof *anchor, by_size);
    return found;
}

/* The moments at which a recording is looked at; returns how many. */
static size_t place_looks(const pf_trace *trace, double energy_J, double moment[MOMENTS])
{
    double anchor[ANCHORS], before = 0;
    size_t anchors = place_anchors(trace, energy_J, anchor), looks = 0, between = MOMENTS / anchors;
    for (size_t i = 0; i < anchors; before = anchor[i++])
        for (size_t k = 1; k <= between && anchor[i] > before; k++)
            moment[looks++] = before + (anchor[i] - before) * (double)k / (double)between;
    return looks;
}

static pf_status add_capture(pf_waves *waves, const pf_trace *trace)
{
    double lag[PF_LAGS_MAX], moment[MOMENTS];
    pf_kernel_size size = capture_size;
    waves->wave[0] = survey(trace);
    waves->peak_current_A = waves->wave[0].peak_current_A;
    size.lag = lag;
    size.lags = place_lags(lag, longest_of(trace, 1), CAPTURE_STEPS, 4);
    size.extra = moment;
    size.extra_count = place_looks(trace, waves->wave[0].energy_J, moment);
    return add_kernel(waves, trace, 1, size);
}

pf_status pf_waves_from_capture(pf_waves *waves, const pf_capture *capture)
{
    double *time, *vds, *id;
    *waves = (pf_waves){0};
    pf_status status = copy_samples(capture, &time, &vds, &id);
    if (status != PF_OK) return status;
    const pf_trace trace = {0, capture->count, time, vds, id};
    status = allocate(waves, 1);
    if (status == PF_OK) status = add_capture(waves, &trace);
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
