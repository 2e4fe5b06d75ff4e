/* find.c: one part by what a user calls it. */
#include "base/memory.h"
#include "store/query.h"

#include <stdio.h>
#include <string.h>

/* What was found so far of the parts that fit a name. */
typedef struct finding {
    int64_t id[16];
    size_t ids;
    size_t there;     /* how many of them there were at the time */
    char makers[256]; /* theirs */
} finding;

/* Ids of all parts of a name; of one maker where maker is not NULL. */
static pf_status collect(pf_store *store, const char *name, const char *maker, size_t maker_length,
                         finding *found, pf_error *error)
{
    sqlite3_stmt *statement;
    bool row;
    pf_status status = pf_store_statement(store, PF_SQL_PARTS_NAMED, &statement, error);
    if (status != PF_OK) return status;
    sqlite3_bind_text(statement, 1, name, -1, SQLITE_STATIC);
    while ((status = pf_store_step(store, statement, &row, error)) == PF_OK && row) {
        const char *stored = (const char *)sqlite3_column_text(statement, 1);
        bool fits = !maker || (stored && strlen(stored) == maker_length &&
                               memcmp(stored, maker, maker_length) == 0);
        if (fits && found->ids < sizeof found->id / sizeof *found->id)
            found->id[found->ids++] = sqlite3_column_int64(statement, 0);
    }
    return status;
}

/* Reads the candidates as of the time; the last one that was there stays in *stored. */
static pf_status read_all(pf_store *store, const char *as_of, finding *found,
                          pf_stored_part *stored, pf_error *error)
{
    pf_status status = PF_OK;
    for (size_t i = found->ids; i > 0 && status == PF_OK; i--) {
        bool there = false;
        status = pf_part_load(store, found->id[i - 1], as_of, stored, &there, error);
        if (!there) continue;
        size_t length = strlen(found->makers);
        const char *maker = stored->part.maker ? stored->part.maker : "one without maker";
        snprintf(found->makers + length, sizeof found->makers - length, "%s%s", length ? ", " : "",
                 maker);
        found->there++;
    }
    return status;
}

/* Tries the whole name, then each `/` as the end of a maker's name, until something is there. */
static pf_status find(pf_store *store, const char *name, const char *as_of, finding *found,
                      pf_stored_part *stored, pf_error *error)
{
    const char *bar = NULL;
    pf_status status = PF_OK;
    do {
        *found = (finding){0};
        status = collect(store, bar ? bar + 1 : name, bar ? name : NULL,
                         bar ? (size_t)(bar - name) : 0, found, error);
        if (status == PF_OK) status = read_all(store, as_of, found, stored, error);
        bar = strchr(bar ? bar + 1 : name, '/');
    } while (status == PF_OK && !found->there && bar);
    return status;
}

static pf_status several(const finding *found, const char *name, pf_error *error)
{
    return pf_error_set(error, PF_BAD_INPUT,
                        "several makers share the part number %s (%s): write maker/%s", name,
                        found->makers, name);
}

pf_status pf_store_part_find(pf_store *store, const char *name, const char *as_of,
                             pf_stored_part *stored, pf_error *error)
{
    finding found;
    pf_status status = find(store, name, as_of, &found, stored, error);
    if (status != PF_OK) return status;
    if (found.there == 0)
        return pf_error_set(error, PF_NOT_FOUND, "%s: there is no part %s%s%s", store->path, name,
                            as_of ? " as of " : "", as_of ? as_of : "");
    return found.there > 1 ? several(&found, name, error) : PF_OK;
}

pf_status pf_part_id_find(pf_store *store, const char *name, int64_t *id, pf_error *error)
{
    finding found;
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    pf_status status = find(store, name, NULL, &found, &stored, error);
    if (status == PF_OK && found.there > 1) status = several(&found, name, error);
    if (status == PF_OK && found.there == 0 && found.ids != 1)
        status = pf_error_set(error, PF_NOT_FOUND, "%s: there is no part %s", store->path, name);
    *id = found.there == 1 ? stored.facts.part_id : found.ids ? found.id[0] : 0;
    pf_stored_part_clear(&stored);
    return status;
}
