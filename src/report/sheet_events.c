/* sheet_events.c: one event of a sheet: corner, readings, limit, margin, hand estimates. */
#include "base/number.h"
#include "report/sheet.h"
#include "report/words.h"

#include <math.h>
#include <string.h>

/* What the functions of one event share. */
typedef struct event_sheet {
    pf_sheet *sheet;
    const pf_sheet_subject *subject;
    size_t slot;
    const pf_outcome *outcome;
    const pf_event_view *view;
    double allowed_degC;
} event_sheet;

static void note_corner(const event_sheet *on)
{
    char text[900] = "", value[PF_UNIT_ROOM];
    size_t at = 0;
    const pf_parameter_fact *fact = pf_parameter_facts();
    for (int i = 0; i < PF_PARAMETER_COUNT && at < sizeof text; i++) {
        if (!pf_is_stated(on->view->value[i])) continue;
        pf_value_print(value,
                       pf_parameter_signed(pf_plan_profile(on->subject->plan), (pf_parameter)i,
                                           on->view->value[i]),
                       fact[i].quantity, 6);
        at += (size_t)snprintf(text + at, sizeof text - at, "%s%s %s", at ? ", " : "", fact[i].name,
                               value);
    }
    if (at) pf_sheet_note(on->sheet, "Worst corner: %s.", text);
}

static void show_derating(const event_sheet *on, const pf_reading *soa, double derating)
{
    if (soa->case_degC != 25)
        pf_sheet_note(on->sheet, "SOA of the sheet at a case of %.4g degC.", soa->case_degC);
    pf_sheet_value(on->sheet, "derating", derating, "",
                   derating > 0 ? "(# - #) / (# - #)" : "max(0, (# - #) / (# - #))",
                   on->allowed_degC, on->outcome->start_degC, on->subject->part->tj_max_degC,
                   soa->case_degC);
}

static void show_limit(const event_sheet *on, const pf_reading *soa, double derating,
                       double limit_A, double id_A, double margin)
{
    show_derating(on, soa, derating);
    pf_sheet_value(on->sheet, "I allowed", limit_A, "A", "# * #", derating, soa->current_A);
    pf_sheet_value(on->sheet, "SOA margin", margin, "", "# / #", limit_A, id_A);
}

static void show_junction(const event_sheet *on)
{
    const pf_event_view *view = on->view;
    double peak = on->outcome->peak_junction_degC;
    if (!pf_is_stated(peak)) {
        pf_sheet_note(on->sheet, "Peak junction temperature: not worked out: %s.",
                      pf_cause_text(on->outcome->junction_cause));
        return;
    }
    if (view->hottest_s != view->time_s || view->hottest_V != view->vds_V)
        pf_sheet_note(on->sheet,
                      "The junction is hottest at another corner: %.6g V, %.6g A, %.6g s.",
                      view->hottest_V, view->hottest_A, view->hottest_s);
    pf_sheet_zth(on->sheet, on->subject->part, &view->zth);
    pf_sheet_value(on->sheet, "T_j, peak", peak, "degC", "# + # * # * #", on->outcome->start_degC,
                   view->hottest_V, view->hottest_A, view->zth.zth_KpW);
}

static void show_rectangle(const event_sheet *on)
{
    const pf_event_view *view = on->view;
    pf_sheet_value(on->sheet, "V_DS", view->vds_V, "V", "#", view->vds_V);
    pf_sheet_value(on->sheet, "I_D", view->id_A, "A", "#", view->id_A);
    pf_sheet_value(on->sheet, "t", view->time_s, "s", "#", view->time_s);
    pf_sheet_value(on->sheet, "peak power", view->vds_V * view->id_A, "W", "# * #", view->vds_V,
                   view->id_A);
    pf_sheet_value(on->sheet, "energy", view->vds_V * view->id_A * view->time_s, "J", "# * # * #",
                   view->vds_V, view->id_A, view->time_s);
    pf_sheet_value(on->sheet, "T_j at its start", on->outcome->start_degC, "degC", "#",
                   on->outcome->start_degC);
    pf_sheet_reading(on->sheet, &view->soa, "I_SOA");
}

static void show_short(const event_sheet *on)
{
    const pf_event_view *view = on->view;
    show_rectangle(on);
    if (pf_is_stated(on->outcome->soa_margin) && view->soa.kind != PF_READ_NOTHING)
        show_limit(on, &view->soa, view->derating, view->limit_A, view->id_A,
                   on->outcome->soa_margin);
    show_junction(on);
}

