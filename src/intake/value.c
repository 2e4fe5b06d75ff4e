/* value.c: the text of one cell as a number in SI.
**
** Fast path first: digits and nothing else, which is what nearly all of a curve file is.
*/
#include "intake/value.h"
#include "base/number.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include <string.h>

pf_status pf_fault_set(pf_fault *fault, const char *right, const char *wrong, ...)
{
    va_list arguments;
    va_start(arguments, wrong);
    vsnprintf(fault->wrong, sizeof fault->wrong, wrong, arguments);
    va_end(arguments);
    snprintf(fault->right, sizeof fault->right, "%s", right);
    return PF_BAD_INPUT;
}

double pf_scale(double number, double factor)
{
    return factor < 1 ? number / nearbyint(1 / factor) : number * factor;
}

static pf_slice after(pf_slice text, size_t bytes)
{
    return (pf_slice){text.text + bytes, text.length - bytes};
}

static pf_slice before(pf_slice text, size_t bytes)
{
    return (pf_slice){text.text, bytes};
}

static bool is_digit(char c)
{
    return c >= '0' && c <= '9';
}

/* --- Units --------------------------------------------------------------------------------- */

/* Without brackets around it and blanks in it; U+00BA, often typed for a degree sign, made one. */
static size_t tidy_unit(pf_slice text, char unit[32])
{
    size_t length = 0;
    text = pf_trim(text);
    bool bracketed =
        text.length >= 2 && ((text.text[0] == '[' && text.text[text.length - 1] == ']') ||
                             (text.text[0] == '(' && text.text[text.length - 1] == ')'));
    if (bracketed) text = (pf_slice){text.text + 1, text.length - 2};
    for (size_t i = 0; i < text.length;) {
        size_t blank = pf_blank_length(text.text + i, text.length - i);
        if (blank == 0) {
            if (length == 31) return 0;
            unit[length++] = text.text[i];
            if (length >= 2 && memcmp(unit + length - 2, "\xC2\xBA", 2) == 0)
                unit[length - 1] = '\xB0';
        }
        i += blank ? blank : 1;
    }
    return length;
}

pf_status pf_column_unit_read(pf_slice text, pf_quantity quantity, double *factor)
{
    char unit[32];
    size_t length = tidy_unit(text, unit);
    return pf_unit_read(unit, length, quantity, factor, NULL);
}

/* An example of how a value of this quantity is written, for messages. */
static const char *example(pf_quantity quantity)
{
    static const char *const text[] = {
        [PF_RATIO] = "1.8",           [PF_COUNT] = "2",
        [PF_VOLTAGE] = "48 V",        [PF_CURRENT] = "12 A",
        [PF_RESISTANCE] = "4.7 mOhm", [PF_CAPACITANCE] = "2.2 nF",
        [PF_INDUCTANCE] = "100 nH",   [PF_TIME] = "10 ms",
        [PF_ENERGY] = "120 mJ",       [PF_CHARGE] = "60 nC",
        [PF_POWER] = "60 W",          [PF_TEMPERATURE] = "175 degC",
        [PF_THERMAL] = "0.6 K/W",     [PF_HEAT_CAPACITY] = "2 J/K",
        [PF_SLEW] = "600 V/s",        [PF_MONEY] = "1.25",
    };
    return text[quantity];
}

static pf_status refuse_unit(pf_slice unit, pf_quantity quantity, pf_fault *fault)
{
    char right[120];
    char last = unit.text[unit.length - 1];
    snprintf(right, sizeof right, "a value such as %s", example(quantity));
    if (quantity == PF_RESISTANCE && last == 'W' && unit.length <= 3)
        return pf_fault_set(fault, "write mOhm: copying from a PDF makes W of the ohm sign",
                            "`%.*s` is a power and this is a resistance", (int)unit.length,
                            unit.text);
    if (quantity == PF_THERMAL && unit.text[0] == 'q')
        return pf_fault_set(fault, right, "`%.*s` looks like a theta damaged by copying",
                            (int)unit.length, unit.text);
    if (pf_starts(unit, "\xC2\xB9") || pf_starts(unit, "\xC2\xB2") || pf_starts(unit, "\xC2\xB3"))
        return pf_fault_set(fault, "leave footnote marks out",
                            "a raised digit may be a footnote or a power");
    return pf_fault_set(fault, right, "`%.*s` is no unit of this quantity",
                        unit.length < 60 ? (int)unit.length : 60, unit.text);
}

