/* schedule_stopped.c - rows whose engine gives power and does not turn: a speed the log has lost.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/schedule_parts.h"

#include <math.h>

/* Of rated power: what flow meters and torque sums may show of an engine that stands. Common practice. */
static const double idle_share = 0.02;

/* One trace's engine speeds under the eye. */
struct look {
    const struct sp_engine_sources *sources;
    const struct sp_trace *trace;
    double least; /* rev/s: below it the engine is off */
};

static double cell(const struct look *l, enum sp_column c, size_t i)
{
    return l->trace->column[c] ? l->trace->column[c][i] : (double)NAN;
}

/* What the row says of power, had the engine idled. Throttle says nothing of it: a pedal can be pressed with
 * the engine off; nor does the road: a car rolls. */
static double power_told(const struct look *l, size_t i)
{
    const struct sp_engine *e = &l->sources->design->engine;
    switch (l->sources->power) {
    case SP_POWER_COLUMN:
        return cell(l, SP_COL_POWER, i);
    case SP_POWER_TORQUE:
        return cell(l, SP_COL_TORQUE, i) * 2.0 * acos(-1.0) * e->idle_speed;
    case SP_POWER_FUEL:
        return sp_engine_power_from_fuel(e, cell(l, SP_COL_FUEL_FLOW, i), e->idle_speed);
    case SP_POWER_AIR:
        return sp_engine_power_from_fuel(e, cell(l, SP_COL_AIR_FLOW, i) / e->air_fuel_ratio, e->idle_speed);
    case SP_POWER_THROTTLE:
    case SP_POWER_ROAD:
    case SP_POWER_NONE:
        break;
    }
    return 0.0;
}

bool sp_schedule_stopped(const struct sp_engine *e, double engine_speed, double power)
{
    return engine_speed < sp_off_speed(e) && power > idle_share * e->rated_power;
}

static bool lost(const struct look *l, size_t i)
{
    return sp_schedule_stopped(&l->sources->design->engine, l->trace->column[SP_COL_ENGINE_SPEED][i],
                               power_told(l, i));
}

static void complain(struct sp_scheduling *b, size_t step, const struct look *l, size_t first, size_t count)
{
    const struct sp_design *d = b->design;
    char found[128], expected[160];
    struct sp_place at = {.file = d->step[step].trace, .path = "engine_speed", .named_by = d->file};
    snprintf(found, sizeof found, "%.4g rpm with %.4g kW at %.6g s, row %zu",
             60.0 * l->trace->column[SP_COL_ENGINE_SPEED][first], power_told(l, first) / 1e3,
             l->trace->column[SP_COL_TIME][first], first + 1);
    snprintf(expected, sizeof expected,
             "above %.4g rpm where the power is above 2 %% of car.engine.rated_power; so it is at %zu row%s",
             60.0 * l->least, count, count == 1 ? "" : "s");
    b->failed = true;
    sp_complain(b->complaints, &at, found, expected, "layout.repair holds the last good engine speed");
}

bool sp_schedule_find_speeds(struct sp_scheduling *b, size_t step, struct sp_trace *trace,
                             const struct sp_engine_sources *sources)
{
    struct look l = {sources, trace, sp_off_speed(&b->design->engine)};
    double *n = trace->column[SP_COL_ENGINE_SPEED], good = NAN;
    size_t count = 0, first = 0;
    if (!n || sources->speed != SP_ENGINE_COLUMN) return true;
    for (size_t i = trace->rows; i-- > 0;) {
        if (n[i] >= l.least) good = n[i];
        if (!lost(&l, i)) continue;
        first = i;
        ++count;
    }
    if (!count) return true;
    if (!b->design->step[step].format.repair || isnan(good)) {
        complain(b, step, &l, first, count);
        return false;
    }
    for (size_t i = 0; i < trace->rows; ++i) {
        if (n[i] >= l.least) good = n[i];
        if (lost(&l, i)) n[i] = good;
    }
    b->rows.table.repairs.range_held += count;
    char found[96];
    snprintf(found, sizeof found, "power without engine speed at %zu row%s", count, count == 1 ? "" : "s");
    sp_schedule_caution(b, step, found, "an engine speed; the last good one held there");
    return true;
}
