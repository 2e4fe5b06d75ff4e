/* Claim: whichever allocation fails while files are read, the reader says so, and nothing leaks or is
** used after it is gone (run under the address sanitizer). The linker puts our calloc and realloc in
** place of the library's; the n-th call and all behind it fail, for every n (a single failure is made
** good by libcsv, which tries again with less). */
#include "support/claims.h"

#include <passfet/intake.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static size_t calls, fails_at;

void *__real_calloc(size_t count, size_t size);
void *__real_realloc(void *memory, size_t size);
void *__wrap_calloc(size_t count, size_t size);
void *__wrap_realloc(void *memory, size_t size);

void *__wrap_calloc(size_t count, size_t size)
{
    return ++calls >= fails_at && fails_at ? NULL : __real_calloc(count, size);
}

void *__wrap_realloc(void *memory, size_t size)
{
    return ++calls >= fails_at && fails_at ? NULL : __real_realloc(memory, size);
}

typedef pf_status scenario(pf_problems *problems);

/* Runs the scenario once for every allocation that it makes. */
static size_t fail_each(scenario *run)
{
    for (fails_at = 1;; fails_at++) {
        pf_problems problems;
        pf_problems_init(&problems);
        calls = 0;
        pf_status status = run(&problems);
        bool failed = calls >= fails_at;
        size_t n = fails_at;
        fails_at = 0; /* cmocka may allocate */
        pf_problems_clear(&problems);
        if (failed && status != PF_NO_MEMORY)
            fail_msg("allocation %zu failed and the status was: %s", n, pf_status_text(status));
        if (!failed) return n - 1;
        fails_at = n;
    }
}

static void ignore_row(void *context, const pf_bad_row *row)
{
    (void)context;
    (void)row;
}

static pf_status read_all(const pf_intake_options *options, const char *const *texts,
                          pf_problems *problems)
{
    pf_changes changes = {0};
    pf_intake_summary summary = {0};
    pf_status status = PF_OK;
    for (size_t i = 0; texts[i] && status == PF_OK; i++)
        status = pf_ratings_read("t.csv", texts[i], strlen(texts[i]), options, &changes, &summary,
                                 problems);
    for (size_t i = 0; i < changes.count && status == PF_OK; i++)
        status = pf_part_judge(&changes.item[i].part, "t.csv", 1, true, problems);
    pf_changes_clear(&changes);
    return status;
}

static pf_status read_ratings(pf_problems *problems)
{
    static const char *const texts[] = {
        "part,maker,polarity,vds_max,tj_max,rdson_max @ 10 V [mOhm],soa,zth,colour\n"
        "A,One,N,100,175,4.7,1ms 1:100 90:4 | dc 1:40 90:1 10:20,1ms:0.1 10ms:0.3 9ms:0.301,red\n"
        "B,One,P,-60,150,9.1,,,\n",
        "part,pulse,vds,id\nA,10ms,1,80\nA,10ms,90,2\nA,10ms,90,2\nB,1ms,1,70\nB,1ms,50,3\n",
        "part,time,zth\nB,1 ms,0.1\nB,100 ms,0.5\n",
        "part,foster_r,foster_tau,zth_path\nA,20,1 s,ambient\nA,30,20 s,ambient\n", NULL};
    return read_all(NULL, texts, problems);
}

static pf_status read_with_bad_rows(pf_problems *problems)
{
    static const char *const texts[] = {
        "part,maker,polarity,vds_max,tj_max\nA,One,N,100,175\nB,One,N,bad,150\nC,One\n",
        "part,pulse,vds,id\nA,10ms,1,80\nA,10ms,bad,2\nB,1ms,1,70\nB,1ms\n", NULL};
    const pf_intake_options options = {.keep_good = true, .bad_row = ignore_row};
    return read_all(&options, texts, problems);
}

static pf_status read_decoded(pf_problems *problems)
{
    static const char *const texts[] = {"part,polarity,vds_max,tj_max [\xB0"
                                        "C]\nA,N,100,175\n",
                                        NULL};
    const pf_intake_options options = {.encoding = "windows-1252"};
    return read_all(&options, texts, problems);
}

static pf_status read_cards(pf_problems *problems)
{
    static const char rules_text[] = "rule,parameter,factor,clause,mark\nR,voltage_use,0.7,1,own\n";
    static const char profile_text[] =
        "parameter,min,typ,max,unit,note\nsupply_voltage,,12,,V,\npolarity,,N,,,\n"
        "output_capacitance,,100 uF,,,\nstart_control,,current_limit,,,\ncurrent_limit,,10,,A,\n"
        "running_current,,8,,A,\nfault_time,,1 ms,,,\nambient_temperature,,25,,,\n"
        "gate_drive,,10,,,\nderating,,R,,,\n";
    static const char capture_text[] = "time [us],vds,id\n0,48,0\n1,24,5\n2,0,5\n";
    pf_derating_rules rules = {0};
    pf_capture_data capture = {0};
    pf_profile profile;
    pf_status status =
        pf_derating_rules_read("r.csv", rules_text, strlen(rules_text), &rules, problems);
    if (status == PF_OK)
        status = pf_profile_read("p.csv", profile_text, strlen(profile_text), &rules, &profile,
                                 problems);
    if (status == PF_OK)
        status = pf_capture_read("c.csv", capture_text, strlen(capture_text), &capture, problems);
    pf_derating_rules_clear(&rules);
    pf_capture_data_clear(&capture);
    return status;
}

static void test_every_failed_allocation_is_said(void **state)
{
    static scenario *const scenarios[] = {read_ratings, read_with_bad_rows, read_decoded,
                                          read_cards};
    (void)state;
    for (size_t i = 0; i < sizeof scenarios / sizeof *scenarios; i++) {
        size_t failed = fail_each(scenarios[i]);
        print_message("%zu allocations failed in turn\n", failed);
        assert_true(failed > 5);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_every_failed_allocation_is_said),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
