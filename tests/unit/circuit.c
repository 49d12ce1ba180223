/* The circuit's rates, couplings and Jacobian. SPDX-License-Identifier: GPL-3.0-or-later */
#include "fixture.h"

#include <gsl/gsl_linalg.h>

#include "circuit/arrow.h"

static struct fixture fixture;

struct rig {
    struct sp_design d;
    struct sp_circuit c;
    struct sp_inputs in;
    struct sp_modes modes;
    double y[SP_Y_MOST];
};

/* A warm car at 30 m/s; the tests change what they need and then prepare(). */
static void warm(struct rig *r)
{
    memset(r, 0, sizeof *r);
    r->d = *fixture.base;
    r->in.in[SP_IN_SPEED] = r->in.in[SP_IN_AIR_SPEED] = 30.0;
    r->in.in[SP_IN_WAKE] = 1.0;
    r->in.in[SP_IN_AMBIENT] = 298.15;
    r->in.in[SP_IN_PRESSURE] = 101325.0;
    r->in.in[SP_IN_HEAT_GAS] = 30e3;
    r->in.in[SP_IN_HEAT_FRICTION] = 2e3;
    r->in.in[SP_IN_HEAT_SLOPE] = 0.5;
    r->in.in[SP_IN_ENGINE_SPEED] = 80.0;
    r->in.in[SP_IN_MEASURED] = NAN;
    r->in.flags = SP_FLAG_ENGINE | SP_FLAG_PUMP | SP_FLAG_FAN;
    r->modes.play = SP_PLAY_OPENING;
}

/* Builds, and lays temperatures that differ everywhere: jacket 90 degC, falling through the core. */
static void prepare(struct rig *r)
{
    struct sp_complaints c = {0};
    if (!sp_circuit_build(&r->d, &r->c, &c)) sp_complaints_print(&c, false, stderr);
    assert_int_equal(c.count, 0);
    r->d.start.coolant = 350.0;
    sp_circuit_start(&r->c, &r->in, r->y);
    const struct sp_layout *l = &r->c.layout;
    r->y[SP_Y_METAL] = 378.0;
    r->y[SP_Y_JACKET] = 363.15;
    r->y[SP_Y_TANK] = 351.0;
    r->y[SP_Y_WAX] = 361.0;
    r->y[SP_Y_FAN] = 0.4;
    r->y[SP_Y_GAUGE] = 355.0;
    for (int i = 0; i < SP_HOSE_CELLS; ++i) {
        r->y[l->out + i] = 362.5 - i;
        r->y[l->back + i] = 345.0 - 0.7 * i;
    }
    for (int i = 0; i < l->cells; ++i) {
        r->y[l->core + i] = 358.0 - 12.0 * (i + 1) / l->cells;
        r->y[l->wall + i] = 350.0 - 14.0 * (i + 1) / l->cells;
    }
}

static void drop(struct rig *r)
{
    sp_circuit_free(&r->c);
}

static void rates_at(const struct rig *r, const double *y, struct sp_coupling *k, double *dydt)
{
    struct sp_signals s;
    struct sp_guesses guesses;
    memset(&guesses, 0, sizeof guesses);
    sp_circuit_signals(&r->c, &r->in, y, &s);
    assert_int_equal(sp_circuit_couple(&r->c, &r->in, &r->modes, &s, &guesses, k), SP_OK);
    sp_circuit_rates(&r->c, &r->in, &r->modes, y, k, dydt);
}

/* ---- Jacobian ------------------------------------------------------------------------------------------ */

struct jacobian {
    int n;
    double *block, **jac, **mean, *work;
};

static struct jacobian jacobian_of(const struct rig *r)
{
    struct jacobian j = {.n = r->c.layout.count};
    size_t n = (size_t)j.n, means = 2 * (size_t)r->c.exchangers;
    j.block = calloc((n + means + 3) * n, sizeof *j.block);
    j.jac = calloc(n + means, sizeof *j.jac);
    assert_true(j.block && j.jac);
    for (size_t i = 0; i < n + means; ++i)
        j.jac[i] = j.block + i * n;
    j.mean = j.jac + n;
    j.work = j.block + (n + means) * n;
    struct sp_guesses guesses;
    memset(&guesses, 0, sizeof guesses);
    assert_int_equal(
        sp_circuit_jacobian(&r->c, &r->in, &r->modes, r->y, &guesses, j.jac, j.mean, j.work), SP_OK);
    return j;
}

