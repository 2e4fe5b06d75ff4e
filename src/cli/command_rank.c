/* command_rank.c: passfet rank PROFILE… */
#include "base/memory.h"
#include "cli/cards.h"
#include "cli/commands.h"
#include "cli/market.h"
#include "cli/paging.h"
#include "cli/reviewing.h"
#include "cli/selection.h"

#include <passfet/ranking.h>
#include <passfet/report.h>
#include <string.h>
#include <unistd.h>

const pf_option pf_rank_options[] = {
    {"sort", "KEY[,KEY...]",
     "order within a verdict: margin, loss, junction, running, price, part"},
    {"top", "N", "show the first N parts only"},
    PF_WHERE_OPTION,
    {"capture", "FILE", "a measured waveform to evaluate as well; repeatable"},
    {"derating", "FILE", "derating rules of your own, before the built-in ones"},
    PF_AS_OF_OPTION,
    PF_REVIEWED_OPTION,
    {"threads", "N", "evaluate on N threads; else on all processors"},
    {"all-corners", NULL, "look at every corner, also those proved never to be the worst"},
    {"format", "FORMAT", "table (the default), csv or json"},
    {"trials", "N", "work each part shown out with N draws of the profile's intervals as well"},
    {"seed", "S", "which draws; 1 where it is not given"},
    {"uniform", NULL, "draw evenly between min and max, not by a triangle over min, typ and max"},
    {"report", "FILE",
     "write an HTML page as well, with the SOA of the first parts (--top, else 10)"},
    PF_HELP_OPTION,
};

/* Everything that the options say. */
typedef struct request {
    pf_selection selection;
    pf_sort_key key[PF_SORT_COUNT];
    size_t key_count;
    size_t top, threads;
    bool all_corners;
    const char *page;         /* --report */
    pf_trials_request trials; /* count 0: none */
    void (*write)(FILE *out, const pf_ranking *ranking, const pf_report_source *source);
} request;

static int read_keys(const pf_cli *cli, const char *text, request *on)
{
    while (text && *text) {
        char name[32];
        size_t length = strcspn(text, ",");
        snprintf(name, sizeof name, "%.*s", (int)length, text);
        if (on->key_count == PF_SORT_COUNT ||
            pf_sort_key_read(name, &on->key[on->key_count++]) != PF_OK)
            return pf_usage(
                cli, "--sort: `%s` is no key: margin, loss, junction, running, price, part", name);
        text += length + (text[length] == ',');
    }
    return PF_EXIT_DONE;
}

static int read_format(const pf_cli *cli, const char *text, request *on)
{
    static void (*const writer[])(FILE *, const pf_ranking *, const pf_report_source *) = {
        pf_report_table, pf_report_csv, pf_report_json};
    static const char *const format[] = {"table", "csv", "json", NULL};
    size_t index = 0;
    int exit_status = text ? pf_choice_read(cli, "format", text, format, &index) : PF_EXIT_DONE;
    on->write = writer[index];
    return exit_status;
}

static int read_request(const pf_cli *cli, const pf_arguments *arguments, request *on)
{
    const char *top = pf_argument(arguments, "top"), *threads = pf_argument(arguments, "threads");
    *on = (request){.threads = pf_processors(),
                    .all_corners = pf_argument(arguments, "all-corners") != NULL,
                    .page = pf_argument(arguments, "report")};
    int exit_status = read_keys(cli, pf_argument(arguments, "sort"), on);
    if (exit_status == PF_EXIT_DONE)
        exit_status = pf_selection_read(cli, arguments, &on->selection);
    if (exit_status == PF_EXIT_DONE)
        exit_status = read_format(cli, pf_argument(arguments, "format"), on);
    if (exit_status == PF_EXIT_DONE && top && !pf_count_read(cli, "top", top, 1, &on->top))
        exit_status = PF_EXIT_USAGE;
    if (exit_status == PF_EXIT_DONE && threads &&
        !pf_count_read(cli, "threads", threads, 1, &on->threads))
        exit_status = PF_EXIT_USAGE;
    if (exit_status == PF_EXIT_DONE) exit_status = pf_trials_read(cli, arguments, &on->trials);
    if (on->threads > 256) on->threads = 256;
    on->selection.query.as_stored = true; /* the order is the ranking's */
    return exit_status;
}

static bool any_stall(const pf_cards *cards)
{
    for (size_t i = 0; i < cards->count; i++)
        if (pf_plan_stall(cards->plan[i])) return true;
    return false;
}

static int show(const pf_cli *cli, pf_store *store, const request *on, const pf_cards *cards,
                const pf_ranking *ranking, const char *revision)
{
    pf_report_source source = {.database = cli->database, .revision = revision, .top = on->top};
    const pf_reviewing reviewing = {.store = store,
                                    .as_of = on->selection.query.as_of,
                                    .windows = on->write == pf_report_json || on->page,
                                    .trials = &on->trials};
    pf_row_review *review = NULL;
    int exit_status = pf_rows_review(cli, &reviewing, ranking, &source, &review);
    if (exit_status == PF_EXIT_DONE) on->write(cli->out, ranking, &source);
    if (exit_status == PF_EXIT_DONE && on->page)
        exit_status =
            pf_page_write(cli, on->page, store, &on->selection.query, cards, ranking, &source);
    pf_free(review);
    if (exit_status != PF_EXIT_DONE) return exit_status;
    return any_stall(cards) || ranking->tally[PF_PASS] == 0 ? PF_EXIT_NO : PF_EXIT_DONE;
}

static int rank(const pf_cli *cli, pf_store *store, const request *on, const pf_cards *cards)
{
    char revision[PF_REVISION_NAME_ROOM];
    pf_error error = {0};
    pf_ranking ranking;
    const pf_market market = {.database = cli->database,
                              .selection = &on->selection,
                              .key = on->key,
                              .key_count = on->key_count,
                              .top = on->top,
                              .remarks = cards->remarks,
                              .threads = on->threads,
                              .all_corners = on->all_corners,
                              .progress = isatty(fileno(cli->err)) ? cli->err : NULL};
    pf_ranking_init(&ranking, (const pf_plan *const *)cards->plan, cards->count);
    pf_status status = pf_market_rank(&market, store, cards->plan, &ranking, revision, &error);
    int exit_status = status == PF_OK ? show(cli, store, on, cards, &ranking, revision)
                                      : pf_fail(cli, status, &error);
    pf_ranking_clear(&ranking);
    return exit_status;
}

int pf_command_rank(const pf_cli *cli, const pf_arguments *arguments)
{
    request on;
    pf_cards cards;
    pf_store *store;
    pf_error error = {0};
    int exit_status = read_request(cli, arguments, &on);
    if (exit_status == PF_EXIT_DONE)
        exit_status =
            pf_cards_read(cli, arguments, arguments->operand, arguments->operand_count, &cards);
    if (exit_status != PF_EXIT_DONE) return exit_status;
    pf_status status = pf_cli_open(cli, PF_STORE_READ, &store, &error);
    exit_status = status == PF_OK ? rank(cli, store, &on, &cards) : pf_fail(cli, status, &error);
    pf_store_close(store);
    pf_cards_clear(&cards);
    return exit_status;
}
