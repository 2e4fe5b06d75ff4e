/* test_store_import.c: what an import stores, refuses and takes back. */
#include "unit/store_support.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define MONDAY "2025-03-03T09:00:00Z"
#define TUESDAY "2025-03-04T09:00:00Z"

static void test_a_part_reads_back_bit_for_bit(void **state)
{
    bench *on = *state;
    pf_part_change change;
    pf_part whole;
    pf_stored_part stored;
    pf_part_init(&whole);
    pf_stored_part_init(&stored);
    change_make(&change, "ZX100", "Ohmwerk", 3);
    assert_int_equal(pf_part_copy(&whole, &change.part), PF_OK);
    assert_int_equal(import_all(on, "ana", MONDAY, &change, 1), 1);
    bench_reopen(on, PF_STORE_READ);
    find_part(on, "ZX100", &stored);
    assert_true(pf_part_equal(&whole, &stored.part));
    assert_int_equal(stored.facts.number, 1);
    assert_int_equal(stored.facts.entry, 1);
    assert_string_equal(stored.facts.author, "ana");
    assert_string_equal(stored.facts.time, MONDAY);
    assert_int_equal(stored.facts.review, PF_UNREVIEWED);
    assert_true(isnan(stored.part.price));
    assert_null(stored.part.note);
    pf_stored_part_clear(&stored);
    pf_part_clear(&whole);
}

static void test_a_change_leaves_the_rest_and_counts_revisions(void **state)
{
    bench *on = *state;
    pf_part_change change;
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    change_make(&change, "ZX100", NULL, 3);
    import_all(on, "ana", MONDAY, &change, 1);
    change_rating(&change, "ZX100", "price", 1.25);
    assert_int_equal(import_all(on, "ben", TUESDAY, &change, 1), 2);
    find_part(on, "ZX100", &stored);
    assert_true(stored.part.price == 1.25);
    assert_true(stored.part.vgs_max_V == 20);
    assert_int_equal(stored.part.soa_count, 12);
    assert_int_equal(stored.facts.number, 2);
    assert_string_equal(stored.facts.author, "ben");
    pf_stored_part_clear(&stored);
}

static void test_what_states_nothing_new_makes_no_revision(void **state)
{
    bench *on = *state;
    pf_part_change change;
    pf_import_effect effect;
    pf_part merged;
    int64_t number;
    pf_part_init(&merged);
    change_make(&change, "ZX100", "Ohmwerk", 3);
    import_all(on, "ana", MONDAY, &change, 1);
    change_make(&change, "ZX100", NULL, 3);
    import_open(on, "ben", TUESDAY, NULL);
    assert_int_equal(pf_store_import_part(on->store, &change, &merged, &effect, &on->error), PF_OK);
    assert_int_equal(effect, PF_EFFECT_UNCHANGED);
    assert_string_equal(merged.maker, "Ohmwerk");
    assert_int_equal(pf_store_import_commit(on->store, &number, &on->error), PF_OK);
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    find_part(on, "ZX100", &stored);
    assert_int_equal(stored.facts.number, 1);
    pf_stored_part_clear(&stored);
    pf_part_change_clear(&change);
    pf_part_clear(&merged);
}

static void test_a_repeat_is_answered_with_the_first_number(void **state)
{
    bench *on = *state;
    pf_import_facts facts = {.author = "ana", .time = MONDAY, .key = "content and options"};
    int64_t already, number;
    assert_int_equal(pf_store_import_begin(on->store, &facts, &already, &on->error), PF_OK);
    assert_int_equal(already, 0);
    assert_int_equal(pf_store_import_commit(on->store, &number, &on->error), PF_OK);
    facts.time = TUESDAY;
    assert_int_equal(pf_store_import_begin(on->store, &facts, &already, &on->error), PF_OK);
    assert_int_equal(already, number);
    facts.key = "others";
    assert_int_equal(pf_store_import_begin(on->store, &facts, &already, &on->error), PF_OK);
    assert_int_equal(already, 0);
    pf_store_import_rollback(on->store);
}

