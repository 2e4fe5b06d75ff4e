/* test_review_capture.c: a start recorded by an oscilloscope is judged as the start itself. */
#include "stress/start_up.h"
#include "support/bench.h"
#include "support/claims.h"
#include "support/near.h"
#include "support/random_case.h"

#include <math.h>
#include <stdlib.h>

#define SAMPLES 4000

/* The waveform of a start, sampled. */
typedef struct recording {
    double time_s[SAMPLES], vds_V[SAMPLES], id_A[SAMPLES];
} recording;

static double line_at(const pf_waveform *wave, const double *value, double time_s)
{
    size_t right = 1;
    while (right + 1 < wave->count && wave->time_s[right] < time_s)
        right++;
    double width = wave->time_s[right] - wave->time_s[right - 1];
    double share = width > 0 ? (time_s - wave->time_s[right - 1]) / width : 1;
    return value[right - 1] + fmin(1, share) * (value[right] - value[right - 1]);
}

/* Steps that vary by a factor of four, noise of a share of full scale, an offset of the current. */
static void record(recording *to, double noise, double offset, double *energy_J)
{
    const pf_start start = {.control = PF_START_POWER_LIMIT,
                            .supply_V = 48,
                            .capacitance_F = 1e-3,
                            .current_limit_A = 4,
                            .power_limit_W = 60,
                            .load_ohm = (double)INFINITY};
    pf_waveform wave;
    random_source source = {5};
    assert_int_equal(pf_start_waveform(&start, 1, &wave), PF_OK);
    *energy_J = wave.energy_J;
    double at = 0, step[SAMPLES], whole = 0;
    for (size_t i = 1; i < SAMPLES; i++)
        whole += step[i] = random_between(&source, 0.5, 2);
    for (size_t i = 0; i < SAMPLES; i++) {
        if (i) at += step[i] * wave.duration_s / whole;
        to->time_s[i] = at;
        to->vds_V[i] = line_at(&wave, wave.vds_V, at) + 48 * noise * random_between(&source, -1, 1);
        to->id_A[i] =
            line_at(&wave, wave.id_A, at) + 4 * noise * random_between(&source, -1, 1) - 4 * offset;
    }
    pf_waveform_clear(&wave);
}

#define CARD                                                                                       \
    "supply_voltage=48 output_capacitance=1e-3 current_limit=4 start_control=power_limit "         \
    "power_limit=60 fault_time=0.1 fault_current=0.1"

static void run(bench *b, const recording *from)
{
    const pf_capture capture = {"scope", SAMPLES, from->time_s, from->vds_V, from->id_A};
    bench_run_capture(b, "", CARD, &capture);
}

static void test_energy_survives_resampling_within_a_thousandth(void **state)
{
    (void)state;
    static recording from;
    bench b;
    double energy_J;
    record(&from, 0, 0, &energy_J);
    run(&b, &from);
    assert_near(bench_outcome(&b, PF_RECORDED)->energy_J, energy_J, 0.001);
    assert_near(bench_outcome(&b, PF_RECORDED)->duration_s,
                bench_outcome(&b, PF_START_UP)->duration_s, 0.001);
    assert_near(bench_outcome(&b, PF_RECORDED)->peak_power_W, 60, 0.001);
    bench_clear(&b);
}

static void test_one_per_cent_of_noise_moves_the_margin_by_less_than_two(void **state)
{
    (void)state;
    static recording from;
    bench b;
    double energy_J;
    record(&from, 0.01, 0, &energy_J);
    run(&b, &from);
    assert_near(bench_outcome(&b, PF_RECORDED)->soa_margin,
                bench_outcome(&b, PF_START_UP)->soa_margin, 0.02);
    bench_clear(&b);
}

static void test_a_negative_offset_of_half_a_per_cent_is_within_two_as_well(void **state)
{
    (void)state;
    static recording from;
    bench b;
    double energy_J;
    record(&from, 0.01, 0.005, &energy_J);
    run(&b, &from);
    assert_near(bench_outcome(&b, PF_RECORDED)->soa_margin,
                bench_outcome(&b, PF_START_UP)->soa_margin, 0.02);
    bench_clear(&b);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_energy_survives_resampling_within_a_thousandth),
        cmocka_unit_test(test_one_per_cent_of_noise_moves_the_margin_by_less_than_two),
        cmocka_unit_test(test_a_negative_offset_of_half_a_per_cent_is_within_two_as_well),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
