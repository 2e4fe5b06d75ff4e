/* explain.c: one part under one profile, taken apart. */
#include <passfet/explain.h>

#include "base/number.h"
#include "rank/reading.h"
#include "rank/steps.h"
#include "stress/plan.h"
#include "stress/steady_state.h"

#include <math.h>

typedef struct context {
    const pf_plan *plan;
    const pf_part *part;
    pf_scratch *scratch;
    const pf_stress *stress;
    const pf_capture *captures; /* of the plan's recorded slots, in their order */
    size_t capture_count;
} context;

/* What an event's curves are read with. */
static pf_subject subject_of(const context *on, const pf_outcome *outcome)
{
    return pf_reading_subject(on->scratch->model, outcome->start_degC,
                              on->plan->profile.extend_soa);
}

/* 0 where the event starts at its limit already; NaN where the family is not known. */
static double derating_of(const context *on, const pf_outcome *outcome, double span_K)
{
    double share = (on->stress->allowed_degC - outcome->start_degC) / span_K;
    return share < 0 ? 0 : share;
}

/* V, I and t of a rectangle at a corner. */
static void rectangle_at(const context *on, const pf_slot *slot, unsigned corner, double *vds_V,
                         double *id_A, double *time_s)
{
    pf_corner at;
    bool trip = slot->event == PF_TRIP;
    pf_corner_at(&slot->corners, &on->plan->profile, corner, &at);
    *vds_V = at.value[PF_SUPPLY_VOLTAGE];
    *id_A = trip ? at.value[PF_TRIP_CURRENT] : pf_corner_fault_A(&on->plan->profile, &at);
    *time_s = at.value[trip ? PF_TRIP_TIME : PF_FAULT_TIME];
}

/* The corner that heats the junction most. */
static void find_hottest(const context *on, const pf_slot *slot, const pf_zth *zth,
                         pf_event_view *view)
{
    double highest = -1;
    for (unsigned i = 0; i < slot->corners.number; i++) {
        double vds_V, id_A, time_s;
        rectangle_at(on, slot, i, &vds_V, &id_A, &time_s);
        double rise = vds_V * id_A * pf_zth_at(zth, time_s, log(time_s));
        if (!(rise > highest)) continue;
        highest = rise;
        view->hottest_V = vds_V;
        view->hottest_A = id_A;
        view->hottest_s = time_s;
    }
    pf_zth_reading_take(zth, view->hottest_s, &view->zth);
}

static void view_rectangle(const context *on, const pf_slot *slot, const pf_outcome *outcome,
                           pf_event_view *view)
{
    pf_subject subject = subject_of(on, outcome);
    rectangle_at(on, slot, outcome->corner, &view->vds_V, &view->id_A, &view->time_s);
    pf_reading_take(&subject, view->vds_V, view->time_s, &view->soa);
    view->derating = derating_of(on, outcome, view->soa.span_K);
    view->limit_A = view->derating * view->soa.current_A;
    find_hottest(on, slot, subject.zth, view);
}

/* What earlier tries leave behind, from the difference between the train and its last pulse. */
static void view_retry(const context *on, const pf_outcome *outcome, pf_event_view *view)
{
    pf_subject subject = subject_of(on, outcome);
    view->interval_s = view->value[PF_RETRY_INTERVAL];
    view->count = view->value[PF_RETRY_COUNT];
    if (!pf_is_stated(view->count)) view->count = INFINITY;
    view->train_KpW = pf_train_zth(subject.zth, view->time_s, view->interval_s, view->count);
    double pulse = view->soa.span_K / (view->vds_V * view->soa.current_A);
    double whole = view->hot_rise_K / (view->vds_V * view->id_A);
    view->case_KpW = whole - pulse - view->train_KpW;
    if (fabs(view->case_KpW) < 1e-9 * whole) view->case_KpW = 0;
}

static void estimate(const context *on, const pf_outcome *outcome, const pf_event_view *view,
                     double time_s, pf_estimate *made)
{
    pf_subject subject = subject_of(on, outcome);
    *made = (pf_estimate){.vds_V = view->voltage_at_peak_V, .time_s = time_s};
    made->id_A = outcome->peak_power_W / made->vds_V;
    pf_reading_take(&subject, made->vds_V, time_s, &made->soa);
    made->derating = derating_of(on, outcome, made->soa.span_K);
    made->limit_A = made->derating * made->soa.current_A;
    made->margin = made->limit_A / made->id_A;
    made->safe = made->margin <= outcome->soa_margin;
}

static const pf_capture *capture_of(const context *on, size_t slot)
{
    size_t before = 0;
    for (size_t i = 0; i < slot; i++)
        before += on->plan->slot[i].event == PF_RECORDED;
    return before < on->capture_count ? &on->captures[before] : NULL;
}

