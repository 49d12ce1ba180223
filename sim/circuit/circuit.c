/* The circuit's balances. SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/circuit.h"

#include <math.h>

#include "part/cells.h"
#include "part/charge.h"
#include "part/effectiveness.h"
#include "part/oil.h"

static const double quickest_gauge = 0.05; /* s: a lag of nil would be no ODE */
static const double coolest_boiling = 350.0; /* K: no coolant boils below it in a car's range of pressures */
/* m3/s of liquid out of a tank that boils over: two litres in ten seconds, common practice. */
static const double boil_over_flow = 2e-4;

/* Liquid [m3/s] that bulk boiling at the jacket's outlet drives out of the tank: steam takes its place, once its
 * pressure lifts the cap. Full when the vapour's pressure stands a fifteenth (2 K) over what the cap holds. */
static double boil_over(const struct sp_circuit *c, const double *y, const struct sp_coupling *k, double cap,
                        double held)
{
    double T = y[SP_Y_JACKET], pressure = cap + k->loop.rise - k->loop.jacket_drop;
    if (T < coolest_boiling || !(held > 0.0)) return 0.0;
    double excess = sp_coolant_vapour_pressure(&c->design->coolant.fluid, T) / pressure - 1.0;
    return boil_over_flow * fmin(fmax(15.0 * excess, 0.0), 1.0) * held / (held + SP_TANK_LAST_GAS);
}

static void tank_rates(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                       const struct sp_coupling *k, double *dydt)
{
    struct sp_tank_inputs inputs;
    struct sp_tank_state s = sp_circuit_tank(c, in, y, &inputs);
    double held = sp_circuit_in_tank(c, y) - sp_circuit_missing(c, y);
    struct sp_tank_vent vent = sp_tank_vent(&c->design->tank, &inputs, &s, held);
    dydt[SP_Y_AIR] = -vent.air;
    dydt[SP_Y_LOST] = vent.liquid + boil_over(c, y, k, in->in[SP_IN_PRESSURE] + c->design->tank.cap, held);
}

/* ---- cells ----------------------------------------------------------------------------------------- */

/* A fluid's enthalpy [J/kg] and heat capacity [J/kgK]. */
struct fluid { double enthalpy, cp; };

static struct fluid fluid_at(const struct sp_circuit *c, enum sp_medium m, double T)
{
    const struct sp_coolant *f = &c->design->coolant.fluid;
    switch (m) {
    case SP_CARRIES_OIL:
    case SP_CARRIES_GEARBOX: return (struct fluid){sp_oil_enthalpy(T), sp_oil_cp(T)};
    case SP_CARRIES_CHARGE: return (struct fluid){SP_CHARGE_CP * T, SP_CHARGE_CP};
    default: return (struct fluid){sp_coolant_enthalpy(f, T), sp_coolant_cp(f, T)};
    }
}

/* One fluid cell: `through` kg/s arrive with enthalpy h_in. */
static double cell(struct fluid own, double mass, double through, double h_in, double lost)
{
    return (through * (h_in - own.enthalpy) - lost) / (mass * own.cp);
}

static double hose(const struct sp_circuit *c, const struct sp_coupling *k, double mass, double h, double ambient,
                   int first, const double *y, double *dydt, double *lost)
{
    double each = c->design->hoses.skin / (2 * SP_HOSE_CELLS);
    for (int i = first; i < first + SP_HOSE_CELLS; ++i) {
        double loses = each * (y[i] - ambient);
        struct fluid own = fluid_at(c, SP_CARRIES_COOLANT, y[i]);
        *lost += loses;
        dydt[i] = cell(own, mass / SP_HOSE_CELLS, k->mass_radiator, h, loses);
        h = own.enthalpy;
    }
    return h;
}

/* One core; `before` is the temperature and h the enthalpy of what enters. Returns what leaves, by enthalpy. */
static double core(const struct sp_circuit *c, const struct sp_coupling *k, int e, double before, double h,
                   const double *y, double *dydt)
{
    const struct sp_exchanger *x = &c->exchanger[e];
    const struct sp_cells_at *at = &c->layout.exchanger[e];
    const struct sp_core_flow *flow = &k->core[e];
    const struct sp_core_air *air = &k->duct[x->run].core[x->slot];
    int n = at->cells;
    double film = flow->conductance / n, mass = x->mass / n, to_air = air->rate / n;
    double metal = x->design->metal_capacity / n;
    double w = sp_cells_weight(flow->rate > 0.0 ? film / flow->rate : INFINITY);
    for (int i = 0; i < n; ++i) {
        double T = y[at->fluid + i], wall = y[at->wall + i];
        double given = film * (w * before + (1.0 - w) * T - wall);
        struct fluid own = fluid_at(c, x->carries, T);
        dydt[at->fluid + i] = cell(own, mass, flow->flow, h, given);
        dydt[at->wall + i] = (given - to_air * (wall - air->air_in)) / metal;
        h = own.enthalpy;
        before = T;
    }
    return h;
}

