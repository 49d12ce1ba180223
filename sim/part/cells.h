/* The radiator as cells along the coolant path: the relation that every cell uses, steady and
 * transient alike. Internal. Pure functions.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_CELLS_H
#define SP_PART_CELLS_H

/* Weight w(k) of the inlet in the mean coolant temperature of a cell, w T_in + (1 - w) T_out, with
 * k = hA/(m cp) of the cell: 1/k - 1/(e^k - 1). It makes the steady cell exact for a wall of one
 * temperature, goes to 1/2 (mid-point) for small k and to 0 (stirred) without flow. k >= 0. */
double sp_cells_weight(double k);

/* Effectiveness of the air stream against a wall of one temperature: 1 - exp(-hA/(m cp)). */
double sp_cells_air_effectiveness(double conductance, double capacity_rate);

/* Steady heat per inlet temperature difference [W/K] of `n` cells in series, coolant with film
 * conductance `coolant` [W/K] and capacity rate `coolant_rate` [W/K], air with `air` and `air_rate`,
 * the same fresh air to each cell, each cell's wall of one temperature. */
double sp_cells_rejection(int n, double coolant, double coolant_rate, double air, double air_rate);

#endif
