/* Oil with a heat of its own. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/oil.h"

#include <math.h>

static const double reference_density = 870.0, reference_temperature = 288.15, expansion = 7e-4;
static const double cp_zero = 1825.0, cp_slope = 3.75; /* J/kgK at 0 degC, and per kelvin */

double sp_oil_density(double T)
{
    return reference_density / (1.0 + expansion * (T - reference_temperature));
}

double sp_oil_cp(double T)
{
    return cp_zero + cp_slope * (T - SP_ZERO_C);
}

double sp_oil_enthalpy(double T)
{
    double t = T - SP_ZERO_C;
    return (cp_zero + 0.5 * cp_slope * t) * t;
}

double sp_oil_heat(const struct sp_oil *o, double power, double motoring)
{
    return o->heat_share * power + o->friction_share * motoring;
}

double sp_oil_flow(const struct sp_oil *o, double engine_speed)
{
    if (!(engine_speed > 0.0)) return 0.0;
    return fmin(o->flow * engine_speed / o->flow_speed, o->flow_most);
}

double sp_oil_to_cooler(const struct sp_oil *o, double T)
{
    if (!isfinite(o->opens)) return 1.0;
    double lift = fmin(fmax((T - o->opens) / (o->full - o->opens), 0.0), 1.0);
    return o->still + (1.0 - o->still) * lift;
}

double sp_oil_plate(const struct sp_oil *o, double engine_speed)
{
    return o->plate > 0.0 ? o->plate * sp_oil_flow(o, engine_speed) / o->flow_most : 0.0;
}
