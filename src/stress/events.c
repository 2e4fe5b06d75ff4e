/* events.c: every event of a plan on one part, at every corner; the worst counts.
**
** A corner that cannot be assessed makes the event unassessed.
*/
#include "base/memory.h"
#include "base/number.h"
#include "device/model.h"
#include "stress/plan.h"
#include "stress/response.h"
#include "stress/steady_state.h"

#include <math.h>

/* Everything that the events of one part share. */
typedef struct evaluation {
    const pf_plan *plan;
    const pf_part *part;
    pf_scratch *scratch;
    pf_model *model;
    pf_stress *stress;
    pf_steady_state running;
} evaluation;

/* One event: its outcome so far and what it starts from. */
typedef struct trial {
    const evaluation *on;
    const pf_slot *slot;
    pf_outcome *outcome;
    pf_subject subject;
    bool begun;            /* there is something to try */
    bool junction_unknown; /* at some corner */
} trial;

static double lower_of(double limit, double other)
{
    return other < limit ? other : limit; /* a limit not stated (NaN) never is */
}

double pf_allowed_degC(const pf_profile *profile, const pf_part *part)
{
    const pf_derating *rule = &profile->derating;
    double allowed = part->tj_max_degC;
    if (!pf_is_stated(allowed)) return PF_NONE;
    allowed = lower_of(allowed, profile->value[PF_JUNCTION_LIMIT].min);
    allowed = lower_of(allowed, rule->junction_limit_degC);
    allowed = lower_of(allowed, part->tj_max_degC - rule->junction_below_max_K);
    return lower_of(allowed, part->tj_max_degC * rule->junction_share);
}

static double start_of(const evaluation *on, pf_event event)
{
    bool at_start = event == PF_START_UP || event == PF_SHORT_AT_START;
    if (at_start && on->plan->profile.start_from_ambient)
        return on->plan->profile.value[PF_AMBIENT_TEMPERATURE].max;
    return on->running.junction_degC;
}

static double margin_of(const trial *test, double hot_rise_K)
{
    double room = test->on->stress->allowed_degC - test->outcome->start_degC;
    if (room <= 0) return 0;
    return hot_rise_K > 0 ? room / hot_rise_K : INFINITY;
}

/* Takes the response of one corner, or the worst of several, into the outcome. What could not be
** assessed at one corner leaves the event unassessed. */
static void take(trial *test, unsigned corner, const pf_response *response, const pf_wave *wave)
{
    pf_outcome *outcome = test->outcome;
    double junction = outcome->start_degC + response->junction_rise_K;
    bool hot = outcome->start_degC >= test->on->stress->allowed_degC;
    test->on->stress->remarks |= response->remarks;
    if (!pf_is_stated(junction)) test->junction_unknown = true;
    outcome->peak_junction_degC = fmax(outcome->peak_junction_degC, junction);
    if (outcome->cause != PF_CAUSE_NONE) return;
    double margin = margin_of(test, response->hot_rise_K);
    if (!hot && response->cause != PF_CAUSE_NONE)
        outcome->cause = response->cause;
    else if (margin >= outcome->soa_margin)
        return;
    outcome->soa_margin = outcome->cause == PF_CAUSE_NONE ? margin : PF_NONE;
    outcome->corner = corner;
    outcome->worst_time_s = response->worst_s;
    outcome->peak_power_W = wave->peak_power_W;
    outcome->energy_J = wave->energy_J;
    outcome->duration_s = wave->duration_s;
}

/* What flows at a corner of an event without a waveform. */
static double rectangle_current(const pf_profile *profile, pf_event event, const pf_corner *at)
{
    double trip_A = at->value[PF_TRIP_CURRENT];
    if (event == PF_TRIP) return trip_A;
    double fault_A = pf_corner_fault_A(profile, at);
    return event == PF_TURN_OFF ? fmax(fault_A, trip_A) : fault_A;
}

/* The highest current over all corners, which no part changes. */
static double peak_current(const pf_profile *profile, const pf_slot *slot)
{
    double highest = PF_NONE;
    if (slot->waves.count) return slot->waves.unbounded ? PF_NONE : slot->waves.peak_current_A;
    for (unsigned i = 0; i < slot->corners.number && slot->event != PF_SUPPLY_STEP; i++) {
        pf_corner at;
        pf_corner_at(&slot->corners, profile, i, &at);
        highest = fmax(highest, rectangle_current(profile, slot->event, &at));
    }
    return highest;
}

static pf_wave rectangle_scalars(double vds_V, double id_A, double time_s)
{
    return (pf_wave){.duration_s = time_s,
                     .energy_J = vds_V * id_A * time_s,
                     .peak_power_W = vds_V * id_A,
                     .peak_current_A = id_A};
}

