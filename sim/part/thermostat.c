/* Thermostat. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/thermostat.h"

#include <math.h>

static const double map_blend = 0.1; /* of its power over which a mapped thermostat goes over; choice */

double sp_thermostat_effective(const struct sp_thermostat *t, enum sp_play play, double wax, double held)
{
    if (!(t->hysteresis > 0.0)) return wax;
    switch (play) {
    case SP_PLAY_OPENING: return wax;
    case SP_PLAY_SHUTTING: return wax + t->hysteresis;
    default: return held;
    }
}

double sp_thermostat_lift(const struct sp_thermostat *t, double effective)
{
    if (t->none || t->restrictor > 0.0) return 1.0;
    return fmin(fmax((effective - t->opens) / (t->full - t->opens), 0.0), 1.0);
}

double sp_thermostat_mapped(const struct sp_thermostat *t, double power)
{
    if (!(t->mapped_power > 0.0)) return 0.0;
    double x = fmin(fmax((power / t->mapped_power - 1.0) / map_blend, 0.0), 1.0);
    return t->mapped_shift * x * x * (3.0 - 2.0 * x);
}

double sp_thermostat_rate(const struct sp_thermostat *t, double flow, double full_flow)
{
    double still = 1.0 / t->lag_still, most = 1.0 / t->lag;
    double share = fmin(fmax(flow, 0.0) / full_flow, 1.0);
    return share > 0.0 ? still + (most - still) * pow(share, 0.6) : still;
}
