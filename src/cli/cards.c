/* cards.c: the profiles and captures that a command line names, as plans. */
#include "cli/cards.h"
#include "base/memory.h"
#include "cli/builtin.h"

#include <passfet/report.h>
#include <string.h>

pf_status pf_rules_load(const pf_arguments *arguments, pf_derating_rules *rules,
                        pf_problems *problems)
{
    const char *own = pf_argument(arguments, "derating");
    pf_status status = pf_derating_rules_read("built-in rules", pf_builtin_derating,
                                              strlen(pf_builtin_derating), rules, problems);
    if (status != PF_OK || !own) return status;
    return pf_derating_rules_read_file(own, rules, problems);
}

static void captures_clear(pf_captures *list)
{
    for (size_t i = 0; i < list->count; i++)
        pf_capture_data_clear(&list->data[i]);
}

/* Keeps the first failure and goes on: all problems of a run are to be seen. */
static void keep_first(pf_status *first, pf_status status)
{
    if (*first == PF_OK) *first = status;
}

static pf_status captures_read(pf_captures *list, const pf_arguments *arguments,
                               pf_problems *problems)
{
    pf_status first = PF_OK;
    for (size_t i = 0; i < arguments->given_count; i++) {
        if (strcmp(arguments->given[i].name, "capture") != 0) continue;
        pf_capture_data *data = &list->data[list->count];
        pf_status status = pf_capture_read_file(arguments->given[i].value, data, problems);
        keep_first(&first, status);
        if (status != PF_OK) continue;
        list->view[list->count++] =
            (pf_capture){data->name, data->count, data->time_s, data->vds_V, data->id_A};
    }
    return first;
}

static pf_status add_card(pf_cards *cards, const pf_profile *profile, pf_error *error)
{
    const pf_captures *recorded = &cards->recorded;
    if (pf_rule_is_from_memory(&profile->derating)) cards->remarks |= PF_REMARK_MEMORY_RULE;
    pf_status status =
        pf_plan_new(profile, recorded->view, recorded->count, &cards->plan[cards->count], error);
    if (status == PF_OK) cards->count++;
    return status;
}

static pf_status read_all(pf_cards *cards, const pf_arguments *arguments, char *const *path,
                          size_t count, pf_problems *problems, pf_error *error)
{
    pf_derating_rules rules = {0};
    pf_status first = pf_rules_load(arguments, &rules, problems);
    keep_first(&first, captures_read(&cards->recorded, arguments, problems));
    for (size_t i = 0; i < count; i++) {
        pf_profile profile;
        pf_status status = pf_profile_read_file(path[i], &rules, &profile, problems);
        keep_first(&first, status);
        if (first == PF_OK) keep_first(&first, add_card(cards, &profile, error));
    }
    pf_derating_rules_clear(&rules);
    return first;
}

int pf_cards_read(const pf_cli *cli, const pf_arguments *arguments, char *const *path, size_t count,
                  pf_cards *cards)
{
    pf_problems problems;
    pf_error error = {0};
    *cards = (pf_cards){.plan = pf_allocate(count, sizeof *cards->plan)};
    if (!cards->plan) return pf_fail(cli, PF_NO_MEMORY, NULL);
    pf_problems_init(&problems);
    pf_status status = read_all(cards, arguments, path, count, &problems, &error);
    pf_problems_show(cli, &problems);
    bool told = problems.refusals > 0 && error.status == PF_OK;
    pf_problems_clear(&problems);
    if (status == PF_OK) return PF_EXIT_DONE;
    pf_cards_clear(cards);
    return told ? pf_exit_of(status) : pf_fail(cli, status, &error);
}

void pf_cards_clear(pf_cards *cards)
{
    for (size_t i = 0; i < cards->count; i++)
        pf_plan_free(cards->plan[i]);
    pf_free(cards->plan);
    captures_clear(&cards->recorded);
    *cards = (pf_cards){0};
}
