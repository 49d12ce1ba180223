/* Random cars with every option at once: several ducts, cores, fans, exits and fluids, and what may be fitted
 * to them. Within the ranges of docs/case-file.md; the car of a seed is the same everywhere.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_TESTS_RANDOM_WHOLE_H
#define SP_TESTS_RANDOM_WHOLE_H

#include "random_car.h"

enum { WHOLE_CHANGES = 2, WHOLE_KNOTS = 4 };

/* What may still be put in: no more than the circuit follows. */
struct whole_room {
    int runs, exchangers, fans;
};

struct whole {
    struct drawn car;                      /* a plain car and its drive */
    struct drawn part[SP_DUCTS][SP_CORES]; /* cores, fans, inlets with what they point at */
    struct sp_design d;
    double recovery[SP_DUCTS][2 * WHOLE_KNOTS];
    struct sp_change change[WHOLE_CHANGES];
    struct sp_design to[WHOLE_CHANGES];
    struct whole_room left;
};

/* ---- cores ------------------------------------------------------------------------------------------- */

static inline void plates(gsl_rng *g, struct sp_core *c)
{
    c->fin_kind = SP_FINS_PLATE;
    c->tube_diameter = between(g, 7e-3, 10e-3);
    c->tube_pitch = c->tube_diameter * between(g, 2.0, 2.5);
    c->tube_pitch_along = c->tube_pitch * 0.87;
    c->rows = 2.0;
    c->depth = 2.0 * c->tube_pitch_along;
}

/* How it stands in the car. */
static inline void place_core(gsl_rng *g, struct sp_core *c)
{
    c->blocked = chance(g, 0.2) ? between(g, 0.0, 0.9) : 0.0;
    c->unevenness = chance(g, 0.2) ? between(g, 0.0, 0.6) : NAN;
    c->angle = chance(g, 0.2) ? between(g, 0.0, 1.2) : 0.0;
    c->angle_loss = between(g, 0.5, 1.8);
    if (c->heat_law != SP_CORE_FINS) return;
    c->air_fouling = chance(g, 0.2) ? spread(g, 1e-5, 1e-2) : 0.0;
    if (c->carries == SP_CARRIES_COOLANT) c->coolant_fouling = chance(g, 0.2) ? spread(g, 1e-5, 1e-3) : 0.0;
    c->down_flow = chance(g, 0.2);
}

static inline enum sp_medium draw_medium(gsl_rng *g, const struct sp_design *d)
{
    double x = gsl_rng_uniform(g);
    if (x < 0.15) return SP_CARRIES_LOAD;
    if (x < 0.35 && d->oil.fitted) return SP_CARRIES_OIL;
    if (x < 0.45 && d->gearbox.fitted) return SP_CARRIES_GEARBOX;
    if (x < 0.65 && d->charge.fitted) return SP_CARRIES_CHARGE;
    return SP_CARRIES_COOLANT;
}

/* A core with data that goes with its fluid. */
static inline void draw_any_core(gsl_rng *g, enum sp_medium m, struct drawn *x, struct sp_core *out)
{
    struct sp_core *c = &x->d.duct[0].core[0];
    draw_core(g, x);
    c->carries = m;
    if (chance(g, 0.2)) plates(g, c);
    if (m != SP_CARRIES_COOLANT && c->heat_law == SP_CORE_FINS) c->heat_law = SP_CORE_POWER;
    if (m == SP_CARRIES_CHARGE) c->at_coolant_flow = spread(g, 0.05, 0.5);
    if (m != SP_CARRIES_COOLANT) c->coolant_volume = spread(g, 0.1e-3, 3e-3);
    if (m == SP_CARRIES_LOAD) {
        c->heat_law = SP_CORE_NO_HEAT;
        c->heat_load = chance(g, 0.2) ? 0.0 : between(g, 0.0, 12e3);
    }
    c->cells = chance(g, 0.5) ? 10.0 : 1.0 + (double)gsl_rng_uniform_int(g, 20);
    place_core(g, c);
    *out = *c;
}

