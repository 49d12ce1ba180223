/* Which conditions a car gives reason to watch, and what is to be said of each.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "drive/watch.h"

/* ---- the list --------------------------------------------------------------------------------------- */

/* Where it stands in the list; put there unless it is. */
static int add(struct sp_watch_list *l, enum sp_watch kind, int index, int tier)
{
    for (int w = 0; w < l->count; ++w)
        if (l->of[w].kind == kind && l->of[w].index == index && l->of[w].tier == tier) return w;
    l->of[l->count] = (struct sp_watch_one){kind, index, tier};
    return l->count++;
}

static void add_tiers(struct sp_watch_list *l, const struct sp_circuit *c)
{
    const struct sp_limits *m = &c->design->limits;
    const struct sp_tiers *const all[SP_LIMITED] = {&m->coolant, &m->gauge,   &m->metal,
                                                    &m->oil,     &m->gearbox, &m->charge};
    const bool fitted[SP_LIMITED] = {
        true, true, true, c->layout.oil >= 0, c->layout.gearbox >= 0, c->design->charge.fitted};
    for (int i = 0; i < SP_LIMITED; ++i) {
        if (!fitted[i]) continue;
        if (isfinite(all[i]->caution)) add(l, SP_W_TIER, i, 0);
        if (isfinite(all[i]->alarm)) add(l, SP_W_TIER, i, 1);
        if (isfinite(all[i]->stop) && i > SP_LIMITED_METAL) add(l, SP_W_TIER, i, 2);
    }
}

static void add_fans(struct sp_watch_list *l, const struct sp_circuit *c)
{
    for (int f = 0; f < c->fans; ++f) {
        enum sp_fan_law law = c->fan[f].design->law;
        if (f > 0 && (law == SP_FAN_SWITCHED || law == SP_FAN_PROPORTIONAL))
            l->fan[f] = add(l, SP_W_FAN, f, 0);
        if (c->fan[f].design->current_limit > 0.0) add(l, SP_W_CURRENT, f, 0);
    }
}

void sp_watch_add(struct sp_watch_list *l, const struct sp_circuit *c)
{
    const struct sp_design *d = c->design;
    for (int w = l->count; w < SP_WATCHES; ++w)
        l->of[l->count++] = (struct sp_watch_one){(enum sp_watch)w, 0, 0};
    add_tiers(l, c);
    add_fans(l, c);
    if (isfinite(d->limits.least_coolant)) add(l, SP_W_COLD_COOLANT, 0, 0);
    if (isfinite(d->limits.least_oil) && c->layout.oil >= 0) add(l, SP_W_COLD_OIL, 0, 0);
    l->local = l->local || d->engine.wetted_area > 0.0;
    if (d->engine.wetted_area > 0.0) add(l, SP_W_LOCAL, 0, 0);
    if (d->tank.catch_can > 0.0) add(l, SP_W_CAN, 0, 0);
    if (d->pump.npsh > 0.0) add(l, SP_W_CAVITATES, 0, 0);
    if (c->layout.battery >= 0) add(l, SP_W_FLAT, 0, 0);
    if (d->pump.electric && d->pump.law == SP_PUMP_PULSING) add(l, SP_W_PULSE, 0, 0);
}

/* ---- what is to be said ------------------------------------------------------------------------------ */

const char *sp_watch_fan_place(const struct sp_circuit *c, int kind)
{
    static const char *const place[SP_DUCTS][SP_FANS] = {{"duct 1, fan 1", "duct 1, fan 2", "duct 1, fan 3"},
                                                         {"duct 2, fan 1", "duct 2, fan 2", "duct 2, fan 3"},
                                                         {"duct 3, fan 1", "duct 3, fan 2", "duct 3, fan 3"},
                                                         {"duct 4, fan 1", "duct 4, fan 2", "duct 4, fan 3"}};
    return kind < c->fans ? place[c->fan[kind].duct][c->fan[kind].slot] : NULL;
}

/* A tier's events: the stops of the first three have their own. */
static struct sp_watch_events tier_events(int of, int tier)
{
    int first = SP_EV_TIER + 6 * of + 2 * tier;
    return (struct sp_watch_events){(enum sp_event_kind)first, (enum sp_event_kind)(first + 1)};
}

