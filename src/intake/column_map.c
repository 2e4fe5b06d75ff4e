/* column_map.c: a team's own column names for ours. */
#include "intake/column_map.h"
#include "base/memory.h"
#include "intake/sheet.h"

#include <string.h>

typedef struct map_entry {
    char *theirs, *ours;
} map_entry;

struct pf_column_map {
    map_entry *item;
    size_t count, capacity;
};

const char *pf_column_map_find(const pf_column_map *map, pf_slice theirs)
{
    char one[PF_FOLDED_ROOM], other[PF_FOLDED_ROOM];
    if (!map) return NULL;
    pf_fold(theirs, one);
    for (size_t i = 0; i < map->count; i++) {
        pf_fold(pf_slice_from(map->item[i].theirs, strlen(map->item[i].theirs)), other);
        if (strcmp(one, other) == 0) return map->item[i].ours;
    }
    return NULL;
}

void pf_column_map_free(pf_column_map *map)
{
    if (!map) return;
    for (size_t i = 0; i < map->count; i++) {
        pf_free(map->item[i].theirs);
        pf_free(map->item[i].ours);
    }
    pf_free(map->item);
    pf_free(map);
}

static pf_status take(pf_sheet *sheet, void *context)
{
    pf_column_map *map = context;
    pf_fault fault;
    pf_slice theirs = pf_sheet_text(sheet, 0), ours = pf_sheet_text(sheet, 1);
    const char *known = pf_column_map_find(map, theirs);
    if (theirs.length == 0 || known) {
        pf_fault_set(&fault, "each of their names once",
                     known ? "this name stands in the map already" : "no name");
        return pf_sheet_refuse(sheet, "their name", theirs, &fault);
    }
    if (pf_slice_is(ours, "ignore") || pf_not_stated(ours)) ours.length = 0;
    pf_status status =
        pf_grow((void **)&map->item, &map->capacity, map->count + 1, sizeof *map->item);
    if (status != PF_OK) return status;
    map_entry entry = {NULL, NULL};
    status = pf_text_copy_n(&entry.theirs, theirs.text, theirs.length);
    if (status == PF_OK) status = pf_text_copy_n(&entry.ours, ours.text, ours.length);
    if (status == PF_OK)
        map->item[map->count++] = entry;
    else
        pf_free(entry.theirs);
    return status;
}

pf_status pf_column_map_read_file(const char *path, pf_column_map **map, pf_problems *problems)
{
    pf_source source = {.name = path};
    *map = pf_allocate(1, sizeof **map);
    if (!*map) return PF_NO_MEMORY;
    pf_sheet sheet = {.problems = problems,
                      .column_count = 2,
                      .column = {{.names = "their name|theirs|their|from|column", .required = true},
                                 {.names = "our name|ours|our|to|passfet", .required = true}},
                      .take = take,
                      .context = *map};
    return pf_sheet_read(&sheet, &source);
}
