/* Events of a run: watches that crossed, the fan's controller, starts and stops.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdlib.h>

#include "drive/run.h"

static const double instant = 1e-6; /* s: a turn of the pulse clock so near is now */

void sp_run_list(struct sp_run *r)
{
    const struct sp_drive *d = r->drive;
    sp_watch_add(&r->watches, &d->circuit);
    sp_run_fit(r->fitted, &d->circuit);
    for (size_t i = 0; i < d->changes; ++i) {
        sp_watch_add(&r->watches, &d->changed[i]);
        sp_run_fit(r->fitted, &d->changed[i]);
    }
    for (int w = 0; w < SP_WATCHES_MOST; ++w) r->spell[w].first = NAN;
    r->modes.pulse_until = r->drive->design->pump.pulse_on;
}

static void record(struct sp_run *r, struct sp_event e)
{
    struct sp_result *out = r->result;
    if (out->events == r->event_room) {
        size_t room = r->event_room ? 2 * r->event_room : 64;
        struct sp_event *more = realloc(out->event, room * sizeof *more);
        if (!more) {
            r->lost_event = true;
            return;
        }
        out->event = more;
        r->event_room = room;
    }
    struct sp_inputs in;
    sp_schedule_at(r->schedule, r->segment, e.time, &in);
    e.distance = in.distance;
    e.step = r->schedule->step[r->segment];
    e.mark = sp_schedule_mark(r->schedule, r->segment);
    out->event[out->events++] = e;
}

void sp_run_event(struct sp_run *r, enum sp_event_kind kind, double time, double coolant)
{
    record(r, (struct sp_event){.kind = kind, .time = time, .coolant = coolant});
}

static void note_at(struct sp_run *r, enum sp_event_kind kind, const char *place, enum sp_severity severity)
{
    if (kind == SP_EVENT_KINDS) return;
    double coolant = sp_integrator_state(r->integrator)[SP_Y_JACKET];
    record(r, (struct sp_event){.kind = kind, .time = r->time, .coolant = coolant, .place = place, .severity = severity});
}

static void note(struct sp_run *r, enum sp_event_kind kind)
{
    note_at(r, kind, NULL, SP_SEVERITY_NOTE);
}

/* Whether the controller lets a kind of fan run now. */
static bool runs_now(const struct sp_run *r, int kind)
{
    const struct sp_fan *f = r->circuit->fan[kind].design;
    if (!(r->schedule->flags[r->segment] & SP_FLAG_FAN) || f->health != SP_FAN_SOUND) return false;
    switch (f->law) {
    case SP_FAN_ALWAYS: return true;
    case SP_FAN_SWITCHED: return r->modes.fan_on[kind];
    case SP_FAN_PROPORTIONAL: return r->high[r->watches.fan[kind]];
    default: return false;
    }
}

static void follow_kind(struct sp_run *r, int kind)
{
    bool runs = runs_now(r, kind);
    if (runs == r->fan_runs[kind]) return;
    r->fan_runs[kind] = runs;
    int before = r->fans_run;
    r->fans_run += runs ? 1 : -1;
    if (runs) r->fan_since[kind] = r->time;
    else r->result->each_fan[kind].on += r->time - r->fan_since[kind];
    if (before == 0) r->any_fan_since = r->time;
    if (r->fans_run == 0) r->result->fan.on += r->time - r->any_fan_since;
    note_at(r, runs ? SP_EV_FAN_ON : SP_EV_FAN_OFF, sp_watch_fan_place(r->circuit, kind), SP_SEVERITY_NOTE);
}

/* The fans' on-time and their events follow from whether they run alone. */
void sp_run_follow_fan(struct sp_run *r)
{
    for (int f = 0; f < r->circuit->fans; ++f) follow_kind(r, f);
}

/* The lift is continuous over a turn of the play, but the integrator has already stepped past the turn with
 * the old side of it; only where the lift can move does that matter. */
static bool lift_at_stake(const struct sp_run *r)
{
    const struct sp_thermostat *t = &r->circuit->design->thermostat;
    double wax = sp_integrator_state(r->integrator)[SP_Y_WAX];
    double shift = t->mapped_power > 0.0 ? t->mapped_shift : 0.0; /* at most, with power */
    return wax + t->hysteresis + shift > t->opens && wax < t->full;
}

/* Where it boils, of the two places that are looked at. */
static const char *boils_at(struct sp_run *r)
{
    const double *y = sp_integrator_state(r->integrator);
    struct sp_inputs in;
    struct sp_signals s;
    struct sp_coupling k;
    sp_schedule_at(r->schedule, r->segment, r->time, &in);
    sp_circuit_signals(r->circuit, &in, y, &s);
    if (sp_circuit_split(r->circuit, &in, &r->modes, &s, &r->looking.loop, &k)) return "jacket";
    return sp_watch_boils_at_pump(r->circuit, &in, y, &k, &r->seen) ? "pump inlet" : "jacket";
}

static void keep_spell(struct sp_run *r, int w, bool up, const char *place)
{
    struct sp_spell *s = &r->spell[w];
    if (!up) {
        s->over += r->time - s->since;
        return;
    }
    s->since = r->time;
    if (isfinite(s->first)) return;
    *s = (struct sp_spell){r->time, r->time, 0.0, 0.0, r->time, place, r->segment};
}

