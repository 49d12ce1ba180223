/* Inlets against published values. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"
#include "part/inlet.h"

/* Sharp lip: loss on the inlet head is (1 - 1/mu)^2 by momentum balance; all of it at standstill. */
static void sharp_lip(void **state)
{
    (void)state;
    static const double rows[][2] = {{0.5, 0},  {1, 0},        {1.2, 0.027778}, {1.5, 0.111111},
                                     {2, 0.25}, {3, 0.444444}, {5, 0.64}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        double V = 20, V1 = rows[i][0] * V;
        check_close(sp_lip_loss(1, 1.2, V1, V) / (0.6 * V1 * V1), rows[i][1], 0, 6e-7);
    }
    check_close(sp_lip_loss(1, 1.2, 10, 0), 60, 1e-12, 0);
    /* a fan drawing 0.642959 m3/s through 0.08 m2 at 3 m/s and so on: 15.2228, 6.7295, 0 Pa (worked) */
    check_close(sp_lip_loss(1, 1.2, 0.642959 / 0.08, 3), 15.2228, 0, 3e-3);
    check_close(sp_lip_loss(1, 1.2, 0.667920 / 0.08, 5), 6.7295, 0, 3e-3);
    check_close(sp_lip_loss(1, 1.2, 0.736670 / 0.08, 10), 0, 0, 1e-12);
}

/* Compressible sharp-lip inlet at standstill, (1 + 0.2 M^2)^3.5/(1 + 1.4 M^2): 0.993114 at M 0.1, 0.973751
 * at 0.2 (NACA TN 3004 gives 79 % when choked; the same form gives 0.788720). At low Mach number
 * the incompressible loss is that of rho V^2/2 = 0.7 M^2 p. */
static void sharp_lip_compressible(void **state)
{
    (void)state;
    check_close(pow(1.2, 3.5) / 2.4, 0.79, 2e-3, 0);
    static const double rows[][2] = {{0.1, 0.993114}, {0.2, 0.973751}};
    for (int i = 0; i < 2; i++) {
        double mach = rows[i][0], p0 = 101325, T0 = 288.15, heat = 1 + 0.2 * mach * mach;
        double T = T0 / heat, p = p0 * rows[i][1] / pow(heat, 3.5), V = mach * sqrt(1.4 * 287.05287 * T);
        double loss = sp_lip_loss(1, p / (287.05287 * T), V, 0) / p0;
        check_close(loss, 1 - rows[i][1], mach * mach, 0);
    }
}

/* Idelchik's knots; and the polynomial quoted with Roberson & Crowe, Idelchik and ASHRAE, +-10 %. */
static void lip_coefficient(void **state)
{
    (void)state;
    static const double rows[][2] = {{0, 0.50},    {0.01, 0.44}, {0.02, 0.37}, {0.03, 0.31},
                                     {0.04, 0.26}, {0.05, 0.22}, {0.06, 0.20}, {0.08, 0.15},
                                     {0.12, 0.09}, {0.16, 0.06}, {0.20, 0.03}, {0.9, 0.03}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++)
        check_close(sp_lip_coefficient(rows[i][0]), rows[i][1], 1e-12, 0);
    for (double x = 0; x <= 0.2; x += 0.005) {
        double k = 0.50 + x * (-7.8163 + x * (56.739 + x * (-194.09 + x * 235.03)));
        check_close(sp_lip_coefficient(x), k, 0.1, 0.004);
    }
}

/* 1/7-power layer, integrals by hand. */
static void boundary_layer(void **state)
{
    (void)state;
    static const double rows[][2] = {{0.25, 0.538360}, {0.5, 0.656268}, {1, 0.8},
                                     {2, 0.906667},    {4, 0.954839},   {8, 0.977778}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        double h = rows[i][0];
        check_close(sp_layer_recovery(0.03 * h, 0.03), rows[i][1], 0, 1e-6);
        double mass = 0, head = 0; /* mid-point rule over the slot */
        for (int k = 0; k < 200000; k++) {
            double y = (k + 0.5) / 200000 * h, u = y < 1 ? pow(y, 1 / 7.0) : 1;
            mass += u;
            head += u * u * u;
        }
        check_close(sp_layer_recovery(0.03 * h, 0.03), head / mass, 0, 1e-5);
    }
    /* flat plate, 1 m at 50 m/s, nu 1.5e-5: 18.350 mm */
    check_close(sp_layer_thickness(1, 50, 1.5e-5), 18.350e-3, 3e-5, 0);
}

