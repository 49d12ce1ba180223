/* Cautions: legal, but seldom meant.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include "part/core.h"

#include <math.h>
#include <string.h>

/* A doubt: said when `doubtful`, which is false on NAN. */
struct doubt {
    bool doubtful;
    const char *path, *found, *expected;
};

static void say(struct sp_reader *r, const struct doubt *list, size_t n)
{
    for (size_t i = 0; i < n; ++i)
        if (list[i].doubtful) sp_case_caution(r, list[i].path, list[i].found, list[i].expected);
}

static void doubt_duct(struct sp_reader *r)
{
    const struct sp_duct_design *d = &r->design->duct[0];
    double face = d->core[0].width * d->core[0].height;
    bool fan = d->fan[0].fitted;
    const struct doubt list[] = {
        {d->inlet.area > face, "car.duct.inlet.area", NULL,
         "an inlet smaller than the core's face, as a rule"},
        {d->exit[0].area < 0.1 * face, "car.duct.exit.area", NULL,
         "an exit of more than a tenth of the core's face, as a rule"},
        {d->inlet.area < 0.05 * face, "car.duct.inlet.area", NULL,
         "an inlet of more than a twentieth of the core's face, as a rule"},
        {fan && d->fan[0].diameter > 1.2 * fmin(d->core[0].width, d->core[0].height), "car.duct.fan.diameter", NULL,
         "a fan that fits upon the core"},
        {fan && d->fan[0].law == SP_FAN_SWITCHED && d->fan[0].on > r->design->limits.coolant.stop,
         "car.duct.fan.switch.on", NULL, "a switch that closes below the limit of the coolant"},
        {fan && d->fan[0].law == SP_FAN_PROPORTIONAL && d->fan[0].from > r->design->limits.coolant.stop,
         "car.duct.fan.proportional.from", NULL, "a fan that starts below the limit of the coolant"},
        {fan && d->fan[0].law != SP_FAN_SWITCHED && sp_case_given(r, "car.duct.fan.switch"),
         "car.duct.fan.switch", NULL, "no switch with this control; it is not used"},
        {fan && d->fan[0].law != SP_FAN_PROPORTIONAL && sp_case_given(r, "car.duct.fan.proportional"),
         "car.duct.fan.proportional", NULL, "control \"proportional\" with it; it is not used"},
    };
    say(r, list, sizeof list / sizeof *list);
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
    say(r, list, sizeof list / sizeof *list);
}

/* The correlations of fins rest on data of a certain range; beyond it they are a guess. */
static void doubt_fins(struct sp_reader *r)
{
    const struct sp_core *c = &r->design->duct[0].core[0];
    if (c->drop_law != SP_DROP_FINS && c->heat_law != SP_CORE_FINS) return;
    struct sp_louvre g = sp_core_louvre(c);
    const char *outside = sp_louvre_outside(&g);
    char found[80];
    if (!outside) return;
    snprintf(found, sizeof found, "%s outside the correlations' data", outside);
    sp_case_caution(r, "car.duct.core.fins", found, "fins such as those measured; expect more than 15 % off");
}

void sp_case_doubt(struct sp_reader *r)
{
    doubt_fins(r);
    doubt_duct(r);
    doubt_engine(r);
}
