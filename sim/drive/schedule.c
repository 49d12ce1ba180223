/* schedule.c - the steps of a drive joined into one table. SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/schedule.h"

#include "drive/schedule_parts.h"
#include "part/road.h"

#include <math.h>
#include <stdlib.h>

/* ---- steps without a trace -------------------------------------------------------------------- */

/* False with a complaint when a hold's engine stands and gives power all the same. */
static bool hold_turns(struct sp_scheduling *b, size_t i)
{
    const struct sp_step *step = &b->design->step[i];
    char found[96];
    if (!sp_schedule_stopped(&b->design->engine, step->engine_speed, step->power)) return true;
    snprintf(found, sizeof found, "%.4g rpm with a power of %.4g kW", 60.0 * step->engine_speed,
             step->power / 1e3);
    sp_schedule_fault(b, i, "engine_speed", found,
                      "an engine that turns, or power 0 kW: below 0.3 times car.engine.idle_speed it is off");
    return false;
}

/* A hold's engine. False when it cannot be known. */
static bool hold_engine(struct sp_scheduling *b, size_t i, struct sp_row *row, struct sp_schedule *to)
{
    const struct sp_design *d = b->design;
    const struct sp_step *step = &d->step[i];
    struct sp_engine_sources s = {.design = d, .law = b->law, .power = SP_POWER_COLUMN, .speed = SP_ENGINE_COLUMN};
    if (!hold_turns(b, i)) return false;
    bool powerless = d->engine.heat_law == SP_HEAT_GIVEN && d->engine.heat_loss == 0.0 &&
                     !sp_road_load_known(&d->body);
    if (isnan(step->power) && step->speed != 0.0 && !powerless) {
        s.power = SP_POWER_ROAD;
        to->power_from_road = true;
        if (!sp_road_load_known(&d->body)) {
            sp_schedule_fault(b, i, "power", "no power",
                              "a power, or the road load: car.body.mass, frontal_area and drag_coefficient");
            return false;
        }
    }
    if (isnan(step->engine_speed))
        s.speed = isnan(sp_road_engine_speed(&d->body, step->speed, d->engine.idle_speed))
                      ? SP_ENGINE_ASSUMED
                      : SP_ENGINE_SHIFTED;
    struct sp_moment at = {.speed = step->speed,
                           .air_speed = row->in[SP_IN_AIR_SPEED],
                           .torque = NAN,
                           .grade = isnan(step->grade) ? 0.0 : step->grade,
                           .engine_speed = step->engine_speed,
                           .power = isnan(step->power) ? 0.0 : step->power,
                           .fuel_flow = NAN,
                           .air_flow = NAN,
                           .throttle = NAN,
                           .gear = NAN,
                           .heat = NAN,
                           .density = sp_density_of(d, row->in[SP_IN_AMBIENT], row->in[SP_IN_PRESSURE])};
    struct sp_wheel_power wheel = {0};
    sp_schedule_caution_sources(b, i, &s);
    bool off = step->engine_speed < sp_off_speed(&d->engine);
    double cut = off ? 0.0 : sp_engine_row_fill(&s, &at, row->in, &wheel);
    sp_schedule_caution_cap(b, i, cut);
    sp_schedule_caution_power(b, i, row->in[SP_IN_POWER]);
    row->flags = off ? 0 : SP_FLAG_ENGINE;
    to->work.wheel = (wheel.rolling + wheel.climb + wheel.drag + wheel.brakes) * step->time;
    to->work.rolling = wheel.rolling * step->time;
    to->work.potential = wheel.climb * step->time;
    to->work.drag = wheel.drag * step->time;
    to->work.brakes = wheel.brakes * step->time;
    b->work_done += fmax(to->work.wheel, 0.0);
    return true;
}

static void idle_engine(struct sp_scheduling *b, struct sp_row *row)
{
    const struct sp_design *d = b->design;
    bool given = d->engine.heat_law == SP_HEAT_GIVEN;
    struct sp_engine_row engine = {0.0, given ? 0.0 : d->engine.idle_speed, NAN, NAN};
    row->in[SP_IN_ENGINE_SPEED] = engine.speed;
    sp_engine_row_heat(d, b->law, &engine, NAN, row->in);
    row->flags = SP_FLAG_ENGINE;
}

