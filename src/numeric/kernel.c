/* kernel.c: the mean flows of superposition integrals on a grid of levels and lags. */
#include "numeric/kernel.h"
#include "base/memory.h"
#include "numeric/dot.h"
#include "numeric/passed.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static void place_lags(pf_kernel *kernel, const double *lag)
{
    for (size_t j = 0; j < kernel->lags; j++) {
        kernel->lag[j] = lag[j];
        kernel->log_lag[j] = log(lag[j]);
    }
}

static void place_levels(pf_kernel *kernel, double top)
{
    for (size_t i = 0; i < kernel->levels; i++) {
        kernel->level[i] = top * (double)i / (double)(kernel->levels - 1);
        kernel->log_level[i] = log(kernel->level[i]);
    }
}

static double duration_of(const pf_trace *trace)
{
    return trace->time[trace->count - 1];
}

/* --- Moments ------------------------------------------------------------------------------- */

/* A list that the moments of one trace are gathered in. */
typedef struct moments {
    double *at;
    size_t count;
} moments;

static void add_moment(moments *list, double at, double end)
{
    if (at >= 0 && at <= end) list->at[list->count++] = at;
}

/* The times at which the level first falls to even parts of the highest. */
static void add_falls(moments *list, const pf_trace *trace, double top, size_t falls)
{
    double end = duration_of(trace), lowest = trace->level[0];
    for (size_t i = 0, k = falls; i + 1 < trace->count && k > 0; i++) {
        double from = trace->level[i], to = trace->level[i + 1];
        while (k > 0 && top * (double)(k - 1) / (double)falls > lowest)
            k--;
        while (k > 0 && top * (double)(k - 1) / (double)falls >= to) {
            double target = top * (double)(k - 1) / (double)falls;
            double share = from > to ? (from - target) / (from - to) : 1;
            add_moment(list, trace->time[i] + share * (trace->time[i + 1] - trace->time[i]), end);
            k--;
        }
        lowest = fmin(lowest, to);
    }
}

static void add_jumps(moments *list, const pf_trace *trace)
{
    double end = duration_of(trace);
    for (size_t i = 0; i + 1 < trace->count; i++)
        if (trace->time[i] == trace->time[i + 1]) add_moment(list, trace->time[i], end);
}

/* Where flow and power first reach their highest: a limit that takes over leaves a peak there. */
static void add_highest(moments *list, const pf_trace *trace)
{
    size_t flow = 0, power = 0;
    for (size_t i = 1; i < trace->count; i++) {
        if (trace->flow[i] > trace->flow[flow]) flow = i;
        if (trace->flow[i] * trace->level[i] > trace->flow[power] * trace->level[power]) power = i;
    }
    add_moment(list, trace->time[flow], duration_of(trace));
    add_moment(list, trace->time[power], duration_of(trace));
}

static int by_time(const void *left, const void *right)
{
    double a = *(const double *)left, b = *(const double *)right;
    return (a > b) - (a < b);
}

/* All moments of a trace, each once, rising. at has room for moments_most. */
static size_t find_moments(const pf_kernel *kernel, pf_kernel_size size, const pf_trace *trace,
                           double *at)
{
    moments list = {at, 0};
    double end = duration_of(trace);
    for (size_t j = 0; j < kernel->lags; j++)
        add_moment(&list, kernel->lag[j], end);
    add_moment(&list, end, end);
    add_jumps(&list, trace);
    add_highest(&list, trace);
    add_falls(&list, trace, kernel->level[kernel->levels - 1], size.falls);
    for (size_t i = 0; i < size.extra_count; i++)
        add_moment(&list, size.extra[i], end);
    qsort(at, list.count, sizeof *at, by_time);
    size_t kept = 0;
    for (size_t i = 0; i < list.count; i++)
        if (kept == 0 || at[i] > at[kept - 1]) at[kept++] = at[i];
    return kept;
}

static size_t moments_most(pf_kernel_size size, const pf_trace *trace)
{
    return size.lags + size.falls + size.extra_count + trace->count + 4;
}

