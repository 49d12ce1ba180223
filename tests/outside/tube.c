/* Tubes against published formulas' tables. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"
#include "part/tube.h"

static const double diameter = 5e-3;

/* A round tube with Dh/L = 0.004. */
static struct sp_tube round_tube(enum sp_tube_rule rule)
{
    struct sp_tube_shape s = {diameter, diameter, diameter / 0.004, 0, SP_WALL_TEMPERATURE, rule};
    struct sp_tube t;
    assert_true(sp_tube_build(&s, &t));
    return t;
}

static struct sp_tube flat_tube(enum sp_tube_rule rule)
{
    struct sp_tube_shape s = {1.3e-3, 21.5e-3, 0.6, 1.5, SP_WALL_HEAT_FLUX, rule};
    struct sp_tube t;
    assert_true(sp_tube_build(&s, &t));
    return t;
}

static void shape(void **state)
{
    (void)state;
    struct sp_tube t = flat_tube(SP_RULE_2013);
    check_close(t.area, 27.5873e-6, 2e-6, 0);
    check_close(t.perimeter, 44.4841e-3, 2e-6, 0);
    check_close(t.diameter, 2.48065e-3, 2e-6, 0);
    struct sp_tube r = round_tube(SP_RULE_2013);
    check_close(r.diameter, diameter, 1e-12, 0);
}

/* Shah & London (1978): aspect, Nu at constant wall temperature, at constant heat flux, Fanning f Re.
 * The ends are known of themselves: plates 7.541, 8.235, 24; square 2.976, 3.608, 14.227. */
static void laminar_rectangle(void **state)
{
    (void)state;
    static const double rows[][4] = {{0, 7.5410, 8.2350, 24.0000},          {0.05, 6.6459, 7.4552, 22.4855},
                                     {1.3 / 21.5, 6.4797, 7.3067, 22.1953}, {0.10, 5.9110, 6.7879, 21.1759},
                                     {0.25, 4.4353, 5.3327, 18.2340},       {1.0, 2.9787, 3.6102, 14.2296}};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        check_close(sp_nu_rectangle(rows[i][0], SP_WALL_TEMPERATURE), rows[i][1], 0, 6e-5);
        check_close(sp_nu_rectangle(rows[i][0], SP_WALL_HEAT_FLUX), rows[i][2], 0, 6e-5);
        check_close(sp_f_re_rectangle(rows[i][0]), rows[i][3], 0, 6e-5);
    }
    check_close(sp_nu_rectangle(1, SP_WALL_TEMPERATURE), 2.976, 1e-3, 0);
    check_close(sp_nu_rectangle(1, SP_WALL_HEAT_FLUX), 3.608, 1e-3, 0);
    check_close(sp_f_re_rectangle(1), 14.227, 1e-3, 0);
}

/* Filonenko and Gnielinski 1976 for long tubes: Re, xi, Nu at Pr 2, 6.5, 20. Also the documented value
 * of the library ht: Re 1e5, Pr 1.2, xi 0.0185: 254.626827. */
static void turbulent(void **state)
{
    (void)state;
    static const double rows[][5] = {{3000, 0.045494, 14.5576, 21.8857, 32.0437},
                                     {4000, 0.041383, 20.1993, 30.8668, 45.5311},
                                     {10000, 0.031437, 48.1952, 77.2276, 116.5341},
                                     {20000, 0.026117, 86.9799, 143.9047, 220.7021},
                                     {50000, 0.020930, 185.5829, 318.9136, 499.1468}};
    static const double prandtl[] = {2, 6.5, 20};
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++) {
        double xi = sp_xi_filonenko(rows[i][0]);
        check_close(xi, rows[i][1], 0, 6e-7);
        for (int k = 0; k < 3; k++)
            check_close(sp_nu_gnielinski(rows[i][0], 1000, prandtl[k], xi, 1), rows[i][k + 2], 0, 6e-5);
    }
    check_close(sp_nu_gnielinski(1e5, 1000, 1.2, 0.0185, 1), 254.626827, 1e-8, 0);
}

/* Round tube with Dh/L 0.004 by both transition rules at Pr 2, 6.5, 15: 2013, VDI alternating. */
static void transition(void **state)
{
    (void)state;
    static const double rows[][7] = {{1000, 4.128, 4.128, 5.106, 5.106, 6.409, 6.409},
                                     {2300, 4.810, 4.810, 6.549, 6.549, 8.538, 8.538},
                                     {3000, 11.165, 9.275, 16.651, 13.839, 22.159, 18.511},
                                     {4000, 20.244, 15.655, 31.082, 24.253, 41.618, 32.759},
                                     {6000, 30.456, 28.413, 47.767, 45.080, 64.480, 61.255},
                                     {10000, 48.538, 53.931, 78.061, 86.735, 106.422, 118.247}};
    static const double prandtl[] = {2, 6.5, 15};
    struct sp_tube now = round_tube(SP_RULE_2013), vdi = round_tube(SP_RULE_VDI);
    for (size_t i = 0; i < sizeof rows / sizeof *rows; i++)
        for (int k = 0; k < 3; k++) {
            check_close(sp_tube_nusselt(&now, rows[i][0], prandtl[k]), rows[i][2 * k + 1], 0, 6e-4);
            check_close(sp_tube_nusselt(&vdi, rows[i][0], prandtl[k]), rows[i][2 * k + 2], 0, 6e-4);
        }
}

