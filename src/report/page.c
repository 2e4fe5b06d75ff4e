/* page.c: a ranking as one HTML page. */
#include "base/number.h"
#include "report/markup.h"
#include "report/plot.h"
#include "report/words.h"

#include <math.h>
#include <passfet/page.h>
#include <string.h>

static const char style[] =
    "body{font:15px/1.4 Georgia,serif;color:#000;background:#fff;max-width:60em;margin:2em auto;"
    "padding:0 1em}\n"
    "h1{font-size:1.5em}h2{font-size:1.2em;border-top:1px solid #000;padding-top:.6em}\n"
    "table{border-collapse:collapse;font-size:.87em;margin:.8em 0}\n"
    "th,td{padding:.15em .6em;text-align:left;border-bottom:1px solid #bbb;vertical-align:top}\n"
    "th{border-bottom:1px solid #000}.n{text-align:right;white-space:nowrap}.stall{border:2px "
    "solid "
    "#000;padding:.6em}\n"
    "svg{width:100%;height:auto;font:12px sans-serif}\n"
    ".grid{stroke:#ddd}.decade{stroke:#999}.leader{stroke:#999;stroke-dasharray:2 2}\n"
    ".sheet{fill:none;stroke:#000;stroke-width:1.4}.stress{fill:#000}\n"
    ".step{fill:#fff;stroke:#000}.chain{stroke:#000;stroke-dasharray:4 3}\n"
    ".room{stroke:#000;stroke-width:2}.number{font-weight:bold;paint-order:stroke;stroke:#fff;"
    "stroke-width:3px}\n"
    "@media print{body{font-size:10pt;margin:0}section{break-inside:avoid-page}}\n";

/* A cell of a table, from a text or a number. */
static void text_cell(FILE *out, const char *text)
{
    fputs("<td>", out);
    pf_markup_text(out, text);
    fputs("</td>", out);
}

static void number_cell(FILE *out, double value, int digits)
{
    fputs("<td class=\"n\">", out);
    pf_markup_number(out, value, digits);
    fputs("</td>", out);
}

static void value_cell(FILE *out, double value, pf_quantity quantity)
{
    char text[PF_UNIT_ROOM];
    pf_value_print(text, value, quantity, 4);
    if (!isfinite(value)) strcpy(text, "\xE2\x80\x93");
    fprintf(out, "<td class=\"n\">%s</td>", text);
}

static void write_heads(FILE *out, const char *const *head)
{
    fputs("<table>\n<tr>", out);
    for (; *head; head++)
        fprintf(out, "<th>%s</th>", *head);
    fputs("</tr>\n", out);
}

/* --- Card ---------------------------------------------------------------------------------- */

static void write_values(FILE *out, const pf_profile *profile)
{
    static const char *const head[] = {"parameter", "value", "meaning", NULL};
    const pf_parameter_fact *fact = pf_parameter_facts();
    write_heads(out, head);
    for (int i = 0; i < PF_PARAMETER_COUNT; i++) {
        char value[PF_INTERVAL_ROOM];
        if (!pf_is_stated(profile->value[i].max)) continue;
        pf_interval_print(value, profile, (pf_parameter)i);
        fputs("<tr>", out);
        text_cell(out, fact[i].name);
        text_cell(out, value);
        text_cell(out, profile->stated[i] ? fact[i].meaning : "not stated, the usual value");
        fputs("</tr>\n", out);
    }
    fputs("</table>\n", out);
}

static void write_card(FILE *out, const pf_plan *plan)
{
    const pf_profile *profile = pf_plan_profile(plan);
    char setting[200];
    pf_setting_print(profile, setting, sizeof setting);
    fputs("<section><h2>Card ", out);
    pf_markup_text(out, profile->name);
    fprintf(out, "</h2>\n<p>%s.", setting);
    if (profile->derating.name[0]) {
        fputs(" Derating by ", out);
        pf_markup_text(out, profile->derating.name);
        fputs(pf_rule_is_from_memory(&profile->derating)
                  ? " (quoted from memory: check the standard)."
                  : ".",
              out);
    }
    fputs("</p>\n", out);
    if (pf_plan_stall(plan)) {
        fputs("<p class=\"stall\"><b>The card does not start.</b> ", out);
        pf_markup_text(out, pf_plan_stall(plan));
        fputs("</p>\n", out);
    }
    write_values(out, profile);
    fputs("</section>\n", out);
}

/* --- Shortlist ----------------------------------------------------------------------------- */

