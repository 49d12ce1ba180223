/* Random plain cars with a drive of 60 s: shared by the tests that draw cars.
 * The car of a seed is the same everywhere. SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_TESTS_RANDOM_CAR_H
#define SP_TESTS_RANDOM_CAR_H

#include "fixture.h"

#include <gsl/gsl_rng.h>

enum { DRAWN_STEPS = 3, DRAWN_PAIRS = 5 };

/* A random car with what its pointers point at. */
struct drawn {
    unsigned long seed;
    struct sp_design d;
    struct sp_step step[DRAWN_STEPS];
    double fan_pairs[2 * DRAWN_PAIRS], drop_pairs[2 * DRAWN_PAIRS];
};

/* ---- drawing ------------------------------------------------------------------------------------------ */

static inline double between(gsl_rng *g, double low, double high)
{
    return low + (high - low) * gsl_rng_uniform(g);
}

static inline double spread(gsl_rng *g, double low, double high) /* even over orders of magnitude */
{
    return low * pow(high / low, gsl_rng_uniform(g));
}

static inline bool chance(gsl_rng *g, double share)
{
    return gsl_rng_uniform(g) < share;
}

static inline void draw_air(gsl_rng *g, struct sp_design *d)
{
    d->air.ambient = between(g, 243.15, 323.15);
    d->air.altitude = between(g, 0.0, 5000.0);
    d->air.pressure = sp_isa_pressure(d->air.altitude);
    d->air.humidity = gsl_rng_uniform(g);
    d->air.wind = chance(g, 0.5) ? 0.0 : between(g, -15.0, 15.0);
}

static inline void draw_engine(gsl_rng *g, struct sp_design *d)
{
    struct sp_engine *e = &d->engine;
    e->displacement = spread(g, 0.3e-3, 8e-3);
    e->rated_power = e->displacement * spread(g, 30e6, 150e6);
    e->rated_speed = between(g, 60.0, 200.0);
    e->idle_speed = between(g, 10.0, 30.0);
    e->heat_fraction = between(g, 0.25, 1.0);
    e->heat_exponent = between(g, 0.6, 1.0);
    e->gas_temperature = chance(g, 0.3) ? NAN : between(g, 700.0, 1200.0);
    e->metal_capacity = e->displacement * spread(g, 10e6, 60e6);
    e->coolant_volume = e->displacement * spread(g, 0.4, 2.0);
    e->conductance = e->displacement * spread(g, 0.4e6, 3e6);
    e->conductance_flow = spread(g, 0.5e-3, 5e-3);
    e->conductance_still = between(g, 0.02, 0.15);
    e->skin_standing = between(g, 0.0, 40.0);
    e->skin_moving = e->skin_standing + between(g, 0.0, 80.0);
    d->electrics.voltage_running = between(g, 12.0, 14.5);
    d->electrics.alternator_efficiency = between(g, 0.4, 0.9);
}

