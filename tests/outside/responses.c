/* How engine, coolant mix, thermostat, bypass, fan, cap, road and air follow what the drive asks, against
 * sums on paper.
 *
 * Sources stand beside the tests. SPDX-License-Identifier: GPL-3.0-or-later */
#include "fixture.h"

#include "part/engine.h"
#include "part/road.h"

static struct fixture fixture;

static struct fixture_drive try_drive(struct sp_design *d, struct sp_step *step, size_t steps,
                                      double interval)
{
    d->step = step;
    d->steps = steps;
    return fixture_run(&fixture, d, interval, 1e-8);
}

static void expect_driven(const struct fixture_drive *r)
{
    sp_complaints_print(&r->complaints, false, stderr);
    assert_true(r->status == SP_OK || r->status == SP_NOT);
}

static struct fixture_drive drive(struct sp_design *d, struct sp_step *step, size_t steps, double interval)
{
    struct fixture_drive r = try_drive(d, step, steps, interval);
    expect_driven(&r);
    return r;
}

/* ---- engine and road --------------------------------------------------------------------------------------
 */

static struct sp_engine two_litre(void)
{
    return (struct sp_engine){.displacement = 2.0e-3,
                              .rated_power = 100e3,
                              .rated_speed = 100.0,
                              .idle_speed = 12.5,
                              .heat_fraction = 0.65,
                              .heat_exponent = 0.85,
                              .idle_heat = NAN,
                              .indicated_efficiency = 0.40,
                              .friction_pressure = {1.6e5, 0.0, 0.0},
                              .overrun_pressure = {0.97e5, 0.15e5 * 0.06, 0.05e5 * 0.0036},
                              .overrun_share = 0.4,
                              .gas_temperature = NAN,
                              .gas_reference = NAN};
}

static struct sp_engine_heat heat_of(const struct sp_engine *e, double power, double speed)
{
    struct sp_complaints c = {0};
    struct sp_engine_law *law = sp_engine_law_build(e, NULL, &c);
    assert_non_null(law);
    struct sp_engine_row row = {power, speed, NAN, NAN};
    struct sp_engine_heat heat = sp_engine_heat(law, &row);
    sp_engine_law_free(law);
    return heat;
}

/* Motored at 3000 and 6000 1/min, 2.0 l take 9.35 and 36.7 kW (Barnes-Moss after Heywood 1988): 0.4 of it
 * heats the coolant on a closed throttle, and no fuel does; while it pulls it is the other way round. */
static void overrun(void **state)
{
    (void)state;
    struct sp_engine e = two_litre();
    const double speed[] = {50.0, 100.0}, motoring[] = {9.35e3, 36.7e3};
    for (int i = 0; i < 2; ++i) {
        struct sp_engine_heat closed = heat_of(&e, -8e3, speed[i]), pulling = heat_of(&e, 50e3, speed[i]);
        check_close(closed.friction, 0.4 * motoring[i], 1e-9, 0);
        assert_true(closed.gas == 0.0 && pulling.friction == 0.0 && pulling.gas > 1e4);
    }
    check_close(heat_of(&e, 100e3, 100.0).gas, 65e3, 1e-12, 0); /* rated: 0.65 of brake power */
}

/* A heat given for idling is what an idling engine gives, more than the law or less, and far from idle it is
 * gone. */
static void idle_as_given(void **state)
{
    (void)state;
    const double given[] = {1e3, 3.5e3, 6e3};
    for (int i = 0; i < 3; ++i) {
        struct sp_engine e = two_litre();
        double by_law = heat_of(&e, 0.0, 60.0).gas;
        e.idle_heat = given[i];
        check_close(heat_of(&e, 0.0, 12.5).gas, given[i], 1e-12, 0);
        check_close(heat_of(&e, 0.0, 60.0).gas, by_law, 1e-12, 0);
    }
}

/* 1500 kg, rotating parts of 4 % on top, 1.5 m/s2 on the level, rolling 0.010, no air: 2340 + 147.1 N; up a
 * slope of 1 in 10 (sine 0.0995037) without acceleration: 1463.7 + 146.4 N. */
