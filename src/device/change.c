/* change.c: applying what an import states to what a part stated before. */
#include <passfet/change.h>

#include "base/memory.h"

#include <string.h>

void pf_part_change_init(pf_part_change *change)
{
    memset(change, 0, sizeof *change);
    pf_part_init(&change->part);
}

void pf_part_change_clear(pf_part_change *change)
{
    pf_part_clear(&change->part);
    pf_free(change->raw_curves);
    pf_free(change->file);
    pf_part_change_init(change);
}

void pf_changes_clear(pf_changes *changes)
{
    for (size_t i = 0; i < changes->count; i++)
        pf_part_change_clear(&changes->item[i]);
    pf_free(changes->item);
    *changes = (pf_changes){0};
}

static pf_status apply_thermal(pf_part *part, const pf_part_change *change, pf_thermal_path path)
{
    const pf_thermal_curve *curve = &change->part.thermal[path];
    if (!change->thermal_given[path]) return PF_OK;
    if (curve->pair_count) return pf_part_set_foster(part, path, curve->pair, curve->pair_count);
    return pf_part_set_zth(part, path, curve->point, curve->point_count);
}

static pf_status apply_texts(pf_part *part, const pf_part_change *change)
{
    size_t count;
    const pf_text_field *field = pf_text_fields(&count);
    pf_status status = PF_OK;
    for (size_t i = 0; i < count && status == PF_OK; i++)
        if (change->texts_given >> i & 1)
            status =
                pf_part_set_text(part, &field[i], pf_part_text_value(&change->part, &field[i]));
    return status;
}

pf_status pf_part_apply(pf_part *part, const pf_part_change *change)
{
    size_t count;
    const pf_rating_field *field = pf_rating_fields(&count);
    for (size_t i = 0; i < count; i++)
        if (change->ratings_given >> i & 1)
            *pf_part_rating(part, &field[i]) = pf_part_rating_value(&change->part, &field[i]);
    if (change->polarity_given) part->polarity = change->part.polarity;
    if (change->rdson_given) {
        memcpy(part->rdson, change->part.rdson, sizeof part->rdson);
        part->rdson_count = change->part.rdson_count;
    }
    pf_status status = apply_texts(part, change);
    if (status == PF_OK && change->soa_given)
        status = pf_part_set_soa(part, change->part.soa, change->part.soa_count);
    if (status == PF_OK) status = apply_thermal(part, change, PF_JUNCTION_CASE);
    if (status == PF_OK) status = apply_thermal(part, change, PF_JUNCTION_AMBIENT);
    return status;
}
