/* test_stress_events.c: claims about every event of a profile, each against its hand calculation.
 */
#include "support/bench.h"
#include "support/near.h"

/* The bench's SOA at 12 V: 1 ms and 10 ms lines beyond 10 V, and DC. */
static double soa_12V(double time_s)
{
    double decade = log10(1.2);
    double one_ms = 150 * pow(6 / 150.0, decade), ten_ms = 50 * pow(1.5 / 50, decade);
    return one_ms * pow(ten_ms / one_ms, log10(time_s / 1e-3));
}

/* The bench's Foster pairs. */
static double zth(double time_s)
{
    return 0.05 * -expm1(-time_s / 1e-4) + 0.15 * -expm1(-time_s / 2e-3) +
           0.3 * -expm1(-time_s / 5e-2);
}

static void test_short_at_start_is_the_usual_hand_calculation(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "start_from=ambient fault_current=8");
    const pf_outcome *o = bench_outcome(&b, PF_SHORT_AT_START);
    assert_near(o->start_degC, 40, 0);
    assert_near(o->soa_margin, soa_12V(5e-3) / 8 * (175 - 40) / 150, 1e-9);
    assert_near(o->peak_junction_degC, 40 + 96 * zth(5e-3), 1e-9);
    assert_near(o->worst_time_s, 5e-3, 1e-9);
    assert_near(o->peak_current_A, 8, 0);
    assert_near(o->energy_J, 96 * 5e-3, 1e-12);
    bench_clear(&b);
}

static void test_short_running_starts_from_the_running_junction(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "start_from=ambient fault_current=8");
    const pf_outcome *o = bench_outcome(&b, PF_SHORT_RUNNING);
    assert_near(o->start_degC, b.stress->running_degC, 0);
    assert_near(o->soa_margin, soa_12V(5e-3) / 8 * (175 - b.stress->running_degC) / 150, 1e-9);
    bench_clear(&b);
}

static void test_starts_begin_from_the_running_junction_unless_from_ambient(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "");
    assert_near(bench_outcome(&b, PF_START_UP)->start_degC, b.stress->running_degC, 0);
    assert_near(bench_outcome(&b, PF_SHORT_AT_START)->start_degC, b.stress->running_degC, 0);
    bench_clear(&b);
    bench_run(&b, "", "start_from=ambient ambient_temperature=-10..50");
    assert_near(bench_outcome(&b, PF_START_UP)->start_degC, 50, 0);
    bench_clear(&b);
}

static void test_fault_current_follows_from_the_start_control(void **state)
{
    (void)state;
    const struct {
        const char *profile;
        double current;
    } expected[] = {
        {"fault_current=8", 8},
        {"", 5},
        {"start_control=power_limit power_limit=24", 2},
        {"start_control=power_limit power_limit=240", 5},
        {"start_control=foldback foldback_current=1.5", 1.5},
        {"start_control=slew output_slew=1e3", 5},
    };
    for (size_t i = 0; i < sizeof expected / sizeof *expected; i++) {
        bench b;
        bench_run(&b, "", expected[i].profile);
        assert_near(bench_outcome(&b, PF_SHORT_RUNNING)->peak_current_A, expected[i].current,
                    1e-12);
        bench_clear(&b);
    }
}

static void test_trip_is_a_rectangle_of_its_own_and_only_when_given(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "trip_current=60 trip_time=2e-3");
    const pf_outcome *o = bench_outcome(&b, PF_TRIP);
    assert_near(o->soa_margin, soa_12V(2e-3) / 60 * (175 - b.stress->running_degC) / 150, 1e-9);
    assert_near(o->peak_junction_degC, b.stress->running_degC + 720 * zth(2e-3), 1e-9);
    bench_clear(&b);
    bench_run(&b, "", "");
    for (size_t i = 0; i < pf_plan_slots(b.plan); i++) {
        pf_event event = pf_plan_event(b.plan, i);
        assert_true(event == PF_RUNNING || event == PF_START_UP || event == PF_SHORT_AT_START ||
                    event == PF_SHORT_RUNNING);
    }
    bench_clear(&b);
}

