/* The coolant loop: what is kept, what rises with what, the pump's speed, and hard cases.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "fixture.h"

static struct fixture fixture;

struct rig {
    struct sp_design d;
    struct sp_circuit c;
};

static void prepare(struct rig *r)
{
    struct sp_complaints c = {0};
    assert_true(sp_circuit_build(&r->d, &r->c, &c));
}

static struct sp_loop_state solve(const struct rig *r, double speed, double lift, double hot, double cool)
{
    struct sp_loop_guess guess = {.flow = {0.0, 0.0}};
    struct sp_loop_inputs in = {.speed = speed, .lift = lift, .hot = hot, .cool = {cool}};
    struct sp_loop_state s;
    assert_int_equal(sp_loop_solve(&r->c.loop, &in, &guess, &s), SP_OK);
    return s;
}

static void flows_and_pressures_close(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    prepare(&r);
    for (double speed = 0.01; speed < 1.5; speed *= 1.6)
        for (double lift = 0.0; lift <= 1.0; lift += 0.125)
            for (double hot = 240.0; hot < 400.0; hot += 30.0) {
                struct sp_loop_state s = solve(&r, speed, lift, hot, hot - 8.0);
                check_close(s.radiator + s.bypass + s.bleed, s.pump, 1e-12, 0);
                assert_true(s.string[0] == s.radiator && s.heater == 0.0 && s.head_factor == 1.0);
                check_close(s.bleed, r.d.tank.bleed * s.pump, 1e-12, 0);
                assert_true(s.radiator > 0.0 && s.bypass >= 0.0 && s.rise > 0.0 && s.jacket_drop > 0.0);
                check_close(s.rise, sp_curve_at(&r.c.loop.pump, speed, s.pump), 1e-12, 0);
                /* bypass: what drives both branches, soft below a pascal */
                double parallel = s.rise - s.jacket_drop,
                       open = fmax(1.0 - lift / r.d.thermostat.bypass_shut, 0.0);
                const struct sp_resistance *b = &r.d.hoses.bypass;
                double rho = sp_coolant_density(&r.d.coolant.fluid, hot);
                if (parallel > 100.0)
                    check_close(s.bypass, open * b->flow * sqrt(parallel / (b->drop * rho / 1000.0)), 1e-4,
                                1e-12);
            }
    sp_circuit_free(&r.c);
}

static void opening_gives_more(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    prepare(&r);
    double before = 0.0;
    for (double lift = 0.0; lift <= 1.0; lift += 0.01) {
        double q = solve(&r, 0.8, lift, 363.0, 350.0).radiator;
        assert_true(q > before);
        before = q;
    }
    before = 0.0;
    for (double speed = 0.001; speed < 1.5; speed *= 1.1) {
        double q = solve(&r, speed, 0.5, 363.0, 350.0).radiator;
        assert_true(q > before);
        before = q;
    }
    /* cold, thick coolant flows less */
    assert_true(solve(&r, 0.8, 1.0, 250.0, 250.0).radiator < solve(&r, 0.8, 1.0, 363.0, 350.0).radiator);
    sp_circuit_free(&r.c);
}

static void without_thermostat(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    r.d.thermostat.none = true;
    r.d.tank.bleed = 0.0;
    prepare(&r);
    struct sp_loop_state s = solve(&r, 1.0, 1.0, 363.0, 350.0);
    assert_true(s.bypass == 0.0);
    check_close(s.radiator, s.pump, 1e-12, 0);
    sp_circuit_free(&r.c);
}

/* A valve that shuts to nothing: the bypass takes all, the rest is a whiff. And with the bypass shut too (a
 * lift at which the disc has closed, without leak below it) the pump works against its jacket alone. */
static void tight_valve(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    r.d.thermostat.leak = 0.0;
    prepare(&r);
    struct sp_loop_state s = solve(&r, 1.0, 0.0, 363.0, 350.0);
    assert_true(isfinite(s.radiator) && s.radiator >= 0.0 && s.radiator < 1e-5 * s.pump &&
                s.bypass > 0.9 * s.pump);
    r.d.thermostat.bypass_shut = 0.05;
    s = solve(&r, 1.0, 0.05, 363.0, 350.0);
    assert_true(s.bypass == 0.0 && s.radiator > 0.0);
    sp_circuit_free(&r.c);
}

