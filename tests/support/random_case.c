/* random_case.c: parts and profiles from a seed. */
#include "support/random_case.h"

#include "support/settings.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

uint64_t random_word(random_source *source)
{
    uint64_t word = source->state += 0x9E3779B97F4A7C15u;
    word = (word ^ word >> 30) * 0xBF58476D1CE4E5B9u;
    word = (word ^ word >> 27) * 0x94D049BB133111EBu;
    return word ^ word >> 31;
}

double random_between(random_source *source, double low, double high)
{
    return low + (high - low) * ((double)(random_word(source) >> 11) * 0x1p-53);
}

double random_log_between(random_source *source, double low, double high)
{
    return exp(random_between(source, log(low), log(high)));
}

int random_below(random_source *source, int count)
{
    return (int)(random_word(source) % (uint64_t)count);
}

/* Z(t) of the die: square root of time, levelling off at r. */
typedef struct die {
    double r_KpW, corner_s, knee_V, knee_slope, tj_max_degC, rdson_ohm, pulse_A;
} die;

static double die_zth(const die *d, double time_s)
{
    double share = sqrt(time_s / d->corner_s);
    return d->r_KpW * share / pow(1 + pow(share, 4), 0.25);
}

/* Current that the die allows: its Zth's, less beyond the knee, which long pulses reach sooner. */
static double die_current(const die *d, double vds_V, double time_s)
{
    double power = (d->tj_max_degC - 25) / die_zth(d, time_s);
    double knee = d->knee_V * pow(time_s / 1e-3, -0.15);
    double derate = vds_V > knee ? pow(vds_V / knee, -d->knee_slope) : 1;
    return fmin(d->pulse_A, power / vds_V * derate);
}

static size_t add_curve(const die *d, double vds_max_V, double pulse_s, bool flank,
                        pf_soa_point *point)
{
    size_t count = 0;
    double time_s = isinf(pulse_s) ? 10 : pulse_s;
    for (int i = flank ? -12 : 0; i <= 12; i++) {
        double vds_V = exp(log(vds_max_V) * i / 12.0);
        double current = fmin(die_current(d, vds_V, time_s), vds_V / (2 * d->rdson_ohm));
        point[count++] = (pf_soa_point){25, pulse_s, vds_V, current};
    }
    return count;
}

static void set_curves(random_source *source, const die *d, double vds_max_V, pf_part *part)
{
    static const double pulses[] = {1e-5, 1e-4, 1e-3, 1e-2, 1e-1, PF_DC};
    pf_soa_point point[6 * 32];
    pf_zth_point zth[24];
    size_t count = 0;
    bool flank = random_below(source, 2);
    for (int i = random_below(source, 2); i < 6; i++)
        count += add_curve(d, vds_max_V, pulses[i], flank, point + count);
    for (int i = 0; i < 24; i++) {
        zth[i].time_s = 1e-5 * pow(10, i / 4.0);
        zth[i].zth_KpW = die_zth(d, zth[i].time_s);
    }
    if (pf_part_set_soa(part, point, count) != PF_OK ||
        pf_part_set_zth(part, PF_JUNCTION_CASE, zth, 24) != PF_OK)
        DIE("out of memory");
}

void random_part(random_source *source, double vds_max_V, pf_part *part)
{
    double vds = random_between(source, vds_max_V, 2 * vds_max_V);
    die d = {.r_KpW = random_log_between(source, 0.2, 3),
             .corner_s = random_log_between(source, 3e-3, 0.1),
             .knee_V = random_between(source, 0.1, 0.6) * vds,
             .knee_slope = random_between(source, 0, 1.6),
             .tj_max_degC = random_below(source, 2) ? 150 : 175,
             .rdson_ohm = random_log_between(source, 1e-3, 2e-2),
             .pulse_A = random_log_between(source, 100, 1000)};
    char text[512];
    snprintf(text, sizeof text,
             "part=R%08x channel=N vds_max=%.17g vgs_max=20 id_cont=%.17g id_pulse=%.17g "
             "rdson=10:%.17g rdson_hot_ratio=%.17g tj_max=%.17g rth_jc=%.17g rth_ja=45 "
             "avalanche_energy=0.3 crss=1e-10",
             (unsigned)random_word(source), vds, d.pulse_A / 4, d.pulse_A, d.rdson_ohm,
             random_between(source, 1.5, 2.2), d.tj_max_degC, d.r_KpW);
    part_state(part, text);
    set_curves(source, &d, vds, part);
}

static void state_interval(random_source *source, pf_profile *profile, const char *name,
                           double value, double spread)
{
    char text[128];
    snprintf(text, sizeof text, "%s=%.17g..%.17g..%.17g", name,
             value * (1 - spread * random_between(source, 0, 1)), value,
             value * (1 + spread * random_between(source, 0, 1)));
    profile_state(profile, text);
}

static void state_load(random_source *source, pf_profile *profile, double supply_V, double current,
                       double spread)
{
    double load_A = current * random_between(source, 0, 0.4);
    switch (random_below(source, 4)) {
    case 0:
        state_interval(source, profile, "start_load_current", load_A, spread);
        break;
    case 1:
        state_interval(source, profile, "start_load_resistance", supply_V / load_A, spread);
        break;
    case 2:
        state_interval(source, profile, "start_load_power", 0.5 * load_A * supply_V, spread);
        state_interval(source, profile, "start_load_above", 0.6 * supply_V, spread);
        return;
    default:
        return;
    }
    if (random_below(source, 2))
        state_interval(source, profile, "start_load_above",
                       supply_V * random_between(source, 0, 0.9), spread);
}

static void state_control(random_source *source, pf_profile *profile, double supply_V,
                          double current, double capacitance, double spread)
{
    switch (profile->control) {
    case PF_START_SLEW:
        state_interval(source, profile, "output_slew", current / capacitance, spread);
        state_interval(source, profile, "fault_current", 3 * current, spread);
        break;
    case PF_START_POWER_LIMIT:
        state_interval(source, profile, "power_limit",
                       current * supply_V * random_between(source, 0.5, 0.8), spread);
        current *= 3;
        break;
    case PF_START_FOLDBACK:
        state_interval(source, profile, "foldback_current", current, spread);
        current *= 2.5;
        break;
    default:
        break;
    }
    if (profile->control != PF_START_SLEW)
        state_interval(source, profile, "current_limit", current, spread);
}

void random_profile(random_source *source, pf_start_control control, double spread,
                    pf_profile *profile)
{
    double supply_V = random_log_between(source, 5, 60);
    double current = random_log_between(source, 0.5, 8);
    double capacitance = random_log_between(source, 5e-5, 1e-3) * 12 / supply_V;
    double start_s = capacitance * supply_V / current;
    profile->control = control;
    profile_state(profile, "polarity=N gate_drive=10");
    state_interval(source, profile, "supply_voltage", supply_V, spread / 2);
    state_interval(source, profile, "output_capacitance", capacitance, spread);
    state_interval(source, profile, "running_current", current / 2, spread);
    state_interval(source, profile, "fault_time", random_between(source, 4, 8) * start_s, spread);
    state_interval(source, profile, "ambient_temperature", random_between(source, 20, 50), spread);
    state_control(source, profile, supply_V, current, capacitance, spread);
    state_load(source, profile, supply_V, current, spread);
}
