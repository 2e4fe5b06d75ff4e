/* test_store_kill.c: an importing process is killed at random moments.
**
** PF_FAULT_FULL set: 500 kills; else 60. The seed is fixed, the moments are not: the claims hold for
** any of them.
*/
#include "fault/store_load.h"
#include "unit/store_support.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <sys/wait.h>
#include <unistd.h>

/* Imports without end, each acknowledged with its tag through the pipe. */
static void import_on(const char *path, unsigned tag, int pipe)
{
    pf_store *store = load_open(path, PF_STORE_WRITE);
    for (; store; tag++) {
        int64_t number;
        bool repeated;
        pf_error error = {0};
        if (load_import(store, tag, NULL, &number, &repeated, &error) != PF_OK) break;
        if (write(pipe, &tag, sizeof tag) != sizeof tag) break;
    }
    _exit(1);
}

/* Kills an importing child after a moment; returns the last tag that it acknowledged, or `before`. */
static unsigned kill_once(const char *path, unsigned before, unsigned moment_us)
{
    int ends[2];
    assert_int_equal(pipe(ends), 0);
    pid_t child = fork();
    if (child == 0) import_on(path, before + 1, ends[1]);
    close(ends[1]);
    usleep(moment_us);
    kill(child, SIGKILL);
    waitpid(child, NULL, 0);
    unsigned tag, last = before;
    while (read(ends[0], &tag, sizeof tag) == sizeof tag)
        last = tag;
    close(ends[0]);
    return last;
}

/* Whole and nothing but whole imports: all up to acknowledged, and at most one more. Returns the last
** one that is there. */
static unsigned check_after(const char *path, unsigned acknowledged)
{
    unsigned parts, *seen = calloc(acknowledged + 3, sizeof *seen);
    pf_store *store = load_open(path, PF_STORE_READ);
    assert_non_null(store);
    pf_error error = {0};
    pf_status status = load_check(store, seen, acknowledged + 3, &parts, &error);
    if (status != PF_OK) print_message("%s\n", error.text);
    assert_int_equal(status, PF_OK);
    assert_true(load_sound(store));
    pf_store_close(store);
    for (unsigned i = 0; i <= acknowledged; i++)
        assert_int_equal(seen[i], LOAD_PARTS);
    assert_true(seen[acknowledged + 1] == 0 || seen[acknowledged + 1] == LOAD_PARTS);
    assert_int_equal(seen[acknowledged + 2], 0);
    unsigned last = acknowledged + (seen[acknowledged + 1] ? 1 : 0);
    free(seen);
    return last;
}

static bool journal_is_left(const char *path)
{
    char journal[200];
    struct stat facts;
    snprintf(journal, sizeof journal, "%s-journal", path);
    return stat(journal, &facts) == 0 && facts.st_size > 0;
}

static void test_a_kill_loses_nothing_acknowledged(void **state)
{
    bench *on = *state;
    unsigned kills = load_count(60, 500), last = 0, hot = 0;
    int64_t number;
    bool repeated;
    assert_int_equal(load_import(on->store, 0, NULL, &number, &repeated, &on->error), PF_OK);
    pf_store_close(on->store);
    on->store = NULL;
    srand(20250303);
    for (unsigned i = 0; i < kills; i++) {
        last = kill_once(on->path, last, 2000 + (unsigned)rand() % 30000);
        hot += journal_is_left(on->path);
        last = check_after(on->path, last);
    }
    fprintf(stderr, "%u kills, %u left a journal, %u imports\n", kills, hot, last + 1);
    assert_true(hot > 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_setup_teardown(test_a_kill_loses_nothing_acknowledged, bench_up,
                                        bench_down),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
