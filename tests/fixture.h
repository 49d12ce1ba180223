/* A car to change by hand, and drives with their samples kept: shared by the tests of circuit and drive.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_TESTS_FIXTURE_H
#define SP_TESTS_FIXTURE_H

#include "check.h"

#include <stdlib.h>
#include <string.h>
#include <udunits2.h>

#include "circuit/circuit.h"
#include "drive/run.h"
#include "swirlpot/drive.h"
#include "swirlpot/paper.h"

/* Every group is there, so that all fields have been filled; what matters to a test it sets itself. */
static const char fixture_case[] =
    "{ \"air\": { \"ambient\": \"25 degC\", \"altitude\": \"0 m\", \"humidity\": \"40 %\" },\n"
    "  \"start\": { \"coolant\": \"80 degC\" },\n"
    "  \"drive\": [ { \"hold\": \"60 s\", \"speed\": \"108 km/h\", \"power\": \"60 kW\",\n"
    "               \"engine_speed\": \"5000 rpm\" } ],\n"
    "  \"limits\": { \"coolant\": \"115 degC\", \"boil_margin\": \"5 K\" },\n"
    "  \"car\": {\n"
    "    \"body\": { \"mass\": \"900 kg\", \"frontal_area\": \"1.8 m2\", \"drag_coefficient\": 0.4 },\n"
    "    \"engine\": { \"displacement\": \"2.0 l\", \"rated_power\": \"150 kW\", \"rated_speed\": \"7500 "
    "rpm\",\n"
    "                \"idle_speed\": \"900 rpm\", \"heat\": { \"fraction\": 0.5 } },\n"
    "    \"coolant\": { \"kind\": \"ethylene glycol\", \"glycol\": \"50 %\" },\n"
    "    \"pump\": { \"curve\": { \"shutoff\": \"110 kPa\", \"free_flow\": \"190 l/min\" },\n"
    "              \"speed\": \"7000 rpm\", \"ratio\": 1.0 },\n"
    "    \"thermostat\": { \"opens\": \"82 degC\", \"full\": \"94 degC\" },\n"
    "    \"tank\": { \"volume\": \"1.6 l\", \"air_space\": \"0.8 l\" },\n"
    "    \"duct\": {\n"
    "      \"inlet\": { \"area\": \"500 cm2\", \"recovery\": 0.9, \"lip\": \"rounded 10 mm\" },\n"
    "      \"diffuser\": { \"loss\": 0.3 },\n"
    "      \"core\": { \"width\": \"500 mm\", \"height\": \"340 mm\", \"depth\": \"40 mm\",\n"
    "        \"fins\": { \"pitch\": \"1.8 mm\", \"louvre_pitch\": \"1.4 mm\", \"louvre_angle\": \"24 deg\" "
    "},\n"
    "        \"tubes\": { \"pitch\": \"10 mm\", \"height\": \"2 mm\", \"rows\": 2 } },\n"
    "      \"fan\": { \"curve\": { \"shutoff\": \"180 Pa\", \"free_flow\": \"0.6 m3/s\" },\n"
    "               \"diameter\": \"330 mm\" },\n"
    "      \"exit\": { \"area\": \"800 cm2\", \"loss\": 0.5, \"pressure_coefficient\": -0.1 } } } }\n";

struct fixture {
    struct sp_units *units;
    struct sp_design *base; /* copy it (tables are shared) and change the copy */
};

static inline struct fixture fixture_open(void)
{
    struct sp_complaints c = {0}, cautions = {0};
    ut_set_error_message_handler(ut_ignore); /* the unit library's tables double a few names and say so */
    struct fixture f = {.units = sp_units_open()};
    assert_non_null(f.units);
    f.base = sp_case_parse(f.units, "fixture", fixture_case, sizeof fixture_case - 1, NULL, 0, SP_FOR_DRIVE,
                           &c, &cautions);
    sp_complaints_print(&c, false, stderr);
    assert_non_null(f.base);
    sp_complaints_free(&c);
    sp_complaints_free(&cautions);
    return f;
}

