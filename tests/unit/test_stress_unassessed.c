/* test_stress_unassessed.c: claims that what is not known is never shown as a pass.
**
** The bench's part passes its card; every case takes one thing away.
*/
#include "support/bench.h"
#include "support/near.h"

#include <string.h>

/* The check that could not be made, the verdict being "unassessed". */
static void expect_open(const char *part, const char *profile, pf_event event, pf_cause cause)
{
    bench b;
    bench_run(&b, part, profile);
    const pf_outcome *o = bench_outcome(&b, event);
    assert_not_stated(o->soa_margin);
    if (o->cause != cause)
        fail_msg("%s: cause `%s`, expected `%s`", part, pf_cause_text(o->cause),
                 pf_cause_text(cause));
    assert_int_equal(b.assessment.verdict, PF_UNASSESSED);
    bench_clear(&b);
}

static void test_the_bench_part_passes(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "");
    for (size_t i = 0; i < b.assessment.check_count; i++)
        assert_int_equal(b.assessment.check[i].verdict, PF_PASS);
    assert_int_equal(b.assessment.verdict, PF_PASS);
    bench_clear(&b);
}

static void test_no_soa_is_unassessed(void **state)
{
    (void)state;
    expect_open("soa=", "", PF_START_UP, PF_CAUSE_NO_SOA);
    expect_open("soa=", "", PF_SHORT_RUNNING, PF_CAUSE_NO_SOA);
}

static void test_supply_beyond_the_last_soa_point_is_unassessed(void **state)
{
    (void)state;
    const char narrow[] = "soa=1e-4/1:400,11:100;1e-3/1:400,11:100;1e-2/1:300,11:50";
    expect_open(narrow, "", PF_SHORT_AT_START, PF_CAUSE_BEYOND_VOLTAGE);
    expect_open(narrow, "", PF_START_UP, PF_CAUSE_BEYOND_VOLTAGE);
}

static void test_fault_longer_than_the_longest_line_without_zth_or_dc_is_unassessed(void **state)
{
    (void)state;
    const char lines[] = "foster= soa=1e-4/1:400,100:20;1e-3/1:400,100:6";
    expect_open(lines, "", PF_SHORT_RUNNING, PF_CAUSE_NO_DC_LINE);
    expect_open(lines, "beyond_soa=extend", PF_SHORT_RUNNING, PF_CAUSE_NO_ZTH);
}

static void test_fault_longer_than_the_longest_line_with_zth_but_no_dc_is_unassessed(void **state)
{
    (void)state;
    expect_open("soa=1e-4/1:400,100:20;1e-3/1:400,100:6", "", PF_SHORT_RUNNING,
                PF_CAUSE_NO_DC_LINE);
}

static void test_extend_assesses_it_and_says_so(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "soa=1e-4/1:400,100:20;1e-3/1:400,100:6", "beyond_soa=extend");
    assert_true(bench_outcome(&b, PF_SHORT_RUNNING)->soa_margin > 0);
    assert_true(b.stress->remarks & PF_REMARK_EXTENDED);
    bench_clear(&b);
    bench_run(&b, "soa=1e-4/1:400,100:20;1e-3/1:400,100:6;dc/1:50,100:0.2", "");
    assert_true(b.stress->remarks & PF_REMARK_DC_BOUND);
    assert_false(b.stress->remarks & PF_REMARK_EXTENDED);
    bench_clear(&b);
}

static void test_no_rdson_at_the_gate_drive_is_unassessed(void **state)
{
    (void)state;
    expect_open("rdson=10:0.004", "gate_drive=9..12", PF_SHORT_RUNNING, PF_CAUSE_NO_START);
    bench b;
    bench_run(&b, "rdson=10:0.004", "gate_drive=9..12");
    assert_int_equal(b.stress->running_cause, PF_CAUSE_NO_RDSON);
    assert_not_stated(b.stress->running_degC);
    assert_not_stated(b.stress->conduction_loss_W);
    bench_clear(&b);
}

/* The peak current of an event does not hang on where it starts: what is known to fail is said. */
static void test_a_current_over_the_pulse_rating_fails_though_the_start_is_open(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "rdson= id_pulse=50", "trip_current=60 trip_time=1e-5");
    assert_int_equal(bench_outcome(&b, PF_TRIP)->cause, PF_CAUSE_NO_START);
    assert_near(bench_outcome(&b, PF_TRIP)->peak_current_A, 60, 0);
    assert_int_equal(b.assessment.verdict, PF_FAIL);
    bench_clear(&b);
}

static void test_no_rdson_leaves_a_start_from_ambient_assessed(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "rdson=", "start_from=ambient");
    assert_true(bench_outcome(&b, PF_START_UP)->soa_margin > 1);
    assert_int_equal(b.assessment.verdict, PF_UNASSESSED);
    bench_clear(&b);
}

static void test_no_tj_max_is_unassessed(void **state)
{
    (void)state;
    expect_open("tj_max=", "", PF_START_UP, PF_CAUSE_NO_TJ_MAX);
    expect_open("tj_max=", "junction_limit=120 start_from=ambient", PF_SHORT_AT_START,
                PF_CAUSE_NO_TJ_MAX);
}

static void test_no_thermal_resistance_is_unassessed(void **state)
{
    (void)state;
    expect_open("rth_ja=", "", PF_SHORT_RUNNING, PF_CAUSE_NO_START);
    expect_open("rth_jc=", "case_to_ambient=10", PF_SHORT_RUNNING, PF_CAUSE_NO_START);
}

