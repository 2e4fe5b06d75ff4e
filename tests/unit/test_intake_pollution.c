/* Claims about damaged files: none is read wrong without a word, and the line named is the right one.
**
** A polluted copy may be read as the clean file is (the defect does no harm), or with a word about the
** line of the defect (a column that is ignored, a file that was cut off), or be refused at that line.
** Anything else is a failure.
*/
#include "support/claims.h"
#include "support/pollute.h"

#include <passfet/intake.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

typedef struct clean_file {
    const char *name;
    char delimiter;
    char text[4096];
    size_t length;
    pf_changes changes;
    size_t polluted, harmless, warned, refused, wrong, misplaced;
} clean_file;

static pf_status read_text(const char *text, size_t length, pf_changes *changes,
                           pf_problems *problems)
{
    pf_intake_options options = {0};
    pf_intake_summary summary = {0};
    return pf_ratings_read("polluted.csv", text, length, &options, changes, &summary, problems);
}

static bool same_content(const pf_changes *one, const pf_changes *other)
{
    if (one->count != other->count) return false;
    for (size_t i = 0; i < one->count; i++)
        if (!pf_part_equal(&one->item[i].part, &other->item[i].part)) return false;
    return true;
}

static bool names_line(const pf_problems *problems, size_t line, pf_severity least)
{
    for (size_t i = 0; i < problems->count; i++)
        if (problems->item[i].severity >= least && problems->item[i].line == line) return true;
    return false;
}

static void show(const polluted *file, const pf_problems *problems, const char *fate)
{
    char text[600];
    print_message("%s in line %zu: %s\n", file->what, file->line, fate);
    for (size_t i = 0; i < problems->count && i < 3; i++) {
        pf_problem_print(&problems->item[i], text, sizeof text);
        print_message("    %s\n", text);
    }
}

static void judge(void *context, const polluted *file)
{
    clean_file *clean = context;
    pf_changes changes = {0};
    pf_problems problems;
    pf_problems_init(&problems);
    pf_status status = read_text(file->text, file->length, &changes, &problems);
    clean->polluted++;
    if (status == PF_BAD_INPUT) {
        clean->refused++;
        if (!names_line(&problems, file->line, PF_SEVERITY_REFUSAL)) {
            clean->misplaced++;
            show(file, &problems, "refused at another line");
        }
    } else if (status != PF_OK) {
        clean->wrong++;
        show(file, &problems, pf_status_text(status));
    } else if (same_content(&clean->changes, &changes)) {
        clean->harmless++;
    } else if (names_line(&problems, file->line, PF_SEVERITY_NOTE)) {
        clean->warned++;
    } else {
        clean->wrong++;
        show(file, &problems, "silently wrong");
    }
    pf_changes_clear(&changes);
    pf_problems_clear(&problems);
}

static void load(clean_file *clean)
{
    char path[512];
    pf_problems problems;
    pf_problems_init(&problems);
    snprintf(path, sizeof path, "%s/unit/%s", PF_TEST_DATA, clean->name);
    FILE *file = fopen(path, "rb");
    assert_non_null(file);
    clean->length = fread(clean->text, 1, sizeof clean->text - 1, file);
    fclose(file);
    assert_int_equal(read_text(clean->text, clean->length, &clean->changes, &problems), PF_OK);
    assert_int_equal(problems.count, 0);
    pf_problems_clear(&problems);
}

static void test_no_damaged_file_is_read_wrong_without_a_word(void **state)
{
    clean_file files[] = {{.name = "clean_parts.csv", .delimiter = ','},
                          {.name = "clean_soa.csv", .delimiter = ';'},
                          {.name = "clean_zth.csv", .delimiter = '\t'}};
    size_t total = 0, wrong = 0, misplaced = 0;
    (void)state;
    for (size_t i = 0; i < 3; i++) {
        clean_file *clean = &files[i];
        load(clean);
        total += pollute(clean->text, clean->length, clean->delimiter, judge, clean);
        print_message("%s: %zu polluted, %zu harmless, %zu warned, %zu refused, "
                      "%zu silently wrong, %zu refused at another line\n",
                      clean->name, clean->polluted, clean->harmless, clean->warned, clean->refused,
                      clean->wrong, clean->misplaced);
        wrong += clean->wrong;
        misplaced += clean->misplaced;
        pf_changes_clear(&clean->changes);
    }
    assert_true(total >= 500);
    assert_int_equal(wrong, 0);
    assert_int_equal(misplaced, 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_no_damaged_file_is_read_wrong_without_a_word),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
