/* kernel.c: the weights of superposition integrals on a grid of levels and lags. */
#include "numeric/kernel.h"
#include "base/memory.h"
#include "numeric/passed.h"

#include <math.h>
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

/* The corner of a trace with a number, in even steps. A jump since the corner before takes its place,
** but for the last, which is the end. */
static double corner_of(const pf_trace *trace, size_t number, size_t corners)
{
    size_t from = (trace->count - 1) * number / corners;
    size_t to = (trace->count - 1) * (number + 1) / corners;
    for (size_t i = from; i < to && number + 1 < corners; i++)
        if (trace->time[i] == trace->time[i + 1]) return trace->time[i];
    return trace->time[to];
}

/* The moment of a trace with a number: the lags counted from the start, up to the end of the trace;
** corners of the trace in even steps, the last of them the end; the extra ones. NaN for none. */
static double moment_of(const pf_kernel *kernel, pf_kernel_size size, const pf_trace *trace,
                        size_t number)
{
    double end = duration_of(trace), at;
    if (number < kernel->lags) {
        at = kernel->lag[number];
        return at < end ? at : NAN;
    }
    number -= kernel->lags;
    if (number < size.corners) return corner_of(trace, number, size.corners);
    at = size.extra[number - size.corners];
    return at < end ? at : NAN;
}

static size_t moments(const pf_kernel *kernel, pf_kernel_size size)
{
    return kernel->lags + size.corners + size.extra_count;
}

/* Adds a mean flow over the lag interval that ends at lag j: it meets K_j - K_(j-1). */
static void add_interval(const pf_kernel *kernel, pf_kernel_row *row, pf_kernel_row *total,
                         size_t lag, const double *mean)
{
    for (size_t i = 0; i < kernel->levels; i++) {
        double *weight = row->weight + i * kernel->lags + lag;
        weight[0] += mean[i];
        weight[-1] -= mean[i];
    }
    total->weight[lag] += mean[kernel->levels];
    total->weight[lag - 1] -= mean[kernel->levels];
}

/* The weights of one moment. column: scratch for two times the columns. */
static void fill_row(const pf_kernel *kernel, const pf_passed *passed, double moment,
                     double *column, pf_kernel_row *row, pf_kernel_row *total)
{
    double *later = column, *earlier = column + passed->columns;
    pf_passed_instant(passed, moment, later);
    for (size_t i = 0; i < kernel->levels; i++)
        row->weight[i * kernel->lags] = later[i];
    total->weight[0] = later[kernel->levels];
    pf_passed_at(passed, moment, later);
    size_t lag = 1;
    for (; lag < kernel->lags && kernel->lag[lag - 1] < moment; lag++) {
        pf_passed_at(passed, fmax(0, moment - kernel->lag[lag]), earlier);
        double width = kernel->lag[lag] - kernel->lag[lag - 1];
        for (size_t i = 0; i < passed->columns; i++)
            later[i] = (later[i] - earlier[i]) / width;
        add_interval(kernel, row, total, lag, later);
        double *swap = later;
        later = earlier;
        earlier = swap;
    }
    row->reach = total->reach = lag;
    row->moment = total->moment = moment;
    row->trace = total->trace = passed->trace->id;
}

static pf_kernel_row *next_row(pf_kernel_rows *rows, size_t width)
{
    pf_kernel_row *row = &rows->row[rows->count];
    row->weight = rows->weights + rows->count * width;
    rows->count++;
    return row;
}

static pf_status fill_trace(pf_kernel *kernel, pf_kernel_size size, const pf_trace *trace)
{
    pf_passed passed;
    pf_status status =
        pf_passed_init(&passed, trace, kernel->level[kernel->levels - 1], kernel->levels);
    double *column = pf_allocate(2 * (kernel->levels + 1), sizeof(double));
    if (!column) status = PF_NO_MEMORY;
    for (size_t number = 0; status == PF_OK && number < moments(kernel, size); number++) {
        double moment = moment_of(kernel, size, trace, number);
        if (!(moment >= 0)) continue;
        fill_row(kernel, &passed, moment, column,
                 next_row(&kernel->rows, kernel->levels * kernel->lags),
                 next_row(&kernel->total, kernel->lags));
    }
    pf_free(column);
    pf_passed_clear(&passed);
    return status;
}

static void mark_used(pf_kernel *kernel)
{
    size_t samples = kernel->levels * kernel->lags;
    for (size_t r = 0; r < kernel->rows.count; r++)
        for (size_t i = 0; i < samples; i++)
            if (kernel->rows.row[r].weight[i] != 0) kernel->used[i] = true;
}

static pf_status rows_allocate(pf_kernel_rows *rows, size_t count, size_t width)
{
    rows->row = pf_allocate(count, sizeof *rows->row);
    rows->weights = pf_allocate(count * width, sizeof(double));
    return rows->row && rows->weights ? PF_OK : PF_NO_MEMORY;
}

static pf_status allocate(pf_kernel *kernel, pf_kernel_size size, size_t traces)
{
    *kernel = (pf_kernel){.lags = size.lags, .levels = size.levels};
    size_t samples = size.lags * size.levels, rows = traces * moments(kernel, size);
    kernel->lag = pf_allocate(size.lags, sizeof(double));
    kernel->log_lag = pf_allocate(size.lags, sizeof(double));
    kernel->level = pf_allocate(size.levels, sizeof(double));
    kernel->log_level = pf_allocate(size.levels, sizeof(double));
    kernel->used = pf_allocate(samples, sizeof(bool));
    pf_status status = rows_allocate(&kernel->rows, rows, samples);
    if (status == PF_OK) status = rows_allocate(&kernel->total, rows, size.lags);
    bool all = kernel->lag && kernel->log_lag && kernel->level && kernel->log_level && kernel->used;
    return all ? status : PF_NO_MEMORY;
}

static pf_status fill(pf_kernel *kernel, pf_kernel_size size, const pf_trace *trace, size_t count)
{
    double top = 0;
    for (size_t t = 0; t < count; t++)
        for (size_t i = 0; i < trace[t].count; i++)
            top = fmax(top, trace[t].level[i]);
    place_lags(kernel, size.lag);
    place_levels(kernel, top);
    pf_status status = PF_OK;
    for (size_t t = 0; t < count && status == PF_OK; t++)
        status = fill_trace(kernel, size, &trace[t]);
    mark_used(kernel);
    return status;
}

static bool is_good(const pf_trace *trace, size_t count)
{
    for (size_t t = 0; t < count; t++)
        if (trace[t].count < 2 || !(duration_of(&trace[t]) > 0)) return false;
    return count > 0;
}

pf_status pf_kernel_init(pf_kernel *kernel, const pf_trace *trace, size_t count,
                         pf_kernel_size size)
{
    *kernel = (pf_kernel){0};
    if (size.lags < 2 || size.levels < 2 || !is_good(trace, count)) return PF_BAD_ARGUMENT;
    pf_status status = allocate(kernel, size, count);
    if (status == PF_OK) status = fill(kernel, size, trace, count);
    if (status != PF_OK) pf_kernel_clear(kernel);
    return status;
}

static void rows_clear(pf_kernel_rows *rows)
{
    pf_free(rows->row);
    pf_free(rows->weights);
    pf_free(rows->node);
    pf_free(rows->node_weights);
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
