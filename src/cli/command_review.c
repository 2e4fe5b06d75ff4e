/* command_review.c: passfet review PART, passfet undo IMPORT, passfet backup FILE: single acts. */
#include "cli/commands.h"

#include <stdlib.h>

const pf_option pf_review_options[] = {
    {"accept", NULL, "the ratings of the part are right"},
    {"question", NULL, "they are not, or not surely; needs --why"},
    PF_BY_OPTION,
    PF_WHY_OPTION,
    PF_HELP_OPTION,
};

const pf_option pf_undo_options[] = {
    PF_BY_OPTION,
    PF_WHY_OPTION,
    PF_HELP_OPTION,
};

const pf_option pf_backup_options[] = {
    PF_HELP_OPTION,
};

/* Ends a command that used a store: closes it, says what went wrong. */
static int finish(const pf_cli *cli, pf_store *store, pf_status status, const pf_error *error)
{
    pf_store_close(store);
    return status == PF_OK ? PF_EXIT_DONE : pf_fail(cli, status, error);
}

int pf_command_review(const pf_cli *cli, const pf_arguments *arguments)
{
    bool accept = pf_argument(arguments, "accept"), question = pf_argument(arguments, "question");
    const char *why = pf_argument(arguments, "why"), *part = arguments->operand[0];
    char now[PF_TIME_ROOM];
    pf_store *store;
    pf_error error = {0};
    if (accept == question) return pf_usage(cli, "review takes one of --accept and --question");
    if (question && (!why || !*why))
        return pf_usage(cli, "--question needs --why: the next reader has to know");
    pf_time_now(now);
    pf_review_facts facts = {pf_author(arguments), now, why, accept, 0};
    pf_status status = pf_cli_open(cli, PF_STORE_WRITE, &store, &error);
    if (status == PF_OK) status = pf_store_review(store, part, &facts, &error);
    if (status == PF_OK)
        fprintf(cli->out, "%s: %s by %s, entry %lld.\n", part,
                pf_review_text(accept ? PF_ACCEPTED : PF_QUESTIONED), facts.author,
                (long long)facts.entry);
    return finish(cli, store, status, &error);
}

int pf_command_undo(const pf_cli *cli, const pf_arguments *arguments)
{
    char now[PF_TIME_ROOM];
    size_t entry;
    int64_t number;
    pf_store *store;
    pf_error error = {0};
    const pf_import_facts facts = pf_facts_of(arguments, now);
    if (!pf_count_of(arguments->operand[0], 1, &entry))
        return pf_usage(cli, "undo takes the number of an import, not `%s`", arguments->operand[0]);
    pf_status status = pf_cli_open(cli, PF_STORE_WRITE, &store, &error);
    if (status == PF_OK) status = pf_store_undo(store, (int64_t)entry, &facts, &number, &error);
    if (status == PF_OK)
        fprintf(cli->out, "Import %zu is taken back by entry %lld.\n", entry, (long long)number);
    return finish(cli, store, status, &error);
}

int pf_command_backup(const pf_cli *cli, const pf_arguments *arguments)
{
    pf_store *store;
    pf_error error = {0};
    pf_status status = pf_cli_open(cli, PF_STORE_READ, &store, &error);
    if (status == PF_OK) status = pf_store_backup(store, arguments->operand[0], &error);
    if (status == PF_OK)
        fprintf(cli->out, "%s is copied to %s, and the copy is verified.\n", cli->database,
                arguments->operand[0]);
    return finish(cli, store, status, &error);
}
