/* part.c: one part's ratings and curves: fields as data, ownership, comparison. */
#include <passfet/part.h>

#include "base/memory.h"
#include "base/number.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static const pf_rating_field rating_fields[] = {
#define PF_RATING(member, quantity, lowest, highest, signless, csv, aliases, meaning)              \
    {#member, csv,      aliases,                                                                   \
     meaning, quantity, lowest,                                                                    \
     highest, signless, offsetof(pf_part, member)},
#include <passfet/fields.def>
};

static const pf_text_field text_fields[] = {
#define PF_TEXT(member, csv, aliases, meaning)                                                     \
    {#member, csv, aliases, meaning, offsetof(pf_part, member)},
#include <passfet/fields.def>
};

#define RATING_COUNT (sizeof rating_fields / sizeof *rating_fields)
#define TEXT_COUNT (sizeof text_fields / sizeof *text_fields)

const pf_rating_field *pf_rating_fields(size_t *count)
{
    *count = RATING_COUNT;
    return rating_fields;
}

const pf_text_field *pf_text_fields(size_t *count)
{
    *count = TEXT_COUNT;
    return text_fields;
}

double *pf_part_rating(pf_part *part, const pf_rating_field *field)
{
    return (double *)(void *)((char *)part + field->offset);
}

double pf_part_rating_value(const pf_part *part, const pf_rating_field *field)
{
    return *(const double *)(const void *)((const char *)part + field->offset);
}

char **pf_part_text(pf_part *part, const pf_text_field *field)
{
    return (char **)(void *)((char *)part + field->offset);
}

const char *pf_part_text_value(const pf_part *part, const pf_text_field *field)
{
    return *(char *const *)(const void *)((const char *)part + field->offset);
}

void pf_part_init(pf_part *part)
{
    memset(part, 0, sizeof *part);
    for (size_t i = 0; i < RATING_COUNT; i++)
        *pf_part_rating(part, &rating_fields[i]) = PF_NONE;
}

void pf_part_clear(pf_part *part)
{
    for (size_t i = 0; i < TEXT_COUNT; i++)
        pf_free(*pf_part_text(part, &text_fields[i]));
    for (int path = 0; path < PF_PATH_COUNT; path++) {
        pf_free(part->thermal[path].point);
        pf_free(part->thermal[path].pair);
    }
    pf_free(part->soa);
    pf_part_init(part);
}

pf_status pf_part_set_text(pf_part *part, const pf_text_field *field, const char *text)
{
    char *copy;
    pf_status status = pf_text_copy(&copy, text);
    if (status != PF_OK) return status;
    char **place = pf_part_text(part, field);
    pf_free(*place);
    *place = copy;
    return PF_OK;
}

static bool positive(double value)
{
    return isfinite(value) && value > 0;
}

pf_status pf_part_set_rdson(pf_part *part, double vgs_V, double rdson_ohm)
{
    if (!positive(vgs_V) || !positive(rdson_ohm)) return PF_BAD_ARGUMENT;
    size_t at = 0;
    while (at < part->rdson_count && part->rdson[at].vgs_V < vgs_V)
        at++;
    bool same = at < part->rdson_count && part->rdson[at].vgs_V == vgs_V;
    if (!same) {
        if (part->rdson_count == PF_RDSON_MAX) return PF_LIMIT;
        memmove(&part->rdson[at + 1], &part->rdson[at],
                (part->rdson_count - at) * sizeof *part->rdson);
        part->rdson_count++;
    }
    part->rdson[at] = (pf_rdson_point){vgs_V, rdson_ohm};
    return PF_OK;
}

/* A copy of count items; NULL for none. */
static pf_status copy_items(void **out, const void *items, size_t count, size_t size)
{
    *out = NULL;
    if (count == 0) return PF_OK;
    *out = pf_allocate(count, size);
    if (!*out) return PF_NO_MEMORY;
    memcpy(*out, items, count * size);
    return PF_OK;
}

static int compare(double left, double right)
{
    return (left > right) - (left < right);
}

static int compare_soa(const pf_soa_point *left, const pf_soa_point *right)
{
    int order = compare(left->case_degC, right->case_degC);
    if (order == 0) order = compare(left->pulse_s, right->pulse_s);
    return order ? order : compare(left->vds_V, right->vds_V);
}

/* Insertion sort: stable, and curves come sorted or nearly so. */
static void sort_soa(pf_soa_point *point, size_t count)
{
    for (size_t i = 1; i < count; i++) {
        pf_soa_point moved = point[i];
        size_t at = i;
        for (; at > 0 && compare_soa(&point[at - 1], &moved) > 0; at--)
            point[at] = point[at - 1];
        point[at] = moved;
    }
}

static int compare_zth(const void *left, const void *right)
{
    return compare(((const pf_zth_point *)left)->time_s, ((const pf_zth_point *)right)->time_s);
}

static int compare_pair(const void *left, const void *right)
{
    const pf_foster_pair *a = left, *b = right;
    int order = compare(a->tau_s, b->tau_s);
    return order ? order : compare(a->r_KpW, b->r_KpW);
}

pf_status pf_part_set_soa(pf_part *part, const pf_soa_point *point, size_t count)
{
    void *copy;
    pf_status status = copy_items(&copy, point, count, sizeof *point);
    if (status != PF_OK) return status;
    sort_soa(copy, count);
    pf_free(part->soa);
    part->soa = copy;
    part->soa_count = count;
    return PF_OK;
}

/* Replaces both forms of a path by one. */
static void replace_thermal(pf_thermal_curve *curve, pf_thermal_curve with)
{
    pf_free(curve->point);
    pf_free(curve->pair);
    *curve = with;
}

pf_status pf_part_set_zth(pf_part *part, pf_thermal_path path, const pf_zth_point *point,
                          size_t count)
{
    void *copy;
    pf_status status = copy_items(&copy, point, count, sizeof *point);
    if (status != PF_OK) return status;
    if (count) qsort(copy, count, sizeof *point, compare_zth);
    replace_thermal(&part->thermal[path], (pf_thermal_curve){.point = copy, .point_count = count});
    return PF_OK;
}

pf_status pf_part_set_foster(pf_part *part, pf_thermal_path path, const pf_foster_pair *pair,
                             size_t count)
{
    void *copy;
    pf_status status = copy_items(&copy, pair, count, sizeof *pair);
    if (status != PF_OK) return status;
    if (count) qsort(copy, count, sizeof *pair, compare_pair);
    replace_thermal(&part->thermal[path], (pf_thermal_curve){.pair = copy, .pair_count = count});
    return PF_OK;
}

static pf_status copy_thermal(pf_part *to, const pf_part *from, pf_thermal_path path)
{
    const pf_thermal_curve *curve = &from->thermal[path];
    if (curve->pair_count) return pf_part_set_foster(to, path, curve->pair, curve->pair_count);
    return pf_part_set_zth(to, path, curve->point, curve->point_count);
}

pf_status pf_part_copy(pf_part *to, const pf_part *from)
{
    pf_status status = PF_OK;
    pf_part_clear(to);
    for (size_t i = 0; i < RATING_COUNT; i++)
        *pf_part_rating(to, &rating_fields[i]) = pf_part_rating_value(from, &rating_fields[i]);
    to->polarity = from->polarity;
    memcpy(to->rdson, from->rdson, sizeof to->rdson);
    to->rdson_count = from->rdson_count;
    for (size_t i = 0; i < TEXT_COUNT && status == PF_OK; i++)
        status = pf_part_set_text(to, &text_fields[i], pf_part_text_value(from, &text_fields[i]));
    if (status == PF_OK) status = pf_part_set_soa(to, from->soa, from->soa_count);
    if (status == PF_OK) status = copy_thermal(to, from, PF_JUNCTION_CASE);
    if (status == PF_OK) status = copy_thermal(to, from, PF_JUNCTION_AMBIENT);
    if (status != PF_OK) pf_part_clear(to);
    return status;
}

static bool same_number(double left, double right)
{
    return left == right || (!pf_is_stated(left) && !pf_is_stated(right));
}

static bool same_text(const char *left, const char *right)
{
    return left && right ? strcmp(left, right) == 0 : left == right;
}

/* Items of the curves hold finite doubles (or infinity for DC) and no padding. */
static bool same_items(const void *left, size_t left_count, const void *right, size_t right_count,
                       size_t size)
{
    return left_count == right_count &&
           (left_count == 0 || memcmp(left, right, left_count * size) == 0);
}

static bool same_thermal(const pf_thermal_curve *left, const pf_thermal_curve *right)
{
    return same_items(left->point, left->point_count, right->point, right->point_count,
                      sizeof *left->point) &&
           same_items(left->pair, left->pair_count, right->pair, right->pair_count,
                      sizeof *left->pair);
}

bool pf_part_equal(const pf_part *left, const pf_part *right)
{
    for (size_t i = 0; i < RATING_COUNT; i++)
        if (!same_number(pf_part_rating_value(left, &rating_fields[i]),
                         pf_part_rating_value(right, &rating_fields[i])))
            return false;
    for (size_t i = 0; i < TEXT_COUNT; i++)
        if (!same_text(pf_part_text_value(left, &text_fields[i]),
                       pf_part_text_value(right, &text_fields[i])))
            return false;
    return left->polarity == right->polarity &&
           same_items(left->rdson, left->rdson_count, right->rdson, right->rdson_count,
                      sizeof *left->rdson) &&
           same_items(left->soa, left->soa_count, right->soa, right->soa_count,
                      sizeof *left->soa) &&
           same_thermal(&left->thermal[PF_JUNCTION_CASE], &right->thermal[PF_JUNCTION_CASE]) &&
           same_thermal(&left->thermal[PF_JUNCTION_AMBIENT], &right->thermal[PF_JUNCTION_AMBIENT]);
}

const char *pf_polarity_text(pf_polarity polarity)
{
    return polarity == PF_N_CHANNEL ? "N" : polarity == PF_P_CHANNEL ? "P" : "";
}
