/* sheet_table.c: the events of a sheet side by side, and what the margin answers to. */
#include "report/sheet_table.h"
#include "base/number.h"
#include "report/words.h"

#include <math.h>

static void print_cell(FILE *out, double value, int width)
{
    char number[PF_NUMBER_ROOM] = "-";
    if (isfinite(value)) pf_number_print(number, value, 4);
    fputc(' ', out);
    pf_text_field_print(out, number, (size_t)width, true);
}

static void print_row(FILE *out, const pf_sheet_subject *subject, size_t slot)
{
    const pf_outcome *outcome = &subject->explanation->assessment.stress.outcome[slot];
    const pf_event_view *view = &subject->explanation->view[slot];
    bool rectangle = pf_event_is_rectangle(view->event), turn_off = view->event == PF_TURN_OFF;
    double vds_V = rectangle ? view->vds_V : view->voltage_at_peak_V;
    double id_A = rectangle ? view->id_A : outcome->peak_power_W / view->voltage_at_peak_V;
    fputs("  ", out);
    pf_text_field_print(out, pf_plan_event_name(subject->plan, slot), 14, false);
    print_cell(out, turn_off ? PF_NONE : vds_V, 7);
    print_cell(out, turn_off ? outcome->peak_current_A : id_A, 7);
    print_cell(out, outcome->duration_s, 8);
    print_cell(out, turn_off ? outcome->avalanche_J : outcome->energy_J, 8);
    print_cell(out, outcome->peak_power_W, 7);
    print_cell(out, outcome->start_degC, 6);
    print_cell(out, rectangle ? view->soa.current_A : PF_NONE, 7);
    print_cell(out, rectangle ? view->limit_A : PF_NONE, 7);
    print_cell(out, outcome->soa_margin, 7);
    print_cell(out, outcome->worst_time_s, 8);
    fputc('\n', out);
}

void pf_sheet_table(FILE *out, const pf_sheet_subject *subject)
{
    static const char *const head[][10] = {
        {"V_DS", "I_D", "time", "energy", "peak", "start", "I_SOA", "I", "SOA", "worst"},
        {"V", "A", "s", "J", "W", "degC", "cold, A", "allowed", "margin", "at, s"}};
    static const size_t width[] = {7, 7, 8, 8, 7, 6, 7, 7, 7, 8};
    fputs("\nEvents at their worst corners; V_DS and I_D of waveforms at peak power\n", out);
    for (size_t line = 0; line < 2; line++) {
        fprintf(out, "  %-14s", line ? "event" : "");
        for (size_t i = 0; i < 10; i++) {
            fputc(' ', out);
            pf_text_field_print(out, head[line][i], width[i], true);
        }
        fputc('\n', out);
    }
    for (size_t slot = 0; slot < pf_plan_slots(subject->plan); slot++)
        if (pf_plan_event(subject->plan, slot) != PF_RUNNING) print_row(out, subject, slot);
}

/* "+12.3 %", with the verdict where it differs from the part's own. */
static void print_change(FILE *out, double change, pf_verdict then, pf_verdict now)
{
    char text[64] = "-";
    if (isfinite(change))
        snprintf(text, sizeof text, "%+.1f %%%s%s", 100 * change, then != now ? " " : "",
                 then != now ? pf_verdict_text(then) : "");
    for (char *c = text; *c; c++)
        if (*c == ',') *c = '.';
    pf_text_field_print(out, text, 22, true);
}

void pf_sheet_influences(FILE *out, const pf_sheet_subject *subject)
{
    pf_verdict now = subject->explanation->assessment.verdict;
    size_t silent = 0;
    if (!subject->influence_count) return;
    fputs("\nChange of the deciding SOA margin, one input moved at a time\n", out);
    fprintf(out, "  %-34s%22s%22s\n", "", "10 % less", "10 % more");
    for (size_t i = 0; i < subject->influence_count; i++) {
        const pf_influence *on = &subject->influence[i];
        bool known = pf_is_stated(on->fall) || pf_is_stated(on->rise);
        bool moves = fabs(on->fall) >= 5e-4 || fabs(on->rise) >= 5e-4 ||
                     (known && (on->fallen != now || on->risen != now));
        silent += !moves;
        if (!moves) continue;
        fprintf(out, "  %-8s %-25s", on->rating ? "rating" : "profile", on->name);
        print_change(out, on->fall, on->fallen, now);
        print_change(out, on->rise, on->risen, now);
        fprintf(out, "%s\n", on->kelvin ? "  (10 K)" : "");
    }
    fprintf(out, "  %zu more move it by less than 0.05 %%.\n", silent);
}
