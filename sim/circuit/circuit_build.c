/* Making a car ready, and its state at the start. SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/circuit.h"
#include "part/charge.h"
#include "part/oil.h"

#include <gsl/gsl_math.h>
#include <math.h>
#include <string.h>

/* Pa below its setting (a tenth of it at most) at which a cap shuts; common practice. */
static const double reseat = 5000.0;
static const double smallest = 1.0e-5;          /* m3; a cell of no volume would be infinitely fast */

static double bore_volume(double length, double bore)
{
    return fmax(M_PI / 4.0 * bore * bore * length, smallest);
}

static void fill_masses(struct sp_circuit *c)
{
    const struct sp_design *d = c->design;
    double rho = sp_coolant_density(&d->coolant.fluid, d->tank.fill_temperature), cores = 0.0;
    c->mass_jacket = rho * fmax(d->engine.coolant_volume, smallest);
    for (int e = 0; e < c->exchangers && c->exchanger[e].string >= 0; ++e)
        cores += c->exchanger[e].copies * c->exchanger[e].mass;
    c->mass_tank = rho * fmax(d->tank.volume - d->tank.air_space, smallest);
    c->mass_out = rho * (bore_volume(d->hoses.length_out, d->hoses.bore_out) + d->hoses.pot);
    c->mass_back = rho * bore_volume(d->hoses.length_back, d->hoses.bore_back);
    double liquid = (c->mass_jacket + cores + c->mass_tank + c->mass_out + c->mass_back) / rho;
    c->system_volume = liquid + d->tank.air_space;
    c->mass_oil = d->oil.volume * sp_oil_density(SP_ZERO_C + 20.0);
    c->mass_gearbox = d->gearbox.volume * sp_oil_density(SP_ZERO_C + 20.0);
}

bool sp_circuit_build(const struct sp_design *d, struct sp_circuit *out, struct sp_complaints *complaints)
{
    memset(out, 0, sizeof *out);
    out->design = d;
    out->air = sp_moist_air(d->air.ambient, d->air.pressure, d->air.humidity);
    if (!sp_circuit_plan(out, complaints)) return false;
    out->reference_flow = out->loop.pump.free_flow;
    fill_masses(out);
    return true;
}

void sp_circuit_free(struct sp_circuit *c)
{
    for (int i = 0; i < c->ducts; ++i) sp_duct_free(c->duct[i]);
    sp_loop_free(&c->loop);
    memset(c, 0, sizeof *c);
}

/* What would have gone through the cap on the way to the starting temperature has gone; the cap has reseated
 * a little below its setting. */
static void vent_at_start(const struct sp_circuit *c, const struct sp_inputs *in, double *y)
{
    const struct sp_tank *t = &c->design->tank;
    struct sp_tank_inputs ti;
    struct sp_tank_state s = sp_circuit_tank(c, in, y, &ti);
    if (s.pressure <= ti.ambient + t->cap) return;
    double gauge = t->cap - fmin(reseat, 0.1 * t->cap), most = ti.ambient + gauge;
    double gas = ti.system + t->compliance * gauge - ti.liquid;
    if (gas < SP_TANK_LAST_GAS) {
        y[SP_Y_LOST] = SP_TANK_LAST_GAS - gas;
        gas = SP_TANK_LAST_GAS;
    }
    y[SP_Y_AIR] = fmax(most - ti.vapour, 0.0) * gas / (SP_R_MOLAR * ti.temperature);
}

static double or_else(double given, double otherwise)
{
    return isfinite(given) ? given : otherwise;
}

/* Fluids and metals of the cores; a charge cooler starts at ambient. */
static void start_cores(const struct sp_circuit *c, const struct sp_inputs *in, double radiator, double *y)
{
    const struct sp_layout *l = &c->layout;
    for (int e = 0; e < c->exchangers; ++e) {
        const struct sp_cells_at *at = &l->exchanger[e];
        double T = radiator;
        if (c->exchanger[e].carries == SP_CARRIES_OIL) T = y[l->oil];
        if (c->exchanger[e].carries == SP_CARRIES_GEARBOX) T = y[l->gearbox];
        if (c->exchanger[e].carries == SP_CARRIES_CHARGE) T = in->in[SP_IN_AMBIENT];
        for (int i = 0; i < at->cells; ++i) y[at->fluid + i] = y[at->wall + i] = T;
    }
}