static void try_rectangle(trial *test, unsigned corner, double vds_V, double id_A, double time_s)
{
    pf_response response;
    pf_wave scalars = rectangle_scalars(vds_V, id_A, time_s);
    pf_respond_rectangle(&test->subject, vds_V, id_A, time_s, &response);
    take(test, corner, &response, &scalars);
}

/* Heating of the case by all tries so far, in K per W of mean power. Equation (19). */
static double case_warming(const trial *test, const pf_corner *at, double interval_s, double count)
{
    const pf_part *part = test->on->part;
    double board = at->value[PF_CASE_TO_AMBIENT], heat = at->value[PF_CASE_HEAT_CAPACITY];
    if (!pf_is_stated(board)) {
        if (test->subject.zth->path == PF_JUNCTION_AMBIENT) return 0; /* Zth has it already */
        test->on->stress->remarks |= PF_REMARK_CASE_FROM_RTH;
        /* a sheet whose R_thJA is not above its R_thJC would cool the case: its R_thJA then */
        double board_part = part->rth_ja_KpW - part->rth_jc_KpW;
        return board_part > 0 ? board_part : part->rth_ja_KpW;
    }
    return pf_is_stated(heat) ? board * -expm1(-count * interval_s / (board * heat)) : board;
}

static void try_retry(trial *test, unsigned corner, const pf_corner *at)
{
    const pf_profile *profile = &test->on->plan->profile;
    double vds_V = at->value[PF_SUPPLY_VOLTAGE], on_s = at->value[PF_FAULT_TIME];
    double id_A = pf_corner_fault_A(profile, at), interval_s = at->value[PF_RETRY_INTERVAL];
    double count = at->value[PF_RETRY_COUNT];
    if (!pf_is_stated(count)) count = INFINITY; /* endless, or not said: the limit */
    pf_response response;
    pf_wave scalars = rectangle_scalars(vds_V, id_A, on_s);
    pf_respond_rectangle(&test->subject, vds_V, id_A, on_s, &response);
    double earlier = pf_train_zth(test->subject.zth, on_s, interval_s, count) +
                     case_warming(test, at, interval_s, count) * on_s / interval_s;
    if (!pf_is_stated(earlier) && response.cause == PF_CAUSE_NONE)
        response.cause = pf_zth_stated(test->subject.zth) ? PF_CAUSE_NO_RTH : PF_CAUSE_NO_ZTH;
    response.hot_rise_K += vds_V * id_A * earlier;
    response.junction_rise_K += vds_V * id_A * earlier;
    take(test, corner, &response, &scalars);
}

/* Energy of the kick that the inductance gives when the current is cut. Equation (20). */
static void try_turn_off(trial *test, unsigned corner, const pf_corner *at)
{
    const evaluation *on = test->on;
    const pf_part *part = on->part;
    pf_outcome *outcome = test->outcome;
    double vds_V = at->value[PF_SUPPLY_VOLTAGE], vds_max_V = part->vds_max_V;
    double id_A = rectangle_current(&on->plan->profile, PF_TURN_OFF, at);
    double energy_J = 0.5 * at->value[PF_SUPPLY_INDUCTANCE] * id_A * id_A;
    if (on->plan->profile.stated[PF_CLAMP_VOLTAGE]) return; /* the clamp takes it */
    energy_J = vds_max_V > vds_V ? energy_J * vds_max_V / (vds_max_V - vds_V) : INFINITY;
    if (!pf_is_stated(vds_max_V)) energy_J = PF_NONE;
    if (pf_is_stated(outcome->avalanche_J) && !(energy_J > outcome->avalanche_J)) return;
    double room = (on->stress->allowed_degC - outcome->start_degC) / (part->tj_max_degC - 25);
    outcome->avalanche_J = energy_J;
    outcome->avalanche_limit_J = part->avalanche_energy_J * fmax(0, room);
    outcome->corner = corner;
    outcome->duration_s = 0;
    if (id_A > part->avalanche_current_A) on->stress->remarks |= PF_REMARK_AVALANCHE_CURRENT;
}

/* The responses of up to PF_LANES trials of one slot to its waves. */
static void take_waves(trial *const *test, size_t count, const pf_waves *waves,
                       const pf_bench *bench)
{
    pf_response response[PF_LANES];
    const pf_subject *subject[PF_LANES] = {NULL};
    for (size_t i = 0; i < count; i++)
        subject[i] = &test[i]->subject;
    pf_respond_waves(subject, count, waves, bench, response);
    for (size_t i = 0; i < count; i++)
        take(test[i], response[i].corner, &response[i], &waves->wave[response[i].corner]);
}