static bool steady_step(struct sp_scheduling *b, size_t i, struct sp_rows *to)
{
    const struct sp_step *step = &b->design->step[i];
    const struct sp_air_design *air = &b->design->air;
    double speed = step->kind == SP_STEP_HOLD ? step->speed : 0.0;
    if (!(step->time > 0.0) || isinf(step->time) || !isfinite(speed)) {
        sp_schedule_fault(b, i, NULL, "a step without a time or a speed",
                          "a time above 0 s, and with hold a speed");
        return false;
    }
    if (!b->law) return false;
    struct sp_row row = {.in = {[SP_IN_SPEED] = speed,
                                [SP_IN_AIR_SPEED] = speed + air->wind,
                                [SP_IN_WAKE] = 1.0,
                                [SP_IN_AMBIENT] = air->ambient,
                                [SP_IN_PRESSURE] = b->pressure,
                                [SP_IN_MEASURED] = NAN}};
    sp_schedule_step_air(step, false, row.in);
    if (step->kind == SP_STEP_IDLE) idle_engine(b, &row);
    if (step->kind == SP_STEP_HOLD && !hold_engine(b, i, &row, &to->table)) return false;
    for (int c = 0; c < SP_INPUTS; c++)
        if (c != SP_IN_MEASURED && !isfinite(row.in[c])) {
            sp_schedule_fault(b, i, NULL, "a step whose power or air is no number", "finite values");
            return false;
        }
    row.flags |= sp_schedule_step_flags(step);
    struct sp_row end = row;
    end.time = step->time;
    if (sp_rows_push(to, &row, (unsigned short)i) && sp_rows_push(to, &end, (unsigned short)i)) return true;
    sp_schedule_fault(b, i, NULL, "no memory", "memory for the step");
    return false;
}

/* ---- joining ---------------------------------------------------------------------------------- */

static void add_accounts(struct sp_schedule *to, const struct sp_schedule *from, double repeat)
{
    to->work.wheel += repeat * from->work.wheel;
    to->work.kinetic += repeat * from->work.kinetic;
    to->work.potential += repeat * from->work.potential;
    to->work.drag += repeat * from->work.drag;
    to->work.rolling += repeat * from->work.rolling;
    to->work.brakes += repeat * from->work.brakes;
    to->rows_merged += from->rows_merged;
    to->power_from_road |= from->power_from_road;
    to->measured |= from->measured;
}

static void join_step(struct sp_scheduling *b, size_t i, double repeat, const struct sp_rows *step)
{
    double rows = (double)b->rows.table.rows + repeat * (double)step->table.rows;
    if (rows > SP_SCHEDULE_ROWS || !sp_rows_reserve(&b->rows, (size_t)rows)) {
        char found[96];
        snprintf(found, sizeof found, "%.9g times %zu rows", repeat, step->table.rows);
        sp_schedule_fault(
            b, i, "repeat", found,
            "a drive of at most 20 million rows that memory can hold: fewer repeats, fewer marks, or a "
            "longer solver.merge");
        return;
    }
    double span = step->table.rows ? step->table.time[step->table.rows - 1] - step->table.time[0] : 0.0;
    if (repeat * span > SP_SCHEDULE_SPAN) {
        char found[96];
        snprintf(found, sizeof found, "%.9g times %.9g s", repeat, span);
        sp_schedule_fault(b, i, "repeat", found, "a step of at most 100 days in all");
        return;
    }
    for (double n = 0.0; n < repeat && !b->failed; n += 1.0)
        if (!sp_rows_append(&b->rows, step))
            sp_schedule_fault(b, i, "repeat", "no memory", "memory for the repeats");
    add_accounts(&b->rows.table, &step->table, repeat);
}

static void build_step(struct sp_scheduling *b, size_t i)
{
    double before = b->work_done, repeat = fmax(floor(b->design->step[i].repeat), 1.0) /* NAN: once */;
    struct sp_rows step = {0};
    bool trace = b->design->step[i].kind == SP_STEP_TRACE;
    bool fine = trace ? sp_schedule_trace(b, i, &step) : steady_step(b, i, &step);
    b->work_done = before + repeat * (b->work_done - before);
    if (fine && !b->failed) join_step(b, i, repeat, &step);
    sp_schedule_free(&step.table);
}

