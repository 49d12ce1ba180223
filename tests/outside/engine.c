/* Engine heat and friction against published formulas and worked values.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include "part/engine.h"

static struct sp_engine two_litre(double friction)
{
    return (struct sp_engine){.displacement = 2.0e-3,
                              .rated_power = 100e3,
                              .rated_speed = 100.0,
                              .idle_speed = 12.5,
                              .heat_fraction = 0.65,
                              .heat_exponent = 0.85,
                              .idle_heat = NAN,
                              .indicated_efficiency = 0.40,
                              .heating_value = 42.6e6,
                              .friction_pressure = {friction, 0.0, 0.0},
                              .overrun_pressure = {0.97e5, 0.15e5 * 0.06, 0.05e5 * 0.0036},
                              .overrun_share = 0.5,
                              .gas_temperature = NAN,
                              .gas_reference = NAN};
}

/* Willans line P_f = (p_me + p_me0)/e V_d N/120 (N in 1/min), form of Guzzella & Onder, from memory; 2.0 l,
 * e 0.40, 42.6 MJ/kg. The figures are worked by hand: 2 bar at 2000 1/min is 6.6667 kW brake and
 * (2 + 1.7)e5/0.4 * 2e-3 * 2000/120 = 30.833 kW of fuel; 30.833/42.6e6 kg/s over 6.667 kW is 390.85 g/kWh. */
static void willans_table(void **state)
{
    (void)state;
    static const struct {
        double rpm, brake, pme0, fuel, bsfc;
    } row[] = {
        {750, 0.0, 1.6, 5.000, NAN},
        {2000, 2.0, 1.7, 30.833, 390.85},
        {3000, 11.0, 1.9, 161.25, 247.8},
        {6000, 10.0, 3.2, 330.0, 278.87},
    };
    for (size_t i = 0; i < sizeof row / sizeof *row; i++) {
        struct sp_engine e = two_litre(row[i].pme0 * 1e5);
        double power = row[i].brake * 1e5 * 2.0e-3 * row[i].rpm / 120.0, speed = row[i].rpm / 60.0;
        double fuel = sp_engine_fuel_power(&e, power, speed);
        check_close(fuel, row[i].fuel * 1e3, 2e-5, 0.0);
        double grams_per_kwh = fuel / 42.6e6 * 1e3 * 3600.0 / (power / 1e3);
        if (power > 0.0) check_close(grams_per_kwh, row[i].bsfc, 2e-4, 0.0);
        check_close(sp_engine_power_from_fuel(&e, fuel / 42.6e6, speed), power, 1e-12, 1e-6);
    }
}

/* Idle fuel of that engine: 0.57 l/h of petrol at 0.745 kg/l. */
static void idle_fuel(void **state)
{
    (void)state;
    struct sp_engine e = two_litre(1.6e5);
    double litres = sp_engine_fuel_power(&e, 0.0, 12.5) / 42.6e6 / 0.745 * 3600.0;
    check_close(litres, 0.57, 0.0, 0.005);
}

/* Barnes-Moss, tfmep [bar] = 0.97 + 0.15 n + 0.05 n^2, n in 1000/min, after Heywood 1988 ch. 13: 1.17 bar at
 * 1000, 1.87 bar and 9.35 kW at 3000, 3.67 bar and 36.7 kW at 6000 for 2.0 l. */
static void barnes_moss(void **state)
{
    (void)state;
    struct sp_engine e = two_litre(1.6e5);
    check_close(sp_engine_motoring(&e, 50.0), 9.35e3, 1e-12, 0.0);
    check_close(sp_engine_motoring(&e, 100.0), 36.7e3, 1e-12, 0.0);
    check_close(sp_engine_motoring(&e, 1000.0 / 60.0), 1.17e5 * 2.0e-3 * 1000.0 / 120.0, 1e-12, 0.0);
}

/* Heat goes with fuel to a power: from the rated point (330.0 kW of fuel) to a light load of 30.833 kW the
 * ratio is (30.833/330)^0.85 = exp(0.85 ln 0.0934343) = 0.133331. Both points need their own friction, so the
 * friction line goes through 1.7 bar at 2000 and 3.2 bar at 6000 1/min. */
static void heat_over_load(void **state)
{
    (void)state;
    struct sp_engine e = two_litre(0.0);
    e.friction_pressure[1] = 1.5e5 / (200.0 / 3.0);
    e.friction_pressure[0] = 3.2e5 - 100.0 * e.friction_pressure[1];
    struct sp_complaints c = {0};
    struct sp_engine_law *law = sp_engine_law_build(&e, NULL, &c);
    assert_non_null(law);
    struct sp_engine_row rated = {100e3, 100.0, NAN, NAN}, light = {20e3 / 3.0, 100.0 / 3.0, NAN, NAN};
    check_close(sp_engine_heat(law, &rated).gas, 65e3, 1e-12, 0.0);
    check_close(sp_engine_heat(law, &light).gas / 65e3, 0.133331, 2e-5, 0.0);
    sp_engine_law_free(law);
    sp_complaints_free(&c);
}

/* Idle heat of a 2 litre engine: 35 to 45 % of 5 kW (estimate of common practice). */
static void idle_heat_is_plausible(void **state)
{
    (void)state;
    struct sp_engine e = two_litre(1.6e5);
    struct sp_complaints c = {0};
    struct sp_engine_law *law = sp_engine_law_build(&e, NULL, &c);
    struct sp_engine_row idle = {0.0, 12.5, NAN, NAN};
    check_within(sp_engine_heat(law, &idle).gas, 1.5e3, 2.5e3);
    sp_engine_law_free(law);
    sp_complaints_free(&c);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(willans_table),
        cmocka_unit_test(idle_fuel),
        cmocka_unit_test(barnes_moss),
        cmocka_unit_test(heat_over_load),
        cmocka_unit_test(idle_heat_is_plausible),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
