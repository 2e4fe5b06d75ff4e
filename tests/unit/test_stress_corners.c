/* test_stress_corners.c: claims about which corners of the min/max intervals are looked at. */
#include "support/bench.h"
#include "support/near.h"

#include <string.h>

static void test_a_profile_without_intervals_has_one_corner_per_event(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "trip_current=9 trip_time=1e-4 retry_interval=1 supply_inductance=1e-7");
    for (size_t i = 0; i < pf_plan_slots(b.plan); i++)
        assert_int_equal(pf_plan_corners(b.plan, i), 1);
    bench_clear(&b);
}

/* Every event has as many corners as 2 to the number of intervals that it depends on. */
static void test_corners_are_all_combinations_of_what_the_event_depends_on(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "",
              "supply_voltage=11..13 output_capacitance=1e-3..2e-3 current_limit=4..6 "
              "start_load_current=0..1 fault_time=2e-2..3e-2 running_current=1..2 "
              "ambient_temperature=0..50 trip_current=20..30 trip_time=1e-5..2e-5 "
              "retry_interval=1..2 supply_inductance=1e-7..2e-7 supply_step_from=5..6");
    const struct {
        pf_event event;
        unsigned corners;
    } expected[] = {
        {PF_RUNNING, 1}, /* worst side known: all at their maximum */
        {PF_START_UP, 16}, {PF_SHORT_AT_START, 8}, {PF_SHORT_RUNNING, 8}, {PF_TRIP, 8},
        {PF_RETRY, 8},     {PF_SUPPLY_STEP, 16},   {PF_TURN_OFF, 16},
    };
    for (size_t i = 0; i < sizeof expected / sizeof *expected; i++) {
        size_t slot = (size_t)bench_slot(&b, expected[i].event);
        if (pf_plan_corners(b.plan, slot) != expected[i].corners)
            fail_msg("%s has %u corners, expected %u", pf_event_text(expected[i].event),
                     pf_plan_corners(b.plan, slot), expected[i].corners);
    }
    bench_clear(&b);
}

static void test_every_combination_appears_once(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "supply_voltage=11..13 current_limit=4..6 fault_time=2e-2..3e-2");
    size_t slot = (size_t)bench_slot(&b, PF_SHORT_RUNNING);
    bool seen[8] = {false};
    for (unsigned c = 0; c < 8; c++) {
        double v = pf_plan_corner_value(b.plan, slot, c, PF_SUPPLY_VOLTAGE);
        double i = pf_plan_corner_value(b.plan, slot, c, PF_CURRENT_LIMIT);
        double t = pf_plan_corner_value(b.plan, slot, c, PF_FAULT_TIME);
        assert_true((v == 11 || v == 13) && (i == 4 || i == 6) && (t == 2e-2 || t == 3e-2));
        seen[(v == 13) + 2 * (i == 6) + 4 * (t == 3e-2)] = true;
    }
    for (int i = 0; i < 8; i++)
        assert_true(seen[i]);
    bench_clear(&b);
}

static void test_a_corner_value_that_the_event_does_not_depend_on_is_not_stated(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "");
    size_t slot = (size_t)bench_slot(&b, PF_SHORT_RUNNING);
    assert_not_stated(pf_plan_corner_value(b.plan, slot, 0, PF_OUTPUT_CAPACITANCE));
    assert_not_stated(pf_plan_corner_value(b.plan, slot, 0, PF_RUNNING_CURRENT));
    bench_clear(&b);
}

static void test_the_worst_corner_of_a_short_is_all_at_maximum(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "supply_voltage=11..13 current_limit=4..6 fault_time=2e-2..3e-2");
    size_t slot = (size_t)bench_slot(&b, PF_SHORT_RUNNING);
    unsigned corner = bench_outcome(&b, PF_SHORT_RUNNING)->corner;
    assert_near(pf_plan_corner_value(b.plan, slot, corner, PF_SUPPLY_VOLTAGE), 13, 0);
    assert_near(pf_plan_corner_value(b.plan, slot, corner, PF_CURRENT_LIMIT), 6, 0);
    assert_near(pf_plan_corner_value(b.plan, slot, corner, PF_FAULT_TIME), 3e-2, 0);
    bench_clear(&b);
}

/* The margin of the interval is that of the worst of its corners as profiles of their own. */
static void test_the_margin_of_a_box_is_that_of_its_worst_corner(void **state)
{
    (void)state;
    static const char *const side[3][2] = {
        {"supply_voltage=11 ", "supply_voltage=13 "},
        {"output_capacitance=1e-3 ", "output_capacitance=2e-3 "},
        {"current_limit=2 ", "current_limit=6 "},
    };
    double worst = INFINITY;
    for (int c = 0; c < 8; c++) {
        char text[256] = "start_from=ambient ";
        for (int i = 0; i < 3; i++)
            strcat(text, side[i][c >> i & 1]);
        worst = fmin(worst, bench_margin("", text, PF_START_UP));
    }
    double box = bench_margin("",
                              "start_from=ambient supply_voltage=11..13 "
                              "output_capacitance=1e-3..2e-3 current_limit=2..6",
                              PF_START_UP);
    assert_near(box, worst, 2e-3);
}

static void test_peak_junction_is_the_highest_over_all_corners(void **state)
{
    (void)state;
    bench box, hot;
    bench_run(&box, "", "current_limit=2..6");
    bench_run(&hot, "", "current_limit=6");
    assert_near(bench_outcome(&box, PF_SHORT_RUNNING)->peak_junction_degC,
                bench_outcome(&hot, PF_SHORT_RUNNING)->peak_junction_degC, 1e-12);
    bench_clear(&box);
    bench_clear(&hot);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_a_profile_without_intervals_has_one_corner_per_event),
        cmocka_unit_test(test_corners_are_all_combinations_of_what_the_event_depends_on),
        cmocka_unit_test(test_every_combination_appears_once),
        cmocka_unit_test(test_a_corner_value_that_the_event_does_not_depend_on_is_not_stated),
        cmocka_unit_test(test_the_worst_corner_of_a_short_is_all_at_maximum),
        cmocka_unit_test(test_the_margin_of_a_box_is_that_of_its_worst_corner),
        cmocka_unit_test(test_peak_junction_is_the_highest_over_all_corners),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
