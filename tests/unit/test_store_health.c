/* test_store_health.c: what is refused, what is noticed, what is copied and exchanged. */
#include "unit/store_support.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <fcntl.h>
#include <sqlite3.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include "store/network.h"

#define MONDAY "2025-03-03T09:00:00Z"
#define TUESDAY "2025-03-04T09:00:00Z"

static void fill(bench *on, const char *author, unsigned parts, unsigned seed)
{
    for (unsigned i = 0; i < parts; i++) {
        pf_part_change change;
        char name[16];
        snprintf(name, sizeof name, "P%03u", i);
        change_make(&change, name, NULL, i + seed);
        import_all(on, author, MONDAY, &change, 1);
    }
}

/* A pf_store_open that must fail with a status and words, and must leave the file as it was. */
static void refuse(const char *path, pf_store_mode mode, pf_status expected, const char *words)
{
    pf_store *store;
    pf_error error = {0};
    struct stat before = {0}, after = {0};
    stat(path, &before);
    pf_status status = pf_store_open(path, mode, &store, &error);
    stat(path, &after);
    if (status != expected || !strstr(error.text, words)) print_message("%s\n", error.text);
    assert_int_equal(status, expected);
    assert_null(store);
    assert_non_null(strstr(error.text, words));
    assert_non_null(strstr(error.text, path));
    assert_int_equal(before.st_size, after.st_size);
    assert_int_equal(before.st_mtim.tv_nsec, after.st_mtim.tv_nsec);
}

static void write_file(const char *path, const char *text)
{
    FILE *file = fopen(path, "wb");
    assert_non_null(file);
    fputs(text, file);
    fclose(file);
}

/* Runs SQL on the file as any SQLite client would. */
static void run_plain(const char *path, const char *sql)
{
    sqlite3 *db;
    char *why = NULL;
    assert_int_equal(sqlite3_open(path, &db), SQLITE_OK);
    if (sqlite3_exec(db, sql, NULL, NULL, &why) != SQLITE_OK) print_message("%s\n", why);
    assert_null(why);
    sqlite3_close(db);
}

static void test_what_is_not_ours_is_refused_by_name(void **state)
{
    bench *on = *state;
    char path[200];
    snprintf(path, sizeof path, "%s/other", on->folder);
    refuse(path, PF_STORE_READ, PF_NOT_FOUND, "there is no such database");
    write_file(path, "part,vds_max\nA,60\n");
    refuse(path, PF_STORE_READ, PF_DATABASE, "is not a passfet database");
    refuse(path, PF_STORE_CREATE, PF_DATABASE, "is not a passfet database");
    remove(path);
    run_plain(path, "CREATE TABLE t(x); INSERT INTO t VALUES (1)");
    refuse(path, PF_STORE_CREATE, PF_DATABASE, "another program");
    refuse(on->folder, PF_STORE_CREATE, PF_FILE, "no ordinary file");
}

static void patch(const char *path, long offset, unsigned char with)
{
    int file = open(path, O_RDWR);
    assert_true(file >= 0);
    assert_int_equal(pwrite(file, &with, 1, offset), 1);
    close(file);
}

static void test_a_newer_layout_is_refused(void **state)
{
    bench *on = *state;
    patch(on->path, 63, 9);
    refuse(on->path, PF_STORE_WRITE, PF_DATABASE, "newer passfet (layout 9, this one knows 1)");
}

static void test_a_truncated_file_is_refused(void **state)
{
    bench *on = *state;
    struct stat facts;
    fill(on, "ana", 20, 0);
    assert_int_equal(stat(on->path, &facts), 0);
    assert_int_equal(truncate(on->path, facts.st_size - 8192), 0);
    refuse(on->path, PF_STORE_READ, PF_DATABASE, "is damaged");
    assert_int_equal(truncate(on->path, 50), 0);
    refuse(on->path, PF_STORE_READ, PF_DATABASE, "is not a passfet database");
}

static void count_finding(void *context, const char *sentence)
{
    (void)sentence;
    ++*(size_t *)context;
}

