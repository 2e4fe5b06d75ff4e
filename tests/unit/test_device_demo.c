/* test_device_demo.c: claims about the demo ratings and derating rules in data/, as files are read.
**
** The folder of the data is the first argument.
*/
#include "support/bench.h"
#include "support/near.h"
#include "support/settings.h"

#include <passfet/intake.h>
#include <stdio.h>
#include <string.h>

static const char *data_folder;

static const char *path_of(const char *name)
{
    static char path[4096];
    snprintf(path, sizeof path, "%s/%s", data_folder, name);
    return path;
}

static void read_demo(pf_changes *changes)
{
    static const char *const files[] = {"demo/parts.csv", "demo/soa_points.csv",
                                        "demo/zth_points.csv", "demo/foster.csv"};
    pf_intake_options options = {0};
    pf_intake_summary summary = {0};
    pf_problems problems;
    pf_problems_init(&problems);
    for (size_t i = 0; i < 4; i++)
        assert_int_equal(
            pf_ratings_read_file(path_of(files[i]), &options, changes, &summary, &problems), PF_OK);
    assert_int_equal(problems.refusals, 0);
    pf_problems_clear(&problems);
}

/* Left of where its line is highest, or under the end of a vertical edge at the line's last voltage:
** no limit of its own, see docs/methods.md. */
static bool is_flank(const pf_part *part, const pf_soa_point *p)
{
    for (size_t k = (size_t)(p - part->soa) + 1; k < part->soa_count; k++) {
        const pf_soa_point *other = &part->soa[k];
        if (other->pulse_s != p->pulse_s || other->case_degC != p->case_degC) break;
        if (other->id_A > p->id_A) return true;
    }
    return p > part->soa && p[-1].pulse_s == p->pulse_s && p[-1].case_degC == p->case_degC &&
           p[-1].vds_V == p->vds_V;
}

/* A shorter line that the sheet draws lower at that voltage: the two contradict, the lower counts. */
static bool contradicts(const pf_part *part, const pf_soa_point *p)
{
    for (size_t k = 0; k < part->soa_count; k++) {
        const pf_soa_point *other = &part->soa[k];
        if (other->case_degC == p->case_degC && other->pulse_s < p->pulse_s &&
            other->vds_V == p->vds_V && other->id_A < p->id_A)
            return true;
    }
    return false;
}

static double margin_at(const pf_part *part, const pf_soa_point *p, pf_scratch *scratch)
{
    char card[512];
    pf_profile profile;
    pf_plan *plan;
    pf_stress stress;
    pf_profile_init(&profile);
    profile_state(&profile, bench_profile_text);
    snprintf(card, sizeof card,
             "start_from=ambient ambient_temperature=%.17g supply_voltage=%.17g "
             "fault_current=%.17g fault_time=%.17g output_capacitance=1e-9",
             p->case_degC, p->vds_V, p->id_A, p->pulse_s);
    profile_state(&profile, card);
    assert_int_equal(pf_profile_finish(&profile, NULL, NULL), PF_OK);
    assert_int_equal(pf_plan_new(&profile, NULL, 0, &plan, NULL), PF_OK);
    assert_int_equal(pf_plan_evaluate(plan, part, scratch, &stress), PF_OK);
    pf_plan_free(plan);
    return stress.outcome[PF_SHORT_AT_START].soa_margin;
}

static void test_every_demo_point_right_of_its_flank_has_a_margin_of_1(void **state)
{
    (void)state;
    pf_changes changes = {0};
    pf_scratch *scratch = pf_scratch_new();
    int points = 0, left_out = 0;
    read_demo(&changes);
    assert_true(changes.count >= 40);
    for (size_t n = 0; n < changes.count; n++) {
        const pf_part *part = &changes.item[n].part;
        if (isnan(part->tj_max_degC)) continue;
        for (size_t i = 0; i < part->soa_count; i++) {
            const pf_soa_point *p = &part->soa[i];
            if (isinf(p->pulse_s) || is_flank(part, p)) continue;
            double margin = margin_at(part, p, scratch);
            points++;
            if (is_near(margin, 1, 2e-3)) continue;
            if (!contradicts(part, p))
                fail_msg("%s, %g s, %g V, %g A: margin %.6g", part->name, p->pulse_s, p->vds_V,
                         p->id_A, margin);
            assert_double(margin, <, 1);
            left_out++;
        }
    }
    print_message("demo: %d points, %d of them below a shorter line that lies lower\n", points,
                  left_out);
    assert_true(points > 500);
    pf_scratch_free(scratch);
    pf_changes_clear(&changes);
}

