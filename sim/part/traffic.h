/* What a car ahead leaves of the air: dynamic pressure and warmth over distance. Internal. Pure functions.
 *
 * Common practice (no measurement of a race car's cooling air behind another could be had): 0.9, 0.75, 0.6 and 0.5 of
 * the dynamic pressure at 40, 20, 10 and 5 m, and air warmer by 1.5, 2.5, 4 and 6 K; nothing from 80 m on; closer
 * than 5 m as at 5 m; between these straight over the logarithm of the distance.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_TRAFFIC_H
#define SP_PART_TRAFFIC_H

/* Share of dynamic pressure left, and kelvin over the free stream, `distance` [m] behind; 1 and 0 unless it is above
 * 0. */
struct sp_traffic { double wake, warming; };
struct sp_traffic sp_traffic_behind(double distance);

/* Kelvin that go with a wake that leaves this share of dynamic pressure, by the same table; 0 from 1 on. */
double sp_traffic_warming(double wake);

/* How much of it is felt at a road speed [m/s]: none standing, all from 3 m/s on, straight between. */
double sp_traffic_felt(double speed);

#endif
