/* kernel.h: a superposition integral as a dot product.
**
** A flow f(t) passes at a level v(t), and every unit that passed at level v answers after the lag s
** with K(v, s). The answer at the moment m is Duhamel's integral
**
**     R(m) = f(m) K(v(m), 0+) + integral over s of f(m - s) dK(v(m - s), s)
**
** With K linear between the nodes (v_i, s_j) of a grid this is exactly a weighted sum of the
*samples
** K_ij. The weights depend on the waveform alone: they are worked out once, and every K then costs
** one dot product per moment.
**
** The lags grow as squares, s_j = T (j/J)^2: an impedance that rises with the square root of time
*is
** then equally well resolved everywhere. Lags are chosen, not moments, so that the whole of a
** rectangle is exact: its last lag is its own duration.
*/
#ifndef NUMERIC_KERNEL_H
#define NUMERIC_KERNEL_H

#include <passfet/error.h>
#include <stdbool.h>
#include <stddef.h>

/* A waveform by its corners: time rising (equal neighbours make a jump), straight lines between. */
typedef struct pf_trace {
    size_t count; /* >= 2 */
    const double *time, *level, *flow;
} pf_trace;

typedef struct pf_kernel {
    size_t lags;    /* lag[0] = 0 stands for 0+, lag[lags - 1] for the whole duration */
    size_t levels;  /* rising; level[0] = 0 */
    size_t moments; /* rising, from 0+ to the duration */
    double *lag, *log_lag, *level, *log_level, *moment;
    double *weight; /* [moment][level][lag]: for K, from the flow */
    double *total;  /* [moment][lag]: for a response Z of the lag alone, from flow times level */
    bool *used;     /* [level][lag]: whether any weight is not 0 */
} pf_kernel;

/* How fine: lags and levels of the grid and moments looked at. Flow and level of the trace must not
** be negative. levels >= 2; 1 where the level never changes (it is then the trace's). The moments
** are lags counted from the start, or, for count extra, given by the caller as well. */
typedef struct pf_kernel_size {
    size_t lags, levels;
    const double *extra;
    size_t extra_count;
} pf_kernel_size;

/* PF_BAD_ARGUMENT for an empty trace or duration 0; PF_NO_MEMORY. Cost: moments * lags * levels. */
pf_status pf_kernel_init(pf_kernel *kernel, const pf_trace *trace, pf_kernel_size size) PF_MUST_USE;
void pf_kernel_clear(pf_kernel *kernel);

/* The largest answer over all moments, and when. sample: [level][lag], NaN allowed where unused. */
double pf_kernel_peak(const pf_kernel *kernel, const double *sample, double *when);

/* The same for a response that does not know the level: sample [lag]. */
double pf_kernel_total_peak(const pf_kernel *kernel, const double *sample, double *when);

#endif