/* Event and spell of a watch that crossed. */
static void tell(struct sp_run *r, int w, bool up)
{
    const struct sp_watch_one *one = &r->watches.of[w];
    if (one->kind == SP_W_PULSE || one->kind == SP_W_FAN) return;
    struct sp_watch_info i = sp_watch_info(r->circuit, one);
    if (up && (one->kind == SP_W_BOIL || one->kind == SP_W_MARGIN)) i.place = boils_at(r);
    note_at(r, up ? i.events.rise : i.events.fall, i.place, up ? i.severity : SP_SEVERITY_NOTE);
    if (i.severity > SP_SEVERITY_NOTE) keep_spell(r, w, up, i.place);
}

static bool turn_pulse(struct sp_run *r, int w)
{
    const struct sp_pump *p = &r->circuit->design->pump;
    double on = fmax(p->pulse_on, 0.1), period = on + fmax(p->pulse_off, 0.1);
    double turn = floor((r->time + instant) / period) * period; /* the clock runs from the start of the drive */
    r->modes.pulse_off = r->time + instant >= turn + on;
    r->modes.pulse_until = turn + (r->modes.pulse_off ? period : on);
    r->high[w] = false;
    return true;
}

static bool switch_fan(struct sp_run *r, int kind, bool up)
{
    if (kind >= r->circuit->fans || r->circuit->fan[kind].design->law != SP_FAN_SWITCHED) return false;
    if (up == r->modes.fan_on[kind]) return false;
    r->modes.fan_on[kind] = up;
    return r->schedule->flags[r->segment] & SP_FLAG_FAN;
}

/* A watch crossed. Returns true when the rates jump, so that the integrator must forget. */
static bool crossed(struct sp_run *r, int w, bool up)
{
    const struct sp_watch_one *one = &r->watches.of[w];
    bool play = w == SP_W_PLAY || w == SP_W_PLAY_SHUT;
    if (!play && up == r->high[w]) return false; /* said already */
    r->high[w] = up;
    tell(r, w, up);
    switch (one->kind) {
    case SP_W_FAN: return switch_fan(r, one->index, up);
    case SP_W_PULSE: return up && turn_pulse(r, w);
    case SP_W_PLAY:
    case SP_W_PLAY_SHUT:
        sp_watch_turn_play(&r->circuit->design->thermostat, sp_integrator_state(r->integrator)[SP_Y_WAX],
                           w == SP_W_PLAY_SHUT, &r->modes);
        r->high[SP_W_PLAY] = r->modes.play == SP_PLAY_OPENING;
        r->high[SP_W_PLAY_SHUT] = r->modes.play == SP_PLAY_HELD;
        return lift_at_stake(r);
    case SP_W_COOLANT:
        if (up) r->over_since = r->time;
        else r->result->time_over_limit += r->time - r->over_since;
        return false;
    case SP_W_FULL:
        if (up) r->full_since = r->time;
        else r->result->time_above_band += r->time - r->full_since;
        return false;
    default: return false;
    }
}

/* After a jump of the inputs: a watch may stand on the other side without having crossed. */
bool sp_run_look_again(struct sp_run *r, bool first)
{
    struct sp_watched seen;
    if (sp_run_look(r, r->time, sp_integrator_state(r->integrator), &seen)) return false;
    r->seen = seen;
    for (int w = 0; w < r->watches.count; ++w) {
        bool up = seen.g[w] > 0.0; /* what equals its limit has not passed it */
        bool play = w == SP_W_PLAY || w == SP_W_PLAY_SHUT, lift = w == SP_W_OPENS || w == SP_W_FULL;
        if (play || (first && lift)) r->high[w] = up; /* where it stands is no event */
        else if (first ? up : up != r->high[w]) crossed(r, w, up);
    }
    r->seen_at = NAN;
    return true;
}

void sp_run_announce(struct sp_run *r, size_t from)
{
    const struct sp_schedule *s = r->schedule;
    size_t to = r->segment;
    if (from == to || s->step[from] != s->step[to]) note(r, SP_EV_STEP);
    bool was = from != to && (s->flags[from] & SP_FLAG_ENGINE), is = s->flags[to] & SP_FLAG_ENGINE;
    if (from == to ? is : was != is) note(r, is ? SP_EV_ENGINE_STARTS : SP_EV_ENGINE_STOPS);
}

/* A turn of the play moves the lift's temperature by its slack: `opens` or `full` may lie just there. */
static bool look_at_lift(struct sp_run *r)
{
    struct sp_watched seen;
    if (sp_run_look(r, r->time, sp_integrator_state(r->integrator), &seen)) return false;
    crossed(r, SP_W_OPENS, seen.g[SP_W_OPENS] >= 0.0);
    crossed(r, SP_W_FULL, seen.g[SP_W_FULL] >= 0.0);
    return true;
}

bool sp_run_take_crossings(struct sp_run *r, const int *sign)
{
    bool jump = false;
    ++r->result->work.roots;
    for (int w = 0; w < r->watches.count; ++w)
        if (sign[w]) jump = crossed(r, w, sign[w] > 0) || jump;
    if (sign[SP_W_PLAY] || sign[SP_W_PLAY_SHUT]) look_at_lift(r);
    r->seen_at = NAN;
    sp_run_follow_fan(r);
    return jump;
}

