/* Charge air: what the compressor makes of it. Equations in docs/model.md.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/charge.h"

#include <math.h>

double sp_charge_flow(const struct sp_charge *c, double fuel, double rated_fuel)
{
    return rated_fuel > 0.0 && fuel > 0.0 ? c->air_flow * fuel / rated_fuel : 0.0;
}

double sp_charge_ratio(const struct sp_charge *c, double flow)
{
    double share = fmin(fmax(flow, 0.0) / c->air_flow, 1.0);
    return 1.0 + (c->pressure_ratio - 1.0) * share * share;
}

double sp_charge_heating(const struct sp_charge *c, double flow)
{
    return (pow(sp_charge_ratio(c, flow), 2.0 / 7.0) - 1.0) / c->efficiency;
}
