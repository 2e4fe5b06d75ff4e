/* test_cross_hot_spot.c: hot-spot superposition by weights against adaptive quadrature (GSL) of
** Duhamel's integral, on random parts.
**
** methods.md asks for 1 %, and for no more than 0.3 % to the optimistic side. Prints the worst of
** both sides.
*/
#include "reference/duhamel.h"
#include "reference/start_case.h"
#include "support/near.h"
#include "support/random_case.h"
#include "support/settings.h"

#include <passfet/stress.h>
#include <stdlib.h>

#define CASES 24 /* per start control and kind of recording */
#define OPTIMISTIC 0.003
#define PESSIMISTIC 0.01

typedef struct extremes {
    double optimistic, pessimistic; /* >= 0, of the rise */
    int cases, optimistic_case, pessimistic_case;
} extremes;

static void note(extremes *seen, double ours, double exact)
{
    double over = ours / exact - 1;
    if (-over > seen->optimistic) {
        seen->optimistic = -over;
        seen->optimistic_case = seen->cases;
    }
    if (over > seen->pessimistic) {
        seen->pessimistic = over;
        seen->pessimistic_case = seen->cases;
    }
    seen->cases++;
}

static void report(const char *what, const extremes *seen)
{
    print_message("hot spot, %s: %d cases, worst optimistic %.3f %% (case %d), pessimistic %.3f %% "
                  "(case %d)\n",
                  what, seen->cases, 100 * seen->optimistic, seen->optimistic_case,
                  100 * seen->pessimistic, seen->pessimistic_case);
}

static void expect_within(const extremes *seen)
{
    assert_double(seen->cases, >, 0);
    assert_double(seen->optimistic, <, OPTIMISTIC);
    assert_double(seen->pessimistic, <, PESSIMISTIC);
}

/* The rise that the margin of a slot stands for; NaN where it is unassessed. */
static double rise_of(const pf_profile *profile, const pf_capture *capture, const pf_part *part,
                      pf_event event)
{
    pf_plan *plan;
    pf_stress stress;
    pf_scratch *scratch = pf_scratch_new();
    double rise = NAN;
    assert_int_equal(pf_plan_new(profile, capture, capture ? 1 : 0, &plan, NULL), PF_OK);
    assert_int_equal(pf_plan_evaluate(plan, part, scratch, &stress), PF_OK);
    for (size_t i = 0; i < stress.count; i++)
        if (pf_plan_event(plan, i) == event)
            rise =
                (stress.allowed_degC - stress.outcome[i].start_degC) / stress.outcome[i].soa_margin;
    pf_plan_free(plan);
    pf_scratch_free(scratch);
    return rise;
}

static void try_start(random_source *source, pf_start_control control, extremes *seen)
{
    pf_part part;
    pf_profile profile;
    pf_waveform wave;
    double when;
    pf_part_init(&part);
    pf_profile_init(&profile);
    random_profile(source, control, 0, &profile);
    profile_state(&profile, "start_from=ambient ambient_temperature=25 running_current=0");
    random_part(source, profile.value[PF_SUPPLY_VOLTAGE].typ, &part);
    assert_int_equal(pf_profile_finish(&profile, NULL, NULL), PF_OK);
    const pf_start start = start_case(&profile);
    double hold_s = profile.value[PF_FAULT_TIME].max;
    assert_int_equal(pf_start_waveform(&start, hold_s, &wave), PF_OK);
    const form shape = {wave.time_s, wave.vds_V, wave.id_A, wave.count};
    note(seen, rise_of(&profile, NULL, &part, PF_START_UP), exact_hot_peak_K(&part, &shape, &when));
    pf_waveform_clear(&wave);
    pf_part_clear(&part);
}

static void test_starts_of_every_control_match_quadrature(void **state)
{
    (void)state;
    extremes seen[PF_START_FOLDBACK + 1] = {0};
    for (int control = PF_START_SLEW; control <= PF_START_FOLDBACK; control++) {
        random_source source = {1000 + (uint64_t)control};
        for (int i = 0; i < CASES; i++)
            try_start(&source, (pf_start_control)control, &seen[control]);
        report(pf_start_control_text((pf_start_control)control), &seen[control]);
    }
    for (int control = PF_START_SLEW; control <= PF_START_FOLDBACK; control++)
        expect_within(&seen[control]);
}

/* A recording of a few humps, as a probe would see a start with loads that come and go. */
static size_t random_form(random_source *source, double supply_V, double *t, double *v, double *i)
{
    size_t count = 8 + (size_t)random_below(source, 30);
    double step = random_log_between(source, 1e-5, 2e-3);
    for (size_t k = 0; k < count; k++) {
        t[k] = k ? t[k - 1] + step * random_between(source, 0.2, 1) : 0;
        v[k] = supply_V * random_between(source, 0.05, 1);
        i[k] = random_between(source, 0, 10);
    }
    return count;
}

