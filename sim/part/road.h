/* Road load: power from speed, grade and acceleration; gears. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_ROAD_H
#define SP_PART_ROAD_H

#include "swirlpot/part.h"

/* Force at the wheels [N]: rolling, grade (rise over run), drag at `air_speed` (head wind added; its sign
 * kept), inertia with the rotating mass. The drag coefficient is that of the whole car, cooling drag
 * included. */
double sp_road_force(const struct sp_body *b, double speed, double air_speed, double density, double grade,
                     double acceleration);

/* Crank power [W] for a wheel force: F v / driveline, or F v * driveline on overrun, there limited from
 * below by -motoring (the brakes take the rest). */
double sp_road_power(const struct sp_body *b, double force, double speed, double motoring);

/* Engine speed [rev/s] at road speed: in the first gear, from the lowest, in which it turns below
 * shift_speed, or the last; never below idle. NAN without gears. */
double sp_road_engine_speed(const struct sp_body *b, double speed, double idle);

#endif
