/* command_export.c: passfet export [FOLDER]: all ratings as CSV that imports again unchanged.
**
** Without a folder one table on the output, curves in cells; with one four files, with a row per point,
** which appear under their names once all of them are whole.
*/
#include "cli/commands.h"
#include "cli/fresh_file.h"
#include "cli/selection.h"

#include <errno.h>
#include <sys/stat.h>

const pf_option pf_export_options[] = {
    PF_WHERE_OPTION,
    PF_AS_OF_OPTION,
    PF_REVIEWED_OPTION,
    PF_HELP_OPTION,
};

typedef struct export_run {
    const pf_cli *cli;
    const char *folder;
    pf_drives drives;
    pf_fresh_file file[PF_CSV_FILES];
    size_t parts;
} export_run;

static int open_files(export_run *run)
{
    char path[PF_PATH_ROOM];
    int exit_status = PF_EXIT_DONE;
    if (mkdir(run->folder, 0777) != 0 && errno != EEXIST)
        return pf_fail_path(run->cli, run->folder);
    for (int kind = 0; kind < PF_CSV_FILES && exit_status == PF_EXIT_DONE; kind++) {
        snprintf(path, sizeof path, "%s/%s", run->folder,
                 pf_ratings_csv_name((pf_ratings_csv)kind));
        exit_status = pf_fresh_open(run->cli, &run->file[kind], path);
    }
    return exit_status;
}

/* Closes all, and lets them take their names where all are whole. */
static int close_files(export_run *run, bool keep)
{
    int exit_status = PF_EXIT_DONE;
    for (int kind = 0; kind < PF_CSV_FILES; kind++) {
        bool whole = pf_fresh_close(&run->file[kind]);
        if (keep && !whole) exit_status = pf_fail_path(run->cli, run->file[kind].path);
    }
    keep = keep && exit_status == PF_EXIT_DONE;
    for (int kind = 0; kind < PF_CSV_FILES; kind++) {
        int settled = pf_fresh_settle(run->cli, &run->file[kind], keep);
        if (exit_status == PF_EXIT_DONE) exit_status = settled;
    }
    return exit_status;
}

static pf_status add_drives(void *context, const pf_stored_part *stored)
{
    export_run *run = context;
    return pf_drives_add(&run->drives, &stored->part);
}

static pf_status write_part(void *context, const pf_stored_part *stored)
{
    export_run *run = context;
    if (!run->folder) pf_ratings_csv_part(run->cli->out, PF_CSV_WHOLE, &run->drives, &stored->part);
    for (int kind = 0; kind < PF_CSV_FILES && run->folder; kind++)
        pf_ratings_csv_part(run->file[kind].file, (pf_ratings_csv)kind, &run->drives,
                            &stored->part);
    run->parts++;
    return PF_OK;
}

static void write_heads(export_run *run)
{
    if (!run->folder) pf_ratings_csv_head(run->cli->out, PF_CSV_WHOLE, &run->drives);
    for (int kind = 0; kind < PF_CSV_FILES && run->folder; kind++)
        pf_ratings_csv_head(run->file[kind].file, (pf_ratings_csv)kind, &run->drives);
}

/* Two walks over one state of the database: the gate drives make columns, so they come first. */
static pf_status write_all(export_run *run, pf_store *store, const pf_selection *selection,
                           pf_error *error)
{
    pf_status status = pf_store_read_begin(store, error);
    if (status != PF_OK) return status;
    status = pf_selection_walk(store, selection, add_drives, run, error);
    if (status == PF_OK) write_heads(run);
    if (status == PF_OK) status = pf_selection_walk(store, selection, write_part, run, error);
    pf_store_read_end(store);
    return status;
}

static int export_all(export_run *run, pf_store *store, const pf_selection *selection)
{
    pf_error error = {0};
    int exit_status = run->folder ? open_files(run) : PF_EXIT_DONE;
    pf_status status = PF_OK;
    if (exit_status == PF_EXIT_DONE) status = write_all(run, store, selection, &error);
    int closed = close_files(run, exit_status == PF_EXIT_DONE && status == PF_OK);
    pf_drives_clear(&run->drives);
    if (status != PF_OK) return pf_fail(run->cli, status, &error);
    if (exit_status == PF_EXIT_DONE) exit_status = closed;
    if (exit_status == PF_EXIT_DONE && run->folder)
        fprintf(run->cli->out, "%zu part%s written to %s.\n", run->parts,
                run->parts == 1 ? "" : "s", run->folder);
    return exit_status;
}

int pf_command_export(const pf_cli *cli, const pf_arguments *arguments)
{
    pf_selection selection;
    pf_store *store;
    pf_error error = {0};
    export_run run = {.cli = cli,
                      .folder = arguments->operand_count ? arguments->operand[0] : NULL};
    int exit_status = pf_selection_read(cli, arguments, &selection);
    if (exit_status != PF_EXIT_DONE) return exit_status;
    pf_status status = pf_cli_open(cli, PF_STORE_READ, &store, &error);
    exit_status =
        status == PF_OK ? export_all(&run, store, &selection) : pf_fail(cli, status, &error);
    pf_store_close(store);
    return exit_status;
}
