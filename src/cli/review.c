/* review.c: what the commands of a design review share. */
#include "cli/review.h"

#include <string.h>

static int read_format(pf_review *review, const char *format)
{
    review->json = format && strcmp(format, "json") == 0;
    if (!format || review->json || strcmp(format, "text") == 0) return PF_EXIT_DONE;
    return pf_usage(review->cli, "--format takes text or json, not `%s`", format);
}

int pf_review_open(pf_review *review, const pf_cli *cli, const pf_arguments *arguments,
                   char *profile)
{
    pf_error error = {0};
    *review = (pf_review){.cli = cli, .as_of = pf_argument(arguments, "as-of")};
    pf_stored_part_init(&review->stored);
    int exit_status = read_format(review, pf_argument(arguments, "format"));
    if (exit_status == PF_EXIT_DONE)
        exit_status = pf_cards_read(cli, arguments, &profile, 1, &review->cards);
    if (exit_status != PF_EXIT_DONE) return exit_status;
    review->scratch = pf_scratch_new();
    if (!review->scratch) return pf_fail(cli, PF_NO_MEMORY, NULL);
    pf_status status = pf_cli_open(cli, PF_STORE_READ, &review->store, &error);
    if (status == PF_OK)
        status = pf_store_revision_name(review->store, review->as_of, review->revision, &error);
    review->source = (pf_report_source){.database = cli->database, .revision = review->revision};
    return status == PF_OK ? PF_EXIT_DONE : pf_fail(cli, status, &error);
}

void pf_review_close(pf_review *review)
{
    pf_stored_part_clear(&review->stored);
    pf_store_close(review->store);
    pf_scratch_free(review->scratch);
    pf_cards_clear(&review->cards);
}

int pf_review_find(pf_review *review, const char *name)
{
    pf_error error = {0};
    pf_status status =
        pf_store_part_find(review->store, name, review->as_of, &review->stored, &error);
    return status == PF_OK ? PF_EXIT_DONE : pf_fail(review->cli, status, &error);
}

unsigned pf_review_remarks(const pf_review *review)
{
    bool unreviewed = review->stored.facts.review != PF_ACCEPTED;
    return review->cards.remarks | (unreviewed ? PF_REMARK_UNREVIEWED : 0);
}
