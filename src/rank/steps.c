/* steps.c: a waveform cut into a few steps. */
#include "rank/steps.h"
#include "base/memory.h"
#include "base/number.h"
#include "rank/reading.h"

#include <math.h>
#include <string.h>

static pf_status line_init(pf_polyline *line, size_t count)
{
    *line = (pf_polyline){.count = count, .memory = pf_allocate(3 * count, sizeof(double))};
    line->time_s = line->memory;
    line->vds_V = line->memory + count;
    line->id_A = line->memory + 2 * count;
    return line->memory ? PF_OK : PF_NO_MEMORY;
}

void pf_polyline_clear(pf_polyline *line)
{
    pf_free(line->memory);
    *line = (pf_polyline){0};
}

pf_status pf_polyline_of_start(const pf_start *start, double hold_s, pf_polyline *line)
{
    pf_waveform wave;
    *line = (pf_polyline){0};
    pf_status status = pf_start_waveform(start, hold_s, &wave);
    if (status == PF_OK && !wave.unbounded) status = line_init(line, wave.count);
    for (size_t i = 0; i < line->count && status == PF_OK; i++) {
        line->time_s[i] = wave.time_s[i];
        line->vds_V[i] = wave.vds_V[i];
        line->id_A[i] = wave.id_A[i];
    }
    pf_waveform_clear(&wave);
    return status;
}

pf_status pf_polyline_of_capture(const pf_capture *capture, pf_polyline *line)
{
    *line = (pf_polyline){0};
    if (!capture) return PF_OK;
    pf_status status = line_init(line, capture->count);
    for (size_t i = 0; i < capture->count && status == PF_OK; i++) {
        line->time_s[i] = capture->time_s[i] - capture->time_s[0];
        line->vds_V[i] = fmax(0, capture->vds_V[i]);
        line->id_A[i] = fmax(0, capture->id_A[i]);
    }
    return status;
}

double pf_polyline_peak_V(const pf_polyline *line)
{
    double highest = -1, vds_V = PF_NONE;
    for (size_t i = 0; i < line->count; i++) {
        double power = line->vds_V[i] * line->id_A[i];
        if (!(power > highest * (1 + 1e-9))) continue;
        highest = power;
        vds_V = line->vds_V[i];
    }
    return vds_V;
}

/* Integrals over a stretch of the line: of the current, and of the voltage weighted by it. */
typedef struct passed {
    double charge, weighted;
} passed;

/* The part of one straight piece that lies in [from, to]. */
static passed passed_in_piece(const pf_polyline *line, size_t i, double from, double to)
{
    double begin = line->time_s[i], width = line->time_s[i + 1] - begin;
    double left = fmax(from, begin), right = fmin(to, begin + width);
    if (!(right > left)) return (passed){0, 0};
    double a = (left - begin) / width, b = (right - begin) / width;
    double i0 = line->id_A[i] + a * (line->id_A[i + 1] - line->id_A[i]);
    double i1 = line->id_A[i] + b * (line->id_A[i + 1] - line->id_A[i]);
    double v0 = line->vds_V[i] + a * (line->vds_V[i + 1] - line->vds_V[i]);
    double v1 = line->vds_V[i] + b * (line->vds_V[i + 1] - line->vds_V[i]);
    double mean = (2 * v0 * i0 + 2 * v1 * i1 + v0 * i1 + v1 * i0) / 6;
    return (passed){(i0 + i1) / 2 * (right - left), mean * (right - left)};
}

static passed passed_between(const pf_polyline *line, double from, double to)
{
    passed sum = {0, 0};
    for (size_t i = 0; i + 1 < line->count; i++) {
        passed piece = passed_in_piece(line, i, from, to);
        sum.charge += piece.charge;
        sum.weighted += piece.weighted;
    }
    return sum;
}

static double soa_current(const pf_subject *subject, double vds_V, double age_s)
{
    pf_reading reading;
    if (!(age_s > 0)) return INFINITY;
    pf_reading_take(subject, vds_V, age_s, &reading);
    return reading.current_A;
}

static pf_step step_between(const pf_subject *subject, const pf_polyline *line, double from_s,
                            double to_s, double moment_s)
{
    passed sum = passed_between(line, from_s, to_s);
    pf_step step = {.from_s = from_s, .to_s = to_s};
    step.id_A = sum.charge / (to_s - from_s);
    step.vds_V = sum.charge > 0 ? sum.weighted / sum.charge : 0;
    step.born_A = soa_current(subject, step.vds_V, moment_s - from_s);
    step.dead_A = soa_current(subject, step.vds_V, moment_s - to_s);
    step.rise_K = step.id_A * subject->family->span_K * (1 / step.born_A - 1 / step.dead_A);
    return step;
}

void pf_steps_take(const pf_subject *subject, const pf_polyline *line, double moment_s,
                   pf_event_view *view)
{
    double from_s = 0;
    view->step_count = PF_STEPS;
    view->stepped_rise_K = 0;
    for (int i = 0; i < PF_STEPS; i++) {
        double left = (double)(PF_STEPS - 1 - i) / PF_STEPS;
        double to_s = i == PF_STEPS - 1 ? moment_s : moment_s * (1 - left * left);
        view->step[i] = step_between(subject, line, from_s, to_s, moment_s);
        view->stepped_rise_K += view->step[i].rise_K;
        from_s = to_s;
    }
}
