/* Cautions: legal, but seldom meant.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include "part/core.h"

#include <math.h>
#include <string.h>

/* A doubt: said when `doubtful`, which is false on NAN. The path is a row's. */
struct doubt {
    bool doubtful;
    const char *path, *found, *expected;
};

static void say(struct sp_reader *r, const struct doubt *list, size_t n, const struct sp_key_spot *at)
{
    for (size_t i = 0; i < n; ++i)
        if (list[i].doubtful) sp_case_caution_of(r, list[i].path, at, list[i].found, list[i].expected);
}

static size_t at_least_one(size_t n)
{
    return n ? n : 1;
}

/* Of several cores each has air of its own, or the same: the largest face and all exits count. */
static void doubt_duct(struct sp_reader *r, const struct sp_key_spot *at)
{
    const struct sp_duct_design *d = &r->design->duct[at->outer];
    double face = 0.0, exits = 0.0;
    for (size_t i = 0; i < at_least_one(d->cores); ++i)
        face = fmax(face, d->core[i].width * d->core[i].height);
    for (size_t i = 0; i < at_least_one(d->exits); ++i)
        exits += d->exit[i].area;
    const struct doubt list[] = {
        {d->inlet.area > face, "car.duct.inlet.area", NULL,
         "an inlet smaller than the core's face, as a rule"},
        {exits < 0.1 * face, "car.duct.exit.area", NULL,
         "an exit of more than a tenth of the core's face, as a rule"},
        {d->inlet.area < 0.05 * face, "car.duct.inlet.area", NULL,
         "an inlet of more than a twentieth of the core's face, as a rule"},
    };
    say(r, list, sizeof list / sizeof *list, at);
}

static void doubt_fan(struct sp_reader *r, const struct sp_key_spot *at)
{
    const struct sp_duct_design *d = &r->design->duct[at->outer];
    const struct sp_fan *f = &d->fan[at->inner];
    double limit = r->design->limits.coolant.stop, side = 0.0;
    if (!f->fitted) return;
    for (size_t i = 0; i < at_least_one(d->cores); ++i)
        side = fmax(side, fmin(d->core[i].width, d->core[i].height));
    const struct doubt list[] = {
        {f->diameter > 1.2 * side, "car.duct.fan.diameter", NULL, "a fan that fits upon the core"},
        {f->law == SP_FAN_SWITCHED && f->on > limit, "car.duct.fan.switch.on", NULL,
         "a switch that closes below the limit of the coolant"},
        {f->law == SP_FAN_PROPORTIONAL && f->from > limit, "car.duct.fan.proportional.from", NULL,
         "a fan that starts below the limit of the coolant"},
        {f->law != SP_FAN_SWITCHED && sp_case_given_at(r, "car.duct.fan.switch", at), "car.duct.fan.switch",
         NULL, "no switch with this control; it is not used"},
        {f->law != SP_FAN_PROPORTIONAL && sp_case_given_at(r, "car.duct.fan.proportional", at),
         "car.duct.fan.proportional", NULL, "control \"proportional\" with it; it is not used"},
    };
    say(r, list, sizeof list / sizeof *list, at);
}

