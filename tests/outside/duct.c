/* The air path against closed forms and an independent compressible solution.
 *
 * Check values: incompressible and heated closed forms derived from the balance of total pressure, worked
 * out in double precision outside this program (cases B1..H5, D1..D5, and the fan cases), and a compressible
 * reference marched with an adaptive ODE solver (last test). SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include <string.h>

#include "swirlpot/circuit.h"

struct rig {
    struct sp_duct_design d;
    struct sp_duct_inputs in;
};

/* rho 1.2 kg/m3, no loss anywhere but in the core, A_c 0.25 m2, inlet as large as the face. */
static struct rig plain(double K, double re, double cp_exit)
{
    struct rig r;
    memset(&r, 0, sizeof r);
    r.d.core[0] = (struct sp_core){.width = 0.5, .height = 0.5, .free_area_ratio = 1.0, .coefficient = K,
                                .at_temperature = NAN, .heat_factor = 1.0, .cells = 10};
    r.d.inlet = (struct sp_inlet){.area = 0.25, .recovery = 1.0, .lip_loss = 1.0};
    r.d.exit[0] = (struct sp_exit){.area = 0.25 / re, .pressure_coefficient = cp_exit};
    r.in = (struct sp_duct_inputs){.speed = 40.0, .wake = 1.0, .temperature = 290.0, .R = SP_R_DRY,
                                   .cp = SP_CP_DRY};
    r.in.pressure = 1.2 * r.in.R * r.in.temperature;
    return r;
}

static struct sp_duct_state solve(const struct rig *r)
{
    struct sp_complaints c = {0};
    struct sp_duct *d = sp_duct_build(&r->d, NULL, NULL, &c);
    sp_complaints_print(&c, false, stderr);
    assert_non_null(d);
    struct sp_duct_state s;
    assert_int_equal(sp_duct_solve(d, &r->in, &s), SP_OK);
    sp_duct_free(d);
    sp_complaints_free(&c);
    return s;
}

static double phi(const struct rig *r)
{
    return solve(r).face_velocity / r->in.speed;
}

static void cold_closed_forms(void **state)
{
    (void)state;
    struct rig r = plain(4.0, 1.0, 0.0); /* B1 */
    check_close(phi(&r), 0.447214, 0, 6e-7);
    r = plain(8.0, 2.5, 0.0); /* B2 */
    check_close(phi(&r), 0.264906, 0, 6e-7);
    check_close(solve(&r).exit_velocity / 40.0, 0.662266, 0, 6e-7);
    r = plain(8.0, 2.5, -0.3); /* B3 */
    check_close(phi(&r), 0.302040, 0, 6e-7);
    r = plain(8.0, 2.5, -0.2); /* B4 */
    r.d.inlet.recovery = 0.9;
    check_close(phi(&r), 0.277836, 0, 6e-7);
    r = plain(8.0, 2.0, -0.2); /* B5 */
    r.d.inlet.area = 0.25 / 3.0;
    r.d.diffuser.loss = 0.177778;
    check_close(phi(&r), 0.297044, 0, 6e-7);
    r.d.diffuser.loss = 4.0 / 9.0; /* B6 */
    r.d.exit[0].loss = 0.05;
    check_close(phi(&r), 0.272166, 0, 6e-7);
    r.d.diffuser = (struct sp_diffuser_design){.kind = SP_DIFFUSER_SUDDEN}; /* the same from its shape */
    check_close(phi(&r), 0.272166, 0, 6e-7);
    r = plain(12.0, 1.0, 0.1); /* B7 */
    r.d.inlet.recovery = 0.8;
    check_close(phi(&r), 0.232048, 0, 6e-7);
}

static void makers_core_law(void **state)
{
    (void)state;
    struct rig r = plain(0.0, 2.0, -0.15); /* B8 */
    r.d.core[0].drop_law = SP_DROP_LINEAR;
    r.d.core[0].linear = 60.0;
    r.d.core[0].quadratic = 12.0;
    r.d.core[0].at_density = 1.2;
    struct sp_duct_state s = solve(&r);
    check_close(s.face_velocity, 6.917052, 0, 6e-7);
    check_close(60.0 * s.face_velocity + 12.0 * s.face_velocity * s.face_velocity, 989.1705, 0, 2e-4);
}

