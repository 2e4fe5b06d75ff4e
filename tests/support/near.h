/* near.h: comparing doubles in tests; cmocka 1.1.5 knows only float. */
#ifndef SUPPORT_NEAR_H
#define SUPPORT_NEAR_H

#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>

#include <cmocka.h>

/* |actual - expected| <= relative * |expected|; infinities must be equal; NaN is never near. */
static inline int is_near(double actual, double expected, double relative)
{
    return actual == expected || fabs(actual - expected) <= relative * fabs(expected);
}

#define assert_near(actual, expected, relative)                                                    \
    do {                                                                                           \
        double near_a = (actual), near_e = (expected);                                             \
        if (!is_near(near_a, near_e, relative))                                                    \
            fail_msg("%s = %.10g, expected %.10g within %g", #actual, near_a, near_e,              \
                     (double)(relative));                                                          \
    } while (0)

/* left <op> right for doubles, with both values in the message. */
#define assert_double(left, op, right)                                                             \
    do {                                                                                           \
        double near_l = (left), near_r = (right);                                                  \
        if (!(near_l op near_r))                                                                   \
            fail_msg("%s = %.10g, not %s %s = %.10g", #left, near_l, #op, #right, near_r);         \
    } while (0)

#define assert_not_stated(value)                                                                   \
    do {                                                                                           \
        double near_v = (value);                                                                   \
        if (!isnan(near_v)) fail_msg("%s = %.10g, expected not stated", #value, near_v);           \
    } while (0)

#endif