static void read_rules(pf_derating_rules *rules)
{
    pf_problems problems;
    pf_problems_init(&problems);
    assert_int_equal(pf_derating_rules_read_file(path_of("derating.csv"), rules, &problems), PF_OK);
    pf_problems_clear(&problems);
}

static void test_derating_rules_are_applied_as_the_file_states(void **state)
{
    (void)state;
    const struct {
        const char *rule;
        double voltage, gate, current, allowed_175, allowed_140;
    } row[] = {
        {"ecss-q-st-30-11c", 0.8, 0.75, 0.75, 110, 100},
        {"nasa-eee-inst-002", 0.75, 0.6, 0.75, 140, 112},
        {"mil-hdbk-338b-1", 0.6, 0.8, 0.8, 95, 95},
        {"mil-hdbk-338b-2", 0.7, 0.8, 0.8, 105, 105},
        {"mil-hdbk-338b-3", 0.75, 0.8, 0.8, 125, 125},
        {"mil-dtl-917", 0.6, 0.7, 0.6, 175, 140},
    };
    pf_derating_rules rules = {0};
    read_rules(&rules);
    for (size_t i = 0; i < sizeof row / sizeof *row; i++) {
        const pf_derating *rule = pf_derating_rule_find(&rules, row[i].rule);
        assert_non_null(rule);
        bench b;
        bench_run(&b, "", "");
        pf_profile_init(&b.profile);
        profile_state(&b.profile, bench_profile_text);
        b.profile.derating = *rule;
        assert_int_equal(pf_profile_finish(&b.profile, NULL, NULL), PF_OK);
        pf_plan_free(b.plan);
        assert_int_equal(pf_plan_new(&b.profile, NULL, 0, &b.plan, NULL), PF_OK);
        bench_again(&b);
        assert_near(b.stress->allowed_degC, row[i].allowed_175, 1e-12);
        assert_near(bench_check(&b, PF_CHECK_VDS, -1)->limit, 100 * row[i].voltage, 1e-12);
        assert_near(bench_check(&b, PF_CHECK_VGS, -1)->limit, 20 * row[i].gate, 1e-12);
        assert_near(bench_check(&b, PF_CHECK_ID_CONT, -1)->limit, 100 * row[i].current, 1e-12);
        b.part.tj_max_degC = 140;
        bench_again(&b);
        assert_near(b.stress->allowed_degC, row[i].allowed_140, 1e-12);
        bench_clear(&b);
    }
    pf_derating_rules_clear(&rules);
}

/* ECSS, NASA and MIL-HDBK-338B are quoted from memory and marked so; MIL-DTL-917 was read. */
static void test_rules_from_memory_are_marked(void **state)
{
    (void)state;
    pf_derating_rules rules = {0};
    read_rules(&rules);
    assert_int_equal(rules.count, 6);
    for (size_t i = 0; i < rules.count; i++) {
        bool read = strcmp(rules.item[i].name, "mil-dtl-917") == 0;
        assert_string_equal(rules.item[i].mark, read ? "P" : "M");
    }
    pf_derating_rules_clear(&rules);
}

static void test_a_users_own_rule_takes_the_place_of_one_of_the_same_name(void **state)
{
    (void)state;
    const char own[] =
        "rule,parameter,factor,clause,mark\nECSS-Q-ST-30-11C,voltage_use,0.5,ours,P\n";
    pf_derating_rules rules = {0};
    pf_problems problems;
    pf_problems_init(&problems);
    read_rules(&rules);
    assert_int_equal(pf_derating_rules_read("own.csv", own, strlen(own), &rules, &problems), PF_OK);
    const pf_derating *rule = pf_derating_rule_find(&rules, "ecss-q-st-30-11c");
    assert_near(rule->voltage_use, 0.5, 0);
    assert_not_stated(rule->gate_use);
    pf_problems_clear(&problems);
    pf_derating_rules_clear(&rules);
}

int main(int argc, char **argv)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_every_demo_point_right_of_its_flank_has_a_margin_of_1),
        cmocka_unit_test(test_derating_rules_are_applied_as_the_file_states),
        cmocka_unit_test(test_rules_from_memory_are_marked),
        cmocka_unit_test(test_a_users_own_rule_takes_the_place_of_one_of_the_same_name),
    };
    if (argc != 2) DIE("usage: test_device_demo DATA_FOLDER");
    data_folder = argv[1];
    return cmocka_run_group_tests(tests, NULL, NULL);
}