static inline void fixture_close(struct fixture *f)
{
    sp_design_free(f->base);
    sp_units_close(f->units);
}

/* ---- designs ---------------------------------------------------------------------------------------- */

/* Properties that do not change with temperature: those of 50 % ethylene glycol at 90 degC (ASHRAE), for
 * which every property ratio of the model is 1. */
static inline void fixture_freeze(struct sp_coolant *c)
{
    memset(c->density, 0, sizeof c->density);
    memset(c->cp, 0, sizeof c->cp);
    memset(c->conductivity, 0, sizeof c->conductivity);
    memset(c->ln_viscosity, 0, sizeof c->ln_viscosity);
    c->density[0] = 1030.95;
    c->cp[0] = 3551.0;
    c->conductivity[0] = 0.414;
    c->ln_viscosity[0] = log(0.82);
}

static inline struct sp_step fixture_hold(double time, double speed, double power, double engine_speed)
{
    return (struct sp_step){.kind = SP_STEP_HOLD,
                            .time = time,
                            .speed = speed,
                            .power = power,
                            .engine_speed = engine_speed,
                            .grade = 0.0,
                            .repeat = 1.0};
}

/* ---- drives ------------------------------------------------------------------------------------------ */

struct fixture_series {
    struct sp_sample *row;
    size_t count, room;
};

static inline bool fixture_take(void *context, const struct sp_sample *s)
{
    struct fixture_series *k = context;
    if (k->count == k->room) {
        k->room = k->room ? 2 * k->room : 128;
        k->row = realloc(k->row, k->room * sizeof *k->row);
        assert_non_null(k->row);
    }
    k->row[k->count++] = *s;
    return true;
}

static inline bool fixture_again(void *context)
{
    struct fixture_series *k = context;
    k->count = 0;
    return true;
}

struct fixture_drive {
    enum sp_status status;
    struct sp_result result;
    struct fixture_series series;
    struct sp_complaints complaints;
};

/* Builds and runs; a drive that cannot be built has status SP_INPUT. */
static inline struct fixture_drive fixture_run(const struct fixture *f, const struct sp_design *d,
                                               double interval, double tolerance)
{
    struct fixture_drive out = {.status = SP_INPUT};
    struct sp_complaints cautions = {0};
    struct sp_drive *drive = sp_drive_build(f->units, d, &out.complaints, &cautions);
    sp_complaints_free(&cautions);
    if (!drive) return out;
    struct sp_sink sink = {.context = &out.series, .row = fixture_take, .again = fixture_again};
    struct sp_run_options options = {interval, tolerance, interval > 0.0 ? &sink : NULL};
    out.status = sp_drive_run(drive, &options, &out.result, &out.complaints);
    sp_drive_free(drive);
    return out;
}

static inline void fixture_drop(struct fixture_drive *r)
{
    sp_result_free(&r->result);
    sp_complaints_free(&r->complaints);
    free(r->series.row);
}

/* Value of a channel in the last sample. */
static inline double fixture_last(const struct fixture_drive *r, enum sp_channel c)
{
    return r->series.count ? r->series.row[r->series.count - 1].value[c] : NAN;
}

/* The sample at time t; t must be on the grid of samples. */
static inline const struct sp_sample *fixture_at(const struct fixture_drive *r, double t)
{
    for (size_t i = 0; i < r->series.count; ++i)
        if (fabs(r->series.row[i].value[SP_CH_TIME] - t) < 1e-6) return &r->series.row[i];
    fail_msg("no sample at %g s", t);
    return NULL;
}

/* Limits of four quantities and none else. */
static inline struct sp_limits only_limits(double coolant, double gauge, double metal, double boil_margin)
{
    const struct sp_tiers none = {NAN, NAN, NAN};
    return (struct sp_limits){.coolant = {NAN, NAN, coolant}, .gauge = {NAN, NAN, gauge}, .metal = {NAN, NAN, metal},
                              .oil = none, .gearbox = none, .charge = none, .boil_margin = boil_margin,
                              .least_coolant = NAN, .least_oil = NAN, .load = NAN};
}

#endif
