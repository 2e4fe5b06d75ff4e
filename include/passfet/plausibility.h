/* plausibility.h: ratings of one part held against each other.
**
** A wrong factor or a column read as another passes every check of a single value; it shows where
** two ratings that belong together are compared. The same rules serve import (on the part as it will be
** stored) and the audit of a database. Sources: conservation of energy (V*I*Zth(t) = T_j,max -
** T_case where a line of the SOA is a line of constant power), the definitions of the ratings, and common
** practice where marked so in the list.
*/
#ifndef PASSFET_PLAUSIBILITY_H
#define PASSFET_PLAUSIBILITY_H

#include <passfet/error.h>
#include <passfet/part.h>
#include <passfet/units.h>
#include <stdbool.h>

/* code, quantity of its two numbers, what is odd (found is the first number, expected the second),
** what to look at */
#define PF_ODDITY_LIST(X)                                                                          \
    X(PF_ODD_SOA_ZTH, PF_TEMPERATURE,                                                              \
      "V*I*Zth(t) on a line of constant power and T_j,max less the case temperature disagree",     \
      "units of the SOA, of its pulse widths and of Zth")                                          \
    X(PF_ODD_ZTH_END, PF_THERMAL, "the end of Zth and R_thJC disagree",                            \
      "units of both; is the curve one to ambient?")                                               \
    X(PF_ODD_ZTH_NORMALISED, PF_THERMAL, "Zth ends at 1 and R_thJC does not: it looks normalised", \
      "multiply the curve by R_thJC")                                                              \
    X(PF_ODD_ZTH_DUTY, PF_THERMAL,                                                                 \
      "Zth is flat at short times: it looks like a curve for a duty cycle",                        \
      "the curve for a single pulse")                                                              \
    X(PF_ODD_SOA_VOLTAGE, PF_VOLTAGE, "the SOA goes on beyond V_DS,max",                           \
      "vds_max, and the voltages of the SOA")                                                      \
    X(PF_ODD_SOA_SHORT, PF_VOLTAGE, "the SOA ends far below V_DS,max",                             \
      "the right end of the SOA; are its voltages logarithms?")                                    \
    X(PF_ODD_SOA_CURRENT, PF_CURRENT, "the SOA goes above the pulsed drain current",               \
      "id_pulse, and the currents of the SOA")                                                     \
    X(PF_ODD_SOA_ORDER, PF_CURRENT, "a longer pulse is allowed more current than a shorter one",   \
      "pulse widths that were exchanged")                                                          \
    X(PF_ODD_SOA_EDGE, PF_RESISTANCE, "the left edge of the SOA and Rds(on) disagree",             \
      "units of rdson_max and of the SOA's currents")                                              \
    X(PF_ODD_RDSON_ORDER, PF_RESISTANCE,                                                           \
      "Rds(on) at a lower gate drive is below that at a higher one",                               \
      "columns that were exchanged")                                                               \
    X(PF_ODD_VTH_ORDER, PF_VOLTAGE, "vth_min is above vth_max", "columns that were exchanged")     \
    X(PF_ODD_ID_ORDER, PF_CURRENT, "the pulsed drain current is below the continuous one",         \
      "id_cont and id_pulse")                                                                      \
    X(PF_ODD_RTH_ORDER, PF_THERMAL, "R_thJA is below R_thJC", "rth_jc and rth_ja")                 \
    X(PF_ODD_CAPACITANCE, PF_CAPACITANCE, "C_rss is not below C_iss", "ciss and crss")

typedef enum pf_oddity {
#define PF_ODDITY_CODE(code, quantity, words, look) code,
    PF_ODDITY_LIST(PF_ODDITY_CODE)
#undef PF_ODDITY_CODE
        PF_ODDITY_COUNT
} pf_oddity;

typedef struct pf_finding {
    pf_oddity oddity;
    double ratio;           /* how far apart, >= 1; the measure for "worst first" */
    bool refuses;           /* too far apart for an import that is not told to accept it */
    double found, expected; /* in SI, of the oddity's quantity */
    double pulse_s;         /* of the curve that it concerns; NaN for none, PF_DC for the DC line */
} pf_finding;

typedef void pf_finding_listener(void *context, const pf_finding *finding);

/* Hands every finding to the listener, in the order of the list. O(points of the curves).
** PF_NO_MEMORY; PF_LIMIT for more pulse widths than an evaluation takes. */
pf_status pf_part_check(const pf_part *part, pf_finding_listener *listener,
                        void *context) PF_MUST_USE;

/* The words of an oddity and what to look at. Static storage. */
const char *pf_oddity_text(pf_oddity oddity);
const char *pf_oddity_look(pf_oddity oddity);

/* "the SOA goes on beyond V_DS,max: 120 V and 100 V (1 ms)". Writes at most room bytes, NUL
** included; returns the whole length as snprintf does. */
int pf_finding_print(const pf_finding *finding, char *text, size_t room);

#endif
