/* Claims about profile, capture and derating files. */
#include "support/claims.h"
#include "support/lines.h"

#include <math.h>
#include <passfet/intake.h>
#include <stdlib.h>
#include <string.h>

/* --- Profiles ------------------------------------------------------------------------------ */

static bool has_refusal(const pf_problems *problems, const char *outcome)
{
    char *words;
    size_t line = strtoul(outcome + strlen("refused "), &words, 10);
    for (size_t i = 0; i < problems->count; i++)
        if (problems->item[i].line == line && strstr(problems->item[i].wrong, words + 2))
            return true;
    return false;
}

static bool near(double value, const char *text)
{
    double wanted = strtod(text, NULL);
    return fabs(value - wanted) <= 1e-15 * fabs(wanted);
}

/* outcome: "parameter=min/typ/max" */
static bool has_interval(const pf_profile *profile, const char *outcome)
{
    size_t length = strcspn(outcome, "=");
    for (int i = 0; i < PF_PARAMETER_COUNT; i++) {
        const pf_parameter_fact *fact = &pf_parameter_facts()[i];
        if (strlen(fact->name) != length || strncmp(fact->name, outcome, length) != 0) continue;
        const char *min = outcome + length + 1, *typ = strchr(min, '/') + 1;
        const pf_interval *value = &profile->value[i];
        return near(value->min, min) && near(value->typ, typ) &&
               near(value->max, strchr(typ, '/') + 1);
    }
    return false;
}

static bool holds(const pf_lines *lines)
{
    pf_profile profile;
    pf_problems problems;
    const char *outcome = lines->field[2];
    pf_problems_init(&problems);
    pf_status status = pf_profile_read("cards/my card.csv", lines->field[1], lines->length[1], NULL,
                                       &profile, &problems);
    bool good = strncmp(outcome, "ok ", 3) == 0
                    ? status == PF_OK && has_interval(&profile, outcome + 3)
                    : status == PF_BAD_INPUT && has_refusal(&problems, outcome);
    good = good && strcmp(profile.name, "my card") == 0;
    if (!good)
        print_message("%s: wanted %s, got %s\n", lines->field[0], outcome, pf_status_text(status));
    for (size_t i = 0; i < problems.count && !good; i++)
        print_message("    %zu: %s\n", problems.item[i].line, problems.item[i].wrong);
    pf_problems_clear(&problems);
    return good;
}

static void test_every_nasty_profile_becomes_what_the_table_says(void **state)
{
    pf_lines lines;
    size_t wrong = 0, count = 0;
    (void)state;
    lines_open(&lines, PF_TEST_DATA "/unit/nasty_profiles.tsv");
    for (; lines_next(&lines, 3); count++)
        wrong += !holds(&lines);
    lines_close(&lines);
    assert_true(count >= 40);
    assert_int_equal(wrong, 0);
}

static void test_a_setting_that_the_control_does_not_use_is_warned_of(void **state)
{
    static const char text[] =
        "parameter,min,typ,max,unit,note\nsupply_voltage,,12,,V,\npolarity,,N,,,\n"
        "output_capacitance,,100 uF,,,\nstart_control,,current_limit,,,\ncurrent_limit,,10,,A,\n"
        "running_current,,8,,A,\nfault_time,,1 ms,,,\nambient_temperature,,25,,,\n"
        "gate_drive,,10,,,\npower_limit,,60,,W,\n";
    pf_problems problems;
    pf_profile profile;
    (void)state;
    pf_problems_init(&problems);
    assert_int_equal(pf_profile_read("p.csv", text, strlen(text), NULL, &profile, &problems),
                     PF_OK);
    assert_int_equal(problems.warnings, 1);
    assert_int_equal(problems.item[0].line, 11);
    assert_string_equal(problems.item[0].column, "power_limit");
    pf_problems_clear(&problems);
}

/* --- Derating rules ------------------------------------------------------------------------- */

static const char rules_text[] = "rule,parameter,factor,clause,mark\n"
                                 "Invented A,voltage_use,0.7,section 1,published\n"
                                 "Invented A,junction_below_max,40,section 2,published\n"
                                 "Invented B,junction_limit,110 degC,,from memory\n";

static const char profile_text[] =
    "parameter,min,typ,max,unit,note\nsupply_voltage,,12,,V,\npolarity,,N,,,\n"
    "output_capacitance,,100 uF,,,\nstart_control,,current_limit,,,\ncurrent_limit,,10,,A,\n"
    "running_current,,8,,A,\nfault_time,,1 ms,,,\nambient_temperature,,25,,,\ngate_drive,,10,,,\n"
    "derating,,invented a,,,\n";

static void test_a_profile_takes_its_derating_rule_by_name(void **state)
{
    pf_derating_rules rules = {0};
    pf_problems problems;
    pf_profile profile;
    (void)state;
    pf_problems_init(&problems);
    assert_int_equal(
        pf_derating_rules_read("rules.csv", rules_text, strlen(rules_text), &rules, &problems),
        PF_OK);
    assert_int_equal(rules.count, 2);
    assert_int_equal(
        pf_profile_read("p.csv", profile_text, strlen(profile_text), &rules, &profile, &problems),
        PF_OK);
    assert_string_equal(profile.derating.name, "Invented A");
    assert_string_equal(profile.derating.source, "section 1; section 2");
    assert_true(profile.value[PF_VOLTAGE_USE].max == 0.7);
    assert_true(profile.value[PF_GATE_USE].max == 0.8);
    assert_true(profile.derating.junction_below_max_K == 40);
    assert_true(isnan(profile.derating.junction_share));
    pf_derating_rules_clear(&rules);
    pf_problems_clear(&problems);
}

