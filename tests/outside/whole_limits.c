/* Limiting cases of fitted-out cars on whole drives: what is split and put together again, what is fitted but
 * does nothing, and what is said twice, must leave the drive as it was.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "fixture.h"

#include "swirlpot/hold.h"

static struct fixture fixture;

static const double fine = 1e-9; /* tolerance at which two integrations of one problem agree to 1e-6 K */

/* Going, standing with the fan, going again, hot and off: the thermostat works and the fan switches. */
static struct sp_design car(struct sp_step *step)
{
    struct sp_design d = *fixture.base;
    step[0] = fixture_hold(40.0, 30.0, 70e3, 80.0);
    step[1] = (struct sp_step){.kind = SP_STEP_IDLE, .time = 40.0, .repeat = 1.0, .following = NAN};
    step[2] = fixture_hold(40.0, 15.0, 30e3, 60.0);
    step[3] = (struct sp_step){.kind = SP_STEP_SOAK, .time = 30.0, .repeat = 1.0, .following = NAN};
    d.step = step;
    d.steps = 4;
    d.start.coolant = 358.0;
    d.duct[0].fan[0].law = SP_FAN_ALWAYS;
    d.duct[0].fan[0].diameter = 0.33;
    d.duct[0].fan[0].hub = 0.11;
    return d;
}

/* A core by power laws, so that it can be cut up. */
static struct sp_core cuttable(void)
{
    return (struct sp_core){.width = 0.5,
                            .height = 0.34,
                            .depth = 0.04,
                            .free_area_ratio = 0.8,
                            .drop_law = SP_DROP_LINEAR,
                            .linear = 40.0,
                            .quadratic = 8.0,
                            .at_density = 1.2,
                            .at_temperature = 293.15,
                            .unevenness = NAN,
                            .angle_loss = 1.0,
                            .heat_law = SP_CORE_POWER,
                            .air_conductance = 2600.0,
                            .air_exponent = 0.5,
                            .at_face_velocity = 6.0,
                            .heat_at_density = 1.2,
                            .coolant_conductance = 7000.0,
                            .coolant_exponent = 0.8,
                            .at_coolant_flow = 1.5,
                            .heat_factor = 1.0,
                            .metal_capacity = 3000.0,
                            .coolant_volume = 1.6e-3,
                            .drop = {100.0 / 60e3, 18e3},
                            .cells = 10.0};
}

/* The n-th part of a core, side by side with the others. */
static struct sp_core slice(struct sp_core c, double n)
{
    c.width /= n;
    c.air_conductance /= n;
    c.coolant_conductance /= n;
    c.at_coolant_flow /= n;
    c.metal_capacity /= n;
    c.coolant_volume /= n;
    c.drop.flow /= n;
    return c;
}

static struct fixture_drive drive(const struct sp_design *d, double tolerance)
{
    struct fixture_drive r = fixture_run(&fixture, d, 2.0, tolerance);
    sp_complaints_print(&r.complaints, false, stderr);
    assert_true(r.status == SP_OK || r.status == SP_NOT);
    return r;
}

/* All channels of both drives: the engine's outlet to `give` K, other temperatures to twenty times that, all
 * else to ten times that share of the most it comes to. Creeping air as a fan runs down is where a network
 * differs from one equation. 0: to the last bit. */
static void check_same(const struct sp_design *a, const struct sp_design *b, double give, const char *what)
{
    struct fixture_drive x = drive(a, give > 0.0 ? fine : 0.0), y = drive(b, give > 0.0 ? fine : 0.0);
    assert_int_equal(x.series.count, y.series.count);
    for (int c = 0; c < SP_CH_OIL; ++c) { /* what follows hangs upon what is fitted */
        double most = give > 0.0 ? 1e-3 : 0.0, off = 0.0;
        for (size_t i = 0; i < x.series.count; ++i) {
            double u = x.series.row[i].value[c], v = y.series.row[i].value[c];
            assert_true(isnan(u) == isnan(v));
            if (isnan(u)) continue;
            most = fmax(most, fabs(u));
            off = fmax(off, fabs(u - v));
        }
        const char *unit = sp_channel_at((enum sp_channel)c)->unit;
        bool kelvin = !strcmp(unit, "degC") || !strcmp(unit, "K");
        double allowed = c == SP_CH_ENGINE_OUT ? give : kelvin ? 20.0 * give : 10.0 * give * most;
        if (off <= allowed) continue;
        print_error("%s: %s is off by %.3g of %.3g\n", what, sp_channel_at((enum sp_channel)c)->name, off,
                    most);
        fail();
    }
    if (give == 0.0) assert_int_equal(x.result.events, y.result.events);
    fixture_drop(&x);
    fixture_drop(&y);
}

