/* safe_area.h: the safe operating area: how much current at a voltage for how long.
**
** A data sheet draws one curve per pulse width, at one case temperature (a family). The rules for
** reading between, beside and beyond the curves never give credit that the sheet does not:
**  - left of where a curve first reaches its highest current it stays there: what rises to it is
** the    Rds(on) line, no thermal limit;
**  - right of its last point a curve says nothing (0.5 % are allowed for reading the chart);
**  - between two pulse widths a power law in time; below the shortest no credit;
**  - beyond the longest the DC line, Zth and the slope in time bound the current (pf_soa_log_current).
*/
#ifndef DEVICE_SAFE_AREA_H
#define DEVICE_SAFE_AREA_H

#include <passfet/part.h>

#define PF_PULSES_MAX 64 /* finite pulse widths of one family */

/* One curve, from its highest current on: a slice of logarithms of voltage and current. */
typedef struct pf_soa_curve {
    double pulse_s, log_pulse; /* PF_DC: infinity */
    const double *log_v, *log_i;
    size_t points;
} pf_soa_curve;

/* All curves of one case temperature: the finite ones by pulse width, a DC line last. */
typedef struct pf_soa_family {
    double case_degC;
    double span_K; /* T_j,max - case_degC: the rise that each point of the family stands for */
    const pf_soa_curve *curve;
    size_t pulses; /* finite curves */
    bool dc;       /* curve[pulses] is a DC line */
} pf_soa_family;

/* A family read at one voltage: ln current over ln pulse width. NaN where a curve does not reach.
 */
typedef struct pf_soa_column {
    const pf_soa_family *family;
    double log_i[PF_PULSES_MAX];
    double log_dc; /* NaN where there is no DC line or it does not reach */
} pf_soa_column;

/* What is beyond the longest finite curve: how Zth grows from there, and whether the profile lets
** it be extended without a DC line. */
typedef struct pf_soa_beyond {
    double log_zth_ratio; /* ln (Z(t_m)/Z(t)), <= 0; NaN where no Zth is stated */
    bool extend;
} pf_soa_beyond;

/* Reads every curve of the family at a voltage >= 0 given with its logarithm. */
void pf_soa_column_at(const pf_soa_family *family, double log_vds, pf_soa_column *column);

/* Where a pulse width lies between the curves of a family: right of left by share of the way back.
** Found once for a grid of times, read at every voltage. */
typedef struct pf_soa_place {
    size_t left,
        right; /* the same where nothing is to be interpolated; right = pulses: beyond all */
    double share;
    double log_over; /* beyond the longest: ln (time/longest); -infinity where there is no finite
                        curve */
} pf_soa_place;

pf_soa_place pf_soa_place_of(const pf_soa_family *family, double log_time);

/* ln of the current allowed at a place; NaN where the sheet does not say.
** Equations (4) to (6) of docs/methods.md; interpolation in time as in TI SLUAAO2 and common practice. */
double pf_soa_log_current(const pf_soa_column *column, pf_soa_place place, pf_soa_beyond beyond);

/* The longest finite pulse as a logarithm; -infinity where there is none. */
double pf_soa_longest_log(const pf_soa_family *family);

#endif
