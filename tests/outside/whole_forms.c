/* Parts of a fitted-out car against closed forms: the car's rates brought to rest by Newton's method of this
 * test's own, at inputs given by hand, and what flows then compared with what textbooks say of it.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "fixture.h"

#include <gsl/gsl_linalg.h>

#include "circuit/circuit.h"
#include "part/effectiveness.h"

static struct fixture fixture;

struct rig {
    struct sp_design d;
    struct sp_circuit c;
    struct sp_inputs in;
    struct sp_modes modes;
    struct sp_coupling k;
    double y[SP_Y_MOST];
};

/* ---- a car -------------------------------------------------------------------------------------------- */

/* Constant coolant, no thermostat, heat that does not hang upon the metal: linear, but for the air. */
static void begin_car(struct rig *r)
{
    memset(r, 0, sizeof *r);
    r->d = *fixture.base;
    fixture_freeze(&r->d.coolant.fluid);
    r->d.thermostat.none = true;
    r->d.engine.gas_temperature = NAN;
    r->d.tank.skin = r->d.hoses.skin = r->d.engine.skin_standing = r->d.engine.skin_moving = 0.0;
    memset(r->d.duct[0].fan, 0, sizeof r->d.duct[0].fan);
    double *in = r->in.in;
    in[SP_IN_SPEED] = in[SP_IN_AIR_SPEED] = 30.0;
    in[SP_IN_WAKE] = 1.0;
    in[SP_IN_AMBIENT] = 298.15;
    in[SP_IN_PRESSURE] = 101325.0;
    in[SP_IN_HEAT_GAS] = 40e3;
    in[SP_IN_ENGINE_SPEED] = 100.0;
    in[SP_IN_MEASURED] = NAN;
    r->in.flags = SP_FLAG_ENGINE | SP_FLAG_PUMP | SP_FLAG_FAN;
    r->modes.play = SP_PLAY_OPENING;
}

static struct sp_core core(enum sp_medium carries, double air, double inside, double flow)
{
    return (struct sp_core){.carries = carries,
                            .width = 0.5,
                            .height = 0.34,
                            .depth = 0.04,
                            .free_area_ratio = 0.8,
                            .drop_law = SP_DROP_COEFFICIENT,
                            .coefficient = 9.0,
                            .at_temperature = NAN,
                            .unevenness = NAN,
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
                            .cells = 10.0};
}

static struct sp_core radiator(void)
{
    return core(SP_CARRIES_COOLANT, 2600.0, 7000.0, 1.5);
}

static struct sp_oil oil(double block, double skin)
{
    return (struct sp_oil){.fitted = true,
                           .volume = 5e-3,
                           .block = block,
                           .skin_standing = skin,
                           .skin_moving = skin,
                           .flow = 40.0 / 60e3,
                           .flow_speed = 100.0,
                           .flow_most = 60.0 / 60e3,
                           .opens = NAN,
                           .full = NAN};
}

static void build(struct rig *r)
{
    struct sp_complaints c = {0};
    r->d.start = (struct sp_start){350.0, NAN, NAN, NAN, NAN};
    if (!sp_circuit_build(&r->d, &r->c, &c)) sp_complaints_print(&c, false, stderr);
    assert_int_equal(c.count, 0);
    sp_circuit_start(&r->c, &r->in, r->y);
}

/* ---- to rest ------------------------------------------------------------------------------------------ */

static void rates(struct rig *r, const double *y, double *f)
{
    struct sp_signals s;
    struct sp_guesses g;
    memset(&g, 0, sizeof g);
    sp_circuit_signals(&r->c, &r->in, y, &s);
    assert_int_equal(sp_circuit_couple(&r->c, &r->in, &r->modes, &s, &g, &r->k), SP_OK);
    sp_circuit_rates(&r->c, &r->in, &r->modes, y, &r->k, f);
}

/* Temperatures; there is no fan, and the rest only adds up. */
static int moving(const struct sp_layout *l, int *of)
{
    int n = 0;
    for (int i = 0; i < l->count; ++i)
        if (sp_layout_kelvin(l, i)) of[n++] = i;
    return n;
}

