/* Claims about single cells: every line of nasty_cells.tsv becomes what it says. */
#include "support/claims.h"
#include "support/lines.h"

#include <math.h>
#include <passfet/intake.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

typedef struct nasty {
    const char *field, *delimiter, *decimal, *header, *cell, *outcome;
} nasty;

static char delimiter_of(const nasty *one)
{
    return one->delimiter[0] == 'c' ? ',' : one->delimiter[0] == 's' ? ';' : '\t';
}

static void append_quoted(char *text, const char *cell)
{
    size_t at = strlen(text);
    text[at++] = '"';
    for (; *cell; cell++) {
        if (*cell == '"') text[at++] = '"';
        text[at++] = *cell;
    }
    text[at++] = '"';
    text[at] = '\0';
}

/* A parts table of one part whose last column is the one at hand. */
static void write_table(const nasty *one, char *text)
{
    char mark[2] = {delimiter_of(one), '\0'};
    const char *names[] = {"part", "polarity", "vds_max", "tj_max"};
    const char *values[] = {"X1", "N", "100", "175"};
    text[0] = '\0';
    for (size_t i = 0; i < 4; i++)
        if (strcmp(one->field, names[i]) != 0) strcat(strcat(text, names[i]), mark);
    append_quoted(text, one->header);
    strcat(text, "\n");
    for (size_t i = 0; i < 4; i++)
        if (strcmp(one->field, names[i]) != 0) strcat(strcat(text, values[i]), mark);
    append_quoted(text, one->cell);
    strcat(text, "\n");
}

static double value_of(const pf_part *part, const char *csv)
{
    size_t count;
    const pf_rating_field *field = pf_rating_fields(&count);
    if (strcmp(csv, "rdson_max") == 0)
        return part->rdson_count == 1 && part->rdson[0].vgs_V == 10 ? part->rdson[0].rdson_ohm
                                                                    : nan("");
    for (size_t i = 0; i < count; i++)
        if (strcmp(field[i].csv, csv) == 0) return pf_part_rating_value(part, &field[i]);
    return -1;
}

static bool meets(const nasty *one, pf_status status, const pf_changes *changes,
                  const pf_problems *problems)
{
    if (strncmp(one->outcome, "refused: ", 9) == 0) {
        if (status != PF_BAD_INPUT || problems->refusals == 0) return false;
        for (size_t i = 0; i < problems->count; i++) {
            bool words = strstr(problems->item[i].wrong, one->outcome + 9) != NULL;
            size_t line = problems->item[i].line;
            if (problems->item[i].severity == PF_SEVERITY_REFUSAL && words && line >= 1 &&
                line <= 3)
                return true;
        }
        return false;
    }
    if (status != PF_OK || changes->count != 1) return false;
    double value = value_of(&changes->item[0].part, one->field);
    if (strcmp(one->outcome, "not stated") == 0) return isnan(value);
    double wanted = strtod(one->outcome, NULL);
    return fabs(value - wanted) <= 1e-15 * fabs(wanted);
}

static void show(const nasty *one, pf_status status, const pf_changes *changes,
                 const pf_problems *problems)
{
    print_message("[%s] [%s] %s: wanted %s, got %s", one->header, one->cell, one->delimiter,
                  one->outcome, pf_status_text(status));
    if (changes->count) print_message(", %.17g", value_of(&changes->item[0].part, one->field));
    for (size_t i = 0; i < problems->count; i++)
        print_message(", %s", problems->item[i].wrong);
    print_message("\n");
}

static bool holds(const nasty *one)
{
    char text[2000];
    pf_problems problems;
    pf_changes changes = {0};
    pf_intake_summary summary = {0};
    pf_intake_options options = {.decimal = one->decimal[0] == 'p'   ? '.'
                                            : one->decimal[0] == 'c' ? ','
                                                                     : 0};
    pf_problems_init(&problems);
    write_table(one, text);
    pf_status status =
        pf_ratings_read("nasty.csv", text, strlen(text), &options, &changes, &summary, &problems);
    bool good = meets(one, status, &changes, &problems);
    if (!good) show(one, status, &changes, &problems);
    pf_changes_clear(&changes);
    pf_problems_clear(&problems);
    return good;
}

static void test_every_nasty_cell_becomes_what_the_table_says(void **state)
{
    pf_lines lines;
    size_t wrong = 0, count = 0;
    (void)state;
    lines_open(&lines, PF_TEST_DATA "/unit/nasty_cells.tsv");
    while (lines_next(&lines, 6)) {
        nasty one = {lines.field[0], lines.field[1], lines.field[2],
                     lines.field[3], lines.field[4], lines.field[5]};
        wrong += !holds(&one);
        count++;
    }
    lines_close(&lines);
    print_message("%zu nasty cells\n", count);
    assert_true(count >= 80);
    assert_int_equal(wrong, 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_every_nasty_cell_becomes_what_the_table_says),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
