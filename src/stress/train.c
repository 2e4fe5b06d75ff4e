/* train.c: what earlier tries into a short leave behind. */
#include "base/number.h"
#include "stress/response.h"

#include <math.h>

/* Tries summed one by one; later ones are bounded as a block. */
#define TRIES_SUMMED 2000

static double train_term(const pf_zth *zth, double on_s, double lag_s)
{
    return pf_zth_at(zth, lag_s + on_s, log(lag_s + on_s)) - pf_zth_at(zth, lag_s, log(lag_s));
}

/* Foster pairs: a geometric series per pair. */
static double foster_train(const pf_zth *zth, double on_s, double interval_s, double count)
{
    double sum = 0;
    for (size_t i = 0; i < zth->pairs; i++) {
        double tau = zth->pair[i].tau_s;
        double warm = -expm1(-on_s / tau), all = expm1(-(count - 1) * interval_s / tau);
        sum += zth->pair[i].r_KpW * warm * all / expm1(-interval_s / tau) * exp(-interval_s / tau);
    }
    return sum;
}

/* Tries from the lag from_s on, up to last_s, as a block. Zth bends downwards, so that the mean
** over an interval bounds the sum from above: on_s/T (Z(last + on) - Z(from)). */
static double train_rest(const pf_zth *zth, double on_s, double interval_s, double from_s,
                         double last_s)
{
    double end_s = last_s + on_s;
    double rise = pf_zth_at(zth, end_s, log(end_s)) - pf_zth_at(zth, from_s, log(from_s));
    return on_s / interval_s * rise;
}

/* Where the steady resistance is above the last point, Zth steps up there. A step that falls
** between two tries would be lost to the sum: its mean share counts instead. */
static double missed_step(const pf_zth *zth, double on_s, double interval_s, double count)
{
    double settled_s = pf_zth_settled_s(zth);
    double step = zth->beyond_KpW - exp(zth->log_z[zth->points - 1]);
    bool met = settled_s >= interval_s && fmod(settled_s, interval_s) < on_s;
    return met || (count - 1) * interval_s <= settled_s ? 0 : on_s / interval_s * step;
}

double pf_train_zth(const pf_zth *zth, double on_s, double interval_s, double count)
{
    if (!pf_zth_stated(zth)) return PF_NONE;
    if (!(count > 1)) return 0;
    if (zth->pairs) return foster_train(zth, on_s, interval_s, count);
    double settled_s = pf_zth_settled_s(zth), sum = 0;
    double last = fmin(count - 1, ceil(settled_s / interval_s));
    double summed = fmin(last, TRIES_SUMMED);
    for (double k = 1; k <= summed; k++)
        sum += train_term(zth, on_s, k * interval_s);
    if (last > summed)
        return sum + train_rest(zth, on_s, interval_s, summed * interval_s, last * interval_s);
    return sum + missed_step(zth, on_s, interval_s, count);
}
