/* Own behaviour of the engine's heat laws. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include "part/engine.h"

#include <string.h>

static struct sp_engine sample(void)
{
    return (struct sp_engine){.displacement = 2.0e-3,
                              .rated_power = 100e3,
                              .rated_speed = 100.0,
                              .idle_speed = 14.0,
                              .heat_fraction = 0.6,
                              .heat_exponent = 0.85,
                              .idle_heat = NAN,
                              .fuel_share = 0.3,
                              .air_fuel_ratio = 14.7,
                              .heating_value = 42.6e6,
                              .indicated_efficiency = 0.40,
                              .friction_pressure = {1.55e5, 0.0, 16.6},
                              .overrun_pressure = {0.97e5, 900.0, 18.0},
                              .overrun_share = 0.4,
                              .gas_temperature = 840.0,
                              .gas_reference = 378.0};
}

static struct sp_engine_law *build(const struct sp_engine *e)
{
    struct sp_complaints c = {0};
    struct sp_place at = {.path = "car.engine"};
    struct sp_engine_law *law = sp_engine_law_build(e, &at, &c);
    if (!law) sp_complaints_print(&c, false, stderr);
    assert_int_equal(c.count, 0);
    assert_non_null(law);
    sp_complaints_free(&c);
    return law;
}

static void refused(const struct sp_engine *e)
{
    struct sp_complaints c = {0};
    struct sp_place at = {.path = "car.engine"};
    assert_null(sp_engine_law_build(e, &at, &c));
    assert_int_equal(c.count, 1);
    sp_complaints_free(&c);
}

static struct sp_engine_heat heat(const struct sp_engine_law *law, double power, double speed)
{
    struct sp_engine_row row = {power, speed, NAN, NAN};
    return sp_engine_heat(law, &row);
}

static void off_is_zero(void **state)
{
    (void)state;
    struct sp_engine e = sample();
    e.idle_heat = 3e3;
    struct sp_engine_law *law = build(&e);
    struct sp_engine_row off[] = {{50e3, 0.0, NAN, NAN}, {NAN, NAN, NAN, NAN}, {0.0, 0.0, 1e-3, 1e-2}};
    for (int i = 0; i < 3; i++) {
        struct sp_engine_heat h = sp_engine_heat(law, &off[i]);
        check_close(fabs(h.gas) + fabs(h.friction) + fabs(h.per_power), 0.0, 0.0, 0.0);
    }
    sp_engine_law_free(law);
}

/* Nothing jumps anywhere in the plane of power and speed: steps of 1e-6 give changes of that order. */
static void no_jumps(void **state)
{
    (void)state;
    const double cells[] = {14,  0, 2e3, 14,  50e3, 20e3, 14,  100e3, 50e3,
                            100, 0, 9e3, 100, 50e3, 40e3, 100, 100e3, 70e3};
    struct sp_engine e = sample();
    for (int variant = 0; variant < 4; variant++) {
        e.heat_law = variant & 1 ? SP_HEAT_TABLE : SP_HEAT_RATED;
        e.heat_table = (struct sp_table){6, 3, (double *)(uintptr_t)cells};
        e.idle_heat = variant & 2 ? 4e3 : NAN;
        struct sp_engine_law *law = build(&e);
        for (double speed = 5.0; speed < 120.0; speed += 0.37) {
            for (double power = -6e3; power < 20e3; power += 100.0) {
                struct sp_engine_heat a = heat(law, power - 1e-3, speed), b = heat(law, power + 1e-3, speed);
                struct sp_engine_heat n = heat(law, power, speed + 1e-6);
                check_close(a.gas, b.gas, 0.0, 0.1);
                check_close(a.friction, b.friction, 0.0, 0.1);
                check_close(a.per_power, b.per_power, 0.0, 1e-5);
                check_close(a.gas, n.gas, 0.0, 0.1);
                check_close(a.friction, n.friction, 0.0, 0.1);
                assert_true(a.gas >= 0.0 && a.friction >= 0.0);
            }
        }
        sp_engine_law_free(law);
    }
}

