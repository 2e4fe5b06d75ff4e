/* surface.c: rises of starts over the box of a profile's intervals. */
#include "rank/surface.h"
#include "base/memory.h"
#include "base/number.h"
#include "rank/draw.h"

#include <math.h>

/* Draws of points within the box come from a sequence of their own. */
#define SEQUENCE_INSIDE 2

/* The slot of the start, which every plan has. */
static size_t start_slot(const pf_plan *plan)
{
    size_t slot = 0;
    while (plan->slot[slot].event != PF_START_UP)
        slot++;
    return slot;
}

static bool depends_on(const pf_plan *plan, pf_parameter parameter)
{
    const pf_corners *corners = &plan->slot[start_slot(plan)].corners;
    for (size_t k = 0; k < corners->count; k++)
        if (corners->depend[k].parameter == parameter) return true;
    return false;
}

/* Only the start is wanted, and a step makes no sense with a supply that is drawn. */
static pf_profile without_step(const pf_profile *profile)
{
    pf_profile bare = *profile;
    bare.stated[PF_SUPPLY_STEP_FROM] = false;
    bare.value[PF_SUPPLY_STEP_FROM] = (pf_interval){PF_NONE, PF_NONE, PF_NONE};
    return bare;
}

static pf_status find_dimensions(pf_box *box, pf_error *error)
{
    for (int i = 0; i < PF_PARAMETER_COUNT; i++) {
        pf_parameter parameter = (pf_parameter)i;
        if (!pf_is_drawn(&box->base->profile, parameter) || !depends_on(box->base, parameter))
            continue;
        if (box->dimensions == PF_TRIALS_DIMENSIONS_MAX)
            return pf_error_set(error, PF_LIMIT,
                                "profile %s has more than %d intervals that its start depends on; "
                                "trials take at most that many",
                                box->base->profile.name, PF_TRIALS_DIMENSIONS_MAX);
        box->parameter[box->dimensions++] = parameter;
    }
    return PF_OK;
}

static pf_profile profile_at(const pf_box *box, size_t corner)
{
    pf_profile profile = without_step(&box->base->profile);
    for (size_t i = 0; i < box->dimensions; i++) {
        pf_interval *interval = &profile.value[box->parameter[i]];
        double value = corner >> i & 1 ? interval->max : interval->min;
        *interval = (pf_interval){value, value, value};
    }
    return profile;
}

static pf_status make_inside(pf_box *box, const pf_trials_request *request, pf_error *error)
{
    pf_random random;
    pf_status status = PF_OK;
    pf_random_init(&random, request->seed, SEQUENCE_INSIDE);
    for (size_t i = 0; i < PF_TRIALS_EXACT && status == PF_OK && box->dimensions; i++) {
        pf_profile drawn, bare = without_step(&box->base->profile);
        pf_draw(&bare, PF_UNIFORM, &random, &drawn);
        status = pf_plan_new(&drawn, NULL, 0, &box->inside[i], error);
    }
    return status;
}

pf_status pf_box_init(pf_box *box, const pf_plan *base, const pf_trials_request *request,
                      pf_error *error)
{
    *box = (pf_box){.base = base};
    pf_status status = find_dimensions(box, error);
    if (status != PF_OK) return status;
    size_t corners = (size_t)1 << box->dimensions;
    box->corner = pf_allocate(corners, sizeof *box->corner);
    box->inside = pf_allocate(PF_TRIALS_EXACT, sizeof *box->inside);
    if (!box->corner || !box->inside) status = pf_error_set(error, PF_NO_MEMORY, "out of memory");
    for (size_t i = 0; i < corners && status == PF_OK; i++) {
        pf_profile profile = profile_at(box, i);
        status = pf_plan_new(&profile, NULL, 0, &box->corner[i], error);
    }
    if (status == PF_OK) status = make_inside(box, request, error);
    if (status != PF_OK) pf_box_clear(box);
    return status;
}

void pf_box_clear(pf_box *box)
{
    for (size_t i = 0; box->corner && i < (size_t)1 << box->dimensions; i++)
        pf_plan_free(box->corner[i]);
    for (size_t i = 0; box->inside && i < PF_TRIALS_EXACT; i++)
        pf_plan_free(box->inside[i]);
    pf_free(box->corner);
    pf_free(box->inside);
    *box = (pf_box){0};
}