static void drop_jacobian(struct jacobian *j)
{
    free(j->jac);
    free(j->block);
}

/* The Jacobian takes one-sided differences: good to a part in some hundred, plenty for Newton steps. */
/* Central differences of the whole right-hand side, the coupling solved anew each time. */
static void column_by_differences(const struct rig *r, int j, double *out)
{
    double moved[SP_Y_MOST], up[SP_Y_MOST], down[SP_Y_MOST];
    int n = r->c.layout.count;
    struct sp_coupling k;
    double step = sp_layout_kelvin(&r->c.layout, j) ? 2e-3 : j == SP_Y_AIR ? 1e-7 : j == SP_Y_LOST ? 1e-9 : 1e-5;
    memcpy(moved, r->y, sizeof moved);
    moved[j] = r->y[j] + step;
    rates_at(r, moved, &k, up);
    moved[j] = r->y[j] - step;
    rates_at(r, moved, &k, down);
    for (int i = 0; i < n; ++i)
        out[i] = (up[i] - down[i]) / (2.0 * step);
}

static double scale_of(const struct jacobian *j, int row)
{
    double most = 0.0;
    for (int k = 0; k < j->n; ++k)
        most = fmax(most, fabs(j->jac[k][row]));
    return most;
}

/* What the means add to the effect of state c on state i. */
static double through_means(const struct sp_layout *l, const struct jacobian *j, int c, int i)
{
    for (int e = 0; e < l->exchangers; ++e) {
        const struct sp_cells_at *at = &l->exchanger[e];
        if (c >= at->wall && c < at->wall + at->cells) return j->mean[2 * e][i] / at->cells;
        if (c >= at->fluid && c < at->fluid + at->cells) return j->mean[2 * e + 1][i] / at->cells;
    }
    return 0.0;
}

static void check_jacobian(const struct rig *r, const char *what)
{
    const struct sp_layout *l = &r->c.layout;
    struct jacobian j = jacobian_of(r);
    double want[SP_Y_MOST];
    for (int c = 0; c < j.n; ++c) {
        if (c == SP_Y_AIR || c == SP_Y_LOST) continue; /* the cap's steep corner: compared apart */
        column_by_differences(r, c, want);
        for (int i = 0; i < j.n; ++i) {
            double got = j.jac[c][i];
            got += through_means(l, &j, c, i);
            /* 1e-6: an ulp or some of heat rates near 1e5 W, over the fan's step of 1e-4 */
            double give = 4e-3 * fabs(want[i]) + 1e-6 * scale_of(&j, i) + 1e-6;
            if (!(fabs(got - want[i]) <= give)) {
                print_error("%s: d f[%d] / d y[%d] is %.9g, by differences %.9g\n", what, i, c, got, want[i]);
                fail();
            }
        }
    }
    drop_jacobian(&j);
}

static void jacobian_against_differences(void **state)
{
    (void)state;
    struct rig r;
    warm(&r);
    prepare(&r);
    check_jacobian(&r, "warm, valve half open, fan winding down");
    r.modes.fan_on[0] = true;
    r.y[SP_Y_FAN] = 0.95;
    r.in.in[SP_IN_AIR_SPEED] = 0.0;
    r.in.in[SP_IN_SPEED] = 0.0;
    check_jacobian(&r, "standing, fan on");
    r.in.flags = 0;
    r.in.in[SP_IN_HEAT_GAS] = r.in.in[SP_IN_HEAT_FRICTION] = r.in.in[SP_IN_HEAT_SLOPE] = 0.0;
    check_jacobian(&r, "soak: pump stands, fan runs down");
    r.y[SP_Y_FAN] = 0.05;
    r.in.in[SP_IN_AIR_SPEED] = -12.0;
    check_jacobian(&r, "soak in a wind from behind: reverse flow");
    drop(&r);
    warm(&r);
    r.d.thermostat.none = true;
    r.d.duct[0].fan[0].before_core = true;
    r.d.duct[0].fan[0].law = SP_FAN_PROPORTIONAL;
    r.d.duct[0].fan[0].sensor = SP_AT_RADIATOR_OUT;
    r.d.duct[0].fan[0].from = 340.0;
    r.d.duct[0].fan[0].to = 352.0;
    r.d.gauge.place = SP_AT_RADIATOR_OUT;
    r.d.duct[0].core[0].cells = 4.0;
    prepare(&r);
    check_jacobian(&r, "no thermostat, proportional fan before the core, by the radiator's outlet");
    drop(&r);
    warm(&r);
    r.d.pump.electric = true;
    r.modes.play = SP_PLAY_SHUTTING;
    r.d.duct[0].core[0].cells = 1.0;
    prepare(&r);
    r.y[SP_Y_WAX] = 360.0;
    r.in.in[SP_IN_AIR_SPEED] = -8.0;
    check_jacobian(&r, "electric pump, shutting side of the play, one cell, wind from behind");
    drop(&r);
}

