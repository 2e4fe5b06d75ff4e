/* sensitivity.c: what the SOA margin of a part answers to. */
#include <passfet/sensitivity.h>

#include "base/number.h"
#include "rank/variant.h"

#include <math.h>
#include <stdlib.h>

typedef struct survey {
    const pf_plan *plan; /* of the variant personal */
    const pf_part *part; /* without C_rss, which is in the plan */
    const pf_plan *base;
    const pf_part *whole;
    pf_scratch *scratch;
    double margin; /* with nothing moved */
    pf_influence *influence;
    size_t count;
    pf_assessment moved;
    pf_variant variant;
} survey;

static double moved_by(double value, pf_quantity quantity, int direction)
{
    return quantity == PF_TEMPERATURE ? value + direction * PF_SENSITIVITY_K
                                      : value * (1 + direction * PF_SENSITIVITY_SHARE);
}

/* Takes the assessment of one direction into an influence. */
static void take(const survey *on, pf_influence *influence, int direction)
{
    double change = on->moved.stress.soa_margin / on->margin - 1;
    *(direction < 0 ? &influence->fall : &influence->rise) = isfinite(change) ? change : PF_NONE;
    *(direction < 0 ? &influence->fallen : &influence->risen) = on->moved.verdict;
}

static pf_influence *add(survey *on, const char *name, bool rating, pf_quantity quantity)
{
    pf_influence *added = &on->influence[on->count++];
    *added = (pf_influence){.name = name,
                            .rating = rating,
                            .kelvin = quantity == PF_TEMPERATURE,
                            .fall = PF_NONE,
                            .rise = PF_NONE,
                            .fallen = PF_UNASSESSED,
                            .risen = PF_UNASSESSED};
    return added;
}

static pf_status move_parameter(survey *on, pf_parameter parameter, int direction,
                                pf_influence *influence)
{
    bool all[PF_SLOTS_MAX];
    for (size_t i = 0; i < PF_SLOTS_MAX; i++)
        all[i] = true;
    pf_quantity quantity = pf_parameter_facts()[parameter].quantity;
    pf_profile changed = on->plan->profile;
    pf_interval *interval = &changed.value[parameter];
    interval->min = moved_by(interval->min, quantity, direction);
    interval->typ = moved_by(interval->typ, quantity, direction);
    interval->max = moved_by(interval->max, quantity, direction);
    if (pf_profile_finish(&changed, NULL, NULL) != PF_OK) return PF_OK;
    pf_status status =
        pf_variant_init(&on->variant, on->plan, &changed, parameter, all, on->whole->crss_F);
    if (status != PF_OK) return status;
    status = pf_assess(&on->variant.plan, on->part, on->scratch, &on->moved);
    pf_variant_clear(&on->variant);
    if (status == PF_OK) take(on, influence, direction);
    return status;
}

static pf_status survey_parameters(survey *on)
{
    const pf_parameter_fact *fact = pf_parameter_facts();
    pf_status status = PF_OK;
    for (int i = 0; i < PF_PARAMETER_COUNT && status == PF_OK; i++) {
        if (!pf_is_stated(on->plan->profile.value[i].max)) continue;
        pf_influence *influence = add(on, fact[i].name, false, fact[i].quantity);
        status = move_parameter(on, (pf_parameter)i, -1, influence);
        if (status == PF_OK) status = move_parameter(on, (pf_parameter)i, 1, influence);
    }
    return status;
}

/* A rating that is a list or a curve: all its values move together. */
typedef enum pf_whole { WHOLE_RDSON, WHOLE_SOA, WHOLE_ZTH, WHOLE_COUNT } pf_whole;

static void move_whole(pf_part *part, pf_whole whole, int direction)
{
    double factor = 1 + direction * PF_SENSITIVITY_SHARE;
    for (size_t i = 0; whole == WHOLE_RDSON && i < part->rdson_count; i++)
        part->rdson[i].rdson_ohm *= factor;
    for (size_t i = 0; whole == WHOLE_SOA && i < part->soa_count; i++)
        part->soa[i].id_A *= factor;
    for (int path = 0; whole == WHOLE_ZTH && path < PF_PATH_COUNT; path++) {
        pf_thermal_curve *curve = &part->thermal[path];
        for (size_t i = 0; i < curve->point_count; i++)
            curve->point[i].zth_KpW *= factor;
        for (size_t i = 0; i < curve->pair_count; i++)
            curve->pair[i].r_KpW *= factor;
    }
}