/* All strings of the loop; returns the enthalpy of their mix. */
static double strings(const struct sp_circuit *c, const struct sp_coupling *k, double h_hose, const double *y,
                      double *dydt)
{
    const struct sp_layout *l = &c->layout;
    double h = h_hose, sum = 0.0, flow = 0.0;
    for (int e = 0; e < c->exchangers && c->exchanger[e].string >= 0; ++e) {
        const struct sp_exchanger *x = &c->exchanger[e];
        const struct sp_cells_at *last = e > 0 ? &l->exchanger[e - 1] : NULL;
        if (x->first) h = h_hose;
        h = core(c, k, e, x->first ? y[l->out + SP_HOSE_CELLS - 1] : y[last->fluid + last->cells - 1], h, y, dydt);
        bool ends = e + 1 == c->exchangers || c->exchanger[e + 1].string != x->string;
        if (!ends) continue;
        sum += k->loop.string[x->string] * h;
        flow += k->loop.string[x->string];
    }
    return l->chained || !(flow > 0.0) ? h : sum / flow;
}

/* All cores that carry `medium`, one after the other, from T_in. Returns the heat [W] the medium has given up on
 * the way. */
static double others(const struct sp_circuit *c, const struct sp_coupling *k, enum sp_medium medium, double T_in,
                     const double *y, double *dydt)
{
    double before = T_in, h_in = fluid_at(c, medium, T_in).enthalpy, h = h_in, flow = 0.0;
    for (int e = 0; e < c->exchangers; ++e) {
        const struct sp_cells_at *at = &c->layout.exchanger[e];
        if (c->exchanger[e].carries != medium) continue;
        h = core(c, k, e, before, h, y, dydt);
        before = y[at->fluid + at->cells - 1];
        flow = k->core[e].flow * c->exchanger[e].copies;
    }
    return flow * (h_in - h);
}

/* ---- oil ------------------------------------------------------------------------------------------- */

/* What a body of oil gives the rest, W. */
struct oil_heat { double to_metal, to_coolant, to_air, to_cooler; };

/* Plate cooler [W]: counterflow of the oil at T and what enters the pump; no more than either stream can carry. */
static double plate_heat(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_oil *o, double speed,
                         double T, const struct sp_coupling *k, const double *y)
{
    double conductance = sp_oil_plate(o, speed);
    if (!(conductance > 0.0 && k->mass_pump > 0.0)) return 0.0;
    double inlet = sp_circuit_pump_inlet(c, in, y, k);
    double coolant = k->mass_pump * sp_coolant_cp(&c->design->coolant.fluid, inlet);
    double oil = sp_oil_flow(o, speed) * sp_oil_density(T) * sp_oil_cp(T);
    double least = fmin(coolant, oil), ratio = least / fmax(coolant, oil);
    return least * sp_effectiveness(SP_COUNTERFLOW, conductance / least, ratio) * (T - inlet);
}

static struct oil_heat oil_rates(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_coupling *k,
                                 bool engine, const double *y, double *dydt)
{
    const struct sp_oil *o = engine ? &c->design->oil : &c->design->gearbox;
    int at = engine ? c->layout.oil : c->layout.gearbox;
    struct oil_heat q = {0.0, 0.0, 0.0, 0.0};
    if (at < 0) return q;
    double T = y[at], mass = engine ? c->mass_oil : c->mass_gearbox;
    double speed = in->flags & SP_FLAG_ENGINE ? in->in[SP_IN_ENGINE_SPEED] : 0.0;
    q.to_metal = o->block * (T - y[SP_Y_METAL]);
    q.to_coolant = plate_heat(c, in, o, speed, T, k, y);
    q.to_air = sp_circuit_skin_conductance(in, o->skin_standing, o->skin_moving) * (T - in->in[SP_IN_AMBIENT]);
    q.to_cooler = others(c, k, engine ? SP_CARRIES_OIL : SP_CARRIES_GEARBOX, T, y, dydt);
    double heat = in->in[engine ? SP_IN_OIL_HEAT : SP_IN_GEARBOX_HEAT];
    dydt[at] = (heat - q.to_metal - q.to_coolant - q.to_air - q.to_cooler) / (mass * sp_oil_cp(T) + o->metal_capacity);
    return q;
}

/* ---- rates ----------------------------------------------------------------------------------------- */

/* Heat [W] that the air takes up in all ducts, and the part of it that comes from given loads. */
static double to_air(const struct sp_circuit *c, const struct sp_coupling *k, double *loads)
{
    double sum = 0.0;
    *loads = 0.0;
    for (int r = 0; r < c->runs; ++r) {
        const struct sp_duct_run *run = &c->run[r];
        sum += run->copies * k->duct[r].heat;
        for (int i = 0; i < SP_CORES; ++i)
            if (run->design->core[i].carries == SP_CARRIES_LOAD) *loads += run->copies * k->duct[r].core[i].heat;
    }
    return sum;
}