/* Trapped air and lost liquid, away from and at the venting cap. */
static void jacobian_of_the_tank(void **state)
{
    (void)state;
    struct rig r;
    for (int venting = 0; venting < 2; ++venting) {
        warm(&r);
        r.d.tank.cap = venting ? 10e3 : 200e3;
        prepare(&r);
        if (venting) { /* a kPa over the setting */
            struct sp_tank_inputs ti;
            for (int i = 0; i < 60; ++i)
                r.y[SP_Y_AIR] *=
                    (101325.0 + 11e3 - 3e4) / (sp_circuit_tank(&r.c, &r.in, r.y, &ti).pressure - 3e4);
            check_close(sp_circuit_tank(&r.c, &r.in, r.y, &ti).pressure, 101325.0 + 11e3, 0, 2e3);
        }
        struct jacobian j = jacobian_of(&r);
        double want[SP_Y_MOST];
        for (int c = SP_Y_AIR; c <= SP_Y_LOST; ++c) {
            column_by_differences(&r, c, want);
            for (int i = 0; i < j.n; ++i)
                check_close(j.jac[c][i], want[i], 1e-2, 1e-9);
            for (int i = 0; i < j.n; ++i)
                assert_true(i == SP_Y_AIR || i == SP_Y_LOST || j.jac[c][i] == 0.0);
        }
        if (venting) assert_true(j.jac[SP_Y_AIR][SP_Y_AIR] < 0.0);
        drop_jacobian(&j);
        drop(&r);
    }
}

/* What the structured solver leaves out of the true matrix is nothing: I - gamma J by differences of
 * everything and dense LU give the same step. */
static void structure_holds(void **state)
{
    (void)state;
    struct rig r;
    warm(&r);
    r.d.duct[0].fan[0].sensor = SP_AT_RADIATOR_OUT;
    r.d.duct[0].fan[0].law = SP_FAN_PROPORTIONAL;
    r.d.duct[0].fan[0].from = 340.0;
    r.d.duct[0].fan[0].to = 352.0;
    fixture_freeze(&r.d.coolant.fluid); /* the first cell's heat capacity sets all cells' weights: left out */
    prepare(&r);
    size_t n = (size_t)r.c.layout.count;
    const double gamma = 0.5;
    gsl_matrix *m = gsl_matrix_alloc(n, n);
    gsl_permutation *p = gsl_permutation_alloc(n);
    double column[SP_Y_MOST], b[SP_Y_MOST], x[SP_Y_MOST], want[SP_Y_MOST];
    for (size_t c = 0; c < n; ++c) {
        column_by_differences(&r, (int)c, column);
        for (size_t i = 0; i < n; ++i)
            gsl_matrix_set(m, i, c, (i == c ? 1.0 : 0.0) - gamma * column[i]);
        b[c] = 1.0 + 0.1 * (double)c;
    }
    int sign;
    gsl_linalg_LU_decomp(m, p, &sign);
    gsl_vector_view bv = gsl_vector_view_array(b, n), wv = gsl_vector_view_array(want, n);
    gsl_linalg_LU_solve(m, p, &bv.vector, &wv.vector);
    struct jacobian j = jacobian_of(&r);
    struct sp_arrow a;
    struct sp_arrow_factor *f = malloc(sizeof *f);
    assert_non_null(f);
    assert_true(sp_arrow_open(r.c.layout, &a));
    sp_arrow_fill(&a, j.jac, j.mean);
    sp_arrow_scale_add(&a, -gamma);
    assert_true(sp_arrow_factor(&a, f));
    sp_arrow_solve(&a, f, b, x);
    for (size_t i = 0; i < n; ++i)
        check_close(x[i], want[i], 1e-3, 1e-5 * (1.0 + fabs(want[i])));
    sp_arrow_close(&a);
    free(f);
    drop_jacobian(&j);
    gsl_matrix_free(m);
    gsl_permutation_free(p);
    drop(&r);
}

