/* Engine heat: fuel, motoring, and what one row gives: fired, idling, cut. Equations in docs/model.md.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/engine.h"

#include <math.h>

#include "part/engine_law.h"

/* The bands over which overrun fades in: power as a share of rated, speed over idle. */
static const double overrun_power = -0.02;
static const double overrun_slow = 1.2, overrun_fast = 1.5;

static double held(double x, double low, double high)
{
    if (x < low) return low;
    return x > high ? high : x;
}

/* Power [W] of a mean pressure [Pa] of a four-stroke: p V_d N/2. */
static double power_of(double pressure, double displacement, double speed)
{
    return pressure * displacement * speed / 2.0;
}

static double fired_friction(const struct sp_engine *e, double speed)
{
    const double *c = e->friction_pressure;
    return power_of(c[0] + speed * (c[1] + speed * c[2]), e->displacement, speed);
}

double sp_engine_fuel_power(const struct sp_engine *e, double power, double speed)
{
    double fuel = (power + fired_friction(e, speed)) / e->indicated_efficiency;
    return fuel < 0.0 ? 0.0 : fuel;
}

double sp_engine_rated_fuel(const struct sp_engine *e)
{
    return sp_engine_fuel_power(e, e->rated_power, e->rated_speed);
}

double sp_engine_motoring(const struct sp_engine *e, double speed)
{
    double power = power_of(sp_friction_overrun(e, speed), e->displacement, speed);
    return power < 0.0 ? 0.0 : power;
}

double sp_engine_assumed_speed(const struct sp_engine *e, double power, double road_speed)
{
    double moving = held(fabs(road_speed) / 3.0, 0.0, 1.0);
    double load = power > 0.0 ? power / e->rated_power : 0.0;
    double speed = e->rated_speed * (0.25 * moving + 0.55 * load);
    return held(speed, e->idle_speed, fmax(e->rated_speed, e->idle_speed));
}

double sp_engine_power_from_fuel(const struct sp_engine *e, double fuel_flow, double speed)
{
    double power = e->indicated_efficiency * fuel_flow * e->heating_value - fired_friction(e, speed);
    return fmax(power, -sp_engine_motoring(e, speed));
}

double sp_engine_gas_factor(const struct sp_engine *e, double metal)
{
    if (e->heat_law == SP_HEAT_GIVEN) return 1.0;
    if (isnan(e->gas_temperature) || isnan(e->gas_reference) || e->gas_temperature <= e->gas_reference)
        return 1.0;
    double factor = (e->gas_temperature - metal) / (e->gas_temperature - e->gas_reference);
    return factor < 0.0 ? 0.0 : factor;
}

/* ---- one row ---------------------------------------------------------------------------------- */

/* Fuel flow [kg/s] by which the law goes; NAN when the law goes by power, here or always. */
static double flow_of_law(const struct sp_engine *e, const struct sp_engine_row *row)
{
    double flow = NAN;
    if (e->heat_law == SP_HEAT_FUEL || e->heat_law == SP_HEAT_CORRELATION) flow = row->fuel_flow;
    if (e->heat_law == SP_HEAT_AIR || (e->heat_law == SP_HEAT_CORRELATION && isnan(flow)))
        flow = row->air_flow / e->air_fuel_ratio;
    return flow < 0.0 ? 0.0 : flow;
}

/* A measured fuel flow tells of the cut itself; air goes on flowing. */
static bool tells_of_cut(const struct sp_engine *e, const struct sp_engine_row *row)
{
    return e->heat_law == SP_HEAT_FUEL || (e->heat_law == SP_HEAT_CORRELATION && isnan(row->air_flow));
}

/* Fills in what the row leaves open; false when the engine is off. */
static bool engine_state(const struct sp_engine *e, const struct sp_engine_row *row, double flow,
                         double *power, double *speed)
{
    *power = row->power;
    *speed = row->speed;
    if (*speed <= 0.0 || (isnan(*speed) && isnan(*power) && isnan(flow))) return false;
    if (isnan(*speed)) {
        double guess = isnan(*power) ? e->indicated_efficiency * flow * e->heating_value : *power;
        *speed = sp_engine_assumed_speed(e, guess, INFINITY);
    }
    if (isnan(*power)) *power = isnan(flow) ? 0.0 : sp_engine_power_from_fuel(e, flow, *speed);
    return true;
}

/* No engine: a heat of its own, whatever turns. */
static struct sp_engine_heat given_heat(const struct sp_engine_law *law, const struct sp_engine_row *row)
{
    const struct sp_engine *e = &law->engine;
    double power = isnan(row->power) ? 0.0 : row->power;
    return (struct sp_engine_heat){.gas = e->heat_given + e->heat_loss * fabs(power),
                                   .oil = sp_engine_law_oil_heat(law, power, 0.0)};
}

struct sp_engine_heat sp_engine_heat(const struct sp_engine_law *law, const struct sp_engine_row *row)
{
    const struct sp_engine *e = &law->engine;
    struct sp_engine_heat out = {.gas = 0.0};
    if (e->heat_law == SP_HEAT_GIVEN) return given_heat(law, row);
    double flow = flow_of_law(e, row), power, speed;
    if (!engine_state(e, row, flow, &power, &speed)) return out;
    double cut = sp_engine_ramp(power / e->rated_power / overrun_power, 0.0, 1.0) *
                 sp_engine_ramp(speed / e->idle_speed, overrun_slow, overrun_fast);
    bool by_power = isnan(flow);
    double fired = !by_power && tells_of_cut(e, row) ? 1.0 : 1.0 - cut;
    struct sp_engine_at at = by_power ? sp_engine_law_by_power(law, fmax(power, 0.0), speed)
                                      : sp_engine_law_by_flow(law, row, flow, power, speed);
    out.gas = fired * at.heat;
    out.friction = cut * e->overrun_share * sp_engine_motoring(e, speed);
    out.per_power = fired * at.slope;
    out.fuel =
        by_power ? fired * sp_engine_fuel_power(e, fmax(power, 0.0), speed) : fired * flow * e->heating_value;
    out.oil = sp_engine_law_oil_heat(law, power, speed);
    out.cut = fired * at.cut;
    return out;
}
