/* passed.c: flow that has passed at every level. */
#include "numeric/passed.h"
#include "base/memory.h"

#include <math.h>
#include <string.h>

/* The level lies between the nodes at and at + 1, with shares 1 - part and part. */
typedef struct hat {
    size_t at;
    double part;
} hat;

static hat find_hat(const pf_passed *passed, double level)
{
    size_t last = passed->levels - 2;
    double place = level / passed->top * (double)(passed->levels - 1);
    if (!(place > 0)) return (hat){0, 0};
    size_t at = place >= (double)last ? last : (size_t)place;
    return (hat){at, fmin(1, place - (double)at)};
}

static void deposit(const pf_passed *passed, double *column, double level, double flow)
{
    hat node = find_hat(passed, level);
    column[node.at] += flow * (1 - node.part);
    column[node.at + 1] += flow * node.part;
    column[passed->levels] += flow * level;
}

/* What passes between two corners, by Simpson's rule on pieces no longer than a step of the levels:
** exact for the product of two straight lines away from the nodes. */
static void pass_segment(const pf_passed *passed, size_t from, double *column)
{
    const pf_trace *trace = passed->trace;
    double v0 = trace->level[from], dv = trace->level[from + 1] - v0;
    double f0 = trace->flow[from], df = trace->flow[from + 1] - f0;
    double duration = trace->time[from + 1] - trace->time[from];
    if (!(duration > 0)) return;
    size_t pieces = 1 + (size_t)(fabs(dv) / passed->top * (double)(passed->levels - 1));
    double width = 1 / (double)pieces;
    for (size_t i = 0; i < pieces; i++) {
        for (int point = 0; point < 3; point++) {
            double x = ((double)i + 0.5 * point) * width;
            double share = duration * width * (point == 1 ? 4 : 1) / 6;
            deposit(passed, column, v0 + dv * x, share * (f0 + df * x));
        }
    }
}

pf_status pf_passed_init(pf_passed *passed, const pf_trace *trace, double top, size_t levels)
{
    *passed = (pf_passed){trace, top > 0 ? top : 1, levels, levels + 1, NULL};
    passed->amount = pf_allocate(trace->count * passed->columns, sizeof(double));
    if (!passed->amount) return PF_NO_MEMORY;
    for (size_t i = 0; i + 1 < trace->count; i++) {
        double *next = passed->amount + (i + 1) * passed->columns;
        memcpy(next, next - passed->columns, passed->columns * sizeof *next);
        pass_segment(passed, i, next);
    }
    return PF_OK;
}

void pf_passed_clear(pf_passed *passed)
{
    pf_free(passed->amount);
    passed->amount = NULL;
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

static double share_of(const pf_trace *trace, size_t corner, double time)
{
    double start = trace->time[corner], duration = trace->time[corner + 1] - start;
    return duration > 0 ? fmin(1, fmax(0, (time - start) / duration)) : 1;
}

void pf_passed_at(const pf_passed *passed, double time, double *column)
{
    size_t corner = find_corner(passed->trace, time);
    double share = share_of(passed->trace, corner, time);
    const double *left = passed->amount + corner * passed->columns;
    const double *right = left + passed->columns;
    for (size_t i = 0; i < passed->columns; i++)
        column[i] = left[i] + share * (right[i] - left[i]);
}

void pf_passed_instant(const pf_passed *passed, double time, double *column)
{
    const pf_trace *trace = passed->trace;
    size_t left = find_corner(trace, time);
    while (left > 0 && trace->time[left] >= time)
        left--;
    double share = share_of(trace, left, time);
    double level = trace->level[left] + share * (trace->level[left + 1] - trace->level[left]);
    double flow = trace->flow[left] + share * (trace->flow[left + 1] - trace->flow[left]);
    memset(column, 0, passed->columns * sizeof *column);
    deposit(passed, column, level, flow);
}
