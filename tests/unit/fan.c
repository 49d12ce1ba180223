/* Fans: static basis, several side by side, voltage, power. Expected values worked out by hand in each test.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include <string.h>

#include "part/fan.h"

static struct sp_fan plain(void)
{
    struct sp_fan f = {.fitted = true, .count = 1.0, .curve = {.shutoff = 200.0, .free_flow = 0.5}, .diameter = 0.30,
                       .hub = 0.10, .windmill_loss = 1.2, .rated_voltage = 13.0, .power = 150.0};
    return f;
}

static double pressure(const struct sp_fan *f, double speed, double flow, double density)
{
    struct sp_fan_ready ready;
    struct sp_complaints c = {0};
    assert_true(sp_fan_build(f, 0.2, &ready, NULL, &c));
    double p = sp_fan_pressure(&ready, speed, flow * density, density);
    sp_fan_free(&ready);
    return p;
}

static void static_curve_gains_its_outlet_head(void **state)
{
    (void)state;
    struct sp_fan f = plain();
    f.static_basis = true;
    /* annulus pi/4 (0.09 - 0.01) = 0.0628319 m2; at 0.25 m3/s: 200 (1 - 0.25) + 0.6 (3.978874)^2 */
    check_close(pressure(&f, 1.0, 0.25, 1.2), 150.0 + 0.6 * 3.978873577 * 3.978873577, 1e-9, 0);
}

static void two_fans_share_the_flow(void **state)
{
    (void)state;
    struct sp_fan one = plain(), two = plain();
    two.count = 2.0;
    check_close(pressure(&two, 1.0, 0.5, 1.2), pressure(&one, 1.0, 0.25, 1.2), 1e-12, 0);
}

/* dp = (rho/1.2) (n^2 a0 - a2 Q^2): n 0.8, rho 0.9, Q 0.2: 0.75 (0.64 * 200 - 800 * 0.04) = 72 Pa */
static void fan_laws(void **state)
{
    (void)state;
    struct sp_fan f = plain();
    check_close(pressure(&f, 0.8, 0.2, 0.9), 72.0, 1e-12, 0);
}

/* Beyond its free flow a fan is a windmill: -1.2 * 0.6 * (1/0.0628319)^2 at 1 m3/s, off or on. */
static void windmill_bounds_the_loss(void **state)
{
    (void)state;
    struct sp_fan f = plain();
    double want = -1.2 * 0.6 / (0.06283185307 * 0.06283185307);
    check_close(pressure(&f, 0.0, 1.0, 1.2), want, 1e-9, 0);
    check_close(pressure(&f, 1.0, 1.0, 1.2), want, 1e-9, 0);
}

static void voltage_and_power(void **state)
{
    (void)state;
    struct sp_fan f = plain();
    check_close(sp_motor_speed(13.0, 13.0), 1.0, 1e-15, 0);
    /* 12.0 for 13.5 V: flow down by a tenth, power by a quarter to a third (the trade's figures) */
    check_within(sp_motor_speed(12.0, 13.5), 0.89, 0.91);
    f.count = 2.0;
    check_close(sp_fan_power(&f, 0.5), 2.0 * 150.0 / 8.0, 1e-12, 0);
    check_close(sp_fan_power(&f, -0.1), 0.0, 0, 0);
    f.fitted = false;
    check_close(sp_fan_power(&f, 1.0), 0.0, 0, 0);
}

/* A dead fan windmills though it is told to run; a locked one is 3 times the head in its annulus, both ways. */
static void dead_and_locked(void **state)
{
    (void)state;
    struct sp_fan f = plain(), dead = plain(), stuck = plain();
    dead.health = SP_FAN_DEAD;
    stuck.health = SP_FAN_LOCKED;
    stuck.locked_loss = 3.0;
    for (double flow = -0.5; flow < 1.5; flow += 0.1) {
        assert_true(pressure(&dead, 1.0, flow, 1.2) == pressure(&f, 0.0, flow, 1.2));
        double v = flow / 0.06283185307;
        check_close(pressure(&stuck, 0.7, flow, 1.2), -3.0 * 0.6 * v * fabs(v), 1e-9, 1e-12);
    }
    check_close(sp_fan_power(&dead, 1.0), 0.0, 0, 0);
    check_close(sp_fan_full_speed(&dead, 13.0), 0.0, 0, 0);
    check_close(sp_fan_full_speed(&stuck, 13.0), 0.0, 0, 0);
    check_close(sp_fan_current(&stuck, 1.0, 13.0), 0.0, 0, 0);
}

/* 150 W at 13 V is 11.538 A. A loom that loses 1 V at that: with 14 V at the battery the plug has its 13 V and the
 * fan its rated speed. Below, plug, speed and current fit each other; without a drop nothing changes. */
static void wiring(void **state)
{
    (void)state;
    struct sp_fan f = plain();
    assert_true(sp_fan_full_speed(&f, 12.3) == sp_motor_speed(12.3, 13.0));
    check_close(sp_fan_current(&f, 1.0, 13.0), 150.0 / 13.0, 1e-15, 0);
    f.wiring_drop = 1.0;
    check_close(sp_fan_full_speed(&f, 14.0), 1.0, 1e-13, 0);
    check_close(sp_fan_current(&f, 1.0, 14.0), 150.0 / 13.0, 1e-13, 0);
    for (double battery = 0.01; battery < 30.0; battery *= 1.3) {
        double n = sp_fan_full_speed(&f, battery), amperes = sp_fan_current(&f, n, battery);
        double plug = battery - amperes / (150.0 / 13.0);
        check_close(n, pow(plug / 13.0, 0.9), 1e-9, 0);
        check_close(amperes * plug, 150.0 * n * n * n, 1e-12, 0);
        assert_true(n < sp_motor_speed(battery, 13.0));
    }
    /* the trade's 12.0 V idle battery on an old loom losing 2 V: a sixth of the flow */
    f.wiring_drop = 2.0;
    check_within(1.0 - sp_fan_full_speed(&f, 12.0) / sp_motor_speed(12.0, 13.0), 0.10, 0.17);
    check_close(sp_fan_full_speed(&f, 0.0), 0.0, 0, 0);
    check_close(sp_fan_current(&f, 1.0, 0.0), 0.0, 0, 0);
}

static void static_curve_needs_a_diameter(void **state)
{
    (void)state;
    struct sp_fan f = plain();
    f.static_basis = true;
    f.diameter = NAN;
    struct sp_fan_ready ready;
    struct sp_complaints c = {0};
    assert_false(sp_fan_build(&f, 0.2, &ready, NULL, &c));
    assert_int_equal(c.count, 1);
    sp_complaints_free(&c);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(static_curve_gains_its_outlet_head), cmocka_unit_test(two_fans_share_the_flow),
        cmocka_unit_test(fan_laws), cmocka_unit_test(windmill_bounds_the_loss), cmocka_unit_test(voltage_and_power),
        cmocka_unit_test(static_curve_needs_a_diameter), cmocka_unit_test(dead_and_locked), cmocka_unit_test(wiring),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
