/* A fan, or several equal ones side by side, in the duct. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_FAN_H
#define SP_PART_FAN_H

#include "part/curve.h"

struct sp_fan_ready {
    const struct sp_fan *design; /* NULL: no fan */
    struct sp_curve curve;
    double annulus;              /* m2 of all fans; the core's face where the diameter is not known */
};

bool sp_fan_build(const struct sp_fan *d, double face, struct sp_fan_ready *out, const struct sp_place *at,
                  struct sp_complaints *complaints);
void sp_fan_free(struct sp_fan_ready *f);

/* Total pressure [Pa] the fans add to mass flow m [kg/s] of air of density rho [kg/m3], at `speed` times
 * rated speed (0 off). Never below the windmilling loss -k rho/2 (Q/A)^2; in reverse flow the blades
 * resist with the same loss on top of the shut-off pressure. A dead fan windmills whatever `speed` says; a
 * locked one is a loss of locked_loss on the same head, either way. */
double sp_fan_pressure(const struct sp_fan_ready *f, double speed, double mass_flow, double density);

/* Speed over rated speed of a fan or pump at voltage U: (U/rated)^0.9, common practice for brushed motors
 * (flow goes with voltage to 0.8..1.0). */
double sp_motor_speed(double voltage, double rated);

/* The same for a fan on the car's wiring: `battery` is the voltage at the battery, the plug gets what the
 * current leaves of it (wiring_drop at rated current, with the current). 0 for a dead or locked fan. */
double sp_fan_full_speed(const struct sp_fan *d, double battery);

/* Current [A] of ONE fan at `speed` times rated speed: rated power times speed cubed over the voltage at its
 * plug. A dead fan draws none, nor does a locked one, whose fuse has blown. */
double sp_fan_current(const struct sp_fan *d, double speed, double battery);

/* Electrical power [W], at their plugs, of all fans at `speed` times rated speed: rated power times speed cubed. */
double sp_fan_power(const struct sp_fan *d, double speed);

#endif
