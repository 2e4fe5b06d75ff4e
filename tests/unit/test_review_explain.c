/* test_review_explain.c: claims about the numbers between data sheet and margin. */
#include "support/bench.h"
#include "support/claims.h"
#include "support/fixture_ab.h"
#include "support/near.h"
#include "support/random_case.h"

#include <passfet/explain.h>

/* The values of A and B were worked out by hand from straight lines on log-log paper. */
#define COLD_SHORT "start_from=ambient ambient_temperature=25 fault_current=1 "

static void explain(bench *b, pf_explanation *e, const char *part, const char *profile)
{
    bench_run(b, part, profile);
    assert_int_equal(pf_explain(b->plan, NULL, 0, &b->part, b->scratch, e), PF_OK);
}

static void test_A_allows_11_A_at_48_V_for_3_ms(void **state)
{
    (void)state;
    bench b;
    pf_explanation e;
    explain(&b, &e, PART_A, COLD_SHORT "supply_voltage=48 fault_time=3e-3");
    const pf_event_view *view = &e.view[bench_slot(&b, PF_SHORT_AT_START)];
    assert_int_equal(view->soa.kind, PF_READ_BETWEEN);
    assert_near(view->limit_A, 11.0, 0.01);
    assert_near(view->soa.shorter.pulse_s, 1e-3, 1e-12);
    assert_near(view->soa.shorter.left_V, 10, 1e-12);
    assert_near(view->soa.shorter.right_A, 25, 1e-12);
    assert_near(view->soa.longer.right_A, 4, 1e-12);
    bench_clear(&b);
}

static void test_A_allows_13_8_A_at_24_V_for_10_ms(void **state)
{
    (void)state;
    bench b;
    pf_explanation e;
    explain(&b, &e, PART_A, COLD_SHORT "supply_voltage=24 fault_time=10e-3");
    const pf_event_view *view = &e.view[bench_slot(&b, PF_SHORT_AT_START)];
    assert_int_equal(view->soa.kind, PF_READ_ON_LINE);
    assert_near(view->limit_A, 13.8, 0.01);
    bench_clear(&b);
}

static void test_A_at_300_ms_without_zth_and_dc_line_is_unassessed(void **state)
{
    (void)state;
    bench b;
    pf_explanation e;
    explain(&b, &e, PART_A, COLD_SHORT "supply_voltage=24 fault_time=0.3");
    const pf_event_view *view = &e.view[bench_slot(&b, PF_SHORT_AT_START)];
    assert_int_equal(view->soa.kind, PF_READ_NOTHING);
    assert_int_equal(view->soa.cause, PF_CAUSE_NO_DC_LINE);
    assert_not_stated(view->limit_A);
    bench_clear(&b);
}

static void test_half_time_estimate_of_A_is_0_809_A_and_0_368_of_the_need(void **state)
{
    (void)state;
    bench b;
    pf_explanation e;
    explain(&b, &e, PART_A,
            "start_from=ambient ambient_temperature=85 supply_voltage=60 "
            "output_capacitance=2.64e-3 current_limit=2.2 fault_time=0.1");
    const pf_event_view *view = &e.view[bench_slot(&b, PF_START_UP)];
    assert_near(view->half_time.limit_A, 0.809, 0.001);
    assert_near(view->half_time.margin, 0.368, 0.002);
    assert_near(view->half_time.time_s, 0.036, 1e-9);
    assert_near(view->equal_energy.time_s, 0.036, 1e-6); /* constant current: the same */
    bench_clear(&b);
}

static void test_estimates_are_marked_by_the_superposition(void **state)
{
    (void)state;
    bench b;
    pf_explanation e;
    explain(&b, &e, "", "supply_voltage=48 output_capacitance=2e-3");
    int slot = bench_slot(&b, PF_START_UP);
    const pf_event_view *view = &e.view[slot];
    double margin = b.stress->outcome[slot].soa_margin;
    assert_int_equal(view->half_time.safe, view->half_time.margin <= margin);
    assert_int_equal(view->equal_energy.safe, view->equal_energy.margin <= margin);
    bench_clear(&b);
}

/* Every margin is the derated reading over the current: what the sheet prints is what ranks. */
static void test_readings_give_the_margins_of_the_ranking(void **state)
{
    (void)state;
    random_source source = {7};
    for (int i = 0; i < 60; i++) {
        static pf_explanation e;
        pf_part part;
        pf_profile profile;
        pf_plan *plan;
        pf_part_init(&part);
        pf_profile_init(&profile);
        random_part(&source, 80, &part);
        random_profile(&source, PF_START_CURRENT_LIMIT, i % 2 ? 0.1 : 0, &profile);
        assert_int_equal(pf_profile_finish(&profile, NULL, NULL), PF_OK);
        assert_int_equal(pf_plan_new(&profile, NULL, 0, &plan, NULL), PF_OK);
        pf_scratch *scratch = pf_scratch_new();
        assert_int_equal(pf_explain(plan, NULL, 0, &part, scratch, &e), PF_OK);
        for (size_t k = 0; k < pf_plan_slots(plan); k++) {
            const pf_event_view *view = &e.view[k];
            const pf_outcome *outcome = &e.assessment.stress.outcome[k];
            if (view->event != PF_SHORT_AT_START && view->event != PF_SHORT_RUNNING) continue;
            if (!(outcome->soa_margin > 0)) continue;
            assert_near(view->limit_A / view->id_A, outcome->soa_margin, 1e-9);
            double peak = view->hottest_V * view->hottest_A * view->zth.zth_KpW;
            assert_near(outcome->start_degC + peak, outcome->peak_junction_degC, 1e-9);
        }
        pf_scratch_free(scratch);
        pf_plan_free(plan);
        pf_part_clear(&part);
    }
}

/* Ten steps are what fits a hand; how far they are off is known. */
static void test_ten_steps_come_within_6_per_cent_of_the_superposition(void **state)
{
    (void)state;
    static const char *const card[] = {
        "supply_voltage=48 output_capacitance=2e-3",
        "supply_voltage=48 output_capacitance=2e-3 start_control=power_limit power_limit=60",
        "supply_voltage=48 output_capacitance=2e-3 start_control=foldback foldback_current=1",
        "start_control=slew output_slew=2000 fault_current=5 start_load_resistance=20",
    };
    for (size_t i = 0; i < sizeof card / sizeof *card; i++) {
        bench b;
        pf_explanation e;
        explain(&b, &e, "", card[i]);
        const pf_event_view *view = &e.view[bench_slot(&b, PF_START_UP)];
        assert_near(view->stepped_rise_K, view->hot_rise_K, 0.06);
        bench_clear(&b);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_A_allows_11_A_at_48_V_for_3_ms),
        cmocka_unit_test(test_A_allows_13_8_A_at_24_V_for_10_ms),
        cmocka_unit_test(test_A_at_300_ms_without_zth_and_dc_line_is_unassessed),
        cmocka_unit_test(test_half_time_estimate_of_A_is_0_809_A_and_0_368_of_the_need),
        cmocka_unit_test(test_estimates_are_marked_by_the_superposition),
        cmocka_unit_test(test_readings_give_the_margins_of_the_ranking),
        cmocka_unit_test(test_ten_steps_come_within_6_per_cent_of_the_superposition),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
