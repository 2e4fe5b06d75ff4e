/* window.c: between the slowest good start and the longest fault that a part survives. */
#include "base/number.h"
#include "stress/plan.h"

#include <math.h>
#include <passfet/headroom.h>

/* Longest start or recharge over all corners; NaN where one never ends. */
static double slowest_of(const pf_plan *plan, const pf_stress *stress)
{
    double slowest = 0;
    for (size_t i = 0; i < plan->count; i++) {
        const pf_slot *slot = &plan->slot[i];
        if (slot->event != PF_START_UP && slot->event != PF_SUPPLY_STEP) continue;
        for (size_t k = 0; k < slot->waves.count; k++) {
            if (slot->waves.wave[k].stuck) return PF_NONE;
            slowest = fmax(slowest, slot->waves.wave[k].duration_s);
        }
        slowest = fmax(slowest, stress->outcome[i].duration_s); /* C_rss may slow it further */
    }
    return slowest;
}

static void take_fault(pf_timer_window *window, const pf_room *room)
{
    bool passes = room->kind == PF_ROOM_FLIPS || room->here == PF_PASS;
    window->longest_fault_s = passes ? room->value : room->here == PF_FAIL ? 0 : PF_NONE;
    window->fault_is_open = room->kind == PF_ROOM_FLIPS && room->there == PF_UNASSESSED;
}

pf_status pf_timer_window_of(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                             pf_timer_window *window)
{
    const pf_interval *timer = &plan->profile.value[PF_FAULT_TIME];
    pf_stress stress;
    pf_room room;
    pf_status status = pf_plan_evaluate(plan, part, scratch, &stress);
    if (status == PF_OK) status = pf_longest_fault(plan, part, scratch, &room);
    if (status != PF_OK) return status;
    *window = (pf_timer_window){.timer_min_s = timer->min, .timer_max_s = timer->max};
    window->cuts_starts = plan->profile.control != PF_START_SLEW;
    window->slowest_start_s = slowest_of(plan, &stress);
    take_fault(window, &room);
    window->start_gap = timer->min / window->slowest_start_s - 1;
    window->fault_gap = window->longest_fault_s / timer->max - 1;
    bool never_starts = !pf_is_stated(window->slowest_start_s);
    window->no_value =
        window->cuts_starts && (never_starts || window->longest_fault_s < window->slowest_start_s);
    return PF_OK;
}
