/* Defaults of the engine, its oil and its charge air that follow from other values; as keys_rule.c.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "keys.h"

#include "part/correlation.h"
#include "part/engine.h"

/* ---- size ------------------------------------------------------------------------------------------ */

static double swept(const struct sp_engine *e)
{
    return 4.0 * e->displacement / (acos(-1.0) * e->cylinders);
}

double sp_rule_bore(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    double stroke = d->engine.stroke;
    return isnan(stroke) ? cbrt(swept(&d->engine)) : sqrt(swept(&d->engine) / stroke);
}

double sp_rule_stroke(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return swept(&d->engine) / (d->engine.bore * d->engine.bore);
}

/* ---- heat ------------------------------------------------------------------------------------------ */

double sp_rule_overrun_share(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    enum sp_friction_law law = d->engine.overrun_law;
    return law == SP_FRICTION_SI || law == SP_FRICTION_CHEN_FLYNN ? 0.50 : 0.40;
}

double sp_rule_gas_temperature(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    const struct sp_engine *e = &d->engine;
    if (e->heat_law != SP_HEAT_CORRELATION) return 840.0;
    return sp_correlation_gas(e->diesel, e->stoichiometric / e->air_fuel_ratio);
}

/* ---- oil ------------------------------------------------------------------------------------------- */

double sp_rule_oil_share(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    const struct sp_engine *e = &d->engine;
    const double all = 0.09;
    double friction = d->oil.friction_share * sp_engine_motoring(e, e->rated_speed) / e->rated_power;
    return isnan(friction) ? all : fmax(all - friction, 0.0);
}

static const double metal_of_oil = 7e6; /* J/K for each m3 of oil */

double sp_rule_oil_metal(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return metal_of_oil * d->oil.volume;
}

double sp_rule_gearbox_metal(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return metal_of_oil * d->gearbox.volume;
}

double sp_rule_oil_most(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return d->oil.flow;
}

double sp_rule_gearbox_most(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return d->gearbox.flow;
}

double sp_rule_oil_full(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return d->oil.opens + 10.0;
}

double sp_rule_gearbox_full(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    return d->gearbox.opens + 10.0;
}

/* ---- charge air ------------------------------------------------------------------------------------ */

double sp_rule_charge_flow(const struct sp_design *d, const struct sp_key_spot *at)
{
    (void)at;
    const struct sp_engine *e = &d->engine;
    if (!d->charge.fitted) return NAN; /* an odd engine is none of its business */
    return sp_engine_rated_fuel(e) / e->heating_value * e->air_fuel_ratio;
}
