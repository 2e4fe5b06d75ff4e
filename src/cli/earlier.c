/* earlier.c: what the database stated before an import. */
#include "cli/earlier.h"
#include "base/memory.h"

#include <stdio.h>
#include <string.h>

/* The part as it is now; *there is false where no part, or more than one, has that name. */
static pf_status find(pf_store *store, const pf_part *part, pf_stored_part *now, bool *there)
{
    pf_error error = {0};
    pf_status status = PF_NOT_FOUND;
    *there = false;
    if (part->maker) {
        size_t room = strlen(part->maker) + strlen(part->name) + 2;
        char *name = pf_allocate(room, 1);
        if (!name) return PF_NO_MEMORY;
        snprintf(name, room, "%s/%s", part->maker, part->name);
        status = pf_store_part_find(store, name, NULL, now, &error);
        pf_free(name);
    }
    if (status == PF_NOT_FOUND)
        status = pf_store_part_find(store, part->name, NULL, now, &(pf_error){0});
    *there = status == PF_OK;
    return status == PF_NOT_FOUND || status == PF_BAD_INPUT ? PF_OK : status;
}

static size_t curve_size(const pf_part *part)
{
    size_t size = 0;
    for (int path = 0; path < PF_PATH_COUNT; path++)
        size += part->thermal[path].point_count + part->thermal[path].pair_count;
    return size;
}

static bool states_no_curve(const pf_part_change *change)
{
    bool thermal = false;
    for (int path = 0; path < PF_PATH_COUNT; path++)
        thermal = thermal || change->thermal_given[path];
    return (change->soa_given && !change->part.soa_count) ||
           (thermal && !curve_size(&change->part));
}

pf_status pf_earlier_warn(pf_import_run *run, pf_store *store, const pf_part_change *change,
                          const pf_part *merged)
{
    bool there = false;
    pf_stored_part now;
    if (!states_no_curve(change)) return PF_OK;
    pf_stored_part_init(&now);
    pf_status status = find(store, merged, &now, &there);
    bool soa = there && now.part.soa_count && !merged->soa_count;
    bool zth = there && curve_size(&now.part) && !curve_size(merged);
    const pf_place place = {change->file, change->line, soa ? "soa" : "zth", change->part.name};
    if (status == PF_OK && (soa || zth))
        status = pf_problems_add(&run->problems, PF_SEVERITY_WARNING, place,
                                 "leave that column out, or import the curves with this file",
                                 "a blank cell takes away the %s stated before",
                                 soa && zth ? "SOA and Zth"
                                 : soa      ? "SOA"
                                            : "Zth");
    pf_stored_part_clear(&now);
    return status;
}

/* Whether the change would change what is stated now. */
static pf_status would_move(pf_store *store, const pf_part_change *change, bool *moves)
{
    bool there;
    pf_part then;
    pf_stored_part now;
    pf_part_init(&then);
    pf_stored_part_init(&now);
    pf_status status = find(store, &change->part, &now, &there);
    if (status == PF_OK && there) status = pf_part_copy(&then, &now.part);
    if (status == PF_OK && there) status = pf_part_apply(&then, change);
    *moves = status == PF_OK && (!there || !pf_part_equal(&then, &now.part));
    pf_part_clear(&then);
    pf_stored_part_clear(&now);
    return status;
}

pf_status pf_earlier_moved(const pf_import_run *run, pf_store *store, size_t *moved)
{
    pf_status status = PF_OK;
    *moved = 0;
    for (size_t i = 0; i < run->changes.count && status == PF_OK; i++) {
        bool moves = false;
        if (!run->changes.item[i].refused)
            status = would_move(store, &run->changes.item[i], &moves);
        *moved += moves;
    }
    return status;
}
