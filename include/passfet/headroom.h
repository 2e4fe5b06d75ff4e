/* headroom.h: how far a profile can move before the verdict flips, and the timer window.
**
** A parameter is varied as one single value (min = typ = max); all others stay at their corners. For
** a part that passes the search begins at the end of the interval that lies in its direction, for one
** that does not at the other end. It widens by growing factors until passing begins or ends or the
** parameter's range ends, and then closes in to a relative width of PF_FLIP_TOLERANCE (temperatures:
** that many K) by the ITP method (Oliveira and Takahashi, ACM Transactions on Mathematical Software
** 47 (2020) 5). What begins and ends again between two probes of the widening goes unseen.
**
** Only events that depend on the parameter are worked out again for a probe.
*/
#ifndef PASSFET_HEADROOM_H
#define PASSFET_HEADROOM_H

#include <passfet/ranking.h>

#define PF_FLIP_TOLERANCE 1e-6

typedef enum pf_room_kind {
    PF_ROOM_FLIPS,  /* the part passes at value and does not at beyond, right behind it */
    PF_ROOM_NEVER,  /* it passes, or does not, to the end of the range, which value is */
    PF_ROOM_INVALID /* the profile contradicts itself beyond value before the verdict flips */
} pf_room_kind;

typedef struct pf_room {
    pf_parameter parameter;
    bool upward;  /* direction of the search */
    bool at_most; /* the part passes below value, else above it */
    pf_room_kind kind;
    double from;          /* where the search began: an end of the profile's interval */
    double value, beyond; /* magnitudes; see the kinds */
    double relative;      /* |value - from| / from; temperatures: 1 K counts as 1 % */
    pf_verdict here;      /* verdict at from */
    pf_verdict now;       /* verdict under the profile as it is; of pf_solve alone */
    pf_verdict there;     /* verdict at beyond */
    pf_check stop;        /* the check that decides at beyond; slot -1: no event */
    unsigned corner;      /* of its event under the varied profile, see corner_value */
    double corner_value[PF_PARAMETER_COUNT]; /* at that corner; NaN where it does not depend */
    bool stalls;                             /* at value the card itself no longer starts */
    const char *wrong; /* PF_ROOM_INVALID: what the profile would say. Static storage */
} pf_room;

/* Both directions of every parameter that the profile states or has a default for. */
#define PF_ROOMS_MAX (2 * PF_PARAMETER_COUNT)

/* Fills room, those that flip first, by relative, then the others in the order of parameters.def;
** *count is how many. PF_NO_MEMORY is the only failure. */
pf_status pf_headroom(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                      pf_room room[PF_ROOMS_MAX], size_t *count) PF_MUST_USE;

/* One parameter in one direction. PF_NOT_STATED: the profile has no value to begin at. */
pf_status pf_headroom_of(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                         pf_parameter parameter, bool upward, pf_room *room) PF_MUST_USE;

/* Parameters that pf_solve takes, as `--solve` names them. */
bool pf_is_solvable(pf_parameter parameter);

/* The largest value at which the part passes (at_most); where it passes with every larger value, or
** with none that is smaller, the smallest. PF_ROOM_NEVER: it passes with all, or with none, as
** room->here says. PF_NOT_STATED: the profile has no value to begin at. */
pf_status pf_solve(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                   pf_parameter parameter, pf_room *room) PF_MUST_USE;

/* The same for fault_time and the checks of the fault's events alone (shorts and retry): what a timer
** can do nothing about is left out. */
pf_status pf_longest_fault(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                           pf_room *room) PF_MUST_USE;

/* --- Timer ------------------------------------------------------------------------------------ */

/* The timer must outlast the slowest good start and end the longest fault before the part dies. */
typedef struct pf_timer_window {
    bool cuts_starts;       /* the timer runs during a start: all controls but slew */
    double slowest_start_s; /* start-up and recharge; NaN where one never ends */
    double timer_min_s, timer_max_s;
    double longest_fault_s; /* that the part survives; 0: none, NaN: cannot be assessed */
    bool fault_is_open;     /* beyond longest_fault_s the part is unassessed, not failed */
    double start_gap;       /* timer_min/slowest_start - 1; negative: the timer cuts starts off */
    double fault_gap;       /* longest_fault/timer_max - 1; negative: the part dies first */
    bool no_value;          /* longest_fault is known and below slowest_start: no timer value */
} pf_timer_window;

pf_status pf_timer_window_of(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                             pf_timer_window *window) PF_MUST_USE;

#endif
