/* A hold's state told in what an engineer asks for. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "drive/hold.h"

static const double fixed_boiling = SP_ZERO_C + 100.0; /* SAE J1393 */

/* ---- limits ---------------------------------------------------------------------------------------- */

void sp_hold_limits(const struct sp_design *d, struct sp_hold_limit limit[SP_HOLD_LIMITS])
{
    const struct sp_limits *l = &d->limits;
    const struct {
        const char *key;
        double limit;
    } all[SP_HOLD_LIMITS] = {
        [SP_HOLD_COOLANT] = {"limits.coolant", l->coolant.stop},
        [SP_HOLD_GAUGE] = {"limits.gauge", l->gauge.stop},
        [SP_HOLD_METAL] = {"limits.metal", l->metal.stop},
        [SP_HOLD_OIL] = {"limits.oil", d->oil.fitted ? l->oil.stop : NAN},
        [SP_HOLD_GEARBOX] = {"limits.gearbox", d->gearbox.fitted ? l->gearbox.stop : NAN},
        [SP_HOLD_CHARGE] = {"limits.charge", d->charge.fitted ? l->charge.stop : NAN},
        [SP_HOLD_BOIL_MARGIN] = {"limits.boil_margin", l->boil_margin}};
    for (int j = 0; j < SP_HOLD_LIMITS; ++j)
        limit[j] = (struct sp_hold_limit){all[j].key, all[j].limit, NAN, NAN, INFINITY};
}

double sp_hold_beyond(const struct sp_hold_limit *l, int judged, double value)
{
    if (!isfinite(l->limit)) return NAN;
    return judged == SP_HOLD_BOIL_MARGIN ? l->limit - value : value - l->limit;
}

bool sp_hold_values(struct sp_run *r, double t, const double *y, double value[SP_HOLD_LIMITS])
{
    const struct sp_circuit *c = r->circuit;
    const struct sp_layout *l = &c->layout;
    struct sp_inputs in;
    struct sp_watched seen;
    if (sp_run_look(r, t, y, &seen)) return false;
    sp_schedule_at(r->schedule, r->segment, t, &in);
    value[SP_HOLD_COOLANT] = y[SP_Y_JACKET];
    value[SP_HOLD_GAUGE] = y[SP_Y_GAUGE] + c->design->gauge.offset;
    value[SP_HOLD_METAL] = y[SP_Y_METAL];
    value[SP_HOLD_OIL] = l->oil >= 0 ? y[l->oil] : NAN;
    value[SP_HOLD_GEARBOX] = l->gearbox >= 0 ? y[l->gearbox] : NAN;
    value[SP_HOLD_CHARGE] = sp_circuit_charge_out(c, &in, y);
    value[SP_HOLD_BOIL_MARGIN] = seen.boil_margin;
    return true;
}

/* First the limits that are broken, by the time they were passed; else the one with least room. */
static bool binds_before(const struct sp_hold_limit *a, const struct sp_hold_limit *b)
{
    bool broken = a->left < 0.0, other = b->left < 0.0;
    if (broken != other) return broken;
    return broken ? a->passed < b->passed : a->left < b->left;
}

void sp_hold_judge(struct sp_hold_point *p)
{
    p->holds = p->kind == SP_HOLD_SETTLES || p->kind == SP_HOLD_SWINGS;
    p->lasts = INFINITY;
    p->binds = -1;
    for (int j = 0; j < SP_HOLD_LIMITS; ++j) {
        struct sp_hold_limit *l = &p->limit[j];
        l->left = -sp_hold_beyond(l, j, l->value);
        if (isnan(l->left)) continue;
        if (l->left < 0.0) l->passed = fmin(l->passed, p->followed); /* only just, at rest */
        if (p->binds < 0 || binds_before(l, &p->limit[p->binds])) p->binds = j;
        if (!(l->left < 0.0)) continue;
        p->holds = false;
        p->lasts = fmin(p->lasts, l->passed);
    }
}

/* ---- the state ------------------------------------------------------------------------------------- */

