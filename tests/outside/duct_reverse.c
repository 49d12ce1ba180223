/* Air that goes the wrong way, or hardly at all: closed forms of the total-pressure balance.
 *
 * Derived by hand from where total pressure goes in reverse flow: air enters at the exit (entry loss 0.5 and
 * the exit's own on the head there, cold), passes the fan cold, is heated from the core's back to its front
 * (friction on the mean specific volume, (tau - 1)/sigma^2 for speeding up), passes diffuser, screen and lip
 * hot, and leaves the mouth as a jet whose head is lost:
 *   (back - front) = G^2/(2 rho) [(k_e + 0.5) r_e^2 + K (1 + tau)/2 + (tau - 1)/s^2 + tau (1 + k_s + k_d)
 * r_1^2] with G the face's mass flux, r = A_c/A. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include <stdlib.h>
#include <string.h>

#include "swirlpot/circuit.h"

struct rig {
    struct sp_duct_design d;
    struct sp_duct_inputs in;
};

static const double K = 7.0, sigma = 0.7, face = 0.2, inlet = 0.08, outlet = 0.12, rho = 1.2;
static const double screen = 0.4, diffuser = 0.3, exit_loss = 0.2;

static struct rig rig(double speed, double recovery, double back)
{
    struct rig r;
    memset(&r, 0, sizeof r);
    r.d.core[0] = (struct sp_core){.width = 0.5,
                                .height = 0.4,
                                .free_area_ratio = sigma,
                                .coefficient = K,
                                .at_temperature = NAN,
                                .heat_factor = 1.0,
                                .cells = 10};
    r.d.inlet = (struct sp_inlet){.area = inlet, .recovery = recovery, .lip_loss = 0.5, .screen = screen};
    r.d.diffuser.loss = diffuser;
    r.d.exit[0] = (struct sp_exit){.area = outlet, .loss = exit_loss, .pressure_coefficient = back, .angle = 0.0};
    r.in = (struct sp_duct_inputs){
        .speed = speed, .wake = 1.0, .temperature = 300.0, .R = SP_R_DRY, .cp = SP_CP_DRY};
    r.in.pressure = rho * r.in.R * r.in.temperature;
    return r;
}

static struct sp_duct *build(const struct rig *r)
{
    struct sp_complaints c = {0};
    struct sp_duct *d = sp_duct_build(&r->d, NULL, NULL, &c);
    sp_complaints_print(&c, false, stderr);
    sp_complaints_free(&c);
    assert_non_null(d);
    return d;
}

static struct sp_duct_state solve(const struct rig *r)
{
    struct sp_duct *d = build(r);
    struct sp_duct_state s;
    assert_int_equal(sp_duct_solve(d, &r->in, &s), SP_OK);
    sp_duct_free(d);
    return s;
}

static double square(double x)
{
    return x * x;
}

/* Bracket of the formula above, on rho/2 (G/rho)^2. */
static double reverse_resistance(double tau)
{
    return (exit_loss + 0.5) * square(face / outlet) + 0.5 * K * (1.0 + tau) + (tau - 1.0) / square(sigma) +
           tau * (1.0 + screen + diffuser) * square(face / inlet);
}

static double reverse_flow(double pressure, double tau)
{
    return -face * sqrt(2.0 * rho * pressure / reverse_resistance(tau));
}

/* Cold, without a lip. */
static double forward_resistance(void)
{
    return K + (screen + diffuser) * square(face / inlet) + (1.0 + exit_loss) * square(face / outlet);
}

static double forward_flow(double pressure)
{
    return face * sqrt(2.0 * rho * pressure / forward_resistance());
}

