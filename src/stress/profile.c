/* profile.c: parameter facts, defaults, and the checks that need the whole profile. */
#include <passfet/profile.h>

#include "base/number.h"

#include <string.h>

static const pf_parameter_fact facts[] = {
#define PF_PARAMETER(code, name, quantity, lowest, highest, meaning)                               \
    {name, quantity, lowest, highest, meaning},
#include <passfet/parameters.def>
};

const pf_parameter_fact *pf_parameter_facts(void)
{
    return facts;
}

const char *pf_start_control_text(pf_start_control control)
{
    static const char *const text[] = {"", "slew", "current_limit", "power_limit", "foldback"};
    return text[control];
}

void pf_profile_init(pf_profile *profile)
{
    const pf_interval none = {PF_NONE, PF_NONE, PF_NONE};
    memset(profile, 0, sizeof *profile);
    for (int i = 0; i < PF_PARAMETER_COUNT; i++)
        profile->value[i] = none;
    pf_derating *rule = &profile->derating;
    rule->voltage_use = rule->gate_use = rule->current_use = rule->power_use = PF_NONE;
    rule->junction_limit_degC = rule->junction_below_max_K = rule->junction_share = PF_NONE;
}

typedef struct findings {
    pf_profile_finding *found;
    void *context;
    bool any;
} findings;

static void report(findings *list, pf_parameter parameter, const char *wrong, const char *right)
{
    list->any = true;
    if (list->found) list->found(list->context, parameter, wrong, right);
}

static void need(findings *list, const pf_profile *profile, pf_parameter parameter,
                 const char *wrong)
{
    if (!profile->stated[parameter])
        report(list, parameter, wrong, "give it in typ, or in min and max");
}

static void default_to(pf_profile *profile, pf_parameter parameter, double value)
{
    if (!profile->stated[parameter]) profile->value[parameter] = (pf_interval){value, value, value};
}

/* The smaller of a stated use and the rule's; the rule's, or 0.8, where none is stated. */
static void settle_use(pf_profile *profile, pf_parameter parameter, double rule)
{
    default_to(profile, parameter, pf_is_stated(rule) ? rule : 0.8);
    pf_interval *use = &profile->value[parameter];
    if (pf_is_stated(rule) && rule < use->min) *use = (pf_interval){rule, rule, rule};
}

static void check_required(findings *list, const pf_profile *profile)
{
    static const pf_parameter always[] = {
        PF_SUPPLY_VOLTAGE, PF_OUTPUT_CAPACITANCE,  PF_RUNNING_CURRENT,
        PF_FAULT_TIME,     PF_AMBIENT_TEMPERATURE, PF_GATE_DRIVE,
    };
    for (size_t i = 0; i < sizeof always / sizeof *always; i++)
        need(list, profile, always[i], "is missing and every profile needs it");
    if (profile->polarity == PF_POLARITY_NONE)
        report(list, PF_PARAMETER_COUNT, "polarity is missing", "a row `polarity,,N,,,` or P");
    if (profile->control == PF_START_NONE)
        report(list, PF_PARAMETER_COUNT, "start_control is missing",
               "slew, current_limit, power_limit or foldback");
}

static void check_slew(findings *list, const pf_profile *profile)
{
    bool current = profile->stated[PF_GATE_CURRENT];
    bool capacitance = profile->stated[PF_GATE_CAPACITANCE];
    bool slew = profile->stated[PF_OUTPUT_SLEW];
    if (slew && (current || capacitance))
        report(list, PF_OUTPUT_SLEW, "output_slew stands beside gate_current or gate_capacitance",
               "either output_slew, or gate_current with gate_capacitance");
    else if (!slew && !(current && capacitance))
        report(list, PF_OUTPUT_SLEW, "start_control slew has no slew rate",
               "output_slew, or gate_current with gate_capacitance");
    if (!profile->stated[PF_FAULT_CURRENT] && !profile->stated[PF_CURRENT_LIMIT])
        report(list, PF_FAULT_CURRENT,
               "start_control slew without a current limit leaves the fault current open",
               "fault_current, or current_limit");
}

