/* quantities.c: reference quantities, each asked of passfet as a user would: by a part and a card.
 */
#include "reference/quantities.h"

#include "support/bench.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#define CORNERS_MAX 64

/* One evaluation: the bench's part and card, then defaults, then the record's settings. */
static void run(bench *b, settings *in, const char *defaults, const pf_capture *capture)
{
    pf_error error = {0};
    *b = (bench){0};
    pf_part_init(&b->part);
    part_state(&b->part, bench_part_text);
    pf_profile_init(&b->profile);
    profile_state(&b->profile, bench_profile_text);
    profile_state(&b->profile, defaults);
    settings_apply(in, &b->part, &b->profile);
    settings_finish(in);
    if (pf_profile_finish(&b->profile, NULL, NULL) != PF_OK) DIE("profile refused: %s", in->text);
    if (pf_plan_new(&b->profile, capture, capture ? 1 : 0, &b->plan, &error) != PF_OK)
        DIE("%s", error.text);
    b->scratch = pf_scratch_new();
    b->stress = &b->assessment.stress;
    bench_again(b);
}

static pf_outcome outcome_of(settings *in, const char *defaults, pf_event event)
{
    bench b;
    run(&b, in, defaults, NULL);
    pf_outcome outcome = *bench_outcome(&b, event);
    bench_clear(&b);
    return outcome;
}

static pf_stress stress_of(settings *in, const char *defaults)
{
    bench b;
    run(&b, in, defaults, NULL);
    pf_stress stress = *b.stress;
    bench_clear(&b);
    return stress;
}

/* --- Safe operating area ---------------------------------------------------------------------- */

/* A short of 1 A from a case temperature: its margin is the current allowed. */
static double soa_current(settings *in)
{
    char card[256];
    snprintf(card, sizeof card,
             "start_from=ambient fault_current=1 supply_voltage=%.17g fault_time=%.17g "
             "ambient_temperature=%.17g",
             settings_number(in, "vds"), settings_number(in, "time"),
             settings_number_or(in, "case", 25));
    return outcome_of(in, card, PF_SHORT_AT_START).soa_margin;
}

static double soa_power(settings *in)
{
    return settings_number(in, "vds") * soa_current(in);
}

/* Slope in time, m of I = a t^m, from the currents at two times. */
static double soa_slope(settings *in)
{
    double from = settings_number(in, "from"), to = settings_number(in, "to");
    char text[4096], at[4096];
    text[0] = '\0';
    for (size_t i = 0; i < in->count; i++)
        if (strcmp(in->item[i].name, "from") != 0 && strcmp(in->item[i].name, "to") != 0)
            snprintf(text + strlen(text), sizeof text - strlen(text), "%s=%s ", in->item[i].name,
                     in->item[i].value);
    settings early, late;
    if (snprintf(at, sizeof at, "%.3900s time=%.17g", text, from) >= (int)sizeof at) DIE("long");
    settings_read(&early, at);
    if (snprintf(at, sizeof at, "%.3900s time=%.17g", text, to) >= (int)sizeof at) DIE("long");
    settings_read(&late, at);
    for (size_t i = 0; i < in->count; i++)
        in->item[i].used = true;
    return log(soa_current(&late) / soa_current(&early)) / log(to / from);
}

/* --- Thermal impedance and superposition ------------------------------------------------------ */

#define FROM_0 "start_from=ambient ambient_temperature=0 running_current=0 "

/* The junction's rise after 1 W for a time. */
static double zth(settings *in)
{
    char card[256];
    snprintf(card, sizeof card, FROM_0 "supply_voltage=1 fault_current=1 fault_time=%.17g",
             settings_number(in, "time"));
    return outcome_of(in, card, PF_SHORT_AT_START).peak_junction_degC;
}

/* Steps of power (time:W,…) on Zth, summed by hand from readings of passfet. */
static double step_sum(settings *in)
{
    double when[CORNERS_MAX], step[CORNERS_MAX], sum = 0, at = settings_number(in, "time");
    size_t count = points_read(settings_find(in, "steps"), when, step, NULL, CORNERS_MAX);
    const char *pairs = settings_find(in, "foster_rc");
    for (size_t i = 0; i < count; i++) {
        char text[2048];
        settings one;
        if (when[i] >= at) continue;
        snprintf(text, sizeof text, "foster_rc=%.1900s time=%.17g", pairs, at - when[i]);
        settings_read(&one, text);
        sum += step[i] * zth(&one);
    }
    settings_finish(in);
    return sum;
}