static void slope_is_the_derivative(void **state)
{
    (void)state;
    struct sp_engine e = sample();
    for (int variant = 0; variant < 2; variant++) {
        e.idle_heat = variant ? 4e3 : NAN;
        struct sp_engine_law *law = build(&e);
        for (double speed = 14.0; speed < 110.0; speed += 3.1)
            for (double power = 10.0; power < 110e3; power *= 1.7) {
                double up = heat(law, power + 1.0, speed).gas, down = heat(law, power - 1.0, speed).gas;
                check_close(heat(law, power, speed).per_power, (up - down) / 2.0, 1e-5, 1e-6);
            }
        sp_engine_law_free(law);
    }
}

/* Fuel cut at speed, none at idle; in between friction comes as the gas goes. */
static void overrun(void **state)
{
    (void)state;
    struct sp_engine e = sample();
    struct sp_engine_law *law = build(&e);
    struct sp_engine_heat cut = heat(law, -2.0e3, 21.0), idle = heat(law, -2.0e3, 14.0);
    check_close(cut.gas, 0.0, 0.0, 1e-9);
    check_close(cut.friction, 0.4 * sp_engine_motoring(&e, 21.0), 1e-12, 0.0);
    check_close(cut.per_power, 0.0, 0.0, 1e-12);
    check_close(idle.friction, 0.0, 0.0, 0.0);
    check_close(idle.gas, heat(law, 0.0, 14.0).gas, 0.0, 0.0);
    assert_true(heat(law, 0.0, 80.0).gas > 0.0); /* no cut without negative power */
    struct sp_engine_heat half = heat(law, -1.0e3, 80.0);
    check_close(half.gas, 0.5 * heat(law, 0.0, 80.0).gas, 1e-12, 0.0);
    check_close(half.friction, 0.2 * sp_engine_motoring(&e, 80.0), 1e-12, 0.0);
    sp_engine_law_free(law);
}

static void given_idle_heat(void **state)
{
    (void)state;
    struct sp_engine e = sample();
    struct sp_engine_law *plain = build(&e);
    e.idle_heat = 3.3e3;
    struct sp_engine_law *law = build(&e);
    check_close(heat(law, 0.0, 14.0).gas, 3.3e3, 1e-12, 0.0);
    check_close(heat(law, 20e3, 14.0).gas, heat(plain, 20e3, 14.0).gas, 1e-12, 0.0);
    check_close(heat(law, 0.0, 40.0).gas, heat(plain, 0.0, 40.0).gas, 1e-12, 0.0);
    sp_engine_law_free(plain);
    sp_engine_law_free(law);
}

/* Bilinear in between, held outside, whatever the order of rows. */
static void table(void **state)
{
    (void)state;
    double cells[] = {50, 40e3, 30e3, 20, 0, 2e3, 50, 0, 6e3, 20, 40e3, 22e3};
    struct sp_engine e = sample();
    e.heat_law = SP_HEAT_TABLE;
    e.heat_fraction = NAN; /* not asked for */
    e.heat_table = (struct sp_table){4, 3, cells};
    struct sp_engine_law *law = build(&e);
    memset(cells, 0, sizeof cells); /* the law holds its own */
    check_close(heat(law, 0.0, 20.0).gas, 2e3, 1e-12, 0.0);
    check_close(heat(law, 40e3, 20.0).gas, 22e3, 1e-12, 0.0);
    check_close(heat(law, 0.0, 50.0).gas, 6e3, 1e-12, 0.0);
    check_close(heat(law, 20e3, 35.0).gas, 15e3, 1e-12, 0.0);
    check_close(heat(law, 90e3, 80.0).gas, 30e3, 1e-12, 0.0);
    check_close(heat(law, 10e3, 5.0).gas, 7e3, 1e-12, 0.0);
    check_close(heat(law, 20e3, 20.0).per_power, 0.5, 1e-12, 0.0);
    check_close(heat(law, 0.0, 20.0).per_power, 0.5, 1e-12, 0.0);
    check_close(heat(law, 90e3, 20.0).per_power, 0.0, 0.0, 0.0);
    sp_engine_law_free(law);
}

