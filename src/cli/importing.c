/* importing.c: one run of import. */
#include "cli/importing.h"
#include "base/memory.h"
#include "cli/earlier.h"
#include "report/csv.h"

#include <errno.h>
#include <string.h>
#include <unistd.h>

static void hash_bytes(void *context, const char *bytes, size_t length)
{
    pf_import_run *run = context;
    SHA256Update(&run->sha, (const uint8_t *)bytes, length);
}

static void show_cell(void *context, const pf_cell_reading *reading)
{
    const pf_import_run *run = context;
    fprintf(run->cli->out, "%s:%zu: %s: %s: `%s` -> %s\n", reading->file, reading->line,
            reading->part, reading->column, reading->text, reading->stored);
}

static void show_progress(void *context, const char *file, size_t bytes_read)
{
    pf_import_run *run = context;
    fprintf(run->cli->err, "\r%s: %zu MiB read", file, bytes_read >> 20);
    fflush(run->cli->err);
    run->progress_shown = true;
}

static void write_cells(FILE *out, const char *const *cell, size_t count, const char *last)
{
    for (size_t i = 0; i < count; i++) {
        pf_csv_text(out, cell[i]);
        fputc(',', out);
    }
    pf_csv_text(out, last);
    fputs("\r\n", out);
}

static void keep_bad_row(void *context, const pf_bad_row *row)
{
    pf_import_run *run = context;
    if (row->cell_count == 0)
        write_cells(run->bad_rows, row->header, row->header_count, "refused because");
    else
        write_cells(run->bad_rows, row->cell, row->cell_count, row->reason);
}

int pf_import_run_start(pf_import_run *run, const char *keep_good)
{
    pf_intake_options *options = &run->options;
    pf_problems_init(&run->problems);
    options->context = run;
    options->bytes = hash_bytes;
    options->cell = run->dry ? show_cell : NULL;
    options->progress = isatty(fileno(run->cli->err)) ? show_progress : NULL;
    if (!keep_good) return PF_EXIT_DONE;
    options->keep_good = true;
    options->bad_row = keep_bad_row;
    run->bad_file = keep_good;
    run->bad_rows = fopen(keep_good, "w");
    if (run->bad_rows) return PF_EXIT_DONE;
    fprintf(run->cli->err, "passfet: %s: %s\n", keep_good, strerror(errno));
    return PF_EXIT_SYSTEM;
}

/* Room for one more source, its hash included. */
static pf_status add_source(pf_import_run *run, const char *path, char **hash)
{
    pf_status status = pf_grow((void **)&run->source, &run->source_room, run->source_count + 1,
                               sizeof *run->source);
    if (status != PF_OK) return status;
    *hash = pf_allocate(PF_HASH_ROOM, 1);
    if (!*hash) return PF_NO_MEMORY;
    run->source[run->source_count++] = (pf_source_file){path, *hash};
    return PF_OK;
}

pf_status pf_import_run_read(pf_import_run *run, const char *path)
{
    char *hash;
    pf_status status = add_source(run, path, &hash);
    if (status != PF_OK) return status;
    SHA256Init(&run->sha);
    status =
        pf_ratings_read_file(path, &run->options, &run->changes, &run->summary, &run->problems);
    SHA256End(&run->sha, hash);
    if (run->progress_shown) fputs("\r\033[K", run->cli->err);
    run->progress_shown = false;
    return status;
}

void pf_import_run_key(const pf_import_run *run, char key[PF_HASH_ROOM])
{
    SHA2_CTX sha;
    char options[1024];
    const pf_intake_options *on = &run->options;
    SHA256Init(&sha);
    for (size_t i = 0; i < run->source_count; i++)
        SHA256Update(&sha, (const uint8_t *)run->source[i].sha256, PF_HASH_ROOM - 1);
    int length =
        snprintf(options, sizeof options, "%c|%s|%s|%s|%d|%d", on->decimal ? on->decimal : '-',
                 on->map_file ? on->map_file : "", on->encoding ? on->encoding : "",
                 on->part_name ? on->part_name : "", on->accept, on->keep_good);
    size_t used = length < 0 ? 0 : (size_t)length;
    SHA256Update(&sha, (const uint8_t *)options, used < sizeof options ? used : sizeof options - 1);
    SHA256End(&sha, key);
}

/* A finding of the store on one part, as a refusal where the part stands. */
static pf_status refuse(pf_import_run *run, const pf_part_change *change, const pf_error *error)
{
    const pf_place place = {change->file, change->line, "part", change->part.name};
    pf_status status =
        pf_problems_add(&run->problems, PF_SEVERITY_REFUSAL, place, NULL, "%s", error->text);
    return status == PF_BAD_INPUT ? PF_OK : status;
}

