/* test_device_soa.c: claims about the safe operating area: its curves and, above all, its edges.
**
** Read as a user would: a short of 1 A from 25 degC on a part whose T_j,max is 175 degC and whose
** SOA is measured at 25 degC has a margin that is the current allowed in A.
*/
#include "support/bench.h"
#include "support/near.h"

#include <stdio.h>

/* The part has no Zth unless part states one. */
static double soa_current(const char *part, const char *more, double vds_V, double time_s)
{
    char changes[512], profile[512];
    snprintf(changes, sizeof changes, "foster= %s", part);
    snprintf(profile, sizeof profile,
             "fault_current=1 start_from=ambient ambient_temperature=25 supply_voltage=%.17g "
             "fault_time=%.17g %s",
             vds_V, time_s, more);
    return bench_margin(changes, profile, PF_SHORT_AT_START);
}

static double current_at(const char *part, double vds_V, double time_s)
{
    return soa_current(part, "", vds_V, time_s);
}

static double extended_at(const char *part, double vds_V, double time_s)
{
    return soa_current(part, "beyond_soa=extend", vds_V, time_s);
}

#define TWO "soa=1e-3/1:400,10:100,60:8;1e-2/1:400,10:40,60:2.5"
#define WITH_DC TWO ";dc/1:120,10:1,60:0.3"

static void test_soa_meets_its_points(void **state)
{
    (void)state;
    assert_near(current_at(TWO, 10, 1e-3), 100, 1e-12);
    assert_near(current_at(TWO, 60, 1e-2), 2.5, 1e-12);
}

static void test_soa_is_a_power_law_in_voltage(void **state)
{
    (void)state;
    assert_near(current_at(TWO, sqrt(10), 1e-3), 200, 1e-12);
    assert_near(current_at(TWO, sqrt(600), 1e-3), sqrt(800), 1e-12);
}

/* TI SLUAAO2: I(t) = a t^m between two pulse widths. */
static void test_soa_is_a_power_law_in_time_between_two_curves(void **state)
{
    (void)state;
    assert_near(current_at(TWO, 10, 2e-3), 100 * pow(2, log10(0.4)), 1e-12);
    assert_near(current_at(TWO, 10, sqrt(1e-5)), sqrt(4000), 1e-12);
}

static void test_soa_gives_no_credit_below_the_shortest_curve(void **state)
{
    (void)state;
    assert_near(current_at(TWO, 10, 1e-4), 100, 1e-12);
    assert_near(current_at(TWO, 10, 1e-9), 100, 1e-12);
}

static void test_left_flank_is_the_highest_current_not_the_line_to_it(void **state)
{
    (void)state;
    const char flank[] = "soa=1e-3/0.05:5,0.5:50,4:400,10:400,60:8";
    assert_near(current_at(flank, 0.05, 1e-3), 400, 1e-12);
    assert_near(current_at(flank, 3.9, 1e-3), 400, 1e-12);
    assert_near(current_at(flank, 1e-6, 1e-3), 400, 1e-12);
    assert_near(current_at(flank, 8, 1e-3), 400, 1e-12);
}

static void test_left_of_the_first_point_its_current_goes_on(void **state)
{
    (void)state;
    assert_near(current_at(TWO, 0.2, 1e-3), 400, 1e-12);
}

static void test_right_end_may_be_read_half_a_per_cent_further(void **state)
{
    (void)state;
    double slope = log(8 / 100.0) / log(6);
    assert_near(current_at(TWO, 60 * 1.005, 1e-3), 8 * pow(1.005, slope), 1e-9);
    assert_double(current_at(TWO, 60 * 1.005, 1e-3), <, 8);
    assert_not_stated(current_at(TWO, 60 * 1.0051, 1e-3));
    assert_not_stated(current_at(TWO, 80, 1e-3));
}

static void test_right_end_that_rises_is_not_followed_upwards(void **state)
{
    (void)state;
    assert_near(current_at("soa=1e-3/1:100,10:20,60:30", 60.2, 1e-3), 30, 1e-12);
}

static void test_between_curves_both_must_reach_the_voltage(void **state)
{
    (void)state;
    const char uneven[] = "soa=1e-3/1:400,60:8;1e-2/1:400,40:2.5";
    assert_not_stated(current_at(uneven, 50, 2e-3));
    assert_near(current_at(uneven, 60, 1e-3), 8, 1e-12);
    assert_not_stated(current_at(uneven, 50, 1e-2));
}