/* ---- said otherwise ----------------------------------------------------------------------------------- */

/* Counts of one, spans of all, and parts with nothing in them are the plain car to the last bit. */
static void said_otherwise(void **state)
{
    (void)state;
    struct sp_step step[4];
    struct sp_design plain = car(step), d = plain;
    d.ducts = 1;
    d.duct[0].count = 1.0;
    d.duct[0].cores = d.duct[0].exits = 1;
    d.duct[0].core[0].span_to = 1.0;
    d.duct[0].fan[0].span_to = 1.0;
    check_same(&plain, &d, 0.0, "counts of one");
    d = plain;
    d.hoses.heater = (struct sp_resistance){8.0 / 60e3, 30e3};
    d.hoses.heater_conductance = 80.0;
    d.hoses.heater_off = true;
    check_same(&plain, &d, 0.0, "heater off");
    d = plain;
    d.duct[0].past_core = d.duct[0].outside = (struct sp_leak){.coefficient = 2.0};
    d.duct[0].inlet.recirculation_ends = 14.0;
    d.duct[0].fan[0].flap_loss = 2.0;
    d.thermostat.mapped_shift = 15.0;
    d.pump.suction_drop = 10e3;
    d.pump.suction_flow = 1e-3;
    check_same(&plain, &d, 0.0, "nothing in it");
    plain.duct[0].fan[0].law = SP_FAN_NEVER;
    d = plain;
    d.duct[0].fan[0].health = SP_FAN_DEAD;
    check_same(&plain, &d, 0.0, "a dead fan, one that never runs");
}

/* ---- cut up ------------------------------------------------------------------------------------------- */

static void halve_duct(struct sp_duct_design *d)
{
    d->inlet.area *= 0.5;
    d->core[0] = slice(d->core[0], 2.0);
    d->exit[0].area *= 0.5;
    d->fan[0].curve.free_flow *= 0.5;
    d->fan[0].power *= 0.5;
    d->fan[0].diameter *= sqrt(0.5);
    d->fan[0].hub *= sqrt(0.5);
}

/* Two half ducts, counted or in a list, are one. */
static void half_ducts(void **state)
{
    (void)state;
    struct sp_step step[4];
    struct sp_design whole = car(step);
    whole.duct[0].core[0] = cuttable();
    struct sp_design d = whole;
    halve_duct(&d.duct[0]);
    d.duct[0].count = 2.0;
    check_same(&whole, &d, 1e-6, "two half ducts, counted");
    d.duct[0].count = 0.0;
    d.ducts = 2;
    d.duct[1] = d.duct[0];
    check_same(&whole, &d, 1e-5, "two half ducts in a list");
}

/* Two half cores side by side in one duct, each with half the section. */
static void half_cores(void **state)
{
    (void)state;
    struct sp_step step[4];
    struct sp_design whole = car(step);
    whole.duct[0].core[0] = cuttable();
    struct sp_design d = whole;
    d.duct[0].cores = 2;
    d.duct[0].core[0] = d.duct[0].core[1] = slice(cuttable(), 2.0);
    d.duct[0].core[0].span_to = d.duct[0].core[1].span_from = 0.5;
    d.duct[0].core[1].span_to = 1.0;
    check_same(&whole, &d, 1e-5, "two half cores");
}

/* Halves of the fan under one shroud, and of the exit. */
static void half_fans_and_exits(void **state)
{
    (void)state;
    struct sp_step step[4];
    struct sp_design two = car(step);
    two.duct[0].fan[0].count = 2.0;
    struct sp_design d = two;
    d.duct[0].fan[0].count = 1.0;
    d.duct[0].fan[1] = d.duct[0].fan[0];
    check_same(&two, &d, 1e-5, "two fans by one");
    d = two;
    d.duct[0].exits = 2;
    d.duct[0].exit[0].area *= 0.5;
    d.duct[0].exit[1] = d.duct[0].exit[0];
    check_same(&two, &d, 1e-5, "two half exits");
}

/* ---- to nil ------------------------------------------------------------------------------------------- */

