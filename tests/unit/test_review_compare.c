/* test_review_compare.c: claims about second sources. */
#include "support/bench.h"
#include "support/claims.h"
#include "support/fixture_ab.h"
#include "support/near.h"
#include "support/settings.h"

#include <passfet/comparison.h>
#include <stdio.h>
#include <string.h>

/* Both parts of the fixture with everything that a verdict needs, and Zth far from deciding. */
#define COMPLETE " package=LFP8 foster=0.02:1e-4,0.03:1e-2"
#define CARD                                                                                       \
    "output_capacitance=1e-4 current_limit=4 running_current=4 fault_time=5e-3 "                   \
    "ambient_temperature=40 "

typedef struct pair {
    bench b; /* the reference */
    pf_part candidate;
    pf_exchange exchange;
} pair;

static void compare(pair *p, const char *reference, const char *candidate, const char *card)
{
    bench_run(&p->b, reference, card);
    pf_part_init(&p->candidate);
    part_state(&p->candidate, bench_part_text);
    part_state(&p->candidate, candidate);
    assert_int_equal(pf_compare(p->b.plan, &p->b.part, &p->candidate, p->b.scratch, &p->exchange),
                     PF_OK);
}

static void clear(pair *p)
{
    pf_part_clear(&p->candidate);
    bench_clear(&p->b);
}

static const pf_difference *difference(const pair *p, const char *name)
{
    for (size_t i = 0; i < p->exchange.difference_count; i++)
        if (strcmp(p->exchange.difference[i].name, name) == 0) return &p->exchange.difference[i];
    fail_msg("no difference `%s`", name);
    return NULL;
}

static void test_B_for_A_is_refused_at_48_V_and_accepted_at_12_V(void **state)
{
    (void)state;
    static pair p;
    compare(&p, PART_A COMPLETE, PART_B COMPLETE, CARD "supply_voltage=48 output_capacitance=4e-4");
    assert_int_equal(p.exchange.reference.verdict, PF_PASS);
    assert_int_equal(p.exchange.acceptance, PF_NOT_ACCEPTABLE);
    assert_non_null(strstr(p.exchange.decides, "SOA margin"));
    clear(&p);
    compare(&p, PART_A COMPLETE, PART_B COMPLETE, CARD "supply_voltage=12");
    assert_int_equal(p.exchange.acceptance, PF_ACCEPTABLE);
    assert_int_equal(p.exchange.condition_count, 0);
    clear(&p);
}

static void test_a_shorter_timer_is_a_condition_that_holds(void **state)
{
    (void)state;
    static pair p;
    compare(&p, PART_A COMPLETE, PART_B COMPLETE, CARD "supply_voltage=48");
    assert_int_equal(p.exchange.acceptance, PF_ACCEPTABLE_IF);
    assert_int_equal(p.exchange.condition_count, 1);
    double longest_ms = 0;
    assert_int_equal(sscanf(p.exchange.condition[0], "fault time at most %lf ms", &longest_ms), 1);
    clear(&p);
    char card[300];
    snprintf(card, sizeof card, "%s supply_voltage=48 fault_time=%.6ge-3", CARD, longest_ms);
    compare(&p, PART_A COMPLETE, PART_B COMPLETE, card);
    assert_int_equal(p.exchange.acceptance, PF_ACCEPTABLE); /* with the condition met */
    clear(&p);
    snprintf(card, sizeof card, "%s supply_voltage=48 fault_time=%.6ge-3", CARD,
             longest_ms * 1.002);
    compare(&p, PART_A COMPLETE, PART_B COMPLETE, card);
    assert_int_not_equal(p.exchange.acceptance, PF_ACCEPTABLE);
    clear(&p);
}

static void test_what_is_missing_is_named_with_where_it_would_come_from(void **state)
{
    (void)state;
    static pair p;
    compare(&p, PART_A COMPLETE, PART_B " package=LFP8", CARD "supply_voltage=12");
    assert_int_equal(p.exchange.acceptance, PF_CANNOT_DECIDE);
    assert_int_equal(p.exchange.missing_count, 1);
    assert_non_null(strstr(p.exchange.missing[0], "Zth"));
    assert_non_null(strstr(p.exchange.missing[0], "data sheet"));
    clear(&p);
}

