/* Inlet lip, boundary layer, spillage. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/inlet.h"

#include <math.h>
#include <stddef.h>

double sp_lip_loss(double k, double density, double inlet_velocity, double air_velocity)
{
    double excess = inlet_velocity - (air_velocity < 0.0 ? 0.0 : air_velocity);
    return excess <= 0.0 ? 0.0 : 0.5 * k * density * excess * excess;
}

double sp_lip_coefficient(double radius_ratio)
{
    static const struct {
        double ratio, k;
    } knots[] = {{0.00, 0.50}, {0.01, 0.44}, {0.02, 0.37}, {0.03, 0.31}, {0.04, 0.26}, {0.05, 0.22},
                 {0.06, 0.20}, {0.08, 0.15}, {0.12, 0.09}, {0.16, 0.06}, {0.20, 0.03}};
    const size_t last = sizeof knots / sizeof *knots - 1;
    if (!(radius_ratio >= 0.0)) return NAN;
    if (radius_ratio >= knots[last].ratio) return knots[last].k;
    size_t i = 0;
    while (radius_ratio >= knots[i + 1].ratio)
        i++;
    double w = (radius_ratio - knots[i].ratio) / (knots[i + 1].ratio - knots[i].ratio);
    return (1.0 - w) * knots[i].k + w * knots[i + 1].k;
}

double sp_layer_recovery(double height, double thickness)
{
    if (!(height > 0.0 && thickness >= 0.0 && isfinite(height))) return NAN;
    if (height <= thickness) return 0.8 * pow(height / thickness, 2.0 / 7.0);
    /* energy thickness 0.175 d over what the displacement thickness d/8 leaves of the slot */
    return 1.0 - 0.175 * thickness / (height - 0.125 * thickness);
}

/* Straight lines; level beyond the last pair, and below the first unless the table rises from there. */
static double of_table(const struct sp_table *t, double x)
{
    size_t i = 0, last = t->rows - 1;
    const double *c = t->cell;
    if (last == 0 || x >= c[2 * last]) return c[2 * last + 1];
    if (x <= c[0] && c[3] <= c[1]) return c[1];
    while (x > c[2 * i + 2])
        ++i;
    return c[2 * i + 1] + (c[2 * i + 3] - c[2 * i + 1]) * (x - c[2 * i]) / (c[2 * i + 2] - c[2 * i]);
}

double sp_inlet_recovery(const struct sp_inlet *d, double capture_ratio)
{
    double eta = d->recovery;
    if (d->recovery_table.rows) eta = of_table(&d->recovery_table, fmax(capture_ratio, 0.0));
    if (d->layer_thickness > 0.0 && eta > 0.0) eta *= sp_layer_recovery(d->height, d->layer_thickness);
    return eta;
}

bool sp_inlet_recovery_single(const struct sp_table *t)
{
    double before = INFINITY;
    for (size_t i = 1; i < t->rows; ++i) {
        double slope = (t->cell[2 * i + 1] - t->cell[2 * i - 1]) / (t->cell[2 * i] - t->cell[2 * i - 2]);
        if (slope > 0.0 && slope > before * (1.0 + 1e-9)) return false;
        before = slope;
    }
    return true;
}

double sp_inlet_area(const struct sp_inlet *d)
{
    return d->area * (1.0 - d->blocked);
}

double sp_layer_thickness(double x, double velocity, double kinematic_viscosity)
{
    if (!(x >= 0.0 && velocity > 0.0 && kinematic_viscosity > 0.0)) return NAN;
    if (x == 0.0) return 0.0;
    return 0.37 * x * pow(velocity * x / kinematic_viscosity, -0.2);
}

double sp_spill_drag(double q, double inlet_area, double capture_ratio, double suction)
{
    if (capture_ratio >= 1.0) return 0.0;
    double short_of_full = 1.0 - (capture_ratio < 0.0 ? 0.0 : capture_ratio);
    return (1.0 - suction) * q * inlet_area * short_of_full * short_of_full;
}