/* Two beside each other first, or one over all and others over parts of it. */
static inline void span_cores(gsl_rng *g, struct sp_duct_design *d)
{
    for (size_t i = 1; i < d->cores; ++i) {
        if (chance(g, 0.5)) continue;
        d->core[i].span_from = chance(g, 0.5) ? 0.0 : between(g, 0.0, 0.5);
        d->core[i].span_to = chance(g, 0.3) ? 1.0 : between(g, 0.55, 1.0);
    }
    if (d->cores < 2 || !chance(g, 0.3)) return;
    d->core[0].span_from = 0.0;
    d->core[0].span_to = d->core[1].span_from = between(g, 0.2, 0.8);
    d->core[1].span_to = 1.0;
}

static inline void draw_cores(gsl_rng *g, struct whole *w, int duct, int runs)
{
    struct sp_duct_design *d = &w->d.duct[duct];
    size_t most = 1 + gsl_rng_uniform_int(g, 4);
    bool coolant = false;
    for (d->cores = 0; d->cores < most; ++d->cores) {
        struct sp_core *c = &d->core[d->cores];
        enum sp_medium m = duct + (int)d->cores == 0 ? SP_CARRIES_COOLANT : draw_medium(g, &w->d);
        if (m != SP_CARRIES_LOAD && w->left.exchangers < runs) m = SP_CARRIES_LOAD;
        if (m != SP_CARRIES_LOAD) w->left.exchangers -= runs;
        draw_any_core(g, m, &w->part[duct][d->cores], c);
        c->in_series = coolant && m == SP_CARRIES_COOLANT && (chance(g, 0.5) || d->in_series);
        coolant = coolant || m == SP_CARRIES_COOLANT;
    }
    span_cores(g, d);
}

/* ---- fans -------------------------------------------------------------------------------------------- */

static inline void draw_any_fan(gsl_rng *g, struct drawn *x, struct sp_fan *f)
{
    draw_fan(g, x);
    *f = x->d.duct[0].fan[0];
    f->locked_loss = between(g, 2.0, 5.0);
    if (chance(g, 0.15)) f->health = chance(g, 0.5) ? SP_FAN_DEAD : SP_FAN_LOCKED;
    if (chance(g, 0.3)) {
        f->flap_area = spread(g, 1e-3, 0.1);
        f->flap_loss = between(g, 0.5, 3.0);
    }
    f->wiring_drop = chance(g, 0.3) ? between(g, 0.0, 2.0) : 0.0;
    f->current_limit = chance(g, 0.3) ? between(g, 5.0, 60.0) : 0.0;
}

static inline void draw_fans(gsl_rng *g, struct whole *w, int duct)
{
    struct sp_duct_design *d = &w->d.duct[duct];
    int most = (int)gsl_rng_uniform_int(g, SP_FANS + 1);
    double split = between(g, 0.2, 0.8);
    bool before = chance(g, 0.2), apart = chance(g, 0.5), one_side = chance(g, 0.8);
    memset(d->fan, 0, sizeof d->fan);
    for (int i = 0; i < most && w->left.fans > 0; ++i, --w->left.fans) {
        draw_any_fan(g, &w->part[duct][i], &d->fan[i]);
        if (one_side) d->fan[i].before_core = before;
        d->fan[i].span_from = apart && i ? split : 0.0;
        d->fan[i].span_to = apart ? (i ? 1.0 : split) : 0.0;
    }
}

/* ---- openings ---------------------------------------------------------------------------------------- */

/* Recovery over V1/V: rising ever less, then falling. */
static inline void draw_recovery(gsl_rng *g, double *knot, struct sp_table *t)
{
    double x = between(g, 0.0, 0.3), eta = between(g, 0.2, 0.9), slope = between(g, 0.0, 0.5);
    for (int i = 0; i < WHOLE_KNOTS; ++i) {
        double step = between(g, 0.1, 0.4);
        knot[2 * i] = x;
        knot[2 * i + 1] = eta;
        x += step;
        eta += slope * step;
        slope -= between(g, 0.0, 0.8);
    }
    *t = (struct sp_table){WHOLE_KNOTS, 2, knot};
}

