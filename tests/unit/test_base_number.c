/* Claims about reading and printing doubles. */
#include "base/number.h"
#include "support/claims.h"

#include <locale.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

static size_t read_text(const char *text, double *value)
{
    return pf_number_read(text, strlen(text), value);
}

static void test_numbers_are_read_as_strtod_reads_them(void **state)
{
    static const char *const texts[] = {
        "0",
        "1",
        "-1",
        "+1",
        "4.7",
        "0.1",
        ".5",
        "5.",
        "1e3",
        "1E+3",
        "1e-3",
        "2.2e-9",
        "123456789012345678901234567890",
        "0.1e1",
        "1e22",
        "1e23",
        "9007199254740993",
        "1.7976931348623157e308",
        "4.9e-324",
        "2.2250738585072011e-308",
        "0.30000000000000004",
        "1e-400",
        "-0",
    };
    (void)state;
    for (size_t i = 0; i < sizeof texts / sizeof *texts; i++) {
        double value = 0;
        assert_int_equal(read_text(texts[i], &value), strlen(texts[i]));
        assert_true(value == strtod(texts[i], NULL));
    }
}

static void test_what_strtod_takes_wrongly_is_no_number(void **state)
{
    static const char *const texts[] = {"",  " 1", "nan", "inf", "-inf", "infinity", ".",
                                        "-", "+",  "e5",  ".e5", "--1",  "1e400",    "-1e400"};
    (void)state;
    for (size_t i = 0; i < sizeof texts / sizeof *texts; i++) {
        double value = 42;
        assert_int_equal(read_text(texts[i], &value), 0);
        assert_true(value == 42);
    }
}

static void test_reading_stops_where_the_number_ends(void **state)
{
    static const struct {
        const char *text;
        size_t taken;
        double value;
    } cases[] = {{"4,2", 1, 4}, {"4.2m", 3, 4.2},  {"0x10", 1, 0},   {"1e", 1, 1},
                 {"1e+", 1, 1}, {"1.2.3", 3, 1.2}, {"12 34", 2, 12}, {"7Ohm", 1, 7}};
    (void)state;
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        double value = 0;
        assert_int_equal(read_text(cases[i].text, &value), cases[i].taken);
        assert_true(value == cases[i].value);
    }
}

static void test_reading_never_looks_behind_the_given_length(void **state)
{
    double value = 0;
    (void)state;
    assert_int_equal(pf_number_read("1234", 2, &value), 2);
    assert_true(value == 12);
    assert_int_equal(pf_number_read("1e5", 2, &value), 1);
    assert_int_equal(pf_number_read("5", 0, &value), 0);
}

static void test_the_shortest_print_reads_back_unchanged(void **state)
{
    char text[PF_NUMBER_ROOM];
    double value = 1e-12, again;
    (void)state;
    for (int i = 0; i < 5000; i++) {
        value = value * 1.0123456789 + 1e-13;
        size_t length = pf_number_print(text, value, 0);
        assert_true(length < PF_NUMBER_ROOM);
        assert_int_equal(pf_number_read(text, length, &again), length);
        assert_true(again == value);
    }
}

static void test_not_stated_prints_nothing(void **state)
{
    char text[PF_NUMBER_ROOM] = "x";
    (void)state;
    assert_int_equal(pf_number_print(text, PF_NONE, 6), 0);
    assert_string_equal(text, "");
}

static void test_a_locale_with_a_decimal_comma_changes_nothing(void **state)
{
    static const char *const locales[] = {"de_DE.UTF-8", "de_DE", "fr_FR.UTF-8", "es_ES.UTF-8"};
    char text[PF_NUMBER_ROOM];
    double value = 0;
    bool set = false;
    (void)state;
    for (size_t i = 0; i < 4 && !set; i++)
        set = setlocale(LC_ALL, locales[i]) != NULL;
    if (!set) print_message("no locale with a decimal comma is installed\n");
    assert_int_equal(read_text("4.25", &value), 4);
    assert_true(value == 4.25);
    assert_int_equal(read_text("0.12345678901234567890123", &value), 25); /* the slow path */
    assert_true(value == 0.12345678901234567890123);
    pf_number_print(text, 0.125, 0);
    assert_string_equal(text, "0.125");
    setlocale(LC_ALL, "C");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_numbers_are_read_as_strtod_reads_them),
        cmocka_unit_test(test_what_strtod_takes_wrongly_is_no_number),
        cmocka_unit_test(test_reading_stops_where_the_number_ends),
        cmocka_unit_test(test_reading_never_looks_behind_the_given_length),
        cmocka_unit_test(test_the_shortest_print_reads_back_unchanged),
        cmocka_unit_test(test_not_stated_prints_nothing),
        cmocka_unit_test(test_a_locale_with_a_decimal_comma_changes_nothing),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