/* Forward drive with an exit under more pressure than the inlet recovers. */
static void exit_pressure_wins(void **state)
{
    (void)state;
    const double back[] = {0.2, 0.5, 0.9};
    for (int i = 0; i < 3; ++i) {
        struct rig r = rig(30.0, 0.1, back[i]);
        double q = 0.5 * rho * 900.0, m = reverse_flow((back[i] - 0.1) * q, 1.0);
        struct sp_duct_state s = solve(&r);
        check_close(s.mass_flow, m, 2e-6, 0);
        assert_true(s.exit_velocity < 0.0 && s.face_velocity < 0.0 && !s.diffuser_stalled);
        check_close(s.exit_velocity, m / (rho * outlet), 2e-6, 0);
    }
}

/* The same with heat that makes tau 1.1 and 1.35: the hot side is the front. */
static void heated_in_reverse(void **state)
{
    (void)state;
    const double tau[] = {1.1, 1.35};
    for (int i = 0; i < 2; ++i) {
        struct rig r = rig(30.0, 0.1, 0.5);
        double m = reverse_flow(0.4 * 0.5 * rho * 900.0, tau[i]);
        r.in.heat_given = true;
        r.in.heat = (tau[i] - 1.0) * -m * r.in.cp * r.in.temperature;
        struct sp_duct *d = build(&r);
        struct sp_duct_state s;
        struct sp_station st[SP_STATIONS];
        struct sp_duct_losses l;
        assert_int_equal(sp_duct_solve(d, &r.in, &s), SP_OK);
        check_close(s.mass_flow, m, 1e-7, 0);
        check_close(s.temperature_ratio, tau[i], 1e-7, 0);
        check_close(s.exit_velocity, m / (rho * outlet), 1e-7, 0); /* comes in cold */
        sp_duct_stations(d, &r.in, &s, st, &l);
        check_close(st[5].temperature, 300.0, 1e-12, 0);
        check_close(st[3].temperature, 300.0, 1e-12, 0);
        check_close(st[2].temperature, 300.0 * tau[i], 1e-7, 0);
        check_close(st[1].velocity, tau[i] * m / (rho * inlet), 1e-7, 0);
        check_close(st[1].static_pressure, r.in.pressure + 0.1 * 540.0, 1e-9,
                    0); /* the jet stands at what is in front */
        assert_true(st[5].total_pressure > st[4].total_pressure - 1e-9 &&
                    st[3].total_pressure > st[2].total_pressure &&
                    st[2].total_pressure > st[1].total_pressure);
        sp_duct_free(d);
    }
}

/* Heat slows reversed air too. */
static void heat_slows_reverse(void **state)
{
    (void)state;
    struct rig r = rig(30.0, 0.0, 0.5);
    double before = solve(&r).mass_flow;
    r.in.heat_given = true;
    for (r.in.heat = 1e3; r.in.heat < 60e3; r.in.heat *= 1.5) {
        double m = solve(&r).mass_flow;
        assert_true(m < 0.0 && m > before);
        before = m;
    }
}

/* A wind from behind: the exit is rammed as far as it looks that way, the inlet is in the lee. */
static void wind_from_behind(void **state)
{
    (void)state;
    const double angle[] = {0.0, 45.0, 60.0};
    for (int i = 0; i < 3; ++i) {
        struct rig r = rig(-20.0, 0.9, -0.4);
        r.d.exit[0].angle = angle[i] * acos(-1.0) / 180.0;
        double q = 0.5 * rho * 400.0 * square(cos(r.d.exit[0].angle));
        check_close(solve(&r).mass_flow, reverse_flow(q, 1.0), 3e-6, 0);
        r.in.wake = 0.25;
        check_close(solve(&r).mass_flow, reverse_flow(0.25 * q, 1.0), 1e-5, 0);
    }
}

static struct rig with_fan(double speed, double fan_speed)
{
    struct rig r = rig(speed, 0.9, 0.0);
    r.d.fan[0] = (struct sp_fan){.fitted = true,
                              .count = 1,
                              .curve = {200.0, 0.9, {0, 0, NULL}},
                              .diameter = 0.4,
                              .hub = 0.14,
                              .windmill_loss = 1.5};
    r.in.fan_speed[0] = fan_speed;
    return r;
}

