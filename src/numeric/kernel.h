/* kernel.h: superposition integrals as dot products, and which of them can be left out.
**
** A flow f(t) passes at a level v(t), and every unit that passed at level v answers after the lag s
** with K(v, s). The answer at the moment m is Duhamel's integral
**
**     R(m) = f(m) K(v(m), 0+) + integral over s of f(m - s) dK(v(m - s), s)
**
** With K linear between the nodes (v_i, s_j) of a grid this is exactly a weighted sum of the
*samples
** K_ij, a row of weights per waveform and moment. The weights depend on the waveforms alone: they
*are
** worked out once, and every K then costs one dot product per row.
**
** The lags grow as squares, s_j = T (j/J)^2: an impedance that rises with the square root of time
*is
** then equally well resolved everywhere. Moments lie twice as dense. All waveforms of one kernel
*share
** the grid, so that K is sampled once for all of them.
**
** Rows that can never be the largest are set aside. Let Q_ab be the sum of a row's weights over all
** nodes at or above level a and lag b. If K and all its first and mixed differences over the grid
*are
** not negative (pf_kernel_is_regular), then by summation by parts R = sum of Q_ab D_ab with D >= 0;
*a
** row whose every Q_ab is at most that of another row is never above it. docs/methods.md has the
*proof.
*/
#ifndef NUMERIC_KERNEL_H
#define NUMERIC_KERNEL_H

#include <passfet/error.h>
#include <stdbool.h>
#include <stddef.h>

/* A waveform by its corners: time rising from 0 (equal neighbours make a jump), straight lines
** between. Level and flow are not negative. */
typedef struct pf_trace {
    size_t id;    /* the caller's own, kept in the rows */
    size_t count; /* >= 2 */
    const double *time, *level, *flow;
} pf_trace;

typedef struct pf_kernel_row {
    size_t trace; /* its id */
    double moment;
    double *weight; /* first the levels from the lowest, each lags long */
    size_t reach;   /* weights behind the first reach lags of every level are 0 */
} pf_kernel_row;

/* Rows of one kind: for K with levels, or for an impedance of the lag alone (one level). */
typedef struct pf_kernel_rows {
    pf_kernel_row *row;
    size_t count;
    size_t kept; /* the first kept rows are enough for a regular K */
    double *weights;
} pf_kernel_rows;

typedef struct pf_kernel {
    size_t lags;   /* lag[0] = 0 stands for 0+; the last is the longest duration */
    size_t levels; /* rising from 0 */
    double *lag, *log_lag, *level, *log_level;
    pf_kernel_rows rows;  /* weights from the flow: [levels][lags] */
    pf_kernel_rows total; /* weights from flow times level: [lags] */
    bool *used;           /* [levels][lags]: whether any weight of rows is not 0 */
} pf_kernel;

/* The grid. Levels are spaced evenly up to the highest of the traces. Moments looked at are the
*lags
** counted from the start, so many corners of each trace in even steps, its end among them, and the
** extra ones of the caller, counted from the start. */
typedef struct pf_kernel_size {
    const double *lag;   /* strictly rising from 0 to the longest duration */
    size_t lags, levels; /* each >= 2 */
    size_t corners;      /* >= 1 */
    const double *extra;
    size_t extra_count;
} pf_kernel_size;

/* PF_BAD_ARGUMENT for no trace, an empty one or duration 0; PF_NO_MEMORY. */
pf_status pf_kernel_init(pf_kernel *kernel, const pf_trace *trace, size_t count,
                         pf_kernel_size size) PF_MUST_USE;
void pf_kernel_clear(pf_kernel *kernel);

/* Sorts rows that can be left out for a regular K behind the others. PF_NO_MEMORY leaves all kept.
 */
pf_status pf_kernel_prune(pf_kernel *kernel) PF_MUST_USE;

/* Whether sample [levels][lags] and all its differences over the grid are not negative, to within
** rounding. */
bool pf_kernel_is_regular(const double *sample, size_t levels, size_t lags);

/* The row with the largest answer, over the first count rows; NULL for count 0. *highest is that
** answer. sample: finite; its value where no row has a weight does not matter. */
const pf_kernel_row *pf_kernel_peak(const pf_kernel *kernel, const pf_kernel_rows *rows,
                                    size_t count, const double *sample, double *highest);

#endif