/* One Newton step, the Jacobian by central differences; returns its largest move. */
static double newton(struct rig *r, const int *of, int n)
{
    size_t size = (size_t)n;
    double f[SP_Y_MOST], up[SP_Y_MOST], down[SP_Y_MOST], most = 0.0;
    gsl_matrix *m = gsl_matrix_alloc(size, size);
    gsl_permutation *p = gsl_permutation_alloc(size);
    gsl_vector *x = gsl_vector_alloc(size);
    int sign;
    for (int j = 0; j < n; ++j) {
        double keep = r->y[of[j]], h = 1e-3;
        r->y[of[j]] = keep + h;
        rates(r, r->y, up);
        r->y[of[j]] = keep - h;
        rates(r, r->y, down);
        r->y[of[j]] = keep;
        for (int i = 0; i < n; ++i)
            gsl_matrix_set(m, (size_t)i, (size_t)j, (up[of[i]] - down[of[i]]) / (2.0 * h));
    }
    rates(r, r->y, f);
    for (int i = 0; i < n; ++i)
        gsl_vector_set(x, (size_t)i, -f[of[i]]);
    gsl_linalg_LU_decomp(m, p, &sign);
    gsl_linalg_LU_svx(m, p, x);
    for (int i = 0; i < n; ++i) {
        double step = fmin(fmax(gsl_vector_get(x, (size_t)i), -40.0), 40.0);
        r->y[of[i]] += step;
        most = fmax(most, fabs(step));
    }
    gsl_matrix_free(m);
    gsl_permutation_free(p);
    gsl_vector_free(x);
    return most;
}

static void settle(struct rig *r)
{
    int of[SP_Y_MOST], n = moving(&r->c.layout, of);
    double f[SP_Y_MOST], step = INFINITY;
    for (int i = 0; i < 40 && step > 1e-9; ++i)
        step = newton(r, of, n);
    assert_true(step <= 1e-9);
    rates(r, r->y, f);
}

static const struct sp_cells_at *cells(const struct rig *r, int e)
{
    return &r->c.layout.exchanger[e];
}

static double leaves(const struct rig *r, int e)
{
    return r->y[cells(r, e)->fluid + cells(r, e)->cells - 1];
}

/* ---- a core by itself --------------------------------------------------------------------------------- */

/* Share of the inlet difference by which a fluid of `rate` W/K is cooled in n cells, each with a wall of one
 * temperature and fresh air before it: two resistances in a row. */
static double cooled(int n, double rate, double film, double air)
{
    double to_wall = rate * -expm1(-film / n / rate), per_cell = 1.0 / (1.0 / to_wall + n / air);
    return 1.0 - pow(1.0 - per_cell / rate, n);
}

static double share(const struct rig *r, int e)
{
    const struct sp_exchanger *x = &r->c.exchanger[e];
    double air = r->k.duct[x->run].core[x->slot].rate;
    return cooled(cells(r, e)->cells, r->k.core[e].rate, r->k.core[e].conductance, air);
}

static double air_in(const struct rig *r, int e)
{
    const struct sp_exchanger *x = &r->c.exchanger[e];
    return r->k.duct[x->run].core[x->slot].air_in;
}

/* ---- charge air --------------------------------------------------------------------------------------- */

static void fit_charge(struct rig *r, double count, double inside)
{
    begin_car(r);
    r->d.charge = (struct sp_charge){true, 2.0, 0.7, 8.0, 0.3};
    r->d.ducts = 2;
    r->d.duct[1] = r->d.duct[0];
    r->d.duct[1].core[0] = core(SP_CARRIES_CHARGE, 900.0, inside, 0.2);
    r->d.duct[1].core[0].cells = count;
    r->in.in[SP_IN_CHARGE_FLOW] = 0.25;
    r->in.in[SP_IN_CHARGE_HEATING] = 0.25;
    build(r);
    settle(r);
}

/* The compressor's outlet, then eps-NTU: exact for the cells; and of many cells with all resistance on the
 * air's side, the published form for a stream that is mixed (the charge) against one that is not (Kays &
 * London 1984). */
