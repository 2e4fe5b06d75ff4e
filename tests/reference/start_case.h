/* start_case.h: a profile's start as the integrator takes it, at its typical values. */
#ifndef REFERENCE_START_CASE_H
#define REFERENCE_START_CASE_H

#include "stress/start_up.h"

#include <math.h>
#include <passfet/profile.h>

static inline double start_or(double value, double otherwise)
{
    return isnan(value) ? otherwise : value;
}

static inline pf_start start_case(const pf_profile *profile)
{
    const pf_interval *value = profile->value;
    return (pf_start){
        .control = profile->control,
        .supply_V = value[PF_SUPPLY_VOLTAGE].typ,
        .capacitance_F = value[PF_OUTPUT_CAPACITANCE].typ,
        .slew_Vps = value[PF_OUTPUT_SLEW].typ,
        .current_limit_A = value[PF_CURRENT_LIMIT].typ,
        .power_limit_W = value[PF_POWER_LIMIT].typ,
        .foldback_A = value[PF_FOLDBACK_CURRENT].typ,
        .load_A = start_or(value[PF_START_LOAD_CURRENT].typ, 0),
        .load_ohm = start_or(value[PF_START_LOAD_RESISTANCE].typ, INFINITY),
        .load_W = start_or(value[PF_START_LOAD_POWER].typ, 0),
        .load_above_V = start_or(value[PF_START_LOAD_ABOVE].typ, 0),
    };
}

#endif
