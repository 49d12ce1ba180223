/* Thermostat. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/thermostat.h"

#include <math.h>

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
    if (t->none) return 1.0;
    return fmin(fmax((effective - t->opens) / (t->full - t->opens), 0.0), 1.0);
}

double sp_thermostat_rate(const struct sp_thermostat *t, double flow, double full_flow)
{
    double still = 1.0 / t->lag_still, most = 1.0 / t->lag;
    double share = fmin(fmax(flow, 0.0) / full_flow, 1.0);
    return share > 0.0 ? still + (most - still) * pow(share, 0.6) : still;
}
