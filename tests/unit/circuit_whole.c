/* Cars fitted out with more than one duct, core and fluid: the Jacobian by signals against differences of the
 * whole right-hand side, the structured solver against dense elimination, and the balance of heat.
 * SPDX-License-Identifier: GPL-3.0-or-later */
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
    char what[80];
};

/* ---- parts ------------------------------------------------------------------------------------------- */

static struct sp_core core(enum sp_medium carries, double width, double height, double air, double inside,
                           double flow)
{
    struct sp_core c = {.carries = carries,
                        .width = width,
                        .height = height,
                        .depth = 0.04,
                        .free_area_ratio = 0.8,
                        .drop_law = SP_DROP_LINEAR,
                        .linear = 40.0,
                        .quadratic = 8.0,
                        .at_density = 1.2,
                        .at_temperature = NAN,
                        .unevenness = NAN,
                        .angle_loss = 1.0,
                        .heat_law = SP_CORE_POWER,
                        .air_conductance = air,
                        .air_exponent = 0.5,
                        .at_face_velocity = 6.0,
                        .heat_at_density = 1.2,
                        .coolant_conductance = inside,
                        .coolant_exponent = 0.8,
                        .at_coolant_flow = flow,
                        .heat_factor = 1.0,
                        .metal_capacity = 1500.0,
                        .coolant_volume = 0.8e-3,
                        .drop = {100.0 / 60e3, 18e3},
                        .cells = 6.0};
    return c;
}

static struct sp_core radiator(double width)
{
    return core(SP_CARRIES_COOLANT, width, 0.34, 2600.0, 7000.0, 1.5);
}
static struct sp_core oil_cooler(void)
{
    return core(SP_CARRIES_OIL, 0.25, 0.15, 350.0, 500.0, 0.35);
}
static struct sp_core gearbox_cooler(void)
{
    return core(SP_CARRIES_GEARBOX, 0.2, 0.1, 200.0, 300.0, 0.15);
}
static struct sp_core charge_cooler(void)
{
    return core(SP_CARRIES_CHARGE, 0.3, 0.3, 900.0, 500.0, 0.2);
}

static struct sp_core condenser(void)
{
    struct sp_core c = core(SP_CARRIES_LOAD, 0.45, 0.3, 1.0, 1.0, 1.0);
    c.heat_law = SP_CORE_NO_HEAT;
    c.heat_load = 6000.0;
    return c;
}

static struct sp_oil oil(double block)
{
    return (struct sp_oil){.fitted = true,
                           .volume = 5e-3,
                           .heat_share = 0.06,
                           .block = block,
                           .skin_standing = 3.0,
                           .skin_moving = 12.0,
                           .flow = 40.0 / 60e3,
                           .flow_speed = 100.0,
                           .flow_most = 40.0 / 60e3,
                           .opens = NAN,
                           .full = NAN};
}

/* ---- cars -------------------------------------------------------------------------------------------- */

static void plain(struct rig *r)
{
    (void)r;
}

static void unlike_ducts(struct rig *r)
{
    r->d.ducts = 2;
    r->d.duct[1] = r->d.duct[0];
    r->d.duct[1].core[0] = radiator(0.3);
    r->d.duct[1].inlet.area *= 0.6;
    r->d.duct[1].fan[0].law = SP_FAN_ALWAYS;
    r->d.tank.bleed = 0.03;
}

static void equal_ducts(struct rig *r)
{
    r->d.duct[0].count = 2.0;
}

static void ducts_in_series(struct rig *r)
{
    equal_ducts(r);
    r->d.duct[0].in_series = true;
}

/* An oil cooler ahead of the lower third of the radiator, a shroud with two fans over two thirds, flaps,
 * gaps. */