static void doubt_engine(struct sp_reader *r)
{
    const struct sp_design *d = r->design;
    const struct sp_engine *e = &d->engine;
    double mean_pressure = 2.0 * e->rated_power / (e->displacement * e->rated_speed);
    const struct doubt list[] = {
        {mean_pressure > 40e5 || mean_pressure < 2e5, "car.engine.rated_power", NULL,
         "a mean effective pressure of 2 bar to 40 bar from rated power, speed and displacement"},
        {e->heat_fraction > 1.1 || e->heat_fraction < 0.2, "car.engine.heat.fraction", NULL,
         "0.2 to 1.1, as a rule"},
        {e->heat_law != SP_HEAT_TABLE && e->heat_table.rows, "car.engine.heat.table", "a table",
         "law \"table\" with it; it is not used"},
        {e->heat_law == SP_HEAT_TABLE && sp_case_given(r, "car.engine.heat.fraction"),
         "car.engine.heat.fraction", NULL, "no fraction with law \"table\"; it is not used"},
        {!d->thermostat.none && d->thermostat.opens > d->limits.coolant.stop, "car.thermostat.opens", NULL,
         "a thermostat that opens below the limit of the coolant"},
        {!d->pump.electric && sp_case_given(r, "car.pump.run_on"), "car.pump.run_on", NULL,
         "an electric pump with it; a belt has no run-on"},
        {d->start.coolant < sp_coolant_freezing(&d->coolant.fluid), "start.coolant", NULL,
         "a start above the freezing point of the coolant: the sum goes on as if it were liquid"},
        {d->air.ambient < sp_coolant_freezing(&d->coolant.fluid), "air.ambient", NULL,
         "an ambient above the freezing point of the coolant, or more glycol"},
        {d->start.coolant > d->limits.coolant.stop, "start.coolant", NULL,
         "a start below the limit of the coolant"},
        {d->start.coolant > sp_coolant_boiling(&d->coolant.fluid, d->air.pressure + fmax(d->tank.cap, 0.0)),
         "start.coolant", NULL, "a start below boiling"},
    };
    say(r, list, sizeof list / sizeof *list, &(struct sp_key_spot){0});
}

/* The correlations of fins rest on data of a certain range; beyond it they are a guess. */
static void doubt_fins(struct sp_reader *r, const struct sp_key_spot *at)
{
    const struct sp_core *c = &r->design->duct[at->outer].core[at->inner];
    if (c->drop_law != SP_DROP_FINS && c->heat_law != SP_CORE_FINS) return;
    struct sp_louvre louvre = sp_core_louvre(c);
    struct sp_plate plate = sp_core_plate(c);
    const char *outside = c->fin_kind == SP_FINS_PLATE ? sp_plate_outside(&plate) : sp_louvre_outside(&louvre);
    char found[80];
    if (!outside) return;
    snprintf(found, sizeof found, "%s outside the correlations' data", outside);
    sp_case_caution_of(r, "car.duct.core.fins", at, found,
                       "fins such as those measured; expect more than 15 % off");
}

/* Section [m2] of the duct that a core speaks of: its face over its share of it. */
static double section_of(const struct sp_core *c)
{
    double share = c->span_to - c->span_from;
    return c->width * c->height / (share > 0.0 ? share : 1.0);
}

/* Cores of one duct stand in one section. */
static void doubt_span(struct sp_reader *r, const struct sp_key_spot *at)
{
    const double most = 1.6; /* plenums open and close somewhat */
    const struct sp_duct_design *d = &r->design->duct[at->outer];
    double own = section_of(&d->core[at->inner]), first = section_of(&d->core[0]);
    char found[120];
    if (!at->inner || !(own > 0.0 && first > 0.0) || (own < most * first && first < most * own)) return;
    snprintf(found, sizeof found, "a face and span that make a section of %.3g m2, while the first core's make %.3g m2", own,
             first);
    sp_case_caution_of(r, "car.duct.core.width", at, found, "cores of one duct that stand in one section: see span_to");
}

static void doubt_each(struct sp_reader *r, const char *group,
                       void (*doubt)(struct sp_reader *r, const struct sp_key_spot *at))
{
    struct sp_key_spot at = {0};
    do
        doubt(r, &at);
    while (sp_case_next(r->tree, group, &at));
}

void sp_case_doubt(struct sp_reader *r)
{
    doubt_each(r, "car.duct.core", doubt_fins);
    doubt_each(r, "car.duct.core", doubt_span);
    doubt_each(r, "car.duct", doubt_duct);
    doubt_each(r, "car.duct.fan", doubt_fan);
    doubt_engine(r);
}
