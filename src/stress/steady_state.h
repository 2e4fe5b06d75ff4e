/* steady_state.h: the running card: junction temperature with Rds(on) that rises with it. */
#ifndef STRESS_STEADY_STATE_H
#define STRESS_STEADY_STATE_H

#include "device/on_resistance.h"

#include <passfet/profile.h>
#include <passfet/stress.h>

typedef struct pf_steady_state {
    pf_cause cause;       /* PF_CAUSE_NONE, or why there is no junction temperature */
    double junction_degC; /* infinite for thermal runaway */
    double loss_W;        /* all parts together; infinite for runaway */
    double rth_KpW;       /* junction to ambient of one part */
    double share_A;       /* current of one part */
    pf_on_resistance rdson;
} pf_steady_state;

/* Worst corner: running current, ambient and case-to-ambient resistance at their maximum, gate
** drive at its minimum. Equations (12) to (14) of docs/methods.md: the fixed point of T = T_a + R_th I^2
 ** R(T), closed because R(T) is a straight line. */
pf_steady_state pf_steady_state_of(const pf_profile *profile, const pf_part *part);

#endif
