/* Where a held speed settles, against closed forms and against long drives.
 *
 * The measures are those of SAE J1393 and J819; the numbers of the example (105 degC at 38 degC of air, 50 %
 * ethylene glycol at 204.7 kPa) are worked out by hand: air to water 67 K, ambient ceiling 115 - 67 = 48
 * degC, air to boil 129.6 - 67 = 62.6 degC, and 33 degC with 100 degC for the boiling point.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "fixture.h"
#include "swirlpot/hold.h"

static struct fixture fixture;

enum { HEAT_CELLS = 12 };

/* Engine heat equals the power asked for: a table over two speeds and two powers. */
static double heat_is_power[HEAT_CELLS] = {1, 0, 0, 1, 1e6, 1e6, 1000, 0, 0, 1000, 1e6, 1e6};

static const double cp = 3551.0, density = 1030.95; /* of the frozen coolant */

/* 60 kJ/K of metal and 25 kJ/K of coolant with 2 kW/K between them; nothing is lost and the pump stands. */
static struct sp_design two_masses(void)
{
    struct sp_design d = *fixture.base;
    fixture_freeze(&d.coolant.fluid);
    d.engine.heat_law = SP_HEAT_TABLE;
    d.engine.heat_table = (struct sp_table){4, 3, heat_is_power};
    d.engine.idle_heat = d.engine.gas_temperature = NAN;
    d.engine.metal_capacity = 60e3;
    d.engine.coolant_volume = 25e3 / (cp * density);
    d.engine.skin_standing = d.engine.skin_moving = d.hoses.skin = d.tank.skin = d.tank.bleed = 0.0;
    d.engine.conductance_still = 1e4; /* standing or not, all of it is there */
    d.engine.conductance = 2e3 / d.engine.conductance_still;
    d.tank.volume = d.tank.air_space;
    d.pump.electric = false;
    d.pump.ratio = 1e-9;
    d.duct[0].fan[0].fitted = false;
    d.limits = only_limits(NAN, NAN, NAN, NAN);
    d.start = (struct sp_start){.coolant = d.air.ambient, .metal = NAN, .radiator = NAN};
    return d;
}

/* The same with a sink of 1.5 kW/K: a core that is one conductance, in very much air and very much coolant.
 */
static struct sp_design with_sink(void)
{
    struct sp_design d = two_masses();
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
    c->coefficient = c->free_area_ratio = c->heat_factor = 1.0;
    c->heat_law = SP_CORE_POWER;
    c->air_conductance = 1.5e3;
    c->air_exponent = 1e-12;
    c->at_face_velocity = 10.0;
    c->heat_at_density = 1.2;
    c->coolant_conductance = 1e9;
    c->coolant_exponent = 0.8;
    c->at_coolant_flow = 6000.0;
    c->metal_capacity = 1e-3;
    c->coolant_volume = 1e-5;
    c->drop = (struct sp_resistance){6.0, 100.0};
    d.duct[0].inlet = (struct sp_inlet){.area = 2000.0, .recovery = 1.0};
    d.duct[0].diffuser = (struct sp_diffuser_design){.kind = SP_DIFFUSER_GIVEN};
    d.duct[0].exit[0] = (struct sp_exit){.area = 2000.0};
    return d;
}

static struct sp_hold_point hold(const struct sp_design *d, struct sp_hold_wish w, enum sp_status want)
{
    struct sp_hold_point p;
    struct sp_complaints complaints = {0}, cautions = {0};
    enum sp_status status = sp_hold_solve(fixture.units, d, &w, &p, &complaints, &cautions);
    sp_complaints_print(&complaints, false, stderr);
    assert_int_equal(status, want);
    sp_complaints_free(&complaints);
    sp_complaints_free(&cautions);
    return p;
}

static struct sp_hold_wish at_power(double speed, double power, double engine_speed)
{
    return (struct sp_hold_wish){speed, power, NAN, engine_speed};
}

/* ---- closed forms ---------------------------------------------------------------------------------- */

/* 60 kW: coolant 40 K over the air, metal 30 K over the coolant. The house-sized core misses 1.5 kW/K by
 * 1e-4. */
