/* How the values of the coolant loop stand to each other.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

/* One thing that must not be; false on NAN. */
struct fault {
    bool holds;
    const char *path, *found, *expected;
};

static void say(struct sp_reader *r, const struct fault *list, size_t count)
{
    for (size_t i = 0; i < count; ++i)
        if (list[i].holds) sp_case_fault(r, list[i].path, list[i].found, list[i].expected, NULL);
}

/* What stands there: NULL for what is written. */
static const char *found(const struct sp_reader *r, const char *path, const char *absent)
{
    return sp_case_given(r, path) ? NULL : absent;
}

/* A control other than "fixed" is an electric pump's. */
static void check_pump(struct sp_reader *r)
{
    const struct sp_pump *p = &r->design->pump;
    const struct fault list[] = {
        {p->law != SP_PUMP_FIXED && !p->electric, "car.pump.control", NULL,
         "\"fixed\" with a belt, or drive \"electric\""},
        {p->law == SP_PUMP_OVER_TEMPERATURE && p->from >= p->to, "car.pump.temperature.from",
         found(r, "car.pump.temperature.from", "80 degC by default"), "a temperature below temperature.to"},
    };
    say(r, list, sizeof list / sizeof *list);
}

static void check_thermostat(struct sp_reader *r)
{
    const struct sp_thermostat *t = &r->design->thermostat;
    const struct fault list[] = {
        {t->restrictor > 0.0 && t->restrictor >= r->design->hoses.bore_out, "car.thermostat.restrictor", NULL,
         "a bore below that of the hose to the radiator, hoses.out.bore"},
        {!(t->mapped_power > 0.0) && sp_case_given(r, "car.thermostat.mapped") &&
             !sp_case_given(r, "car.thermostat.mapped.power"), "car.thermostat.mapped.power",
         found(r, "car.thermostat.mapped.power", "nothing"), "a power above 0, for a mapped thermostat"},
    };
    say(r, list, sizeof list / sizeof *list);
}

static void check_branches(struct sp_reader *r)
{
    const struct sp_design *d = r->design;
    const struct fault list[] = {
        {!(d->hoses.heater.flow > 0.0) && sp_case_given(r, "car.hoses.heater"), "car.hoses.heater.flow",
         found(r, "car.hoses.heater.flow", "nothing"), "a flow above 0, for a heater is given"},
        {d->tank.bleed_bore > 0.0 && sp_case_given(r, "car.tank.bleed"), "car.tank.bleed_bore",
         "both bleed and bleed_bore", "one of them"},
        {d->tank.bleed_bore > 0.0 && d->tank.bleed_bore >= d->hoses.bore_out, "car.tank.bleed_bore", NULL,
         "a bore below that of the hose to the radiator, hoses.out.bore"},
    };
    say(r, list, sizeof list / sizeof *list);
    if (d->tank.lost > d->tank.volume - d->tank.air_space)
        sp_case_caution(r, "car.tank.lost", NULL,
                        "no more than the tank holds when cold: no air elsewhere in the circuit is counted");
}

void sp_case_check_loop(struct sp_reader *r)
{
    check_pump(r);
    check_thermostat(r);
    check_branches(r);
}
