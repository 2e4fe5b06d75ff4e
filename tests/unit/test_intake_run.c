/* Claims about the files of one run together: merging, makers, kept rows, maps, listeners, repair. */
#include "support/claims.h"

#include <passfet/intake.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

typedef struct run {
    pf_intake_options options;
    pf_changes changes;
    pf_intake_summary summary;
    pf_problems problems;
    char heard[8192]; /* what listeners were told */
} run;

static int begin(void **state)
{
    *state = calloc(1, sizeof(run));
    return *state ? 0 : -1;
}

static int end(void **state)
{
    run *now = *state;
    pf_changes_clear(&now->changes);
    pf_problems_clear(&now->problems);
    free(now);
    return 0;
}

static pf_status take(run *now, const char *name, const char *text)
{
    now->options.context = now;
    return pf_ratings_read(name, text, strlen(text), &now->options, &now->changes, &now->summary,
                           &now->problems);
}

static const pf_part_change *change_of(const run *now, const char *name)
{
    for (size_t i = 0; i < now->changes.count; i++)
        if (strcmp(now->changes.item[i].part.name, name) == 0) return &now->changes.item[i];
    fail_msg("no change for %s", name);
    return NULL;
}

static bool has_words(const run *now, pf_severity severity, const char *words)
{
    for (size_t i = 0; i < now->problems.count; i++)
        if (now->problems.item[i].severity == severity &&
            strstr(now->problems.item[i].wrong, words))
            return true;
    return false;
}

static const char parts[] =
    "part,maker,polarity,vds_max,tj_max\nA,One,N,100,175\nB,One,P,-60,150\n";
static const char soa[] =
    "part,pulse,vds,id\nA,1ms,1,100\nA,1ms,90,4\nB,1ms,-1,-80\nB,1ms,-50,-3\n";
static const char zth[] = "part,time,zth\nA,1 ms,0.1\nA,100 ms,0.5\n";

/* --- Merging ------------------------------------------------------------------------------- */

static void check_merged(const run *now)
{
    const pf_part_change *a = change_of(now, "A"), *b = change_of(now, "B");
    assert_int_equal(now->changes.count, 2);
    assert_string_equal(a->part.maker, "One");
    assert_true(a->polarity_given && a->soa_given && a->thermal_given[PF_JUNCTION_CASE]);
    assert_true(b->polarity_given && b->soa_given && !b->thermal_given[PF_JUNCTION_CASE]);
    assert_int_equal(a->part.soa_count, 2);
    assert_int_equal(a->part.thermal[PF_JUNCTION_CASE].point_count, 2);
    assert_true(b->part.vds_max_V == 60 && b->part.soa[1].vds_V == 50 && b->part.soa[1].id_A == 3);
}

static void test_files_of_a_run_merge_in_either_order(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "parts.csv", parts), PF_OK);
    assert_int_equal(take(now, "soa.csv", soa), PF_OK);
    assert_int_equal(take(now, "zth.csv", zth), PF_OK);
    check_merged(now);
}

static void test_curves_may_come_before_their_parts(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "zth.csv", zth), PF_OK);
    assert_int_equal(take(now, "soa.csv", soa), PF_OK);
    assert_int_equal(take(now, "parts.csv", parts), PF_OK);
    check_merged(now);
}

static void test_a_column_says_not_stated_only_where_it_is_there(void **state)
{
    run *now = *state;
    size_t count, given = 0;
    assert_int_equal(take(now, "parts.csv", "part,polarity,vds_max,tj_max,vgs_max\nA,N,100,175,\n"),
                     PF_OK);
    const pf_rating_field *field = pf_rating_fields(&count);
    const pf_part_change *a = change_of(now, "A");
    for (size_t i = 0; i < count; i++) {
        bool there = strcmp(field[i].csv, "vds_max") == 0 || strcmp(field[i].csv, "tj_max") == 0 ||
                     strcmp(field[i].csv, "vgs_max") == 0;
        assert_int_equal(a->ratings_given >> i & 1, there);
        given += there;
    }
    assert_int_equal(given, 3);
    assert_false(a->rdson_given || a->soa_given);
}

static void test_two_makers_of_one_number_need_their_names(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "parts.csv",
                          "part,maker,polarity,vds_max,tj_max\n"
                          "A,One,N,100,175\nA,Two,N,80,175\n"),
                     PF_OK);
    assert_int_equal(take(now, "soa.csv", soa), PF_BAD_INPUT);
    assert_true(has_words(now, PF_SEVERITY_REFUSAL, "two makers share"));
}

