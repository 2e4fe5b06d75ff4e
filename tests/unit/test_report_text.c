/* Claims about the pieces that reports are made of: JSON, CSV cells, fields of a table, rules. */
#include "report/csv.h"
#include "report/json.h"
#include "report/words.h"
#include "support/claims.h"

#include <math.h>
#include <passfet/report.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* What a writer wrote; the caller frees. */
typedef struct captured {
    char *text;
    size_t size;
    FILE *file;
} captured;

static void begin(captured *on)
{
    on->text = NULL;
    on->file = open_memstream(&on->text, &on->size);
    assert_non_null(on->file);
}

static void expect(captured *on, const char *wanted)
{
    fclose(on->file);
    assert_string_equal(on->text, wanted);
    free(on->text);
}

static void test_json_numbers_that_are_none_are_null(void **state)
{
    captured on;
    pf_json json;
    (void)state;
    begin(&on);
    pf_json_begin(&json, on.file);
    pf_json_open(&json, '[');
    pf_json_number(&json, NAN);
    pf_json_number(&json, INFINITY);
    pf_json_number(&json, 0.1);
    pf_json_close(&json, ']');
    expect(&on, "[\n  null,\n  null,\n  0.1\n]");
}

static void test_json_numbers_read_back_unchanged(void **state)
{
    static const double value[] = {1.0 / 3, 5e-324, 1.7976931348623157e308, -0.1, 123456789.123, 0};
    (void)state;
    for (size_t i = 0; i < sizeof value / sizeof *value; i++) {
        captured on;
        pf_json json;
        begin(&on);
        pf_json_begin(&json, on.file);
        pf_json_number(&json, value[i]);
        fclose(on.file);
        assert_true(strtod(on.text, NULL) == value[i]);
        free(on.text);
    }
}

static void test_json_texts_are_valid_utf8_whatever_they_hold(void **state)
{
    captured on;
    pf_json json;
    (void)state;
    begin(&on);
    pf_json_begin(&json, on.file);
    /* quote, backslash, control, lone continuation, overlong /, surrogate, cut off, good */
    pf_json_text(&json, "\"\\\x01\x80\xC0\xAF\xED\xA0\x80\xE2\x82\xC3\xA9");
    expect(&on, "\"\\\"\\\\\\u0001\xEF\xBF\xBD\xEF\xBF\xBD\xEF\xBF\xBD\xEF\xBF\xBD\xEF\xBF\xBD"
                "\xEF\xBF\xBD\xEF\xBF\xBD\xEF\xBF\xBD\xC3\xA9\"");
}

static void test_json_nests_with_commas_where_they_belong(void **state)
{
    captured on;
    pf_json json;
    (void)state;
    begin(&on);
    pf_json_begin(&json, on.file);
    pf_json_open(&json, '{');
    pf_json_name(&json, "empty");
    pf_json_open(&json, '[');
    pf_json_close(&json, ']');
    pf_json_named_text(&json, "none", NULL);
    pf_json_named_number(&json, "one", 1);
    pf_json_close(&json, '}');
    expect(&on, "{\n  \"empty\": [],\n  \"none\": null,\n  \"one\": 1\n}");
}

static void expect_cell(const char *text, const char *wanted)
{
    captured on;
    begin(&on);
    pf_csv_text(on.file, text);
    expect(&on, wanted);
}

static void test_csv_cells_are_quoted_and_formulas_defused(void **state)
{
    (void)state;
    expect_cell(NULL, "");
    expect_cell("plain text", "plain text");
    expect_cell("a,b", "\"a,b\"");
    expect_cell("a\"b", "\"a\"\"b\"");
    expect_cell("a\nb", "\"a\nb\"");
    expect_cell("=1", "\"'=1\"");
    expect_cell("-x", "\"'-x\"");
    expect_cell("'=1", "\"''=1\"");
    expect_cell("'x", "'x");
    expect_cell("#1", "\"#1\"");
}

static void expect_field(const char *text, size_t width, bool right, const char *wanted)
{
    captured on;
    begin(&on);
    pf_text_field_print(on.file, text, width, right);
    expect(&on, wanted);
}

static void test_fields_count_characters_and_cut_with_an_ellipsis(void **state)
{
    (void)state;
    expect_field("ab", 4, false, "ab  ");
    expect_field("ab", 4, true, "  ab");
    expect_field("abcd", 4, false, "abcd");
    expect_field("abcde", 4, false, "abc\xE2\x80\xA6");
    expect_field("\xCE\xA9\xCE\xA9", 4, true, "  \xCE\xA9\xCE\xA9");
    expect_field("\xCE\xA9\xCE\xA9\xCE\xA9", 2, false, "\xCE\xA9\xE2\x80\xA6");
}

static void test_wrapped_lines_keep_to_the_width_and_lose_nothing(void **state)
{
    char words[1200] = "", line[400];
    captured on;
    size_t count = 0;
    (void)state;
    for (int i = 0; i < 100; i++)
        strcat(words, i % 7 ? "word " : "longerword ");
    words[strlen(words) - 1] = '\0';
    begin(&on);
    pf_wrapped_print(on.file, words, 7);
    fclose(on.file);
    FILE *lines = fmemopen(on.text, on.size, "r");
    assert_non_null(lines);
    while (fgets(line, sizeof line, lines)) {
        line[strcspn(line, "\n")] = '\0';
        assert_true(strlen(line) <= PF_TABLE_COLUMNS);
        for (char *word = strtok(line, " "); word; word = strtok(NULL, " "))
            count++;
    }
    assert_int_equal(count, 100);
    fclose(lines);
    free(on.text);
}

static void test_a_word_wider_than_the_table_is_broken(void **state)
{
    char word[301];
    captured on;
    (void)state;
    memset(word, 'x', 300);
    word[300] = '\0';
    begin(&on);
    pf_wrapped_print(on.file, word, 0);
    fclose(on.file);
    assert_int_equal(strspn(on.text, "x"), PF_TABLE_COLUMNS);
    free(on.text);
}

static bool from_memory(const char *mark)
{
    pf_derating rule = {.name = "r"};
    snprintf(rule.mark, sizeof rule.mark, "%s", mark);
    return pf_rule_is_from_memory(&rule);
}

static void test_a_rule_of_which_one_value_is_from_memory_says_so(void **state)
{
    (void)state;
    assert_true(from_memory("M"));
    assert_true(from_memory("P; M"));
    assert_true(from_memory("from memory"));
    assert_false(from_memory("P"));
    assert_false(from_memory("published"));
    assert_false(from_memory("MIL"));
    assert_false(from_memory(""));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_json_numbers_that_are_none_are_null),
        cmocka_unit_test(test_json_numbers_read_back_unchanged),
        cmocka_unit_test(test_json_texts_are_valid_utf8_whatever_they_hold),
        cmocka_unit_test(test_json_nests_with_commas_where_they_belong),
        cmocka_unit_test(test_csv_cells_are_quoted_and_formulas_defused),
        cmocka_unit_test(test_fields_count_characters_and_cut_with_an_ellipsis),
        cmocka_unit_test(test_wrapped_lines_keep_to_the_width_and_lose_nothing),
        cmocka_unit_test(test_a_word_wider_than_the_table_is_broken),
        cmocka_unit_test(test_a_rule_of_which_one_value_is_from_memory_says_so),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
