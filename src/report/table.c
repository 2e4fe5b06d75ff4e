/* table.c: a ranking as a table for the terminal, at most PF_TABLE_COLUMNS wide. */
#include "base/number.h"
#include "report/trials.h"
#include "report/words.h"

#include <math.h>
#include <passfet/report.h>
#include <string.h>

/* Widths of the columns, with a blank between two of them. */
enum {
    W_RANK = 4,
    W_PART = 17,
    W_MAKER = 12,
    W_PACKAGE = 8,
    W_VERDICT = 10,
    W_MARGIN = 6,
    W_EVENT = 14,
    W_LOSS = 6,
    W_RUN = 6,
    W_PEAK = 6
};

/* Fields in a line of the head, each this wide. */
enum { HEAD_LABEL = 18, HEAD_VALUE = 30 };

/* A label and its value: the place-th, after one that was so wide. No blanks end a line. */
static void print_head_value(FILE *out, const pf_profile *profile, pf_parameter parameter,
                             int *place, int *width)
{
    char value[PF_INTERVAL_ROOM], label[64];
    if (!pf_is_stated(profile->value[parameter].max)) return;
    snprintf(label, sizeof label, "%s", pf_parameter_facts()[parameter].name);
    for (char *c = label; *c; c++)
        if (*c == '_') *c = ' ';
    pf_interval_print(value, profile, parameter);
    if (*place % 2)
        fprintf(out, "%*s", HEAD_VALUE - 2 - *width > 0 ? HEAD_VALUE - 2 - *width : 1, "");
    else
        fputs(*place ? "\n  " : "  ", out);
    pf_text_field_print(out, label, HEAD_LABEL + 2, false);
    fputs(value, out);
    *width = (int)pf_text_width(value);
    ++*place;
}

static void print_window(FILE *out, const pf_plan *plan)
{
    char slow[PF_UNIT_ROOM], fast[PF_UNIT_ROOM];
    double slow_s = pf_plan_slowest_start_s(plan), fast_s = pf_plan_fastest_start_s(plan);
    if (!pf_is_stated(slow_s)) return;
    pf_value_print(slow, slow_s, PF_TIME, 4);
    pf_value_print(fast, fast_s, PF_TIME, 4);
    if (slow_s == fast_s)
        fprintf(out, "  The output is up after %s.\n", slow);
    else
        fprintf(out, "  The output is up after %s at the fastest corner, %s at the slowest.\n",
                fast, slow);
}

static void print_rule(FILE *out, const pf_derating *rule)
{
    if (!rule->name[0]) return;
    fprintf(out, "  Derating by %s%s.\n", rule->name,
            pf_rule_is_from_memory(rule) ? " (quoted from memory: check the standard)" : "");
    if (rule->power_use == rule->power_use)
        fputs("  Its power factor is not applied: the SOA margin stands in its place.\n", out);
}

static void print_card(FILE *out, const pf_plan *plan)
{
    static const pf_parameter shown[] = {
        PF_SUPPLY_VOLTAGE,   PF_OUTPUT_CAPACITANCE, PF_CURRENT_LIMIT,       PF_POWER_LIMIT,
        PF_FOLDBACK_CURRENT, PF_OUTPUT_SLEW,        PF_GATE_CURRENT,        PF_GATE_CAPACITANCE,
        PF_FAULT_CURRENT,    PF_FAULT_TIME,         PF_TRIP_CURRENT,        PF_RETRY_INTERVAL,
        PF_SUPPLY_STEP_FROM, PF_RUNNING_CURRENT,    PF_AMBIENT_TEMPERATURE, PF_CASE_TO_AMBIENT,
        PF_GATE_DRIVE,       PF_PARALLEL_COUNT,     PF_JUNCTION_LIMIT,      PF_REQUIRED_MARGIN,
    };
    const pf_profile *profile = pf_plan_profile(plan);
    char setting[200];
    int place = 0, width = 0;
    pf_setting_print(profile, setting, sizeof setting);
    fprintf(out, "Card %s: %s\n", profile->name, setting);
    for (size_t i = 0; i < sizeof shown / sizeof *shown; i++)
        print_head_value(out, profile, shown[i], &place, &width);
    fputc('\n', out);
    print_window(out, plan);
    print_rule(out, &profile->derating);
    if (pf_plan_stall(plan)) {
        fputs("  THE CARD DOES NOT START:\n", out);
        pf_wrapped_print(out, pf_plan_stall(plan), 4);
    }
    fputc('\n', out);
}

