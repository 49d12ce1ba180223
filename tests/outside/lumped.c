/* The circuit brought down to problems with a solution on paper.
 *
 * Closed forms and numbers: two coupled masses by eigen-analysis, the ripple of a first-order lag under a
 * square wave, affinity of pumps, the ideal gas in a tank. How the car is made that simple: coolant with
 * constant properties; metal and coolant of given capacities; no volume elsewhere (the least the circuit
 * takes, 10 ml a place, is counted); flow and air so large that the core is one conductance to the air of one
 * temperature. SPDX-License-Identifier: GPL-3.0-or-later */
#include "fixture.h"

static struct fixture fixture;

enum { HEAT_CELLS = 12 };

/* Engine heat equals the power asked for: a table over two speeds and two powers. */
static double heat_is_power[HEAT_CELLS] = {1, 0, 0, 1, 1e6, 1e6, 1000, 0, 0, 1000, 1e6, 1e6};

static const double cp = 3551.0, density = 1030.95; /* of the frozen coolant */
static const double least = 1e-5;                   /* m3 of a place without volume */

/* Metal and jacket alone; the pump stands, nothing is lost. */
static struct sp_design two_masses(double metal, double coolant, double between)
{
    struct sp_design d = *fixture.base;
    fixture_freeze(&d.coolant.fluid);
    d.engine.heat_law = SP_HEAT_TABLE;
    d.engine.heat_table = (struct sp_table){4, 3, heat_is_power};
    d.engine.idle_heat = NAN;
    d.engine.gas_temperature = NAN;
    d.engine.metal_capacity = metal;
    d.engine.coolant_volume = coolant / (cp * density);
    d.engine.skin_standing = d.engine.skin_moving = 0.0;
    d.engine.conductance_still = 1e4; /* standing or not, all of it is there */
    d.engine.conductance = between / d.engine.conductance_still;
    d.hoses.skin = d.tank.skin = 0.0;
    d.tank.bleed = 0.0;
    d.tank.volume = d.tank.air_space;
    d.pump.electric = false;
    d.pump.ratio = 1e-9;
    d.duct[0].fan[0].fitted = false;
    d.limits.coolant.stop = 5000.0;
    d.limits.boil_margin = NAN;
    d.start = (struct sp_start){.coolant = d.air.ambient, .metal = NAN, .radiator = NAN};
    return d;
}

/* The same with a sink of `to_air` W/K on the coolant: a core that is one conductance, in a wind of some
 * 50 t/s, and coolant of some 6 t/s. Hoses and core are places without volume and count as coolant. */
static struct sp_design with_sink(double metal, double coolant, double between, double to_air)
{
    struct sp_design d = two_masses(metal, coolant, between);
    d.engine.coolant_volume -= 3.0 * least;
    d.thermostat.none = true;
    d.pump.ratio = 1.0;
    d.pump.speed = 100.0;
    d.pump.curve = (struct sp_curve_design){1e5, 12.0, {0, 0, NULL}};
    d.hoses.length_out = d.hoses.length_back = 1e-9;
    d.hoses.bore_out = d.hoses.bore_back = 2.0;
    d.hoses.bends = 0.0;
    d.hoses.jacket = (struct sp_resistance){6.0, 100.0};
    struct sp_core *c = &d.duct[0].core[0];
    c->width = 50.0;
    c->height = 40.0;
    c->drop_law = SP_DROP_COEFFICIENT;
    c->coefficient = 1.0;
    c->free_area_ratio = 1.0;
    c->heat_law = SP_CORE_POWER;
    c->air_conductance = to_air;
    c->air_exponent = 1e-12;
    c->at_face_velocity = 10.0;
    c->heat_at_density = 1.2;
    c->coolant_conductance = 1e9;
    c->coolant_exponent = 0.8;
    c->at_coolant_flow = 6000.0;
    c->heat_factor = 1.0;
    c->metal_capacity = 1e-3;
    c->coolant_volume = least;
    c->drop = (struct sp_resistance){6.0, 100.0};
    d.duct[0].inlet = (struct sp_inlet){.area = 2000.0, .recovery = 1.0, .lip_loss = 0.0, .screen = 0.0};
    d.duct[0].diffuser = (struct sp_diffuser_design){.kind = SP_DIFFUSER_GIVEN};
    d.duct[0].exit[0] = (struct sp_exit){.area = 2000.0, .loss = 0.0, .pressure_coefficient = 0.0, .angle = 0.0};
    return d;
}

