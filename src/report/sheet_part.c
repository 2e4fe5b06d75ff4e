/* sheet_part.c: head, ratings, running card, timer window and open points of a sheet. */
#include "base/number.h"
#include "report/sheet.h"
#include "report/words.h"

#include <math.h>
#include <string.h>

static const char *or_dash(const char *text)
{
    return text && *text ? text : "-";
}

static double value_of(const pf_sheet_subject *subject, pf_parameter parameter)
{
    return pf_plan_profile(subject->plan)->value[parameter].max;
}

void pf_sheet_head(pf_sheet *sheet, const pf_sheet_subject *subject)
{
    const pf_part *part = subject->part;
    const pf_assessment *assessment = &subject->explanation->assessment;
    const pf_check *decisive = pf_assessment_decisive(assessment);
    char setting[200], decides[300] = "";
    pf_setting_print(pf_plan_profile(subject->plan), setting, sizeof setting);
    if (decisive) pf_check_print(subject->plan, decisive, decides, sizeof decides);
    fprintf(sheet->out, "%s (%s, %s) on the card %s\n", part->name, or_dash(part->maker),
            or_dash(part->package), pf_plan_profile(subject->plan)->name);
    fprintf(sheet->out, "  Data sheet %s, %s.", or_dash(part->datasheet),
            or_dash(part->datasheet_date));
    if (subject->source && subject->source->revision)
        fprintf(sheet->out, " Ratings: %s, revision %s.", subject->source->database,
                subject->source->revision);
    fprintf(sheet->out, "\n  Card: %s.\n", setting);
    fprintf(sheet->out, "  Verdict: %s%s%s.\n", pf_verdict_text(assessment->verdict),
            decisive ? "; decided by " : "", decides);
    if (pf_plan_stall(subject->plan)) {
        fputs("  THE CARD DOES NOT START:\n", sheet->out);
        pf_wrapped_print(sheet->out, pf_plan_stall(subject->plan), 4);
    }
}

static const char *unit_of(const pf_check *check)
{
    return pf_quantity_unit(pf_check_quantity(check->kind));
}

/* Value, limit and the share of the limit that is used; of a margin, the share that is required. */
static void show_check(pf_sheet *sheet, const pf_sheet_subject *subject, const pf_check *check)
{
    char label[240], sentence[300];
    pf_check_print(subject->plan, check, sentence, sizeof sentence);
    pf_sheet_note(sheet, "%s: %s", pf_verdict_text(check->verdict), sentence);
    if (check->kind <= PF_CHECK_POLARITY || check->verdict == PF_UNASSESSED) return;
    bool margin = check->kind == PF_CHECK_SOA_MARGIN;
    double used = margin ? check->limit / check->value : check->value / check->limit;
    if (!isfinite(used) || !isfinite(check->value)) return;
    snprintf(label, sizeof label, "share used, %s%s%s%s%s", pf_check_quantity_text(check->kind),
             check->slot >= 0 ? " of " : "",
             check->slot >= 0 ? pf_plan_event_name(subject->plan, (size_t)check->slot) : "",
             *unit_of(check) ? ", both in " : "", unit_of(check));
    pf_sheet_value(sheet, label, used, "", "# / #", margin ? check->limit : check->value,
                   margin ? check->value : check->limit);
}

static void show_limit(pf_sheet *sheet, const char *label, double use, double rating,
                       const char *unit)
{
    if (pf_is_stated(rating))
        pf_sheet_value(sheet, label, use * rating, unit, "# * #", use, rating);
}

void pf_sheet_ratings(pf_sheet *sheet, const pf_sheet_subject *subject)
{
    const pf_profile *profile = pf_plan_profile(subject->plan);
    const pf_assessment *assessment = &subject->explanation->assessment;
    const pf_part *part = subject->part;
    pf_sheet_section(sheet, "Checks: value, limit, share used");
    show_limit(sheet, "V_DS allowed", profile->value[PF_VOLTAGE_USE].min, part->vds_max_V, "V");
    show_limit(sheet, "V_GS allowed", profile->value[PF_GATE_USE].min, part->vgs_max_V, "V");
    show_limit(sheet, "I_D allowed", profile->value[PF_CURRENT_USE].min, part->id_cont_A, "A");
    if (pf_is_stated(assessment->stress.allowed_degC))
        pf_sheet_value(sheet, "T_allow", assessment->stress.allowed_degC, "degC", "#",
                       assessment->stress.allowed_degC);
    if (assessment->stress.allowed_degC < part->tj_max_degC)
        pf_sheet_note(sheet, "The profile or its derating rule allows less than T_j,max.");
    for (size_t i = 0; i < assessment->check_count; i++)
        show_check(sheet, subject, &assessment->check[i]);
}

