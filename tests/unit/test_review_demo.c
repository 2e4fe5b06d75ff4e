/* test_review_demo.c: headroom of demo parts on every demo card, put back into the profile.
**
** usage: test_review_demo DEMO_FOLDER DERATING_FILE STRIDE
**
** STRIDE 1 takes every part and some minutes; n takes every n-th, another set for each card.
*/
#include "support/claims.h"
#include "support/near.h"

#include <passfet/headroom.h>
#include <passfet/intake.h>
#include <stdio.h>
#include <stdlib.h>

static const char *demo, *derating;
static size_t stride;

static const char *path_of(char text[1024], const char *name)
{
    snprintf(text, 1024, "%s/%s", demo, name);
    return text;
}

static void read_parts(pf_changes *changes)
{
    static const char *const file[] = {"parts.csv", "soa_points.csv", "zth_points.csv",
                                       "foster.csv"};
    pf_intake_options options = {0};
    pf_intake_summary summary = {0};
    pf_problems problems;
    char path[1024];
    pf_problems_init(&problems);
    for (size_t i = 0; i < sizeof file / sizeof *file; i++)
        assert_int_equal(
            pf_ratings_read_file(path_of(path, file[i]), &options, changes, &summary, &problems),
            PF_OK);
    pf_problems_clear(&problems);
}

static void read_card(const char *name, pf_profile *profile)
{
    pf_derating_rules rules = {0};
    pf_problems problems;
    char path[1024];
    pf_problems_init(&problems);
    assert_int_equal(pf_derating_rules_read_file(derating, &rules, &problems), PF_OK);
    assert_int_equal(pf_profile_read_file(path_of(path, name), &rules, profile, &problems), PF_OK);
    pf_problems_clear(&problems);
    pf_derating_rules_clear(&rules);
}

static pf_verdict verdict_at(const pf_profile *profile, const pf_part *part, pf_scratch *scratch,
                             pf_parameter parameter, double value, double *margin)
{
    pf_profile changed = *profile;
    pf_plan *plan;
    pf_assessment at;
    changed.value[parameter] = (pf_interval){value, value, value};
    assert_int_equal(pf_profile_finish(&changed, NULL, NULL), PF_OK);
    assert_int_equal(pf_plan_new(&changed, NULL, 0, &plan, NULL), PF_OK);
    assert_int_equal(pf_assess(plan, part, scratch, &at), PF_OK);
    pf_plan_free(plan);
    *margin = at.stress.soa_margin;
    return at.verdict;
}

static void check_flip(const pf_profile *profile, const pf_part *part, pf_scratch *scratch,
                       const pf_room *room)
{
    double inside, outside, required = profile->value[PF_REQUIRED_MARGIN].max;
    pf_parameter parameter = room->parameter;
    pf_verdict here = verdict_at(profile, part, scratch, parameter, room->value, &inside);
    pf_verdict there = verdict_at(profile, part, scratch, parameter, room->beyond, &outside);
    if (here != PF_PASS || there == PF_PASS)
        fail_msg("%s on %s: %s %s at %.9g, %s at %.9g", part->name, profile->name,
                 pf_parameter_facts()[parameter].name, pf_verdict_text(here), room->value,
                 pf_verdict_text(there), room->beyond);
    /* whole numbers, and a gate drive that no longer reaches a rated one, step over the margin */
    bool steps =
        parameter == PF_PARALLEL_COUNT || parameter == PF_RETRY_COUNT || parameter == PF_GATE_DRIVE;
    if (steps || there != PF_FAIL || room->stop.kind != PF_CHECK_SOA_MARGIN) return;
    if (parameter == PF_REQUIRED_MARGIN) required = room->value;
    if (!is_near(inside, required, 0.001))
        fail_msg("%s on %s: %s at %.9g gives %.6g, required %.6g", part->name, profile->name,
                 pf_parameter_facts()[parameter].name, room->value, inside, required);
}

static size_t check_part(const pf_profile *profile, const pf_plan *plan, const pf_part *part,
                         pf_scratch *scratch)
{
    static pf_room room[PF_ROOMS_MAX];
    size_t count, flips = 0;
    assert_int_equal(pf_headroom(plan, part, scratch, room, &count), PF_OK);
    for (size_t i = 0; i < count; i++) {
        if (room[i].kind != PF_ROOM_FLIPS) continue;
        flips++;
        check_flip(profile, part, scratch, &room[i]);
    }
    return flips;
}

static size_t check_card(const char *name, const pf_changes *changes, size_t first)
{
    pf_profile profile;
    pf_plan *plan;
    size_t flips = 0;
    pf_scratch *scratch = pf_scratch_new();
    read_card(name, &profile);
    assert_int_equal(pf_plan_new(&profile, NULL, 0, &plan, NULL), PF_OK);
    for (size_t i = first % stride; i < changes->count; i += stride) {
        pf_part part;
        pf_part_init(&part);
        assert_int_equal(pf_part_apply(&part, &changes->item[i]), PF_OK);
        flips += check_part(&profile, plan, &part, scratch);
        pf_part_clear(&part);
    }
    pf_plan_free(plan);
    pf_scratch_free(scratch);
    return flips;
}

static void test_every_value_gives_the_required_margin_and_beyond_it_none_passes(void **state)
{
    (void)state;
    static const char *const card[] = {"accelerator_card_12v.csv", "line_card_48v.csv",
                                       "drive_controller_24v.csv"};
    pf_changes changes = {0};
    size_t flips = 0;
    read_parts(&changes);
    assert_int_equal(changes.count, 44);
    for (size_t i = 0; i < 3; i++)
        flips += check_card(card[i], &changes, i);
    print_message("%zu flips hold\n", flips);
    assert_true(flips > 300 / stride);
    pf_changes_clear(&changes);
}

int main(int argc, char **argv)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_every_value_gives_the_required_margin_and_beyond_it_none_passes),
    };
    if (argc != 4) return 2;
    demo = argv[1];
    derating = argv[2];
    stride = (size_t)strtoul(argv[3], NULL, 10);
    if (stride == 0) return 2;
    return cmocka_run_group_tests(tests, NULL, NULL);
}
