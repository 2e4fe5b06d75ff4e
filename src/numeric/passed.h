/* passed.h: how much flow has passed at every level up to a time.
**
** Q_i(t), the flow that has passed up to t counted with the hat function of level i, is all that
** the weights of a superposition need of a waveform: the mean flow at a level in a window of time is a
** difference of it. One more column holds flow times level.
*/
#ifndef NUMERIC_PASSED_H
#define NUMERIC_PASSED_H

#include "numeric/kernel.h"

typedef struct pf_passed {
    const pf_trace *trace;
    double top; /* highest level of the grid; its levels are spaced evenly from 0 */
    size_t levels;
    size_t columns; /* levels + 1 */
    double *amount; /* [corner of the trace][column] */
} pf_passed;

/* PF_NO_MEMORY. Cost: corners * levels. */
pf_status pf_passed_init(pf_passed *passed, const pf_trace *trace, double top,
                         size_t levels) PF_MUST_USE;
void pf_passed_clear(pf_passed *passed);

/* All columns at a time, clipped to the trace. */
void pf_passed_at(const pf_passed *passed, double time, double *column);

/* The flow at a time itself, spread over the columns. At a jump it is that of the stronger side: the
** jump up begins a stress and the jump down ends one. At the start it is the flow behind it. */
void pf_passed_instant(const pf_passed *passed, double time, double *column);

#endif