/* From wherever the search begins, shut after open and slow after fast, the flows are the same. */
static void whatever_the_guess(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    r.d.thermostat.leak = 0.0;
    prepare(&r);
    struct sp_loop_guess kept = {.flow = {0.0, 0.0}};
    unsigned long dice = 12345;
    for (int i = 0; i < 20000; ++i) {
        dice = dice * 1103515245UL + 12345UL;
        double lift = (dice >> 16) % 3 ? pow(10.0, -9.0 * (double)((dice >> 18) % 1000) / 1000.0) : 0.0;
        double speed = 0.02 + (double)((dice >> 20) % 100) / 100.0;
        struct sp_loop_state a, b = solve(&r, speed, lift, 363.0, 350.0);
        struct sp_loop_inputs in = {.speed = speed, .lift = lift, .hot = 363.0, .cool = {350.0}};
        assert_int_equal(sp_loop_solve(&r.c.loop, &in, &kept, &a), SP_OK);
        check_close(a.radiator, b.radiator, 1e-7, 1e-15);
        check_close(a.pump, b.pump, 1e-7, 0);
    }
    sp_circuit_free(&r.c);
}

static void standing_pump(void **state)
{
    (void)state;
    struct rig r = {.d = *fixture.base};
    prepare(&r);
    const double speeds[] = {0.0, -1.0, 1e-5, NAN};
    for (int i = 0; i < 4; ++i) {
        struct sp_loop_state s = solve(&r, speeds[i], 0.5, 363.0, 350.0);
        assert_true(s.pump == 0.0 && s.radiator == 0.0 && s.bypass == 0.0 && s.bleed == 0.0 && s.rise == 0.0);
    }
    sp_circuit_free(&r.c);
}

static void pump_speed(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    d.pump.electric = false;
    d.pump.ratio = 1.2;
    d.pump.speed = 100.0;
    struct sp_pump_wish w = {.engine_speed = 50.0, .engine_on = true, .allowed = true, .volts = 14.0};
    check_close(sp_pump_speed(&d, &w), 0.6, 1e-15, 0);
    w.engine_on = false;
    assert_true(sp_pump_speed(&d, &w) == 0.0);
    d.pump.electric = true;
    d.pump.rated_voltage = 13.0;
    check_close(sp_pump_speed(&d, &w), pow(14.0 / 13.0, 0.9), 1e-12, 0);
    w.volts = 12.0;
    check_close(sp_pump_speed(&d, &w), pow(12.0 / 13.0, 0.9), 1e-12, 0);
    w.allowed = false;
    assert_true(sp_pump_speed(&d, &w) == 0.0);
    w.allowed = w.engine_on = true;
    d.pump.failed = true;
    assert_true(sp_pump_speed(&d, &w) == 0.0);
    d.pump.electric = false;
    assert_true(sp_pump_speed(&d, &w) == 0.0);
}

/* Each controller at its corners and half way, at rated voltage; and no step on the way. */
static void controllers(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    struct sp_pump *p = &d.pump;
    p->electric = true;
    p->rated_voltage = 13.0;
    p->least = 0.2;
    struct sp_pump_wish w = {.engine_on = true, .allowed = true, .volts = 13.0, .coolant = 300.0};
    p->law = SP_PUMP_OVER_TEMPERATURE;
    p->from = 350.0;
    p->to = 370.0;
    check_close(sp_pump_speed(&d, &w), 0.2, 1e-15, 0);
    w.coolant = 360.0;
    check_close(sp_pump_speed(&d, &w), 0.6, 1e-15, 0);
    w.coolant = 400.0;
    check_close(sp_pump_speed(&d, &w), 1.0, 1e-15, 0);
    w.volts = 6.5; /* the controller has what the voltage leaves */
    check_close(sp_pump_speed(&d, &w), pow(0.5, 0.9), 1e-15, 0);
    w.volts = 13.0;
    p->law = SP_PUMP_OVER_SPEED;
    p->full_at = 80.0;
    const double turns[] = {0.0, 10.0, 40.0, 80.0, 150.0}, share[] = {0.2, 0.2, 0.5, 1.0, 1.0};
    for (int i = 0; i < 5; ++i) {
        w.engine_speed = turns[i];
        check_close(sp_pump_speed(&d, &w), share[i], 1e-15, 0);
    }
    p->law = SP_PUMP_PULSING;
    p->target = 358.0;
    double before = 0.0;
    for (w.coolant = 300.0; w.coolant < 370.0; w.coolant += 0.01) {
        w.pulse_off = false;
        assert_true(sp_pump_speed(&d, &w) == 1.0);
        w.pulse_off = true;
        double rest = sp_pump_speed(&d, &w);
        assert_true(w.coolant > 357.0 || rest == 0.0);
        assert_true(w.coolant < 358.001 || rest == 1.0);
        check_within(rest - before, 0.0, 0.0101);
        before = rest;
    }
}

static int begin(void **state)
{
    (void)state;
    fixture = fixture_open();
    return 0;
}

static int end(void **state)
{
    (void)state;
    fixture_close(&fixture);
    return 0;
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(flows_and_pressures_close),
        cmocka_unit_test(opening_gives_more),
        cmocka_unit_test(without_thermostat),
        cmocka_unit_test(tight_valve),
        cmocka_unit_test(whatever_the_guess),
        cmocka_unit_test(standing_pump),
        cmocka_unit_test(pump_speed),
        cmocka_unit_test(controllers),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