static void spillage(void **state)
{
    (void)state;
    static const double rows[][2] = {{0.3, 0.49}, {0.5, 0.25}, {0.8, 0.04}, {1, 0}, {1.7, 0}};
    for (size_t i = 0; i < 5; i++)
        check_close(sp_spill_drag(600, 0.1, rows[i][0], 0), 60 * rows[i][1], 1e-12, 1e-12);
    check_close(sp_spill_drag(600, 0.1, 0.5, 1), 0, 0, 0);
}

/* Own behaviour at the edges. */
static void edges(void **state)
{
    (void)state;
    check_close(sp_lip_loss(1, 1.2, -5, 20), 0, 0, 0);
    check_close(sp_lip_loss(1, 1.2, -5, -20), 0, 0, 0);
    check_close(sp_lip_loss(1, 1.2, 5, -20), sp_lip_loss(1, 1.2, 5, 0), 0, 0);
    check_close(sp_lip_loss(0.3, 1.2, 10, 0), 18, 1e-12, 0);
    assert_true(isnan(sp_lip_loss(1, 1.2, NAN, 3)) && isnan(sp_lip_loss(1, 1.2, 3, NAN)));
    assert_true(isnan(sp_lip_coefficient(-0.01)) && isnan(sp_lip_coefficient(NAN)));
    check_close(sp_lip_coefficient(INFINITY), 0.03, 0, 0);
    check_close(sp_layer_recovery(0.1, 0), 1, 0, 0);
    assert_true(isnan(sp_layer_recovery(0, 0.1)) && isnan(sp_layer_recovery(0.1, -1)) &&
                isnan(sp_layer_recovery(0.1, NAN)));
    check_close(sp_layer_recovery(0.1 * (1 + 1e-12), 0.1), sp_layer_recovery(0.1, 0.1), 1e-11, 0);
    check_close(sp_layer_thickness(0, 50, 1.5e-5), 0, 0, 0);
    assert_true(isnan(sp_layer_thickness(1, 0, 1.5e-5)) && isnan(sp_layer_thickness(-1, 5, 1.5e-5)));
    check_close(sp_spill_drag(600, 0.1, -0.5, 0), 60, 1e-12, 0);
    assert_true(isnan(sp_spill_drag(600, 0.1, NAN, 0)));
}

/* Layer: what a slot of h/d = 0.25 to 8 is left with, times the recovery ahead of it. */
static void recovery_in_a_layer(void **state)
{
    (void)state;
    static const struct { double ratio, eta; } rows[] = {{0.25, 0.538360}, {0.5, 0.656268}, {1, 0.800000},
                                                         {2, 0.906667},    {4, 0.954839},   {8, 0.977778}};
    struct sp_inlet d = {.recovery = 0.9, .layer_thickness = 0.02};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; ++i) {
        d.height = rows[i].ratio * 0.02;
        check_close(sp_inlet_recovery(&d, 0.6), 0.9 * rows[i].eta, 1e-6, 0);
    }
    d.recovery = -0.2; /* no head is left to lose in a separated place */
    assert_true(sp_inlet_recovery(&d, 0.6) == -0.2);
    d = (struct sp_inlet){.recovery = 0.87};
    assert_true(sp_inlet_recovery(&d, INFINITY) == 0.87);
}

