/* common.c: what commands share: exit statuses, messages, the database, clock and login name. */
#include "cli/cli.h"

#include <pwd.h>
#include <stdarg.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include <unistd.h>

int pf_exit_of(pf_status status)
{
    switch (status) {
    case PF_OK:
        return PF_EXIT_DONE;
    case PF_BAD_ARGUMENT:
    case PF_NOT_FOUND:
        return PF_EXIT_USAGE;
    case PF_BUSY:
        return PF_EXIT_BUSY;
    case PF_NO_MEMORY:
    case PF_FILE:
    case PF_DATABASE:
        return PF_EXIT_SYSTEM;
    default:
        return PF_EXIT_INPUT;
    }
}

int pf_fail(const pf_cli *cli, pf_status status, const pf_error *error)
{
    bool told = error && error->status != PF_OK;
    fprintf(cli->err, "passfet: %s\n", told ? error->text : pf_status_text(status));
    return pf_exit_of(status);
}

int pf_usage(const pf_cli *cli, const char *format, ...)
{
    va_list arguments;
    fputs("passfet: ", cli->err);
    va_start(arguments, format);
    vfprintf(cli->err, format, arguments);
    va_end(arguments);
    fputc('\n', cli->err);
    return PF_EXIT_USAGE;
}

void pf_problems_show(const pf_cli *cli, const pf_problems *problems)
{
    static const char *const word[] = {"note: ", "warning: ", ""};
    char text[8192];
    for (size_t i = 0; i < problems->count; i++) {
        pf_problem_print(&problems->item[i], text, sizeof text);
        fprintf(cli->err, "%s%s\n", word[problems->item[i].severity], text);
    }
}

pf_status pf_cli_open(const pf_cli *cli, pf_store_mode mode, pf_store **store, pf_error *error)
{
    pf_status status = pf_store_open(cli->database, mode, store, error);
    if (status == PF_NOT_FOUND) {
        pf_error_clear(error);
        return pf_error_set(error, PF_DATABASE,
                            "there is no database %s: import ratings first, or name one with --db",
                            cli->database);
    }
    if (status == PF_OK && pf_store_warning(*store))
        fprintf(cli->err, "passfet: %s\n", pf_store_warning(*store));
    return status;
}

bool pf_count_of(const char *text, long least, size_t *value)
{
    char *end;
    long count = strtol(text, &end, 10);
    bool good = *text >= '0' && *text <= '9' && !*end && count >= least && count < 1000000000L;
    if (good) *value = (size_t)count;
    return good;
}

bool pf_count_read(const pf_cli *cli, const char *option, const char *text, long least,
                   size_t *value)
{
    if (pf_count_of(text, least, value)) return true;
    pf_usage(cli, "--%s takes a whole number from %ld on, not `%s`", option, least, text);
    return false;
}

int pf_choice_read(const pf_cli *cli, const char *option, const char *text,
                   const char *const *choice, size_t *index)
{
    char list[200] = "";
    size_t at = 0;
    for (*index = 0; choice[*index]; ++*index) {
        if (strcmp(text, choice[*index]) == 0) return PF_EXIT_DONE;
        const char *mark = !at ? "" : choice[*index + 1] ? ", " : " or ";
        at += (size_t)snprintf(list + at, sizeof list - at, "%s%s", mark, choice[*index]);
    }
    *index = 0;
    return pf_usage(cli, "--%s takes %s, not `%s`", option, list, text);
}

void pf_time_now(char text[PF_TIME_ROOM])
{
    time_t now = time(NULL);
    struct tm parts;
    gmtime_r(&now, &parts);
    strftime(text, PF_TIME_ROOM, "%Y-%m-%dT%H:%M:%SZ", &parts);
}

const char *pf_author(const pf_arguments *arguments)
{
    const char *by = pf_argument(arguments, "by");
    if (by && *by) return by;
    const struct passwd *entry = getpwuid(geteuid());
    return entry && entry->pw_name && *entry->pw_name ? entry->pw_name : "unknown";
}

pf_import_facts pf_facts_of(const pf_arguments *arguments, char now[PF_TIME_ROOM])
{
    pf_time_now(now);
    return (pf_import_facts){
        .author = pf_author(arguments), .time = now, .why = pf_argument(arguments, "why")};
}