/* What tends to nothing leaves the sealed, plain car, and by as little as it is. */
static void to_nil(void **state)
{
    (void)state;
    static const char *const what[] = {"a gap past the core", "a gap to outside", "flaps",
                                       "recirculation",       "preheat",          "a heater's flow",
                                       "a condenser",         "a boundary layer"};
    for (size_t k = 0; k < sizeof what / sizeof *what; ++k) {
        struct sp_step step[4];
        struct sp_design plain = car(step), d = plain;
        struct sp_duct_design *duct = &d.duct[0];
        const double little = 1e-9;
        if (k == 0) duct->past_core = (struct sp_leak){.area = little, .coefficient = 2.0};
        if (k == 1) duct->outside = (struct sp_leak){.area = little, .coefficient = 2.0};
        if (k == 2) duct->fan[0].flap_area = little, duct->fan[0].flap_loss = 2.0;
        if (k == 3) duct->inlet.recirculated = little, duct->inlet.recirculation_ends = 14.0;
        if (k == 4) duct->inlet.preheat_standing = little;
        if (k == 5)
            d.hoses.heater = (struct sp_resistance){1e-3 * little, 30e3}, d.hoses.heater_conductance = 80.0;
        if (k == 6) {
            duct->cores = 2;
            duct->core[1] = duct->core[0];
            duct->core[0].carries = SP_CARRIES_LOAD;
            duct->core[0].heat_law = SP_CORE_NO_HEAT;
            duct->core[0].heat_load = 0.0; /* what is given to standing air would heat it, however little */
            duct->core[0].drop_law = SP_DROP_COEFFICIENT;
            duct->core[0].coefficient = 0.0;
            duct->core[0].free_area_ratio = 1.0;
        }
        if (k == 7) duct->inlet.layer_thickness = little, duct->inlet.height = 0.1;
        check_same(&plain, &d, 3e-5, what[k]);
    }
}

/* ---- fitted, and idle --------------------------------------------------------------------------------- */

static struct sp_oil idle_oil(void)
{
    return (struct sp_oil){.fitted = true,
                           .volume = 4e-3,
                           .flow = 1e-3,
                           .flow_speed = 100.0,
                           .flow_most = 1e-3,
                           .opens = NAN,
                           .full = NAN};
}

/* Oil that is given no heat and touches nothing. The integrator takes one more state and other steps, so that
 * a drive is the same to its tolerance; the rates are so to the last bit. */
static void idle_fluids(void **state)
{
    (void)state;
    struct sp_step step[4];
    struct sp_design plain = car(step), d = plain;
    d.oil = d.gearbox = idle_oil();
    d.electrics.battery = 1e5;
    struct sp_complaints c = {0};
    struct sp_circuit a, b;
    assert_true(sp_circuit_build(&plain, &a, &c) && sp_circuit_build(&d, &b, &c));
    struct sp_inputs in = {.flags = SP_FLAG_ENGINE | SP_FLAG_PUMP | SP_FLAG_FAN};
    in.in[SP_IN_SPEED] = in.in[SP_IN_AIR_SPEED] = 30.0;
    in.in[SP_IN_WAKE] = 1.0;
    in.in[SP_IN_AMBIENT] = 298.15;
    in.in[SP_IN_PRESSURE] = 101325.0;
    in.in[SP_IN_HEAT_GAS] = 30e3;
    in.in[SP_IN_ENGINE_SPEED] = 80.0;
    struct sp_modes modes = {.play = SP_PLAY_OPENING};
    double x[SP_Y_MOST], y[SP_Y_MOST], f[SP_Y_MOST], g[SP_Y_MOST];
    struct {
        const struct sp_circuit *c;
        double *y, *f;
    } each[] = {{&a, x, f}, {&b, y, g}};
    for (int i = 0; i < 2; ++i) {
        struct sp_signals s;
        struct sp_guesses guesses;
        struct sp_coupling k;
        memset(&guesses, 0, sizeof guesses);
        sp_circuit_start(each[i].c, &in, each[i].y);
        each[i].y[SP_Y_METAL] += 20.0;
        each[i].y[SP_Y_WAX] += 6.0;
        sp_circuit_signals(each[i].c, &in, each[i].y, &s);
        assert_int_equal(sp_circuit_couple(each[i].c, &in, &modes, &s, &guesses, &k), SP_OK);
        sp_circuit_rates(each[i].c, &in, &modes, each[i].y, &k, each[i].f);
    }
    assert_memory_equal(x, y, (size_t)a.layout.count * sizeof *x);
    assert_memory_equal(f, g, (size_t)a.layout.count * sizeof *f);
    assert_true(g[b.layout.oil] == 0.0 && g[b.layout.gearbox] == 0.0);
    sp_circuit_free(&a);
    sp_circuit_free(&b);
}

