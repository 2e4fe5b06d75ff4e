/* test_stress_stall.c: claims about cards that never start or are cut off by their own timer. */
#include "support/bench.h"
#include "support/near.h"

#include <string.h>

static bool stalls(const char *profile, const char *words)
{
    bench b;
    bench_run(&b, "", profile);
    const char *stall = pf_plan_stall(b.plan);
    bool found = stall && strstr(stall, words);
    if (stall && !found) print_message("stall: %s\n", stall);
    bench_clear(&b);
    return found;
}

static bool starts(const char *profile)
{
    bench b;
    bench_run(&b, "", profile);
    bool never = pf_plan_stall(b.plan) != NULL;
    bench_clear(&b);
    return !never;
}

static void test_load_as_large_as_the_limit_sticks_at_once(void **state)
{
    (void)state;
    assert_true(stalls("start_load_current=5", "sticks at 0 V"));
    assert_true(starts("start_load_current=4.9 fault_time=1"));
}

static void test_resistor_sticks_where_it_takes_the_limit(void **state)
{
    (void)state;
    assert_true(stalls("start_load_resistance=2", "sticks at 10 V"));
    assert_true(starts("start_load_resistance=2.5 fault_time=1"));
}

static void test_load_above_a_voltage_sticks_there(void **state)
{
    (void)state;
    assert_true(stalls("start_load_current=6 start_load_above=7", "sticks at 7 V"));
}

static void test_constant_power_from_0_volt_sticks_at_0(void **state)
{
    (void)state;
    assert_true(stalls("start_load_power=1", "sticks at 0 V"));
}

static void test_constant_power_above_a_voltage_sticks_where_it_takes_the_limit(void **state)
{
    (void)state;
    assert_true(stalls("start_load_power=40 start_load_above=6", "sticks at 6 V"));
    assert_true(starts("start_load_power=40 start_load_above=8.1 fault_time=1"));
}

static void test_foldback_sticks_where_the_load_line_crosses(void **state)
{
    (void)state;
    /* 1 + V/3 meets V/2 at 6 V */
    assert_true(stalls("start_control=foldback foldback_current=1 start_load_resistance=2",
                       "sticks at 6 V"));
    assert_true(
        stalls("start_control=foldback foldback_current=1 start_load_current=1", "sticks at 0 V"));
}

static void test_power_limit_sticks_where_its_current_is_below_the_load(void **state)
{
    (void)state;
    /* 20 W/12 V = 1.667 A at first */
    assert_true(
        stalls("start_control=power_limit power_limit=20 start_load_current=1.7", "sticks at 0 V"));
    assert_true(starts("start_control=power_limit power_limit=20 start_load_current=1.6 "
                       "fault_time=1"));
}

static void test_one_bad_corner_is_enough(void **state)
{
    (void)state;
    assert_true(stalls("current_limit=3..5 start_load_current=3.5", "sticks at 0 V"));
}

static void test_timer_cuts_off_a_start_longer_than_the_shortest_fault_time(void **state)
{
    (void)state;
    assert_true(stalls("fault_time=2e-3..8e-3", "timer"));
    assert_true(stalls("fault_time=2e-3..8e-3", "2.4 ms"));
    assert_true(starts("fault_time=2.5e-3..8e-3"));
}

static void test_slew_control_has_no_timer(void **state)
{
    (void)state;
    assert_true(starts("start_control=slew output_slew=1e3 fault_time=1e-3"));
}

static void test_recharge_after_a_supply_step_is_held_against_the_timer_too(void **state)
{
    (void)state;
    const char slow[] = "supply_step_from=4 running_current=4.5 fault_time=5e-3";
    assert_true(stalls(slow, "supply_step"));
    assert_true(starts("supply_step_from=4 running_current=2 fault_time=5e-3"));
}

static void test_supply_step_sticks_where_the_running_load_takes_all(void **state)
{
    (void)state;
    assert_true(stalls("supply_step_from=4 running_current=5", "sticks at 4 V"));
}

