/* test_stress_steady.c: claims about the running card and the allowed junction temperature. */
#include "support/bench.h"
#include "support/near.h"

static void test_running_junction_is_the_fixed_point_of_loss_and_temperature(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "");
    double junction = b.stress->running_degC;
    double rdson = 0.004 * (1 + 0.8 / 150 * (junction - 25));
    assert_near(junction, 40 + 40 * 100 * rdson, 1e-12);
    assert_near(b.stress->conduction_loss_W, 100 * rdson, 1e-12);
    bench_clear(&b);
}

static void test_case_to_ambient_takes_the_place_of_rth_ja(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "rth_ja=", "case_to_ambient=5..9.5 running_current=20");
    double loss = b.stress->conduction_loss_W;
    assert_near(b.stress->running_degC, 40 + 10 * loss, 1e-12);
    bench_clear(&b);
}

static void test_worst_corner_is_high_current_high_ambient_low_gate_drive(void **state)
{
    (void)state;
    bench wide, worst;
    bench_run(&wide, "", "running_current=2..12 ambient_temperature=0..55 gate_drive=5..10");
    bench_run(&worst, "", "running_current=12 ambient_temperature=55 gate_drive=5");
    assert_near(wide.stress->running_degC, worst.stress->running_degC, 1e-15);
    assert_near(wide.stress->rdson_cold_ohm, 0.006, 0);
    assert_near(wide.stress->rdson_drive_V, 4.5, 0);
    bench_clear(&wide);
    bench_clear(&worst);
}

static void test_gain_of_one_or_more_is_runaway_and_fails(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "running_current=35"); /* g a = 40 * 1225 * 0.004 * 0.8/150 = 1.05 */
    assert_int_equal(b.stress->running_cause, PF_CAUSE_RUNAWAY);
    assert_true(isinf(b.stress->running_degC) && isinf(b.stress->conduction_loss_W));
    assert_int_equal(bench_check(&b, PF_CHECK_RUNNING, 0)->verdict, PF_FAIL);
    assert_int_equal(b.assessment.verdict, PF_FAIL);
    assert_near(bench_outcome(&b, PF_SHORT_RUNNING)->soa_margin, 0, 0);
    bench_clear(&b);
    bench_run(&b, "", "running_current=34"); /* 0.987: finite, though far too hot */
    assert_int_equal(b.stress->running_cause, PF_CAUSE_NONE);
    assert_int_equal(bench_check(&b, PF_CHECK_RUNNING, 0)->verdict, PF_FAIL);
    bench_clear(&b);
}

static void test_two_parallel_parts_lose_less_and_keep_their_soa_margin(void **state)
{
    (void)state;
    bench one, two;
    bench_run(&one, "", "parallel_count=1");
    bench_run(&two, "", "parallel_count=2");
    assert_double(two.stress->conduction_loss_W, <, 0.52 * one.stress->conduction_loss_W);
    double single = bench_outcome(&one, PF_SHORT_RUNNING)->soa_margin;
    double pair = bench_outcome(&two, PF_SHORT_RUNNING)->soa_margin;
    double explained = (175 - two.stress->running_degC) / (175 - one.stress->running_degC);
    assert_near(pair, single * explained, 1e-12);
    bench_clear(&one);
    bench_clear(&two);
}

static void test_parallel_parts_change_nothing_from_ambient(void **state)
{
    (void)state;
    double one = bench_margin("", "start_from=ambient", PF_START_UP);
    double four = bench_margin("", "start_from=ambient parallel_count=4", PF_START_UP);
    assert_near(four, one, 1e-15);
}

static double allowed(const char *part, const char *profile)
{
    bench b;
    bench_run(&b, part, profile);
    double degC = b.stress->allowed_degC;
    bench_clear(&b);
    return degC;
}

static void test_allowed_is_tj_max_or_what_is_lower(void **state)
{
    (void)state;
    assert_near(allowed("", ""), 175, 0);
    assert_near(allowed("", "junction_limit=120..140"), 120, 0);
    assert_near(allowed("", "junction_limit=200"), 175, 0);
}

/* ECSS-Q-ST-30-11C, MOSFET, from memory: the lower of 110 degC and T_j,max - 40. */
static void test_allowed_by_ecss_is_the_lower_of_110_and_40_below(void **state)
{
    (void)state;
    const char rule[] = "rule_junction_limit=110 rule_junction_below_max=40";
    assert_near(allowed("", rule), 110, 0);
    assert_near(allowed("tj_max=145", rule), 105, 0);
}

/* NASA EEE-INST-002 section S1 table 4, from memory: 0.8 T_j,max. */
static void test_allowed_by_share_of_tj_max(void **state)
{
    (void)state;
    assert_near(allowed("", "rule_junction_share=0.8"), 140, 1e-12);
    assert_near(allowed("tj_max=150", "rule_junction_share=0.8 junction_limit=100"), 100, 0);
}

static void test_allowed_without_tj_max_is_not_stated(void **state)
{
    (void)state;
    assert_not_stated(allowed("tj_max=", "junction_limit=120"));
}

static void test_margin_shrinks_with_the_allowed_temperature(void **state)
{
    (void)state;
    const char cold[] = "start_from=ambient ambient_temperature=25";
    double full = bench_margin("", cold, PF_SHORT_AT_START);
    double half = bench_margin("", "start_from=ambient ambient_temperature=25 junction_limit=100",
                               PF_SHORT_AT_START);
    assert_near(half, full / 2, 1e-12);
}

static void test_start_at_the_allowed_temperature_has_margin_0(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "start_from=ambient ambient_temperature=120 junction_limit=120");
    assert_near(bench_outcome(&b, PF_START_UP)->soa_margin, 0, 0);
    assert_int_equal(bench_outcome(&b, PF_START_UP)->cause, PF_CAUSE_HOT_START);
    assert_int_equal(b.assessment.verdict, PF_FAIL);
    bench_clear(&b);
}

static void test_start_above_the_allowed_temperature_fails_even_without_soa(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "soa=", "start_from=ambient ambient_temperature=130 junction_limit=120");
    assert_near(bench_outcome(&b, PF_START_UP)->soa_margin, 0, 0);
    assert_int_equal(b.assessment.verdict, PF_FAIL);
    bench_clear(&b);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_running_junction_is_the_fixed_point_of_loss_and_temperature),
        cmocka_unit_test(test_case_to_ambient_takes_the_place_of_rth_ja),
        cmocka_unit_test(test_worst_corner_is_high_current_high_ambient_low_gate_drive),
        cmocka_unit_test(test_gain_of_one_or_more_is_runaway_and_fails),
        cmocka_unit_test(test_two_parallel_parts_lose_less_and_keep_their_soa_margin),
        cmocka_unit_test(test_parallel_parts_change_nothing_from_ambient),
        cmocka_unit_test(test_allowed_is_tj_max_or_what_is_lower),
        cmocka_unit_test(test_allowed_by_ecss_is_the_lower_of_110_and_40_below),
        cmocka_unit_test(test_allowed_by_share_of_tj_max),
        cmocka_unit_test(test_allowed_without_tj_max_is_not_stated),
        cmocka_unit_test(test_margin_shrinks_with_the_allowed_temperature),
        cmocka_unit_test(test_start_at_the_allowed_temperature_has_margin_0),
        cmocka_unit_test(test_start_above_the_allowed_temperature_fails_even_without_soa),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
