/* The circuit's balances. SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/circuit.h"

#include <math.h>

#include "part/cells.h"
#include "part/engine.h"

static const double quickest_gauge = 0.05; /* s: a lag of nil would be no ODE */
static const double full_skin_speed = 100.0 / 3.6; /* m/s at which the moving skin loss is reached */

/* ---- coupling -------------------------------------------------------------------------------------- */

static double mean(const double *y, int n)
{
    double sum = 0.0;
    for (int i = 0; i < n; ++i) sum += y[i];
    return sum / n;
}

void sp_circuit_signals(const struct sp_circuit *c, const double *y, struct sp_signals *out)
{
    const struct sp_layout *l = &c->layout;
    *out = (struct sp_signals){.wall = mean(y + l->wall, l->cells), .fan = y[SP_Y_FAN], .wax = y[SP_Y_WAX],
                               .jacket = y[SP_Y_JACKET], .core = mean(y + l->core, l->cells)};
}

static struct sp_duct_inputs duct_inputs(const struct sp_circuit *c, const struct sp_inputs *in,
                                         const struct sp_signals *s)
{
    return (struct sp_duct_inputs){.speed = in->in[SP_IN_AIR_SPEED], .wake = in->in[SP_IN_WAKE],
                                   .temperature = in->in[SP_IN_AMBIENT], .pressure = in->in[SP_IN_PRESSURE],
                                   .R = c->air.R, .cp = c->air.cp, .fan_speed = {s->fan}, .wall = {s->wall}};
}

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
                                struct sp_guess *guess, struct sp_coupling *out)
{
    const struct sp_design *d = c->design;
    out->lift = sp_thermostat_lift(
        &d->thermostat, sp_thermostat_effective(&d->thermostat, modes->play, s->wax, modes->held));
    double speed = sp_pump_speed(d, in->in[SP_IN_ENGINE_SPEED], in->flags & SP_FLAG_ENGINE, in->flags & SP_FLAG_PUMP);
    enum sp_status status = sp_loop_solve(&c->loop, speed, out->lift, s->jacket, s->core, guess, &out->loop);
    double rho = sp_coolant_density(&d->coolant.fluid, s->jacket);
    out->mass_pump = rho * out->loop.pump;
    out->mass_radiator = rho * out->loop.radiator;
    out->mass_bypass = rho * out->loop.bypass;
    out->mass_bleed = rho * out->loop.bleed;
    return status;
}

enum sp_status sp_circuit_couple(const struct sp_circuit *c, const struct sp_inputs *in,
                                 const struct sp_modes *modes, const struct sp_signals *s,
                                 struct sp_guesses *guesses, struct sp_coupling *out)
{
    const struct sp_coolant *fluid = &c->design->coolant.fluid;
    struct sp_duct_inputs air = duct_inputs(c, in, s);
    if (sp_duct_solve_from(c->duct, &air, &guesses->duct, &out->duct)) return SP_NUMERICS;
    if (sp_circuit_split(c, in, modes, s, &guesses->loop, out)) return SP_NUMERICS;
    out->jacket_conductance = jacket_conductance(c->design, out->loop.pump, s->jacket);
    out->core_rate = out->mass_radiator * sp_coolant_cp(fluid, s->core);
    out->core_conductance = sp_core_coolant_conductance(&c->duct->core, fluid, out->mass_radiator, s->core);
    return SP_OK;
}

/* ---- rates ----------------------------------------------------------------------------------------- */

double sp_circuit_place(const struct sp_circuit *c, enum sp_place_of place, const double *y)
{
    return place == SP_AT_ENGINE_OUT ? y[SP_Y_JACKET] : y[c->layout.core + c->layout.cells - 1];
}

double sp_circuit_pump_inlet(const struct sp_circuit *c, const double *y, const struct sp_coupling *k)
{
    if (!(k->mass_pump > 0.0)) return y[SP_Y_JACKET];
    return (k->mass_radiator * y[c->layout.wall - 1] + k->mass_bypass * y[SP_Y_JACKET] +
            k->mass_bleed * y[SP_Y_TANK]) / k->mass_pump;
}

