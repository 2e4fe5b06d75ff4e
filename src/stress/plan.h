/* plan.h: inside a pf_plan. */
#ifndef STRESS_PLAN_H
#define STRESS_PLAN_H

#include "stress/corners.h"
#include "stress/response.h"
#include "stress/wave.h"

#include <passfet/stress.h>

typedef struct pf_slot {
    pf_event event;
    char name[128];
    pf_corners corners;
    pf_waves waves; /* of starts and recordings; else empty */
} pf_slot;

struct pf_plan {
    pf_profile profile;
    size_t count;
    pf_slot slot[PF_SLOTS_MAX];
    size_t samples; /* the most that any waves need */
    double slowest_s, fastest_s;
    char stall[1024]; /* "" when the card starts */
};

struct pf_scratch {
    pf_model model[PF_LANES];
    pf_bench bench;
};

/* The waves of a start_up or supply_step slot; crss_F as in pf_start_at. */
pf_status pf_plan_starts(const pf_profile *profile, const pf_slot *slot, double crss_F,
                         pf_waves *waves);

/* Until when an output that sticks is held: the longest fault time. */
double pf_plan_hold_s(const pf_profile *profile);

/* T_allow of a part: T_j,max, or lower where the profile or its derating rule says so. */
double pf_allowed_degC(const pf_profile *profile, const pf_part *part);

#endif