static void bad_tables(void **state)
{
    (void)state;
    double hole[] = {20, 0, 1, 20, 10, 2, 50, 0, 3, 50, 20, 4},
           twice[] = {20, 0, 1, 20, 0, 2, 50, 0, 3, 50, 10, 4};
    double line[] = {20, 0, 1, 20, 10, 2, 20, 20, 3, 20, 30, 4},
           below[] = {20, -5, 1, 20, 10, 2, 50, -5, 3, 50, 10, 4};
    double nan[] = {20, 0, 1, 20, 10, NAN, 50, 0, 3, 50, 10, 4};
    double *all[] = {hole, twice, line, below, nan};
    struct sp_engine e = sample();
    e.heat_law = SP_HEAT_TABLE;
    refused(&e); /* none at all */
    for (int i = 0; i < 5; i++) {
        e.heat_table = (struct sp_table){4, 3, all[i]};
        refused(&e);
    }
}

static void flows(void **state)
{
    (void)state;
    struct sp_engine e = sample();
    e.heat_law = SP_HEAT_FUEL;
    struct sp_engine_law *law = build(&e);
    struct sp_engine_row row = {50e3, 50.0, 3e-3, NAN}, cut = {NAN, 50.0, 0.0, NAN},
                         blank = {50e3, 50.0, NAN, 0.04};
    check_close(sp_engine_heat(law, &row).gas, 0.3 * 3e-3 * 42.6e6, 1e-12, 0.0);
    check_close(sp_engine_heat(law, &cut).gas, 0.0, 0.0, 0.0);
    check_close(sp_engine_heat(law, &cut).friction, 0.4 * sp_engine_motoring(&e, 50.0), 1e-12, 0.0);
    e.heat_law = SP_HEAT_RATED;
    struct sp_engine_law *rated = build(&e);
    check_close(sp_engine_heat(law, &blank).gas, sp_engine_heat(rated, &blank).gas, 1e-12, 0.0);
    /* What is measured holds the alternator's load already; a blank is worked out from power. */
    check_close(sp_engine_heat(law, &row).per_power, 0.0, 0.0, 0.0);
    assert_true(sp_engine_heat(rated, &blank).per_power > 0.0);
    check_close(sp_engine_heat(law, &blank).per_power, sp_engine_heat(rated, &blank).per_power, 1e-12, 0.0);
    sp_engine_law_free(rated);
    sp_engine_law_free(law);
    e.heat_law = SP_HEAT_AIR;
    law = build(&e);
    struct sp_engine_row air = {NAN, 50.0, NAN, 0.0441};
    check_close(sp_engine_heat(law, &air).gas, 0.3 * 3e-3 * 42.6e6, 1e-12, 0.0);
    check_close(sp_engine_heat(law, &air).per_power, 0.0, 0.0, 0.0);
    sp_engine_law_free(law);
    e.heat_fraction = NAN; /* a blank then goes by the fuel of the Willans line */
    law = build(&e);
    struct sp_engine_row willans = {50e3, 50.0, NAN, NAN};
    check_close(sp_engine_heat(law, &willans).gas, 0.3 * sp_engine_fuel_power(&e, 50e3, 50.0), 1e-12, 0.0);
    sp_engine_law_free(law);
}

static void unusable(void **state)
{
    (void)state;
    struct sp_engine e = sample();
    e.displacement = 0.0;
    refused(&e);
    e = sample();
    e.heat_fraction = NAN;
    refused(&e);
    e = sample();
    e.rated_power = NAN;
    refused(&e);
    e = sample();
    e.friction_pressure[0] = -1e9;
    refused(&e);
}

