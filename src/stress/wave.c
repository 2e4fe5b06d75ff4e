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

static const pf_kernel_size start_size = {.lags = 33, .levels = 25};

/* A recording may hold anything: finer, and looked at more often. */
#define CAPTURE_MOMENTS 64 /* equal steps of time, and as many of energy */
static const pf_kernel_size capture_size = {.lags = 49, .levels = 33};

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

pf_status pf_wave_from_start(const pf_start *start, double hold_s, pf_wave *wave)
{
    pf_waveform form;
    *wave = (pf_wave){0};
    pf_status status = pf_start_waveform(start, hold_s, &form);
    if (status != PF_OK) return status;
    wave->duration_s = form.duration_s;
    wave->energy_J = form.energy_J;
    wave->peak_power_W = form.peak_power_W;
    wave->peak_current_A = form.peak_current_A;
    wave->stuck = form.stuck;
    wave->stuck_V = form.stuck_V;
    wave->unbounded = form.unbounded;
    const pf_trace trace = {form.count, form.time_s, form.vds_V, form.id_A};
    if (!form.unbounded) status = pf_kernel_init(&wave->kernel, &trace, start_size);
    pf_waveform_clear(&form);
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
static void survey(pf_wave *wave, const pf_trace *trace, double *moment)
{
    double passed = 0;
    size_t quantile = 0;
    for (size_t i = 0; i < trace->count; i++) {
        wave->peak_power_W = fmax(wave->peak_power_W, trace->level[i] * trace->flow[i]);
        wave->peak_current_A = fmax(wave->peak_current_A, trace->flow[i]);
        if (i + 1 < trace->count) wave->energy_J += segment_energy(trace, i);
    }
    wave->duration_s = trace->time[trace->count - 1];
    for (size_t i = 0; i + 1 < trace->count && quantile < CAPTURE_MOMENTS; i++) {
        passed += segment_energy(trace, i);
        while (quantile < CAPTURE_MOMENTS &&
               passed * CAPTURE_MOMENTS >= wave->energy_J * (double)(quantile + 1) * (1 - 1e-12))
            moment[quantile++] = trace->time[i + 1];
    }
    while (quantile < CAPTURE_MOMENTS)
        moment[quantile++] = wave->duration_s;
    for (size_t i = 0; i < CAPTURE_MOMENTS; i++)
        moment[CAPTURE_MOMENTS + i] = wave->duration_s * (double)(i + 1) / CAPTURE_MOMENTS;
}

pf_status pf_wave_from_capture(const pf_capture *capture, pf_wave *wave)
{
    double *time, *vds, *id, moment[2 * CAPTURE_MOMENTS];
    *wave = (pf_wave){0};
    pf_status status = copy_samples(capture, &time, &vds, &id);
    if (status != PF_OK) return status;
    const pf_trace trace = {capture->count, time, vds, id};
    survey(wave, &trace, moment);
    pf_kernel_size size = capture_size;
    size.extra = moment;
    size.extra_count = sizeof moment / sizeof *moment;
    status = pf_kernel_init(&wave->kernel, &trace, size);
    pf_free(time);
    return status;
}

void pf_wave_clear(pf_wave *wave)
{
    pf_kernel_clear(&wave->kernel);
    *wave = (pf_wave){0};
}
