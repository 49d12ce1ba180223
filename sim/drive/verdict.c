/* Closing the books of a run: ledger, peaks, verdict. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdlib.h>

#include "drive/run.h"

static const double ledger_tolerance = 1e-4;

static struct sp_peak place(const struct sp_run *r, const struct sp_tracked *t)
{
    size_t k = sp_schedule_row(r->schedule, t->time);
    struct sp_inputs in;
    sp_schedule_at(r->schedule, k, t->time, &in);
    return (struct sp_peak){t->best, t->time, in.distance, r->schedule->step[k], sp_schedule_mark(r->schedule, k)};
}

/* Of what the car may not have. */
static struct sp_peak place_if(const struct sp_run *r, const struct sp_tracked *t)
{
    return isfinite(t->best) ? place(r, t) : (struct sp_peak){.value = NAN, .time = NAN, .distance = NAN};
}

static void settle_fans(struct sp_run *r)
{
    struct sp_result *out = r->result;
    out->fan_kinds = (size_t)r->circuit->fans;
    for (int f = 0; f < r->circuit->fans; ++f) {
        out->each_fan[f].place = sp_watch_fan_place(r->circuit, f);
        if (r->fan_runs[f]) out->each_fan[f].on += out->duration - r->fan_since[f];
    }
    if (r->fans_run) out->fan.on += out->duration - r->any_fan_since;
}

/* At the voltage of a battery that nothing charges. */
static void settle_battery(struct sp_run *r, const double *end)
{
    const struct sp_electrics *e = &r->circuit->design->electrics;
    int at = r->circuit->layout.battery;
    r->result->battery.used = at >= 0 ? end[at] : NAN;
    r->result->battery.left = at >= 0 ? fmax(1.0 - end[at] / (e->battery * e->voltage_stopped), 0.0) : NAN;
}

static void ledger(struct sp_run *r, const double *start, const double *end)
{
    struct sp_result *out = r->result;
    out->ledger.in = end[SP_Y_HEAT_IN];
    out->ledger.out_air = end[SP_Y_HEAT_AIR];
    out->ledger.out_skin = end[SP_Y_HEAT_SKIN];
    out->ledger.stored = sp_circuit_heat_held(r->circuit, end) - sp_circuit_heat_held(&r->drive->circuit, start) -
                         r->carried;
    double turned = fmax(fmax(fabs(out->ledger.in), fabs(out->ledger.out_air + out->ledger.out_skin)),
                         fmax(fabs(out->ledger.stored), 1.0));
    out->ledger.error = (out->ledger.in - out->ledger.out_air - out->ledger.out_skin - out->ledger.stored) / turned;
}

static double first_event(const struct sp_result *r, enum sp_event_kind kind)
{
    for (size_t i = 0; i < r->events; ++i)
        if (r->event[i].kind == kind) return r->event[i].time;
    return INFINITY;
}

/* Keys of the limits that decide, and the events that say they are broken. */
static const struct { const char *key; int broken; } decides[SP_ROOMS] = {
    {"limits.coolant", SP_EV_COOLANT_OVER},
    {"limits.gauge", SP_EV_GAUGE_OVER},
    {"limits.metal", SP_EV_METAL_OVER},
    {"limits.boil_margin", SP_EV_BOIL_MARGIN_UNDER},
    {"limits.oil", SP_EV_TIER + 6 * SP_LIMITED_OIL + 4},
    {"limits.gearbox", SP_EV_TIER + 6 * SP_LIMITED_GEARBOX + 4},
    {"limits.charge", SP_EV_TIER + 6 * SP_LIMITED_CHARGE + 4}};

void sp_run_limits(const struct sp_limits *l, double out[SP_ROOMS])
{
    const double all[SP_ROOMS] = {l->coolant.stop, l->gauge.stop,   l->metal.stop, l->boil_margin,
                                  l->oil.stop,     l->gearbox.stop, l->charge.stop};
    for (int i = 0; i < SP_ROOMS; ++i) out[i] = all[i];
}

static bool limit_moves(const struct sp_design *d, int i, double limit)
{
    for (size_t n = 0; n < d->changes; ++n) {
        double changed[SP_ROOMS];
        sp_run_limits(&d->change[n].to->limits, changed);
        if (changed[i] != limit && !(isnan(changed[i]) && isnan(limit))) return true;
    }
    return false;
}

/* Limit less peak; where a change moves the limit, of the nearest moment. */
static void find_rooms(struct sp_run *r)
{
    struct sp_result *out = r->result;
    double limit[SP_ROOMS];
    const double peak[SP_ROOMS] = {out->coolant.value,     out->gauge.value, out->metal.value,
                                   out->boil_margin.value, out->oil.value,   out->gearbox.value,
                                   out->charge.value};
    sp_run_limits(&r->drive->design->limits, limit);
    for (int i = 0; i < SP_ROOMS; ++i) {
        double left = i == SP_ROOM_BOIL ? peak[i] - limit[i] : limit[i] - peak[i];
        bool moves = limit_moves(r->drive->design, i, limit[i]);
        out->room[i] = moves ? r->room[i] : (struct sp_room){limit[i], peak[i], left};
    }
}

