/* Uneven air on a core. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/unevenness.h"

#include <math.h>
#include <stddef.h>

double sp_uneven_by_angle(double angle)
{
    static const struct {
        double degrees, uneven;
    } knot[] = {{0, .10}, {30, .12}, {45, .17}, {60, .27}, {70, .38}};
    const size_t last = sizeof knot / sizeof *knot - 1;
    double degrees = fabs(angle) * 180.0 / M_PI;
    size_t i = 0;
    while (i + 1 < last && degrees > knot[i + 1].degrees)
        ++i;
    double w = (degrees - knot[i].degrees) / (knot[i + 1].degrees - knot[i].degrees);
    return knot[i].uneven + w * (knot[i + 1].uneven - knot[i].uneven);
}

double sp_uneven_joint(double a, double b)
{
    return fmin(b == 0.0 ? a : sqrt(a * a + b * b), SP_UNEVEN_MOST);
}

/* One half: its air takes heat from its wall, its wall from its half of the inside. W/K to entering air. */
static double half(double share, double conductance, double rate, double inside)
{
    double air = 0.5 * share * rate * -expm1(-conductance / (share * rate));
    return air * 0.5 * inside / (air + 0.5 * inside);
}

double sp_uneven_conductance(double s, double fast, double slow, double rate, double inside)
{
    double joint = half(1.0 + s, fast, rate, inside) + half(1.0 - s, slow, rate, inside);
    double air = joint * inside / (inside - joint); /* of an even stream against one wall */
    return -rate * log(fmax(1.0 - air / rate, 1e-15));
}

double sp_jet_unevenness(double area_ratio, double core_loss, double share)
{
    if (!(share > 0.0 && share < 1.0 && core_loss > 0.0)) return 0.0;
    double a = area_ratio * area_ratio / core_loss, jet = 1.0 / share, rest = 0.0;
    if (jet * jet > a) { /* (1 - (1 - share) rest)^2 = share^2 (rest^2 + a), the root below 1 */
        double A = 1.0 - 2.0 * share, B = 1.0 - share, C = 1.0 - share * share * a;
        rest = C / (B + sqrt(fmax(B * B - A * C, 0.0)));
        jet = (1.0 - (1.0 - share) * rest) / share;
    }
    double up = jet - 1.0, down = 1.0 - rest;
    return fmin(sqrt(share * up * up + (1.0 - share) * down * down), SP_UNEVEN_MOST);
}
