/* test_store_many.c: many processes on one database.
**
** PF_FAULT_FULL set: 8 writers with 500 imports each; else 60 each.
*/
#include "fault/store_load.h"
#include "unit/store_support.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/wait.h>
#include <time.h>
#include <unistd.h>

#define WRITERS 8
#define READERS 4

static double now_s(void)
{
    struct timespec time;
    clock_gettime(CLOCK_MONOTONIC, &time);
    return (double)time.tv_sec + (double)time.tv_nsec * 1e-9;
}

/* One writer: `count` imports with tags of its own. Its exit status says how it went. */
static int write_imports(const char *path, unsigned writer, unsigned count)
{
    double longest_s = 0;
    for (unsigned i = 0; i < count; i++) {
        pf_error error = {0};
        int64_t number;
        bool repeated;
        double start_s = now_s();
        pf_store *store = load_open(path, PF_STORE_WRITE);
        if (!store) return 1;
        pf_status status = load_import(store, writer * count + i, NULL, &number, &repeated, &error);
        pf_store_close(store);
        if (status != PF_OK) fprintf(stderr, "writer %u: %s\n", writer, error.text);
        if (status != PF_OK) return 1;
        if (now_s() - start_s > longest_s) longest_s = now_s() - start_s;
    }
    if (getenv("PF_FAULT_FULL")) fprintf(stderr, "longest import %.2f s\n", longest_s);
    return 0;
}

/* One reader: looks until all imports are there. No import may ever be there in part. */
static int read_imports(const char *path, unsigned imports)
{
    unsigned *seen = calloc(imports, sizeof *seen);
    unsigned parts = 0, looks = 0;
    bool right = seen != NULL;
    pf_error error = {0};
    while (right && parts < imports * LOAD_PARTS) {
        pf_store *store = load_open(path, PF_STORE_READ);
        memset(seen, 0, imports * sizeof *seen);
        right = store && load_check(store, seen, imports, &parts, &error) == PF_OK;
        for (unsigned i = 0; right && i < imports; i++)
            right = seen[i] == 0 || seen[i] == LOAD_PARTS;
        pf_store_close(store);
        looks++;
        usleep(100000);
    }
    free(seen);
    if (error.text[0]) fprintf(stderr, "reader: %s\n", error.text);
    if (getenv("PF_FAULT_FULL")) fprintf(stderr, "%u looks\n", looks);
    return right ? 0 : 1;
}

/* Waits for all children; how many ended with each exit status, others count as 9. */
static void collect(unsigned children, unsigned ended[10])
{
    memset(ended, 0, 10 * sizeof *ended);
    for (unsigned i = 0; i < children; i++) {
        int status = -1;
        wait(&status);
        ended[WIFEXITED(status) && WEXITSTATUS(status) < 9 ? WEXITSTATUS(status) : 9]++;
    }
}

static void test_no_import_is_lost_or_seen_in_part(void **state)
{
    bench *on = *state;
    unsigned count = load_count(60, 500), parts, ended[10];
    unsigned *seen = calloc(WRITERS * count, sizeof *seen);
    pf_store_close(on->store);
    for (unsigned i = 0; i < WRITERS + READERS; i++)
        if (fork() == 0)
            _exit(i < WRITERS ? write_imports(on->path, i, count)
                              : read_imports(on->path, WRITERS * count));
    collect(WRITERS + READERS, ended);
    assert_int_equal(ended[0], WRITERS + READERS);
    on->store = load_open(on->path, PF_STORE_READ);
    assert_non_null(on->store);
    assert_int_equal(load_check(on->store, seen, WRITERS * count, &parts, &on->error), PF_OK);
    assert_int_equal(parts, WRITERS * count * LOAD_PARTS);
    for (unsigned i = 0; i < WRITERS * count; i++)
        assert_int_equal(seen[i], LOAD_PARTS);
    assert_true(load_sound(on->store));
    char name[PF_REVISION_NAME_ROOM];
    assert_int_equal(pf_store_revision_name(on->store, NULL, name, NULL), PF_OK);
    assert_int_equal(atoi(name), WRITERS * count);
    free(seen);
}

static void test_the_same_file_by_all_at_once_is_one_import(void **state)
{
    bench *on = *state;
    unsigned ended[10];
    pf_store_close(on->store);
    on->store = NULL;
    remove(on->path); /* they also race to lay it out */
    for (unsigned i = 0; i < WRITERS; i++)
        if (fork() == 0) {
            int64_t number = 0;
            bool repeated = false;
            pf_error error = {0};
            pf_store *store = load_open(on->path, PF_STORE_CREATE);
            if (!store || load_import(store, 7, "same", &number, &repeated, &error) != PF_OK)
                _exit(3);
            _exit(number != 1 ? 4 : repeated ? 2 : 1);
        }
    collect(WRITERS, ended);
    assert_int_equal(ended[1], 1);
    assert_int_equal(ended[2], WRITERS - 1);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
#define TEST(name) cmocka_unit_test_setup_teardown(name, bench_up, bench_down)
        TEST(test_no_import_is_lost_or_seen_in_part),
        TEST(test_the_same_file_by_all_at_once_is_one_import),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
