/* plan.c: what a profile says before any part is looked at: events, corners, waveforms, stall.
**
** Waveforms and weights are made here, once; evaluating parts only reads them.
*/
#include "stress/plan.h"
#include "base/memory.h"
#include "base/number.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

const char *pf_event_text(pf_event event)
{
    static const char *const text[] = {
#define PF_EVENT_NAME(code, name) name,
        PF_EVENT_LIST(PF_EVENT_NAME)
#undef PF_EVENT_NAME
    };
    return (unsigned)event < PF_EVENT_COUNT ? text[event] : "unknown event";
}

const char *pf_cause_text(pf_cause cause)
{
    static const char *const text[] = {
#define PF_CAUSE_WORDS(code, words) words,
        PF_CAUSE_LIST(PF_CAUSE_WORDS)
#undef PF_CAUSE_WORDS
    };
    return (unsigned)cause < PF_CAUSE_COUNT ? text[cause] : "unknown cause";
}

const char *pf_remark_text(unsigned bit)
{
    switch (bit) {
#define PF_REMARK_CASE(code, at, words)                                                            \
    case code:                                                                                     \
        return words;
        PF_REMARK_LIST(PF_REMARK_CASE)
#undef PF_REMARK_CASE
    default:
        return NULL;
    }
}

double pf_plan_hold_s(const pf_profile *profile)
{
    return profile->value[PF_FAULT_TIME].max;
}

static bool has_event(const pf_profile *profile, pf_event event)
{
    switch (event) {
    case PF_TRIP:
        return profile->stated[PF_TRIP_CURRENT];
    case PF_RETRY:
        return profile->stated[PF_RETRY_INTERVAL];
    case PF_SUPPLY_STEP:
        return profile->stated[PF_SUPPLY_STEP_FROM];
    case PF_TURN_OFF:
        return profile->stated[PF_SUPPLY_INDUCTANCE];
    case PF_RECORDED:
        return false;
    default:
        return true;
    }
}

/* Slew control without a current limit leaves the recharge after a supply step open. */
static bool step_is_open(const pf_profile *profile, pf_event event)
{
    return event == PF_SUPPLY_STEP && profile->control == PF_START_SLEW &&
           !profile->stated[PF_CURRENT_LIMIT];
}

pf_status pf_plan_starts(const pf_profile *profile, const pf_slot *slot, double crss_F,
                         pf_waves *waves)
{
    pf_start *start = pf_allocate(slot->corners.number, sizeof *start);
    if (!start) return PF_NO_MEMORY;
    for (unsigned i = 0; i < slot->corners.number; i++) {
        pf_corner corner;
        pf_corner_at(&slot->corners, profile, i, &corner);
        start[i] = pf_start_at(profile, slot->event, &corner, crss_F);
    }
    pf_status status =
        pf_waves_from_starts(waves, start, slot->corners.number, pf_plan_hold_s(profile));
    pf_free(start);
    return status;
}

static pf_status make_starts(pf_plan *plan, pf_slot *slot)
{
    if (step_is_open(&plan->profile, slot->event)) return PF_OK;
    return pf_plan_starts(&plan->profile, slot, PF_NONE, &slot->waves);
}

static pf_status add_event(pf_plan *plan, pf_event event)
{
    pf_slot *slot = &plan->slot[plan->count++];
    slot->event = event;
    snprintf(slot->name, sizeof slot->name, "%s", pf_event_text(event));
    pf_corners_init(&slot->corners, &plan->profile, event);
    bool starts = event == PF_START_UP || event == PF_SUPPLY_STEP;
    return starts ? make_starts(plan, slot) : PF_OK;
}

static pf_status add_capture(pf_plan *plan, const pf_capture *capture)
{
    pf_slot *slot = &plan->slot[plan->count++];
    slot->event = PF_RECORDED;
    snprintf(slot->name, sizeof slot->name, "%s", capture->name);
    pf_corners_init(&slot->corners, &plan->profile, PF_RECORDED);
    return pf_waves_from_capture(&slot->waves, capture);
}

/* Adds a sentence to the stall text. */
static void stall(pf_plan *plan, const char *sentence)
{
    size_t at = strlen(plan->stall);
    snprintf(plan->stall + at, sizeof plan->stall - at, "%s%s", at ? "; " : "", sentence);
}

static void note_stuck(pf_plan *plan, const pf_slot *slot, const pf_wave *wave)
{
    char text[400], volt[PF_UNIT_ROOM];
    double sign = plan->profile.negative_supply ? -1 : 1;
    pf_value_print(volt, sign * wave->stuck_V, PF_VOLTAGE, 4);
    snprintf(text, sizeof text,
             "%s: the output sticks at %s, where the load takes all that the start control gives",
             slot->name, volt);
    stall(plan, text);
}