static struct rig fan_rig(void)
{
    struct rig r = plain(10.0, 1.0, 0.0);
    r.d.core[0].width = 0.5;
    r.d.core[0].height = 0.4;
    r.d.inlet.area = 0.08;
    r.d.inlet.lip_loss = 0.5;
    r.d.exit[0].area = 0.12;
    r.d.fan[0] = (struct sp_fan){.fitted = true, .count = 1, .curve = {250.0, 0.8, {0, 0, NULL}}, .diameter = NAN,
                              .windmill_loss = 1.0};
    r.in.speed = 0.0;
    r.in.fan_speed[0] = 1.0;
    return r;
}

static void fan_at_rest_and_with_ram(void **state)
{
    (void)state;
    struct rig r = fan_rig(); /* F1 */
    struct sp_duct_state s = solve(&r);
    check_close(s.mass_flow / 1.2, 0.630358, 0, 6e-7);
    check_close(s.fan_pressure, 94.7848, 0, 6e-5);
    r.d.inlet.lip_loss = 1.0;
    check_close(solve(&r).mass_flow / 1.2, 0.608112, 0, 6e-7);
    r.d.inlet.lip_loss = 0.1;
    check_close(solve(&r).mass_flow / 1.2, 0.650027, 0, 6e-7);
    r.d.inlet.lip_loss = 1.0; /* F2 */
    r.d.exit[0].pressure_coefficient = -0.1;
    const double V[] = {3, 5, 10}, Q[] = {0.642959, 0.667920, 0.736670};
    for (int i = 0; i < 3; ++i) {
        r.in.speed = V[i];
        check_close(solve(&r).mass_flow / 1.2, Q[i], 0, 6e-7);
    }
    check_close(solve(&r).fan_pressure, 38.0143, 0, 1e-4);
}

static void hot_fan(void **state)
{
    (void)state;
    struct rig r = fan_rig(); /* F3 */
    r.in.temperature = 308.15;
    r.in.pressure = 1.15 * r.in.R * r.in.temperature;
    check_close(solve(&r).mass_flow, 0.724912, 0, 6e-7);
    r.in.heat_given = true;
    r.in.heat = 30e3;
    struct sp_duct_state s = solve(&r);
    check_close(s.mass_flow, 0.636287, 0, 6e-7);
    check_close(s.temperature_ratio, 1.152292, 0, 6e-7);
}

static void windmilling_fan(void **state)
{
    (void)state;
    struct rig r = plain(9.0, 0.25 / 0.15, -0.15);
    r.d.fan[0] = (struct sp_fan){.fitted = true, .count = 1, .curve = {280.0, 0.9, {0, 0, NULL}}, .diameter = 0.38,
                              .hub = 0.13};
    const double k[] = {0, 1, 2, 4}, want[] = {0.312476, 0.252689, 0.217798, 0.176996};
    for (int i = 0; i < 4; ++i) {
        r.d.fan[0].windmill_loss = k[i];
        check_close(phi(&r), want[i], 0, 6e-7);
    }
    r.d.fan[0].windmill_loss = 1.0;
    r.in.fan_speed[0] = 1.0;
    const double V[] = {0, 10, 20, 30, 40}, Q[] = {0.781255, 0.872221, 1.263443, 1.895165, 2.526886};
    const double dp[] = {69.0114, 17.0177, -95.5130, -214.9042, -382.0520};
    for (int i = 0; i < 5; ++i) {
        r.in.speed = V[i];
        /* These cases have no inlet loss: the inlet is the face, wide enough to stay below the lip's onset. */
        r.d.inlet.lip_loss = 0.0;
        struct sp_duct_state s = solve(&r);
        check_close(s.mass_flow / 1.2, Q[i], 0, 2e-6);
        check_close(s.fan_pressure, dp[i], 0, 5e-4);
    }
}

