/* differences.c: reference and candidate side by side, in stop-first order. */
#include "base/number.h"
#include "rank/comparison.h"
#include "stress/plan.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include <string.h>

pf_difference *pf_difference_add(const pf_pair *pair, pf_stage stage, const char *format, ...)
{
    pf_exchange *to = pair->result;
    if (to->difference_count < PF_DIFFERENCES_MAX) to->difference_count++;
    pf_difference *added = &to->difference[to->difference_count - 1];
    va_list arguments;
    *added = (pf_difference){
        .stage = stage, .reference = PF_NONE, .candidate = PF_NONE, .ratio = PF_NONE};
    va_start(arguments, format);
    vsnprintf(added->name, sizeof added->name, format, arguments);
    va_end(arguments);
    return added;
}

static void add_text(const pf_pair *pair, pf_stage stage, const char *name, const char *reference,
                     const char *candidate)
{
    pf_difference *added = pf_difference_add(pair, stage, "%s", name);
    const char *none = "not stated";
    snprintf(added->reference_text, PF_DIFFERENCE_ROOM, "%s", reference ? reference : none);
    snprintf(added->candidate_text, PF_DIFFERENCE_ROOM, "%s", candidate ? candidate : none);
    added->flagged = strcmp(added->reference_text, added->candidate_text) != 0;
}

/* Two numbers; why: the reason for which they are not comparable, NULL where they are. */
static pf_difference *add_numbers(const pf_pair *pair, pf_stage stage, const char *name,
                                  pf_quantity quantity, double reference, double candidate,
                                  const char *why)
{
    pf_difference *added = pf_difference_add(pair, stage, "%s", name);
    added->quantity = quantity;
    added->reference = reference;
    added->candidate = candidate;
    added->why = why;
    if (!why && quantity != PF_TEMPERATURE) added->ratio = candidate / reference;
    return added;
}

static void add_rating(const pf_pair *pair, pf_stage stage, const char *csv, const char *why)
{
    size_t count;
    const pf_rating_field *field = pf_rating_fields(&count);
    for (size_t i = 0; i < count; i++)
        if (strcmp(field[i].csv, csv) == 0)
            add_numbers(pair, stage, csv, field[i].quantity,
                        pf_part_rating_value(pair->reference, &field[i]),
                        pf_part_rating_value(pair->candidate, &field[i]), why);
}

static void list_fit(const pf_pair *pair)
{
    add_text(pair, PF_STAGE_FIT, "polarity", pf_polarity_text(pair->reference->polarity),
             pf_polarity_text(pair->candidate->polarity));
    add_text(pair, PF_STAGE_FIT, "package", pair->reference->package, pair->candidate->package);
    add_rating(pair, PF_STAGE_FIT, "vgs_max", NULL);
}

static void list_voltage(const pf_pair *pair)
{
    double old = pair->reference->avalanche_current_A, new = pair->candidate->avalanche_current_A;
    bool same = fabs(new / old - 1) < 0.01;
    add_rating(pair, PF_STAGE_VOLTAGE, "vds_max", NULL);
    add_rating(pair, PF_STAGE_VOLTAGE, "avalanche_current", NULL);
    add_rating(pair, PF_STAGE_VOLTAGE, "avalanche_energy",
               same ? NULL : "rated at different currents, or at one that is not stated");
}

/* A gate ramp charges the gate's capacitor and the part's own C_rss: slew and start time follow. */
static void list_ramp(const pf_pair *pair)
{
    const pf_profile *profile = pf_plan_profile(pair->plan);
    double gate_F = profile->value[PF_GATE_CAPACITANCE].max;
    double gate_A = profile->value[PF_GATE_CURRENT].min;
    if (!profile->stated[PF_GATE_CAPACITANCE]) return;
    double old_F = gate_F + pair->reference->crss_F, new_F = gate_F + pair->candidate->crss_F;
    add_numbers(pair, PF_STAGE_GATE, "slowest output slew", PF_SLEW, gate_A / old_F, gate_A / new_F,
                NULL);
    double supply_V = profile->value[PF_SUPPLY_VOLTAGE].max;
    add_numbers(pair, PF_STAGE_GATE, "slowest ramp from 0 V to the supply", PF_TIME,
                supply_V * old_F / gate_A, supply_V * new_F / gate_A, NULL);
}

