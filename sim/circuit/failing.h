/* How near a cooling system is to failing: local boiling, the level in its tank. Internal. Pure functions.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_FAILING_H
#define SP_CIRCUIT_FAILING_H

/* Heat flux [W/m2] at which water begins to boil at a wall that is `over` [K] above its boiling point, at
 * `pressure` [Pa absolute]: Bergles & Rohsenow 1964, fitted from 1 to 138 bar; held at the ends outside. 0
 * where over <= 0. */
double sp_boil_onset_flux(double pressure, double over);

/* The wall's excess [K] over the boiling point at which a flux [W/m2] begins to boil: the inverse. 0 for
 * none. */
double sp_boil_onset_excess(double pressure, double flux);

/* What the wall lacks [K] to boil with its flux; negative: bubbles form at it. `boils`: boiling point [K] at
 * `pressure`. */
double sp_local_boil_margin(double pressure, double boils, double wall, double flux);

#endif
