/* decimal.c: decimal marks and thousands.
**
** `4,2` and `1.234` are read only where they can mean one thing: told by --decimal, shown by the
** delimiter (a comma file has decimal points, for its commas are taken), or by their digits (no
** thousands look like `0.125` or `4,2`). The rest is refused.
*/
#include "base/number.h"
#include "intake/value.h"

#include <string.h>

/* The digits and marks at the start of a text. */
typedef struct mantissa {
    size_t start;  /* behind the sign */
    size_t length; /* digits and marks */
    size_t points, commas;
    char last; /* the last mark */
    bool negative;
} mantissa;

static bool is_digit(char c)
{
    return c >= '0' && c <= '9';
}

/* A sign: `-`, `+`, the minus sign U+2212, an en dash. */
static size_t read_sign(pf_slice text, bool *negative)
{
    *negative = false;
    if (text.length > 1 && (text.text[0] == '+' || text.text[0] == '-')) {
        *negative = text.text[0] == '-';
        return 1;
    }
    if (pf_starts(text, "\xE2\x88\x92") || pf_starts(text, "\xE2\x80\x93")) {
        *negative = true;
        return 3;
    }
    return 0;
}

static mantissa scan(pf_slice text)
{
    mantissa found = {0};
    found.start = read_sign(text, &found.negative);
    size_t at = found.start;
    for (; at < text.length; at++) {
        char c = text.text[at];
        if (!is_digit(c) && c != '.' && c != ',') break;
        found.points += c == '.';
        found.commas += c == ',';
        if (!is_digit(c)) found.last = c;
    }
    found.length = at - found.start;
    return found;
}

/* Whether mark cuts the digits before end into thousands: 1 to 3 digits, not a lone 0, then threes.
 */
static bool is_grouped(const char *text, size_t end, char mark)
{
    size_t first = 0, run = 0;
    bool marked = false;
    for (size_t i = 0; i <= end; i++) {
        if (i < end && is_digit(text[i])) {
            run++;
            continue;
        }
        if (i < end && text[i] != mark) return false;
        if (!marked) first = run;
        if (marked && run != 3) return false;
        if (i < end) marked = true;
        run = 0;
    }
    return marked && first >= 1 && first <= 3 && text[0] != '0';
}

static pf_status two_things(pf_fault *fault)
{
    return pf_fault_set(fault, "say which with --decimal point or --decimal comma",
                        "could be thousands or a decimal fraction");
}

/* One kind of mark, once: a decimal mark, thousands, or undecided. */
static pf_status settle_single(const pf_number_style *style, char mark, bool grouped, char *decimal,
                               pf_fault *fault)
{
    bool told = style->decimal != 0;
    bool comma_file = style->delimiter == ',';
    if (told ? style->decimal == mark : comma_file && mark == '.') {
        *decimal = mark;
    } else if (told) {
        if (!grouped)
            return pf_fault_set(fault, "", "`%c` is not the decimal mark that --decimal names",
                                mark);
        *decimal = style->decimal;
    } else if (grouped) {
        return two_things(fault);
    } else if (comma_file) {
        return pf_fault_set(fault, "a decimal point, or --decimal comma for the whole file",
                            "a decimal comma in a file with commas between its columns");
    } else {
        *decimal = mark;
    }
    return PF_OK;
}

/* Several marks: thousands throughout, or thousands and one decimal mark at the end. */
static pf_status settle_several(pf_number_style *style, const mantissa *found, const char *digits,
                                char *decimal, pf_fault *fault)
{
    const char *end = digits + found->length;
    const char other = found->last == '.' ? ',' : '.';
    size_t lasts = found->last == '.' ? found->points : found->commas;
    if (lasts > 1) { /* 1.234.567 */
        if (!is_grouped(digits, found->length, found->last))
            return pf_fault_set(fault, "one decimal mark", "not a number: too many marks");
        *decimal = other;
    } else {
        const char *mark = digits;
        for (const char *c = digits; c < end; c++)
            if (*c == found->last) mark = c;
        if (!is_grouped(digits, (size_t)(mark - digits), other))
            return pf_fault_set(fault, "one decimal mark", "not a number: too many marks");
        *decimal = found->last;
    }
    char known = style->decimal ? style->decimal : style->seen;
    if (known && known != *decimal)
        return pf_fault_set(fault, "one decimal mark throughout the file",
                            "its decimal mark is `%c`, elsewhere in this file it is `%c`", *decimal,
                            known);
    style->seen = *decimal;
    return PF_OK;
}

static size_t exponent_length(pf_slice text, size_t at)
{
    size_t next = at + 1;
    if (at >= text.length || (text.text[at] != 'e' && text.text[at] != 'E')) return 0;
    if (next < text.length && (text.text[next] == '-' || text.text[next] == '+')) next++;
    if (next >= text.length || !is_digit(text.text[next])) return 0;
    while (next < text.length && is_digit(text.text[next]))
        next++;
    return next - at;
}

/* The number with a decimal point and without thousands, for pf_number_read. */
static pf_status read_clean(pf_slice text, const mantissa *found, char decimal, double *value,
                            size_t *taken, pf_fault *fault)
{
    char clean[128];
    size_t end = found->start + found->length, length = 0;
    size_t total = end + exponent_length(text, end);
    if (total - found->start > sizeof clean - 2)
        return pf_fault_set(fault, "", "a number of more than 120 characters");
    if (found->negative) clean[length++] = '-';
    for (size_t i = found->start; i < total; i++) {
        char c = text.text[i];
        if (i < end && !is_digit(c)) {
            if (c != decimal) continue;
            c = '.';
        }
        clean[length++] = c;
    }
    if (pf_number_read(clean, length, value) != length)
        return pf_fault_set(fault, "", "not a number that can be held");
    *taken = total;
    return PF_OK;
}

pf_status pf_decimal_read(pf_slice text, pf_number_style *style, double *value, size_t *taken,
                          pf_fault *fault)
{
    mantissa found = scan(text);
    const char *digits = text.text + found.start;
    size_t marks = found.points + found.commas;
    char decimal = '.';
    pf_status status = PF_OK;
    *taken = 0;
    if (found.length == marks) return PF_OK; /* no digit */
    if (marks == 1)
        status = settle_single(style, found.last, is_grouped(digits, found.length, found.last),
                               &decimal, fault);
    else if (marks > 1)
        status = settle_several(style, &found, digits, &decimal, fault);
    return status == PF_OK ? read_clean(text, &found, decimal, value, taken, fault) : status;
}