/* ---- balances -------------------------------------------------------------------------------------------
 */

/* Heat in less heat out is what the held heat grows by, at any state: the ledger's three sides, from the
 * rates. */
static void books_balance(void **state)
{
    (void)state;
    struct rig r;
    for (int kind = 0; kind < 4; ++kind) {
        warm(&r);
        r.d.thermostat.none = kind == 1;
        r.d.tank.bleed = 0.03;
        prepare(&r);
        if (kind == 2) r.in.flags = 0;
        if (kind == 3) r.in.in[SP_IN_AIR_SPEED] = -9.0;
        struct sp_coupling k;
        double f[SP_Y_MOST], up[SP_Y_MOST], down[SP_Y_MOST];
        rates_at(&r, r.y, &k, f);
        const double h = 1e-4; /* s; small against every lag, large against rounding */
        memcpy(up, r.y, sizeof up);
        memcpy(down, r.y, sizeof down);
        for (int i = 0; i < r.c.layout.count; ++i) {
            up[i] += h * f[i];
            down[i] -= h * f[i];
        }
        double growing = (sp_circuit_heat_held(&r.c, up) - sp_circuit_heat_held(&r.c, down)) / (2.0 * h);
        double net = f[SP_Y_HEAT_IN] - f[SP_Y_HEAT_AIR] - f[SP_Y_HEAT_SKIN];
        double turned = fabs(f[SP_Y_HEAT_IN]) + fabs(f[SP_Y_HEAT_AIR]) + fabs(f[SP_Y_HEAT_SKIN]);
        check_close(growing, net, 0, 1e-5 * turned + 1.0);
        drop(&r);
    }
}

/* Everything at ambient, nothing running: nothing moves, to the last bit that matters. */
static void cold_car_rests(void **state)
{
    (void)state;
    struct rig r;
    warm(&r);
    prepare(&r);
    r.in.in[SP_IN_SPEED] = r.in.in[SP_IN_AIR_SPEED] = 0.0;
    r.in.in[SP_IN_HEAT_GAS] = r.in.in[SP_IN_HEAT_FRICTION] = 0.0;
    r.in.flags = 0;
    r.d.start = (struct sp_start){.coolant = 298.15, .metal = NAN, .radiator = NAN};
    sp_circuit_start(&r.c, &r.in, r.y);
    struct sp_coupling k;
    double f[SP_Y_MOST];
    rates_at(&r, r.y, &k, f);
    for (int i = 0; i < r.c.layout.count; ++i)
        check_close(f[i], 0.0, 0, 1e-10);
    assert_true(k.duct[0].mass_flow == 0.0 && k.loop.pump == 0.0);
    drop(&r);
}

static void start_state(void **state)
{
    (void)state;
    struct rig r;
    warm(&r);
    prepare(&r);
    const struct sp_layout *l = &r.c.layout;
    r.d.start = (struct sp_start){.coolant = 350.0, .metal = 365.0, .radiator = 310.0};
    sp_circuit_start(&r.c, &r.in, r.y);
    check_close(r.y[SP_Y_METAL], 365.0, 0, 0);
    check_close(r.y[SP_Y_JACKET], 350.0, 0, 0);
    check_close(r.y[l->core], 310.0, 0, 0);
    check_close(r.y[l->wall + l->cells - 1], 310.0, 0, 0);
    r.d.start = (struct sp_start){.coolant = 350.0, .metal = NAN, .radiator = NAN};
    sp_circuit_start(&r.c, &r.in, r.y);
    check_close(r.y[SP_Y_METAL], 350.0, 0, 0);
    check_close(r.y[l->back], 350.0, 0, 0);
    /* Filled at 20 degC and started there: ambient pressure. Started hotter: more, but not over the cap. */
    struct sp_tank_inputs ti;
    r.d.start = (struct sp_start){.coolant = r.d.tank.fill_temperature, .metal = NAN, .radiator = NAN};
    sp_circuit_start(&r.c, &r.in, r.y);
    check_close(sp_circuit_tank(&r.c, &r.in, r.y, &ti).pressure, 101325.0, 1e-9, 0);
    for (double T = 300.0; T < 410.0; T += 10.0) {
        r.d.start = (struct sp_start){.coolant = T, .metal = NAN, .radiator = NAN};
        sp_circuit_start(&r.c, &r.in, r.y);
        double p = sp_circuit_tank(&r.c, &r.in, r.y, &ti).pressure;
        assert_true(p > 101325.0);
        if (T < 385.0) assert_true(p <= 101325.0 + r.d.tank.cap * (1.0 + 1e-9));
    }
    drop(&r);
}