static void test_a_second_maker_behind_a_nameless_curve_is_refused(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "soa.csv", soa), PF_OK);
    assert_int_equal(take(now, "parts.csv",
                          "part,maker,polarity,vds_max,tj_max\n"
                          "A,One,N,100,175\nA,Two,N,80,175\n"),
                     PF_BAD_INPUT);
    assert_int_equal(now->problems.item[0].line, 3);
}

static void test_makers_named_in_curve_files_keep_parts_apart(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "zth.csv",
                          "part,maker,time,zth\nA,One,1 ms,0.1\nA,Two,1 ms,0.2\n"
                          "A,One,10 ms,0.3\n"),
                     PF_OK);
    assert_int_equal(now->changes.count, 2);
    assert_int_equal(now->changes.item[0].part.thermal[PF_JUNCTION_CASE].point_count, 2);
    assert_int_equal(now->changes.item[1].part.thermal[PF_JUNCTION_CASE].point_count, 1);
}

static void test_curves_of_two_case_temperatures_add_up(void **state)
{
    run *now = *state;
    static const char hot[] =
        "part,pulse,vds,id,case_temperature\nA,1ms,1,50,100\nA,1ms,90,2,100\n";
    assert_int_equal(take(now, "soa.csv", soa), PF_OK);
    assert_int_equal(take(now, "hot.csv", hot), PF_OK);
    assert_int_equal(change_of(now, "A")->part.soa_count, 4);
}

static void test_a_curve_stated_twice_is_refused(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "soa.csv", soa), PF_OK);
    assert_int_equal(take(now, "again.csv", "part,pulse,vds,id\nA,1ms,1,90\nA,1ms,90,4\n"),
                     PF_BAD_INPUT);
    assert_true(has_words(now, PF_SEVERITY_REFUSAL, "twice"));
}

static void test_the_same_curve_file_twice_says_nothing_new(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "soa.csv", soa), PF_OK);
    assert_int_equal(take(now, "soa.csv", soa), PF_OK);
    assert_int_equal(change_of(now, "A")->part.soa_count, 2);
}

static void test_rows_of_a_part_need_not_stand_together(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "soa.csv",
                          "part,pulse,vds,id\nA,1ms,1,100\nB,1ms,1,80\nA,1ms,90,4\n"
                          "B,1ms,50,3\n"),
                     PF_OK);
    assert_int_equal(change_of(now, "A")->part.soa_count, 2);
    assert_int_equal(change_of(now, "B")->part.soa_count, 2);
}

/* --- Repair -------------------------------------------------------------------------------- */

static void test_a_repaired_curve_keeps_its_raw_points(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "soa.csv",
                          "part,pulse,vds,id\nA,1ms,10,40\nA,1ms,1,100\nA,1ms,10,41\n"
                          "A,1ms,90,4\n"),
                     PF_OK);
    const pf_part_change *a = change_of(now, "A");
    assert_int_equal(a->part.soa_count, 3);
    assert_true(a->part.soa[1].id_A == 40.5);
    assert_non_null(a->raw_curves);
    assert_string_equal(a->raw_curves,
                        "soa,25,0.001,10,40\nsoa,25,0.001,1,100\nsoa,25,0.001,10,41\n"
                        "soa,25,0.001,90,4\n");
    assert_true(has_words(now, PF_SEVERITY_NOTE, "averaged"));
}

static void test_a_clean_curve_keeps_none(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "soa.csv", soa), PF_OK);
    assert_null(change_of(now, "A")->raw_curves);
    assert_int_equal(now->problems.count, 0);
}

static void test_a_vertical_edge_stays_as_it_stands(void **state)
{
    run *now = *state;
    assert_int_equal(
        take(now, "soa.csv", "part,pulse,vds,id\nA,1ms,1,100\nA,1ms,90,4\nA,1ms,90,1\n"), PF_OK);
    const pf_part *a = &change_of(now, "A")->part;
    assert_int_equal(a->soa_count, 3);
    assert_true(a->soa[1].id_A == 4 && a->soa[2].id_A == 1);
}

static void test_a_small_fall_of_zth_is_raised_to_a_level(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "zth.csv", "part,time [s],zth\nA,1,0.5\nA,2,0.492\nA,3,0.51\n"),
                     PF_OK);
    const pf_thermal_curve *curve = &change_of(now, "A")->part.thermal[PF_JUNCTION_CASE];
    assert_true(curve->point[1].zth_KpW == 0.5);
}