/* One recording on one random part that can carry its voltage. */
static void try_recording(random_source *source, double supply_V, const pf_capture *capture,
                          extremes *seen)
{
    double when;
    pf_part part;
    pf_profile profile;
    pf_part_init(&part);
    pf_profile_init(&profile);
    random_profile(source, PF_START_CURRENT_LIMIT, 0, &profile);
    profile_state(&profile, "ambient_temperature=25 running_current=0");
    random_part(source, supply_V, &part);
    assert_int_equal(pf_profile_finish(&profile, NULL, NULL), PF_OK);
    const form shape = {capture->time_s, capture->vds_V, capture->id_A, capture->count};
    note(seen, rise_of(&profile, capture, &part, PF_RECORDED),
         exact_hot_peak_K(&part, &shape, &when));
    pf_part_clear(&part);
}

static void test_recordings_match_quadrature(void **state)
{
    (void)state;
    random_source source = {77};
    extremes seen = {0};
    for (int n = 0; n < CASES; n++) {
        double t[40], v[40], i[40], supply = random_log_between(&source, 5, 60);
        const pf_capture capture = {"c", random_form(&source, supply, t, v, i), t, v, i};
        try_recording(&source, supply, &capture, &seen);
    }
    report("recordings", &seen);
    expect_within(&seen);
}

/* A triangle of some 100 us in a quarter of a second of a small current. */
static void test_a_short_spike_in_a_long_recording_is_not_lost(void **state)
{
    (void)state;
    random_source source = {78};
    extremes seen = {0};
    for (int n = 0; n < CASES; n++) {
        double width = random_log_between(&source, 2e-5, 1e-3),
               at = random_between(&source, 0.01, 0.2);
        double supply = random_log_between(&source, 5, 60);
        const double t[] = {0, at, at + width / 2, at + width, 0.25};
        const double v[] = {supply, supply, supply, supply, supply}, i[] = {0.1, 0.1, 20, 0.1, 0};
        const pf_capture capture = {"spike", 5, t, v, i};
        try_recording(&source, supply, &capture, &seen);
    }
    report("spikes", &seen);
    expect_within(&seen);
}

/* What an oscilloscope gives: many even samples. */
static void test_a_dense_recording_matches_quadrature(void **state)
{
    (void)state;
    enum { SAMPLES = 1000 };
    static double t[SAMPLES], v[SAMPLES], i[SAMPLES];
    random_source source = {79};
    extremes seen = {0};
    for (int n = 0; n < CASES / 8; n++) {
        double supply = random_log_between(&source, 5, 60);
        double length = random_log_between(&source, 1e-3, 5e-2);
        for (int k = 0; k < SAMPLES; k++) {
            double x = (double)k / SAMPLES;
            t[k] = length * x;
            v[k] = supply * (1 - x);
            i[k] = 5 + 3 * sin(9 * x);
        }
        const pf_capture capture = {"scope", SAMPLES, t, v, i};
        try_recording(&source, supply, &capture, &seen);
    }
    report("dense recordings", &seen);
    expect_within(&seen);
}

/* Carslaw & Jaeger, semi-infinite solid: Z = a sqrt(t). */
static void test_quadrature_itself_meets_the_closed_forms(void **state)
{
    (void)state;
    pf_part part;
    double when;
    pf_part_init(&part);
    part_state(&part,
               "tj_max=125 soa=1e-9/1:1e5,100:1e3;1/1:3.16227766016838,100:0.0316227766016838");
    const double t[] = {0, 1}, level[] = {100, 100}, down[] = {1, 0}, up[] = {0, 1};
    const form falling = {t, level, down, 2}, rising = {t, level, up, 2};
    double whole = 100 / 0.0316227766016838;
    assert_near(exact_hot_peak_K(&part, &falling, &when) / whole, sqrt(2) / 3, 2e-4);
    assert_near(when, 0.5, 0.02);
    assert_near(exact_hot_peak_K(&part, &rising, &when) / whole, 2.0 / 3, 2e-4);
    pf_part_clear(&part);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_quadrature_itself_meets_the_closed_forms),
        cmocka_unit_test(test_starts_of_every_control_match_quadrature),
        cmocka_unit_test(test_recordings_match_quadrature),
        cmocka_unit_test(test_a_short_spike_in_a_long_recording_is_not_lost),
        cmocka_unit_test(test_a_dense_recording_matches_quadrature),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
