/* corners.c: the box of min/max intervals that an event is evaluated on. */
#include "stress/corners.h"
#include "base/number.h"

#include <math.h>

/* Adds a parameter that the profile states. An interval of one value has no corners, unless the
** caller wants the two ends told apart all the same. */
static void depend(pf_corners *corners, const pf_profile *profile, pf_parameter parameter,
                   pf_side side)
{
    if (!profile->stated[parameter]) return;
    const pf_interval *interval = &profile->value[parameter];
    bool gate = parameter == PF_GATE_CAPACITANCE;
    pf_dependency *added = &corners->depend[corners->count++];
    *added = (pf_dependency){parameter, side, -1};
    if (side != PF_SIDE_BOTH || (interval->min == interval->max && !gate)) return;
    for (added->bit = 0; 1u << added->bit < corners->number;)
        added->bit++;
    corners->number *= 2;
    if (gate) corners->gate_bit = added->bit;
}

static void depend_both(pf_corners *corners, const pf_profile *profile,
                        const pf_parameter *parameter, size_t count)
{
    for (size_t i = 0; i < count; i++)
        depend(corners, profile, parameter[i], PF_SIDE_BOTH);
}

#define DEPEND_BOTH(...)                                                                           \
    depend_both(corners, profile, (const pf_parameter[]){__VA_ARGS__},                             \
                sizeof((const pf_parameter[]){__VA_ARGS__}) / sizeof(pf_parameter))

/* What the start control reads while it charges the output. */
static void depend_on_control(pf_corners *corners, const pf_profile *profile)
{
    if (profile->control == PF_START_SLEW)
        DEPEND_BOTH(PF_OUTPUT_SLEW, PF_GATE_CURRENT, PF_GATE_CAPACITANCE);
    DEPEND_BOTH(PF_CURRENT_LIMIT);
    if (profile->control == PF_START_POWER_LIMIT) DEPEND_BOTH(PF_POWER_LIMIT);
    if (profile->control == PF_START_FOLDBACK) DEPEND_BOTH(PF_FOLDBACK_CURRENT);
}

static void depend_on_fault(pf_corners *corners, const pf_profile *profile)
{
    if (profile->stated[PF_FAULT_CURRENT])
        DEPEND_BOTH(PF_FAULT_CURRENT);
    else if (profile->control == PF_START_FOLDBACK)
        DEPEND_BOTH(PF_FOLDBACK_CURRENT);
    else if (profile->control == PF_START_POWER_LIMIT)
        DEPEND_BOTH(PF_CURRENT_LIMIT, PF_POWER_LIMIT);
    else
        DEPEND_BOTH(PF_CURRENT_LIMIT);
}

static void depend_on_start(pf_corners *corners, const pf_profile *profile)
{
    DEPEND_BOTH(PF_SUPPLY_VOLTAGE, PF_OUTPUT_CAPACITANCE);
    depend_on_control(corners, profile);
    DEPEND_BOTH(PF_START_LOAD_CURRENT, PF_START_LOAD_RESISTANCE, PF_START_LOAD_POWER,
                PF_START_LOAD_ABOVE);
}

static void depend_on_step(pf_corners *corners, const pf_profile *profile)
{
    depend(corners, profile, PF_SUPPLY_VOLTAGE, PF_SIDE_MAX);
    DEPEND_BOTH(PF_SUPPLY_STEP_FROM, PF_OUTPUT_CAPACITANCE);
    if (profile->control == PF_START_SLEW)
        DEPEND_BOTH(PF_CURRENT_LIMIT);
    else
        depend_on_control(corners, profile);
    DEPEND_BOTH(PF_RUNNING_CURRENT);
}

static void depend_on_retry(pf_corners *corners, const pf_profile *profile)
{
    DEPEND_BOTH(PF_SUPPLY_VOLTAGE);
    depend_on_fault(corners, profile);
    DEPEND_BOTH(PF_FAULT_TIME);
    depend(corners, profile, PF_RETRY_INTERVAL, PF_SIDE_MIN);
    depend(corners, profile, PF_RETRY_COUNT, PF_SIDE_MAX);
    depend(corners, profile, PF_CASE_TO_AMBIENT, PF_SIDE_MAX);
    depend(corners, profile, PF_CASE_HEAT_CAPACITY, PF_SIDE_MIN);
}

static void depend_on_running(pf_corners *corners, const pf_profile *profile)
{
    depend(corners, profile, PF_RUNNING_CURRENT, PF_SIDE_MAX);
    depend(corners, profile, PF_AMBIENT_TEMPERATURE, PF_SIDE_MAX);
    depend(corners, profile, PF_CASE_TO_AMBIENT, PF_SIDE_MAX);
    depend(corners, profile, PF_GATE_DRIVE, PF_SIDE_MIN);
    depend(corners, profile, PF_PARALLEL_COUNT, PF_SIDE_MIN);
}

void pf_corners_init(pf_corners *corners, const pf_profile *profile, pf_event event)
{
    *corners = (pf_corners){.number = 1, .gate_bit = -1};
    switch (event) {
    case PF_RUNNING:
        depend_on_running(corners, profile);
        break;
    case PF_START_UP:
        depend_on_start(corners, profile);
        break;
    case PF_SHORT_AT_START:
    case PF_SHORT_RUNNING:
        DEPEND_BOTH(PF_SUPPLY_VOLTAGE);
        depend_on_fault(corners, profile);
        DEPEND_BOTH(PF_FAULT_TIME);
        break;
    case PF_TRIP:
        DEPEND_BOTH(PF_SUPPLY_VOLTAGE, PF_TRIP_CURRENT, PF_TRIP_TIME);
        break;
    case PF_RETRY:
        depend_on_retry(corners, profile);
        break;
    case PF_SUPPLY_STEP:
        depend_on_step(corners, profile);
        break;
    case PF_TURN_OFF:
        DEPEND_BOTH(PF_SUPPLY_VOLTAGE, PF_SUPPLY_INDUCTANCE, PF_TRIP_CURRENT);
        depend_on_fault(corners, profile);
        break;
    default:
        break;
    }
}

void pf_corner_at(const pf_corners *corners, const pf_profile *profile, unsigned index,
                  pf_corner *corner)
{
    for (int i = 0; i < PF_PARAMETER_COUNT; i++)
        corner->value[i] = PF_NONE;
    for (size_t i = 0; i < corners->count; i++) {
        const pf_dependency *on = &corners->depend[i];
        const pf_interval *interval = &profile->value[on->parameter];
        bool high = on->bit >= 0 ? index >> on->bit & 1 : on->side == PF_SIDE_MAX;
        corner->value[on->parameter] = high ? interval->max : interval->min;
    }
    corner->slow_gate = corners->gate_bit >= 0 && (index >> corners->gate_bit & 1);
}

double pf_corner_fault_A(const pf_profile *profile, const pf_corner *corner)
{
    const double *value = corner->value;
    if (profile->stated[PF_FAULT_CURRENT]) return value[PF_FAULT_CURRENT];
    if (profile->control == PF_START_FOLDBACK) return value[PF_FOLDBACK_CURRENT];
    if (profile->control == PF_START_POWER_LIMIT)
        return fmin(value[PF_CURRENT_LIMIT], value[PF_POWER_LIMIT] / value[PF_SUPPLY_VOLTAGE]);
    return value[PF_CURRENT_LIMIT];
}
