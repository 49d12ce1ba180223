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
    if (d->diameter > 0.0)
        out->annulus = d->count * M_PI / 4.0 * (d->diameter * d->diameter - d->hub * d->hub);
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

/* Blades that do not turn are a grid in the annulus, the same either way. */
static double locked(const struct sp_fan_ready *f, double flow, double head)
{
    return flow < 0.0 ? f->design->locked_loss * head : -f->design->locked_loss * head;
}

double sp_fan_pressure(const struct sp_fan_ready *f, double speed, double mass_flow, double density)
{
    if (!f->design) return 0.0;
    double flow = mass_flow / density;
    double head = 0.5 * density * (flow / f->annulus) * (flow / f->annulus);
    if (f->design->health == SP_FAN_LOCKED) return locked(f, flow, head);
    if (f->design->health == SP_FAN_DEAD) speed = 0.0;
    double windmill = f->design->windmill_loss * head;
    double added =
        density / catalogue_density * sp_curve_at(&f->curve, fmax(speed, 0.0), flow / f->design->count);
    if (flow < 0.0) return added + windmill;
    if (f->design->static_basis) added = fmin(added + head, most_total(f, fmax(speed, 0.0), flow, density));
    return fmax(added, -windmill);
}

double sp_motor_speed(double voltage, double rated)
{
    return pow(voltage / rated, 0.9);
}

/* With the plug at u of rated voltage the speed is u^0.9, power goes with its cube, and current, power over
 * voltage, is u^1.7 of the rated one: v = u + (drop/rated) u^1.7, convex and rising, solved from above. */
static double plug_voltage(double v, double drop)
{
    double u = v;
    for (int i = 0; i < 50 && u > 0.0; ++i) {
        double lost = drop * pow(u, 1.7), step = (u + lost - v) / (1.0 + 1.7 * lost / u);
        u -= step;
        if (fabs(step) <= 1e-15 * u) break;
    }
    return fmax(u, 0.0);
}

double sp_fan_full_speed(const struct sp_fan *d, double battery)
{
    if (d->health != SP_FAN_SOUND || !(battery > 0.0)) return 0.0;
    if (!(d->wiring_drop > 0.0)) return sp_motor_speed(battery, d->rated_voltage);
    return sp_motor_speed(plug_voltage(battery / d->rated_voltage, d->wiring_drop / d->rated_voltage), 1.0);
}

double sp_fan_current(const struct sp_fan *d, double speed, double battery)
{
    if (!(d->fitted && speed > 0.0 && battery > 0.0) || d->health != SP_FAN_SOUND) return 0.0;
    double power = d->power * speed * speed * speed;
    double wire = d->power > 0.0 ? d->wiring_drop * d->rated_voltage / d->power : 0.0; /* ohm */
    /* power = (battery - wire current) current, the smaller root */
    return 2.0 * power / (battery + sqrt(fmax(battery * battery - 4.0 * wire * power, 0.0)));
}

double sp_fan_power(const struct sp_fan *d, double speed)
{
    return d->fitted && speed > 0.0 && d->health == SP_FAN_SOUND ? d->count * d->power * speed * speed * speed
                                                                 : 0.0;
}
