/* swirlpot hold: where a held speed settles. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "swirlpot/hold.h"
#include "swirlpot/paper.h"
#include "verbs.h"

/* What is asked, and what came of it. */
struct question {
    const struct sp_arguments *arguments;
    struct sp_units *units;
    struct sp_hold_wish *wish;
    struct sp_hold_point *point;
    double *ceiling;
    size_t points;
    struct sp_complaints complaints, cautions;
};

static const struct sp_wanted wanted_speed = {"--speed", SP_K_SPEED, 0.0, 150.0,
                                              "0 km/h to 540 km/h, as \"80 km/h\""};
static const struct sp_wanted wanted_power = {"--power", SP_K_POWER, -1e6, 5e6,
                                              "-1 MW to 5 MW, as \"30 kW\""};
static const struct sp_wanted wanted_grade = {"--grade", SP_K_NUMBER, -0.5, 0.5, "-50 % to 50 %, as \"7 %\""};
static const struct sp_wanted wanted_turns = {"--engine-speed", SP_K_ROTATION, 0.0, 500.0,
                                              "0 rpm to 30000 rpm, as \"3000 rpm\""};

static bool complain(struct question *q, const char *option, const char *found, const char *expected)
{
    struct sp_place at = {.path = option};
    sp_complain(&q->complaints, &at, found, expected, NULL);
    return false;
}

/* ---- reading --------------------------------------------------------------------------------------- */

/* The i-th of a list; NAN in an empty one. */
static bool read_one(struct question *q, const struct sp_wanted *w, const struct sp_texts *from, size_t i,
                     double *si)
{
    *si = NAN;
    return !from->count || sp_argument_quantity(q->units, w, from->list[i], si, &q->complaints);
}

static size_t at_least_one(size_t n)
{
    return n ? n : 1;
}

/* Every speed with every power, or with every grade. */
static bool read_wishes(struct question *q, double engine_speed)
{
    const struct sp_arguments *a = q->arguments;
    size_t powers = at_least_one(a->powers.count), grades = at_least_one(a->grades.count);
    bool good = true;
    for (size_t v = 0, n = 0; v < a->speeds.count; ++v)
        for (size_t p = 0; p < powers; ++p)
            for (size_t g = 0; g < grades; ++g, ++n) {
                struct sp_hold_wish *w = &q->wish[n];
                w->engine_speed = engine_speed;
                good = read_one(q, &wanted_speed, &a->speeds, v, &w->speed) && good;
                good = read_one(q, &wanted_power, &a->powers, p, &w->power) && good;
                good = read_one(q, &wanted_grade, &a->grades, g, &w->grade) && good;
                if (!good) return false;
            }
    return good;
}

static bool read_question(struct question *q)
{
    const struct sp_arguments *a = q->arguments;
    double engine_speed = NAN;
    if (!a->speeds.count) return complain(q, "--speed", "none", "at least one speed, as --speed \"80 km/h\"");
    if (a->powers.count && a->grades.count && a->powers.count + a->grades.count > 2)
        return complain(q, "--grade", "several with --power",
                        "one power and one grade that mean the same, or one kind");
    if (a->engine_speed &&
        !sp_argument_quantity(q->units, &wanted_turns, a->engine_speed, &engine_speed, &q->complaints))
        return false;
    q->points = a->speeds.count * at_least_one(a->powers.count) * at_least_one(a->grades.count);
    q->wish = calloc(q->points, sizeof *q->wish);
    q->point = calloc(q->points, sizeof *q->point);
    q->ceiling = calloc(q->points, sizeof *q->ceiling);
    if (!q->wish || !q->point || !q->ceiling)
        return complain(q, "--speed", "too little memory", "memory for all points");
    return read_wishes(q, engine_speed);
}

/* ---- solving --------------------------------------------------------------------------------------- */

static bool same(const char *a, const char *b)
{
    return a == b || (a && b && !strcmp(a, b));
}

static bool known(const struct sp_complaints *list, const struct sp_complaint *c)
{
    for (size_t i = 0; i < list->count; ++i)
        if (same(list->list[i].path, c->path) && same(list->list[i].found, c->found)) return true;
    return false;
}

/* What holds of every point of a grid is said once. */
static void add_new(struct sp_complaints *to, const struct sp_complaints *from)
{
    for (size_t i = 0; i < from->count; ++i) {
        const struct sp_complaint *c = &from->list[i];
        struct sp_place at = {.file = c->file, .line = c->line, .path = c->path, .named_by = c->named_by};
        if (!known(to, c)) sp_complain(to, &at, c->found, c->expected, c->hint);
    }
}

static bool wrong(enum sp_status s)
{
    return s == SP_INPUT || s == SP_NUMERICS;
}

static enum sp_status solve_point(struct question *q, const struct sp_design *d, size_t i)
{
    struct sp_complaints cautions = {0};
    enum sp_status status = sp_hold_solve(q->units, d, &q->wish[i], &q->point[i], &q->complaints, &cautions),
                   other;
    add_new(&q->cautions, &cautions);
    sp_complaints_free(&cautions);
    if (wrong(status) || !q->arguments->ceiling) return status;
    other = sp_hold_ceiling(q->units, d, &q->wish[i], &q->ceiling[i], &q->complaints);
    return wrong(other) ? other : status;
}

static enum sp_status solve_all(struct question *q, const struct sp_design *d)
{
    enum sp_status worst = SP_OK;
    for (size_t i = 0; i < q->points; ++i) {
        enum sp_status status = solve_point(q, d, i);
        if (wrong(status)) return status;
        if (status == SP_NOT) worst = SP_NOT;
    }
    const struct sp_hold_report report = {d, q->point, q->arguments->ceiling ? q->ceiling : NULL, q->points};
    (q->arguments->json ? sp_hold_json : sp_hold_text)(&report, stdout);
    return worst;
}

static enum sp_status run(const struct sp_arguments *a)
{
    struct question q = {.arguments = a, .units = sp_units_open()};
    bool good = read_question(&q);
    struct sp_design *d = sp_case_read(q.units, a->operand, a->sets.list, a->sets.count, SP_FOR_DRIVE,
                                       &q.complaints, &q.cautions);
    enum sp_status status = good && d ? solve_all(&q, d) : SP_INPUT;
    sp_design_free(d);
    sp_units_close(q.units);
    free(q.wish);
    free(q.point);
    free(q.ceiling);
    return sp_speak(status, &q.complaints, &q.cautions);
}

const struct sp_verb sp_verb_hold = {
    "hold",
    "CASE",
    "vwgncsj",
    "tells where a steady speed settles",
    "Holds a speed at a power, or on a grade, until the car settles, and tells where:\n"
    "temperatures, room to each limit and to boiling, the hottest air it stands,\n"
    "heat, flows and pressures; or how long it lasts. Several speeds, powers or\n"
    "grades make a table. Without power and grade the road is level; 0 km/h then\n"
    "idles. The case's own drive is left aside, its start is where the hold begins.\n"
    "Status 1: some point does not hold.",
    run};
