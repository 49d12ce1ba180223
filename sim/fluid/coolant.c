/* Properties of a coolant once mixed. SPDX-License-Identifier: GPL-3.0-or-later */
#include "swirlpot/fluid.h"

#include <math.h>

/* x = t/100 held to the range of the fits; NaN passes through. */
static double fit_x(const struct sp_coolant *c, double T)
{
    double t = T - SP_ZERO_C;
    if (t < c->t_low) t = c->t_low;
    if (t > c->t_high) t = c->t_high;
    return 0.01 * t;
}

static double polynomial(const double *a, double x)
{
    double sum = a[SP_COOLANT_TERMS - 1];
    for (int i = SP_COOLANT_TERMS - 2; i >= 0; i--)
        sum = sum * x + a[i];
    return sum;
}

double sp_coolant_density(const struct sp_coolant *c, double T)
{
    return polynomial(c->density, fit_x(c, T));
}

double sp_coolant_cp(const struct sp_coolant *c, double T)
{
    return polynomial(c->cp, fit_x(c, T));
}

double sp_coolant_conductivity(const struct sp_coolant *c, double T)
{
    return polynomial(c->conductivity, fit_x(c, T));
}

double sp_coolant_viscosity(const struct sp_coolant *c, double T)
{
    return 1e-3 * exp(polynomial(c->ln_viscosity, fit_x(c, T)));
}

double sp_coolant_prandtl(const struct sp_coolant *c, double T)
{
    return sp_coolant_cp(c, T) * sp_coolant_viscosity(c, T) / sp_coolant_conductivity(c, T);
}

double sp_coolant_enthalpy(const struct sp_coolant *c, double T)
{
    double x = fit_x(c, T), sum = 0.0;
    for (int i = SP_COOLANT_TERMS - 1; i >= 0; i--)
        sum = sum * x + c->cp[i] / (i + 1);
    double outside = (T - SP_ZERO_C) - 100.0 * x; /* K beyond the range, where cp is held */
    return 100.0 * x * sum + outside * polynomial(c->cp, x);
}

double sp_coolant_freezing(const struct sp_coolant *c)
{
    static const double degrees[] = {0.0, -3.9, -8.9, -15.7, -24.8, -37.1, -52.0}; /* at 0, 10, .. 60 % by volume */
    double tenths = fmin(fmax(c->share * 10.0, 0.0), 6.0);
    int below = tenths < 6.0 ? (int)tenths : 5;
    double t = degrees[below] + (tenths - below) * (degrees[below + 1] - degrees[below]);
    return SP_ZERO_C + (c->kind == SP_PROPYLENE_GLYCOL ? t * 33.0 / 37.1 : t);
}