static const double pi = 3.14159265358979323846;

/* A fan against a wind from behind. Below stall it pushes Q = sqrt((dp0 - q)/(R + dp0/Q0^2)); the lip, at
 * standstill of the air ahead, takes k_lip of the inlet head. */
static void fan_against_the_wind(void **state)
{
    (void)state;
    double R =
        0.5 * rho *
        (K + (screen + diffuser + 0.5) * square(face / inlet) + (1.0 + exit_loss) * square(face / outlet)) /
        square(face);
    for (double V = 2.0; V < 18.0; V += 3.0) {
        struct rig r = with_fan(-V, 1.0);
        check_close(solve(&r).mass_flow, rho * sqrt((200.0 - 0.5 * rho * V * V) / (R + 200.0 / 0.81)), 3e-6,
                    0);
    }
}

/* Overblown: the blades hold their shut-off pressure and resist with 1.5 heads in the annulus besides.
 * Standing they only resist. */
static void fan_overblown(void **state)
{
    (void)state;
    double annulus = pi / 4.0 * (0.16 - 0.0196), blades = 1.5 * square(face / annulus);
    for (double n = 0.0; n <= 1.0; n += 0.5)
        for (double V = 20.0; V < 40.0; V += 6.0) {
            struct rig r = with_fan(-V, n);
            double pressure = 0.5 * rho * V * V - n * n * 200.0;
            double want = -face * sqrt(2.0 * rho * pressure / (reverse_resistance(1.0) + blades));
            struct sp_duct_state s = solve(&r);
            check_close(s.mass_flow, want, 3e-6, 0);
            double v = want / rho / annulus;
            check_close(s.fan_pressure, n * n * 200.0 + 1.5 * 0.5 * rho * v * v, 1e-5, 0);
        }
}

/* A fan tested static whose curve ends flatter than its outlet head grows: 20 Pa at nil, free at 1.2 m3/s in
 * 0.11 m2, where the head is 71 Pa. Past the end total pressure stays that of the end: standing, the fan
 * gives nothing, and turning in a strong wind it gives the 71 Pa, no more. */
static void flat_static_curve(void **state)
{
    (void)state;
    double annulus = pi / 4.0 * (0.16 - 0.0196), v = 1.2 / annulus, head = 0.5 * rho * v * v;
    double lip_free = forward_resistance();
    for (double n = 0.0; n <= 1.0; n += 1.0)
        for (double V = 60.0; V < 95.0; V += 10.0) {
            struct rig r = with_fan(V, n);
            r.d.fan[0].curve = (struct sp_curve_design){20.0, 1.2, {0, 0, NULL}};
            r.d.fan[0].static_basis = true;
            r.d.inlet.lip_loss = 0.0;
            double pressure = 0.9 * 0.5 * rho * V * V + n * n * head;
            struct sp_duct_state s = solve(&r);
            check_close(s.mass_flow, face * sqrt(2.0 * rho * pressure / lip_free), 3e-6, 0);
            check_close(s.fan_pressure, n * n * head, 1e-9, 1e-9);
            assert_true(s.mass_flow / rho > 1.2);
        }
}

/* ---- near nil ---------------------------------------------------------------------------------------------
 */

/* Through nil the flow is a rising, continuous function of what drives it, of the right sign, exactly nil at
 * nil, and away from the floor the square-root law on either side. */