/* --- Rows ---------------------------------------------------------------------------------- */

/* Adds a row, with the terms of a dense one that are not 0. */
static pf_status add_row(pf_kernel_rows *rows, const pf_kernel_row *head, const double *dense,
                         size_t places)
{
    pf_status status =
        pf_grow((void **)&rows->row, &rows->room, rows->count + 1, sizeof *rows->row);
    if (status == PF_OK)
        status = pf_grow((void **)&rows->place, &rows->place_room, rows->terms + places,
                         sizeof *rows->place);
    if (status == PF_OK)
        status = pf_grow((void **)&rows->flow, &rows->flow_room, rows->terms + places,
                         sizeof *rows->flow);
    if (status != PF_OK) return status;
    pf_kernel_row *row = &rows->row[rows->count++];
    *row = *head;
    row->first = rows->terms;
    for (size_t i = 0; i < places; i++) {
        if (!(dense[i] > 0)) continue;
        rows->place[rows->terms] = (uint16_t)i;
        rows->flow[rows->terms++] = dense[i];
    }
    row->terms = rows->terms - row->first;
    return PF_OK;
}

/* What one row is filled with: dense flows and columns of passed amounts. */
typedef struct workbench {
    double *flow, *total; /* [levels][lags], [lags] */
    double *later, *earlier, *moment;
} workbench;

static void put_column(const pf_kernel *kernel, const workbench *bench, size_t lag,
                       const double *mean)
{
    for (size_t i = 0; i < kernel->levels; i++)
        bench->flow[i * kernel->lags + lag] = mean[i];
    bench->total[lag] = mean[kernel->levels];
}

/* The mean flows of one moment. */
static void fill_row(const pf_kernel *kernel, const pf_passed *passed, double moment,
                     workbench *bench)
{
    memset(bench->flow, 0, kernel->levels * kernel->lags * sizeof *bench->flow);
    memset(bench->total, 0, kernel->lags * sizeof *bench->total);
    pf_passed_instant(passed, moment, bench->later);
    put_column(kernel, bench, 0, bench->later);
    pf_passed_at(passed, moment, bench->later);
    for (size_t lag = 1; lag < kernel->lags && kernel->lag[lag - 1] < moment; lag++) {
        pf_passed_at(passed, fmax(0, moment - kernel->lag[lag]), bench->earlier);
        double width = kernel->lag[lag] - kernel->lag[lag - 1];
        for (size_t i = 0; i < passed->columns; i++)
            bench->later[i] = (bench->later[i] - bench->earlier[i]) / width;
        put_column(kernel, bench, lag, bench->later);
        double *swap = bench->later;
        bench->later = bench->earlier;
        bench->earlier = swap;
    }
}

static pf_status fill_trace(pf_kernel *kernel, pf_kernel_size size, const pf_trace *trace,
                            workbench *bench)
{
    pf_passed passed;
    pf_status status =
        pf_passed_init(&passed, trace, kernel->level[kernel->levels - 1], kernel->levels);
    size_t count = find_moments(kernel, size, trace, bench->moment);
    for (size_t m = 0; status == PF_OK && m < count; m++) {
        const pf_kernel_row head = {.trace = trace->id, .moment = bench->moment[m]};
        fill_row(kernel, &passed, head.moment, bench);
        status = add_row(&kernel->rows, &head, bench->flow, kernel->levels * kernel->lags);
        if (status == PF_OK) status = add_row(&kernel->total, &head, bench->total, kernel->lags);
    }
    pf_passed_clear(&passed);
    return status;
}

/* A step at lag j reads the samples at j and j - 1. */
static void mark_used(pf_kernel *kernel)
{
    for (size_t t = 0; t < kernel->rows.terms; t++) {
        size_t place = kernel->rows.place[t];
        kernel->used[place] = true;
        if (place % kernel->lags) kernel->used[place - 1] = true;
    }
}