static struct fixture_drive run(const struct sp_design *d, double interval)
{
    struct fixture_drive r = fixture_run(&fixture, d, interval, 1e-9);
    sp_complaints_print(&r.complaints, false, stderr);
    assert_int_equal(r.status, SP_OK);
    return r;
}

/* 12 kW into 60 kJ/K of metal and 25 kJ/K of coolant, 2 kW/K between them: ramp 0.141176 K/s, lag
 * 1.764706 K, its time constant 8.823529 s. */
static void two_masses_ramp(void **state)
{
    (void)state;
    struct sp_design d = two_masses(60e3, 25e3, 2e3);
    struct sp_step s = fixture_hold(400.0, 20.0, 12e3, 50.0);
    d.step = &s;
    d.steps = 1;
    struct fixture_drive r = run(&d, 1.0);
    const double *late = fixture_at(&r, 300.0)->value, *later = fixture_at(&r, 400.0)->value;
    check_close((later[SP_CH_ENGINE_OUT] - late[SP_CH_ENGINE_OUT]) / 100.0, 0.141176, 0, 5e-7);
    check_close(later[SP_CH_METAL] - later[SP_CH_ENGINE_OUT], 1.764706, 0, 1e-6);
    const double times[] = {2, 5, 9, 20, 40};
    for (int i = 0; i < 5; ++i) {
        const double *v = fixture_at(&r, times[i])->value;
        check_close(v[SP_CH_METAL] - v[SP_CH_ENGINE_OUT], 1.764706 * (1.0 - exp(-times[i] / 8.823529)), 0,
                    1e-5);
    }
    assert_true(fabs(r.result.ledger.error) < 1e-8);
    fixture_drop(&r);
}

/* A sink of 1.5 kW/K on the coolant and a step of 60 kW. The house-sized core misses 1.5 kW/K by what the
 * coolant cools on its way and the air warms: together under 1e-4, hence the tolerance. */
static void two_masses_step(void **state)
{
    (void)state;
    struct sp_design d = with_sink(60e3, 25e3, 2e3, 1.5e3);
    struct sp_step s = fixture_hold(1500.0, 40.0, 60e3, 100.0);
    d.step = &s;
    d.steps = 1;
    struct fixture_drive r = run(&d, 5.0);
    const struct {
        double t, metal, coolant;
    } want[] = {{30, 22.384, 10.171},
                {60, 37.210, 19.437},
                {120, 54.446, 30.246},
                {300, 68.340, 38.959},
                {1500, 70.0, 40.0}};
    for (int i = 0; i < 5; ++i) {
        const double *v = fixture_at(&r, want[i].t)->value;
        check_close(v[SP_CH_METAL] - d.air.ambient, want[i].metal, 1e-4, 6e-4);
        check_close(v[SP_CH_ENGINE_OUT] - d.air.ambient, want[i].coolant, 1e-4, 6e-4);
    }
    check_close(fixture_last(&r, SP_CH_HEAT_OUT), 60e3, 1e-6, 0);
    fixture_drop(&r);
}

/* One mass of 85 kJ/K with a sink of 1.5 kW/K under a square wave 0/100 kW: half of peak to peak is
 * (100 kW/2H) tanh(P/4 tau), tau = 56.7 s: 8.62, 12.58, 16.16, 28.92 K at P = 60, 90, 120, 300 s. */
