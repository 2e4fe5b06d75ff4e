/* on_resistance.h: Rds(on) at the gate drive at hand and at temperature. */
#ifndef DEVICE_ON_RESISTANCE_H
#define DEVICE_ON_RESISTANCE_H

#include <passfet/part.h>

/* Rds(on) at T_j,max over that at 25 degC, assumed where the sheet does not say. */
#define PF_HOT_RATIO_ASSUMED 2.0

/* Rds(on) as a straight line over junction temperature: R(T) = cold_ohm (1 + slope (T - 25)).
** Equation (1) of docs/methods.md; common practice. */
typedef struct pf_on_resistance {
    double cold_ohm;    /* maximum at 25 degC; NaN where no rated gate drive is reached */
    double drive_V;     /* the rated gate drive that it is stated for */
    double slope_pK;    /* per K; NaN where T_j,max is not stated */
    bool ratio_assumed; /* whether PF_HOT_RATIO_ASSUMED was used */
} pf_on_resistance;

/* The value stated at the highest rated gate drive that gate_V still reaches; a gate drive between
** two rated ones gets the lower one's value, never an interpolated one. */
pf_on_resistance pf_on_resistance_at(const pf_part *part, double gate_V);

double pf_on_resistance_hot(const pf_on_resistance *rdson, double junction_degC);

#endif