double sp_circuit_fan_wish(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                           const double *y)
{
    const struct sp_fan *f = &c->design->duct[0].fan[0];
    if (!f->fitted || !(in->flags & SP_FLAG_FAN)) return 0.0;
    const struct sp_electrics *e = &c->design->electrics;
    double full = sp_motor_speed(in->flags & SP_FLAG_ENGINE ? e->voltage_running : e->voltage_stopped, f->rated_voltage);
    switch (f->law) {
    case SP_FAN_ALWAYS: return full;
    case SP_FAN_SWITCHED: return modes->fan_on ? full : 0.0;
    case SP_FAN_PROPORTIONAL: {
        double share = (sp_circuit_place(c, f->sensor, y) - f->from) / (f->to - f->from);
        /* Below `from` it stands; the jump to `least` is spread over a twentieth of the band. */
        double start = fmin(fmax(20.0 * share, 0.0), 1.0);
        return full * start * (f->least + (1.0 - f->least) * fmin(fmax(share, 0.0), 1.0));
    }
    default: return 0.0;
    }
}

/* Electrical power [W] of an electric pump, with its speed cubed. */
static double pump_power(const struct sp_design *d, const struct sp_inputs *in)
{
    if (!d->pump.electric) return 0.0;
    double speed = sp_pump_speed(d, 0.0, in->flags & SP_FLAG_ENGINE, in->flags & SP_FLAG_PUMP);
    return d->pump.power * speed * speed * speed;
}

double sp_circuit_engine_heat(const struct sp_circuit *c, const struct sp_inputs *in, const double *y)
{
    const struct sp_design *d = c->design;
    double load = 0.0;
    if (in->flags & SP_FLAG_ENGINE)
        load = (sp_fan_power(&d->duct[0].fan[0], y[SP_Y_FAN]) + pump_power(d, in)) / d->electrics.alternator_efficiency;
    double gas = in->in[SP_IN_HEAT_GAS] + load * in->in[SP_IN_HEAT_SLOPE];
    return gas * sp_engine_gas_factor(&d->engine, y[SP_Y_METAL]) + in->in[SP_IN_HEAT_FRICTION];
}

struct sp_tank_state sp_circuit_tank(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                                     struct sp_tank_inputs *inputs)
{
    const struct sp_coolant *f = &c->design->coolant.fluid;
    const struct sp_layout *l = &c->layout;
    double liquid = c->mass_jacket / sp_coolant_density(f, y[SP_Y_JACKET]) +
                    c->mass_tank / sp_coolant_density(f, y[SP_Y_TANK]) +
                    c->mass_core / sp_coolant_density(f, mean(y + l->core, l->cells)) +
                    c->mass_out / sp_coolant_density(f, mean(y + l->out, SP_HOSE_CELLS)) +
                    c->mass_back / sp_coolant_density(f, mean(y + l->back, SP_HOSE_CELLS));
    *inputs = (struct sp_tank_inputs){.air = y[SP_Y_AIR], .liquid = liquid - y[SP_Y_LOST], .system = c->system_volume,
                                      .temperature = y[SP_Y_TANK], .ambient = in->in[SP_IN_PRESSURE],
                                      .vapour = sp_coolant_vapour_pressure(f, y[SP_Y_TANK])};
    struct sp_tank_state s = sp_tank_state(&c->design->tank, inputs);
    s.pressure = fmin(s.pressure, sp_tank_most(&c->design->tank, inputs->ambient));
    return s;
}

static void tank_rates(const struct sp_circuit *c, const struct sp_inputs *in, const double *y, double *dydt)
{
    struct sp_tank_inputs inputs;
    struct sp_tank_state s = sp_circuit_tank(c, in, y, &inputs);
    double held = c->mass_tank / sp_coolant_density(&c->design->coolant.fluid, y[SP_Y_TANK]) - y[SP_Y_LOST];
    struct sp_tank_vent vent = sp_tank_vent(&c->design->tank, &inputs, &s, held);
    dydt[SP_Y_AIR] = -vent.air;
    dydt[SP_Y_LOST] = vent.liquid;
}

/* One coolant cell: `through` kg/s arrive with enthalpy h_in. Returns its own enthalpy. */
static double cell(const struct sp_coolant *f, double mass, double through, double h_in, double T, double lost,
                   double *rate)
{
    double h = sp_coolant_enthalpy(f, T);
    *rate = (through * (h_in - h) - lost) / (mass * sp_coolant_cp(f, T));
    return h;
}

static double hose(const struct sp_circuit *c, const struct sp_coupling *k, double mass, double h, double ambient,
                   int first, const double *y, double *dydt, double *skin)
{
    double each = c->design->hoses.skin / (2 * SP_HOSE_CELLS);
    for (int i = first; i < first + SP_HOSE_CELLS; ++i) {
        double lost = each * (y[i] - ambient);
        *skin += lost;
        h = cell(&c->design->coolant.fluid, mass / SP_HOSE_CELLS, k->mass_radiator, h, y[i], lost, &dydt[i]);
    }
    return h;
}

