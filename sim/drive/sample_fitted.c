/* Samples of parts that not every car has. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "drive/run.h"

enum { OF_CORE = SP_CH_CORE, EACH = 4 }; /* fluid out, air in, air flow, heat */

/* Flows and pressures of the bay, of leaks and of what the design counts as drag. */
static void fit_ducts(bool *fitted, const struct sp_circuit *c)
{
    for (int r = 0; r < c->runs; ++r) {
        const struct sp_duct_design *d = c->run[r].design;
        bool past = d->past_core.area > 0.0 || d->past_core.gap > 0.0;
        bool outside = d->outside.area > 0.0 || d->outside.gap > 0.0;
        bool lanes = false;
        for (int f = 0; f < SP_FANS; ++f)
            lanes = lanes || (d->fan[f].fitted && d->fan[f].span_to > d->fan[f].span_from);
        fitted[SP_CH_LEAK_PAST] = fitted[SP_CH_LEAK_PAST] || past;
        fitted[SP_CH_LEAK_OUTSIDE] = fitted[SP_CH_LEAK_OUTSIDE] || outside;
        fitted[SP_CH_BACKWARDS] = fitted[SP_CH_BACKWARDS] || lanes;
        fitted[SP_CH_SPILL] = fitted[SP_CH_SPILL] || d->inlet.spill;
        fitted[SP_CH_BAY] = fitted[SP_CH_BAY] || d->bay_skin > 0.0 || d->exits > 1;
    }
}

void sp_run_fit(bool fitted[SP_CHANNELS], const struct sp_circuit *c)
{
    const struct sp_design *d = c->design;
    for (int i = 0; i < SP_CH_OIL; ++i)
        fitted[i] = true;
    fit_ducts(fitted, c);
    if (c->layout.oil >= 0) fitted[SP_CH_OIL] = true;
    if (c->layout.gearbox >= 0) fitted[SP_CH_GEARBOX] = true;
    if (d->charge.fitted) fitted[SP_CH_CHARGE_IN] = fitted[SP_CH_CHARGE_OUT] = true;
    if (d->engine.breathes_bay > 0.0) fitted[SP_CH_INTAKE] = fitted[SP_CH_BAY] = true;
    fitted[SP_CH_BAY_PRESSURE] = fitted[SP_CH_BAY];
    fitted[SP_CH_THRUST] = fitted[SP_CH_SPILL];
    for (int f = 0; f < c->fans; ++f) {
        const struct sp_fan *fan = c->fan[f].design;
        if (fan->current_limit > 0.0 || fan->wiring_drop > 0.0) fitted[SP_CH_FAN_CURRENT] = true;
        if (f > 0) fitted[SP_CH_FAN_MORE + f - 1] = true;
    }
    if (c->layout.battery >= 0) fitted[SP_CH_BATTERY] = true;
    if (d->pump.npsh > 0.0) fitted[SP_CH_NPSH_MARGIN] = true;
    if (d->engine.wetted_area > 0.0) fitted[SP_CH_LOCAL_MARGIN] = true;
    if (d->tank.catch_can > 0.0 || d->tank.lost > 0.0) fitted[SP_CH_TANK_LEVEL] = true;
    for (int i = 0; i < EACH * (c->exchangers - 1); ++i)
        fitted[OF_CORE + i] = true;
}

/* Of all ducts together: flows and forces; of the first: its bay. */
static void air(const struct sp_run *r, const struct sp_coupling *k, double *v)
{
    const struct sp_circuit *c = r->circuit;
    double past = 0.0, outside = 0.0, back = 0.0, spill = 0.0, thrust = 0.0;
    for (int i = 0; i < c->runs; ++i) {
        const struct sp_duct_state *s = &k->duct[i];
        past += c->run[i].copies * s->leak_past;
        outside += c->run[i].copies * s->leak_outside;
        back += c->run[i].copies * s->backwards;
        spill += c->run[i].copies * s->spill_drag;
        thrust += c->run[i].copies * s->thrust;
    }
    v[SP_CH_LEAK_PAST] = past;
    v[SP_CH_LEAK_OUTSIDE] = outside;
    v[SP_CH_BACKWARDS] = back;
    v[SP_CH_SPILL] = spill;
    v[SP_CH_THRUST] = thrust;
    v[SP_CH_BAY] = k->duct[0].bay_temperature;
    v[SP_CH_BAY_PRESSURE] = k->duct[0].bay_pressure;
}

/* The worst of the fans: amperes of one. */
static double current(const struct sp_circuit *c, const struct sp_inputs *in, const double *y)
{
    double most = 0.0;
    for (int f = 0; f < c->fans; ++f)
        most = fmax(most, sp_fan_current(c->fan[f].design, y[c->layout.fan[f]], sp_circuit_volts(c, in)));
    return most;
}

static void stores(const struct sp_run *r, const struct sp_inputs *in, const double *y, const struct sp_coupling *k,
                   double *v)
{
    const struct sp_circuit *c = r->circuit;
    const struct sp_electrics *e = &c->design->electrics;
    const struct sp_layout *l = &c->layout;
    struct sp_tank_inputs tank;
    v[SP_CH_OIL] = l->oil >= 0 ? y[l->oil] : NAN;
    v[SP_CH_GEARBOX] = l->gearbox >= 0 ? y[l->gearbox] : NAN;
    v[SP_CH_CHARGE_IN] = sp_circuit_charge_in(c, in, k);
    v[SP_CH_CHARGE_OUT] = sp_circuit_charge_out(c, in, y);
    v[SP_CH_FAN_CURRENT] = current(c, in, y);
    v[SP_CH_BATTERY] =
        l->battery >= 0 ? fmax(1.0 - y[l->battery] / (e->battery * e->voltage_stopped), 0.0) : NAN;
    v[SP_CH_TANK_LEVEL] = fmax(c->design->tank.volume - sp_circuit_tank(c, in, y, &tank).gas, 0.0);
}

static void cores(const struct sp_run *r, const double *y, const struct sp_coupling *k, double *v)
{
    const struct sp_circuit *c = r->circuit;
    for (int e = 1; e < c->exchangers; ++e) {
        const struct sp_exchanger *x = &c->exchanger[e];
        const struct sp_cells_at *at = &c->layout.exchanger[e];
        const struct sp_core_air *a = &k->duct[x->run].core[x->slot];
        double *of = v + OF_CORE + EACH * (e - 1);
        of[0] = y[at->fluid + at->cells - 1];
        of[1] = a->air_in;
        of[2] = x->copies * a->mass_flow;
        of[3] = x->copies * a->heat;
    }
}

void sp_run_sample_fitted(const struct sp_run *r, const struct sp_inputs *in, const double *y,
                          const struct sp_coupling *k, double *v)
{
    const struct sp_circuit *c = r->circuit;
    air(r, k, v);
    stores(r, in, y, k, v);
    cores(r, y, k, v);
    v[SP_CH_INTAKE] = sp_circuit_intake(c, in, k);
    v[SP_CH_NPSH_MARGIN] = k->loop.npsh_available - k->loop.npsh_required;
    for (int f = 1; f < c->fans; ++f)
        v[SP_CH_FAN_MORE + f - 1] = y[c->layout.fan[f]];
    for (int i = SP_CH_OIL; i < SP_CHANNELS; ++i)
        if (!r->fitted[i]) v[i] = NAN;
}
