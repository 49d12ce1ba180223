/* The heat laws over brake power or flow, idle, and the cap by the fuel's energy. Equations in docs/model.md.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/engine_law.h"

#include <math.h>

#include "part/correlation.h"

/* The band of speed over which overrun fades in, and over which a given idle heat fades out. */
static const double idle_slow = 1.2, idle_fast = 1.5;
/* A given idle heat holds at idle and fades out to the law over this share of rated power. */
static const double idle_power = 0.10;
/* Below this share of rated fuel power the slope of the power law is that of its chord: for exponents
 * under 1 the true one has no bound. */
static const double least_fuel = 0.01;
/* The cap rounds off its corner over this share of what is left to either side. */
static const double cap_band = 0.05;

double sp_engine_ramp(double x, double from, double to)
{
    double s = (x - from) / (to - from);
    if (s <= 0.0) return 0.0;
    return s >= 1.0 ? 1.0 : s * s * (3.0 - 2.0 * s);
}

static double ramp_slope(double x, double from, double to)
{
    double s = (x - from) / (to - from);
    return s <= 0.0 || s >= 1.0 ? 0.0 : 6.0 * s * (1.0 - s) / (to - from);
}

static double held(double x, double low, double high)
{
    if (x < low) return low;
    return x > high ? high : x;
}

/* ---- over power ------------------------------------------------------------------------------------ */

static struct sp_engine_at rated_law(const struct sp_engine_law *law, double power, double speed)
{
    const struct sp_engine *e = &law->engine;
    double share = sp_engine_fuel_power(e, power, speed) / law->rated_fuel;
    double heat = law->rated_heat * pow(share, law->exponent);
    double enough = fmax(share, least_fuel);
    double slope = law->rated_heat * pow(enough, law->exponent - 1.0) * law->exponent / law->rated_fuel /
                   e->indicated_efficiency;
    return (struct sp_engine_at){.heat = heat, .slope = slope};
}

static struct sp_engine_at table_law(const struct sp_engine_law *law, double power, double speed)
{
    struct sp_engine_at at = {.heat = 0.0};
    double n = held(speed, law->speed[0], law->speed[law->speeds - 1]);
    double p = held(power, law->power[0], law->power[law->powers - 1]);
    gsl_interp2d_eval_e(&law->grid, law->speed, law->power, law->heat, n, p, NULL, NULL, &at.heat);
    if (p == power)
        gsl_interp2d_eval_deriv_y_e(&law->grid, law->speed, law->power, law->heat, n, p, NULL, NULL,
                                    &at.slope);
    return at;
}

/* ---- by correlation -------------------------------------------------------------------------------- */

/* gas_temperature holds at air_fuel_ratio; other mixtures differ from it as the fit has it. */
static double gas_at(const struct sp_engine *e, double phi)
{
    double fit = sp_correlation_gas(e->diesel, phi);
    if (isnan(e->gas_temperature)) return fit;
    return e->gas_temperature + fit - sp_correlation_gas(e->diesel, e->stoichiometric / e->air_fuel_ratio);
}

/* Heat [W] with the metal at gas_reference. */
static double correlation(const struct sp_engine *e, double fuel, double air)
{
    double ratio = fuel > 0.0 && air > 0.0 ? air / fuel : e->air_fuel_ratio;
    double gas = gas_at(e, e->stoichiometric / ratio);
    return sp_correlation_conductance(e, fuel + air, gas) * fmax(gas - e->gas_reference, 0.0);
}

static double of_fuel_power(const struct sp_engine *e, double fuel_power)
{
    double fuel = fuel_power / e->heating_value;
    return correlation(e, fuel, fuel * e->air_fuel_ratio);
}

static struct sp_engine_at correlation_law(const struct sp_engine_law *law, double power, double speed)
{
    const struct sp_engine *e = &law->engine;
    double fuel = sp_engine_fuel_power(e, power, speed), enough = fmax(fuel, least_fuel * law->rated_fuel);
    double slope = 0.75 * of_fuel_power(e, enough) / enough / e->indicated_efficiency;
    return (struct sp_engine_at){.heat = of_fuel_power(e, fuel), .slope = slope};
}

