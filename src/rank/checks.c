/* checks.c: what a part must meet, and the verdict. */
#include "base/number.h"

#include <math.h>
#include <passfet/ranking.h>
#include <stdio.h>
#include <string.h>

const char *pf_verdict_text(pf_verdict verdict)
{
    static const char *const text[] = {"pass", "unassessed", "fail"};
    return text[verdict];
}

typedef struct check_fact {
    const char *words;
    pf_quantity quantity;
} check_fact;

static const check_fact facts[] = {
#define PF_CHECK_FACT(code, words, quantity) {words, quantity},
    PF_CHECK_LIST(PF_CHECK_FACT)
#undef PF_CHECK_FACT
};

const char *pf_check_quantity_text(pf_check_kind kind)
{
    return facts[kind].words;
}

pf_quantity pf_check_quantity(pf_check_kind kind)
{
    return facts[kind].quantity;
}

static void add(pf_assessment *to, pf_check check)
{
    to->check[to->check_count++] = check;
}

/* A value that must stay within its limit. */
static void add_limit(pf_assessment *to, pf_check_kind kind, int slot, double value, double limit,
                      const char *missing, pf_cause cause)
{
    pf_verdict verdict = value <= limit ? PF_PASS : value > limit ? PF_FAIL : PF_UNASSESSED;
    bool open = verdict == PF_UNASSESSED;
    add(to, (pf_check){kind, slot, verdict, open ? cause : PF_CAUSE_NONE, open ? missing : NULL,
                       value, limit});
}

static void check_identity(pf_assessment *to, const pf_profile *profile, const pf_part *part)
{
    bool banned = part->status && strcmp(part->status, "banned") == 0;
    if (banned) add(to, (pf_check){PF_CHECK_STATUS, -1, PF_FAIL, PF_CAUSE_NONE, NULL, 0, 0});
    pf_verdict fits = part->polarity == profile->polarity ? PF_PASS : PF_FAIL;
    if (part->polarity == PF_POLARITY_NONE) fits = PF_UNASSESSED;
    add(to,
        (pf_check){PF_CHECK_POLARITY, -1, fits, PF_CAUSE_NONE,
                   fits == PF_UNASSESSED ? "polarity" : NULL, part->polarity, profile->polarity});
}

static void check_ratings(pf_assessment *to, const pf_profile *profile, const pf_part *part)
{
    const pf_interval *value = profile->value;
    double vds = fmax(value[PF_SUPPLY_VOLTAGE].max, value[PF_CLAMP_VOLTAGE].max);
    double share = value[PF_RUNNING_CURRENT].max / value[PF_PARALLEL_COUNT].min;
    add_limit(to, PF_CHECK_VDS, -1, vds, value[PF_VOLTAGE_USE].min * part->vds_max_V, "vds_max",
              PF_CAUSE_NONE);
    add_limit(to, PF_CHECK_VGS, -1, value[PF_GATE_DRIVE].max,
              value[PF_GATE_USE].min * part->vgs_max_V, "vgs_max", PF_CAUSE_NONE);
    add_limit(to, PF_CHECK_ID_CONT, -1, share, value[PF_CURRENT_USE].min * part->id_cont_A,
              "id_cont", PF_CAUSE_NONE);
}

static void check_running(pf_assessment *to, int slot)
{
    const pf_stress *stress = &to->stress;
    add_limit(to, PF_CHECK_RUNNING, slot, stress->running_degC, stress->allowed_degC, NULL,
              stress->running_cause);
    if (stress->running_cause == PF_CAUSE_RUNAWAY)
        to->check[to->check_count - 1].cause = PF_CAUSE_RUNAWAY;
}

static void check_margin(pf_assessment *to, int slot, double required)
{
    const pf_outcome *outcome = &to->stress.outcome[slot];
    double margin = outcome->soa_margin;
    pf_verdict verdict = margin >= required ? PF_PASS : margin < required ? PF_FAIL : PF_UNASSESSED;
    add(to, (pf_check){PF_CHECK_SOA_MARGIN, slot, verdict, outcome->cause, NULL, margin, required});
}

static void check_avalanche(pf_assessment *to, const pf_profile *profile, const pf_part *part,
                            int slot)
{
    const pf_outcome *outcome = &to->stress.outcome[slot];
    if (profile->stated[PF_CLAMP_VOLTAGE]) return;
    pf_cause cause = outcome->cause;
    if (cause == PF_CAUSE_NONE && !pf_is_stated(part->avalanche_energy_J))
        cause = PF_CAUSE_NO_AVALANCHE;
    if (cause == PF_CAUSE_NONE && !pf_is_stated(part->vds_max_V)) cause = PF_CAUSE_NO_VDS_MAX;
    add_limit(to, PF_CHECK_AVALANCHE, slot, outcome->avalanche_J, outcome->avalanche_limit_J, NULL,
              cause);
    if (isinf(outcome->avalanche_J)) to->check[to->check_count - 1].cause = PF_CAUSE_NO_HEADROOM;
}