static void accelerating_and_climbing(void **state)
{
    (void)state;
    struct sp_body b = {.mass = 1500.0,
                        .frontal_area = 1.0,
                        .drag_coefficient = 0.65,
                        .rolling = 0.010,
                        .rotating = 1.04,
                        .driveline = 1.0};
    check_close(sp_road_force(&b, 10.0, 0.0, 1.2, 0.0, 1.5), 2340.0 + 147.09975, 1e-9, 0);
    check_close(sp_road_force(&b, 10.0, 0.0, 1.2, 0.1, 0.0), 1463.69722 + 146.36972, 1e-7, 0);
    check_close(sp_road_force(&b, 10.0, 0.0, 1.2, -0.1, 0.0), -1463.69722 + 146.36972, 1e-7, 0);
}

/* ---- coolant's ways ---------------------------------------------------------------------------------------
 */

/* A mix of 55 % lies between the ASHRAE columns of 50 and 60 %: viscosity at their geometric mean (Arrhenius'
 * rule of mixtures), density and heat capacity at their mean. At 20, 60, 100 degC. */
static void mixes_between_the_columns(void **state)
{
    (void)state;
    const double t[] = {20.0, 60.0, 100.0}, mu_50[] = {3.94, 1.43, 0.70}, mu_60[] = {5.38, 1.69, 0.77};
    const double rho_50[] = {1073.35, 1052.04, 1022.95}, rho_60[] = {1086.27, 1063.69, 1033.33};
    const double c_50[] = {3281.0, 3435.0, 3590.0}, c_60[] = {3084.0, 3258.0, 3433.0};
    struct sp_coolant c;
    assert_true(sp_coolant_mix(SP_ETHYLENE_GLYCOL, 0.55, &c));
    for (int i = 0; i < 3; ++i) {
        double T = t[i] + 273.15;
        check_close(sp_coolant_viscosity(&c, T), 1e-3 * sqrt(mu_50[i] * mu_60[i]), 1.5e-2, 0);
        check_close(sp_coolant_density(&c, T), 0.5 * (rho_50[i] + rho_60[i]), 2e-5, 0);
        check_close(sp_coolant_cp(&c, T), 0.5 * (c_50[i] + c_60[i]), 3e-4, 0);
    }
}

/* A drive that warms and cools again: the wax stands at 82 degC when it opens, at 79 when it is shut. */
static void shuts_below_where_it_opens(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    d.thermostat.opens = 355.15;
    d.thermostat.full = 367.15;
    d.thermostat.hysteresis = 3.0;
    d.start = (struct sp_start){.coolant = 343.15, .metal = NAN, .radiator = NAN};
    struct sp_step s[] = {fixture_hold(600.0, 20.0, 60e3, 80.0), fixture_hold(1800.0, 40.0, 0.0, 80.0)};
    struct fixture_drive r = drive(&d, s, 2, 0.5);
    const enum sp_event_kind kind[] = {SP_EV_THERMOSTAT_OPENS, SP_EV_THERMOSTAT_SHUT};
    const double wax[] = {355.15, 352.15};
    for (int i = 0; i < 2; ++i) {
        size_t e = 0;
        while (e < r.result.events && r.result.event[e].kind != kind[i])
            ++e;
        assert_true(e < r.result.events);
        double before = floor(2.0 * r.result.event[e].time) / 2.0,
               share = 2.0 * (r.result.event[e].time - before);
        double a = fixture_at(&r, before)->value[SP_CH_WAX],
               b = fixture_at(&r, before + 0.5)->value[SP_CH_WAX];
        check_close(a + share * (b - a), wax[i], 0, 0.01);
    }
    fixture_drop(&r);
}

/* The bypass disc: half shut at half its stroke, a quarter of the conductance squared; shut from 0.8 on,
 * where all that the pump moves goes through the radiator. */
