/* paging.c: rank --report: the ranking as an HTML page. */
#include "cli/paging.h"
#include "base/memory.h"
#include "cli/fresh_file.h"

#include <passfet/page.h>
#include <string.h>

/* Parts that are shown in full where nobody says how many. */
#define USUAL_PARTS 10

typedef struct paging {
    FILE *out;
    pf_store *store;
    const pf_query *query;
    const pf_cards *cards;
    const pf_ranking *ranking;
    pf_scratch *scratch;
    pf_explanation *explanation;
    pf_stored_part stored;
} paging;

static pf_status write_part(paging *on, size_t place, pf_error *error)
{
    char name[PF_PATH_ROOM];
    const pf_row *row = &on->ranking->row[place];
    const pf_plan *plan = on->cards->plan[row->deciding_profile];
    const pf_captures *recorded = &on->cards->recorded;
    snprintf(name, sizeof name, "%s%s%s", row->maker ? row->maker : "", row->maker ? "/" : "",
             row->part);
    pf_status status = pf_store_part_find(on->store, name, on->query->as_of, &on->stored, error);
    if (status == PF_OK)
        status = pf_explain(plan, recorded->view, recorded->count, &on->stored.part, on->scratch,
                            on->explanation);
    if (status != PF_OK) return status;
    on->explanation->assessment.stress.remarks |=
        row->assessment[row->deciding_profile].stress.remarks;
    pf_page_part(on->out, place, plan, &on->stored.part, on->explanation);
    return PF_OK;
}

/* The parts are read once more; that has to be the state that was ranked. */
static pf_status check_state(const paging *on, const pf_report_source *source, pf_error *error)
{
    char revision[PF_REVISION_NAME_ROOM];
    pf_status status = pf_store_revision_name(on->store, on->query->as_of, revision, error);
    if (status != PF_OK || strcmp(revision, source->revision) == 0) return status;
    return pf_error_set(error, PF_BUSY, "%s changed while it was ranked: try again",
                        source->database);
}

static pf_status write_parts(paging *on, const pf_report_source *source, pf_error *error)
{
    size_t count = source->top ? source->top : USUAL_PARTS;
    pf_status status = pf_store_read_begin(on->store, error);
    if (status != PF_OK) return status;
    status = check_state(on, source, error);
    for (size_t i = 0; i < count && i < on->ranking->count && status == PF_OK; i++)
        status = write_part(on, i, error);
    pf_store_read_end(on->store);
    return status;
}

static pf_status write_page(paging *on, const pf_report_source *source, pf_error *error)
{
    on->scratch = pf_scratch_new();
    on->explanation = pf_allocate(1, sizeof *on->explanation);
    pf_status status = on->scratch && on->explanation ? PF_OK : PF_NO_MEMORY;
    pf_stored_part_init(&on->stored);
    pf_page_begin(on->out, on->ranking, source);
    if (status == PF_OK) status = write_parts(on, source, error);
    pf_page_end(on->out);
    pf_stored_part_clear(&on->stored);
    pf_free(on->explanation);
    pf_scratch_free(on->scratch);
    return status;
}

int pf_page_write(const pf_cli *cli, const char *path, pf_store *store, const pf_query *query,
                  const pf_cards *cards, const pf_ranking *ranking, const pf_report_source *source)
{
    pf_fresh_file file;
    pf_error error = {0};
    int exit_status = pf_fresh_open(cli, &file, path);
    if (exit_status != PF_EXIT_DONE) return exit_status;
    paging on = {
        .out = file.file, .store = store, .query = query, .cards = cards, .ranking = ranking};
    pf_status status = write_page(&on, source, &error);
    bool whole = pf_fresh_close(&file);
    if (!whole) exit_status = pf_fail_path(cli, path);
    if (status != PF_OK) exit_status = pf_fail(cli, status, &error);
    int settled = pf_fresh_settle(cli, &file, exit_status == PF_EXIT_DONE);
    return exit_status == PF_EXIT_DONE ? settled : exit_status;
}
