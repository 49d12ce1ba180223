/* What the schedule makes of engines beyond the plain one: given heat, correlation, oils, charge air, the
 * cap. SPDX-License-Identifier: GPL-3.0-or-later */
#include "schedule_drive.h"

#include "part/charge.h"
#include "part/engine.h"
#include "part/friction.h"

static double row(const struct drive *d, enum sp_channel_in c, size_t k)
{
    assert_true(k < d->s.rows);
    return d->s.channel[c][k];
}

static void motor(struct drive *d)
{
    begin(d);
    d->design.engine = (struct sp_engine){.heat_law = SP_HEAT_GIVEN,
                                          .heat_given = 1e3,
                                          .heat_loss = 0.1,
                                          .displacement = NAN,
                                          .rated_power = NAN,
                                          .rated_speed = NAN,
                                          .idle_speed = 14.0,
                                          .idle_heat = NAN,
                                          .heat_fraction = NAN,
                                          .heating_value = 42.6e6,
                                          .air_fuel_ratio = 14.7};
}

/* ---- given ----------------------------------------------------------------------------------------- */

/* A motor that stands is not an engine that is off; braking counts as driving. */
static void given_from_power(void **state)
{
    (void)state;
    struct drive d;
    motor(&d);
    add_text(&d, "time [s],speed [m/s],power [kW],engine_speed [rpm]\n0,0,0,0\n10,20,80,4000\n20,0,-40,0\n");
    add(&d, SP_STEP_IDLE, 10.0);
    add(&d, SP_STEP_SOAK, 10.0);
    build(&d);
    const double heat[] = {1e3, 9e3, 5e3};
    for (size_t k = 0; k < 3; ++k) {
        check_close(row(&d, SP_IN_HEAT_GAS, k), heat[k], 1e-12, 0.0);
        check_close(row(&d, SP_IN_HEAT_FRICTION, k) + row(&d, SP_IN_HEAT_SLOPE, k), 0.0, 0.0, 0.0);
        assert_true(d.s.flags[k] & SP_FLAG_ENGINE);
    }
    check_close(row(&d, SP_IN_HEAT_GAS, 3), 1e3, 0.0, 0.0);
    check_close(row(&d, SP_IN_HEAT_GAS, d.s.rows - 1), 0.0, 0.0, 0.0);
    assert_int_equal(d.cautions.count, 0);
    end(&d);
}

/* A column of heat stands for all of it, and asks for neither power nor engine speed. */
static void given_from_column(void **state)
{
    (void)state;
    struct drive d;
    motor(&d);
    add_text(&d, "time [s],speed [m/s],heat [kW]\n0,0,2\n10,20,6.5\n20,20,-1\n");
    build(&d);
    check_close(row(&d, SP_IN_HEAT_GAS, 0), 2e3, 1e-12, 0.0);
    check_close(row(&d, SP_IN_HEAT_GAS, 1), 6.5e3, 1e-12, 0.0);
    check_close(row(&d, SP_IN_HEAT_GAS, 2), 0.0, 0.0, 0.0);
    check_close(row(&d, SP_IN_POWER, 1) + row(&d, SP_IN_ENGINE_SPEED, 1), 0.0, 0.0, 0.0);
    assert_int_equal(d.cautions.count, 0);
    end(&d);
}

/* An engine's heat is not taken from such a column. */
static void column_of_an_engine(void **state)
{
    (void)state;
    struct drive d, e;
    begin(&d);
    add_text(
        &d,
        "time [s],speed [m/s],power [kW],engine_speed [rpm],heat [kW]\n0,20,40,3000,1\n10,20,40,3000,1\n");
    build(&d);
    begin(&e);
    add_text(&e, "time [s],speed [m/s],power [kW],engine_speed [rpm]\n0,20,40,3000\n10,20,40,3000\n");
    build(&e);
    check_close(row(&d, SP_IN_HEAT_GAS, 0), row(&e, SP_IN_HEAT_GAS, 0), 0.0, 0.0);
    end(&d);
    end(&e);
}