static void test_vertical_edge_counts_by_its_upper_end(void **state)
{
    (void)state;
    assert_near(current_at("soa=1e-3/1:100,40:5,40:1,40:0.1", 40, 1e-3), 5, 1e-12);
}

static void test_two_currents_at_an_inner_voltage_count_by_the_smaller(void **state)
{
    (void)state;
    assert_near(current_at("soa=1e-3/1:100,10:20,10:12,40:5", 10, 1e-3), 12, 1e-12);
}

static void test_curve_of_one_point_reaches_from_0_to_it(void **state)
{
    (void)state;
    assert_near(current_at("soa=1e-3/30:4", 2, 1e-3), 4, 1e-12);
    assert_not_stated(current_at("soa=1e-3/30:4", 31, 1e-3));
}

static void test_beyond_longest_without_dc_line_is_not_stated(void **state)
{
    (void)state;
    assert_not_stated(current_at(TWO, 10, 2e-2));
    assert_not_stated(current_at(TWO " zth=1e-3:0.1,1:1", 10, 2e-2));
}

static void test_beyond_longest_without_zth_is_the_dc_line(void **state)
{
    (void)state;
    assert_near(current_at(WITH_DC, 10, 1.01e-2), 1, 1e-12);
    assert_near(current_at(WITH_DC, 10, 100), 1, 1e-12);
}

static void test_beyond_longest_the_slope_in_time_rules_where_it_falls_faster(void **state)
{
    (void)state;
    double m = log10(0.4);
    assert_near(current_at(WITH_DC " zth=1e-3:0.1,1e-2:0.2,1:0.4", 10, 2e-2), 40 * pow(2, m),
                1e-12);
}

static void test_beyond_longest_zth_rules_where_it_falls_faster(void **state)
{
    (void)state;
    assert_near(current_at(WITH_DC " zth=1e-3:0.1,1e-2:0.1,1:10", 10, 2e-2), 40 / 2.0, 1e-12);
}

static void test_beyond_longest_with_one_curve_zth_alone_rules(void **state)
{
    (void)state;
    const char one[] = "soa=1e-2/1:400,10:40,60:2.5;dc/1:120,10:1,60:0.3 zth=1e-2:0.1,1:1";
    assert_near(current_at(one, 10, 4e-2), 20, 1e-12);
}

static void test_beyond_longest_is_never_below_the_dc_line(void **state)
{
    (void)state;
    assert_near(current_at(WITH_DC " zth=1e-3:0.1,1e-2:0.2,1:2", 10, 1e3), 1, 1e-12);
}

static void test_beyond_longest_is_never_above_the_longest_curve(void **state)
{
    (void)state;
    const char high_dc[] = TWO ";dc/1:400,10:70,60:9 zth=1e-3:0.1,1e-2:0.2,1:2";
    assert_near(current_at(high_dc, 10, 0.1), 40, 1e-12);
}

static void test_a_longer_pulse_is_never_allowed_more_than_a_shorter_one(void **state)
{
    (void)state;
    const char rising[] = "soa=1e-3/10:30;1e-2/10:40;dc/10:35";
    assert_near(current_at(rising, 10, 1e-3), 30, 1e-12);
    assert_near(current_at(rising, 10, 1e-2), 30, 1e-12);
    assert_near(current_at(rising, 10, 0.1), 30, 1e-12);
}

static void test_beyond_longest_needs_the_dc_line_at_that_voltage(void **state)
{
    (void)state;
    assert_not_stated(current_at(TWO ";dc/1:120,8:1 zth=1e-2:0.2,1:1", 10, 0.1));
}

static void test_extend_takes_the_faster_fall_without_a_dc_line(void **state)
{
    (void)state;
    const char steep[] = TWO " zth=1e-3:0.1,1e-2:0.1,1:10";
    assert_near(extended_at(steep, 10, 2e-2), 20, 1e-12);
    const char flat[] = TWO " zth=1e-3:0.1,1e-2:0.2,1:0.4";
    assert_near(extended_at(flat, 10, 2e-2), 40 * pow(2, log10(0.4)), 1e-12);
}

static void test_extend_without_zth_is_not_stated(void **state)
{
    (void)state;
    assert_not_stated(extended_at(TWO, 10, 2e-2));
}

