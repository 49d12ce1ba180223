/* How the values of engine, oils and charge air stand to each other: what does not go together, what is not
 * used, what is known poorly. SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>

#include "part/engine.h"

/* One thing that may be; false on NAN. */
struct finding {
    bool holds;
    const char *path, *found, *expected; /* found NULL: what stands there */
};

static void faults(struct sp_reader *r, const struct finding *list, size_t n)
{
    for (size_t i = 0; i < n; ++i)
        if (list[i].holds) sp_case_fault(r, list[i].path, list[i].found, list[i].expected, NULL);
}

static void cautions(struct sp_reader *r, const struct finding *list, size_t n)
{
    for (size_t i = 0; i < n; ++i)
        if (list[i].holds) sp_case_caution(r, list[i].path, list[i].found, list[i].expected);
}

#define FAULTS(list)   faults(r, list, sizeof(list) / sizeof *(list))
#define CAUTIONS(list) cautions(r, list, sizeof(list) / sizeof *(list))

/* ---- a heat that is given -------------------------------------------------------------------------- */

static bool drives_a_trace(const struct sp_design *d)
{
    for (size_t i = 0; i < d->steps; ++i)
        if (d->step[i].trace) return true;
    return false;
}

/* Rules by displacement have nothing to go by; each lacking value is asked for as any required key. */
static void require(struct sp_reader *r, const char *key)
{
    char expected[400];
    if (sp_case_given(r, key)) return;
    sp_key_expected(sp_key_find(key), expected, sizeof expected);
    sp_case_fault(r, key, "nothing", expected, "without car.engine.displacement there is no default");
}

static void check_given(struct sp_reader *r)
{
    const struct sp_design *d = r->design;
    static const char *const sizes[] = {"car.engine.metal_capacity", "car.engine.coolant_volume",
                                        "car.engine.conductance", "car.engine.conductance_flow"};
    bool heat = sp_case_given(r, "car.engine.heat.given") || sp_case_given(r, "car.engine.heat.loss");
    const struct finding list[] = {
        {!heat && !r->changed && !drives_a_trace(d), "car.engine.heat.given", "nothing",
         "a power such as \"2 kW\", or loss, or a trace with a column heat"},
        {!d->pump.electric && sp_case_given(r, "car.pump"), "car.pump.drive",
         sp_case_given(r, "car.pump.drive") ? NULL : "\"belt\" by default",
         "\"electric\", for there is no engine"},
        {d->charge.fitted, "car.charge", "charge air", "none, for there is no engine"},
    };
    FAULTS(list);
    for (size_t i = 0; i < sizeof sizes / sizeof *sizes; ++i)
        if (isnan(d->engine.displacement)) require(r, sizes[i]);
}

/* ---- size ------------------------------------------------------------------------------------------ */

static bool sized(const struct sp_engine *e)
{
    return e->heat_law == SP_HEAT_CORRELATION || e->overrun_law != SP_FRICTION_POLYNOMIAL;
}

/* Bore, stroke and cylinders that make another engine than the displacement says. */
static void check_size(struct sp_reader *r)
{
    const struct sp_engine *e = &r->design->engine;
    const double slack = 0.03;
    double swept = acos(-1.0) / 4.0 * e->bore * e->bore * e->stroke * e->cylinders;
    bool known = sp_case_given(r, "car.engine.bore") && sp_case_given(r, "car.engine.stroke");
    char found[100];
    if (!known || !sized(e) || !(fabs(swept / e->displacement - 1.0) > slack)) return;
    snprintf(found, sizeof found, "%g cylinders of that bore and stroke, which are %.4g l", e->cylinders,
             1e3 * swept);
    sp_case_fault(r, "car.engine.cylinders", found, "displacement, within 3 %", NULL);
}

/* ---- laws ------------------------------------------------------------------------------------------ */

