/* command_import.c: passfet import FILE… */
#include "base/memory.h"
#include "cli/commands.h"
#include "cli/importing.h"
#include "cli/merging.h"

#include <string.h>
#include <unistd.h>

const pf_option pf_import_options[] = {
    {"map", "FILE", "column map: a CSV of two columns, their name and our name"},
    {"decimal", "point|comma", "settles numbers that could be two things"},
    {"encoding", "NAME", "utf-8 (the default) or windows-1252"},
    {"part", "NAME", "the part of files that have no part column"},
    {"accept", NULL, "take curves that contradict each other, with a warning"},
    {"keep-good", "FILE", "store good rows, write bad ones to FILE with the reasons"},
    {"dry-run", NULL, "store nothing; show for every cell what would be stored"},
    {"prefer", "WHOSE",
     "for another database: ours, theirs or newer where both sides changed a part"},
    PF_BY_OPTION,
    PF_WHY_OPTION,
    PF_HELP_OPTION,
};

static int read_options(const pf_cli *cli, const pf_arguments *arguments, pf_import_run *run)
{
    const char *decimal = pf_argument(arguments, "decimal");
    pf_intake_options *options = &run->options;
    if (decimal && strcmp(decimal, "point") != 0 && strcmp(decimal, "comma") != 0)
        return pf_usage(cli, "--decimal takes point or comma, not `%s`", decimal);
    if (decimal) options->decimal = strcmp(decimal, "comma") == 0 ? ',' : '.';
    options->map_file = pf_argument(arguments, "map");
    options->encoding = pf_argument(arguments, "encoding");
    options->part_name = pf_argument(arguments, "part");
    options->accept = pf_argument(arguments, "accept") != NULL;
    run->dry = pf_argument(arguments, "dry-run") != NULL;
    return pf_import_run_start(run, pf_argument(arguments, "keep-good"));
}

/* Reads all files; every problem of all of them is gathered. */
static pf_status read_files(const pf_arguments *arguments, pf_import_run *run)
{
    pf_status first = PF_OK;
    for (size_t i = 0; i < arguments->operand_count; i++) {
        pf_status status = pf_import_run_read(run, arguments->operand[i]);
        if (first == PF_OK) first = status;
    }
    return first;
}

static pf_status open_store(const pf_cli *cli, const pf_import_run *run, pf_store **store,
                            pf_error *error)
{
    bool fresh = access(cli->database, F_OK) != 0;
    if (run->dry && fresh) return pf_store_open(cli->database, PF_STORE_MEMORY, store, error);
    return pf_cli_open(cli, PF_STORE_CREATE, store, error);
}

static int store_all(const pf_cli *cli, const pf_arguments *arguments, pf_import_run *run)
{
    pf_store *store;
    pf_error error = {0};
    char now[PF_TIME_ROOM], key[PF_HASH_ROOM];
    pf_time_now(now);
    pf_import_run_key(run, key);
    const pf_import_facts facts = {.author = pf_author(arguments),
                                   .time = now,
                                   .why = pf_argument(arguments, "why"),
                                   .key = run->dry ? NULL : key,
                                   .file = run->source,
                                   .file_count = run->source_count};
    pf_status status = open_store(cli, run, &store, &error);
    if (status == PF_OK) status = pf_import_run_store(run, store, &facts, &error);
    pf_store_close(store);
    if (status == PF_OK || (status == PF_BAD_INPUT && run->problems.refusals)) return PF_EXIT_DONE;
    return pf_fail(cli, status, &error);
}

static int import(const pf_cli *cli, const pf_arguments *arguments, pf_import_run *run)
{
    pf_status status = read_files(arguments, run);
    int exit_status = PF_EXIT_DONE;
    if (status == PF_OK) exit_status = store_all(cli, arguments, run);
    pf_problems_show(cli, &run->problems);
    if (status != PF_OK && !run->problems.refusals) return pf_fail(cli, status, NULL);
    if (exit_status != PF_EXIT_DONE) return exit_status;
    pf_import_run_summary(run, cli->database);
    if (status != PF_OK) return pf_exit_of(status);
    if (!run->problems.refusals) return PF_EXIT_DONE;
    return run->options.keep_good && run->stored ? PF_EXIT_NO : PF_EXIT_INPUT;
}

int pf_command_import(const pf_cli *cli, const pf_arguments *arguments)
{
    pf_import_run run = {.cli = cli};
    if (pf_is_database(arguments->operand[0])) return pf_merge_database(cli, arguments);
    int exit_status = read_options(cli, arguments, &run);
    if (exit_status == PF_EXIT_DONE) exit_status = import(cli, arguments, &run);
    int closed = pf_import_run_end(&run);
    return exit_status == PF_EXIT_DONE ? closed : exit_status;
}
