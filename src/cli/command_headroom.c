/* command_headroom.c: passfet headroom [PART] PROFILE [--solve PARAMETER] */
#include "base/memory.h"
#include "base/number.h"
#include "cli/commands.h"
#include "cli/review.h"

#include <stdlib.h>
#include <string.h>

const pf_option pf_headroom_options[] = {
    {"solve", "PARAMETER",
     "the largest (or smallest) output_capacitance, fault_time, current_limit, power_limit, "
     "output_slew or ambient_temperature at which the part passes; every part without PART"},
    PF_REVIEW_OPTIONS};

/* From so many parts on it pays to find out which corners of the profile can never be the worst. */
#define PRUNE_PARTS 4000

/* Solutions of many parts. */
typedef struct solutions {
    pf_solution *item;
    size_t count, capacity;
} solutions;

static void solutions_clear(solutions *list)
{
    for (size_t i = 0; i < list->count; i++) {
        pf_free(list->item[i].part);
        pf_free(list->item[i].maker);
        pf_free(list->item[i].package);
    }
    pf_free(list->item);
}

static int headroom_of_part(const pf_review *review)
{
    const pf_plan *plan = review->cards.plan[0];
    static const size_t most = PF_ROOMS_MAX;
    pf_room *room = pf_allocate(most, sizeof *room);
    size_t count = 0;
    pf_status status = room ? PF_OK : PF_NO_MEMORY;
    if (status == PF_OK)
        status = pf_headroom(plan, &review->stored.part, review->scratch, room, &count);
    if (status == PF_OK)
        (review->json ? pf_report_headroom_json : pf_report_headroom_text)(
            review->cli->out, plan, &review->stored.part, room, count, &review->source);
    pf_free(room);
    return status == PF_OK ? PF_EXIT_DONE : pf_fail(review->cli, status, NULL);
}

static pf_status add_solution(const pf_review *review, pf_parameter parameter, solutions *list)
{
    const pf_part *part = &review->stored.part;
    const pf_plan *plan = review->cards.plan[0];
    pf_solution found = {0};
    pf_status status =
        pf_grow((void **)&list->item, &list->capacity, list->count + 1, sizeof *list->item);
    if (status == PF_OK) status = pf_solve(plan, part, review->scratch, parameter, &found.room);
    if (status == PF_OK) status = pf_text_copy(&found.part, part->name);
    if (status == PF_OK) status = pf_text_copy(&found.maker, part->maker);
    if (status == PF_OK) status = pf_text_copy(&found.package, part->package);
    found.verdict = found.room.now;
    if (status == PF_OK) {
        list->item[list->count++] = found;
        return PF_OK;
    }
    pf_free(found.part);
    pf_free(found.maker);
    return status;
}

/* Those that pass somewhere first, by the width of where they do; then by name. */
static int widest_first(const void *left, const void *right)
{
    const pf_solution *a = left, *b = right;
    bool a_passes = a->room.kind == PF_ROOM_FLIPS || a->room.here == PF_PASS;
    bool b_passes = b->room.kind == PF_ROOM_FLIPS || b->room.here == PF_PASS;
    if (a_passes != b_passes) return a_passes ? -1 : 1;
    bool smallest = a->room.kind == PF_ROOM_FLIPS && !a->room.at_most;
    if (a_passes && a->room.value != b->room.value)
        return (a->room.value > b->room.value) == !smallest ? -1 : 1;
    return strcmp(a->part, b->part);
}

static pf_status solve_all(pf_review *review, pf_parameter parameter, solutions *list,
                           pf_error *error)
{
    const pf_query query = {.as_of = review->as_of, .as_stored = true};
    pf_cursor *cursor = NULL;
    bool more = true;
    int64_t parts = 0;
    pf_status status = pf_store_count(review->store, &parts, error);
    if (status == PF_OK && parts >= PRUNE_PARTS) status = pf_plan_prune(review->cards.plan[0]);
    if (status == PF_OK) status = pf_cursor_open(review->store, &query, &cursor, error);
    while (status == PF_OK) {
        status = pf_cursor_next(cursor, &review->stored, &more, error);
        if (status != PF_OK || !more) break;
        status = add_solution(review, parameter, list);
    }
    if (cursor) pf_cursor_close(cursor);
    if (status == PF_OK) qsort(list->item, list->count, sizeof *list->item, widest_first);
    return status;
}

static int solve(pf_review *review, pf_parameter parameter, const char *part)
{
    const pf_plan *plan = review->cards.plan[0];
    solutions list = {0};
    pf_error error = {0};
    pf_status status = PF_OK;
    int exit_status = part ? pf_review_find(review, part) : PF_EXIT_DONE;
    if (exit_status != PF_EXIT_DONE) return exit_status;
    if (!pf_is_stated(pf_plan_profile(plan)->value[parameter].max))
        return pf_usage(review->cli, "--solve: the profile %s states no %s to begin at",
                        pf_plan_profile(plan)->name, pf_parameter_facts()[parameter].name);
    if (part)
        status = add_solution(review, parameter, &list);
    else
        status = solve_all(review, parameter, &list, &error);
    if (status == PF_OK)
        (review->json ? pf_report_solve_json : pf_report_solve_text)(
            review->cli->out, plan, parameter, list.item, list.count, &review->source);
    else
        exit_status = pf_fail(review->cli, status, &error);
    solutions_clear(&list);
    return exit_status;
}

static bool read_parameter(const char *name, pf_parameter *parameter)
{
    for (int i = 0; i < PF_PARAMETER_COUNT; i++) {
        *parameter = (pf_parameter)i;
        if (strcmp(pf_parameter_facts()[i].name, name) == 0) return pf_is_solvable(*parameter);
    }
    return false;
}

int pf_command_headroom(const pf_cli *cli, const pf_arguments *arguments)
{
    const char *solved = pf_argument(arguments, "solve");
    const char *part = arguments->operand_count > 1 ? arguments->operand[0] : NULL;
    pf_review review;
    pf_parameter parameter = PF_FAULT_TIME;
    if (solved && !read_parameter(solved, &parameter))
        return pf_usage(cli,
                        "--solve takes output_capacitance, fault_time, current_limit, power_limit, "
                        "output_slew or ambient_temperature, not `%s`",
                        solved);
    if (!solved && !part) return pf_usage(cli, "headroom needs a part and a profile, or --solve");
    int exit_status =
        pf_review_open(&review, cli, arguments, arguments->operand[arguments->operand_count - 1]);
    if (exit_status == PF_EXIT_DONE && solved) {
        exit_status = solve(&review, parameter, part);
    } else if (exit_status == PF_EXIT_DONE) {
        exit_status = pf_review_find(&review, part);
        if (exit_status == PF_EXIT_DONE) exit_status = headroom_of_part(&review);
    }
    pf_review_close(&review);
    return exit_status;
}