/* On a line of its own: paths are long. */
static void print_database(FILE *out, const pf_report_source *source)
{
    char text[5000];
    if (!source->revision) return;
    snprintf(text, sizeof text, "Ratings: %s, revision %s.", source->database, source->revision);
    pf_wrapped_print(out, text, 0);
}

static void print_counts(FILE *out, const pf_ranking *ranking, const pf_report_source *source)
{
    size_t all = ranking->tally[PF_PASS] + ranking->tally[PF_UNASSESSED] + ranking->tally[PF_FAIL];
    fprintf(out, "%zu part%s: %zu pass, %zu unassessed, %zu fail.", all, all == 1 ? "" : "s",
            ranking->tally[PF_PASS], ranking->tally[PF_UNASSESSED], ranking->tally[PF_FAIL]);
    if (source->top && source->top < all) fprintf(out, " The first %zu are shown.", source->top);
    fputc('\n', out);
    print_database(out, source);
    fputc('\n', out);
}

static void print_heading(FILE *out)
{
    fprintf(out, "%*s %-*s %-*s %-*s %-*s %*s %-*s %*s %*s %*s\n", W_RANK, "", W_PART, "", W_MAKER,
            "", W_PACKAGE, "", W_VERDICT, "", W_MARGIN, "SOA", W_EVENT, "worst", W_LOSS, "loss",
            W_RUN, "T_j", W_PEAK, "T_j");
    fprintf(out, "%*s %-*s %-*s %-*s %-*s %*s %-*s %*s %*s %*s\n", W_RANK, "", W_PART, "part",
            W_MAKER, "maker", W_PACKAGE, "package", W_VERDICT, "verdict", W_MARGIN, "margin",
            W_EVENT, "event", W_LOSS, "W", W_RUN, "run C", W_PEAK, "peak C");
}

/* A number in a column: 3 to 4 digits, "-" where it could not be worked out. */
static void print_number(FILE *out, double value, size_t width)
{
    char text[PF_NUMBER_ROOM];
    if (isinf(value))
        snprintf(text, sizeof text, "inf");
    else if (!pf_is_stated(value))
        snprintf(text, sizeof text, "-");
    else
        snprintf(text, sizeof text, "%.*f",
                 fabs(value) < 10     ? 2
                 : fabs(value) < 1000 ? 1
                                      : 0,
                 value);
    for (char *c = text; *c; c++)
        if (*c == ',') *c = '.'; /* the decimal point of some locales */
    fputc(' ', out);
    pf_text_field_print(out, text, width, true);
}

static void print_field(FILE *out, const char *text, size_t width)
{
    fputc(' ', out);
    pf_text_field_print(out, text && *text ? text : "-", width, false);
}

/* Why a part does not pass, and the letters of its remarks. */
static void print_reason(FILE *out, const pf_plan *plan, const pf_assessment *assessment)
{
    char reason[256];
    const pf_check *check = pf_assessment_decisive(assessment);
    if (assessment->verdict == PF_PASS || !check) return;
    pf_check_print(plan, check, reason, sizeof reason);
    pf_wrapped_print(out, reason, W_RANK + 3);
}

