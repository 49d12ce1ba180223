/* How the car's values stand to each other. Values that could not be read are NAN, and nothing is said of
 * them twice. SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* One value that has to be below another. */
struct order {
    const char *low, *high; /* patterns, of the element at `at` */
    double below, above;    /* SI */
    struct sp_key_spot at;
};

/* A value as its user knows it: the text written, the default's text, or the number a rule gave. */
static void in_words(const struct sp_reader *r, const char *path, const struct sp_key_spot *at, double value,
                     char *out, size_t size)
{
    const struct sp_json *node = sp_case_node_at(r, path, at);
    const struct sp_key *row = sp_key_find(path);
    if (node && node->text)
        snprintf(out, size, "%.80s", node->text);
    else if (!row->rule && row->fallback)
        snprintf(out, size, "%.80s by default", row->fallback);
    else if (row->kind == SP_K_TEMPERATURE)
        snprintf(out, size, "%.6g degC by default", value - SP_ZERO_C);
    else if (row->kind == SP_K_ROTATION)
        snprintf(out, size, "%.6g rpm by default", 60.0 * value);
    else
        snprintf(out, size, "%.6g %s by default", value, sp_kind_si(row->kind));
}

/* How much a user has to do with a value: nothing, in a file, on the command line, by a change. */
int sp_case_weight(const struct sp_reader *r, const char *pattern, const struct sp_key_spot *at)
{
    char path[SP_PATH_MAX], source[2 * SP_PATH_MAX];
    sp_case_path(r->tree, pattern, at, path, sizeof path);
    const struct sp_json *node = sp_case_node(r->tree, path);
    if (!node) return 0;
    if (sp_case_source(r, path, source, sizeof source)) return 3;
    return node->file && !strncmp(node->file, "--set ", 6) ? 2 : 1;
}

/* Blames what the user set, and the lower of the two where that is both or none. */
static void check_order(struct sp_reader *r, const struct order *o)
{
    if (isnan(o->below) || isnan(o->above) || o->below < o->above) return;
    bool low = sp_case_weight(r, o->low, &o->at) >= sp_case_weight(r, o->high, &o->at);
    const char *blamed = low ? o->low : o->high, *other = low ? o->high : o->low;
    char bound[120], found[120], expected[260];
    in_words(r, other, &o->at, low ? o->above : o->below, bound, sizeof bound);
    in_words(r, blamed, &o->at, low ? o->below : o->above, found, sizeof found);
    snprintf(expected, sizeof expected, "%s %s %s, which is %s", sp_key_name(sp_key_find(blamed)),
             low ? "below" : "above", sp_key_name(sp_key_find(other)), bound);
    sp_case_fault_of(r, blamed, &o->at, sp_case_given_at(r, blamed, &o->at) ? NULL : found, expected, NULL);
}

static void check_orders(struct sp_reader *r)
{
    const struct sp_design *d = r->design;
    const struct order orders[] = {
        {"car.thermostat.opens", "car.thermostat.full", d->thermostat.opens, d->thermostat.full, {0}},
        {"car.engine.idle_speed", "car.engine.rated_speed", d->engine.idle_speed, d->engine.rated_speed, {0}},
        {"car.tank.air_space", "car.tank.volume", d->tank.air_space, d->tank.volume, {0}},
    };
    for (size_t i = 0; i < sizeof orders / sizeof *orders; ++i)
        check_order(r, &orders[i]);
}

/* ---- tables ---------------------------------------------------------------------------------------- */

/* First row whose value in `column` is not above that of the row before (times `sign`); 0 if none. */
static size_t out_of_order(const struct sp_table *t, size_t column, double sign)
{
    for (size_t i = 1; i < t->rows; ++i)
        if (!(sign * t->cell[i * t->columns + column] > sign * t->cell[(i - 1) * t->columns + column]))
            return i;
    return 0;
}