static void test_no_zth_leaves_the_junction_peak_open(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "foster=", "");
    const pf_outcome *o = bench_outcome(&b, PF_START_UP);
    assert_true(o->soa_margin > 1);
    assert_not_stated(o->peak_junction_degC);
    assert_int_equal(o->junction_cause, PF_CAUSE_NO_ZTH);
    assert_int_equal(b.assessment.verdict, PF_UNASSESSED);
    bench_clear(&b);
}

/* Each rating, taken away, leaves its check open; the check names it. */
static void test_every_missing_rating_leaves_its_check_open(void **state)
{
    (void)state;
    const struct {
        const char *part;
        pf_check_kind kind;
        const char *missing;
    } row[] = {
        {"vds_max=", PF_CHECK_VDS, "vds_max"},        {"vgs_max=", PF_CHECK_VGS, "vgs_max"},
        {"id_cont=", PF_CHECK_ID_CONT, "id_cont"},    {"id_pulse=", PF_CHECK_ID_PULSE, "id_pulse"},
        {"channel=-", PF_CHECK_POLARITY, "polarity"},
    };
    for (size_t i = 0; i < sizeof row / sizeof *row; i++) {
        bench b;
        bench_run(&b, row[i].part, "");
        int slot = row[i].kind == PF_CHECK_ID_PULSE ? bench_slot(&b, PF_START_UP) : -1;
        const pf_check *check = bench_check(&b, row[i].kind, slot);
        assert_int_equal(check->verdict, PF_UNASSESSED);
        assert_string_equal(check->missing, row[i].missing);
        assert_int_equal(b.assessment.verdict, PF_UNASSESSED);
        bench_clear(&b);
    }
}

static void test_no_avalanche_energy_leaves_turn_off_open(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "avalanche_energy=", "supply_inductance=1e-6");
    const pf_check *check = bench_check(&b, PF_CHECK_AVALANCHE, bench_slot(&b, PF_TURN_OFF));
    assert_int_equal(check->verdict, PF_UNASSESSED);
    assert_int_equal(check->cause, PF_CAUSE_NO_AVALANCHE);
    bench_clear(&b);
}

static void test_no_hot_ratio_is_assumed_and_remarked(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "rdson_hot_ratio=", "");
    assert_true(b.stress->remarks & PF_REMARK_HOT_RATIO);
    assert_int_equal(b.assessment.verdict, PF_PASS);
    bench_clear(&b);
}

static void test_one_open_corner_leaves_the_event_open(void **state)
{
    (void)state;
    expect_open("soa=1e-2/1:300,12:1", "supply_voltage=11..14 start_from=ambient",
                PF_SHORT_AT_START, PF_CAUSE_BEYOND_VOLTAGE);
    expect_open("soa=1e-2/1:300,12:100", "supply_voltage=11..14", PF_SHORT_AT_START,
                PF_CAUSE_BEYOND_VOLTAGE);
}

static void test_soa_and_zth_that_contradict_are_remarked(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "soa=1e-4/1:4000,100:2000;1e-2/1:4000,100:2000", "");
    assert_true(b.stress->remarks & PF_REMARK_CONTRADICTION);
    bench_clear(&b);
    bench_run(&b, "", "");
    assert_false(b.stress->remarks & PF_REMARK_CONTRADICTION);
    bench_clear(&b);
}

static void test_zth_to_ambient_is_used_where_it_is_all_there_is_and_remarked(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "foster= zth_ambient=1e-3:0.1,1:5,100:30", "");
    assert_true(b.stress->remarks & PF_REMARK_AMBIENT_ZTH);
    assert_true(bench_outcome(&b, PF_START_UP)->peak_junction_degC > b.stress->running_degC);
    bench_clear(&b);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_the_bench_part_passes),
        cmocka_unit_test(test_no_soa_is_unassessed),
        cmocka_unit_test(test_supply_beyond_the_last_soa_point_is_unassessed),
        cmocka_unit_test(test_fault_longer_than_the_longest_line_without_zth_or_dc_is_unassessed),
        cmocka_unit_test(test_fault_longer_than_the_longest_line_with_zth_but_no_dc_is_unassessed),
        cmocka_unit_test(test_extend_assesses_it_and_says_so),
        cmocka_unit_test(test_no_rdson_at_the_gate_drive_is_unassessed),
        cmocka_unit_test(test_a_current_over_the_pulse_rating_fails_though_the_start_is_open),
        cmocka_unit_test(test_no_rdson_leaves_a_start_from_ambient_assessed),
        cmocka_unit_test(test_no_tj_max_is_unassessed),
        cmocka_unit_test(test_no_thermal_resistance_is_unassessed),
        cmocka_unit_test(test_no_zth_leaves_the_junction_peak_open),
        cmocka_unit_test(test_every_missing_rating_leaves_its_check_open),
        cmocka_unit_test(test_no_avalanche_energy_leaves_turn_off_open),
        cmocka_unit_test(test_no_hot_ratio_is_assumed_and_remarked),
        cmocka_unit_test(test_one_open_corner_leaves_the_event_open),
        cmocka_unit_test(test_soa_and_zth_that_contradict_are_remarked),
        cmocka_unit_test(test_zth_to_ambient_is_used_where_it_is_all_there_is_and_remarked),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
