/* dot.c: dot products and exponentials in eight lanes.
**
** Written on vectors of eight doubles (an extension that gcc and clang share): the compiler makes of
** one what the processor has, four SSE2 registers, two of AVX2, one of AVX-512, four of NEON.
*/
#include "numeric/dot.h"

#include <string.h>

#if defined(__x86_64__) && defined(__linux__) && !defined(__SANITIZE_ADDRESS__) &&                 \
    (defined(__GNUC__) && !defined(__clang__))
#define PF_WIDE __attribute__((target_clones("default", "arch=x86-64-v3", "arch=x86-64-v4")))
#else
#define PF_WIDE
#endif

enum { LANES = 8 };

typedef double lanes __attribute__((vector_size(LANES * sizeof(double))));
typedef int64_t bits __attribute__((vector_size(LANES * sizeof(int64_t))));

/* Four sums a lane, so that an addition need not wait for the one before it. */
PF_WIDE
void pf_dot_terms(const uint16_t *place, const double *flow, size_t terms, const double *step,
                  double answer[LANES])
{
    lanes sum0 = {0}, sum1 = {0}, sum2 = {0}, sum3 = {0}, at0, at1, at2, at3;
    size_t t = 0;
    for (; t + 4 <= terms; t += 4) {
        memcpy(&at0, step + (size_t)place[t] * LANES, sizeof at0);
        memcpy(&at1, step + (size_t)place[t + 1] * LANES, sizeof at1);
        memcpy(&at2, step + (size_t)place[t + 2] * LANES, sizeof at2);
        memcpy(&at3, step + (size_t)place[t + 3] * LANES, sizeof at3);
        sum0 += flow[t] * at0;
        sum1 += flow[t + 1] * at1;
        sum2 += flow[t + 2] * at2;
        sum3 += flow[t + 3] * at3;
    }
    for (; t < terms; t++) {
        memcpy(&at0, step + (size_t)place[t] * LANES, sizeof at0);
        sum0 += flow[t] * at0;
    }
    sum0 = (sum0 + sum1) + (sum2 + sum3);
    memcpy(answer, &sum0, sizeof sum0);
}

/* value where mask is set, else other. */
#define PF_CHOOSE(mask, value, other)                                                              \
    ((lanes)(((bits)(value) & (mask)) | ((bits)(other) & ~(mask))))

/* exp(-x) = 2^n exp(r) with |r| <= ln 2 / 2: Cody and Waite's reduction in two parts, the Taylor series
** to r^13, the power of two put into the exponent bits. Replaces eight values by factor * exp(-value). */
#define PF_EXP_NEGATIVE(x, factor)                                                                 \
    do {                                                                                           \
        const lanes most = {700, 700, 700, 700, 700, 700, 700, 700};                               \
        const lanes shift = most * 0 + 6755399441055744.0; /* + 1.5 * 2^52 rounds to an integer */ \
        x = PF_CHOOSE(x > most, most, x);                                                          \
        x = PF_CHOOSE(x < -most, -most, x);                                                        \
        lanes scaled = x * -1.4426950408889634 + shift, n = scaled - shift;                        \
        lanes r = (-x - n * 0.693147180369123816490) - n * 1.90821492927058770002e-10;             \
        lanes sum = r * (1.0 / 6227020800) + 1.0 / 479001600;                                      \
        sum = sum * r + 1.0 / 39916800;                                                            \
        sum = sum * r + 1.0 / 3628800;                                                             \
        sum = sum * r + 1.0 / 362880;                                                              \
        sum = sum * r + 1.0 / 40320;                                                               \
        sum = sum * r + 1.0 / 5040;                                                                \
        sum = sum * r + 1.0 / 720;                                                                 \
        sum = sum * r + 1.0 / 120;                                                                 \
        sum = sum * r + 1.0 / 24;                                                                  \
        sum = sum * r + 1.0 / 6;                                                                   \
        sum = sum * r + 0.5;                                                                       \
        sum = sum * r + 1;                                                                         \
        sum = sum * r + 1;                                                                         \
        bits power = ((bits)scaled + 1023) << 52; /* the low bits of scaled are n */               \
        x = (factor)*sum * (lanes)power;                                                           \
    } while (0)

PF_WIDE
void pf_exp_negative(double *value, size_t count, double factor)
{
    lanes x;
    size_t i = 0;
    for (; i + LANES <= count; i += LANES) {
        memcpy(&x, value + i, sizeof x);
        PF_EXP_NEGATIVE(x, factor);
        memcpy(value + i, &x, sizeof x);
    }
    if (i == count) return;
    memset(&x, 0, sizeof x);
    memcpy(&x, value + i, (count - i) * sizeof *value);
    PF_EXP_NEGATIVE(x, factor);
    memcpy(value + i, &x, (count - i) * sizeof *value);
}
