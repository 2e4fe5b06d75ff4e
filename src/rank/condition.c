/* condition.c: plain comparisons on what a part states. */
#include "base/number.h"

#include <passfet/ranking.h>
#include <stdio.h>
#include <string.h>

typedef struct sign {
    const char *text;
    pf_comparison comparison;
} sign;

/* Two-letter signs before their first letters. */
static const sign signs[] = {{">=", PF_AT_LEAST}, {"<=", PF_AT_MOST}, {"!=", PF_UNEQUAL},
                             {"=", PF_EQUAL},     {">", PF_MORE},     {"<", PF_LESS}};

static char folded(char c)
{
    return c >= 'A' && c <= 'Z' ? (char)(c - 'A' + 'a') : c;
}

static bool same_word(const char *left, const char *right)
{
    while (*left && folded(*left) == folded(*right))
        left++, right++;
    return *left == *right;
}

/* The text between blanks, cut to room. */
static void trim_into(char *out, size_t room, const char *text, size_t length)
{
    while (length && *text == ' ')
        text++, length--;
    while (length && text[length - 1] == ' ')
        length--;
    snprintf(out, room, "%.*s", (int)(length < room ? length : room - 1), text);
}

static const sign *find_sign(const char *text, size_t *at)
{
    *at = strcspn(text, "<>=!");
    for (size_t i = 0; i < sizeof signs / sizeof *signs; i++)
        if (strncmp(text + *at, signs[i].text, strlen(signs[i].text)) == 0) return &signs[i];
    return NULL;
}

static bool find_field(const char *name, pf_condition *condition)
{
    size_t count;
    const pf_rating_field *rating = pf_rating_fields(&count);
    for (size_t i = 0; i < count; i++)
        if (same_word(name, rating[i].csv)) condition->rating = &rating[i];
    const pf_text_field *text = pf_text_fields(&count);
    for (size_t i = 0; i < count; i++)
        if (same_word(name, text[i].csv)) condition->text = &text[i];
    return condition->rating || condition->text || same_word(name, "polarity");
}

/* "80", "80 V", "4.7 mOhm": a bare number is SI. */
static bool read_value(const char *text, pf_quantity quantity, double *value)
{
    double factor = 1;
    size_t length = strlen(text), used = pf_number_read(text, length, value);
    const char *unit = text + used + strspn(text + used, " ");
    if (used == 0) return false;
    if (*unit && pf_unit_read(unit, strlen(unit), quantity, &factor, NULL) != PF_OK) return false;
    *value *= factor;
    return true;
}

static pf_status read_word(const char *text, pf_condition *condition, pf_error *error)
{
    bool equality = condition->comparison == PF_EQUAL || condition->comparison == PF_UNEQUAL;
    if (equality && *condition->word) return PF_OK;
    return pf_error_set(error, PF_BAD_INPUT,
                        "condition `%s`: a text can only be compared by = or !=", text);
}

pf_status pf_condition_read(const char *text, pf_condition *condition, pf_error *error)
{
    char name[64];
    size_t at;
    *condition = (pf_condition){0};
    const sign *found = find_sign(text, &at);
    if (!found)
        return pf_error_set(error, PF_BAD_INPUT,
                            "condition `%s` has no comparison: write vds_max>=80 or package=LFP8",
                            text);
    condition->comparison = found->comparison;
    trim_into(name, sizeof name, text, at);
    const char *value = text + at + strlen(found->text);
    trim_into(condition->word, sizeof condition->word, value, strlen(value));
    if (!find_field(name, condition))
        return pf_error_set(error, PF_BAD_INPUT,
                            "condition `%s`: there is no rating `%s`; `passfet show` lists them",
                            text, name);
    if (!condition->rating) return read_word(text, condition, error);
    if (read_value(condition->word, condition->rating->quantity, &condition->value)) return PF_OK;
    return pf_error_set(error, PF_BAD_INPUT, "condition `%s`: `%s` is not a number in %s", text,
                        condition->word, pf_quantity_unit(condition->rating->quantity));
}

static bool compare_number(pf_comparison comparison, double left, double right)
{
    switch (comparison) {
    case PF_EQUAL:
        return left == right;
    case PF_UNEQUAL:
        return left < right || left > right;
    case PF_LESS:
        return left < right;
    case PF_AT_MOST:
        return left <= right;
    case PF_MORE:
        return left > right;
    default:
        return left >= right;
    }
}

bool pf_condition_met(const pf_condition *condition, const pf_part *part)
{
    if (condition->rating)
        return compare_number(condition->comparison, pf_part_rating_value(part, condition->rating),
                              condition->value);
    const char *word = condition->text ? pf_part_text_value(part, condition->text)
                                       : pf_polarity_text(part->polarity);
    if (!word || !*word) return false;
    return same_word(word, condition->word) == (condition->comparison == PF_EQUAL);
}
