/* test_properties.c: what must hold for any part and any card, on random ones (fixed seeds). */
#include "support/bench.h"
#include "support/near.h"
#include "support/random_case.h"
#include "support/settings.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define GRID 0.003 /* what the superposition grid may be off by, see test_cross_hot_spot.c */

static void assess(const pf_profile *profile, const pf_capture *capture, const pf_part *part,
                   pf_stress *stress)
{
    pf_plan *plan;
    pf_profile finished = *profile;
    pf_scratch *scratch = pf_scratch_new();
    assert_int_equal(pf_profile_finish(&finished, NULL, NULL), PF_OK);
    assert_int_equal(pf_plan_new(&finished, capture, capture ? 1 : 0, &plan, NULL), PF_OK);
    assert_int_equal(pf_plan_evaluate(plan, part, scratch, stress), PF_OK);
    pf_plan_free(plan);
    pf_scratch_free(scratch);
}

static void random_pair(random_source *source, pf_start_control control, double spread,
                        pf_part *part, pf_profile *profile)
{
    pf_part_init(part);
    pf_profile_init(profile);
    random_profile(source, control, spread, profile);
    random_part(source, 1.3 * profile->value[PF_SUPPLY_VOLTAGE].max, part);
    part->rth_ja_KpW = 5; /* a cool running card: margins are not 0 */
}

/* --- Linearity -------------------------------------------------------------------------------- */

#define SAMPLES 24

typedef struct recording {
    double t[SAMPLES], v[SAMPLES], i[SAMPLES];
} recording;

static recording random_recording(random_source *source)
{
    recording r;
    double step = random_log_between(source, 1e-5, 2e-3);
    for (int k = 0; k < SAMPLES; k++) {
        r.t[k] = k ? r.t[k - 1] + step * random_between(source, 0.2, 1) : 0;
        r.v[k] = random_between(source, 0.2, 12);
        r.i[k] = random_between(source, 0, 5);
    }
    return r;
}

typedef struct rises {
    double hot_K, junction_K;
} rises;

static rises rises_of(const recording *r, const pf_part *part)
{
    const pf_capture capture = {"r", SAMPLES, r->t, r->v, r->i};
    pf_profile profile;
    pf_stress stress;
    pf_profile_init(&profile);
    profile_state(&profile, bench_profile_text);
    assess(&profile, &capture, part, &stress);
    const pf_outcome *o = &stress.outcome[stress.count - 1];
    return (rises){(stress.allowed_degC - o->start_degC) / o->soa_margin,
                   o->peak_junction_degC - o->start_degC};
}

static void test_rises_are_linear_in_current(void **state)
{
    (void)state;
    random_source source = {1};
    for (int n = 0; n < 40; n++) {
        pf_part part;
        pf_part_init(&part);
        random_part(&source, 15, &part);
        part.rth_ja_KpW = 1;
        recording r = random_recording(&source), larger = r;
        double factor = random_log_between(&source, 0.1, 10);
        for (int k = 0; k < SAMPLES; k++)
            larger.i[k] *= factor;
        rises one = rises_of(&r, &part), other = rises_of(&larger, &part);
        assert_near(other.hot_K, factor * one.hot_K, 1e-9);
        assert_near(other.junction_K, factor * one.junction_K, 1e-9);
        pf_part_clear(&part);
    }
}

/* Two currents together heat at most as much as the sum of their own peaks, and no less than
** either. */
static void test_two_currents_superpose(void **state)
{
    (void)state;
    random_source source = {2};
    for (int n = 0; n < 40; n++) {
        pf_part part;
        pf_part_init(&part);
        random_part(&source, 15, &part);
        part.rth_ja_KpW = 1;
        recording a = random_recording(&source), b = a, sum = a;
        for (int k = 0; k < SAMPLES; k++) {
            b.i[k] = random_between(&source, 0, 5);
            sum.i[k] = a.i[k] + b.i[k];
        }
        rises ra = rises_of(&a, &part), rb = rises_of(&b, &part), rs = rises_of(&sum, &part);
        assert_double(rs.hot_K, <=, (ra.hot_K + rb.hot_K) * (1 + 1e-9));
        assert_double(rs.junction_K, <=, (ra.junction_K + rb.junction_K) * (1 + 1e-9));
        assert_double(rs.junction_K, >=, fmax(ra.junction_K, rb.junction_K) * (1 - 1e-9));
        pf_part_clear(&part);
    }
}

