/* inlet.h - lip, boundary layer and spillage of an air inlet.
 *
 * SI. V1 is the velocity in the inlet, V that of the air outside, mu = V1/V the capture ratio.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_INLET_H
#define SP_PART_INLET_H

#include "swirlpot/duct.h"

/* Loss of total pressure [Pa] at the lip, k rho/2 max(V1 - V, 0)^2: momentum balance of a stream tube
 * that a sharp lip (k = 1) cannot pull on (Fradenburgh & Wyatt, NACA TN 3004, 1953); for other lips k
 * is the coefficient at standstill, an extension of that theory. Nil when air comes out (V1 <= 0); air
 * from behind (V < 0) counts as still. */
double sp_lip_loss(double k, double density, double inlet_velocity, double air_velocity);

/* Coefficient at standstill of a flush opening with edge radius over hydraulic diameter, 0.50 sharp to
 * 0.03 from 0.2 on: Idelchik's knots, linear between. NaN below 0. */
double sp_lip_coefficient(double radius_ratio);

/* Share of the free-stream dynamic head left, averaged over the mass, to a slot of height h on a wall
 * with a 1/7-power layer of thickness d [m]. NaN unless h > 0 and d >= 0. */
double sp_layer_recovery(double height, double thickness);

/* Total pressure available in the inlet, less ambient, over dynamic pressure, at capture ratio V1/V: the
 * design's `recovery`, or its table instead (straight lines, level beyond its last pair and for V1/V < 0;
 * below the first pair the first line goes on if it rises, else level), times what a boundary layer leaves
 * where that is more than 0. Any finite or infinite ratio; a still car has no use for it. */
double sp_inlet_recovery(const struct sp_inlet *d, double capture_ratio);

/* Does a table of recovery leave a duct one flow? All losses grow with flow squared, so the balance of
 * pressure is concave where recovery is, and falls where it does: with rises that never steepen, and none
 * after a fall, a duct that is driven at nil flow has one root. */
bool sp_inlet_recovery_single(const struct sp_table *t);

/* Area [m2] left open. */
double sp_inlet_area(const struct sp_inlet *d);

/* Thickness [m] of the turbulent layer after x [m] of flat wall at U [m/s], 0.37 x Re^-0.2. NaN unless
 * x >= 0, U > 0 and the kinematic viscosity [m2/s] > 0. */
double sp_layer_thickness(double x, double velocity, double kinematic_viscosity);

/* Drag [N] of the stream tube ahead of the inlet, q A (1 - mu)^2 for mu < 1, else 0; mu below 0 counts
 * as 0. Lip suction takes the share `suction` off it: 0 sharp, to 1 well rounded. q in Pa, area in m2. */
double sp_spill_drag(double q, double inlet_area, double capture_ratio, double suction);

#endif
