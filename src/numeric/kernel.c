/* kernel.c: weights of a superposition integral on a grid of levels and lags.
**
** Q_i(t), the flow that has passed up to t counted with the hat function of level i, is all that
*the
** weights need of a waveform: the mean flow at level i in a window of time is a difference of it.
*/
#include "numeric/kernel.h"
#include "base/memory.h"

#include <math.h>
#include <string.h>

/* Passed flow per level (and of flow times level, as one more column) at every corner of a trace.
 */
typedef struct passed {
    const pf_trace *trace;
    size_t columns;
    double *amount; /* [corner][column] */
} passed;

/* Hat functions: the level lies between the nodes at and at + 1, with shares 1 - part and part. */
typedef struct hat {
    size_t at;
    double part;
} hat;

static hat find_hat(const pf_kernel *kernel, double level)
{
    if (kernel->levels == 1) return (hat){0, 0};
    double top = kernel->level[kernel->levels - 1];
    double place = level / top * (double)(kernel->levels - 1);
    size_t last = kernel->levels - 2;
    size_t at = place <= 0 ? 0 : (size_t)place;
    if (at > last) at = last;
    return (hat){at, fmin(1, fmax(0, place - (double)at))};
}

/* Adds weight * flow at a level to the columns of its two nodes and to the total. */
static void deposit(const pf_kernel *kernel, double *column, double level, double flow)
{
    hat node = find_hat(kernel, level);
    column[node.at] += flow * (1 - node.part);
    if (node.part > 0) column[node.at + 1] += flow * node.part;
    column[kernel->levels] += flow * level;
}

/* What passes between two corners, by Simpson's rule on pieces no longer than a step of the levels:
** exact for the product of two straight lines away from the nodes. */
static void pass_segment(const pf_kernel *kernel, const pf_trace *trace, size_t from,
                         double *column)
{
    double v0 = trace->level[from], dv = trace->level[from + 1] - v0;
    double f0 = trace->flow[from], df = trace->flow[from + 1] - f0;
    double duration = trace->time[from + 1] - trace->time[from];
    if (!(duration > 0)) return;
    double step = kernel->levels > 1 ? kernel->level[1] - kernel->level[0] : INFINITY;
    size_t pieces = 1 + (size_t)(fabs(dv) / step);
    double width = 1 / (double)pieces;
    for (size_t i = 0; i < pieces; i++) {
        for (int point = 0; point < 3; point++) {
            double x = ((double)i + 0.5 * point) * width;
            double share = duration * width * (point == 1 ? 4 : 1) / 6;
            deposit(kernel, column, v0 + dv * x, share * (f0 + df * x));
        }
    }
}

static pf_status passed_init(passed *sum, const pf_kernel *kernel, const pf_trace *trace)
{
    sum->trace = trace;
    sum->columns = kernel->levels + 1;
    sum->amount = pf_allocate(trace->count * sum->columns, sizeof(double));
    if (!sum->amount) return PF_NO_MEMORY;
    for (size_t i = 0; i + 1 < trace->count; i++) {
        double *next = sum->amount + (i + 1) * sum->columns;
        memcpy(next, next - sum->columns, sum->columns * sizeof *next);
        pass_segment(kernel, trace, i, next);
    }
    return PF_OK;
}

/* The last corner at or before a time, at most the last but one. */
static size_t find_corner(const pf_trace *trace, double time)
{
    size_t low = 0, high = trace->count - 1;
    while (high - low > 1) {
        size_t middle = (low + high) / 2;
        if (trace->time[middle] <= time)
            low = middle;
        else
            high = middle;
    }
    return low;
}

/* All columns at a time, clipped to the trace. */
static void passed_at(const passed *sum, double time, double *column)
{
    const pf_trace *trace = sum->trace;
    size_t corner = find_corner(trace, time);
    double start = trace->time[corner], duration = trace->time[corner + 1] - start;
    double share = duration > 0 ? (time - start) / duration : 1;
    share = fmin(1, fmax(0, share));
    const double *left = sum->amount + corner * sum->columns, *right = left + sum->columns;
    for (size_t i = 0; i < sum->columns; i++)
        column[i] = left[i] + share * (right[i] - left[i]);
}