/* R_th from junction to ambient. */
static void show_rth(pf_sheet *sheet, const pf_sheet_subject *subject)
{
    double board = value_of(subject, PF_CASE_TO_AMBIENT);
    double rth_KpW = subject->explanation->rth_KpW;
    if (pf_is_stated(board))
        pf_sheet_value(sheet, "R_th, junction to ambient", rth_KpW, "K/W", "# + #",
                       subject->part->rth_jc_KpW, board);
    else
        pf_sheet_value(sheet, "R_th, junction to ambient on the sheet's board", rth_KpW, "K/W", "#",
                       rth_KpW);
}

static void show_junction(pf_sheet *sheet, const pf_sheet_subject *subject)
{
    const pf_explanation *of = subject->explanation;
    const pf_stress *stress = &of->assessment.stress;
    double slope = of->rdson_slope_pK, gain = of->gain_KpK;
    double count = pf_plan_profile(subject->plan)->value[PF_PARALLEL_COUNT].min;
    pf_sheet_value(sheet, "slope a of Rds(on)", slope, "1/K", "(# - 1) / (# - 25)", of->hot_ratio,
                   subject->part->tj_max_degC);
    pf_sheet_value(sheet, "g", gain, "K", "# * #^2 * #", of->rth_KpW, of->share_A,
                   stress->rdson_cold_ohm);
    if (stress->running_cause == PF_CAUSE_RUNAWAY) {
        pf_sheet_value(sheet, "g a", gain * slope, "", "# * #", gain, slope);
        pf_sheet_note(sheet, "g a is not below 1: thermal runaway.");
        return;
    }
    pf_sheet_value(sheet, "T_j, running", stress->running_degC, "degC",
                   "(# + # * (1 - 25 * #)) / (1 - # * #)",
                   value_of(subject, PF_AMBIENT_TEMPERATURE), gain, slope, gain, slope);
    pf_sheet_value(sheet, "conduction loss, all parts", stress->conduction_loss_W, "W",
                   "# * #^2 * # * (1 + # * (# - 25))", count, of->share_A, stress->rdson_cold_ohm,
                   slope, stress->running_degC);
}

void pf_sheet_running(pf_sheet *sheet, const pf_sheet_subject *subject)
{
    const pf_explanation *of = subject->explanation;
    const pf_stress *stress = &of->assessment.stress;
    const pf_interval *count = &pf_plan_profile(subject->plan)->value[PF_PARALLEL_COUNT];
    pf_sheet_section(sheet, "running: current, ambient and board at their maximum");
    pf_sheet_value(sheet, "current of one part", of->share_A, "A", "# / #",
                   value_of(subject, PF_RUNNING_CURRENT), count->min);
    if (pf_is_stated(stress->rdson_cold_ohm)) {
        pf_sheet_note(sheet, "The lowest gate drive, %.4g V, reaches the rating at %.4g V.",
                      pf_plan_profile(subject->plan)->value[PF_GATE_DRIVE].min,
                      stress->rdson_drive_V);
        pf_sheet_value(sheet, "Rds(on) at 25 degC", stress->rdson_cold_ohm, "Ohm", "#",
                       stress->rdson_cold_ohm);
    }
    if (pf_is_stated(of->rth_KpW)) show_rth(sheet, subject);
    if (stress->running_cause == PF_CAUSE_NONE || stress->running_cause == PF_CAUSE_RUNAWAY)
        show_junction(sheet, subject);
    else
        pf_sheet_note(sheet, "Not worked out: %s.", pf_cause_text(stress->running_cause));
}

