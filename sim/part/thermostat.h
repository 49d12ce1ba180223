/* Thermostat: a wax element that lags, with play between opening and shutting. Internal. Pure functions.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_THERMOSTAT_H
#define SP_PART_THERMOSTAT_H

#include "swirlpot/part.h"

/* Which side of the play the wax pushes. Opening: the lift follows the wax; shutting: it follows the wax
 * `hysteresis` later; held: in between, the lift stands. */
enum sp_play { SP_PLAY_OPENING, SP_PLAY_SHUTTING, SP_PLAY_HELD };

/* Temperature [K] that sets the lift: the wax's own, seen through the play. */
double sp_thermostat_effective(const struct sp_thermostat *t, enum sp_play play, double wax, double held);

/* Lift 0..1, linear between `opens` and `full`; 1 without a thermostat or with a plate in its place. */
double sp_thermostat_lift(const struct sp_thermostat *t, double effective);

/* K to add to the effective temperature at brake power [W]: its heater is on above `mapped_power`. Nil up to
 * that, `mapped_shift` from a tenth above it, smooth between. 0 when it is not mapped. */
double sp_thermostat_mapped(const struct sp_thermostat *t, double power);

/* Rate [1/s] with which the wax follows the coolant: 1/lag_still without flow, up to 1/lag at a flow of
 * `full_flow` and above, between them with flow^0.6 (common practice: exponent 0.5..0.8). */
double sp_thermostat_rate(const struct sp_thermostat *t, double flow, double full_flow);

#endif
