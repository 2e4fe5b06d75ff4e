/* model.h: a part made ready for evaluation: logarithms taken, curves cut at their flank, grouped.
**
** A model borrows the part and owns its logarithms; loading the next part reuses the memory, so
** that ranking a market allocates only while the largest part so far is met.
*/
#ifndef DEVICE_MODEL_H
#define DEVICE_MODEL_H

#include "device/safe_area.h"
#include "device/thermal_impedance.h"

typedef struct pf_model {
    const pf_part *part;
    pf_zth zth[PF_PATH_COUNT];
    const pf_soa_family *family; /* by rising case temperature */
    size_t families;
    /* memory behind the above */
    double *logs;
    size_t logs_room;
    pf_soa_curve *curves;
    size_t curves_room;
    pf_soa_family *family_memory;
    size_t families_room;
} pf_model;

void pf_model_init(pf_model *model);
void pf_model_clear(pf_model *model);

/* Reads the part's curves; the part must stay as it is while the model is used. PF_NO_MEMORY;
** PF_LIMIT for more than PF_PULSES_MAX pulse widths in one family. */
pf_status pf_model_load(pf_model *model, const pf_part *part) PF_MUST_USE;

/* Stresses use junction to case; where only junction to ambient is stated, that one; where neither,
** one that is not stated. */
const pf_zth *pf_model_zth(const pf_model *model);

/* The family with the highest case temperature not above start_degC, the coldest below all; NULL
** where no SOA is stated. */
const pf_soa_family *pf_model_family(const pf_model *model, double start_degC);

#endif
