/* headroom.c: how far a profile can move before the verdict flips. */
#include "base/number.h"
#include "rank/flip.h"
#include "rank/variant.h"

#include <math.h>
#include <passfet/headroom.h>
#include <stdlib.h>
#include <string.h>

/* Everything that the probes of one parameter share. */
typedef struct varying {
    const pf_plan *plan; /* of the variant personal */
    pf_variant personal;
    pf_part part; /* without C_rss, which is in the plan */
    pf_scratch *scratch;
    pf_parameter parameter;
    pf_assessment known; /* under the plan itself */
    bool concerned[PF_SLOTS_MAX];
    pf_verdict others; /* of the checks that no probe makes again */
    pf_variant variant;
    pf_assessment assessment; /* of the variant */
    pf_verdict verdict;       /* of the whole part at the last probe */
    const char *wrong;        /* why the last profile that made no sense makes none */
    bool events_only;         /* checks of the part as a whole are left out */
    size_t probes;            /* of this search */
    pf_verdict first;         /* verdict at its first probe */
} varying;

static double capped(double measure)
{
    return fmax(-10, fmin(10, measure));
}

/* How well a check is met: positive where it is, 0 at its limit. NaN where it could not be made. */
static double slack_of(const pf_check *check)
{
    double value = check->value, limit = check->limit;
    if (check->verdict == PF_UNASSESSED) return PF_NONE;
    if (check->kind <= PF_CHECK_POLARITY) return check->verdict == PF_PASS ? 10 : -10;
    if (check->kind == PF_CHECK_SOA_MARGIN) return capped(log(value / limit));
    if (pf_check_quantity(check->kind) == PF_TEMPERATURE) return capped((limit - value) / 100);
    return value > 0 ? capped(log(limit / value)) : 10;
}

static double least_slack(const pf_assessment *assessment)
{
    double least = 10;
    for (size_t i = 0; i < assessment->check_count; i++) {
        double slack = slack_of(&assessment->check[i]);
        if (!pf_is_stated(slack)) return PF_NONE;
        least = fmin(least, slack);
    }
    return least;
}

/* The worst verdict of the checks of events that no probe looks at again. */
static pf_verdict verdict_of_others(const varying *on)
{
    pf_verdict worst = PF_PASS;
    for (size_t i = 0; i < on->known.check_count; i++) {
        const pf_check *check = &on->known.check[i];
        if (check->slot < 0 || on->concerned[check->slot]) continue;
        if (check->verdict > worst) worst = check->verdict;
    }
    return worst;
}

static pf_verdict worse(pf_verdict left, pf_verdict right)
{
    return left > right ? left : right;
}

/* Leaves the checks of events alone, and their verdict. */
static void keep_events(pf_assessment *assessment)
{
    size_t kept = 0;
    assessment->verdict = PF_PASS;
    for (size_t i = 0; i < assessment->check_count; i++) {
        if (assessment->check[i].slot < 0) continue;
        assessment->check[kept++] = assessment->check[i];
        assessment->verdict = worse(assessment->verdict, assessment->check[i].verdict);
    }
    assessment->check_count = kept;
}

static void note_wrong(void *context, pf_parameter parameter, const char *wrong, const char *right)
{
    const char **first = context;
    (void)parameter;
    (void)right;
    if (!*first) *first = wrong;
}

/* Assesses the part with the parameter at one value. *valid: whether the profile makes sense. The
** variant is left made where it does. */
static pf_status assess_at(varying *on, double value, bool *valid)
{
    pf_profile changed = on->plan->profile;
    changed.value[on->parameter] = (pf_interval){value, value, value};
    const char *wrong = NULL;
    *valid = pf_profile_finish(&changed, note_wrong, &wrong) == PF_OK;
    if (!*valid) on->wrong = wrong;
    if (!*valid) return PF_OK;
    pf_status status = pf_variant_init(&on->variant, on->plan, &changed, on->parameter,
                                       on->concerned, on->personal.crss_F);
    if (status != PF_OK) return status;
    status = pf_assess(&on->variant.plan, &on->part, on->scratch, &on->assessment);
    if (on->events_only) keep_events(&on->assessment);
    on->verdict = worse(on->assessment.verdict, on->others);
    if (status != PF_OK) pf_variant_clear(&on->variant);
    return status;
}

static pf_status probe(void *context, double value, pf_answer *answer)
{
    varying *on = context;
    pf_status status = assess_at(on, value, &answer->valid);
    if (status != PF_OK || !answer->valid) return status;
    if (on->probes++ == 0) on->first = on->verdict;
    answer->state = on->verdict == PF_PASS;
    answer->measure = on->others == PF_PASS ? least_slack(&on->assessment) : PF_NONE;
    pf_variant_clear(&on->variant);
    return PF_OK;
}

