/* The pump of the coolant loop: how fast it turns, and what cavitation leaves of its rise.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/loop.h"

#include "part/fan.h"

#include <math.h>

static const double gravity = 9.80665;          /* m/s2 */
static const double reference_density = 1000.0; /* kg/m3 of a resistance */
static const double head_left = 0.97;           /* where available equals required: the definition */
static const double enough = 4.0;               /* times required: 1e-15 of the head would be missing there */
static const double head_softness = 0.1;        /* m over which the available head comes to nil; choice */
static const double pulse_blend = 1.0; /* K below its target over which a resting pump comes on; choice */

/* ---- speed ----------------------------------------------------------------------------------------- */

static double clamp(double x)
{
    return fmin(fmax(x, 0.0), 1.0);
}

/* Share of full speed that the controller asks for. */
static double asked(const struct sp_pump *p, const struct sp_pump_wish *w)
{
    switch (p->law) {
    case SP_PUMP_OVER_TEMPERATURE:
        return p->least + (1.0 - p->least) * clamp((w->coolant - p->from) / (p->to - p->from));
    case SP_PUMP_OVER_SPEED: return fmax(p->least, clamp(w->engine_speed / p->full_at));
    case SP_PUMP_PULSING: return w->pulse_off ? clamp((w->coolant - p->target) / pulse_blend + 1.0) : 1.0;
    default: return 1.0;
    }
}

double sp_pump_speed(const struct sp_design *d, const struct sp_pump_wish *wish)
{
    const struct sp_pump *p = &d->pump;
    if (p->failed) return 0.0;
    if (!p->electric) return wish->engine_on ? p->ratio * wish->engine_speed / p->speed : 0.0;
    if (!wish->allowed) return 0.0;
    return sp_motor_speed(wish->volts, p->rated_voltage) * asked(p, wish);
}

/* ---- cavitation ------------------------------------------------------------------------------------ */

double sp_npsh_available(const struct sp_design *d, double tank, double inlet, double flow)
{
    const struct sp_pump *p = &d->pump;
    double rho = sp_coolant_density(&d->coolant.fluid, inlet), drop = 0.0;
    if (p->suction_drop > 0.0) {
        double share = flow / p->suction_flow;
        drop = p->suction_drop * rho / reference_density * share * fabs(share);
    }
    return (tank - drop - sp_coolant_vapour_pressure(&d->coolant.fluid, inlet)) / (rho * gravity);
}

/* max(x, 0) with a rounded corner, so that flow dies away smoothly where the inlet comes to boil. */
static double above_nil(double x)
{
    double z = x / head_softness;
    return z > 36.0 ? x : head_softness * log1p(exp(z));
}

double sp_npsh_factor(double available, double required)
{
    if (!(required > 0.0)) return 1.0;
    double ratio = above_nil(available) / required;
    if (ratio >= enough) return 1.0;
    double power = log(2.0) / -log(head_left); /* (1 + 1)^(-1/power) = head_left */
    return pow(1.0 + pow(ratio, -power), -1.0 / power);
}
