/* test_cross_closed.c: the running junction against a root finder of GSL, and curve reading against
** GSL's linear interpolation of logarithms.
*/
#include "numeric/curve.h"
#include "support/bench.h"
#include "support/near.h"
#include "support/random_case.h"
#include "support/settings.h"

#include <gsl/gsl_interp.h>
#include <gsl/gsl_roots.h>
#include <stdio.h>

typedef struct card {
    double ambient_degC, rth_KpW, current_A, cold_ohm, ratio, tj_max_degC;
} card;

/* T - T_a - R_th I^2 R(T) */
static double imbalance(double junction_degC, void *context)
{
    const card *c = context;
    double share = (junction_degC - 25) / (c->tj_max_degC - 25);
    double ohm = c->cold_ohm * (1 + (c->ratio - 1) * share);
    return junction_degC - c->ambient_degC - c->rth_KpW * c->current_A * c->current_A * ohm;
}

static double root(card *c)
{
    gsl_function f = {imbalance, c};
    gsl_root_fsolver *solver = gsl_root_fsolver_alloc(gsl_root_fsolver_brent);
    gsl_root_fsolver_set(solver, &f, c->ambient_degC - 1, 1e6);
    for (int i = 0; i < 300; i++) {
        gsl_root_fsolver_iterate(solver);
        double low = gsl_root_fsolver_x_lower(solver), high = gsl_root_fsolver_x_upper(solver);
        if (high - low < 1e-10 * fabs(low)) break;
    }
    double found = gsl_root_fsolver_root(solver);
    gsl_root_fsolver_free(solver);
    return found;
}

static void test_running_junction_matches_a_root_finder(void **state)
{
    (void)state;
    random_source source = {7};
    double worst = 0;
    int settled = 0;
    for (int i = 0; i < 300; i++) {
        card c = {random_between(&source, -40, 85),     random_log_between(&source, 1, 80),
                  random_log_between(&source, 0.5, 40), random_log_between(&source, 5e-4, 0.05),
                  random_between(&source, 1, 2.5),      random_below(&source, 2) ? 150 : 175};
        char part[256], profile[256];
        snprintf(part, sizeof part, "rdson=10:%.17g rdson_hot_ratio=%.17g tj_max=%g rth_ja=%.17g",
                 c.cold_ohm, c.ratio, c.tj_max_degC, c.rth_KpW);
        snprintf(profile, sizeof profile, "running_current=%.17g ambient_temperature=%.17g",
                 c.current_A, c.ambient_degC);
        bench b;
        bench_run(&b, part, profile);
        double gain = (imbalance(1e9, &c) - imbalance(0, &c)) / 1e9;
        if (gain <= 0) {
            assert_int_equal(b.stress->running_cause, PF_CAUSE_RUNAWAY);
        } else if (gain > 1e-3) {
            double exact = root(&c), loss = (exact - c.ambient_degC) / c.rth_KpW;
            assert_near(b.stress->running_degC + 273.15, exact + 273.15, 1e-6);
            assert_near(b.stress->conduction_loss_W, loss, 1e-6);
            worst = fmax(worst, fabs(b.stress->conduction_loss_W / loss - 1));
            settled++;
        }
        bench_clear(&b);
    }
    print_message("steady state: %d cards, worst loss %.2g\n", settled, worst);
    assert_int_equal(settled > 100, 1);
}

static void test_curves_match_gsl_interpolation_of_logarithms(void **state)
{
    (void)state;
    random_source source = {8};
    double worst = 0;
    for (int n = 0; n < 50; n++) {
        double x[20], y[20];
        size_t count = 2 + (size_t)random_below(&source, 18);
        for (size_t i = 0; i < count; i++) {
            x[i] = (i ? x[i - 1] : -9) + random_between(&source, 0.01, 2);
            y[i] = random_between(&source, -3, 6);
        }
        gsl_interp *linear = gsl_interp_alloc(gsl_interp_linear, count);
        gsl_interp_init(linear, x, y, count);
        for (int k = 0; k < 40; k++) {
            double at = random_between(&source, x[0], x[count - 1]);
            double ours = exp(pf_curve_log_at(x, y, count, at));
            double exact = exp(gsl_interp_eval(linear, x, y, at, NULL));
            assert_near(ours, exact, 1e-9);
            worst = fmax(worst, fabs(ours / exact - 1));
        }
        gsl_interp_free(linear);
    }
    print_message("curves: worst %.2g\n", worst);
}

/* A whole part's SOA, read through an event, on GSL's interpolation in ln V and then ln t. */
static void test_soa_matches_gsl_interpolation_twice(void **state)
{
    (void)state;
    random_source source = {9};
    double worst = 0;
    for (int n = 0; n < 60; n++) {
        double log_v[4], log_i[3][4], log_t[3] = {log(1e-4), log(1e-3), log(1e-2)};
        char soa[800] = "soa=";
        size_t at = 4;
        for (int c = 0; c < 3; c++) {
            at += (size_t)snprintf(soa + at, sizeof soa - at, "%s%.17g/", c ? ";" : "",
                                   exp(log_t[c]));
            for (int k = 0; k < 4; k++) {
                log_v[k] = log(10) * k * 0.6;
                log_i[c][k] = (k ? log_i[c][k - 1] : 6 - c * 0.8) -
                              (k || c ? random_between(&source, 0.5, 2) : 0);
                if (c) log_i[c][k] = fmin(log_i[c][k], log_i[c - 1][k] - 0.1);
                at += (size_t)snprintf(soa + at, sizeof soa - at, "%s%.17g:%.17g", k ? "," : "",
                                       exp(log_v[k]), exp(log_i[c][k]));
            }
        }
        double v = random_log_between(&source, 1, 60), t = random_log_between(&source, 1e-4, 1e-2);
        double column[3];
        for (int c = 0; c < 3; c++) {
            gsl_interp *linear = gsl_interp_alloc(gsl_interp_linear, 4);
            gsl_interp_init(linear, log_v, log_i[c], 4);
            column[c] = gsl_interp_eval(linear, log_v, log_i[c], log(v), NULL);
            gsl_interp_free(linear);
        }
        gsl_interp *in_time = gsl_interp_alloc(gsl_interp_linear, 3);
        gsl_interp_init(in_time, log_t, column, 3);
        double exact = exp(gsl_interp_eval(in_time, log_t, column, log(t), NULL));
        gsl_interp_free(in_time);
        char profile[256];
        snprintf(profile, sizeof profile,
                 "supply_voltage=%.17g fault_time=%.17g fault_current=1 start_from=ambient "
                 "ambient_temperature=25",
                 v, t);
        double ours = bench_margin(soa, profile, PF_SHORT_AT_START);
        assert_near(ours, exact, 1e-9);
        worst = fmax(worst, fabs(ours / exact - 1));
    }
    print_message("SOA: worst %.2g\n", worst);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_running_junction_matches_a_root_finder),
        cmocka_unit_test(test_curves_match_gsl_interpolation_of_logarithms),
        cmocka_unit_test(test_soa_matches_gsl_interpolation_twice),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
