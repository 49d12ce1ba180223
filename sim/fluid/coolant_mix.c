/* Builds a coolant of fixed mix from the tabulated mixes. SPDX-License-Identifier: GPL-3.0-or-later
 *
 * Every fit is a polynomial in x = t/100, t in degC.
 * Water: fitted to IAPWS-IF97 at 0.3 MPa, 0..130 degC (density 0.033 %, cp 0.15 %, conductivity
 * 0.19 %, viscosity 0.38 %).
 * Glycols: inhibited, after the ASHRAE secondary-coolant tables, shares by volume (ethylene: density
 * 0.001 %, cp 0.015 %, conductivity 0.16 %, viscosity 1.0 % of the table, which ends at 125 degC).
 * The conductivity of 50 % propylene glycol is one remembered value, 0.35 to 0.38 W/mK. */
#include "swirlpot/fluid.h"

#include <math.h>

static const double highest = 140.0; /* degC; the last 10 to 15 K are extrapolated */
static const double molar_water = 18.0153, molar_ethylene = 62.068, molar_propylene = 76.095; /* g/mol */

/* One tabulated mix. */
struct mix {
    double share; /* by volume */
    double mass;  /* mass fraction of glycol */
    double t_low; /* degC: freezing point or lower end of the table, whichever is higher */
    double density[SP_COOLANT_TERMS], cp[SP_COOLANT_TERMS];
    double conductivity[SP_COOLANT_TERMS], ln_viscosity[SP_COOLANT_TERMS];
};

#define WATER_FITS                                                                                           \
    {1000.28, -1.00767, -51.3622, 10.4206}, {4212.35, -169.452, 223.819, -49.1156},                          \
        {0.556842, 0.229626, -0.135282, 0.0258325},                                                          \
    {                                                                                                        \
        0.579119, -3.33873, 2.56604, -1.43667, 0.362961                                                      \
    }

static const struct mix ethylene[] = {
    {0.0, 0.0, 0.0, WATER_FITS},
    {0.3,
     0.324,
     -15.0,
     {1051.78, -27.7743, -24.3162},
     {3588.61, 283.667},
     {0.42908, 0.133727, -0.0591133},
     {1.42340, -3.68383, 2.90723, -2.36208, 1.35035, -0.34940}},
    {0.4,
     0.425,
     -24.0,
     {1066.80, -30.7379, -24.3234},
     {3400.99, 335.444},
     {0.394737, 0.110669, -0.048256},
     {1.76230, -4.01677, 3.81952, -3.90839, 2.50888, -0.67026}},
    {0.5,
     0.524,
     -30.0,
     {1081.08, -33.8140, -24.3219},
     {3203.38, 386.156},
     {0.363772, 0.0901658, -0.0381595},
     {2.08595, -4.17051, 3.63543, -3.75307, 2.57819, -0.73151}},
    {0.6,
     0.622,
     -30.0,
     {1094.64, -36.9825, -24.3249},
     {2996.61, 436.023},
     {0.33622, 0.0721748, -0.0296594},
     {2.48886, -4.55996, 2.96008, -1.78067, 0.81799, -0.18600}},
};

/* Mass fraction of 50 % propylene glycol chosen so that the mole fraction of water is 0.803. */
static const struct mix propylene[] = {
    {0.0, 0.0, 0.0, WATER_FITS},
    {0.5,
     0.5089016,
     -30.0,
     {1052.70, -44.0366, -25.6715},
     {3454.72, 385.855},
     {0.36},
     {2.91249, -5.88965, 4.46798, -2.47466, 0.91456, -0.16260}},
};

static void blend(double out[SP_COOLANT_TERMS], const double *a, const double *b, double w)
{
    for (int i = 0; i < SP_COOLANT_TERMS; i++)
        out[i] = (1.0 - w) * a[i] + w * b[i];
}

/* The mole fraction of water at mass fraction w of a glycol. */
static double water_mole(double w, double molar_glycol)
{
    double water = (1.0 - w) / molar_water;
    return water / (water + w / molar_glycol);
}

/* Fills from the two neighbours of `share` in a table of `count` mixes. */
static void between(struct sp_coolant *out, const struct mix *table, size_t count, double molar_glycol)
{
    size_t i = 0;
    while (i + 2 < count && out->share > table[i + 1].share)
        i++;
    const struct mix *a = &table[i], *b = &table[i + 1];
    double w = (out->share - a->share) / (b->share - a->share);
    blend(out->density, a->density, b->density, w);
    blend(out->cp, a->cp, b->cp, w);
    blend(out->conductivity, a->conductivity, b->conductivity, w);
    blend(out->ln_viscosity, a->ln_viscosity, b->ln_viscosity, w);
    out->t_low = (1.0 - w) * a->t_low + w * b->t_low;
    out->t_high = highest;
    out->water_mole = water_mole((1.0 - w) * a->mass + w * b->mass, molar_glycol);
}

bool sp_coolant_mix(enum sp_coolant_kind kind, double share, struct sp_coolant *out)
{
    double most = kind == SP_ETHYLENE_GLYCOL ? 0.6 : kind == SP_PROPYLENE_GLYCOL ? 0.5 : 0.0;
    const double slack = 1e-12; /* 60 % read as 60 times 0.01 */
    if (!(share >= 0.0 && share <= most + slack)) return false;
    *out = (struct sp_coolant){.kind = kind, .share = fmin(share, most)};
    if (kind == SP_PROPYLENE_GLYCOL)
        between(out, propylene, sizeof propylene / sizeof *propylene, molar_propylene);
    else
        between(out, ethylene, sizeof ethylene / sizeof *ethylene, molar_ethylene);
    return true;
}
