/* steps.h: a waveform cut into a few steps, so that its superposition can be followed by hand. */
#ifndef RANK_STEPS_H
#define RANK_STEPS_H

#include "stress/response.h"
#include "stress/start_up.h"

#include <passfet/explain.h>

/* V_DS and I_D by straight lines, from time 0. Owns its arrays. */
typedef struct pf_polyline {
    size_t count;
    double *time_s, *vds_V, *id_A;
    double *memory;
} pf_polyline;

pf_status pf_polyline_of_start(const pf_start *start, double hold_s, pf_polyline *line) PF_MUST_USE;

/* capture NULL: an empty line. Samples below zero count as zero. */
pf_status pf_polyline_of_capture(const pf_capture *capture, pf_polyline *line) PF_MUST_USE;

void pf_polyline_clear(pf_polyline *line);

/* V_DS where the power is highest, the first such moment. */
double pf_polyline_peak_V(const pf_polyline *line);

/* Cuts the line up to a moment into PF_STEPS steps, their ends as squares of even steps before it, and
** sets step, step_count and stepped_rise_K of the view. */
void pf_steps_take(const pf_subject *subject, const pf_polyline *line, double moment_s,
                   pf_event_view *view);

#endif