static void write_row(FILE *out, const pf_ranking *ranking, size_t place)
{
    char reason[300] = "";
    const pf_row *row = &ranking->row[place];
    const pf_assessment *deciding = &row->assessment[row->deciding_profile];
    const pf_plan *plan = ranking->plan[row->deciding_profile];
    const pf_check *check = pf_assessment_decisive(deciding);
    if (row->verdict != PF_PASS && check) pf_check_print(plan, check, reason, sizeof reason);
    fprintf(out, "<tr><td class=\"n\">%zu</td>", place + 1);
    text_cell(out, row->part);
    text_cell(out, row->maker);
    text_cell(out, row->package);
    fprintf(out, "<td><b>%s</b></td>", pf_verdict_text(row->verdict));
    number_cell(out, row->soa_margin, 3);
    text_cell(out, pf_limiting_event(plan, deciding));
    number_cell(out, row->conduction_loss_W, 3);
    number_cell(out, row->running_degC, 4);
    number_cell(out, row->peak_junction_degC, 4);
    text_cell(out, reason);
    fputs("</tr>\n", out);
}

static void write_shortlist(FILE *out, const pf_ranking *ranking, const pf_report_source *source)
{
    static const char *const head[] = {"",
                                       "part",
                                       "maker",
                                       "package",
                                       "verdict",
                                       "SOA margin",
                                       "worst event",
                                       "loss, W",
                                       "running T<sub>j</sub>, \xC2\xB0"
                                       "C",
                                       "peak T<sub>j</sub>, \xC2\xB0"
                                       "C",
                                       "what decides",
                                       NULL};
    const size_t *tally = ranking->tally;
    fprintf(out, "<h2>Shortlist</h2>\n<p>%zu parts: %zu pass, %zu unassessed, %zu fail. Ratings: ",
            tally[PF_PASS] + tally[PF_UNASSESSED] + tally[PF_FAIL], tally[PF_PASS],
            tally[PF_UNASSESSED], tally[PF_FAIL]);
    pf_markup_text(out, source->database);
    fputs(", revision ", out);
    pf_markup_text(out, source->revision);
    fputs(".</p>\n", out);
    write_heads(out, head);
    for (size_t i = 0; i < ranking->count && (!source->top || i < source->top); i++)
        write_row(out, ranking, i);
    fputs("</table>\n", out);
}

/* --- One part ------------------------------------------------------------------------------ */

static void write_event(FILE *out, const pf_plan *plan, size_t slot, const pf_outcome *outcome,
                        const pf_event_view *view)
{
    pf_event event = pf_plan_event(plan, slot);
    bool rectangle = pf_event_is_rectangle(event), wave = view->voltage_at_peak_V > 0;
    double wave_V = wave ? view->voltage_at_peak_V : PF_NONE;
    fprintf(out, "<tr><td class=\"n\">%zu</td>", slot + 1);
    text_cell(out, pf_plan_event_name(plan, slot));
    value_cell(out, rectangle ? view->vds_V : wave_V, PF_VOLTAGE);
    if (rectangle || wave)
        value_cell(out, rectangle ? view->id_A : outcome->peak_power_W / wave_V, PF_CURRENT);
    else
        value_cell(out, outcome->peak_current_A, PF_CURRENT);
    value_cell(out, outcome->duration_s > 0 ? outcome->duration_s : PF_NONE, PF_TIME);
    value_cell(out, event == PF_TURN_OFF ? outcome->avalanche_J : outcome->energy_J, PF_ENERGY);
    value_cell(out, rectangle ? view->limit_A : PF_NONE, PF_CURRENT);
    number_cell(out, outcome->start_degC, 4);
    number_cell(out, outcome->peak_junction_degC, 4);
    number_cell(out, outcome->soa_margin, 3);
    text_cell(out, outcome->cause == PF_CAUSE_NONE ? "" : pf_cause_text(outcome->cause));
    fputs("</tr>\n", out);
}

static void write_events(FILE *out, const pf_plan *plan, const pf_explanation *explanation)
{
    static const char *const head[] = {"",
                                       "event, at its worst corner",
                                       "V<sub>DS</sub>",
                                       "I<sub>D</sub>",
                                       "time",
                                       "energy",
                                       "I<sub>D</sub> allowed",
                                       "start, \xC2\xB0"
                                       "C",
                                       "peak T<sub>j</sub>, \xC2\xB0"
                                       "C",
                                       "SOA margin",
                                       "why not",
                                       NULL};
    const pf_stress *stress = &explanation->assessment.stress;
    write_heads(out, head);
    for (size_t slot = 0; slot < stress->count; slot++)
        write_event(out, plan, slot, &stress->outcome[slot], &explanation->view[slot]);
    fputs("</table>\n", out);
}