/* The waveform of the worst corner. */
static pf_status waveform_of(const context *on, size_t index, const pf_outcome *outcome,
                             pf_polyline *line)
{
    const pf_slot *slot = &on->plan->slot[index];
    if (slot->event == PF_RECORDED) return pf_polyline_of_capture(capture_of(on, index), line);
    pf_corner at;
    pf_corner_at(&slot->corners, &on->plan->profile, outcome->corner, &at);
    double crss_F = slot->event == PF_START_UP ? on->part->crss_F : PF_NONE;
    pf_start start = pf_start_at(&on->plan->profile, slot->event, &at, crss_F);
    return pf_polyline_of_start(&start, pf_plan_hold_s(&on->plan->profile), line);
}

static pf_status view_waves(const context *on, size_t index, const pf_outcome *outcome,
                            pf_event_view *view)
{
    pf_polyline line;
    pf_subject subject = subject_of(on, outcome);
    pf_status status = waveform_of(on, index, outcome, &line);
    if (status != PF_OK) return status;
    view->derating = derating_of(on, outcome, subject.family ? subject.family->span_K : PF_NONE);
    view->voltage_at_peak_V = pf_polyline_peak_V(&line);
    if (line.count > 1 && outcome->soa_margin > 0) {
        pf_steps_take(&subject, &line, outcome->worst_time_s, view);
        estimate(on, outcome, view, outcome->duration_s / 2, &view->half_time);
        estimate(on, outcome, view, outcome->energy_J / outcome->peak_power_W, &view->equal_energy);
    }
    pf_polyline_clear(&line);
    return PF_OK;
}

static void view_turn_off(const context *on, const pf_slot *slot, const pf_outcome *outcome,
                          pf_event_view *view)
{
    pf_corner at;
    pf_corner_at(&slot->corners, &on->plan->profile, outcome->corner, &at);
    view->vds_V = at.value[PF_SUPPLY_VOLTAGE];
    view->id_A = fmax(pf_corner_fault_A(&on->plan->profile, &at), at.value[PF_TRIP_CURRENT]);
}

static pf_status view_event(const context *on, size_t index, pf_event_view *view)
{
    const pf_slot *slot = &on->plan->slot[index];
    const pf_outcome *outcome = &on->stress->outcome[index];
    *view = (pf_event_view){.event = slot->event,
                            .derating = PF_NONE,
                            .vds_V = PF_NONE,
                            .id_A = PF_NONE,
                            .time_s = PF_NONE,
                            .soa.current_A = PF_NONE,
                            .limit_A = PF_NONE,
                            .voltage_at_peak_V = PF_NONE};
    for (int i = 0; i < PF_PARAMETER_COUNT; i++)
        view->value[i] = pf_plan_corner_value(on->plan, index, outcome->corner, (pf_parameter)i);
    view->hot_rise_K = (on->stress->allowed_degC - outcome->start_degC) / outcome->soa_margin;
    if (!pf_is_stated(outcome->start_degC) || slot->event == PF_RUNNING) return PF_OK;
    switch (slot->event) {
    case PF_TURN_OFF:
        view_turn_off(on, slot, outcome, view);
        return PF_OK;
    case PF_START_UP:
    case PF_SUPPLY_STEP:
    case PF_RECORDED:
        return slot->waves.count ? view_waves(on, index, outcome, view) : PF_OK;
    default:
        view_rectangle(on, slot, outcome, view);
        if (slot->event == PF_RETRY) view_retry(on, outcome, view);
        return PF_OK;
    }
}

static void view_running(const context *on, pf_explanation *explanation)
{
    pf_steady_state state = pf_steady_state_of(&on->plan->profile, on->part);
    explanation->rth_KpW = state.rth_KpW;
    explanation->share_A = state.share_A;
    explanation->gain_KpK = state.rth_KpW * state.share_A * state.share_A * state.rdson.cold_ohm;
    explanation->rdson_slope_pK = state.rdson.slope_pK;
    explanation->hot_ratio =
        state.rdson.ratio_assumed ? PF_HOT_RATIO_ASSUMED : on->part->rdson_hot_ratio;
}

pf_status pf_explain(const pf_plan *plan, const pf_capture *captures, size_t capture_count,
                     const pf_part *part, pf_scratch *scratch, pf_explanation *explanation)
{
    const context on = {plan,     part,         scratch, &explanation->assessment.stress,
                        captures, capture_count};
    pf_status status = pf_timer_window_of(plan, part, scratch, &explanation->window);
    if (status == PF_OK) status = pf_assess(plan, part, scratch, &explanation->assessment);
    if (status != PF_OK) return status;
    view_running(&on, explanation);
    for (size_t i = 0; i < plan->count && status == PF_OK; i++)
        status = view_event(&on, i, &explanation->view[i]);
    return status;
}
