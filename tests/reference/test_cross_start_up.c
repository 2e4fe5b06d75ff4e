/* test_cross_start_up.c: starts as an ordinary differential equation in time, solved by GSL
** (Runge-Kutta-Fehlberg 4(5)), against ours, which integrates over the output voltage.
**
** All four controls, each with no load, a constant current, a resistance and a constant power,
** drawn at once or above a voltage. methods.md, section 4.
*/
#include "reference/start_case.h"
#include "support/near.h"
#include "support/random_case.h"
#include "support/settings.h"

#include <gsl/gsl_odeiv2.h>
#include <stdio.h>

#define TOLERANCE 1e-3 /* in duration and energy */
#define STEPS 4000     /* at least, per start */

/* State: output voltage, energy in the FET. Written from the table of methods.md, not from src. */
static double gate_A(const pf_start *s, double out_V, double load_A)
{
    double vds = s->supply_V - out_V;
    switch (s->control) {
    case PF_START_SLEW: {
        double demand = s->capacitance_F * s->slew_Vps + load_A;
        return demand > s->current_limit_A ? s->current_limit_A : demand;
    }
    case PF_START_CURRENT_LIMIT:
        return s->current_limit_A;
    case PF_START_POWER_LIMIT:
        return vds * s->current_limit_A < s->power_limit_W ? s->current_limit_A
                                                           : s->power_limit_W / vds;
    default:
        return s->foldback_A + (s->current_limit_A - s->foldback_A) * out_V / s->supply_V;
    }
}

static double drawn_A(const pf_start *s, double out_V)
{
    if (out_V < s->load_above_V) return 0;
    return s->load_A + out_V / s->load_ohm + (s->load_W > 0 ? s->load_W / out_V : 0);
}

static int slope(double time_s, const double y[], double dydt[], void *context)
{
    (void)time_s;
    const pf_start *s = context;
    double load = drawn_A(s, y[0]), current = gate_A(s, y[0], load);
    dydt[0] = (current - load) / s->capacitance_F;
    dydt[1] = (s->supply_V - y[0]) * current;
    return 0;
}

/* Duration and energy until the output has reached the supply. */
static void solve(const pf_start *start, double guess_s, double *duration_s, double *energy_J)
{
    pf_start s = *start;
    gsl_odeiv2_system system = {slope, NULL, 2, &s};
    gsl_odeiv2_step *step = gsl_odeiv2_step_alloc(gsl_odeiv2_step_rkf45, 2);
    gsl_odeiv2_control *control = gsl_odeiv2_control_y_new(1e-9, 1e-9);
    gsl_odeiv2_evolve *evolve = gsl_odeiv2_evolve_alloc(2);
    double t = 0, h = guess_s * 1e-6, y[2] = {s.from_V, 0};
    while (y[0] < s.supply_V && t < 100 * guess_s) {
        double before_s = t, before[2] = {y[0], y[1]};
        gsl_odeiv2_evolve_apply(evolve, control, step, &system, &t, t + guess_s / STEPS, &h, y);
        if (y[0] < s.supply_V) continue;
        double share = (s.supply_V - before[0]) / (y[0] - before[0]);
        *duration_s = before_s + share * (t - before_s);
        *energy_J = before[1] + share * (y[1] - before[1]);
    }
    gsl_odeiv2_evolve_free(evolve);
    gsl_odeiv2_control_free(control);
    gsl_odeiv2_step_free(step);
}

typedef enum load_kind { NO_LOAD, CURRENT_LOAD, OHMIC_LOAD, POWER_LOAD, LOAD_KINDS } load_kind;

