/* Claims about ratings held against each other. The sound part is invented; its SOA is worked out
** from its Zth by conservation of energy, V * I * Zth(t) = T_j,max - 25. */
#include "support/claims.h"

#include <math.h>
#include <passfet/plausibility.h>
#include <string.h>

typedef struct heard {
    size_t count[PF_ODDITY_COUNT], refusals, total;
    pf_finding last;
} heard;

static void hear(void *context, const pf_finding *finding)
{
    heard *all = context;
    all->count[finding->oddity]++;
    all->refusals += finding->refuses;
    all->total++;
    all->last = *finding;
}

static const double pulses_s[] = {1e-4, 1e-3, 1e-2};

/* Zth = 0.6 K/W at 1 s and beyond, 0.6 sqrt(t/1 s) before: 6 mK/W at 100 us, 19 mK/W at 1 ms. */
static double zth_at(double time_s)
{
    return 0.6 * sqrt(fmin(1, time_s));
}

static void make_sound(pf_part *part)
{
    pf_zth_point zth[6];
    pf_soa_point soa[9];
    size_t count = 0;
    pf_part_init(part);
    part->vds_max_V = 100;
    part->vgs_max_V = 20;
    part->tj_max_degC = 175;
    part->rth_jc_KpW = 0.6;
    part->rth_ja_KpW = 50;
    part->id_cont_A = 150;
    part->id_pulse_A = 600;
    part->vth_min_V = 2;
    part->vth_max_V = 4;
    part->ciss_F = 4e-9;
    part->crss_F = 4e-11;
    assert_int_equal(pf_part_set_rdson(part, 4.5, 0.004), PF_OK);
    assert_int_equal(pf_part_set_rdson(part, 10, 0.003), PF_OK);
    for (size_t i = 0; i < 6; i++) {
        double time_s = pow(10, (double)i - 5);
        zth[i] = (pf_zth_point){time_s, zth_at(time_s)};
    }
    assert_int_equal(pf_part_set_zth(part, PF_JUNCTION_CASE, zth, 6), PF_OK);
    for (size_t i = 0; i < 3; i++) {
        double power_W = 150 / zth_at(pulses_s[i]);
        for (double vds_V = 25; vds_V <= 100; vds_V *= 2)
            soa[count++] = (pf_soa_point){25, pulses_s[i], vds_V, fmin(600, power_W / vds_V)};
    }
    assert_int_equal(pf_part_set_soa(part, soa, count), PF_OK);
}

static heard check(pf_part *part)
{
    heard all = {0};
    assert_int_equal(pf_part_check(part, hear, &all), PF_OK);
    pf_part_clear(part);
    return all;
}

static void expect(pf_part *part, pf_oddity oddity, bool refuses)
{
    heard all = check(part);
    assert_true(all.count[oddity] > 0);
    assert_int_equal(all.refusals > 0, refuses);
}

static void test_a_sound_part_is_found_sound(void **state)
{
    pf_part part;
    (void)state;
    make_sound(&part);
    assert_int_equal(check(&part).total, 0);
}

static void test_a_part_that_states_nothing_is_not_blamed(void **state)
{
    pf_part part;
    (void)state;
    pf_part_init(&part);
    assert_int_equal(check(&part).total, 0);
}

static void scale_pulses(pf_part *part, double factor)
{
    for (size_t i = 0; i < part->soa_count; i++)
        part->soa[i].pulse_s *= factor;
}

static void scale_currents(pf_part *part, double factor)
{
    for (size_t i = 0; i < part->soa_count; i++)
        part->soa[i].id_A *= factor;
}

static void test_power_and_zth_that_disagree_are_found(void **state)
{
    pf_part part;
    (void)state;
    make_sound(&part);
    scale_currents(&part, 0.5); /* a factor of 2: worth a look */
    expect(&part, PF_ODD_SOA_ZTH, false);
    make_sound(&part);
    scale_currents(&part, 0.25);
    expect(&part, PF_ODD_SOA_ZTH, true);
    make_sound(&part);
    scale_pulses(&part, 1000); /* milliseconds taken for seconds */
    expect(&part, PF_ODD_SOA_ZTH, true);
    make_sound(&part);
    scale_currents(&part, 1 / 1.4); /* makers leave reserves */
    assert_int_equal(check(&part).total, 0);
}

static void test_hot_spots_are_no_contradiction(void **state)
{
    pf_part part;
    (void)state;
    make_sound(&part);
    for (size_t i = 0; i < part.soa_count; i++) /* currents fall with the square of the voltage */
        part.soa[i].id_A *= 25 / part.soa[i].vds_V;
    assert_int_equal(check(&part).count[PF_ODD_SOA_ZTH], 0);
}

static void test_the_end_of_zth_is_held_against_rth(void **state)
{
    pf_part part;
    (void)state;
    make_sound(&part);
    part.rth_jc_KpW = 0.3;
    expect(&part, PF_ODD_ZTH_END, false);
    make_sound(&part);
    part.rth_jc_KpW = 0.1;
    part.soa_count = 0;
    expect(&part, PF_ODD_ZTH_END, true);
}