/* One import_part that must be refused with a status and a piece of text. */
static void refuse(bench *on, pf_part_change *change, pf_status status, const char *words)
{
    pf_import_effect effect;
    pf_part merged;
    pf_part_init(&merged);
    pf_error_clear(&on->error);
    assert_int_equal(pf_store_import_part(on->store, change, &merged, &effect, &on->error), status);
    if (!strstr(on->error.text, words)) print_message("%s\n", on->error.text);
    assert_non_null(strstr(on->error.text, words));
    pf_part_clear(&merged);
    pf_part_change_clear(change);
}

static void test_what_a_part_needs_is_asked_for(void **state)
{
    bench *on = *state;
    pf_part_change change;
    import_open(on, "ana", MONDAY, NULL);
    change_make(&change, "A", NULL, 1);
    change.polarity_given = false;
    refuse(on, &change, PF_BAD_INPUT, "states no polarity");
    change_rating(&change, "A", "vds_max", 60);
    change.part.polarity = PF_N_CHANNEL;
    change.polarity_given = true;
    refuse(on, &change, PF_BAD_INPUT, "states no tj_max");
    change_make(&change, "A", NULL, 1);
    change.polarity_given = change.rdson_given = false;
    change.ratings_given = 0;
    refuse(on, &change, PF_NOT_FOUND, "there is no part A");
    pf_store_import_rollback(on->store);
}

static void test_physics_is_checked_before_storing(void **state)
{
    bench *on = *state;
    pf_part_change change;
    import_open(on, "ana", MONDAY, NULL);
    change_make(&change, "A", NULL, 1);
    change.part.vgs_max_V = -20;
    refuse(on, &change, PF_BAD_INPUT, "vgs_max -20 V must lie between 1 V and 100 V");
    change_make(&change, "A", NULL, 1);
    change.part.soa[0].id_A = 0;
    refuse(on, &change, PF_BAD_INPUT, "currents of the SOA must be positive");
    change_make(&change, "A", NULL, 1);
    change.part.soa[3].vds_V = 1000;
    refuse(on, &change, PF_BAD_INPUT, "more than a tenth beyond vds_max");
    change_make(&change, "A", NULL, 1);
    change.part.thermal[0].point[0].zth_KpW = NAN;
    refuse(on, &change, PF_BAD_INPUT, "Zth curve must be positive");
    pf_store_import_rollback(on->store);
}

static void test_two_makers_of_one_number_must_be_named(void **state)
{
    bench *on = *state;
    pf_part_change change[2];
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    change_make(&change[0], "ZX100", "Ohmwerk", 1);
    change_make(&change[1], "ZX100", "Voltbau", 2);
    import_all(on, "ana", MONDAY, change, 2);
    import_open(on, "ana", TUESDAY, NULL);
    change_rating(&change[0], "ZX100", "price", 1);
    refuse(on, &change[0], PF_BAD_INPUT, "Ohmwerk, Voltbau");
    pf_store_import_rollback(on->store);
    assert_int_equal(pf_store_part_find(on->store, "ZX100", NULL, &stored, &on->error),
                     PF_BAD_INPUT);
    find_part(on, "Voltbau/ZX100", &stored);
    assert_string_equal(stored.part.maker, "Voltbau");
    pf_stored_part_clear(&stored);
}

static void test_a_maker_stated_later_is_no_new_part(void **state)
{
    bench *on = *state;
    pf_part_change change;
    int64_t parts;
    change_make(&change, "ZX100", NULL, 1);
    import_all(on, "ana", MONDAY, &change, 1);
    change_make(&change, "ZX100", "Ohmwerk", 1);
    import_all(on, "ana", TUESDAY, &change, 1);
    assert_int_equal(pf_store_count(on->store, &parts, &on->error), PF_OK);
    assert_int_equal(parts, 1);
}