static void test_a_failing_candidate_with_gaps_is_not_acceptable(void **state)
{
    (void)state;
    static pair p;
    compare(&p, PART_A COMPLETE, PART_B " vds_max=50", CARD "supply_voltage=48");
    assert_int_equal(p.exchange.acceptance, PF_NOT_ACCEPTABLE);
    assert_non_null(strstr(p.exchange.decides, "V_DS"));
    clear(&p);
}

static void test_another_polarity_stops_before_all_else(void **state)
{
    (void)state;
    static pair p;
    compare(&p, PART_A COMPLETE, PART_A COMPLETE " channel=P", CARD "supply_voltage=12");
    assert_int_equal(p.exchange.acceptance, PF_NOT_ACCEPTABLE);
    assert_non_null(strstr(p.exchange.decides, "polarity"));
    assert_int_equal(p.exchange.difference[0].stage, PF_STAGE_FIT);
    clear(&p);
}

static void test_another_package_is_a_condition(void **state)
{
    (void)state;
    static pair p;
    compare(&p, PART_A COMPLETE, PART_A COMPLETE " package=DPK3", CARD "supply_voltage=12");
    assert_int_equal(p.exchange.acceptance, PF_ACCEPTABLE_IF);
    assert_non_null(strstr(p.exchange.condition[0], "DPK3"));
    clear(&p);
}

static void test_values_under_other_conditions_have_no_ratio(void **state)
{
    (void)state;
    static pair p;
    compare(&p, PART_A COMPLETE, PART_A COMPLETE " rdson=6:0.005 avalanche_current=20",
            CARD "supply_voltage=12 gate_drive=8");
    const pf_difference *on = difference(&p, "Rds(on) at 25 degC and the card's gate drive");
    assert_non_null(on->why);
    assert_not_stated(on->ratio);
    assert_non_null(difference(&p, "avalanche_energy")->why);
    assert_not_stated(difference(&p, "avalanche_energy")->ratio);
    assert_non_null(difference(&p, "rth_ja")->why);
    assert_near(difference(&p, "rth_jc")->ratio, 1, 1e-12);
    clear(&p);
}

static void test_stages_come_in_stop_first_order(void **state)
{
    (void)state;
    static pair p;
    compare(&p, PART_A COMPLETE, PART_B COMPLETE, CARD "supply_voltage=12");
    for (size_t i = 1; i < p.exchange.difference_count; i++)
        assert_true(p.exchange.difference[i - 1].stage <= p.exchange.difference[i].stage);
    assert_int_equal(p.exchange.difference[p.exchange.difference_count - 1].stage, PF_STAGE_DATA);
    clear(&p);
}

static void test_soa_below_four_fifths_of_the_references_is_flagged(void **state)
{
    (void)state;
    static pair p;
    compare(&p, PART_A COMPLETE, PART_B COMPLETE, CARD "supply_voltage=48");
    size_t flagged = 0;
    for (size_t i = 0; i < p.exchange.difference_count; i++) {
        const pf_difference *on = &p.exchange.difference[i];
        if (on->stage != PF_STAGE_HOT || strstr(on->name, "Zth")) continue;
        assert_int_equal(on->flagged, on->ratio < PF_SOA_SHARE_FLAGGED);
        flagged += on->flagged;
    }
    assert_true(flagged > 0);
    clear(&p);
}

static void test_it_shows_when_the_reference_itself_fails(void **state)
{
    (void)state;
    static pair p;
    compare(&p, PART_B COMPLETE, PART_A COMPLETE, CARD "supply_voltage=48 output_capacitance=4e-4");
    assert_int_equal(p.exchange.reference.verdict, PF_FAIL);
    assert_int_equal(p.exchange.acceptance, PF_ACCEPTABLE);
    clear(&p);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_B_for_A_is_refused_at_48_V_and_accepted_at_12_V),
        cmocka_unit_test(test_a_shorter_timer_is_a_condition_that_holds),
        cmocka_unit_test(test_what_is_missing_is_named_with_where_it_would_come_from),
        cmocka_unit_test(test_a_failing_candidate_with_gaps_is_not_acceptable),
        cmocka_unit_test(test_another_polarity_stops_before_all_else),
        cmocka_unit_test(test_another_package_is_a_condition),
        cmocka_unit_test(test_values_under_other_conditions_have_no_ratio),
        cmocka_unit_test(test_stages_come_in_stop_first_order),
        cmocka_unit_test(test_soa_below_four_fifths_of_the_references_is_flagged),
        cmocka_unit_test(test_it_shows_when_the_reference_itself_fails),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
