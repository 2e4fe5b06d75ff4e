/* ranking_json.c: a ranking as JSON. One profile gives `profile` and flat parts; several give
** `profiles`, and each part a list `cards` with the same keys per profile. */
#include "report/ranking_json.h"
#include "report/json.h"
#include "report/trials.h"
#include "report/words.h"

#include <passfet/report.h>

static void write_profile(pf_json *json, const pf_plan *plan)
{
    const pf_profile *profile = pf_plan_profile(plan);
    pf_json_open(json, '{');
    pf_json_named_text(json, "name", profile->name);
    pf_json_named_number(json, "required_margin", profile->value[PF_REQUIRED_MARGIN].max);
    pf_json_named_text(json, "stall", pf_plan_stall(plan));
    pf_json_named_number(json, "slowest_start_s", pf_plan_slowest_start_s(plan));
    pf_json_named_number(json, "fastest_start_s", pf_plan_fastest_start_s(plan));
    pf_json_named_text(json, "derating", profile->derating.name[0] ? profile->derating.name : NULL);
    pf_json_named_text(json, "derating_mark",
                       profile->derating.name[0] ? profile->derating.mark : NULL);
    pf_json_close(json, '}');
}

static void write_corner(pf_json *json, const pf_plan *plan, size_t slot, unsigned corner)
{
    const pf_parameter_fact *fact = pf_parameter_facts();
    pf_json_name(json, "corner");
    pf_json_open(json, '{');
    for (int i = 0; i < PF_PARAMETER_COUNT; i++) {
        pf_parameter parameter = (pf_parameter)i;
        double value = pf_plan_corner_value(plan, slot, corner, parameter);
        if (value == value)
            pf_json_named_number(json, fact[i].name,
                                 pf_parameter_signed(pf_plan_profile(plan), parameter, value));
    }
    pf_json_close(json, '}');
}

static void write_event(pf_json *json, const pf_plan *plan, size_t slot, const pf_outcome *outcome)
{
    pf_json_open(json, '{');
    pf_json_named_text(json, "event", pf_event_text(pf_plan_event(plan, slot)));
    if (pf_plan_event(plan, slot) == PF_RECORDED)
        pf_json_named_text(json, "capture", pf_plan_event_name(plan, slot));
    pf_json_named_number(json, "soa_margin", outcome->soa_margin);
    pf_json_named_number(json, "start_C", outcome->start_degC);
    pf_json_named_number(json, "peak_junction_C", outcome->peak_junction_degC);
    pf_json_named_number(json, "worst_time_s", outcome->worst_time_s);
    pf_json_named_number(json, "duration_s", outcome->duration_s);
    pf_json_named_number(json, "energy_J", outcome->energy_J);
    pf_json_named_number(json, "peak_power_W", outcome->peak_power_W);
    pf_json_named_number(json, "peak_current_A", outcome->peak_current_A);
    if (pf_plan_event(plan, slot) == PF_TURN_OFF) {
        pf_json_named_number(json, "avalanche_J", outcome->avalanche_J);
        pf_json_named_number(json, "avalanche_limit_J", outcome->avalanche_limit_J);
    }
    pf_json_named_text(json, "cause",
                       outcome->cause == PF_CAUSE_NONE ? NULL : pf_cause_text(outcome->cause));
    write_corner(json, plan, slot, outcome->corner);
    pf_json_close(json, '}');
}

static void write_reasons(pf_json *json, const pf_plan *plan, const pf_assessment *on)
{
    char text[300];
    pf_json_name(json, "reasons");
    pf_json_open(json, '[');
    for (size_t i = 0; i < on->check_count; i++) {
        if (on->check[i].verdict == PF_PASS) continue;
        pf_check_print(plan, &on->check[i], text, sizeof text);
        pf_json_text(json, text);
    }
    pf_json_close(json, ']');
    pf_json_name(json, "remarks");
    pf_json_open(json, '[');
    for (unsigned bit = 0; on->stress.remarks >> bit; bit++)
        if (on->stress.remarks >> bit & 1) pf_json_text(json, pf_remark_text(1u << bit));
    pf_json_close(json, ']');
}

