/* Atmosphere, moist air, film properties of dry air. SPDX-License-Identifier: GPL-3.0-or-later */
#include "swirlpot/fluid.h"

#include <math.h>

/* US Standard Atmosphere 1976, troposphere. */
static const double sea_pressure = 101325.0;
static const double sea_temperature = 288.15;
static const double lapse = 0.0065; /* K per geopotential m */
static const double earth_radius = 6356766.0;
static const double lowest = -2000.0, highest = 11000.0; /* geometric m */

static double exponent(void)
{
    return SP_GRAVITY / (SP_R_DRY * lapse);
}

static double geopotential(double z)
{
    return earth_radius * z / (earth_radius + z);
}

/* NaN fails both comparisons and so passes through. */
static double held(double x, double low, double high)
{
    if (x < low) return low;
    return x > high ? high : x;
}

double sp_isa_temperature(double z)
{
    if (!(z >= lowest && z <= highest)) return NAN;
    return sea_temperature - lapse * geopotential(z);
}

double sp_isa_pressure(double z)
{
    return sea_pressure * pow(sp_isa_temperature(z) / sea_temperature, exponent());
}

double sp_isa_altitude(double p)
{
    if (!(p > 0.0)) return NAN;
    double H = sea_temperature / lapse * (1.0 - pow(p / sea_pressure, 1.0 / exponent()));
    double z = earth_radius * H / (earth_radius - H);
    const double slack = 1e-6; /* m: the pressure of an end of the range must come back */
    if (!(z >= lowest - slack && z <= highest + slack)) return NAN;
    return held(z, lowest, highest);
}

/* Magnus form as in WMO practice: 611.2 exp(17.62 t / (243.12 + t)), -45..60 degC. */
double sp_vapour_saturation(double T)
{
    if (!(T >= 228.0 && T <= 333.2)) return NAN;
    double t = T - SP_ZERO_C;
    return 611.2 * exp(17.62 * t / (243.12 + t));
}

/* Mass fraction of vapour at vapour pressure e in the whole p. */
static double vapour_fraction(double e, double p)
{
    double vapour = e / SP_R_VAPOUR;
    return vapour / ((p - e) / SP_R_DRY + vapour);
}

struct sp_moist sp_moist_air(double T, double p, double humidity)
{
    if (!(T > 0.0 && p > 0.0 && humidity >= 0.0 && humidity <= 1.0)) return (struct sp_moist){NAN, NAN};
    /* Dry air asks for no saturation pressure and so has no limit of temperature. */
    double e = humidity > 0.0 ? humidity * sp_vapour_saturation(T) : 0.0;
    if (e > 0.5 * p) e = 0.5 * p;
    double x = vapour_fraction(e, p);
    return (struct sp_moist){(1.0 - x) * SP_R_DRY + x * SP_R_VAPOUR,
                             (1.0 - x) * SP_CP_DRY + x * SP_CP_VAPOUR};
}

double sp_air_density(double T, double p, double humidity)
{
    return p / (sp_moist_air(T, p, humidity).R * T);
}

/* Films: fitted 240..420 K to the reference equations of Lemmon et al. (2000, 2004). */
static double film_range(double T)
{
    return held(T, 240.0, 420.0);
}

double sp_air_viscosity(double T)
{
    T = film_range(T);
    return 1.4923e-6 * T * sqrt(T) / (T + 118.06);
}

double sp_air_sutherland(double T)
{
    return 1.458e-6 * T * sqrt(T) / (T + 110.4);
}

double sp_air_conductivity(double T)
{
    T = film_range(T);
    return 7.850e-4 + T * (9.624e-5 - 3.642e-8 * T);
}

double sp_air_cp_film(double T)
{
    T = film_range(T);
    return 1032.35 + T * (-0.20993 + 4.1104e-4 * T);
}

double sp_air_prandtl(double T)
{
    return sp_air_viscosity(T) * sp_air_cp_film(T) / sp_air_conductivity(T);
}
