/* test_review_trials.c: claims about tolerance analysis and unbeaten parts. */
#include "rank/draw.h"
#include "support/bench.h"
#include "support/claims.h"
#include "support/near.h"
#include "support/random_case.h"

#include <math.h>
#include <passfet/trials.h>
#include <time.h>

static pf_trials_result run(const bench *b, size_t count, uint64_t seed,
                            pf_distribution distribution)
{
    const pf_trials_request request = {count, seed, distribution};
    pf_trials *trials;
    pf_trials_result result;
    assert_int_equal(pf_trials_new(b->plan, &request, &trials, NULL), PF_OK);
    assert_int_equal(pf_trials_run(trials, &b->part, b->scratch, &result), PF_OK);
    pf_trials_free(trials);
    return result;
}

#define SPREAD                                                                                     \
    "supply_voltage=44..48..52 output_capacitance=8e-4..1e-3..1.2e-3 current_limit=3.6..4..4.4 "   \
    "fault_time=12e-3..15e-3..18e-3 ambient_temperature=0..25..55 "

/* First words for seed 42, sequence 54: the output that the author publishes with the method (from
** memory). */
static void test_words_are_those_published_for_the_method(void **state)
{
    (void)state;
    static const uint32_t published[] = {0xa15c02b7, 0x7b47f409, 0xba1d3330,
                                         0x83d2f293, 0xbfa4784b, 0xcbed606e};
    pf_random random;
    pf_random_init(&random, 42, 54);
    for (size_t i = 0; i < sizeof published / sizeof *published; i++)
        assert_int_equal(pf_random_word(&random), published[i]);
}

static void test_draws_have_the_mean_of_their_distribution(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", "supply_voltage=40..42..50");
    pf_random random;
    pf_random_init(&random, 1, 1);
    double sum[2] = {0, 0};
    for (int i = 0; i < 20000; i++)
        for (int kind = 0; kind < 2; kind++) {
            pf_profile drawn;
            pf_draw(&b.profile, (pf_distribution)kind, &random, &drawn);
            double value = drawn.value[PF_SUPPLY_VOLTAGE].typ;
            assert_double(value, >=, 40);
            assert_double(value, <=, 50);
            sum[kind] += value / 20000;
        }
    assert_near(sum[PF_TRIANGULAR], 44, 0.002); /* (40 + 42 + 50)/3 */
    assert_near(sum[PF_UNIFORM], 45, 0.002);
    bench_clear(&b);
}

static void test_collapsed_intervals_give_the_worst_case_exactly(void **state)
{
    (void)state;
    static const char *const card[] = {
        "", "supply_voltage=48 fault_time=1",
        "start_control=slew gate_current=2e-5 gate_capacitance=33e-9 "
        "fault_current=5"};
    for (size_t i = 0; i < sizeof card / sizeof *card; i++) {
        bench b;
        bench_run(&b, "crss=1e-10", card[i]);
        pf_trials_result result = run(&b, 500, 3, PF_TRIANGULAR);
        assert_double(result.margin_p01, ==, b.stress->soa_margin);
        assert_double(result.margin_p50, ==, b.stress->soa_margin);
        assert_int_equal(result.passed, b.assessment.verdict == PF_PASS ? 500 : 0);
        bench_clear(&b);
    }
}

static void test_a_seed_gives_the_same_again_and_another_does_not(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", SPREAD);
    pf_trials_result one = run(&b, 500, 3, PF_TRIANGULAR), two = run(&b, 500, 3, PF_TRIANGULAR);
    pf_trials_result other = run(&b, 500, 4, PF_TRIANGULAR);
    assert_memory_equal(&one, &two, sizeof one);
    assert_double(one.margin_p50, !=, other.margin_p50);
    bench_clear(&b);
}

static void test_no_draw_is_below_the_worst_case_by_more_than_it_was_raised(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "", SPREAD);
    pf_trials_result result = run(&b, 3000, 5, PF_UNIFORM);
    double worst = b.stress->soa_margin;
    assert_double(result.margin_p01, >=, worst / (1 + result.raised_by));
    assert_double(result.margin_p50, >=, result.margin_p01);
    bench_clear(&b);
}

/* One trial against the exact evaluation of the same draw: at most the exact margin, but for 0.5 %. */
static void test_a_trial_is_never_optimistic_by_more_than_half_a_per_cent(void **state)
{
    (void)state;
    random_source source = {23};
    for (int i = 0; i < 12; i++) {
        bench b;
        bench_run(&b, "", "");
        pf_plan_free(b.plan);
        pf_profile_init(&b.profile);
        random_part(&source, 80, &b.part);
        random_profile(&source, (pf_start_control)(1 + i % 4), 0.15, &b.profile);
        assert_int_equal(pf_profile_finish(&b.profile, NULL, NULL), PF_OK);
        assert_int_equal(pf_plan_new(&b.profile, NULL, 0, &b.plan, NULL), PF_OK);
        bench_again(&b);
        pf_trials_result result = run(&b, 1, (uint64_t)i, PF_UNIFORM);
        pf_random random;
        pf_profile drawn;
        pf_plan *plan;
        pf_assessment exact;
        pf_random_init(&random, (uint64_t)i, 1);
        pf_draw(&b.profile, PF_UNIFORM, &random, &drawn);
        assert_int_equal(pf_plan_new(&drawn, NULL, 0, &plan, NULL), PF_OK);
        assert_int_equal(pf_assess(plan, &b.part, b.scratch, &exact), PF_OK);
        assert_double(result.margin_p50, <=, exact.stress.soa_margin * 1.005);
        assert_double(result.margin_p50, >=, exact.stress.soa_margin * 0.8);
        pf_plan_free(plan);
        bench_clear(&b);
    }
}

