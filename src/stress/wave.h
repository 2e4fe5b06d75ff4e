/* wave.h: one event's waveform at one corner, ready for superposition. */
#ifndef STRESS_WAVE_H
#define STRESS_WAVE_H

#include "numeric/kernel.h"
#include "stress/corners.h"
#include "stress/start_up.h"

#include <passfet/profile.h>
#include <passfet/stress.h>

typedef struct pf_wave {
    pf_kernel kernel;
    double duration_s, energy_J, peak_power_W, peak_current_A;
    bool stuck, unbounded; /* unbounded: nothing can be evaluated, the kernel is empty */
    double stuck_V;
} pf_wave;

/* The start of C_out at a corner of start_up or supply_step. crss_F, where it is a number, slows
 *the
 ** gate ramp of a slow corner. */
pf_start pf_start_at(const pf_profile *profile, pf_event event, const pf_corner *corner,
                     double crss_F);

/* Whether a start ends: PF_NO_MEMORY is the only failure. */
pf_status pf_wave_from_start(const pf_start *start, double hold_s, pf_wave *wave) PF_MUST_USE;

/* A recorded waveform; samples below zero (noise, offset) count as zero. PF_BAD_ARGUMENT for fewer
** than two samples or a time that does not rise. */
pf_status pf_wave_from_capture(const pf_capture *capture, pf_wave *wave) PF_MUST_USE;

void pf_wave_clear(pf_wave *wave);

#endif