/* --- Listeners ----------------------------------------------------------------------------- */

static void hear_cell(void *context, const pf_cell_reading *reading)
{
    run *now = context;
    size_t at = strlen(now->heard);
    snprintf(now->heard + at, sizeof now->heard - at, "%zu %s %s: %s -> %s\n", reading->line,
             reading->part, reading->column, reading->text, reading->stored);
}

static void hear_bad_row(void *context, const pf_bad_row *row)
{
    run *now = context;
    size_t at = strlen(now->heard);
    for (size_t i = 0; i < row->header_count && row->cell_count == 0; i++)
        at += (size_t)snprintf(now->heard + at, sizeof now->heard - at, "%s ", row->header[i]);
    at += (size_t)snprintf(now->heard + at, sizeof now->heard - at, "%zu", row->line);
    for (size_t i = 0; i < row->cell_count; i++)
        at += (size_t)snprintf(now->heard + at, sizeof now->heard - at, "|%s", row->cell[i]);
    snprintf(now->heard + at, sizeof now->heard - at, "\n");
}

static void test_a_listener_hears_what_is_stored_for_every_cell(void **state)
{
    run *now = *state;
    now->options.cell = hear_cell;
    assert_int_equal(
        take(now, "p.csv", "part,polarity,vds_max,tj_max,rdson_max @ 10 V\nA,N,0.1kV,175,4L7\n"),
        PF_OK);
    assert_string_equal(now->heard, "2 A polarity: N -> N\n2 A vds_max: 0.1kV -> 100 V\n"
                                    "2 A tj_max: 175 -> 175 degC\n"
                                    "2 A rdson_max @ 10 V: 4L7 -> 4.7 mOhm\n");
}

static void test_good_rows_are_kept_and_bad_ones_handed_over(void **state)
{
    run *now = *state;
    now->options.keep_good = true;
    now->options.bad_row = hear_bad_row;
    assert_int_equal(take(now, "parts.csv",
                          "part,polarity,vds_max,tj_max\nA,N,100,175\nB,N,bad,175\n"
                          "C,N,100\nD,N,60,150\n"),
                     PF_OK);
    assert_string_equal(now->heard, "part polarity vds_max tj_max 1\n3|B|N|bad|175\n4|C|N|100\n");
    assert_int_equal(now->summary.refused_rows, 2);
    assert_false(change_of(now, "A")->refused || change_of(now, "D")->refused);
    assert_true(change_of(now, "B")->refused && change_of(now, "C")->refused);
}

static void test_a_curve_with_a_bad_row_is_kept_out_whole(void **state)
{
    run *now = *state;
    now->options.keep_good = true;
    now->options.bad_row = hear_bad_row;
    assert_int_equal(take(now, "soa.csv",
                          "part,pulse,vds,id\nA,1ms,1,100\nA,1ms,90,bad\nB,1ms,1,80\n"
                          "B,1ms,50,3\n"),
                     PF_OK);
    assert_string_equal(now->heard, "part pulse vds id 1\n2|A|1ms|1|100\n3|A|1ms|90|bad\n");
    assert_false(change_of(now, "A")->soa_given);
    assert_true(change_of(now, "B")->soa_given);
}

static void test_what_concerns_the_whole_file_refuses_it_even_so(void **state)
{
    run *now = *state;
    now->options.keep_good = true;
    now->options.bad_row = hear_bad_row;
    assert_int_equal(
        take(now, "q.csv", "part,polarity,vds_max,tj_max\nA,N,100,175\nB,N,\"100,175\n"),
        PF_BAD_INPUT);
    assert_int_equal(take(now, "h.csv", "part,polarity,vds_max\nA,N,100\n"), PF_BAD_INPUT);
}

/* --- Options and files ---------------------------------------------------------------------- */

static void test_a_column_map_gives_our_names_to_theirs(void **state)
{
    run *now = *state;
    char path[] = "/tmp/pf_map_XXXXXX";
    static const char map[] = "their name,our name\nSachnummer,part\nKanal,polarity\nUds,vds_max\n"
                              "Tj,tj_max\nR on,rdson_max @ 10 V [mOhm]\ntype,ignore\n";
    int file = mkstemp(path);
    assert_true(file >= 0 && write(file, map, sizeof map - 1) == (ssize_t)(sizeof map - 1));
    close(file);
    now->options.map_file = path;
    pf_status status =
        take(now, "own.csv", "Sachnummer,Kanal,Uds,Tj,R_on,type\nA,N,100,175,4.7,x\n");
    unlink(path);
    assert_int_equal(status, PF_OK);
    assert_true(change_of(now, "A")->part.rdson[0].rdson_ohm == 0.0047);
}