struct sp_watch_info sp_watch_info(const struct sp_circuit *c, const struct sp_watch_one *w)
{
    static const char *const limited[SP_LIMITED] = {"jacket", "gauge",   "metal",
                                                    "oil",    "gearbox", "charge air"};
    static const enum sp_severity tier[] = {SP_SEVERITY_CAUTION, SP_SEVERITY_ALARM, SP_SEVERITY_STOP};
    const double grave = 10.0; /* K */
    const struct sp_design *d = c->design;
    struct sp_watch_info i = {sp_watch_event[w->kind], SP_SEVERITY_NOTE, NULL, "K", 1.0, grave};
    switch (w->kind) {
    case SP_W_FAN:
        i.place = sp_watch_fan_place(c, w->index);
        break;
    case SP_W_OPENS:
    case SP_W_FULL:
        i.place = "thermostat";
        break;
    case SP_W_CAP:
        i.place = "tank";
        break;
    case SP_W_COOLANT:
    case SP_W_MARGIN:
        i.place = "jacket";
        i.severity = SP_SEVERITY_STOP;
        break;
    case SP_W_GAUGE:
        i.place = "gauge";
        i.severity = SP_SEVERITY_STOP;
        break;
    case SP_W_METAL:
        i.place = "metal";
        i.severity = SP_SEVERITY_STOP;
        break;
    case SP_W_BOIL:
        i.place = "jacket";
        i.severity = SP_SEVERITY_ALARM;
        break;
    case SP_W_TIER:
        i = (struct sp_watch_info){
            tier_events(w->index, w->tier), tier[w->tier], limited[w->index], "K", 1.0, grave};
        break;
    case SP_W_COLD_COOLANT:
        i.place = "jacket";
        i.severity = SP_SEVERITY_CAUTION;
        break;
    case SP_W_COLD_OIL:
        i.place = "oil";
        i.severity = SP_SEVERITY_CAUTION;
        break;
    case SP_W_LOCAL:
        i.place = "jacket wall";
        i.severity = SP_SEVERITY_CAUTION;
        break;
    case SP_W_LOST:
        i = (struct sp_watch_info){
            i.events, SP_SEVERITY_ALARM, "tank", "l", 1e-3, d->tank.volume - d->tank.air_space};
        break;
    case SP_W_EMPTY:
        i = (struct sp_watch_info){
            i.events, SP_SEVERITY_ALARM, "tank", "l", 1e-3, d->tank.volume - d->tank.air_space};
        break;
    case SP_W_CAN:
        i = (struct sp_watch_info){i.events, SP_SEVERITY_ALARM, "catch can", "l", 1e-3, d->tank.catch_can};
        break;
    case SP_W_CAVITATES:
        i = (struct sp_watch_info){i.events, SP_SEVERITY_ALARM, "pump inlet", "m", 1.0, d->pump.npsh};
        break;
    case SP_W_CURRENT:
        i = (struct sp_watch_info){i.events,
                                   SP_SEVERITY_ALARM,
                                   sp_watch_fan_place(c, w->index),
                                   "A",
                                   1.0,
                                   c->fan[w->index].design->current_limit};
        break;
    case SP_W_FLAT:
        i = (struct sp_watch_info){i.events,  SP_SEVERITY_ALARM,
                                   "battery", "kJ",
                                   1e3,       d->electrics.battery * d->electrics.voltage_stopped};
        break;
    default:
        break;
    }
    return i;
}

double sp_watch_excess(const struct sp_circuit *c, const struct sp_watch_one *w, const double *y, double g)
{
    const struct sp_limits *l = &c->design->limits;
    if (w->kind == SP_W_COLD_COOLANT) return l->least_coolant - y[SP_Y_JACKET];
    if (w->kind == SP_W_COLD_OIL && c->layout.oil >= 0) return l->least_oil - y[c->layout.oil];
    return w->kind == SP_W_LOST ? y[SP_Y_LOST] : g;
}

bool sp_watch_boils_at_pump(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                            const struct sp_coupling *k, const struct sp_watched *seen)
{
    double pressure = fmin(fmax(seen->tank_pressure, 1.0e3), 4.99e6); /* of the vapour curve */
    double margin = sp_coolant_boiling(&c->design->coolant.fluid, pressure) - sp_circuit_pump_inlet(c, in, y, k);
    return margin <= seen->boil_margin + 1e-9;
}