static void bypass_shuts(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    fixture_freeze(&d.coolant.fluid);
    d.thermostat.none = false;
    d.thermostat.bypass_shut = 0.8;
    d.hoses.bypass = (struct sp_resistance){1e-3, 45e3};
    d.tank.bleed = 0.0;
    struct sp_complaints complaints = {0};
    struct sp_circuit c;
    assert_true(sp_circuit_build(&d, &c, &complaints));
    const double lift[] = {0.0, 0.4, 0.8, 1.0}, open[] = {1.0, 0.5, 0.0, 0.0};
    for (int i = 0; i < 4; ++i) {
        struct sp_loop_guess guess = {.flow = {0.0, 0.0}};
        struct sp_loop_state s;
        struct sp_loop_inputs in = {.speed = 0.8, .lift = lift[i], .hot = 363.15, .cool = {350.0}};
        assert_int_equal(sp_loop_solve(&c.loop, &in, &guess, &s), SP_OK);
        double drop = s.rise - s.jacket_drop; /* over both branches */
        check_close(s.bypass, open[i] * 1e-3 * sqrt(drop / 45e3 * 1000.0 / 1030.95), 1e-6, 1e-15);
        check_close(s.radiator + s.bypass, s.pump, 1e-9, 0);
    }
    sp_circuit_free(&c);
}

/* A cap is set in pressure over ambient: the same gauge pressure holds at 3000 m (70.1 kPa) as at the sea. */
static void cap_is_gauge(void **state)
{
    (void)state;
    struct sp_tank t = fixture.base->tank;
    t.cap = 120e3;
    t.vacuum = 5e3;
    const double ambient[] = {101.325e3, 70.1e3};
    for (int i = 0; i < 2; ++i) {
        struct sp_tank_inputs in = {
            .air = 0.03, .liquid = 8e-3, .system = 8.8e-3, .temperature = 353.15, .ambient = ambient[i]};
        struct sp_tank_state below = {ambient[i] + 100e3, 0.8e-3}, above = {ambient[i] + 140e3, 0.8e-3};
        struct sp_tank_state sucked = {ambient[i] - 25e3, 0.8e-3};
        assert_true(sp_tank_vent(&t, &in, &below, 1e-3).air == 0.0);
        assert_true(sp_tank_vent(&t, &in, &above, 1e-3).air > 0.0);
        assert_true(sp_tank_vent(&t, &in, &sucked, 1e-3).air < 0.0);
    }
}

/* ---- fan and air ------------------------------------------------------------------------------------------
 */

/* A lag of 1.5 s from standing: 63.21 % of full after 1.5 s, 86.47 % after 3 s. Full speed goes with voltage
 * to 0.9 (practice): (13.5/13)^0.9 = 1.034551 while the engine runs, (12/13)^0.9 = 0.930497 on the battery.
 */
static void fan_spins_up(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    d.electrics.voltage_running = 13.5;
    d.electrics.voltage_stopped = 12.0;
    d.duct[0].fan[0].rated_voltage = 13.0;
    d.duct[0].fan[0].spin_up = 1.5;
    d.duct[0].fan[0].law = SP_FAN_ALWAYS;
    d.duct[0].fan[0].run_on = 60.0;
    struct sp_step s[] = {fixture_hold(30.0, 30.0, 20e3, 80.0),
                          {.kind = SP_STEP_SOAK, .time = 120.0, .repeat = 1.0}};
    struct fixture_drive r = drive(&d, s, 2, 0.5);
    check_close(fixture_at(&r, 1.5)->value[SP_CH_FAN_SPEED], 0.632121 * 1.034551, 1e-5, 0);
    check_close(fixture_at(&r, 3.0)->value[SP_CH_FAN_SPEED], 0.864665 * 1.034551, 1e-5, 0);
    check_close(fixture_at(&r, 30.0)->value[SP_CH_FAN_SPEED], 1.034551, 1e-5, 0);
    check_close(fixture_at(&r, 60.0)->value[SP_CH_FAN_SPEED], 0.930497, 1e-5, 0);
    check_close(fixture_at(&r, 91.5)->value[SP_CH_FAN_SPEED], 0.930497 * 0.367879, 1e-4,
                0); /* and down again */
    fixture_drop(&r);
}

/* A trace in a file of its own, driven cold with a core that only resists, so that the air path has its
 * closed form v_face/V = sqrt((eta - Cp)/(K + (A_c/A_e)^2)) = sqrt(1.1/(8 + 4)) = 0.302765. */