static void check_rising(struct sp_reader *r, const char *path, const struct sp_table *t, size_t column,
                         double sign, const char *expected)
{
    char here[SP_PATH_MAX];
    size_t bad = t->rows ? out_of_order(t, column, sign) : 0;
    if (!bad) return;
    if (t->columns > 1)
        snprintf(here, sizeof here, "%.200s[%zu][%zu]", path, bad, column);
    else
        snprintf(here, sizeof here, "%.200s[%zu]", path, bad);
    sp_case_fault(r, here, NULL, expected, NULL);
}

static void check_curve(struct sp_reader *r, const char *path, const struct sp_table *t)
{
    if (!t->rows) return;
    if (t->rows < 2) sp_case_fault(r, path, "one pair", "two pairs or more", NULL);
    check_rising(r, path, t, 0, 1.0, "flow rising from pair to pair");
    for (size_t i = 1; i < t->rows; ++i) {
        char here[SP_PATH_MAX];
        if (!(t->cell[2 * i + 1] > t->cell[2 * i - 1])) continue;
        snprintf(here, sizeof here, "%.200s[%zu][1]", path, i);
        sp_case_fault(r, here, NULL,
                      "pressure that never rises with flow: with a stall dip one duct would have several "
                      "flows; give the stable branch, carried on to shut-off",
                      NULL);
    }
    double last = t->cell[2 * t->rows - 1];
    if (t->rows > 1 && !(last < t->cell[2 * t->rows - 3]))
        sp_case_fault(r, path, "pressure that does not fall at the end",
                      "pressure falling with flow at the last pair", NULL);
    if (!(t->cell[1] > 0.0))
        sp_case_fault(r, path, "no pressure at the first pair", "pressure above 0 there", NULL);
}

static int by_speed_and_power(const void *a, const void *b)
{
    const double *x = a, *y = b;
    if (x[0] != y[0]) return x[0] < y[0] ? -1 : 1;
    return (x[1] > y[1]) - (x[1] < y[1]);
}

/* Sorts the heat table by speed, then power, and asks for a full grid. */
static void check_heat_table(struct sp_reader *r)
{
    struct sp_table *t = &r->design->engine.heat_table;
    const char *path = "car.engine.heat.table";
    size_t powers = 0;
    if (!t->rows) return;
    qsort(t->cell, t->rows, t->columns * sizeof *t->cell, by_speed_and_power);
    while (powers < t->rows && t->cell[3 * powers] == t->cell[0])
        ++powers;
    bool full = powers > 1 && t->rows % powers == 0 && t->rows > powers;
    for (size_t i = 0; full && i < t->rows; ++i) {
        const double *row = &t->cell[3 * i], *first = &t->cell[3 * (i % powers)];
        const double *head = &t->cell[3 * (i - i % powers)];
        full = row[1] == first[1] && row[0] == head[0] && (i % powers == 0 || row[1] > row[-2]) &&
               (i % powers || !i || row[0] > row[-3]);
    }
    if (!full)
        sp_case_fault(r, path, "no full grid",
                      "every engine speed with every power once, two or more of each", NULL);
}

/* ---- rooms ----------------------------------------------------------------------------------------- */

static void check_engine(struct sp_reader *r)
{
    const struct sp_engine *e = &r->design->engine;
    bool drive = r->purpose == SP_FOR_DRIVE && sp_case_given(r, "car.engine.heat");
    if (drive && e->heat_law == SP_HEAT_RATED && !sp_case_given(r, "car.engine.heat.fraction"))
        sp_case_fault(r, "car.engine.heat.fraction", "nothing",
                      "a number such as 0.65, the heat to the coolant over brake power at rated power", NULL);
    if (e->heat_law == SP_HEAT_TABLE && !sp_case_given(r, "car.engine.heat.table"))
        sp_case_fault(r, "car.engine.heat.table", "nothing", "rows of engine speed, brake power and heat",
                      NULL);
    check_heat_table(r);
}

static void check_body(struct sp_reader *r)
{
    const struct sp_body *b = &r->design->body;
    check_rising(r, "car.body.gears", &b->gears, 0, -1.0, "ratios falling from gear to gear");
    if (b->gears.rows && !sp_case_given(r, "car.body.wheel_radius"))
        sp_case_fault(r, "car.body.wheel_radius", "nothing",
                      "a length such as \"300 mm\", for gears are given", NULL);
}

