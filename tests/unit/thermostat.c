/* Thermostat: lift, play, lag. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include "part/thermostat.h"

static const struct sp_thermostat wax = {
    .opens = 355.0, .full = 367.0, .hysteresis = 3.0, .lag = 12.0, .lag_still = 40.0};

static void lift(void **state)
{
    (void)state;
    check_close(sp_thermostat_lift(&wax, 355.0), 0.0, 0, 0);
    check_close(sp_thermostat_lift(&wax, 361.0), 0.5, 1e-15, 0);
    check_close(sp_thermostat_lift(&wax, 367.0), 1.0, 0, 0);
    assert_true(sp_thermostat_lift(&wax, 100.0) == 0.0 && sp_thermostat_lift(&wax, 500.0) == 1.0);
    struct sp_thermostat none = wax;
    none.none = true;
    assert_true(sp_thermostat_lift(&none, 250.0) == 1.0);
    struct sp_thermostat plate = wax;
    plate.restrictor = 0.018;
    assert_true(sp_thermostat_lift(&plate, 250.0) == 1.0);
}

/* Nothing up to its power, all of it from a tenth above, half in the middle; no kink at either end. */
static void mapped(void **state)
{
    (void)state;
    assert_true(sp_thermostat_mapped(&wax, 1e6) == 0.0);
    struct sp_thermostat m = wax;
    m.mapped_shift = 18.0;
    m.mapped_power = 60e3;
    assert_true(sp_thermostat_mapped(&m, -20e3) == 0.0 && sp_thermostat_mapped(&m, 60e3) == 0.0);
    assert_true(sp_thermostat_mapped(&m, 66.1e3) == 18.0 && sp_thermostat_mapped(&m, 1e9) == 18.0);
    check_close(sp_thermostat_mapped(&m, 63e3), 9.0, 1e-12, 0);
    double before = 0.0, slope = 0.0;
    for (double power = 59e3; power < 67e3; power += 10.0) {
        double now = sp_thermostat_mapped(&m, power), rise = now - before;
        check_within(rise - slope, -1e-3, 1e-3);
        before = now;
        slope = rise;
    }
    check_close(sp_thermostat_lift(&m, 349.0 + sp_thermostat_mapped(&m, 63e3)), 0.25, 1e-12, 0);
}

static void play(void **state)
{
    (void)state;
    check_close(sp_thermostat_effective(&wax, SP_PLAY_OPENING, 360.0, 0.0), 360.0, 0, 0);
    check_close(sp_thermostat_effective(&wax, SP_PLAY_SHUTTING, 360.0, 0.0), 363.0, 0, 0);
    check_close(sp_thermostat_effective(&wax, SP_PLAY_HELD, 360.0, 361.5), 361.5, 0, 0);
    /* Where the modes meet nothing jumps: held at the turning point, and when it is taken up. */
    double turn = 364.0;
    check_close(sp_thermostat_effective(&wax, SP_PLAY_HELD, turn, turn),
                sp_thermostat_effective(&wax, SP_PLAY_OPENING, turn, 0.0), 0, 0);
    check_close(sp_thermostat_effective(&wax, SP_PLAY_SHUTTING, turn - 3.0, 0.0),
                sp_thermostat_effective(&wax, SP_PLAY_HELD, turn - 3.0, turn), 0, 0);
}

static void lag(void **state)
{
    (void)state;
    check_close(sp_thermostat_rate(&wax, 0.0, 2e-3), 1.0 / 40.0, 1e-15, 0);
    check_close(sp_thermostat_rate(&wax, -1.0, 2e-3), 1.0 / 40.0, 1e-15, 0);
    check_close(sp_thermostat_rate(&wax, 2e-3, 2e-3), 1.0 / 12.0, 1e-15, 0);
    check_close(sp_thermostat_rate(&wax, 9e-3, 2e-3), 1.0 / 12.0, 1e-15, 0);
    double before = 0.0;
    for (double q = 0.0; q < 3e-3; q += 1e-5) {
        double rate = sp_thermostat_rate(&wax, q, 2e-3);
        assert_true(rate >= before);
        before = rate;
    }
    /* half the flow: 0.5^0.6 = 0.659754 of the way */
    check_close(sp_thermostat_rate(&wax, 1e-3, 2e-3), 0.025 + (1.0 / 12.0 - 0.025) * 0.659754, 1e-6, 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(lift), cmocka_unit_test(mapped),
                                       cmocka_unit_test(play), cmocka_unit_test(lag)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