/* Plates as the laminar end (Edwards: 7.54 + ...), Dh/L 0.004, Pr 6.5. A tube a thousand times wider
 * than high is nearly that: its rectangle has 7.521 for 7.54. */
static void transition_from_plates(void **state)
{
    (void)state;
    struct sp_tube_shape s = {1e-3, 1.0, 0, 0, SP_WALL_TEMPERATURE, SP_RULE_2013};
    s.length = 2e-3 / 0.004;
    struct sp_tube t;
    assert_true(sp_tube_build(&s, &t));
    check_close(7.54 + sp_nu_plates_entry(2300 * 6.5 * 0.004), 8.981, 0, 6e-4);
    check_close(sp_tube_nusselt(&t, 2300, 6.5), 8.981, 0, 0.025);
    check_close(sp_tube_nusselt(&t, 3000, 6.5), 18.081, 0, 0.025);
    check_close(sp_tube_nusselt(&t, 3500, 6.5), 24.582, 0, 0.025);
}

static void joints(void **state)
{
    (void)state;
    static const enum sp_tube_rule rules[] = {SP_RULE_2013, SP_RULE_VDI};
    for (int i = 0; i < 2; i++) {
        struct sp_tube t[] = {flat_tube(rules[i]), round_tube(rules[i])};
        const double re[] = {2300, i == 0 ? 4000 : 1e4};
        for (int k = 0; k < 4; k++) {
            const struct sp_tube *at = &t[k % 2];
            double x = re[k / 2];
            check_close(sp_tube_nusselt(at, x * (1 + 1e-13), 6), sp_tube_nusselt(at, x * (1 - 1e-13), 6),
                        1e-11, 0);
            check_close(sp_tube_darcy(at, x * (1 + 1e-13)), sp_tube_darcy(at, x * (1 - 1e-13)), 1e-11, 0);
        }
    }
}

/* Poiseuille: 128 mu L Q / (pi d^4); and 64/Re. */
static void poiseuille(void **state)
{
    (void)state;
    struct sp_tube t = round_tube(SP_RULE_2013);
    double rho = 1050, mu = 2e-3, flow = 5e-3;
    double want = 128 * mu * t.length * flow / rho / (3.14159265358979323846 * pow(diameter, 4));
    check_close(sp_tube_drop(&t, flow, rho, mu), want, 1e-12, 0);
    check_close(sp_tube_darcy(&t, 640), 0.1, 1e-12, 0);
    check_close(sp_tube_nusselt(&t, 0, 5), 3.66, 1e-12, 0);
    /* slug of flow through the Darcy-Weisbach equation at Re 2e4: xi about 0.0258 (Moody, smooth) */
    double fast = 2e4 * mu * t.area / diameter, u = fast / rho / t.area;
    check_close(sp_tube_drop(&t, fast, rho, mu), 0.0259 * t.length / diameter * 0.5 * rho * u * u, 2e-2, 0);
}

/* Own behaviour: the drop is odd and ever rising, film never falls, impossible shapes are refused. */
static void edges(void **state)
{
    (void)state;
    static const enum sp_tube_rule rules[] = {SP_RULE_2013, SP_RULE_VDI};
    for (int i = 0; i < 2; i++) {
        struct sp_tube t[] = {flat_tube(rules[i]), round_tube(rules[i])};
        for (int k = 0; k < 2; k++) {
            double last = 0, last_nu = 0;
            check_close(sp_tube_drop(&t[k], 0, 1000, 1e-3), 0, 0, 0);
            for (double flow = 1e-9; flow < 1; flow *= 1.01) {
                double drop = sp_tube_drop(&t[k], flow, 1000, 1e-3), re = sp_tube_reynolds(&t[k], flow, 1e-3);
                double nu = sp_tube_nusselt(&t[k], re, 6);
                assert_true(drop > last && nu >= last_nu);
                check_close(sp_tube_drop(&t[k], -flow, 1000, 1e-3), -drop, 0, 0);
                check_close(sp_tube_film(&t[k], -flow, 1e-3, 0.6, 6), nu * 0.6 / t[k].diameter, 1e-14, 0);
                last = drop;
                last_nu = nu;
            }
            assert_true(isnan(sp_tube_drop(&t[k], NAN, 1000, 1e-3)) && isnan(sp_tube_nusselt(&t[k], NAN, 6)));
        }
    }
    const struct sp_tube_shape bad[] = {
        {0, 1, 1, 0, 0, 0},        {2, 1, 1, 0, 0, 0},   {1, 2, 0, 0, 0, 0},
        {1, 2, 1, -1, 0, 0},       {NAN, 2, 1, 0, 0, 0}, {1, NAN, 1, 0, 0, 0},
        {1, INFINITY, 1, 0, 0, 0}, {1, 2, NAN, 0, 0, 0}, {1, 2, 1, NAN, 0, 0}};
    struct sp_tube t;
    for (size_t i = 0; i < sizeof bad / sizeof *bad; i++)
        assert_false(sp_tube_build(&bad[i], &t));
    assert_true(isnan(sp_nu_rectangle(1.1, SP_WALL_TEMPERATURE)) && isnan(sp_f_re_rectangle(-0.1)));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(shape),
        cmocka_unit_test(laminar_rectangle),
        cmocka_unit_test(turbulent),
        cmocka_unit_test(transition),
        cmocka_unit_test(transition_from_plates),
        cmocka_unit_test(joints),
        cmocka_unit_test(poiseuille),
        cmocka_unit_test(edges),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