static void two_masses_rest(void **state)
{
    (void)state;
    struct sp_design d = with_sink();
    struct sp_hold_point p = hold(&d, at_power(40.0, 60e3, 100.0), SP_OK);
    assert_int_equal(p.kind, SP_HOLD_SETTLES);
    check_close(p.at.value[SP_CH_ENGINE_OUT] - d.air.ambient, 40.0, 1e-4, 0);
    check_close(p.at.value[SP_CH_METAL] - p.at.value[SP_CH_ENGINE_OUT], 30.0, 1e-4, 0);
    check_close(p.air_to_water, 40.0, 1e-4, 0);
    check_close(p.heat.in, 60e3, 1e-12, 0);
    check_close(p.heat.air, 60e3, 1e-8, 0);
    check_close(p.heat.error, 0.0, 0, 1e-8);
    check_close(p.dissipation, 1.5e3, 1e-4, 0);
    check_within(p.rest_after, 295.0, 320.0); /* 1 K is left at 303.2 s, see below */
}

/* 67 K over 38 degC; the cap of 103.4 kPa is put into the pressure of the air, as the tank is filled there.
 */
static void example_of_the_standard(void **state)
{
    (void)state;
    struct sp_design d = with_sink();
    d.air.ambient = d.start.coolant = 311.15;
    d.air.pressure = 204.7e3;
    d.tank.fill_temperature = d.start.coolant;
    d.pump.curve.shutoff = 1e3; /* hardly a rise between tank and jacket outlet */
    d.hoses.jacket.drop = d.duct[0].core[0].drop.drop = 10.0;
    d.limits.coolant.stop = 388.15;
    struct sp_hold_point p = hold(&d, at_power(40.0, 67.0 * 1.5e3, 100.0), SP_OK);
    check_close(p.at.value[SP_CH_ENGINE_OUT], 378.15, 0, 0.01);
    check_close(p.air_to_water, 67.0, 0, 0.01);
    check_close(p.ceiling - 273.15, 48.0, 0, 0.01);
    check_close(p.air_to_boil - 273.15, 62.6, 0, 0.05);
    check_close(p.air_to_boil_100 - 273.15, 33.0, 0, 0.01);
    assert_int_equal(p.binds, SP_HOLD_COOLANT);
    check_close(p.limit[SP_HOLD_COOLANT].left, 10.0, 0, 0.01);
}

/* With everything frozen and the air's density kept, 10 K of air are 10 K of coolant; so the ceiling by the
 * degree is the ceiling solved anew. */
static void hotter_air(void **state)
{
    (void)state;
    struct sp_design d = with_sink();
    d.air.humidity = 0.0;
    d.limits.coolant.stop = d.air.ambient + 55.0;
    struct sp_hold_point cool = hold(&d, at_power(40.0, 60e3, 100.0), SP_OK);
    struct sp_design hot = d;
    hot.air.pressure *= (d.air.ambient + 10.0) / d.air.ambient;
    hot.air.ambient += 10.0;
    struct sp_hold_point p = hold(&hot, at_power(40.0, 60e3, 100.0), SP_OK);
    check_close(p.at.value[SP_CH_ENGINE_OUT] - cool.at.value[SP_CH_ENGINE_OUT], 10.0, 0, 1e-5);
    double ambient;
    struct sp_complaints complaints = {0};
    struct sp_hold_wish w = at_power(40.0, 60e3, 100.0);
    assert_int_equal(sp_hold_ceiling(fixture.units, &d, &w, &ambient, &complaints), SP_OK);
    check_close(ambient, d.air.ambient + 15.0, 0, 5e-3);
    check_close(ambient, cool.ceiling, 0, 2e-3);
    d.limits.coolant.stop = 230.0; /* colder than any air that is tried */
    assert_int_equal(sp_hold_ceiling(fixture.units, &d, &w, &ambient, &complaints), SP_NOT);
    assert_true(ambient == -INFINITY);
    assert_int_equal(complaints.count, 0);
}

/* 12 kW into 85 kJ/K that loses nothing: 0.141176 K/s, the coolant (60/85) 1.764706 K behind the mean. 60 K
 * over the start are passed at (60 + 1.245675)/0.141176 = 433.82 s, 50 K of metal at (50 -
 * 25/85 1.764706)/0.141176. */
static void runs_away(void **state)
{
    (void)state;
    struct sp_design d = two_masses();
    d.limits.coolant.stop = d.air.ambient + 60.0;
    d.limits.metal.stop = d.air.ambient + 50.0;
    struct sp_hold_point p = hold(&d, at_power(20.0, 12e3, 50.0), SP_NOT);
    assert_int_equal(p.kind, SP_HOLD_RUNS_AWAY);
    check_close(p.limit[SP_HOLD_COOLANT].passed, 433.824, 0, 0.01);
    check_close(p.limit[SP_HOLD_METAL].passed, 350.490, 0, 0.01);
    check_close(p.lasts, 350.490, 0, 0.01);
    assert_int_equal(p.binds, SP_HOLD_METAL);
    assert_false(p.holds);
}

