/* write.c: storing states of parts within an open entry.
**
** A state is stored once: it lies in part while it is the newest, and moves to past as it is when
** the next one comes. Curves are shared by all revisions that state the same ones.
*/
#include "store/write.h"
#include "base/memory.h"
#include "store/curve_json.h"
#include "store/digest.h"
#include "store/packed.h"
#include "store/record.h"

#include <string.h>

pf_status pf_write_begin(pf_store *store, pf_error *error)
{
    pf_import *import = &store->import;
    if (import->open)
        return pf_error_set(error, PF_BAD_ARGUMENT, "%s: an import is already open", store->path);
    pf_status status = pf_store_run(store, "BEGIN IMMEDIATE", error);
    if (status != PF_OK) return status;
    import->open = true;
    import->broken = false;
    import->count = 0;
    import->entry = 0;
    return PF_OK;
}

pf_status pf_write_entry(pf_store *store, const pf_log_facts *facts, pf_error *error)
{
    return pf_log_add(store, facts, &store->import.entry, error);
}

/* Stores the curves of a part in both forms; *id 0: it has none. store->packed holds them. */
static pf_status add_curves(pf_store *store, const pf_part *part, int64_t *id, pf_error *error)
{
    sqlite3_stmt *packed, *text;
    *id = 0;
    if (store->packed.length == 0) return PF_OK;
    pf_buffer_reset(&store->json);
    pf_curves_json(part, &store->json);
    if (pf_buffer_status(&store->json) != PF_OK) return pf_store_no_memory(store, error);
    pf_status status = pf_store_statement(store, PF_SQL_ADD_CURVE, &packed, error);
    if (status == PF_OK) status = pf_store_statement(store, PF_SQL_ADD_CURVE_JSON, &text, error);
    if (status != PF_OK) return status;
    sqlite3_bind_blob(packed, 1, store->packed.text, (int)store->packed.length, SQLITE_STATIC);
    status = pf_store_do(store, packed, error);
    *id = sqlite3_last_insert_rowid(store->db);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(text, 1, *id);
    sqlite3_bind_text(text, 2, store->json.text, (int)store->json.length, SQLITE_STATIC);
    return pf_store_do(store, text, error);
}

static pf_status archive(pf_store *store, int64_t part_id, pf_error *error)
{
    sqlite3_stmt *statement;
    pf_status status = pf_store_statement(store, PF_SQL_ARCHIVE, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, part_id);
    return pf_store_do(store, statement, error);
}

/* Keeps what the entry's hash must cover. */
static pf_status remember(pf_store *store, const pf_written *written, pf_error *error)
{
    pf_import *import = &store->import;
    if (pf_grow((void **)&import->written, &import->capacity, import->count + 1,
                sizeof *import->written) != PF_OK)
        return pf_store_no_memory(store, error);
    import->written[import->count++] = *written;
    return PF_OK;
}

/* A second state within one revision takes the place of the first. */
static void forget(pf_import *import, int64_t part_id)
{
    for (size_t i = import->count; i > 0; i--)
        if (import->written[i - 1].part == part_id) {
            import->written[i - 1] = import->written[--import->count];
            return;
        }
}

static pf_status put_row(pf_store *store, const pf_target *target, const pf_part *part,
                         const pf_state_facts *facts, int64_t *part_id, pf_error *error)
{
    sqlite3_stmt *statement;
    pf_statement which = target->part_id ? PF_SQL_SET_PART : PF_SQL_ADD_PART;
    pf_status status = pf_store_statement(store, which, &statement, error);
    if (status != PF_OK) return status;
    *part_id = target->part_id;
    if (target->part_id) sqlite3_bind_int64(statement, 1, target->part_id);
    status = pf_state_bind(store, statement, part, facts, error);
    if (status == PF_OK) status = pf_store_do(store, statement, error);
    if (status == PF_OK && !*part_id) *part_id = sqlite3_last_insert_rowid(store->db);
    return status;
}

/* Packs the curves at hand and works out the hash of the state. */
static pf_status prepare(pf_store *store, const pf_part *part, bool withdrawn, pf_written *written,
                         pf_error *error)
{
    pf_buffer_reset(&store->packed);
    if (pf_part_has_curves(part)) pf_curves_pack(part, &store->packed);
    if (pf_buffer_status(&store->packed) != PF_OK) return pf_store_no_memory(store, error);
    pf_status status = pf_state_digest(&store->order, part, withdrawn, store->packed.text,
                                       store->packed.length, &store->scratch, written->content);
    return status == PF_OK ? PF_OK : pf_store_no_memory(store, error);
}

pf_status pf_write_state(pf_store *store, const pf_target *target, const pf_part *part,
                         bool withdrawn, int64_t curves, pf_error *error)
{
    pf_import *import = &store->import;
    bool again = target->part_id && target->entry == import->entry;
    pf_written written;
    pf_state_facts facts = {.number = target->number + (again ? 0 : 1),
                            .entry = import->entry,
                            .curves = curves,
                            .withdrawn = withdrawn,
                            .content = written.content};
    import->broken = true;
    pf_status status = prepare(store, part, withdrawn, &written, error);
    if (status == PF_OK && curves == PF_CURVES_NEW)
        status = add_curves(store, part, &facts.curves, error);
    if (status == PF_OK && target->part_id && !again)
        status = archive(store, target->part_id, error);
    pf_buffer_reset(&store->json);
    pf_rdson_json(part, &store->json);
    facts.rdson = pf_buffer_string(&store->json);
    if (status == PF_OK && pf_buffer_status(&store->json) != PF_OK)
        status = pf_store_no_memory(store, error);
    if (status == PF_OK) status = put_row(store, target, part, &facts, &written.part, error);
    if (status != PF_OK) return status;
    written.number = facts.number;
    if (again) forget(import, written.part);
    status = remember(store, &written, error);
    import->broken = status != PF_OK;
    return status;
}

pf_status pf_write_load(pf_store *store, int64_t part_id, pf_target *target, pf_error *error)
{
    sqlite3_stmt *statement;
    pf_record_extra extra;
    bool row;
    pf_status status = pf_store_statement(store, PF_SQL_LOAD, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_int64(statement, 1, part_id);
    status = pf_store_step(store, statement, &row, error);
    if (status == PF_OK && !row) status = pf_store_damaged(store, error, "a part has no row");
    if (status == PF_OK) status = pf_record_read(store, statement, &store->current, &extra, error);
    if (status == PF_OK)
        *target = (pf_target){.part_id = part_id,
                              .number = store->current.facts.number,
                              .entry = store->current.facts.entry,
                              .curves = extra.curves,
                              .withdrawn = extra.withdrawn};
    sqlite3_reset(statement);
    return status;
}