void sp_circuit_start(const struct sp_circuit *c, const struct sp_inputs *in, double *y)
{
    const struct sp_design *d = c->design;
    const struct sp_layout *l = &c->layout;
    double coolant = d->start.coolant, radiator = or_else(d->start.radiator, coolant);
    memset(y, 0, (size_t)l->count * sizeof *y);
    y[SP_Y_METAL] = or_else(d->start.metal, coolant);
    y[SP_Y_JACKET] = y[SP_Y_TANK] = y[SP_Y_WAX] = coolant;
    for (int i = 0; i < SP_HOSE_CELLS; ++i) {
        y[l->out + i] = coolant;
        y[l->back + i] = radiator;
    }
    if (l->oil >= 0) y[l->oil] = or_else(d->start.oil, coolant);
    if (l->gearbox >= 0) y[l->gearbox] = or_else(d->start.gearbox, coolant);
    start_cores(c, in, radiator, y);
    y[SP_Y_GAUGE] = sp_circuit_place(c, d->gauge.place, y);
    double vapour = sp_coolant_vapour_pressure(&d->coolant.fluid, d->tank.fill_temperature);
    y[SP_Y_AIR] = sp_tank_filling(&d->tank, vapour, in->in[SP_IN_PRESSURE]);
    /* What is missing from the start was not filled in: air stands in its place. */
    if (d->tank.lost > 0.0) y[SP_Y_AIR] *= 1.0 + d->tank.lost / d->tank.air_space;
    vent_at_start(c, in, y);
}

/* Heat [J] in the fluid and the metal of one core. */
static double held_in_core(const struct sp_circuit *c, int e, const double *y)
{
    const struct sp_exchanger *x = &c->exchanger[e];
    const struct sp_cells_at *at = &c->layout.exchanger[e];
    const struct sp_coolant *f = &c->design->coolant.fluid;
    double sum = 0.0;
    for (int i = 0; i < at->cells; ++i) {
        double T = y[at->fluid + i], h = sp_coolant_enthalpy(f, T);
        if (x->carries == SP_CARRIES_CHARGE) h = SP_CHARGE_CP * T;
        else if (x->carries != SP_CARRIES_COOLANT) h = sp_oil_enthalpy(T);
        sum += (x->mass * h + x->design->metal_capacity * (y[at->wall + i] - SP_ZERO_C)) / at->cells;
    }
    return x->copies * sum;
}

static double held_in_oil(const struct sp_oil *o, double mass, double T)
{
    return mass * sp_oil_enthalpy(T) + o->metal_capacity * (T - SP_ZERO_C);
}

double sp_circuit_heat_held(const struct sp_circuit *c, const double *y)
{
    const struct sp_layout *l = &c->layout;
    const struct sp_coolant *f = &c->design->coolant.fluid;
    double sum = c->design->engine.metal_capacity * (y[SP_Y_METAL] - SP_ZERO_C) +
                 c->mass_jacket * sp_coolant_enthalpy(f, y[SP_Y_JACKET]) +
                 c->mass_tank * sp_coolant_enthalpy(f, y[SP_Y_TANK]);
    for (int i = 0; i < SP_HOSE_CELLS; ++i)
        sum += (c->mass_out * sp_coolant_enthalpy(f, y[l->out + i]) +
                c->mass_back * sp_coolant_enthalpy(f, y[l->back + i])) / SP_HOSE_CELLS;
    for (int e = 0; e < c->exchangers; ++e) sum += held_in_core(c, e, y);
    if (l->oil >= 0) sum += held_in_oil(&c->design->oil, c->mass_oil, y[l->oil]);
    if (l->gearbox >= 0) sum += held_in_oil(&c->design->gearbox, c->mass_gearbox, y[l->gearbox]);
    return sum;
}

/* Boiling point with the pressure held inside the range of the vapour curve: beyond 5 MPa nothing is a
 * cooling system any more, and the margin is far below nil by then. */
static double boiling(const struct sp_coolant *f, double pressure)
{
    return sp_coolant_boiling(f, fmin(fmax(pressure, 1.0e3), 4.99e6));
}

double sp_circuit_boil_margin(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                              const struct sp_coupling *k, double tank)
{
    const struct sp_coolant *f = &c->design->coolant.fluid;
    double outlet = boiling(f, tank + k->loop.rise - k->loop.jacket_drop) - y[SP_Y_JACKET];
    return fmin(outlet, boiling(f, tank) - sp_circuit_pump_inlet(c, in, y, k));
}
