/* Claims about units, printed values, statuses, problems and growing text. */
#include "base/buffer.h"
#include "base/number.h"
#include "support/claims.h"

#include <passfet/error.h>
#include <passfet/problem.h>
#include <passfet/units.h>
#include <string.h>

static void test_units_are_factors_to_si(void **state)
{
    static const struct {
        const char *text;
        pf_quantity quantity;
        double factor;
    } cases[] = {
        {"mOhm", PF_RESISTANCE, 1e-3},
        {"m\xCE\xA9", PF_RESISTANCE, 1e-3},
        {"m\xE2\x84\xA6", PF_RESISTANCE, 1e-3},
        {"mohm", PF_RESISTANCE, 1e-3},
        {"uF", PF_CAPACITANCE, 1e-6},
        {"\xC2\xB5"
         "F",
         PF_CAPACITANCE, 1e-6},
        {"\xCE\xBC"
         "F",
         PF_CAPACITANCE, 1e-6},
        {"pF", PF_CAPACITANCE, 1e-12},
        {"ms", PF_TIME, 1e-3},
        {"s", PF_TIME, 1},
        {"V/ms", PF_SLEW, 1e3},
        {"kV/s", PF_SLEW, 1e3},
        {"degC", PF_TEMPERATURE, 1},
        {"\xC2\xB0"
         "C",
         PF_TEMPERATURE, 1},
        {"K/W", PF_THERMAL, 1},
        {"\xC2\xB0"
         "C/W",
         PF_THERMAL, 1},
        {"mK/W", PF_THERMAL, 1e-3},
        {"J/K", PF_HEAT_CAPACITY, 1},
        {"nC", PF_CHARGE, 1e-9},
        {"mJ", PF_ENERGY, 1e-3},
        {"nH", PF_INDUCTANCE, 1e-9},
        {"kW", PF_POWER, 1e3},
    };
    (void)state;
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        double factor = 0;
        assert_int_equal(
            pf_unit_read(cases[i].text, strlen(cases[i].text), cases[i].quantity, &factor, NULL),
            PF_OK);
        assert_true(factor > cases[i].factor * (1 - 1e-15) &&
                    factor < cases[i].factor * (1 + 1e-15));
    }
}

static void test_a_unit_of_another_quantity_is_refused(void **state)
{
    static const struct {
        const char *text;
        pf_quantity quantity;
    } cases[] = {{"mW", PF_RESISTANCE}, {"V", PF_CURRENT},  {"S", PF_TIME},      {"v", PF_VOLTAGE},
                 {"K", PF_TEMPERATURE}, {"F", PF_CHARGE},   {"W/K", PF_THERMAL}, {"", PF_VOLTAGE},
                 {"m", PF_TIME},        {"xyz", PF_ENERGY}, {"mm", PF_TIME},     {"V/V", PF_SLEW}};
    (void)state;
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        double factor = 0;
        assert_int_equal(
            pf_unit_read(cases[i].text, strlen(cases[i].text), cases[i].quantity, &factor, NULL),
            PF_BAD_INPUT);
    }
}

static void test_a_wrong_guess_of_a_thousand_is_not_made(void **state)
{
    static const pf_quantity refused[] = {PF_RESISTANCE, PF_CAPACITANCE, PF_INDUCTANCE, PF_TIME,
                                          PF_ENERGY,     PF_CHARGE,      PF_SLEW};
    static const pf_quantity taken[] = {PF_VOLTAGE, PF_CURRENT, PF_POWER, PF_TEMPERATURE,
                                        PF_THERMAL};
    (void)state;
    for (size_t i = 0; i < sizeof refused / sizeof *refused; i++)
        assert_true(pf_quantity_needs_unit(refused[i]));
    for (size_t i = 0; i < sizeof taken / sizeof *taken; i++)
        assert_false(pf_quantity_needs_unit(taken[i]));
}