static void oil_ahead(struct rig *r)
{
    struct sp_duct_design *d = &r->d.duct[0];
    d->cores = 2;
    d->core[1] = d->core[0];
    d->core[0] = oil_cooler();
    d->core[0].span_to = 0.33;
    d->past_core = (struct sp_leak){.area = 2e-3, .coefficient = 2.0};
    d->outside =
        (struct sp_leak){.gap = 2e-3, .length = 0.5, .coefficient = 2.0, .pressure_coefficient = -0.1};
    d->fan[0].span_to = 0.66;
    d->fan[0].flap_area = 0.02;
    d->fan[0].flap_loss = 2.0;
    d->fan[1] = d->fan[0];
    d->fan[1].law = SP_FAN_ALWAYS;
    r->d.oil = oil(40.0);
    r->d.oil.opens = 370.0;
    r->d.oil.full = 390.0;
    r->d.oil.still = 0.05;
}

/* Every fluid, over three ducts. */
static void all_fluids(struct rig *r)
{
    struct sp_duct_design *d = r->d.duct;
    oil_ahead(r);
    d[0].cores = 3;
    d[0].core[2] = d[0].core[1];
    d[0].core[1] = d[0].core[0];
    d[0].core[0] = condenser();
    d[0].core[0].span_from = 0.5;
    d[0].core[0].span_to = 1.0;
    d[0].bay_skin = 0.7;
    d[0].inlet.recirculated = 0.1;
    d[0].inlet.recirculation_ends = 14.0;
    d[0].exits = 2;
    d[0].exit[1] = (struct sp_exit){.area = 0.02, .loss = 1.7, .pressure_coefficient = -0.2, .angle = 1.0};
    r->d.ducts = 3;
    d[1] = d[0];
    d[1].cores = d[1].exits = 1;
    d[1].bay_skin = 0.3;
    d[1].count = 2.0;
    memset(d[1].fan, 0, sizeof d[1].fan);
    d[1].core[0] = charge_cooler();
    d[2] = d[1];
    d[2].count = 1.0;
    d[2].bay_skin = 0.0;
    d[2].core[0] = gearbox_cooler();
    r->d.gearbox = oil(0.0);
    r->d.oil.plate = 150.0;
    r->d.charge = (struct sp_charge){true, 2.0, 0.7, 8.0, 0.3};
}

/* Two cores side by side in one duct, a third that goes on from the second; heater, plate, electric pump. */
static void branches(struct rig *r)
{
    struct sp_duct_design *d = &r->d.duct[0];
    d->cores = 3;
    d->core[0] = radiator(0.45);
    d->core[0].span_to = 0.5;
    d->core[1] = radiator(0.45);
    d->core[1].span_from = 0.5;
    d->core[1].span_to = 1.0;
    d->core[2] = radiator(0.5);
    d->core[2].in_series = true;
    d->core[2].cells = 4.0;
    r->d.hoses.heater = (struct sp_resistance){10.0 / 60e3, 20e3};
    r->d.hoses.heater_conductance = 80.0;
    r->d.hoses.heater_air = 293.15;
    r->d.hoses.pot = 1e-3;
    r->d.thermostat.restrictor = 0.02;
    r->d.thermostat.bypass_shut = 2.0;
    r->d.tank.bleed_bore = 3e-3;
    r->d.pump.electric = true;
    r->d.pump.law = SP_PUMP_OVER_TEMPERATURE;
    r->d.pump.from = 350.0;
    r->d.pump.to = 370.0;
    r->d.pump.least = 0.15;
    r->d.pump.power = 300.0;
    r->d.electrics.battery = 2e5;
}

/* Two cores one behind the other, the coolant through the rear one first: all of one string. */
static void one_string(struct rig *r)
{
    struct sp_duct_design *d = &r->d.duct[0];
    d->cores = 2;
    d->core[0] = radiator(0.5);
    d->core[1] = radiator(0.5);
    d->core[1].in_series = true;
    r->d.thermostat.inlet_side = true;
    r->d.thermostat.mapped_power = 20e3;
    r->d.thermostat.mapped_shift = 3.0;
    r->d.tank.bleed = 0.03;
    r->d.hoses.heater = (struct sp_resistance){10.0 / 60e3, 20e3};
    r->d.hoses.heater_conductance = 80.0;
    r->d.hoses.heater_air = NAN;
}