/* --- Convergence ------------------------------------------------------------------------------ */

/* A power that decays as exp(-t), 4 s long, in n straight pieces, on one thermal pole of 1 s. */
static double decay_rise(int pieces)
{
    double t[129], v[129], i[129];
    const pf_capture capture = {"decay", (size_t)pieces + 1, t, v, i};
    for (int k = 0; k <= pieces; k++) {
        t[k] = 4.0 * k / pieces;
        v[k] = 1;
        i[k] = exp(-t[k]);
    }
    pf_profile profile;
    pf_part part;
    pf_stress stress;
    pf_profile_init(&profile);
    profile_state(&profile, bench_profile_text);
    pf_part_init(&part);
    part_state(&part, bench_part_text);
    part_state(&part, "foster=100:1");
    assess(&profile, &capture, &part, &stress);
    const pf_outcome *o = &stress.outcome[stress.count - 1];
    pf_part_clear(&part);
    return o->peak_junction_degC - o->start_degC;
}

/* The pole answers with 100 K/W t exp(-t), at most 100/e; chords of a recording are off by the square
** of their length. */
static void test_recordings_converge_with_the_square_of_their_step(void **state)
{
    (void)state;
    double exact = 100 * exp(-1), error[3];
    for (int k = 0; k < 3; k++)
        error[k] = decay_rise(4 << k) / exact - 1;
    print_message("convergence: errors %.4f %.4f %.4f %%, orders %.2f %.2f\n", 100 * error[0],
                  100 * error[1], 100 * error[2], log2(error[0] / error[1]),
                  log2(error[1] / error[2]));
    assert_double(log2(error[0] / error[1]), >, 1.7);
    assert_double(log2(error[1] / error[2]), >, 1.7);
    assert_near(decay_rise(128), exact, 1e-3);
}

/* --- Monotony --------------------------------------------------------------------------------- */

static void scale(pf_profile *profile, pf_parameter parameter, double factor)
{
    pf_interval *value = &profile->value[parameter];
    *value = (pf_interval){value->min * factor, value->typ * factor, value->max * factor};
}

/* Worst rise of any event's margin when a parameter grows by 10 %. */
static double worst_rise(pf_parameter parameter, int pairs, uint64_t seed)
{
    random_source source = {seed};
    double worst = 0;
    for (int n = 0; n < pairs; n++) {
        pf_part part;
        pf_profile profile;
        pf_stress before, after;
        random_pair(&source, (pf_start_control)(PF_START_SLEW + n % 4), 0, &part, &profile);
        if (!profile.stated[PF_FAULT_CURRENT])
            profile_state(&profile, parameter == PF_FAULT_CURRENT ? "fault_current=5" : "");
        assess(&profile, NULL, &part, &before);
        scale(&profile, parameter, 1.1);
        assess(&profile, NULL, &part, &after);
        for (size_t i = 0; i < before.count; i++)
            if (before.outcome[i].soa_margin > 0)
                worst = fmax(worst, after.outcome[i].soa_margin / before.outcome[i].soa_margin - 1);
        pf_part_clear(&part);
    }
    return worst;
}

static void test_margin_never_rises_with_supply_voltage(void **state)
{
    (void)state;
    assert_double(worst_rise(PF_SUPPLY_VOLTAGE, 80, 11), <, GRID);
}

static void test_margin_never_rises_with_ambient_temperature(void **state)
{
    (void)state;
    assert_double(worst_rise(PF_AMBIENT_TEMPERATURE, 80, 12), <, 1e-12);
}

static void test_margin_never_rises_with_fault_time(void **state)
{
    (void)state;
    assert_double(worst_rise(PF_FAULT_TIME, 80, 13), <, 1e-9);
}

static void test_margin_never_rises_with_fault_current(void **state)
{
    (void)state;
    assert_double(worst_rise(PF_FAULT_CURRENT, 80, 14), <, 1e-12);
}

static void test_margin_never_rises_with_output_capacitance(void **state)
{
    (void)state;
    assert_double(worst_rise(PF_OUTPUT_CAPACITANCE, 80, 15), <, GRID);
}

