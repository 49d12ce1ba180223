/* Header tank. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/tank.h"

#include <math.h>

static const double gas_constant = 8.314462618; /* J/mol K */
static const double opening = 1.0e-8;  /* m3/s per Pa of excess: 1 l/s at 1 bar; common practice */
static const double softness = 500.0;  /* Pa over which the cap's seat lifts */
static const double last_gas = 2.0e-5; /* m3 of gas below which liquid goes out with it */

struct sp_tank_state sp_tank_state(const struct sp_tank *t, const struct sp_tank_inputs *in)
{
    /* With x = p - p_v: x (base + C x) = n R T. */
    double base = in->system - in->liquid + t->compliance * (in->vapour - in->ambient);
    double nRT = fmax(in->air, 0.0) * gas_constant * in->temperature;
    double root = sqrt(base * base + 4.0 * t->compliance * nRT);
    double x = base >= 0.0 ? 2.0 * nRT / (base + root) : (root - base) / (2.0 * t->compliance);
    if (base == 0.0 && nRT == 0.0) x = 0.0;
    return (struct sp_tank_state){in->vapour + x, base + t->compliance * x};
}

double sp_tank_filling(const struct sp_tank *t, double vapour, double p)
{
    return fmax(p - vapour, 0.0) * t->air_space / (gas_constant * t->fill_temperature);
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
    double gas = fmax(s->gas, 0.0), full = gas / last_gas;
    double wet = 1.0 / (1.0 + full * full * full * full); /* liquid in what goes out */
    double left = fmax(liquid_left, 0.0);
    double per_volume = gas > 0.0 ? fmax(in->air, 0.0) / (gas + last_gas) : 0.0;
    return (struct sp_tank_vent){
        .air = out * per_volume - in_flow * in->ambient / (gas_constant * in->temperature),
        .liquid = out * wet * left / (left + last_gas),
    };
}
