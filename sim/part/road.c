/* Road load and gears. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/road.h"

#include <math.h>

double sp_road_force(const struct sp_body *b, double speed, double air_speed, double density, double grade,
                     double acceleration)
{
    /* grade is a tangent: sine and cosine without the angle */
    double slope = sqrt(1.0 + grade * grade);
    double rolling = copysign(b->rolling, speed + 0.0); /* + 0.0: a standing car counts as going forward */
    double weight = b->mass * SP_GRAVITY * (grade + rolling) / slope;
    double drag = 0.5 * density * b->drag_coefficient * b->frontal_area * air_speed * fabs(air_speed);
    return weight + drag + b->rotating * b->mass * acceleration;
}

double sp_road_power(const struct sp_body *b, double force, double speed, double motoring)
{
    double wheel = force * speed;
    if (wheel >= 0.0) return wheel / b->driveline;
    return fmax(wheel * b->driveline, -motoring);
}

double sp_road_engine_speed(const struct sp_body *b, double speed, double idle)
{
    size_t gears = b->gears.rows;
    if (gears == 0 || !b->gears.cell || !(b->wheel_radius > 0.0)) return NAN;
    double wheel = fabs(speed) / (2.0 * acos(-1.0) * b->wheel_radius);
    size_t gear = 0;
    while (gear + 1 < gears && wheel * b->gears.cell[gear] >= b->shift_speed)
        gear++;
    return fmax(wheel * b->gears.cell[gear], idle);
}
