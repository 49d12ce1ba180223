/* Header tank. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/tank.h"

#include <math.h>

static const double opening = 1.0e-8;  /* m3/s per Pa of excess: 1 l/s at 1 bar; common practice */
static const double open_rise = 0.1, least_rise = 5e3; /* of the cap's setting; Pa. Common practice */
static const double softness = 500.0;  /* Pa over which the cap's seat lifts */

struct sp_tank_state sp_tank_state(const struct sp_tank *t, const struct sp_tank_inputs *in)
{
    /* With x = p - p_v: x (base + C x) = n R T. */
    double base = in->system - in->liquid + t->compliance * (in->vapour - in->ambient);
    double nRT = fmax(in->air, 0.0) * SP_R_MOLAR * in->temperature;
    double root = sqrt(base * base + 4.0 * t->compliance * nRT);
    double x = base >= 0.0 ? 2.0 * nRT / (base + root) : (root - base) / (2.0 * t->compliance);
    if (base == 0.0 && nRT == 0.0) x = 0.0;
    return (struct sp_tank_state){in->vapour + x, base + t->compliance * x};
}

double sp_tank_most(const struct sp_tank *t, double ambient)
{
    return ambient + t->cap + fmax(open_rise * t->cap, least_rise);
}

double sp_tank_filling(const struct sp_tank *t, double vapour, double p)
{
    return fmax(p - vapour, 0.0) * t->air_space / (SP_R_MOLAR * t->fill_temperature);
}

/* max(x, 0) with a rounded corner: ln(1 + e^(x/s)) s, cut to exactly nil well below. */
static double soft_excess(double x)
{
    double z = x / softness;
    if (z < -30.0) return 0.0;
    return z > 30.0 ? x : softness * log1p(exp(z));
}

struct sp_tank_vent sp_tank_vent(const struct sp_tank *t, const struct sp_tank_inputs *in,
                                 const struct sp_tank_state *s, double liquid_left)
{
    double out = opening * soft_excess(s->pressure - in->ambient - t->cap);
    double in_flow = opening * soft_excess(in->ambient - t->vacuum - s->pressure);
    double gas = fmax(s->gas, 0.0), full = gas / SP_TANK_LAST_GAS;
    double wet = 1.0 / (1.0 + full * full * full * full); /* liquid in what goes out */
    double left = fmax(liquid_left, 0.0);
    double per_volume = gas > 0.0 ? fmax(in->air, 0.0) / (gas + SP_TANK_LAST_GAS) : 0.0;
    return (struct sp_tank_vent){
        .air = out * per_volume - in_flow * in->ambient / (SP_R_MOLAR * in->temperature),
        .liquid = out * wet * left / (left + SP_TANK_LAST_GAS),
    };
}