static void test_values_print_with_a_readable_prefix(void **state)
{
    static const struct {
        double value;
        pf_quantity quantity;
        const char *text;
    } cases[] = {{0.0047, PF_RESISTANCE, "4.7 mOhm"},
                 {-48, PF_VOLTAGE, "-48 V"},
                 {175, PF_TEMPERATURE, "175 degC"},
                 {1e-5, PF_TIME, "10 us"},
                 {0, PF_CURRENT, "0 A"},
                 {0.99999999, PF_TIME, "1 s"},
                 {2.2e-9, PF_CAPACITANCE, "2.2 nF"},
                 {1.8, PF_RATIO, "1.8"}};
    char text[PF_UNIT_ROOM];
    (void)state;
    for (size_t i = 0; i < sizeof cases / sizeof *cases; i++) {
        pf_value_print(text, cases[i].value, cases[i].quantity, 3);
        assert_string_equal(text, cases[i].text);
    }
    pf_value_print(text, PF_NONE, PF_VOLTAGE, 3);
    assert_string_equal(text, "-");
}

static void test_every_status_has_a_text_of_its_own_and_no_other_has(void **state)
{
    (void)state;
    for (int i = 0; i < PF_STATUS_COUNT; i++)
        for (int k = 0; k < i; k++)
            assert_string_not_equal(pf_status_text((pf_status)i), pf_status_text((pf_status)k));
    assert_string_equal(pf_status_text(PF_STATUS_COUNT), "unknown status");
}

static void test_the_first_cause_of_an_error_wins(void **state)
{
    pf_error error;
    (void)state;
    pf_error_clear(&error);
    assert_int_equal(pf_error_set(&error, PF_FILE, "first %d", 1), PF_FILE);
    assert_int_equal(pf_error_set(&error, PF_BUSY, "second"), PF_BUSY);
    assert_int_equal(error.status, PF_FILE);
    assert_string_equal(error.text, "first 1");
}

static void test_a_problem_names_its_place_and_leaves_out_what_does_not_apply(void **state)
{
    pf_problems problems;
    char text[200];
    (void)state;
    pf_problems_init(&problems);
    pf_place place = {"a.csv", 3, "vds_max", "ten\x01"}, bare = {.file = "b.csv"};
    assert_int_equal(
        pf_problems_add(&problems, PF_SEVERITY_REFUSAL, place, "10 V", "not a %s", "number"),
        PF_BAD_INPUT);
    assert_int_equal(pf_problems_add(&problems, PF_SEVERITY_NOTE, bare, NULL, "empty"), PF_OK);
    pf_problem_print(&problems.item[0], text, sizeof text);
    assert_string_equal(text, "a.csv:3: vds_max: ten?: not a number: 10 V");
    pf_problem_print(&problems.item[1], text, sizeof text);
    assert_string_equal(text, "b.csv: empty");
    assert_int_equal(problems.refusals, 1);
    assert_int_equal(problems.notes, 1);
    pf_problems_clear(&problems);
}

static void test_a_text_grows_to_its_maximum_and_remembers_that_it_was_reached(void **state)
{
    pf_buffer text;
    (void)state;
    pf_buffer_init(&text, 10);
    assert_string_equal(pf_buffer_string(&text), "");
    pf_buffer_print(&text, "%d,", 12345);
    pf_buffer_text(&text, "6789");
    assert_int_equal(pf_buffer_status(&text), PF_OK);
    pf_buffer_text(&text, "x");
    pf_buffer_text(&text, "");
    assert_int_equal(pf_buffer_status(&text), PF_LIMIT);
    assert_string_equal(pf_buffer_string(&text), "12345,6789");
    pf_buffer_reset(&text);
    assert_int_equal(pf_buffer_status(&text), PF_OK);
    pf_buffer_clear(&text);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_units_are_factors_to_si),
        cmocka_unit_test(test_a_unit_of_another_quantity_is_refused),
        cmocka_unit_test(test_a_wrong_guess_of_a_thousand_is_not_made),
        cmocka_unit_test(test_values_print_with_a_readable_prefix),
        cmocka_unit_test(test_every_status_has_a_text_of_its_own_and_no_other_has),
        cmocka_unit_test(test_the_first_cause_of_an_error_wins),
        cmocka_unit_test(test_a_problem_names_its_place_and_leaves_out_what_does_not_apply),
        cmocka_unit_test(test_a_text_grows_to_its_maximum_and_remembers_that_it_was_reached),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
