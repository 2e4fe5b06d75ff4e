/* test_store_docs.c: every query of docs/database.md runs and finds something, in a plain client. */
#include "unit/store_support.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <math.h>
#include <sqlite3.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define MONDAY "2025-03-03T09:00:00Z"
#define TUESDAY "2025-03-04T09:00:00Z"

/* Three parts, one with Foster pairs instead of Zth, one price change. */
static void fill(bench *on)
{
    pf_part_change change[3];
    pf_foster_pair pair[2] = {{0.1, 1e-4}, {0.3, 1e-2}};
    pf_zth_point zth[2] = {{1e-3, 0.05}, {1e-2, 0.2}};
    change_make(&change[0], "ZX100", "Ohmwerk", 1);
    change_make(&change[1], "ZX200", "Ohmwerk", 2);
    change_make(&change[2], "ZX300", NULL, 3);
    assert_int_equal(pf_part_set_foster(&change[1].part, PF_JUNCTION_CASE, pair, 2), PF_OK);
    assert_int_equal(pf_part_set_zth(&change[0].part, PF_JUNCTION_CASE, zth, 2), PF_OK);
    import_all(on, "ana", MONDAY, change, 3);
    change_rating(&change[0], "ZX100", "price", 1.5);
    import_all(on, "ben", TUESDAY, change, 1);
}

static char *read_file(const char *path)
{
    FILE *file = fopen(path, "rb");
    assert_non_null(file);
    char *text = calloc(1, 1 << 20);
    assert_true(fread(text, 1, (1 << 20) - 1, file) > 0);
    fclose(file);
    return text;
}

static sqlite3 *open_plain(const bench *on)
{
    sqlite3 *db;
    assert_int_equal(sqlite3_open_v2(on->path, &db, SQLITE_OPEN_READONLY, NULL), SQLITE_OK);
    return db;
}

static void test_every_query_of_the_manual_finds_rows(void **state)
{
    bench *on = *state;
    char *manual = read_file(PF_SOURCE_FOLDER "/docs/database.md");
    fill(on);
    sqlite3 *db = open_plain(on);
    int queries = 0;
    for (char *at = manual; (at = strstr(at, "```sql\n")); queries++) {
        char *end = strstr(at += 7, "```");
        sqlite3_stmt *statement;
        assert_non_null(end);
        if (sqlite3_prepare_v2(db, at, (int)(end - at), &statement, NULL) != SQLITE_OK)
            print_message("%s\n%.*s", sqlite3_errmsg(db), (int)(end - at), at);
        assert_non_null(statement);
        int code = sqlite3_step(statement);
        if (code != SQLITE_ROW) print_message("no rows: %.*s", (int)(end - at), at);
        assert_int_equal(code, SQLITE_ROW);
        sqlite3_finalize(statement);
        at = end;
    }
    assert_true(queries >= 8);
    sqlite3_close(db);
    free(manual);
}

static double first_number(sqlite3 *db, const char *sql)
{
    sqlite3_stmt *statement;
    assert_int_equal(sqlite3_prepare_v2(db, sql, -1, &statement, NULL), SQLITE_OK);
    assert_int_equal(sqlite3_step(statement), SQLITE_ROW);
    double number = sqlite3_column_double(statement, 0);
    sqlite3_finalize(statement);
    return number;
}

static void test_views_show_what_was_imported(void **state)
{
    bench *on = *state;
    fill(on);
    sqlite3 *db = open_plain(on);
    assert_true(first_number(db, "SELECT count(*) FROM ratings") == 3);
    assert_true(first_number(db, "SELECT price FROM ratings WHERE part = 'ZX100'") == 1.5);
    assert_true(first_number(db, "SELECT count(*) FROM soa_points WHERE part = 'ZX100'") == 12);
    assert_true(isinf(first_number(db, "SELECT max(pulse_s) FROM soa_points")));
    assert_true(first_number(db, "SELECT id_A FROM soa_points WHERE part = 'ZX100' AND pulse_s = "
                                 "0.001 AND vds_V = 1") == 101);
    assert_true(first_number(db, "SELECT zth_KpW FROM zth_points WHERE part = 'ZX100' AND time_s "
                                 "= 0.01") == 0.2);
    assert_true(first_number(db, "SELECT r_KpW FROM foster_pairs WHERE tau_s = 0.0001") == 0.1);
    assert_true(first_number(db, "SELECT count(*) FROM rdson_points") == 6);
    assert_true(first_number(db, "SELECT count(*) FROM history WHERE part = 'ZX100'") == 2);
    assert_true(first_number(db, "SELECT count(*) FROM log") == 2);
    sqlite3_close(db);
}

static void test_checks_of_the_tables_are_sentences(void **state)
{
    bench *on = *state;
    fill(on);
    sqlite3 *db;
    const char *const wrong[][2] = {
        {"UPDATE part SET vds_max_V = -5", "vds_max must lie between 1 and 3000 V"},
        {"UPDATE part SET rth_jc_KpW = 0", "rth_jc must lie between 0.005 and 200 K/W"},
        {"UPDATE part SET soa_top_V = 500", "the SOA must not go more than a tenth beyond vds_max"},
        {"UPDATE part SET vth_min_V = 3, vth_max_V = 2", "vth_min must not be above vth_max"},
        {"UPDATE part SET status = 'gone'",
         "the status must be active, not-for-new, obsolete or banned"},
        {"UPDATE part SET status = 'banned'", "a banned part needs a reason"},
        {"UPDATE part SET tj_max_degC = 9e999", "tj_max must lie between 80 and 400 degC"},
    };
    assert_int_equal(sqlite3_open(on->path, &db), SQLITE_OK);
    for (size_t i = 0; i < sizeof wrong / sizeof *wrong; i++) {
        assert_int_equal(sqlite3_exec(db, wrong[i][0], NULL, NULL, NULL), SQLITE_CONSTRAINT);
        if (!strstr(sqlite3_errmsg(db), wrong[i][1])) print_message("%s\n", sqlite3_errmsg(db));
        assert_non_null(strstr(sqlite3_errmsg(db), wrong[i][1]));
    }
    sqlite3_close(db);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
#define TEST(name) cmocka_unit_test_setup_teardown(name, bench_up, bench_down)
        TEST(test_every_query_of_the_manual_finds_rows),
        TEST(test_views_show_what_was_imported),
        TEST(test_checks_of_the_tables_are_sentences),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
