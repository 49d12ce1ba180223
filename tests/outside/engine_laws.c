/* Oil, charge air, the heat by correlation, given heat, overrun formulas and the energy cap, against
 * published figures and sums by hand. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include "part/charge.h"
#include "part/correlation.h"
#include "part/engine.h"
#include "part/friction.h"
#include "part/oil.h"

/* Two litres, four square cylinders. */
static struct sp_engine two_litre(void)
{
    return (struct sp_engine){.displacement = 2.0e-3,
                              .rated_power = 100e3,
                              .rated_speed = 100.0,
                              .idle_speed = 12.5,
                              .heat_fraction = 0.65,
                              .heat_exponent = 0.85,
                              .idle_heat = NAN,
                              .fuel_share = 0.30,
                              .air_fuel_ratio = 13.3,
                              .stoichiometric = 14.7,
                              .heating_value = 43e6,
                              .indicated_efficiency = 0.40,
                              .friction_pressure = {1.55e5, 0.0, 16.56},
                              .overrun_pressure = {0.97e5, 900.0, 18.0},
                              .overrun_share = 0.4,
                              .gas_temperature = 840.0,
                              .gas_reference = 363.0,
                              .cylinders = 4.0,
                              .bore = 0.086,
                              .stroke = 0.086,
                              .compression = 10.5,
                              .correlation_constant = 10.4,
                              .chen_flynn = {0.30e5, 0.005, 0.044e5, 0.0034e5},
                              .overrun_intake = 1.0,
                              .overrun_oil = SP_ZERO_C + 90.0};
}

static struct sp_engine_law *build(const struct sp_engine *e)
{
    struct sp_complaints c = {0};
    struct sp_engine_law *law = sp_engine_law_build(e, NULL, &c);
    assert_non_null(law);
    sp_complaints_free(&c);
    return law;
}

static struct sp_engine_heat heat(const struct sp_engine_law *law, double power, double speed)
{
    struct sp_engine_row row = {power, speed, NAN, NAN};
    return sp_engine_heat(law, &row);
}

/* ---- oil ------------------------------------------------------------------------------------------- */

/* Unused engine oil of a heat transfer handbook (Incropera & DeWitt, table A.5, from memory): 300 K
 * 884.1 kg/m3, 1909 J/kgK; 380 K 836.0, 2250; 400 K 825.1, 2337. */
static void oil_properties(void **state)
{
    (void)state;
    const double known[][3] = {
        {300.0, 884.1, 1909.0}, {340.0, 859.9, 2076.0}, {380.0, 836.0, 2250.0}, {400.0, 825.1, 2337.0}};
    for (size_t i = 0; i < sizeof known / sizeof *known; ++i) {
        check_close(sp_oil_density(known[i][0]), known[i][1], 0.03, 0.0);
        check_close(sp_oil_cp(known[i][0]), known[i][2], 0.035, 0.0);
    }
    /* enthalpy is the integral of c_p: a straight line, so the middle's times the span */
    check_close(sp_oil_enthalpy(390.0) - sp_oil_enthalpy(310.0), 80.0 * sp_oil_cp(350.0), 1e-12, 0.0);
}

/* Heat per brake kW of a club engine, 0.09 (common practice), and 45 % of what motoring at 3000/min takes: by
 * Barnes-Moss 9.35 kW for 2 l, so 4.21 kW. */
static void oil_heat(void **state)
{
    (void)state;
    struct sp_oil oil = {.fitted = true, .heat_share = 0.09, .friction_share = 0.45};
    struct sp_engine e = two_litre();
    struct sp_engine_law *law = build(&e);
    check_close(heat(law, 60e3, 50.0).oil, 0.0, 0.0, 0.0);
    sp_engine_law_oil(law, &oil);
    check_close(heat(law, 60e3, 50.0).oil, 5.4e3 + 4.2075e3, 1e-12, 0.0);
    check_close(heat(law, -20e3, 50.0).oil, 4.2075e3, 1e-12, 0.0);
    check_close(heat(law, 60e3, 0.0).oil, 0.0, 0.0, 0.0);
    sp_engine_law_free(law);
}

/* ---- charge air ------------------------------------------------------------------------------------ */

