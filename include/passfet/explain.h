/* explain.h: one part under one profile, taken apart so that it can be worked again by hand.
**
** A pf_explanation holds every number that lies between data sheet and margin: which points of which
** curves were read, how far the reading lies from them, what each event did at its worst corner, the
** usual hand estimates beside the superposition, and the timer window. It computes nothing that the
** verdict rests on: that is pf_assess, of which it holds the result.
*/
#ifndef PASSFET_EXPLAIN_H
#define PASSFET_EXPLAIN_H

#include <passfet/headroom.h>
#include <passfet/ranking.h>

/* One SOA line read at a voltage: the point on either side, the same twice where nothing lies
** between. current = right_A (V/right_V)^slope, slope the straight line through both. */
typedef struct pf_line_reading {
    double pulse_s; /* PF_DC for the DC line */
    double left_V, left_A, right_V, right_A;
    double slope;     /* of ln I over ln V */
    double current_A; /* NaN where the line does not reach */
    bool flank;       /* left of where the line reaches its highest current: that current */
} pf_line_reading;

typedef enum pf_reading_kind {
    PF_READ_NOTHING,        /* not possible: see cause */
    PF_READ_ON_LINE,        /* the pulse width of a line */
    PF_READ_SHORTER,        /* shorter than the shortest line: that line, no credit */
    PF_READ_BETWEEN,        /* between two lines, straight on log-log paper */
    PF_READ_SHORTER_COUNTS, /* the sheet allows a shorter pulse less: that line */
    PF_READ_BEYOND,         /* longer than the longest line, bounded by Zth, slope and DC line */
    PF_READ_DC              /* longer than the longest line: the DC line alone */
} pf_reading_kind;

/* I_SOA(V, t) with what it was read from. */
typedef struct pf_reading {
    pf_reading_kind kind;
    pf_cause cause; /* of PF_READ_NOTHING */
    double vds_V, time_s;
    double case_degC; /* of the family of lines */
    double span_K;    /* T_j,max - case_degC: the rise that each of its points stands for */
    pf_line_reading shorter, longer; /* one line alone: both the same */
    pf_line_reading dc;              /* of PF_READ_BEYOND and _DC, where there is one */
    double slope; /* of ln I over ln t between the two, or of the last two lines */
    double zth_longest_KpW, zth_KpW; /* of PF_READ_BEYOND: at the longest line and at time_s */
    double current_A;                /* at case_degC; NaN for PF_READ_NOTHING */
} pf_reading;

typedef enum pf_zth_kind {
    PF_ZTH_NOTHING,
    PF_ZTH_FOSTER,  /* sum of the pairs */
    PF_ZTH_BEFORE,  /* before the first point: square root of time through it */
    PF_ZTH_BETWEEN, /* between two points */
    PF_ZTH_BEYOND   /* behind the last point */
} pf_zth_kind;

typedef struct pf_zth_reading {
    pf_zth_kind kind;
    pf_thermal_path path;
    double time_s;
    double left_s, left_KpW, right_s, right_KpW, slope;
    double zth_KpW; /* NaN for PF_ZTH_NOTHING */
} pf_zth_reading;

/* A hand estimate: a rectangle that stands for a waveform. */
typedef struct pf_estimate {
    double vds_V, id_A, time_s;
    pf_reading soa;
    double derating, limit_A; /* limit_A = derating * soa.current_A */
    double margin;            /* limit_A / id_A; NaN where it cannot be read */
    bool safe;                /* not above the margin of the superposition */
} pf_estimate;

/* One step of a waveform up to its worst moment: mean voltage and current, and the SOA current of a
** step that began (born) and ended (dead) so long ago. rise = I span (1/born - 1/dead), the second
** term left out for the step that ends at the worst moment. */
typedef struct pf_step {
    double from_s, to_s, vds_V, id_A;
    double born_A, dead_A; /* dead_A: infinite for the last step */
    double rise_K;
} pf_step;

#define PF_STEPS 10

typedef struct pf_event_view {
    pf_event event;
    double value[PF_PARAMETER_COUNT]; /* at the worst corner; NaN where it does not depend on it */
    double hot_rise_K;                /* dT_hot at that corner */
    double derating;                  /* (T_allow - T_start)/span of the family used */
    /* rectangles: short_at_start, short_running, trip, retry; turn_off: V_in and its current */
    double vds_V, id_A, time_s;
    pf_reading soa;
    double limit_A;
    /* the corner with the highest junction temperature, of rectangles */
    double hottest_V, hottest_A, hottest_s;
    pf_zth_reading zth;
    /* retry: what earlier tries left behind, per W of the pulse */
    double train_KpW, case_KpW, interval_s, count;
    /* waveforms: start_up, supply_step, recorded */
    double voltage_at_peak_V;
    size_t step_count;
    pf_step step[PF_STEPS];
    double stepped_rise_K;    /* sum of the steps: by hand, a few per cent from hot_rise_K */
    pf_estimate half_time;    /* peak power for half the time */
    pf_estimate equal_energy; /* peak power for as long as the energy lasts */
} pf_event_view;

typedef struct pf_explanation {
    pf_assessment assessment;
    double rth_KpW, share_A, gain_KpK; /* running: g a of the closed formula is gain * slope */
    double rdson_slope_pK, hot_ratio;
    pf_event_view view[PF_SLOTS_MAX]; /* by slot of the plan */
    pf_timer_window window;
} pf_explanation;

/* Fills *explanation. captures: those that the plan was made with, for their steps and estimates.
** PF_NO_MEMORY is the only failure. */
pf_status pf_explain(const pf_plan *plan, const pf_capture *captures, size_t capture_count,
                     const pf_part *part, pf_scratch *scratch,
                     pf_explanation *explanation) PF_MUST_USE;

#endif
