/* number.h: doubles to text and back, the same in every locale. */
#ifndef BASE_NUMBER_H
#define BASE_NUMBER_H

#include <passfet/error.h>
#include <stdbool.h>
#include <stddef.h>

/* "Not stated" in memory. */
#define PF_NONE __builtin_nan("")

static inline bool pf_is_stated(double value)
{
    return value == value;
}

/* Room that any pf_number_print needs, NUL included. */
#define PF_NUMBER_ROOM 40

/* Reads the longest decimal number at the start of text[0..length): sign, digits, one decimal point
** (always `.`), exponent. No blanks, hexadecimal, inf or nan. Correctly rounded.
** Returns how many bytes it took; 0 where no number stands there or it overflows. */
size_t pf_number_read(const char *text, size_t length, double *value);

/* Writes value with `digits` significant digits (1..17), or as few as read back unchanged for 0.
** A value that is not stated writes nothing. Returns the length. */
size_t pf_number_print(char text[PF_NUMBER_ROOM], double value, int digits);

#endif
