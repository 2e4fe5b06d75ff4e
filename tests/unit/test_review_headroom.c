/* test_review_headroom.c: claims about where a verdict flips. */
#include "support/bench.h"
#include "support/claims.h"
#include "support/near.h"
#include "support/random_case.h"

#include <passfet/headroom.h>

/* The verdict with one parameter at one value; its deciding margin over what is required. */
static pf_verdict verdict_at(const pf_profile *profile, const pf_part *part, pf_parameter parameter,
                             double value, pf_assessment *assessment)
{
    pf_profile changed = *profile;
    pf_plan *plan;
    changed.value[parameter] = (pf_interval){value, value, value};
    assert_int_equal(pf_profile_finish(&changed, NULL, NULL), PF_OK);
    assert_int_equal(pf_plan_new(&changed, NULL, 0, &plan, NULL), PF_OK);
    pf_scratch *scratch = pf_scratch_new();
    assert_int_equal(pf_assess(plan, part, scratch, assessment), PF_OK);
    pf_scratch_free(scratch);
    pf_plan_free(plan);
    return assessment->verdict;
}

static void check_flip(const pf_profile *profile, const pf_part *part, const pf_room *room)
{
    pf_assessment inside, outside;
    assert_int_equal(verdict_at(profile, part, room->parameter, room->value, &inside), PF_PASS);
    pf_verdict there = verdict_at(profile, part, room->parameter, room->beyond, &outside);
    assert_int_equal(there, room->there);
    assert_int_not_equal(there, PF_PASS);
    if (there != PF_FAIL || room->stop.kind != PF_CHECK_SOA_MARGIN) return;
    double required = profile->value[PF_REQUIRED_MARGIN].max;
    if (room->parameter == PF_REQUIRED_MARGIN) required = room->value;
    assert_near(inside.stress.soa_margin, required, 0.001);
}

static void check_all(const pf_profile *profile, const pf_plan *plan, const pf_part *part)
{
    static pf_room room[PF_ROOMS_MAX];
    size_t count, flips = 0;
    pf_scratch *scratch = pf_scratch_new();
    assert_int_equal(pf_headroom(plan, part, scratch, room, &count), PF_OK);
    for (size_t i = 0; i < count; i++) {
        if (room[i].kind != PF_ROOM_FLIPS) continue;
        flips++;
        check_flip(profile, part, &room[i]);
        if (i) assert_true(room[i - 1].relative <= room[i].relative);
    }
    assert_true(flips > 0);
    pf_scratch_free(scratch);
}

static void test_value_gives_the_required_margin_and_beyond_it_does_not_pass(void **state)
{
    (void)state;
    static const char *const card[] = {
        "",
        "supply_voltage=44..52 output_capacitance=1e-3..1.2e-3 fault_time=4e-3..5e-3 "
        "current_limit=1.8..2.2",
        "supply_voltage=48 output_capacitance=470e-6 start_control=power_limit power_limit=60 "
        "retry_interval=1 case_to_ambient=10",
        "start_control=slew output_slew=2000 fault_current=5 fault_time=1e-3",
        "supply_voltage=24 supply_step_from=18 start_load_resistance=100 supply_inductance=1e-6",
    };
    for (size_t i = 0; i < sizeof card / sizeof *card; i++) {
        bench b;
        bench_run(&b, "", card[i]);
        check_all(&b.profile, b.plan, &b.part);
        bench_clear(&b);
    }
}

static void test_an_event_that_does_not_depend_on_a_parameter_still_decides(void **state)
{
    (void)state;
    bench b;
    pf_room room;
    bench_run(&b, "",
              "fault_current=200 supply_voltage=24"); /* the short fails; the start passes */
    assert_int_equal(b.assessment.verdict, PF_FAIL);
    assert_int_equal(pf_solve(b.plan, &b.part, b.scratch, PF_OUTPUT_CAPACITANCE, &room), PF_OK);
    assert_int_equal(room.kind, PF_ROOM_NEVER);
    assert_int_equal(room.here, PF_FAIL);
    bench_clear(&b);
}

static void test_solve_finds_the_largest_value_of_a_part_that_fails(void **state)
{
    (void)state;
    bench b;
    pf_room room;
    pf_assessment at;
    bench_run(&b, "", "supply_voltage=48 fault_current=8 fault_time=2e-3..50e-3");
    assert_int_equal(b.assessment.verdict, PF_FAIL);
    assert_int_equal(pf_solve(b.plan, &b.part, b.scratch, PF_FAULT_TIME, &room), PF_OK);
    assert_int_equal(room.kind, PF_ROOM_FLIPS);
    assert_true(room.at_most);
    assert_int_equal(verdict_at(&b.profile, &b.part, PF_FAULT_TIME, room.value, &at), PF_PASS);
    assert_near(at.stress.soa_margin, 1.3, 0.001);
    assert_double(room.value, <, 50e-3);
    bench_clear(&b);
}

