/* sheet_json.c: the calculation of one part as JSON. */
#include "report/ranking_json.h"
#include "report/review_json.h"
#include "report/sheet.h"

#include <math.h>

void pf_json_window(pf_json *json, const pf_timer_window *window)
{
    pf_json_name(json, "timer_window");
    pf_json_open(json, '{');
    pf_json_named_bool(json, "timer_cuts_starts", window->cuts_starts);
    pf_json_named_number(json, "slowest_start_s", window->slowest_start_s);
    pf_json_named_number(json, "timer_min_s", window->timer_min_s);
    pf_json_named_number(json, "timer_max_s", window->timer_max_s);
    pf_json_named_number(json, "longest_fault_s", window->longest_fault_s);
    pf_json_named_bool(json, "longer_is_unassessed", window->fault_is_open);
    pf_json_named_number(json, "start_gap_percent", 100 * window->start_gap);
    pf_json_named_number(json, "fault_gap_percent", 100 * window->fault_gap);
    pf_json_named_bool(json, "no_timer_value", window->no_value);
    pf_json_close(json, '}');
}

void pf_json_check(pf_json *json, const pf_plan *plan, const pf_check *check)
{
    char sentence[300];
    bool margin = check->kind == PF_CHECK_SOA_MARGIN, numbers = check->kind > PF_CHECK_POLARITY;
    double share = margin ? check->limit / check->value : check->value / check->limit;
    double none = (double)NAN;
    pf_check_print(plan, check, sentence, sizeof sentence);
    pf_json_open(json, '{');
    pf_json_named_text(json, "check", pf_check_quantity_text(check->kind));
    pf_json_named_text(json, "event",
                       check->slot < 0 ? NULL : pf_plan_event_name(plan, (size_t)check->slot));
    pf_json_named_text(json, "verdict", pf_verdict_text(check->verdict));
    pf_json_named_number(json, "value", numbers ? check->value : none);
    pf_json_named_number(json, "limit", numbers ? check->limit : none);
    pf_json_named_text(json, "unit", pf_quantity_unit(pf_check_quantity(check->kind)));
    pf_json_named_number(json, "share_used", numbers ? share : none);
    pf_json_named_text(json, "words", sentence);
    pf_json_close(json, '}');
}

static void write_checks(pf_json *json, const pf_sheet_subject *subject)
{
    const pf_assessment *assessment = &subject->explanation->assessment;
    pf_json_name(json, "checks");
    pf_json_open(json, '[');
    for (size_t i = 0; i < assessment->check_count; i++)
        pf_json_check(json, subject->plan, &assessment->check[i]);
    pf_json_close(json, ']');
}

static void write_estimate(pf_json *json, const char *name, const pf_estimate *made)
{
    pf_json_name(json, name);
    pf_json_open(json, '{');
    pf_json_named_number(json, "vds_V", made->vds_V);
    pf_json_named_number(json, "id_A", made->id_A);
    pf_json_named_number(json, "time_s", made->time_s);
    pf_json_named_number(json, "allowed_A", made->limit_A);
    pf_json_named_number(json, "margin", made->margin);
    pf_json_named_bool(json, "safe", made->safe);
    pf_json_close(json, '}');
}

/* Hand estimates of every event that is a waveform. */
static void write_estimates(pf_json *json, const pf_sheet_subject *subject)
{
    pf_json_name(json, "hand_estimates");
    pf_json_open(json, '[');
    for (size_t slot = 0; slot < pf_plan_slots(subject->plan); slot++) {
        const pf_event_view *view = &subject->explanation->view[slot];
        if (!view->step_count) continue;
        pf_json_open(json, '{');
        pf_json_named_text(json, "event", pf_plan_event_name(subject->plan, slot));
        pf_json_named_number(json, "superposition_margin",
                             subject->explanation->assessment.stress.outcome[slot].soa_margin);
        pf_json_named_text(json, "decides", "superposition");
        write_estimate(json, "peak_power_for_half_the_time", &view->half_time);
        write_estimate(json, "energy_over_peak_power", &view->equal_energy);
        pf_json_close(json, '}');
    }
    pf_json_close(json, ']');
}

static void write_influences(pf_json *json, const pf_sheet_subject *subject)
{
    pf_json_name(json, "sensitivity");
    pf_json_open(json, '[');
    for (size_t i = 0; i < subject->influence_count; i++) {
        const pf_influence *on = &subject->influence[i];
        pf_json_open(json, '{');
        pf_json_named_text(json, "input", on->name);
        pf_json_named_text(json, "of", on->rating ? "part" : "profile");
        pf_json_named_text(json, "moved_by", on->kelvin ? "10 K" : "10 %");
        pf_json_named_number(json, "margin_change_lower", on->fall);
        pf_json_named_number(json, "margin_change_higher", on->rise);
        pf_json_named_text(json, "verdict_lower", pf_verdict_text(on->fallen));
        pf_json_named_text(json, "verdict_higher", pf_verdict_text(on->risen));
        pf_json_close(json, '}');
    }
    pf_json_close(json, ']');
}

void pf_json_head(pf_json *json, const pf_part *part, const pf_plan *plan,
                  const pf_report_source *source)
{
    pf_json_named_text(json, "part", part->name);
    pf_json_named_text(json, "maker", part->maker);
    pf_json_named_text(json, "package", part->package);
    pf_json_named_text(json, "datasheet", part->datasheet);
    pf_json_named_text(json, "datasheet_date", part->datasheet_date);
    pf_json_named_text(json, "profile", pf_plan_profile(plan)->name);
    pf_json_named_text(json, "database_revision", source ? source->revision : NULL);
    pf_json_named_text(json, "stall", pf_plan_stall(plan));
}

void pf_json_cautions(pf_json *json)
{
    pf_json_name(json, "cautions");
    pf_json_open(json, '[');
    for (const char *const *line = pf_report_cautions(); *line; line++)
        pf_json_text(json, *line);
    pf_json_close(json, ']');
}

void pf_report_sheet_json(FILE *out, const pf_sheet_subject *subject)
{
    pf_json json;
    pf_json_begin(&json, out);
    pf_json_open(&json, '{');
    pf_json_head(&json, subject->part, subject->plan, subject->source);
    pf_json_assessment(&json, subject->plan, &subject->explanation->assessment);
    write_checks(&json, subject);
    write_estimates(&json, subject);
    pf_json_window(&json, &subject->explanation->window);
    write_influences(&json, subject);
    pf_sheet_json_lines(&json, subject);
    pf_json_cautions(&json);
    pf_json_close(&json, '}');
    pf_json_end(&json);
}
