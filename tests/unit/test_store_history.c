/* test_store_history.c: what was known when, who checked it, and how it is taken back. */
#include "unit/store_support.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <math.h>
#include <stdio.h>
#include <string.h>

#define MONDAY "2025-03-03T09:00:00Z"
#define TUESDAY "2025-03-04T09:00:00Z"
#define WEDNESDAY "2025-03-05T09:00:00Z"

static void import_price(bench *on, const char *author, const char *time, const char *part,
                         double price)
{
    pf_part_change change;
    change_rating(&change, part, "price", price);
    import_all(on, author, time, &change, 1);
}

static void import_whole(bench *on, const char *author, const char *time, const char *part)
{
    pf_part_change change;
    change_make(&change, part, NULL, 1);
    import_all(on, author, time, &change, 1);
}

static double price_of(bench *on, const char *part, const char *as_of)
{
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    pf_status status = pf_store_part_find(on->store, part, as_of, &stored, &on->error);
    double price = status == PF_OK ? stored.part.price : -1;
    pf_stored_part_clear(&stored);
    pf_error_clear(&on->error);
    return price;
}

static void test_as_of_a_date_reads_what_was_known_then(void **state)
{
    bench *on = *state;
    import_whole(on, "ana", MONDAY, "A");
    import_price(on, "ana", TUESDAY, "A", 1);
    import_price(on, "ana", WEDNESDAY, "A", 2);
    assert_true(price_of(on, "A", "2025-03-02") == -1);
    assert_true(isnan(price_of(on, "A", MONDAY)));
    assert_true(isnan(price_of(on, "A", "2025-03-04T08:59:59Z")));
    assert_true(price_of(on, "A", "2025-03-04") == 1);
    assert_true(price_of(on, "A", "2025-03-05") == 2);
    assert_true(price_of(on, "A", NULL) == 2);
}

static size_t count_parts(bench *on, const pf_query *query)
{
    pf_cursor *cursor;
    pf_stored_part stored;
    size_t count = 0;
    bool more = true;
    char last[64] = "";
    pf_stored_part_init(&stored);
    assert_int_equal(pf_cursor_open(on->store, query, &cursor, &on->error), PF_OK);
    while (pf_cursor_next(cursor, &stored, &more, &on->error) == PF_OK && more) {
        if (!query->as_stored) assert_true(strcmp(last, stored.part.name) < 0);
        snprintf(last, sizeof last, "%s", stored.part.name);
        count++;
    }
    assert_int_equal(on->error.status, PF_OK);
    pf_cursor_close(cursor);
    pf_stored_part_clear(&stored);
    return count;
}

static void test_all_parts_come_by_name_and_slices_make_the_whole(void **state)
{
    bench *on = *state;
    pf_part_change change[50];
    for (unsigned i = 0; i < 50; i++) {
        char name[16];
        snprintf(name, sizeof name, "P%02u", i * 37 % 50);
        change_make(&change[i], name, NULL, i);
    }
    import_all(on, "ana", MONDAY, change, 50);
    import_price(on, "ana", TUESDAY, "P07", 1);
    assert_int_equal(count_parts(on, &(pf_query){0}), 50);
    assert_int_equal(count_parts(on, &(pf_query){.as_of = "2025-03-03"}), 50);
    size_t sum = 0;
    for (unsigned i = 0; i < 7; i++)
        sum += count_parts(on, &(pf_query){.as_stored = true, .slice = i, .slices = 7});
    assert_int_equal(sum, 50);
}

static void test_a_clock_that_runs_behind_does_not_disorder_the_log(void **state)
{
    bench *on = *state;
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    import_whole(on, "ana", TUESDAY, "A");
    import_whole(on, "ben", MONDAY, "B");
    find_part(on, "B", &stored);
    assert_string_equal(stored.facts.time, TUESDAY);
    pf_stored_part_clear(&stored);
}

static pf_status review(bench *on, const char *part, const char *author, bool accept)
{
    pf_review_facts facts = {.author = author, .time = WEDNESDAY, .why = "read", .accept = accept};
    pf_error_clear(&on->error);
    return pf_store_review(on->store, part, &facts, &on->error);
}

static pf_review_state review_state(bench *on, const char *part)
{
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    find_part(on, part, &stored);
    pf_review_state state = stored.facts.review;
    pf_stored_part_clear(&stored);
    return state;
}

static void test_only_a_second_person_accepts(void **state)
{
    bench *on = *state;
    import_whole(on, "Ana", MONDAY, "A");
    assert_int_equal(review(on, "A", "Ana", true), PF_BAD_INPUT);
    assert_non_null(strstr(on->error.text, "someone else must accept it"));
    assert_int_equal(review(on, "A", " ana ", true), PF_BAD_INPUT);
    assert_int_equal(review_state(on, "A"), PF_UNREVIEWED);
    assert_int_equal(review(on, "A", "Ana", false), PF_OK);
    assert_int_equal(review_state(on, "A"), PF_QUESTIONED);
    assert_int_equal(review(on, "A", "Ben", true), PF_OK);
    assert_int_equal(review_state(on, "A"), PF_ACCEPTED);
    assert_int_equal(count_parts(on, &(pf_query){.reviewed_only = true}), 1);
}