/* Bore, mixture and the four formulas, as a case would have them. */
static struct sp_engine whole(void)
{
    struct sp_engine e = sample();
    e.heat_law = SP_HEAT_CORRELATION;
    e.heat_fraction = NAN;
    e.cylinders = 4.0;
    e.bore = e.stroke = 0.086;
    e.compression = 10.5;
    e.correlation_constant = 10.4;
    e.stoichiometric = 14.7;
    e.chen_flynn[0] = 0.137e5;
    e.chen_flynn[1] = 0.005;
    e.chen_flynn[2] = 0.162e5;
    e.overrun_intake = 0.3;
    e.overrun_oil = 360.0;
    return e;
}

/* Laws and formulas beyond the plain ones, the cap in the way of all: no jump, nothing below zero or no
 * number, and the slope is the derivative. */
static void beyond_the_plain(void **state)
{
    (void)state;
    const struct sp_oil oil = {.fitted = true, .heat_share = 0.0, .friction_share = 0.1};
    for (int variant = 0; variant < 8; ++variant) {
        struct sp_engine e = whole();
        e.overrun_law = (enum sp_friction_law)(variant % 4);
        e.energy_cap = variant & 4 ? 0.62 : 0.75; /* the lower one cuts at high load */
        e.diesel = variant & 1;
        e.air_fuel_ratio = e.diesel ? 30.0 : 13.5;
        e.idle_heat = variant & 2 ? 4e3 : NAN;
        struct sp_engine_law *law = build(&e);
        sp_engine_law_oil(law, &oil);
        for (double speed = 0.5; speed < 120.0; speed += 1.7)
            for (double power = -20e3; power < 110e3; power += 700.0) {
                struct sp_engine_heat a = heat(law, power - 1e-3, speed), b = heat(law, power + 1e-3, speed);
                struct sp_engine_heat n = heat(law, power, speed + 1e-6);
                check_close(a.gas, b.gas, 0.0, 0.3);
                check_close(a.gas, n.gas, 0.0, 0.3);
                check_close(a.friction, b.friction, 0.0, 0.3);
                check_close(a.fuel, b.fuel, 0.0, 0.3);
                assert_true(a.gas >= 0.0 && a.friction >= 0.0 && a.fuel >= 0.0 && a.oil >= 0.0 &&
                            a.cut >= 0.0);
            }
        for (double power = 500.0; power < 110e3; power += 1.3e3) {
            double up = heat(law, power + 1.0, 60.0).gas, down = heat(law, power - 1.0, 60.0).gas;
            check_close(heat(law, power, 60.0).per_power, (up - down) / 2.0, 1e-4, 1e-5);
        }
        sp_engine_law_free(law);
    }
}

/* The cut shows what the law had asked for. */
static void cap_tells_what_it_took(void **state)
{
    (void)state;
    struct sp_engine e = sample();
    e.heat_fraction = 2.0;
    struct sp_engine_law *plain = build(&e);
    e.energy_cap = 0.75;
    struct sp_engine_law *law = build(&e);
    for (double power = 0.0; power < 110e3; power += 900.0) {
        struct sp_engine_heat h = heat(law, power, 60.0);
        check_close(h.gas + h.cut, heat(plain, power, 60.0).gas, 1e-12, 0.0);
    }
    sp_engine_law_free(law);
    sp_engine_law_free(plain);
    e.idle_heat = 9e3; /* given, so not cut though the Willans line knows of less fuel */
    law = build(&e);
    check_close(heat(law, 0.0, 14.0).gas, 9e3, 1e-12, 0.0);
    sp_engine_law_free(law);
    e.heat_law = SP_HEAT_FUEL; /* fuel that does not pay for the work: no heat rather than less than none */
    law = build(&e);
    struct sp_engine_row row = {80e3, 60.0, 1e-3, NAN};
    check_close(sp_engine_heat(law, &row).gas, 0.0, 0.0, 0.0);
    check_close(sp_engine_heat(law, &row).cut, 0.3 * 42.6e3, 1e-12, 0.0);
    sp_engine_law_free(law);
}

