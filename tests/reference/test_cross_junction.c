/* test_cross_junction.c: junction temperature of heat networks, solved in time by GSL
** (Prince-Dormand 8(9)), against superposition on Zth.
**
** Foster networks are given as pairs; Cauer ladders, which are what heat does in a body, as points
** of their step response. Five random waveforms each.
 */
#include "support/bench.h"
#include "support/near.h"
#include "support/random_case.h"
#include "support/settings.h"

#include <gsl/gsl_odeiv2.h>
#include <stdio.h>

#define TOLERANCE 5e-3
#define CELLS 4
#define CORNERS 14

typedef struct network {
    bool ladder; /* Cauer; else Foster */
    double r_KpW[CELLS], c_JpK[CELLS];
    const pf_capture *wave;
    double step_W; /* without a wave */
} network;

static double power_at(const network *net, double time_s)
{
    const pf_capture *w = net->wave;
    if (!w) return net->step_W;
    size_t i = 0;
    while (i + 2 < w->count && w->time_s[i + 1] < time_s)
        i++;
    double share = (time_s - w->time_s[i]) / (w->time_s[i + 1] - w->time_s[i]);
    double vds = w->vds_V[i] + share * (w->vds_V[i + 1] - w->vds_V[i]);
    return vds * (w->id_A[i] + share * (w->id_A[i + 1] - w->id_A[i]));
}

/* Foster: T_i' = (P R_i - T_i)/(R_i C_i). Cauer: heat flows from node to node, the case at 0. */
static int flow(double time_s, const double y[], double dydt[], void *context)
{
    const network *net = context;
    double in = power_at(net, time_s);
    for (int i = 0; i < CELLS; i++) {
        double next = net->ladder && i + 1 < CELLS ? y[i + 1] : 0;
        double out = (y[i] - next) / net->r_KpW[i];
        dydt[i] = (in - out) / net->c_JpK[i];
        if (net->ladder) in = out;
    }
    return 0;
}

static double junction(const network *net, const double y[])
{
    double sum = 0;
    for (int i = 0; i < CELLS; i++)
        sum += y[i];
    return net->ladder ? y[0] : sum;
}

/* Integrates from one time to the next; returns the highest junction rise on the way. */
static double run(network *net, double y[], double from_s, double to_s, int looks)
{
    gsl_odeiv2_system system = {flow, NULL, CELLS, net};
    gsl_odeiv2_driver *driver = gsl_odeiv2_driver_alloc_y_new(
        &system, gsl_odeiv2_step_rk8pd, (to_s - from_s) / looks / 10, 1e-10, 1e-9);
    double t = from_s, highest = 0;
    for (int i = 1; i <= looks; i++) {
        gsl_odeiv2_driver_apply(driver, &t, from_s + (to_s - from_s) * i / looks, y);
        highest = fmax(highest, junction(net, y));
    }
    gsl_odeiv2_driver_free(driver);
    return highest;
}

static double exact_peak(network *net, const pf_capture *wave)
{
    double y[CELLS] = {0}, highest = 0;
    net->wave = wave;
    for (size_t i = 0; i + 1 < wave->count; i++)
        highest = fmax(highest, run(net, y, wave->time_s[i], wave->time_s[i + 1], 60));
    return highest;
}

static network random_network(random_source *source, bool ladder)
{
    network net = {.ladder = ladder, .step_W = 1};
    double tau = random_log_between(source, 5e-5, 5e-4);
    for (int i = 0; i < CELLS; i++) {
        net.r_KpW[i] = random_log_between(source, 0.05, 0.6);
        net.c_JpK[i] = tau / net.r_KpW[i];
        tau *= random_log_between(source, 5, 15);
    }
    return net;
}

/* The ladder's step response at 16 points per decade, as a sheet would tabulate it. */
static void tabulate(network *net, char *text, size_t room)
{
    double y[CELLS] = {0}, from = 0;
    size_t at = (size_t)snprintf(text, room, "foster= zth=");
    net->wave = NULL;
    for (int i = 0; i <= 96; i++) {
        double to = 1e-6 * pow(10, i / 16.0);
        double rise = run(net, y, from, to, 1);
        at += (size_t)snprintf(text + at, room - at, "%s%.9g:%.9g", i ? "," : "", to, rise);
        from = to;
    }
}

static void state_pairs(const network *net, char *text, size_t room)
{
    size_t at = (size_t)snprintf(text, room, "foster_rc=");
    for (int i = 0; i < CELLS; i++)
        at += (size_t)snprintf(text + at, room - at, "%s%.17g:%.17g", i ? "," : "", net->r_KpW[i],
                               net->c_JpK[i]);
}

/* Humps with corners at random times. */
static void random_wave(random_source *source, double *t, double *v, double *i)
{
    double step = random_log_between(source, 1e-4, 1e-2);
    for (int k = 0; k < CORNERS; k++) {
        t[k] = k ? t[k - 1] + step * random_between(source, 0.2, 1) : 0;
        v[k] = random_between(source, 0, 12);
        i[k] = random_between(source, 0, 10);
    }
}

static void check_networks(bool ladder, const char *name)
{
    random_source source = {ladder ? 42 : 41};
    double worst = 0;
    for (int n = 0; n < 6; n++) {
        network net = random_network(&source, ladder);
        char part[3500];
        if (ladder)
            tabulate(&net, part, sizeof part);
        else
            state_pairs(&net, part, sizeof part);
        for (int w = 0; w < 5; w++) {
            double t[CORNERS], v[CORNERS], i[CORNERS];
            random_wave(&source, t, v, i);
            const pf_capture wave = {"random", CORNERS, t, v, i};
            bench b;
            bench_run_capture(&b, part, "running_current=0", &wave);
            double exact = exact_peak(&net, &wave);
            const pf_outcome *o = bench_outcome(&b, PF_RECORDED);
            double ours = o->peak_junction_degC - o->start_degC;
            if (fabs(ours / exact - 1) > fabs(worst)) worst = ours / exact - 1;
            bench_clear(&b);
        }
    }
    print_message("junction, %s networks: worst %+.4f %%\n", name, 100 * worst);
    assert_double(fabs(worst), <, TOLERANCE);
}

static void test_foster_networks_match_the_equation_in_time(void **state)
{
    (void)state;
    check_networks(false, "Foster");
}

static void test_cauer_ladders_match_the_equation_in_time(void **state)
{
    (void)state;
    check_networks(true, "Cauer");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_foster_networks_match_the_equation_in_time),
        cmocka_unit_test(test_cauer_ladders_match_the_equation_in_time),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
