/* test_rank_order.c: claims about the order of a ranking, over one profile and several. */
#include "support/bench.h"
#include "support/near.h"
#include "support/settings.h"

#include <stdlib.h>
#include <string.h>

typedef struct league {
    pf_plan *plan[2];
    size_t plans;
    pf_scratch *scratch;
    pf_ranking ranking;
} league;

static pf_plan *plan_of(const char *changes)
{
    pf_profile profile;
    pf_plan *plan;
    pf_profile_init(&profile);
    profile_state(&profile, bench_profile_text);
    profile_state(&profile, changes);
    assert_int_equal(pf_profile_finish(&profile, NULL, NULL), PF_OK);
    assert_int_equal(pf_plan_new(&profile, NULL, 0, &plan, NULL), PF_OK);
    return plan;
}

static void begin(league *l, const char *first, const char *second)
{
    *l = (league){0};
    l->plan[l->plans++] = plan_of(first);
    if (second) l->plan[l->plans++] = plan_of(second);
    l->scratch = pf_scratch_new();
    pf_ranking_init(&l->ranking, (const pf_plan *const *)l->plan, l->plans);
}

static void enter(league *l, const char *changes)
{
    pf_part part;
    pf_part_init(&part);
    part_state(&part, bench_part_text);
    part_state(&part, changes);
    assert_int_equal(pf_ranking_add(&l->ranking, &part, 0, l->scratch), PF_OK);
    pf_part_clear(&part);
}

static void end(league *l)
{
    pf_ranking_clear(&l->ranking);
    for (size_t i = 0; i < l->plans; i++)
        pf_plan_free(l->plan[i]);
    pf_scratch_free(l->scratch);
}

/* The names in order, one blank between. */
static void expect_order(league *l, const pf_sort_key *key, size_t keys, const char *expected)
{
    char names[256] = "";
    assert_int_equal(pf_ranking_sort(&l->ranking, key, keys), PF_OK);
    for (size_t i = 0; i < l->ranking.count; i++) {
        if (i) strcat(names, " ");
        strcat(names, l->ranking.row[i].part);
    }
    assert_string_equal(names, expected);
}

static void test_pass_then_unassessed_then_fail_whatever_the_margin(void **state)
{
    (void)state;
    league l;
    begin(&l, "", NULL);
    enter(&l, "part=fail soa=1e-5/1:4000,100:4000;1/1:4000,100:4000 vgs_max=5");
    enter(&l, "part=open soa=1e-5/1:4000,100:4000;1/1:4000,100:4000 vgs_max=");
    enter(&l, "part=pass");
    expect_order(&l, NULL, 0, "pass open fail");
    assert_int_equal(l.ranking.tally[PF_PASS], 1);
    assert_int_equal(l.ranking.tally[PF_UNASSESSED], 1);
    assert_int_equal(l.ranking.tally[PF_FAIL], 1);
    end(&l);
}

static void test_default_order_is_margin_then_loss_then_junction(void **state)
{
    (void)state;
    league l;
    begin(&l, "start_from=ambient running_current=0..1 required_margin=0.1", NULL);
    enter(&l, "part=b rdson=10:0.004");
    enter(&l, "part=strong soa=1e-4/1:400,100:300;1e-2/1:400,100:300");
    enter(&l, "part=c rdson=10:0.004 foster=0.1:1e-3");
    enter(&l, "part=a rdson=10:0.004");
    expect_order(&l, NULL, 0, "strong c a b");
    end(&l);
}

static void test_chosen_keys_order_within_the_verdict(void **state)
{
    (void)state;
    const pf_sort_key price = PF_SORT_PRICE, loss = PF_SORT_LOSS, name = PF_SORT_NAME;
    league l;
    begin(&l, "", NULL);
    enter(&l, "part=dear price=3 rdson=10:0.001");
    enter(&l, "part=cheap price=0.5 rdson=10:0.003");
    enter(&l, "part=unpriced rdson=10:0.002");
    enter(&l, "part=broken price=0.1 vgs_max=5");
    expect_order(&l, &price, 1, "cheap dear unpriced broken");
    expect_order(&l, &loss, 1, "dear unpriced cheap broken");
    expect_order(&l, &name, 1, "cheap dear unpriced broken");
    end(&l);
}