/* A charge cooler through which no charge flows is a core that carries nothing. */
static void idle_charge(void **state)
{
    (void)state;
    struct sp_step step[4];
    struct sp_design d = car(step);
    d.duct[0].cores = 2;
    d.duct[0].core[1] = d.duct[0].core[0];
    d.duct[0].core[0] = cuttable();
    d.duct[0].core[0].carries = SP_CARRIES_LOAD;
    d.duct[0].core[0].heat_law = SP_CORE_NO_HEAT;
    struct sp_design idle = d;
    idle.duct[0].core[0].carries = SP_CARRIES_CHARGE;
    idle.duct[0].core[0].heat_law = SP_CORE_POWER;
    idle.charge = (struct sp_charge){true, 1.8, 0.7, 0.0, 0.0};
    struct fixture_drive a = drive(&d, fine), b = drive(&idle, fine);
    for (size_t i = 0; i < a.series.count; ++i)
        check_close(b.series.row[i].value[SP_CH_ENGINE_OUT], a.series.row[i].value[SP_CH_ENGINE_OUT], 0,
                    1e-5);
    fixture_drop(&a);
    fixture_drop(&b);
}

/* ---- traffic ------------------------------------------------------------------------------------------ */

static double rest_of(double distance, double wake, double warmer)
{
    struct sp_step step[1] = {fixture_hold(4000.0, 40.0, 60e3, 80.0)};
    struct sp_design d = *fixture.base;
    d.air.humidity = 0.0;
    d.air.ambient += warmer;
    d.air.wind = 40.0 * (sqrt(wake) - 1.0);
    step[0].following = distance;
    d.step = step;
    d.steps = 1;
    struct fixture_drive r = fixture_run(&fixture, &d, 4000.0, 1e-8);
    assert_true(r.status == SP_OK || r.status == SP_NOT);
    double coolant = fixture_last(&r, SP_CH_ENGINE_OUT);
    fixture_drop(&r);
    return coolant;
}

/* A car ahead at 40, 20, 10 and 5 m leaves 0.9, 0.75, 0.6 and 0.5 of the dynamic pressure in air that
 * is 1.5, 2.5, 4 and 6 K warmer (common practice): a wind from behind on a hotter day. Out of sight it costs
 * nothing. */
static void behind_another_car(void **state)
{
    (void)state;
    static const double ahead[][3] = {{40.0, 0.9, 1.5}, {20.0, 0.75, 2.5}, {10.0, 0.6, 4.0}, {5.0, 0.5, 6.0}};
    for (size_t i = 0; i < sizeof ahead / sizeof *ahead; ++i)
        check_close(rest_of(ahead[i][0], 1.0, 0.0), rest_of(NAN, ahead[i][1], ahead[i][2]), 0, 1e-4);
    assert_true(rest_of(200.0, 1.0, 0.0) == rest_of(NAN, 1.0, 0.0));
}

/* ---- changes, and rest -------------------------------------------------------------------------------- */

/* A change that leaves everything as it was. The integrator begins anew at it; finely integrated, nothing
 * else. */
static void change_of_nothing(void **state)
{
    (void)state;
    struct sp_step step[4];
    static char text[] = "duct.inlet.blocked=0";
    struct sp_design plain = car(step), same = plain, d = plain;
    struct sp_change change[2] = {{.at = 17.0, .text = text, .to = &same},
                                  {.at = 130.0, .text = text, .to = &same}};
    d.change = change;
    d.changes = 2;
    struct fixture_drive a = drive(&plain, 1e-10), b = drive(&d, 1e-10);
    assert_int_equal(a.series.count, b.series.count);
    for (size_t i = 0; i < a.series.count; ++i)
        for (int c = SP_CH_ENGINE_OUT; c <= SP_CH_METAL; ++c)
            check_close(b.series.row[i].value[c], a.series.row[i].value[c], 1e-9, 0);
    fixture_drop(&a);
    fixture_drop(&b);
}

/* What changes in the middle is what was there before, then what would have been there after: the drive's
 * second half alone, begun from a car at rest, comes to the same rest. */
