/* Diffuser loss and stall. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/diffuser.h"

#include <math.h>

static const double pi = 3.14159265358979323846;
static const double clean_loss = 0.15; /* c that no core resistance lowers */

static double square(double x)
{
    return x * x;
}

double sp_step_loss(double area_ratio)
{
    if (!(area_ratio >= 1.0)) return NAN;
    return square(1.0 - 1.0 / area_ratio);
}

double sp_cone_angle(double inlet_area, double outlet_area, double length)
{
    return 2.0 * atan((sqrt(outlet_area / pi) - sqrt(inlet_area / pi)) / length);
}

double sp_stall_angle(double length_ratio)
{
    if (length_ratio < 1.5) length_ratio = 1.5;
    if (length_ratio > 40.0) length_ratio = 40.0;
    return 28.0 * pi / 180.0 * pow(length_ratio, -0.45);
}

/* Factor on (1 - 1/AR)^2. Small diameter ratios, beta < 0.5, carry the terms in `narrow`. */
static double cone_factor(double degrees, double beta4)
{
    double narrow = beta4 < 0.0625 ? 3.28 * (0.0625 - beta4) : 0.0;
    if (degrees <= 20.0) return 8.30 * pow(tan(degrees * pi / 360.0), 1.75);
    if (degrees <= 60.0)
        return 1.366 * sqrt(sin(2.0 * pi * (degrees - 15.0) / 180.0)) - 0.170 -
               narrow * sqrt(0.025 * (degrees - 20.0));
    double wide = beta4 < 0.0625 ? 12.8 * beta4 * sqrt(beta4) : 0.20;
    return 1.205 - narrow - wide * sqrt((degrees - 60.0) / 120.0);
}

double sp_cone_loss(double area_ratio, double angle, double darcy)
{
    if (!(area_ratio >= 1.0 && angle > 0.0 && angle <= pi && darcy >= 0.0)) return NAN;
    double beta4 = 1.0 / square(area_ratio), degrees = angle * 180.0 / pi;
    double loss = cone_factor(degrees, beta4) * sp_step_loss(area_ratio);
    if (degrees <= 60.0) loss += 0.125 * darcy * (1.0 - beta4) / sin(0.5 * angle);
    return loss;
}

static bool possible(const struct sp_diffuser *d)
{
    return d->inlet_area > 0.0 && d->outlet_area >= d->inlet_area && isfinite(d->outlet_area) &&
           (d->kind == SP_DIFFUSER_STEP || (d->length >= 0.0 && isfinite(d->length))) && d->darcy >= 0.0 && isfinite(d->darcy) &&
           (d->kind != SP_DIFFUSER_PLANE || (d->inlet_height > 0.0 && isfinite(d->inlet_height)));
}

/* Opening angle and width that the stall line is read with. */
static double opening(const struct sp_diffuser *d, double *width)
{
    if (d->kind == SP_DIFFUSER_PLANE) {
        *width = d->inlet_height;
        double growth = d->inlet_height * (d->outlet_area / d->inlet_area - 1.0);
        return 2.0 * atan(0.5 * growth / d->length);
    }
    *width = sqrt(d->inlet_area / pi);
    return sp_cone_angle(d->inlet_area, d->outlet_area, d->length);
}

struct sp_diffuser_loss sp_diffuser_loss(const struct sp_diffuser *d, double core_loss)
{
    if (!possible(d) || (d->damped && !(core_loss >= 0.0))) return (struct sp_diffuser_loss){NAN, NAN, false};
    double area_ratio = d->outlet_area / d->inlet_area, step = sp_step_loss(area_ratio);
    if (step == 0.0) return (struct sp_diffuser_loss){0.0, 0.0, false};
    if (d->kind == SP_DIFFUSER_STEP || d->length == 0.0) return (struct sp_diffuser_loss){step, pi, true};

    double width, angle = opening(d, &width);
    double cone = sp_cone_angle(d->inlet_area, d->outlet_area, d->length);
    if (!(cone > 0.0)) return (struct sp_diffuser_loss){0.0, angle, false}; /* opening lost to rounding */
    double loss = sp_cone_loss(area_ratio, cone, d->darcy > 0.0 ? d->darcy : SP_DIFFUSER_DARCY);
    double c = loss / step;
    if (d->damped && c > clean_loss) loss = step * (clean_loss + (c - clean_loss) / (1.0 + core_loss));
    return (struct sp_diffuser_loss){loss, angle, angle > sp_stall_angle(d->length / width)};
}
