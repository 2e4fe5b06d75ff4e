/* thermal_impedance.h: single-pulse transient thermal impedance Zth(t). */
#ifndef DEVICE_THERMAL_IMPEDANCE_H
#define DEVICE_THERMAL_IMPEDANCE_H

#include <passfet/part.h>

/* A curve made ready for reading. Borrows the part's Foster pairs and the model's logarithms. */
typedef struct pf_zth {
    const double *log_t, *log_z; /* points, by rising time */
    size_t points;
    double
        beyond_KpW; /* behind the last point: the larger of that point and the steady resistance */
    const pf_foster_pair *pair;
    size_t pairs;
    pf_thermal_path path;
} pf_zth;

/* Whether the part states this curve at all. */
static inline bool pf_zth_stated(const pf_zth *zth)
{
    return zth->points > 0 || zth->pairs > 0;
}

/* Zth in K/W after time_s of constant power, log_time its natural logarithm (which callers with a
** fixed grid already have); 0 for time_s <= 0; NaN where no curve is stated.
** Points: a power law between two points; below the first as the square root of time (a
** semi-infinite solid, Carslaw & Jaeger 1959, section 2.9); beyond the last beyond_KpW. Foster
** pairs: sum of R (1 - exp(-t/tau)). Equations (2) and (3) of docs/methods.md. */
double pf_zth_at(const pf_zth *zth, double time_s, double log_time);

/* Where the curve has reached its final value, in s: the last point, or infinity for Foster pairs.
 */
double pf_zth_settled_s(const pf_zth *zth);

#endif