/* Opens and reads everything; false where a message said that something is wrong. */
static bool reads_whole(const char *path)
{
    pf_store *store;
    pf_error error = {0};
    size_t findings = 0, seen = 0;
    pf_status status = pf_store_open(path, PF_STORE_READ, &store, &error);
    if (status == PF_OK) status = pf_store_verify(store, count_finding, &seen, &findings, &error);
    pf_store_close(store);
    assert_int_equal(seen, findings);
    assert_true(status == PF_OK || error.text[0]);
    return status == PF_OK && findings == 0;
}

static void test_a_flipped_bit_is_noticed(void **state)
{
    bench *on = *state;
    struct stat facts;
    fill(on, "ana", 5, 0);
    assert_true(reads_whole(on->path));
    assert_int_equal(stat(on->path, &facts), 0);
    for (long at = 40; at < facts.st_size; at += 4111) {
        unsigned char byte;
        int file = open(on->path, O_RDWR);
        assert_int_equal(pread(file, &byte, 1, at), 1);
        close(file);
        patch(on->path, at, byte ^ 4);
        assert_false(reads_whole(on->path));
        patch(on->path, at, byte);
    }
    assert_true(reads_whole(on->path));
}

/* A change behind passfet's back by somebody who also sets the checksums: a copy made by SQLite
** through passfet's own file layer. */
static void tamper(bench *on, const char *sql)
{
    sqlite3 *db;
    pf_store *other;
    char *why = NULL;
    assert_int_equal(pf_store_open(on->path, PF_STORE_WRITE, &other, &on->error), PF_OK);
    const char *layer = sqlite3_vfs_find(NULL)->zName;
    for (sqlite3_vfs *vfs = sqlite3_vfs_find(NULL); vfs; vfs = vfs->pNext)
        if (strncmp(vfs->zName, "passfet-", 8) == 0) layer = vfs->zName;
    assert_int_equal(sqlite3_open_v2(on->path, &db, SQLITE_OPEN_READWRITE, layer), SQLITE_OK);
    sqlite3_exec(db, sql, NULL, NULL, &why);
    if (why) print_message("%s\n", why);
    assert_null(why);
    sqlite3_close(db);
    pf_store_close(other);
}

static void write_finding(void *context, const char *sentence)
{
    char *text = context;
    size_t length = strlen(text);
    snprintf(text + length, 2000 - length, "%s\n", sentence);
}

static void expect_finding(bench *on, const char *sql, const char *words)
{
    char text[2000] = "";
    size_t findings;
    tamper(on, sql);
    bench_reopen(on, PF_STORE_READ);
    assert_int_equal(pf_store_verify(on->store, write_finding, text, &findings, &on->error), PF_OK);
    if (!strstr(text, words)) print_message("%s: %s\n", sql, text);
    assert_true(findings > 0);
    assert_non_null(strstr(text, words));
}

static void test_a_changed_rating_breaks_its_hash(void **state)
{
    fill(*state, "ana", 3, 0);
    expect_finding(*state, "UPDATE part SET vds_max_V = 99 WHERE name = 'P001'",
                   "hash: part P001 revision 1 is not what was imported");
}

static void test_a_changed_hash_breaks_the_chain(void **state)
{
    fill(*state, "ana", 3, 0);
    expect_finding(*state,
                   "UPDATE part SET content = randomblob(32) WHERE name = 'P001'; "
                   "UPDATE entry SET author = 'eve' WHERE id = 3",
                   "log: entry 3, or what it brought in, was changed afterwards");
}

static void test_a_lost_entry_or_revision_is_noticed(void **state)
{
    bench *on = *state;
    pf_part_change change;
    fill(on, "ana", 2, 0);
    change_rating(&change, "P000", "price", 1);
    import_all(on, "ben", TUESDAY, &change, 1);
    expect_finding(on, "DELETE FROM past", "history: revisions are missing of part P000");
}

