/* market.c: every part of a database evaluated, on several threads. */
#include "cli/market.h"
#include "base/memory.h"

#include <pthread.h>
#include <stdatomic.h>
#include <time.h>
#include <unistd.h>

/* Rows that a ranking may hold beyond those to be kept before it is cut. */
#define SPARE_ROWS 2048

/* What the threads share. */
typedef struct shared {
    const pf_market *market;
    int64_t parts; /* in the database, for the progress */
    atomic_size_t done;
    atomic_bool stop; /* some thread failed */
    time_t begun;
} shared;

/* One thread's work. */
typedef struct worker {
    shared *on;
    unsigned slice;
    pf_ranking ranking;
    pf_scratch *scratch;
    pf_stored_part stored[PF_BATCH];
    pf_status status;
    pf_error error;
} worker;

size_t pf_processors(void)
{
    long count = sysconf(_SC_NPROCESSORS_ONLN);
    return count > 0 ? (size_t)count : 1;
}

/* The next wanted parts; *count below PF_BATCH at the end. */
static pf_status read_batch(worker *own, pf_cursor *cursor, size_t *count)
{
    bool more = true;
    for (*count = 0; *count < PF_BATCH && !atomic_load(&own->on->stop);) {
        pf_stored_part *into = &own->stored[*count];
        pf_status status = pf_cursor_next(cursor, into, &more, &own->error);
        if (status != PF_OK || !more) return status;
        atomic_fetch_add(&own->on->done, 1);
        *count += pf_selection_takes(own->on->market->selection, &into->part);
    }
    return PF_OK;
}

static void show_progress(const worker *own)
{
    FILE *out = own->on->market->progress;
    if (!out || own->slice != 0 || time(NULL) - own->on->begun < 2) return;
    fprintf(out, "\r%zu of %lld parts", atomic_load(&own->on->done), (long long)own->on->parts);
    fflush(out);
}

/* Keeps the memory of a long ranking small where only the first rows are wanted. */
static pf_status trim(const pf_market *market, pf_ranking *ranking)
{
    if (!market->top || ranking->count < market->top + SPARE_ROWS) return PF_OK;
    pf_status status = pf_ranking_sort(ranking, market->key, market->key_count);
    if (status == PF_OK) pf_ranking_cut(ranking, market->top);
    return status;
}

static pf_status add_batch(worker *own, size_t count)
{
    const pf_part *part[PF_BATCH];
    unsigned remarks[PF_BATCH];
    for (size_t i = 0; i < count; i++) {
        bool unreviewed = own->stored[i].facts.review != PF_ACCEPTED;
        part[i] = &own->stored[i].part;
        remarks[i] = own->on->market->remarks | (unreviewed ? PF_REMARK_UNREVIEWED : 0);
    }
    pf_status status = pf_ranking_add_batch(&own->ranking, part, remarks, count, own->scratch);
    return status == PF_OK ? trim(own->on->market, &own->ranking) : status;
}

static pf_status work_through(worker *own, pf_cursor *cursor)
{
    size_t count = PF_BATCH;
    pf_status status = PF_OK;
    for (size_t batches = 0; status == PF_OK && count == PF_BATCH; batches++) {
        status = read_batch(own, cursor, &count);
        if (status == PF_OK && count) status = add_batch(own, count);
        if (batches % 64 == 0) show_progress(own);
    }
    return status;
}

static pf_status run(worker *own)
{
    pf_store *store;
    pf_cursor *cursor = NULL;
    pf_query query = own->on->market->selection->query;
    query.slice = own->slice;
    query.slices = (unsigned)own->on->market->threads;
    own->scratch = pf_scratch_new();
    if (!own->scratch) return PF_NO_MEMORY;
    pf_status status = pf_store_open(own->on->market->database, PF_STORE_READ, &store, &own->error);
    if (status == PF_OK) status = pf_cursor_open(store, &query, &cursor, &own->error);
    if (status == PF_OK) status = work_through(own, cursor);
    pf_cursor_close(cursor);
    pf_store_close(store);
    pf_scratch_free(own->scratch);
    return status;
}

