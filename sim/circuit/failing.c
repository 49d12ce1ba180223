/* How near a cooling system is to failing. SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/failing.h"

#include <math.h>

static const double bar = 1e5, fahrenheit = 1.8;

/* Bounds of the correlation. */
static double in_bar(double pressure)
{
    return fmin(fmax(pressure / bar, 1.0), 138.0);
}

static double power_of(double p)
{
    return 2.16 / pow(p, 0.0234);
}

double sp_boil_onset_flux(double pressure, double over)
{
    double p = in_bar(pressure);
    return over > 0.0 ? 1082.0 * pow(p, 1.156) * pow(fahrenheit * over, power_of(p)) : 0.0;
}

double sp_boil_onset_excess(double pressure, double flux)
{
    double p = in_bar(pressure);
    return flux > 0.0 ? pow(flux / (1082.0 * pow(p, 1.156)), 1.0 / power_of(p)) / fahrenheit : 0.0;
}

double sp_local_boil_margin(double pressure, double boils, double wall, double flux)
{
    return boils + sp_boil_onset_excess(pressure, flux) - wall;
}