static void test_a_banned_part_needs_a_reason(void **state)
{
    bench *on = *state;
    pf_part_change change;
    pf_part merged;
    pf_import_effect effect;
    pf_part_init(&merged);
    import_open(on, "ana", MONDAY, NULL);
    change_make(&change, "A", NULL, 1);
    change_text(&change, "status", "banned");
    refuse(on, &change, PF_BAD_INPUT, "a banned part needs a reason");
    pf_store_import_rollback(on->store);
    import_open(on, "ana", MONDAY, "forged lots");
    change_make(&change, "A", NULL, 1);
    change_text(&change, "status", "banned");
    assert_int_equal(pf_store_import_part(on->store, &change, &merged, &effect, &on->error), PF_OK);
    assert_string_equal(merged.status_reason, "forged lots");
    pf_store_import_rollback(on->store);
    pf_part_change_clear(&change);
    pf_part_clear(&merged);
}

/* The reason of an import belongs to its entry. It is a reason of the status only where that moves. */
static void test_a_part_that_comes_in_active_has_no_reason_of_its_status(void **state)
{
    bench *on = *state;
    pf_part_change change;
    pf_part merged;
    pf_import_effect effect;
    pf_part_init(&merged);
    import_open(on, "ana", MONDAY, "first sheets");
    change_make(&change, "A", NULL, 1);
    change_text(&change, "status", "active");
    assert_int_equal(pf_store_import_part(on->store, &change, &merged, &effect, &on->error), PF_OK);
    assert_null(merged.status_reason);
    change_text(&change, "status", "obsolete");
    assert_int_equal(pf_store_import_part(on->store, &change, &merged, &effect, &on->error), PF_OK);
    assert_string_equal(merged.status_reason, "first sheets");
    pf_store_import_rollback(on->store);
    pf_part_change_clear(&change);
    pf_part_clear(&merged);
}

static void test_a_rolled_back_import_leaves_nothing(void **state)
{
    bench *on = *state;
    pf_part_change change;
    pf_part merged;
    pf_import_effect effect;
    char before[PF_HASH_ROOM], after[PF_HASH_ROOM], name[PF_REVISION_NAME_ROOM];
    pf_part_init(&merged);
    assert_int_equal(pf_store_content_hash(on->store, before, &on->error), PF_OK);
    import_open(on, "ana", MONDAY, NULL);
    change_make(&change, "A", NULL, 1);
    assert_int_equal(pf_store_import_part(on->store, &change, &merged, &effect, &on->error), PF_OK);
    pf_store_import_rollback(on->store);
    assert_int_equal(pf_store_content_hash(on->store, after, &on->error), PF_OK);
    assert_string_equal(before, after);
    assert_int_equal(pf_store_revision_name(on->store, NULL, name, &on->error), PF_OK);
    assert_string_equal(name, "0");
    pf_part_change_clear(&change);
    pf_part_clear(&merged);
}

static void test_the_content_hash_knows_no_history(void **state)
{
    bench *on = *state;
    pf_part_change change[2];
    char direct[PF_HASH_ROOM], detour[PF_HASH_ROOM];
    change_make(&change[0], "A", NULL, 1);
    change_make(&change[1], "B", NULL, 2);
    import_all(on, "ana", MONDAY, change, 2);
    assert_int_equal(pf_store_content_hash(on->store, direct, &on->error), PF_OK);
    pf_store_close(on->store);
    remove(on->path);
    assert_int_equal(pf_store_open(on->path, PF_STORE_CREATE, &on->store, &on->error), PF_OK);
    change_make(&change[0], "B", NULL, 5);
    import_all(on, "ben", MONDAY, change, 1);
    change_make(&change[0], "A", NULL, 1);
    change_make(&change[1], "B", NULL, 2);
    import_all(on, "ben", TUESDAY, change, 2);
    assert_int_equal(pf_store_content_hash(on->store, detour, &on->error), PF_OK);
    assert_string_equal(direct, detour);
}

static void test_the_same_part_twice_in_an_import_is_one_revision(void **state)
{
    bench *on = *state;
    pf_part_change change[2];
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    change_make(&change[0], "A", NULL, 1);
    change_rating(&change[1], "A", "price", 2);
    import_all(on, "ana", MONDAY, change, 2);
    find_part(on, "A", &stored);
    assert_int_equal(stored.facts.number, 1);
    assert_true(stored.part.price == 2);
    pf_stored_part_clear(&stored);
}

