/* history.c: the revisions of one part, oldest first. */
#include "base/memory.h"
#include "store/query.h"
#include "store/record.h"

#include <string.h>

/* Two parts that take turns, so that each revision can be held against the one before. */
typedef struct walk {
    pf_store *store;
    pf_history_visitor *visit;
    void *context;
    pf_stored_part part[2];
    pf_review_facts *review;
    size_t reviews, capacity;
    pf_buffer texts; /* what the reviews point to, and kind, why, files */
} walk;

/* Appends a text and its NUL; returns where it starts, (size_t)-1 for NULL. */
static size_t keep(walk *on, sqlite3_stmt *row, int column)
{
    size_t at = on->texts.length;
    const char *text = (const char *)sqlite3_column_text(row, column);
    if (!text) return (size_t)-1;
    pf_buffer_add(&on->texts, text, strlen(text) + 1);
    return at;
}

static const char *kept(const walk *on, size_t at)
{
    return at == (size_t)-1 ? NULL : on->texts.text + at;
}

/* The reviews of one revision. Their texts are found by place, since the buffer moves as it grows. */
static pf_status read_reviews(walk *on, const pf_revision_facts *facts, pf_error *error)
{
    sqlite3_stmt *statement;
    bool row;
    on->reviews = 0;
    pf_status status = pf_store_statement(on->store, PF_SQL_REVIEWS_OF, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, facts->part_id);
    sqlite3_bind_int64(statement, 2, facts->number);
    while ((status = pf_store_step(on->store, statement, &row, error)) == PF_OK && row) {
        if (pf_grow((void **)&on->review, &on->capacity, on->reviews + 1, sizeof *on->review)) {
            sqlite3_reset(statement);
            return pf_store_no_memory(on->store, error);
        }
        const char *verdict = (const char *)sqlite3_column_text(statement, 1);
        on->review[on->reviews++] =
            (pf_review_facts){.entry = sqlite3_column_int64(statement, 0),
                              .accept = verdict && strcmp(verdict, "accept") == 0};
        for (int column = 2; column <= 4; column++) {
            const char *text = (const char *)sqlite3_column_text(statement, column);
            pf_buffer_text(&on->texts, text ? text : "");
            pf_buffer_add(&on->texts, "", 1);
        }
    }
    return status;
}

static const char *next_text(const char **at)
{
    const char *text = *at;
    *at += strlen(text) + 1;
    return text;
}

static void place_reviews(walk *on, size_t start)
{
    const char *at = on->texts.text + start;
    for (size_t i = 0; i < on->reviews; i++) {
        on->review[i].author = next_text(&at);
        on->review[i].time = next_text(&at);
        on->review[i].why = next_text(&at);
        if (!*on->review[i].why) on->review[i].why = NULL;
    }
}

/* Kind, why and files of the entry that made the revision. */
static pf_status read_entry(walk *on, int64_t entry, size_t place[3], pf_error *error)
{
    sqlite3_stmt *statement;
    bool row;
    pf_status status = pf_store_statement(on->store, PF_SQL_ENTRY_WORDS, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, entry);
    status = pf_store_step(on->store, statement, &row, error);
    for (int i = 0; i < 3; i++)
        place[i] = row ? keep(on, statement, i) : (size_t)-1;
    sqlite3_reset(statement);
    return status;
}

static pf_status show(walk *on, const pf_stored_part *now, const pf_stored_part *before,
                      bool withdrawn, pf_error *error)
{
    size_t place[3];
    pf_buffer_reset(&on->texts);
    pf_status status = read_entry(on, now->facts.entry, place, error);
    size_t start = on->texts.length;
    if (status == PF_OK) status = read_reviews(on, &now->facts, error);
    if (status != PF_OK) return status;
    pf_buffer_add(&on->texts, "", 1);
    if (pf_buffer_status(&on->texts) != PF_OK) return pf_store_no_memory(on->store, error);
    place_reviews(on, start);
    pf_history_step step = {.now = now,
                            .before = before,
                            .withdrawn = withdrawn,
                            .kind = kept(on, place[0]),
                            .why = kept(on, place[1]),
                            .files = kept(on, place[2]),
                            .review = on->review,
                            .review_count = on->reviews};
    if (!step.kind) return pf_store_damaged(on->store, error, "a revision has no entry");
    return on->visit(on->context, &step, error);
}

static pf_status walk_states(walk *on, int64_t part_id, pf_error *error)
{
    sqlite3_stmt *statement;
    pf_record_extra extra;
    const pf_stored_part *before = NULL;
    size_t turn = 0;
    bool row;
    pf_status status = pf_store_statement(on->store, PF_SQL_ALL_STATES, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, part_id);
    while (status == PF_OK &&
           (status = pf_store_step(on->store, statement, &row, error)) == PF_OK && row) {
        pf_stored_part *now = &on->part[turn];
        status = pf_record_read(on->store, statement, now, &extra, error);
        if (status == PF_OK) status = show(on, now, before, extra.withdrawn, error);
        before = extra.withdrawn ? NULL : now;
        turn = 1 - turn;
    }
    sqlite3_reset(statement);
    return status;
}

pf_status pf_store_history(pf_store *store, const char *name, pf_history_visitor *visit,
                           void *context, pf_error *error)
{
    int64_t part_id;
    walk on = {.store = store, .visit = visit, .context = context};
    pf_buffer_init(&on.texts, PF_SQL_MAX * 16);
    pf_stored_part_init(&on.part[0]);
    pf_stored_part_init(&on.part[1]);
    pf_status status = pf_part_id_find(store, name, &part_id, error);
    if (status == PF_OK) status = walk_states(&on, part_id, error);
    pf_stored_part_clear(&on.part[0]);
    pf_stored_part_clear(&on.part[1]);
    pf_buffer_clear(&on.texts);
    pf_free(on.review);
    return status;
}
