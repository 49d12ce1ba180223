/* Defaults that follow from other values. Each takes a design in which earlier rows are filled, and the
 * element it is for; what it lacks is NAN there, and so is the answer. Figures: common practice unless said
 * otherwise.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys.h"

#include <math.h>

static const double litre = 1e-3; /* m3 */

static const struct sp_core *core_at(const struct sp_design *d, const struct sp_key_spot *at)
{
    return &d->duct[at->outer].core[at->inner];
}

static const struct sp_fan *fan_at(const struct sp_design *d, const struct sp_key_spot *at)
{
    return &d->duct[at->outer].fan[at->inner];
}

double sp_rule_start_coolant(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return d->air.ambient;
}

double sp_rule_shift_speed(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return d->engine.rated_speed;
}

/* ---- engine ---------------------------------------------------------------------------------------- */

double sp_rule_metal(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return 30e3 * d->engine.displacement / litre;
}

double sp_rule_jacket(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return 1.25 * d->engine.displacement;
}

double sp_rule_conductance(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return 1250.0 * d->engine.displacement / litre;
}

double sp_rule_conductance_flow(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return d->engine.displacement; /* 60 l/min per litre is once its volume a second */
}

/* ---- circuit --------------------------------------------------------------------------------------- */

double sp_rule_glycol(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return d->coolant.kind == SP_WATER ? 0.0 : 0.5;
}

/* Highest pressure times flow [W] on a curve; of the parabola it lies at free flow over sqrt(3). */
static double best_power(const struct sp_curve_design *c)
{
    double best = NAN;
    if (!c->pairs.rows) return c->shutoff * c->free_flow * 2.0 / (3.0 * sqrt(3.0));
    for (size_t i = 0; i < c->pairs.rows; ++i)
        best = fmax(best, c->pairs.cell[2 * i] * c->pairs.cell[2 * i + 1]);
    return best;
}

double sp_rule_pump_power(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return best_power(&d->pump.curve) / 0.32;
}

double sp_rule_thermostat_full(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return d->thermostat.opens + 12.0;
}

static double circle(double bore)
{
    const double quarter_pi = 0.78539816339744831;
    return quarter_pi * bore * bore;
}

/* Coolant in all cores that carry it [m3]. */
static double core_volumes(const struct sp_design *d)
{
    double sum = 0.0;
    for (size_t i = 0; i < (d->ducts ? d->ducts : 1); ++i) {
        const struct sp_duct_design *duct = &d->duct[i];
        for (size_t k = 0; k < (duct->cores ? duct->cores : 1); ++k)
            if (duct->core[k].carries == SP_CARRIES_COOLANT)
                sum += (duct->count > 0.0 ? duct->count : 1.0) * duct->core[k].coolant_volume;
    }
    return sum;
}

/* Coolant outside the tank [m3]. */
static double circuit_volume(const struct sp_design *d)
{
    const struct sp_hoses *h = &d->hoses;
    return d->engine.coolant_volume + core_volumes(d) + h->length_out * circle(h->bore_out) +
           h->length_back * circle(h->bore_back);
}

/* 11 % of the system, which is the circuit and as much again as the air space in the tank. */
double sp_rule_air_space(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    double space = 0.11 / 0.89 * circuit_volume(d);
    return d->tank.volume > 0.0 ? fmin(space, 0.5 * d->tank.volume) : space;
}

double sp_rule_tank_volume(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return 2.0 * d->tank.air_space;
}

/* ---- core ------------------------------------------------------------------------------------------ */

/* The geometry has its own ratio: then NAN. */
double sp_rule_free_area(const struct sp_design *d, const struct sp_key_spot *at)
{
    return core_at(d, at)->drop_law == SP_DROP_FINS ? (double)NAN : 1.0;
}

double sp_rule_louvre_length(const struct sp_design *d, const struct sp_key_spot *at)
{
    double gap = core_at(d, at)->tube_pitch - core_at(d, at)->tube_height;
    return gap > 0.0 ? 0.85 * gap : (double)NAN; /* tubes that touch are complained of elsewhere */
}

static double core_volume(const struct sp_core *c)
{
    return c->width * c->height * c->depth;
}

/* Tanks as those of a core 0.4 m high, scaled with its height. */
static double tanks(const struct sp_core *c)
{
    return c->height / 0.4;
}

double sp_rule_core_metal(const struct sp_design *d, const struct sp_key_spot *at)
{
    const struct sp_core *c = core_at(d, at);
    const double aluminium = 900.0; /* J/kgK */
    return aluminium * (0.33 * core_volume(c) / litre + 2.5 * tanks(c));
}

double sp_rule_core_coolant(const struct sp_design *d, const struct sp_key_spot *at)
{
    const struct sp_core *c = core_at(d, at);
    return 0.13 * core_volume(c) + 1.3 * litre * tanks(c);
}

static bool tubes_known(const struct sp_core *c)
{
    return c->tube_pitch > 0.0 && (c->tube_height > 0.0 || c->tube_diameter > 0.0);
}

double sp_rule_core_drop_flow(const struct sp_design *d, const struct sp_key_spot *at)
{
    return tubes_known(core_at(d, at)) ? (double)NAN : 100.0 * litre / 60.0;
}

double sp_rule_core_drop(const struct sp_design *d, const struct sp_key_spot *at)
{
    return tubes_known(core_at(d, at)) ? (double)NAN : 18e3;
}

/* ---- fan ------------------------------------------------------------------------------------------- */

double sp_rule_fan_power(const struct sp_design *d, const struct sp_key_spot *at)
{
    return best_power(&fan_at(d, at)->curve) / 0.23;
}

double sp_rule_fan_hub(const struct sp_design *d, const struct sp_key_spot *at)
{
    return 0.35 * fan_at(d, at)->diameter;
}