/* --- Corners ---------------------------------------------------------------------------------- */

/* A card somewhere inside the box. */
static pf_profile inside(random_source *source, const pf_profile *box)
{
    pf_profile point = *box;
    for (int i = 0; i < PF_PARAMETER_COUNT; i++) {
        if (!box->stated[i]) continue;
        double value = random_between(source, box->value[i].min, box->value[i].max);
        point.value[i] = (pf_interval){value, value, value};
    }
    return point;
}

/* By how much the margin of the box is above that of some point inside it, at worst; below 0 where
** no point comes up to the corners. */
static double beaten_by(pf_start_control control, int boxes, int points, uint64_t seed,
                        pf_event *which)
{
    random_source source = {seed};
    double worst = -1;
    for (int n = 0; n < boxes; n++) {
        pf_part part;
        pf_profile box;
        pf_stress corners, point;
        random_pair(&source, control, 0.15, &part, &box);
        assess(&box, NULL, &part, &corners);
        for (int k = 0; k < points; k++) {
            pf_profile at = inside(&source, &box);
            assess(&at, NULL, &part, &point);
            for (size_t i = 1; i < corners.count; i++) {
                double over = corners.outcome[i].soa_margin / point.outcome[i].soa_margin - 1;
                if (!(over > worst)) continue;
                worst = over;
                *which = (pf_event)i;
            }
        }
        pf_part_clear(&part);
    }
    return worst;
}

static void test_corners_are_not_beaten_inside_the_box(void **state)
{
    (void)state;
    for (int control = PF_START_SLEW; control <= PF_START_FOLDBACK; control++) {
        pf_event which = PF_RUNNING;
        double worst = beaten_by((pf_start_control)control, 10, 50, 20 + (uint64_t)control, &which);
        print_message("corners, %s: 500 points, the nearest %+.3f %% beyond the corners (%s)\n",
                      pf_start_control_text((pf_start_control)control), 100 * worst,
                      pf_event_text(which));
        assert_double(worst, <, GRID);
    }
}

/* --- Order ------------------------------------------------------------------------------------ */

static void shuffle(random_source *source, size_t *order, size_t count)
{
    for (size_t i = count; i > 1; i--) {
        size_t k = (size_t)random_below(source, (int)i), swap = order[i - 1];
        order[i - 1] = order[k];
        order[k] = swap;
    }
}

static void test_order_of_the_input_does_not_change_the_ranking(void **state)
{
    (void)state;
    enum { PARTS = 40 };
    random_source source = {31};
    pf_part part[PARTS];
    pf_profile profile;
    pf_plan *plan;
    pf_ranking ranking[2];
    size_t order[PARTS];
    pf_scratch *scratch = pf_scratch_new();
    pf_profile_init(&profile);
    random_profile(&source, PF_START_POWER_LIMIT, 0.1, &profile);
    assert_int_equal(pf_profile_finish(&profile, NULL, NULL), PF_OK);
    assert_int_equal(pf_plan_new(&profile, NULL, 0, &plan, NULL), PF_OK);
    for (size_t i = 0; i < PARTS; i++) {
        pf_part_init(&part[i]);
        random_part(&source, 0.8 * profile.value[PF_SUPPLY_VOLTAGE].max, &part[i]);
        if (i % 5 == 4) part_state(&part[i], "soa= part=same");
        order[i] = i;
    }
    for (int run = 0; run < 2; run++) {
        pf_ranking_init(&ranking[run], (const pf_plan *const *)&plan, 1);
        for (size_t i = 0; i < PARTS; i++)
            assert_int_equal(pf_ranking_add(&ranking[run], &part[order[i]], 0, scratch), PF_OK);
        assert_int_equal(pf_ranking_sort(&ranking[run], NULL, 0), PF_OK);
        shuffle(&source, order, PARTS);
    }
    for (size_t i = 0; i < PARTS; i++) {
        const pf_row *a = &ranking[0].row[i], *b = &ranking[1].row[i];
        assert_string_equal(a->part, b->part);
        assert_true(a->soa_margin == b->soa_margin || isnan(a->soa_margin));
        assert_int_equal(a->verdict, b->verdict);
    }
    for (int run = 0; run < 2; run++)
        pf_ranking_clear(&ranking[run]);
    for (size_t i = 0; i < PARTS; i++)
        pf_part_clear(&part[i]);
    pf_plan_free(plan);
    pf_scratch_free(scratch);
}