/* A rest beyond the limit: coolant - air = 40 K - 43.3487 e^(-t/80.4518) + 3.3487 e^(-t/6.2149), the closed
 * form of the two masses; 30 K are passed at 117.998 s, 39 K at 303.245 s. */
static void lasts(void **state)
{
    (void)state;
    struct sp_design d = with_sink();
    d.limits.coolant.stop = d.air.ambient + 30.0;
    struct sp_hold_point p = hold(&d, at_power(40.0, 60e3, 100.0), SP_NOT);
    assert_int_equal(p.kind, SP_HOLD_SETTLES);
    check_close(p.at.value[SP_CH_ENGINE_OUT] - d.air.ambient, 40.0, 1e-4, 0);
    check_close(p.lasts, 117.998, 1e-3, 0); /* at the usual tolerance of a drive */
    check_close(p.limit[SP_HOLD_COOLANT].left, -10.0, 0, 0.01);
}

/* ---- long drives ----------------------------------------------------------------------------------- */

static const enum sp_channel compared[] = {SP_CH_ENGINE_OUT, SP_CH_RADIATOR_IN, SP_CH_RADIATOR_OUT,
                                           SP_CH_PUMP_IN,    SP_CH_METAL,       SP_CH_TANK,
                                           SP_CH_WAX,        SP_CH_GAUGE,       SP_CH_AIR_OUT};

static void same_as_a_drive(const struct sp_design *base, struct sp_hold_wish w)
{
    struct sp_design d = *base;
    struct sp_step s = fixture_hold(12.0 * 3600.0, w.speed, w.power, w.engine_speed);
    s.grade = isnan(w.grade) ? 0.0 : w.grade;
    if (w.speed == 0.0 && isnan(w.power)) s.kind = SP_STEP_IDLE;
    d.step = &s;
    d.steps = 1;
    struct fixture_drive r = fixture_run(&fixture, &d, s.time, 0.0);
    sp_complaints_print(&r.complaints, false, stderr);
    assert_true(r.status == SP_OK || r.status == SP_NOT);
    struct sp_hold_point p = hold(&d, w, r.status);
    assert_int_equal(p.kind, SP_HOLD_SETTLES);
    for (size_t i = 0; i < sizeof compared / sizeof compared[0]; ++i)
        check_close(p.at.value[compared[i]], fixture_last(&r, compared[i]), 0, 0.01);
    check_close(p.at.value[SP_CH_LIFT], fixture_last(&r, SP_CH_LIFT), 0, 2e-3);
    check_close(p.at.value[SP_CH_POWER], fixture_last(&r, SP_CH_POWER), 1e-12, 0);
    check_close(p.heat.error, 0.0, 0, 1e-8);
    print_message("%3.0f km/h: %.4f degC, a drive of 12 h %.4f degC, lift %.3f\n", 3.6 * w.speed,
                  p.at.value[SP_CH_ENGINE_OUT] - 273.15, fixture_last(&r, SP_CH_ENGINE_OUT) - 273.15,
                  p.at.value[SP_CH_LIFT]);
    fixture_drop(&r);
}

static void long_drives(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    d.limits.coolant.stop = 380.0;
    same_as_a_drive(&d, at_power(30.0, 60e3, 5000.0 / 60.0)); /* regulated or not, as it comes */
    same_as_a_drive(&d, (struct sp_hold_wish){15.0, NAN, 0.12, 4000.0 / 60.0}); /* a hill */
    same_as_a_drive(&d, (struct sp_hold_wish){45.0, NAN, NAN, 4500.0 / 60.0});  /* level */
    same_as_a_drive(&d, at_power(25.0, 130e3, 7000.0 / 60.0));                  /* beyond its limit */
    d.thermostat.hysteresis = 0.0;
    same_as_a_drive(&d, at_power(30.0, 35e3, 4000.0 / 60.0));
    d.thermostat.none = true;
    same_as_a_drive(&d, at_power(40.0, 60e3, 5000.0 / 60.0));
}

static void standing_with_a_fan_by_degrees(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    struct sp_fan *f = &d.duct[0].fan[0];
    d.limits.coolant.stop = 400.0;
    f->law = SP_FAN_PROPORTIONAL;
    f->from = 353.15;
    f->to = 373.15;
    f->least = 0.3;
    same_as_a_drive(&d, at_power(0.0, 25e3, 3000.0 / 60.0));
}

/* A switched fan on a standing car that gives power: the cycle's ends, its mean and the fan's share as a
 * drive of 3 h has them. */