static const struct {
    const char *name;
    void (*fit)(struct rig *r);
} cars[] = {{"plain", plain},
            {"two unlike ducts", unlike_ducts},
            {"two equal ducts", equal_ducts},
            {"two ducts in series", ducts_in_series},
            {"oil cooler ahead", oil_ahead},
            {"all fluids", all_fluids},
            {"branches", branches},
            {"one string", one_string}};
enum { CARS = sizeof cars / sizeof *cars };

/* ---- conditions -------------------------------------------------------------------------------------- */

static void at_speed(struct rig *r)
{
    memset(r, 0, sizeof *r);
    r->d = *fixture.base;
    double *in = r->in.in;
    in[SP_IN_SPEED] = in[SP_IN_AIR_SPEED] = 30.0;
    in[SP_IN_WAKE] = 1.0;
    in[SP_IN_AMBIENT] = 298.15;
    in[SP_IN_PRESSURE] = 101325.0;
    in[SP_IN_HEAT_GAS] = 30e3;
    in[SP_IN_HEAT_FRICTION] = 2e3;
    in[SP_IN_HEAT_SLOPE] = 0.5;
    in[SP_IN_ENGINE_SPEED] = 80.0;
    in[SP_IN_POWER] = 21e3;
    in[SP_IN_MEASURED] = NAN;
    in[SP_IN_OIL_HEAT] = 4e3;
    in[SP_IN_GEARBOX_HEAT] = 1.5e3;
    in[SP_IN_CHARGE_FLOW] = 0.12;
    in[SP_IN_CHARGE_HEATING] = 0.25;
    r->in.flags = SP_FLAG_ENGINE | SP_FLAG_PUMP | SP_FLAG_FAN;
    r->modes.play = SP_PLAY_OPENING;
}

static const char *const conditions[] = {"at speed",         "standing, fans on", "key on after the stop",
                                         "wind from behind", "cold soak",         "bonnet up, blown"};
enum { CONDITIONS = sizeof conditions / sizeof *conditions };

static void put(struct rig *r, int condition)
{
    double *in = r->in.in;
    if (condition == 1 || condition == 2 || condition >= 4) in[SP_IN_SPEED] = in[SP_IN_AIR_SPEED] = 0.0;
    if (condition == 1 || condition == 5)
        for (int f = 0; f < SP_FAN_KINDS; ++f)
            r->modes.fan_on[f] = true;
    if (condition == 2 || condition >= 4) {
        in[SP_IN_HEAT_GAS] = in[SP_IN_HEAT_FRICTION] = in[SP_IN_HEAT_SLOPE] = in[SP_IN_OIL_HEAT] = 0.0;
        in[SP_IN_GEARBOX_HEAT] = in[SP_IN_CHARGE_FLOW] = in[SP_IN_CHARGE_HEATING] = in[SP_IN_ENGINE_SPEED] =
            0.0;
        in[SP_IN_POWER] = 0.0;
        r->in.flags = condition == 4 ? 0 : SP_FLAG_KEY | SP_FLAG_PUMP | SP_FLAG_FAN;
    }
    if (condition == 3) in[SP_IN_AIR_SPEED] = -9.0;
    if (condition == 5) {
        r->in.flags |= SP_FLAG_BONNET;
        in[SP_IN_BLOWER] = 0.3;
    }
}