static inline void draw_inlet(gsl_rng *g, double *knot, struct sp_inlet *i)
{
    i->blocked = chance(g, 0.2) ? between(g, 0.0, 0.95) : 0.0;
    if (chance(g, 0.2))
        draw_recovery(g, knot, &i->recovery_table);
    else if (chance(g, 0.2))
        i->layer_thickness = spread(g, 1e-3, 0.1);
    i->height = between(g, 0.02, 0.3);
    i->recirculated = chance(g, 0.4) ? between(g, 0.0, 0.5) : 0.0;
    i->recirculation_ends = between(g, 1.0, 30.0);
    if (chance(g, 0.4)) {
        i->preheat_standing = between(g, -5.0, 25.0);
        i->preheat_moving = between(g, -2.0, 5.0);
    }
    i->spill = chance(g, 0.3);
    i->lip_suction = i->spill ? gsl_rng_uniform(g) : 0.0;
}

static inline void draw_exits(gsl_rng *g, struct sp_duct_design *d)
{
    d->exits = 1 + (chance(g, 0.4) ? gsl_rng_uniform_int(g, SP_EXITS) : 0);
    for (size_t i = 1; i < d->exits; ++i)
        d->exit[i] = (struct sp_exit){.area = spread(g, 1e-3, 0.1),
                                      .loss = between(g, 0.0, 2.0),
                                      .pressure_coefficient = between(g, -0.6, 0.5),
                                      .angle = between(g, 0.0, 3.1)};
}

static inline struct sp_leak draw_leak(gsl_rng *g)
{
    struct sp_leak l = {.coefficient = between(g, 0.5, 3.0), .pressure_coefficient = between(g, -0.5, 0.5)};
    if (chance(g, 0.6)) return l;
    l.area = chance(g, 0.5) ? spread(g, 1e-5, 0.05) : 0.0;
    l.gap = spread(g, 1e-4, 0.02);
    l.length = between(g, 0.1, 2.0);
    return l;
}

static inline void draw_diffuser(gsl_rng *g, struct sp_diffuser_design *d)
{
    if (chance(g, 0.2)) d->kind = SP_DIFFUSER_ONE_PLANE;
    d->height = between(g, 0.02, 0.3);
    d->jet_share = d->kind != SP_DIFFUSER_GIVEN && chance(g, 0.4) ? between(g, 0.05, 0.95) : 0.0;
}

/* ---- a duct ------------------------------------------------------------------------------------------ */

/* How often it is solved. */
static inline int draw_count(gsl_rng *g, struct whole *w, int duct)
{
    struct sp_duct_design *d = &w->d.duct[duct];
    d->count = chance(g, 0.3) ? 2.0 + (double)gsl_rng_uniform_int(g, 2) : 0.0;
    int others = (int)w->d.ducts - 1 - duct;
    d->in_series = d->count > 0.0 && chance(g, 0.4) && (int)d->count + others <= w->left.runs;
    return d->in_series ? (int)d->count : 1;
}

static inline void draw_whole_duct(gsl_rng *g, struct whole *w, int duct)
{
    struct drawn *x = &w->part[duct][0];
    struct sp_duct_design *d = &w->d.duct[duct];
    draw_duct(g, x);
    *d = x->d.duct[0];
    int runs = draw_count(g, w, duct);
    w->left.runs -= runs;
    draw_cores(g, w, duct, runs);
    draw_fans(g, w, duct);
    draw_inlet(g, w->recovery[duct], &d->inlet);
    draw_exits(g, d);
    draw_diffuser(g, &d->diffuser);
    d->past_core = draw_leak(g);
    d->outside = draw_leak(g);
    d->interference = chance(g, 0.3) ? between(g, -0.02, 0.05) : 0.0;
    d->bay_skin = chance(g, 0.4) ? gsl_rng_uniform(g) / (double)w->d.ducts : 0.0;
}