static void test_a_change_is_unreviewed_again(void **state)
{
    bench *on = *state;
    import_whole(on, "Ana", MONDAY, "A");
    assert_int_equal(review(on, "A", "Ben", true), PF_OK);
    import_price(on, "Ben", WEDNESDAY, "A", 1);
    assert_int_equal(review_state(on, "A"), PF_UNREVIEWED);
    assert_int_equal(count_parts(on, &(pf_query){.reviewed_only = true}), 0);
    assert_int_equal(review(on, "A", "Ana", true), PF_OK);
    assert_int_equal(review_state(on, "A"), PF_ACCEPTED);
}

static void test_nobody_accepts_an_earlier_change_of_their_own(void **state)
{
    bench *on = *state;
    import_whole(on, "Ana", MONDAY, "A");
    import_price(on, "Ben", TUESDAY, "A", 1);
    assert_int_equal(review(on, "A", "Ana", true), PF_BAD_INPUT);
    assert_int_equal(review(on, "A", "Ben", true), PF_BAD_INPUT);
    assert_int_equal(review(on, "A", "Cem", true), PF_OK);
}

static pf_status undo(bench *on, int64_t entry, int64_t *number)
{
    pf_import_facts facts = {.author = "eve", .time = WEDNESDAY, .why = "wrong sheet"};
    pf_error_clear(&on->error);
    return pf_store_undo(on->store, entry, &facts, number, &on->error);
}

static void test_undo_gives_back_what_was_stated_before(void **state)
{
    bench *on = *state;
    char before[PF_HASH_ROOM], after[PF_HASH_ROOM];
    int64_t number;
    import_whole(on, "ana", MONDAY, "A");
    assert_int_equal(pf_store_content_hash(on->store, before, &on->error), PF_OK);
    import_price(on, "ana", TUESDAY, "A", 2);
    assert_int_equal(undo(on, 2, &number), PF_OK);
    assert_int_equal(number, 3);
    assert_int_equal(pf_store_content_hash(on->store, after, &on->error), PF_OK);
    assert_string_equal(before, after);
    assert_int_equal(undo(on, 2, &number), PF_BAD_INPUT);
    assert_non_null(strstr(on->error.text, "undone already"));
    assert_int_equal(undo(on, 3, &number), PF_OK);
    assert_true(price_of(on, "A", NULL) == 2);
}

static void test_undo_withdraws_a_new_part_and_keeps_its_history(void **state)
{
    bench *on = *state;
    int64_t number, parts;
    import_whole(on, "ana", MONDAY, "A");
    assert_int_equal(undo(on, 1, &number), PF_OK);
    assert_int_equal(pf_store_count(on->store, &parts, &on->error), PF_OK);
    assert_int_equal(parts, 0);
    assert_true(price_of(on, "A", NULL) == -1);
    assert_true(isnan(price_of(on, "A", "2025-03-03")));
    import_whole(on, "ana", WEDNESDAY, "A");
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    find_part(on, "A", &stored);
    assert_int_equal(stored.facts.number, 3);
    pf_stored_part_clear(&stored);
}

static void test_undo_refuses_what_was_changed_since(void **state)
{
    bench *on = *state;
    int64_t number;
    import_whole(on, "ana", MONDAY, "A");
    import_price(on, "ben", TUESDAY, "A", 2);
    assert_int_equal(undo(on, 1, &number), PF_BAD_INPUT);
    assert_non_null(strstr(on->error.text, "last by import 2; undo that first"));
    assert_int_equal(undo(on, 2, &number), PF_OK);
    assert_int_equal(undo(on, 1, &number), PF_OK);
    assert_int_equal(undo(on, 99, &number), PF_NOT_FOUND);
    assert_int_equal(review(on, "A", "Ben", true), PF_NOT_FOUND);
}

static void test_an_undone_import_can_be_repeated(void **state)
{
    bench *on = *state;
    pf_import_facts facts = {.author = "ana", .time = MONDAY, .key = "k"};
    int64_t already, number;
    assert_int_equal(pf_store_import_begin(on->store, &facts, &already, &on->error), PF_OK);
    assert_int_equal(pf_store_import_commit(on->store, &number, &on->error), PF_OK);
    assert_int_equal(undo(on, 1, &number), PF_OK);
    assert_int_equal(pf_store_import_begin(on->store, &facts, &already, &on->error), PF_OK);
    assert_int_equal(already, 0);
    pf_store_import_rollback(on->store);
    assert_int_equal(undo(on, 2, &number), PF_OK);
    assert_int_equal(pf_store_import_begin(on->store, &facts, &already, &on->error), PF_OK);
    assert_int_equal(already, 1);
}

