/* comparison.c: the verdict on a candidate, with conditions and what is missing. */
#include "rank/comparison.h"
#include "base/number.h"
#include "stress/plan.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include <string.h>

const char *pf_acceptance_text(pf_acceptance acceptance)
{
    static const char *const text[] = {
#define PF_ACCEPTANCE_WORDS(code, words) words,
        PF_ACCEPTANCE_LIST(PF_ACCEPTANCE_WORDS)
#undef PF_ACCEPTANCE_WORDS
    };
    return text[acceptance];
}

const char *pf_stage_text(pf_stage stage)
{
    static const char *const text[] = {
#define PF_STAGE_WORDS(code, words) words,
        PF_STAGE_LIST(PF_STAGE_WORDS)
#undef PF_STAGE_WORDS
    };
    return text[stage];
}

static void add_condition(pf_exchange *to, const char *format, ...) PF_PRINTF(2, 3);

static void add_condition(pf_exchange *to, const char *format, ...)
{
    va_list arguments;
    if (to->condition_count == PF_CONDITIONS_MAX) return;
    va_start(arguments, format);
    vsnprintf(to->condition[to->condition_count++], PF_SENTENCE_ROOM, format, arguments);
    va_end(arguments);
}

static void add_missing(pf_exchange *to, const char *sentence)
{
    for (size_t i = 0; i < to->missing_count; i++)
        if (strcmp(to->missing[i], sentence) == 0) return;
    if (to->missing_count == PF_MISSING_MAX) return;
    snprintf(to->missing[to->missing_count++], PF_SENTENCE_ROOM, "%s", sentence);
}

/* Where a number that an event needs would come from. */
static const char *source_of(pf_cause cause)
{
    switch (cause) {
    case PF_CAUSE_NO_SOA:
        return "SOA points: the safe-operating-area figure of its data sheet";
    case PF_CAUSE_NO_DC_LINE:
        return "a DC line, or a line as long as the event: the safe-operating-area figure of its "
               "data sheet, or its maker on request";
    case PF_CAUSE_BEYOND_VOLTAGE:
        return "the SOA up to the highest voltage of the event: the right end of the figure in its "
               "data sheet";
    case PF_CAUSE_NO_ZTH:
        return "Zth: the figure of the transient thermal impedance in its data sheet, or its "
               "maker's thermal model";
    case PF_CAUSE_NO_RDSON:
        return "Rds(on) at a gate drive that the card reaches: the table of its data sheet, or a "
               "measurement";
    case PF_CAUSE_NO_RTH:
        return "rth_jc or rth_ja: the thermal table of its data sheet";
    case PF_CAUSE_NO_TJ_MAX:
        return "tj_max: the absolute maximum ratings of its data sheet";
    case PF_CAUSE_NO_AVALANCHE:
        return "avalanche_energy: the ratings of its data sheet";
    case PF_CAUSE_NO_VDS_MAX:
        return "vds_max: the absolute maximum ratings of its data sheet";
    case PF_CAUSE_NO_LIMIT:
        return "a current limit for the event: the profile of the card";
    case PF_CAUSE_NO_START:
        return NULL; /* what the running card lacks is listed itself */
    default:
        return pf_cause_text(cause);
    }
}

static void list_missing(pf_exchange *to)
{
    char sentence[PF_SENTENCE_ROOM];
    for (size_t i = 0; i < to->candidate.check_count; i++) {
        const pf_check *check = &to->candidate.check[i];
        if (check->verdict != PF_UNASSESSED) continue;
        const char *source = check->missing ? NULL : source_of(check->cause);
        if (check->missing) {
            snprintf(sentence, sizeof sentence, "%s: the ratings of its data sheet",
                     check->missing);
            add_missing(to, sentence);
        } else if (source) {
            add_missing(to, source);
        }
    }
}

static bool same_text(const char *left, const char *right)
{
    return left && right && strcmp(left, right) == 0;
}

/* What must hold beside the numbers for a candidate that passes. */
static void list_conditions(const pf_pair *pair)
{
    const pf_part *old = pair->reference, *new = pair->candidate;
    pf_exchange *to = pair->result;
    unsigned remarks = to->candidate.stress.remarks;
    if (!same_text(old->package, new->package))
        add_condition(to, "the footprint fits: package %s stands where %s stood",
                      new->package ? new->package : "(not stated)",
                      old->package ? old->package : "(not stated)");
    if (remarks & PF_REMARK_CONTRADICTION)
        add_condition(to, "its SOA is confirmed by its maker or by a measurement: SOA and Zth of "
                          "its sheet contradict each other");
    if (remarks & PF_REMARK_EXTENDED)
        add_condition(to, "its SOA is confirmed for as long as the longest event: it was extended "
                          "beyond the sheet");
    if (remarks & PF_REMARK_AMBIENT_ZTH)
        add_condition(to,
                      "the board cools it as the board of its sheet does: its Zth is to ambient");
    bool slower = new->gate_charge_C > 1.2 * old->gate_charge_C;
    if (slower && pf_plan_profile(pair->plan)->stated[PF_TRIP_TIME])
        add_condition(to,
                      "the trip time stays as the profile says with a gate charge of %.3g times "
                      "the reference's",
                      new->gate_charge_C / old->gate_charge_C);
}