/* ---- the cap --------------------------------------------------------------------------------------- */

double sp_engine_law_oil_heat(const struct sp_engine_law *law, double power, double speed)
{
    if (!law->oil.fitted) return 0.0;
    double motoring = law->engine.heat_law == SP_HEAT_GIVEN ? 0.0 : sp_engine_motoring(&law->engine, speed);
    return sp_oil_heat(&law->oil, fmax(power, 0.0), motoring);
}

/* The lesser of heat and room, the corner between them rounded by a parabola. */
static struct sp_engine_at lesser(struct sp_engine_at at, double room, double room_slope)
{
    double past = at.heat - (1.0 - cap_band) * room;
    if (past <= 0.0 && room > 0.0) return at;
    if (!(room > 0.0)) return (struct sp_engine_at){.cut = at.heat};
    if (at.heat >= (1.0 + cap_band) * room)
        return (struct sp_engine_at){.heat = room, .slope = room_slope, .cut = at.heat - room};
    double share = past / room, by_heat = 1.0 - share / (2.0 * cap_band);
    double by_room = (2.0 * (1.0 - cap_band) * share + share * share) / (4.0 * cap_band);
    double cut = past * share / (4.0 * cap_band);
    return (struct sp_engine_at){at.heat - cut, by_heat * at.slope + by_room * room_slope, cut};
}

/* Work, oil's heat and coolant's heat come from the fuel. The slope leaves the oil out: a share of a share.
 */
static struct sp_engine_at capped(const struct sp_engine_law *law, struct sp_engine_at at, double fuel_power,
                                  double power, double speed)
{
    const struct sp_engine *e = &law->engine;
    if (!(e->energy_cap > 0.0) || e->heat_law == SP_HEAT_TABLE) return at;
    double room = e->energy_cap * fuel_power - power - sp_engine_law_oil_heat(law, power, speed);
    return lesser(at, room, e->energy_cap / e->indicated_efficiency - 1.0);
}

/* ---- together -------------------------------------------------------------------------------------- */

static struct sp_engine_at plain_law(const struct sp_engine_law *law, double power, double speed)
{
    if (law->speeds > 0) return table_law(law, power, speed);
    if (law->engine.heat_law == SP_HEAT_CORRELATION) return correlation_law(law, power, speed);
    return rated_law(law, power, speed);
}

struct sp_engine_at sp_engine_law_by_power(const struct sp_engine_law *law, double power, double speed)
{
    const struct sp_engine *e = &law->engine;
    struct sp_engine_at at =
        capped(law, plain_law(law, power, speed), sp_engine_fuel_power(e, power, speed), power, speed);
    double slow = 1.0 - sp_engine_ramp(speed / e->idle_speed, idle_slow, idle_fast);
    double extra = law->idle_extra * slow * fmin(speed / e->idle_speed, 1.0), load = power / e->rated_power;
    at.heat += extra * (1.0 - sp_engine_ramp(load, 0.0, idle_power));
    at.slope -= extra * ramp_slope(load, 0.0, idle_power) / e->rated_power;
    at.heat = fmax(at.heat, 0.0); /* an idle heat below the law's own must not cool a cranking engine */
    return at;
}

struct sp_engine_at sp_engine_law_by_flow(const struct sp_engine_law *law, const struct sp_engine_row *row,
                                          double fuel, double power, double speed)
{
    const struct sp_engine *e = &law->engine;
    struct sp_engine_at at = {.heat = e->fuel_share * fuel * e->heating_value};
    if (e->heat_law == SP_HEAT_CORRELATION)
        at.heat =
            correlation(e, fuel, isnan(row->air_flow) ? fuel * e->air_fuel_ratio : fmax(row->air_flow, 0.0));
    at = capped(law, at, fuel * e->heating_value, fmax(power, 0.0), speed);
    at.slope = 0.0;
    return at;
}