static void standing_with_a_switched_fan(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    struct sp_fan *f = &d.duct[0].fan[0];
    d.limits.coolant.stop = 400.0;
    f->law = SP_FAN_SWITCHED;
    f->on = 368.15;
    f->off = 363.15;
    struct sp_hold_point p = hold(&d, at_power(0.0, 20e3, 2500.0 / 60.0), SP_OK);
    assert_int_equal(p.kind, SP_HOLD_SWINGS);
    struct sp_step s = fixture_hold(10800.0, 0.0, 20e3, 2500.0 / 60.0);
    d.step = &s;
    d.steps = 1;
    struct fixture_drive r = fixture_run(&fixture, &d, 0.25, 1e-8);
    double least = INFINITY, most = 0.0, sum = 0.0, on = 0.0, began = NAN, rounds = 0.0, n = 0.0, ended = NAN;
    for (size_t i = 0; i < r.result.events; ++i) {
        const struct sp_event *e = &r.result.event[i];
        if (e->kind != SP_EV_FAN_ON || e->time < 5400.0) continue;
        if (isnan(began))
            began = e->time;
        else
            ++rounds;
        ended = e->time;
    }
    for (size_t i = 0; i < r.series.count; ++i) {
        const double *v = r.series.row[i].value;
        if (!(v[SP_CH_TIME] >= began && v[SP_CH_TIME] < ended)) continue;
        least = fmin(least, v[SP_CH_ENGINE_OUT]);
        most = fmax(most, v[SP_CH_ENGINE_OUT]);
        sum += v[SP_CH_ENGINE_OUT];
        ++n;
    }
    for (size_t i = 1; i < r.result.events; ++i) {
        const struct sp_event *e = &r.result.event[i];
        if (e->kind == SP_EV_FAN_OFF && e->time > began && e->time < ended) on += e->time - e[-1].time;
    }
    assert_true(rounds >= 3.0);
    check_close(p.coolant.period, (ended - began) / rounds, 0.01, 0);
    check_close(p.coolant.least, least, 0, 0.05);
    check_close(p.coolant.most, most, 0, 0.05);
    check_close(p.coolant.mean, sum / n, 0, 0.05);
    check_close(p.coolant.fan, on / (ended - began), 0, 0.01);
    check_close(p.at.value[SP_CH_ENGINE_OUT], most, 0, 0.05);
    check_close(p.heat.error, 0.0, 0, 2e-3);
    fixture_drop(&r);
}

/* ---- power and grade ------------------------------------------------------------------------------- */

/* 900 kg at 20 m/s on 5 %: rolling, weight and drag as F = m g (sin + c cos) + rho/2 c_d A v^2, over the
 * driveline. */
static void power_and_grade(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    double v = 20.0, slope = sqrt(1.0 + 0.05 * 0.05),
           rho = sp_air_density(d.air.ambient, d.air.pressure, d.air.humidity);
    double force = 900.0 * 9.80665 * (0.05 + d.body.rolling) / slope + 0.5 * rho * 0.4 * 1.8 * v * v;
    double power = force * v / d.body.driveline;
    struct sp_hold_wish w = {v, power * 1.005, 0.05, 3000.0 / 60.0};
    struct sp_hold_point p = hold(&d, w, SP_OK);
    check_close(p.at.value[SP_CH_POWER], power * 1.005, 1e-12, 0);
    w.power = NAN;
    check_close(hold(&d, w, SP_OK).at.value[SP_CH_POWER], power, 1e-9, 0);
    w.power = power * 1.03;
    struct sp_complaints complaints = {0}, cautions = {0};
    assert_int_equal(sp_hold_solve(fixture.units, &d, &w, &p, &complaints, &cautions), SP_INPUT);
    assert_int_equal(complaints.count, 1);
    assert_string_equal(complaints.list[0].path, "--power");
    sp_complaints_free(&complaints);
    d.body.mass = NAN;
    w.power = NAN;
    assert_int_equal(sp_hold_solve(fixture.units, &d, &w, &p, &complaints, &cautions), SP_INPUT);
    assert_string_equal(complaints.list[0].path, "hold.power");
    sp_complaints_free(&complaints);
    sp_complaints_free(&cautions);
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
        cmocka_unit_test(two_masses_rest),
        cmocka_unit_test(example_of_the_standard),
        cmocka_unit_test(hotter_air),
        cmocka_unit_test(runs_away),
        cmocka_unit_test(lasts),
        cmocka_unit_test(long_drives),
        cmocka_unit_test(standing_with_a_fan_by_degrees),
        cmocka_unit_test(standing_with_a_switched_fan),
        cmocka_unit_test(power_and_grade),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
