/* units.h: the quantities that passfet reads and writes, and their units.
**
** Inside the program every double is in the SI unit that ends its name (temperatures in degC); the
** units of data sheets exist only where files are read and results written.
*/
#ifndef PASSFET_UNITS_H
#define PASSFET_UNITS_H

#include <passfet/error.h>
#include <stdbool.h>
#include <stddef.h>

/* Quantity, SI unit as printed, whether a bare number is refused for it (a wrong guess there is a
** factor of a thousand), the symbols accepted after an SI prefix. */
#define PF_QUANTITY_LIST(X)                                                                        \
    X(PF_RATIO, "", false, "1")                                                                    \
    X(PF_COUNT, "", false, "1")                                                                    \
    X(PF_VOLTAGE, "V", false, "V|volt|volts")                                                      \
    X(PF_CURRENT, "A", false, "A|amp|amps|ampere|amperes")                                         \
    X(PF_RESISTANCE, "Ohm", true, "Ohm|Ohms|R|\xCE\xA9|\xE2\x84\xA6")                              \
    X(PF_CAPACITANCE, "F", true, "F|farad")                                                        \
    X(PF_INDUCTANCE, "H", true, "H|henry")                                                         \
    X(PF_TIME, "s", true, "s|sec|second|seconds")                                                  \
    X(PF_ENERGY, "J", true, "J|joule|joules")                                                      \
    X(PF_CHARGE, "C", true, "C|coulomb")                                                           \
    X(PF_POWER, "W", false, "W|watt|watts")                                                        \
    X(PF_TEMPERATURE, "degC", false,                                                               \
      "degC|\xC2\xB0"                                                                              \
      "C|deg C|C|\xE2\x84\x83|Cel")                                                                \
    X(PF_THERMAL, "K/W", false,                                                                    \
      "K/W|degC/W|\xC2\xB0"                                                                        \
      "C/W|C/W|KpW")                                                                               \
    X(PF_HEAT_CAPACITY, "J/K", true, "J/K|J/degC|Ws/K")                                            \
    X(PF_SLEW, "V/s", true, "V/s")                                                                 \
    X(PF_MONEY, "", false, "1")

typedef enum pf_quantity {
#define PF_QUANTITY_CODE(code, unit, bare_refused, symbols) code,
    PF_QUANTITY_LIST(PF_QUANTITY_CODE)
#undef PF_QUANTITY_CODE
        PF_QUANTITY_COUNT
} pf_quantity;

/* The SI unit as printed: "V", "K/W", "degC"; "" for a pure number. */
const char *pf_quantity_unit(pf_quantity quantity);

/* Whether a number without a unit is refused for this quantity. */
bool pf_quantity_needs_unit(pf_quantity quantity);

/* Reads a unit with an optional SI prefix ("mOhm", "µs", "V/ms", "kV/s", "degC") as a factor to SI.
** The whole of text[0..length) must be the unit; case counts for prefixes (m, M), not for words.
** µ may be U+00B5, U+03BC or u; Ω U+03A9 or U+2126. A unit of another quantity: PF_BAD_INPUT.
** A lone prefix ("m", "u") counts as prefix and understood unit where *lone_prefix is not NULL. */
pf_status pf_unit_read(const char *text, size_t length, pf_quantity quantity, double *factor,
                       bool *lone_prefix);

/* Writes a value with a prefix that leaves 1 to 3 digits before the point ("4.7 mOhm", "-48 V"),
** `digits` significant digits. Not stated writes "-". Room: PF_UNIT_ROOM. Returns the length. */
#define PF_UNIT_ROOM 64
size_t pf_value_print(char text[PF_UNIT_ROOM], double value, pf_quantity quantity, int digits);

#endif