static pf_status fill(pf_kernel *kernel, pf_kernel_size size, const pf_trace *trace, size_t count)
{
    size_t places = size.levels * size.lags, most = 0;
    for (size_t t = 0; t < count; t++)
        if (moments_most(size, &trace[t]) > most) most = moments_most(size, &trace[t]);
    double *memory = pf_allocate(places + size.lags + 2 * (size.levels + 1) + most, sizeof *memory);
    if (!memory) return PF_NO_MEMORY;
    workbench bench = {.flow = memory, .total = memory + places};
    bench.later = bench.total + size.lags;
    bench.earlier = bench.later + size.levels + 1;
    bench.moment = bench.earlier + size.levels + 1;
    pf_status status = PF_OK;
    for (size_t t = 0; t < count && status == PF_OK; t++)
        status = fill_trace(kernel, size, &trace[t], &bench);
    pf_free(memory);
    kernel->rows.kept = kernel->rows.count;
    kernel->total.kept = kernel->total.count;
    if (status == PF_OK) mark_used(kernel);
    return status;
}

static pf_status allocate(pf_kernel *kernel, pf_kernel_size size)
{
    *kernel = (pf_kernel){.lags = size.lags, .levels = size.levels};
    kernel->lag = pf_allocate(size.lags, sizeof(double));
    kernel->log_lag = pf_allocate(size.lags, sizeof(double));
    kernel->level = pf_allocate(size.levels, sizeof(double));
    kernel->log_level = pf_allocate(size.levels, sizeof(double));
    kernel->used = pf_allocate(size.lags * size.levels, sizeof(bool));
    bool all = kernel->lag && kernel->log_lag && kernel->level && kernel->log_level && kernel->used;
    return all ? PF_OK : PF_NO_MEMORY;
}

static double highest_level(const pf_trace *trace, size_t count)
{
    double top = 0;
    for (size_t t = 0; t < count; t++)
        for (size_t i = 0; i < trace[t].count; i++)
            top = fmax(top, trace[t].level[i]);
    return top;
}

static bool is_good(const pf_trace *trace, size_t count, pf_kernel_size size)
{
    for (size_t t = 0; t < count; t++)
        if (trace[t].count < 2 || !(duration_of(&trace[t]) > 0)) return false;
    return count > 0 && size.lags >= 2 && size.levels >= 2 && size.lags * size.levels <= 65536;
}

pf_status pf_kernel_init(pf_kernel *kernel, const pf_trace *trace, size_t count,
                         pf_kernel_size size)
{
    *kernel = (pf_kernel){0};
    if (!is_good(trace, count, size)) return PF_BAD_ARGUMENT;
    pf_status status = allocate(kernel, size);
    if (status == PF_OK) {
        place_lags(kernel, size.lag);
        place_levels(kernel, highest_level(trace, count));
        status = fill(kernel, size, trace, count);
    }
    if (status != PF_OK) pf_kernel_clear(kernel);
    return status;
}

static void rows_clear(pf_kernel_rows *rows)
{
    pf_free(rows->row);
    pf_free(rows->place);
    pf_free(rows->flow);
}

void pf_kernel_clear(pf_kernel *kernel)
{
    pf_free(kernel->lag);
    pf_free(kernel->log_lag);
    pf_free(kernel->level);
    pf_free(kernel->log_level);
    pf_free(kernel->used);
    rows_clear(&kernel->rows);
    rows_clear(&kernel->total);
    *kernel = (pf_kernel){0};
}

void pf_rows_peak(const pf_kernel_rows *rows, size_t from, size_t to, const double *step,
                  double highest[PF_LANES], size_t row[PF_LANES])
{
    double answer[PF_LANES];
    for (size_t r = from; r < to; r++) {
        const pf_kernel_row *on = &rows->row[r];
        pf_dot_terms(rows->place + on->first, rows->flow + on->first, on->terms, step, answer);
        for (size_t lane = 0; lane < PF_LANES; lane++) {
            if (!(answer[lane] > highest[lane])) continue;
            highest[lane] = answer[lane];
            row[lane] = r;
        }
    }
}