/* ---- fluids and circuit ------------------------------------------------------------------------------ */

static inline struct sp_oil draw_oil(gsl_rng *g, double rated_speed)
{
    double opens = between(g, 340.0, 380.0);
    struct sp_oil o = {.fitted = true,
                       .volume = spread(g, 0.5e-3, 15e-3),
                       .heat_share = between(g, 0.0, 0.15),
                       .friction_share = chance(g, 0.5) ? between(g, 0.0, 0.4) : 0.0,
                       .block = chance(g, 0.2) ? 0.0 : spread(g, 5.0, 200.0),
                       .skin_standing = between(g, 0.0, 10.0),
                       .flow = spread(g, 5.0, 100.0) / 60e3,
                       .flow_speed = rated_speed * between(g, 0.3, 1.0),
                       .plate = chance(g, 0.3) ? spread(g, 20.0, 600.0) : 0.0,
                       .opens = NAN,
                       .full = NAN,
                       .still = chance(g, 0.5) ? 0.0 : between(g, 0.0, 0.3)};
    o.metal_capacity = chance(g, 0.5) ? 0.0 : spread(g, 500.0, 20e3);
    o.skin_moving = o.skin_standing + between(g, 0.0, 30.0);
    o.flow_most = o.flow * between(g, 0.6, 1.5);
    if (chance(g, 0.5)) {
        o.opens = opens;
        o.full = opens + between(g, 2.0, 20.0);
    }
    return o;
}

static inline void draw_fluids(gsl_rng *g, struct sp_design *d)
{
    if (chance(g, 0.6)) d->oil = draw_oil(g, d->engine.rated_speed);
    if (chance(g, 0.3)) d->gearbox = draw_oil(g, d->engine.rated_speed);
    d->gearbox.friction_share = d->gearbox.block = 0.0;
    d->start.oil = chance(g, 0.5) ? NAN : between(g, d->air.ambient, 390.0);
    d->start.gearbox = chance(g, 0.5) ? NAN : between(g, d->air.ambient, 390.0);
    if (!chance(g, 0.4)) return;
    d->charge = (struct sp_charge){true, between(g, 1.1, 3.0), between(g, 0.5, 0.85), between(g, 0.0, 30.0),
                                   d->engine.rated_power * spread(g, 0.4e-6, 2e-6)};
}

static inline void draw_pump(gsl_rng *g, struct sp_pump *p)
{
    p->law = p->electric ? (enum sp_pump_law)gsl_rng_uniform_int(g, 4) : SP_PUMP_FIXED;
    p->from = between(g, 320.0, 370.0);
    p->to = p->from + between(g, 2.0, 30.0);
    p->least = gsl_rng_uniform(g);
    p->full_at = between(g, 20.0, 120.0);
    p->target = between(g, 330.0, 370.0);
    p->pulse_on = spread(g, 2.0, 20.0);
    p->pulse_off = spread(g, 2.0, 60.0);
    p->failed = chance(g, 0.05);
    p->npsh = chance(g, 0.3) ? between(g, 0.5, 8.0) : 0.0;
    p->suction_drop = chance(g, 0.5) ? 0.0 : between(g, 0.0, 40e3);
    p->suction_flow = 100.0 / 60e3;
}