static void *start(void *argument)
{
    worker *own = argument;
    own->status = run(own);
    if (own->status != PF_OK) atomic_store(&own->on->stop, true);
    return NULL;
}

static void worker_init(worker *own, shared *on, unsigned slice, const pf_ranking *like)
{
    *own = (worker){.on = on, .slice = slice};
    pf_ranking_init(&own->ranking, like->plan, like->profile_count);
    for (size_t i = 0; i < PF_BATCH; i++)
        pf_stored_part_init(&own->stored[i]);
}

static void worker_clear(worker *own)
{
    pf_ranking_clear(&own->ranking);
    for (size_t i = 0; i < PF_BATCH; i++)
        pf_stored_part_clear(&own->stored[i]);
}

/* Runs all workers; those that no thread could be made for run here. */
static void run_all(worker *own, pthread_t *thread, bool *started, size_t count)
{
    for (size_t i = 1; i < count; i++)
        started[i] = pthread_create(&thread[i], NULL, start, &own[i]) == 0;
    start(&own[0]);
    for (size_t i = 1; i < count; i++) {
        if (started[i])
            pthread_join(thread[i], NULL);
        else
            start(&own[i]);
    }
}

/* Puts the slices together; the first failure in the order of the slices is the one told. */
static pf_status gather(worker *own, size_t count, pf_ranking *ranking, pf_error *error)
{
    pf_status status = PF_OK;
    for (size_t i = 0; i < count; i++) {
        if (status == PF_OK) status = own[i].status;
        if (own[i].status != PF_OK && own[i].error.status != PF_OK)
            pf_error_set(error, own[i].status, "%s", own[i].error.text);
        if (status == PF_OK) status = pf_ranking_take(ranking, &own[i].ranking);
        worker_clear(&own[i]);
    }
    return status;
}

static pf_status rank_slices(const pf_market *market, int64_t parts, pf_ranking *ranking,
                             pf_error *error)
{
    shared on = {.market = market, .parts = parts, .begun = time(NULL)};
    worker *own = pf_allocate(market->threads, sizeof *own);
    pthread_t *thread = pf_allocate(market->threads, sizeof *thread);
    bool *started = pf_allocate(market->threads, sizeof *started);
    pf_status status = own && thread && started ? PF_OK : PF_NO_MEMORY;
    if (status == PF_OK) {
        for (size_t i = 0; i < market->threads; i++)
            worker_init(&own[i], &on, (unsigned)i, ranking);
        run_all(own, thread, started, market->threads);
        if (market->progress) fputs("\r\033[K", market->progress);
        status = gather(own, market->threads, ranking, error);
    }
    pf_free(own);
    pf_free(thread);
    pf_free(started);
    return status;
}

/* Pruning costs as much as evaluating some thousand parts. */
static pf_status prune(const pf_market *market, int64_t parts, pf_plan *const *plan, size_t plans)
{
    pf_status status = PF_OK;
    if (market->all_corners || parts < 4000) return PF_OK;
    for (size_t i = 0; i < plans && status == PF_OK; i++)
        status = pf_plan_prune(plan[i]);
    return status;
}

pf_status pf_market_rank(const pf_market *market, pf_store *store, pf_plan *const *plan,
                         pf_ranking *ranking, char revision[PF_REVISION_NAME_ROOM], pf_error *error)
{
    int64_t parts = 0;
    pf_market sized = *market;
    pf_status status = pf_store_read_begin(store, error);
    if (status != PF_OK) return status;
    status = pf_store_revision_name(store, market->selection->query.as_of, revision, error);
    if (status == PF_OK) status = pf_store_count(store, &parts, error);
    if (parts < 256) sized.threads = 1; /* a thread costs more than it gives */
    if (status == PF_OK) status = prune(market, parts, plan, ranking->profile_count);
    if (status == PF_OK) status = rank_slices(&sized, parts, ranking, error);
    pf_store_read_end(store);
    if (status == PF_OK) status = pf_ranking_sort(ranking, market->key, market->key_count);
    if (status == PF_OK && market->top) pf_ranking_cut(ranking, market->top);
    return status;
}