/* A recording wave=time:V:A,… : peak rise of the junction. */
static double wave_junction(settings *in)
{
    double t[CORNERS_MAX], v[CORNERS_MAX], a[CORNERS_MAX];
    size_t count = points_read(settings_find(in, "wave"), t, v, a, CORNERS_MAX);
    const pf_capture capture = {"wave", count, t, v, a};
    bench b;
    run(&b, in, FROM_0, &capture);
    const pf_outcome *o = bench_outcome(&b, PF_RECORDED);
    double rise = o->peak_junction_degC - o->start_degC;
    bench_clear(&b);
    return rise;
}

/* The same on Z_SOA. */
static double wave_hot_spot(settings *in)
{
    double t[CORNERS_MAX], v[CORNERS_MAX], a[CORNERS_MAX];
    size_t count = points_read(settings_find(in, "wave"), t, v, a, CORNERS_MAX);
    const pf_capture capture = {"wave", count, t, v, a};
    bench b;
    run(&b, in, FROM_0, &capture);
    const pf_outcome *o = bench_outcome(&b, PF_RECORDED);
    double rise = (b.stress->allowed_degC - o->start_degC) / o->soa_margin;
    bench_clear(&b);
    return rise;
}

/* Endless pulses of 1 W, on for a time, every interval: the junction's peak per W, case held. */
static double train(settings *in)
{
    char card[256];
    snprintf(card, sizeof card,
             FROM_0 "supply_voltage=1 fault_current=1 case_to_ambient=1e-12 retry_count=endless "
                    "fault_time=%.17g retry_interval=%.17g",
             settings_number(in, "on"), settings_number(in, "interval"));
    pf_outcome o = outcome_of(in, card, PF_RETRY);
    return o.peak_junction_degC - o.start_degC;
}

/* --- Start-up ----------------------------------------------------------------------------------
 */

static double start_duration(settings *in)
{
    return outcome_of(in, "fault_time=10", PF_START_UP).duration_s;
}

static double start_energy(settings *in)
{
    return outcome_of(in, "fault_time=10", PF_START_UP).energy_J;
}

static double start_peak_power(settings *in)
{
    return outcome_of(in, "fault_time=10", PF_START_UP).peak_power_W;
}

static double start_peak_current(settings *in)
{
    return outcome_of(in, "fault_time=10", PF_START_UP).peak_current_A;
}

static double step_duration(settings *in)
{
    return outcome_of(in, "fault_time=10", PF_SUPPLY_STEP).duration_s;
}

static double step_energy(settings *in)
{
    return outcome_of(in, "fault_time=10", PF_SUPPLY_STEP).energy_J;
}

/* --- Steady state ------------------------------------------------------------------------------
 */

static double running_junction(settings *in)
{
    return stress_of(in, "").running_degC;
}

static double conduction_loss(settings *in)
{
    return stress_of(in, "").conduction_loss_W;
}

static double junction_with(const settings *in, double current_A)
{
    settings copy = *in;
    char card[64];
    snprintf(card, sizeof card, "running_current=%.17g", current_A);
    for (size_t i = 0; i < copy.count; i++) { /* the copy's texts are its own */
        copy.item[i].name = copy.text + (in->item[i].name - in->text);
        copy.item[i].value = copy.text + (in->item[i].value - in->text);
    }
    return stress_of(&copy, card).running_degC;
}

/* The running current at which the junction reaches a temperature. */
static double current_reaching(settings *in, double junction_degC)
{
    double low = 1e-3, high = 1e4;
    for (int i = 0; i < 80; i++) {
        double middle = sqrt(low * high);
        if (junction_with(in, middle) < junction_degC)
            low = middle;
        else
            high = middle;
    }
    for (size_t i = 0; i < in->count; i++)
        in->item[i].used = true;
    return low;
}

static double runaway_current(settings *in)
{
    return current_reaching(in, INFINITY);
}

/* Continuous current at a case temperature over that at 25 degC, both at T_j,max: case=… */
static double current_share(settings *in)
{
    double degC = settings_number(in, "case"), current[2];
    for (int i = 0; i < 2; i++) {
        char text[2048];
        settings one;
        snprintf(text, sizeof text,
                 "tj_max=%.17g rdson=10:0.1 rth_jc=1.67 case_to_ambient=1e-9 "
                 "ambient_temperature=%.17g",
                 settings_number(in, "tj_max"), i ? degC : 25);
        settings_read(&one, text);
        current[i] = current_reaching(&one, settings_number(in, "tj_max"));
    }
    settings_finish(in);
    return current[1] / current[0];
}