/* Compression by 2 from 300 K with 70 %: 300 (1.219014 - 1)/0.7 = 93.863 K by hand, air at 1.4. */
static void compressor(void **state)
{
    (void)state;
    struct sp_charge c = {.fitted = true, .pressure_ratio = 2.0, .efficiency = 0.70, .air_flow = 0.2};
    check_close(300.0 * sp_charge_heating(&c, 0.2), 93.863, 0.0, 0.001);
    check_close(sp_charge_heating(&c, 0.35), sp_charge_heating(&c, 0.2), 0.0, 0.0);
    check_close(sp_charge_ratio(&c, 0.1), 1.25, 1e-15, 0.0);
    check_close(sp_charge_heating(&c, 0.0), 0.0, 0.0, 0.0);
    c.efficiency = 1.0; /* then p v^1.4 is constant: T2/T1 = (p2/p1)^(1 - 1/1.4) */
    check_close(1.0 + sp_charge_heating(&c, 0.2), exp((1.0 - 1.0 / 1.4) * log(2.0)), 1e-12, 0.0);
    check_close(sp_charge_flow(&c, 165e3, 330e3), 0.1, 1e-12, 0.0);
}

/* 0.2 kg/s cooled by 100 K: 0.2 x 1006 x 100 = 20.1 kW. */
static void charge_heat(void **state)
{
    (void)state;
    check_close(0.2 * SP_CHARGE_CP * 100.0, 20.1e3, 0.003, 0.0);
}

/* ---- by correlation -------------------------------------------------------------------------------- */

/* Taylor & Toong 1957, worked by hand. A: 6000/min full, 0.10856 kg/s air, 8.162 g/s fuel, gas 840 K, coolant
 * 363 K: 89.50 kW. B: 2000/min, volumetric efficiency 0.33 of 1.18 kg/m3, 14.7 of air, gas 845 K:
 * 18.34 kW. */
static void correlation_worked(void **state)
{
    (void)state;
    struct sp_engine e = two_litre();
    double a = sp_correlation_conductance(&e, 0.10856 + 8.162e-3, 840.0) * (840.0 - 363.0);
    double air = 0.33 * 1.18 * 2.0e-3 * 2000.0 / 120.0;
    double b = sp_correlation_conductance(&e, air * (1.0 + 1.0 / 14.7), 845.0) * (845.0 - 363.0);
    check_close(a, 89.50e3, 2e-4, 0.0);
    check_close(b, 18.34e3, 5e-4, 0.0);
    double twice = sp_correlation_conductance(&e, 2.0 * (0.10856 + 8.162e-3), 840.0) * (840.0 - 363.0);
    check_close(twice / a, 1.681793, 1e-6, 0.0);
    check_close(sp_correlation_viscosity(845.0), 3.748e-5, 2e-4, 0.0);
    check_close(sp_correlation_conductivity(845.0), 0.06016, 2e-4, 0.0);
}

/* The law gives case A from the trace's two flows: metal at the temperature at which coolant was taken. */
static void correlation_law(void **state)
{
    (void)state;
    struct sp_engine e = two_litre();
    e.heat_law = SP_HEAT_CORRELATION;
    struct sp_engine_law *law = build(&e);
    struct sp_engine_row a = {NAN, 100.0, 8.162e-3, 0.10856};
    check_close(sp_engine_heat(law, &a).gas, 89.50e3, 5e-4, 0.0);
    /* from power alone, by the Willans line: within the 20 % that the law claims */
    struct sp_engine_row power = {100e3, 100.0, NAN, NAN};
    check_within(sp_engine_heat(law, &power).gas, 0.8 * 89.5e3, 1.2 * 89.5e3);
    sp_engine_law_free(law);
}

/* ---- given ----------------------------------------------------------------------------------------- */

/* 1.2 kW and 8 % of 90 kW: 8.4 kW, pulling or braking; no metal temperature and no friction in it. */
static void given(void **state)
{
    (void)state;
    struct sp_engine e = {.heat_law = SP_HEAT_GIVEN,
                          .heat_given = 1.2e3,
                          .heat_loss = 0.08,
                          .idle_heat = NAN,
                          .displacement = NAN,
                          .rated_power = NAN,
                          .rated_speed = NAN,
                          .heat_fraction = NAN};
    struct sp_engine_law *law = build(&e);
    const double powers[] = {90e3, -90e3};
    for (size_t i = 0; i < 2; ++i) {
        struct sp_engine_heat h = heat(law, powers[i], NAN);
        check_close(h.gas, 8.4e3, 1e-12, 0.0);
        check_close(fabs(h.friction) + fabs(h.per_power) + fabs(h.oil) + fabs(h.fuel), 0.0, 0.0, 0.0);
    }
    check_close(sp_engine_gas_factor(&e, 250.0), 1.0, 0.0, 0.0);
    sp_engine_law_free(law);
}

/* ---- overrun --------------------------------------------------------------------------------------- */

