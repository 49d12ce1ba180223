/* Header tank: the gas spring and the cap. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include "part/tank.h"

static const double R = 8.314462618, ambient = 101325.0;
static const struct sp_tank tank = {.volume = 1.6e-3,
                                    .air_space = 0.8e-3,
                                    .fill_temperature = 293.15,
                                    .cap = 120e3,
                                    .vacuum = 5e3,
                                    .compliance = 3e-10};

static struct sp_tank_inputs inputs(double more_liquid, double T, double vapour)
{
    return (struct sp_tank_inputs){.air = sp_tank_filling(&tank, 0.0, ambient),
                                   .liquid = 8e-3 + more_liquid,
                                   .system = 8e-3 + 0.8e-3,
                                   .temperature = T,
                                   .vapour = vapour,
                                   .ambient = ambient};
}

/* The answer satisfies what it is the root of. */
static void gas_law(void **state)
{
    (void)state;
    for (double compliance = 1e-14; compliance < 1e-6; compliance *= 10.0)
        for (double more = -2e-3; more < 2e-3; more += 1e-4)
            for (double vapour = 0.0; vapour < 3e5; vapour += 5e4) {
                struct sp_tank t = tank;
                t.compliance = compliance;
                struct sp_tank_inputs in = inputs(more, 360.0, vapour);
                struct sp_tank_state s = sp_tank_state(&t, &in);
                assert_true(s.gas > 0.0 && s.pressure > vapour && isfinite(s.pressure));
                check_close((s.pressure - vapour) * s.gas, in.air * R * 360.0, 1e-9, 0);
                double want = in.system + compliance * (s.pressure - ambient) - in.liquid;
                check_close(s.gas, want, 1e-6, 1e-12 + 1e-9 * compliance * s.pressure);
            }
}

static void as_filled(void **state)
{
    (void)state;
    struct sp_tank_inputs in = inputs(0.0, 293.15, 2e3);
    in.air = sp_tank_filling(&tank, 2e3, ambient);
    struct sp_tank_state s = sp_tank_state(&tank, &in);
    check_close(s.pressure, ambient, 1e-12, 0);
    check_close(s.gas, 0.8e-3, 1e-12, 0);
    assert_true(sp_tank_filling(&tank, 2e5, ambient) == 0.0); /* vapour alone: no air */
    in.air = 0.0;
    s = sp_tank_state(&tank, &in); /* no air at all: vapour's pressure while there is room */
    check_close(s.pressure, 2e3, 1e-9, 0);
    in.liquid = in.system + tank.compliance * (2e3 - ambient);
    s = sp_tank_state(&tank, &in); /* and full to the brim */
    assert_true(isfinite(s.pressure) && isfinite(s.gas));
    in.air = -1e-9; /* a solver's undershoot */
    assert_true(isfinite(sp_tank_state(&tank, &in).pressure));
}

static void rises(void **state)
{
    (void)state;
    double before = 0.0;
    for (double more = -5e-4; more < 2e-3; more += 1e-5) { /* liquid pressed in, past full: hoses give */
        struct sp_tank_inputs in = inputs(more, 350.0, 3e4);
        double p = sp_tank_state(&tank, &in).pressure;
        assert_true(p > before);
        before = p;
    }
}

static struct sp_tank_vent vent_at(double pressure, double gas, double left)
{
    struct sp_tank_inputs in = inputs(0.0, 350.0, 3e4);
    struct sp_tank_state s = {ambient + pressure, gas};
    return sp_tank_vent(&tank, &in, &s, left);
}

static void cap(void **state)
{
    (void)state;
    struct sp_tank_vent v = vent_at(50e3, 1e-3, 1e-3);
    assert_true(v.air == 0.0 && v.liquid == 0.0); /* between the settings nothing passes */
    v = vent_at(130e3, 1e-3, 1e-3);
    assert_true(v.air > 0.0);
    check_within(v.liquid, 0.0, 1e-9); /* gas first */
    v = vent_at(130e3, 1e-7, 1e-3);
    assert_true(v.liquid > 0.9e-4 && v.liquid < 1.1e-4); /* 10 kPa over: 1e-8 m3/s per Pa */
    v = vent_at(130e3, 0.0, 1e-3);
    assert_true(v.air == 0.0 && v.liquid > 0.0);
    v = vent_at(130e3, 1e-7, 0.0);
    assert_true(v.liquid == 0.0); /* no more than there is */
    v = vent_at(130e3, 1e-7, -1e-6);
    assert_true(v.liquid == 0.0);
    v = vent_at(-15e3, 1e-3, 1e-3);
    assert_true(v.air < 0.0 && v.liquid == 0.0); /* the vacuum valve lets air in */
    check_close(v.air, -1e-8 * 10e3 * ambient / (R * 350.0), 1e-6, 0);
    double before = -INFINITY;
    for (double p = -40e3; p < 400e3; p += 100.0) { /* outflow rises with pressure, without a step */
        double air = vent_at(p, 1e-3, 1e-3).air;
        assert_true(air >= before);
        if (isfinite(before)) check_within(air - before, 0.0, 1.2e-8 * 100.0 * ambient * 10.0 / (R * 350.0));
        before = air;
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(gas_law), cmocka_unit_test(as_filled),
                                       cmocka_unit_test(rises), cmocka_unit_test(cap)};
    return cmocka_run_group_tests(tests, NULL, NULL);
}
