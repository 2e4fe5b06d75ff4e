/* test_store_merge.c: taking parts from another database. */
#include "unit/store_support.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <stdio.h>
#include <string.h>

#define MONDAY "2025-03-03T09:00:00Z"
#define TUESDAY "2025-03-04T09:00:00Z"
#define WEDNESDAY "2025-03-05T09:00:00Z"

/* Two databases with parts A and B of one origin; `b` is a bench whose store is theirs. */
typedef struct pair {
    bench *ours;
    bench *theirs;
} pair;

static void import_whole(bench *on, const char *part, unsigned seed)
{
    pf_part_change change;
    change_make(&change, part, "Ohmwerk", seed);
    import_all(on, "ana", MONDAY, &change, 1);
}

static void import_price(bench *on, const char *time, const char *part, double price)
{
    pf_part_change change;
    change_rating(&change, part, "price", price);
    import_all(on, "ana", time, &change, 1);
}

static int pair_up(void **state)
{
    static pair both;
    void *bench_state;
    if (bench_up(&bench_state)) return -1;
    both.ours = bench_state;
    if (bench_up(&bench_state)) return -1;
    both.theirs = bench_state;
    bench *side[2] = {both.ours, both.theirs};
    for (int i = 0; i < 2; i++) {
        import_whole(side[i], "A", 1);
        import_whole(side[i], "B", 2);
    }
    *state = &both;
    return 0;
}

static int pair_down(void **state)
{
    pair *both = *state;
    void *side[2] = {both->ours, both->theirs};
    return bench_down(&side[0]) | bench_down(&side[1]);
}

static pf_status count_conflict(void *context, const pf_stored_part *ours,
                                const pf_stored_part *theirs, bool take, pf_error *error)
{
    (void)take;
    (void)error;
    assert_string_equal(ours->part.name, theirs->part.name);
    ++*(int *)context;
    return PF_OK;
}

static pf_status merge(pair *both, pf_prefer prefer, pf_merge_summary *summary, int *conflicts)
{
    pf_import_facts facts = {.author = "ben", .time = WEDNESDAY};
    int64_t already, number;
    *conflicts = 0;
    pf_error_clear(&both->ours->error);
    return pf_store_merge(both->ours->store, both->theirs->store, &facts, prefer, count_conflict,
                          conflicts, summary, &already, &number, &both->ours->error);
}

static double price_of(bench *on, const char *part)
{
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    find_part(on, part, &stored);
    double price = stored.part.price;
    pf_stored_part_clear(&stored);
    return price;
}

static void test_who_goes_on_from_the_other_is_no_conflict(void **state)
{
    pair *both = *state;
    pf_merge_summary summary;
    int conflicts;
    import_price(both->theirs, TUESDAY, "A", 2);
    import_price(both->ours, TUESDAY, "B", 3);
    import_whole(both->theirs, "C", 3);
    assert_int_equal(merge(both, PF_PREFER_NONE, &summary, &conflicts), PF_OK);
    assert_int_equal(conflicts, 0);
    assert_int_equal(summary.added, 1);
    assert_int_equal(summary.forward, 1);
    assert_int_equal(summary.ahead, 1);
    assert_true(price_of(both->ours, "A") == 2);
    assert_true(price_of(both->ours, "B") == 3);
    assert_int_equal(merge(both, PF_PREFER_NONE, &summary, &conflicts), PF_OK);
    assert_int_equal(summary.unchanged, 2);
    assert_int_equal(summary.ahead, 1);
}

static void test_a_conflict_needs_a_preference(void **state)
{
    pair *both = *state;
    pf_merge_summary summary;
    int conflicts;
    char before[PF_HASH_ROOM], after[PF_HASH_ROOM];
    import_price(both->ours, TUESDAY, "A", 1);
    import_price(both->theirs, WEDNESDAY, "A", 2);
    assert_int_equal(pf_store_content_hash(both->ours->store, before, NULL), PF_OK);
    assert_int_equal(merge(both, PF_PREFER_NONE, &summary, &conflicts), PF_BAD_INPUT);
    assert_int_equal(conflicts, 1);
    assert_non_null(strstr(both->ours->error.text, "say which to prefer"));
    assert_int_equal(pf_store_content_hash(both->ours->store, after, NULL), PF_OK);
    assert_string_equal(before, after);
    assert_int_equal(merge(both, PF_PREFER_OURS, &summary, &conflicts), PF_OK);
    assert_true(price_of(both->ours, "A") == 1);
    assert_int_equal(merge(both, PF_PREFER_NEWER, &summary, &conflicts), PF_OK);
    assert_int_equal(summary.taken, 1);
    assert_true(price_of(both->ours, "A") == 2);
}

static void test_what_was_withdrawn_here_stays_out(void **state)
{
    pair *both = *state;
    pf_import_facts facts = {.author = "ben", .time = TUESDAY};
    pf_merge_summary summary;
    int conflicts;
    int64_t number, parts;
    assert_int_equal(pf_store_undo(both->ours->store, 1, &facts, &number, NULL), PF_OK);
    assert_int_equal(merge(both, PF_PREFER_NONE, &summary, &conflicts), PF_OK);
    assert_int_equal(summary.ahead, 1);
    assert_int_equal(pf_store_count(both->ours->store, &parts, NULL), PF_OK);
    assert_int_equal(parts, 1);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
#define TEST(name) cmocka_unit_test_setup_teardown(name, pair_up, pair_down)
        TEST(test_who_goes_on_from_the_other_is_no_conflict),
        TEST(test_a_conflict_needs_a_preference),
        TEST(test_what_was_withdrawn_here_stays_out),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