/* The factor of what stands behind the number; an empty rest takes the header's unit. */
static pf_status settle_unit(pf_slice rest, const pf_value_rule *rule, double *factor,
                             pf_fault *fault)
{
    char unit[32];
    bool lone = false;
    pf_slice bare = pf_trim(rest);
    if (bare.length == 0) {
        *factor = rule->factor != 0 ? rule->factor : 1;
        if (rule->factor == 0 && pf_quantity_needs_unit(rule->quantity)) {
            char right[120];
            snprintf(right, sizeof right, "%s, or the unit in the header or the unit column",
                     example(rule->quantity));
            return pf_fault_set(fault, right, "a number without a unit");
        }
        return PF_OK;
    }
    size_t length = tidy_unit(rest, unit);
    if (pf_unit_read(unit, length, rule->quantity, factor, &lone) != PF_OK)
        return refuse_unit(bare, rule->quantity, fault);
    if (lone && bare.text != rest.text)
        return pf_fault_set(fault, "write the unit out: copying from a PDF loses the ohm sign",
                            "a prefix stands alone behind a blank");
    if (lone && rule->factor != 0 && rule->factor != *factor)
        return pf_fault_set(fault, "a plain number in the header's unit, or the whole unit",
                            "a prefix beside the unit of the header");
    return PF_OK;
}

/* --- IEC 60062 ----------------------------------------------------------------------------- */

/* The multiplier that a letter of the code stands for; 0 for none. Also `m` for resistance, which
** many write for the standard's `L`. */
static double code_factor(pf_slice letter, pf_quantity quantity)
{
    static const struct {
        const char *letter;
        double resistance, capacitance;
    } codes[] = {
        {"R", 1, 0},   {"L", 1e-3, 0},        {"m", 1e-3, 1e-3},     {"K", 1e3, 0},  {"k", 1e3, 0},
        {"M", 1e6, 0}, {"G", 1e9, 0},         {"p", 0, 1e-12},       {"n", 0, 1e-9}, {"u", 0, 1e-6},
        {"F", 0, 1},   {"\xC2\xB5", 0, 1e-6}, {"\xCE\xBC", 0, 1e-6},
    };
    for (size_t i = 0; i < sizeof codes / sizeof *codes; i++)
        if (letter.length == strlen(codes[i].letter) &&
            memcmp(letter.text, codes[i].letter, letter.length) == 0)
            return quantity == PF_RESISTANCE ? codes[i].resistance : codes[i].capacitance;
    return 0;
}

static size_t digits_at(pf_slice text, size_t at)
{
    size_t end = at;
    while (end < text.length && is_digit(text.text[end]))
        end++;
    return end - at;
}

/* Digits, a letter in place of the decimal point, digits; a tolerance letter may follow. */
static bool read_letter_code(pf_slice text, pf_quantity quantity, double *value)
{
    char plain[40];
    size_t whole = digits_at(text, 0);
    if (whole > 12 || whole >= text.length) return false;
    size_t letter = (unsigned char)text.text[whole] >= 0x80 ? 2 : 1;
    if (whole + letter >= text.length) return false;
    double factor = code_factor((pf_slice){text.text + whole, letter}, quantity);
    size_t part = digits_at(text, whole + letter);
    size_t end = whole + letter + part;
    if (factor == 0 || part == 0 || part > 12) return false;
    if (end + 1 == text.length && strchr("BCDFGJKMNSZ", text.text[end])) end++;
    if (end != text.length) return false;
    int length = snprintf(plain, sizeof plain, "%.*s.%.*s", (int)whole, text.text, (int)part,
                          text.text + whole + letter);
    if (pf_number_read(plain, (size_t)length, value) == 0) return false;
    *value = pf_scale(*value, factor);
    return true;
}