/* --- The sheet's own points -------------------------------------------------------------------- */

static void test_every_point_right_of_its_flank_has_a_margin_of_1(void **state)
{
    (void)state;
    random_source source = {41};
    int points = 0;
    for (int n = 0; n < 60; n++) {
        pf_part part;
        pf_part_init(&part);
        random_part(&source, 20, &part);
        for (size_t i = 0; i < part.soa_count; i++) {
            const pf_soa_point *p = &part.soa[i];
            bool flank = false;
            for (size_t k = i + 1; k < part.soa_count; k++)
                flank |= part.soa[k].pulse_s == p->pulse_s && part.soa[k].id_A > p->id_A;
            if (flank || isinf(p->pulse_s)) continue;
            char card[512];
            pf_profile profile;
            pf_stress stress;
            pf_profile_init(&profile);
            profile_state(&profile, bench_profile_text);
            snprintf(card, sizeof card,
                     "start_from=ambient ambient_temperature=25 supply_voltage=%.17g "
                     "fault_current=%.17g fault_time=%.17g",
                     p->vds_V, p->id_A, p->pulse_s);
            profile_state(&profile, card);
            assess(&profile, NULL, &part, &stress);
            assert_near(stress.outcome[PF_SHORT_AT_START].soa_margin, 1, 2e-3);
            points++;
        }
        pf_part_clear(&part);
    }
    print_message("sheet points: %d at a margin of 1\n", points);
    assert_true(points > 2000);
}

/* The same part with and without the points of its Rds(on) flank, down to 0.05 V. */
static void test_flank_points_change_no_margin(void **state)
{
    (void)state;
    random_source source = {42};
    double worst = 0;
    for (int n = 0; n < 60; n++) {
        pf_part part, flanked;
        pf_profile profile;
        pf_stress plain, with;
        pf_soa_point point[400];
        size_t count = 0;
        random_pair(&source, n % 2 ? PF_START_CURRENT_LIMIT : PF_START_POWER_LIMIT, 0, &part,
                    &profile);
        pf_part_init(&flanked);
        assert_int_equal(pf_part_copy(&flanked, &part), PF_OK);
        for (size_t i = 0; i < part.soa_count; i++) {
            const pf_soa_point *p = &part.soa[i];
            bool first = i == 0 || part.soa[i - 1].pulse_s != p->pulse_s;
            for (double v = 0.05; first && v < 0.9 * p->vds_V; v *= 1.5)
                point[count++] = (pf_soa_point){25, p->pulse_s, v, p->id_A * v / p->vds_V};
            point[count++] = *p;
        }
        assert_int_equal(pf_part_set_soa(&flanked, point, count), PF_OK);
        assess(&profile, NULL, &part, &plain);
        assess(&profile, NULL, &flanked, &with);
        for (size_t i = 1; i < plain.count; i++)
            worst = fmax(worst, fabs(with.outcome[i].soa_margin / plain.outcome[i].soa_margin - 1));
        pf_part_clear(&part);
        pf_part_clear(&flanked);
    }
    print_message("flanks: margins move by %.3g at most\n", worst);
    assert_double(worst, <, 5e-3);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_rises_are_linear_in_current),
        cmocka_unit_test(test_two_currents_superpose),
        cmocka_unit_test(test_recordings_converge_with_the_square_of_their_step),
        cmocka_unit_test(test_margin_never_rises_with_supply_voltage),
        cmocka_unit_test(test_margin_never_rises_with_ambient_temperature),
        cmocka_unit_test(test_margin_never_rises_with_fault_time),
        cmocka_unit_test(test_margin_never_rises_with_fault_current),
        cmocka_unit_test(test_margin_never_rises_with_output_capacitance),
        cmocka_unit_test(test_corners_are_not_beaten_inside_the_box),
        cmocka_unit_test(test_order_of_the_input_does_not_change_the_ranking),
        cmocka_unit_test(test_every_point_right_of_its_flank_has_a_margin_of_1),
        cmocka_unit_test(test_flank_points_change_no_margin),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
