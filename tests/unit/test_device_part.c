/* test_device_part.c: claims about what a part states, and about keeping it. */
#include "support/near.h"
#include "support/settings.h"

#include <passfet/change.h>
#include <passfet/part.h>

static void test_nothing_is_stated_at_first(void **state)
{
    (void)state;
    size_t count;
    const pf_rating_field *field = pf_rating_fields(&count);
    pf_part part;
    pf_part_init(&part);
    for (size_t i = 0; i < count; i++)
        assert_not_stated(pf_part_rating_value(&part, &field[i]));
    assert_null(part.name);
    assert_int_equal(part.polarity, PF_POLARITY_NONE);
    assert_int_equal(part.soa_count + part.rdson_count, 0);
    pf_part_clear(&part);
}

static void test_rdson_is_kept_by_rising_gate_drive(void **state)
{
    (void)state;
    pf_part part;
    pf_part_init(&part);
    part_state(&part, "rdson=10:0.004,4.5:0.006,6:0.005");
    assert_int_equal(part.rdson_count, 3);
    assert_near(part.rdson[0].vgs_V, 4.5, 0);
    assert_near(part.rdson[1].rdson_ohm, 0.005, 0);
    assert_near(part.rdson[2].vgs_V, 10, 0);
    pf_part_clear(&part);
}

static void test_rdson_at_the_same_gate_drive_replaces(void **state)
{
    (void)state;
    pf_part part;
    pf_part_init(&part);
    assert_int_equal(pf_part_set_rdson(&part, 10, 0.004), PF_OK);
    assert_int_equal(pf_part_set_rdson(&part, 10, 0.003), PF_OK);
    assert_int_equal(part.rdson_count, 1);
    assert_near(part.rdson[0].rdson_ohm, 0.003, 0);
    pf_part_clear(&part);
}

static void test_rdson_refuses_what_is_not_positive_and_a_ninth_gate_drive(void **state)
{
    (void)state;
    pf_part part;
    pf_part_init(&part);
    assert_int_equal(pf_part_set_rdson(&part, 10, 0), PF_BAD_ARGUMENT);
    assert_int_equal(pf_part_set_rdson(&part, -4.5, 1), PF_BAD_ARGUMENT);
    assert_int_equal(pf_part_set_rdson(&part, 10, NAN), PF_BAD_ARGUMENT);
    assert_int_equal(pf_part_set_rdson(&part, INFINITY, 1), PF_BAD_ARGUMENT);
    for (int i = 1; i <= PF_RDSON_MAX; i++)
        assert_int_equal(pf_part_set_rdson(&part, i, 0.01), PF_OK);
    assert_int_equal(pf_part_set_rdson(&part, 99, 0.01), PF_LIMIT);
    pf_part_clear(&part);
}

static void test_soa_is_sorted_and_keeps_the_given_order_at_one_voltage(void **state)
{
    (void)state;
    pf_part part;
    pf_part_init(&part);
    part_state(&part, "soa=dc/1:9;1e-2/10:5,10:4,1:8;1e-3@75/1:7;1e-3/1:6");
    const double expected[] = {6, 8, 5, 4, 9, 7};
    assert_int_equal(part.soa_count, 6);
    for (size_t i = 0; i < 6; i++)
        assert_near(part.soa[i].id_A, expected[i], 0);
    pf_part_clear(&part);
}

static void test_zth_points_and_foster_pairs_take_each_others_place(void **state)
{
    (void)state;
    pf_part part;
    pf_part_init(&part);
    const pf_thermal_curve *curve = &part.thermal[PF_JUNCTION_CASE];
    part_state(&part, "zth=1e-2:0.5,1e-3:0.1");
    assert_near(curve->point[0].time_s, 1e-3, 0);
    part_state(&part, "foster=1:1,2:0.1");
    assert_int_equal(curve->point_count, 0);
    assert_near(curve->pair[0].tau_s, 0.1, 0);
    part_state(&part, "zth=1:1");
    assert_int_equal(curve->pair_count, 0);
    assert_int_equal(curve->point_count, 1);
    pf_part_clear(&part);
}

static const char full[] = "part=A maker=B channel=P vds_max=40 tj_max=175 rdson=10:0.01 "
                           "soa=1e-3/1:10;dc/1:1 zth=1e-3:0.1 zth_ambient=1:20";

static void test_a_copy_is_equal_and_owns_its_memory(void **state)
{
    (void)state;
    pf_part part, copy;
    pf_part_init(&part);
    pf_part_init(&copy);
    part_state(&part, full);
    assert_int_equal(pf_part_copy(&copy, &part), PF_OK);
    assert_true(pf_part_equal(&part, &copy));
    assert_ptr_not_equal(part.soa, copy.soa);
    assert_ptr_not_equal(part.name, copy.name);
    pf_part_clear(&part);
    assert_string_equal(copy.name, "A");
    pf_part_clear(&copy);
}

static void test_any_change_makes_parts_unequal(void **state)
{
    (void)state;
    static const char *const change[] = {
        "part=C",  "maker=",           "channel=N",     "vds_max=41",
        "tj_max=", "rdson=10:0.011",   "soa=1e-3/1:10", "soa=1e-3/1:11;dc/1:1",
        "zth=",    "zth_ambient=1:21", "price=1",
    };
    for (size_t i = 0; i < sizeof change / sizeof *change; i++) {
        pf_part one, other;
        pf_part_init(&one);
        pf_part_init(&other);
        part_state(&one, full);
        part_state(&other, full);
        part_state(&other, change[i]);
        if (pf_part_equal(&one, &other)) fail_msg("equal after %s", change[i]);
        pf_part_clear(&one);
        pf_part_clear(&other);
    }
}

static void test_an_import_changes_what_it_states_and_nothing_else(void **state)
{
    (void)state;
    pf_part part;
    pf_part_change change;
    pf_part_init(&part);
    pf_part_change_init(&change);
    part_state(&part, full);
    part_state(&change.part, "vds_max=60 soa=1e-2/1:5");
    size_t count;
    const pf_rating_field *field = pf_rating_fields(&count);
    for (size_t i = 0; i < count; i++)
        if (field[i].offset == offsetof(pf_part, vds_max_V)) change.ratings_given |= 1u << i;
    change.soa_given = true;
    assert_int_equal(pf_part_apply(&part, &change), PF_OK);
    assert_near(part.vds_max_V, 60, 0);
    assert_near(part.tj_max_degC, 175, 0);
    assert_int_equal(part.soa_count, 1);
    assert_int_equal(part.rdson_count, 1);
    assert_int_equal(part.thermal[PF_JUNCTION_CASE].point_count, 1);
    assert_int_equal(part.polarity, PF_P_CHANNEL);
    pf_part_change_clear(&change);
    pf_part_clear(&part);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_nothing_is_stated_at_first),
        cmocka_unit_test(test_rdson_is_kept_by_rising_gate_drive),
        cmocka_unit_test(test_rdson_at_the_same_gate_drive_replaces),
        cmocka_unit_test(test_rdson_refuses_what_is_not_positive_and_a_ninth_gate_drive),
        cmocka_unit_test(test_soa_is_sorted_and_keeps_the_given_order_at_one_voltage),
        cmocka_unit_test(test_zth_points_and_foster_pairs_take_each_others_place),
        cmocka_unit_test(test_a_copy_is_equal_and_owns_its_memory),
        cmocka_unit_test(test_any_change_makes_parts_unequal),
        cmocka_unit_test(test_an_import_changes_what_it_states_and_nothing_else),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
