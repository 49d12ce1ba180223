/* The coupled solvers of a circuit: air paths, coolant split, and the fluid side of every core.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "circuit/circuit.h"
#include "part/charge.h"
#include "part/oil.h"

void sp_circuit_signals(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                        struct sp_signals *out)
{
    const struct sp_layout *l = &c->layout;
    for (int e = 0; e < l->exchangers; ++e) {
        out->wall[e] = sp_circuit_mean(y + l->exchanger[e].wall, l->exchanger[e].cells);
        out->fluid[e] = sp_circuit_mean(y + l->exchanger[e].fluid, l->exchanger[e].cells);
    }
    for (int f = 0; f < l->fans; ++f) out->fan[f] = y[l->fan[f]];
    out->wax = y[SP_Y_WAX];
    out->jacket = y[SP_Y_JACKET];
    out->metal = y[SP_Y_METAL];
    out->oil = l->oil >= 0 ? y[l->oil] : NAN;
    out->gearbox = l->gearbox >= 0 ? y[l->gearbox] : NAN;
    struct sp_tank_inputs tank;
    bool watched = c->design->pump.npsh > 0.0;
    out->tank = watched ? sp_circuit_tank(c, in, y, &tank).pressure : 0.0;
    out->returns = watched ? y[l->back + SP_HOSE_CELLS - 1] : 0.0;
}

/* ---- air ------------------------------------------------------------------------------------------- */

struct sp_duct_inputs sp_circuit_duct_inputs(const struct sp_circuit *c, const struct sp_inputs *in,
                                             const struct sp_signals *s, int of)
{
    const struct sp_duct_run *run = &c->run[of];
    struct sp_duct_inputs air = {.speed = in->in[SP_IN_AIR_SPEED], .wake = in->in[SP_IN_WAKE],
                                 .temperature = in->in[SP_IN_AMBIENT], .pressure = in->in[SP_IN_PRESSURE],
                                 .R = c->air.R, .cp = c->air.cp, .cross_wind = c->design->air.cross_wind,
                                 .blower = in->in[SP_IN_BLOWER], .bonnet_up = in->flags & SP_FLAG_BONNET};
    for (int i = 0; i < SP_CORES; ++i)
        if (run->exchanger[i] >= 0) air.wall[i] = s->wall[run->exchanger[i]];
    for (int i = 0; i < SP_FANS; ++i)
        if (run->fan[i] >= 0) air.fan_speed[i] = s->fan[run->fan[i]];
    if (run->design->bay_skin > 0.0)
        air.bay_heat = run->design->bay_skin * sp_circuit_skin(c, in, s->metal) / fmax(run->design->count, 1.0);
    return air;
}

enum sp_status sp_circuit_air(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_signals *s,
                              int run, struct sp_duct_guess *guess, struct sp_coupling *out)
{
    struct sp_duct_inputs air = sp_circuit_duct_inputs(c, in, s, run);
    return sp_duct_solve_from(c->run[run].duct, &air, guess, &out->duct[run]);
}

/* ---- coolant --------------------------------------------------------------------------------------- */

/* Metal to coolant: grows with flow^0.8 and the coolant's properties, a share is left without flow. The
 * fourth powers join the two smoothly. */
static double jacket_conductance(const struct sp_design *d, double flow, double T)
{
    const struct sp_engine *e = &d->engine;
    double x = fmax(flow, 0.0) / e->conductance_flow;
    double moving = x > 0.0 ? pow(x, 0.8) : 0.0;
    double m2 = moving * moving, s2 = e->conductance_still * e->conductance_still;
    /* The reference is volume flow; the mass flow that goes with it follows density. */
    double denser = sp_coolant_density(&d->coolant.fluid, T) / SP_COOLANT_REFERENCE;
    double ratio = sp_coolant_film_ratio(&d->coolant.fluid, T, 0.8) * pow(denser, 0.8);
    return e->conductance * ratio * sqrt(sqrt(m2 * m2 + s2 * s2));
}