/* Builds, and lays temperatures that differ everywhere. */
static void prepare(struct rig *r)
{
    struct sp_complaints c = {0};
    r->d.start.coolant = 350.0;
    if (!sp_circuit_build(&r->d, &r->c, &c)) sp_complaints_print(&c, false, stderr);
    assert_int_equal(c.count, 0);
    sp_circuit_start(&r->c, &r->in, r->y);
    const struct sp_layout *l = &r->c.layout;
    r->y[SP_Y_METAL] = 378.0;
    r->y[SP_Y_JACKET] = 363.15;
    r->y[SP_Y_TANK] = 351.0;
    r->y[SP_Y_WAX] = r->d.thermostat.inlet_side ? 357.0 : 361.0;
    r->y[SP_Y_GAUGE] = 355.0;
    for (int i = 0; i < SP_HOSE_CELLS; ++i) {
        r->y[l->out + i] = 362.5 - i;
        r->y[l->back + i] = 345.0 - 0.7 * i;
    }
    for (int f = 0; f < l->fans; ++f)
        r->y[l->fan[f]] = 0.4 + 0.2 * f;
    if (l->oil >= 0) r->y[l->oil] = 381.0;
    if (l->gearbox >= 0) r->y[l->gearbox] = 371.0;
    for (int e = 0; e < l->exchangers; ++e) {
        const struct sp_cells_at *at = &l->exchanger[e];
        double top = r->c.exchanger[e].string >= 0 ? 358.0 : 368.0;
        for (int i = 0; i < at->cells; ++i) {
            r->y[at->fluid + i] = top - 2.0 * e - 12.0 * (i + 1) / at->cells;
            r->y[at->wall + i] = top - 8.0 - 2.0 * e - 14.0 * (i + 1) / at->cells;
        }
    }
}

static void ready(struct rig *r, int car, int condition)
{
    at_speed(r);
    cars[car].fit(r);
    put(r, condition);
    snprintf(r->what, sizeof r->what, "%s, %s", cars[car].name, conditions[condition]);
    prepare(r);
}

static void rates_at(const struct rig *r, const double *y, struct sp_coupling *k, double *dydt)
{
    struct sp_signals s;
    struct sp_guesses guesses;
    memset(&guesses, 0, sizeof guesses);
    sp_circuit_signals(&r->c, &r->in, y, &s);
    if (sp_circuit_couple(&r->c, &r->in, &r->modes, &s, &guesses, k)) {
        print_error("%s: no solution\n", r->what);
        fail();
    }
    sp_circuit_rates(&r->c, &r->in, &r->modes, y, k, dydt);
}

/* ---- Jacobian ---------------------------------------------------------------------------------------- */

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
    assert_int_equal(sp_circuit_jacobian(&r->c, &r->in, &r->modes, r->y, &guesses, j.jac, j.mean, j.work),
                     SP_OK);
    return j;
}

static void drop_jacobian(struct jacobian *j)
{
    free(j->jac);
    free(j->block);
}

/* Central differences of the whole right-hand side, the coupling solved anew each time. */
static void column_by_differences(const struct rig *r, int j, double *out)
{
    double moved[SP_Y_MOST], up[SP_Y_MOST], down[SP_Y_MOST];
    int n = r->c.layout.count;
    struct sp_coupling k;
    double step = 2e-3;
    if (!sp_layout_kelvin(&r->c.layout, j)) step = 1e-4;
    if (j == SP_Y_AIR) step = 1e-7;
    if (j == SP_Y_LOST) step = 1e-9;
    memcpy(moved, r->y, (size_t)n * sizeof *moved);
    moved[j] = r->y[j] + step;
    rates_at(r, moved, &k, up);
    moved[j] = r->y[j] - step;
    rates_at(r, moved, &k, down);
    for (int i = 0; i < n; ++i)
        out[i] = (up[i] - down[i]) / (2.0 * step);
}

static double through_means(const struct sp_layout *l, const struct jacobian *j, int c, int i)
{
    for (int e = 0; e < l->exchangers; ++e) {
        const struct sp_cells_at *at = &l->exchanger[e];
        if (c >= at->wall && c < at->wall + at->cells) return j->mean[2 * e][i] / at->cells;
        if (c >= at->fluid && c < at->fluid + at->cells) return j->mean[2 * e + 1][i] / at->cells;
    }
    return 0.0;
}

