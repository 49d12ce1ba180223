/* schedule_engine.c - what the engine does at a row: speed, power and heat, from whatever is known.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/schedule_parts.h"
#include "part/charge.h"
#include "part/oil.h"
#include "part/road.h"

#include <math.h>

bool sp_road_load_known(const struct sp_body *b)
{
    return b->mass > 0.0 && b->frontal_area > 0.0 && b->drag_coefficient >= 0.0 && b->rolling >= 0.0 &&
           b->rotating >= 1.0 && b->driveline > 0.0;
}

/* Moist where the vapour's saturation is known, else dry: below -45 degC vapour weighs nothing. */
double sp_density_of(const struct sp_design *d, double ambient, double pressure)
{
    double density = sp_air_density(ambient, pressure, d->air.humidity);
    return isnan(density) ? sp_air_density(ambient, pressure, 0.0) : density;
}

double sp_off_speed(const struct sp_engine *e)
{
    return e->heat_law == SP_HEAT_GIVEN ? -INFINITY : SP_OFF_SHARE * e->idle_speed;
}

/* NAN unless column, gear or shift rule tell it. Out of gear the engine idles. */
static double known_speed(const struct sp_engine_sources *s, const struct sp_moment *at)
{
    const struct sp_body *b = &s->design->body;
    double idle = s->design->engine.idle_speed;
    if (s->speed == SP_ENGINE_COLUMN) return at->engine_speed;
    if (s->speed == SP_ENGINE_ASSUMED) return NAN;
    if (s->speed == SP_ENGINE_GEAR && !isnan(at->gear)) {
        double gear = round(at->gear);
        if (gear == 0.0) return idle;
        size_t n = (size_t)fabs(gear); /* reverse is taken as geared like first, or what stands for it */
        if (n <= b->gears.rows) {
            double wheel = fabs(at->speed) / (2.0 * acos(-1.0) * b->wheel_radius);
            return fmax(wheel * b->gears.cell[n - 1], idle);
        }
    }
    return sp_road_engine_speed(b, at->speed, idle);
}

static double speed_or_assumed(const struct sp_engine_sources *s, const struct sp_moment *at, double known,
                               double power)
{
    if (!isnan(known)) return known;
    if (s->design->engine.heat_law == SP_HEAT_GIVEN) return 0.0; /* nothing asks for it */
    return sp_engine_assumed_speed(&s->design->engine, power, at->speed);
}

/* The Willans line turned round. Where the engine speed hangs on power in turn, a few rounds settle it:
 * friction changes little with speed. */
static double power_of_fuel(const struct sp_engine_sources *s, const struct sp_moment *at, double fuel,
                            double *speed)
{
    const struct sp_engine *e = &s->design->engine;
    double known = *speed, power = e->indicated_efficiency * fuel * e->heating_value;
    for (int i = 0; i < 12; i++) {
        *speed = speed_or_assumed(s, at, known, power);
        power = sp_engine_power_from_fuel(e, fuel, *speed);
        if (!isnan(known)) break;
    }
    return power;
}

/* Power [W] that overrun may take: a motor brakes as hard as it pulls. */
static double braking(const struct sp_engine *e, double speed)
{
    if (e->heat_law != SP_HEAT_GIVEN) return sp_engine_motoring(e, speed);
    return isnan(e->rated_power) ? (double)INFINITY : e->rated_power;
}

static double power_of_road(const struct sp_engine_sources *s, const struct sp_moment *at, double *speed,
                            struct sp_wheel_power *wheel)
{
    const struct sp_body *b = &s->design->body;
    double v = at->speed;
    double force = sp_road_force(b, v, at->air_speed, at->density, at->grade, at->acceleration);
    *speed = speed_or_assumed(s, at, *speed, fmax(force * v / b->driveline, 0.0));
    double power = sp_road_power(b, force, v, braking(&s->design->engine, *speed));
    if (wheel) {
        double still = sp_road_force(b, v, 0.0, 0.0, at->grade, 0.0);
        double climb = b->mass * SP_GRAVITY * at->grade / sqrt(1.0 + at->grade * at->grade);
        wheel->climb = climb * v;
        wheel->rolling = (still - climb) * v;
        wheel->inertia = b->rotating * b->mass * at->acceleration * v;
        wheel->drag = force * v - wheel->climb - wheel->rolling - wheel->inertia;
        wheel->brakes = (power < 0.0 ? power / b->driveline : force * v) - force * v;
    }
    return power;
}

