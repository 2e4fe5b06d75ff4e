/* kernel.h: superposition integrals as dot products, and which of them can be left out.
**
** A flow f(t) passes at a level v(t), and every unit that passed at level v answers after the lag s
** with K(v, s). The answer at the moment m is Duhamel's integral
**
**     R(m) = f(m) K(v(m), 0+) + integral over s of f(m - s) dK(v(m - s), s)
**
** With K linear between the nodes (v_i, s_j) of a grid this is exactly the sum of A_ij (K_ij - K_i,j-1),
** A_ij being the mean flow at level i while the lag was between s_j-1 and s_j (A_i0: the flow at the
** moment itself). The A depend on the waveforms alone, a row per waveform and moment: they are worked
** out once, and every K then costs its samples and one short dot product per row, since a waveform
** passes few levels in one interval of lag. All waveforms of one kernel share the grid.
**
** Rows that can never be the largest are set aside. Let B_aj be the sum of A_ij over i >= a. If the
** steps K_ij - K_i,j-1 are not negative and do not fall with the level (pf_steps_put), then by
** summation by parts R is the sum of B_aj D_aj with D >= 0; a row whose every B_aj is at most that of
** another row is never above it. docs/methods.md has the proof.
*/
#ifndef NUMERIC_KERNEL_H
#define NUMERIC_KERNEL_H

#include <passfet/error.h>
#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

/* A waveform by its corners: time rising from 0 (equal neighbours make a jump), straight lines
** between. Level and flow are not negative. */
typedef struct pf_trace {
    size_t id;    /* the caller's own, kept in the rows */
    size_t count; /* >= 2 */
    const double *time, *level, *flow;
} pf_trace;

/* One moment of one waveform: its mean flows that are not 0, by rising place. */
typedef struct pf_kernel_row {
    size_t trace; /* its id */
    double moment;
    size_t first, terms; /* in place and flow of the rows */
} pf_kernel_row;

/* Rows of one kind: for K with levels, or for an impedance of the lag alone (one level). */
typedef struct pf_kernel_rows {
    pf_kernel_row *row;
    size_t count, room;
    size_t kept;     /* the first kept rows are enough for a regular K */
    uint16_t *place; /* level * lags + lag */
    double *flow;
    size_t terms, place_room, flow_room;
} pf_kernel_rows;

typedef struct pf_kernel {
    size_t lags;   /* lag[0] = 0 stands for 0+; the last is the longest duration */
    size_t levels; /* rising from 0 */
    double *lag, *log_lag, *level, *log_level;
    pf_kernel_rows rows;  /* of the flow: [levels][lags] */
    pf_kernel_rows total; /* of flow times level: [lags] */
    bool *used;           /* [levels][lags]: whether some row reads the sample there */
} pf_kernel;

/* The grid. Levels are spaced evenly up to the highest of the traces. Moments looked at are the lags
** counted from the start, the end, every jump, where flow and power are highest, the times at which the level first falls to so many even
** parts of the highest, and the extra ones of the caller, counted from the start. */
typedef struct pf_kernel_size {
    const double *lag;   /* strictly rising from 0 to the longest duration */
    size_t lags, levels; /* each >= 2; the product at most 65536 */
    size_t falls;
    const double *extra;
    size_t extra_count;
} pf_kernel_size;

/* PF_BAD_ARGUMENT for no trace, an empty one or duration 0; PF_NO_MEMORY. */
pf_status pf_kernel_init(pf_kernel *kernel, const pf_trace *trace, size_t count,
                         pf_kernel_size size) PF_MUST_USE;
void pf_kernel_clear(pf_kernel *kernel);

/* Sorts rows that can be left out for a regular K behind the others. PF_NO_MEMORY leaves all kept. */
pf_status pf_kernel_prune(pf_kernel *kernel) PF_MUST_USE;

/* Several K are looked at together: a row is read once for all of them. */
enum { PF_LANES = 8 };

/* Puts the steps of samples [levels][lags] into a lane of step [place][PF_LANES]. Returns whether they
** are regular: then the rows set aside need not be looked at. */
bool pf_steps_put(const double *sample, size_t levels, size_t lags, double *step, size_t lane);

/* The largest answer of the rows from .. to - 1 for each of PF_LANES K, and its row: *highest and *row
** begin with what was found before (-infinity for nothing). step: [place][PF_LANES],
** finite; its value where no row reads it does not matter. */
void pf_rows_peak(const pf_kernel_rows *rows, size_t from, size_t to, const double *step,
                  double highest[PF_LANES], size_t row[PF_LANES]);

#endif