static void lap_ripple(void **state)
{
    (void)state;
    enum { LAPS = 12 };
    const double period[] = {60, 90, 120, 300}, half[] = {8.62, 12.58, 16.16, 28.92};
    for (int i = 0; i < 4; ++i) {
        struct sp_design d = with_sink(60e3, 25e3, 1e8, 1.5e3);
        struct sp_step s[2 * LAPS];
        for (int k = 0; k < 2 * LAPS; ++k)
            s[k] = fixture_hold(0.5 * period[i], 40.0, k % 2 ? 0.0 : 100e3, 100.0);
        d.step = s;
        d.steps = 2 * LAPS;
        struct fixture_drive r = run(&d, 0.5 * period[i]);
        double high = fixture_at(&r, (LAPS - 0.5) * period[i])->value[SP_CH_ENGINE_OUT] - d.air.ambient;
        double low = fixture_at(&r, LAPS * period[i])->value[SP_CH_ENGINE_OUT] - d.air.ambient;
        /* What is left of the start after 12 laps is e^(-12 P/tau) of 33 K; the core's 1e-4 as above. */
        double left = 33.3 * exp(-11.0 * period[i] / 56.7);
        check_close(0.5 * (high - low), half[i], 1e-4, 5e-3 + left);
        check_close(0.5 * (high + low), 100.0 / 3.0, 1e-4, 5e-3 + left);
        check_close(r.result.coolant.value - d.air.ambient, high, 1e-4, 1e-3 + left);
        fixture_drop(&r);
    }
}

/* Engine off, pump standing: 60 kJ/K of metal at 125 degC and 10 kJ/K of coolant at 105 degC meet at
 * 122.14 degC = (60 x 125 + 10 x 105)/70. */
static void soak_equalises(void **state)
{
    (void)state;
    struct sp_design d = two_masses(60e3, 10e3, 200.0);
    struct sp_step s = {.kind = SP_STEP_SOAK, .time = 3600.0, .repeat = 1.0};
    d.step = &s;
    d.steps = 1;
    d.start = (struct sp_start){.coolant = 378.15, .metal = 398.15, .radiator = 300.0};
    struct fixture_drive r = run(&d, 60.0);
    check_close(fixture_last(&r, SP_CH_ENGINE_OUT) - 273.15, 122.142857, 0, 2e-5);
    check_close(fixture_last(&r, SP_CH_METAL) - 273.15, 122.142857, 0, 2e-5);
    check_close(r.result.coolant.value - 273.15, 122.142857, 0, 2e-5);
    fixture_drop(&r);
}

/* With everything frozen, ambient + 10 K is coolant + 10 K, all along the drive. */
static void hotter_day_frozen(void **state)
{
    (void)state;
    struct sp_design d = with_sink(60e3, 25e3, 2e3, 1.5e3);
    struct sp_step s = fixture_hold(600.0, 40.0, 60e3, 100.0);
    d.step = &s;
    d.steps = 1;
    struct fixture_drive cool = run(&d, 60.0);
    d.air.ambient += 10.0;
    d.start.coolant += 10.0;
    struct fixture_drive hot = run(&d, 60.0);
    for (size_t i = 0; i < cool.series.count; ++i)
        check_close(hot.series.row[i].value[SP_CH_ENGINE_OUT] - cool.series.row[i].value[SP_CH_ENGINE_OUT],
                    10.0, 0, 2e-3);
    fixture_drop(&cool);
    fixture_drop(&hot);
}

static double settled(struct sp_design *d)
{
    struct sp_step s = fixture_hold(3000.0, 30.0, 40e3, 80.0);
    d->step = &s;
    d->steps = 1;
    d->thermostat.none = true;
    d->duct[0].fan[0].law = SP_FAN_NEVER;
    struct fixture_drive r = run(d, 3000.0);
    double T = fixture_last(&r, SP_CH_ENGINE_OUT);
    fixture_drop(&r);
    return T;
}

/* With real properties it is not 10 K exactly. At equal density (pressure raised with temperature) what is
 * left is small: viscosity and conductivity of air and coolant. (The engine's gas, which gives less to hotter
 * metal, is left out.) At equal pressure there is 3 % less air as well: conductance goes with about its
 * square root, so some 1.5 % to 2 % of the rise over ambient comes on top. */
