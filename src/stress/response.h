/* response.h: what one stress does to one part: hot-spot rise on Z_SOA, junction rise on Zth.
**
** Z_SOA(V, t) = (T_j,max - T_ref)/(V I_SOA(V, t)) turns the safe operating area into an impedance
** of its own, hot spots included (equation (7) of docs/methods.md; Spirito et al. for why Zth alone
** does not know them). V cancels against the power's: the hot-spot rise answers to the current.
*/
#ifndef STRESS_RESPONSE_H
#define STRESS_RESPONSE_H

#include "device/model.h"
#include "stress/wave.h"

/* A part under evaluation, from one start temperature. Borrowed pointers. */
typedef struct pf_subject {
    const pf_model *model;
    const pf_zth *zth;           /* may be one that is not stated */
    const pf_soa_family *family; /* NULL: no SOA */
    double log_zth_longest;      /* ln Zth at the family's longest finite pulse */
    bool extend;                 /* beyond_soa, extend */
} pf_subject;

typedef struct pf_response {
    double hot_rise_K;      /* max of dT_hot; NaN with its cause */
    double worst_s;         /* when */
    unsigned corner;        /* at which corner of the waves */
    double junction_rise_K; /* max of T_j - T_start; NaN where no Zth is stated */
    pf_cause cause;
    unsigned remarks;
} pf_response;

pf_subject pf_subject_of(const pf_model *model, double start_degC, bool extend);

/* Scratch for the samples of waves. */
typedef struct pf_bench {
    double *sample; /* [lane][place] */
    double *step;   /* [place][lane] */
    size_t places;
    size_t sample_room, step_room;
} pf_bench;

/* Room for kernels of that many places. PF_NO_MEMORY. */
pf_status pf_bench_reserve(pf_bench *bench, size_t places) PF_MUST_USE;
void pf_bench_clear(pf_bench *bench);

/* Waveforms with their kernels, on up to PF_LANES subjects at once: the largest rises over all
** corners. */
void pf_respond_waves(const pf_subject *const *subject, size_t count, const pf_waves *waves,
                      const pf_bench *bench, pf_response *response);

/* A rectangle of vds_V and id_A for time_s: exactly the hand calculation. A longer pulse contains
** the shorter ones, so where a sheet allows it more the shorter one's current counts. */
void pf_respond_rectangle(const pf_subject *subject, double vds_V, double id_A, double time_s,
                          pf_response *response);

/* Sum over k = 1 .. count - 1 of Zth(on_s + k T) - Zth(k T), in K/W: what earlier tries leave
** behind at the end of the last. count may be infinite. NaN without Zth. Equation (18) of docs/methods.md.
 */
double pf_train_zth(const pf_zth *zth, double on_s, double interval_s, double count);

#endif