static void test_a_negative_supply_is_named_with_its_sign(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "");
    pf_profile profile = b.profile;
    bench_clear(&b);
    profile.value[PF_START_LOAD_RESISTANCE] = (pf_interval){2, 2, 2};
    profile.stated[PF_START_LOAD_RESISTANCE] = true;
    profile.negative_supply = true;
    pf_plan *plan;
    assert_int_equal(pf_plan_new(&profile, NULL, 0, &plan, NULL), PF_OK);
    assert_non_null(strstr(pf_plan_stall(plan), "-10 V"));
    pf_plan_free(plan);
}

/* A start that ends late is evaluated whole. */
static void test_a_late_start_is_evaluated_whole(void **state)
{
    (void)state;
    bench late, early;
    bench_run(&late, "", "fault_time=1e-3");
    bench_run(&early, "", "fault_time=1");
    assert_near(bench_outcome(&late, PF_START_UP)->soa_margin,
                bench_outcome(&early, PF_START_UP)->soa_margin, 1e-12);
    bench_clear(&late);
    bench_clear(&early);
}

/* One that sticks is held at the sticking point until the longest fault time ends: a rectangle. */
static void test_a_start_stuck_at_0_is_the_short_of_the_longest_fault_time(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "start_load_current=5 fault_time=2e-3..8e-3");
    const pf_outcome *o = bench_outcome(&b, PF_START_UP);
    assert_near(o->duration_s, 8e-3, 1e-12);
    assert_near(o->energy_J, 60 * 8e-3, 1e-12);
    assert_near(o->soa_margin, bench_outcome(&b, PF_SHORT_AT_START)->soa_margin, 2e-3);
    bench_clear(&b);
}

static void test_a_start_stuck_higher_up_is_held_there(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "start_load_current=6 start_load_above=7 fault_time=0.1");
    const pf_outcome *o = bench_outcome(&b, PF_START_UP);
    double charging = 5 * (1e-3 / 5) * (7 * 12 - 24.5);
    assert_near(o->energy_J, charging + 25 * (0.1 - 1.4e-3), 1e-6);
    bench_clear(&b);
}

static void test_unbounded_current_into_constant_power_is_unassessed(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "",
              "start_control=slew output_slew=1e3 current_limit= fault_current=5 "
              "start_load_power=1");
    assert_non_null(pf_plan_stall(b.plan));
    const pf_outcome *o = bench_outcome(&b, PF_START_UP);
    assert_int_equal(o->cause, PF_CAUSE_UNBOUNDED_CURRENT);
    assert_int_equal(o->junction_cause, PF_CAUSE_UNBOUNDED_CURRENT);
    assert_not_stated(o->soa_margin);
    assert_not_stated(o->peak_current_A);
    assert_int_not_equal(b.assessment.verdict, PF_PASS);
    bench_clear(&b);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_load_as_large_as_the_limit_sticks_at_once),
        cmocka_unit_test(test_resistor_sticks_where_it_takes_the_limit),
        cmocka_unit_test(test_load_above_a_voltage_sticks_there),
        cmocka_unit_test(test_constant_power_from_0_volt_sticks_at_0),
        cmocka_unit_test(test_constant_power_above_a_voltage_sticks_where_it_takes_the_limit),
        cmocka_unit_test(test_foldback_sticks_where_the_load_line_crosses),
        cmocka_unit_test(test_power_limit_sticks_where_its_current_is_below_the_load),
        cmocka_unit_test(test_one_bad_corner_is_enough),
        cmocka_unit_test(test_timer_cuts_off_a_start_longer_than_the_shortest_fault_time),
        cmocka_unit_test(test_slew_control_has_no_timer),
        cmocka_unit_test(test_recharge_after_a_supply_step_is_held_against_the_timer_too),
        cmocka_unit_test(test_supply_step_sticks_where_the_running_load_takes_all),
        cmocka_unit_test(test_a_negative_supply_is_named_with_its_sign),
        cmocka_unit_test(test_a_late_start_is_evaluated_whole),
        cmocka_unit_test(test_a_start_stuck_at_0_is_the_short_of_the_longest_fault_time),
        cmocka_unit_test(test_a_start_stuck_higher_up_is_held_there),
        cmocka_unit_test(test_unbounded_current_into_constant_power_is_unassessed),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