static void charge_cooler(void **state)
{
    (void)state;
    struct rig r;
    fit_charge(&r, 10.0, 600.0);
    int e = r.c.exchangers - 1;
    double T1 = (298.15 + 8.0) * 1.25, Ta = 298.15;
    check_close(sp_circuit_charge_in(&r.c, &r.in, NULL), T1, 1e-14, 0);
    check_close(leaves(&r, e), T1 - share(&r, e) * (T1 - Ta), 0, 1e-6);
    check_close(sp_circuit_charge_out(&r.c, &r.in, r.y), leaves(&r, e), 0, 0);
    sp_circuit_free(&r.c);

    /* two equal coolers side by side: half the flow in each, and together they give what the charge loses */
    begin_car(&r);
    r.d.charge = (struct sp_charge){true, 2.0, 0.7, 8.0, 0.3};
    r.d.ducts = 2;
    r.d.duct[1] = r.d.duct[0];
    r.d.duct[1].core[0] = core(SP_CARRIES_CHARGE, 900.0, 600.0, 0.2);
    r.d.duct[1].count = 2.0;
    r.in.in[SP_IN_CHARGE_FLOW] = 0.25;
    r.in.in[SP_IN_CHARGE_HEATING] = 0.25;
    build(&r);
    settle(&r);
    check_close(2.0 * r.k.duct[1].heat, 0.25 * 1007.0 * (T1 - leaves(&r, r.c.exchangers - 1)), 1e-6, 0);
    sp_circuit_free(&r.c);

    fit_charge(&r, 50.0, 1e6);
    const struct sp_core_air *air = &r.k.duct[1].core[0];
    double C = 0.25 * 1007.0, c = air->mass_flow * r.c.air.cp, low = fmin(C, c), ratio = low / fmax(C, c);
    double UA = 900.0 * sqrt(air->mass_flow / (0.17 * 6.0 * 1.2));
    enum sp_arrangement how = C > c ? SP_CROSS_MAX_MIXED : SP_CROSS_MIN_MIXED;
    double heat = low * sp_effectiveness(how, UA / low, ratio) * (T1 - Ta);
    check_close(C * (T1 - leaves(&r, r.c.exchangers - 1)), heat, 8e-3, 0);
    sp_circuit_free(&r.c);
}

/* ---- oil ---------------------------------------------------------------------------------------------- */

/* Block and skin alone: at rest between metal and air by their conductances. */
static void oil_between_metal_and_air(void **state)
{
    (void)state;
    struct rig r;
    begin_car(&r);
    r.d.oil = oil(60.0, 25.0);
    r.in.in[SP_IN_OIL_HEAT] = 3e3;
    build(&r);
    settle(&r);
    double want = (60.0 * r.y[SP_Y_METAL] + 25.0 * 298.15 + 3e3) / 85.0;
    check_close(r.y[r.c.layout.oil], want, 0, 1e-6);
    /* what the block does not keep, the coolant carries off: all heat but the oil's skin goes to the air of
     * the duct */
    check_close(r.k.duct[0].heat, 43e3 - 25.0 * (r.y[r.c.layout.oil] - 298.15), 1e-6, 0);
    sp_circuit_free(&r.c);
}

/* Through a plate cooler into what enters the pump: counterflow, eps = (1 - E)/(1 - Cr E), E = exp(-NTU (1 -
 * Cr)) (Kays & London 1984); its conductance goes with the oil's flow over the most. */