static void check_pump(struct sp_reader *r)
{
    const struct sp_pump *p = &r->design->pump;
    check_curve(r, "car.pump.curve", &p->curve.pairs);
    if (r->purpose == SP_FOR_DRIVE && !p->electric && sp_case_given(r, "car.pump") &&
        !sp_case_given(r, "car.pump.speed"))
        sp_case_fault(r, "car.pump.speed", "nothing",
                      "a speed of rotation such as \"6900 rpm\", the pump speed for which its curve holds",
                      NULL);
}

/* ---- ducts ----------------------------------------------------------------------------------------- */

static void check_fan(struct sp_reader *r, const struct sp_key_spot *at)
{
    const struct sp_fan *f = &r->design->duct[at->outer].fan[at->inner];
    const struct order orders[] = {
        {"car.duct.fan.hub", "car.duct.fan.diameter", f->hub, f->diameter, *at},
        {"car.duct.fan.switch.off", "car.duct.fan.switch.on", f->off, f->on, *at},
        {"car.duct.fan.proportional.from", "car.duct.fan.proportional.to", f->from, f->to, *at},
    };
    char path[SP_PATH_MAX];
    for (size_t i = 0; i < sizeof orders / sizeof *orders; ++i)
        check_order(r, &orders[i]);
    sp_case_path(r->tree, "car.duct.fan.curve", at, path, sizeof path);
    check_curve(r, path, &f->curve.pairs);
    if (f->fitted && f->static_basis && !sp_case_given_at(r, "car.duct.fan.diameter", at))
        sp_case_fault_of(r, "car.duct.fan.diameter", at, "nothing",
                         "a length such as \"305 mm\", for the curve is of static pressure", NULL);
}

static void check_diffuser(struct sp_reader *r, const struct sp_key_spot *at)
{
    bool kind = sp_case_given_at(r, "car.duct.diffuser.kind", at),
         length = sp_case_given_at(r, "car.duct.diffuser.length", at);
    if (kind && sp_case_given_at(r, "car.duct.diffuser.loss", at))
        sp_case_fault_of(r, "car.duct.diffuser.kind", at, "both kind and loss", "one of them", NULL);
    if (length && !kind)
        sp_case_fault_of(r, "car.duct.diffuser.kind", at, "nothing", "\"conical\", for a length is given",
                         NULL);
    if (!length && kind && r->design->duct[at->outer].diffuser.kind == SP_DIFFUSER_CONICAL)
        sp_case_fault_of(r, "car.duct.diffuser.length", at, "nothing", "a length such as \"320 mm\"", NULL);
}

/* Each part of each duct. */
static void check_ducts(struct sp_reader *r)
{
    static const struct {
        const char *group;
        void (*check)(struct sp_reader *r, const struct sp_key_spot *at);
    } parts[] = {
        {"car.duct", check_diffuser}, {"car.duct.fan", check_fan}, {"car.duct.core", sp_case_check_core}};
    for (size_t i = 0; i < sizeof parts / sizeof *parts; ++i) {
        struct sp_key_spot at = {0};
        do
            parts[i].check(r, &at);
        while (sp_case_next(r->tree, parts[i].group, &at));
    }
}

/* Moist air is known over water only where the saturation formula is. */
static void check_air(struct sp_reader *r)
{
    const struct sp_air_design *a = &r->design->air;
    if (!(a->humidity > 0.0) || isnan(a->ambient) || isfinite(sp_vapour_saturation(a->ambient))) return;
    sp_case_fault(r, "air.humidity", NULL, "0 % where the ambient is outside -45 degC to 60 degC", NULL);
}

void sp_case_check(struct sp_reader *r)
{
    check_air(r);
    if (r->no_car) return;
    check_orders(r);
    check_body(r);
    check_engine(r);
    check_pump(r);
    check_ducts(r);
    sp_case_check_loop(r);
    sp_case_check_fitted(r);
    sp_case_check_engine(r);
}
