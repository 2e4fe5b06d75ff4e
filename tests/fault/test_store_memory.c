/* test_store_memory.c: every allocation fails in turn, ours and SQLite's: no crash, no leak of a
** half-made state, and the answer is "out of memory".
**
** PF_FAULT_FULL set: each allocation of each scenario; else every 41st.
*/
#include "fault/store_load.h"
#include "unit/store_support.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <sqlite3.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

/* The wrapped allocator: the countdown-th call from now fails, and all later ones where `lasting`. */
static long countdown = -1;
static bool lasting, failed;

void *__real_malloc(size_t bytes);
void *__real_calloc(size_t count, size_t bytes);
void *__real_realloc(void *memory, size_t bytes);
void *__wrap_malloc(size_t bytes);
void *__wrap_calloc(size_t count, size_t bytes);
void *__wrap_realloc(void *memory, size_t bytes);

static bool fails(void)
{
    if (countdown < 0) return false;
    if (countdown > 0 && --countdown > 0) return false;
    if (!lasting) countdown = -1;
    failed = true;
    return true;
}

void *__wrap_malloc(size_t bytes)
{
    return fails() ? NULL : __real_malloc(bytes);
}

void *__wrap_calloc(size_t count, size_t bytes)
{
    return fails() ? NULL : __real_calloc(count, bytes);
}

void *__wrap_realloc(void *memory, size_t bytes)
{
    return fails() ? NULL : __real_realloc(memory, bytes);
}

/* SQLite's own allocator, with the same countdown. */
static sqlite3_mem_methods plain;

static void *sqlite_malloc(int bytes)
{
    return fails() ? NULL : plain.xMalloc(bytes);
}

static void *sqlite_realloc(void *memory, int bytes)
{
    return fails() ? NULL : plain.xRealloc(memory, bytes);
}

static void arm_sqlite(void)
{
    sqlite3_shutdown();
    assert_int_equal(sqlite3_config(SQLITE_CONFIG_GETMALLOC, &plain), SQLITE_OK);
    sqlite3_mem_methods failing = plain;
    failing.xMalloc = sqlite_malloc;
    failing.xRealloc = sqlite_realloc;
    assert_int_equal(sqlite3_config(SQLITE_CONFIG_MALLOC, &failing), SQLITE_OK);
    assert_int_equal(sqlite3_initialize(), SQLITE_OK);
}

static pf_status step_over(void *context, const pf_history_step *step, pf_error *error)
{
    (void)context;
    (void)step;
    (void)error;
    return PF_OK;
}

static pf_status lay_out(const char *path, pf_error *error)
{
    pf_store *store;
    pf_status status = pf_store_open(path, PF_STORE_CREATE, &store, error);
    pf_store_close(store);
    return status;
}

static pf_status write_all(const char *path, pf_error *error)
{
    pf_store *store;
    int64_t number;
    bool repeated;
    pf_review_facts review = {.author = "eve", .time = "2025-03-04T09:00:00Z", .accept = true};
    pf_import_facts facts = {.author = "eve", .time = "2025-03-04T09:00:00Z"};
    pf_status status = pf_store_open(path, PF_STORE_WRITE, &store, error);
    if (status == PF_OK) status = load_import(store, 2, "key", &number, &repeated, error);
    if (status == PF_OK) status = pf_store_review(store, "2-1", &review, error);
    if (status == PF_OK) status = pf_store_undo(store, 1, &facts, &number, error);
    pf_store_close(store);
    return status;
}

static pf_status read_all(const char *path, pf_error *error)
{
    pf_store *store;
    char hash[PF_HASH_ROOM], copy[200];
    unsigned parts;
    size_t findings;
    snprintf(copy, sizeof copy, "%.180s-copy", path);
    pf_status status = pf_store_open(path, PF_STORE_READ, &store, error);
    if (status == PF_OK) status = load_check(store, NULL, 0, &parts, error);
    if (status == PF_OK) status = pf_store_content_hash(store, hash, error);
    if (status == PF_OK) status = pf_store_history(store, "1-1", step_over, NULL, error);
    if (status == PF_OK) status = pf_store_verify(store, NULL, NULL, &findings, error);
    if (status == PF_OK) status = pf_store_backup(store, copy, error);
    pf_store_close(store);
    remove(copy);
    return status;
}

typedef pf_status scenario(const char *path, pf_error *error);

/* The database before each try: imports 0 and 1. */
static void prepare(const char *path)
{
    pf_error error = {0};
    int64_t number;
    bool repeated;
    remove(path);
    pf_store *store = load_open(path, PF_STORE_CREATE);
    for (unsigned tag = 0; tag < 2; tag++)
        assert_int_equal(load_import(store, tag, NULL, &number, &repeated, &error), PF_OK);
    pf_store_close(store);
}

static void check_whole(const char *path)
{
    pf_error error = {0};
    unsigned seen[3] = {0}, parts;
    pf_store *store = load_open(path, PF_STORE_READ);
    assert_non_null(store);
    assert_int_equal(load_check(store, seen, 3, &parts, &error), PF_OK);
    for (int tag = 0; tag < 3; tag++)
        assert_true(seen[tag] % LOAD_PARTS == 0);
    assert_true(load_sound(store));
    pf_store_close(store);
}

/* Fails allocation `at` of the scenario; false where it has fewer. */
static bool fail_at(scenario *run, const char *path, long at, bool all_later)
{
    pf_error error = {0};
    countdown = at;
    lasting = all_later;
    failed = false;
    pf_status status = run(path, &error);
    countdown = -1;
    bool reached = failed;
    if (status != PF_OK && status != PF_NO_MEMORY) print_message("%ld: %s\n", at, error.text);
    assert_true(status == PF_OK || status == PF_NO_MEMORY);
    assert_true(status == PF_OK || error.text[0]);
    return reached;
}

static void fail_each(bench *on, scenario *run, bool prepared)
{
    long stride = load_count(41, 1);
    for (int all_later = 0; all_later < 2; all_later++) {
        long at = 1;
        for (bool reached = true; reached; at += stride) {
            if (prepared)
                prepare(on->path);
            else
                remove(on->path);
            reached = fail_at(run, on->path, at, all_later);
            if (prepared) check_whole(on->path);
        }
        assert_true(at > 2 * stride);
        if (stride == 1) fprintf(stderr, "%ld allocations\n", at);
    }
}

static void test_laying_out_survives_no_memory(void **state)
{
    fail_each(*state, lay_out, false);
}

static void test_writing_survives_no_memory(void **state)
{
    fail_each(*state, write_all, true);
}

static void test_reading_survives_no_memory(void **state)
{
    fail_each(*state, read_all, true);
}

int main(void)
{
    if (access("/dev/shm", W_OK) == 0)
        setenv("TMPDIR", "/dev/shm", 1); /* syncs cost nothing there */
    arm_sqlite();
    const struct CMUnitTest tests[] = {
#define TEST(name) cmocka_unit_test_setup_teardown(name, bench_up, bench_down)
        TEST(test_laying_out_survives_no_memory),
        TEST(test_writing_survives_no_memory),
        TEST(test_reading_survives_no_memory),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