static struct fixture_drive along(const char *rows, double wind, double interval)
{
    char path[] = "responses_XXXXXX";
    int file = mkstemp(path);
    assert_true(file >= 0);
    FILE *f = fdopen(file, "w");
    assert_non_null(f);
    fputs(rows, f);
    fclose(f);
    struct sp_design d = *fixture.base;
    d.air.humidity = 0.0;
    d.air.altitude = 0.0;
    d.air.pressure = 101325.0;
    d.air.ambient = 288.15;
    d.air.wind = wind;
    d.start = (struct sp_start){.coolant = 288.15, .metal = NAN, .radiator = NAN};
    d.thermostat.opens = 400.0;
    d.thermostat.full = 410.0;
    d.duct[0].fan[0].fitted = false;
    d.duct[0].core[0].drop_law = SP_DROP_COEFFICIENT;
    d.duct[0].core[0].coefficient = 8.0;
    d.duct[0].core[0].free_area_ratio = 1.0;
    double face = d.duct[0].core[0].width * d.duct[0].core[0].height;
    d.duct[0].inlet = (struct sp_inlet){.area = face, .recovery = 1.0, .lip_loss = 0.0, .screen = 0.0};
    d.duct[0].diffuser = (struct sp_diffuser_design){.kind = SP_DIFFUSER_GIVEN};
    d.duct[0].exit[0] = (struct sp_exit){.area = 0.5 * face, .loss = 0.0, .pressure_coefficient = -0.1, .angle = 0.0};
    struct sp_step s = {.kind = SP_STEP_TRACE, .trace = path, .repeat = 1.0};
    struct fixture_drive r = try_drive(&d, &s, 1, interval);
    remove(path);
    expect_driven(&r);
    return r;
}

static const double face_over_speed = 0.302765;

static void head_wind(void **state)
{
    (void)state;
    const double wind[] = {0.0, 6.0, -6.0};
    for (int i = 0; i < 3; ++i) {
        struct fixture_drive r = along(
            "time [s],speed [m/s],power [kW],engine_speed [rpm]\n0,24,5,2000\n4,24,5,2000\n", wind[i], 1.0);
        check_close(fixture_at(&r, 0.0)->value[SP_CH_FACE_VELOCITY], face_over_speed * (24.0 + wind[i]), 1e-5,
                    0);
        fixture_drop(&r);
    }
}

/* 0.64 of the dynamic pressure left behind another car is 0.8 of the speed. The trace tells the air's temperature
 * itself, so that the wake brings no warmth of its own. */
static void wake(void **state)
{
    (void)state;
    struct fixture_drive r = along("time [s],speed [m/s],power [kW],engine_speed [rpm],wake,ambient [degC]\n"
                                   "0,30,5,2000,0.64,15\n4,30,5,2000,0.64,15\n",
                                   0.0, 1.0);
    check_close(fixture_at(&r, 0.0)->value[SP_CH_FACE_VELOCITY], face_over_speed * 24.0, 1e-5, 0);
    fixture_drop(&r);
}

/* Density that the core sees along a climb from the sea: pressure of the US Standard Atmosphere 1976
 * (printed: 101325, 95461, 89876 Pa at 0, 500, 1000 m) at the ambient of 15 degC over R 287.053. */
static void air_gets_thinner_uphill(void **state)
{
    (void)state;
    struct fixture_drive r = along("time [s],speed [m/s],power [kW],engine_speed [rpm],altitude [m]\n"
                                   "0,25,5,2000,0\n25,25,5,2000,250\n50,25,5,2000,500\n75,25,5,2000,750\n"
                                   "100,25,5,2000,1000\n",
                                   0.0, 50.0);
    const double pressure[] = {101325.0, 95461.0, 89876.0};
    double face = fixture.base->duct[0].core[0].width * fixture.base->duct[0].core[0].height;
    for (int i = 0; i < 3; ++i) {
        const double *v = fixture_at(&r, 50.0 * i)->value;
        check_close(v[SP_CH_AIR_FLOW] / (v[SP_CH_FACE_VELOCITY] * face), pressure[i] / (287.053 * 288.15),
                    2e-5, 0);
    }
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
        cmocka_unit_test(mixes_between_the_columns),
        cmocka_unit_test(overrun),
        cmocka_unit_test(idle_as_given),
        cmocka_unit_test(accelerating_and_climbing),
        cmocka_unit_test(shuts_below_where_it_opens),
        cmocka_unit_test(bypass_shuts),
        cmocka_unit_test(cap_is_gauge),
        cmocka_unit_test(fan_spins_up),
        cmocka_unit_test(head_wind),
        cmocka_unit_test(wake),
        cmocka_unit_test(air_gets_thinner_uphill),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