static pf_scale scale_of(pf_parameter parameter)
{
    if (pf_parameter_facts()[parameter].quantity == PF_TEMPERATURE) return PF_SCALE_LINEAR;
    return parameter == PF_PARALLEL_COUNT || parameter == PF_RETRY_COUNT ? PF_SCALE_WHOLE
                                                                         : PF_SCALE_LOG;
}

static double relative_of(pf_parameter parameter, double from, double value)
{
    double moved = fabs(value - from);
    if (scale_of(parameter) == PF_SCALE_LINEAR) return moved / 100;
    return from > 0 ? moved / from : moved > 0 ? INFINITY : 0;
}

/* The check that decides at the last probe, with the corner of its event. */
static void name_stop(const varying *on, pf_room *room)
{
    const pf_assessment *from = on->others > on->assessment.verdict ? &on->known : &on->assessment;
    const pf_check *stop = pf_assessment_decisive(from);
    if (!stop) return;
    room->stop = *stop;
    if (stop->slot < 0 || from == &on->known) return;
    size_t slot = (size_t)stop->slot;
    room->stop.slot = (int)on->variant.base[slot];
    room->corner = from->stress.outcome[slot].corner;
    for (int i = 0; i < PF_PARAMETER_COUNT; i++)
        room->corner_value[i] =
            pf_plan_corner_value(&on->variant.plan, slot, room->corner, (pf_parameter)i);
}

/* What is known of the failing side of a flip. */
static pf_status describe_beyond(varying *on, pf_room *room)
{
    bool valid;
    pf_status status = assess_at(on, room->beyond, &valid);
    if (status != PF_OK || !valid) return status;
    room->there = on->verdict;
    name_stop(on, room);
    pf_variant_clear(&on->variant);
    return PF_OK;
}

/* Whether the card still starts at the value that was found. */
static pf_status describe_card(varying *on, pf_room *room)
{
    bool valid;
    if (pf_plan_stall(on->plan) || on->events_only) return PF_OK;
    pf_status status = assess_at(on, room->value, &valid);
    if (status != PF_OK || !valid) return status;
    room->stalls = pf_variant_stalls(&on->variant);
    pf_variant_clear(&on->variant);
    return PF_OK;
}

static void settle(varying *on, const pf_flip *flip, pf_room *room)
{
    room->kind = flip->found ? PF_ROOM_FLIPS : flip->invalid ? PF_ROOM_INVALID : PF_ROOM_NEVER;
    room->here = on->first;
    room->value = flip->found && !flip->state ? flip->flipped : flip->same;
    room->beyond = flip->found && !flip->state ? flip->same : flip->flipped;
    room->at_most = room->upward == flip->state;
    room->relative = relative_of(room->parameter, room->from, room->value);
    if (flip->invalid) room->wrong = on->wrong;
}

static pf_status search(varying *on, bool upward, double from, pf_room *room)
{
    const pf_parameter_fact *fact = &pf_parameter_facts()[on->parameter];
    const pf_search outward = {
        .scale = scale_of(on->parameter),
        .from = from,
        .end = upward ? fmax(from, fact->highest) : fmin(from, fact->lowest),
        .tolerance = PF_FLIP_TOLERANCE,
        .probe = probe,
        .context = on,
    };
    pf_flip flip;
    on->probes = 0;
    *room = (pf_room){.parameter = on->parameter, .upward = upward, .from = from};
    room->stop.slot = -1;
    for (int i = 0; i < PF_PARAMETER_COUNT; i++)
        room->corner_value[i] = PF_NONE;
    pf_status status = pf_flip_find(&outward, &flip);
    if (status != PF_OK) return status;
    settle(on, &flip, room);
    if (flip.found) status = describe_beyond(on, room);
    return status == PF_OK ? describe_card(on, room) : status;
}

/* Makes what all parameters share; varying_clear ends it where PF_OK. */
static pf_status varying_init(varying *on, const pf_plan *plan, const pf_part *part,
                              pf_scratch *scratch)
{
    *on = (varying){.scratch = scratch};
    pf_status status = pf_variant_personal(&on->personal, plan, part, &on->part);
    if (status != PF_OK) return status;
    on->plan = &on->personal.plan;
    status = pf_assess(on->plan, &on->part, scratch, &on->known);
    if (status != PF_OK) pf_variant_clear(&on->personal);
    return status;
}

static void varying_clear(varying *on)
{
    pf_variant_clear(&on->personal);
}

static void vary(varying *on, pf_parameter parameter)
{
    on->parameter = parameter;
    pf_variant_concerns(on->plan, parameter, on->concerned);
    on->others = verdict_of_others(on);
}

