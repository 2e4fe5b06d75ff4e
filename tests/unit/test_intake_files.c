/* Claims about whole files: every line of nasty_files.tsv becomes what it says. */
#include "support/claims.h"
#include "support/lines.h"

#include <passfet/intake.h>
#include <stdlib.h>
#include <string.h>

typedef struct nasty {
    const char *name, *content, *outcome;
    char *options;
    size_t length;
} nasty;

typedef struct reading {
    pf_status status;
    pf_changes changes;
    pf_intake_summary summary;
    pf_problems problems;
} reading;

static const char *option(const char *options, const char *name)
{
    const char *at = strstr(options, name);
    return at ? at + strlen(name) : NULL;
}

static void read_file(const nasty *one, reading *out)
{
    pf_intake_options options = {.part_name = option(one->options, "part="),
                                 .encoding = option(one->options, "encoding="),
                                 .accept = strcmp(one->options, "accept") == 0};
    memset(out, 0, sizeof *out);
    pf_problems_init(&out->problems);
    out->status = pf_ratings_read("nasty.csv", one->content, one->length, &options, &out->changes,
                                  &out->summary, &out->problems);
}

static bool has_count(const char *outcome, const char *name, size_t count)
{
    const char *at = option(outcome, name);
    return !at || strtoul(at, NULL, 10) == count;
}

static bool has_refusal(const pf_problems *problems, const char *outcome)
{
    char *words;
    size_t line = strtoul(outcome + strlen("refused "), &words, 10);
    for (size_t i = 0; i < problems->count; i++)
        if (problems->item[i].severity == PF_SEVERITY_REFUSAL && problems->item[i].line == line &&
            strstr(problems->item[i].wrong, words + 2))
            return true;
    return false;
}

static bool meets(const nasty *one, const reading *out)
{
    if (strncmp(one->outcome, "refused ", 8) == 0)
        return out->status == PF_BAD_INPUT && has_refusal(&out->problems, one->outcome);
    return out->status == PF_OK && out->problems.refusals == 0 &&
           has_count(one->outcome, "parts=", out->changes.count) &&
           has_count(one->outcome, "points=", out->summary.points);
}

static void show(const nasty *one, const reading *out)
{
    print_message("%s: wanted %s, got %s, parts=%zu points=%zu\n", one->name, one->outcome,
                  pf_status_text(out->status), out->changes.count, out->summary.points);
    for (size_t i = 0; i < out->problems.count; i++) {
        char text[600];
        pf_problem_print(&out->problems.item[i], text, sizeof text);
        print_message("    %s\n", text);
    }
}

static void test_every_nasty_file_becomes_what_the_table_says(void **state)
{
    pf_lines lines;
    size_t wrong = 0, count = 0;
    (void)state;
    lines_open(&lines, PF_TEST_DATA "/unit/nasty_files.tsv");
    while (lines_next(&lines, 4)) {
        nasty one = {lines.field[0], lines.field[2], lines.field[3], lines.field[1],
                     lines.length[2]};
        reading out;
        read_file(&one, &out);
        if (!meets(&one, &out)) {
            wrong++;
            show(&one, &out);
        }
        pf_changes_clear(&out.changes);
        pf_problems_clear(&out.problems);
        count++;
    }
    lines_close(&lines);
    print_message("%zu nasty files\n", count);
    assert_true(count >= 80);
    assert_int_equal(wrong, 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_every_nasty_file_becomes_what_the_table_says),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