static void given_nowhere(void **state)
{
    (void)state;
    struct drive d;
    motor(&d);
    d.design.engine.heat_given = d.design.engine.heat_loss = 0.0;
    add_text(&d, "time [s],speed [m/s],power [kW]\n0,0,0\n10,20,80\n");
    assert_int_equal(sp_schedule_build(units, &d.design, &d.s, &d.complaints, &d.cautions), SP_INPUT);
    assert_int_equal(d.complaints.count, 1);
    end(&d);
    motor(&d); /* a loss without power is no better */
    add_text(&d, "time [s],speed [m/s]\n0,0\n10,20\n");
    assert_int_equal(sp_schedule_build(units, &d.design, &d.s, &d.complaints, &d.cautions), SP_INPUT);
    end(&d);
    motor(&d); /* a heat that hangs on nothing is enough */
    d.design.engine.heat_loss = 0.0;
    add_text(&d, "time [s],speed [m/s]\n0,0\n10,20\n");
    build(&d);
    check_close(row(&d, SP_IN_HEAT_GAS, 1), 1e3, 0.0, 0.0);
    end(&d);
}

/* From the road load a motor brakes with all it gets, or up to its rated power. */
static void given_on_the_road(void **state)
{
    (void)state;
    for (int rated = 0; rated < 2; ++rated) {
        struct drive d;
        motor(&d);
        d.design.body.mass = 1000.0;
        d.design.body.drag_coefficient = 0.0;
        d.design.body.rolling = 0.0;
        d.design.body.rotating = 1.0;
        d.design.engine.rated_power = rated ? 30e3 : NAN;
        add_text(&d, "time [s],speed [m/s]\n0,30\n10,10\n20,10\n");
        build(&d);
        /* at 30 m/s 2 m/s2 of 1000 kg: 60 kW */
        check_close(row(&d, SP_IN_POWER, 0), rated ? -30e3 : -60e3, 1e-12, 0.0);
        check_close(row(&d, SP_IN_HEAT_GAS, 0), rated ? 4e3 : 7e3, 1e-12, 0.0);
        end(&d);
    }
}

/* ---- oils and charge air --------------------------------------------------------------------------- */

static void fit_all(struct drive *d)
{
    begin(d);
    d->design.oil = (struct sp_oil){.fitted = true, .heat_share = 0.05, .friction_share = 0.2};
    d->design.gearbox = (struct sp_oil){.fitted = true, .heat_share = 0.03, .friction_share = 0.1};
    d->design.charge = (struct sp_charge){true, 2.0, 0.7, 5.0, 0.15};
}

static void oils_and_charge(void **state)
{
    (void)state;
    struct drive d;
    fit_all(&d);
    add_text(&d, "time [s],speed [m/s],power [kW],engine_speed [rpm]\n0,20,40,3000\n10,20,-20,3000\n");
    add(&d, SP_STEP_SOAK, 10.0);
    build(&d);
    const struct sp_engine *e = &d.design.engine;
    double motoring = (0.97e5 + 900.0 * 50.0 + 18.0 * 2500.0) * 2e-3 * 25.0; /* 9.35 kW */
    check_close(row(&d, SP_IN_OIL_HEAT, 0), 0.05 * 40e3 + 0.2 * motoring, 1e-12, 0.0);
    check_close(row(&d, SP_IN_OIL_HEAT, 1), 0.2 * motoring, 1e-12, 0.0);
    check_close(row(&d, SP_IN_GEARBOX_HEAT, 0), 0.03 * 40e3 + 0.1 * motoring, 1e-12, 0.0);
    check_close(row(&d, SP_IN_GEARBOX_HEAT, 1), 0.03 * 20e3 + 0.1 * motoring, 1e-12, 0.0);
    double flow = 0.15 * sp_engine_fuel_power(e, 40e3, 50.0) / sp_engine_rated_fuel(e);
    check_close(row(&d, SP_IN_CHARGE_FLOW, 0), flow, 1e-12, 0.0);
    double ratio = 1.0 + flow / 0.15 * flow / 0.15;
    check_close(row(&d, SP_IN_CHARGE_HEATING, 0), (pow(ratio, 0.4 / 1.4) - 1.0) / 0.7, 1e-12, 0.0);
    check_close(row(&d, SP_IN_CHARGE_FLOW, 1), 0.0, 0.0, 1e-15); /* the fuel is cut */
    const enum sp_channel_in dead[] = {SP_IN_OIL_HEAT, SP_IN_GEARBOX_HEAT, SP_IN_CHARGE_FLOW,
                                       SP_IN_CHARGE_HEATING};
    for (size_t i = 0; i < 4; ++i)
        check_close(row(&d, dead[i], d.s.rows - 1), 0.0, 0.0, 0.0);
    end(&d);
}