static void test_a_normalised_zth_is_recognised(void **state)
{
    pf_part part;
    (void)state;
    make_sound(&part);
    for (size_t i = 0; i < 6; i++)
        part.thermal[PF_JUNCTION_CASE].point[i].zth_KpW /= 0.6;
    expect(&part, PF_ODD_ZTH_NORMALISED, true);
}

static void test_a_curve_for_a_duty_cycle_is_recognised(void **state)
{
    pf_part part;
    (void)state;
    make_sound(&part);
    for (size_t i = 0; i < 6; i++) { /* D = 0.1: D R + (1 - D) Z(t) */
        double *zth_KpW = &part.thermal[PF_JUNCTION_CASE].point[i].zth_KpW;
        *zth_KpW = 0.1 * 0.6 + 0.9 * *zth_KpW;
    }
    expect(&part, PF_ODD_ZTH_DUTY, true);
}

static void test_the_soa_must_lie_within_the_ratings(void **state)
{
    pf_part part;
    (void)state;
    make_sound(&part);
    part.vds_max_V = 80;
    expect(&part, PF_ODD_SOA_VOLTAGE, false);
    make_sound(&part);
    part.vds_max_V = 40;
    expect(&part, PF_ODD_SOA_VOLTAGE, true);
    make_sound(&part);
    part.vds_max_V = 300;
    expect(&part, PF_ODD_SOA_SHORT, false);
    make_sound(&part);
    part.id_pulse_A = 300;
    expect(&part, PF_ODD_SOA_CURRENT, false);
}

static void test_a_longer_pulse_is_never_allowed_more(void **state)
{
    pf_part part;
    (void)state;
    make_sound(&part);
    for (size_t i = 0; i < part.soa_count; i++) /* 1 ms and 10 ms exchanged */
        if (part.soa[i].pulse_s > 5e-4)
            part.soa[i].id_A *= part.soa[i].pulse_s > 5e-3 ? sqrt(10) : 1 / sqrt(10);
    heard all = check(&part);
    assert_true(all.count[PF_ODD_SOA_ORDER] > 0);
}

static void test_the_left_edge_is_held_against_rdson(void **state)
{
    pf_part part;
    pf_soa_point soa[] = {{25, 1e-3, 0.6, 100}, {25, 1e-3, 2.4, 400}, {25, 1e-3, 100, 75}};
    (void)state;
    make_sound(&part); /* 6 mOhm: the hot Rds(on) */
    assert_int_equal(pf_part_set_soa(&part, soa, 3), PF_OK);
    assert_int_equal(check(&part).total, 0);
    make_sound(&part);
    for (size_t i = 0; i < 2; i++)
        soa[i].vds_V *= 100;
    soa[2].vds_V = 300;
    part.vds_max_V = 300;
    assert_int_equal(pf_part_set_soa(&part, soa, 3), PF_OK);
    expect(&part, PF_ODD_SOA_EDGE, true);
}

static void test_single_ratings_are_held_against_each_other(void **state)
{
    pf_part part;
    (void)state;
    make_sound(&part);
    assert_int_equal(pf_part_set_rdson(&part, 4.5, 0.002), PF_OK);
    expect(&part, PF_ODD_RDSON_ORDER, false);
    make_sound(&part);
    part.vth_min_V = 5;
    expect(&part, PF_ODD_VTH_ORDER, true);
    make_sound(&part);
    part.id_cont_A = 700;
    expect(&part, PF_ODD_ID_ORDER, false);
    make_sound(&part);
    part.rth_ja_KpW = 0.5;
    expect(&part, PF_ODD_RTH_ORDER, true);
    make_sound(&part);
    part.crss_F = 5e-9;
    expect(&part, PF_ODD_CAPACITANCE, true);
}

static void test_a_finding_states_both_numbers(void **state)
{
    char text[300];
    pf_part part;
    heard all;
    (void)state;
    make_sound(&part);
    part.vds_max_V = 80;
    all = check(&part);
    pf_finding_print(&all.last, text, sizeof text);
    assert_string_equal(text, "the SOA goes on beyond V_DS,max: 100 V and 80 V (10 ms)");
    assert_true(fabs(all.last.ratio - 1.25) < 1e-9);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_a_sound_part_is_found_sound),
        cmocka_unit_test(test_a_part_that_states_nothing_is_not_blamed),
        cmocka_unit_test(test_power_and_zth_that_disagree_are_found),
        cmocka_unit_test(test_hot_spots_are_no_contradiction),
        cmocka_unit_test(test_the_end_of_zth_is_held_against_rth),
        cmocka_unit_test(test_a_normalised_zth_is_recognised),
        cmocka_unit_test(test_a_curve_for_a_duty_cycle_is_recognised),
        cmocka_unit_test(test_the_soa_must_lie_within_the_ratings),
        cmocka_unit_test(test_a_longer_pulse_is_never_allowed_more),
        cmocka_unit_test(test_the_left_edge_is_held_against_rdson),
        cmocka_unit_test(test_single_ratings_are_held_against_each_other),
        cmocka_unit_test(test_a_finding_states_both_numbers),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
