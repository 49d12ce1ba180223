/* Own behaviour of road load and gears. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include "part/road.h"

static double ratios[] = {12.0, 8.0, 5.0};

static struct sp_body sample(void)
{
    return (struct sp_body){.mass = 1000.0,
                            .frontal_area = 2.0,
                            .drag_coefficient = 0.3,
                            .rolling = 0.01,
                            .rotating = 1.05,
                            .driveline = 0.9,
                            .wheel_radius = 0.3,
                            .gears = {3, 1, ratios},
                            .shift_speed = 90.0};
}

static void parts_of_force(void **state)
{
    (void)state;
    struct sp_body b = sample();
    double still = sp_road_force(&b, 10.0, 0.0, 1.2, 0.0, 0.0);
    check_close(still, 98.0665, 1e-12, 0.0);
    check_close(sp_road_force(&b, 10.0, 15.0, 1.2, 0.0, 0.0) - still, 0.36 * 225.0, 1e-12, 0.0);
    check_close(sp_road_force(&b, 10.0, -5.0, 1.2, 0.0, 0.0) - still, -0.36 * 25.0, 1e-12, 0.0);
    check_close(sp_road_force(&b, 10.0, 0.0, 1.2, 0.0, 2.0) - still, 2100.0, 1e-12, 0.0);
    /* 1 in 1 is 45 degrees */
    check_close(sp_road_force(&b, 10.0, 0.0, 1.2, 1.0, 0.0), 9806.65 * sqrt(0.5) * 1.01, 1e-12, 0.0);
    check_close(sp_road_force(&b, -1.0, 0.0, 1.2, 0.0, 0.0), -98.0665, 1e-12, 0.0);
}

static void power_and_brakes(void **state)
{
    (void)state;
    struct sp_body b = sample();
    check_close(sp_road_power(&b, 900.0, 10.0, 5e3), 10e3, 1e-12, 0.0);
    check_close(sp_road_power(&b, -400.0, 10.0, 5e3), -3.6e3, 1e-12, 0.0);
    check_close(sp_road_power(&b, -4000.0, 10.0, 5e3), -5e3, 1e-12, 0.0);
    check_close(sp_road_power(&b, 900.0, 0.0, 5e3), 0.0, 0.0, 0.0);
}

static void gears(void **state)
{
    (void)state;
    struct sp_body b = sample();
    double turn = 2.0 * acos(-1.0) * 0.3;
    check_close(sp_road_engine_speed(&b, 0.0, 14.0), 14.0, 0.0, 0.0);
    check_close(sp_road_engine_speed(&b, 5.0 * turn, 14.0), 60.0, 1e-12, 0.0);
    check_close(sp_road_engine_speed(&b, 7.6 * turn, 14.0), 60.8, 1e-12, 0.0); /* first would turn 91.2 */
    check_close(sp_road_engine_speed(&b, 12.0 * turn, 14.0), 60.0, 1e-12, 0.0);
    check_close(sp_road_engine_speed(&b, 30.0 * turn, 14.0), 150.0, 1e-12, 0.0); /* no gear left */
    b.gears.rows = 0;
    assert_true(isnan(sp_road_engine_speed(&b, 10.0, 14.0)));
    b = sample();
    b.wheel_radius = NAN;
    assert_true(isnan(sp_road_engine_speed(&b, 10.0, 14.0)));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(parts_of_force),
        cmocka_unit_test(power_and_brakes),
        cmocka_unit_test(gears),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