enum sp_status sp_circuit_split(const struct sp_circuit *c, const struct sp_inputs *in,
                                const struct sp_modes *modes, const struct sp_signals *s,
                                struct sp_loop_guess *guess, struct sp_coupling *out)
{
    const struct sp_design *d = c->design;
    double effective = sp_thermostat_effective(&d->thermostat, modes->play, s->wax, modes->held);
    out->lift = sp_thermostat_lift(&d->thermostat, effective + sp_thermostat_mapped(&d->thermostat, in->in[SP_IN_POWER]));
    struct sp_loop_inputs want = {.speed = sp_circuit_pump_speed(c, in, modes, s->jacket), .lift = out->lift,
                                  .hot = s->jacket, .tank = s->tank, .returns = s->returns};
    double share[SP_LOOP_STRINGS] = {0.0};
    for (int e = 0; e < c->exchangers && c->exchanger[e].string >= 0; ++e) {
        int i = c->exchanger[e].string; /* a string is as warm as its cores are in the mean */
        want.cool[i] += (s->fluid[e] - want.cool[i]) / (share[i] += 1.0);
    }
    enum sp_status status = sp_loop_solve(&c->loop, &want, guess, &out->loop);
    double rho = sp_coolant_density(&d->coolant.fluid, s->jacket);
    out->mass_pump = rho * out->loop.pump;
    out->mass_radiator = rho * out->loop.radiator;
    out->mass_bypass = rho * out->loop.bypass;
    out->mass_bleed = rho * out->loop.bleed;
    out->mass_heater = rho * out->loop.heater;
    return status;
}

/* ---- the fluid side of the cores ------------------------------------------------------------------- */

static void coolant_core(const struct sp_circuit *c, int e, const struct sp_signals *s, struct sp_coupling *out)
{
    const struct sp_exchanger *x = &c->exchanger[e];
    const struct sp_coolant *fluid = &c->design->coolant.fluid;
    double rho = sp_coolant_density(fluid, s->jacket);
    double flow = rho * out->loop.string[x->string] / x->copies;
    out->core[e] = (struct sp_core_flow){.flow = flow, .rate = flow * sp_coolant_cp(fluid, s->fluid[e]),
                                         .conductance = sp_core_coolant_conductance(x->ready, fluid, flow, s->fluid[e])};
}

static void other_core(const struct sp_circuit *c, int e, const struct sp_inputs *in, const struct sp_signals *s,
                       struct sp_coupling *out)
{
    const struct sp_exchanger *x = &c->exchanger[e];
    const struct sp_design *d = c->design;
    double flow, cp;
    if (x->carries == SP_CARRIES_CHARGE) {
        flow = in->in[SP_IN_CHARGE_FLOW];
        cp = SP_CHARGE_CP;
    } else {
        bool engine = x->carries == SP_CARRIES_OIL;
        const struct sp_oil *oil = engine ? &d->oil : &d->gearbox;
        double T = engine ? s->oil : s->gearbox;
        double speed = in->flags & SP_FLAG_ENGINE ? in->in[SP_IN_ENGINE_SPEED] : 0.0;
        flow = sp_oil_flow(oil, speed) * sp_oil_to_cooler(oil, T) * sp_oil_density(T);
        cp = sp_oil_cp(s->fluid[e]);
    }
    flow /= x->copies;
    out->core[e] = (struct sp_core_flow){.flow = flow, .rate = flow * cp,
                                         .conductance = sp_core_fluid_conductance(x->ready, flow)};
}

void sp_circuit_fluids(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_signals *s,
                       struct sp_coupling *out)
{
    out->jacket_conductance = jacket_conductance(c->design, out->loop.pump, s->jacket);
    for (int e = 0; e < c->exchangers; ++e) {
        if (c->exchanger[e].string >= 0) coolant_core(c, e, s, out);
        else other_core(c, e, in, s, out);
    }
}

enum sp_status sp_circuit_couple(const struct sp_circuit *c, const struct sp_inputs *in,
                                 const struct sp_modes *modes, const struct sp_signals *s,
                                 struct sp_guesses *guesses, struct sp_coupling *out)
{
    for (int r = 0; r < c->runs; ++r)
        if (sp_circuit_air(c, in, s, r, &guesses->duct[r], out)) return SP_NUMERICS;
    if (sp_circuit_split(c, in, modes, s, &guesses->loop, out)) return SP_NUMERICS;
    sp_circuit_fluids(c, in, s, out);
    return SP_OK;
}
