/* Ducts with leaks, flaps, shrouds, several cores and exits against closed forms.
 *
 * The numbers were worked out outside this program from the balance of total pressure (incompressible, six
 * digits): leaks (cases B9, B10), flaps beside an idle fan, a shroud over a part of the core whose rest lets
 * hot air back, recirculated air. The rest are laws that hold whatever the numbers: what is put in parts is
 * the whole. SPDX-License-Identifier: GPL-3.0-or-later */
#include "check.h"

#include <string.h>

#include "swirlpot/circuit.h"

struct rig {
    struct sp_duct_design d;
    struct sp_duct_inputs in;
};

static const double rho = 1.2;

/* rho 1.2 kg/m3, no loss but in the core, A_c 0.25 m2, inlet as large as the face. */
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
    r.in.pressure = rho * r.in.R * r.in.temperature;
    return r;
}

static void give_heat(struct sp_core *c)
{
    c->heat_law = SP_CORE_POWER;
    c->air_conductance = 1200.0;
    c->air_exponent = 0.5;
    c->at_face_velocity = 6.0;
    c->heat_at_density = 1.2;
    c->coolant_conductance = 5e3;
    c->at_coolant_flow = 1.0;
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

/* ---- leaks ----------------------------------------------------------------------------------------- */

static struct rig leaking(void)
{
    struct rig r = plain(8.0, 2.5, -0.2);
    r.d.inlet.area = 0.25 / 3.0;
    r.d.diffuser.loss = 0.05;
    return r;
}

static void leak_past_the_core(void **state) /* B9 */
{
    (void)state;
    struct rig r = leaking();
    check_close(solve(&r).face_velocity / 40.0, 0.285714, 0, 6e-7);
    r.d.past_core = (struct sp_leak){.area = 0.05 * 0.25, .coefficient = 2.5};
    struct sp_duct_state s = solve(&r);
    double flow = rho * 0.25 * 40.0;
    check_close(s.face_velocity / 40.0, 0.274272, 0, 6e-7);
    check_close(s.leak_past / s.mass_flow, 0.089443, 0, 6e-7);
    check_close(s.fresh / flow, 0.298803, 0, 6e-7);
    r.d.past_core =
        (struct sp_leak){.gap = 0.00625, .length = 2.0, .coefficient = 2.5}; /* the same by its gap */
    check_close(solve(&r).mass_flow, s.mass_flow, 1e-12, 0);
}

static void leak_to_outside(void **state) /* B10 */
{
    (void)state;
    struct rig r = leaking();
    r.d.outside = (struct sp_leak){.area = 0.05 * 0.25, .coefficient = 2.5};
    struct sp_duct_state s = solve(&r);
    check_close(s.face_velocity / 40.0, 0.284719, 0, 6e-7);
    check_close(s.leak_outside / (rho * 0.05 * 0.25 * 40.0), 0.618117, 0, 6e-7);
    check_close(s.leak_outside / s.mass_flow, 0.108549, 0, 6e-7);
}

/* A leak of no area is none, and on the way there the flow goes over into that of the sealed duct without a
 * step. */
static void leak_to_nothing(void **state)
{
    (void)state;
    struct rig r = leaking(), sealed = r;
    double want = solve(&sealed).mass_flow, before = 0.0;
    for (double area = 1e-2; area > 1e-10; area *= 0.1) {
        r.d.past_core = (struct sp_leak){.area = area, .coefficient = 2.5};
        r.d.outside = (struct sp_leak){.area = area, .coefficient = 2.5};
        double m = solve(&r).mass_flow;
        assert_true(m > before);
        check_close(m, want, 0.0, 5.0 * area * want + 1e-9);
        before = m;
    }
}

/* The more leaks, the less goes through the core. */
static void worse_leaks(void **state)
{
    (void)state;
    double past = INFINITY, outside = INFINITY;
    for (double area = 0.0; area < 0.1; area += 0.007) {
        struct rig r = leaking();
        r.d.past_core = (struct sp_leak){.area = area, .coefficient = 2.6};
        double m = solve(&r).mass_flow;
        assert_true(m < past);
        past = m;
        memset(&r.d.past_core, 0, sizeof r.d.past_core);
        r.d.outside = (struct sp_leak){.area = area, .coefficient = 2.6, .pressure_coefficient = -0.1};
        m = solve(&r).mass_flow;
        assert_true(m < outside);
        outside = m;
    }
}

/* ---- fans, flaps, shrouds -------------------------------------------------------------------------- */

static struct rig idle_fan(double windmill)
{
    struct rig r = plain(9.0, 0.25 / 0.15, -0.15);
    r.d.inlet.lip_loss = 0.0;
    r.d.fan[0] = (struct sp_fan){.fitted = true,
                                 .count = 1,
                                 .curve = {280.0, 0.9, {0, 0, NULL}},
                                 .diameter = 0.38,
                                 .hub = 0.13,
                                 .windmill_loss = windmill};
    return r;
}

/* Flaps of 0.08 m2, k = 2, blown open beside a fan that windmills. */
static void flaps_blown_open(void **state)
{
    (void)state;
    const double k[] = {1.0, 2.0, 4.0}, shut[] = {0.252689, 0.217798, 0.176996},
                 open[] = {0.283357, 0.271251, 0.258020};
    for (int i = 0; i < 3; ++i) {
        struct rig r = idle_fan(k[i]);
        check_close(solve(&r).face_velocity / 40.0, shut[i], 0, 6e-7);
        r.d.fan[0].flap_area = 0.08;
        r.d.fan[0].flap_loss = 2.0;
        struct sp_duct_state s = solve(&r);
        check_close(s.face_velocity / 40.0, open[i], 0, 6e-7);
        check_close(s.flap_flow + s.fan_flow[0], s.mass_flow, 1e-10, 0);
        if (i == 0)
            check_close(-s.fan_pressure / (0.5 * rho * s.face_velocity * s.face_velocity), 2.545097, 0, 6e-6);
    }
}

/* Shut by a fan that runs: as without them, but for a hundred-thousandth of their area. */
static void flaps_held_shut(void **state)
{
    (void)state;
    struct rig r = idle_fan(1.0);
    r.in.speed = 0.0;
    r.in.fan_speed[0] = 1.0;
    double without = solve(&r).mass_flow;
    check_close(without / rho, 0.781255, 0, 6e-7);
    r.d.fan[0].flap_area = 0.08;
    r.d.fan[0].flap_loss = 2.0;
    struct sp_duct_state s = solve(&r);
    check_close(s.mass_flow, without, 1e-5, 0);
    assert_true(s.flap_flow < 0.0);
}

/* A fan over 60 % of a core, standing: hot air comes back through the rest. */
static void shroud_over_a_part(void **state)
{
    (void)state;
    struct rig r = idle_fan(1.0);
    r.in.speed = 0.0;
    r.in.fan_speed[0] = 1.0;
    r.d.fan[0].span_to = 0.6;
    struct sp_duct_state s = solve(&r);
    check_close(s.fan_flow[0] / rho, 0.681129, 0, 6e-7);
    check_close(s.backwards / rho, 0.123842, 0, 6e-7);
    check_close(s.fresh / rho, 0.557288, 0, 6e-7);
    check_close(s.backwards / s.fan_flow[0], 0.1818, 0, 5e-5);
}

/* The same with a warm core: the air that comes back warms what the fan draws. Nil for the temperature of the
 * front plenum is its mix, and all heat leaves by the exit. */
static void hot_air_comes_back(void **state)
{
    (void)state;
    struct rig r = idle_fan(1.0);
    r.in.speed = 0.0;
    r.in.fan_speed[0] = 1.0;
    r.d.fan[0].span_to = 0.6;
    give_heat(&r.d.core[0]);
    r.in.wall[0] = 370.0;
    struct sp_duct_state s = solve(&r);
    double back = s.backwards, mixed = (s.fresh * 290.0 + back * s.front_temperature) / (s.fresh + back);
    assert_true(s.front_temperature > 300.0 && mixed < s.front_temperature);
    check_close(s.heat, s.exit_flow[0] * r.in.cp * (s.bay_temperature - 290.0), 1e-9, 0);
    check_close(s.heat, s.core[0].rate * (370.0 - s.core[0].air_in), 1e-9, 0);
    r.d.fan[0].span_to = 1.0;
    assert_true(solve(&r).heat > s.heat);
}

/* ---- what is put in parts is the whole ------------------------------------------------------------- */

static struct rig warm_rig(void)
{
    struct rig r = plain(9.0, 2.0, -0.2);
    give_heat(&r.d.core[0]);
    r.in.wall[0] = r.in.wall[1] = 365.0;
    r.d.inlet.area = 0.1;
    r.d.fan[0] = (struct sp_fan){.fitted = true,
                                 .count = 2,
                                 .curve = {200.0, 0.6, {0, 0, NULL}},
                                 .diameter = 0.3,
                                 .hub = 0.1,
                                 .windmill_loss = 1.0};
    r.in.fan_speed[0] = 0.8;
    return r;
}

static void same_air(const struct sp_duct_state *a, const struct sp_duct_state *b)
{
    check_close(a->fresh, b->fresh, 1e-9, 0);
    check_close(a->heat, b->heat, 1e-9, 0);
    check_close(a->drag, b->drag, 1e-8, 1e-8);
    check_close(a->thrust, b->thrust, 1e-8, 1e-9);
    check_close(a->bay_temperature, b->bay_temperature, 1e-9, 0);
}

/* A core cut in two that stand side by side; one exit in two holes; one kind of two fans as two kinds of one.
 */
static void side_by_side(void **state)
{
    (void)state;
    for (double V = 0.0; V < 50.0; V += 12.0) {
        struct rig r = warm_rig();
        r.in.speed = V;
        struct sp_duct_state whole = solve(&r);
        r.d.cores = 2;
        r.d.core[1] = r.d.core[0];
        r.d.core[0].width = 0.2;
        r.d.core[1].width = 0.3;
        r.d.core[0].air_conductance *= 0.4;
        r.d.core[1].air_conductance *= 0.6;
        r.d.core[0].span_to = r.d.core[1].span_from = 0.4;
        r.d.core[1].span_to = 1.0;
        struct sp_duct_state s = solve(&r);
        same_air(&s, &whole);
        check_close(s.core[0].mass_flow, 0.4 * whole.mass_flow, 1e-9, 0);
        r = warm_rig();
        r.in.speed = V;
        r.d.exits = 2;
        r.d.exit[1] = r.d.exit[0];
        r.d.exit[0].area *= 0.3;
        r.d.exit[1].area *= 0.7;
        s = solve(&r);
        same_air(&s, &whole);
        check_close(s.exit_flow[0], 0.3 * whole.mass_flow, 1e-9, 0);
        r = warm_rig();
        r.in.speed = V;
        r.d.fan[0].count = 1;
        r.d.fan[1] = r.d.fan[0];
        r.in.fan_speed[1] = r.in.fan_speed[0];
        s = solve(&r);
        same_air(&s, &whole);
        check_close(s.fan_flow[1], 0.5 * whole.mass_flow, 1e-9, 0);
    }
}

/* Two cores one behind the other are one of twice the loss while cold; warm, the second one meets warmed air.
 */
static void in_series(void **state)
{
    (void)state;
    struct rig r = plain(9.0, 2.0, -0.2), two = plain(4.5, 2.0, -0.2);
    two.d.cores = 2;
    two.d.core[1] = two.d.core[0];
    double want = solve(&r).mass_flow;
    check_close(solve(&two).mass_flow, want, 1e-9, 0);
    give_heat(&two.d.core[0]);
    give_heat(&two.d.core[1]);
    two.in.wall[0] = two.in.wall[1] = 365.0;
    struct sp_duct_state s = solve(&two);
    double left = 1.0 - s.core[0].rate / (s.mass_flow * two.in.cp);
    check_close(s.core[1].air_in, 365.0 - 75.0 * left, 1e-9, 0);
    check_close(s.heat, s.mass_flow * two.in.cp * (s.bay_temperature - 290.0), 1e-9, 0);
    assert_true(s.core[1].heat < s.core[0].heat && s.mass_flow < want);
}

/* The jet out of a small core onto a larger one: Borda-Carnot, on the head between. */
static void small_before_large(void **state)
{
    (void)state;
    struct rig r = plain(8.0, 2.0, 0.0);
    r.d.cores = 2;
    r.d.core[1] = r.d.core[0];
    r.d.core[0].width = 0.25; /* half the face, all over the section */
    double k = 8.0 + (8.0 + 1.0 * (1.0 - 0.5) * (1.0 - 0.5)) * 4.0 + 4.0; /* on the larger one's face */
    check_close(solve(&r).mass_flow, rho * 0.25 * 40.0 / sqrt(k), 1e-6, 0);
}

/* Parallel ways between two plenums: k on the face is (A_c / sum(A/sqrt k))^2. */
static void parallel_ways(void **state)
{
    (void)state;
    struct rig r = plain(8.0, 2.0, 0.0);
    r.d.past_core = (struct sp_leak){.area = 0.02, .coefficient = 3.0};
    r.d.cores = 2;
    r.d.core[1] = r.d.core[0];
    r.d.core[0].span_to = r.d.core[1].span_from = 0.5;
    r.d.core[1].span_to = 1.0;
    r.d.core[1].coefficient =
        18.0; /* both as large as the whole section is in half of it: faces of 0.25 m2 */
    double sum = 0.25 / sqrt(8.0) + 0.25 / sqrt(18.0) + 0.02 / sqrt(3.0), k = 1.0 / (sum * sum);
    double exit = 1.0 / (0.125 * 0.125);
    check_close(solve(&r).fresh, rho * 40.0 / sqrt(k + exit), 1e-6, 0);
}

/* ---- warmth ---------------------------------------------------------------------------------------- */

/* r = 0.15 of the air behind the core comes back: 40 K over the core are 7.0588 K at the inlet. */
static void recirculated_air(void **state)
{
    (void)state;
    struct rig r = plain(8.0, 2.0, -0.2);
    r.d.core[0].carries = SP_CARRIES_LOAD;
    r.d.inlet.recirculated = 0.15;
    r.d.inlet.recirculation_ends = 1e9;
    double m = 4.0;
    for (int i = 0; i < 30; ++i) { /* the load that is 40 K */
        r.d.core[0].heat_load = m * r.in.cp * 40.0;
        m = solve(&r).mass_flow;
    }
    check_close(solve(&r).inlet_temperature - 290.0, 7.0588, 0, 6e-5);
    r.d.inlet.recirculation_ends = 80.0;
    check_within(solve(&r).inlet_temperature - 290.0, 3.0,
                 3.5); /* half of it at half the speed: 0.075/0.925 40 K */
    r.d.inlet.recirculation_ends = 40.0;
    check_close(solve(&r).inlet_temperature, 290.0, 0, 1e-9);
}

static void preheated_air(void **state)
{
    (void)state;
    struct rig r = plain(8.0, 2.0, -0.2);
    r.d.inlet.preheat_standing = 12.0;
    r.d.inlet.preheat_moving = 2.0;
    check_close(solve(&r).front_temperature, 292.0, 1e-9, 0);
    r.in.speed = 25.0 / 3.6;
    check_close(solve(&r).front_temperature, 297.0, 1e-9, 0);
}

/* A load and the engine's skin: their heat is in the air that leaves, all of it. */
static void loads(void **state)
{
    (void)state;
    struct rig r = warm_rig();
    r.d.cores = 2;
    r.d.core[1] = r.d.core[0];
    r.d.core[1].carries = SP_CARRIES_LOAD;
    r.d.core[1].heat_load = 9e3;
    r.d.core[1].span_to = 0.5;
    r.in.bay_heat = 3e3;
    for (double V = 0.0; V < 50.0; V += 12.0) {
        r.in.speed = V;
        struct sp_duct_state s = solve(&r);
        check_close(s.core[1].heat, 9e3, 1e-6, 0);
        check_close(s.core[0].heat, s.core[0].rate * (365.0 - s.core[0].air_in), 1e-12, 0);
        check_close(s.heat + 3e3, s.exit_flow[0] * r.in.cp * (s.bay_temperature - 290.0), 1e-7, 0);
    }
    r.in.speed = 0.0; /* nothing moves: the load is not carried off, and nothing is infinite */
    r.in.fan_speed[0] = 0.0;
    struct sp_duct_state s = solve(&r);
    assert_true(s.mass_flow == 0.0 && s.core[1].heat == 0.0);
    check_within(s.bay_temperature, 290.0, 500.0);
}

/* ---- outside --------------------------------------------------------------------------------------- */

/* Two exits in unlike pressure: one sucks while the other blows, and the sum of flows is that of the inlet.
 */
static void one_exit_sucks(void **state)
{
    (void)state;
    struct rig r = plain(8.0, 2.0, -0.3);
    r.d.inlet.area = 0.02;
    r.d.inlet.lip_loss = 0.5;
    r.d.exits = 2;
    r.d.exit[1] = (struct sp_exit){.area = 0.1, .pressure_coefficient = 0.3};
    struct sp_duct_state s = solve(&r);
    assert_true(s.exit_flow[1] < 0.0 && s.exit_flow[0] > 0.0);
    check_close(s.exit_flow[0] + s.exit_flow[1], s.fresh, 1e-10, 0);
    double in = s.exit_flow[1] / (rho * 0.1), q = 0.5 * rho * 1600.0;
    check_close(s.bay_pressure, 0.3 * q - 0.5 * 0.5 * rho * in * in, 1e-5, 0);
}

/* Wind across: exits feel all of it, the inlet the share along the car. */
static void wind_across(void **state)
{
    (void)state;
    struct rig r = plain(8.0, 2.0, -0.3);
    r.in.speed = 24.0;
    r.in.cross_wind = 18.0;
    double q = 0.5 * rho * 24.0 * 24.0, all = 0.5 * rho * 900.0;
    check_close(solve(&r).mass_flow, 0.25 * sqrt(2.0 * rho * (q + 0.3 * all) / 12.0), 1e-6, 0);
    r.d.exit[0].pressure_coefficient = 0.0;
    double along = solve(&r).mass_flow;
    r.in.cross_wind = 0.0;
    check_close(along, solve(&r).mass_flow, 1e-9, 0);
}

/* A blower brings its volume in; with the bonnet up nothing but the jet out of the core resists behind it. */
static void in_the_pits(void **state)
{
    (void)state;
    struct rig r = plain(8.0, 4.0, -0.3);
    r.in.speed = 0.0;
    r.in.blower = 0.5;
    r.d.inlet.area = 0.01;
    struct sp_duct_state s = solve(&r);
    check_close(s.mass_flow - s.fresh, rho * 0.5, 1e-10, 0);
    double A = 0.25, back = 1.0 / (0.01 * 0.01), on = 8.0 / (A * A) + 16.0 / (A * A);
    double x = sqrt(on) / sqrt(back); /* flow out of the inlet over that through the core */
    check_close(s.mass_flow, rho * 0.5 / (1.0 + x), 1e-5, 0);
    r = plain(8.0, 4.0, -0.3);
    r.in.bonnet_up = true;
    check_close(solve(&r).mass_flow, rho * A * 40.0 / 3.0, 1e-6, 0);
}

/* Drag of spilled air, and what the car's outside adds; the duct's own is the same. */
static void drag_outside(void **state)
{
    (void)state;
    struct rig r = plain(8.0, 2.0, 0.0);
    struct sp_duct_state bare = solve(&r);
    r.d.inlet.spill = true;
    struct sp_duct_state s = solve(&r);
    double q = 960.0, mu = s.face_velocity / 40.0;
    check_close(s.spill_drag, q * 0.25 * (1.0 - mu) * (1.0 - mu), 1e-12, 0);
    check_close(s.drag, bare.drag + s.spill_drag, 1e-12, 0);
    r.d.inlet.spill = false;
    r.d.interference = -0.01;
    r.d.count = 2;
    check_close(solve(&r).drag, bare.drag - 0.5 * 0.01 * q, 1e-12, 0);
}

/* Meredith's share: a duct without losses would give m V (sqrt(tau) - 1); with them v_w (1 - 1/sqrt(tau)). */
static void thrust_of_the_heat(void **state)
{
    (void)state;
    struct rig r = plain(0.01, 8.0, 0.0);
    r.in.heat_given = true;
    r.in.heat = 50e3;
    struct sp_duct_state s = solve(&r);
    double tau = s.temperature_ratio, v = s.exit_velocity;
    check_close(s.thrust, s.mass_flow * v * (1.0 - 1.0 / sqrt(tau)), 1e-9, 0);
    check_close(s.thrust, s.mass_flow * 40.0 * (sqrt(tau) - 1.0), 5e-3, 0);
}

/* A core that blocks a part of the section and no other behind it is no duct. */
static void holes_are_refused(void **state)
{
    (void)state;
    struct rig r = plain(8.0, 2.0, 0.0);
    struct sp_complaints c = {0};
    r.d.core[0].span_to = 0.6;
    assert_null(sp_duct_build(&r.d, NULL, NULL, &c));
    r = idle_fan(1.0);
    r.d.fan[0].span_to = 0.6;
    r.d.fan[1] = r.d.fan[0];
    r.d.fan[1].span_from = 0.4;
    r.d.fan[1].span_to = 1.0;
    assert_null(sp_duct_build(&r.d, NULL, NULL, &c));
    assert_int_equal(c.count, 2);
    sp_complaints_free(&c);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(leak_past_the_core), cmocka_unit_test(leak_to_outside),
        cmocka_unit_test(leak_to_nothing),    cmocka_unit_test(worse_leaks),
        cmocka_unit_test(flaps_blown_open),   cmocka_unit_test(flaps_held_shut),
        cmocka_unit_test(shroud_over_a_part), cmocka_unit_test(hot_air_comes_back),
        cmocka_unit_test(side_by_side),       cmocka_unit_test(in_series),
        cmocka_unit_test(small_before_large), cmocka_unit_test(parallel_ways),
        cmocka_unit_test(recirculated_air),   cmocka_unit_test(preheated_air),
        cmocka_unit_test(loads),              cmocka_unit_test(one_exit_sucks),
        cmocka_unit_test(wind_across),        cmocka_unit_test(in_the_pits),
        cmocka_unit_test(drag_outside),       cmocka_unit_test(thrust_of_the_heat),
        cmocka_unit_test(holes_are_refused),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
