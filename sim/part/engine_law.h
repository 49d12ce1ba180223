/* A heat law made ready. Internal to engine*.c. SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_ENGINE_LAW_H
#define SP_PART_ENGINE_LAW_H

#include <gsl/gsl_interp2d.h>

#include "part/engine.h"
#include "part/friction.h"
#include "part/oil.h"

struct sp_engine_law {
    struct sp_engine engine;
    struct sp_oil oil;             /* what it takes counts against energy_cap; not fitted: nothing */
    double rated_heat, rated_fuel; /* W, W */
    double exponent;
    double idle_extra;            /* W above the law at idle */
    size_t speeds, powers;        /* the table's grid; 0: none */
    double *speed, *power, *heat; /* one block */
    gsl_interp2d grid;
};

/* Heat [W], by how much more it grows a watt of brake power, and what the cap took off it [W]. */
struct sp_engine_at {
    double heat, slope, cut;
};

/* 0 to 1 as x goes from `from` to `to`, smoothly; and its slope. */
double sp_engine_ramp(double x, double from, double to);

/* The law over brake power >= 0, idle and cap included, for laws that go by power. `fuel` and `air` [kg/s] go
 * by the law itself. */
struct sp_engine_at sp_engine_law_by_power(const struct sp_engine_law *law, double power, double speed);

/* The law from measured flows [kg/s], of which one may be NAN; its slope is nil: what is measured holds the
 * alternator's load. `power` is what the cap goes by. */
struct sp_engine_at sp_engine_law_by_flow(const struct sp_engine_law *law, const struct sp_engine_row *row,
                                          double fuel, double power, double speed);

/* Heat [W] of the oil at a brake power and speed. */
double sp_engine_law_oil_heat(const struct sp_engine_law *law, double power, double speed);

#endif