static void test_a_dc_line_alone_holds_for_every_pulse(void **state)
{
    (void)state;
    assert_near(current_at("soa=dc/1:120,10:1", 10, 1e-6), 1, 1e-12);
    assert_near(current_at("soa=dc/1:120,10:1", 10, 1e6), 1, 1e-12);
}

#define HOT "soa=1e-3/1:100;1e-3@75/1:60;1e-3@125/1:30"

/* (T_allow - T_start)/(T_j,max - T_ref) times the current of the family that was taken, per A. */
static double family_margin(const char *part, double start_degC)
{
    char ambient[64];
    snprintf(ambient, sizeof ambient, "ambient_temperature=%g", start_degC);
    return soa_current(part, ambient, 1, 1e-3);
}

static void test_family_is_the_hottest_not_above_the_start(void **state)
{
    (void)state;
    assert_near(family_margin(HOT, 30), 100.0 * (175 - 30) / 150, 1e-12);
    assert_near(family_margin(HOT, 74.9), 100.0 * (175 - 74.9) / 150, 1e-12);
    assert_near(family_margin(HOT, 75), 60.0 * (175 - 75) / 100, 1e-12);
    assert_near(family_margin(HOT, 124), 60.0 * (175 - 124) / 100, 1e-12);
    assert_near(family_margin(HOT, 160), 30.0 * (175 - 160) / 50, 1e-12);
}

static void test_family_below_all_is_the_coldest(void **state)
{
    (void)state;
    assert_near(family_margin(HOT, -40), 100.0 * (175 + 40) / 150, 1e-12);
    assert_near(family_margin("soa=1e-3@75/1:60", 25), 60.0 * (175 - 25) / 100, 1e-12);
}

static void test_a_hot_family_is_remarked(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, HOT " rdson=10:0.004", "ambient_temperature=80 running_current=0");
    assert_true(b.stress->remarks & PF_REMARK_HOT_FAMILY);
    bench_clear(&b);
    bench_run(&b, HOT, "ambient_temperature=30 running_current=0");
    assert_false(b.stress->remarks & PF_REMARK_HOT_FAMILY);
    bench_clear(&b);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_soa_meets_its_points),
        cmocka_unit_test(test_soa_is_a_power_law_in_voltage),
        cmocka_unit_test(test_soa_is_a_power_law_in_time_between_two_curves),
        cmocka_unit_test(test_soa_gives_no_credit_below_the_shortest_curve),
        cmocka_unit_test(test_left_flank_is_the_highest_current_not_the_line_to_it),
        cmocka_unit_test(test_left_of_the_first_point_its_current_goes_on),
        cmocka_unit_test(test_right_end_may_be_read_half_a_per_cent_further),
        cmocka_unit_test(test_right_end_that_rises_is_not_followed_upwards),
        cmocka_unit_test(test_between_curves_both_must_reach_the_voltage),
        cmocka_unit_test(test_vertical_edge_counts_by_its_upper_end),
        cmocka_unit_test(test_two_currents_at_an_inner_voltage_count_by_the_smaller),
        cmocka_unit_test(test_curve_of_one_point_reaches_from_0_to_it),
        cmocka_unit_test(test_beyond_longest_without_dc_line_is_not_stated),
        cmocka_unit_test(test_beyond_longest_without_zth_is_the_dc_line),
        cmocka_unit_test(test_beyond_longest_the_slope_in_time_rules_where_it_falls_faster),
        cmocka_unit_test(test_beyond_longest_zth_rules_where_it_falls_faster),
        cmocka_unit_test(test_beyond_longest_with_one_curve_zth_alone_rules),
        cmocka_unit_test(test_beyond_longest_is_never_below_the_dc_line),
        cmocka_unit_test(test_beyond_longest_is_never_above_the_longest_curve),
        cmocka_unit_test(test_a_longer_pulse_is_never_allowed_more_than_a_shorter_one),
        cmocka_unit_test(test_beyond_longest_needs_the_dc_line_at_that_voltage),
        cmocka_unit_test(test_extend_takes_the_faster_fall_without_a_dc_line),
        cmocka_unit_test(test_extend_without_zth_is_not_stated),
        cmocka_unit_test(test_a_dc_line_alone_holds_for_every_pulse),
        cmocka_unit_test(test_family_is_the_hottest_not_above_the_start),
        cmocka_unit_test(test_family_below_all_is_the_coldest),
        cmocka_unit_test(test_a_hot_family_is_remarked),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
