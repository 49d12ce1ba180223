/* Road load against closed forms and published examples. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include "part/engine.h"
#include "part/road.h"

#include <gsl/gsl_integration.h>

static struct sp_body test_car(void)
{
    return (struct sp_body){.mass = 1500.0,
                            .frontal_area = 1.0,
                            .drag_coefficient = 0.65,
                            .rolling = 0.011,
                            .rotating = 1.03,
                            .driveline = 1.0};
}

static const double density = 1.2;

static double force_at(double speed)
{
    struct sp_body b = test_car();
    return sp_road_force(&b, speed, speed, density, 0.0, 0.0);
}

static double slowing_time(double speed, void *unused)
{
    (void)unused;
    struct sp_body b = test_car();
    return b.rotating * b.mass / force_at(speed);
}

static double slowing_distance(double speed, void *unused)
{
    return speed * slowing_time(speed, unused);
}

static double integral(double (*f)(double, void *), double from_kmh, double to_kmh)
{
    gsl_integration_workspace *w = gsl_integration_workspace_alloc(200);
    gsl_function g = {f, NULL};
    double result, error;
    gsl_integration_qags(&g, to_kmh / 3.6, from_kmh / 3.6, 0.0, 1e-10, 200, w, &result, &error);
    gsl_integration_workspace_free(w);
    return result;
}

/* Closed form t = m_e/sqrt(F0 c) [atan(v1 sqrt(c/F0)) - atan(v2 sqrt(c/F0))], c = rho CdA/2: 1500 kg and 3 %
 * rotating, rolling 0.011, CdA 0.65 m2, 1.2 kg/m3. */
static void coast_down(void **state)
{
    (void)state;
    check_close(integral(slowing_time, 120.0, 80.0), 37.613, 0.0, 6e-4);
    check_close(integral(slowing_distance, 120.0, 80.0), 1026.8, 0.0, 0.06);
    check_close(integral(slowing_time, 100.0, 60.0), 49.073, 0.0, 6e-4);
    check_close(integral(slowing_time, 120.0, 0.0), 198.821, 0.0,
                6e-4); /* same closed form, worked by hand */
    double F0 = 161.80973, c = 0.39, m = 1545.0;
    double closed = m / sqrt(F0 * c) * (atan(120.0 / 3.6 * sqrt(c / F0)) - atan(80.0 / 3.6 * sqrt(c / F0)));
    check_close(integral(slowing_time, 120.0, 80.0), closed, 1e-7, 0.0);
}

/* The same car in steady travel: 3.29, 12.85, 34.95 and 75.86 kW at 50, 100, 150 and 200 km/h. */
static void steady_power(void **state)
{
    (void)state;
    struct sp_body b = test_car();
    const double kmh[] = {50, 100, 150, 200}, kw[] = {3.29, 12.85, 34.95, 75.86};
    check_close(force_at(1e-9), 161.8, 0.0, 0.05);
    for (int i = 0; i < 4; i++)
        check_close(sp_road_power(&b, force_at(kmh[i] / 3.6), kmh[i] / 3.6, 0.0) / 1e3, kw[i], 0.0, 0.0051);
}

/* UN/ECE R83 chassis dynamometer, reference mass 1420-1530 kg: 7.4 N and 0.0502 N/(km/h)^2, so 329 N and
 * 7.3 kW at 80 km/h (table of the regulation, as quoted in a lecture). */
static void dynamometer_table(void **state)
{
    (void)state;
    struct sp_body b = test_car();
    b.mass = 1470.0;
    b.rolling = 7.4 / (1470.0 * SP_GRAVITY);
    b.drag_coefficient = 0.0502 * 3.6 * 3.6 / 0.6;
    double v = 80.0 / 3.6, force = sp_road_force(&b, v, v, 1.2, 0.0, 0.0);
    check_close(force, 329.0, 0.0, 0.5);
    check_close(sp_road_power(&b, force, v, 0.0), 7.30e3, 0.0, 6.0);
}

/* Towing up the Davis Dam grade at 40 mph (grade of SAE J2807): 4500 kg, CdA 3.6 m2, 1.10 kg/m3, rolling
 * 0.010, driveline 0.85, 0.75 of brake power to the coolant. Worked by hand: 3721 N, 66.5 kW at the
 * wheels, 78.3 kW at the crank, 58.7 kW of heat at 6.01 %; 74.3, 87.4 and 65.6 kW at 7 %. */
static void davis_dam(void **state)
{
    (void)state;
    struct sp_body b = {.mass = 4500.0,
                        .frontal_area = 3.6,
                        .drag_coefficient = 1.0,
                        .rolling = 0.010,
                        .rotating = 1.05,
                        .driveline = 0.85};
    const double grade[] = {0.0601, 0.07}, wheel[] = {66.5, 74.3}, crank[] = {78.3, 87.4},
                 heat[] = {58.7, 65.6};
    double v = 40.0 * 0.44704;
    check_close(sp_road_force(&b, v, v, 1.10, grade[0], 0.0), 3721.0, 0.0, 1.0);
    for (int i = 0; i < 2; i++) {
        double force = sp_road_force(&b, v, v, 1.10, grade[i], 0.0), power = sp_road_power(&b, force, v, 0.0);
        check_close(force * v / 1e3, wheel[i], 0.0, 0.051);
        check_close(power / 1e3, crank[i], 0.0, 0.051);
        struct sp_engine e = {.displacement = 3e-3,
                              .rated_power = power,
                              .rated_speed = 60.0,
                              .idle_speed = 12.0,
                              .heat_fraction = 0.75,
                              .heat_exponent = 0.85,
                              .idle_heat = NAN,
                              .indicated_efficiency = 0.4,
                              .friction_pressure = {1.6e5, 0.0, 0.0}};
        struct sp_complaints c = {0};
        struct sp_engine_law *law = sp_engine_law_build(&e, NULL, &c);
        struct sp_engine_row row = {power, 60.0, NAN, NAN};
        check_close(sp_engine_heat(law, &row).gas / 1e3, heat[i], 0.0, 0.051);
        sp_engine_law_free(law);
        sp_complaints_free(&c);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(coast_down),
        cmocka_unit_test(steady_power),
        cmocka_unit_test(dynamometer_table),
        cmocka_unit_test(davis_dam),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
