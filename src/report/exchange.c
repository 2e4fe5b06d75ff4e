/* exchange.c: candidates held against a reference, as text and JSON. */
#include "base/number.h"
#include "report/review_json.h"
#include "report/words.h"

#include <math.h>
#include <string.h>

static const char *or_unstated(const char *text)
{
    return text && *text ? text : "not stated";
}

/* "acceptable for CARD", with what follows from it. */
static void print_verdict(char *text, size_t room, const pf_exchange_subject *of)
{
    const char *card = pf_plan_profile(of->plan)->name;
    if (of->exchange->acceptance == PF_ACCEPTABLE_IF)
        snprintf(text, room, "acceptable for %s with conditions", card);
    else if (of->exchange->acceptance == PF_CANNOT_DECIDE)
        snprintf(text, room, "cannot decide for %s", card);
    else
        snprintf(text, room, "%s for %s", pf_acceptance_text(of->exchange->acceptance), card);
}

static void show_head(FILE *out, const pf_exchange_subject *of, const pf_report_source *source)
{
    const pf_exchange *exchange = of->exchange;
    char verdict[200], margin[2][PF_NUMBER_ROOM];
    print_verdict(verdict, sizeof verdict, of);
    for (int i = 0; i < 2; i++) {
        double value = (i ? &exchange->candidate : &exchange->reference)->stress.soa_margin;
        if (!pf_number_print(margin[i], value, 4)) strcpy(margin[i], "-");
    }
    fprintf(out, "%s in place of %s: %s\n", of->candidate->name, of->reference->name, verdict);
    fprintf(out, "  SOA margin %s, reference %s, required %.4g\n", margin[1], margin[0],
            pf_plan_profile(of->plan)->value[PF_REQUIRED_MARGIN].max);
    fprintf(out, "  data sheets: %s of %s, reference %s of %s\n",
            or_unstated(of->candidate->datasheet), or_unstated(of->candidate->datasheet_date),
            or_unstated(of->reference->datasheet), or_unstated(of->reference->datasheet_date));
    if (source->revision)
        fprintf(out, "  ratings: %s, revision %s\n", source->database, source->revision);
    if (exchange->reference.verdict != PF_PASS)
        fprintf(out, "  The reference itself does not pass on this card: %s.\n",
                pf_verdict_text(exchange->reference.verdict));
}

static void show_reasons(FILE *out, const pf_exchange *exchange)
{
    char line[PF_SENTENCE_ROOM + 64];
    if (exchange->decides[0]) {
        snprintf(line, sizeof line, "%s%s",
                 exchange->acceptance == PF_NOT_ACCEPTABLE ? "decided by " : "without them: ",
                 exchange->decides);
        pf_wrapped_print(out, line, 2);
    }
    for (size_t i = 0; i < exchange->condition_count; i++) {
        snprintf(line, sizeof line, "condition %zu: %s", i + 1, exchange->condition[i]);
        pf_wrapped_print(out, line, 2);
    }
    for (size_t i = 0; i < exchange->missing_count; i++) {
        snprintf(line, sizeof line, "missing: %s", exchange->missing[i]);
        pf_wrapped_print(out, line, 2);
    }
}

/* The last column: change, temperature difference, or why there is none. */
static void print_change(char text[PF_DIFFERENCE_ROOM + 40], const pf_difference *of)
{
    bool stated = pf_is_stated(of->reference) && pf_is_stated(of->candidate);
    text[0] = '\0';
    if (of->why)
        snprintf(text, PF_DIFFERENCE_ROOM + 40, "not comparable");
    else if (of->reference_text[0])
        snprintf(text, PF_DIFFERENCE_ROOM + 40, "%s", of->flagged ? "differs" : "");
    else if (of->quantity == PF_TEMPERATURE && stated)
        snprintf(text, PF_DIFFERENCE_ROOM + 40, "%+.1f K", of->candidate - of->reference);
    else if (isfinite(of->ratio) && of->stage == PF_STAGE_HOT)
        snprintf(text, PF_DIFFERENCE_ROOM + 40, "%.2f times%s", of->ratio,
                 of->flagged ? "  LESS THAN 0.8" : "");
    else if (isfinite(of->ratio))
        snprintf(text, PF_DIFFERENCE_ROOM + 40, "%+.1f %%", 100 * (of->ratio - 1));
    else
        snprintf(text, PF_DIFFERENCE_ROOM + 40, "not stated");
}

static void show_difference(FILE *out, const pf_difference *of)
{
    char reference[PF_UNIT_ROOM + PF_DIFFERENCE_ROOM], candidate[PF_UNIT_ROOM + PF_DIFFERENCE_ROOM];
    char change[PF_DIFFERENCE_ROOM + 40];
    pf_value_print(reference, of->reference, of->quantity, 4);
    pf_value_print(candidate, of->candidate, of->quantity, 4);
    if (of->reference_text[0]) {
        snprintf(reference, sizeof reference, "%s", of->reference_text);
        snprintf(candidate, sizeof candidate, "%s", of->candidate_text);
    }
    if (pf_text_width(reference) > 13 || pf_text_width(candidate) > 13) {
        char line[4 * PF_DIFFERENCE_ROOM + 2 * PF_UNIT_ROOM];
        snprintf(line, sizeof line, "%s: reference %s; candidate %s", of->name, reference,
                 candidate);
        pf_wrapped_print(out, line, 4);
        return;
    }
    print_change(change, of);
    fputs("    ", out);
    pf_text_field_print(out, of->name, 44, false);
    fputc(' ', out);
    pf_text_field_print(out, reference, 13, true);
    fputc(' ', out);
    pf_text_field_print(out, candidate, 13, true);
    fprintf(out, "%s%s\n", change[0] ? "  " : "", change);
    if (of->why) fprintf(out, "        (%s)\n", of->why);
}