/* Rounded to four digits towards the side that passes. */
static double rounded(double value, bool down)
{
    double unit = pow(10, floor(log10(fabs(value))) - 3);
    return (down ? floor(value / unit) : ceil(value / unit)) * unit;
}

/* A shorter timer, if the slowest start still ends before it with the same tolerance. */
static pf_status try_shorter_timer(const pf_pair *pair, bool *helps)
{
    const pf_interval *timer = &pf_plan_profile(pair->plan)->value[PF_FAULT_TIME];
    pf_timer_window window;
    pf_room room;
    char text[PF_UNIT_ROOM];
    pf_status status = pf_solve(pair->plan, pair->candidate, pair->scratch, PF_FAULT_TIME, &room);
    if (status == PF_OK)
        status = pf_timer_window_of(pair->plan, pair->candidate, pair->scratch, &window);
    if (status != PF_OK || room.kind != PF_ROOM_FLIPS || !room.at_most) return status;
    double longest_s = rounded(room.value, true), shortest_s = longest_s * timer->min / timer->max;
    *helps = !window.cuts_starts || shortest_s >= window.slowest_start_s;
    if (!*helps) return PF_OK;
    pf_value_print(text, longest_s, PF_TIME, 4);
    add_condition(pair->result, "fault time at most %s", text);
    return PF_OK;
}

/* An ambient that the card itself allows for. */
static pf_status try_cooler(const pf_pair *pair, bool *helps)
{
    const pf_interval *ambient = &pf_plan_profile(pair->plan)->value[PF_AMBIENT_TEMPERATURE];
    pf_room room;
    pf_status status =
        pf_solve(pair->plan, pair->candidate, pair->scratch, PF_AMBIENT_TEMPERATURE, &room);
    if (status != PF_OK || room.kind != PF_ROOM_FLIPS || !room.at_most) return status;
    *helps = room.value >= ambient->typ && room.value < ambient->max;
    if (*helps)
        add_condition(pair->result, "ambient temperature at most %.1f degC",
                      floor(room.value * 10) / 10);
    return PF_OK;
}

static pf_status judge_failing(const pf_pair *pair)
{
    pf_exchange *to = pair->result;
    bool helps = false;
    pf_status status = try_shorter_timer(pair, &helps);
    if (status == PF_OK && !helps) status = try_cooler(pair, &helps);
    if (helps) list_conditions(pair);
    to->acceptance = helps ? PF_ACCEPTABLE_IF : PF_NOT_ACCEPTABLE;
    const pf_check *decides = pf_assessment_decisive(&to->candidate);
    if (decides) pf_check_print(pair->plan, decides, to->decides, sizeof to->decides);
    return status;
}

static pf_status judge(const pf_pair *pair)
{
    pf_exchange *to = pair->result;
    pf_polarity old = pair->reference->polarity, new = pair->candidate->polarity;
    if (old != PF_POLARITY_NONE && new != PF_POLARITY_NONE && old != new) {
        to->acceptance = PF_NOT_ACCEPTABLE;
        snprintf(to->decides, sizeof to->decides, "polarity %s, the reference's is %s",
                 pf_polarity_text(new), pf_polarity_text(old));
        return PF_OK;
    }
    if (to->candidate.verdict == PF_FAIL) return judge_failing(pair);
    if (to->candidate.verdict == PF_UNASSESSED) {
        to->acceptance = PF_CANNOT_DECIDE;
        list_missing(to);
        return PF_OK;
    }
    list_conditions(pair);
    to->acceptance = to->condition_count ? PF_ACCEPTABLE_IF : PF_ACCEPTABLE;
    return PF_OK;
}

pf_status pf_compare(const pf_plan *plan, const pf_part *reference, const pf_part *candidate,
                     pf_scratch *scratch, pf_exchange *comparison)
{
    const pf_pair pair = {plan, reference, candidate, scratch, comparison};
    memset(comparison, 0, sizeof *comparison);
    pf_status status = pf_assess(plan, reference, scratch, &comparison->reference);
    if (status == PF_OK) status = pf_assess(plan, candidate, scratch, &comparison->candidate);
    if (status == PF_OK) status = judge(&pair);
    return status == PF_OK ? pf_differences_list(&pair) : status;
}
