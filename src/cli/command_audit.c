/* command_audit.c: passfet audit: the database itself, and ratings that contradict each other. */
#include "base/memory.h"
#include "cli/commands.h"
#include "cli/selection.h"

#include <passfet/plausibility.h>
#include <stdlib.h>
#include <string.h>

const pf_option pf_audit_options[] = {
    PF_WHERE_OPTION,
    PF_HELP_OPTION,
};

typedef struct audit_line {
    char *part, *text;
    pf_finding finding;
} audit_line;

typedef struct audit_run {
    const pf_cli *cli;
    audit_line *line;
    size_t count, capacity;
    const pf_part *part; /* the one at hand */
    size_t parts;
    pf_status status;
} audit_run;

static pf_status add_line(audit_run *run, const pf_finding *finding)
{
    char text[400], name[500];
    const pf_part *part = run->part;
    pf_status status =
        pf_grow((void **)&run->line, &run->capacity, run->count + 1, sizeof *run->line);
    if (status != PF_OK) return status;
    audit_line *line = &run->line[run->count];
    *line = (audit_line){.finding = *finding};
    snprintf(name, sizeof name, "%s%s%s", part->maker ? part->maker : "", part->maker ? "/" : "",
             part->name);
    pf_finding_print(finding, text, sizeof text);
    status = pf_text_copy(&line->part, name);
    if (status == PF_OK) status = pf_text_copy(&line->text, text);
    run->count++;
    return status;
}

static void note_finding(void *context, const pf_finding *finding)
{
    audit_run *run = context;
    if (run->status == PF_OK) run->status = add_line(run, finding);
}

static pf_status check_part(void *context, const pf_stored_part *stored)
{
    audit_run *run = context;
    run->part = &stored->part;
    run->parts++;
    pf_status status = pf_part_check(&stored->part, note_finding, run);
    return status == PF_OK ? run->status : status;
}

/* Worst first; then by part, so that the order is always the same. */
static int compare_lines(const void *left, const void *right)
{
    const audit_line *a = left, *b = right;
    if (a->finding.refuses != b->finding.refuses) return a->finding.refuses ? -1 : 1;
    if (a->finding.ratio != b->finding.ratio) return a->finding.ratio > b->finding.ratio ? -1 : 1;
    int order = strcmp(a->part, b->part);
    return order ? order : strcmp(a->text, b->text);
}

static void say_sentence(void *context, const char *sentence)
{
    fprintf(context, "database: %s\n", sentence);
}

static void print_lines(audit_run *run)
{
    FILE *out = run->cli->out;
    if (run->count) qsort(run->line, run->count, sizeof *run->line, compare_lines);
    for (size_t i = 0; i < run->count; i++) {
        const audit_line *line = &run->line[i];
        fprintf(out, "%s: %s (%.3g times): check %s\n", line->part, line->text, line->finding.ratio,
                pf_oddity_look(line->finding.oddity));
    }
}

static void clear_lines(audit_run *run)
{
    for (size_t i = 0; i < run->count; i++) {
        pf_free(run->line[i].part);
        pf_free(run->line[i].text);
    }
    pf_free(run->line);
}

int pf_command_audit(const pf_cli *cli, const pf_arguments *arguments)
{
    pf_selection selection;
    pf_store *store;
    pf_error error = {0};
    size_t damages = 0;
    audit_run run = {.cli = cli};
    int exit_status = pf_selection_read(cli, arguments, &selection);
    if (exit_status != PF_EXIT_DONE) return exit_status;
    pf_status status = pf_cli_open(cli, PF_STORE_READ, &store, &error);
    if (status == PF_OK) status = pf_store_verify(store, say_sentence, cli->out, &damages, &error);
    if (status == PF_OK) status = pf_selection_walk(store, &selection, check_part, &run, &error);
    pf_store_close(store);
    if (status == PF_OK) print_lines(&run);
    if (status == PF_OK)
        fprintf(cli->out, "%zu part%s: %zu finding%s; database: %s.\n", run.parts,
                run.parts == 1 ? "" : "s", run.count, run.count == 1 ? "" : "s",
                damages ? "damaged" : "sound");
    exit_status = run.count + damages ? PF_EXIT_NO : PF_EXIT_DONE;
    clear_lines(&run);
    return status == PF_OK ? exit_status : pf_fail(cli, status, &error);
}