/* Adds the weights of a mean flow over the lag interval that ends at lag j: it meets K_j - K_(j-1).
 */
static void add_interval(pf_kernel *kernel, size_t moment, size_t lag, const double *mean)
{
    for (size_t i = 0; i < kernel->levels; i++) {
        double *weight = kernel->weight + (moment * kernel->levels + i) * kernel->lags + lag;
        weight[0] += mean[i];
        weight[-1] -= mean[i];
    }
    double *total = kernel->total + moment * kernel->lags + lag;
    total[0] += mean[kernel->levels];
    total[-1] -= mean[kernel->levels];
}

/* f(m) K(v(m), 0+): the flow at the moment itself; at a jump, that behind it at the start and that
** before it everywhere else, since the jump down ends a stress and the jump up begins one. */
static void add_instant(pf_kernel *kernel, const pf_trace *trace, size_t moment)
{
    double time = kernel->moment[moment];
    size_t left = find_corner(trace, time);
    while (left > 0 && trace->time[left] >= time)
        left--;
    double duration = trace->time[left + 1] - trace->time[left];
    double share = duration > 0 ? (time - trace->time[left]) / duration : 1;
    double level = trace->level[left] + share * (trace->level[left + 1] - trace->level[left]);
    double flow = trace->flow[left] + share * (trace->flow[left + 1] - trace->flow[left]);
    hat node = find_hat(kernel, level);
    double *weight = kernel->weight + (moment * kernel->levels + node.at) * kernel->lags;
    weight[0] += flow * (1 - node.part);
    if (node.part > 0) weight[kernel->lags] += flow * node.part;
    kernel->total[moment * kernel->lags] += flow * level;
}

static void fill_moment(pf_kernel *kernel, const passed *sum, size_t moment, double *scratch)
{
    double *later = scratch, *earlier = scratch + sum->columns;
    double time = kernel->moment[moment];
    add_instant(kernel, sum->trace, moment);
    passed_at(sum, time, later);
    for (size_t lag = 1; lag < kernel->lags && kernel->lag[lag - 1] < time; lag++) {
        passed_at(sum, fmax(0, time - kernel->lag[lag]), earlier);
        double width = kernel->lag[lag] - kernel->lag[lag - 1];
        for (size_t i = 0; i < sum->columns; i++)
            later[i] = (later[i] - earlier[i]) / width;
        add_interval(kernel, moment, lag, later);
        double *swap = later;
        later = earlier;
        earlier = swap;
    }
}

static void mark_used(pf_kernel *kernel)
{
    size_t samples = kernel->levels * kernel->lags;
    for (size_t i = 0; i < kernel->moments * samples; i++)
        if (kernel->weight[i] != 0) kernel->used[i % samples] = true;
}

/* Squares of equal steps, see the head of kernel.h. */
static void place_lags(pf_kernel *kernel, double duration)
{
    for (size_t j = 0; j < kernel->lags; j++) {
        double share = (double)j / (double)(kernel->lags - 1);
        kernel->lag[j] = duration * share * share;
        kernel->log_lag[j] = log(kernel->lag[j]);
    }
    kernel->lag[kernel->lags - 1] = duration;
    kernel->log_lag[kernel->lags - 1] = log(duration);
}

static void place_levels(pf_kernel *kernel, const pf_trace *trace)
{
    double top = 0;
    for (size_t i = 0; i < trace->count; i++)
        top = fmax(top, trace->level[i]);
    for (size_t i = 0; i < kernel->levels; i++) {
        kernel->level[i] =
            kernel->levels == 1 ? top : top * (double)i / (double)(kernel->levels - 1);
        kernel->log_level[i] = log(kernel->level[i]);
    }
}

