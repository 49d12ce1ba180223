/* Vapour pressure and boiling point of a coolant. SPDX-License-Identifier: GPL-3.0-or-later
 *
 * Modified Raoult with activity 1: P = x_w P_water + (1 - x_w) P_glycol. Water by the three-constant
 * Antoine form log10 P[mmHg] = 7.96682 - 1668.21/(t + 228), within 0.3 % of IAPWS-IF97 at 40..150 degC.
 * The vapour of propylene glycol is neglected. */
#include "swirlpot/fluid.h"

#include <math.h>

static const double ln10 = 2.302585092994045684;
static const double antoine_b = 1668.21;
static const double antoine_zero = SP_ZERO_C - 228.0; /* K, pole of the Antoine form */
static const double ln_antoine = 7.96682 * 2.302585092994045684 + 4.892770255077688; /* + ln(133.3224 Pa) */

static double water_pressure(double T)
{
    return exp(ln_antoine - ln10 * antoine_b / (T - antoine_zero));
}

static double water_boiling(double p)
{
    return antoine_zero + ln10 * antoine_b / (ln_antoine - log(p));
}

/* Ethylene glycol [Pa], ChemSep form. */
static double glycol_pressure(double T)
{
    return exp(68.11797 - 9617.267 / T - 5.83171 * log(T) - 1.13705e-6 * T * T);
}

static bool has_glycol_vapour(const struct sp_coolant *c)
{
    return c->kind == SP_ETHYLENE_GLYCOL && c->water_mole < 1.0;
}

double sp_coolant_vapour_pressure(const struct sp_coolant *c, double T)
{
    /* Held where the fits would lose sense: far outside anything that can be asked in earnest. */
    if (T < 173.15) T = 173.15;
    if (T > 973.15) T = 973.15;
    double p = c->water_mole * water_pressure(T);
    if (has_glycol_vapour(c)) p += (1.0 - c->water_mole) * glycol_pressure(T);
    return p;
}

double sp_coolant_boiling(const struct sp_coolant *c, double p)
{
    if (!(p >= 1e3 && p <= 5e6)) return NAN;
    double T = water_boiling(p / c->water_mole);
    if (!has_glycol_vapour(c)) return T;
    /* Newton on ln P over 1/(T - pole), along which ln P is all but straight: the start is at most a
     * few K off, each step squares a small error. */
    for (int pass = 0; pass < 8; pass++) {
        double above = T - antoine_zero;
        double water = c->water_mole * water_pressure(T);
        double glycol = (1.0 - c->water_mole) * glycol_pressure(T);
        double glycol_slope = glycol * ((9617.267 / T - 5.83171) / T - 2.2741e-6 * T);
        double slope = (water * ln10 * antoine_b / (above * above) + glycol_slope) / (water + glycol);
        /* d ln P / d(1/above) = -above^2 slope */
        double next = above / (1.0 - log(p / (water + glycol)) / (above * slope));
        double step = next - above;
        T = antoine_zero + next;
        if (fabs(step) < 1e-5) break;
    }
    return T;
}