static void hotter_day_real(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    d.air.humidity = 0.0;
    d.engine.gas_temperature = NAN;
    double T = settled(&d), over = T - d.air.ambient, ratio = (d.air.ambient + 10.0) / d.air.ambient;
    d.air.ambient += 10.0;
    double thin = settled(&d);
    d.air.pressure *= ratio;
    double dense = settled(&d);
    print_message(
        "over ambient %.3f K; +10 K of ambient: +%.3f K at equal density, +%.3f K at equal pressure\n", over,
        dense - T, thin - T);
    check_within(dense - T, 9.5, 10.4);
    check_within(thin - dense, 0.010 * over, 0.025 * over);
}

/* ---- thermostat ------------------------------------------------------------------------------------------
 */

static void thermostat_fractions(void **state)
{
    (void)state;
    struct sp_thermostat t = fixture.base->thermostat;
    t.opens = 355.15; /* 82 degC */
    t.full = 368.15;  /* 95 degC */
    const double at[] = {82, 85, 88.5, 92, 95, 60, 120}, want[] = {0, 0.2308, 0.5, 0.7692, 1, 0, 1};
    for (int i = 0; i < 7; ++i)
        check_close(sp_thermostat_lift(&t, at[i] + 273.15), want[i], 0, 5e-5);
}

/* A ramp of 0.5 K/s and a lag of 15 s: the wax is 7.5 K behind. */
static void wax_lags_a_ramp(void **state)
{
    (void)state;
    struct sp_design d = two_masses(60e3, 25e3, 2e3);
    d.thermostat.lag = d.thermostat.lag_still = 15.0;
    d.thermostat.opens = 1000.0;
    d.thermostat.full = 1010.0;
    struct sp_step s = fixture_hold(240.0, 20.0, 42.5e3, 50.0);
    d.step = &s;
    d.steps = 1;
    struct fixture_drive r = run(&d, 240.0);
    check_close(fixture_last(&r, SP_CH_ENGINE_OUT) - fixture_last(&r, SP_CH_WAX), 7.5, 0, 1e-4);
    fixture_drop(&r);
}

/* ---- pump
 * -------------------------------------------------------------------------------------------------- */

/* Shut-off 100 kPa at 6000 rpm: 44.4 kPa at 4000, 1.78 kPa at 800. */
static void pump_affinity(void **state)
{
    (void)state;
    struct sp_curve c;
    struct sp_complaints faults = {0};
    struct sp_curve_design d = {100e3, 2e-3, {0, 0, NULL}};
    assert_true(sp_curve_build(&d, &c, NULL, &faults));
    check_close(sp_curve_at(&c, 4000.0 / 6000.0, 0.0), 44.444444e3, 1e-7, 0);
    check_close(sp_curve_at(&c, 800.0 / 6000.0, 0.0), 1.777778e3, 1e-6, 0);
    for (double n = 0.1; n < 1.5; n += 0.1) /* flow with n, pressure with n squared, power with its cube */
        check_close(sp_curve_at(&c, n, n * 1.3e-3), n * n * sp_curve_at(&c, 1.0, 1.3e-3), 1e-13, 0);
    sp_curve_free(&c);
}

/* Resistances that all go with the square: Q = n sqrt(p0 / (p0/Q0^2 + sum of drop/flow^2)). Hoses have no
 * length, the core hardly a drop; the coolant's 1030.95 kg/m3 scales what is given for 1000. */
