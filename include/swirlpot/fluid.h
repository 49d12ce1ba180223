/* swirlpot/fluid.h - moist air, the atmosphere, coolants: pure functions.
 *
 * SI and kelvin. Sources stand beside each function; docs/model.md gives the equations.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SWIRLPOT_FLUID_H
#define SWIRLPOT_FLUID_H

#include "swirlpot/base.h"

#ifdef __cplusplus
extern "C" {
#endif

#define SP_R_DRY 287.05287    /* J/kgK, US Standard Atmosphere 1976 */
#define SP_R_VAPOUR 461.523   /* J/kgK */
#define SP_CP_DRY 1004.685    /* J/kgK, 3.5 R */
#define SP_CP_VAPOUR 1872.0   /* J/kgK */
#define SP_R_MOLAR 8.314462618 /* J/mol K, exact in the SI of 2019 */
#define SP_ZERO_C 273.15      /* K */
#define SP_GRAVITY 9.80665    /* m/s2 */

/* ---- atmosphere and moist air ---------------------------------------------------------------- */

/* Pressure [Pa] of the standard atmosphere at geometric altitude z [m], -2000..11000
 * (US Standard Atmosphere 1976, geopotential height from an earth radius of 6356766 m). */
SP_API double sp_isa_pressure(double z);

/* Temperature [K] of the standard atmosphere at geometric altitude z [m]. */
SP_API double sp_isa_temperature(double z);

/* Geometric altitude [m] at which the standard atmosphere has pressure p [Pa]. */
SP_API double sp_isa_altitude(double p);

/* Saturation pressure of water vapour [Pa] over water at T [K], Magnus form, 228..333 K. */
SP_API double sp_vapour_saturation(double T);

/* Gas constant and heat capacity of moist air, by mass-fraction mixing. */
struct sp_moist { double R, cp; };

/* Moist air at T [K], p [Pa], relative humidity 0..1. The vapour pressure is capped at p/2. */
SP_API struct sp_moist sp_moist_air(double T, double p, double humidity);

/* Density [kg/m3] = p/(R T). */
SP_API double sp_air_density(double T, double p, double humidity);

/* Film properties of dry air, fitted 240..420 K (held at the ends outside):
 * viscosity [Pa s], conductivity [W/mK], heat capacity [J/kgK], Prandtl number. */
SP_API double sp_air_viscosity(double T);

/* Viscosity [Pa s] by Sutherland's formula, US Standard Atmosphere 1976: for pressure drops. T > 0 K. */
SP_API double sp_air_sutherland(double T);
SP_API double sp_air_conductivity(double T);
SP_API double sp_air_cp_film(double T);
SP_API double sp_air_prandtl(double T);

#define SP_COOLANT_REFERENCE 1030.95 /* kg/m3, 50/50 ethylene glycol at 90 degC, ASHRAE */

/* ---- coolants --------------------------------------------------------------------------------- */

enum sp_coolant_kind { SP_WATER, SP_ETHYLENE_GLYCOL, SP_PROPYLENE_GLYCOL };

enum { SP_COOLANT_TERMS = 6 };

/* A coolant of fixed mix: polynomials in t/100, t in degC, built once by sp_coolant_mix.
 * Below t_low and above t_high every property is held, enthalpy goes on with the held capacity. */
struct sp_coolant {
    enum sp_coolant_kind kind;
    double share;                        /* volume fraction of glycol, 0..0.6 */
    double t_low, t_high;                /* degC, range of the fits (high end 140) */
    double density[SP_COOLANT_TERMS];    /* kg/m3 */
    double cp[SP_COOLANT_TERMS];         /* J/kgK */
    double conductivity[SP_COOLANT_TERMS]; /* W/mK */
    double ln_viscosity[SP_COOLANT_TERMS]; /* ln of mPa s */
    double water_mole;                   /* mole fraction of water */
};

/* Builds a mix. Ethylene glycol 0..0.60 by volume, propylene glycol 0..0.50; properties linear in
 * volume fraction (ln of viscosity) between the tabulated mixes and water. Returns false outside. */
SP_API bool sp_coolant_mix(enum sp_coolant_kind kind, double share, struct sp_coolant *out);

SP_API double sp_coolant_density(const struct sp_coolant *c, double T);      /* kg/m3 */
SP_API double sp_coolant_cp(const struct sp_coolant *c, double T);           /* J/kgK */
SP_API double sp_coolant_conductivity(const struct sp_coolant *c, double T); /* W/mK */
SP_API double sp_coolant_viscosity(const struct sp_coolant *c, double T);    /* Pa s */
SP_API double sp_coolant_prandtl(const struct sp_coolant *c, double T);

/* Specific enthalpy [J/kg], 0 at 0 degC, the exact integral of sp_coolant_cp. */
SP_API double sp_coolant_enthalpy(const struct sp_coolant *c, double T);

/* Temperature [K] at which the mix begins to freeze: ethylene glycol 10..60 % after ASHRAE tables, linear between;
 * propylene glycol 50 % -33 degC, other shares in proportion to ethylene glycol's (a guess). */
SP_API double sp_coolant_freezing(const struct sp_coolant *c);

/* Vapour pressure [Pa] over the mix (modified Raoult, activity 1) and boiling point [K] at
 * pressure p [Pa], 1 kPa..5 MPa. The two are inverse to each other to 1e-9 relative. */
SP_API double sp_coolant_vapour_pressure(const struct sp_coolant *c, double T);
SP_API double sp_coolant_boiling(const struct sp_coolant *c, double p);

#ifdef __cplusplus
}
#endif
#endif