void pf_json_assessment(pf_json *json, const pf_plan *plan, const pf_assessment *on)
{
    const pf_stress *stress = &on->stress;
    const char *limiting = pf_limiting_event(plan, on);
    pf_json_named_text(json, "verdict", pf_verdict_text(on->verdict));
    pf_json_named_number(json, "soa_margin", stress->soa_margin);
    pf_json_named_text(json, "limiting_event", *limiting ? limiting : NULL);
    pf_json_named_number(json, "conduction_loss_W", stress->conduction_loss_W);
    pf_json_named_number(json, "running_junction_C", stress->running_degC);
    pf_json_named_number(json, "peak_junction_C", stress->peak_junction_degC);
    pf_json_named_number(json, "allowed_junction_C", stress->allowed_degC);
    write_reasons(json, plan, on);
    pf_json_name(json, "events");
    pf_json_open(json, '[');
    for (size_t slot = 0; slot < stress->count; slot++)
        write_event(json, plan, slot, &stress->outcome[slot]);
    pf_json_close(json, ']');
}

static void write_cards(pf_json *json, const pf_ranking *ranking, const pf_row *row)
{
    pf_json_named_text(json, "verdict", pf_verdict_text(row->verdict));
    pf_json_named_number(json, "soa_margin", row->soa_margin);
    pf_json_named_number(json, "conduction_loss_W", row->conduction_loss_W);
    pf_json_named_number(json, "running_junction_C", row->running_degC);
    pf_json_named_number(json, "peak_junction_C", row->peak_junction_degC);
    pf_json_named_text(json, "deciding_card",
                       pf_plan_profile(ranking->plan[row->deciding_profile])->name);
    pf_json_name(json, "cards");
    pf_json_open(json, '[');
    for (size_t i = 0; i < ranking->profile_count; i++) {
        pf_json_open(json, '{');
        pf_json_named_text(json, "card", pf_plan_profile(ranking->plan[i])->name);
        pf_json_assessment(json, ranking->plan[i], &row->assessment[i]);
        pf_json_close(json, '}');
    }
    pf_json_close(json, ']');
}

static void write_part(pf_json *json, const pf_ranking *ranking, size_t place,
                       const pf_report_source *source)
{
    const pf_row *row = &ranking->row[place];
    pf_json_open(json, '{');
    pf_json_named_number(json, "rank", (double)(place + 1));
    pf_json_named_text(json, "part", row->part);
    pf_json_named_text(json, "maker", row->maker);
    pf_json_named_text(json, "package", row->package);
    if (ranking->profile_count == 1)
        pf_json_assessment(json, ranking->plan[0], &row->assessment[0]);
    else
        write_cards(json, ranking, row);
    pf_json_named_bool(json, "unbeaten", pf_row_is_unbeaten(ranking, place));
    pf_json_row_review(json, source, place);
    pf_json_close(json, '}');
}

void pf_report_json(FILE *out, const pf_ranking *ranking, const pf_report_source *source)
{
    size_t shown = source->top && source->top < ranking->count ? source->top : ranking->count;
    pf_json json;
    pf_json_begin(&json, out);
    pf_json_open(&json, '{');
    pf_json_name(&json, ranking->profile_count == 1 ? "profile" : "profiles");
    if (ranking->profile_count > 1) pf_json_open(&json, '[');
    for (size_t i = 0; i < ranking->profile_count; i++)
        write_profile(&json, ranking->plan[i]);
    if (ranking->profile_count > 1) pf_json_close(&json, ']');
    pf_json_named_text(&json, "database_revision", source->revision);
    pf_json_name(&json, "parts");
    pf_json_open(&json, '[');
    for (size_t i = 0; i < shown; i++)
        write_part(&json, ranking, i, source);
    pf_json_close(&json, ']');
    pf_json_name(&json, "cautions");
    pf_json_open(&json, '[');
    for (const char *const *line = pf_report_cautions(); *line; line++)
        pf_json_text(&json, *line);
    pf_json_close(&json, ']');
    pf_json_close(&json, '}');
    pf_json_end(&json);
}