static double core(const struct sp_circuit *c, const struct sp_coupling *k, double h, double ambient,
                   const double *y, double *dydt)
{
    const struct sp_layout *l = &c->layout;
    const struct sp_coolant *f = &c->design->coolant.fluid;
    int n = l->cells;
    double film = k->core_conductance / n, mass = c->mass_core / n;
    double to_air = fabs(k->duct.mass_flow) * c->air.cp * k->duct.effectiveness / n;
    double metal = c->design->duct[0].core[0].metal_capacity / n;
    double w = sp_cells_weight(k->core_rate > 0.0 ? film / k->core_rate : INFINITY);
    double before = y[l->core - 1];
    for (int i = 0; i < n; ++i) {
        double T = y[l->core + i], wall = y[l->wall + i];
        double given = film * (w * before + (1.0 - w) * T - wall);
        h = cell(f, mass, k->mass_radiator, h, T, given, &dydt[l->core + i]);
        dydt[l->wall + i] = (given - to_air * (wall - ambient)) / metal;
        before = T;
    }
    return h;
}

void sp_circuit_rates(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                      const double *y, const struct sp_coupling *k, double *dydt)
{
    const struct sp_design *d = c->design;
    const struct sp_coolant *f = &d->coolant.fluid;
    const struct sp_engine *e = &d->engine;
    double ambient = in->in[SP_IN_AMBIENT], wind = fabs(in->in[SP_IN_AIR_SPEED]);
    double moving = fmin(wind / full_skin_speed, 1.0);
    double h_jacket = sp_coolant_enthalpy(f, y[SP_Y_JACKET]), skin = 0.0;

    double heat = sp_circuit_engine_heat(c, in, y);
    double metal_skin = (e->skin_standing + (e->skin_moving - e->skin_standing) * moving) * (y[SP_Y_METAL] - ambient);
    double to_coolant = k->jacket_conductance * (y[SP_Y_METAL] - y[SP_Y_JACKET]);
    dydt[SP_Y_METAL] = (heat - to_coolant - metal_skin) / e->metal_capacity;

    double h = hose(c, k, c->mass_out, h_jacket, ambient, c->layout.out, y, dydt, &skin);
    h = core(c, k, h, ambient, y, dydt);
    double h_back = hose(c, k, c->mass_back, h, ambient, c->layout.back, y, dydt, &skin);

    double tank_skin = d->tank.skin * (y[SP_Y_TANK] - ambient);
    double h_tank = cell(f, c->mass_tank, k->mass_bleed, h_jacket, y[SP_Y_TANK], tank_skin, &dydt[SP_Y_TANK]);

    /* Bypassed coolant comes back as it left: it drops out of the jacket's balance. */
    double carried = k->mass_radiator * (h_back - h_jacket) + k->mass_bleed * (h_tank - h_jacket);
    dydt[SP_Y_JACKET] = (carried + to_coolant) / (c->mass_jacket * sp_coolant_cp(f, y[SP_Y_JACKET]));

    dydt[SP_Y_WAX] = (y[SP_Y_JACKET] - y[SP_Y_WAX]) * sp_thermostat_rate(&d->thermostat, k->loop.pump, c->reference_flow);
    dydt[SP_Y_FAN] = d->duct[0].fan[0].fitted ? (sp_circuit_fan_wish(c, in, modes, y) - y[SP_Y_FAN]) / d->duct[0].fan[0].spin_up : 0.0;
    dydt[SP_Y_GAUGE] = (sp_circuit_place(c, d->gauge.place, y) - y[SP_Y_GAUGE]) / fmax(d->gauge.lag, quickest_gauge);
    tank_rates(c, in, y, dydt);

    dydt[SP_Y_HEAT_IN] = heat;
    dydt[SP_Y_HEAT_AIR] = k->duct.heat;
    dydt[SP_Y_HEAT_SKIN] = metal_skin + skin + tank_skin;
    dydt[SP_Y_FAN_ENERGY] = sp_fan_power(&d->duct[0].fan[0], y[SP_Y_FAN]);
    dydt[SP_Y_DRAG_WORK] = k->duct.drag * in->in[SP_IN_SPEED];
    double rho = in->in[SP_IN_PRESSURE] / (c->air.R * ambient), V = in->in[SP_IN_AIR_SPEED];
    dydt[SP_Y_HEAD_WORK] = 0.5 * rho * V * V * in->in[SP_IN_SPEED];
}