/* Measured flows come first: air as it is, fuel in the rated proportion. */
static void charge_from_flows(void **state)
{
    (void)state;
    struct drive d;
    fit_all(&d);
    add_text(&d, "time [s],speed [m/s],power [kW],engine_speed [rpm],air_flow "
                 "[kg/s]\n0,20,40,3000,0.15\n10,20,40,3000,0.3\n");
    build(&d);
    check_close(row(&d, SP_IN_CHARGE_FLOW, 0), 0.15, 1e-12, 0.0);
    check_close(row(&d, SP_IN_CHARGE_FLOW, 1), 0.3, 1e-12, 0.0);
    check_close(row(&d, SP_IN_CHARGE_HEATING, 1), row(&d, SP_IN_CHARGE_HEATING, 0), 1e-12, 0.0);
    end(&d);
    fit_all(&d);
    add_text(&d, "time [s],speed [m/s],power [kW],engine_speed [rpm],fuel_flow "
                 "[kg/s]\n0,20,40,3000,0.003\n10,20,40,3000,0.003\n");
    build(&d);
    double share = 0.003 * 42.6e6 / sp_engine_rated_fuel(&d.design.engine);
    check_close(row(&d, SP_IN_CHARGE_FLOW, 0), 0.15 * share, 1e-12, 0.0);
    end(&d);
}

/* Without them no channel of theirs holds anything. */
static void plain_has_none(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    add_text(&d, "time [s],speed [m/s],power [kW],engine_speed [rpm]\n0,20,40,3000\n10,20,-20,3000\n");
    add(&d, SP_STEP_IDLE, 10.0);
    build(&d);
    for (size_t k = 0; k < d.s.rows; ++k)
        for (int c = SP_IN_OIL_HEAT; c <= SP_IN_CHARGE_HEATING; ++c)
            check_close(d.s.channel[c][k], 0.0, 0.0, 0.0);
    end(&d);
}

/* ---- correlation and cap --------------------------------------------------------------------------- */

/* Columns of both flows reach the correlation; nothing is cautioned of the fuel then. */
static void correlation_from_columns(void **state)
{
    (void)state;
    struct drive d;
    begin(&d);
    struct sp_engine *e = &d.design.engine;
    e->heat_law = SP_HEAT_CORRELATION;
    e->heat_fraction = NAN;
    e->cylinders = 4.0;
    e->bore = e->stroke = 0.086;
    e->compression = 10.5;
    e->correlation_constant = 10.4;
    e->stoichiometric = 14.7;
    e->air_fuel_ratio = 13.3;
    e->gas_temperature = 840.0;
    e->gas_reference = 363.0;
    e->heating_value = 43e6;
    /* Taylor & Toong's law worked by hand: 89.50 kW */
    add_text(&d, "time [s],speed [m/s],fuel_flow [g/s],air_flow [g/s],engine_speed [rpm]\n"
                 "0,40,8.162,108.56,6000\n10,40,8.162,108.56,6000\n");
    build(&d);
    check_close(row(&d, SP_IN_HEAT_GAS, 0), 89.50e3, 2e-4, 0.0);
    assert_int_equal(d.cautions.count, 0);
    end(&d);
}

static void cap_is_told(void **state)
{
    (void)state;
    for (int capped = 0; capped < 2; ++capped) {
        struct drive d;
        begin(&d);
        d.design.engine.heat_fraction = 2.5;
        d.design.engine.energy_cap = capped ? 0.75 : 0.0;
        add_text(&d, "time [s],speed [m/s],power [kW],engine_speed [rpm]\n0,20,90,6000\n10,20,90,6000\n");
        build(&d);
        double fuel = sp_engine_fuel_power(&d.design.engine, 90e3, 100.0), heat = row(&d, SP_IN_HEAT_GAS, 0);
        if (capped)
            check_close(heat, 0.75 * fuel - 90e3, 1e-12, 0.0);
        else
            assert_true(heat > 0.75 * fuel - 90e3);
        assert_int_equal(d.cautions.count, capped);
        end(&d);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(given_from_power),         cmocka_unit_test(given_from_column),
        cmocka_unit_test(column_of_an_engine),      cmocka_unit_test(given_nowhere),
        cmocka_unit_test(given_on_the_road),        cmocka_unit_test(oils_and_charge),
        cmocka_unit_test(charge_from_flows),        cmocka_unit_test(plain_has_none),
        cmocka_unit_test(correlation_from_columns), cmocka_unit_test(cap_is_told),
    };
    return cmocka_run_group_tests(tests, set_up, tear_down);
}
