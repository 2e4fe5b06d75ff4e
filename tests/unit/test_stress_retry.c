/* test_stress_retry.c: claims about repeated tries into a short: hot spot on Z_SOA for the last
** try, Zth for the earlier ones, and the case that warms.
 */
#include "support/bench.h"
#include "support/near.h"
#include "support/settings.h"

#include <stdio.h>

#define POWER 60.0 /* 12 V, 5 A */
#define ON_S 5e-3

static const double r[] = {0.05, 0.15, 0.3}, tau[] = {1e-4, 2e-3, 5e-2};

static double foster(double time_s)
{
    double sum = 0;
    for (int i = 0; i < 3; i++)
        sum += r[i] * -expm1(-time_s / tau[i]);
    return sum;
}

/* Hot-spot rise of a try, from the margin: (T_allow - T_start)/margin. */
static double hot_rise(const pf_outcome *o)
{
    return (175 - o->start_degC) / o->soa_margin;
}

typedef struct rises {
    double earlier_K; /* what retry adds to a single short */
    double junction_K;
} rises;

static rises run(const char *part, const char *profile)
{
    bench b;
    bench_run(&b, part, profile);
    const pf_outcome *retry = bench_outcome(&b, PF_RETRY);
    const pf_outcome *single = bench_outcome(&b, PF_SHORT_RUNNING);
    rises found = {hot_rise(retry) - hot_rise(single),
                   retry->peak_junction_degC - retry->start_degC};
    bench_clear(&b);
    return found;
}

#define NO_WARMING "case_to_ambient=1e-9 "

static void test_one_try_is_the_single_short(void **state)
{
    (void)state;
    rises found = run("", NO_WARMING "retry_interval=0.1 retry_count=1");
    assert_true(fabs(found.earlier_K) < 1e-6);
    assert_near(found.junction_K, POWER * foster(ON_S), 1e-9);
}

static void test_earlier_tries_add_what_zth_keeps_of_them(void **state)
{
    (void)state;
    double expected = 0;
    for (int k = 1; k < 4; k++)
        expected += foster(ON_S + k * 0.02) - foster(k * 0.02);
    rises found = run("", NO_WARMING "retry_interval=0.02 retry_count=4");
    assert_near(found.earlier_K, POWER * expected, 1e-6);
    assert_near(found.junction_K, POWER * (expected + foster(ON_S)), 1e-6);
}

/* Endless: the geometric series of each pair. */
static void test_endless_tries_are_the_limit_of_many(void **state)
{
    (void)state;
    double expected = 0;
    for (int i = 0; i < 3; i++)
        expected += r[i] * expm1(-ON_S / tau[i]) / expm1(-0.02 / tau[i]);
    rises endless = run("", NO_WARMING "retry_interval=0.02 retry_count=endless");
    rises many = run("", NO_WARMING "retry_interval=0.02 retry_count=100000");
    assert_near(endless.junction_K, POWER * expected, 1e-6);
    assert_near(many.junction_K, endless.junction_K, 1e-9);
}

static void test_an_interval_without_a_count_is_endless(void **state)
{
    (void)state;
    rises open = run("", NO_WARMING "retry_interval=0.02");
    rises endless = run("", NO_WARMING "retry_interval=0.02 retry_count=endless");
    assert_near(open.junction_K, endless.junction_K, 1e-15);
}

static void test_points_give_the_same_train_as_the_pairs_that_they_sample(void **state)
{
    (void)state;
    char points[4096] = "foster= zth=";
    size_t at = 12;
    for (int i = 0; i <= 120; i++) {
        double t = 1e-6 * pow(10, i / 20.0);
        at += (size_t)snprintf(points + at, sizeof points - at, "%s%.6g:%.9g", i ? "," : "", t,
                               foster(t));
    }
    rises pairs = run("", NO_WARMING "retry_interval=0.02 retry_count=50");
    rises sampled = run(points, NO_WARMING "retry_interval=0.02 retry_count=50");
    assert_near(sampled.junction_K, pairs.junction_K, 2e-3);
    pairs = run("", NO_WARMING "retry_interval=0.02 retry_count=endless");
    sampled = run(points, NO_WARMING "retry_interval=0.02 retry_count=endless");
    assert_near(sampled.junction_K, pairs.junction_K, 2e-3);
}

