/* test_stress_profile.c: claims about what a profile must hold and what it is given by default. */
#include "support/bench.h"
#include "support/near.h"
#include "support/settings.h"

#include <string.h>

typedef struct findings {
    int count;
    pf_parameter parameter;
    char wrong[256];
} findings;

static void note(void *context, pf_parameter parameter, const char *wrong, const char *right)
{
    findings *list = context;
    assert_true(right && *right);
    if (list->count++) return;
    list->parameter = parameter;
    strncpy(list->wrong, wrong, sizeof list->wrong - 1);
}

static pf_status finish(const char *changes, pf_profile *profile, findings *list)
{
    *list = (findings){0};
    pf_profile_init(profile);
    profile_state(profile, bench_profile_text);
    profile_state(profile, changes);
    return pf_profile_finish(profile, note, list);
}

static void test_defaults_are_those_of_the_manual(void **state)
{
    (void)state;
    pf_profile p;
    findings list;
    assert_int_equal(finish("", &p, &list), PF_OK);
    assert_near(p.value[PF_PARALLEL_COUNT].min, 1, 0);
    assert_near(p.value[PF_REQUIRED_MARGIN].max, 1.3, 0);
    assert_near(p.value[PF_VOLTAGE_USE].min, 0.8, 0);
    assert_near(p.value[PF_GATE_USE].min, 0.8, 0);
    assert_near(p.value[PF_CURRENT_USE].min, 0.8, 0);
    assert_false(p.start_from_ambient || p.extend_soa || p.endless_retry);
}

static void test_each_missing_value_is_named(void **state)
{
    (void)state;
    static const struct {
        const char *changes;
        pf_parameter parameter;
    } row[] = {
        {"supply_voltage=", PF_SUPPLY_VOLTAGE},
        {"output_capacitance=", PF_OUTPUT_CAPACITANCE},
        {"running_current=", PF_RUNNING_CURRENT},
        {"fault_time=", PF_FAULT_TIME},
        {"ambient_temperature=", PF_AMBIENT_TEMPERATURE},
        {"gate_drive=", PF_GATE_DRIVE},
        {"current_limit=", PF_CURRENT_LIMIT},
        {"start_control=power_limit", PF_POWER_LIMIT},
        {"start_control=foldback", PF_FOLDBACK_CURRENT},
        {"start_control=slew", PF_OUTPUT_SLEW},
        {"start_control=slew gate_current=1e-5", PF_OUTPUT_SLEW},
        {"start_control=slew output_slew=1e3 current_limit=", PF_FAULT_CURRENT},
        {"trip_current=10", PF_TRIP_TIME},
        {"trip_time=1e-5", PF_TRIP_CURRENT},
        {"retry_count=3", PF_RETRY_INTERVAL},
        {"polarity=-", PF_PARAMETER_COUNT},
        {"start_control=", PF_PARAMETER_COUNT},
    };
    for (size_t i = 0; i < sizeof row / sizeof *row; i++) {
        pf_profile p;
        findings list;
        assert_int_equal(finish(row[i].changes, &p, &list), PF_BAD_INPUT);
        if (list.parameter != row[i].parameter)
            fail_msg("%s: found %d (%s)", row[i].changes, (int)list.parameter, list.wrong);
    }
}

static void test_contradictions_are_refused(void **state)
{
    (void)state;
    static const char *const changes[] = {
        "start_control=slew output_slew=1e3 gate_current=1e-5 gate_capacitance=1e-8",
        "start_control=foldback foldback_current=6",
        "retry_interval=4e-3",
        "clamp_voltage=12",
        "supply_step_from=12",
        "parallel_count=1.5",
        "retry_interval=1 retry_count=2.5",
    };
    for (size_t i = 0; i < sizeof changes / sizeof *changes; i++) {
        pf_profile p;
        findings list;
        if (finish(changes[i], &p, &list) != PF_BAD_INPUT) fail_msg("accepted %s", changes[i]);
        assert_true(list.wrong[0]);
    }
}

static void test_all_findings_come_in_one_run(void **state)
{
    (void)state;
    pf_profile p;
    findings list;
    assert_int_equal(finish("supply_voltage= fault_time= trip_current=9", &p, &list), PF_BAD_INPUT);
    assert_int_equal(list.count, 3);
}

/* ECSS-Q-ST-30-11C, MOSFET, from memory: V_DS 0.80, V_GS 0.75, I_D 0.75. */
static void test_a_rule_gives_the_uses_that_the_profile_leaves_open(void **state)
{
    (void)state;
    pf_profile p;
    findings list;
    assert_int_equal(
        finish("rule_voltage_use=0.8 rule_gate_use=0.75 rule_current_use=0.75", &p, &list), PF_OK);
    assert_near(p.value[PF_VOLTAGE_USE].min, 0.8, 0);
    assert_near(p.value[PF_GATE_USE].min, 0.75, 0);
    assert_near(p.value[PF_CURRENT_USE].min, 0.75, 0);
}

static void test_the_smaller_of_a_stated_use_and_the_rules_counts(void **state)
{
    (void)state;
    pf_profile p;
    findings list;
    assert_int_equal(
        finish("voltage_use=0.7 rule_voltage_use=0.75 gate_use=0.9 rule_gate_use=0.6", &p, &list),
        PF_OK);
    assert_near(p.value[PF_VOLTAGE_USE].min, 0.7, 0);
    assert_near(p.value[PF_GATE_USE].min, 0.6, 0);
}

static void test_every_parameter_has_a_name_and_a_range(void **state)
{
    (void)state;
    const pf_parameter_fact *fact = pf_parameter_facts();
    for (int i = 0; i < PF_PARAMETER_COUNT; i++) {
        assert_true(fact[i].name[0] && fact[i].meaning[0]);
        assert_double(fact[i].lowest, <, fact[i].highest);
    }
}

static void test_every_event_cause_and_remark_has_words(void **state)
{
    (void)state;
    for (int i = 0; i < PF_EVENT_COUNT; i++)
        assert_true(pf_event_text((pf_event)i)[0]);
    for (int i = 1; i < PF_CAUSE_COUNT; i++)
        assert_true(pf_cause_text((pf_cause)i)[0]);
    assert_string_equal(pf_event_text(PF_EVENT_COUNT), "unknown event");
    assert_string_equal(pf_cause_text(PF_CAUSE_COUNT), "unknown cause");
    assert_non_null(pf_remark_text(PF_REMARK_HOT_RATIO));
    assert_null(pf_remark_text(1u << 31));
    assert_null(pf_remark_text(3));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_defaults_are_those_of_the_manual),
        cmocka_unit_test(test_each_missing_value_is_named),
        cmocka_unit_test(test_contradictions_are_refused),
        cmocka_unit_test(test_all_findings_come_in_one_run),
        cmocka_unit_test(test_a_rule_gives_the_uses_that_the_profile_leaves_open),
        cmocka_unit_test(test_the_smaller_of_a_stated_use_and_the_rules_counts),
        cmocka_unit_test(test_every_parameter_has_a_name_and_a_range),
        cmocka_unit_test(test_every_event_cause_and_remark_has_words),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
