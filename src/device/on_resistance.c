/* on_resistance.c: Rds(on) at the gate drive at hand and at temperature. */
#include "device/on_resistance.h"
#include "base/number.h"

pf_on_resistance pf_on_resistance_at(const pf_part *part, double gate_V)
{
    pf_on_resistance found = {.cold_ohm = PF_NONE, .drive_V = PF_NONE};
    for (size_t i = 0; i < part->rdson_count && part->rdson[i].vgs_V <= gate_V * (1 + 1e-9); i++) {
        found.cold_ohm = part->rdson[i].rdson_ohm;
        found.drive_V = part->rdson[i].vgs_V;
    }
    found.ratio_assumed = !pf_is_stated(part->rdson_hot_ratio);
    double ratio = found.ratio_assumed ? PF_HOT_RATIO_ASSUMED : part->rdson_hot_ratio;
    found.slope_pK = (ratio - 1) / (part->tj_max_degC - 25);
    return found;
}

double pf_on_resistance_hot(const pf_on_resistance *rdson, double junction_degC)
{
    return rdson->cold_ohm * (1 + rdson->slope_pK * (junction_degC - 25));
}