static void test_an_unassessed_part_passes_no_trial(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "soa=", SPREAD);
    pf_trials_result result = run(&b, 200, 1, PF_TRIANGULAR);
    assert_int_equal(result.passed, 0);
    assert_int_equal(result.unassessed, 200);
    assert_not_stated(result.margin_p01);
    bench_clear(&b);
}

/* Wilson's interval for 8 of 10 at z = 1.96: 0.4902 to 0.9433 (a textbook value, from memory). */
static void test_interval_is_wilsons(void **state)
{
    (void)state;
    double low, high;
    pf_wilson_interval(8, 10, &low, &high);
    assert_near(low, 0.4902, 0.001);
    assert_near(high, 0.9433, 0.001);
    pf_wilson_interval(0, 100, &low, &high);
    assert_double(low, ==, 0);
    assert_near(high, 0.0370, 0.01);
    pf_wilson_interval(100, 100, &low, &high);
    assert_double(high, ==, 1);
}

/* Processor time, compared with itself on the same machine at the same moment. */
static void test_ten_thousand_trials_cost_less_than_a_thousand_evaluations(void **state)
{
    (void)state;
    static const char *const card[] = {"output_capacitance=8e-4..1e-3..1.2e-3", SPREAD};
    for (size_t i = 0; i < sizeof card / sizeof *card; i++) {
        bench b;
        bench_run(&b, "", card[i]);
        clock_t begin = clock();
        for (int k = 0; k < 20; k++) {
            pf_plan *plan;
            pf_assessment assessment;
            assert_int_equal(pf_plan_new(&b.profile, NULL, 0, &plan, NULL), PF_OK);
            assert_int_equal(pf_assess(plan, &b.part, b.scratch, &assessment), PF_OK);
            pf_plan_free(plan);
        }
        double evaluation = (double)(clock() - begin) / 20;
        begin = clock();
        run(&b, 10000, 1, PF_TRIANGULAR);
        double trials = (double)(clock() - begin);
        print_message("10,000 trials cost %.0f evaluations\n", trials / evaluation);
        assert_double(trials, <=, 1000 * evaluation);
        bench_clear(&b);
    }
}

static void add_row(pf_row *row, pf_verdict verdict, double margin, double loss, double peak,
                    double price)
{
    *row = (pf_row){.verdict = verdict,
                    .soa_margin = margin,
                    .conduction_loss_W = loss,
                    .peak_junction_degC = peak,
                    .price = price};
}

static void test_unbeaten_rows_are_those_that_none_beats_in_all(void **state)
{
    (void)state;
    pf_row row[6];
    const double none = (double)NAN;
    add_row(&row[0], PF_PASS, 3, 1, 100, 2);
    add_row(&row[1], PF_PASS, 2, 1, 100, 2);      /* beaten by 0 */
    add_row(&row[2], PF_PASS, 2, 0.5, 110, 3);    /* less loss */
    add_row(&row[3], PF_PASS, 1.5, 1, 120, 1);    /* cheaper */
    add_row(&row[4], PF_PASS, 1.5, 1, 120, none); /* beaten in the rest, its price not stated */
    add_row(&row[5], PF_FAIL, 9, 0.1, 50, 0.1);   /* does not pass */
    const pf_ranking ranking = {.row = row, .count = 6};
    static const bool unbeaten[] = {true, false, true, true, false, false};
    for (size_t i = 0; i < 6; i++)
        assert_int_equal(pf_row_is_unbeaten(&ranking, i), unbeaten[i]);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_words_are_those_published_for_the_method),
        cmocka_unit_test(test_draws_have_the_mean_of_their_distribution),
        cmocka_unit_test(test_collapsed_intervals_give_the_worst_case_exactly),
        cmocka_unit_test(test_a_seed_gives_the_same_again_and_another_does_not),
        cmocka_unit_test(test_no_draw_is_below_the_worst_case_by_more_than_it_was_raised),
        cmocka_unit_test(test_a_trial_is_never_optimistic_by_more_than_half_a_per_cent),
        cmocka_unit_test(test_an_unassessed_part_passes_no_trial),
        cmocka_unit_test(test_interval_is_wilsons),
        cmocka_unit_test(test_ten_thousand_trials_cost_less_than_a_thousand_evaluations),
        cmocka_unit_test(test_unbeaten_rows_are_those_that_none_beats_in_all),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
