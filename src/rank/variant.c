/* variant.c: plans that differ in one parameter. */
#include "rank/variant.h"
#include "base/number.h"

#include <string.h>

static bool depends(const pf_corners *corners, pf_parameter parameter)
{
    for (size_t i = 0; i < corners->count; i++)
        if (corners->depend[i].parameter == parameter) return true;
    return false;
}

static bool any_stuck(const pf_waves *waves)
{
    for (size_t i = 0; i < waves->count; i++)
        if (waves->wave[i].stuck) return true;
    return false;
}

/* A start that sticks is held until the longest fault time ends. */
static bool waves_depend(const pf_slot *slot, pf_parameter parameter)
{
    if (slot->event != PF_START_UP && slot->event != PF_SUPPLY_STEP) return false;
    return depends(&slot->corners, parameter) ||
           (parameter == PF_FAULT_TIME && any_stuck(&slot->waves));
}

/* Parameters that every event answers to, beside those of the running card. */
static bool concerns_all(const pf_plan *base, pf_parameter parameter)
{
    static const pf_parameter global[] = {
        PF_RUNNING_CURRENT, PF_AMBIENT_TEMPERATURE, PF_CASE_TO_AMBIENT, PF_GATE_DRIVE,
        PF_PARALLEL_COUNT,  PF_JUNCTION_LIMIT,      PF_REQUIRED_MARGIN};
    (void)base;
    for (size_t i = 0; i < sizeof global / sizeof *global; i++)
        if (global[i] == parameter) return true;
    return false;
}

void pf_variant_concerns(const pf_plan *base, pf_parameter parameter, bool concerned[PF_SLOTS_MAX])
{
    bool all = concerns_all(base, parameter);
    for (size_t i = 0; i < base->count; i++) {
        const pf_slot *slot = &base->slot[i];
        concerned[i] = all || depends(&slot->corners, parameter) || waves_depend(slot, parameter);
    }
}

/* The slot's waves: the base's, or made again. For one part they need no pruning, which a stated
** C_rss of 0 leaves out. */
static pf_status take_waves(pf_variant *variant, size_t at, const pf_slot *from,
                            pf_parameter parameter)
{
    pf_slot *slot = &variant->plan.slot[at];
    bool open = from->waves.count == 0;
    if (open || !waves_depend(from, parameter)) return PF_OK;
    slot->waves = (pf_waves){0};
    variant->owns[at] = true;
    return pf_plan_starts(&variant->plan.profile, slot,
                          pf_is_stated(variant->crss_F) ? variant->crss_F : 0, &slot->waves);
}

pf_status pf_variant_init(pf_variant *variant, const pf_plan *base, const pf_profile *changed,
                          pf_parameter parameter, const bool concerned[PF_SLOTS_MAX], double crss_F)
{
    pf_status status = PF_OK;
    pf_plan *plan = &variant->plan;
    *plan = *base; /* its waves stay the base's until they are made again */
    plan->profile = *changed;
    plan->count = plan->samples = 0;
    variant->crss_F = crss_F;
    memset(variant->owns, 0, sizeof variant->owns);
    for (size_t i = 0; i < base->count && status == PF_OK; i++) {
        if (!concerned[i]) continue;
        size_t at = plan->count++;
        pf_slot *slot = &plan->slot[at];
        variant->base[at] = i;
        *slot = base->slot[i];
        pf_corners_init(&slot->corners, changed, slot->event);
        status = take_waves(variant, at, &base->slot[i], parameter);
        if (slot->waves.samples > plan->samples) plan->samples = slot->waves.samples;
    }
    if (status != PF_OK) pf_variant_clear(variant);
    return status;
}

pf_status pf_variant_personal(pf_variant *variant, const pf_plan *base, const pf_part *part,
                              pf_part *bare)
{
    pf_status status = PF_OK;
    variant->plan = *base;
    variant->crss_F = part->crss_F;
    memset(variant->owns, 0, sizeof variant->owns);
    *bare = *part;
    bare->crss_F = PF_NONE;
    for (size_t i = 0; i < base->count && status == PF_OK; i++) {
        pf_slot *slot = &variant->plan.slot[i];
        if (slot->corners.gate_bit < 0 || !pf_is_stated(part->crss_F)) continue;
        slot->waves = (pf_waves){0};
        variant->owns[i] = true;
        status = pf_plan_starts(&base->profile, slot, part->crss_F, &slot->waves);
        if (slot->waves.samples > variant->plan.samples)
            variant->plan.samples = slot->waves.samples;
    }
    if (status != PF_OK) pf_variant_clear(variant);
    return status;
}

void pf_variant_clear(pf_variant *variant)
{
    for (size_t i = 0; i < variant->plan.count; i++)
        if (variant->owns[i]) pf_waves_clear(&variant->plan.slot[i].waves);
    variant->plan.count = 0;
}

bool pf_variant_stalls(const pf_variant *variant)
{
    const pf_plan *plan = &variant->plan;
    for (size_t i = 0; i < plan->count; i++) {
        const pf_slot *slot = &plan->slot[i];
        if (slot->event != PF_START_UP && slot->event != PF_SUPPLY_STEP) continue;
        if (any_stuck(&slot->waves)) return true;
        for (size_t k = 0; k < slot->waves.count; k++)
            if (plan->profile.control != PF_START_SLEW &&
                slot->waves.wave[k].duration_s > plan->profile.value[PF_FAULT_TIME].min)
                return true;
    }
    return false;
}