static inline void draw_circuit(gsl_rng *g, struct sp_design *d)
{
    enum sp_coolant_kind kind = (enum sp_coolant_kind)gsl_rng_uniform_int(g, 3);
    double share = kind == SP_WATER ? 0.0 : between(g, 0.05, kind == SP_PROPYLENE_GLYCOL ? 0.5 : 0.6);
    assert_true(sp_coolant_mix(kind, share, &d->coolant.fluid));
    d->coolant.kind = kind;
    d->coolant.share = share;
    d->pump.electric = chance(g, 0.3);
    d->pump.curve.shutoff = spread(g, 20e3, 300e3);
    d->pump.curve.free_flow = spread(g, 0.5e-3, 10e-3);
    d->pump.speed = d->engine.rated_speed * between(g, 0.8, 1.4);
    d->pump.ratio = between(g, 0.7, 1.6);
    d->pump.run_on = chance(g, 0.5) ? between(g, 0.0, 30.0) : 0.0;
    struct sp_thermostat *t = &d->thermostat;
    t->none = chance(g, 0.25);
    t->opens = between(g, 330.0, 370.0);
    t->full = t->opens + between(g, 3.0, 20.0);
    t->hysteresis = chance(g, 0.3) ? 0.0 : between(g, 0.5, 8.0);
    t->lag = spread(g, 1.0, 30.0);
    t->lag_still = t->lag * between(g, 1.0, 5.0);
    t->bore = between(g, 0.02, 0.05);
    t->lift = between(g, 0.003, 0.012);
    t->leak = chance(g, 0.2) ? 0.0 : spread(g, 1e-3, 0.1);
    t->bypass_shut = between(g, 0.3, 2.0);
    struct sp_hoses *h = &d->hoses;
    h->length_out = between(g, 0.2, 4.0);
    h->length_back = between(g, 0.2, 4.0);
    h->bore_out = h->bore_back = between(g, 0.015, 0.05);
    h->bends = between(g, 0.0, 12.0);
    h->jacket.drop = spread(g, 5e3, 150e3);
    h->bypass.drop = spread(g, 5e3, 150e3);
    h->skin = between(g, 0.0, 20.0);
    d->tank.air_space = spread(g, 0.1e-3, 2e-3);
    d->tank.volume = d->tank.air_space * between(g, 1.0, 3.0);
    d->tank.cap = between(g, 0.0, 3e5);
    d->tank.compliance = spread(g, 1e-11, 1e-8);
    d->tank.bleed = chance(g, 0.2) ? 0.0 : between(g, 0.002, 0.1);
}

/* Rising flows up to `most`, falling pressures to nil. */
static inline void draw_fan_pairs(gsl_rng *g, double pressure, double most, struct drawn *x)
{
    double flow = chance(g, 0.5) ? 0.0 : between(g, 0.0, 0.1) * most;
    for (int i = 0; i < DRAWN_PAIRS; ++i) {
        x->fan_pairs[2 * i] = i == DRAWN_PAIRS - 1 ? most : flow;
        x->fan_pairs[2 * i + 1] = i == DRAWN_PAIRS - 1 ? 0.0 : pressure;
        flow += between(g, 0.1, 0.22) * most;
        pressure *= between(g, 0.6, 1.0);
    }
    x->d.duct[0].fan[0].curve = (struct sp_curve_design){NAN, NAN, {DRAWN_PAIRS, 2, x->fan_pairs}};
}

static inline void draw_fan(gsl_rng *g, struct drawn *x)
{
    struct sp_fan *f = &x->d.duct[0].fan[0];
    f->fitted = chance(g, 0.75);
    f->count = 1.0 + (double)gsl_rng_uniform_int(g, 3);
    f->diameter = between(g, 0.2, 0.45);
    f->hub = f->diameter * between(g, 0.2, 0.5);
    /* At free flow the outlet head is 1 % to 80 % of the shut-off pressure: of real fans some 5 % to 40 %. */
    double annulus = acos(-1.0) / 4.0 * (f->diameter * f->diameter - f->hub * f->hub),
           shutoff = spread(g, 40.0, 800.0);
    double flow = annulus * sqrt(shutoff / 0.6 * spread(g, 0.01, 0.8));
    f->curve = (struct sp_curve_design){shutoff, flow, {0, 0, NULL}};
    if (chance(g, 0.3)) draw_fan_pairs(g, shutoff, flow, x);
    f->static_basis = chance(g, 0.5);
    f->before_core = chance(g, 0.3);
    f->windmill_loss = between(g, 0.0, 5.0);
    f->power = spread(g, 40.0, 1000.0);
    f->spin_up = spread(g, 0.2, 5.0);
    f->law = (enum sp_fan_law)gsl_rng_uniform_int(g, 4);
    f->sensor = chance(g, 0.5) ? SP_AT_ENGINE_OUT : SP_AT_RADIATOR_OUT;
    f->on = between(g, 330.0, 375.0);
    f->off = f->on - between(g, 0.5, 12.0);
    f->from = between(g, 330.0, 370.0);
    f->to = f->from + between(g, 2.0, 20.0);
    f->least = gsl_rng_uniform(g);
    f->run_on = chance(g, 0.5) ? between(g, 0.0, 40.0) : 0.0;
}