static void test_supply_step_recharges_from_the_step_with_the_running_load(void **state)
{
    (void)state;
    bench b; /* references.md: 24 -> 60 V, 2200 uF, 2 A limit, 1 A load on: 79.2 ms, 2.85 J */
    bench_run(&b, "",
              "supply_voltage=24..60 supply_step_from=24 output_capacitance=2200e-6 "
              "current_limit=2 running_current=1 fault_time=0.2");
    const pf_outcome *o = bench_outcome(&b, PF_SUPPLY_STEP);
    assert_near(o->duration_s, 79.2e-3, 1e-9);
    assert_near(o->energy_J, 2.8512, 1e-9);
    assert_near(o->start_degC, b.stress->running_degC, 0);
    bench_clear(&b);
}

static void test_supply_step_under_slew_is_limited_by_the_current_limit(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "start_control=slew output_slew=1e3 supply_step_from=6 running_current=1");
    assert_near(bench_outcome(&b, PF_SUPPLY_STEP)->duration_s, 1e-3 * 6 / 4, 1e-9);
    bench_clear(&b);
}

static void test_supply_step_under_slew_without_a_limit_is_unassessed(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "",
              "start_control=slew output_slew=1e3 supply_step_from=6 current_limit= "
              "fault_current=8");
    const pf_outcome *o = bench_outcome(&b, PF_SUPPLY_STEP);
    assert_int_equal(o->cause, PF_CAUSE_NO_LIMIT);
    assert_not_stated(o->soa_margin);
    assert_int_equal(b.assessment.verdict, PF_UNASSESSED);
    bench_clear(&b);
}

static void test_turn_off_without_clamp_is_avalanche_energy_with_the_bv_factor(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "supply_inductance=1e-6..2e-6 fault_current=30 supply_voltage=10..20");
    const pf_outcome *o = bench_outcome(&b, PF_TURN_OFF);
    assert_near(o->avalanche_J, 0.5 * 2e-6 * 900 * 100 / 80.0, 1e-12);
    assert_near(o->avalanche_limit_J, 0.5 * (175 - b.stress->running_degC) / 150, 1e-12);
    assert_not_stated(o->soa_margin);
    assert_int_equal(bench_check(&b, PF_CHECK_AVALANCHE, bench_slot(&b, PF_TURN_OFF))->verdict,
                     PF_PASS);
    bench_clear(&b);
}

static void test_turn_off_takes_the_larger_of_fault_and_trip_current(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "supply_inductance=1e-6 trip_current=60 trip_time=1e-5");
    const pf_outcome *o = bench_outcome(&b, PF_TURN_OFF);
    assert_near(o->peak_current_A, 60, 0);
    assert_near(o->avalanche_J, 0.5e-6 * 3600 * 100 / 88.0, 1e-12);
    assert_true(b.stress->remarks & PF_REMARK_AVALANCHE_CURRENT);
    bench_clear(&b);
}

static void test_turn_off_over_the_avalanche_energy_fails(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "avalanche_energy=1e-6", "supply_inductance=1e-6 fault_current=30");
    assert_int_equal(bench_check(&b, PF_CHECK_AVALANCHE, bench_slot(&b, PF_TURN_OFF))->verdict,
                     PF_FAIL);
    assert_int_equal(b.assessment.verdict, PF_FAIL);
    bench_clear(&b);
}

static void test_turn_off_with_a_clamp_holds_its_voltage_against_vds_max(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "avalanche_energy=", "supply_inductance=1e-6 clamp_voltage=60..79");
    assert_null(bench_check(&b, PF_CHECK_AVALANCHE, bench_slot(&b, PF_TURN_OFF)));
    assert_near(bench_check(&b, PF_CHECK_VDS, -1)->value, 79, 0);
    assert_int_equal(b.assessment.verdict, PF_PASS);
    bench_clear(&b);
    bench_run(&b, "", "supply_inductance=1e-6 clamp_voltage=60..81");
    assert_int_equal(bench_check(&b, PF_CHECK_VDS, -1)->verdict, PF_FAIL);
    bench_clear(&b);
}

static void test_turn_off_at_a_supply_above_vds_max_is_without_bound(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "vds_max=10", "supply_inductance=1e-6 fault_current=30");
    assert_true(isinf(bench_outcome(&b, PF_TURN_OFF)->avalanche_J));
    assert_int_equal(b.assessment.verdict, PF_FAIL);
    bench_clear(&b);
}