/* One flow measured stands for both; a mixture measured by both moves the gas temperature as the fit does. */
static void correlation_flows(void **state)
{
    (void)state;
    struct sp_engine e = whole();
    struct sp_engine_law *law = build(&e);
    double fuel = sp_engine_fuel_power(&e, 50e3, 50.0) / e.heating_value, air = 14.7 * fuel;
    struct sp_engine_row rows[] = {{50e3, 50.0, fuel, NAN}, {50e3, 50.0, NAN, air}, {50e3, 50.0, fuel, air}};
    for (int i = 0; i < 3; ++i) {
        check_close(sp_engine_heat(law, &rows[i]).gas, heat(law, 50e3, 50.0).gas, 1e-12, 0.0);
        check_close(sp_engine_heat(law, &rows[i]).per_power, 0.0, 0.0, 0.0);
    }
    struct sp_engine_row lean = {50e3, 50.0, fuel, 1.2 * air}, none = {50e3, 50.0, 0.0, 0.0};
    double share = sp_engine_heat(law, &lean).gas / heat(law, 50e3, 50.0).gas;
    double flow = pow((1.2 * 14.7 + 1.0) / 15.7, 0.75); /* more air; but a cooler gas */
    assert_true(share < flow && share > 0.8 * flow);
    check_close(sp_engine_heat(law, &none).gas, 0.0, 0.0, 0.0);
    struct sp_engine_row cut = {-20e3, 50.0, 0.0, air}; /* air goes on while the fuel is cut */
    check_close(sp_engine_heat(law, &cut).gas, 0.0, 0.0, 1e-9);
    sp_engine_law_free(law);
}

static void unusable_beyond(void **state)
{
    (void)state;
    struct sp_engine e = whole();
    e.bore = NAN;
    refused(&e);
    e = whole();
    e.stoichiometric = 0.0;
    refused(&e);
    e = whole();
    e.gas_reference = NAN;
    refused(&e);
    e = whole();
    e.overrun_law = SP_FRICTION_DIESEL;
    e.stroke = NAN;
    refused(&e);
    e = whole();
    e.heat_law = SP_HEAT_GIVEN;
    e.heat_given = NAN;
    refused(&e);
}

static void gas_factor(void **state)
{
    (void)state;
    struct sp_engine e = sample();
    check_close(sp_engine_gas_factor(&e, 378.0), 1.0, 1e-15, 0.0);
    check_close(sp_engine_gas_factor(&e, 293.0), 547.0 / 462.0, 1e-12, 0.0);
    check_close(sp_engine_gas_factor(&e, 900.0), 0.0, 0.0, 0.0);
    e.gas_temperature = NAN;
    check_close(sp_engine_gas_factor(&e, 293.0), 1.0, 0.0, 0.0);
}

static void assumed_speed(void **state)
{
    (void)state;
    struct sp_engine e = sample();
    check_close(sp_engine_assumed_speed(&e, 0.0, 0.0), 14.0, 0.0, 0.0);
    check_close(sp_engine_assumed_speed(&e, 0.0, 20.0), 25.0, 1e-12, 0.0);
    check_close(sp_engine_assumed_speed(&e, 100e3, 20.0), 80.0, 1e-12, 0.0);
    check_close(sp_engine_assumed_speed(&e, 1e9, 20.0), 100.0, 0.0, 0.0);
    check_close(sp_engine_assumed_speed(&e, -50e3, 20.0), 25.0, 1e-12, 0.0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(off_is_zero),
        cmocka_unit_test(no_jumps),
        cmocka_unit_test(slope_is_the_derivative),
        cmocka_unit_test(overrun),
        cmocka_unit_test(given_idle_heat),
        cmocka_unit_test(table),
        cmocka_unit_test(bad_tables),
        cmocka_unit_test(flows),
        cmocka_unit_test(unusable),
        cmocka_unit_test(beyond_the_plain),
        cmocka_unit_test(cap_tells_what_it_took),
        cmocka_unit_test(correlation_flows),
        cmocka_unit_test(unusable_beyond),
        cmocka_unit_test(gas_factor),
        cmocka_unit_test(assumed_speed),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
