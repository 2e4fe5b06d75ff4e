/* test_stress_start_up.c: claims about starts: closed forms, loads, kinks.
**
** Closed forms from C dV/dt = I_D - I_load; the task asks for 0.1 % in duration and energy.
*/
#include "support/bench.h"
#include "support/near.h"

#include <string.h>

#define CLOSE 1e-3

/* A start of the bench's 12 V and 1000 uF, changed; its numbers at the worst corner. */
static pf_outcome start(const char *profile)
{
    bench b;
    bench_run(&b, "", profile);
    pf_outcome outcome = *bench_outcome(&b, PF_START_UP);
    assert_null(pf_plan_stall(b.plan));
    assert_near(pf_plan_slowest_start_s(b.plan), outcome.duration_s, 1e-12);
    bench_clear(&b);
    return outcome;
}

static void test_current_limit_charges_in_cv_over_i(void **state)
{
    (void)state;
    pf_outcome o = start("fault_time=1");
    assert_near(o.duration_s, 1e-3 * 12 / 5, 1e-9);
    assert_near(o.energy_J, 0.5 * 1e-3 * 144, 1e-9);
    assert_near(o.peak_power_W, 60, 1e-9);
    assert_near(o.peak_current_A, 5, 1e-9);
}

static void test_capacitor_alone_costs_half_c_v_squared_under_every_control(void **state)
{
    (void)state;
    static const char *const control[] = {
        "start_control=slew output_slew=1e3 current_limit= fault_current=5",
        "start_control=slew output_slew=1e3",
        "start_control=power_limit power_limit=20",
        "start_control=foldback foldback_current=1",
    };
    for (size_t i = 0; i < 4; i++)
        assert_near(start(control[i]).energy_J, 0.072, CLOSE);
}

static void test_current_limit_with_constant_load_charges_with_the_rest(void **state)
{
    (void)state;
    pf_outcome o = start("fault_time=1 start_load_current=2");
    assert_near(o.duration_s, 1e-3 * 12 / 3, 1e-9);
    assert_near(o.energy_J, 0.072 * 5 / 3, 1e-9);
}

static void test_current_limit_with_resistor_charges_logarithmically(void **state)
{
    (void)state;
    pf_outcome o = start("fault_time=1 start_load_resistance=4");
    double tau = 4 * 1e-3, end = tau * -log(1 - 12 / (5.0 * 4));
    assert_near(o.duration_s, end, 1e-6);
    double charge_Vs = 20 * (end - tau * (1 - exp(-end / tau))); /* integral of V_out */
    assert_near(o.energy_J, 5 * (12 * end - charge_Vs), 1e-6);
}

static void test_power_limit_charges_at_constant_power_then_constant_current(void **state)
{
    (void)state;
    pf_outcome o = start("start_control=power_limit current_limit=20 power_limit=100 fault_time=1");
    assert_near(o.duration_s, 0.5e-3 * (144 / 100.0 + 100 / 400.0), 1e-6);
    assert_near(o.peak_power_W, 100, 1e-9);
    assert_near(o.peak_current_A, 20, 1e-9);
}

static void test_foldback_charges_exponentially(void **state)
{
    (void)state;
    pf_outcome o = start("start_control=foldback foldback_current=1 fault_time=1");
    assert_near(o.duration_s, 1e-3 * 12 / 4 * log(5), 1e-6);
    double middle = 12 * (4.0 - 1) / 8; /* V_out of the highest power: d/dV (1 + V/3)(12 - V) = 0 */
    assert_near(o.peak_power_W, (1 + middle / 3) * (12 - middle), CLOSE);
}

static void test_slew_is_gate_current_over_gate_capacitance(void **state)
{
    (void)state;
    pf_outcome o = start("start_control=slew gate_current=20e-6 gate_capacitance=33e-9 "
                         "current_limit= fault_current=5");
    assert_near(o.duration_s, 12 / (20e-6 / 33e-9), 1e-9);
    assert_near(o.peak_current_A, 1e-3 * 20e-6 / 33e-9, 1e-9);
}

