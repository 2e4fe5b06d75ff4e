/* command_compare.c: passfet compare REFERENCE CANDIDATE… --profile PROFILE */
#include "base/memory.h"
#include "base/number.h"
#include "cli/commands.h"
#include "cli/review.h"

#include <stdlib.h>
#include <string.h>

const pf_option pf_compare_options[] = {
    {"profile", "PROFILE", "the card on which the candidate would take the reference's place"},
    {"all", NULL, "look for second sources among all parts of the database"},
    PF_REVIEW_OPTIONS};

/* One candidate with what it was found to be. */
typedef struct candidate {
    pf_part part;
    pf_exchange *exchange;
} candidate;

typedef struct candidates {
    candidate *item;
    size_t count, capacity;
    size_t looked_at;
} candidates;

static void candidate_clear(candidate *of)
{
    pf_part_clear(&of->part);
    pf_free(of->exchange);
}

static void candidates_clear(candidates *list)
{
    for (size_t i = 0; i < list->count; i++)
        candidate_clear(&list->item[i]);
    pf_free(list->item);
}

/* Compares the stored part; with keep_refused false one that is not acceptable is not kept. */
static pf_status add(const pf_review *review, const pf_part *reference, bool keep_refused,
                     candidates *list)
{
    candidate next = {.exchange = pf_allocate(1, sizeof *next.exchange)};
    pf_part_init(&next.part);
    pf_status status = next.exchange ? PF_OK : PF_NO_MEMORY;
    if (status == PF_OK) status = pf_part_copy(&next.part, &review->stored.part);
    if (status == PF_OK)
        status = pf_compare(review->cards.plan[0], reference, &next.part, review->scratch,
                            next.exchange);
    if (status == PF_OK)
        status =
            pf_grow((void **)&list->item, &list->capacity, list->count + 1, sizeof *list->item);
    list->looked_at++;
    bool kept = status == PF_OK && (keep_refused || next.exchange->acceptance != PF_NOT_ACCEPTABLE);
    if (kept)
        list->item[list->count++] = next;
    else
        candidate_clear(&next);
    return status;
}

static int best_first(const void *left, const void *right)
{
    const candidate *a = left, *b = right;
    if (a->exchange->acceptance != b->exchange->acceptance)
        return a->exchange->acceptance < b->exchange->acceptance ? -1 : 1;
    double more = a->exchange->candidate.stress.soa_margin;
    double less = b->exchange->candidate.stress.soa_margin;
    if (more != less && pf_is_stated(more) && pf_is_stated(less)) return more > less ? -1 : 1;
    return strcmp(a->part.name, b->part.name);
}

static bool is_same_part(const pf_part *left, const pf_part *right)
{
    return strcmp(left->name, right->name) == 0 &&
           strcmp(left->maker ? left->maker : "", right->maker ? right->maker : "") == 0;
}

static int add_all(pf_review *review, const pf_part *reference, candidates *list)
{
    const pf_query query = {.as_of = review->as_of};
    pf_cursor *cursor = NULL;
    pf_error error = {0};
    bool more = true;
    pf_status status = pf_cursor_open(review->store, &query, &cursor, &error);
    while (status == PF_OK) {
        status = pf_cursor_next(cursor, &review->stored, &more, &error);
        if (status != PF_OK || !more) break;
        if (!is_same_part(&review->stored.part, reference))
            status = add(review, reference, false, list);
    }
    if (cursor) pf_cursor_close(cursor);
    if (status != PF_OK) return pf_fail(review->cli, status, &error);
    qsort(list->item, list->count, sizeof *list->item, best_first);
    return PF_EXIT_DONE;
}

static int add_named(pf_review *review, const pf_part *reference, const pf_arguments *arguments,
                     candidates *list)
{
    for (size_t i = 1; i < arguments->operand_count; i++) {
        int exit_status = pf_review_find(review, arguments->operand[i]);
        if (exit_status != PF_EXIT_DONE) return exit_status;
        pf_status status = add(review, reference, true, list);
        if (status != PF_OK) return pf_fail(review->cli, status, NULL);
    }
    return PF_EXIT_DONE;
}

static bool is_accepted(const candidate *of)
{
    return of->exchange->acceptance == PF_ACCEPTABLE ||
           of->exchange->acceptance == PF_ACCEPTABLE_IF;
}

/* Writes all; the answer is yes where every named candidate, or any of --all, is accepted. */
static int show(const pf_review *review, const pf_part *reference, const candidates *list, bool all)
{
    size_t accepted = 0;
    pf_exchange_subject *subject = pf_allocate(list->count, sizeof *subject);
    if (!subject) return pf_fail(review->cli, PF_NO_MEMORY, NULL);
    for (size_t i = 0; i < list->count; i++) {
        subject[i] = (pf_exchange_subject){review->cards.plan[0], reference, &list->item[i].part,
                                           list->item[i].exchange};
        accepted += is_accepted(&list->item[i]);
    }
    if (all && !review->json)
        fprintf(review->cli->out,
                "%zu parts looked at: %zu acceptable, with conditions or without; %zu cannot be "
                "decided; the others are not acceptable.\n\n",
                list->looked_at, accepted, list->count - accepted);
    (review->json ? pf_report_exchange_json : pf_report_exchange_text)(
        review->cli->out, subject, list->count, all, &review->source);
    pf_free(subject);
    return (all ? accepted > 0 : accepted == list->count) ? PF_EXIT_DONE : PF_EXIT_NO;
}

static int compare(pf_review *review, const pf_arguments *arguments, bool all)
{
    candidates list = {0};
    pf_part reference;
    pf_part_init(&reference);
    int exit_status = pf_review_find(review, arguments->operand[0]);
    if (exit_status == PF_EXIT_DONE) {
        pf_status status = pf_part_copy(&reference, &review->stored.part);
        if (status != PF_OK) exit_status = pf_fail(review->cli, status, NULL);
    }
    if (exit_status == PF_EXIT_DONE)
        exit_status = all ? add_all(review, &reference, &list)
                          : add_named(review, &reference, arguments, &list);
    if (exit_status == PF_EXIT_DONE) exit_status = show(review, &reference, &list, all);
    candidates_clear(&list);
    pf_part_clear(&reference);
    return exit_status;
}

int pf_command_compare(const pf_cli *cli, const pf_arguments *arguments)
{
    const char *profile = pf_argument(arguments, "profile");
    bool all = pf_argument(arguments, "all") != NULL;
    pf_review review;
    char path[4096];
    if (!profile || strlen(profile) >= sizeof path)
        return pf_usage(cli, "compare needs --profile PROFILE: acceptance is for one card");
    if (all == (arguments->operand_count > 1))
        return pf_usage(cli, "compare needs a reference with candidates, or with --all");
    strcpy(path, profile);
    int exit_status = pf_review_open(&review, cli, arguments, path);
    if (exit_status == PF_EXIT_DONE) exit_status = compare(&review, arguments, all);
    pf_review_close(&review);
    return exit_status;
}
