/* steady_state.c: the running card. */
#include "stress/steady_state.h"
#include "base/number.h"

#include <math.h>

static double thermal_resistance(const pf_profile *profile, const pf_part *part)
{
    double board = profile->value[PF_CASE_TO_AMBIENT].max;
    return pf_is_stated(board) ? part->rth_jc_KpW + board : part->rth_ja_KpW;
}

static pf_cause missing(const pf_steady_state *state, const pf_part *part)
{
    if (!pf_is_stated(state->rdson.cold_ohm)) return PF_CAUSE_NO_RDSON;
    if (!pf_is_stated(state->rth_KpW)) return PF_CAUSE_NO_RTH;
    if (!pf_is_stated(part->tj_max_degC)) return PF_CAUSE_NO_TJ_MAX;
    return PF_CAUSE_NONE;
}

pf_steady_state pf_steady_state_of(const pf_profile *profile, const pf_part *part)
{
    double count = profile->value[PF_PARALLEL_COUNT].min;
    double ambient = profile->value[PF_AMBIENT_TEMPERATURE].max;
    pf_steady_state state = {.junction_degC = PF_NONE, .loss_W = PF_NONE};
    state.share_A = profile->value[PF_RUNNING_CURRENT].max / count;
    state.rdson = pf_on_resistance_at(part, profile->value[PF_GATE_DRIVE].min);
    state.rth_KpW = thermal_resistance(profile, part);
    state.cause = missing(&state, part);
    if (state.cause != PF_CAUSE_NONE) return state;
    double gain = state.rth_KpW * state.share_A * state.share_A * state.rdson.cold_ohm;
    double slope = state.rdson.slope_pK;
    if (gain * slope >= 1) {
        state.cause = PF_CAUSE_RUNAWAY;
        state.junction_degC = state.loss_W = INFINITY;
        return state;
    }
    state.junction_degC = (ambient + gain * (1 - 25 * slope)) / (1 - gain * slope);
    state.loss_W = count * state.share_A * state.share_A *
                   pf_on_resistance_hot(&state.rdson, state.junction_degC);
    return state;
}
