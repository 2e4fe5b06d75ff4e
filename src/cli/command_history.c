/* command_history.c: passfet history PART: who changed which rating, when, from which source. */
#include "cli/commands.h"

#include <string.h>

const pf_option pf_history_options[] = {
    PF_HELP_OPTION,
};

static void show_difference(void *context, const char *what, const char *before, const char *after)
{
    FILE *out = context;
    fprintf(out, "    %s: %s -> %s\n", what, *before ? before : "not stated",
            *after ? after : "not stated");
}

static void show_reviews(FILE *out, const pf_history_step *step)
{
    for (size_t i = 0; i < step->review_count; i++) {
        const pf_review_facts *review = &step->review[i];
        fprintf(out, "  %s at %s by %s (entry %lld)%s%s\n",
                pf_review_text(review->accept ? PF_ACCEPTED : PF_QUESTIONED), review->time,
                review->author, (long long)review->entry, review->why ? ": " : "",
                review->why ? review->why : "");
    }
}

static pf_status show_step(void *context, const pf_history_step *step, pf_error *error)
{
    FILE *out = context;
    const pf_stored_part *now = step->now;
    const pf_revision_facts *facts = &now->facts;
    pf_part nothing;
    (void)error;
    fprintf(out, "Revision %lld at %s by %s (%s, entry %lld)%s%s\n", (long long)facts->number,
            facts->time, facts->author, step->kind, (long long)facts->entry, step->why ? ": " : "",
            step->why ? step->why : "");
    if (step->files && *step->files) fprintf(out, "  from %s\n", step->files);
    if (now->part.datasheet)
        fprintf(out, "  data sheet %s%s%s\n", now->part.datasheet,
                now->part.datasheet_date ? ", " : "",
                now->part.datasheet_date ? now->part.datasheet_date : "");
    if (step->withdrawn) {
        fputs("  withdrawn: the part is no longer in the database\n", out);
    } else if (step->before) {
        pf_part_differences(&step->before->part, &now->part, show_difference, out);
    } else {
        pf_part_init(&nothing);
        pf_part_differences(&nothing, &now->part, show_difference, out);
    }
    show_reviews(out, step);
    return PF_OK;
}

int pf_command_history(const pf_cli *cli, const pf_arguments *arguments)
{
    pf_store *store;
    pf_error error = {0};
    pf_status status = pf_cli_open(cli, PF_STORE_READ, &store, &error);
    if (status == PF_OK)
        status = pf_store_history(store, arguments->operand[0], show_step, cli->out, &error);
    pf_store_close(store);
    return status == PF_OK ? PF_EXIT_DONE : pf_fail(cli, status, &error);
}
