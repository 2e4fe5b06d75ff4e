/* csv.c: a ranking as CSV (RFC 4180). */
#include "report/csv.h"
#include "base/number.h"
#include "report/words.h"

#include <passfet/report.h>
#include <string.h>

/* Whether a spreadsheet would run the cell as a formula; a `'` before such a cell gets another, so
** that taking one off again always gives the text. */
static bool looks_like_formula(const char *text)
{
    if (!*text) return false;
    if (strchr("=+-@\t\r", *text)) return true;
    return *text == '\'' && text[1] && strchr("=+-@'", text[1]);
}

void pf_csv_text(FILE *out, const char *text)
{
    const char *shown = text ? text : "";
    bool defuse = looks_like_formula(shown);
    bool quote = defuse || *shown == '#' || strpbrk(shown, "\",;\t\r\n");
    if (!quote) {
        fputs(shown, out);
        return;
    }
    fputc('"', out);
    if (defuse) fputc('\'', out);
    for (; *shown; shown++) {
        if (*shown == '"') fputc('"', out);
        fputc(*shown, out);
    }
    fputc('"', out);
}

void pf_csv_number(FILE *out, double value)
{
    char number[PF_NUMBER_ROOM];
    pf_number_print(number, value, 0);
    fputs(number, out);
}

/* Reasons in one cell, `; ` between. */
static void print_reasons(FILE *out, const pf_plan *plan, const pf_assessment *assessment)
{
    char text[2000] = "";
    size_t at = 0;
    for (size_t i = 0; i < assessment->check_count && at < sizeof text - 1; i++) {
        const pf_check *check = &assessment->check[i];
        if (check->verdict == PF_PASS) continue;
        if (at) at += (size_t)snprintf(text + at, sizeof text - at, "; ");
        if (at >= sizeof text) break;
        int length = pf_check_print(plan, check, text + at, sizeof text - at);
        at += (size_t)length;
    }
    pf_csv_text(out, text);
}

static void print_remarks(FILE *out, unsigned remarks)
{
    char text[2000] = "";
    size_t at = 0;
    for (unsigned bit = 0; remarks >> bit && at < sizeof text; bit++)
        if (remarks >> bit & 1)
            at += (size_t)snprintf(text + at, sizeof text - at, "%s%s", at ? "; " : "",
                                   pf_remark_text(1u << bit));
    pf_csv_text(out, text);
}

static void print_row(FILE *out, const pf_ranking *ranking, size_t place)
{
    const pf_row *row = &ranking->row[place];
    const pf_assessment *deciding = &row->assessment[row->deciding_profile];
    const pf_plan *plan = ranking->plan[row->deciding_profile];
    const char *text[] = {row->part,
                          row->maker,
                          row->package,
                          pf_verdict_text(row->verdict),
                          pf_plan_profile(plan)->name,
                          pf_limiting_event(plan, deciding)};
    const double number[] = {row->soa_margin, row->conduction_loss_W, row->running_degC,
                             row->peak_junction_degC};
    fprintf(out, "%zu", place + 1);
    for (size_t i = 0; i < 6; i++) {
        fputc(',', out);
        pf_csv_text(out, text[i]);
    }
    for (size_t i = 0; i < 4; i++) {
        fputc(',', out);
        pf_csv_number(out, number[i]);
    }
    fputc(',', out);
    print_reasons(out, plan, deciding);
    fputc(',', out);
    print_remarks(out, deciding->stress.remarks);
    fputs("\r\n", out);
}

void pf_report_csv(FILE *out, const pf_ranking *ranking, const pf_report_source *source)
{
    size_t shown = source->top && source->top < ranking->count ? source->top : ranking->count;
    fputs("rank,part,maker,package,verdict,profile,limiting_event,soa_margin,conduction_loss_W,"
          "running_junction_C,peak_junction_C,reasons,remarks\r\n",
          out);
    for (size_t i = 0; i < shown; i++)
        print_row(out, ranking, i);
}
