/* test_rank_checks.c: claims about ratings checks, verdicts and the words for them. */
#include "support/bench.h"
#include "support/near.h"

#include <stdio.h>
#include <string.h>

static pf_verdict verdict_of(const char *part, const char *profile, pf_check_kind kind)
{
    bench b;
    bench_run(&b, part, profile);
    bool event =
        kind == PF_CHECK_ID_PULSE || kind == PF_CHECK_SOA_MARGIN || kind == PF_CHECK_JUNCTION;
    pf_verdict verdict =
        bench_check(&b, kind, event ? bench_slot(&b, PF_SHORT_RUNNING) : -1)->verdict;
    bench_clear(&b);
    return verdict;
}

static void test_voltage_may_use_its_share_of_vds_max_and_no_more(void **state)
{
    (void)state;
    assert_int_equal(verdict_of("vds_max=15", "", PF_CHECK_VDS), PF_PASS);
    assert_int_equal(verdict_of("vds_max=14.99", "", PF_CHECK_VDS), PF_FAIL);
    assert_int_equal(verdict_of("vds_max=14", "voltage_use=0.9", PF_CHECK_VDS), PF_PASS);
    assert_int_equal(verdict_of("vds_max=15", "supply_voltage=11..12.1", PF_CHECK_VDS), PF_FAIL);
}

static void test_gate_drive_may_use_its_share_of_vgs_max(void **state)
{
    (void)state;
    assert_int_equal(verdict_of("vgs_max=12.5", "", PF_CHECK_VGS), PF_PASS);
    assert_int_equal(verdict_of("vgs_max=12.4", "", PF_CHECK_VGS), PF_FAIL);
    assert_int_equal(verdict_of("vgs_max=12.5", "gate_drive=10..10.5", PF_CHECK_VGS), PF_FAIL);
}

static void test_running_current_per_part_may_use_its_share_of_id(void **state)
{
    (void)state;
    assert_int_equal(verdict_of("id_cont=12.5", "", PF_CHECK_ID_CONT), PF_PASS);
    assert_int_equal(verdict_of("id_cont=12.4", "", PF_CHECK_ID_CONT), PF_FAIL);
    assert_int_equal(verdict_of("id_cont=6.3", "parallel_count=2", PF_CHECK_ID_CONT), PF_PASS);
}

static void test_peak_current_stays_within_the_pulse_rating(void **state)
{
    (void)state;
    assert_int_equal(verdict_of("id_pulse=5", "", PF_CHECK_ID_PULSE), PF_PASS);
    assert_int_equal(verdict_of("id_pulse=4.9", "", PF_CHECK_ID_PULSE), PF_FAIL);
    assert_int_equal(
        verdict_of("id_pulse=9.9", "parallel_count=2 fault_current=10", PF_CHECK_ID_PULSE),
        PF_FAIL);
}

static void test_required_margin_must_be_reached(void **state)
{
    (void)state;
    double margin = bench_margin("", "", PF_SHORT_RUNNING);
    assert_double(margin, >, 1.3);
    char text[64];
    snprintf(text, sizeof text, "required_margin=%.17g", margin);
    assert_int_equal(verdict_of("", text, PF_CHECK_SOA_MARGIN), PF_PASS);
    snprintf(text, sizeof text, "required_margin=%.17g", margin * (1 + 1e-9));
    assert_int_equal(verdict_of("", text, PF_CHECK_SOA_MARGIN), PF_FAIL);
}

static void test_peak_junction_must_stay_within_the_allowed(void **state)
{
    (void)state;
    assert_int_equal(verdict_of("", "junction_limit=90", PF_CHECK_JUNCTION), PF_PASS);
    assert_int_equal(verdict_of("", "junction_limit=70", PF_CHECK_JUNCTION), PF_FAIL);
}

static void test_polarity_must_fit(void **state)
{
    (void)state;
    assert_int_equal(verdict_of("channel=P", "", PF_CHECK_POLARITY), PF_FAIL);
    assert_int_equal(verdict_of("channel=P", "polarity=P", PF_CHECK_POLARITY), PF_PASS);
}

