/* test_numeric_curve.c: claims about piecewise power laws. */
#include "numeric/curve.h"
#include "support/near.h"

static const double log_x[] = {0, 1, 3}, log_y[] = {2, 4, 1};

static void test_curve_is_a_straight_line_between_logarithms(void **state)
{
    (void)state;
    assert_near(pf_curve_log_at(log_x, log_y, 3, 0.25), 2.5, 1e-15);
    assert_near(pf_curve_log_at(log_x, log_y, 3, 2), 2.5, 1e-15);
}

static void test_curve_meets_its_own_points(void **state)
{
    (void)state;
    for (size_t i = 0; i < 3; i++)
        assert_near(pf_curve_log_at(log_x, log_y, 3, log_x[i]), log_y[i], 0);
}

static void test_curve_keeps_its_ends_outside_the_points(void **state)
{
    (void)state;
    assert_near(pf_curve_log_at(log_x, log_y, 3, -INFINITY), 2, 0);
    assert_near(pf_curve_log_at(log_x, log_y, 3, 99), 1, 0);
}

static void test_curve_of_one_point_is_flat(void **state)
{
    (void)state;
    assert_near(pf_curve_log_at(log_x, log_y, 1, -5), 2, 0);
    assert_near(pf_curve_log_at(log_x, log_y, 1, 5), 2, 0);
}

static void test_slope_of_a_vertical_line_is_0(void **state)
{
    (void)state;
    assert_near(pf_slope(1, 2, 1, 7), 0, 0);
    assert_near(pf_slope(1, 2, 3, 7), 2.5, 1e-15);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_curve_is_a_straight_line_between_logarithms),
        cmocka_unit_test(test_curve_meets_its_own_points),
        cmocka_unit_test(test_curve_keeps_its_ends_outside_the_points),
        cmocka_unit_test(test_curve_of_one_point_is_flat),
        cmocka_unit_test(test_slope_of_a_vertical_line_is_0),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