static void controller(void **state)
{
    (void)state;
    struct rig r;
    warm(&r);
    r.d.electrics.voltage_running = 14.0;
    r.d.electrics.voltage_stopped = 12.0;
    r.d.duct[0].fan[0].rated_voltage = 13.0;
    prepare(&r);
    struct sp_fan *f = &r.d.duct[0].fan[0];
    f->law = SP_FAN_SWITCHED;
    assert_true(sp_circuit_fan_wish(&r.c, 0, &r.in, &r.modes, r.y) == 0.0);
    r.modes.fan_on[0] = true;
    check_close(sp_circuit_fan_wish(&r.c, 0, &r.in, &r.modes, r.y), pow(14.0 / 13.0, 0.9), 1e-12, 0);
    r.in.flags = SP_FLAG_FAN; /* after the stop, within the run-on */
    check_close(sp_circuit_fan_wish(&r.c, 0, &r.in, &r.modes, r.y), pow(12.0 / 13.0, 0.9), 1e-12, 0);
    r.in.flags = 0;
    assert_true(sp_circuit_fan_wish(&r.c, 0, &r.in, &r.modes, r.y) == 0.0);
    r.in.flags = SP_FLAG_ENGINE | SP_FLAG_FAN;
    f->law = SP_FAN_NEVER;
    assert_true(sp_circuit_fan_wish(&r.c, 0, &r.in, &r.modes, r.y) == 0.0);
    f->law = SP_FAN_PROPORTIONAL;
    f->rated_voltage = 14.0;
    f->from = 360.0;
    f->to = 370.0;
    f->least = 0.4;
    double before = 0.0;
    for (double T = 355.0; T <= 375.0; T += 0.01) { /* from nil through the least to full, without a jump */
        r.y[SP_Y_JACKET] = T;
        double wish = sp_circuit_fan_wish(&r.c, 0, &r.in, &r.modes, r.y);
        assert_true(wish >= before && wish - before < 0.02);
        before = wish;
    }
    check_close(before, 1.0, 1e-12, 0);
    r.y[SP_Y_JACKET] = 365.0;
    check_close(sp_circuit_fan_wish(&r.c, 0, &r.in, &r.modes, r.y), 0.7, 1e-12, 0);
    /* The fan's current loads the engine: 200 W over 60 % of alternator, half of it heat in the coolant. */
    r.d.electrics.alternator_efficiency = 0.6;
    r.d.engine.gas_temperature = NAN;
    f->power = 200.0;
    f->count = 1.0;
    r.y[SP_Y_FAN] = 1.0;
    check_close(sp_circuit_engine_heat(&r.c, &r.in, &r.modes, r.y), 32e3 + 0.5 * 200.0 / 0.6, 1e-12, 0);
    drop(&r);
}

static void bad_cars(void **state)
{
    (void)state;
    struct sp_complaints c = {0};
    struct sp_circuit k;
    struct sp_design d = *fixture.base;
    d.duct[0].core[0].heat_law = SP_CORE_NO_HEAT;
    assert_false(sp_circuit_build(&d, &k, &c));
    sp_circuit_free(&k);
    d = *fixture.base;
    double falling[] = {1e-3, 5e4, 0.5e-3, 1e4};
    d.pump.curve = (struct sp_curve_design){NAN, NAN, {2, 2, falling}};
    assert_false(sp_circuit_build(&d, &k, &c));
    sp_circuit_free(&k);
    assert_int_equal(c.count, 2);
    sp_complaints_free(&c);
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
        cmocka_unit_test(jacobian_against_differences),
        cmocka_unit_test(jacobian_of_the_tank),
        cmocka_unit_test(structure_holds),
        cmocka_unit_test(books_balance),
        cmocka_unit_test(cold_car_rests),
        cmocka_unit_test(start_state),
        cmocka_unit_test(controller),
        cmocka_unit_test(bad_cars),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
