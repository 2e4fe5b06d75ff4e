/* test_rank_condition.c: claims about the comparisons of --where. */
#include "support/near.h"
#include "support/settings.h"

#include <passfet/ranking.h>
#include <string.h>

static bool met(const char *condition, const char *part_text)
{
    pf_part part;
    pf_condition read;
    pf_error error = {0};
    pf_part_init(&part);
    part_state(&part, part_text);
    if (pf_condition_read(condition, &read, &error) != PF_OK) fail_msg("%s", error.text);
    bool is = pf_condition_met(&read, &part);
    pf_part_clear(&part);
    return is;
}

static void test_ratings_compare_by_every_sign(void **state)
{
    (void)state;
    const char part[] = "vds_max=80";
    assert_true(met("vds_max>=80", part) && !met("vds_max>=80.1", part));
    assert_true(met("vds_max<=80", part) && !met("vds_max<=79", part));
    assert_true(met("vds_max=80", part) && !met("vds_max=81", part));
    assert_true(met("vds_max!=81", part) && !met("vds_max!=80", part));
    assert_true(met("vds_max>79", part) && !met("vds_max>80", part));
    assert_true(met("vds_max<81", part) && !met("vds_max<80", part));
}

static void test_values_may_carry_units_and_blanks(void **state)
{
    (void)state;
    assert_true(met("vds_max >= 0.08 kV", "vds_max=80"));
    assert_true(met(" crss<= 10 pF", "crss=9e-12"));
    assert_true(met("avalanche_energy>100mJ", "avalanche_energy=0.2"));
}

static void test_a_rating_that_is_not_stated_meets_no_condition(void **state)
{
    (void)state;
    static const char *const signs[] = {">=", "<=", "=", "!=", ">", "<"};
    for (size_t i = 0; i < 6; i++) {
        char text[32] = "vds_max";
        strcat(strcat(text, signs[i]), "80");
        assert_false(met(text, "part=A"));
    }
    assert_false(met("package!=LFP8", "part=A"));
    assert_false(met("polarity!=N", "part=A"));
}

static void test_texts_compare_in_either_case(void **state)
{
    (void)state;
    assert_true(met("package=lfp8", "package=LFP8"));
    assert_false(met("package=LFP", "package=LFP8"));
    assert_true(met("status!=obsolete", "status=active"));
    assert_false(met("status!=obsolete", "status=Obsolete"));
    assert_true(met("PACKAGE=LFP8", "package=LFP8"));
}

static void test_polarity_is_a_condition_too(void **state)
{
    (void)state;
    assert_true(met("polarity=n", "channel=N"));
    assert_true(met("polarity!=N", "channel=P"));
}

static void test_what_is_not_a_condition_is_refused_with_its_text(void **state)
{
    (void)state;
    static const char *const wrong[] = {
        "vds_max",         "vds_max>=",
        "vds_max>=eighty", "vds_max>=80 A",
        "beauty>3",        "package>=LFP8",
        "package=",        ">=80",
        "vds_max=>80",     "",
        "polarity>N",      "vds_max!80",
    };
    for (size_t i = 0; i < sizeof wrong / sizeof *wrong; i++) {
        pf_condition condition;
        pf_error error = {0};
        if (pf_condition_read(wrong[i], &condition, &error) != PF_BAD_INPUT)
            fail_msg("accepted `%s`", wrong[i]);
        assert_non_null(strstr(error.text, wrong[i]));
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_ratings_compare_by_every_sign),
        cmocka_unit_test(test_values_may_carry_units_and_blanks),
        cmocka_unit_test(test_a_rating_that_is_not_stated_meets_no_condition),
        cmocka_unit_test(test_texts_compare_in_either_case),
        cmocka_unit_test(test_polarity_is_a_condition_too),
        cmocka_unit_test(test_what_is_not_a_condition_is_refused_with_its_text),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
