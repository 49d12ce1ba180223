/* schedule_trace.c - the rows of one trace as rows of the schedule.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/schedule_parts.h"
#include "drive/smooth.h"
#include "part/road.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static const double slope_half = 50.0; /* m */
static const double steepest = 0.5;    /* sine of a road; beyond, the altitudes are at fault */

/* One trace on its way into the schedule. */
struct deriving {
    struct sp_scheduling *b;
    size_t step;
    struct sp_trace trace;
    const double *time;
    double *acceleration, *grade; /* road load only */
    struct sp_engine_sources sources;
    struct sp_merge merge;
    double altitude, pressure; /* of the row worked out last */
    double most_power, most_cut; /* W; what the energy cap took */
    bool finite;
};

/* ---- reading ---------------------------------------------------------------------------------- */

static bool read_trace(struct deriving *v)
{
    const struct sp_design *d = v->b->design;
    const struct sp_step *step = &d->step[v->step];
    if (!step->trace) {
        sp_schedule_fault(v->b, v->step, "trace", "no path", "the path of a trace");
        return false;
    }
    enum sp_status status =
        sp_trace_read(v->b->units, step->trace, d->file, &step->format, &v->trace, v->b->complaints);
    if (status != SP_OK) {
        v->b->failed = true;
        return false;
    }
    v->time = v->trace.column[SP_COL_TIME];
    if (v->trace.rows < 2 || !v->time || !v->trace.column[SP_COL_SPEED]) {
        sp_schedule_fault(v->b, v->step, "trace", "a trace without time and speed",
                          "columns time and speed, or distance and one of the two");
        return false;
    }
    return true;
}

static void count_repairs(struct deriving *v)
{
    const struct sp_trace_repairs *n = &v->trace.repairs;
    struct sp_trace_repairs *sum = &v->b->rows.table.repairs;
    sum->rows_read += n->rows_read;
    sum->doubles_dropped += n->doubles_dropped;
    sum->backward_dropped += n->backward_dropped;
    sum->cells_held += n->cells_held;
    sum->text_held += n->text_held;
    sum->range_held += n->range_held;
    sum->gaps += n->gaps;
    if (n->doubles_dropped + n->backward_dropped + n->cells_held + n->text_held + n->range_held + n->gaps ==
        0)
        return;
    char found[256];
    snprintf(
        found, sizeof found,
        "%zu rows read; %zu doubles and %zu backward rows dropped; %zu blanks, %zu texts and %zu impossible "
        "values held; %zu gaps",
        n->rows_read, n->doubles_dropped, n->backward_dropped, n->cells_held, n->text_held, n->range_held,
        n->gaps);
    sp_schedule_caution(v->b, v->step, found, "a trace that needs no repairs");
}

/* ---- what is known ---------------------------------------------------------------------------- */

static bool has(const struct deriving *v, enum sp_column c)
{
    return v->trace.column[c] != NULL;
}

static enum sp_speed_source speed_source(const struct deriving *v)
{
    const struct sp_body *b = &v->b->design->body;
    if (has(v, SP_COL_ENGINE_SPEED)) return SP_ENGINE_COLUMN;
    if (b->gears.rows == 0 || !b->gears.cell || !(b->wheel_radius > 0.0)) return SP_ENGINE_ASSUMED;
    return has(v, SP_COL_GEAR) ? SP_ENGINE_GEAR : SP_ENGINE_SHIFTED;
}

/* With the law `given` some heat has to be given. */
static bool heat_told(struct deriving *v)
{
    const struct sp_engine *e = &v->b->design->engine;
    bool told = has(v, SP_COL_HEAT) || e->heat_given > 0.0 || e->heat_loss > 0.0;
    if (e->heat_law != SP_HEAT_GIVEN || told) return true;
    sp_schedule_fault(v->b, v->step, "trace", "no heat, with car.engine.heat.law given",
                      "a column heat, or car.engine.heat.given or loss");
    return false;
}

