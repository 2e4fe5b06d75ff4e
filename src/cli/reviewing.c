/* reviewing.c: timer windows and trials of the rows that rank shows. */
#include "cli/reviewing.h"
#include "base/memory.h"

#include <stdio.h>

int pf_trials_read(const pf_cli *cli, const pf_arguments *arguments, pf_trials_request *request)
{
    const char *trials = pf_argument(arguments, "trials"), *seed = pf_argument(arguments, "seed");
    size_t number = 1;
    *request = (pf_trials_request){.seed = 1};
    if (!trials && (seed || pf_argument(arguments, "uniform")))
        return pf_usage(cli, "--seed and --uniform go with --trials N");
    if (trials && !pf_count_read(cli, "trials", trials, 1, &request->count)) return PF_EXIT_USAGE;
    if (request->count > 1000000)
        return pf_usage(cli, "--trials takes at most 1000000, not %s", trials);
    if (seed && !pf_count_read(cli, "seed", seed, 0, &number)) return PF_EXIT_USAGE;
    request->seed = number;
    if (pf_argument(arguments, "uniform")) request->distribution = PF_UNIFORM;
    return PF_EXIT_DONE;
}

typedef struct work {
    const pf_reviewing *on;
    const pf_ranking *ranking;
    pf_trials **trials; /* by profile; NULL: none */
    pf_scratch *scratch;
    pf_stored_part stored;
} work;

static pf_status find_part(work *at, const pf_row *row, pf_error *error)
{
    char name[1024];
    snprintf(name, sizeof name, "%s%s%s", row->maker ? row->maker : "", row->maker ? "/" : "",
             row->part);
    return pf_store_part_find(at->on->store, name, at->on->as_of, &at->stored, error);
}

static pf_status review_row(work *at, size_t place, pf_row_review *review, pf_error *error)
{
    const pf_row *row = &at->ranking->row[place];
    const pf_plan *plan = at->ranking->plan[row->deciding_profile];
    const pf_part *part = &at->stored.part;
    bool window = at->on->windows && place < PF_WINDOW_ROWS;
    if (!window && !at->trials) return PF_OK;
    pf_status status = find_part(at, row, error);
    if (status == PF_OK && window)
        status = pf_timer_window_of(plan, part, at->scratch, &review->window);
    if (status == PF_OK && at->trials)
        status =
            pf_trials_run(at->trials[row->deciding_profile], part, at->scratch, &review->trials);
    review->has_window = window && status == PF_OK;
    review->has_trials = at->trials && status == PF_OK;
    return status;
}

static pf_status make_trials(work *at, pf_error *error)
{
    pf_status status = PF_OK;
    if (at->on->trials->count == 0) return PF_OK;
    at->trials = pf_allocate(at->ranking->profile_count, sizeof *at->trials);
    if (!at->trials) return PF_NO_MEMORY;
    for (size_t i = 0; i < at->ranking->profile_count && status == PF_OK; i++)
        status = pf_trials_new(at->ranking->plan[i], at->on->trials, &at->trials[i], error);
    return status;
}

static void clear(work *at)
{
    for (size_t i = 0; at->trials && i < at->ranking->profile_count; i++)
        pf_trials_free(at->trials[i]);
    pf_free(at->trials);
    pf_scratch_free(at->scratch);
    pf_stored_part_clear(&at->stored);
}

int pf_rows_review(const pf_cli *cli, const pf_reviewing *reviewing, const pf_ranking *ranking,
                   pf_report_source *source, pf_row_review **review)
{
    pf_error error = {0};
    work at = {.on = reviewing, .ranking = ranking};
    size_t shown = source->top && source->top < ranking->count ? source->top : ranking->count;
    *review = NULL;
    if (!reviewing->windows && reviewing->trials->count == 0) return PF_EXIT_DONE;
    pf_stored_part_init(&at.stored);
    at.scratch = pf_scratch_new();
    *review = pf_allocate(shown, sizeof **review);
    pf_status status = at.scratch && *review ? make_trials(&at, &error) : PF_NO_MEMORY;
    for (size_t i = 0; i < shown && status == PF_OK; i++)
        status = review_row(&at, i, &(*review)[i], &error);
    clear(&at);
    source->review = *review;
    source->review_count = shown;
    source->trials = reviewing->trials->count ? reviewing->trials : NULL;
    return status == PF_OK ? PF_EXIT_DONE : pf_fail(cli, status, &error);
}