static pf_status assess_moved(survey *on, const pf_plan *plan, const pf_part *moved, int direction,
                              pf_influence *influence)
{
    pf_status status = pf_assess(plan, moved, on->scratch, &on->moved);
    if (status == PF_OK) take(on, influence, direction);
    return status;
}

static pf_status survey_wholes(survey *on)
{
    static const char *const name[] = {"rdson_max", "soa", "zth"};
    pf_status status = PF_OK;
    for (int whole = 0; whole < WHOLE_COUNT; whole++) {
        pf_influence *influence = add(on, name[whole], true, PF_RATIO);
        for (int direction = -1; direction <= 1 && status == PF_OK; direction += 2) {
            pf_part moved;
            pf_part_init(&moved);
            status = pf_part_copy(&moved, on->part);
            move_whole(&moved, (pf_whole)whole, direction);
            if (status == PF_OK) status = assess_moved(on, on->plan, &moved, direction, influence);
            pf_part_clear(&moved);
        }
    }
    return status;
}

/* The part is only read, but for the one number: a copy of the struct alone shares its arrays. */
static pf_status survey_ratings(survey *on)
{
    size_t fields;
    pf_status status = PF_OK;
    const pf_rating_field *field = pf_rating_fields(&fields);
    for (size_t i = 0; i < fields && status == PF_OK; i++) {
        double value = pf_part_rating_value(on->whole, &field[i]);
        bool in_plan = !pf_is_stated(pf_part_rating_value(on->part, &field[i])); /* C_rss */
        if (!pf_is_stated(value)) continue;
        pf_influence *influence = add(on, field[i].csv, true, field[i].quantity);
        for (int direction = -1; direction <= 1 && status == PF_OK; direction += 2) {
            pf_part moved = in_plan ? *on->whole : *on->part;
            *pf_part_rating(&moved, &field[i]) = moved_by(value, field[i].quantity, direction);
            status = assess_moved(on, in_plan ? on->base : on->plan, &moved, direction, influence);
        }
    }
    return status;
}

static double strength_of(const pf_influence *influence)
{
    return fmax(-1, fmax(fabs(influence->fall), fabs(influence->rise)));
}

/* An influence with its place in the lists, which ends the comparison. */
typedef struct ranked {
    pf_influence influence;
    size_t place;
} ranked;

static int strongest_first(const void *left, const void *right)
{
    const ranked *a = left, *b = right;
    double strong_a = strength_of(&a->influence), strong_b = strength_of(&b->influence);
    if (strong_a != strong_b) return strong_a > strong_b ? -1 : 1;
    return (a->place > b->place) - (a->place < b->place);
}

static void order(pf_influence *influence, size_t count)
{
    ranked list[PF_INFLUENCES_MAX];
    for (size_t i = 0; i < count; i++)
        list[i] = (ranked){influence[i], i};
    qsort(list, count, sizeof *list, strongest_first);
    for (size_t i = 0; i < count; i++)
        influence[i] = list[i].influence;
}

pf_status pf_sensitivity(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                         pf_influence influence[PF_INFLUENCES_MAX], size_t *count)
{
    pf_variant personal;
    pf_part bare;
    survey on = {.plan = &personal.plan, .part = &bare, .base = plan, .whole = part};
    on.scratch = scratch;
    on.influence = influence;
    *count = 0;
    pf_status status = pf_variant_personal(&personal, plan, part, &bare);
    if (status != PF_OK) return status;
    status = pf_assess(on.plan, &bare, scratch, &on.moved);
    on.margin = on.moved.stress.soa_margin;
    if (status == PF_OK) status = survey_parameters(&on);
    if (status == PF_OK) status = survey_wholes(&on);
    if (status == PF_OK) status = survey_ratings(&on);
    pf_variant_clear(&personal);
    order(influence, on.count);
    *count = on.count;
    return status;
}
