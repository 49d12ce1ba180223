/* Making a heat law ready: is the engine usable, the table's grid. SPDX-License-Identifier: GPL-3.0-or-later
 */
#include "part/engine_law.h"

#include <gsl/gsl_errno.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

/* Speeds and powers of a table are few; a table of more rows than this is no engine's. */
enum { MOST_ROWS = 1000000 };

static bool above_zero(double x)
{
    return isfinite(x) && x > 0.0;
}

static bool no_less_than_zero(double x)
{
    return isfinite(x) && x >= 0.0;
}

static bool friction_known(const struct sp_engine *e)
{
    for (int i = 0; i < 3; i++)
        if (!isfinite(e->friction_pressure[i])) return false;
    /* A formula is known when it gives a figure at a speed. */
    return isfinite(sp_friction_overrun(e, e->rated_speed)) && isfinite(sp_friction_overrun(e, 0.0));
}

/* What the laws by flow or by correlation want; NULL: nothing is missing. */
static const char *flow_unusable(const struct sp_engine *e)
{
    bool correlation = e->heat_law == SP_HEAT_CORRELATION;
    if (!above_zero(e->heating_value)) return "a share of the fuel's power and a heating value";
    if (!correlation && !no_less_than_zero(e->fuel_share))
        return "a share of the fuel's power and a heating value";
    if (e->heat_law != SP_HEAT_FUEL && !above_zero(e->air_fuel_ratio)) return "an air-fuel ratio";
    if (!correlation) return NULL;
    if (!above_zero(e->cylinders) || !above_zero(e->bore)) return "cylinders and a bore";
    if (!above_zero(e->correlation_constant) || !above_zero(e->stoichiometric) || !isfinite(e->gas_reference))
        return "a constant, a stoichiometric ratio and a reference for the metal";
    return NULL;
}

static const char *unusable(const struct sp_engine *e)
{
    bool table = e->heat_law == SP_HEAT_TABLE,
         flow = e->heat_law == SP_HEAT_FUEL || e->heat_law == SP_HEAT_AIR;
    bool correlation = e->heat_law == SP_HEAT_CORRELATION;
    if (e->heat_law == SP_HEAT_GIVEN)
        return no_less_than_zero(e->heat_given) && no_less_than_zero(e->heat_loss) ? NULL
                                                                                   : "a heat that is given";
    if (!above_zero(e->displacement)) return "a displacement";
    if (!above_zero(e->rated_power) || !above_zero(e->rated_speed)) return "a rated power and speed";
    if (!above_zero(e->idle_speed)) return "an idle speed";
    if (!above_zero(e->indicated_efficiency)) return "an indicated efficiency";
    if (!no_less_than_zero(e->overrun_share)) return "a share of motoring work";
    if (!friction_known(e)) return "friction pressures";
    bool no_fraction = correlation || (flow && isnan(e->heat_fraction));
    if (!table && !no_fraction && (!no_less_than_zero(e->heat_fraction) || !above_zero(e->heat_exponent)))
        return "a heat fraction and exponent";
    return flow || correlation ? flow_unusable(e) : NULL;
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
    if (!cells_usable(t) || t->rows > MOST_ROWS) {
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

/* What the laws of a fired engine hang on. */
static bool settle(struct sp_engine_law *law, const struct sp_place *at, struct sp_complaints *complaints)
{
    const struct sp_engine *e = &law->engine;
    law->rated_fuel = sp_engine_rated_fuel(e);
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
        return false;
    }
    return e->heat_law != SP_HEAT_TABLE || build_table(law, at, complaints);
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
    if (!(e->heat_law == SP_HEAT_GIVEN || settle(law, at, complaints))) {
        sp_engine_law_free(law);
        return NULL;
    }
    memset(&law->engine.heat_table, 0, sizeof law->engine.heat_table); /* not ours to hold */
    if (!isnan(e->idle_heat) && e->heat_law != SP_HEAT_GIVEN)
        law->idle_extra = e->idle_heat - sp_engine_law_by_power(law, 0.0, e->idle_speed).heat;
    return law;
}

void sp_engine_law_oil(struct sp_engine_law *law, const struct sp_oil *oil)
{
    if (oil->fitted) law->oil = *oil;
}

void sp_engine_law_free(struct sp_engine_law *law)
{
    if (!law) return;
    free(law->speed);
    free(law);
}