static void test_parameters_that_never_flip_say_so(void **state)
{
    (void)state;
    bench b;
    pf_room room;
    bench_run(&b, "", "");
    assert_int_equal(pf_headroom_of(b.plan, &b.part, b.scratch, PF_REQUIRED_MARGIN, false, &room),
                     PF_OK);
    assert_int_equal(room.kind, PF_ROOM_NEVER);
    assert_int_equal(room.here, PF_PASS);
    bench_clear(&b);
}

static void test_a_profile_that_contradicts_itself_ends_the_search(void **state)
{
    (void)state;
    bench b;
    pf_room room;
    bench_run(&b, "", "retry_interval=6e-3 case_to_ambient=1 fault_current=0.01");
    assert_int_equal(pf_headroom_of(b.plan, &b.part, b.scratch, PF_FAULT_TIME, true, &room), PF_OK);
    assert_int_equal(room.kind, PF_ROOM_INVALID);
    assert_non_null(room.wrong);
    assert_near(room.value, 6e-3, 1e-5);
    bench_clear(&b);
}

static void test_integers_stay_whole(void **state)
{
    (void)state;
    bench b;
    pf_room room;
    bench_run(&b, "", "running_current=40 parallel_count=4");
    assert_int_equal(b.assessment.verdict, PF_PASS);
    assert_int_equal(pf_headroom_of(b.plan, &b.part, b.scratch, PF_PARALLEL_COUNT, false, &room),
                     PF_OK);
    assert_int_equal(room.kind, PF_ROOM_FLIPS);
    assert_double(room.value, ==, round(room.value));
    assert_double(room.beyond, ==, room.value - 1);
    bench_clear(&b);
}

static void test_a_flip_behind_which_nothing_is_known_is_no_failure(void **state)
{
    (void)state;
    bench b;
    pf_room room;
    bench_run(&b, "soa=1e-3/1:400,100:40;1e-2/1:400,100:20", "fault_current=0.5");
    assert_int_equal(pf_headroom_of(b.plan, &b.part, b.scratch, PF_FAULT_TIME, true, &room), PF_OK);
    assert_int_equal(room.kind, PF_ROOM_FLIPS);
    assert_int_equal(room.there, PF_UNASSESSED);
    assert_near(room.value, 1e-2, 1e-5); /* where the longest line ends */
    bench_clear(&b);
}

static void test_the_window_lies_between_slowest_start_and_longest_fault(void **state)
{
    (void)state;
    bench b;
    pf_timer_window window;
    bench_run(&b, "", "fault_time=4e-3..6e-3 current_limit=5");
    assert_int_equal(pf_timer_window_of(b.plan, &b.part, b.scratch, &window), PF_OK);
    assert_near(window.slowest_start_s, 1e-3 * 12 / 5, 1e-6); /* C V/I */
    assert_near(window.start_gap, 4e-3 / 2.4e-3 - 1, 1e-6);
    assert_near(window.fault_gap, window.longest_fault_s / 6e-3 - 1, 1e-9);
    assert_false(window.no_value);
    bench_clear(&b);
}

static void test_no_timer_value_exists_where_the_part_dies_before_the_start_is_over(void **state)
{
    (void)state;
    bench b;
    pf_timer_window window;
    bench_run(&b, "", "supply_voltage=48 output_capacitance=0.1 current_limit=5 fault_time=1.5");
    assert_int_equal(pf_timer_window_of(b.plan, &b.part, b.scratch, &window), PF_OK);
    assert_true(window.no_value);
    assert_double(window.longest_fault_s, <, window.slowest_start_s);
    bench_clear(&b);
}

static void test_random_cards_flip_where_headroom_says(void **state)
{
    (void)state;
    random_source source = {11};
    for (int i = 0; i < 6; i++) {
        pf_part part;
        pf_profile profile;
        pf_plan *plan;
        pf_part_init(&part);
        pf_profile_init(&profile);
        random_part(&source, 80, &part);
        random_profile(&source, (pf_start_control)(1 + i % 4), 0, &profile);
        assert_int_equal(pf_profile_finish(&profile, NULL, NULL), PF_OK);
        assert_int_equal(pf_plan_new(&profile, NULL, 0, &plan, NULL), PF_OK);
        check_all(&profile, plan, &part);
        pf_plan_free(plan);
        pf_part_clear(&part);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_value_gives_the_required_margin_and_beyond_it_does_not_pass),
        cmocka_unit_test(test_an_event_that_does_not_depend_on_a_parameter_still_decides),
        cmocka_unit_test(test_solve_finds_the_largest_value_of_a_part_that_fails),
        cmocka_unit_test(test_parameters_that_never_flip_say_so),
        cmocka_unit_test(test_a_profile_that_contradicts_itself_ends_the_search),
        cmocka_unit_test(test_integers_stay_whole),
        cmocka_unit_test(test_a_flip_behind_which_nothing_is_known_is_no_failure),
        cmocka_unit_test(test_the_window_lies_between_slowest_start_and_longest_fault),
        cmocka_unit_test(test_no_timer_value_exists_where_the_part_dies_before_the_start_is_over),
        cmocka_unit_test(test_random_cards_flip_where_headroom_says),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