static void write_reasons(FILE *out, const pf_plan *plan, const pf_assessment *on)
{
    char text[300];
    fputs("<ul>\n", out);
    for (size_t i = 0; i < on->check_count; i++) {
        if (on->check[i].verdict == PF_PASS) continue;
        pf_check_print(plan, &on->check[i], text, sizeof text);
        fprintf(out, "<li><b>%s</b>: ", pf_verdict_text(on->check[i].verdict));
        pf_markup_text(out, text);
        fputs("</li>\n", out);
    }
    for (unsigned bit = 0; on->stress.remarks >> bit; bit++) {
        if (!(on->stress.remarks >> bit & 1)) continue;
        fputs("<li>", out);
        pf_markup_text(out, pf_remark_text(1u << bit));
        fputs("</li>\n", out);
    }
    fputs("</ul>\n", out);
}

/* One end of the window: a time, and by how much the timer keeps away from it. */
static void write_gap(FILE *out, const char *what, double time_s, double gap)
{
    char time[PF_UNIT_ROOM];
    pf_value_print(time, time_s, PF_TIME, 4);
    fprintf(out, "%s %s", what, time);
    if (gap == gap) {
        fputs(" (gap ", out);
        pf_markup_number(out, 100 * gap, 3);
        fputs(" %)", out);
    }
}

static void write_window(FILE *out, const pf_timer_window *window)
{
    char least[PF_UNIT_ROOM], most[PF_UNIT_ROOM];
    pf_value_print(least, window->timer_min_s, PF_TIME, 4);
    pf_value_print(most, window->timer_max_s, PF_TIME, 4);
    fputs("<p>Timer window: ", out);
    if (window->cuts_starts)
        write_gap(out, "slowest good start", window->slowest_start_s, window->start_gap);
    fprintf(out, "%sfault time %s to %s; ", window->cuts_starts ? "; " : "", least, most);
    write_gap(out, "longest fault that the part survives", window->longest_fault_s,
              window->fault_gap);
    fprintf(out, "%s%s.</p>\n", window->fault_is_open ? ", unassessed beyond" : "",
            window->no_value ? ": no timer value exists" : "");
}

static void write_caption(FILE *out, const pf_part *part)
{
    fputs("<p>Lines: the sheet's safe operating area at a case of ", out);
    pf_markup_number(out, part->soa[0].case_degC, 4);
    fputs(
        " \xC2\xB0"
        "C. Squares: rectangular stress, with a bar up to the current that the sheet allows there "
        "for so long from the starting temperature. Circles: the steps of a waveform; what counts "
        "is its superposition, not a single step. Numbers: rows of the table, where V_DS and I_D "
        "of a "
        "waveform are those at peak power.</p>\n",
        out);
}

void pf_page_part(FILE *out, size_t place, const pf_plan *plan, const pf_part *part,
                  const pf_explanation *explanation)
{
    fprintf(out, "<section><h2>%zu. ", place + 1);
    pf_markup_text(out, part->name);
    fputs(part->maker ? ", " : "", out);
    pf_markup_text(out, part->maker ? part->maker : "");
    fprintf(out, ": %s on ", pf_verdict_text(explanation->assessment.verdict));
    pf_markup_text(out, pf_plan_profile(plan)->name);
    fputs("</h2>\n", out);
    pf_plot_soa(out, place + 1, plan, part, explanation);
    if (part->soa_count)
        write_caption(out, part);
    else
        fputs("<p>The sheet states no safe operating area.</p>\n", out);
    write_events(out, plan, explanation);
    write_window(out, &explanation->window);
    write_reasons(out, plan, &explanation->assessment);
    fputs("</section>\n", out);
}

/* --- Page ---------------------------------------------------------------------------------- */

void pf_page_begin(FILE *out, const pf_ranking *ranking, const pf_report_source *source)
{
    fputs("<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n"
          "<meta name=\"viewport\" content=\"width=device-width\">\n<title>Shortlist",
          out);
    for (size_t i = 0; i < ranking->profile_count; i++) {
        fputs(i ? ", " : " for ", out);
        pf_markup_text(out, pf_plan_profile(ranking->plan[i])->name);
    }
    fprintf(out, "</title>\n<style>\n%s</style>\n</head>\n<body>\n", style);
    fputs("<h1>Series pass MOSFETs: a shortlist, not an approval</h1>\n", out);
    for (size_t i = 0; i < ranking->profile_count; i++)
        write_card(out, ranking->plan[i]);
    write_shortlist(out, ranking, source);
}

void pf_page_end(FILE *out)
{
    fputs("<section><h2>Before anybody relies on this</h2>\n<p>", out);
    for (const char *const *text = pf_report_cautions(); *text; text++) {
        pf_markup_text(out, *text);
        fputc('\n', out);
    }
    fputs("</p></section>\n</body>\n</html>\n", out);
}