/* Held inside the range of the vapour curve. */
static double boiling_at(const struct sp_coolant *f, double pressure)
{
    return sp_coolant_boiling(f, fmin(fmax(pressure, 1.0e3), 4.99e6));
}

/* Heat [W] that coolant's cores give the air, and the air that meets the first of them. */
static double coolant_heat(const struct sp_circuit *c, const struct sp_coupling *k, double *air_in)
{
    double sum = 0.0;
    *air_in = NAN;
    for (int e = c->exchangers - 1; e >= 0; --e) {
        const struct sp_exchanger *x = &c->exchanger[e];
        const struct sp_core_air *air = &k->duct[x->run].core[x->slot];
        if (x->carries != SP_CARRIES_COOLANT) continue;
        sum += x->copies * air->heat;
        *air_in = air->air_in;
    }
    return sum;
}

static void describe_ducts(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                           const struct sp_coupling *k, struct sp_hold_point *out)
{
    struct sp_signals s;
    sp_circuit_signals(c, in, y, &s);
    out->ducts = (size_t)c->runs;
    for (int i = 0; i < c->runs; ++i) {
        struct sp_hold_duct *d = &out->duct[i];
        d->copies = c->run[i].copies;
        d->in = sp_circuit_duct_inputs(c, in, &s, i);
        d->state = k->duct[i];
        sp_duct_stations(c->run[i].duct, &d->in, &d->state, d->station, &d->losses);
    }
}

static void describe_heat(struct sp_run *r, const struct sp_inputs *in, const double *y,
                          const struct sp_coupling *k, struct sp_hold_point *out)
{
    if (out->kind == SP_HOLD_SETTLES) {
        sp_circuit_rates(r->circuit, in, &r->modes, y, k, r->scratch);
        out->heat.in = r->scratch[SP_Y_HEAT_IN];
        out->heat.air = r->scratch[SP_Y_HEAT_AIR];
        out->heat.skin = r->scratch[SP_Y_HEAT_SKIN];
    }
    double most = fmax(fmax(fabs(out->heat.in), fabs(out->heat.air + out->heat.skin)), 1.0);
    out->heat.error = (out->heat.in - out->heat.air - out->heat.skin) / most;
}

/* What is said of cooling as a whole. */
static void describe_measures(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                              const struct sp_coupling *k, struct sp_hold_point *out)
{
    struct sp_tank_inputs tank;
    double ambient = in->in[SP_IN_AMBIENT], hot = y[SP_Y_JACKET];
    double pressure = sp_circuit_tank(c, in, y, &tank).pressure + k->loop.rise - k->loop.jacket_drop;
    double heat = coolant_heat(c, k, &out->air_in);
    out->boiling = boiling_at(&c->design->coolant.fluid, pressure);
    out->air_to_water = hot - ambient;
    out->air_to_boil = out->boiling - out->air_to_water;
    out->air_to_boil_100 = fixed_boiling - out->air_to_water;
    out->ceiling = isfinite(out->limit[SP_HOLD_COOLANT].limit)
                       ? out->limit[SP_HOLD_COOLANT].limit - out->air_to_water
                       : NAN;
    out->dissipation = heat / (y[c->layout.core - 1] - out->air_in);
}

enum sp_status sp_hold_describe(struct sp_run *r, const double *y, struct sp_hold_point *out)
{
    const struct sp_layout *l = &r->circuit->layout;
    struct sp_inputs in;
    struct sp_coupling k;
    sp_schedule_at(r->schedule, r->segment, r->time, &in);
    enum sp_status status = sp_run_couple(r, &in, y, &k);
    if (!status) status = sp_run_sample(r, r->segment, r->time, y, &out->at);
    if (status) return status;
    out->oil = l->oil >= 0 ? y[l->oil] : NAN;
    out->gearbox = l->gearbox >= 0 ? y[l->gearbox] : NAN;
    out->charge = sp_circuit_charge_out(r->circuit, &in, y);
    describe_measures(r->circuit, &in, y, &k, out);
    describe_ducts(r->circuit, &in, y, &k, out);
    describe_heat(r, &in, y, &k, out);
    return SP_OK;
}