/* Starts of which the part's own C_rss slows the gate ramp: the one waveform that knows the part. */
static pf_status try_slowed_starts(trial *test)
{
    const evaluation *on = test->on;
    pf_waves waves;
    pf_status status = pf_plan_starts(&on->plan->profile, test->slot, on->part->crss_F, &waves);
    if (status != PF_OK) return status;
    status = pf_bench_reserve(&on->scratch->bench, waves.samples);
    if (status == PF_OK) take_waves(&test, 1, &waves, &on->scratch->bench);
    pf_waves_clear(&waves);
    return status;
}

/* All trials of one slot that has waves; those with a gate ramp of their own one by one. */
static pf_status try_waves(trial *test, size_t count, pf_scratch *scratch)
{
    trial *shared[PF_LANES];
    size_t lanes = 0;
    for (size_t i = 0; i < count; i++) {
        bool ramp = test[i].slot->corners.gate_bit >= 0;
        if (!test[i].begun) continue;
        if (ramp && pf_is_stated(test[i].on->part->crss_F)) {
            pf_status status = try_slowed_starts(&test[i]);
            if (status != PF_OK) return status;
            continue;
        }
        if (ramp) test[i].on->stress->remarks |= PF_REMARK_NO_CRSS;
        shared[lanes++] = &test[i];
    }
    if (lanes) take_waves(shared, lanes, &test[0].slot->waves, &scratch->bench);
    return PF_OK;
}

static void try_corner(trial *test, unsigned corner)
{
    const pf_profile *profile = &test->on->plan->profile;
    pf_corner at;
    pf_corner_at(&test->slot->corners, profile, corner, &at);
    const double *value = at.value;
    switch (test->slot->event) {
    case PF_TRIP:
        try_rectangle(test, corner, value[PF_SUPPLY_VOLTAGE], value[PF_TRIP_CURRENT],
                      value[PF_TRIP_TIME]);
        break;
    case PF_RETRY:
        try_retry(test, corner, &at);
        break;
    case PF_TURN_OFF:
        try_turn_off(test, corner, &at);
        break;
    default:
        try_rectangle(test, corner, value[PF_SUPPLY_VOLTAGE], pf_corner_fault_A(profile, &at),
                      value[PF_FAULT_TIME]);
        break;
    }
}

static bool has_waves(pf_event event)
{
    return event == PF_START_UP || event == PF_SUPPLY_STEP || event == PF_RECORDED;
}

/* What the corners said together. */
static void conclude(trial *test)
{
    pf_outcome *outcome = test->outcome;
    if (test->junction_unknown) {
        outcome->peak_junction_degC = PF_NONE;
        outcome->junction_cause =
            pf_zth_stated(test->subject.zth) ? PF_CAUSE_UNBOUNDED_CURRENT : PF_CAUSE_NO_ZTH;
    }
    if (outcome->soa_margin == 0) outcome->cause = PF_CAUSE_HOT_START;
}

static const pf_outcome nothing_known = {
    .soa_margin = __builtin_nan(""),
    .start_degC = __builtin_nan(""),
    .worst_time_s = __builtin_nan(""),
    .peak_junction_degC = __builtin_nan(""),
    .peak_current_A = __builtin_nan(""),
    .peak_power_W = __builtin_nan(""),
    .energy_J = __builtin_nan(""),
    .duration_s = __builtin_nan(""),
    .avalanche_J = __builtin_nan(""),
    .avalanche_limit_J = __builtin_nan(""),
};

static void outcome_of_running(const evaluation *on, pf_outcome *outcome)
{
    outcome->start_degC = outcome->peak_junction_degC = on->running.junction_degC;
    outcome->peak_current_A = on->running.share_A;
    outcome->junction_cause = outcome->cause = on->running.cause;
}

/* Why an event cannot even be begun; PF_CAUSE_NONE when it can. */
static pf_cause why_not(const evaluation *on, const pf_slot *slot, double start_degC)
{
    if (slot->event == PF_SUPPLY_STEP && !slot->waves.count) return PF_CAUSE_NO_LIMIT;
    if (!pf_is_stated(on->stress->allowed_degC)) return PF_CAUSE_NO_TJ_MAX;
    if (!pf_is_stated(start_degC)) return PF_CAUSE_NO_START;
    return PF_CAUSE_NONE;
}

/* Sets a trial up; begun says whether there is something to try. */
static void begin(trial *test, const evaluation *on, size_t index)
{
    const pf_slot *slot = &on->plan->slot[index];
    pf_outcome *outcome = &on->stress->outcome[index];
    *test = (trial){.on = on, .slot = slot, .outcome = outcome};
    *outcome = nothing_known;
    if (slot->event == PF_RUNNING) {
        outcome_of_running(on, outcome);
        return;
    }
    outcome->peak_current_A = peak_current(&on->plan->profile, slot);
    outcome->start_degC = start_of(on, slot->event);
    outcome->cause = outcome->junction_cause = why_not(on, slot, outcome->start_degC);
    if (outcome->cause != PF_CAUSE_NONE) return;
    test->subject = pf_subject_of(on->model, outcome->start_degC, on->plan->profile.extend_soa);
    test->begun = true;
}