/* Equation (18) of docs/methods.md with the numbers of this part. */
static void show_retry(const event_sheet *on)
{
    const pf_event_view *view = on->view;
    const pf_outcome *outcome = on->outcome;
    double earlier = view->train_KpW + view->case_KpW, power = view->vds_V * view->id_A;
    double pulse = view->soa.span_K / (view->vds_V * view->soa.current_A);
    show_rectangle(on);
    if (!(outcome->soa_margin > 0) || view->soa.kind == PF_READ_NOTHING) return;
    pf_sheet_value(on->sheet, "Z_SOA of the last pulse", pulse, "K/W", "(# - #) / (# * #)",
                   on->subject->part->tj_max_degC, view->soa.case_degC, view->vds_V,
                   view->soa.current_A);
    pf_sheet_value(on->sheet, "earlier tries, sum of Zth(t + k T) - Zth(k T)", view->train_KpW,
                   "K/W", "#", view->train_KpW);
    pf_sheet_value(on->sheet, "case warming, per W of the pulse", view->case_KpW, "K/W", "#",
                   view->case_KpW);
    pf_sheet_value(on->sheet, "dT_hot", view->hot_rise_K, "K", "# * # * (# + # + #)", view->vds_V,
                   view->id_A, pulse, view->train_KpW, view->case_KpW);
    pf_sheet_value(on->sheet, "SOA margin", outcome->soa_margin, "", "(# - #) / #",
                   on->allowed_degC, outcome->start_degC, view->hot_rise_K);
    pf_sheet_zth(on->sheet, on->subject->part, &view->zth);
    double peak = outcome->start_degC + power * (view->zth.zth_KpW + earlier);
    if (fabs(peak - outcome->peak_junction_degC) < 1e-6 * fabs(peak))
        pf_sheet_value(on->sheet, "T_j, peak", peak, "degC", "# + # * # * (# + #)",
                       outcome->start_degC, view->vds_V, view->id_A, view->zth.zth_KpW, earlier);
    else
        pf_sheet_value(on->sheet, "T_j, peak, at another corner", outcome->peak_junction_degC,
                       "degC", "#", outcome->peak_junction_degC);
}

static void show_turn_off(const event_sheet *on)
{
    const pf_event_view *view = on->view;
    const pf_outcome *outcome = on->outcome;
    const pf_part *part = on->subject->part;
    if (!pf_is_stated(outcome->avalanche_J)) {
        pf_sheet_note(on->sheet, "No avalanche energy is worked out for it.");
        return;
    }
    pf_sheet_value(on->sheet, "I_D", view->id_A, "A", "#", view->id_A);
    if (isfinite(outcome->avalanche_J))
        pf_sheet_value(on->sheet, "energy", outcome->avalanche_J, "J",
                       "0.5 * # * #^2 * # / (# - #)", view->value[PF_SUPPLY_INDUCTANCE], view->id_A,
                       part->vds_max_V, part->vds_max_V, view->vds_V);
    if (pf_is_stated(outcome->avalanche_limit_J))
        pf_sheet_value(on->sheet, "energy allowed", outcome->avalanche_limit_J, "J",
                       "# * max(0, (# - #) / (# - 25))", part->avalanche_energy_J, on->allowed_degC,
                       outcome->start_degC, part->tj_max_degC);
}

static void show_step(const event_sheet *on, size_t index, double span_K)
{
    const pf_step *step = &on->view->step[index];
    char label[160], from[PF_UNIT_ROOM], to[PF_UNIT_ROOM];
    snprintf(label, sizeof label, "%s to %s, at %.4g V",
             pf_sheet_words(from, step->from_s, PF_TIME), pf_sheet_words(to, step->to_s, PF_TIME),
             step->vds_V);
    if (isinf(step->dead_A))
        pf_sheet_value(on->sheet, label, step->rise_K, "K", "# * # / #", step->id_A, span_K,
                       step->born_A);
    else
        pf_sheet_value(on->sheet, label, step->rise_K, "K", "# * # * (1 / # - 1 / #)", step->id_A,
                       span_K, step->born_A, step->dead_A);
}

