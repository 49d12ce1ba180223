/* What one sees of a state without solving anything: places, controllers' wishes, skins, the tank.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "circuit/circuit.h"
#include "part/engine.h"

static const double trickle = 1e-4;                /* kg/s of the pump, that counts as hardly any */
static const double full_skin_speed = 100.0 / 3.6; /* m/s at which the moving skin loss is reached */

double sp_circuit_mean(const double *y, int n)
{
    double sum = 0.0;
    for (int i = 0; i < n; ++i) sum += y[i];
    return sum / n;
}

double sp_circuit_volts(const struct sp_circuit *c, const struct sp_inputs *in)
{
    const struct sp_electrics *e = &c->design->electrics;
    return in->flags & SP_FLAG_ENGINE ? e->voltage_running : e->voltage_stopped;
}

double sp_circuit_pump_speed(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                             double coolant)
{
    struct sp_pump_wish wish = {.engine_speed = in->in[SP_IN_ENGINE_SPEED], .engine_on = in->flags & SP_FLAG_ENGINE,
                                .allowed = in->flags & SP_FLAG_PUMP, .volts = sp_circuit_volts(c, in),
                                .coolant = coolant, .pulse_off = modes->pulse_off};
    return sp_pump_speed(c->design, &wish);
}

/* ---- places and controllers ------------------------------------------------------------------------ */

double sp_circuit_place(const struct sp_circuit *c, enum sp_place_of place, const double *y)
{
    return place == SP_AT_ENGINE_OUT ? y[SP_Y_JACKET] : y[c->layout.core + c->layout.cells - 1];
}

/* Of the hose behind the radiators: what comes back. */
static double returning(const struct sp_circuit *c, const double *y)
{
    return y[c->layout.back + SP_HOSE_CELLS - 1];
}

double sp_circuit_heater(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                         const struct sp_coupling *k, double *returns)
{
    const struct sp_hoses *h = &c->design->hoses;
    double T = y[SP_Y_JACKET];
    *returns = T;
    if (!(k->mass_heater > 0.0)) return 0.0;
    double air = isfinite(h->heater_air) ? h->heater_air : in->in[SP_IN_AMBIENT];
    double rate = k->mass_heater * sp_coolant_cp(&c->design->coolant.fluid, T);
    double heat = -rate * expm1(-h->heater_conductance / rate) * (T - air);
    *returns = T - heat / rate;
    return heat;
}

double sp_circuit_pump_inlet(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                             const struct sp_coupling *k)
{
    if (!(k->mass_pump > 0.0)) return y[SP_Y_JACKET];
    double heater = y[SP_Y_JACKET];
    if (k->mass_heater > 0.0) sp_circuit_heater(c, in, y, k, &heater);
    return (k->mass_radiator * returning(c, y) + k->mass_bypass * y[SP_Y_JACKET] + k->mass_heater * heater +
            k->mass_bleed * y[SP_Y_TANK]) / k->mass_pump;
}

/* As the flow dies the mix is one of vanishing streams: the wax then sees the jacket, as it does when nothing flows. */
double sp_circuit_wax_sees(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                           const struct sp_coupling *k)
{
    if (!c->design->thermostat.inlet_side) return y[SP_Y_JACKET];
    double flow = k->mass_pump * k->mass_pump, share = flow / (flow + trickle * trickle);
    return y[SP_Y_JACKET] + share * (sp_circuit_pump_inlet(c, in, y, k) - y[SP_Y_JACKET]);
}

double sp_circuit_intake(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_coupling *k)
{
    double ambient = in->in[SP_IN_AMBIENT], share = c->design->engine.breathes_bay;
    return k && share > 0.0 ? ambient + share * (k->duct[0].bay_temperature - ambient) : ambient;
}

double sp_circuit_charge_in(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_coupling *k)
{
    const struct sp_charge *g = &c->design->charge;
    if (!g->fitted) return NAN;
    return (sp_circuit_intake(c, in, k) + g->intake_rise) * (1.0 + in->in[SP_IN_CHARGE_HEATING]);
}

double sp_circuit_charge_out(const struct sp_circuit *c, const struct sp_inputs *in, const double *y)
{
    if (c->design->charge.fitted && !(in->flags & SP_FLAG_ENGINE)) return in->in[SP_IN_AMBIENT];
    for (int e = c->exchangers - 1; e >= 0; --e) {
        const struct sp_cells_at *at = &c->layout.exchanger[e];
        if (c->exchanger[e].carries == SP_CARRIES_CHARGE) return y[at->fluid + at->cells - 1];
    }
    return sp_circuit_charge_in(c, in, NULL);
}

