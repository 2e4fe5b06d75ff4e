/* trials.c: what rank says of rows beside their verdicts. */
#include "report/trials.h"
#include "base/number.h"
#include "report/review_json.h"
#include "report/words.h"

#include <math.h>

static const char *distribution_text(const pf_trials_request *request)
{
    return request->distribution == PF_UNIFORM ? "uniform" : "triangular";
}

static void print_margin(FILE *out, double margin)
{
    char text[PF_NUMBER_ROOM] = "-";
    if (isfinite(margin)) pf_number_print(text, margin, 3);
    fprintf(out, " %7s", text);
}

/* A share in per cent: never 100 or 0 for what is only nearly so. */
static void print_share(FILE *out, double share)
{
    char text[PF_NUMBER_ROOM];
    double percent = share == 1 ? 100 : floor(share * 1e4) / 100;
    pf_number_print(text, percent, 4);
    fprintf(out, " %7s", text);
}

void pf_trials_table(FILE *out, const pf_ranking *ranking, const pf_report_source *source)
{
    const pf_trials_request *request = source->trials;
    if (!request || !source->review) return;
    fprintf(out,
            "Trials: %zu draws, %s, seed %llu. The worst case stays the verdict.\n"
            "     %-17s %-10s %7s %15s %7s %7s %7s\n     %-17s %-10s %7s %15s %7s %7s %7s\n",
            request->count, distribution_text(request), (unsigned long long)request->seed, "", "",
            "pass", "95 % interval", "margin", "margin", "raised", "part", "verdict", "%", "%",
            "1st %", "50th %", "by %");
    for (size_t i = 0; i < source->review_count; i++) {
        const pf_trials_result *of = &source->review[i].trials;
        if (!source->review[i].has_trials) continue;
        fprintf(out, "%4zu ", i + 1);
        pf_text_field_print(out, ranking->row[i].part, 17, false);
        fprintf(out, " %-10s", pf_verdict_text(ranking->row[i].verdict));
        print_share(out, of->share);
        print_share(out, of->low);
        print_share(out, of->high);
        print_margin(out, of->margin_p01);
        print_margin(out, of->margin_p50);
        print_margin(out, 100 * of->raised_by);
        fputc('\n', out);
    }
    fputc('\n', out);
}

static void write_trials(pf_json *json, const pf_trials_request *request,
                         const pf_trials_result *of)
{
    pf_json_name(json, "trials");
    pf_json_open(json, '{');
    pf_json_named_number(json, "count", (double)of->count);
    pf_json_named_number(json, "seed", (double)request->seed);
    pf_json_named_text(json, "distribution", distribution_text(request));
    pf_json_named_number(json, "passed", (double)of->passed);
    pf_json_named_number(json, "unassessed", (double)of->unassessed);
    pf_json_named_number(json, "failed", (double)of->failed);
    pf_json_named_number(json, "share", of->share);
    pf_json_named_number(json, "share_low_95", of->low);
    pf_json_named_number(json, "share_high_95", of->high);
    pf_json_named_number(json, "margin_p01", of->margin_p01);
    pf_json_named_number(json, "margin_p50", of->margin_p50);
    pf_json_named_number(json, "rises_raised_by", of->raised_by);
    pf_json_close(json, '}');
}

void pf_json_row_review(pf_json *json, const pf_report_source *source, size_t place)
{
    const pf_row_review *review =
        source->review && place < source->review_count ? &source->review[place] : NULL;
    if (review && review->has_window)
        pf_json_window(json, &review->window);
    else
        pf_json_named_text(json, "timer_window", NULL);
    if (review && review->has_trials) write_trials(json, source->trials, &review->trials);
}