pf_rise pf_rise_of(const pf_stress *stress, size_t slot)
{
    const pf_outcome *outcome = &stress->outcome[slot];
    pf_rise rise = {PF_NONE, outcome->peak_junction_degC - outcome->start_degC};
    if (outcome->soa_margin > 0)
        rise.hot_K = (stress->allowed_degC - outcome->start_degC) / outcome->soa_margin;
    return rise;
}

/* Evaluates a part under a plan of the box. */
static pf_status rise_under(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                            pf_rise *rise)
{
    pf_stress stress;
    pf_status status = pf_plan_evaluate(plan, part, scratch, &stress);
    if (status == PF_OK) *rise = pf_rise_of(&stress, start_slot(plan));
    return status;
}

static pf_status fill_corners(pf_surface *surface, const pf_part *part, pf_scratch *scratch)
{
    pf_status status = PF_OK;
    for (size_t i = 0; i < (size_t)1 << surface->box->dimensions && status == PF_OK; i++) {
        pf_rise rise = {PF_NONE, PF_NONE};
        status = rise_under(surface->box->corner[i], part, scratch, &rise);
        surface->log_rise[i] = (pf_rise){log(rise.hot_K), log(rise.junction_K)};
    }
    return status;
}

static double raised(double exact, double interpolated)
{
    return exact > interpolated ? exact / interpolated : 1;
}

static pf_status find_raise(pf_surface *surface, const pf_part *part, pf_scratch *scratch)
{
    pf_status status = PF_OK;
    surface->raise = (pf_rise){1, 1};
    for (size_t i = 0; i < PF_TRIALS_EXACT && surface->box->dimensions && status == PF_OK; i++) {
        const pf_plan *plan = surface->box->inside[i];
        pf_rise exact = {PF_NONE, PF_NONE};
        status = rise_under(plan, part, scratch, &exact);
        pf_rise found = pf_surface_at(surface, &plan->profile);
        surface->raise.hot_K *= raised(exact.hot_K, found.hot_K);
        surface->raise.junction_K *= raised(exact.junction_K, found.junction_K);
    }
    return status;
}

pf_status pf_surface_init(pf_surface *surface, const pf_box *box, const pf_part *part,
                          pf_scratch *scratch)
{
    *surface = (pf_surface){.box = box};
    surface->log_rise = pf_allocate((size_t)1 << box->dimensions, sizeof *surface->log_rise);
    if (!surface->log_rise) return PF_NO_MEMORY;
    pf_status status = fill_corners(surface, part, scratch);
    if (status == PF_OK) status = find_raise(surface, part, scratch);
    if (status != PF_OK) pf_surface_clear(surface);
    return status;
}

void pf_surface_clear(pf_surface *surface)
{
    pf_free(surface->log_rise);
    surface->log_rise = NULL;
}

/* Weights of the corners at a profile's values: products of shares along the dimensions. */
static double weight_of(const pf_box *box, size_t corner, const double *share)
{
    double weight = 1;
    for (size_t i = 0; i < box->dimensions; i++)
        weight *= corner >> i & 1 ? share[i] : 1 - share[i];
    return weight;
}

pf_rise pf_surface_at(const pf_surface *surface, const pf_profile *profile)
{
    const pf_box *box = surface->box;
    double share[PF_TRIALS_DIMENSIONS_MAX];
    pf_rise sum = {0, 0};
    for (size_t i = 0; i < box->dimensions; i++) {
        const pf_interval *whole = &box->base->profile.value[box->parameter[i]];
        share[i] = (profile->value[box->parameter[i]].max - whole->min) / (whole->max - whole->min);
    }
    for (size_t i = 0; i < (size_t)1 << box->dimensions; i++) {
        const pf_rise *at = &surface->log_rise[i];
        double weight = weight_of(box, i, share);
        if (weight == 0) continue;
        sum.hot_K += weight * at->hot_K;
        sum.junction_K += weight * at->junction_K;
    }
    return (pf_rise){surface->raise.hot_K * exp(sum.hot_K),
                     surface->raise.junction_K * exp(sum.junction_K)};
}