/* Writes each revision and what changed into a text. */
static void write_difference(void *context, const char *what, const char *before, const char *after)
{
    char *text = context;
    size_t length = strlen(text);
    snprintf(text + length, 4000 - length, "  %s: %s -> %s\n", what, before, after);
}

static pf_status write_step(void *context, const pf_history_step *step, pf_error *error)
{
    char *text = context;
    size_t length = strlen(text);
    (void)error;
    snprintf(text + length, 4000 - length, "%d %s by %s%s%s%s\n", (int)step->now->facts.number,
             step->kind, step->now->facts.author, step->withdrawn ? " out" : "",
             step->why ? ": " : "", step->why ? step->why : "");
    if (step->before && !step->withdrawn)
        pf_part_differences(&step->before->part, &step->now->part, write_difference, text);
    for (size_t i = 0; i < step->review_count; i++) {
        length = strlen(text);
        snprintf(text + length, 4000 - length, "  %s by %s\n",
                 step->review[i].accept ? "accepted" : "questioned", step->review[i].author);
    }
    return PF_OK;
}

static void test_history_lists_what_changed_curve_by_curve(void **state)
{
    bench *on = *state;
    pf_part_change change;
    char text[4000] = "";
    int64_t number;
    import_whole(on, "ana", MONDAY, "A");
    assert_int_equal(review(on, "A", "ben", true), PF_OK);
    pf_part_change_init(&change);
    change_text(&change, "part", "A");
    change_text(&change, "package", "TO-220");
    assert_int_equal(pf_part_set_rdson(&change.part, 10, 0.005), PF_OK);
    change.rdson_given = true;
    pf_soa_point soa[2] = {{25, 1e-3, 1, 90}, {25, 1e-3, 10, 30}};
    assert_int_equal(pf_part_set_soa(&change.part, soa, 2), PF_OK);
    change.soa_given = true;
    import_all(on, "ben", WEDNESDAY, &change, 1);
    assert_int_equal(undo(on, 3, &number), PF_OK);
    pf_status status = pf_store_history(on->store, "A", write_step, text, &on->error);
    assert_int_equal(status, PF_OK);
    const char *const expected[] = {
        "1 import by ana\n  accepted by ben\n2 import by ben\n",
        "  package: D2PAK -> TO-220\n",
        "  rdson_max @ 4.5 V: 6.3 mOhm -> \n",
        "  rdson_max @ 10 V: 4.8 mOhm -> 5 mOhm\n",
        "  soa 1 ms: 1 V:101  ",
        " -> 1 V:90  10 V:30\n",
        "  soa dc: ",
        "3 undo by eve: wrong sheet\n",
    };
    for (size_t i = 0; i < sizeof expected / sizeof *expected; i++) {
        if (!strstr(text, expected[i])) print_message("%s\nlacks %s\n", text, expected[i]);
        assert_non_null(strstr(text, expected[i]));
    }
    assert_null(strstr(text, "vds_max"));
}

static void test_the_revision_name_changes_with_every_entry(void **state)
{
    bench *on = *state;
    char first[PF_REVISION_NAME_ROOM], second[PF_REVISION_NAME_ROOM], then[PF_REVISION_NAME_ROOM];
    import_whole(on, "ana", MONDAY, "A");
    assert_int_equal(pf_store_revision_name(on->store, NULL, first, &on->error), PF_OK);
    assert_int_equal(strncmp(first, "1-", 2), 0);
    assert_int_equal(strlen(first), 10);
    assert_int_equal(review(on, "A", "ben", true), PF_OK);
    assert_int_equal(pf_store_revision_name(on->store, NULL, second, &on->error), PF_OK);
    assert_string_not_equal(first, second);
    assert_int_equal(pf_store_revision_name(on->store, "2025-03-03", then, &on->error), PF_OK);
    assert_string_equal(first, then);
    assert_int_equal(pf_store_revision_name(on->store, "yesterday", then, &on->error),
                     PF_BAD_ARGUMENT);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
#define TEST(name) cmocka_unit_test_setup_teardown(name, bench_up, bench_down)
        TEST(test_as_of_a_date_reads_what_was_known_then),
        TEST(test_all_parts_come_by_name_and_slices_make_the_whole),
        TEST(test_a_clock_that_runs_behind_does_not_disorder_the_log),
        TEST(test_only_a_second_person_accepts),
        TEST(test_a_change_is_unreviewed_again),
        TEST(test_nobody_accepts_an_earlier_change_of_their_own),
        TEST(test_undo_gives_back_what_was_stated_before),
        TEST(test_undo_withdraws_a_new_part_and_keeps_its_history),
        TEST(test_undo_refuses_what_was_changed_since),
        TEST(test_an_undone_import_can_be_repeated),
        TEST(test_history_lists_what_changed_curve_by_curve),
        TEST(test_the_revision_name_changes_with_every_entry),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
