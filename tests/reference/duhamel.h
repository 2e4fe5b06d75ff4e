/* duhamel.h: the hot-spot integral by adaptive quadrature, for tests.
**
**     dT_hot(t) = integral over tau from 0 to t of P(tau) dZ_SOA(V(tau), s)/ds at s = t - tau
**
** Written from the definition and from the part's own points, sharing no code with src: curves are
** read anew, the integral is GSL's QAG over ln s between the pulse widths of the sheet, the largest
** value is sought over moments and then refined. Slow (tens of ms per waveform).
*/
#ifndef REFERENCE_DUHAMEL_H
#define REFERENCE_DUHAMEL_H

#include <passfet/part.h>

/* A waveform by its corners; equal times make a jump. */
typedef struct form {
    const double *time_s, *vds_V, *id_A;
    size_t count;
} form;

/* SOA current of the 25 degC family right of the flanks; NaN where it says nothing. Reads between
** and below the finite pulse widths, and the rule with DC line and Zth beyond them. */
double exact_soa_A(const pf_part *part, double vds_V, double time_s);

/* Zth by points, as the sheet says. */
double exact_zth_KpW(const pf_part *part, double time_s);

/* The hot-spot rise at one moment. */
double exact_hot_rise_K(const pf_part *part, const form *wave, double moment_s);

/* Its largest value, and when. */
double exact_hot_peak_K(const pf_part *part, const form *wave, double *when_s);

#endif