static void quadratic_circuit(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    fixture_freeze(&d.coolant.fluid);
    d.thermostat.none = true;
    d.hoses.length_out = d.hoses.length_back = 1e-12;
    d.hoses.bore_out = d.hoses.bore_back = 0.03;
    d.hoses.bends = 6.0;
    d.hoses.jacket = (struct sp_resistance){1e-3, 20e3};
    d.duct[0].core[0].drop = (struct sp_resistance){1.0, 1e-3};
    d.tank.bleed = 0.0;
    struct sp_complaints c = {0};
    struct sp_circuit k;
    assert_true(sp_circuit_build(&d, &k, &c));
    double area = acos(-1.0) / 4.0 * 0.03 * 0.03;
    double bends = 6.0 * 0.5 * density / (area * area), jacket = 20e3 / 1e-6 * density / 1000.0;
    double own = d.pump.curve.shutoff / (d.pump.curve.free_flow * d.pump.curve.free_flow);
    double full = sqrt(d.pump.curve.shutoff / (own + bends + jacket));
    for (double n = 0.05; n < 1.3; n *= 1.3) {
        struct sp_loop_guess guess = {.flow = {0.0, 0.0}};
        struct sp_loop_state s;
        struct sp_loop_inputs in = {.speed = n, .lift = 1.0, .hot = 363.0, .cool = {350.0}};
        assert_int_equal(sp_loop_solve(&k.loop, &in, &guess, &s), SP_OK);
        check_close(s.radiator, n * full, 1e-5, 0);
        check_close(s.pump, s.radiator, 1e-12, 0);
        check_close(s.rise - s.jacket_drop, bends * s.radiator * s.radiator, 1e-5, 0);
    }
    sp_circuit_free(&k);
}

/* Radiator and bypass in parallel behind the jacket, both quadratic: flows stand as the roots of conductance
 * squared, and the thermostat's valve of 35 mm at 8 mm drops 5.1 kPa at 100 l/min (discharge 0.6, hot 50/50).
 */
static void parallel_branches(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    fixture_freeze(&d.coolant.fluid);
    d.coolant.fluid.density[0] = 1023.0;
    d.thermostat.none = false;
    d.thermostat.bore = 0.035;
    d.thermostat.lift = 0.008;
    d.thermostat.discharge = 0.6;
    d.thermostat.bypass_shut = 2.0; /* never: stays open in full */
    d.hoses.length_out = d.hoses.length_back = 1e-12;
    d.hoses.bends = 0.0;
    d.hoses.bypass = (struct sp_resistance){1e-3, 45e3};
    d.duct[0].core[0].drop = (struct sp_resistance){1.0, 1e-3};
    d.tank.bleed = 0.02;
    struct sp_complaints c = {0};
    struct sp_circuit k;
    assert_true(sp_circuit_build(&d, &k, &c));
    const double lift[] = {0.25, 0.5, 1.0}, at_100[] = {81.6e3, 20.4e3, 5.1e3};
    d.thermostat.leak = 0.0;
    for (int i = 0; i < 3; ++i) {
        struct sp_loop_guess guess = {.flow = {0.0, 0.0}};
        struct sp_loop_state s;
        struct sp_loop_inputs in = {.speed = 0.8, .lift = lift[i], .hot = 363.0, .cool = {350.0}};
        assert_int_equal(sp_loop_solve(&k.loop, &in, &guess, &s), SP_OK);
        double parallel = s.rise - s.jacket_drop, flow = 0.1 / 60.0;
        check_close(parallel, at_100[i] * s.radiator * s.radiator / (flow * flow), 0.01, 0);
        check_close(parallel, 45e3 * 1.023 * s.bypass * s.bypass / 1e-6, 1e-6, 0);
        check_close(s.radiator + s.bypass + s.bleed, s.pump, 1e-12, 0);
        check_close(s.bleed, 0.02 * s.pump, 1e-12, 0);
    }
    sp_circuit_free(&k);
}

/* ---- tank
 * -------------------------------------------------------------------------------------------------- */

/* 8.0 l of 50 % ethylene glycol, filled at 20 degC and 101.3 kPa, brought to 100 degC with the gas at
 * 80 degC, all rigid: 0.394 l more liquid, and 290, 175, 136, 117 kPa gauge over air spaces of 0.6, 0.8, 1.0,
 * 1.2 l (dry air of full ambient pressure at filling, vapour of 36.1 kPa on top when hot). */
