/* Radiator cells. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/cells.h"

#include <math.h>

double sp_cells_weight(double k)
{
    if (k < 1e-3) return 0.5 - k / 12.0; /* series; the next term is k^3/720 */
    if (k > 700.0) return 1.0 / k;
    return 1.0 / k - 1.0 / expm1(k);
}

double sp_cells_air_effectiveness(double conductance, double capacity_rate)
{
    return capacity_rate > 0.0 ? -expm1(-conductance / capacity_rate) : 1.0;
}

double sp_cells_rejection(int n, double coolant, double coolant_rate, double air, double air_rate)
{
    if (!(coolant > 0.0 && air > 0.0 && coolant_rate > 0.0 && air_rate > 0.0)) return 0.0;
    double to_air = air_rate * sp_cells_air_effectiveness(air, air_rate);
    double joint = coolant * to_air / (coolant + to_air) / n;
    double w = sp_cells_weight(coolant / n / coolant_rate);
    double left = (coolant_rate - joint * w) / (coolant_rate + joint * (1.0 - w)); /* of T - T_air per cell */
    return coolant_rate * -expm1(n * log(left));
}