/* A submerged inlet's table: straight lines, the first carried to standstill where it rises, level at the end. */
static void recovery_of_a_table(void **state)
{
    (void)state;
    double cell[] = {0.2, 0.55, 0.4, 0.85, 0.7, 0.90, 1.0, 0.80}, falling[] = {0.2, 0.9, 0.6, 0.7};
    struct sp_inlet d = {.recovery = 1.0, .recovery_table = {4, 2, cell}};
    static const struct { double mu, eta; } rows[] = {{0.0, 0.25},   {0.1, 0.40}, {0.2, 0.55}, {0.3, 0.70}, {0.4, 0.85},
                                                      {0.55, 0.875}, {0.7, 0.90}, {0.9, 5.0 / 6.0}, {1.0, 0.80},
                                                      {3.0, 0.80},   {INFINITY, 0.80}, {-2.0, 0.25}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; ++i)
        check_close(sp_inlet_recovery(&d, rows[i].mu), rows[i].eta, 1e-14, 0);
    assert_true(sp_inlet_recovery_single(&d.recovery_table));
    d.recovery_table = (struct sp_table){2, 2, falling};
    assert_true(sp_inlet_recovery(&d, 0.0) == 0.9 && sp_inlet_recovery_single(&d.recovery_table));
    d.recovery_table.rows = 1;
    assert_true(sp_inlet_recovery(&d, 0.0) == 0.9 && sp_inlet_recovery(&d, 9.0) == 0.9);
    double bent[] = {0.0, 0.1, 0.4, 0.2, 0.6, 0.9}, again[] = {0.0, 0.5, 0.4, 0.3, 0.6, 0.9};
    assert_false(sp_inlet_recovery_single(&(struct sp_table){3, 2, bent}));
    assert_false(sp_inlet_recovery_single(&(struct sp_table){3, 2, again}));
    double doubling[] = {0.0, 0.1, 0.4, 0.3, 0.6, 0.5};
    assert_false(sp_inlet_recovery_single(&(struct sp_table){3, 2, doubling}));
}

/* Those tables leave eta - Cp - B mu^2 one root from standstill on, and the refused ones need not. */
static void one_flow(void **state)
{
    (void)state;
    double cell[] = {0.0, 0.25, 0.4, 0.85, 0.7, 0.90, 1.0, 0.80}, bent[] = {0.0, 0.1, 0.4, 0.2, 0.6, 0.9, 2.0, 0.9};
    struct sp_inlet d = {.recovery_table = {4, 2, cell}}, e = {.recovery_table = {4, 2, bent}};
    int most = 0;
    for (double B = 0.01; B < 100.0; B *= 1.1)
        for (double Cp = -0.5; Cp < 0.2; Cp += 0.05) {
            int roots = 0, bad = 0;
            for (double mu = 0.001; mu < 12.0; mu += 0.001) {
                double f = sp_inlet_recovery(&d, mu) - Cp - B * mu * mu, g = sp_inlet_recovery(&e, mu) - Cp - B * mu * mu;
                double up = mu + 0.001;
                roots += (f > 0.0) != (sp_inlet_recovery(&d, up) - Cp - B * up * up > 0.0);
                bad += (g > 0.0) != (sp_inlet_recovery(&e, up) - Cp - B * up * up > 0.0);
            }
            assert_true(roots <= 1);
            if (bad > most) most = bad;
        }
    assert_int_equal(most, 3);
}

static void taped(void **state)
{
    (void)state;
    struct sp_inlet d = {.area = 0.08, .blocked = 0.25};
    check_close(sp_inlet_area(&d), 0.06, 1e-15, 0);
    d.blocked = 0.0;
    assert_true(sp_inlet_area(&d) == 0.08);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(sharp_lip),       cmocka_unit_test(sharp_lip_compressible),
        cmocka_unit_test(lip_coefficient), cmocka_unit_test(boundary_layer),
        cmocka_unit_test(spillage),        cmocka_unit_test(edges), cmocka_unit_test(recovery_in_a_layer),
        cmocka_unit_test(recovery_of_a_table), cmocka_unit_test(one_flow), cmocka_unit_test(taped),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