static bool find_sources(struct deriving *v)
{
    const struct sp_engine *e = &v->b->design->engine;
    struct sp_engine_sources *s = &v->sources;
    bool given = e->heat_law == SP_HEAT_GIVEN;
    bool fuel = e->heating_value > 0.0 && !given, air = fuel && e->air_fuel_ratio > 0.0;
    bool throttle = has(v, SP_COL_THROTTLE) && !given;
    s->design = v->b->design;
    s->law = v->b->law;
    s->speed = speed_source(v);
    s->lacks_flow = (e->heat_law == SP_HEAT_FUEL && !has(v, SP_COL_FUEL_FLOW)) ||
                    (e->heat_law == SP_HEAT_AIR && !has(v, SP_COL_AIR_FLOW));
    if (has(v, SP_COL_POWER)) {
        s->power = SP_POWER_COLUMN;
    } else if (has(v, SP_COL_TORQUE)) {
        s->power = SP_POWER_TORQUE;
        if (s->speed == SP_ENGINE_ASSUMED) {
            sp_schedule_fault(v->b, v->step, "trace", "a column of torque without engine speed",
                              "a column engine_speed, or car.body.gears and wheel_radius");
            return false;
        }
    } else if (has(v, SP_COL_FUEL_FLOW) && fuel) {
        s->power = SP_POWER_FUEL;
    } else if (has(v, SP_COL_AIR_FLOW) && air) {
        s->power = SP_POWER_AIR;
    } else if (throttle) {
        s->power = SP_POWER_THROTTLE;
    } else if (sp_road_load_known(&v->b->design->body)) {
        s->power = SP_POWER_ROAD;
    } else if (given && (has(v, SP_COL_HEAT) || e->heat_loss == 0.0)) {
        s->power = SP_POWER_NONE;
    } else {
        sp_schedule_fault(
            v->b, v->step, "trace", "nothing that tells the power",
            "a column power, torque with engine_speed, fuel_flow, air_flow or throttle, or the road "
            "load: car.body.mass, frontal_area and drag_coefficient");
        return false;
    }
    return true;
}

/* Columns that nothing asks for any more are given back before the rows are built. */
static void drop_unused(struct deriving *v)
{
    enum sp_power_source power = v->sources.power;
    enum sp_heat_law law = v->b->design->engine.heat_law;
    bool keep[SP_COLUMNS] = {[SP_COL_TIME] = true, [SP_COL_SPEED] = true,   [SP_COL_AMBIENT] = true,
                             [SP_COL_WAKE] = true, [SP_COL_COOLANT] = true, [SP_COL_ALTITUDE] = true};
    keep[SP_COL_ENGINE_SPEED] = v->sources.speed == SP_ENGINE_COLUMN;
    keep[SP_COL_GEAR] = v->sources.speed == SP_ENGINE_GEAR;
    keep[SP_COL_POWER] = power == SP_POWER_COLUMN;
    keep[SP_COL_TORQUE] = power == SP_POWER_TORQUE;
    keep[SP_COL_THROTTLE] = power == SP_POWER_THROTTLE;
    bool flows = law == SP_HEAT_CORRELATION || v->b->design->charge.fitted;
    keep[SP_COL_FUEL_FLOW] = power == SP_POWER_FUEL || law == SP_HEAT_FUEL || flows;
    keep[SP_COL_AIR_FLOW] = power == SP_POWER_AIR || law == SP_HEAT_AIR || flows;
    keep[SP_COL_HEAT] = law == SP_HEAT_GIVEN;
    keep[SP_COL_GRADE] = power == SP_POWER_ROAD;
    for (int c = 0; c < SP_COLUMNS; c++) {
        if (keep[c]) continue;
        free(v->trace.column[c]);
        v->trace.column[c] = NULL;
    }
}

/* ---- what is derived over several rows -------------------------------------------------------- */

static bool no_memory(struct deriving *v)
{
    sp_schedule_fault(v->b, v->step, "trace", "no memory", "memory for the rows of the trace");
    return false;
}

static bool derive_motion(struct deriving *v)
{
    size_t rows = v->trace.rows;
    double half = v->b->design->step[v->step].smooth, *speed = v->trace.column[SP_COL_SPEED];
    bool road = v->sources.power == SP_POWER_ROAD;
    if (road && !(v->acceleration = calloc(rows, sizeof *v->acceleration))) return no_memory(v);
    if (half > 0.0) {
        double *smooth = calloc(rows, sizeof *smooth);
        if (!smooth) return no_memory(v);
        if (!sp_smooth(rows, v->time, speed, half, smooth, v->acceleration)) {
            free(smooth);
            sp_schedule_fault(v->b, v->step, "smooth", "a speed that cannot be smoothed",
                              "a shorter time, or 0 s");
            return false;
        }
        free(speed);
        v->trace.column[SP_COL_SPEED] = smooth;
    } else if (road) {
        sp_schedule_acceleration(rows, v->time, speed, v->acceleration);
    }
    return true;
}

/* Sines to tangents; what no road has is cut off. */
static size_t grades_of(size_t rows, double *slope)
{
    size_t cut = 0;
    for (size_t i = 0; i < rows; i++) {
        double s = slope[i];
        if (!(fabs(s) <= steepest)) {
            cut++;
            s = copysign(steepest, s);
        }
        slope[i] = s / sqrt(1.0 - s * s);
    }
    return cut;
}

