/* test_device_curves.c: claims about Rds(on) and Zth as a sheet states them. */
#include "device/on_resistance.h"
#include "support/bench.h"
#include "support/near.h"
#include "support/settings.h"

#include <stdio.h>

static double cold_at(const char *text, double gate_V)
{
    pf_part part;
    pf_part_init(&part);
    part_state(&part, text);
    double ohm = pf_on_resistance_at(&part, gate_V).cold_ohm;
    pf_part_clear(&part);
    return ohm;
}

static void test_rdson_is_that_of_the_highest_rated_drive_reached(void **state)
{
    (void)state;
    const char two[] = "rdson=4.5:0.006,10:0.004";
    assert_near(cold_at(two, 12), 0.004, 0);
    assert_near(cold_at(two, 10), 0.004, 0);
    assert_near(cold_at(two, 9.99), 0.006, 0);
    assert_near(cold_at(two, 4.5), 0.006, 0);
}

static void test_rdson_below_every_rated_drive_is_not_stated(void **state)
{
    (void)state;
    assert_not_stated(cold_at("rdson=4.5:0.006,10:0.004", 4.4));
    assert_not_stated(cold_at("rdson=", 10));
}

static void test_rdson_is_a_straight_line_to_its_hot_ratio(void **state)
{
    (void)state;
    pf_part part;
    pf_part_init(&part);
    part_state(&part, "rdson=10:0.004 rdson_hot_ratio=1.8 tj_max=175");
    pf_on_resistance r = pf_on_resistance_at(&part, 10);
    assert_near(pf_on_resistance_hot(&r, 25), 0.004, 1e-15);
    assert_near(pf_on_resistance_hot(&r, 175), 0.0072, 1e-12);
    assert_near(pf_on_resistance_hot(&r, 100), 0.0056, 1e-12);
    assert_false(r.ratio_assumed);
    pf_part_clear(&part);
}

static void test_hot_ratio_2_is_assumed_and_said(void **state)
{
    (void)state;
    pf_part part;
    pf_part_init(&part);
    part_state(&part, "rdson=10:0.004 tj_max=175");
    pf_on_resistance r = pf_on_resistance_at(&part, 10);
    assert_true(r.ratio_assumed);
    assert_near(pf_on_resistance_hot(&r, 175), 0.008, 1e-12);
    pf_part_clear(&part);
}

/* As a user would read it: the junction's rise after 1 W for a time, in K/W. */
static double zth_at(const char *text, double time_s)
{
    bench b;
    char changes[512], profile[256];
    snprintf(changes, sizeof changes, "foster= rth_jc= %s", text);
    snprintf(profile, sizeof profile,
             "supply_voltage=1 fault_current=1 fault_time=%.17g start_from=ambient "
             "ambient_temperature=0",
             time_s);
    bench_run(&b, changes, profile);
    double rise_K = bench_outcome(&b, PF_SHORT_AT_START)->peak_junction_degC;
    bench_clear(&b);
    return rise_K;
}

static const char points[] = "zth=1e-4:0.02,1e-2:0.3,1:0.8";

static void test_zth_meets_its_points(void **state)
{
    (void)state;
    assert_near(zth_at(points, 1e-4), 0.02, 1e-12);
    assert_near(zth_at(points, 1e-2), 0.3, 1e-12);
    assert_near(zth_at(points, 1), 0.8, 1e-12);
}

static void test_zth_is_a_power_law_between_points(void **state)
{
    (void)state;
    assert_near(zth_at(points, 1e-3), sqrt(0.02 * 0.3), 1e-12);
    assert_near(zth_at(points, 0.1), sqrt(0.3 * 0.8), 1e-12);
}

/* Carslaw & Jaeger, Conduction of Heat in Solids, 1959, 2.9: semi-infinite solid. */
static void test_zth_below_its_first_point_grows_with_the_square_root_of_time(void **state)
{
    (void)state;
    assert_near(zth_at(points, 1e-6), 0.002, 1e-12);
    assert_near(zth_at(points, 2.5e-5), 0.01, 1e-12);
}

static void test_zth_beyond_its_last_point_is_the_larger_of_it_and_rth(void **state)
{
    (void)state;
    assert_near(zth_at(points, 50), 0.8, 1e-12);
    assert_near(zth_at("zth=1e-4:0.02,1:0.8 rth_jc=1.1", 50), 1.1, 1e-12);
    assert_near(zth_at("zth=1e-4:0.02,1:0.8 rth_jc=0.7", 50), 0.8, 1e-12);
    assert_near(zth_at("zth=1e-4:0.02,1:0.8 rth_jc=1.1", 1), 0.8, 1e-12);
}

static void test_foster_pairs_sum_their_exponentials(void **state)
{
    (void)state;
    double expected = 0.4 * (1 - exp(-0.5)) + 0.6 * (1 - exp(-0.05));
    assert_near(zth_at("foster=0.4:1e-2,0.6:0.1", 5e-3), expected, 1e-12);
    assert_near(zth_at("foster=0.4:1e-2,0.6:0.1", 1e6), 1, 1e-12);
}

static void test_zth_that_is_not_stated_is_not_a_number(void **state)
{
    (void)state;
    assert_not_stated(zth_at("rth_jc=1", 1e-3));
}

static void test_junction_to_case_goes_before_junction_to_ambient(void **state)
{
    (void)state;
    assert_near(zth_at("zth=1:1 zth_ambient=1:20 rth_ja=40", 1), 1, 1e-12);
    assert_near(zth_at("zth_ambient=1:20 rth_jc=1 rth_ja=40", 1), 20, 1e-12);
    assert_near(zth_at("zth_ambient=1:20 rth_jc=1 rth_ja=40", 10), 40, 1e-12);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_rdson_is_that_of_the_highest_rated_drive_reached),
        cmocka_unit_test(test_rdson_below_every_rated_drive_is_not_stated),
        cmocka_unit_test(test_rdson_is_a_straight_line_to_its_hot_ratio),
        cmocka_unit_test(test_hot_ratio_2_is_assumed_and_said),
        cmocka_unit_test(test_zth_meets_its_points),
        cmocka_unit_test(test_zth_is_a_power_law_between_points),
        cmocka_unit_test(test_zth_below_its_first_point_grows_with_the_square_root_of_time),
        cmocka_unit_test(test_zth_beyond_its_last_point_is_the_larger_of_it_and_rth),
        cmocka_unit_test(test_foster_pairs_sum_their_exponentials),
        cmocka_unit_test(test_zth_that_is_not_stated_is_not_a_number),
        cmocka_unit_test(test_junction_to_case_goes_before_junction_to_ambient),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