static void test_gate_ramp_is_slower_by_crss_in_the_slow_corner_only(void **state)
{
    (void)state;
    const char ramp[] = "start_control=slew gate_current=20e-6 gate_capacitance=30e-9..33e-9 "
                        "current_limit= fault_current=5 output_capacitance=1e-4 "
                        "running_current=0";
    bench b;
    bench_run(&b, "crss=10e-9", ramp);
    const pf_outcome *o = bench_outcome(&b, PF_START_UP);
    double fast = 12 / (20e-6 / 30e-9), slow = 12 / (20e-6 / 43e-9);
    assert_near(o->peak_current_A, 1e-4 * 12 / fast, 1e-9);
    assert_near(pf_plan_fastest_start_s(b.plan), fast, 1e-9);
    assert_true(is_near(o->duration_s, fast, 1e-9) || is_near(o->duration_s, slow, 1e-9));
    assert_false(b.stress->remarks & PF_REMARK_NO_CRSS);
    bench_clear(&b);
    bench_run(&b, "crss=", ramp);
    assert_true(b.stress->remarks & PF_REMARK_NO_CRSS);
    bench_clear(&b);
}

static void test_slew_never_exceeds_a_stated_current_limit(void **state)
{
    (void)state;
    pf_outcome o = start("start_control=slew output_slew=1e4 current_limit=5 fault_time=1");
    assert_near(o.peak_current_A, 5, 1e-9);
    assert_near(o.duration_s, 1e-3 * 12 / 5, 1e-9);
}

static void test_slew_carries_the_load_on_top(void **state)
{
    (void)state;
    pf_outcome o = start("start_control=slew output_slew=1e3 current_limit= fault_current=5 "
                         "start_load_current=2");
    assert_near(o.peak_current_A, 3, 1e-9);
    assert_near(o.duration_s, 12e-3, 1e-9);
    assert_near(o.energy_J, 0.072 * 3, 1e-6);
}

static void test_load_above_a_voltage_is_drawn_from_there_on(void **state)
{
    (void)state;
    pf_outcome o = start("fault_time=1 start_load_current=2 start_load_above=7.3");
    assert_near(o.duration_s, 1e-3 * (7.3 / 5 + 4.7 / 3), 1e-9);
    double energy = 5 * (1e-3 / 5) * (7.3 * 12 - 7.3 * 7.3 / 2) + 5 * (1e-3 / 3) * 4.7 * 4.7 / 2;
    assert_near(o.energy_J, energy, 1e-9);
}

static void test_constant_power_load_above_a_voltage(void **state)
{
    (void)state;
    pf_outcome o = start("fault_time=1 start_load_power=12 start_load_above=6");
    /* t = C * integral of V/(5 V - 12) dV = C (V/5 + 12/25 ln(5 V - 12)) */
    double late = 1e-3 * (6 / 5.0 + 12 / 25.0 * log(48 / 18.0));
    assert_near(o.duration_s, 1e-3 * 6 / 5 + late, 1e-6);
}

static void test_slowest_and_fastest_start_are_over_all_corners(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "",
              "fault_time=1 supply_voltage=10..14 output_capacitance=1e-3..2e-3 "
              "current_limit=4..6");
    assert_near(pf_plan_slowest_start_s(b.plan), 2e-3 * 14 / 4, 1e-9);
    assert_near(pf_plan_fastest_start_s(b.plan), 1e-3 * 10 / 6, 1e-9);
    bench_clear(&b);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_current_limit_charges_in_cv_over_i),
        cmocka_unit_test(test_capacitor_alone_costs_half_c_v_squared_under_every_control),
        cmocka_unit_test(test_current_limit_with_constant_load_charges_with_the_rest),
        cmocka_unit_test(test_current_limit_with_resistor_charges_logarithmically),
        cmocka_unit_test(test_power_limit_charges_at_constant_power_then_constant_current),
        cmocka_unit_test(test_foldback_charges_exponentially),
        cmocka_unit_test(test_slew_is_gate_current_over_gate_capacitance),
        cmocka_unit_test(test_gate_ramp_is_slower_by_crss_in_the_slow_corner_only),
        cmocka_unit_test(test_slew_never_exceeds_a_stated_current_limit),
        cmocka_unit_test(test_slew_carries_the_load_on_top),
        cmocka_unit_test(test_load_above_a_voltage_is_drawn_from_there_on),
        cmocka_unit_test(test_constant_power_load_above_a_voltage),
        cmocka_unit_test(test_slowest_and_fastest_start_are_over_all_corners),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