static void plate_cooler(void **state)
{
    (void)state;
    struct rig r;
    begin_car(&r);
    r.d.oil = oil(0.0, 0.0);
    r.d.oil.plate = 300.0;
    r.in.in[SP_IN_OIL_HEAT] = 6e3;
    build(&r);
    settle(&r);
    double plate = 300.0 * 40.0 / 60.0; /* at the speed of `flow` */
    double back = r.y[r.c.layout.back + SP_HOSE_CELLS - 1], bleed = r.k.mass_bleed / r.k.mass_pump;
    double in = (1.0 - bleed) * back + bleed * r.y[SP_Y_JACKET];
    double T = r.y[r.c.layout.oil], coolant = r.k.mass_pump * 3551.0;
    double warm = 40.0 / 60e3 * 870.0 / (1.0 + 7e-4 * (T - 288.15)) * (1825.0 + 3.75 * (T - 273.15));
    double low = fmin(warm, coolant), ratio = low / fmax(warm, coolant),
           E = exp(-plate / low * (1.0 - ratio));
    check_close((1.0 - E) / (1.0 - ratio * E) * low * (T - in), 6e3, 1e-6, 0);
    check_close(r.k.duct[0].heat, 46e3, 1e-6, 0);
    /* the engine's coolant rises by its own heat and the oil's */
    double rate = r.k.mass_radiator * 3551.0;
    check_close(r.y[SP_Y_JACKET] - back, 46e3 / rate, 1e-6, 0);
    sp_circuit_free(&r.c);
}

/* An air cooler: oil and air of given rates, and the heat that has to go. */
static void oil_air_cooler(void **state)
{
    (void)state;
    struct rig r;
    begin_car(&r);
    r.d.oil = oil(0.0, 0.0);
    r.d.duct[0].cores = 2;
    r.d.duct[0].core[1] = radiator();
    r.d.duct[0].core[0] = core(SP_CARRIES_OIL, 500.0, 700.0, 0.5);
    r.in.in[SP_IN_OIL_HEAT] = 6e3;
    build(&r);
    settle(&r);
    int e = r.c.exchangers - 1;
    assert_int_equal(r.c.exchanger[e].carries, SP_CARRIES_OIL);
    double T = r.y[r.c.layout.oil], t = 0.5 * (T + leaves(&r, e)) - 273.15;
    /* 870 kg/m3 at 15 degC, 7e-4/K; cp 1825 J/kgK at 0 degC and 3.75 more a kelvin (as the case's page has
     * them) */
    double m = 40.0 / 60e3 * 870.0 / (1.0 + 7e-4 * (T - 288.15)), rate = m * (1825.0 + 3.75 * t);
    check_close(r.k.core[e].flow, m, 1e-9, 0);
    check_close(rate * (T - leaves(&r, e)), 6e3, 1e-6, 0);
    check_close(r.k.core[e].conductance, 700.0 * pow(m / 0.5, 0.8), 2e-3, 0);
    double s = cooled(10, rate, r.k.core[e].conductance, r.k.duct[0].core[0].rate);
    check_close(s * rate * (T - 298.15), 6e3, 2e-3, 0);
    /* and the radiator behind it meets its heat */
    double rise = 6e3 / (r.k.duct[0].mass_flow * r.c.air.cp);
    check_close(air_in(&r, 0) - 298.15, rise, 1e-6, 0);
    sp_circuit_free(&r.c);
}

/* Engine off, all as warm as the air, but the oil: the first-order lag of its heat capacity, which rises
 * straight with temperature; t = -(m/k)(c_a ln(x/x_0) + c' (x - x_0)), x over ambient. */
static void oil_cools(void **state)
{
    (void)state;
    struct sp_design d = *fixture.base;
    double Ta = d.air.ambient, T0 = 390.0;
    d.oil = oil(8.0, 6.0);
    d.engine.metal_capacity = 1e9;
    d.start = (struct sp_start){Ta, NAN, NAN, T0, NAN};
    struct sp_step soak = {.kind = SP_STEP_SOAK, .time = 1200.0, .repeat = 1.0, .following = NAN};
    d.step = &soak;
    d.steps = 1;
    struct fixture_drive run = fixture_run(&fixture, &d, 60.0, 1e-9);
    assert_int_equal(run.status, SP_OK);
    double mass = 5e-3 * 870.0 / (1.0 + 7e-4 * 5.0), ca = 1825.0 + 3.75 * (Ta - 273.15), x0 = T0 - Ta;
    double low = 0.0, high = x0;
    for (int i = 0; i < 100; ++i) { /* where the closed form comes to the end of the soak */
        double x = 0.5 * (low + high), t = -mass / 14.0 * (ca * log(x / x0) + 3.75 * (x - x0));
        *(t > 1200.0 ? &low : &high) = x;
    }
    double given = mass * (ca * (x0 - low) + 0.5 * 3.75 * (x0 * x0 - low * low)); /* to metal and air */
    check_close(run.result.ledger.out_skin, 6.0 / 14.0 * given, 1e-4, 0);
    fixture_drop(&run);
}