static void test_a_later_rule_file_takes_the_place_of_an_earlier_rule(void **state)
{
    static const char own[] =
        "rule,parameter,factor,clause,mark\nINVENTED A,voltage_use,0.5,,own\n";
    pf_derating_rules rules = {0};
    pf_problems problems;
    (void)state;
    pf_problems_init(&problems);
    assert_int_equal(
        pf_derating_rules_read("rules.csv", rules_text, strlen(rules_text), &rules, &problems),
        PF_OK);
    assert_int_equal(pf_derating_rules_read("own.csv", own, strlen(own), &rules, &problems), PF_OK);
    const pf_derating *rule = pf_derating_rule_find(&rules, "invented a");
    assert_non_null(rule);
    assert_true(rule->voltage_use == 0.5);
    assert_true(isnan(rule->junction_below_max_K));
    assert_null(pf_derating_rule_find(&rules, "invented c"));
    pf_derating_rules_clear(&rules);
    pf_problems_clear(&problems);
}

static void test_rules_that_mean_nothing_are_refused_with_their_lines(void **state)
{
    static const char text[] =
        "rule,parameter,factor,clause,mark\nA,voltage_use,1.2,,\nA,gate,0.5,,\n"
        ",gate_use,0.5,,\nA,gate_use,,,\nB,gate_use,0.5,,\nB,gate_use,0.6,,\n";
    pf_derating_rules rules = {0};
    pf_problems problems;
    (void)state;
    pf_problems_init(&problems);
    assert_int_equal(pf_derating_rules_read("rules.csv", text, strlen(text), &rules, &problems),
                     PF_BAD_INPUT);
    static const size_t lines[] = {2, 3, 4, 5, 7};
    assert_int_equal(problems.refusals, 5);
    for (size_t i = 0; i < 5; i++)
        assert_int_equal(problems.item[i].line, lines[i]);
    pf_derating_rules_clear(&rules);
    pf_problems_clear(&problems);
}

/* --- Captures ------------------------------------------------------------------------------- */

static pf_status read_capture(const char *text, pf_capture_data *capture, size_t *line)
{
    pf_problems problems;
    pf_problems_init(&problems);
    pf_status status = pf_capture_read("scope/shot 1.csv", text, strlen(text), capture, &problems);
    *line = problems.refusals ? problems.item[problems.count - 1].line : 0;
    pf_problems_clear(&problems);
    return status;
}

static void test_a_capture_keeps_its_samples_and_negative_offsets(void **state)
{
    pf_capture_data capture = {0};
    size_t line;
    (void)state;
    assert_int_equal(
        read_capture("time [us],vds,id [mA]\n-1,48,-20\n0,48,-20\n0,48,-20\n1,30,5000\n", &capture,
                     &line),
        PF_OK);
    assert_string_equal(capture.name, "shot 1");
    assert_int_equal(capture.count, 3);
    assert_true(capture.time_s[0] == -1e-6 && capture.id_A[1] == -0.02 && capture.id_A[2] == 5);
    pf_capture_data_clear(&capture);
}

static void test_captures_that_are_none_are_refused_at_their_lines(void **state)
{
    static const struct {
        const char *text;
        size_t line;
    } bad[] = {
        {"time,vds,id\n1,2,3\n", 2},                     /* a time without a unit */
        {"time [s],vds,id\n1,2,3\n", 2},                 /* one sample */
        {"time [s],vds,id\n1,2,3\n0.5,2,3\n2,1,1\n", 3}, /* backwards */
        {"time [s],vds,id\n1,2,3\n1,2,4\n", 3},          /* two samples at one time */
        {"time [s],vds,id\n1,2,3\n2,,3\n", 3},           /* blank */
        {"time [s],vds\n1,2\n2,3\n", 1},                 /* no current */
        {"time [s],vds,id\n1,2,3\n2,2,3,4\n", 3},        /* too many cells */
        {"time [s],vds [A],id\n1,2,3\n2,2,3\n", 1},      /* wrong unit */
    };
    (void)state;
    for (size_t i = 0; i < sizeof bad / sizeof *bad; i++) {
        pf_capture_data capture = {0};
        size_t line;
        assert_int_equal(read_capture(bad[i].text, &capture, &line), PF_BAD_INPUT);
        assert_int_equal(line, bad[i].line);
        assert_int_equal(capture.count, 0);
        assert_null(capture.time_s);
    }
}

static void test_an_earlier_files_refusals_do_not_excuse_a_capture(void **state)
{
    pf_capture_data capture = {0};
    pf_problems problems;
    (void)state;
    pf_problems_init(&problems);
    pf_status status = pf_problems_add(&problems, PF_SEVERITY_REFUSAL, (pf_place){.file = "a.csv"},
                                       NULL, "something else");
    assert_int_equal(status, PF_BAD_INPUT);
    static const char one[] = "time [s],vds,id\n0,4,5\n";
    assert_int_equal(pf_capture_read("b.csv", one, strlen(one), &capture, &problems), PF_BAD_INPUT);
    assert_int_equal(problems.refusals, 2);
    pf_problems_clear(&problems);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_every_nasty_profile_becomes_what_the_table_says),
        cmocka_unit_test(test_a_setting_that_the_control_does_not_use_is_warned_of),
        cmocka_unit_test(test_a_profile_takes_its_derating_rule_by_name),
        cmocka_unit_test(test_a_later_rule_file_takes_the_place_of_an_earlier_rule),
        cmocka_unit_test(test_rules_that_mean_nothing_are_refused_with_their_lines),
        cmocka_unit_test(test_a_capture_keeps_its_samples_and_negative_offsets),
        cmocka_unit_test(test_captures_that_are_none_are_refused_at_their_lines),
        cmocka_unit_test(test_an_earlier_files_refusals_do_not_excuse_a_capture),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