static void show_differences(FILE *out, const pf_exchange *exchange)
{
    for (size_t i = 0; i < exchange->difference_count; i++) {
        const pf_difference *of = &exchange->difference[i];
        if (i == 0 || of->stage != of[-1].stage) {
            fputs("  ", out);
            pf_text_field_print(out, pf_stage_text(of->stage), 47, false);
            fprintf(out, "%13s %13s\n", "reference", "candidate");
        }
        show_difference(out, of);
    }
}

void pf_report_exchange_text(FILE *out, const pf_exchange_subject *subject, size_t count,
                             bool brief, const pf_report_source *source)
{
    for (size_t i = 0; i < count; i++) {
        show_head(out, &subject[i], source);
        show_reasons(out, subject[i].exchange);
        if (!brief) show_differences(out, subject[i].exchange);
        fputc('\n', out);
    }
    for (const char *const *line = pf_report_cautions(); *line; line++)
        fprintf(out, "%s\n", *line);
}

static void write_sentences(pf_json *json, const char *name,
                            const char (*sentence)[PF_SENTENCE_ROOM], size_t count)
{
    pf_json_name(json, name);
    pf_json_open(json, '[');
    for (size_t i = 0; i < count; i++)
        pf_json_text(json, sentence[i]);
    pf_json_close(json, ']');
}

static void write_difference(pf_json *json, const pf_difference *of)
{
    pf_json_open(json, '{');
    pf_json_named_text(json, "stage", pf_stage_text(of->stage));
    pf_json_named_text(json, "name", of->name);
    pf_json_name(json, "reference");
    if (of->reference_text[0])
        pf_json_text(json, of->reference_text);
    else
        pf_json_number(json, of->reference);
    pf_json_name(json, "candidate");
    if (of->reference_text[0])
        pf_json_text(json, of->candidate_text);
    else
        pf_json_number(json, of->candidate);
    pf_json_named_text(json, "unit", of->reference_text[0] ? "" : pf_quantity_unit(of->quantity));
    pf_json_named_number(json, "ratio", of->ratio);
    pf_json_named_text(json, "not_comparable", of->why);
    pf_json_named_bool(json, "flagged", of->flagged);
    pf_json_close(json, '}');
}

static void write_exchange(pf_json *json, const pf_exchange_subject *of, bool brief)
{
    const pf_exchange *exchange = of->exchange;
    char verdict[200];
    print_verdict(verdict, sizeof verdict, of);
    pf_json_open(json, '{');
    pf_json_named_text(json, "candidate", of->candidate->name);
    pf_json_named_text(json, "candidate_maker", of->candidate->maker);
    pf_json_named_text(json, "in_place_of", of->reference->name);
    pf_json_named_text(json, "reference_maker", of->reference->maker);
    pf_json_named_text(json, "application", pf_plan_profile(of->plan)->name);
    pf_json_named_text(json, "acceptance", pf_acceptance_text(exchange->acceptance));
    pf_json_named_text(json, "verdict", verdict);
    pf_json_named_text(json, "decided_by", exchange->decides[0] ? exchange->decides : NULL);
    write_sentences(json, "conditions", (const char(*)[PF_SENTENCE_ROOM])exchange->condition,
                    exchange->condition_count);
    write_sentences(json, "missing", (const char(*)[PF_SENTENCE_ROOM])exchange->missing,
                    exchange->missing_count);
    pf_json_named_text(json, "reference_verdict", pf_verdict_text(exchange->reference.verdict));
    pf_json_named_text(json, "candidate_verdict", pf_verdict_text(exchange->candidate.verdict));
    pf_json_named_number(json, "reference_soa_margin", exchange->reference.stress.soa_margin);
    pf_json_named_number(json, "candidate_soa_margin", exchange->candidate.stress.soa_margin);
    pf_json_named_text(json, "reference_datasheet_date", of->reference->datasheet_date);
    pf_json_named_text(json, "candidate_datasheet_date", of->candidate->datasheet_date);
    pf_json_name(json, "differences");
    pf_json_open(json, '[');
    for (size_t i = 0; i < exchange->difference_count && !brief; i++)
        write_difference(json, &exchange->difference[i]);
    pf_json_close(json, ']');
    pf_json_close(json, '}');
}

void pf_report_exchange_json(FILE *out, const pf_exchange_subject *subject, size_t count,
                             bool brief, const pf_report_source *source)
{
    pf_json json;
    pf_json_begin(&json, out);
    pf_json_open(&json, '{');
    pf_json_named_text(&json, "database_revision", source->revision);
    pf_json_name(&json, "comparisons");
    pf_json_open(&json, '[');
    for (size_t i = 0; i < count; i++)
        write_exchange(&json, &subject[i], brief);
    pf_json_close(&json, ']');
    pf_json_cautions(&json);
    pf_json_close(&json, '}');
    pf_json_end(&json);
}
