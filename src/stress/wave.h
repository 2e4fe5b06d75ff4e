/* wave.h: the waveforms of one event at all its corners, ready for superposition. */
#ifndef STRESS_WAVE_H
#define STRESS_WAVE_H

#include "numeric/kernel.h"
#include "stress/corners.h"
#include "stress/start_up.h"

#include <passfet/profile.h>
#include <passfet/stress.h>

/* The most lags that any kernel of waves has. */
#define PF_LAGS_MAX 128

/* What a table says of one waveform. */
typedef struct pf_wave {
    double duration_s, energy_J, peak_power_W, peak_current_A;
    bool stuck, unbounded; /* unbounded: nothing limits the load's current, no waveform */
    double stuck_V;
} pf_wave;

/* Waveforms of similar duration share a kernel; its rows carry the number of the corner. */
typedef struct pf_waves {
    pf_wave *wave; /* by corner */
    size_t count;
    pf_kernel *kernel;
    size_t kernels;
    size_t samples;        /* largest levels * lags of the kernels */
    double peak_current_A; /* highest of all corners */
    bool unbounded;        /* some corner has no waveform: the event cannot be assessed */
} pf_waves;

/* The start of C_out at a corner of start_up or supply_step. crss_F, where it is a number, slows
** the gate ramp of a slow corner. */
pf_start pf_start_at(const pf_profile *profile, pf_event event, const pf_corner *corner,
                     double crss_F);

/* Waveforms of count starts, held until hold_s where an output sticks. PF_NO_MEMORY is the only
** failure. */
pf_status pf_waves_from_starts(pf_waves *waves, const pf_start *start, size_t count,
                               double hold_s) PF_MUST_USE;

/* A recorded waveform; samples below zero (noise, offset) count as zero. PF_BAD_ARGUMENT for fewer
** than two samples or a time that does not rise. */
pf_status pf_waves_from_capture(pf_waves *waves, const pf_capture *capture) PF_MUST_USE;

void pf_waves_clear(pf_waves *waves);

#endif