static void through_nil(void **state)
{
    (void)state;
    double before = -INFINITY;
    for (int i = -60; i <= 60; ++i) {
        double pressure =
            i == 0 ? 0.0 : copysign(1e-9 * pow(10.0, 0.2 * (abs(i) - 1)), i); /* 1e-9 to 600 Pa */
        struct rig r = rig(30.0, 0.5, 0.5 - pressure / 540.0);
        r.d.inlet.lip_loss = 0.0;
        double drive = (0.5 - r.d.exit[0].pressure_coefficient) * 540.0; /* as the doubles have it */
        double m = solve(&r).mass_flow;
        assert_true(i == 0 ? m == 0.0 : m * i > 0.0);
        assert_true(m > before);
        before = m;
        if (fabs(drive) > 1.0)
            check_close(m, i > 0 ? forward_flow(drive) : reverse_flow(-drive, 1.0), 1e-4, 0);
        /* Near nil v |v| has become v times 1e-3 m/s, the model's floor: pressure rho/2 k v 1e-3 m/s. */
        if (i != 0 && fabs(drive) < 1e-7) {
            double k = i > 0 ? forward_resistance() : reverse_resistance(1.0);
            check_close(m / drive, 2.0 * face / (k * 1e-3), 1e-3, 0);
        }
    }
}

/* A warm core in air that hardly moves: flow and heat go through nil without a step, and the air that creeps
 * leaves as warm as the metal. */
static void warm_through_nil(void **state)
{
    (void)state;
    struct rig r = rig(30.0, 0.5, 0.0);
    r.d.core[0].heat_law = SP_CORE_POWER;
    r.d.core[0].air_conductance = 1200.0;
    r.d.core[0].air_exponent = 0.5;
    r.d.core[0].at_face_velocity = 6.0;
    r.d.core[0].heat_at_density = 1.2;
    r.d.core[0].coolant_conductance = 5e3;
    r.d.core[0].at_coolant_flow = 1.0;
    r.d.inlet.lip_loss = 0.0;
    r.in.wall[0] = 370.0;
    double m_before = 0.0, heat_before = 0.0;
    for (int i = -200; i <= 200; ++i) {
        r.d.exit[0].pressure_coefficient = 0.5 - i * 1e-6 / 540.0;
        struct sp_duct_state s = solve(&r);
        if (i > -200) {
            check_within(s.mass_flow - m_before, 0.0, 1e-4);
            check_close(s.heat, heat_before, 0, 10.0);
        }
        assert_true(i == 0 || s.mass_flow * i > 0.0);
        check_close(s.temperature_ratio, 370.0 / 300.0, 1e-6, 0);
        check_close(s.heat, fabs(s.mass_flow) * r.in.cp * 70.0, 1e-6, 1e-12);
        m_before = s.mass_flow;
        heat_before = s.heat;
    }
}

/* Nothing drives: nil, exactly, and heat cannot go anywhere. */
static void nothing_drives(void **state)
{
    (void)state;
    struct rig r = rig(0.0, 0.9, 0.3);
    struct sp_duct_state s = solve(&r);
    assert_true(s.mass_flow == 0.0 && s.exit_velocity == 0.0 && s.heat == 0.0);
    r.in.heat_given = true;
    r.in.heat = 100.0;
    struct sp_duct *d = build(&r);
    assert_int_equal(sp_duct_solve(d, &r.in, &s), SP_INPUT);
    r.in.heat = 0.0;
    assert_int_equal(sp_duct_solve(d, &r.in, &s), SP_OK);
    r.in.speed = NAN;
    assert_int_equal(sp_duct_solve(d, &r.in, &s), SP_NUMERICS);
    sp_duct_free(d);
    r = rig(30.0, 0.5, 0.0);
    r.in.wake = 0.0; /* dead air behind another car */
    assert_true(solve(&r).mass_flow == 0.0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(exit_pressure_wins),   cmocka_unit_test(heated_in_reverse),
        cmocka_unit_test(heat_slows_reverse),   cmocka_unit_test(wind_from_behind),
        cmocka_unit_test(fan_against_the_wind), cmocka_unit_test(fan_overblown),
        cmocka_unit_test(flat_static_curve),    cmocka_unit_test(through_nil),
        cmocka_unit_test(warm_through_nil),     cmocka_unit_test(nothing_drives),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
