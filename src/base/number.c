/* number.c: doubles to text and back, the same in every locale.
**
** Short numbers, which is to say nearly all of a data sheet, are read exactly with one
** multiplication or division by a power of ten that a double holds exactly (Clinger 1990, fast path); the rest
** goes to strtod in the C locale.
*/
#include "base/number.h"
#include "base/memory.h"

#include <locale.h>
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

typedef struct decimal {
    uint64_t digits; /* the first 19 significant digits */
    int dropped;     /* significant digits beyond those */
    int exponent;    /* power of ten of the last digit held */
    bool any, negative;
} decimal;

static size_t read_digits(const char *text, size_t length, size_t at, decimal *number, bool behind)
{
    for (; at < length && text[at] >= '0' && text[at] <= '9'; at++) {
        number->any = true;
        bool hold = number->digits < UINT64_C(1000000000000000000);
        if (hold)
            number->digits = number->digits * 10 + (uint64_t)(text[at] - '0');
        else
            number->dropped++;
        number->exponent += (behind ? -1 : 0) + (hold ? 0 : 1);
    }
    return at;
}

static size_t read_exponent(const char *text, size_t length, size_t at, decimal *number)
{
    if (at >= length || (text[at] != 'e' && text[at] != 'E')) return at;
    size_t next = at + 1;
    bool negative = next < length && text[next] == '-';
    if (next < length && (text[next] == '-' || text[next] == '+')) next++;
    if (next >= length || text[next] < '0' || text[next] > '9') return at;
    int power = 0;
    for (; next < length && text[next] >= '0' && text[next] <= '9'; next++)
        if (power < 100000) power = power * 10 + (text[next] - '0');
    number->exponent += negative ? -power : power;
    return next;
}

static double slow_read(const char *text, size_t length)
{
    char copy[1100];
    double value = INFINITY;
    locale_t plain = newlocale(LC_ALL_MASK, "C", (locale_t)0);
    if (plain != (locale_t)0 && length < sizeof copy) {
        memcpy(copy, text, length);
        copy[length] = '\0';
        locale_t before = uselocale(plain);
        value = strtod(copy, NULL);
        uselocale(before);
    }
    if (plain != (locale_t)0) freelocale(plain);
    return value;
}

/* Powers of ten that a double holds exactly. */
static const double ten[] = {1e0,  1e1,  1e2,  1e3,  1e4,  1e5,  1e6,  1e7,  1e8,  1e9,  1e10, 1e11,
                             1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22};

size_t pf_number_read(const char *text, size_t length, double *value)
{
    decimal number = {0};
    size_t at = 0;
    if (at < length && (text[at] == '-' || text[at] == '+')) number.negative = text[at++] == '-';
    at = read_digits(text, length, at, &number, false);
    if (at < length && text[at] == '.') at = read_digits(text, length, at + 1, &number, true);
    if (!number.any) return 0;
    at = read_exponent(text, length, at, &number);
    double read;
    if (!number.dropped && number.digits <= (UINT64_C(1) << 53) && number.exponent >= -22 &&
        number.exponent <= 22) {
        read = (double)number.digits;
        read = number.exponent < 0 ? read / ten[-number.exponent] : read * ten[number.exponent];
        if (number.negative) read = -read;
    } else {
        read = slow_read(text, at);
    }
    if (!isfinite(read)) return 0;
    *value = read;
    return at;
}

/* printf writes the decimal point of the locale, which may be several bytes: make it `.`. */
static void restore_point(char *text)
{
    char *mark = text + strspn(text, "+-0123456789");
    size_t foreign = strcspn(mark, "0123456789e");
    if (*mark == 'e' || *mark == '\0' || foreign == 0) return;
    *mark = '.';
    if (foreign > 1) memmove(mark + 1, mark + foreign, strlen(mark + foreign) + 1);
}

/* The shortest decimal of a value above 0, as digits and a power of ten, where the fast path of
** reading proves that it reads back unchanged; false where it does not. 15 digits never fit two
** decimals that are the same double, so that printf would find the same ones. */
static bool shortest(double value, uint64_t *digits, int *exponent)
{
    if (!(value >= 1e-22 && value < 1e15)) return false;
    for (int places = 0; places <= 22; places++) {
        double scaled = nearbyint(value * ten[places]);
        if (scaled >= 1e15) return false;
        if (scaled / ten[places] != value) continue;
        *digits = (uint64_t)scaled;
        *exponent = -places;
        return true;
    }
    return false;
}

/* digits * 10^exponent in the format of "%.*g" with at least 6 digits. */
static size_t print_decimal(char *text, uint64_t digits, int exponent)
{
    char digit[24];
    int count = 0, at = 0;
    for (; digits % 10 == 0; digits /= 10)
        exponent++;
    for (; digits; digits /= 10)
        digit[count++] = (char)('0' + digits % 10); /* the last one first */
    int power = count - 1 + exponent;
    if (power < -4 || power >= (count > 6 ? count : 6)) {
        text[at++] = digit[--count];
        if (count) text[at++] = '.';
        while (count)
            text[at++] = digit[--count];
        return (size_t)at + (size_t)snprintf(text + at, 8, "e%+03d", power);
    }
    if (power < 0) text[at++] = '0', text[at++] = '.';
    for (int zeros = power; zeros < -1; zeros++)
        text[at++] = '0';
    for (int place = power; count; place--) {
        text[at++] = digit[--count];
        if (place == 0 && count) text[at++] = '.';
    }
    for (int zeros = exponent; zeros > 0; zeros--)
        text[at++] = '0';
    text[at] = '\0';
    return (size_t)at;
}

size_t pf_number_print(char text[PF_NUMBER_ROOM], double value, int digits)
{
    uint64_t whole;
    int exponent;
    text[0] = '\0';
    if (!isfinite(value)) return 0;
    if (!digits && shortest(fabs(value), &whole, &exponent)) {
        text[0] = '-';
        return (value < 0) + print_decimal(text + (value < 0), whole, exponent);
    }
    double back = 0;
    for (int use = digits ? digits : 6; use <= 17; use++) {
        snprintf(text, PF_NUMBER_ROOM, "%.*g", use, value);
        restore_point(text);
        if (digits || (pf_number_read(text, strlen(text), &back) && back == value)) break;
    }
    return strlen(text);
}