/* --- Marks around the number ---------------------------------------------------------------- */

/* Takes footnote marks off the end: `*`, daggers, `[1]`, `[a]`. */
static pf_slice strip_footnotes(pf_slice text)
{
    for (;;) {
        size_t n = text.length;
        const char *s = text.text;
        if (n > 1 && s[n - 1] == '*')
            text.length--;
        else if (n > 3 && (memcmp(s + n - 3, "\xE2\x80\xA0", 3) == 0 ||
                           memcmp(s + n - 3, "\xE2\x80\xA1", 3) == 0))
            text.length -= 3;
        else if (n > 3 && s[n - 1] == ']' && s[n - 3] == '[' &&
                 (is_digit(s[n - 2]) || s[n - 2] == 'a' || s[n - 2] == 'b'))
            text.length -= 3;
        else
            return text;
        text = pf_trim(text);
    }
}

static const struct {
    const char *mark;
    pf_bound bound;
} bounds[] = {
    {"<=", PF_BOUND_UPPER},           {"<", PF_BOUND_UPPER},
    {">=", PF_BOUND_LOWER},           {">", PF_BOUND_LOWER},
    {"max.", PF_BOUND_UPPER},         {"max ", PF_BOUND_UPPER},
    {"min.", PF_BOUND_LOWER},         {"min ", PF_BOUND_LOWER},
    {"\xE2\x89\xA4", PF_BOUND_UPPER}, {"\xE2\x89\xA5", PF_BOUND_LOWER},
};

/* Takes `<`, `max` and their kind off the start where the column allows them. */
static pf_status strip_bound(pf_slice *text, pf_bound allowed, pf_fault *fault)
{
    for (size_t i = 0; i < sizeof bounds / sizeof *bounds; i++) {
        if (!pf_starts(*text, bounds[i].mark)) continue;
        if (bounds[i].bound != allowed)
            return pf_fault_set(fault, "the rated value alone",
                                "`%s` leaves open what the rated value is", bounds[i].mark);
        *text = pf_trim(after(*text, strlen(bounds[i].mark)));
        return PF_OK;
    }
    return PF_OK;
}

static bool strip_plus_minus(pf_slice *text)
{
    static const char *const marks[] = {"\xC2\xB1", "+/-", "+-", "-/+"};
    for (size_t i = 0; i < sizeof marks / sizeof *marks; i++)
        if (pf_starts(*text, marks[i])) {
            *text = pf_trim(after(*text, strlen(marks[i])));
            return true;
        }
    return false;
}

/* Where a range is cut: its separator's place and length; false for a single number. */
static bool find_range(pf_slice text, size_t *at, size_t *length)
{
    static const char *const marks[] = {" to ", "...",           "..", "\xE2\x80\xA6", "~",
                                        " - ",  " \xE2\x80\x93 "};
    for (size_t i = 1; i + 1 < text.length; i++)
        for (size_t k = 0; k < sizeof marks / sizeof *marks; k++)
            if (pf_starts(after(text, i), marks[k])) {
                *at = i;
                *length = strlen(marks[k]);
                return true;
            }
    return false;
}

/* --- The number ---------------------------------------------------------------------------- */

static pf_status read_single(pf_slice text, const pf_value_rule *rule, pf_number_style *style,
                             double *value, pf_fault *fault)
{
    size_t taken;
    double number = 0, factor = 1;
    bool coded = rule->quantity == PF_RESISTANCE || rule->quantity == PF_CAPACITANCE;
    if (coded && read_letter_code(text, rule->quantity, value)) return PF_OK;
    pf_status status = pf_decimal_read(text, style, &number, &taken, fault);
    if (status != PF_OK) return status;
    if (taken == 0) {
        char right[120];
        snprintf(right, sizeof right, "a number such as %s, or blank for not stated",
                 example(rule->quantity));
        return pf_fault_set(fault, right, "not a number");
    }
    status = settle_unit(after(text, taken), rule, &factor, fault);
    *value = pf_scale(number, factor);
    return status;
}