static void show_steps(const event_sheet *on)
{
    const pf_event_view *view = on->view;
    double span_K = view->half_time.soa.span_K, sum = 0;
    char moment[PF_UNIT_ROOM];
    if (!view->step_count || !pf_is_stated(view->stepped_rise_K)) return;
    pf_sheet_note(
        on->sheet,
        "By hand, in %zu steps up to the worst moment, %s: mean current times (T_j,max - "
        "T_case) times the change of 1/I_SOA from the age of its end to that of its begin.",
        view->step_count, pf_sheet_words(moment, on->outcome->worst_time_s, PF_TIME));
    for (size_t i = 0; i < view->step_count; i++) {
        show_step(on, i, span_K);
        double before = sum;
        sum += view->step[i].rise_K;
        if (i) pf_sheet_value(on->sheet, "sum", sum, "K", "# + #", before, view->step[i].rise_K);
    }
    pf_sheet_note(on->sheet, "The steps are %+.1f %% from the superposition.",
                  100 * (view->stepped_rise_K / view->hot_rise_K - 1));
}

static void show_estimate(const event_sheet *on, const pf_estimate *made, const char *name)
{
    pf_sheet_note(on->sheet, "Hand estimate \"%s\": %.6g V and %.6g A for %.6g s.", name,
                  made->vds_V, made->id_A, made->time_s);
    pf_sheet_reading(on->sheet, &made->soa, "I_SOA");
    if (made->soa.kind == PF_READ_NOTHING) return;
    show_limit(on, &made->soa, made->derating, made->limit_A, made->id_A, made->margin);
    pf_sheet_note(on->sheet, "\"%s\" is %s here: margin %.4g, the superposition's is %.4g.", name,
                  made->safe ? "safe" : "NOT SAFE", made->margin, on->outcome->soa_margin);
}

static void show_waves(const event_sheet *on)
{
    const pf_event_view *view = on->view;
    const pf_outcome *outcome = on->outcome;
    pf_sheet_value(on->sheet, "duration", outcome->duration_s, "s", "#", outcome->duration_s);
    pf_sheet_value(on->sheet, "energy", outcome->energy_J, "J", "#", outcome->energy_J);
    pf_sheet_value(on->sheet, "peak power", outcome->peak_power_W, "W", "#", outcome->peak_power_W);
    pf_sheet_value(on->sheet, "V_DS at peak power", view->voltage_at_peak_V, "V", "#",
                   view->voltage_at_peak_V);
    pf_sheet_value(on->sheet, "T_j at its start", outcome->start_degC, "degC", "#",
                   outcome->start_degC);
    if (!(outcome->soa_margin > 0)) return;
    pf_sheet_value(on->sheet, "dT_hot, by superposition", view->hot_rise_K, "K", "#",
                   view->hot_rise_K);
    if (view->hot_rise_K > 0)
        pf_sheet_value(on->sheet, "SOA margin", outcome->soa_margin, "", "(# - #) / #",
                       on->allowed_degC, outcome->start_degC, view->hot_rise_K);
    if (pf_is_stated(outcome->peak_junction_degC))
        pf_sheet_value(on->sheet, "T_j, peak, by superposition on Zth", outcome->peak_junction_degC,
                       "degC", "#", outcome->peak_junction_degC);
    show_steps(on);
    show_estimate(on, &view->half_time, "peak power for half the time");
    show_estimate(on, &view->equal_energy, "energy over peak power");
    pf_sheet_note(on->sheet, "The superposition decides.");
}

void pf_sheet_event(pf_sheet *sheet, const pf_sheet_subject *subject, size_t slot)
{
    const pf_explanation *of = subject->explanation;
    const event_sheet on = {sheet,
                            subject,
                            slot,
                            &of->assessment.stress.outcome[slot],
                            &of->view[slot],
                            of->assessment.stress.allowed_degC};
    pf_sheet_section(sheet, pf_plan_event_name(subject->plan, slot));
    note_corner(&on);
    if (on.outcome->cause != PF_CAUSE_NONE)
        pf_sheet_note(sheet, "%s: %s.",
                      on.outcome->cause == PF_CAUSE_HOT_START ? "SOA margin 0" : "Unassessed",
                      pf_cause_text(on.outcome->cause));
    if (!pf_is_stated(on.outcome->start_degC)) return;
    switch (on.view->event) {
    case PF_TURN_OFF:
        show_turn_off(&on);
        return;
    case PF_RETRY:
        show_retry(&on);
        return;
    case PF_START_UP:
    case PF_SUPPLY_STEP:
    case PF_RECORDED:
        if (pf_is_stated(on.outcome->duration_s)) show_waves(&on);
        return;
    default:
        show_short(&on);
        return;
    }
}
