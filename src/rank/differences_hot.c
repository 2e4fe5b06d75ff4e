/* differences_hot.c: hot SOA and Zth of two parts at the events and over the voltage. */
#include "base/number.h"
#include "rank/comparison.h"
#include "rank/reading.h"
#include "stress/plan.h"

#include <math.h>
#include <stdio.h>

/* What one part allows at (V, t) from its own running junction. */
typedef struct hot {
    double current_A; /* derated; NaN where it cannot be read */
    double zth_KpW;
    pf_thermal_path path;
} hot;

static pf_status hot_at(const pf_pair *pair, const pf_part *part, const pf_stress *stress,
                        double start_degC, double vds_V, double time_s, hot *found)
{
    pf_reading reading;
    pf_status status = pf_model_load(pair->scratch->model, part);
    if (status != PF_OK) return status;
    pf_subject subject = pf_reading_subject(pair->scratch->model, start_degC,
                                            pf_plan_profile(pair->plan)->extend_soa);
    pf_reading_take(&subject, vds_V, time_s, &reading);
    double derating = (stress->allowed_degC - start_degC) / reading.span_K;
    found->current_A = reading.current_A * (derating < 0 ? 0 : derating);
    found->zth_KpW = pf_zth_at(subject.zth, time_s, log(time_s));
    found->path = subject.zth->path;
    return PF_OK;
}

/* Both at one point, each from its start temperature in a slot. */
static pf_status both_at(const pf_pair *pair, size_t slot, double vds_V, double time_s, hot *old,
                         hot *new)
{
    const pf_stress *of_old = &pair->result->reference.stress;
    const pf_stress *of_new = &pair->result->candidate.stress;
    pf_status status =
        hot_at(pair, pair->reference, of_old, of_old->outcome[slot].start_degC, vds_V, time_s, old);
    if (status != PF_OK) return status;
    return hot_at(pair, pair->candidate, of_new, of_new->outcome[slot].start_degC, vds_V, time_s,
                  new);
}

static void add_currents(const pf_pair *pair, const char *where, double vds_V, double time_s,
                         const hot *old, const hot *new)
{
    char volt[PF_UNIT_ROOM], time[PF_UNIT_ROOM];
    pf_value_print(volt, vds_V, PF_VOLTAGE, 4);
    pf_value_print(time, time_s, PF_TIME, 4);
    pf_difference *added =
        pf_difference_add(pair, PF_STAGE_HOT, "%s: hot SOA at %s, %s", where, volt, time);
    added->quantity = PF_CURRENT;
    added->reference = old->current_A;
    added->candidate = new->current_A;
    added->ratio = new->current_A / old->current_A;
    added->flagged = added->ratio < PF_SOA_SHARE_FLAGGED;
}

static void add_zth(const pf_pair *pair, double time_s, const hot *old, const hot *new)
{
    char time[PF_UNIT_ROOM];
    pf_value_print(time, time_s, PF_TIME, 4);
    pf_difference *added = pf_difference_add(pair, PF_STAGE_HOT, "Zth at %s", time);
    added->quantity = PF_THERMAL;
    added->reference = old->zth_KpW;
    added->candidate = new->zth_KpW;
    bool stated = pf_is_stated(old->zth_KpW) && pf_is_stated(new->zth_KpW);
    if (stated && old->path != new->path)
        added->why = "one to case, one to ambient";
    else
        added->ratio = new->zth_KpW / old->zth_KpW;
}

static bool is_rectangle(pf_event event)
{
    return event == PF_SHORT_AT_START || event == PF_SHORT_RUNNING || event == PF_TRIP;
}

/* V and t of a rectangle at the candidate's worst corner, where it is not known the reference's. */
static pf_status add_rectangle(const pf_pair *pair, size_t slot)
{
    pf_event event = pf_plan_event(pair->plan, slot);
    const pf_outcome *old_outcome = &pair->result->reference.stress.outcome[slot];
    const pf_outcome *new_outcome = &pair->result->candidate.stress.outcome[slot];
    bool known = pf_is_stated(new_outcome->soa_margin);
    unsigned corner = known ? new_outcome->corner : old_outcome->corner;
    double vds_V = pf_plan_corner_value(pair->plan, slot, corner, PF_SUPPLY_VOLTAGE);
    double time_s = pf_plan_corner_value(pair->plan, slot, corner,
                                         event == PF_TRIP ? PF_TRIP_TIME : PF_FAULT_TIME);
    hot old, new;
    pf_status status = both_at(pair, slot, vds_V, time_s, &old, &new);
    if (status != PF_OK) return status;
    add_currents(pair, pf_plan_event_name(pair->plan, slot), vds_V, time_s, &old, &new);
    add_zth(pair, time_s, &old, &new);
    return PF_OK;
}

/* Events that are no rectangle: their margins, which the verdict rests on. */
static void add_margin(const pf_pair *pair, size_t slot)
{
    double old = pair->result->reference.stress.outcome[slot].soa_margin;
    double new = pair->result->candidate.stress.outcome[slot].soa_margin;
    pf_difference *added = pf_difference_add(pair, PF_STAGE_HOT, "%s: SOA margin",
                                             pf_plan_event_name(pair->plan, slot));
    added->reference = old;
    added->candidate = new;
    added->ratio = new / old;
    added->flagged = added->ratio < PF_SOA_SHARE_FLAGGED;
}

/* From 1 V to V_in,max in steps of 1, 2, 5, at one time. */
static pf_status add_voltages(const pf_pair *pair, size_t slot, double time_s)
{
    static const double steps[] = {1, 2, 5, 10, 20, 50, 100, 200, 500, 1000, 2000};
    double top_V = pf_plan_profile(pair->plan)->value[PF_SUPPLY_VOLTAGE].max;
    pf_status status = PF_OK;
    for (size_t i = 0; i < sizeof steps / sizeof *steps && status == PF_OK; i++) {
        bool last = steps[i] >= top_V;
        double vds_V = last ? top_V : steps[i];
        hot old, new;
        status = both_at(pair, slot, vds_V, time_s, &old, &new);
        if (status == PF_OK) add_currents(pair, "over V", vds_V, time_s, &old, &new);
        if (last) break;
    }
    return status;
}

pf_status pf_differences_hot(const pf_pair *pair)
{
    const pf_profile *profile = pf_plan_profile(pair->plan);
    pf_status status = PF_OK;
    for (size_t slot = 0; slot < pf_plan_slots(pair->plan) && status == PF_OK; slot++) {
        pf_event event = pf_plan_event(pair->plan, slot);
        if (is_rectangle(event))
            status = add_rectangle(pair, slot);
        else if (event != PF_RUNNING && event != PF_TURN_OFF)
            add_margin(pair, slot);
    }
    for (size_t slot = 0; slot < pf_plan_slots(pair->plan) && status == PF_OK; slot++) {
        pf_event event = pf_plan_event(pair->plan, slot);
        if (event == PF_SHORT_RUNNING)
            status = add_voltages(pair, slot, profile->value[PF_FAULT_TIME].max);
        if (event == PF_TRIP) status = add_voltages(pair, slot, profile->value[PF_TRIP_TIME].max);
    }
    return status;
}
