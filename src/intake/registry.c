/* registry.c: part numbers to changes, by hash. */
#include "intake/registry.h"
#include "base/memory.h"

#include <string.h>

/* FNV-1a, 64 bits (Fowler, Noll, Vo). */
static uint64_t hash_of(pf_slice name)
{
    uint64_t hash = UINT64_C(14695981039346656037);
    for (size_t i = 0; i < name.length; i++)
        hash = (hash ^ (unsigned char)name.text[i]) * UINT64_C(1099511628211);
    return hash;
}

static pf_slice name_of(const pf_part_change *change)
{
    return pf_slice_from(change->part.name, strlen(change->part.name));
}

static void enter(pf_registry *registry, pf_slice name, size_t index)
{
    size_t at = (size_t)hash_of(name) & (registry->slots - 1);
    while (registry->slot[at])
        at = (at + 1) & (registry->slots - 1);
    registry->slot[at] = (uint32_t)index + 1;
    registry->used++;
}

static pf_status rebuild(pf_registry *registry, const pf_changes *changes, size_t slots)
{
    uint32_t *slot = pf_allocate(slots, sizeof *slot);
    if (!slot) return PF_NO_MEMORY;
    pf_free(registry->slot);
    *registry = (pf_registry){slot, slots, 0};
    for (size_t i = 0; i < changes->count; i++)
        enter(registry, name_of(&changes->item[i]), i);
    return PF_OK;
}

pf_status pf_registry_init(pf_registry *registry, const pf_changes *changes)
{
    size_t slots = 64;
    while (slots < 2 * changes->count)
        slots *= 2;
    *registry = (pf_registry){0};
    return rebuild(registry, changes, slots);
}

void pf_registry_clear(pf_registry *registry)
{
    pf_free(registry->slot);
    *registry = (pf_registry){0};
}

static bool same(pf_slice text, const char *whole)
{
    return strlen(whole) == text.length && memcmp(whole, text.text, text.length) == 0;
}

/* What there is of a part number. */
typedef struct candidates {
    size_t count, first, exact, nameless; /* exact and nameless: SIZE_MAX for none */
} candidates;

static candidates gather(const pf_registry *registry, const pf_changes *changes, pf_slice name,
                         pf_slice maker)
{
    candidates found = {0, SIZE_MAX, SIZE_MAX, SIZE_MAX};
    size_t at = (size_t)hash_of(name) & (registry->slots - 1);
    for (; registry->slot[at]; at = (at + 1) & (registry->slots - 1)) {
        size_t index = registry->slot[at] - 1;
        const pf_part *part = &changes->item[index].part;
        if (!same(name, part->name)) continue;
        found.count++;
        if (found.first == SIZE_MAX) found.first = index;
        if (!part->maker) found.nameless = index;
        if (part->maker && maker.length && same(maker, part->maker)) found.exact = index;
    }
    return found;
}

static pf_status set_maker(pf_part_change *change, pf_slice maker)
{
    pf_status status = pf_text_copy_n(&change->part.maker, maker.text, maker.length);
    if (status == PF_OK) change->texts_given |= 2;
    return status;
}

static pf_status add(pf_registry *registry, pf_changes *changes, pf_slice name, pf_slice maker,
                     size_t *index)
{
    pf_status status = pf_grow((void **)&changes->item, &changes->capacity, changes->count + 1,
                               sizeof *changes->item);
    if (status != PF_OK) return status;
    pf_part_change *change = &changes->item[changes->count];
    pf_part_change_init(change);
    status = pf_text_copy_n(&change->part.name, name.text, name.length);
    if (status == PF_OK && maker.length) status = set_maker(change, maker);
    if (status == PF_OK && 2 * (registry->used + 1) > registry->slots)
        status = rebuild(registry, changes, 2 * registry->slots);
    if (status != PF_OK) {
        pf_part_change_clear(change);
        return status;
    }
    change->texts_given |= 1;
    change->makerless = maker.length == 0;
    *index = changes->count++;
    enter(registry, name, *index);
    return PF_OK;
}

pf_status pf_registry_find(pf_registry *registry, pf_changes *changes, pf_slice name,
                           pf_slice maker, size_t *index)
{
    candidates found = gather(registry, changes, name, maker);
    if (maker.length == 0 && found.count > 1) return PF_NOT_FOUND;
    if (found.exact != SIZE_MAX || (maker.length == 0 && found.count == 1)) {
        *index = found.exact != SIZE_MAX ? found.exact : found.first;
        if (maker.length == 0) changes->item[*index].makerless = true;
        return PF_OK;
    }
    if (maker.length && found.nameless != SIZE_MAX) {
        *index = found.nameless;
        return set_maker(&changes->item[*index], maker);
    }
    /* a row elsewhere named this number without its maker, and now there are two of them */
    if (found.count > 0 && changes->item[found.first].makerless) return PF_NOT_FOUND;
    return add(registry, changes, name, maker, index);
}