static inline void draw_branches(gsl_rng *g, struct sp_design *d)
{
    struct sp_thermostat *t = &d->thermostat;
    struct sp_hoses *h = &d->hoses;
    if (chance(g, 0.15)) t->restrictor = between(g, 0.012, 0.03);
    t->inlet_side = chance(g, 0.3);
    t->mapped_power = chance(g, 0.3) ? between(g, 0.1, 0.8) * d->engine.rated_power : 0.0;
    t->mapped_shift = between(g, 0.0, 20.0);
    h->pot = chance(g, 0.3) ? spread(g, 0.2e-3, 2e-3) : 0.0;
    if (chance(g, 0.4)) h->heater = (struct sp_resistance){spread(g, 1.0, 40.0) / 60e3, spread(g, 2e3, 60e3)};
    h->heater_conductance = chance(g, 0.8) ? spread(g, 5.0, 500.0) : 0.0;
    h->heater_air = chance(g, 0.5) ? NAN : between(g, 263.0, 313.0);
    h->heater_off = chance(g, 0.2);
    d->tank.bleed_bore = chance(g, 0.3) ? between(g, 1e-3, 5e-3) : 0.0;
    d->tank.lost = chance(g, 0.2) ? spread(g, 0.01e-3, 1e-3) : 0.0;
    d->tank.catch_can = chance(g, 0.3) ? spread(g, 0.1e-3, 2e-3) : 0.0;
    d->electrics.battery = chance(g, 0.4) ? spread(g, 1e4, 3e5) : 0.0;
    d->electrics.idle_load = between(g, 0.0, 200.0);
}

static inline void draw_more_engine(gsl_rng *g, struct sp_design *d)
{
    struct sp_engine *e = &d->engine;
    e->cylinders = 4.0;
    e->bore = cbrt(e->displacement / acos(-1.0));
    e->stroke = e->bore;
    e->compression = between(g, 8.0, 13.0);
    double x = gsl_rng_uniform(g);
    e->heat_law = x < 0.6 ? SP_HEAT_RATED : x < 0.8 ? SP_HEAT_CORRELATION : SP_HEAT_GIVEN;
    e->heat_given = chance(g, 0.5) ? 0.0 : spread(g, 100.0, 10e3);
    e->heat_loss = between(g, 0.0, 0.3);
    e->energy_cap = chance(g, 0.3) ? 0.0 : between(g, 0.6, 1.0);
    e->overrun_law = (enum sp_friction_law)gsl_rng_uniform_int(g, 4);
    e->wetted_area = chance(g, 0.4) ? spread(g, 0.02, 0.5) : 0.0;
    e->breathes_bay = chance(g, 0.3) ? gsl_rng_uniform(g) : 0.0;
    d->air.cross_wind = chance(g, 0.3) ? between(g, -10.0, 10.0) : 0.0;
}

/* ---- drive ------------------------------------------------------------------------------------------- */

static inline void draw_more_steps(gsl_rng *g, struct whole *w)
{
    for (int i = 0; i < DRAWN_STEPS; ++i) {
        struct sp_step *s = &w->car.step[i];
        if (s->kind == SP_STEP_HOLD) {
            s->following = chance(g, 0.3) ? spread(g, 3.0, 100.0) : NAN;
            continue;
        }
        s->key_on = s->kind == SP_STEP_SOAK && chance(g, 0.5);
        s->bonnet_up = chance(g, 0.3);
        s->blower = chance(g, 0.3) ? between(g, 0.0, 1.0) : 0.0;
    }
}

/* One thing or another goes wrong on the way. */
static inline void draw_change(gsl_rng *g, struct sp_design *d)
{
    struct sp_duct_design *duct = &d->duct[gsl_rng_uniform_int(g, d->ducts)];
    switch (gsl_rng_uniform_int(g, 7)) {
    case 0:
        duct->inlet.blocked = between(g, 0.0, 0.9);
        break;
    case 1:
        duct->core[gsl_rng_uniform_int(g, duct->cores)].blocked = between(g, 0.0, 0.9);
        break;
    case 2:
        duct->fan[0].health = chance(g, 0.5) ? SP_FAN_DEAD : SP_FAN_LOCKED;
        break;
    case 3:
        d->pump.failed = !d->pump.failed;
        break;
    case 4:
        d->tank.lost += spread(g, 0.01e-3, 1e-3);
        break;
    case 5:
        d->hoses.heater_off = !d->hoses.heater_off;
        break;
    default:
        d->thermostat.opens -= 5.0;
        break;
    }
}