/* H1, H2 state tau; here the heat that gives it is worked back from the stated phi. */
static void heated_closed_forms(void **state)
{
    (void)state;
    const struct { double tau, sigma, phi, ve; } h[] = {
        {1.10, 1.0, 0.278423, 0.612531}, {1.20, 1.0, 0.269191, 0.646058}, {1.20, 0.75, 0.267686, NAN}};
    for (int i = 0; i < 3; ++i) {
        struct rig r = plain(8.0, 2.0, 0.0);
        r.d.core[0].free_area_ratio = h[i].sigma;
        double m = h[i].phi * r.in.speed * 1.2 * 0.25;
        r.in.heat_given = true;
        r.in.heat = (h[i].tau - 1.0) * m * r.in.cp * r.in.temperature;
        struct sp_duct_state s = solve(&r);
        check_close(s.face_velocity / 40.0, h[i].phi, 0, 1e-6);
        check_close(s.temperature_ratio, h[i].tau, 0, 1e-6);
        if (isfinite(h[i].ve)) check_close(s.exit_velocity / 40.0, h[i].ve, 0, 2e-6);
    }
}

static struct rig h3(double speed, double heat)
{
    struct rig r = plain(9.0, 2.0, -0.2);
    r.d.inlet.recovery = 0.95;
    r.in.speed = speed;
    r.in.temperature = 300.0;
    r.in.pressure = 101325.0;
    r.in.heat_given = heat > 0.0;
    r.in.heat = heat;
    return r;
}

static void heating_thins_the_air(void **state)
{
    (void)state;
    struct rig r = h3(50, 0);
    struct sp_duct_state cold = solve(&r);
    check_close(cold.mass_flow, 4.374422, 0, 6e-7);
    r = h3(50, 100e3); /* H4 */
    struct sp_duct_state hot = solve(&r);
    check_close(hot.mass_flow, 4.254875, 0, 6e-7);
    check_close(hot.temperature_ratio, 1.077976, 0, 6e-7);
    check_close(hot.exit_velocity, 31.18548, 0, 6e-6);
    assert_true(hot.mass_flow < cold.mass_flow && hot.exit_velocity > cold.exit_velocity);
    r = h3(25, 100e3); /* H5 */
    hot = solve(&r);
    check_close(hot.mass_flow, 2.069341, 0, 6e-7);
    check_close(hot.temperature_ratio, 1.160331, 0, 6e-7);
    check_close(hot.exit_velocity, 16.32565, 0, 6e-6);
}

static void drag(void **state)
{
    (void)state;
    const struct { double re, cp, angle, phi, D; } c[] = {
        {2.0, 0.0, 0.0, 0.288675, 91.50635},  {2.5, -0.2, 0.0, 0.290191, 89.74814},
        {2.0, 0.0, 45.0, 0.288675, 128.11800}, {2.0, -0.3, 90.0, 0.329140, 246.85522},
        {4.0, 0.0, 0.0, 0.204124, 28.09311}};
    for (int i = 0; i < 5; ++i) {
        struct rig r = plain(8.0, c[i].re, c[i].cp);
        r.in.speed = 50.0;
        r.d.exit[0].angle = c[i].angle * acos(-1.0) / 180.0;
        struct sp_duct_state s = solve(&r);
        check_close(s.face_velocity / 50.0, c[i].phi, 0, 6e-7);
        check_close(s.drag, c[i].D, 0, 2e-5);
    }
}

/* D V = Q sum(dp_t) + m/2 (V - v_w)^2 with v_w the speed far behind, when p_e is ambient. */
static void drag_reconciles_with_losses(void **state)
{
    (void)state;
    struct rig r = plain(8.0, 2.0, 0.0);
    r.in.speed = 50.0;
    struct sp_complaints c = {0};
    struct sp_duct *d = sp_duct_build(&r.d, NULL, NULL, &c);
    struct sp_duct_state s;
    struct sp_station st[SP_STATIONS];
    struct sp_duct_losses l;
    assert_int_equal(sp_duct_solve(d, &r.in, &s), SP_OK);
    sp_duct_stations(d, &r.in, &s, st, &l);
    double lost = st[0].total_pressure - st[5].total_pressure;
    double wake = s.drag * 50.0 - s.mass_flow / 1.2 * lost - 0.5 * s.mass_flow * pow(50.0 - s.exit_velocity, 2);
    check_close(wake, 0.0, 0, 1e-8 * s.drag * 50.0);
    check_close(lost, l.unrecovered + l.lip + l.screen + l.diffuser + l.core + l.heating + l.fan + l.exit, 0, 1e-8);
    check_close(st[5].static_pressure, r.in.pressure, 0, 1e-5); /* the laminar floor leaves 1e-6 */
    check_close(l.exit_head, 0.5 * 1.2 * s.exit_velocity * s.exit_velocity, 1e-6, 0);
    sp_duct_free(d);
}