static double scale_of(const struct jacobian *j, int row)
{
    double most = 0.0;
    for (int k = 0; k < j->n; ++k)
        most = fmax(most, fabs(j->jac[k][row]));
    return most;
}

/* One-sided differences are good to a part in some hundred, plenty for Newton steps. Those of integrals,
 * which nothing hangs upon, need not be compared; the tank's cap is steep, and compared in circuit.c. */
static int compare_jacobian(const struct rig *r, const char *car, const char *condition)
{
    const struct sp_layout *l = &r->c.layout;
    struct jacobian j = jacobian_of(r);
    double want[SP_Y_MOST];
    int bad = 0;
    for (int c = 0; c < j.n; ++c) {
        if (c == SP_Y_AIR || c == SP_Y_LOST) continue;
        column_by_differences(r, c, want);
        for (int i = 0; i < j.n; ++i) {
            double got = j.jac[c][i] + through_means(l, &j, c, i);
            double give = 4e-3 * fabs(want[i]) + 1e-6 * scale_of(&j, i) + 1e-6;
            if (fabs(got - want[i]) <= give) continue;
            if (++bad > 4) continue;
            print_error("%s, %s: d f[%d] / d y[%d] is %.9g, by differences %.9g (row to %.3g)\n", car,
                        condition, i, c, got, want[i], scale_of(&j, i));
        }
    }
    drop_jacobian(&j);
    return bad;
}

static void jacobian_against_differences(void **state)
{
    (void)state;
    int bad = 0;
    for (int car = 0; car < CARS; ++car)
        for (int k = 0; k < CONDITIONS; ++k) {
            struct rig r;
            ready(&r, car, k);
            bad += compare_jacobian(&r, cars[car].name, conditions[k]);
            sp_circuit_free(&r.c);
        }
    assert_int_equal(bad, 0);
}

/* ---- the structured solver --------------------------------------------------------------------------- */

/* (I - gamma J) x = b by differences of everything and dense elimination. */
static void dense_step(const struct rig *r, double gamma, const double *b, double *x)
{
    size_t n = (size_t)r->c.layout.count;
    gsl_matrix *m = gsl_matrix_alloc(n, n);
    gsl_permutation *p = gsl_permutation_alloc(n);
    double column[SP_Y_MOST];
    for (size_t c = 0; c < n; ++c) {
        column_by_differences(r, (int)c, column);
        for (size_t i = 0; i < n; ++i)
            gsl_matrix_set(m, i, c, (i == c ? 1.0 : 0.0) - gamma * column[i]);
    }
    int sign;
    gsl_linalg_LU_decomp(m, p, &sign);
    gsl_vector_const_view bv = gsl_vector_const_view_array(b, n);
    gsl_vector_view xv = gsl_vector_view_array(x, n);
    gsl_linalg_LU_solve(m, p, &bv.vector, &xv.vector);
    gsl_matrix_free(m);
    gsl_permutation_free(p);
}

static void arrow_step(const struct rig *r, double gamma, const double *b, double *x)
{
    struct jacobian j = jacobian_of(r);
    struct sp_arrow a;
    struct sp_arrow_factor *f = malloc(sizeof *f);
    assert_non_null(f);
    assert_true(sp_arrow_open(r->c.layout, &a));
    sp_arrow_fill(&a, j.jac, j.mean);
    sp_arrow_scale_add(&a, -gamma);
    assert_true(sp_arrow_factor(&a, f));
    sp_arrow_solve(&a, f, b, x);
    sp_arrow_close(&a);
    free(f);
    drop_jacobian(&j);
}

/* What the structured solver leaves out of the true matrix is nothing, but for the fluid's first cell, whose
 * heat capacity sets all cells' weights: left out here by a coolant of constant properties. */