static bool derive_grade(struct deriving *v)
{
    size_t rows = v->trace.rows;
    const double *altitude = v->trace.column[SP_COL_ALTITUDE], *speed = v->trace.column[SP_COL_SPEED];
    if (v->sources.power != SP_POWER_ROAD || has(v, SP_COL_GRADE) || !altitude) return true;
    double *distance = calloc(rows, sizeof *distance);
    v->grade = calloc(rows, sizeof *v->grade);
    if (!distance || !v->grade) {
        free(distance);
        return no_memory(v);
    }
    for (size_t i = 1; i < rows; i++)
        distance[i] =
            distance[i - 1] + 0.5 * (fabs(speed[i - 1]) + fabs(speed[i])) * (v->time[i] - v->time[i - 1]);
    sp_schedule_slope(rows, distance, altitude, slope_half, v->grade);
    free(distance);
    size_t cut = grades_of(rows, v->grade);
    if (cut > 0) {
        char found[96];
        snprintf(found, sizeof found, "altitudes steeper than 1 in 2 at %zu rows", cut);
        sp_schedule_caution(v->b, v->step, found, "a road; taken as 1 in 2 there");
    }
    return true;
}

/* ---- one row ---------------------------------------------------------------------------------- */

static double value(const struct deriving *v, enum sp_column c, size_t i, double fallback)
{
    return has(v, c) ? v->trace.column[c][i] : fallback;
}

static double held(double x, double low, double high)
{
    if (x < low) return low;
    return x > high ? high : x;
}

/* air.pressure holds at the first altitude any trace of the drive gives; from there it goes with the standard
 * atmosphere. Without altitudes it stays as the step before left it. */
static double pressure_at(struct deriving *v, size_t i)
{
    struct sp_scheduling *b = v->b;
    if (!has(v, SP_COL_ALTITUDE)) return b->pressure;
    double z = v->trace.column[SP_COL_ALTITUDE][i];
    if (isnan(b->datum)) b->datum = z;
    if (z == v->altitude) return v->pressure;
    v->altitude = z;
    double ratio = sp_isa_pressure(held(b->base + z - b->datum, -2000.0, 11000.0)) / b->base_pressure;
    return v->pressure = b->design->air.pressure * ratio;
}

static void row_of(struct deriving *v, size_t i, struct sp_row *row, struct sp_wheel_power *wheel)
{
    const struct sp_air_design *air = &v->b->design->air;
    double speed = v->trace.column[SP_COL_SPEED][i];
    row->time = v->time[i];
    row->in[SP_IN_SPEED] = speed;
    row->in[SP_IN_AIR_SPEED] = speed + air->wind;
    row->in[SP_IN_WAKE] = value(v, SP_COL_WAKE, i, 1.0);
    row->in[SP_IN_AMBIENT] = value(v, SP_COL_AMBIENT, i, air->ambient);
    row->in[SP_IN_PRESSURE] = pressure_at(v, i);
    sp_schedule_step_air(&v->b->design->step[v->step], has(v, SP_COL_AMBIENT), row->in);
    row->in[SP_IN_MEASURED] = value(v, SP_COL_COOLANT, i, NAN);
    struct sp_moment at = {
        .speed = speed,
        .air_speed = row->in[SP_IN_AIR_SPEED],
        .power = value(v, SP_COL_POWER, i, NAN),
        .torque = value(v, SP_COL_TORQUE, i, NAN),
        .engine_speed = value(v, SP_COL_ENGINE_SPEED, i, NAN),
        .gear = value(v, SP_COL_GEAR, i, NAN),
        .fuel_flow = value(v, SP_COL_FUEL_FLOW, i, NAN),
        .air_flow = value(v, SP_COL_AIR_FLOW, i, NAN),
        .throttle = held(value(v, SP_COL_THROTTLE, i, NAN), 0.0, 1.0),
        .heat = value(v, SP_COL_HEAT, i, NAN),
    };
    if (v->sources.power == SP_POWER_ROAD) {
        at.acceleration = v->acceleration[i];
        at.grade = v->grade ? v->grade[i] : value(v, SP_COL_GRADE, i, 0.0);
        at.density = sp_density_of(v->b->design, row->in[SP_IN_AMBIENT], row->in[SP_IN_PRESSURE]);
    }
    v->most_cut = fmax(v->most_cut, sp_engine_row_fill(&v->sources, &at, row->in, wheel));
    v->most_power = fmax(v->most_power, row->in[SP_IN_POWER]);
    for (int c = 0; c < SP_INPUTS; c++)
        if (c != SP_IN_MEASURED && !isfinite(row->in[c])) v->finite = false;
}