static void print_cards(FILE *out, const pf_ranking *ranking, const pf_row *row)
{
    for (size_t i = 0; i < ranking->profile_count; i++) {
        const pf_assessment *on = &row->assessment[i];
        char line[300], margin[PF_NUMBER_ROOM] = "-";
        if (pf_is_stated(on->stress.soa_margin)) pf_number_print(margin, on->stress.soa_margin, 3);
        snprintf(line, sizeof line, "%s: %s, SOA margin %s%s",
                 pf_plan_profile(ranking->plan[i])->name, pf_verdict_text(on->verdict), margin,
                 i == row->deciding_profile ? " (decides)" : "");
        pf_wrapped_print(out, line, W_RANK + 3);
    }
}

static unsigned remarks_of(const pf_ranking *ranking, const pf_row *row)
{
    unsigned remarks = 0;
    for (size_t i = 0; i < ranking->profile_count; i++)
        remarks |= row->assessment[i].stress.remarks;
    return remarks;
}

/* Remarks get letters in the order of their bits. */
static void print_remark_letters(FILE *out, unsigned remarks)
{
    if (!remarks) return;
    fprintf(out, "%*sremarks:", W_RANK + 3, "");
    for (unsigned bit = 0; remarks >> bit; bit++)
        if (remarks >> bit & 1) fprintf(out, " %c", 'a' + bit);
    fputc('\n', out);
}

static void print_row(FILE *out, const pf_ranking *ranking, size_t place, unsigned common)
{
    const pf_row *row = &ranking->row[place];
    const pf_assessment *deciding = &row->assessment[row->deciding_profile];
    const pf_plan *plan = ranking->plan[row->deciding_profile];
    fprintf(out, "%*zu%c", W_RANK - 1, place + 1, pf_row_is_unbeaten(ranking, place) ? '+' : ' ');
    print_field(out, row->part, W_PART);
    print_field(out, row->maker, W_MAKER);
    print_field(out, row->package, W_PACKAGE);
    print_field(out, pf_verdict_text(row->verdict), W_VERDICT);
    print_number(out, row->soa_margin, W_MARGIN);
    print_field(out, pf_limiting_event(plan, deciding), W_EVENT);
    print_number(out, row->conduction_loss_W, W_LOSS);
    print_number(out, row->running_degC, W_RUN);
    print_number(out, row->peak_junction_degC, W_PEAK);
    fputc('\n', out);
    print_reason(out, plan, deciding);
    if (ranking->profile_count > 1) print_cards(out, ranking, row);
    print_remark_letters(out, remarks_of(ranking, row) & ~common);
}

/* What the letters mean; remarks that every row shares are told once. */
static void print_remarks(FILE *out, unsigned remarks, unsigned common)
{
    for (unsigned bit = 0; remarks >> bit; bit++)
        if (remarks >> bit & 1)
            fprintf(out, "  %c  %s%s\n", common >> bit & 1 ? '*' : 'a' + (int)bit,
                    common >> bit & 1 ? "all: " : "", pf_remark_text(1u << bit));
    if (remarks) fputc('\n', out);
}

void pf_report_table(FILE *out, const pf_ranking *ranking, const pf_report_source *source)
{
    size_t shown = source->top && source->top < ranking->count ? source->top : ranking->count;
    unsigned any = 0, common = shown > 1 ? ~0u : 0;
    for (size_t i = 0; i < ranking->profile_count; i++)
        print_card(out, ranking->plan[i]);
    print_counts(out, ranking, source);
    if (shown) print_heading(out);
    for (size_t i = 0; i < shown; i++) {
        any |= remarks_of(ranking, &ranking->row[i]);
        common &= remarks_of(ranking, &ranking->row[i]);
    }
    for (size_t i = 0; i < shown; i++)
        print_row(out, ranking, i, common);
    if (shown) fputc('\n', out);
    if (shown && ranking->row[0].verdict == PF_PASS)
        fputs(
            "  +  no other part beats it in margin, loss, peak temperature and price together\n\n",
            out);
    print_remarks(out, any, common);
    pf_trials_table(out, ranking, source);
    for (const char *const *line = pf_report_cautions(); *line; line++)
        fprintf(out, "%s\n", *line);
}