static void check_event(pf_assessment *to, const pf_plan *plan, const pf_part *part, int slot)
{
    const pf_profile *profile = pf_plan_profile(plan);
    const pf_outcome *outcome = &to->stress.outcome[slot];
    pf_event event = pf_plan_event(plan, (size_t)slot);
    if (event == PF_RUNNING) {
        check_running(to, slot);
        return;
    }
    if (event == PF_TURN_OFF) {
        check_avalanche(to, profile, part, slot);
    } else {
        check_margin(to, slot, profile->value[PF_REQUIRED_MARGIN].max);
        add_limit(to, PF_CHECK_JUNCTION, slot, outcome->peak_junction_degC, to->stress.allowed_degC,
                  NULL, outcome->junction_cause);
    }
    bool rated = pf_is_stated(part->id_pulse_A);
    add_limit(to, PF_CHECK_ID_PULSE, slot, outcome->peak_current_A, part->id_pulse_A,
              rated ? NULL : "id_pulse", outcome->cause);
}

/* All checks of an evaluated part, and the verdict: the worst of theirs. */
static void judge(pf_assessment *on, const pf_plan *plan, const pf_part *part)
{
    on->check_count = 0;
    check_identity(on, pf_plan_profile(plan), part);
    check_ratings(on, pf_plan_profile(plan), part);
    for (size_t slot = 0; slot < pf_plan_slots(plan); slot++)
        check_event(on, plan, part, (int)slot);
    on->verdict = PF_PASS;
    for (size_t i = 0; i < on->check_count; i++)
        if (on->check[i].verdict > on->verdict) on->verdict = on->check[i].verdict;
}

pf_status pf_assess_batch(const pf_plan *plan, const pf_part *const *part, size_t count,
                          pf_scratch *scratch, pf_assessment *const *assessment)
{
    pf_stress *stress[PF_BATCH] = {NULL};
    if (count > PF_BATCH) return PF_BAD_ARGUMENT;
    for (size_t i = 0; i < count; i++)
        stress[i] = &assessment[i]->stress;
    pf_status status = pf_plan_evaluate_batch(plan, part, count, scratch, stress);
    for (size_t i = 0; i < count && status == PF_OK; i++)
        judge(assessment[i], plan, part[i]);
    return status;
}

pf_status pf_assess(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                    pf_assessment *assessment)
{
    return pf_assess_batch(plan, &part, 1, scratch, &assessment);
}

/* What a check that was made says. */
static int print_made(const pf_check *check, char *text, size_t room)
{
    char value[PF_UNIT_ROOM], limit[PF_UNIT_ROOM];
    const char *words = facts[check->kind].words;
    if (check->kind == PF_CHECK_STATUS) return snprintf(text, room, "the part is banned");
    if (check->kind == PF_CHECK_POLARITY)
        return snprintf(text, room, "polarity %s, the card needs %s",
                        pf_polarity_text((pf_polarity)check->value),
                        pf_polarity_text((pf_polarity)check->limit));
    if (check->cause != PF_CAUSE_NONE)
        return snprintf(text, room, "%s: %s", words, pf_cause_text(check->cause));
    pf_value_print(value, check->value, facts[check->kind].quantity, 4);
    pf_value_print(limit, check->limit, facts[check->kind].quantity, 4);
    return snprintf(text, room, "%s %s, %s %s", words, value,
                    check->kind == PF_CHECK_SOA_MARGIN ? "required" : "allowed", limit);
}

static int print_open(const pf_check *check, char *text, size_t room)
{
    const char *words = facts[check->kind].words;
    if (check->missing)
        return snprintf(text, room, "%s unassessed: %s is not stated", words, check->missing);
    return snprintf(text, room, "%s unassessed: %s", words, pf_cause_text(check->cause));
}

int pf_check_print(const pf_plan *plan, const pf_check *check, char *text, size_t room)
{
    int length = 0;
    if (check->slot >= 0)
        length = snprintf(text, room, "%s: ", pf_plan_event_name(plan, (size_t)check->slot));
    size_t at = (size_t)length < room ? (size_t)length : room;
    return length + (check->verdict == PF_UNASSESSED ? print_open(check, text + at, room - at)
                                                     : print_made(check, text + at, room - at));
}

const pf_check *pf_assessment_decisive(const pf_assessment *assessment)
{
    const pf_check *found = NULL;
    int limiting = assessment->stress.limiting_slot;
    for (size_t i = 0; i < assessment->check_count; i++) {
        const pf_check *check = &assessment->check[i];
        if (check->verdict != assessment->verdict) continue;
        bool decides = check->kind == PF_CHECK_SOA_MARGIN && check->slot == limiting;
        bool margin_so_far = found && found->kind == PF_CHECK_SOA_MARGIN;
        if (assessment->verdict == PF_PASS ? decides : !found || (margin_so_far && decides))
            found = check;
    }
    return found;
}