/* Judges a part as it will be stored; only what this import changes is judged. */
static pf_status judge(pf_import_run *run, const pf_part_change *change, const pf_part *merged,
                       pf_import_effect effect)
{
    if (effect == PF_EFFECT_UNCHANGED) return PF_OK;
    pf_status status =
        pf_part_judge(merged, change->file, change->line, run->options.accept, &run->problems);
    return status == PF_BAD_INPUT ? PF_OK : status;
}

/* One part. Refusals are added to the problems; a status other than PF_OK ends the run. */
static pf_status store_part(pf_import_run *run, pf_store *store, const pf_part_change *change)
{
    pf_part merged;
    pf_import_effect effect;
    pf_error error = {0};
    size_t before = run->problems.refusals;
    pf_part_init(&merged);
    pf_status status = pf_store_import_merge(store, change, &merged, &effect, &error);
    if (status == PF_OK) status = judge(run, change, &merged, effect);
    if (status == PF_OK && effect == PF_EFFECT_CHANGED)
        status = pf_earlier_warn(run, store, change, &merged);
    if (status == PF_OK && run->problems.refusals == before) {
        status = pf_store_import_part(store, change, &merged, &effect, &error);
        if (status == PF_OK) run->effect[effect]++;
    }
    pf_part_clear(&merged);
    if (status == PF_NOT_FOUND || status == PF_BAD_INPUT) return refuse(run, change, &error);
    return status;
}

static pf_status store_parts(pf_import_run *run, pf_store *store)
{
    pf_status status = PF_OK;
    for (size_t i = 0; i < run->changes.count && status == PF_OK; i++)
        if (!run->changes.item[i].refused) status = store_part(run, store, &run->changes.item[i]);
    return status;
}

/* Keeps what was stored where that was wanted and is all good, or all that is to be kept. */
static pf_status finish(pf_import_run *run, pf_store *store, pf_error *error)
{
    bool changed = run->effect[PF_EFFECT_NEW] + run->effect[PF_EFFECT_CHANGED] > 0;
    bool refused = run->problems.refusals > 0 && !run->options.keep_good;
    if (refused || run->dry || !changed) {
        pf_store_import_rollback(store);
        return refused ? PF_BAD_INPUT : PF_OK;
    }
    pf_status status = pf_store_import_commit(store, &run->number, error);
    run->stored = status == PF_OK;
    return status;
}

pf_status pf_import_run_store(pf_import_run *run, pf_store *store, const pf_import_facts *facts,
                              pf_error *error)
{
    pf_status status = pf_store_import_begin(store, facts, &run->already, error);
    if (status != PF_OK) return status;
    if (run->already) return pf_earlier_moved(run, store, &run->moved);
    status = store_parts(run, store);
    if (status == PF_OK) return finish(run, store, error);
    pf_store_import_rollback(store);
    return pf_error_set(error, status, "%s", pf_status_text(status));
}

static const char *plural(size_t count)
{
    return count == 1 ? "" : "s";
}

void pf_import_run_summary(const pf_import_run *run, const char *database)
{
    FILE *out = run->cli->out;
    const pf_problems *problems = &run->problems;
    fprintf(out, "%zu row%s and %zu curve point%s read from %zu file%s.\n", run->summary.rows,
            plural(run->summary.rows), run->summary.points, plural(run->summary.points),
            run->source_count, plural(run->source_count));
    if (run->already) {
        fprintf(out, "Nothing to do: already imported as number %lld.\n", (long long)run->already);
        if (run->moved)
            fprintf(out,
                    "%zu of its parts state%s something else by now: later imports changed them. "
                    "To go back, undo those.\n",
                    run->moved, run->moved == 1 ? "s" : "");
        return;
    }
    fprintf(out, "Parts: %zu new, %zu changed, %zu unchanged; %zu warning%s, %zu refusal%s.\n",
            run->effect[PF_EFFECT_NEW], run->effect[PF_EFFECT_CHANGED],
            run->effect[PF_EFFECT_UNCHANGED], problems->warnings, plural(problems->warnings),
            problems->refusals, plural(problems->refusals));
    if (run->stored)
        fprintf(out, "Stored in %s as import %lld.\n", database, (long long)run->number);
    else if (run->dry)
        fprintf(out, "Dry run: nothing was stored.\n");
    else if (problems->refusals)
        fprintf(out, "Nothing was stored: %s is as it was before.\n", database);
    else
        fprintf(out, "No change: %s holds all of it already.\n", database);
}

int pf_import_run_end(pf_import_run *run)
{
    int exit_status = PF_EXIT_DONE;
    for (size_t i = 0; i < run->source_count; i++)
        pf_free((char *)run->source[i].sha256);
    pf_free(run->source);
    pf_changes_clear(&run->changes);
    pf_problems_clear(&run->problems);
    if (!run->bad_rows) return exit_status;
    bool failed = ferror(run->bad_rows) != 0;
    if (fclose(run->bad_rows) != 0) failed = true;
    if (!failed) return exit_status;
    fprintf(run->cli->err, "passfet: %s: the bad rows could not be written\n", run->bad_file);
    return PF_EXIT_SYSTEM;
}
