/* selection.c: which parts a command works on: --where, --as-of, --reviewed. */
#include "cli/selection.h"

#include <string.h>

int pf_selection_read(const pf_cli *cli, const pf_arguments *arguments, pf_selection *selection)
{
    pf_error error = {0};
    *selection = (pf_selection){.query = {.as_of = pf_argument(arguments, "as-of"),
                                          .reviewed_only = pf_argument(arguments, "reviewed")}};
    for (size_t i = 0; i < arguments->given_count; i++) {
        if (strcmp(arguments->given[i].name, "where") != 0) continue;
        pf_condition *condition = &selection->condition[selection->condition_count++];
        if (pf_condition_read(arguments->given[i].value, condition, &error) != PF_OK)
            return pf_usage(cli, "--where: %s", error.text);
    }
    return PF_EXIT_DONE;
}

bool pf_selection_takes(const pf_selection *selection, const pf_part *part)
{
    for (size_t i = 0; i < selection->condition_count; i++)
        if (!pf_condition_met(&selection->condition[i], part)) return false;
    return true;
}

pf_status pf_selection_next(const pf_selection *selection, pf_cursor *cursor,
                            pf_stored_part *stored, bool *more, pf_error *error)
{
    pf_status status;
    do
        status = pf_cursor_next(cursor, stored, more, error);
    while (status == PF_OK && *more && !pf_selection_takes(selection, &stored->part));
    return status;
}

pf_status pf_selection_walk(pf_store *store, const pf_selection *selection,
                            pf_selection_visitor *visit, void *context, pf_error *error)
{
    pf_cursor *cursor = NULL;
    pf_stored_part stored;
    bool more = true;
    pf_status status = pf_cursor_open(store, &selection->query, &cursor, error);
    if (status != PF_OK) return status;
    pf_stored_part_init(&stored);
    while (status == PF_OK) {
        status = pf_selection_next(selection, cursor, &stored, &more, error);
        if (status != PF_OK || !more) break;
        status = visit(context, &stored);
    }
    pf_stored_part_clear(&stored);
    pf_cursor_close(cursor);
    return status;
}

pf_listed_part pf_listed_from(const pf_stored_part *stored)
{
    const pf_revision_facts *facts = &stored->facts;
    return (pf_listed_part){&stored->part, facts->number, facts->entry,
                            facts->author, facts->time,   pf_review_text(facts->review)};
}