/* Work, coolant and oil at rated power that ask more of the fuel than the cap leaves. */
static bool over_cap(const struct sp_design *d)
{
    const struct sp_engine *e = &d->engine;
    if (e->heat_law != SP_HEAT_RATED || !(e->energy_cap > 0.0)) return false;
    double oil = d->oil.fitted ? d->oil.heat_share * e->rated_power +
                                     d->oil.friction_share * sp_engine_motoring(e, e->rated_speed)
                               : 0.0;
    return (1.0 + e->heat_fraction) * e->rated_power + oil > e->energy_cap * sp_engine_rated_fuel(e);
}

static void doubt_heat(struct sp_reader *r)
{
    const struct sp_design *d = r->design;
    const struct sp_engine *e = &d->engine;
    bool correlation = e->heat_law == SP_HEAT_CORRELATION, given = e->heat_law == SP_HEAT_GIVEN;
    double phi = e->stoichiometric / e->air_fuel_ratio;
    const struct finding list[] = {
        {correlation, "car.engine.heat.law", "heat by a correlation",
         "a measured heat, or correlation_constant fitted to one: engines scatter by 20 % and more about it"},
        {(correlation || given) && sp_case_given(r, "car.engine.heat.fraction"), "car.engine.heat.fraction",
         NULL, "no fraction with this law; it is not used"},
        {!given && sp_case_given(r, "car.engine.heat.given"), "car.engine.heat.given", NULL,
         "law \"given\" with it; it is not used"},
        {!given && sp_case_given(r, "car.engine.heat.loss"), "car.engine.heat.loss", NULL,
         "law \"given\" with it; it is not used"},
        {correlation && (e->diesel ? phi > 0.8 || phi < 0.2 : phi > 1.4 || phi < 0.75),
         "car.engine.heat.air_fuel_ratio",
         sp_case_given(r, "car.engine.heat.air_fuel_ratio") ? NULL : "14.7 by default",
         e->diesel ? "1.25 to 5 times stoichiometric: the gas temperature is known there only"
                   : "0.71 to 1.33 times stoichiometric: the gas temperature is known there only"},
        {over_cap(d), "car.engine.heat.fraction", NULL,
         "less beside the power and the oil: at rated power energy_cap cuts the coolant's heat"},
    };
    CAUTIONS(list);
}

static void doubt_overrun(struct sp_reader *r)
{
    enum sp_friction_law law = r->design->engine.overrun_law;
    const bool constants = law == SP_FRICTION_CHEN_FLYNN;
    static const char *const four[] = {"car.engine.overrun.a", "car.engine.overrun.b", "car.engine.overrun.c",
                                       "car.engine.overrun.d"};
    const struct finding list[] = {
        {law != SP_FRICTION_POLYNOMIAL && sp_case_given(r, "car.engine.overrun_friction"),
         "car.engine.overrun_friction", NULL, "overrun.formula \"polynomial\" with it; it is not used"},
        {law != SP_FRICTION_SI && sp_case_given(r, "car.engine.overrun.oil"), "car.engine.overrun.oil", NULL,
         "formula \"petrol\" with it; it is not used"},
    };
    CAUTIONS(list);
    for (size_t i = 0; i < 4; ++i)
        if (!constants && sp_case_given(r, four[i]))
            sp_case_caution(r, four[i], NULL, "formula \"Chen-Flynn\" with it; it is not used");
}

/* ---- oils ------------------------------------------------------------------------------------------ */

static void check_oil(struct sp_reader *r, const struct sp_oil *o, const char *opens, const char *full)
{
    const struct finding list[] = {
        {o->opens >= o->full, sp_case_given(r, full) ? full : opens, NULL, "opens below full"},
        {isnan(o->opens) && sp_case_given(r, full), opens, "nothing",
         "a temperature such as \"85 degC\", for full is given"},
    };
    if (o->fitted) FAULTS(list);
}

void sp_case_check_engine(struct sp_reader *r)
{
    const struct sp_design *d = r->design;
    if (d->engine.heat_law == SP_HEAT_GIVEN && r->purpose == SP_FOR_DRIVE) check_given(r);
    check_size(r);
    check_oil(r, &d->oil, "car.oil.opens", "car.oil.full");
    check_oil(r, &d->gearbox, "car.gearbox.opens", "car.gearbox.full");
    doubt_heat(r);
    doubt_overrun(r);
}
