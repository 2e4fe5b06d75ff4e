/* start_up.h: charging C_out through the FET, as a waveform.
**
**     C_out dV_out/dt = I_D - I_load(V_out),   V_DS = V_in - V_out       equation (10)
**
** Neither side knows the time, so the equation is integrated over V_out, not over time: dt = C
** dV/(I_D - I_load), by three-point Gauss-Legendre quadrature on cells whose ends are the kinks of I_D and
** I_load. That is exact for a constant current and needs no step control.
*/
#ifndef STRESS_START_UP_H
#define STRESS_START_UP_H

#include <passfet/error.h>
#include <passfet/profile.h>
#include <stdbool.h>

/* Cells that a start is integrated in at the most, not counting those that kinks add. */
#define PF_START_CELLS 256

/* One corner of a start: every value a number, or as said. */
typedef struct pf_start {
    pf_start_control control;
    double supply_V, from_V, capacitance_F;
    double slew_Vps;        /* slew only */
    double current_limit_A; /* NaN: none (slew only) */
    double power_limit_W;   /* power limit only */
    double foldback_A;      /* foldback only */
    double load_A;          /* 0: none */
    double load_ohm;        /* infinity: none */
    double load_W;          /* 0: none */
    double load_above_V;
    double step_V; /* V_DS is stepped through multiples of this; 0: a part of its own range */
} pf_start;

/* V_DS and I_D over time: straight lines between the points, equal times make a jump. */
typedef struct pf_waveform {
    size_t count, capacity;
    double *time_s, *vds_V, *id_A;
    double duration_s, energy_J, peak_power_W, peak_current_A;
    bool stuck; /* the output stays at stuck_V for good */
    double stuck_V;
    bool unbounded; /* nothing limits the current of the load: no waveform */
} pf_waveform;

/* What the control lets through at an output voltage; NaN power or current where unbounded. */
double pf_start_current(const pf_start *start, double out_V, bool load_on);

void pf_waveform_clear(pf_waveform *wave);

/* The waveform from from_V to supply_V. An output that sticks is held there until hold_s; one that
** only creeps up to where it sticks is cut 0.1 % of supply_V before it. PF_NO_MEMORY. */
pf_status pf_start_waveform(const pf_start *start, double hold_s, pf_waveform *wave) PF_MUST_USE;

#endif