static void show_gaps(pf_sheet *sheet, const pf_timer_window *window)
{
    if (window->cuts_starts && pf_is_stated(window->start_gap))
        pf_sheet_value(sheet, "gap from the slowest start to the timer", 100 * window->start_gap,
                       "%", "100 * (# / # - 1)", window->timer_min_s, window->slowest_start_s);
    if (pf_is_stated(window->fault_gap))
        pf_sheet_value(sheet, "gap from the timer to the longest fault", 100 * window->fault_gap,
                       "%", "100 * (# / # - 1)", window->longest_fault_s, window->timer_max_s);
    if (window->fault_is_open)
        pf_sheet_note(sheet, "A longer fault is not failed but unassessed: the sheet ends there.");
    if (window->no_value)
        pf_sheet_note(sheet, "No timer value exists: the part does not survive a fault that is as "
                             "long as a good start.");
    if (window->start_gap < 0 && window->cuts_starts && !window->no_value)
        pf_sheet_note(sheet, "The shortest timer cuts the slowest good start off.");
    if (window->fault_gap < 0 && !window->no_value)
        pf_sheet_note(sheet, "The part does not survive a fault that the longest timer allows.");
}

void pf_sheet_window(pf_sheet *sheet, const pf_sheet_subject *subject)
{
    const pf_timer_window *window = &subject->explanation->window;
    pf_sheet_section(sheet, "Timer window");
    if (pf_is_stated(window->slowest_start_s))
        pf_sheet_value(sheet, "slowest good start", window->slowest_start_s, "s", "#",
                       window->slowest_start_s);
    else
        pf_sheet_note(sheet, "The slowest start never ends.");
    pf_sheet_value(sheet, "shortest timer", window->timer_min_s, "s", "#", window->timer_min_s);
    pf_sheet_value(sheet, "longest timer", window->timer_max_s, "s", "#", window->timer_max_s);
    if (pf_is_stated(window->longest_fault_s))
        pf_sheet_value(sheet, "longest fault survived with the required margin",
                       window->longest_fault_s, "s", "#", window->longest_fault_s);
    else
        pf_sheet_note(sheet, "The longest fault that the part survives cannot be worked out.");
    show_gaps(sheet, window);
}

/* Events that the profile does not ask for. */
static void note_absent(pf_sheet *sheet, const pf_profile *profile)
{
    static const struct {
        pf_parameter parameter;
        pf_event event;
    } asked[] = {{PF_TRIP_CURRENT, PF_TRIP},
                 {PF_RETRY_INTERVAL, PF_RETRY},
                 {PF_SUPPLY_STEP_FROM, PF_SUPPLY_STEP},
                 {PF_SUPPLY_INDUCTANCE, PF_TURN_OFF}};
    for (size_t i = 0; i < sizeof asked / sizeof *asked; i++)
        if (!profile->stated[asked[i].parameter])
            pf_sheet_note(sheet, "%s: the profile states no %s.", pf_event_text(asked[i].event),
                          pf_parameter_facts()[asked[i].parameter].name);
    if (profile->stated[PF_CLAMP_VOLTAGE] && profile->stated[PF_SUPPLY_INDUCTANCE])
        pf_sheet_note(sheet, "avalanche energy: the clamp takes the energy of the turn-off.");
    if (profile->value[PF_PARALLEL_COUNT].max > 1)
        pf_sheet_note(sheet, "sharing between parallel parts: in linear mode one part is taken to "
                             "carry all.");
    pf_sheet_note(sheet,
                  "never checked: ringing, dV/dt and gate oscillation, bond wires and solder, "
                  "tolerance between the curve in the sheet and the part in hand.");
}

void pf_sheet_open(pf_sheet *sheet, const pf_sheet_subject *subject)
{
    const pf_assessment *assessment = &subject->explanation->assessment;
    unsigned remarks = assessment->stress.remarks;
    char sentence[300];
    pf_sheet_section(sheet, "Not checked, and why");
    for (size_t i = 0; i < assessment->check_count; i++) {
        if (assessment->check[i].verdict != PF_UNASSESSED) continue;
        pf_check_print(subject->plan, &assessment->check[i], sentence, sizeof sentence);
        pf_sheet_note(sheet, "%s", sentence);
    }
    note_absent(sheet, pf_plan_profile(subject->plan));
    if (!remarks) return;
    pf_sheet_section(sheet, "Remarks");
    for (unsigned bit = 0; remarks >> bit; bit++)
        if (remarks >> bit & 1) pf_sheet_note(sheet, "%s.", pf_remark_text(1u << bit));
}