static void test_a_second_key_breaks_the_first_ones_ties(void **state)
{
    (void)state;
    const pf_sort_key keys[] = {PF_SORT_PRICE, PF_SORT_LOSS};
    league l;
    begin(&l, "", NULL);
    enter(&l, "part=x price=1 rdson=10:0.003");
    enter(&l, "part=y price=1 rdson=10:0.001");
    enter(&l, "part=z price=0.5 rdson=10:0.009 rth_ja=20");
    expect_order(&l, keys, 2, "z y x");
    end(&l);
}

static void test_ties_end_by_part_and_maker_not_by_the_order_of_input(void **state)
{
    (void)state;
    league l;
    begin(&l, "", NULL);
    enter(&l, "part=same maker=Z");
    enter(&l, "part=same maker=A");
    enter(&l, "part=other maker=Z");
    expect_order(&l, NULL, 0, "other same same");
    assert_string_equal(l.ranking.row[1].maker, "A");
    end(&l);
}

static void test_several_profiles_rank_by_the_worst(void **state)
{
    (void)state;
    league l;
    begin(&l, "current_limit=5", "current_limit=9 running_current=15");
    enter(&l, "part=a");
    const pf_row *row = &l.ranking.row[0];
    assert_near(row->soa_margin, row->assessment[1].stress.soa_margin, 0);
    assert_double(row->soa_margin, <, row->assessment[0].stress.soa_margin);
    assert_near(row->conduction_loss_W, row->assessment[1].stress.conduction_loss_W, 0);
    assert_int_equal(row->deciding_profile, 1);
    end(&l);
}

static void test_one_failing_profile_fails_the_part(void **state)
{
    (void)state;
    league l;
    begin(&l, "gate_drive=17", "");
    enter(&l, "part=a");
    assert_int_equal(l.ranking.row[0].verdict, PF_FAIL);
    assert_int_equal(l.ranking.row[0].deciding_profile, 0);
    end(&l);
}

static void test_a_value_that_one_profile_leaves_open_is_open(void **state)
{
    (void)state;
    league l;
    begin(&l, "", "gate_drive=4");
    enter(&l, "part=a");
    assert_not_stated(l.ranking.row[0].conduction_loss_W);
    assert_int_equal(l.ranking.row[0].verdict, PF_UNASSESSED);
    end(&l);
}

static void test_sort_keys_are_read_by_name(void **state)
{
    (void)state;
    for (int i = 0; i < PF_SORT_COUNT; i++) {
        pf_sort_key key;
        assert_int_equal(pf_sort_key_read(pf_sort_key_text((pf_sort_key)i), &key), PF_OK);
        assert_int_equal(key, i);
    }
    pf_sort_key key;
    assert_int_equal(pf_sort_key_read("beauty", &key), PF_NOT_FOUND);
    assert_int_equal(pf_sort_key_read("", &key), PF_NOT_FOUND);
}

static void test_an_empty_ranking_sorts(void **state)
{
    (void)state;
    league l;
    begin(&l, "", NULL);
    expect_order(&l, NULL, 0, "");
    end(&l);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_pass_then_unassessed_then_fail_whatever_the_margin),
        cmocka_unit_test(test_default_order_is_margin_then_loss_then_junction),
        cmocka_unit_test(test_chosen_keys_order_within_the_verdict),
        cmocka_unit_test(test_a_second_key_breaks_the_first_ones_ties),
        cmocka_unit_test(test_ties_end_by_part_and_maker_not_by_the_order_of_input),
        cmocka_unit_test(test_several_profiles_rank_by_the_worst),
        cmocka_unit_test(test_one_failing_profile_fails_the_part),
        cmocka_unit_test(test_a_value_that_one_profile_leaves_open_is_open),
        cmocka_unit_test(test_sort_keys_are_read_by_name),
        cmocka_unit_test(test_an_empty_ranking_sorts),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