static double power_at(const struct sp_engine_sources *s, const struct sp_moment *at, double *speed,
                       struct sp_wheel_power *wheel)
{
    const struct sp_engine *e = &s->design->engine;
    double power = at->power;
    switch (s->power) {
    case SP_POWER_FUEL:
        return power_of_fuel(s, at, fmax(at->fuel_flow, 0.0), speed);
    case SP_POWER_AIR:
        return power_of_fuel(s, at, fmax(at->air_flow / e->air_fuel_ratio, 0.0), speed);
    case SP_POWER_ROAD:
        return power_of_road(s, at, speed, wheel);
    case SP_POWER_TORQUE:
        return at->torque * 2.0 * acos(-1.0) * *speed;
    case SP_POWER_THROTTLE:
        power = at->throttle * e->rated_power;
        break;
    case SP_POWER_NONE:
        power = 0.0;
        break;
    case SP_POWER_COLUMN:
        break;
    }
    *speed = speed_or_assumed(s, at, *speed, power);
    if (s->power == SP_POWER_THROTTLE) power *= fmin(1.0, *speed / e->rated_speed);
    return power;
}

/* Measured, or with the fuel. */
static void fill_charge(const struct sp_design *d, const struct sp_engine_row *row, double fuel,
                        double in[SP_INPUTS])
{
    const struct sp_charge *g = &d->charge;
    if (!isnan(row->fuel_flow)) fuel = row->fuel_flow * d->engine.heating_value;
    double flow =
        isnan(row->air_flow) ? sp_charge_flow(g, fuel, sp_engine_rated_fuel(&d->engine)) : row->air_flow;
    in[SP_IN_CHARGE_FLOW] = fmax(flow, 0.0);
    in[SP_IN_CHARGE_HEATING] = sp_charge_heating(g, flow);
}

/* All power but that of the engine's own needs passes the gearbox, either way. */
static double gearbox_heat(const struct sp_design *d, double power, double speed)
{
    bool motored = d->gearbox.friction_share > 0.0 && d->engine.heat_law != SP_HEAT_GIVEN;
    return sp_oil_heat(&d->gearbox, fabs(power), motored ? sp_engine_motoring(&d->engine, speed) : 0.0);
}

double sp_engine_row_heat(const struct sp_design *d, const struct sp_engine_law *law,
                          const struct sp_engine_row *row, double measured, double in[SP_INPUTS])
{
    struct sp_engine_heat heat = sp_engine_heat(law, row);
    bool given = d->engine.heat_law == SP_HEAT_GIVEN;
    in[SP_IN_HEAT_GAS] = given && !isnan(measured) ? fmax(measured, 0.0) : heat.gas;
    in[SP_IN_HEAT_FRICTION] = heat.friction;
    in[SP_IN_HEAT_SLOPE] = heat.per_power;
    in[SP_IN_OIL_HEAT] = heat.oil;
    if (d->gearbox.fitted) in[SP_IN_GEARBOX_HEAT] = gearbox_heat(d, row->power, row->speed);
    if (d->charge.fitted) fill_charge(d, row, heat.fuel, in);
    return heat.cut;
}

double sp_engine_row_fill(const struct sp_engine_sources *s, const struct sp_moment *at, double in[SP_INPUTS],
                          struct sp_wheel_power *wheel)
{
    double speed = known_speed(s, at), power = power_at(s, at, &speed, wheel);
    struct sp_engine_row row = {power, speed, at->fuel_flow, at->air_flow};
    in[SP_IN_POWER] = power;
    in[SP_IN_ENGINE_SPEED] = speed;
    return sp_engine_row_heat(s->design, s->law, &row, at->heat, in);
}