static inline void draw_drop(gsl_rng *g, struct drawn *x)
{
    struct sp_core *c = &x->d.duct[0].core[0];
    c->drop_law = (enum sp_drop_law)gsl_rng_uniform_int(g, 4);
    c->free_area_ratio = between(g, 0.5, 0.85);
    c->coefficient = spread(g, 3.0, 60.0);
    c->linear = between(g, 10.0, 150.0);
    c->quadratic = between(g, 3.0, 30.0);
    c->at_density = between(g, 1.0, 1.25);
    c->at_temperature = chance(g, 0.5) ? NAN : between(g, 280.0, 320.0);
    double v = 0.0, p = 0.0;
    for (int i = 0; i < DRAWN_PAIRS; ++i) {
        double step = between(g, 1.0, 4.0);
        p += step * between(g, 30.0, 60.0) * (1.0 + i);
        v += step;
        x->drop_pairs[2 * i] = v;
        x->drop_pairs[2 * i + 1] = p;
    }
    c->drop_table = (struct sp_table){DRAWN_PAIRS, 2, x->drop_pairs};
}

static inline void draw_core(gsl_rng *g, struct drawn *x)
{
    struct sp_core *c = &x->d.duct[0].core[0];
    c->width = between(g, 0.2, 0.8);
    c->height = between(g, 0.15, 0.6);
    c->depth = between(g, 0.016, 0.07);
    draw_drop(g, x);
    c->fin_pitch = between(g, 1.0e-3, 2.5e-3);
    c->fin_thickness = between(g, 0.05e-3, 0.12e-3);
    c->louvre_pitch = between(g, 0.8e-3, 2.0e-3);
    c->louvre_angle = between(g, 0.3, 0.5);
    c->heat_law = chance(g, 0.5) ? SP_CORE_FINS : SP_CORE_POWER;
    c->air_conductance = c->width * c->height * spread(g, 1e3, 2e4);
    c->air_exponent = between(g, 0.3, 0.7);
    c->at_face_velocity = between(g, 3.0, 10.0);
    c->heat_at_density = 1.2;
    c->coolant_conductance = c->air_conductance * spread(g, 1.0, 10.0);
    c->coolant_exponent = between(g, 0.3, 0.9);
    c->at_coolant_flow = spread(g, 0.5, 4.0);
    c->heat_factor = between(g, 0.6, 1.2);
    c->metal_capacity = spread(g, 0.5e3, 8e3);
    c->coolant_volume = spread(g, 0.3e-3, 4e-3);
    c->drop.drop = spread(g, 2e3, 60e3);
    c->drop.flow = chance(g, 0.5) ? NAN : spread(g, 0.5e-3, 5e-3); /* NAN: from the tubes */
    c->cells = chance(g, 0.7) ? 10.0 : 1.0 + (double)gsl_rng_uniform_int(g, SP_CELLS_MAX);
}

static inline void draw_duct(gsl_rng *g, struct drawn *x)
{
    struct sp_duct_design *d = &x->d.duct[0];
    draw_core(g, x);
    double face = d->core[0].width * d->core[0].height;
    d->inlet = (struct sp_inlet){.area = face * spread(g, 0.1, 1.5),
                                 .recovery = gsl_rng_uniform(g),
                                 .lip_loss = gsl_rng_uniform(g),
                                 .screen = chance(g, 0.5) ? 0.0 : between(g, 0.0, 3.0)};
    d->diffuser.kind = (enum sp_diffuser_law)gsl_rng_uniform_int(g, 3);
    d->diffuser.loss = gsl_rng_uniform(g);
    d->diffuser.length = between(g, 0.05, 0.8);
    d->diffuser.core_damping = chance(g, 0.5);
    d->exit[0] = (struct sp_exit){.area = face * spread(g, 0.1, 1.5),
                                  .loss = between(g, 0.0, 2.0),
                                  .pressure_coefficient = between(g, -0.6, 0.5),
                                  .angle = between(g, 0.0, 1.6)};
    draw_fan(g, x);
}