static void check_control(findings *list, const pf_profile *profile)
{
    if (profile->control == PF_START_SLEW) check_slew(list, profile);
    if (profile->control >= PF_START_CURRENT_LIMIT)
        need(list, profile, PF_CURRENT_LIMIT, "is missing and the start control needs it");
    if (profile->control == PF_START_POWER_LIMIT)
        need(list, profile, PF_POWER_LIMIT, "is missing and start_control power_limit needs it");
    if (profile->control == PF_START_FOLDBACK)
        need(list, profile, PF_FOLDBACK_CURRENT, "is missing and start_control foldback needs it");
    if (profile->control == PF_START_FOLDBACK &&
        profile->value[PF_FOLDBACK_CURRENT].max > profile->value[PF_CURRENT_LIMIT].min)
        report(list, PF_FOLDBACK_CURRENT, "foldback_current is above current_limit",
               "a foldback current below the current limit");
}

static void check_pair(findings *list, const pf_profile *profile, pf_parameter one,
                       pf_parameter other, const char *wrong)
{
    if (profile->stated[one] && !profile->stated[other])
        report(list, other, wrong, "both, or neither");
}

static void check_start_load(findings *list, const pf_profile *profile)
{
    bool load = profile->stated[PF_START_LOAD_CURRENT] ||
                profile->stated[PF_START_LOAD_RESISTANCE] || profile->stated[PF_START_LOAD_POWER];
    if (profile->value[PF_START_LOAD_ABOVE].max > 0 && !load)
        report(list, PF_START_LOAD_ABOVE, "start_load_above is given without a start load",
               "start_load_current, start_load_resistance or start_load_power beside it");
}

static void check_retry(findings *list, const pf_profile *profile)
{
    bool counted = profile->stated[PF_RETRY_COUNT] || profile->endless_retry;
    if (counted && !profile->stated[PF_RETRY_INTERVAL])
        report(list, PF_RETRY_INTERVAL, "retry_count is given without retry_interval",
               "both, or neither");
    if (profile->value[PF_RETRY_INTERVAL].min <= profile->value[PF_FAULT_TIME].max)
        report(list, PF_RETRY_INTERVAL,
               "the shortest retry_interval is not longer than the longest fault_time",
               "the time from one try to the next, above fault_time");
}

static void check_voltages(findings *list, const pf_profile *profile)
{
    const pf_interval *supply = &profile->value[PF_SUPPLY_VOLTAGE];
    if (profile->value[PF_CLAMP_VOLTAGE].min <= supply->max)
        report(list, PF_CLAMP_VOLTAGE, "clamp_voltage is not above the highest supply_voltage",
               "a clamp that does not conduct at the supply's maximum");
    if (profile->value[PF_SUPPLY_STEP_FROM].max >= supply->max)
        report(list, PF_SUPPLY_STEP_FROM,
               "supply_step_from is not below the highest supply_voltage",
               "the output's voltage before the supply rises");
}

static void check_whole_numbers(findings *list, const pf_profile *profile)
{
    static const pf_parameter counts[] = {PF_PARALLEL_COUNT, PF_RETRY_COUNT};
    for (size_t i = 0; i < 2; i++) {
        const pf_interval *count = &profile->value[counts[i]];
        if (profile->stated[counts[i]] &&
            (count->min != (double)(long)count->min || count->max != (double)(long)count->max))
            report(list, counts[i], "is not a whole number", "1, 2, 3, …");
    }
}

pf_status pf_profile_finish(pf_profile *profile, pf_profile_finding *found, void *context)
{
    findings list = {found, context, false};
    default_to(profile, PF_PARALLEL_COUNT, 1);
    default_to(profile, PF_REQUIRED_MARGIN, 1.3);
    settle_use(profile, PF_VOLTAGE_USE, profile->derating.voltage_use);
    settle_use(profile, PF_GATE_USE, profile->derating.gate_use);
    settle_use(profile, PF_CURRENT_USE, profile->derating.current_use);
    check_required(&list, profile);
    check_control(&list, profile);
    check_pair(&list, profile, PF_TRIP_CURRENT, PF_TRIP_TIME,
               "trip_current is given without trip_time");
    check_pair(&list, profile, PF_TRIP_TIME, PF_TRIP_CURRENT,
               "trip_time is given without trip_current");
    check_start_load(&list, profile);
    check_retry(&list, profile);
    check_voltages(&list, profile);
    check_whole_numbers(&list, profile);
    return list.any ? PF_BAD_INPUT : PF_OK;
}
