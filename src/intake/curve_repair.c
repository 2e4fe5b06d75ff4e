/* curve_repair.c: sorting, duplicates, near duplicates, falls. O(n log n), O(n) where sorted. */
#include "intake/curve_repair.h"

#include <math.h>
#include <stdlib.h>

#define AVERAGED_WITHIN 1.03
#define RAISED_WITHIN 0.98
#define PULSES_MAX 64

typedef struct repairing {
    pf_raw_points *points;
    pf_repair *repair;
    pf_repair_fault *fault;
    void *context;
} repairing;

static int compare(double left, double right)
{
    return (left > right) - (left < right);
}

static int compare_points(const void *left, const void *right)
{
    const pf_raw_point *a = left, *b = right;
    int order = compare(a->case_degC, b->case_degC);
    if (order == 0) order = compare(a->pulse_s, b->pulse_s);
    if (order == 0) order = compare(a->x, b->x);
    return order ? order : (a->order > b->order) - (a->order < b->order);
}

static bool same_curve(const pf_raw_point *a, const pf_raw_point *b)
{
    return a->case_degC == b->case_degC && a->pulse_s == b->pulse_s;
}

/* Counts points that stood behind one with a higher coordinate, and sorts. zth: one curve by time.
 */
static void sort_points(repairing *work, bool zth)
{
    pf_raw_points *points = work->points;
    bool sorted = true;
    for (size_t i = 1; i < points->count; i++) {
        const pf_raw_point *now = &points->item[i], *before = now - 1;
        if (compare_points(before, now) > 0) {
            sorted = false;
            work->repair->sorted += zth || same_curve(before, now);
        }
    }
    if (!sorted) qsort(points->item, points->count, sizeof *points->item, compare_points);
}

static void report(repairing *work, uint32_t line, const pf_fault *fault)
{
    work->repair->faults++;
    work->fault(work->context, line, fault);
}

static uint32_t last_line(const pf_raw_point *point, size_t count)
{
    uint32_t line = 0;
    for (size_t i = 0; i < count; i++)
        if (point[i].line > line) line = point[i].line;
    return line;
}

/* Points [from, to) share a coordinate: what is left of them goes to *kept. */
static void settle_group(repairing *work, size_t from, size_t to, bool edge, size_t *kept,
                         const char *what)
{
    pf_raw_point *item = work->points->item;
    double least = item[from].y, most = item[from].y, sum = 0;
    for (size_t i = from; i < to; i++) {
        least = fmin(least, item[i].y);
        most = fmax(most, item[i].y);
        sum += item[i].y;
    }
    size_t count = to - from;
    if (count > 1 && most > least * AVERAGED_WITHIN && !edge) {
        pf_fault fault;
        pf_fault_set(&fault, "one value, or values within 3 %", "%s: %g and %g", what, least, most);
        report(work, last_line(item + from, count), &fault);
    }
    if (edge && most > least * AVERAGED_WITHIN) {
        for (size_t i = from; i < to; i++)
            item[(*kept)++] = item[i];
        return;
    }
    if (most > least) {
        work->repair->averaged += count;
        item[from].y = sum / (double)count;
    } else {
        work->repair->dropped += count - 1;
    }
    item[(*kept)++] = item[from];
}

static void check_signs(repairing *work, size_t from, size_t to)
{
    const pf_raw_point *item = work->points->item;
    for (size_t i = from + 1; i < to; i++) {
        if (item[i].negative_x == item[from].negative_x &&
            item[i].negative_y == item[from].negative_y)
            continue;
        pf_fault fault;
        pf_fault_set(&fault, "one sign throughout; are these logarithms?",
                     "a curve with positive and negative values");
        report(work, last_line(item + from, to - from), &fault);
        return;
    }
}

/* Whole numbers that rise from end to end, far from the origin: rows counted from a picture's top.
 */
static bool looks_like_pixels(const pf_raw_point *point, size_t count)
{
    if (count < 3) return false;
    for (size_t i = 0; i < count; i++) {
        if (point[i].x < 20 || point[i].x != floor(point[i].x) || point[i].y != floor(point[i].y))
            return false;
        if (i > 0 && point[i].y <= point[i - 1].y) return false;
    }
    return true;
}

static void suspect(pf_repair *repair, const char *why)
{
    repair->suspicious = true;
    repair->why = why;
}

static void repair_curve(repairing *work, size_t from, size_t to, size_t *kept)
{
    pf_raw_point *item = work->points->item;
    check_signs(work, from, to);
    for (size_t at = from; at < to;) {
        size_t next = at + 1;
        while (next < to && item[next].x == item[at].x)
            next++;
        settle_group(work, at, next, next == to, kept, "two currents at one voltage");
        at = next;
    }
}

static void check_pulse_count(repairing *work)
{
    const pf_raw_point *item = work->points->item;
    size_t pulses = 1;
    for (size_t i = 1; i < work->points->count; i++) {
        if (same_curve(&item[i], &item[i - 1])) continue;
        pulses = item[i].case_degC == item[i - 1].case_degC ? pulses + 1 : 1;
        if (pulses != PULSES_MAX + 1) continue;
        pf_fault fault;
        pf_fault_set(&fault, "one curve per pulse width of the chart",
                     "more than %d pulse widths at one case temperature", PULSES_MAX);
        report(work, item[i].line, &fault);
    }
}

void pf_soa_repair(pf_raw_points *points, pf_repair *repair, pf_repair_fault *fault, void *context)
{
    repairing work = {points, repair, fault, context};
    size_t kept = 0;
    double highest = 0;
    sort_points(&work, false);
    check_pulse_count(&work);
    for (size_t from = 0; from < points->count;) {
        size_t to = from + 1, first = kept;
        while (to < points->count && same_curve(&points->item[from], &points->item[to]))
            to++;
        repair_curve(&work, from, to, &kept);
        if (looks_like_pixels(points->item + first, kept - first))
            suspect(repair,
                    "whole numbers that rise from end to end: these look like the pixels of "
                    "a picture");
        highest = fmax(highest, points->item[kept - 1].x);
        from = to;
    }
    points->count = kept;
    if (kept > 0 && highest <= 3.5)
        suspect(repair, "no voltage above 3.5 V: these look like logarithms");
}

void pf_zth_repair(pf_raw_points *points, pf_repair *repair, pf_repair_fault *fault, void *context)
{
    repairing work = {points, repair, fault, context};
    pf_raw_point *item = points->item;
    size_t kept = 0;
    sort_points(&work, true);
    for (size_t from = 0; from < points->count;) {
        size_t to = from + 1;
        while (to < points->count && item[to].pulse_s == item[from].pulse_s)
            to++;
        settle_group(&work, from, to, false, &kept, "two values at one time");
        from = to;
    }
    points->count = kept;
    for (size_t i = 1; i < kept; i++) {
        if (item[i].y >= item[i - 1].y) continue;
        if (item[i].y < item[i - 1].y * RAISED_WITHIN) {
            pf_fault wrong;
            pf_fault_set(&wrong, "a curve that rises with time, or falls by no more than 2 %",
                         "Zth falls from %g to %g K/W", item[i - 1].y, item[i].y);
            report(&work, item[i].line, &wrong);
        }
        item[i].y = item[i - 1].y;
        repair->raised++;
    }
}
