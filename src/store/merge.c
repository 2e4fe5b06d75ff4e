/* merge.c: taking parts from another database.
**
** Hashes of states tell who goes on from whom: where the newest state of one side is an older state
** of the other, nothing was changed on that side since, and the other's newest state stands.
*/
#include "store/query.h"
#include "store/record.h"
#include "store/write.h"

#include <string.h>

typedef struct merging {
    pf_store *ours, *theirs;
    pf_prefer prefer;
    pf_conflict_visitor *visit;
    void *context;
    pf_merge_summary *summary;
} merging;

/* Whether a part of this name and maker was ever, in this database, in the state with this hash. */
static pf_status knew(pf_store *store, const pf_part *part, const unsigned char *content,
                      bool *known, pf_error *error)
{
    sqlite3_stmt *statement;
    pf_status status = pf_store_statement(store, PF_SQL_KNEW, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_text(statement, 1, part->name, -1, SQLITE_STATIC);
    sqlite3_bind_text(statement, 2, part->maker ? part->maker : "", -1, SQLITE_STATIC);
    sqlite3_bind_blob(statement, 3, content, PF_DIGEST_BYTES, SQLITE_STATIC);
    status = pf_store_step(store, statement, known, error);
    sqlite3_reset(statement);
    return status;
}

/* Our part of the same name and maker: into ours->current. target.part_id 0: none. */
static pf_status find_ours(pf_store *ours, const pf_part *part, pf_target *target,
                           unsigned char content[PF_DIGEST_BYTES], pf_error *error)
{
    sqlite3_stmt *statement;
    bool row;
    int64_t id = 0;
    *target = (pf_target){0};
    pf_status status = pf_store_statement(ours, PF_SQL_PART_OF_MAKER, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_text(statement, 1, part->name, -1, SQLITE_STATIC);
    sqlite3_bind_text(statement, 2, part->maker ? part->maker : "", -1, SQLITE_STATIC);
    status = pf_store_step(ours, statement, &row, error);
    if (status == PF_OK && row) {
        id = sqlite3_column_int64(statement, 0);
        if (sqlite3_column_bytes(statement, 1) == PF_DIGEST_BYTES)
            memcpy(content, sqlite3_column_blob(statement, 1), PF_DIGEST_BYTES);
    }
    sqlite3_reset(statement);
    return status == PF_OK && id ? pf_write_load(ours, id, target, error) : status;
}

static bool prefers_theirs(pf_prefer prefer, const pf_stored_part *ours,
                           const pf_stored_part *theirs)
{
    return prefer == PF_PREFER_THEIRS ||
           (prefer == PF_PREFER_NEWER && strcmp(theirs->facts.time, ours->facts.time) > 0);
}

/* Whether theirs is to be stored over ours, which differs and is there. */
static pf_status decide(merging *merge, const unsigned char *our_hash,
                        const unsigned char *their_hash, const pf_stored_part *theirs, bool *take,
                        pf_error *error)
{
    pf_store *ours = merge->ours;
    bool ahead = false, forward = false;
    pf_status status = knew(ours, &theirs->part, their_hash, &ahead, error);
    if (status == PF_OK && !ahead)
        status = knew(merge->theirs, &theirs->part, our_hash, &forward, error);
    *take = forward;
    merge->summary->ahead += ahead;
    merge->summary->forward += forward;
    if (status != PF_OK || ahead || forward) return status;
    *take = prefers_theirs(merge->prefer, &ours->current, theirs);
    merge->summary->conflicts++;
    merge->summary->taken += *take;
    return merge->visit ? merge->visit(merge->context, &ours->current, theirs, *take, error)
                        : PF_OK;
}

static pf_status merge_part(merging *merge, const pf_stored_part *theirs,
                            const unsigned char *their_hash, pf_error *error)
{
    unsigned char our_hash[PF_DIGEST_BYTES] = {0};
    pf_target target;
    bool take = true, gone = false; /* gone: we knew theirs and withdrew it */
    pf_status status = find_ours(merge->ours, &theirs->part, &target, our_hash, error);
    if (status != PF_OK) return status;
    if (target.withdrawn) status = knew(merge->ours, &theirs->part, their_hash, &gone, error);
    if (gone) {
        merge->summary->ahead++;
        return status;
    }
    if (!target.part_id || target.withdrawn) {
        merge->summary->added++;
    } else if (memcmp(our_hash, their_hash, PF_DIGEST_BYTES) == 0) {
        merge->summary->unchanged++;
        return PF_OK;
    } else {
        status = decide(merge, our_hash, their_hash, theirs, &take, error);
    }
    if (status != PF_OK || !take) return status;
    return pf_write_state(merge->ours, &target, &theirs->part, false, PF_CURVES_NEW, error);
}

static pf_status merge_all(merging *merge, pf_error *error)
{
    pf_cursor *cursor;
    pf_stored_part theirs;
    pf_record_extra extra;
    bool more = true;
    pf_stored_part_init(&theirs);
    pf_status status = pf_cursor_open(merge->theirs, &(pf_query){0}, &cursor, error);
    while (status == PF_OK &&
           (status = pf_cursor_next_extra(cursor, &theirs, &extra, &more, error)) == PF_OK && more)
        status = merge_part(merge, &theirs, extra.content, error);
    pf_cursor_close(cursor);
    pf_stored_part_clear(&theirs);
    return status;
}

pf_status pf_store_merge(pf_store *store, pf_store *other, const pf_import_facts *facts,
                         pf_prefer prefer, pf_conflict_visitor *visit, void *context,
                         pf_merge_summary *summary, int64_t *already, int64_t *number,
                         pf_error *error)
{
    merging merge = {store, other, prefer, visit, context, summary};
    *summary = (pf_merge_summary){0};
    pf_status status = pf_import_begin_as(store, "merge", facts, already, error);
    if (status != PF_OK || *already) return status;
    status = merge_all(&merge, error);
    if (status == PF_OK && prefer == PF_PREFER_NONE && summary->conflicts)
        status = pf_error_set(error, PF_BAD_INPUT,
                              "both sides changed %zu part%s: say which to prefer, ours, theirs "
                              "or newer",
                              summary->conflicts, summary->conflicts == 1 ? "" : "s");
    if (status == PF_OK) return pf_store_import_commit(store, number, error);
    pf_store_import_rollback(store);
    return status;
}