static void list_gate(const pf_pair *pair)
{
    add_rating(pair, PF_STAGE_GATE, "crss", NULL);
    list_ramp(pair);
    add_rating(pair, PF_STAGE_GATE, "gate_charge", NULL);
    pf_difference *time =
        pf_difference_add(pair, PF_STAGE_GATE, "turn-off time at the same gate current");
    time->ratio = pair->candidate->gate_charge_C / pair->reference->gate_charge_C;
    add_rating(pair, PF_STAGE_GATE, "vth_min", NULL);
    add_rating(pair, PF_STAGE_GATE, "vth_max", NULL);
}

static void list_loss(const pf_pair *pair)
{
    const pf_stress *old = &pair->result->reference.stress, *new = &pair->result->candidate.stress;
    bool same = old->rdson_drive_V == new->rdson_drive_V;
    add_numbers(pair, PF_STAGE_LOSS, "Rds(on) at 25 degC and the card's gate drive", PF_RESISTANCE,
                old->rdson_cold_ohm, new->rdson_cold_ohm,
                same ? NULL : "rated at different gate drives");
    add_rating(pair, PF_STAGE_LOSS, "rdson_hot_ratio", NULL);
    add_numbers(pair, PF_STAGE_LOSS, "conduction loss", PF_POWER, old->conduction_loss_W,
                new->conduction_loss_W, NULL);
    add_numbers(pair, PF_STAGE_LOSS, "running junction temperature", PF_TEMPERATURE,
                old->running_degC, new->running_degC, NULL);
    add_rating(pair, PF_STAGE_LOSS, "rth_jc", NULL);
    add_rating(pair, PF_STAGE_LOSS, "rth_ja", "each on the board of its own sheet");
    add_rating(pair, PF_STAGE_LOSS, "tj_max", NULL);
}

/* "4 lines from 10 us, dc line, 25 degC". */
static void describe_soa(const pf_part *part, char text[PF_DIFFERENCE_ROOM])
{
    char shortest[PF_UNIT_ROOM];
    size_t lines = 0;
    bool dc = false;
    for (size_t i = 0; i < part->soa_count; i++) {
        bool fresh = i == 0 || part->soa[i].pulse_s != part->soa[i - 1].pulse_s ||
                     part->soa[i].case_degC != part->soa[i - 1].case_degC;
        dc |= isinf(part->soa[i].pulse_s);
        lines += fresh && isfinite(part->soa[i].pulse_s);
    }
    if (part->soa_count == 0) {
        snprintf(text, PF_DIFFERENCE_ROOM, "not stated");
        return;
    }
    pf_value_print(shortest, part->soa[0].pulse_s, PF_TIME, 3);
    snprintf(text, PF_DIFFERENCE_ROOM, "%zu lines from %.20s, %s, %zu points", lines, shortest,
             dc ? "dc line" : "no dc line", part->soa_count);
}

static void describe_zth(const pf_part *part, char text[PF_DIFFERENCE_ROOM])
{
    static const char *const where[] = {"to case", "to ambient"};
    snprintf(text, PF_DIFFERENCE_ROOM, "not stated");
    for (int path = PF_PATH_COUNT; path-- > 0;) {
        const pf_thermal_curve *curve = &part->thermal[path];
        if (curve->point_count)
            snprintf(text, PF_DIFFERENCE_ROOM, "%zu points %s", curve->point_count, where[path]);
        if (curve->pair_count)
            snprintf(text, PF_DIFFERENCE_ROOM, "%zu pairs %s", curve->pair_count, where[path]);
    }
}

static void list_data(const pf_pair *pair)
{
    char old[PF_DIFFERENCE_ROOM], new[PF_DIFFERENCE_ROOM];
    add_text(pair, PF_STAGE_DATA, "data sheet", pair->reference->datasheet,
             pair->candidate->datasheet);
    add_text(pair, PF_STAGE_DATA, "its date", pair->reference->datasheet_date,
             pair->candidate->datasheet_date);
    describe_soa(pair->reference, old);
    describe_soa(pair->candidate, new);
    add_text(pair, PF_STAGE_DATA, "SOA", old, new);
    describe_zth(pair->reference, old);
    describe_zth(pair->candidate, new);
    add_text(pair, PF_STAGE_DATA, "Zth", old, new);
    for (size_t i = pair->result->difference_count - 4; i < pair->result->difference_count; i++)
        pair->result->difference[i].flagged = false; /* they may well differ */
}

pf_status pf_differences_list(const pf_pair *pair)
{
    list_fit(pair);
    list_voltage(pair);
    pf_status status = pf_differences_hot(pair);
    list_gate(pair);
    list_loss(pair);
    list_data(pair);
    return status;
}