static bool runs(const struct deriving *v, size_t i)
{
    const double *n = v->trace.column[SP_COL_ENGINE_SPEED];
    double least = sp_off_speed(&v->b->design->engine);
    return !n || (n[i] >= least && n[i + 1] >= least);
}

/* ---- all rows --------------------------------------------------------------------------------- */

static void push(struct deriving *v, const struct sp_row *row, size_t i, bool running)
{
    struct sp_row r = *row;
    r.flags = (unsigned char)((running ? SP_FLAG_ENGINE : 0) | sp_schedule_step_flags(&v->b->design->step[v->step]));
    if (!running) {
        const enum sp_channel_in dead[] = {SP_IN_HEAT_GAS, SP_IN_HEAT_FRICTION, SP_IN_HEAT_SLOPE,
                                           SP_IN_ENGINE_SPEED, SP_IN_POWER, SP_IN_OIL_HEAT, SP_IN_GEARBOX_HEAT,
                                           SP_IN_CHARGE_FLOW, SP_IN_CHARGE_HEATING};
        for (size_t k = 0; k < sizeof dead / sizeof *dead; k++)
            r.in[dead[k]] = 0.0;
    }
    sp_merge_push(&v->merge, &r, i);
}

/* Rows go out one by one; where the engine stops or starts a row goes out twice. */
static void stream_rows(struct deriving *v, struct sp_rows *to)
{
    size_t rows = v->trace.rows;
    bool road = v->sources.power == SP_POWER_ROAD;
    struct sp_row row[2];
    struct sp_wheel_power wheel[2];
    memset(row, 0, sizeof row);
    memset(wheel, 0, sizeof wheel);
    for (size_t i = 0; i < rows && !v->merge.failed && v->finite; i++) {
        row[0] = row[1];
        wheel[0] = wheel[1];
        row_of(v, i, &row[1], road ? &wheel[1] : NULL);
        bool left = i > 0 && v->time[i - 1] < v->time[i], right = i + 1 < rows && v->time[i] < v->time[i + 1];
        bool ran = left && runs(v, i - 1), will = right && runs(v, i);
        if (road && ran) {
            const double *z = v->trace.column[SP_COL_ALTITUDE];
            sp_schedule_add_work(v->b, &to->table, row, wheel, z ? z[i] - z[i - 1] : NAN);
        }
        if (left) push(v, &row[1], i, ran);
        if (left && (!right || ran != will)) sp_merge_break(&v->merge);
        if (right && (!left || ran != will)) push(v, &row[1], i, will);
    }
    sp_merge_break(&v->merge);
    if (has(v, SP_COL_ALTITUDE)) v->b->pressure = v->pressure;
}

static bool build_rows(struct deriving *v, struct sp_rows *to)
{
    sp_merge_begin(&v->merge, to, v->b->design->solver.merge, (unsigned short)v->step, v->trace.mark,
                   v->trace.marks);
    v->finite = true;
    v->altitude = NAN;
    stream_rows(v, to);
    if (!v->finite) {
        sp_schedule_fault(v->b, v->step, "trace", "a row whose speed, power or air is no number",
                          "finite values in every row");
        return false;
    }
    if (v->merge.failed || to->table.rows == 0) {
        sp_schedule_fault(v->b, v->step, "trace", "more rows than memory or the limit of 20 million allows",
                          "fewer rows, or a longer solver.merge");
        return false;
    }
    sp_schedule_caution_power(v->b, v->step, v->most_power);
    sp_schedule_caution_cap(v->b, v->step, v->most_cut);
    to->table.rows_merged = v->merge.pushed - to->table.rows;
    to->table.measured = has(v, SP_COL_COOLANT);
    to->table.power_from_road = v->sources.power == SP_POWER_ROAD;
    sp_rows_thin(to);
    return true;
}

bool sp_schedule_trace(struct sp_scheduling *b, size_t step, struct sp_rows *to)
{
    struct deriving v = {.b = b, .step = step};
    bool fine = read_trace(&v);
    if (fine) {
        count_repairs(&v);
        fine = heat_told(&v) && find_sources(&v) && sp_schedule_find_speeds(b, step, &v.trace, &v.sources);
    }
    if (fine) {
        sp_schedule_caution_sources(b, step, &v.sources);
        drop_unused(&v);
        fine = b->law && derive_motion(&v) && derive_grade(&v) && build_rows(&v, to);
    }
    free(v.acceleration);
    free(v.grade);
    sp_trace_free(&v.trace);
    return fine;
}