static void test_json_that_differs_from_the_packed_curves_is_noticed(void **state)
{
    fill(*state, "ana", 2, 0);
    expect_finding(*state, "UPDATE curve_json SET json = replace(json, '\"dc\"', '1') WHERE id = 2",
                   "curves: the JSON of part P001 revision 1 differs from its packed form");
}

static void test_a_backup_is_the_same_and_never_overwrites(void **state)
{
    bench *on = *state;
    char path[200], ours[PF_HASH_ROOM], theirs[PF_HASH_ROOM];
    pf_store *copy;
    fill(on, "ana", 30, 0);
    snprintf(path, sizeof path, "%s/copy.db", on->folder);
    assert_int_equal(pf_store_backup(on->store, path, &on->error), PF_OK);
    assert_int_equal(pf_store_backup(on->store, path, &on->error), PF_FILE);
    assert_non_null(strstr(on->error.text, "exists already"));
    assert_int_equal(pf_store_content_hash(on->store, ours, &on->error), PF_OK);
    pf_error_clear(&on->error);
    assert_int_equal(pf_store_open(path, PF_STORE_READ, &copy, &on->error), PF_OK);
    assert_int_equal(pf_store_content_hash(copy, theirs, &on->error), PF_OK);
    assert_string_equal(ours, theirs);
    pf_store_close(copy);
    assert_true(reads_whole(path));
}

static void test_a_name_like_a_uri_is_a_file_name(void **state)
{
    bench *on = *state;
    char before[512];
    pf_store *store;
    assert_non_null(getcwd(before, sizeof before));
    assert_int_equal(chdir(on->folder), 0);
    const char *const names[] = {"file:team.db?mode=memory", ":memory:"};
    for (int i = 0; i < 2; i++) {
        assert_int_equal(pf_store_open(names[i], PF_STORE_CREATE, &store, &on->error), PF_OK);
        pf_store_close(store);
        assert_int_equal(access(names[i], R_OK), 0);
    }
    assert_int_equal(chdir(before), 0);
}

static void test_a_store_in_memory_leaves_no_file(void **state)
{
    bench *on = *state;
    pf_part_change change;
    int64_t parts;
    pf_store_close(on->store);
    remove(on->path);
    assert_int_equal(pf_store_open(on->path, PF_STORE_MEMORY, &on->store, &on->error), PF_OK);
    change_make(&change, "A", NULL, 1);
    import_all(on, "ana", MONDAY, &change, 1);
    assert_int_equal(pf_store_count(on->store, &parts, &on->error), PF_OK);
    assert_int_equal(parts, 1);
    assert_int_not_equal(access(on->path, F_OK), 0);
}

static void test_a_locked_database_is_said_to_be_busy(void **state)
{
    bench *on = *state;
    sqlite3 *db;
    pf_import_facts facts = {.author = "ana", .time = MONDAY};
    int64_t already;
    assert_int_equal(sqlite3_open(on->path, &db), SQLITE_OK);
    assert_int_equal(sqlite3_exec(db, "BEGIN IMMEDIATE", NULL, NULL, NULL), SQLITE_OK);
    pf_store_wait(on->store, 50);
    assert_int_equal(pf_store_import_begin(on->store, &facts, &already, &on->error), PF_BUSY);
    assert_non_null(strstr(on->error.text, "busy for 50 ms; try again"));
    sqlite3_close(db);
}

static void test_a_full_disk_leaves_the_database_as_it_was(void **state)
{
    bench *on = *state;
    pf_part merged;
    pf_import_effect effect;
    pf_status status = PF_OK;
    char before[PF_HASH_ROOM], after[PF_HASH_ROOM];
    fill(on, "ana", 2, 0);
    assert_int_equal(pf_store_content_hash(on->store, before, &on->error), PF_OK);
    pf_store_limit_pages(on->store, 40);
    pf_part_init(&merged);
    import_open(on, "ana", TUESDAY, NULL);
    for (unsigned i = 0; i < 5000 && status == PF_OK; i++) {
        pf_part_change change;
        char name[16];
        snprintf(name, sizeof name, "Q%04u", i);
        change_make(&change, name, NULL, i);
        status = pf_store_import_part(on->store, &change, &merged, &effect, &on->error);
        pf_part_change_clear(&change);
    }
    assert_int_equal(status, PF_DATABASE);
    assert_non_null(strstr(on->error.text, "the disk is full; nothing was stored"));
    int64_t number;
    assert_int_not_equal(pf_store_import_commit(on->store, &number, NULL), PF_OK);
    pf_error_clear(&on->error);
    assert_int_equal(pf_store_content_hash(on->store, after, &on->error), PF_OK);
    assert_string_equal(before, after);
    assert_true(reads_whole(on->path));
    pf_part_clear(&merged);
}