double sp_circuit_drag(const struct sp_circuit *c, const struct sp_coupling *k)
{
    double sum = 0.0;
    for (int r = 0; r < c->runs; ++r) sum += c->run[r].copies * k->duct[r].drag;
    return sum;
}

static void follow(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                   const double *y, const struct sp_coupling *k, double *dydt)
{
    const struct sp_design *d = c->design;
    dydt[SP_Y_WAX] = (sp_circuit_wax_sees(c, in, y, k) - y[SP_Y_WAX]) *
                     sp_thermostat_rate(&d->thermostat, k->loop.pump, c->reference_flow);
    dydt[SP_Y_FAN] = 0.0;
    for (int f = 0; f < c->fans; ++f) {
        int at = c->layout.fan[f];
        dydt[at] = (sp_circuit_fan_wish(c, f, in, modes, y) - y[at]) / c->fan[f].design->spin_up;
    }
    dydt[SP_Y_GAUGE] = (sp_circuit_place(c, d->gauge.place, y) - y[SP_Y_GAUGE]) / fmax(d->gauge.lag, quickest_gauge);
}

/* Electrical power [W] drawn from the battery while nothing charges it. */
static double battery_load(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                           const double *y)
{
    if (in->flags & SP_FLAG_ENGINE) return 0.0;
    double load = in->flags & SP_FLAG_KEY ? c->design->electrics.idle_load : 0.0;
    return load + sp_circuit_fan_power(c, in, y) + sp_circuit_pump_power(c, in, modes, y);
}

void sp_circuit_rates(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                      const double *y, const struct sp_coupling *k, double *dydt)
{
    const struct sp_design *d = c->design;
    double ambient = in->in[SP_IN_AMBIENT], lost = 0.0, loads, returns;
    struct fluid jacket = fluid_at(c, SP_CARRIES_COOLANT, y[SP_Y_JACKET]);
    struct fluid tank = fluid_at(c, SP_CARRIES_COOLANT, y[SP_Y_TANK]);

    struct oil_heat oil = oil_rates(c, in, k, true, y, dydt), gearbox = oil_rates(c, in, k, false, y, dydt);
    double heat = sp_circuit_engine_heat(c, in, modes, y);
    double metal_skin = sp_circuit_skin(c, in, y[SP_Y_METAL]);
    double to_coolant = k->jacket_conductance * (y[SP_Y_METAL] - y[SP_Y_JACKET]);
    dydt[SP_Y_METAL] = (heat + oil.to_metal + gearbox.to_metal - to_coolant - metal_skin) / d->engine.metal_capacity;

    double h = hose(c, k, c->mass_out, jacket.enthalpy, ambient, c->layout.out, y, dydt, &lost);
    h = strings(c, k, h, y, dydt);
    double h_back = hose(c, k, c->mass_back, h, ambient, c->layout.back, y, dydt, &lost);

    double tank_skin = d->tank.skin * (y[SP_Y_TANK] - ambient);
    dydt[SP_Y_TANK] = cell(tank, c->mass_tank, k->mass_bleed, jacket.enthalpy, tank_skin);

    /* Bypassed coolant comes back as it left: it drops out of the jacket's balance. */
    double heater = sp_circuit_heater(c, in, y, k, &returns);
    double carried = k->mass_radiator * (h_back - jacket.enthalpy) + k->mass_bleed * (tank.enthalpy - jacket.enthalpy);
    dydt[SP_Y_JACKET] = (carried + to_coolant + oil.to_coolant + gearbox.to_coolant - heater) /
                        (c->mass_jacket * jacket.cp);

    follow(c, in, modes, y, k, dydt);
    tank_rates(c, in, y, k, dydt);

    double charge = d->charge.fitted ? others(c, k, SP_CARRIES_CHARGE, sp_circuit_charge_in(c, in, k), y, dydt) : 0.0;
    dydt[SP_Y_HEAT_AIR] = to_air(c, k, &loads);
    dydt[SP_Y_HEAT_IN] = heat + loads + charge + (c->layout.oil >= 0 ? in->in[SP_IN_OIL_HEAT] : 0.0) +
                         (c->layout.gearbox >= 0 ? in->in[SP_IN_GEARBOX_HEAT] : 0.0);
    dydt[SP_Y_HEAT_SKIN] = metal_skin + lost + tank_skin + heater + oil.to_air + gearbox.to_air;
    dydt[SP_Y_FAN_ENERGY] = sp_circuit_fan_power(c, in, y);
    dydt[SP_Y_DRAG_WORK] = sp_circuit_drag(c, k) * in->in[SP_IN_SPEED];
    double rho = in->in[SP_IN_PRESSURE] / (c->air.R * ambient), V = in->in[SP_IN_AIR_SPEED];
    dydt[SP_Y_HEAD_WORK] = 0.5 * rho * V * V * in->in[SP_IN_SPEED];
    if (c->layout.battery >= 0) dydt[c->layout.battery] = battery_load(c, in, modes, y);
}