/* Rds(on) at a junction temperature over that at 25 degC, from the loss of a card held there. */
static double rdson_share(settings *in)
{
    char card[128];
    snprintf(card, sizeof card, "running_current=1 case_to_ambient=1e-9 ambient_temperature=%.17g",
             settings_number(in, "junction"));
    pf_stress stress = stress_of(in, card);
    return stress.conduction_loss_W / stress.rdson_cold_ohm;
}

/* --- Turn-off and derating ----------------------------------------------------------------------
 */

static double avalanche_energy(settings *in)
{
    return outcome_of(in, "", PF_TURN_OFF).avalanche_J;
}

static double avalanche_limit(settings *in)
{
    return outcome_of(in, "supply_inductance=1e-6 running_current=0", PF_TURN_OFF)
        .avalanche_limit_J;
}

static double allowed_junction(settings *in)
{
    return stress_of(in, "").allowed_degC;
}

/* What a check of the part as a whole allows, over the rating. */
static double allowed_share(settings *in, pf_check_kind kind, double rating)
{
    bench b;
    run(&b, in, "", NULL);
    double limit = bench_check(&b, kind, -1)->limit;
    bench_clear(&b);
    return limit / rating;
}

static double allowed_voltage(settings *in)
{
    return allowed_share(in, PF_CHECK_VDS, settings_number(in, "vds_max"));
}

static double allowed_gate(settings *in)
{
    return allowed_share(in, PF_CHECK_VGS, settings_number(in, "vgs_max"));
}

static double allowed_current(settings *in)
{
    return allowed_share(in, PF_CHECK_ID_CONT, settings_number(in, "id_cont"));
}

static const quantity table[] = {
    {"soa_current_A", soa_current, "current allowed for one pulse: vds, time, case (default 25)"},
    {"soa_power_W", soa_power, "the same times vds"},
    {"soa_time_slope", soa_slope, "m of I = a t^m: vds, from, to"},
    {"zth_KpW", zth, "thermal impedance: time"},
    {"step_sum_K", step_sum, "power steps on Zth, summed from readings: steps, time"},
    {"junction_wave_K", wave_junction, "peak rise of the junction under a recording: wave"},
    {"hot_spot_wave_K", wave_hot_spot, "peak rise of the hot spot under a recording: wave"},
    {"pulse_train_KpW", train, "peak of endless pulses of 1 W, case held: on, interval"},
    {"start_duration_s", start_duration, "duration of the start at its worst corner"},
    {"start_energy_J", start_energy, "energy in the FET during it"},
    {"start_peak_W", start_peak_power, "highest power during it"},
    {"start_peak_A", start_peak_current, "highest current during it"},
    {"step_duration_s", step_duration, "duration of the recharge after a supply step"},
    {"step_energy_J", step_energy, "energy in the FET during it"},
    {"running_degC", running_junction, "running junction temperature"},
    {"conduction_loss_W", conduction_loss, "conduction loss, all parts together"},
    {"runaway_A", runaway_current, "running current from which the card runs away"},
    {"current_share", current_share, "continuous current over that at 25 degC: case, tj_max"},
    {"rdson_share", rdson_share, "Rds(on) over that at 25 degC: junction"},
    {"avalanche_J", avalanche_energy, "energy of the inductive kick without a clamp"},
    {"avalanche_limit_J", avalanche_limit, "avalanche energy allowed at a temperature"},
    {"allowed_degC", allowed_junction, "junction temperature allowed"},
    {"allowed_vds_share", allowed_voltage, "V_DS allowed over V_DS,max"},
    {"allowed_vgs_share", allowed_gate, "V_GS allowed over V_GS,max"},
    {"allowed_id_share", allowed_current, "running current allowed over I_D"},
};

const quantity *quantities(size_t *count)
{
    *count = sizeof table / sizeof *table;
    return table;
}

const quantity *quantity_find(const char *name)
{
    for (size_t i = 0; i < sizeof table / sizeof *table; i++)
        if (strcmp(table[i].name, name) == 0) return &table[i];
    return NULL;
}