static pf_start random_start(random_source *source, pf_start_control control, load_kind load)
{
    double supply = random_log_between(source, 5, 60), amps = random_log_between(source, 0.5, 8);
    pf_start s = {
        .control = control,
        .supply_V = supply,
        .capacitance_F = random_log_between(source, 1e-4, 5e-3),
        .current_limit_A = amps * (control == PF_START_CURRENT_LIMIT ? 1 : 2.5),
        .power_limit_W = amps * supply * random_between(source, 0.8, 2),
        .foldback_A = amps,
        .load_ohm = INFINITY,
        .load_above_V = random_below(source, 2) ? supply * random_between(source, 0.1, 0.9) : 0,
    };
    s.slew_Vps = amps / s.capacitance_F;
    double drawn = amps * random_between(source, 0.1, 0.7);
    if (load == CURRENT_LOAD) s.load_A = drawn;
    if (load == OHMIC_LOAD) s.load_ohm = supply / drawn;
    if (load == POWER_LOAD) {
        s.load_above_V = supply * random_between(source, 0.5, 0.9);
        s.load_W = drawn * s.load_above_V;
    }
    return s;
}

static void check_control(pf_start_control control)
{
    random_source source = {500 + (uint64_t)control};
    double worst_s = 0, worst_J = 0;
    for (int i = 0; i < 8 * LOAD_KINDS; i++) {
        pf_start start = random_start(&source, control, (load_kind)(i % LOAD_KINDS));
        pf_waveform wave;
        double duration = NAN, energy = NAN;
        assert_int_equal(pf_start_waveform(&start, 1, &wave), PF_OK);
        assert_false(wave.stuck);
        solve(&start, wave.duration_s, &duration, &energy);
        assert_near(wave.duration_s, duration, TOLERANCE);
        assert_near(wave.energy_J, energy, TOLERANCE);
        worst_s = fmax(worst_s, fabs(wave.duration_s / duration - 1));
        worst_J = fmax(worst_J, fabs(wave.energy_J / energy - 1));
        pf_waveform_clear(&wave);
    }
    print_message("start-up, %s: worst duration %.4f %%, energy %.4f %%\n",
                  pf_start_control_text(control), 100 * worst_s, 100 * worst_J);
}

static void test_slew_matches_the_equation_in_time(void **state)
{
    (void)state;
    check_control(PF_START_SLEW);
}

static void test_current_limit_matches_the_equation_in_time(void **state)
{
    (void)state;
    check_control(PF_START_CURRENT_LIMIT);
}

static void test_power_limit_matches_the_equation_in_time(void **state)
{
    (void)state;
    check_control(PF_START_POWER_LIMIT);
}

static void test_foldback_matches_the_equation_in_time(void **state)
{
    (void)state;
    check_control(PF_START_FOLDBACK);
}

/* The straight lines between the points carry the energy that the quadrature counted. */
static void test_the_waveform_carries_the_energy_that_is_reported(void **state)
{
    (void)state;
    random_source source = {9};
    for (int i = 0; i < 64; i++) {
        pf_start start = random_start(&source, (pf_start_control)(PF_START_SLEW + i % 4),
                                      (load_kind)(i / 4 % LOAD_KINDS));
        pf_waveform w;
        double sum = 0;
        assert_int_equal(pf_start_waveform(&start, 1, &w), PF_OK);
        for (size_t k = 0; k + 1 < w.count; k++)
            sum += (w.time_s[k + 1] - w.time_s[k]) *
                   (w.vds_V[k] * w.id_A[k] + w.vds_V[k + 1] * w.id_A[k + 1] +
                    (w.vds_V[k] + w.vds_V[k + 1]) * (w.id_A[k] + w.id_A[k + 1])) /
                   6;
        assert_near(sum, w.energy_J, 1e-3);
        pf_waveform_clear(&w);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_slew_matches_the_equation_in_time),
        cmocka_unit_test(test_current_limit_matches_the_equation_in_time),
        cmocka_unit_test(test_power_limit_matches_the_equation_in_time),
        cmocka_unit_test(test_foldback_matches_the_equation_in_time),
        cmocka_unit_test(test_the_waveform_carries_the_energy_that_is_reported),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