/* ---- heater ------------------------------------------------------------------------------------------- */

static void heater(void **state)
{
    (void)state;
    struct rig r;
    begin_car(&r);
    r.d.hoses.heater = (struct sp_resistance){8.0 / 60e3, 30e3};
    r.d.hoses.heater_conductance = 90.0;
    r.d.hoses.heater_air = 278.15;
    build(&r);
    settle(&r);
    double rate = r.k.mass_heater * 3551.0, T = r.y[SP_Y_JACKET];
    double heat = rate * (1.0 - exp(-90.0 / rate)) * (T - 278.15), returns;
    assert_true(r.k.mass_heater > 0.05);
    check_close(sp_circuit_heater(&r.c, &r.in, r.y, &r.k, &returns), heat, 1e-12, 0);
    check_close(returns, T - heat / rate, 1e-12, 0);
    check_close(r.k.duct[0].heat, 40e3 - heat, 1e-6, 0);
    sp_circuit_free(&r.c);
}

/* ---- radiators ---------------------------------------------------------------------------------------- */

/* Two radiators side by side on the coolant share it so that they cost it the same; what comes back is their
 * mix. The drop of tubes goes with flow^1.75 (Blasius). */
static void radiators_in_parallel(void **state)
{
    (void)state;
    struct rig r;
    begin_car(&r);
    r.d.ducts = 2;
    r.d.duct[0].core[0] = radiator();
    r.d.duct[1] = r.d.duct[0];
    r.d.duct[1].core[0].drop = (struct sp_resistance){60.0 / 60e3, 25e3};
    r.d.duct[1].core[0].air_conductance = 1500.0;
    r.d.duct[1].inlet.area *= 0.5;
    build(&r);
    settle(&r);
    double a = r.k.core[0].flow, b = r.k.core[1].flow;
    check_close(b / a, 60.0 / 100.0 * pow(18.0 / 25.0, 1.0 / 1.75), 1e-6, 0);
    check_close(a + b, r.k.mass_radiator, 1e-12, 0);
    double mix = (a * leaves(&r, 0) + b * leaves(&r, 1)) / (a + b);
    check_close(r.y[r.c.layout.back], mix, 0, 1e-6);
    for (int e = 0; e < 2; ++e) {
        double hot = r.y[SP_Y_JACKET];
        check_close(leaves(&r, e), hot - share(&r, e) * (hot - 298.15), 0, 1e-6);
    }
    sp_circuit_free(&r.c);
}

/* Coolant through two cores in series, each with fresh air: what the one leaves of the difference, the other
 * takes on. Cores one behind the other in the air too, the coolant to the front one first, air mixed between:
 * overall parallel flow of two passes, eps = (1 - (1 - (1 + Cr) e)^2)/(1 + Cr), e of one pass (Kays & London
 * 1984), where both passes are alike, which a small rise of the air's temperature leaves them. */
static void radiators_in_series(void **state)
{
    (void)state;
    struct rig r;
    begin_car(&r);
    r.d.duct[0].core[0] = radiator();
    r.d.duct[0].count = 2.0;
    r.d.duct[0].in_series = true;
    build(&r);
    settle(&r);
    double hot = r.y[SP_Y_JACKET], Ta = 298.15;
    check_close(leaves(&r, 1) - Ta, (1.0 - share(&r, 0)) * (1.0 - share(&r, 1)) * (hot - Ta), 1e-8, 0);
    check_close(r.k.core[0].flow, r.k.mass_radiator, 1e-12, 0);
    check_close(r.k.core[1].flow, r.k.mass_radiator, 1e-12, 0);
    sp_circuit_free(&r.c);

    begin_car(&r);
    r.d.duct[0].cores = 2;
    r.d.duct[0].core[0] = r.d.duct[0].core[1] = radiator();
    r.d.duct[0].core[1].in_series = true;
    r.in.in[SP_IN_HEAT_GAS] = 400.0; /* a kelvin: densities stay what they are */
    build(&r);
    settle(&r);
    hot = r.y[SP_Y_JACKET];
    double C = r.k.core[0].rate, c = r.k.duct[0].mass_flow * r.c.air.cp, ratio = C / c, e = share(&r, 0);
    double eps = (1.0 - pow(1.0 - (1.0 + ratio) * e, 2.0)) /
                 (1.0 + ratio); /* on the coolant's side, C in place of Cmin */
    check_close((hot - leaves(&r, 1)) / (hot - Ta), eps, 1e-3, 0);
    check_close(air_in(&r, 1) - Ta, C * (hot - leaves(&r, 0)) / c, 1e-6, 0);
    sp_circuit_free(&r.c);
}

