/* command_parts.c: passfet parts, passfet show PART: what the database holds. */
#include "cli/commands.h"
#include "cli/selection.h"

const pf_option pf_parts_options[] = {
    PF_WHERE_OPTION,
    PF_AS_OF_OPTION,
    PF_REVIEWED_OPTION,
    {"format", "FORMAT", "table (the default), csv (texts and ratings) or json (curves as well)"},
    PF_HELP_OPTION,
};

const pf_option pf_show_options[] = {
    PF_AS_OF_OPTION,
    {"format", "FORMAT", "text (the default) or json"},
    PF_HELP_OPTION,
};

enum { AS_TABLE, AS_CSV, AS_JSON };

typedef struct parts_run {
    FILE *out;
    size_t format;
    pf_drives drives;
    pf_listing_json *json;
    size_t parts;
} parts_run;

static pf_status add_drives(void *context, const pf_stored_part *stored)
{
    parts_run *run = context;
    return pf_drives_add(&run->drives, &stored->part);
}

static pf_status write_part(void *context, const pf_stored_part *stored)
{
    parts_run *run = context;
    const pf_listed_part listed = pf_listed_from(stored);
    run->parts++;
    if (run->format == AS_CSV)
        pf_ratings_csv_part(run->out, PF_CSV_PARTS, &run->drives, &stored->part);
    else if (run->format == AS_JSON)
        pf_listing_json_part(run->json, &listed);
    else
        pf_listing_table_row(run->out, &listed);
    return PF_OK;
}

static pf_status write_head(parts_run *run, pf_store *store, const pf_selection *selection,
                            pf_error *error)
{
    pf_status status = PF_OK;
    if (run->format == AS_JSON) return pf_listing_json_new(run->out, &run->json);
    if (run->format == AS_CSV) status = pf_selection_walk(store, selection, add_drives, run, error);
    if (status == PF_OK && run->format == AS_CSV)
        pf_ratings_csv_head(run->out, PF_CSV_PARTS, &run->drives);
    if (run->format == AS_TABLE) pf_listing_table_head(run->out);
    return status;
}

static pf_status write_list(parts_run *run, pf_store *store, const pf_selection *selection,
                            pf_error *error)
{
    char revision[PF_REVISION_NAME_ROOM];
    pf_status status = pf_store_read_begin(store, error);
    if (status != PF_OK) return status;
    status = pf_store_revision_name(store, selection->query.as_of, revision, error);
    if (status == PF_OK) status = write_head(run, store, selection, error);
    if (status == PF_OK) status = pf_selection_walk(store, selection, write_part, run, error);
    pf_store_read_end(store);
    pf_listing_json_end(run->json);
    pf_drives_clear(&run->drives);
    if (status == PF_OK && run->format == AS_TABLE)
        fprintf(run->out, "%zu part%s, revision %s.\n", run->parts, run->parts == 1 ? "" : "s",
                revision);
    return status;
}

int pf_command_parts(const pf_cli *cli, const pf_arguments *arguments)
{
    static const char *const formats[] = {"table", "csv", "json", NULL};
    pf_selection selection;
    pf_store *store;
    pf_error error = {0};
    parts_run run = {.out = cli->out};
    const char *format = pf_argument(arguments, "format");
    int exit_status = pf_selection_read(cli, arguments, &selection);
    if (exit_status == PF_EXIT_DONE && format)
        exit_status = pf_choice_read(cli, "format", format, formats, &run.format);
    if (exit_status != PF_EXIT_DONE) return exit_status;
    pf_status status = pf_cli_open(cli, PF_STORE_READ, &store, &error);
    if (status == PF_OK) status = write_list(&run, store, &selection, &error);
    pf_store_close(store);
    return status == PF_OK ? PF_EXIT_DONE : pf_fail(cli, status, &error);
}

static pf_status show(const pf_cli *cli, const pf_arguments *arguments, bool json, pf_error *error)
{
    pf_store *store;
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    pf_status status = pf_cli_open(cli, PF_STORE_READ, &store, error);
    if (status == PF_OK)
        status = pf_store_part_find(store, arguments->operand[0], pf_argument(arguments, "as-of"),
                                    &stored, error);
    if (status == PF_OK) {
        const pf_listed_part listed = pf_listed_from(&stored);
        (json ? pf_listing_json_page : pf_listing_page)(cli->out, &listed);
    }
    pf_stored_part_clear(&stored);
    pf_store_close(store);
    return status;
}

int pf_command_show(const pf_cli *cli, const pf_arguments *arguments)
{
    static const char *const formats[] = {"text", "json", NULL};
    const char *format = pf_argument(arguments, "format");
    size_t chosen = 0;
    pf_error error = {0};
    if (format && pf_choice_read(cli, "format", format, formats, &chosen) != PF_EXIT_DONE)
        return PF_EXIT_USAGE;
    pf_status status = show(cli, arguments, chosen == 1, &error);
    return status == PF_OK ? PF_EXIT_DONE : pf_fail(cli, status, &error);
}