static void test_recorded_rectangle_is_the_short_of_the_same_size(void **state)
{
    (void)state;
    const double t[] = {1, 1 + 5e-3}, v[] = {12, 12}, i[] = {8, 8};
    const pf_capture capture = {"scope", 2, t, v, i};
    bench b;
    bench_run_capture(&b, "", "fault_current=8", &capture);
    const pf_outcome *rectangle = bench_outcome(&b, PF_SHORT_RUNNING);
    const pf_outcome *recorded = bench_outcome(&b, PF_RECORDED);
    assert_string_equal(pf_plan_event_name(b.plan, (size_t)bench_slot(&b, PF_RECORDED)), "scope");
    assert_near(recorded->soa_margin, rectangle->soa_margin, 3e-3);
    assert_near(recorded->peak_junction_degC, rectangle->peak_junction_degC, 1e-3);
    assert_near(recorded->duration_s, 5e-3, 1e-9);
    assert_near(recorded->energy_J, 0.48, 1e-9);
    bench_clear(&b);
}

static void test_noise_below_zero_in_a_recording_counts_as_zero(void **state)
{
    (void)state;
    const double t[] = {0, 1e-3, 2e-3, 3e-3}, v[] = {12, 12, -0.1, -0.1}, i[] = {8, 8, -0.2, 0};
    const pf_capture capture = {"scope", 4, t, v, i};
    bench b;
    bench_run_capture(&b, "", "", &capture);
    assert_near(bench_outcome(&b, PF_RECORDED)->energy_J, 96 * (1e-3 + 1e-3 / 3), 1e-9);
    bench_clear(&b);
}

static void test_a_recording_that_cannot_be_one_is_refused(void **state)
{
    (void)state;
    const double t[] = {0, 1e-3, 1e-3}, v[] = {12, 12, 0}, i[] = {8, 8, 0};
    const pf_capture one = {"one", 1, t, v, i}, still = {"still", 3, t, v, i};
    bench b;
    bench_run(&b, "", "");
    pf_plan *plan;
    pf_error error = {0};
    assert_int_equal(pf_plan_new(&b.profile, &one, 1, &plan, &error), PF_BAD_ARGUMENT);
    assert_int_equal(pf_plan_new(&b.profile, &still, 1, &plan, &error), PF_BAD_ARGUMENT);
    assert_null(plan);
    bench_clear(&b);
}

static void test_the_parts_margin_is_its_worst_events(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "trip_current=350 trip_time=5e-3");
    double worst = INFINITY;
    for (size_t i = 0; i < b.stress->count; i++)
        worst = fmin(worst, b.stress->outcome[i].soa_margin);
    assert_near(b.stress->soa_margin, worst, 0);
    assert_int_equal(b.stress->limiting_slot, bench_slot(&b, PF_TRIP));
    bench_clear(&b);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_short_at_start_is_the_usual_hand_calculation),
        cmocka_unit_test(test_short_running_starts_from_the_running_junction),
        cmocka_unit_test(test_starts_begin_from_the_running_junction_unless_from_ambient),
        cmocka_unit_test(test_fault_current_follows_from_the_start_control),
        cmocka_unit_test(test_trip_is_a_rectangle_of_its_own_and_only_when_given),
        cmocka_unit_test(test_supply_step_recharges_from_the_step_with_the_running_load),
        cmocka_unit_test(test_supply_step_under_slew_is_limited_by_the_current_limit),
        cmocka_unit_test(test_supply_step_under_slew_without_a_limit_is_unassessed),
        cmocka_unit_test(test_turn_off_without_clamp_is_avalanche_energy_with_the_bv_factor),
        cmocka_unit_test(test_turn_off_takes_the_larger_of_fault_and_trip_current),
        cmocka_unit_test(test_turn_off_over_the_avalanche_energy_fails),
        cmocka_unit_test(test_turn_off_with_a_clamp_holds_its_voltage_against_vds_max),
        cmocka_unit_test(test_turn_off_at_a_supply_above_vds_max_is_without_bound),
        cmocka_unit_test(test_recorded_rectangle_is_the_short_of_the_same_size),
        cmocka_unit_test(test_noise_below_zero_in_a_recording_counts_as_zero),
        cmocka_unit_test(test_a_recording_that_cannot_be_one_is_refused),
        cmocka_unit_test(test_the_parts_margin_is_its_worst_events),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