/* Moments: the lags counted from the start, and those that the caller asked for. */
static void place_moments(pf_kernel *kernel, pf_kernel_size size)
{
    memcpy(kernel->moment, kernel->lag, kernel->lags * sizeof *kernel->moment);
    for (size_t i = 0; i < size.extra_count; i++)
        kernel->moment[kernel->lags + i] = size.extra[i];
}

static pf_status allocate(pf_kernel *kernel, pf_kernel_size size)
{
    *kernel = (pf_kernel){.lags = size.lags, .levels = size.levels};
    kernel->moments = size.lags + size.extra_count;
    size_t samples = size.lags * size.levels;
    kernel->lag = pf_allocate(size.lags, sizeof(double));
    kernel->log_lag = pf_allocate(size.lags, sizeof(double));
    kernel->level = pf_allocate(size.levels, sizeof(double));
    kernel->log_level = pf_allocate(size.levels, sizeof(double));
    kernel->moment = pf_allocate(kernel->moments, sizeof(double));
    kernel->weight = pf_allocate(kernel->moments * samples, sizeof(double));
    kernel->total = pf_allocate(kernel->moments * size.lags, sizeof(double));
    kernel->used = pf_allocate(samples, sizeof(bool));
    bool all = kernel->lag && kernel->log_lag && kernel->level && kernel->log_level &&
               kernel->moment && kernel->weight && kernel->total && kernel->used;
    return all ? PF_OK : PF_NO_MEMORY;
}

static pf_status fill(pf_kernel *kernel, const pf_trace *trace, pf_kernel_size size)
{
    passed sum = {0};
    place_lags(kernel, trace->time[trace->count - 1]);
    place_levels(kernel, trace);
    place_moments(kernel, size);
    pf_status status = passed_init(&sum, kernel, trace);
    double *scratch = pf_allocate(2 * (kernel->levels + 1), sizeof(double));
    if (status == PF_OK && !scratch) status = PF_NO_MEMORY;
    for (size_t m = 0; status == PF_OK && m < kernel->moments; m++)
        fill_moment(kernel, &sum, m, scratch);
    if (status == PF_OK) mark_used(kernel);
    pf_free(scratch);
    pf_free(sum.amount);
    return status;
}

pf_status pf_kernel_init(pf_kernel *kernel, const pf_trace *trace, pf_kernel_size size)
{
    *kernel = (pf_kernel){0};
    if (trace->count < 2 || !(trace->time[trace->count - 1] > 0) || size.lags < 2 ||
        size.levels < 1)
        return PF_BAD_ARGUMENT;
    pf_status status = allocate(kernel, size);
    if (status == PF_OK) status = fill(kernel, trace, size);
    if (status != PF_OK) pf_kernel_clear(kernel);
    return status;
}

void pf_kernel_clear(pf_kernel *kernel)
{
    pf_free(kernel->lag);
    pf_free(kernel->log_lag);
    pf_free(kernel->level);
    pf_free(kernel->log_level);
    pf_free(kernel->moment);
    pf_free(kernel->weight);
    pf_free(kernel->total);
    pf_free(kernel->used);
    *kernel = (pf_kernel){0};
}

static double peak(const double *weight, const double *sample, size_t samples, const double *moment,
                   size_t moments, double *when)
{
    double highest = -INFINITY;
    for (size_t m = 0; m < moments; m++) {
        double answer = 0;
        for (size_t i = 0; i < samples; i++)
            answer += weight[m * samples + i] * sample[i];
        if (answer > highest) {
            highest = answer;
            *when = moment[m];
        }
    }
    return highest;
}

double pf_kernel_peak(const pf_kernel *kernel, const double *sample, double *when)
{
    return peak(kernel->weight, sample, kernel->levels * kernel->lags, kernel->moment,
                kernel->moments, when);
}

double pf_kernel_total_peak(const pf_kernel *kernel, const double *sample, double *when)
{
    return peak(kernel->total, sample, kernel->lags, kernel->moment, kernel->moments, when);
}