static void structure_holds(void **state)
{
    (void)state;
    const double gamma = 0.5;
    for (int car = 0; car < CARS; ++car) {
        struct rig r;
        double b[SP_Y_MOST], x[SP_Y_MOST], want[SP_Y_MOST];
        at_speed(&r);
        cars[car].fit(&r);
        fixture_freeze(&r.d.coolant.fluid);
        prepare(&r);
        for (int i = 0; i < r.c.layout.count; ++i)
            b[i] = 1.0 + 0.1 * i;
        dense_step(&r, gamma, b, want);
        arrow_step(&r, gamma, b, x);
        for (int i = 0; i < r.c.layout.count; ++i) {
            if (fabs(x[i] - want[i]) <= 1e-3 * fabs(want[i]) + 1e-4 * (1.0 + fabs(want[i]))) continue;
            print_error("%s: x[%d] is %.9g, dense %.9g\n", cars[car].name, i, x[i], want[i]);
            fail();
        }
        sp_circuit_free(&r.c);
    }
}

/* ---- balance ----------------------------------------------------------------------------------------- */

/* Heat in less heat out is what the held heat grows by, at any state. */
static void books_balance(void **state)
{
    (void)state;
    for (int car = 0; car < CARS; ++car)
        for (int kind = 0; kind < CONDITIONS; ++kind) {
            struct rig r;
            struct sp_coupling k;
            double f[SP_Y_MOST], up[SP_Y_MOST], down[SP_Y_MOST];
            ready(&r, car, kind);
            rates_at(&r, r.y, &k, f);
            const double h = 1e-4; /* s; small against every lag, large against rounding */
            for (int i = 0; i < r.c.layout.count; ++i) {
                up[i] = r.y[i] + h * f[i];
                down[i] = r.y[i] - h * f[i];
            }
            double growing = (sp_circuit_heat_held(&r.c, up) - sp_circuit_heat_held(&r.c, down)) / (2.0 * h);
            double net = f[SP_Y_HEAT_IN] - f[SP_Y_HEAT_AIR] - f[SP_Y_HEAT_SKIN];
            double turned = fabs(f[SP_Y_HEAT_IN]) + fabs(f[SP_Y_HEAT_AIR]) + fabs(f[SP_Y_HEAT_SKIN]);
            if (!(fabs(growing - net) <= 1e-5 * turned + 1.0)) {
                print_error("%s, %s: held heat grows by %.9g W, books say %.9g\n", cars[car].name,
                            conditions[kind], growing, net);
                fail();
            }
            sp_circuit_free(&r.c);
        }
}

/* All at ambient and nothing running: nothing moves. */
static void cold_cars_rest(void **state)
{
    (void)state;
    for (int car = 0; car < CARS; ++car) {
        struct rig r;
        struct sp_coupling k;
        double f[SP_Y_MOST];
        at_speed(&r);
        cars[car].fit(&r);
        put(&r, 4);
        for (int d = 0; d < SP_DUCTS; ++d)
            for (int i = 0; i < SP_CORES; ++i)
                r.d.duct[d].core[i].heat_load = 0.0;
        r.d.hoses.heater_air = NAN;
        prepare(&r);
        r.d.start =
            (struct sp_start){.coolant = 298.15, .metal = NAN, .radiator = NAN, .oil = NAN, .gearbox = NAN};
        sp_circuit_start(&r.c, &r.in, r.y);
        rates_at(&r, r.y, &k, f);
        for (int i = 0; i < r.c.layout.count; ++i)
            check_close(f[i], 0.0, 0, 1e-10);
        sp_circuit_free(&r.c);
    }
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
    const struct CMUnitTest tests[] = {cmocka_unit_test(jacobian_against_differences),
                                       cmocka_unit_test(structure_holds), cmocka_unit_test(books_balance),
                                       cmocka_unit_test(cold_cars_rest)};
    return cmocka_run_group_tests(tests, begin, end);
}