static inline void draw_changes(gsl_rng *g, struct whole *w)
{
    size_t n = chance(g, 0.3) ? 1 + gsl_rng_uniform_int(g, WHOLE_CHANGES) : 0;
    static char text[] = "something";
    double at = 0.0;
    for (size_t i = 0; i < n; ++i) {
        w->to[i] = i ? w->to[i - 1] : w->d;
        draw_change(g, &w->to[i]);
        at += chance(g, 0.2) ? 20.0 : between(g, 0.0, 35.0);
        w->change[i] = (struct sp_change){.at = at, .text = text, .to = &w->to[i]};
    }
    w->d.change = n ? w->change : NULL;
    w->d.changes = n;
}

/* ---- the whole --------------------------------------------------------------------------------------- */

static inline void draw_whole(const struct sp_design *base, unsigned long seed, struct whole *w)
{
    gsl_rng *g = gsl_rng_alloc(gsl_rng_mt19937);
    assert_non_null(g);
    memset(w, 0, sizeof *w);
    gsl_rng_set(g, seed + 1000000);
    draw_car(base, seed, &w->car);
    for (int i = 0; i < SP_DUCTS * SP_CORES; ++i)
        w->part[i / SP_CORES][i % SP_CORES].d = *base;
    w->left = (struct whole_room){6, 8, 6};
    w->d = w->car.d;
    draw_fluids(g, &w->d);
    draw_pump(g, &w->d.pump);
    draw_branches(g, &w->d);
    draw_more_engine(g, &w->d);
    double x = gsl_rng_uniform(g);
    w->d.ducts = x < 0.5 ? 1 : x < 0.75 ? 2 : x < 0.9 ? 3 : 4;
    for (int i = 0; i < (int)w->d.ducts; ++i)
        draw_whole_duct(g, w, i);
    draw_more_steps(g, w);
    draw_changes(g, w);
    gsl_rng_free(g);
}

/* What was fitted, for a failure's report. */
static inline void show_whole(const struct whole *w)
{
    static const char *const carries[] = {"coolant", "oil", "gearbox", "charge", "load"};
    const struct sp_design *d = &w->d;
    show_car(&w->d);
    print_error("  oil %d gearbox %d charge %d; pump law %d failed %d npsh %.3g; restrictor %.3g inlet side "
                "%d heater %.3g "
                "bleed bore %.3g; %zu changes\n",
                d->oil.fitted, d->gearbox.fitted, d->charge.fitted, (int)d->pump.law, d->pump.failed,
                d->pump.npsh, d->thermostat.restrictor, d->thermostat.inlet_side, d->hoses.heater.flow,
                d->tank.bleed_bore, d->changes);
    for (size_t i = 0; i < d->ducts; ++i) {
        const struct sp_duct_design *k = &d->duct[i];
        print_error("  duct %zu: x%g%s, %zu exits, inlet %.3g m2 recirculated %.2g, leaks %.3g %.3g, cores",
                    i, k->count, k->in_series ? " in series" : "", k->exits, k->inlet.area,
                    k->inlet.recirculated, fmax(k->past_core.area, k->past_core.gap * k->past_core.length),
                    fmax(k->outside.area, k->outside.gap * k->outside.length));
        for (size_t j = 0; j < k->cores; ++j)
            print_error(" %s%s[%.2g %.2g]", carries[k->core[j].carries], k->core[j].in_series ? " again" : "",
                        k->core[j].span_from, k->core[j].span_to);
        print_error(", fans");
        for (int j = 0; j < SP_FANS; ++j)
            if (k->fan[j].fitted)
                print_error(" law %d health %d%s[%.2g %.2g]", (int)k->fan[j].law, (int)k->fan[j].health,
                            k->fan[j].before_core ? " before " : "", k->fan[j].span_from, k->fan[j].span_to);
        print_error("\n");
    }
    for (size_t i = 0; i < d->steps; ++i)
        print_error("  step %zu: following %.3g key %d bonnet %d blower %.3g\n", i, d->step[i].following,
                    d->step[i].key_on, d->step[i].bonnet_up, d->step[i].blower);
}

#endif