/* Patton, Nitschke & Heywood 1989, worked apart for 86 x 86 mm, four cylinders, compression 10.5. */
static void petrol_friction(void **state)
{
    (void)state;
    struct sp_engine e = two_litre();
    const double warm = SP_ZERO_C + 84.70; /* where the oil has the 10.6 cSt of the fit */
    check_close(sp_friction_petrol(&e, 50.0, 1.0, warm), 114.75e3, 5e-4, 0.0);
    check_close(sp_friction_petrol(&e, 100.0, 1.0, warm), 170.43e3, 5e-4, 0.0);
    check_close(sp_friction_petrol(&e, 50.0, 0.3, warm), 97.92e3, 5e-4, 0.0);
    const double cold[][2] = {{0.0, 251.9e3}, {20.0, 155.8e3}, {60.0, 98.0e3}, {90.0, 83.6e3}};
    for (size_t i = 0; i < sizeof cold / sizeof *cold; ++i) {
        double pressure = sp_friction_petrol(&e, 2000.0 / 60.0, 0.5, SP_ZERO_C + cold[i][0]);
        check_close(pressure, cold[i][1], 1e-3, 0.0);
    }
    e.overrun_law = SP_FRICTION_SI;
    double pressure = sp_friction_petrol(&e, 50.0, 1.0, SP_ZERO_C + 90.0);
    check_close(sp_engine_motoring(&e, 50.0), pressure * 2e-3 * 25.0, 1e-12, 0.0);
}

/* Diesel, 3000/min and 86 mm: S 8.6 m/s, 75 + 144 + 29.58 = 248.58 kPa. Chen-Flynn there: peak 1.01325e5 x
 * 10.5^1.3 = 21.54 bar, 0.30 + 0.1077 + 0.3784 + 0.25146 = 1.0376 bar. */
static void other_friction(void **state)
{
    (void)state;
    struct sp_engine e = two_litre();
    check_close(sp_friction_diesel(&e, 50.0), 248.584e3, 1e-9, 0.0);
    check_close(sp_friction_chen_flynn(&e, 50.0), 1.0376e5, 2e-4, 0.0);
    e.overrun_law = SP_FRICTION_DIESEL;
    check_close(sp_engine_motoring(&e, 50.0), 248.584e3 * 2e-3 * 25.0, 1e-9, 0.0);
    check_close(sp_engine_motoring(&e, 0.0), 0.0, 0.0, 0.0);
}

/* ---- the cap --------------------------------------------------------------------------------------- */

/* Energy: of a fired engine's fuel no more than the cap leaves as work, coolant's and oil's heat, whatever is
 * asked; where little is asked the law stands to the last bit. */
static void energy_cap(void **state)
{
    (void)state;
    struct sp_oil oil = {.fitted = true, .heat_share = 0.2, .friction_share = 0.45};
    struct sp_engine e = two_litre();
    struct sp_engine_law *plain = build(&e);
    e.energy_cap = 0.75;
    struct sp_engine_law *law = build(&e);
    for (double power = 0.0; power <= 100e3; power += 5e3)
        check_close(heat(law, power, 80.0).gas, heat(plain, power, 80.0).gas, 0.0, 0.0);
    sp_engine_law_free(law);
    e.heat_fraction = 3.0;
    law = build(&e);
    sp_engine_law_oil(law, &oil);
    for (double speed = 12.5; speed <= 110.0; speed += 7.5)
        for (double power = 0.0; power <= 120e3; power += 4e3) {
            struct sp_engine_heat h = heat(law, power, speed);
            double fuel = sp_engine_fuel_power(&e, power, speed), sum = power + h.gas + h.oil;
            assert_true(h.gas >= 0.0 && h.oil >= 0.0);
            /* work and oil alone may ask for more than the cap: then no heat is left for the coolant */
            if (h.gas > 0.0) assert_true(sum <= 0.75 * fuel * (1.0 + 1e-12));
        }
    sp_engine_law_free(law);
    sp_engine_law_free(plain);
}

/* The slope that the alternator's load goes by is the heat's derivative, through the cap's bend too. */
static void slope_through_the_cap(void **state)
{
    (void)state;
    struct sp_engine e = two_litre();
    e.energy_cap = 0.75;
    e.heat_fraction = 1.6;
    struct sp_engine_law *law = build(&e);
    for (double power = 6e3; power < 120e3; power += 1.7e3) {
        double by_steps = (heat(law, power + 1.0, 60.0).gas - heat(law, power - 1.0, 60.0).gas) / 2.0;
        check_close(heat(law, power, 60.0).per_power, by_steps, 1e-4, 1e-5);
    }
    sp_engine_law_free(law);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(oil_properties),     cmocka_unit_test(oil_heat),
        cmocka_unit_test(compressor),         cmocka_unit_test(charge_heat),
        cmocka_unit_test(correlation_worked), cmocka_unit_test(correlation_law),
        cmocka_unit_test(given),              cmocka_unit_test(petrol_friction),
        cmocka_unit_test(other_friction),     cmocka_unit_test(energy_cap),
        cmocka_unit_test(slope_through_the_cap),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