/* Both ends of a range; which one counts is the column's matter. */
static pf_status read_range(pf_slice text, size_t at, size_t length, const pf_value_rule *rule,
                            pf_number_style *style, double *value, pf_fault *fault)
{
    pf_value_rule loose = *rule;
    double low = 0, high = 0;
    if (loose.factor == 0) loose.factor = 1;
    pf_status status = read_single(pf_trim(after(text, at + length)), rule, style, &high, fault);
    if (status == PF_OK)
        status = read_single(pf_trim(before(text, at)), &loose, style, &low, fault);
    if (status != PF_OK) return status;
    bool symmetrical = rule->plus_minus && low == -high && high > 0;
    if (!(rule->range_upper && low < high) && !symmetrical)
        return pf_fault_set(fault, "the one value that counts as the rating",
                            "a range stands where one number is needed");
    *value = high;
    return PF_OK;
}

static pf_status check_range(const pf_value_rule *rule, pf_value *value, pf_fault *fault)
{
    char low[PF_UNIT_ROOM], high[PF_UNIT_ROOM], right[180];
    value->negative = signbit(value->value) && value->value != 0;
    if (rule->signless) value->value = fabs(value->value);
    if (value->value >= rule->lowest && value->value <= rule->highest) return PF_OK;
    pf_value_print(low, rule->lowest, rule->quantity, 6);
    pf_value_print(high, rule->highest, rule->quantity, 6);
    if (rule->lowest >= 0 && value->value < 0) {
        snprintf(right, sizeof right, "a value from %s to %s; are these logarithms?", low, high);
        return pf_fault_set(fault, right, "negative");
    }
    char shown[PF_UNIT_ROOM];
    pf_value_print(shown, value->value, rule->quantity, 6);
    snprintf(right, sizeof right, "a value from %s to %s", low, high);
    return pf_fault_set(fault, right, "%s is not possible here", shown);
}

static pf_status read_marked(pf_slice text, const pf_value_rule *rule, pf_number_style *style,
                             double *value, pf_fault *fault)
{
    size_t at, length;
    text = strip_footnotes(text);
    pf_status status = strip_bound(&text, rule->bound, fault);
    if (status != PF_OK) return status;
    if (strip_plus_minus(&text)) {
        if (!rule->plus_minus)
            return pf_fault_set(fault, "the rated value alone",
                                "a plus-minus sign has no meaning here");
    } else if (find_range(text, &at, &length)) {
        return read_range(text, at, length, rule, style, value, fault);
    }
    return read_single(text, rule, style, value, fault);
}

/* Digits with at most a decimal point, in a file where a point can be nothing else. */
static bool read_fast(pf_slice text, const pf_value_rule *rule, const pf_number_style *style,
                      double *value)
{
    bool point = style->decimal ? style->decimal == '.' : style->delimiter == ',';
    bool unit = rule->factor != 0 || !pf_quantity_needs_unit(rule->quantity);
    if (!point || !unit) return false;
    if (pf_number_read(text.text, text.length, value) != text.length) return false;
    if (rule->factor != 0) *value = pf_scale(*value, rule->factor);
    return true;
}

pf_status pf_value_read(pf_slice text, const pf_value_rule *rule, pf_number_style *style,
                        pf_value *value, pf_fault *fault)
{
    *value = (pf_value){PF_NONE, false};
    if (!(text.length && read_fast(text, rule, style, &value->value))) {
        text = pf_trim(text);
        if (pf_not_stated(text)) return PF_OK;
        pf_status status = read_marked(text, rule, style, &value->value, fault);
        if (status != PF_OK) return status;
    }
    return check_range(rule, value, fault);
}
