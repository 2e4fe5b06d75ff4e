/* curve_cell.h: curves written in one cell of a parts table. */
#ifndef INTAKE_CURVE_CELL_H
#define INTAKE_CURVE_CELL_H

#include "intake/value.h"

#include <passfet/part.h>
#include <stdint.h>

/* One point of a curve as it was read, in the order of the file. */
typedef struct pf_raw_point {
    double case_degC, pulse_s; /* SOA; pulse_s is the time of Zth and the time constant of Foster */
    double x, y;               /* SOA: V and A; others: y in K/W */
    uint32_t line;
    uint32_t order : 30;
    uint32_t negative_x : 1, negative_y : 1; /* signs that were dropped */
} pf_raw_point;

typedef struct pf_raw_points {
    pf_raw_point *item;
    size_t count, capacity;
} pf_raw_points;

/* Appends a point; its order is its place. PF_LIMIT beyond PF_CURVE_POINTS_MAX. */
pf_status pf_raw_points_add(pf_raw_points *points, pf_raw_point point) PF_MUST_USE;
void pf_raw_points_clear(pf_raw_points *points);

/* A pulse width: a time with its unit, or `dc`. */
pf_status pf_pulse_read(pf_slice text, const pf_value_rule *rule, pf_number_style *style,
                        double *pulse_s, pf_fault *fault) PF_MUST_USE;

/* `1ms 1:400 10:100 | dc 1:120 | 1ms@75 1:250`: pulse width, then V:A pairs; `@` names another case
** temperature in degC than case_degC. Points are appended. PF_BAD_INPUT with the first thing that is
** wrong. */
pf_status pf_soa_cell_read(pf_slice text, double case_degC, pf_number_style *style,
                           pf_raw_points *points, pf_fault *fault) PF_MUST_USE;

/* What stands between bars of a cell; *text goes on behind the bar. False behind the last. */
bool pf_curve_cell_next(pf_slice *text, pf_slice *curve);

/* Words in front of a curve of a `zth` cell, taken off: `ambient` or `case` sets *path, `foster` sets
** *foster. */
void pf_zth_cell_words(pf_slice *curve, pf_thermal_path *path, bool *foster);

/* `10us:0.01 1ms:0.1`: time:K/W pairs; with foster `0.1:10us`: K/W:time constant. */
pf_status pf_zth_cell_read(pf_slice text, bool foster, pf_number_style *style,
                           pf_raw_points *points, pf_fault *fault) PF_MUST_USE;

#endif
