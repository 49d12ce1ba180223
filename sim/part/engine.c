/* Engine heat: the heat laws, idle, overrun. Equations in docs/model.md.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/engine.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_interp2d.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

/* The bands over which overrun fades in: power as a share of rated, speed over idle. */
static const double overrun_power = -0.02;
static const double overrun_slow = 1.2, overrun_fast = 1.5;
/* A given idle heat holds at idle and fades out to the law over this share of rated power, and over the
 * same band of speed. */
static const double idle_power = 0.10;
/* Below this share of rated fuel power the slope of the power law is that of its chord: for exponents
 * under 1 the true one has no bound. */
static const double least_fuel = 0.01;

struct sp_engine_law {
    struct sp_engine engine;
    double rated_heat, rated_fuel; /* W, W */
    double exponent;
    double idle_extra;            /* W above the law at idle */
    size_t speeds, powers;        /* the table's grid; 0: none */
    double *speed, *power, *heat; /* one block */
    gsl_interp2d grid;
};

static double rising(double x, double from, double to)
{
    double s = (x - from) / (to - from);
    if (s <= 0.0) return 0.0;
    return s >= 1.0 ? 1.0 : s * s * (3.0 - 2.0 * s);
}

static double rising_slope(double x, double from, double to)
{
    double s = (x - from) / (to - from);
    return s <= 0.0 || s >= 1.0 ? 0.0 : 6.0 * s * (1.0 - s) / (to - from);
}

static double held(double x, double low, double high)
{
    if (x < low) return low;
    return x > high ? high : x;
}

/* Power [W] of a mean pressure c0 + c1 N + c2 N^2 of a four-stroke: p V_d N/2. */
static double pressure_power(const double c[3], double displacement, double speed)
{
    return (c[0] + speed * (c[1] + speed * c[2])) * displacement * speed / 2.0;
}

double sp_engine_fuel_power(const struct sp_engine *e, double power, double speed)
{
    double fuel =
        (power + pressure_power(e->friction_pressure, e->displacement, speed)) / e->indicated_efficiency;
    return fuel < 0.0 ? 0.0 : fuel;
}

double sp_engine_motoring(const struct sp_engine *e, double speed)
{
    double power = pressure_power(e->overrun_pressure, e->displacement, speed);
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
    double friction = pressure_power(e->friction_pressure, e->displacement, speed);
    double power = e->indicated_efficiency * fuel_flow * e->heating_value - friction;
    return fmax(power, -sp_engine_motoring(e, speed));
}

double sp_engine_gas_factor(const struct sp_engine *e, double metal)
{
    if (isnan(e->gas_temperature) || isnan(e->gas_reference) || e->gas_temperature <= e->gas_reference)
        return 1.0;
    double factor = (e->gas_temperature - metal) / (e->gas_temperature - e->gas_reference);
    return factor < 0.0 ? 0.0 : factor;
}

/* ---- the laws over power ---------------------------------------------------------------------- */

struct heat_at {
    double heat, slope;
};

static struct heat_at rated_law(const struct sp_engine_law *law, double power, double speed)
{
    const struct sp_engine *e = &law->engine;
    double share = sp_engine_fuel_power(e, power, speed) / law->rated_fuel;
    double heat = law->rated_heat * pow(share, law->exponent);
    double enough = fmax(share, least_fuel);
    double slope = law->rated_heat * pow(enough, law->exponent - 1.0) * law->exponent / law->rated_fuel /
                   e->indicated_efficiency;
    return (struct heat_at){heat, slope};
}

static struct heat_at table_law(const struct sp_engine_law *law, double power, double speed)
{
    struct heat_at at = {0.0, 0.0};
    double n = held(speed, law->speed[0], law->speed[law->speeds - 1]);
    double p = held(power, law->power[0], law->power[law->powers - 1]);
    gsl_interp2d_eval_e(&law->grid, law->speed, law->power, law->heat, n, p, NULL, NULL, &at.heat);
    if (p == power)
        gsl_interp2d_eval_deriv_y_e(&law->grid, law->speed, law->power, law->heat, n, p, NULL, NULL,
                                    &at.slope);
    return at;
}