static void test_a_file_that_cannot_be_read_is_named(void **state)
{
    run *now = *state;
    assert_int_equal(pf_ratings_read_file("/nowhere/parts.csv", NULL, &now->changes, &now->summary,
                                          &now->problems),
                     PF_FILE);
    assert_string_equal(now->problems.item[0].file, "/nowhere/parts.csv");
    assert_int_equal(
        pf_ratings_read_file("/tmp", NULL, &now->changes, &now->summary, &now->problems), PF_FILE);
}

static void test_a_status_is_kept_in_one_word(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "p.csv",
                          "part,polarity,vds_max,tj_max,status\nA,N,100,175,Not for new designs\n"),
                     PF_OK);
    assert_string_equal(change_of(now, "A")->part.status, "not-for-new");
}

static void test_options_that_mean_nothing_are_a_bad_argument(void **state)
{
    run *now = *state;
    now->options.encoding = "ebcdic";
    assert_int_equal(take(now, "parts.csv", parts), PF_BAD_ARGUMENT);
    now->options.encoding = NULL;
    now->options.decimal = ' ';
    assert_int_equal(take(now, "parts.csv", parts), PF_BAD_ARGUMENT);
}

static void test_a_misspelt_column_is_suggested(void **state)
{
    run *now = *state;
    assert_int_equal(take(now, "p.csv", "part,polarity,vds_max,tj_max,rth_jcc\nA,N,100,175,0.6\n"),
                     PF_OK);
    assert_int_equal(now->problems.warnings, 1);
    assert_string_equal(now->problems.item[0].right, "did you mean rth_jc?");
}

static void test_every_problem_of_a_file_is_told_and_no_more_than_the_limit(void **state)
{
    run *now = *state;
    size_t rows = PF_PROBLEMS_MAX + 100;
    char *text = malloc(40 * rows + 100);
    assert_non_null(text);
    size_t at = (size_t)sprintf(text, "part,time,zth\n");
    for (size_t i = 0; i < rows; i++)
        at += (size_t)sprintf(text + at, "A%zu,1 ms,x\n", i);
    assert_int_equal(take(now, "zth.csv", text), PF_BAD_INPUT);
    free(text);
    assert_int_equal(now->problems.refusals, PF_PROBLEMS_MAX + 1);
    assert_int_equal(now->problems.item[99].line, 101);
}

int main(void)
{
#define CLAIM(name) cmocka_unit_test_setup_teardown(name, begin, end)
    const struct CMUnitTest tests[] = {
        CLAIM(test_files_of_a_run_merge_in_either_order),
        CLAIM(test_curves_may_come_before_their_parts),
        CLAIM(test_a_column_says_not_stated_only_where_it_is_there),
        CLAIM(test_two_makers_of_one_number_need_their_names),
        CLAIM(test_a_second_maker_behind_a_nameless_curve_is_refused),
        CLAIM(test_makers_named_in_curve_files_keep_parts_apart),
        CLAIM(test_curves_of_two_case_temperatures_add_up),
        CLAIM(test_a_curve_stated_twice_is_refused),
        CLAIM(test_the_same_curve_file_twice_says_nothing_new),
        CLAIM(test_rows_of_a_part_need_not_stand_together),
        CLAIM(test_a_repaired_curve_keeps_its_raw_points),
        CLAIM(test_a_clean_curve_keeps_none),
        CLAIM(test_a_vertical_edge_stays_as_it_stands),
        CLAIM(test_a_small_fall_of_zth_is_raised_to_a_level),
        CLAIM(test_a_listener_hears_what_is_stored_for_every_cell),
        CLAIM(test_good_rows_are_kept_and_bad_ones_handed_over),
        CLAIM(test_a_curve_with_a_bad_row_is_kept_out_whole),
        CLAIM(test_what_concerns_the_whole_file_refuses_it_even_so),
        CLAIM(test_a_column_map_gives_our_names_to_theirs),
        CLAIM(test_a_file_that_cannot_be_read_is_named),
        CLAIM(test_a_status_is_kept_in_one_word),
        CLAIM(test_options_that_mean_nothing_are_a_bad_argument),
        CLAIM(test_a_misspelt_column_is_suggested),
        CLAIM(test_every_problem_of_a_file_is_told_and_no_more_than_the_limit),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
