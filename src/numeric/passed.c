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

/* The share of the way between two corners at which the level next meets a node, behind share x; at
** most last. */
static double next_node(const pf_passed *passed, double level, double rise, double x, double last)
{
    double step = passed->top / (double)(passed->levels - 1);
    double place = (level + rise * x) / step;
    if (rise == 0) return last;
    double node = rise > 0 ? floor(place + 1e-9) + 1 : ceil(place - 1e-9) - 1;
    return fmin(last, (node * step - level) / rise);
}

/* What passes from a corner to a share of the way to the next, from node to node of the levels:
** there all that is summed is at most quadratic, for which Simpson's rule is exact. */
static void pass_segment(const pf_passed *passed, size_t from, double last, double *column)
{
    const pf_trace *trace = passed->trace;
    double v0 = trace->level[from], dv = trace->level[from + 1] - v0;
    double f0 = trace->flow[from], df = trace->flow[from + 1] - f0;
    double duration = trace->time[from + 1] - trace->time[from], next;
    if (!(duration > 0)) return;
    for (double x = 0; x < last; x = next) {
        next = next_node(passed, v0, dv, x, last);
        for (int point = 0; point < 3; point++) {
            double at = x + 0.5 * point * (next - x);
            double share = duration * (next - x) * (point == 1 ? 4 : 1) / 6;
            deposit(passed, column, v0 + dv * at, share * (f0 + df * at));
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
        pass_segment(passed, i, 1, next);
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
    memcpy(column, left, passed->columns * sizeof *column);
    pass_segment(passed, corner, share, column);
}

/* Whether the later of two corners at one time is the stronger. */
static bool rises(const pf_trace *trace, size_t corner)
{
    const double *level = trace->level + corner, *flow = trace->flow + corner;
    return trace->time[corner] == trace->time[corner + 1] &&
           level[1] * flow[1] > level[0] * flow[0];
}

void pf_passed_instant(const pf_passed *passed, double time, double *column)
{
    const pf_trace *trace = passed->trace;
    size_t left = find_corner(trace, time);
    while (left > 0 && trace->time[left] >= time)
        left--;
    double share = share_of(trace, left, time);
    if (share == 1 && left + 2 < trace->count && rises(trace, left + 1)) left++;
    double level = trace->level[left] + share * (trace->level[left + 1] - trace->level[left]);
    double flow = trace->flow[left] + share * (trace->flow[left + 1] - trace->flow[left]);
    memset(column, 0, passed->columns * sizeof *column);
    deposit(passed, column, level, flow);
}