static void note_timer(pf_plan *plan, const pf_slot *slot, double slowest_s)
{
    char text[400], slow[PF_UNIT_ROOM], timer[PF_UNIT_ROOM];
    double shortest_s = plan->profile.value[PF_FAULT_TIME].min;
    if (plan->profile.control == PF_START_SLEW || slowest_s <= shortest_s) return;
    pf_value_print(slow, slowest_s, PF_TIME, 4);
    pf_value_print(timer, shortest_s, PF_TIME, 4);
    snprintf(text, sizeof text,
             "%s: the slowest takes %s and the shortest fault time is %s: the timer cuts it off",
             slot->name, slow, timer);
    stall(plan, text);
}

/* What the starts of one event say about the profile. */
static void judge_starts(pf_plan *plan, const pf_slot *slot)
{
    const pf_wave *stuck = NULL;
    double slowest = 0, fastest = INFINITY;
    for (size_t i = 0; i < slot->waves.count; i++) {
        const pf_wave *wave = &slot->waves.wave[i];
        if (wave->stuck && (!stuck || wave->stuck_V < stuck->stuck_V)) stuck = wave;
        if (wave->stuck) continue;
        slowest = fmax(slowest, wave->duration_s);
        fastest = fmin(fastest, wave->duration_s);
    }
    if (stuck) note_stuck(plan, slot, stuck);
    if (slowest > 0) note_timer(plan, slot, slowest);
    if (slot->event != PF_START_UP) return;
    plan->slowest_s = stuck ? PF_NONE : slowest;
    plan->fastest_s = slowest > 0 ? fastest : PF_NONE;
}

static pf_status build(pf_plan *plan, const pf_capture *captures, size_t capture_count)
{
    pf_status status = PF_OK;
    for (int event = 0; event < PF_EVENT_COUNT && status == PF_OK; event++) {
        if (!has_event(&plan->profile, (pf_event)event)) continue;
        status = add_event(plan, (pf_event)event);
        if (status == PF_OK) judge_starts(plan, &plan->slot[plan->count - 1]);
    }
    for (size_t i = 0; i < capture_count && status == PF_OK; i++)
        status = add_capture(plan, &captures[i]);
    for (size_t i = 0; i < plan->count; i++)
        if (plan->slot[i].waves.samples > plan->samples)
            plan->samples = plan->slot[i].waves.samples;
    return status;
}

pf_status pf_plan_new(const pf_profile *profile, const pf_capture *captures, size_t capture_count,
                      pf_plan **plan, pf_error *error)
{
    *plan = NULL;
    if (capture_count > PF_SLOTS_MAX - PF_EVENT_COUNT)
        return pf_error_set(error, PF_BAD_ARGUMENT, "%zu captures; at most %d can be evaluated",
                            capture_count, PF_SLOTS_MAX - PF_EVENT_COUNT);
    pf_plan *made = pf_allocate(1, sizeof *made);
    if (!made) return pf_error_set(error, PF_NO_MEMORY, "no memory for the plan of a profile");
    made->profile = *profile;
    pf_status status = build(made, captures, capture_count);
    if (status != PF_OK) {
        pf_error_set(error, status, "%s while the events of profile %s are made",
                     pf_status_text(status), profile->name);
        pf_plan_free(made);
        return status;
    }
    *plan = made;
    return PF_OK;
}

void pf_plan_free(pf_plan *plan)
{
    if (!plan) return;
    for (size_t i = 0; i < plan->count; i++)
        pf_waves_clear(&plan->slot[i].waves);
    pf_free(plan);
}

pf_status pf_plan_prune(pf_plan *plan)
{
    pf_status status = PF_OK;
    for (size_t i = 0; i < plan->count; i++)
        for (size_t k = 0; k < plan->slot[i].waves.kernels && status == PF_OK; k++)
            status = pf_kernel_prune(&plan->slot[i].waves.kernel[k]);
    return status;
}

const pf_profile *pf_plan_profile(const pf_plan *plan)
{
    return &plan->profile;
}

const char *pf_plan_stall(const pf_plan *plan)
{
    return plan->stall[0] ? plan->stall : NULL;
}

double pf_plan_slowest_start_s(const pf_plan *plan)
{
    return plan->slowest_s;
}

double pf_plan_fastest_start_s(const pf_plan *plan)
{
    return plan->fastest_s;
}

size_t pf_plan_slots(const pf_plan *plan)
{
    return plan->count;
}

pf_event pf_plan_event(const pf_plan *plan, size_t slot)
{
    return plan->slot[slot].event;
}

const char *pf_plan_event_name(const pf_plan *plan, size_t slot)
{
    return plan->slot[slot].name;
}

unsigned pf_plan_corners(const pf_plan *plan, size_t slot)
{
    return plan->slot[slot].corners.number;
}

double pf_plan_corner_value(const pf_plan *plan, size_t slot, unsigned index,
                            pf_parameter parameter)
{
    pf_corner corner;
    pf_corner_at(&plan->slot[slot].corners, &plan->profile, index, &corner);
    return corner.value[parameter];
}