static void change_lasts(void **state)
{
    (void)state;
    static char text[] = "duct.inlet.blocked=60 %";
    struct sp_step step[1] = {fixture_hold(9000.0, 30.0, 60e3, 80.0)};
    struct sp_design plain = *fixture.base, blocked;
    plain.step = step;
    plain.steps = 1;
    blocked = plain;
    blocked.duct[0].inlet.blocked = 0.6;
    struct sp_design d = plain;
    struct sp_change change = {.at = 3000.0, .text = text, .to = &blocked};
    d.change = &change;
    d.changes = 1;
    struct fixture_drive a = fixture_run(&fixture, &plain, 1000.0, fine);
    struct fixture_drive b = fixture_run(&fixture, &blocked, 1000.0, fine);
    struct fixture_drive c = fixture_run(&fixture, &d, 1000.0, fine);
    double before = fixture_at(&a, 3000.0)->value[SP_CH_ENGINE_OUT],
           after = fixture_last(&b, SP_CH_ENGINE_OUT);
    assert_true(after > before + 1.0);
    check_close(fixture_at(&c, 3000.0)->value[SP_CH_ENGINE_OUT], before, 0, 1e-5);
    check_close(fixture_last(&c, SP_CH_ENGINE_OUT), after, 0, 1e-4);
    fixture_drop(&a);
    fixture_drop(&b);
    fixture_drop(&c);
}

/* A car with everything on it, held long enough, is where the steady answer says. */
static void rest(void **state)
{
    (void)state;
    struct sp_step step[1] = {fixture_hold(20000.0, 40.0, 60e3, 80.0)};
    struct sp_design d = *fixture.base;
    struct sp_duct_design *duct = &d.duct[0];
    duct->fan[0].law = SP_FAN_ALWAYS;
    duct->fan[0].span_to = 0.6;
    duct->fan[0].flap_area = 0.02;
    duct->fan[0].flap_loss = 2.0;
    duct->past_core = (struct sp_leak){.area = 2e-3, .coefficient = 2.0};
    duct->outside = (struct sp_leak){.area = 2e-3, .coefficient = 2.0};
    duct->cores = 2;
    duct->core[1] = duct->core[0];
    duct->core[0] = cuttable();
    duct->core[0].carries = SP_CARRIES_OIL;
    duct->core[0].span_to = 0.3;
    duct->core[0].air_conductance = 400.0;
    duct->core[0].coolant_conductance = 500.0;
    d.oil = idle_oil();
    d.oil.heat_share = 0.06;
    d.oil.block = 40.0;
    d.oil.plate = 100.0;
    d.hoses.heater = (struct sp_resistance){8.0 / 60e3, 30e3};
    d.hoses.heater_conductance = 60.0;
    d.step = step;
    d.steps = 1;
    struct fixture_drive r = fixture_run(&fixture, &d, 1000.0, 1e-8);
    assert_true(r.status == SP_OK || r.status == SP_NOT);
    struct sp_hold_wish wish = {40.0, 60e3, NAN, 80.0};
    struct sp_hold_point at;
    struct sp_complaints c = {0}, cautions = {0};
    sp_hold_solve(fixture.units, &d, &wish, &at, &c, &cautions);
    sp_complaints_print(&c, false, stderr);
    assert_int_equal(at.kind, SP_HOLD_SETTLES);
    check_close(at.at.value[SP_CH_ENGINE_OUT], fixture_last(&r, SP_CH_ENGINE_OUT), 0, 1e-3);
    check_close(at.at.value[SP_CH_RADIATOR_OUT], fixture_last(&r, SP_CH_RADIATOR_OUT), 0, 1e-3);
    check_close(at.at.value[SP_CH_METAL], fixture_last(&r, SP_CH_METAL), 0, 1e-3);
    check_close(at.oil, fixture_last(&r, SP_CH_OIL), 0, 1e-3);
    assert_true(at.oil > d.air.ambient + 10.0);
    sp_complaints_free(&c);
    sp_complaints_free(&cautions);
    fixture_drop(&r);
}

static int begin(void **state)
{
    (void)state;
    fixture = fixture_open();
    return 0;
}

static int end(void **state)
{
    (void)state;
    fixture_close(&fixture);
    return 0;
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(said_otherwise),
        cmocka_unit_test(half_ducts),
        cmocka_unit_test(half_cores),
        cmocka_unit_test(half_fans_and_exits),
        cmocka_unit_test(to_nil),
        cmocka_unit_test(idle_fluids),
        cmocka_unit_test(idle_charge),
        cmocka_unit_test(behind_another_car),
        cmocka_unit_test(change_of_nothing),
        cmocka_unit_test(change_lasts),
        cmocka_unit_test(rest),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