/* 60 s: some going, some standing hot or stopped, some going again. */
static inline void draw_steps(gsl_rng *g, struct drawn *x)
{
    struct sp_design *d = &x->d;
    for (int i = 0; i < DRAWN_STEPS; ++i) {
        double speed = chance(g, 0.2) ? 0.0 : between(g, -2.0, 85.0);
        double power = chance(g, 0.2) ? 0.0 : between(g, -0.1, 1.1) * d->engine.rated_power;
        x->step[i] =
            fixture_hold(20.0, speed, power, between(g, d->engine.idle_speed, d->engine.rated_speed));
    }
    if (chance(g, 0.5)) x->step[1].kind = chance(g, 0.5) ? SP_STEP_IDLE : SP_STEP_SOAK;
    d->step = x->step;
    d->steps = DRAWN_STEPS;
    d->start.coolant = chance(g, 0.3) ? d->air.ambient : between(g, 300.0, 385.0);
    d->start.metal = chance(g, 0.5) ? NAN : d->start.coolant + between(g, 0.0, 40.0);
    d->start.radiator = chance(g, 0.5) ? NAN : between(g, d->air.ambient, d->start.coolant);
}

static inline void draw_car(const struct sp_design *base, unsigned long seed, struct drawn *x)
{
    gsl_rng *g = gsl_rng_alloc(gsl_rng_mt19937);
    assert_non_null(g);
    gsl_rng_set(g, seed);
    for (int i = 0; i < 20; ++i)
        gsl_rng_uniform(g); /* neighbouring seeds begin alike */
    x->seed = seed;
    x->d = *base;
    draw_air(g, &x->d);
    draw_engine(g, &x->d);
    draw_circuit(g, &x->d);
    draw_duct(g, x);
    draw_steps(g, x);
    gsl_rng_free(g);
}

/* ---- saying ------------------------------------------------------------------------------------------- */

static inline void show_car(const struct sp_design *d)
{
    const struct sp_core *c = &d->duct[0].core[0];
    const struct sp_fan *f = &d->duct[0].fan[0];
    print_error(
        "  air %.6g K %.6g Pa wind %.4g; start %.6g K; engine %.4g W, metal %.4g J/K, jacket %.4g m3\n",
        d->air.ambient, d->air.pressure, d->air.wind, d->start.coolant, d->engine.rated_power,
        d->engine.metal_capacity, d->engine.coolant_volume);
    print_error(
        "  coolant %d %.3g; pump %s %.4g Pa %.4g m3/s; thermostat %s %.5g..%.5g K leak %.3g play %.3g\n",
        (int)d->coolant.kind, d->coolant.share, d->pump.electric ? "electric" : "belt", d->pump.curve.shutoff,
        d->pump.curve.free_flow, d->thermostat.none ? "none" : "wax", d->thermostat.opens, d->thermostat.full,
        d->thermostat.leak, d->thermostat.hysteresis);
    print_error(
        "  core %.3g x %.3g m, drop law %d, heat law %d, %g cells; inlet %.4g m2 recovery %.3g lip %.3g "
        "screen %.3g; diffuser %d\n",
        c->width, c->height, (int)c->drop_law, (int)c->heat_law, c->cells, d->duct[0].inlet.area,
        d->duct[0].inlet.recovery, d->duct[0].inlet.lip_loss, d->duct[0].inlet.screen,
        (int)d->duct[0].diffuser.kind);
    print_error(
        "  fan %s x%g law %d, static %d, before %d, pairs %zu; exit %.4g m2 loss %.3g Cp %.3g angle %.3g\n",
        f->fitted ? "fitted" : "none", f->count, (int)f->law, f->static_basis, f->before_core,
        f->curve.pairs.rows, d->duct[0].exit[0].area, d->duct[0].exit[0].loss,
        d->duct[0].exit[0].pressure_coefficient, d->duct[0].exit[0].angle);
    for (size_t i = 0; i < d->steps; ++i)
        print_error("  step %d: %g s, %.4g m/s, %.5g W, %.4g rev/s\n", (int)d->step[i].kind, d->step[i].time,
                    d->step[i].speed, d->step[i].power, d->step[i].engine_speed);
}

static inline unsigned long setting(const char *name, unsigned long fallback)
{
    const char *text = getenv(name);
    return text ? strtoul(text, NULL, 10) : fallback;
}

#endif
