/* Fans. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/fan.h"

#include <math.h>
#include <string.h>

static const double catalogue_density = 1.2; /* kg/m3 of fan curves */

bool sp_fan_build(const struct sp_fan *d, double face, struct sp_fan_ready *out, const struct sp_place *at,
                  struct sp_complaints *complaints)
{
    memset(out, 0, sizeof *out);
    if (!d->fitted) return true;
    out->design = d;
    out->annulus = face;
    if (d->diameter > 0.0) out->annulus = d->count * M_PI / 4.0 * (d->diameter * d->diameter - d->hub * d->hub);
    if (d->static_basis && !(d->diameter > 0.0)) {
        sp_complain(complaints, at, "a static curve without a diameter",
                    "duct.fan.diameter, from which the fan's outlet head is taken", NULL);
        return false;
    }
    return sp_curve_build(&d->curve, &out->curve, at, complaints);
}

void sp_fan_free(struct sp_fan_ready *f)
{
    sp_curve_free(&f->curve);
}

/* A static curve that ends flatter than the outlet head grows would have total pressure rise with flow for
 * ever, and a standing fan drive the air: past the curve's end total pressure is at most that of the end. */
static double most_total(const struct sp_fan_ready *f, double speed, double flow, double density)
{
    double end = speed * f->curve.free_flow;
    if (flow <= end * f->design->count) return INFINITY;
    double v = end * f->design->count / f->annulus;
    return density / catalogue_density * sp_curve_at(&f->curve, speed, end) + 0.5 * density * v * v;
}

double sp_fan_pressure(const struct sp_fan_ready *f, double speed, double mass_flow, double density)
{
    if (!f->design) return 0.0;
    double flow = mass_flow / density;
    double head = 0.5 * density * (flow / f->annulus) * (flow / f->annulus);
    double windmill = f->design->windmill_loss * head;
    double added = density / catalogue_density * sp_curve_at(&f->curve, fmax(speed, 0.0), flow / f->design->count);
    if (flow < 0.0) return added + windmill;
    if (f->design->static_basis) added = fmin(added + head, most_total(f, fmax(speed, 0.0), flow, density));
    return fmax(added, -windmill);
}

double sp_motor_speed(double voltage, double rated)
{
    return pow(voltage / rated, 0.9);
}

double sp_fan_power(const struct sp_fan *d, double speed)
{
    return d->fitted && speed > 0.0 ? d->count * d->power * speed * speed * speed : 0.0;
}