/* A double between 0 and 1 that needs all its digits. */
static double any(unsigned *seed)
{
    *seed = *seed * 1664525 + 1013904223;
    return (*seed >> 8) / 16777216.0 + 1e-9;
}

/* A part of random ratings and curves, each of them left out now and then. */
static void change_random(pf_part_change *change, unsigned seed)
{
    char name[16];
    size_t count;
    const pf_rating_field *field = pf_rating_fields(&count);
    unsigned at = seed;
    pf_foster_pair pair[5];
    pf_zth_point zth[7];
    snprintf(name, sizeof name, "R%u", seed);
    change_make(change, name, any(&at) < 0.5 ? "Ohmwerk" : NULL, seed);
    for (size_t i = 0; i < count; i++)
        if (any(&at) < 0.5 && strstr(field[i].csv, "vth") == NULL && i != 0) {
            *pf_part_rating(&change->part, &field[i]) =
                field[i].lowest + any(&at) * (field[i].highest - field[i].lowest);
            change->ratings_given |= UINT64_C(1) << i;
        }
    for (size_t i = 0; i < 5; i++)
        pair[i] = (pf_foster_pair){any(&at), any(&at) * 1e-3};
    for (size_t i = 0; i < 7; i++)
        zth[i] = (pf_zth_point){any(&at), any(&at) * 100};
    if (any(&at) < 0.3)
        assert_int_equal(pf_part_set_foster(&change->part, PF_JUNCTION_CASE, pair, 5), PF_OK);
    if (any(&at) < 0.3)
        assert_int_equal(pf_part_set_zth(&change->part, PF_JUNCTION_AMBIENT, zth, 7), PF_OK);
    change->thermal_given[PF_JUNCTION_AMBIENT] = true;
    if (any(&at) < 0.2) assert_int_equal(pf_part_set_soa(&change->part, NULL, 0), PF_OK);
}

static void test_two_thousand_random_parts_read_back_bit_for_bit(void **state)
{
    bench *on = *state;
    pf_part_change *change = calloc(2000, sizeof *change);
    pf_stored_part stored;
    size_t findings;
    pf_stored_part_init(&stored);
    for (unsigned i = 0; i < 2000; i++)
        change_random(&change[i], i);
    import_all(on, "ana", MONDAY, change, 2000);
    for (unsigned i = 0; i < 2000; i++) {
        char name[16];
        snprintf(name, sizeof name, "R%u", i);
        change_random(&change[0], i);
        find_part(on, name, &stored);
        assert_true(pf_part_equal(&change[0].part, &stored.part));
        pf_part_change_clear(&change[0]);
    }
    assert_int_equal(pf_store_verify(on->store, NULL, NULL, &findings, &on->error), PF_OK);
    assert_int_equal(findings, 0);
    pf_stored_part_clear(&stored);
    free(change);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
#define TEST(name) cmocka_unit_test_setup_teardown(name, bench_up, bench_down)
        TEST(test_a_part_reads_back_bit_for_bit),
        TEST(test_a_change_leaves_the_rest_and_counts_revisions),
        TEST(test_what_states_nothing_new_makes_no_revision),
        TEST(test_a_repeat_is_answered_with_the_first_number),
        TEST(test_what_a_part_needs_is_asked_for),
        TEST(test_physics_is_checked_before_storing),
        TEST(test_two_makers_of_one_number_must_be_named),
        TEST(test_a_maker_stated_later_is_no_new_part),
        TEST(test_a_banned_part_needs_a_reason),
        TEST(test_a_part_that_comes_in_active_has_no_reason_of_its_status),
        TEST(test_a_rolled_back_import_leaves_nothing),
        TEST(test_the_content_hash_knows_no_history),
        TEST(test_the_same_part_twice_in_an_import_is_one_revision),
        TEST(test_two_thousand_random_parts_read_back_bit_for_bit),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