/* One direction, begun at the end of the interval from which the answer is of use. */
static pf_status search_from_interval(varying *on, bool upward, pf_room *room)
{
    const pf_interval *interval = &on->plan->profile.value[on->parameter];
    bool from_max = upward == (on->known.verdict == PF_PASS);
    return search(on, upward, from_max ? interval->max : interval->min, room);
}

pf_status pf_headroom_of(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                         pf_parameter parameter, bool upward, pf_room *room)
{
    varying on;
    if (!pf_is_stated(plan->profile.value[parameter].max)) return PF_NOT_STATED;
    pf_status status = varying_init(&on, plan, part, scratch);
    if (status != PF_OK) return status;
    vary(&on, parameter);
    status = search_from_interval(&on, upward, room);
    varying_clear(&on);
    return status;
}

/* The same flip found from both sides. */
static bool is_repeat(const pf_room *one, const pf_room *other)
{
    return one->kind == PF_ROOM_FLIPS && other->kind == PF_ROOM_FLIPS &&
           one->at_most == other->at_most &&
           fabs(one->value - other->value) <= 1e-4 * fabs(one->value);
}

static int nearest_first(const void *left, const void *right)
{
    const pf_room *a = left, *b = right;
    bool a_flips = a->kind == PF_ROOM_FLIPS, b_flips = b->kind == PF_ROOM_FLIPS;
    if (a_flips != b_flips) return a_flips ? -1 : 1;
    if (a_flips && a->relative != b->relative) return a->relative < b->relative ? -1 : 1;
    if (a->parameter != b->parameter) return a->parameter < b->parameter ? -1 : 1;
    return (int)a->upward - (int)b->upward;
}

pf_status pf_headroom(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                      pf_room room[PF_ROOMS_MAX], size_t *count)
{
    varying on;
    pf_status status = varying_init(&on, plan, part, scratch);
    *count = 0;
    if (status != PF_OK) return status;
    for (int i = 0; i < PF_PARAMETER_COUNT && status == PF_OK; i++) {
        if (!pf_is_stated(plan->profile.value[i].max)) continue;
        vary(&on, (pf_parameter)i);
        pf_room *down = &room[*count], *up = down + 1;
        status = search_from_interval(&on, false, down);
        if (status == PF_OK) status = search_from_interval(&on, true, up);
        *count += is_repeat(down, up) ? 1 : 2;
    }
    qsort(room, *count, sizeof *room, nearest_first);
    varying_clear(&on);
    return status;
}

bool pf_is_solvable(pf_parameter parameter)
{
    static const pf_parameter solvable[] = {PF_OUTPUT_CAPACITANCE, PF_FAULT_TIME,
                                            PF_CURRENT_LIMIT,      PF_POWER_LIMIT,
                                            PF_OUTPUT_SLEW,        PF_AMBIENT_TEMPERATURE};
    for (size_t i = 0; i < sizeof solvable / sizeof *solvable; i++)
        if (solvable[i] == parameter) return true;
    return false;
}

/* The flip nearest to where the verdict of the largest value is known. */
static pf_status solve(varying *on, pf_room *room)
{
    double from = on->plan->profile.value[on->parameter].max;
    pf_room other;
    pf_status status = search(on, on->known.verdict == PF_PASS, from, room);
    if (status != PF_OK || room->kind != PF_ROOM_NEVER) return status;
    status = search(on, !room->upward, from, &other);
    if (status == PF_OK && other.kind == PF_ROOM_FLIPS) *room = other;
    return status;
}

pf_status pf_solve(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                   pf_parameter parameter, pf_room *room)
{
    varying on;
    if (!pf_is_stated(plan->profile.value[parameter].max)) return PF_NOT_STATED;
    pf_status status = varying_init(&on, plan, part, scratch);
    if (status != PF_OK) return status;
    vary(&on, parameter);
    status = solve(&on, room);
    room->now = on.known.verdict;
    varying_clear(&on);
    return status;
}

/* Faults alone: what a timer can do nothing about is left out. */
static void vary_faults(varying *on)
{
    on->parameter = PF_FAULT_TIME;
    on->events_only = true;
    for (size_t i = 0; i < on->plan->count; i++) {
        pf_event event = on->plan->slot[i].event;
        on->concerned[i] =
            event == PF_SHORT_AT_START || event == PF_SHORT_RUNNING || event == PF_RETRY;
    }
}

pf_status pf_longest_fault(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                           pf_room *room)
{
    varying on = {.plan = plan, .part = *part, .scratch = scratch};
    on.personal.crss_F = PF_NONE;
    vary_faults(&on);
    double from = plan->profile.value[PF_FAULT_TIME].max;
    pf_status status = search(&on, true, from, room);
    if (status != PF_OK || room->here == PF_PASS) return status;
    return search(&on, false, from, room);
}
