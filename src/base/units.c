/* units.c: units of data sheets as factors to SI, and values with a readable prefix. */
#include "base/number.h"

#include <math.h>
#include <passfet/units.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

typedef struct quantity_facts {
    const char *unit;
    bool bare_refused;
    const char *symbols; /* separated by | */
} quantity_facts;

static const quantity_facts facts[] = {
#define PF_QUANTITY_FACTS(code, unit, bare_refused, symbols) {unit, bare_refused, symbols},
    PF_QUANTITY_LIST(PF_QUANTITY_FACTS)
#undef PF_QUANTITY_FACTS
};

typedef struct prefix {
    const char *text;
    double factor;
} prefix;

static const prefix prefixes[] = {
    {"p", 1e-12}, {"n", 1e-9}, {"u", 1e-6}, {"\xC2\xB5", 1e-6}, {"\xCE\xBC", 1e-6},
    {"m", 1e-3},  {"k", 1e3},  {"K", 1e3},  {"M", 1e6},         {"G", 1e9},
};

const char *pf_quantity_unit(pf_quantity quantity)
{
    return facts[quantity].unit;
}

bool pf_quantity_needs_unit(pf_quantity quantity)
{
    return facts[quantity].bare_refused;
}

static char lower(char c)
{
    return c >= 'A' && c <= 'Z' ? (char)(c - 'A' + 'a') : c;
}

/* Symbols of one letter are exact ("s" is not "S", "C" not "c"); words ignore case. */
static bool same_symbol(const char *symbol, size_t symbol_length, const char *text, size_t length)
{
    if (symbol_length != length) return false;
    if (length == 1) return symbol[0] == text[0];
    for (size_t i = 0; i < length; i++)
        if (lower(symbol[i]) != lower(text[i])) return false;
    return true;
}

static bool is_symbol(const char *text, size_t length, pf_quantity quantity)
{
    const char *symbol = facts[quantity].symbols;
    while (*symbol) {
        size_t symbol_length = strcspn(symbol, "|");
        if (same_symbol(symbol, symbol_length, text, length)) return true;
        symbol += symbol_length + (symbol[symbol_length] == '|');
    }
    return false;
}

/* A prefix at the start of text: its bytes, 0 for none. */
static size_t read_prefix(const char *text, size_t length, double *factor)
{
    for (size_t i = 0; i < sizeof prefixes / sizeof *prefixes; i++) {
        size_t taken = strlen(prefixes[i].text);
        if (taken > length || memcmp(text, prefixes[i].text, taken) != 0) continue;
        *factor = prefixes[i].factor;
        return taken;
    }
    return 0;
}

/* "V/ms", "kV/s": a voltage over a time. */
static pf_status read_slew(const char *text, size_t length, double *factor)
{
    const char *bar = memchr(text, '/', length);
    double volt, time;
    if (!bar) return PF_BAD_INPUT;
    size_t above = (size_t)(bar - text);
    if (pf_unit_read(text, above, PF_VOLTAGE, &volt, NULL) != PF_OK) return PF_BAD_INPUT;
    if (pf_unit_read(bar + 1, length - above - 1, PF_TIME, &time, NULL) != PF_OK)
        return PF_BAD_INPUT;
    *factor = volt / time;
    return PF_OK;
}

/* Quantities that no data sheet writes with a prefix, or where one would be a trap ("mK/W" is read,
** "m degC" is not). */
static bool takes_prefix(pf_quantity quantity)
{
    return quantity != PF_TEMPERATURE && quantity != PF_RATIO && quantity != PF_COUNT &&
           quantity != PF_MONEY;
}

pf_status pf_unit_read(const char *text, size_t length, pf_quantity quantity, double *factor,
                       bool *lone_prefix)
{
    double scale = 1;
    if (lone_prefix) *lone_prefix = false;
    if (length == 0) return PF_BAD_INPUT;
    if (quantity == PF_SLEW) return read_slew(text, length, factor);
    if (is_symbol(text, length, quantity)) {
        *factor = 1;
        return PF_OK;
    }
    if (!takes_prefix(quantity)) return PF_BAD_INPUT;
    size_t taken = read_prefix(text, length, &scale);
    if (taken == 0) return PF_BAD_INPUT;
    if (taken == length && lone_prefix)
        *lone_prefix = true;
    else if (!is_symbol(text + taken, length - taken, quantity))
        return PF_BAD_INPUT;
    *factor = scale;
    return PF_OK;
}

static bool printed_with_prefix(pf_quantity quantity)
{
    return takes_prefix(quantity) && quantity != PF_THERMAL && quantity != PF_SLEW;
}

size_t pf_value_print(char text[PF_UNIT_ROOM], double value, pf_quantity quantity, int digits)
{
    static const char *const mark[] = {"p", "n", "u", "m", "", "k", "M", "G"};
    char number[PF_NUMBER_ROOM];
    int step = 4;
    if (!isfinite(value)) return (size_t)snprintf(text, PF_UNIT_ROOM, "-");
    if (printed_with_prefix(quantity) && value != 0) {
        /* rounded first, so that 999.96 m becomes 1 and not 1000 m */
        snprintf(number, sizeof number, "%.*e", (digits > 0 ? digits : 6) - 1, fabs(value));
        int power = (int)strtol(strchr(number, 'e') + 1, NULL, 10);
        step = 4 + (power >= 0 ? power / 3 : -((2 - power) / 3));
        step = step < 0 ? 0 : step > 7 ? 7 : step;
        value /= pow(10, 3 * (step - 4));
    }
    pf_number_print(number, value, digits);
    if (strchr(number, 'e') && fabs(value) < 1e6 && fabs(value) >= 1)
        snprintf(number, sizeof number, "%.0f", value); /* "175", never "1.8e+02" */
    const char *unit = facts[quantity].unit;
    bool spaced = *unit || *mark[step];
    return (size_t)snprintf(text, PF_UNIT_ROOM, "%s%s%s%s", number, spaced ? " " : "", mark[step],
                            unit);
}