/* D2: exit below ambient pressure; the momentum form and the far-wake form differ by a force outside. */
static void drag_from_the_far_wake(void **state)
{
    (void)state;
    struct rig r = plain(8.0, 2.5, -0.2);
    r.in.speed = 50.0;
    struct sp_complaints c = {0};
    struct sp_duct *d = sp_duct_build(&r.d, NULL, NULL, &c);
    struct sp_duct_state s;
    struct sp_station st[SP_STATIONS];
    struct sp_duct_losses l;
    assert_int_equal(sp_duct_solve(d, &r.in, &s), SP_OK);
    sp_duct_stations(d, &r.in, &s, st, &l);
    check_close(s.mass_flow, 4.352858, 0, 1e-6);
    check_close(s.drag, 89.74814, 0, 2e-5);
    check_close(sp_duct_wake_drag(&s, st), 93.31643, 0, 2e-5);
    sp_duct_free(d);
}

/* Low-Mach column of an independent compressible series, and its stated distance from the exact one.
 * Exact: isentropic to the face, d(p + G u) = -K/2 G u dx with linear T0 rise, isentropic nozzle. */
static void compressible_series(void **state)
{
    (void)state;
    const struct { double V, T, p, re, cp, heat, m, phi, ve, tau, D, exact_m, apart; } c[] = {
        {30, 288.15, 101325, 2, 0, 0, 2.652203, 0.288675, 17.32051, 1, 33.6286, 2.655185, 0.0012},
        {30, 288.15, 101325, 2, 0, 60e3, 2.575621, 0.280340, 18.17388, 1.080468, 30.4596, 2.578721, 0.0013},
        {60, 288.15, 101325, 2, -0.2, 120e3, 5.657324, 0.307882, 39.65278, 1.073269, 170.2358, 5.672463, 0.003},
        {100, 288.15, 101325, 4, 0, 250e3, 5.884902, 0.192160, 88.14314, 1.146741, 69.7764, 5.944966, 0.0105},
        {180, 288.15, 101325, 6, 0, 600e3, 7.400703, 0.134253, 185.5982, 1.280046, -41.4306, 7.576794, 0.0235},
        {80, 263.0, 60000, 2.5, -0.2, 150e3, 4.393965, 0.276435, 62.42986, 1.129196, 128.0670, 4.416058, 0.006}};
    for (int i = 0; i < 6; ++i) {
        struct rig r = plain(8.0, c[i].re, c[i].cp);
        r.in.speed = c[i].V;
        r.in.temperature = c[i].T;
        r.in.pressure = c[i].p;
        r.in.heat_given = c[i].heat > 0.0;
        r.in.heat = c[i].heat;
        struct sp_duct_state s = solve(&r);
        check_close(s.mass_flow, c[i].m, 1e-6, 0);
        check_close(s.face_velocity / c[i].V, c[i].phi, 0, 1e-6);
        check_close(s.exit_velocity, c[i].ve, 1e-6, 0);
        check_close(s.temperature_ratio, c[i].tau, 1e-6, 0);
        check_close(s.drag, c[i].D, 1e-5, 1e-3);
        check_close(s.mass_flow, c[i].exact_m, c[i].apart, 0);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(cold_closed_forms),    cmocka_unit_test(makers_core_law),
        cmocka_unit_test(fan_at_rest_and_with_ram), cmocka_unit_test(hot_fan),
        cmocka_unit_test(windmilling_fan),      cmocka_unit_test(heated_closed_forms),
        cmocka_unit_test(heating_thins_the_air), cmocka_unit_test(drag),
        cmocka_unit_test(drag_reconciles_with_losses),
        cmocka_unit_test(drag_from_the_far_wake), cmocka_unit_test(compressible_series),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
