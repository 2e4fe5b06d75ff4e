/* dot.h: the two loops that ranking a market spends its time in, for every width of vector unit.
**
** Both are written in eight fixed lanes, so that the order of the additions, and with it the
** result, does not depend on how wide the processor's vectors are. On x86-64 the compiler makes a copy for
** AVX2 and AVX-512 beside the baseline and the loader picks one; aarch64 has its vectors in the
** baseline.
*/
#ifndef NUMERIC_DOT_H
#define NUMERIC_DOT_H

#include <stddef.h>
#include <stdint.h>

/* answer[lane] = sum over t < terms of flow[t] * step[place[t] * 8 + lane], in eight lanes. */
void pf_dot_terms(const uint16_t *place, const double *flow, size_t terms, const double *step,
                  double answer[8]);

/* Replaces every value by factor * exp(-value), within 4e-16 relative where the result is a normal
** number; values beyond +-700 are taken as +-700; NaN stays NaN. */
void pf_exp_negative(double *value, size_t count, double factor);

#endif