static void tank_pressures(void **state)
{
    (void)state;
    const struct sp_coolant *f = &fixture.base->coolant.fluid;
    double liquid = 8e-3 * sp_coolant_density(f, 293.15) / sp_coolant_density(f, 373.15);
    check_close(liquid - 8e-3, 0.394e-3, 0, 1e-6);
    double vapour = sp_coolant_vapour_pressure(f, 353.15), cold = sp_coolant_vapour_pressure(f, 293.15);
    check_close(vapour, 36.1e3, 0.01, 0);
    const double space[] = {0.6e-3, 0.8e-3, 1.0e-3, 1.2e-3}, gauge[] = {290e3, 175e3, 136e3, 117e3};
    for (int i = 0; i < 4; ++i) {
        struct sp_tank t = fixture.base->tank;
        t.air_space = space[i];
        t.compliance = 1e-18;
        t.fill_temperature = 293.15;
        struct sp_tank_inputs in = {.air = sp_tank_filling(&t, 0.0, 101.325e3),
                                    .liquid = liquid,
                                    .system = 8e-3 + space[i],
                                    .temperature = 353.15,
                                    .vapour = vapour,
                                    .ambient = 101.325e3};
        check_close(sp_tank_state(&t, &in).pressure - 101.325e3, gauge[i], 0, 0.6e3);
        check_close(sp_tank_state(&t, &in).gas, space[i] - (liquid - 8e-3), 1e-8, 0);
        /* The model's filling holds vapour already: that much less dry air, and a little less pressure. */
        double dry = in.air;
        in.air = sp_tank_filling(&t, cold, 101.325e3);
        check_close(in.air / dry, 1.0 - cold / 101.325e3, 1e-12, 0);
    }
}

/* Heated until the cap lets air go, then cooled to where it was filled: less air, less pressure than at
 * filling, down to what the vacuum valve allows. */
static void vents_then_cools(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    d.tank.air_space = 0.35e-3;
    d.tank.cap = 60e3;
    d.tank.vacuum = 30e3;
    d.tank.fill_temperature = d.air.ambient;
    d.tank.bleed = 0.05;
    d.hoses.skin = 60.0;
    d.tank.skin = 60.0;
    d.engine.skin_standing = 60.0;
    d.start = (struct sp_start){.coolant = d.air.ambient, .metal = NAN, .radiator = NAN};
    struct sp_step s[] = {fixture_hold(900.0, 30.0, 40e3, 80.0),
                          {.kind = SP_STEP_SOAK, .time = 60000.0, .repeat = 1.0}};
    d.step = s;
    d.steps = 2;
    struct fixture_drive r = run(&d, 100.0);
    const double *cold = r.series.row[0].value, *hot = fixture_at(&r, 900.0)->value;
    check_close(cold[SP_CH_TANK_PRESSURE], d.air.pressure, 1e-9, 0);
    check_within(hot[SP_CH_TANK_PRESSURE] - d.air.pressure, 55e3, 70e3);
    double end = fixture_last(&r, SP_CH_TANK_PRESSURE) - d.air.pressure;
    check_close(fixture_last(&r, SP_CH_ENGINE_OUT), d.air.ambient, 0, 0.5);
    check_within(end, -31e3, -10e3);
    fixture_drop(&r);
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
        cmocka_unit_test(two_masses_ramp),      cmocka_unit_test(two_masses_step),
        cmocka_unit_test(lap_ripple),           cmocka_unit_test(soak_equalises),
        cmocka_unit_test(hotter_day_frozen),    cmocka_unit_test(hotter_day_real),
        cmocka_unit_test(thermostat_fractions), cmocka_unit_test(wax_lags_a_ramp),
        cmocka_unit_test(pump_affinity),        cmocka_unit_test(quadratic_circuit),
        cmocka_unit_test(parallel_branches),    cmocka_unit_test(tank_pressures),
        cmocka_unit_test(vents_then_cools),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
