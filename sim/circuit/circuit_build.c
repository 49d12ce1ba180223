/* Making a car ready, and its state at the start. SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/circuit.h"

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

bool sp_circuit_build(const struct sp_design *d, struct sp_circuit *out, struct sp_complaints *complaints)
{
    memset(out, 0, sizeof *out);
    struct sp_place at = {.file = d->file, .path = "car.duct.core.cells"};
    if (!(d->duct[0].core[0].cells >= 1.0 && d->duct[0].core[0].cells <= SP_CELLS_MAX)) { /* a design filled by hand */
        sp_complain(complaints, &at, "a number of cells that cannot be", "1 to 50 cells", NULL);
        return false;
    }
    at.path = "car.duct";
    out->design = d;
    out->air = sp_moist_air(d->air.ambient, d->air.pressure, d->air.humidity);
    out->duct = sp_duct_build(&d->duct[0], &d->coolant.fluid, &at, complaints);
    if (!out->duct) return false;
    if (!sp_core_has_heat(&out->duct->core)) {
        at.path = "car.duct.core.heat";
        sp_complain(complaints, &at, "a core without heat data", "a heat table, conductances, or fins and tubes", NULL);
        return false;
    }
    at.path = "car.pump.curve";
    if (!sp_loop_build(d, &out->duct->core, &out->loop, &at, complaints)) return false;
    out->layout = sp_layout_of((int)d->duct[0].core[0].cells);
    out->reference_flow = out->loop.pump.free_flow;

    double rho = sp_coolant_density(&d->coolant.fluid, d->tank.fill_temperature);
    double tank_liquid = fmax(d->tank.volume - d->tank.air_space, smallest);
    double hose_out = bore_volume(d->hoses.length_out, d->hoses.bore_out);
    double hose_back = bore_volume(d->hoses.length_back, d->hoses.bore_back);
    out->mass_jacket = rho * fmax(d->engine.coolant_volume, smallest);
    out->mass_core = rho * fmax(d->duct[0].core[0].coolant_volume, smallest);
    out->mass_tank = rho * tank_liquid;
    out->mass_out = rho * hose_out;
    out->mass_back = rho * hose_back;
    double liquid = (out->mass_jacket + out->mass_core + out->mass_tank + out->mass_out + out->mass_back) / rho;
    out->system_volume = liquid + d->tank.air_space;
    return true;
}

void sp_circuit_free(struct sp_circuit *c)
{
    sp_duct_free(c->duct);
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

void sp_circuit_start(const struct sp_circuit *c, const struct sp_inputs *in, double *y)
{
    const struct sp_design *d = c->design;
    const struct sp_layout *l = &c->layout;
    double coolant = d->start.coolant;
    double metal = isfinite(d->start.metal) ? d->start.metal : coolant;
    double radiator = isfinite(d->start.radiator) ? d->start.radiator : coolant;
    memset(y, 0, (size_t)l->count * sizeof *y);
    y[SP_Y_METAL] = metal;
    y[SP_Y_JACKET] = y[SP_Y_TANK] = y[SP_Y_WAX] = coolant;
    for (int i = l->out; i < l->core; ++i) y[i] = coolant;
    for (int i = l->core; i < l->count; ++i) y[i] = radiator;
    y[SP_Y_GAUGE] = sp_circuit_place(c, d->gauge.place, y);
    double vapour = sp_coolant_vapour_pressure(&d->coolant.fluid, d->tank.fill_temperature);
    y[SP_Y_AIR] = sp_tank_filling(&d->tank, vapour, in->in[SP_IN_PRESSURE]);
    vent_at_start(c, in, y);
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
    for (int i = 0; i < l->cells; ++i)
        sum += (c->mass_core * sp_coolant_enthalpy(f, y[l->core + i]) +
                c->design->duct[0].core[0].metal_capacity * (y[l->wall + i] - SP_ZERO_C)) / l->cells;
    return sum;
}

/* Boiling point with the pressure held inside the range of the vapour curve: beyond 5 MPa nothing is a
 * cooling system any more, and the margin is far below nil by then. */
static double boiling(const struct sp_coolant *f, double pressure)
{
    return sp_coolant_boiling(f, fmin(fmax(pressure, 1.0e3), 4.99e6));
}

double sp_circuit_boil_margin(const struct sp_circuit *c, const double *y, const struct sp_coupling *k, double tank)
{
    const struct sp_coolant *f = &c->design->coolant.fluid;
    double outlet = boiling(f, tank + k->loop.rise - k->loop.jacket_drop) - y[SP_Y_JACKET];
    return fmin(outlet, boiling(f, tank) - sp_circuit_pump_inlet(c, y, k));
}
