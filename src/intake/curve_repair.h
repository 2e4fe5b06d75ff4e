/* curve_repair.h: curves as digitised made into curves as the evaluation needs them.
**
** Only what is safe is repaired, and it is said; the rest is refused. Sorted; exact duplicates
** dropped; two currents at one voltage (or two Zth at one time) within 3 % averaged; falls of Zth
** of up to 2 % raised to a level line. Several currents at the last voltage of an SOA curve are its
** vertical edge and stay.
*/
#ifndef INTAKE_CURVE_REPAIR_H
#define INTAKE_CURVE_REPAIR_H

#include "intake/curve_cell.h"

/* Hears of every fault; line is that of the offending point. */
typedef void pf_repair_fault(void *context, uint32_t line, const pf_fault *fault);

typedef struct pf_repair {
    size_t sorted, dropped, averaged, raised; /* points */
    size_t faults;
    bool suspicious; /* looks like logarithms or pixels; see why */
    const char *why; /* static storage */
} pf_repair;

/* Repair in place; points lie sorted by case, pulse, voltage (Zth: by time) afterwards. */
void pf_soa_repair(pf_raw_points *points, pf_repair *repair, pf_repair_fault *fault, void *context);
void pf_zth_repair(pf_raw_points *points, pf_repair *repair, pf_repair_fault *fault, void *context);

#endif