static void test_a_p_channel_part_gives_the_same_numbers(void **state)
{
    (void)state;
    bench n, p;
    bench_run(&n, "", "trip_current=50 trip_time=1e-4 supply_inductance=1e-6");
    bench_run(&p, "channel=P", "polarity=P trip_current=50 trip_time=1e-4 supply_inductance=1e-6");
    assert_near(p.stress->soa_margin, n.stress->soa_margin, 0);
    assert_near(p.stress->conduction_loss_W, n.stress->conduction_loss_W, 0);
    assert_near(p.stress->peak_junction_degC, n.stress->peak_junction_degC, 0);
    assert_int_equal(p.assessment.verdict, n.assessment.verdict);
    bench_clear(&n);
    bench_clear(&p);
}

static void test_a_banned_part_fails(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "status=banned", "");
    assert_int_equal(b.assessment.verdict, PF_FAIL);
    bench_clear(&b);
    bench_run(&b, "status=obsolete", "");
    assert_int_equal(b.assessment.verdict, PF_PASS);
    bench_clear(&b);
}

static void test_one_fail_decides_over_anything_open(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "soa= vgs_max=5", "");
    assert_int_equal(b.assessment.verdict, PF_FAIL);
    assert_int_equal(pf_assessment_decisive(&b.assessment)->kind, PF_CHECK_VGS);
    bench_clear(&b);
}

static void test_the_decisive_check_of_a_pass_is_its_smallest_margin(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "");
    const pf_check *check = pf_assessment_decisive(&b.assessment);
    assert_int_equal(check->kind, PF_CHECK_SOA_MARGIN);
    assert_int_equal(check->slot, b.stress->limiting_slot);
    bench_clear(&b);
}

static void expect_words(const char *part, const char *profile, const char *words)
{
    bench b;
    char text[512];
    bench_run(&b, part, profile);
    pf_check_print(b.plan, pf_assessment_decisive(&b.assessment), text, sizeof text);
    if (!strstr(text, words)) fail_msg("`%s` does not say `%s`", text, words);
    bench_clear(&b);
}

static void test_a_check_says_event_quantity_value_and_limit(void **state)
{
    (void)state;
    expect_words("", "trip_current=399 trip_time=5e-3", "trip: SOA margin 0.");
    expect_words("", "trip_current=399 trip_time=5e-3", "required 1.3");
    expect_words("vds_max=13", "", "V_DS 12 V, allowed 10.4 V");
    expect_words("channel=P", "", "polarity P, the card needs N");
    expect_words("soa=", "", "unassessed: no SOA points are stated");
    expect_words("vgs_max=", "", "vgs_max is not stated");
    expect_words("", "running_current=35", "runaway");
}

static void test_printing_a_check_keeps_to_its_room(void **state)
{
    (void)state;
    bench b;
    char text[16];
    bench_run(&b, "", "");
    memset(text, '#', sizeof text);
    int length = pf_check_print(b.plan, &b.assessment.check[6], text, 8);
    assert_true(length > 8);
    assert_int_equal(strlen(text), 7);
    assert_int_equal(text[8], '#');
    bench_clear(&b);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_voltage_may_use_its_share_of_vds_max_and_no_more),
        cmocka_unit_test(test_gate_drive_may_use_its_share_of_vgs_max),
        cmocka_unit_test(test_running_current_per_part_may_use_its_share_of_id),
        cmocka_unit_test(test_peak_current_stays_within_the_pulse_rating),
        cmocka_unit_test(test_required_margin_must_be_reached),
        cmocka_unit_test(test_peak_junction_must_stay_within_the_allowed),
        cmocka_unit_test(test_polarity_must_fit),
        cmocka_unit_test(test_a_p_channel_part_gives_the_same_numbers),
        cmocka_unit_test(test_a_banned_part_fails),
        cmocka_unit_test(test_one_fail_decides_over_anything_open),
        cmocka_unit_test(test_the_decisive_check_of_a_pass_is_its_smallest_margin),
        cmocka_unit_test(test_a_check_says_event_quantity_value_and_limit),
        cmocka_unit_test(test_printing_a_check_keeps_to_its_room),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
