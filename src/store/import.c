/* import.c: an import: one entry, in which changes become states of parts. */
#include "base/memory.h"
#include "store/judge.h"
#include "store/log.h"
#include "store/packed.h"
#include "store/write.h"

#include <stdio.h>
#include <string.h>

pf_status pf_entry_holds(pf_store *store, int64_t entry, bool *holding, pf_error *error)
{
    *holding = true;
    for (;;) {
        sqlite3_stmt *statement;
        bool row;
        pf_status status = pf_store_statement(store, PF_SQL_UNDO_OF, &statement, error);
        if (status != PF_OK) return status;
        sqlite3_bind_int64(statement, 1, entry);
        status = pf_store_step(store, statement, &row, error);
        if (status != PF_OK || !row) return status;
        int64_t undo = sqlite3_column_int64(statement, 0);
        sqlite3_reset(statement);
        if (undo <= entry) return pf_store_damaged(store, error, "an undo precedes what it undoes");
        entry = undo;
        *holding = !*holding;
    }
}

/* The first import with this key that holds; 0 for none. */
static pf_status find_key(pf_store *store, const char *key, int64_t *found, pf_error *error)
{
    sqlite3_stmt *statement;
    bool row = true, holding = false;
    *found = 0;
    pf_status status = pf_store_statement(store, PF_SQL_ENTRY_BY_KEY, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_text(statement, 1, key, -1, SQLITE_STATIC);
    while (status == PF_OK && !*found &&
           (status = pf_store_step(store, statement, &row, error)) == PF_OK && row) {
        int64_t entry = sqlite3_column_int64(statement, 0);
        status = pf_entry_holds(store, entry, &holding, error);
        if (holding) *found = entry;
    }
    sqlite3_reset(statement);
    return status;
}

static pf_status begin(pf_store *store, const char *kind, const pf_import_facts *facts,
                       int64_t *already, pf_error *error)
{
    pf_log_facts log = {.kind = kind,
                        .author = facts->author,
                        .time = facts->time,
                        .why = facts->why,
                        .key = facts->key,
                        .file = facts->file,
                        .file_count = facts->file_count};
    pf_status status = pf_write_begin(store, error);
    if (status == PF_OK && facts->key) status = find_key(store, facts->key, already, error);
    if (status != PF_OK || *already) return status;
    if (pf_text_copy(&store->import.why, facts->why) != PF_OK)
        return pf_store_no_memory(store, error);
    return pf_write_entry(store, &log, error);
}

pf_status pf_import_begin_as(pf_store *store, const char *kind, const pf_import_facts *facts,
                             int64_t *already, pf_error *error)
{
    bool open = store->import.open;
    *already = 0;
    pf_status status = begin(store, kind, facts, already, error);
    if (!open && (status != PF_OK || *already)) pf_store_import_rollback(store);
    return status;
}

pf_status pf_store_import_begin(pf_store *store, const pf_import_facts *facts, int64_t *already,
                                pf_error *error)
{
    return pf_import_begin_as(store, "import", facts, already, error);
}

/* One part of the right name, with what speaks for it. */
typedef struct candidate {
    int64_t exact, unnamed, only; /* same maker; no maker; any that is there */
    size_t present;
    char makers[256]; /* of those that are there */
} candidate;

static void weigh(candidate *found, sqlite3_stmt *row, const char *maker)
{
    int64_t id = sqlite3_column_int64(row, 0);
    const char *stored = (const char *)sqlite3_column_text(row, 1);
    bool withdrawn = sqlite3_column_int(row, 2) != 0;
    if (stored && maker ? strcmp(stored, maker) == 0 : !stored && !maker) found->exact = id;
    if (withdrawn) return;
    size_t length = strlen(found->makers);
    snprintf(found->makers + length, sizeof found->makers - length, "%s%s", length ? ", " : "",
             stored ? stored : "one without maker");
    if (!stored) found->unnamed = id;
    found->only = id;
    found->present++;
}

static pf_status find_candidates(pf_store *store, const char *name, const char *maker,
                                 candidate *found, pf_error *error)
{
    sqlite3_stmt *statement;
    bool row;
    *found = (candidate){0};
    pf_status status = pf_store_statement(store, PF_SQL_PARTS_NAMED, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_text(statement, 1, name, -1, SQLITE_STATIC);
    while ((status = pf_store_step(store, statement, &row, error)) == PF_OK && row)
        weigh(found, statement, maker);
    return status;
}

/* Which part a change means; 0: a new one. A change without maker means the only part of that name;
** one with a maker also the part whose maker was not stated so far. */
static pf_status choose(pf_store *store, const pf_part *part, int64_t *id, pf_error *error)
{
    candidate found;
    pf_status status = find_candidates(store, part->name, part->maker, &found, error);
    if (status != PF_OK) return status;
    *id = found.exact;
    if (!part->maker && found.present > 1)
        return pf_error_set(error, PF_BAD_INPUT,
                            "several makers share the part number %s (%s): name the maker",
                            part->name, found.makers);
    if (!part->maker && found.present == 1) *id = found.only;
    if (part->maker && !found.exact && found.unnamed) *id = found.unnamed;
    return PF_OK;
}

static bool states_only_curves(const pf_part_change *change)
{
    return !change->ratings_given && !change->polarity_given && !change->rdson_given;
}

static const pf_text_field *text_field(const char *name)
{
    size_t count;
    const pf_text_field *field = pf_text_fields(&count);
    while (count && strcmp(field->name, name) != 0)
        field++, count--;
    return field;
}

/* A status that changes takes the import's reason where the file gives none; a banned part keeps or
** needs one. */
static pf_status settle_reason(pf_store *store, const pf_part *before, pf_part *part,
                               pf_error *error)
{
    bool banned = part->status && strcmp(part->status, "banned") == 0;
    bool same = before->status && part->status ? strcmp(before->status, part->status) == 0
                                               : before->status == part->status;
    const char *given = part->status_reason, *old = before->status_reason;
    bool stale = given && old && !same && strcmp(given, old) == 0;
    const char *reason = given && !stale ? given : NULL;
    bool moved = before->status && part->status && !same;
    if (!reason && (moved || banned)) reason = store->import.why;
    if (!reason && same && banned) reason = old;
    if (banned && !reason)
        return pf_error_set(error, PF_BAD_INPUT,
                            "part %s: a banned part needs a reason: fill status_reason or say why "
                            "the import is made",
                            part->name);
    if (reason == given) return PF_OK;
    return pf_part_set_text(part, text_field("status_reason"), reason) == PF_OK
               ? PF_OK
               : pf_store_no_memory(store, error);
}

/* What the part was, and the change on top of it. A change never takes a maker away. */
static pf_status apply(const pf_part *before, const pf_part_change *change, pf_part *merged)
{
    const char *maker = change->part.maker ? change->part.maker : before->maker;
    pf_status status = pf_part_copy(merged, before);
    if (status == PF_OK) status = pf_part_apply(merged, change);
    if (status == PF_OK) status = pf_part_set_text(merged, text_field("name"), change->part.name);
    if (status == PF_OK) status = pf_part_set_text(merged, text_field("maker"), maker);
    return status;
}

static pf_status merge(pf_store *store, const pf_part_change *change, pf_part *merged,
                       pf_target *target, pf_import_effect *effect, pf_error *error)
{
    pf_part nothing;
    const pf_part *before = &nothing;
    int64_t id;
    pf_part_init(&nothing);
    *target = (pf_target){0};
    pf_status status = choose(store, &change->part, &id, error);
    if (status == PF_OK && id) status = pf_write_load(store, id, target, error);
    if (status != PF_OK) return status;
    bool there = id && !target->withdrawn;
    if (there) before = &store->current.part;
    if (apply(before, change, merged) != PF_OK) return pf_store_no_memory(store, error);
    status = pf_judge_needs(merged, !there && states_only_curves(change), error);
    if (status == PF_OK) status = settle_reason(store, before, merged, error);
    if (status == PF_OK) status = pf_judge_values(merged, error);
    *effect = !there                          ? PF_EFFECT_NEW
              : pf_part_equal(before, merged) ? PF_EFFECT_UNCHANGED
                                              : PF_EFFECT_CHANGED;
    return status;
}

static pf_status check_open(pf_store *store, const pf_part_change *change, pf_error *error)
{
    if (!store->import.open || store->import.broken)
        return pf_error_set(error, PF_BAD_ARGUMENT, "%s: no import is open", store->path);
    if (!change->part.name || !change->part.name[strspn(change->part.name, " ")])
        return pf_error_set(error, PF_BAD_INPUT, "a part needs a name");
    return PF_OK;
}

pf_status pf_store_import_merge(pf_store *store, const pf_part_change *change, pf_part *merged,
                                pf_import_effect *effect, pf_error *error)
{
    pf_target target;
    pf_status status = check_open(store, change, error);
    return status == PF_OK ? merge(store, change, merged, &target, effect, error) : status;
}

pf_status pf_store_import_part(pf_store *store, const pf_part_change *change, pf_part *merged,
                               pf_import_effect *effect, pf_error *error)
{
    pf_target target;
    pf_status status = check_open(store, change, error);
    if (status == PF_OK) status = merge(store, change, merged, &target, effect, error);
    if (status != PF_OK || *effect == PF_EFFECT_UNCHANGED) return status;
    bool same = *effect == PF_EFFECT_CHANGED && pf_curves_equal(&store->current.part, merged);
    return pf_write_state(store, &target, merged, false, same ? target.curves : PF_CURVES_NEW,
                          error);
}