double sp_circuit_fan_wish(const struct sp_circuit *c, int kind, const struct sp_inputs *in,
                           const struct sp_modes *modes, const double *y)
{
    if (kind >= c->fans || !(in->flags & SP_FLAG_FAN)) return 0.0;
    const struct sp_fan *f = c->fan[kind].design;
    if (f->health != SP_FAN_SOUND) return 0.0;
    double full = sp_fan_full_speed(f, sp_circuit_volts(c, in));
    switch (f->law) {
    case SP_FAN_ALWAYS: return full;
    case SP_FAN_SWITCHED: return modes->fan_on[kind] ? full : 0.0;
    case SP_FAN_PROPORTIONAL: {
        double share = (sp_circuit_place(c, f->sensor, y) - f->from) / (f->to - f->from);
        /* Below `from` it stands; the jump to `least` is spread over a twentieth of the band. */
        double start = fmin(fmax(20.0 * share, 0.0), 1.0);
        return full * start * (f->least + (1.0 - f->least) * fmin(fmax(share, 0.0), 1.0));
    }
    default: return 0.0;
    }
}

/* With what the wiring takes: from the battery, not at the plugs. */
static double kind_power(const struct sp_fan *f, double speed, double volts)
{
    if (!(f->wiring_drop > 0.0)) return sp_fan_power(f, speed);
    return f->count * volts * sp_fan_current(f, speed, volts);
}

double sp_circuit_fan_power(const struct sp_circuit *c, const struct sp_inputs *in, const double *y)
{
    double sum = 0.0;
    for (int f = 0; f < c->fans; ++f)
        sum += c->fan[f].copies * kind_power(c->fan[f].design, y[c->layout.fan[f]], sp_circuit_volts(c, in));
    return sum;
}

double sp_circuit_pump_power(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                             const double *y)
{
    const struct sp_pump *p = &c->design->pump;
    if (!p->electric) return 0.0;
    double speed = sp_circuit_pump_speed(c, in, modes, y[SP_Y_JACKET]);
    return p->power * speed * speed * speed;
}

/* ---- engine and tank ------------------------------------------------------------------------------- */

double sp_circuit_engine_heat(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                              const double *y)
{
    const struct sp_design *d = c->design;
    double load = 0.0;
    if (in->flags & SP_FLAG_ENGINE)
        load = (sp_circuit_fan_power(c, in, y) + sp_circuit_pump_power(c, in, modes, y)) / d->electrics.alternator_efficiency;
    double gas = in->in[SP_IN_HEAT_GAS] + load * in->in[SP_IN_HEAT_SLOPE];
    return gas * sp_engine_gas_factor(&d->engine, y[SP_Y_METAL]) + in->in[SP_IN_HEAT_FRICTION];
}

double sp_circuit_skin_conductance(const struct sp_inputs *in, double standing, double moving)
{
    double share = fmin(fabs(in->in[SP_IN_AIR_SPEED]) / full_skin_speed, 1.0);
    return standing + (moving - standing) * share;
}

double sp_circuit_skin(const struct sp_circuit *c, const struct sp_inputs *in, double metal)
{
    const struct sp_engine *e = &c->design->engine;
    return sp_circuit_skin_conductance(in, e->skin_standing, e->skin_moving) * (metal - in->in[SP_IN_AMBIENT]);
}

struct sp_tank_state sp_circuit_tank(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                                     struct sp_tank_inputs *inputs)
{
    const struct sp_coolant *f = &c->design->coolant.fluid;
    const struct sp_layout *l = &c->layout;
    double liquid = c->mass_jacket / sp_coolant_density(f, y[SP_Y_JACKET]) +
                    c->mass_tank / sp_coolant_density(f, y[SP_Y_TANK]);
    for (int e = 0; e < c->exchangers && c->exchanger[e].string >= 0; ++e) {
        const struct sp_cells_at *at = &l->exchanger[e];
        liquid += c->exchanger[e].copies * c->exchanger[e].mass /
                  sp_coolant_density(f, sp_circuit_mean(y + at->fluid, at->cells));
    }
    liquid += c->mass_out / sp_coolant_density(f, sp_circuit_mean(y + l->out, SP_HOSE_CELLS));
    liquid += c->mass_back / sp_coolant_density(f, sp_circuit_mean(y + l->back, SP_HOSE_CELLS));
    *inputs = (struct sp_tank_inputs){.air = y[SP_Y_AIR], .liquid = liquid - sp_circuit_missing(c, y),
                                      .system = c->system_volume, .temperature = y[SP_Y_TANK],
                                      .ambient = in->in[SP_IN_PRESSURE],
                                      .vapour = sp_coolant_vapour_pressure(f, y[SP_Y_TANK])};
    struct sp_tank_state s = sp_tank_state(&c->design->tank, inputs);
    s.pressure = fmin(s.pressure, sp_tank_most(&c->design->tank, inputs->ambient));
    return s;
}

double sp_circuit_missing(const struct sp_circuit *c, const double *y)
{
    return y[SP_Y_LOST] + c->design->tank.lost;
}

double sp_circuit_in_tank(const struct sp_circuit *c, const double *y)
{
    return c->mass_tank / sp_coolant_density(&c->design->coolant.fluid, y[SP_Y_TANK]);
}
