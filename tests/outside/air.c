/* Atmosphere, moist air and film properties against published values.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"
#include "swirlpot/fluid.h"

/* US Standard Atmosphere 1976, geometric altitudes; computed with the independent library fluids
 * (ATMOSPHERE_1976): m, K, Pa, kg/m3. */
static void standard_atmosphere(void **state)
{
    (void)state;
    static const double rows[][4] = {{0, 288.1500, 101325.000, 1.2249992},
                                     {1000, 281.6510, 89876.285, 1.1116590},
                                     {2000, 275.1541, 79501.425, 1.0065532},
                                     {3000, 268.6592, 70121.162, 0.9092539},
                                     {4300, 260.2189, 59290.824, 0.7937550}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        double z = rows[i][0], T = sp_isa_temperature(z), p = sp_isa_pressure(z);
        check_close(T, rows[i][1], 0, 6e-5);
        check_close(p, rows[i][2], 5e-7, 0); /* constants of 1976 against R = 287.05287 */
        check_close(sp_air_density(T, p, 0), rows[i][3], 1e-6, 0); /* its gas constant differs by 7e-7 */
        check_close(sp_isa_altitude(rows[i][2]), z, 0, 3e-3);
    }
    /* US Standard Atmosphere 1976, printed table: 11 km geopotential is 11019 m geometric, 216.65 K;
     * 5000 m: 255.676 K, 54048 Pa (memory of the table). */
    check_close(sp_isa_temperature(5000), 255.676, 0, 1e-3);
    check_close(sp_isa_pressure(5000), 54048, 1e-4, 0);
}

/* Same pressure, temperature offset; arithmetic of p/(R T) on the library's pressures above. */
static void warm_and_cold_days(void **state)
{
    (void)state;
    static const double rows[][3] = {{0, 20, 1.1454933},    {1000, 20, 1.0379547}, {2000, 20, 0.9383486},
                                     {3000, 20, 0.8462561}, {4300, 20, 0.7371030}, {0, -15, 1.2922707},
                                     {4300, -15, 0.8423094}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        double z = rows[i][0];
        /* worked from temperatures rounded to 1e-4 K */
        check_close(sp_air_density(sp_isa_temperature(z) + rows[i][1], sp_isa_pressure(z), 0), rows[i][2],
                    5e-7, 0);
    }
}

/* Magnus form and ideal mixing, worked by hand: density at degC, Pa, humidity; then the CIPM-2007
 * density of the same state (constants from memory), to 0.05 %. */
static void humid_air(void **state)
{
    (void)state;
    check_close(sp_vapour_saturation(293.15), 2332.596, 1e-6, 0);
    static const double rows[][5] = {
        {20, 101325, 0.0, 1.2041063, 0},       {20, 101325, 0.5, 1.1988668, 1.199314},
        {20, 101325, 1.0, 1.1936274, 0},       {35, 101325, 0.6, 1.1311007, 1.131382},
        {15, 60000, 0.4, 0.7222777, 0.722463}, {40, 101325, 0.3, 1.1179084, 0}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        double rho = sp_air_density(rows[i][0] + 273.15, rows[i][1], rows[i][2]);
        check_close(rho, rows[i][3], 1e-7, 0);
        if (rows[i][4] > 0) check_close(rho, rows[i][4], 5e-4, 0);
    }
    /* IAPWS-IF97 saturation pressures [Pa]; the Magnus form is within 0.31 %. */
    check_close(sp_vapour_saturation(293.15), 2339.2, 3.2e-3, 0);
    check_close(sp_vapour_saturation(303.15), 4246.7, 3.2e-3, 0);
    check_close(sp_vapour_saturation(313.15), 7384.4, 3.2e-3, 0);
}

/* Humid-air equation of IAPWS at 101.325 kPa: 303.15 K, 16 g/kg: 1.15377 kg/m3, 1020.49 J/kgK at
 * humidity 0.596; 313.15 K, 30 g/kg: 1.10801, 1033.1 at 0.628. Ideal mixing misses by 0.05 and 0.33 %. */
static void humid_air_against_iapws(void **state)
{
    (void)state;
    check_close(sp_air_density(303.15, 101325, 0.596), 1.15377, 5e-4, 0);
    check_close(sp_moist_air(303.15, 101325, 0.596).cp, 1020.49, 3.3e-3, 0);
    check_close(sp_air_density(313.15, 101325, 0.628), 1.10801, 5e-4, 0);
    check_close(sp_moist_air(313.15, 101325, 0.628).cp, 1033.1, 3.3e-3, 0);
}

/* Reference equations of Lemmon et al. at 101.325 kPa, by the independent library iapws: T, rho, cp,
 * viscosity x 1e5, conductivity, Prandtl. */
static void films(void **state)
{
    (void)state;
    static const double rows[][6] = {
        {250, 1.41331, 1005.54, 1.6038, 0.02256, 0.7147}, {273.15, 1.29307, 1005.68, 1.7218, 0.02436, 0.7108},
        {300, 1.17700, 1006.37, 1.8537, 0.02638, 0.7071}, {323.15, 1.09248, 1007.43, 1.9635, 0.02808, 0.7044},
        {350, 1.00853, 1009.21, 2.0867, 0.03000, 0.7019}, {373.15, 0.94587, 1011.23, 2.1896, 0.03162, 0.7003},
        {400, 0.88231, 1014.14, 2.3055, 0.03345, 0.6989}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        double T = rows[i][0];
        check_close(sp_air_density(T, 101325, 0), rows[i][1], 1.2e-3, 0);
        check_close(sp_air_cp_film(T), rows[i][2], 2e-4, 0);
        check_close(sp_air_viscosity(T), rows[i][3] * 1e-5, 1.5e-3, 0);
        check_close(sp_air_conductivity(T), rows[i][4], 1e-3, 0);
        check_close(sp_air_prandtl(T), rows[i][5], 2.5e-3, 0);
    }
    /* Incropera & DeWitt, Table A.4 (memory): 300 K 1.846e-5, 0.0263, 0.707; 350 K 2.082e-5, 0.0300, 0.700 */
    check_close(sp_air_viscosity(300), 1.846e-5, 6e-3, 0);
    check_close(sp_air_conductivity(300), 0.0263, 5e-3, 0);
    check_close(sp_air_prandtl(350), 0.700, 5e-3, 0);
}

/* US Standard Atmosphere 1976: 1.789380e-5 Pa s at 288.15 K. */
static void sutherland(void **state)
{
    (void)state;
    check_close(sp_air_sutherland(288.15), 1.789380e-5, 1e-6, 0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(sutherland),
        cmocka_unit_test(standard_atmosphere),
        cmocka_unit_test(warm_and_cold_days),
        cmocka_unit_test(humid_air),
        cmocka_unit_test(humid_air_against_iapws),
        cmocka_unit_test(films),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