/* One slot of the plan on all parts of a batch. */
static pf_status evaluate_slot(const evaluation *on, size_t count, size_t index,
                               pf_scratch *scratch)
{
    trial test[PF_LANES];
    const pf_slot *slot = &on[0].plan->slot[index];
    pf_status status = PF_OK;
    for (size_t i = 0; i < count; i++)
        begin(&test[i], &on[i], index);
    if (has_waves(slot->event)) status = try_waves(test, count, scratch);
    for (size_t i = 0; i < count; i++) {
        if (!test[i].begun) continue;
        for (unsigned corner = 0; !has_waves(slot->event) && corner < slot->corners.number;
             corner++)
            try_corner(&test[i], corner);
        if (slot->event != PF_TURN_OFF) conclude(&test[i]);
    }
    return status;
}

/* The highest junction of all events; not known where that of some event is not. */
static double highest_junction(const pf_plan *plan, const pf_stress *stress)
{
    double highest = PF_NONE;
    for (size_t i = 0; i < plan->count; i++) {
        double junction = stress->outcome[i].peak_junction_degC;
        if (plan->slot[i].event == PF_TURN_OFF) continue;
        if (!pf_is_stated(junction)) return PF_NONE;
        highest = fmax(highest, junction);
    }
    return highest;
}

/* The part's own numbers: the worst of its events'. */
static void summarise(const pf_plan *plan, pf_stress *stress)
{
    stress->soa_margin = PF_NONE;
    stress->limiting_slot = -1;
    stress->peak_junction_degC = highest_junction(plan, stress);
    for (size_t i = 0; i < plan->count; i++) {
        const pf_outcome *outcome = &stress->outcome[i];
        if (!pf_is_stated(outcome->soa_margin)) continue;
        if (stress->limiting_slot >= 0 && !(outcome->soa_margin < stress->soa_margin)) continue;
        stress->soa_margin = outcome->soa_margin;
        stress->limiting_slot = (int)i;
    }
}

static pf_status prepare(evaluation *on)
{
    pf_stress *stress = on->stress;
    on->running = pf_steady_state_of(&on->plan->profile, on->part);
    *stress = (pf_stress){.count = on->plan->count};
    stress->allowed_degC = pf_allowed_degC(&on->plan->profile, on->part);
    stress->running_degC = on->running.junction_degC;
    stress->conduction_loss_W = on->running.loss_W;
    stress->running_cause = on->running.cause;
    stress->rdson_cold_ohm = on->running.rdson.cold_ohm;
    stress->rdson_drive_V = on->running.rdson.drive_V;
    if (on->running.rdson.ratio_assumed) stress->remarks |= PF_REMARK_HOT_RATIO;
    pf_status status = pf_model_load(on->model, on->part);
    if (status == PF_OK && pf_model_zth(on->model)->path == PF_JUNCTION_AMBIENT)
        stress->remarks |= PF_REMARK_AMBIENT_ZTH;
    return status;
}

pf_status pf_plan_evaluate_batch(const pf_plan *plan, const pf_part *const *part, size_t count,
                                 pf_scratch *scratch, pf_stress *const *stress)
{
    evaluation on[PF_LANES];
    pf_status status = pf_bench_reserve(&scratch->bench, plan->samples);
    for (size_t i = 0; i < count && status == PF_OK; i++) {
        on[i] = (evaluation){.plan = plan,
                             .part = part[i],
                             .scratch = scratch,
                             .stress = stress[i],
                             .model = &scratch->model[i]};
        status = prepare(&on[i]);
    }
    for (size_t i = 0; i < plan->count && status == PF_OK; i++)
        status = evaluate_slot(on, count, i, scratch);
    for (size_t i = 0; i < count && status == PF_OK; i++)
        summarise(plan, stress[i]);
    return status;
}

pf_status pf_plan_evaluate(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                           pf_stress *stress)
{
    return pf_plan_evaluate_batch(plan, &part, 1, scratch, &stress);
}

pf_scratch *pf_scratch_new(void)
{
    pf_scratch *scratch = pf_allocate(1, sizeof *scratch);
    if (!scratch) return NULL;
    for (size_t i = 0; i < PF_LANES; i++)
        pf_model_init(&scratch->model[i]);
    return scratch;
}

void pf_scratch_free(pf_scratch *scratch)
{
    if (!scratch) return;
    for (size_t i = 0; i < PF_LANES; i++)
        pf_model_clear(&scratch->model[i]);
    pf_bench_clear(&scratch->bench);
    pf_free(scratch);
}
