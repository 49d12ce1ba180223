/* Heat from gas to jacket by a correlation over many engines. Equations in docs/model.md.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/correlation.h"

#include <math.h>

double sp_correlation_viscosity(double T)
{
    return 1.716e-5 * pow(T / 273.15, 1.5) * 383.55 / (T + 110.4);
}

double sp_correlation_conductivity(double T)
{
    return 0.0241 * pow(T / 273.15, 0.81);
}

double sp_correlation_gas(bool diesel, double phi)
{
    if (diesel) return 480.0 + 350.0 * fmin(fmax(phi, 0.2), 0.8);
    double off = fmin(fmax(phi, 0.75), 1.4) - 1.05;
    return 845.0 - 900.0 * off * off;
}

double sp_correlation_conductance(const struct sp_engine *e, double charge, double T)
{
    double area = e->cylinders * acos(-1.0) / 4.0 * e->bore * e->bore;
    double reynolds = fmax(charge, 0.0) / area * e->bore / sp_correlation_viscosity(T);
    double film = e->correlation_constant * pow(reynolds, 0.75) * sp_correlation_conductivity(T) / e->bore;
    return film * area;
}
