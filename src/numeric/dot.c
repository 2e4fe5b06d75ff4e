/* dot.c: dot products and exponentials in eight lanes. */
#include "numeric/dot.h"

#include <stdint.h>
#include <string.h>

#if defined(__x86_64__) && defined(__linux__) && !defined(__SANITIZE_ADDRESS__) &&                 \
    (defined(__GNUC__) && !defined(__clang__))
#define PF_WIDE __attribute__((target_clones("default", "avx2,fma", "avx512f")))
#else
#define PF_WIDE
#endif

enum { LANES = 8 };

/* Four sums a lane, so that an addition need not wait for the one before it. */
PF_WIDE
void pf_dot_terms(const uint16_t *place, const double *flow, size_t terms, const double *step,
                  double answer[LANES])
{
    double sum[4][LANES] = {{0}};
    size_t t = 0;
    for (; t + 4 <= terms; t += 4)
        for (size_t k = 0; k < 4; k++) {
            const double *at = step + (size_t)place[t + k] * LANES;
            for (size_t lane = 0; lane < LANES; lane++)
                sum[k][lane] += flow[t + k] * at[lane];
        }
    for (; t < terms; t++) {
        const double *at = step + (size_t)place[t] * LANES;
        for (size_t lane = 0; lane < LANES; lane++)
            sum[0][lane] += flow[t] * at[lane];
    }
    for (size_t lane = 0; lane < LANES; lane++)
        answer[lane] = (sum[0][lane] + sum[1][lane]) + (sum[2][lane] + sum[3][lane]);
}

/* exp(-x) = 2^n exp(r) with |r| <= ln 2 / 2: Cody and Waite's reduction in two parts, the Taylor
 *series
 ** to r^13, the power of two put into the exponent bits. */
static inline double exp_negative(double x)
{
    const double shift = 6755399441055744.0; /* 1.5 * 2^52: adding it rounds to an integer */
    x = x > 700 ? 700 : x < -700 ? -700 : x;
    double scaled = -x * 1.4426950408889634 + shift;
    uint64_t bits;
    memcpy(&bits, &scaled, sizeof bits);
    double n = scaled - shift;
    double r = (-x - n * 0.693147180369123816490) - n * 1.90821492927058770002e-10;
    double sum = 1.0 / 6227020800;
    sum = sum * r + 1.0 / 479001600;
    sum = sum * r + 1.0 / 39916800;
    sum = sum * r + 1.0 / 3628800;
    sum = sum * r + 1.0 / 362880;
    sum = sum * r + 1.0 / 40320;
    sum = sum * r + 1.0 / 5040;
    sum = sum * r + 1.0 / 720;
    sum = sum * r + 1.0 / 120;
    sum = sum * r + 1.0 / 24;
    sum = sum * r + 1.0 / 6;
    sum = sum * r + 0.5;
    sum = sum * r + 1;
    sum = sum * r + 1;
    uint64_t power = (bits + 1023) << 52; /* the low bits of `scaled` are n */
    double two_n;
    memcpy(&two_n, &power, sizeof two_n);
    return sum * two_n;
}

PF_WIDE
void pf_exp_negative(double *value, size_t count, double factor)
{
    for (size_t i = 0; i < count; i++)
        value[i] = factor * exp_negative(value[i]);
}
