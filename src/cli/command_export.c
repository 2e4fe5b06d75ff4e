/* command_export.c: passfet export FOLDER: all ratings as CSV that imports again unchanged.
**
** Four files, since one table could not hold an SOA at two case temperatures or Foster pairs beside
** points. They are written under other names first and renamed once all are whole.
*/
#include "cli/commands.h"
#include "cli/selection.h"

#include <errno.h>
#include <string.h>
#include <sys/stat.h>

const pf_option pf_export_options[] = {
    PF_WHERE_OPTION,
    PF_AS_OF_OPTION,
    PF_REVIEWED_OPTION,
    PF_HELP_OPTION,
};

#define PATH_ROOM 4096

typedef struct export_run {
    const pf_cli *cli;
    const char *folder;
    pf_drives drives;
    FILE *file[PF_CSV_COUNT];
    size_t parts;
} export_run;

/* ending "" or ".new". False where the path is too long. */
static bool make_path(char path[PATH_ROOM], const export_run *run, int kind, const char *ending)
{
    int length = snprintf(path, PATH_ROOM, "%s/%s%s", run->folder,
                          pf_ratings_csv_name((pf_ratings_csv)kind), ending);
    return length > 0 && length < PATH_ROOM;
}

static int refuse_path(const export_run *run, const char *path)
{
    fprintf(run->cli->err, "passfet: %s: %s\n", path, strerror(errno));
    return PF_EXIT_SYSTEM;
}

static int open_files(export_run *run)
{
    char path[PATH_ROOM] = "";
    if (mkdir(run->folder, 0777) != 0 && errno != EEXIST) return refuse_path(run, run->folder);
    for (int kind = 0; kind < PF_CSV_COUNT; kind++) {
        errno = ENAMETOOLONG;
        run->file[kind] = make_path(path, run, kind, ".new") ? fopen(path, "w") : NULL;
        if (!run->file[kind]) return refuse_path(run, path[0] ? path : run->folder);
    }
    return PF_EXIT_DONE;
}

static bool close_file(FILE **file)
{
    bool good = *file && !ferror(*file);
    if (*file && fclose(*file) != 0) good = false;
    *file = NULL;
    return good;
}

/* Closes all, and lets them take their names where all are whole. */
static int close_files(export_run *run, bool keep)
{
    char fresh[PATH_ROOM], path[PATH_ROOM];
    int exit_status = PF_EXIT_DONE;
    for (int kind = 0; kind < PF_CSV_COUNT; kind++) {
        bool opened = run->file[kind] != NULL;
        if (close_file(&run->file[kind]) || !opened || !keep) continue;
        make_path(path, run, kind, ".new");
        exit_status = refuse_path(run, path);
    }
    keep = keep && exit_status == PF_EXIT_DONE;
    for (int kind = 0; kind < PF_CSV_COUNT; kind++) {
        if (!make_path(fresh, run, kind, ".new") || !make_path(path, run, kind, "")) continue;
        if (!keep)
            remove(fresh);
        else if (rename(fresh, path) != 0)
            exit_status = refuse_path(run, path);
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
    for (int kind = 0; kind < PF_CSV_COUNT; kind++)
        pf_ratings_csv_part(run->file[kind], (pf_ratings_csv)kind, &run->drives, &stored->part);
    run->parts++;
    return PF_OK;
}

/* Two walks over one state of the database: the gate drives make columns, so they come first. */
static pf_status write_files(export_run *run, pf_store *store, const pf_selection *selection,
                             pf_error *error)
{
    pf_status status = pf_store_read_begin(store, error);
    if (status != PF_OK) return status;
    status = pf_selection_walk(store, selection, add_drives, run, error);
    for (int kind = 0; kind < PF_CSV_COUNT && status == PF_OK; kind++)
        pf_ratings_csv_head(run->file[kind], (pf_ratings_csv)kind, &run->drives);
    if (status == PF_OK) status = pf_selection_walk(store, selection, write_part, run, error);
    pf_store_read_end(store);
    return status;
}

static int export_all(export_run *run, pf_store *store, const pf_selection *selection)
{
    pf_error error = {0};
    int exit_status = open_files(run);
    pf_status status = PF_OK;
    if (exit_status == PF_EXIT_DONE) status = write_files(run, store, selection, &error);
    bool keep = exit_status == PF_EXIT_DONE && status == PF_OK;
    int closed = close_files(run, keep);
    pf_drives_clear(&run->drives);
    if (status != PF_OK) return pf_fail(run->cli, status, &error);
    if (exit_status == PF_EXIT_DONE) exit_status = closed;
    if (exit_status == PF_EXIT_DONE)
        fprintf(run->cli->out, "%zu part%s written to %s.\n", run->parts,
                run->parts == 1 ? "" : "s", run->folder);
    return exit_status;
}

int pf_command_export(const pf_cli *cli, const pf_arguments *arguments)
{
    pf_selection selection;
    pf_store *store;
    pf_error error = {0};
    export_run run = {.cli = cli, .folder = arguments->operand[0]};
    int exit_status = pf_selection_read(cli, arguments, &selection);
    if (exit_status != PF_EXIT_DONE) return exit_status;
    pf_status status = pf_cli_open(cli, PF_STORE_READ, &store, &error);
    exit_status =
        status == PF_OK ? export_all(&run, store, &selection) : pf_fail(cli, status, &error);
    pf_store_close(store);
    return exit_status;
}