static void judge(struct sp_run *r)
{
    struct sp_result *out = r->result;
    double least = INFINITY, earliest = INFINITY;
    find_rooms(r);
    out->survives = true;
    for (int i = 0; i < SP_ROOMS; ++i) {
        double left = out->room[i].left;
        if (!isfinite(left)) continue;
        bool broken = left < 0.0;
        double when = broken ? first_event(out, (enum sp_event_kind)decides[i].broken) : INFINITY;
        if (broken ? (out->survives || when < earliest) : (out->survives && left < least)) {
            out->limit = decides[i].key;
            least = left;
            earliest = when;
        }
        if (broken) out->survives = false;
    }
    out->margin = out->room[0].left;
}

static int by_time(const void *a, const void *b)
{
    const struct sp_event *x = a, *y = b;
    return (x->time > y->time) - (x->time < y->time);
}

/* The peak joins the list at its place; insertion keeps the order of what happens at one instant. */
static void order_events(struct sp_result *r)
{
    for (size_t i = 1; i < r->events; ++i) {
        struct sp_event e = r->event[i];
        size_t j = i;
        for (; j > 0 && by_time(&r->event[j - 1], &e) > 0; --j) r->event[j] = r->event[j - 1];
        r->event[j] = e;
    }
}

enum sp_status sp_run_settle(struct sp_run *r, const double *start, struct sp_complaints *complaints)
{
    struct sp_result *out = r->result;
    const double *end = sp_integrator_state(r->integrator);
    const struct sp_schedule *s = r->schedule;
    out->duration = s->time[s->rows - 1];
    out->distance = s->distance[s->rows - 1];
    settle_fans(r);
    settle_battery(r, end);
    out->pump_head_left = isfinite(r->head_lost.best) ? 1.0 - r->head_lost.best : NAN;
    if (r->high[SP_W_COOLANT]) out->time_over_limit += out->duration - r->over_since;
    if (r->high[SP_W_FULL]) out->time_above_band += out->duration - r->full_since;
    out->coolant = place(r, &r->coolant);
    out->gauge = place(r, &r->gauge);
    out->metal = place(r, &r->metal);
    out->oil = place_if(r, &r->oil);
    out->gearbox = place_if(r, &r->gearbox);
    out->charge = place_if(r, &r->charge);
    out->tank_pressure = place(r, &r->pressure);
    out->boil_margin = place(r, &r->margin);
    out->boil_margin.value = -out->boil_margin.value;
    out->over_ambient = r->over_ambient.best;
    out->fan.energy = fmax(end[SP_Y_FAN_ENERGY], 0.0); /* an integral of nil may round below it */
    out->drag.energy = end[SP_Y_DRAG_WORK];
    out->drag.mean_coefficient = end[SP_Y_HEAD_WORK] > 0.0
        ? end[SP_Y_DRAG_WORK] / (r->drive->design->body.frontal_area * end[SP_Y_HEAD_WORK]) : NAN;
    out->liquid_lost = end[SP_Y_LOST];
    const struct sp_tank *tank = &r->circuit->design->tank;
    out->tank_left = fmax(tank->volume - tank->air_space - tank->lost - end[SP_Y_LOST], 0.0);
    struct sp_measured_score score = sp_measured_score(&r->measured);
    out->measured.rms = score.rms;
    out->measured.warmup_rms = score.warmup_rms;
    out->measured.time_to_85 = score.time_to_85;
    out->measured.measured_time_to_85 = score.logged_time_to_85;
    out->measured.none_rms = score.none_rms;
    out->measured.none_warmup_rms = score.none_warmup_rms;
    r->segment = sp_schedule_row(s, out->coolant.time);
    sp_run_event(r, SP_EV_PEAK, out->coolant.time, out->coolant.value);
    order_events(out);
    if (!sp_run_failures(r) || !sp_run_tell_changes(r)) r->lost_event = true;
    ledger(r, start, end);
    judge(r);
    r->ledger_open = !(fabs(out->ledger.error) <= ledger_tolerance);
    if (!r->ledger_open && !r->lost_event) return out->survives ? SP_OK : SP_NOT;
    char found[80];
    snprintf(found, sizeof found, "a ledger that is out by %.2g of the heat turned over", out->ledger.error);
    struct sp_place at = {.file = r->drive->design->file};
    sp_complain(complaints, &at, r->lost_event ? "no memory" : found,
                r->lost_event ? "room for the events" : "heat in = heat out + heat stored to 1e-4; try solver.tolerance", NULL);
    return SP_NUMERICS;
}