static void test_network_file_systems_are_warned_of(void **state)
{
    (void)state;
    assert_non_null(pf_network_warning(0x6969));
    assert_non_null(pf_network_warning((long)0xFFFFFFFFFF534D42));
    assert_null(pf_network_warning(0xEF53));
    assert_null(pf_network_warning(0x01021994));
}

static void test_a_database_without_a_rating_is_brought_up_to_date(void **state)
{
    bench *on = *state;
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    fill(on, "ana", 2, 0);
    tamper(on, "DROP VIEW ratings; DROP VIEW history; ALTER TABLE part DROP COLUMN price; "
               "ALTER TABLE past DROP COLUMN price");
    bench_reopen(on, PF_STORE_READ);
    find_part(on, "P001", &stored);
    assert_true(stored.part.price != stored.part.price);
    assert_true(reads_whole(on->path));
    bench_reopen(on, PF_STORE_WRITE);
    pf_part_change change;
    change_rating(&change, "P001", "price", 3);
    import_all(on, "ben", TUESDAY, &change, 1);
    find_part(on, "P001", &stored);
    assert_true(stored.part.price == 3);
    assert_true(reads_whole(on->path));
    pf_stored_part_clear(&stored);
}

static void test_a_view_in_place_of_a_table_is_not_followed(void **state)
{
    bench *on = *state;
    pf_stored_part stored;
    pf_stored_part_init(&stored);
    fill(on, "ana", 1, 0);
    tamper(on, "PRAGMA foreign_keys = OFF; PRAGMA legacy_alter_table = ON; "
               "ALTER TABLE part RENAME TO real_part; "
               "CREATE VIEW part AS SELECT * FROM real_part");
    bench_reopen(on, PF_STORE_READ);
    assert_int_equal(pf_store_part_find(on->store, "P000", NULL, &stored, &on->error), PF_DATABASE);
    pf_stored_part_clear(&stored);
}

static void test_a_rating_that_is_not_known_is_a_newer_layout(void **state)
{
    bench *on = *state;
    tamper(on, "ALTER TABLE part ADD COLUMN colour_nm REAL");
    refuse(on->path, PF_STORE_READ, PF_DATABASE, "newer passfet (it holds colour_nm");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
#define TEST(name) cmocka_unit_test_setup_teardown(name, bench_up, bench_down)
        TEST(test_what_is_not_ours_is_refused_by_name),
        TEST(test_a_newer_layout_is_refused),
        TEST(test_a_truncated_file_is_refused),
        TEST(test_a_flipped_bit_is_noticed),
        TEST(test_a_changed_rating_breaks_its_hash),
        TEST(test_a_changed_hash_breaks_the_chain),
        TEST(test_a_lost_entry_or_revision_is_noticed),
        TEST(test_json_that_differs_from_the_packed_curves_is_noticed),
        TEST(test_a_backup_is_the_same_and_never_overwrites),
        TEST(test_a_name_like_a_uri_is_a_file_name),
        TEST(test_a_store_in_memory_leaves_no_file),
        TEST(test_a_locked_database_is_said_to_be_busy),
        TEST(test_a_full_disk_leaves_the_database_as_it_was),
        TEST(test_network_file_systems_are_warned_of),
        TEST(test_a_database_without_a_rating_is_brought_up_to_date),
        TEST(test_a_view_in_place_of_a_table_is_not_followed),
        TEST(test_a_rating_that_is_not_known_is_a_newer_layout),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