/* Power >= 0. */
static struct heat_at law_over_power(const struct sp_engine_law *law, double power, double speed)
{
    struct heat_at at = law->speeds > 0 ? table_law(law, power, speed) : rated_law(law, power, speed);
    const struct sp_engine *e = &law->engine;
    double slow = 1.0 - rising(speed / e->idle_speed, overrun_slow, overrun_fast);
    double extra = law->idle_extra * slow * fmin(speed / e->idle_speed, 1.0), load = power / e->rated_power;
    at.heat += extra * (1.0 - rising(load, 0.0, idle_power));
    at.slope -= extra * rising_slope(load, 0.0, idle_power) / e->rated_power;
    at.heat = fmax(at.heat, 0.0); /* an idle heat below the law's own must not cool a cranking engine */
    return at;
}

/* ---- one row ---------------------------------------------------------------------------------- */

/* Fuel flow [kg/s] by which the law goes; NAN when the law goes by power, here or always. */
static double flow_of_law(const struct sp_engine *e, const struct sp_engine_row *row)
{
    double flow = NAN;
    if (e->heat_law == SP_HEAT_FUEL) flow = row->fuel_flow;
    if (e->heat_law == SP_HEAT_AIR) flow = row->air_flow / e->air_fuel_ratio;
    return flow < 0.0 ? 0.0 : flow;
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

struct sp_engine_heat sp_engine_heat(const struct sp_engine_law *law, const struct sp_engine_row *row)
{
    const struct sp_engine *e = &law->engine;
    struct sp_engine_heat out = {0.0, 0.0, 0.0};
    double flow = flow_of_law(e, row), power, speed;
    if (!engine_state(e, row, flow, &power, &speed)) return out;
    double cut = rising(power / e->rated_power / overrun_power, 0.0, 1.0) *
                 rising(speed / e->idle_speed, overrun_slow, overrun_fast);
    struct heat_at at = law_over_power(law, fmax(power, 0.0), speed);
    out.gas = (1.0 - cut) * at.heat;
    if (!isnan(flow)) {
        double heat = e->fuel_share * flow * e->heating_value;
        /* A measured fuel flow tells of the cut itself; air goes on flowing. */
        out.gas = e->heat_law == SP_HEAT_FUEL ? heat : (1.0 - cut) * heat;
    }
    out.friction = cut * e->overrun_share * sp_engine_motoring(e, speed);
    /* What is measured already holds the alternator's load. */
    out.per_power = isnan(flow) ? (1.0 - cut) * at.slope : 0.0;
    return out;
}

/* ---- building --------------------------------------------------------------------------------- */

static bool above_zero(double x)
{
    return isfinite(x) && x > 0.0;
}

static bool no_less_than_zero(double x)
{
    return isfinite(x) && x >= 0.0;
}

static const char *unusable(const struct sp_engine *e)
{
    bool table = e->heat_law == SP_HEAT_TABLE;
    if (!above_zero(e->displacement)) return "a displacement";
    if (!above_zero(e->rated_power) || !above_zero(e->rated_speed)) return "a rated power and speed";
    if (!above_zero(e->idle_speed)) return "an idle speed";
    if (!above_zero(e->indicated_efficiency)) return "an indicated efficiency";
    if (!no_less_than_zero(e->overrun_share)) return "a share of motoring work";
    for (int i = 0; i < 3; i++)
        if (!isfinite(e->friction_pressure[i]) || !isfinite(e->overrun_pressure[i]))
            return "friction pressures";
    bool flow = e->heat_law == SP_HEAT_FUEL || e->heat_law == SP_HEAT_AIR;
    bool no_fraction = flow && isnan(e->heat_fraction);
    if (!table && !no_fraction && (!no_less_than_zero(e->heat_fraction) || !above_zero(e->heat_exponent)))
        return "a heat fraction and exponent";
    if (flow) {
        if (!no_less_than_zero(e->fuel_share) || !above_zero(e->heating_value))
            return "a share of the fuel's power and a heating value";
        if (e->heat_law == SP_HEAT_AIR && !above_zero(e->air_fuel_ratio)) return "an air-fuel ratio";
    }
    return NULL;
}

static int by_value(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* Sorted distinct values of a column into `to`. */
static size_t distinct(const struct sp_table *t, size_t column, double *to)
{
    size_t n = 0;
    for (size_t r = 0; r < t->rows; r++)
        to[r] = t->cell[r * t->columns + column];
    qsort(to, t->rows, sizeof *to, by_value);
    for (size_t r = 0; r < t->rows; r++)
        if (n == 0 || to[r] > to[n - 1]) to[n++] = to[r];
    return n;
}

static size_t place_of(double x, const double *in, size_t n)
{
    const double *found = bsearch(&x, in, n, sizeof *in, by_value);
    return found ? (size_t)(found - in) : 0;
}

static bool cells_usable(const struct sp_table *t)
{
    if (t->columns != 3 || !t->cell) return false;
    for (size_t i = 0; i < t->rows * t->columns; i++)
        if (!no_less_than_zero(t->cell[i])) return false;
    return true;
}

/* Puts each row in its cell of the grid (speed runs fastest, as GSL has it). False when one is taken. */
static bool fill_grid(struct sp_engine_law *law, const struct sp_table *t)
{
    for (size_t i = 0; i < t->rows; i++)
        law->heat[i] = NAN;
    for (size_t r = 0; r < t->rows; r++) {
        const double *row = t->cell + 3 * r;
        size_t i = place_of(row[0], law->speed, law->speeds) +
                   law->speeds * place_of(row[1], law->power, law->powers);
        if (!isnan(law->heat[i])) return false;
        law->heat[i] = row[2];
    }
    return true;
}

static bool build_table(struct sp_engine_law *law, const struct sp_place *at,
                        struct sp_complaints *complaints)
{
    const struct sp_table *t = &law->engine.heat_table;
    if (!cells_usable(t) || t->rows > 1000000) {
        sp_complain(
            complaints, at, "a heat table that cannot be used",
            "rows of engine speed, brake power and heat, none below zero (overrun has its own friction)",
            NULL);
        return false;
    }
    double *block = malloc((3 * t->rows + 1) * sizeof *block);
    if (!block) {
        sp_complain(complaints, at, "no memory", "memory for the heat table", NULL);
        return false;
    }
    law->speed = block;
    law->power = block + t->rows;
    law->heat = block + 2 * t->rows;
    law->speeds = distinct(t, 0, law->speed);
    law->powers = distinct(t, 1, law->power);
    if (law->speeds < 2 || law->powers < 2 || law->speeds * law->powers != t->rows || !fill_grid(law, t)) {
        char found[128];
        snprintf(found, sizeof found, "a heat table of %zu rows over %zu speeds and %zu powers", t->rows,
                 law->speeds, law->powers);
        sp_complain(complaints, at, found,
                    "a full grid: at least 2 speeds and 2 powers, each speed with each power once", NULL);
        return false;
    }
    /* Bilinear keeps no state of its own, so the handle can stand here and needs no allocation. */
    law->grid = (gsl_interp2d){.type = gsl_interp2d_bilinear, .xsize = law->speeds, .ysize = law->powers};
    return gsl_interp2d_init(&law->grid, law->speed, law->power, law->heat, law->speeds, law->powers) ==
           GSL_SUCCESS;
}

struct sp_engine_law *sp_engine_law_build(const struct sp_engine *e, const struct sp_place *at,
                                          struct sp_complaints *complaints)
{
    const char *missing = unusable(e);
    if (missing) {
        sp_complain(complaints, at, "an engine that gives no heat", missing, NULL);
        return NULL;
    }
    struct sp_engine_law *law = calloc(1, sizeof *law);
    if (!law) {
        sp_complain(complaints, at, "no memory", "memory for the engine's heat law", NULL);
        return NULL;
    }
    law->engine = *e;
    law->rated_fuel = sp_engine_fuel_power(e, e->rated_power, e->rated_speed);
    law->rated_heat = e->heat_fraction * e->rated_power;
    law->exponent = e->heat_exponent;
    if (e->heat_law != SP_HEAT_RATED && isnan(e->heat_fraction)) {
        /* rows without a flow: the same share of the Willans line's fuel power */
        law->rated_heat = e->fuel_share * law->rated_fuel;
        law->exponent = 1.0;
    }
    if (!(law->rated_fuel > 0.0)) {
        sp_complain(complaints, at, "a friction that leaves no fuel power at rated power",
                    "a friction above it", NULL);
        sp_engine_law_free(law);
        return NULL;
    }
    if (e->heat_law == SP_HEAT_TABLE && !build_table(law, at, complaints)) {
        sp_engine_law_free(law);
        return NULL;
    }
    memset(&law->engine.heat_table, 0, sizeof law->engine.heat_table); /* not ours to hold */
    if (!isnan(e->idle_heat)) law->idle_extra = e->idle_heat - law_over_power(law, 0.0, e->idle_speed).heat;
    return law;
}

void sp_engine_law_free(struct sp_engine_law *law)
{
    if (!law) return;
    free(law->speed);
    free(law);
}