/* Halves of a core one behind the other, the coolant through both, are the core of twice the depth when the
 * air is not warmed by much: the same row of cells. Here the air takes up a thousandth of the difference. */
static void halves_in_depth(void **state)
{
    (void)state;
    double rejected[2];
    for (int k = 0; k < 2; ++k) {
        struct rig r;
        begin_car(&r);
        struct sp_duct_design *d = &r.d.duct[0];
        d->core[0] = core(SP_CARRIES_COOLANT, k ? 10.0 : 20.0, k ? 40.0 : 80.0, 1.5);
        d->core[0].coefficient = k ? 4.5 : 9.0;
        d->core[0].drop.drop = k ? 9e3 : 18e3;
        d->core[0].cells = k ? 10.0 : 20.0;
        d->core[1] = d->core[0];
        d->core[1].in_series = true;
        d->cores = k ? 2 : 1;
        r.in.in[SP_IN_HEAT_GAS] = 500.0;
        build(&r);
        settle(&r);
        rejected[k] = 500.0 / (r.y[SP_Y_JACKET] - 298.15);
        sp_circuit_free(&r.c);
    }
    check_close(rejected[1], rejected[0], 2e-3, 0);
}

/* ---- heat loads --------------------------------------------------------------------------------------- */

/* A condenser ahead of all of the radiator, or of a part: the air that meets the radiator is warmer by Q/(m
 * c) in the mean over what passes. */
static void condenser(void **state)
{
    (void)state;
    for (int k = 0; k < 2; ++k) {
        struct rig r;
        begin_car(&r);
        struct sp_duct_design *d = &r.d.duct[0];
        d->cores = 2;
        d->core[1] = radiator();
        d->core[0] = core(SP_CARRIES_LOAD, 1.0, 1.0, 1.0);
        d->core[0].heat_law = SP_CORE_NO_HEAT;
        d->core[0].heat_load = 7e3;
        if (k) {
            d->core[0].height *= 0.4;
            d->core[0].span_to = 0.4;
        }
        build(&r);
        settle(&r);
        const struct sp_core_air *air = r.k.duct[0].core;
        check_close(air[0].heat, 7e3, 1e-9, 0);
        if (!k) check_close(air_in(&r, 0) - 298.15, 7e3 / (r.k.duct[0].mass_flow * r.c.air.cp), 1e-9, 0);
        if (k) assert_true(air_in(&r, 0) - 298.15 > 0.8 * 7e3 / (r.k.duct[0].mass_flow * r.c.air.cp));
        check_close(r.k.duct[0].heat, 47e3, 1e-6, 0);
        double hot = r.y[SP_Y_JACKET], in = air_in(&r, 0);
        check_close(leaves(&r, 0), hot - share(&r, 0) * (hot - in), 0, 1e-6);
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
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(charge_cooler),
        cmocka_unit_test(oil_between_metal_and_air),
        cmocka_unit_test(plate_cooler),
        cmocka_unit_test(oil_air_cooler),
        cmocka_unit_test(oil_cools),
        cmocka_unit_test(heater),
        cmocka_unit_test(radiators_in_parallel),
        cmocka_unit_test(radiators_in_series),
        cmocka_unit_test(halves_in_depth),
        cmocka_unit_test(condenser),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
