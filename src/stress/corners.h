/* corners.h: which parameters an event depends on, and their values at each of its corners. */
#ifndef STRESS_CORNERS_H
#define STRESS_CORNERS_H

#include <passfet/profile.h>
#include <passfet/stress.h>

#define PF_DEPENDS_MAX 16

/* Which ends of an interval an event is evaluated at. */
typedef enum pf_side { PF_SIDE_BOTH, PF_SIDE_MIN, PF_SIDE_MAX } pf_side;

typedef struct pf_dependency {
    pf_parameter parameter;
    pf_side side;
    int bit; /* of the corner's number that selects the maximum; -1 for a fixed side */
} pf_dependency;

typedef struct pf_corners {
    size_t count;
    pf_dependency depend[PF_DEPENDS_MAX];
    unsigned number; /* of corners: a power of two */
    int gate_bit;    /* selects the slow gate ramp, which C_rss slows further; -1 for none */
} pf_corners;

/* One corner's values, NaN where the event does not depend on a parameter. */
typedef struct pf_corner {
    double value[PF_PARAMETER_COUNT];
    bool slow_gate;
} pf_corner;

/* The dependencies of an event of a finished profile. */
void pf_corners_init(pf_corners *corners, const pf_profile *profile, pf_event event);

void pf_corner_at(const pf_corners *corners, const pf_profile *profile, unsigned index,
                  pf_corner *corner);

/* The current into a short at a corner: the profile's, or what the start control lets through at
** V_DS = V_in. NaN where slew control has neither. */
double pf_corner_fault_A(const pf_profile *profile, const pf_corner *corner);

#endif