/* ---- the end ---------------------------------------------------------------------------------- */

static bool add_distance(struct sp_schedule *s)
{
    const double *v = s->channel[SP_IN_SPEED];
    s->distance = malloc(s->rows * sizeof *s->distance);
    if (!s->distance) return false;
    s->distance[0] = 0.0;
    for (size_t i = 1; i < s->rows; i++)
        s->distance[i] = s->distance[i - 1] + 0.5 * (v[i - 1] + v[i]) * (s->time[i] - s->time[i - 1]);
    return true;
}

static void finish(struct sp_scheduling *b)
{
    struct sp_place at = {.file = b->design->file, .path = "drive"};
    if (b->rows.table.rows < 2) {
        b->failed = true;
        sp_complain(b->complaints, &at, "no steps", "a drive that takes some time", NULL);
    } else if (!sp_schedule_run_on(&b->rows, b->design) || !sp_schedule_changes(&b->rows, b->design) ||
               !add_distance(&b->rows.table)) {
        b->failed = true;
        sp_complain(b->complaints, &at, "more rows than memory holds", "fewer rows, or a longer solver.merge",
                    NULL);
    } else {
        sp_schedule_check_work(b);
        sp_schedule_caution_changes(b);
    }
}

enum sp_status sp_schedule_build(struct sp_units *u, const struct sp_design *d, struct sp_schedule *out,
                                 struct sp_complaints *complaints, struct sp_complaints *cautions)
{
    struct sp_scheduling b = {.units = u,
                              .design = d,
                              .complaints = complaints,
                              .cautions = cautions,
                              .datum = NAN,
                              .pressure = d->air.pressure};
    struct sp_place at = {.file = d->file, .path = "car.engine"};
    *out = (struct sp_schedule){0};
    b.base = isnan(d->air.altitude) ? sp_isa_altitude(d->air.pressure) : d->air.altitude;
    if (isnan(b.base)) b.base = 0.0; /* no such standard altitude: ratios go from sea level */
    b.base_pressure = sp_isa_pressure(b.base);
    b.law = sp_engine_law_build(&d->engine, &at, complaints);
    if (b.law) sp_engine_law_oil(b.law, &d->oil);
    if (!b.law) b.failed = true;
    if (d->steps > 65535) sp_schedule_fault(&b, 65535, NULL, "more than 65535 steps", "fewer, with repeats");
    for (size_t i = 0; i < d->steps && d->steps <= 65535; i++)
        build_step(&b, i);
    if (!b.failed) finish(&b);
    sp_engine_law_free(b.law);
    *out = b.rows.table;
    if (b.failed) sp_schedule_free(out);
    return b.failed ? SP_INPUT : SP_OK;
}

void sp_schedule_free(struct sp_schedule *s)
{
    if (!s) return;
    free(s->time);
    free(s->distance);
    for (int c = 0; c < SP_INPUTS; c++)
        free(s->channel[c]);
    free(s->flags);
    free(s->step);
    free(s->variant);
    for (size_t i = 0; i < s->marks; i++)
        free(s->mark[i].text);
    free(s->mark);
    *s = (struct sp_schedule){0};
}

/* ---- looking up ------------------------------------------------------------------------------- */

void sp_schedule_at(const struct sp_schedule *s, size_t k, double t, struct sp_inputs *out)
{
    if (k + 1 >= s->rows) k = s->rows - 2;
    double h = s->time[k + 1] - s->time[k], past = t - s->time[k], share = h > 0.0 ? past / h : 0.0;
    for (int c = 0; c < SP_INPUTS; c++) {
        double a = s->channel[c][k], b = s->channel[c][k + 1];
        out->in[c] = share == 0.0 ? a : share == 1.0 ? b : a + share * (b - a);
    }
    double v = s->channel[SP_IN_SPEED][k];
    out->distance = s->distance[k] + (h > 0.0 ? 0.5 * past * (v + out->in[SP_IN_SPEED]) : 0.0);
    out->flags = s->flags[k];
}