static void test_case_warms_by_mean_power_in_full_without_a_heat_capacity(void **state)
{
    (void)state;
    rises cool = run("", NO_WARMING "retry_interval=0.2 retry_count=10 running_current=0");
    rises warm = run("", "case_to_ambient=20 retry_interval=0.2 retry_count=10 running_current=0");
    double mean_W = POWER * ON_S / 0.2;
    assert_near(warm.earlier_K - cool.earlier_K, mean_W * 20, 1e-6);
    assert_near(warm.junction_K - cool.junction_K, mean_W * 20, 1e-6);
}

static void test_case_warms_exponentially_with_a_heat_capacity(void **state)
{
    (void)state;
    rises cool = run("", NO_WARMING "retry_interval=0.2 retry_count=10 running_current=0");
    rises warm = run("", "case_to_ambient=20 case_heat_capacity=0.5 retry_interval=0.2 "
                         "retry_count=10 running_current=0");
    double share = -expm1(-10 * 0.2 / (20 * 0.5));
    assert_near(warm.earlier_K - cool.earlier_K, POWER * ON_S / 0.2 * 20 * share, 1e-6);
}

static void test_worst_corner_is_the_shortest_interval(void **state)
{
    (void)state;
    rises wide = run("", NO_WARMING "retry_interval=0.02..0.5 retry_count=3..9");
    rises worst = run("", NO_WARMING "retry_interval=0.02 retry_count=9");
    assert_near(wide.junction_K, worst.junction_K, 1e-12);
}

static void test_without_zth_retry_is_unassessed(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "foster=", "retry_interval=0.1 retry_count=3");
    const pf_outcome *o = bench_outcome(&b, PF_RETRY);
    assert_int_equal(o->cause, PF_CAUSE_NO_ZTH);
    assert_not_stated(o->soa_margin);
    assert_not_stated(o->peak_junction_degC);
    assert_int_equal(b.assessment.verdict, PF_UNASSESSED);
    bench_clear(&b);
}

static void test_without_a_way_to_ambient_the_case_is_not_taken_as_cold(void **state)
{
    (void)state;
    bench b;
    bench_run(&b, "rth_ja=", "retry_interval=0.1 retry_count=3 start_from=ambient");
    assert_not_stated(bench_outcome(&b, PF_RETRY)->soa_margin);
    bench_clear(&b);
    bench_run(&b, "", "retry_interval=0.1 retry_count=3");
    assert_true(b.stress->remarks & PF_REMARK_CASE_FROM_RTH);
    double warming = POWER * ON_S / 0.1 * (40 - 0.5), earlier = 0;
    for (int k = 1; k < 3; k++)
        earlier += foster(ON_S + k * 0.1) - foster(k * 0.1);
    assert_near(bench_outcome(&b, PF_RETRY)->peak_junction_degC - b.stress->running_degC,
                warming + POWER * (earlier + foster(ON_S)), 1e-6);
    bench_clear(&b);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_one_try_is_the_single_short),
        cmocka_unit_test(test_earlier_tries_add_what_zth_keeps_of_them),
        cmocka_unit_test(test_endless_tries_are_the_limit_of_many),
        cmocka_unit_test(test_an_interval_without_a_count_is_endless),
        cmocka_unit_test(test_points_give_the_same_train_as_the_pairs_that_they_sample),
        cmocka_unit_test(test_case_warms_by_mean_power_in_full_without_a_heat_capacity),
        cmocka_unit_test(test_case_warms_exponentially_with_a_heat_capacity),
        cmocka_unit_test(test_worst_corner_is_the_shortest_interval),
        cmocka_unit_test(test_without_zth_retry_is_unassessed),
        cmocka_unit_test(test_without_a_way_to_ambient_the_case_is_not_taken_as_cold),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
