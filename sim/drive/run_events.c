/* Events of a run: watches that crossed, the fan's controller, starts and stops.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdlib.h>

#include "drive/run.h"

void sp_run_event(struct sp_run *r, enum sp_event_kind kind, double time, double coolant)
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
    sp_schedule_at(r->schedule, r->segment, time, &in);
    out->event[out->events++] = (struct sp_event){kind, time, in.distance, coolant, r->schedule->step[r->segment],
                                                  sp_schedule_mark(r->schedule, r->segment)};
}

static void note(struct sp_run *r, enum sp_event_kind kind)
{
    if (kind != SP_EVENT_KINDS) sp_run_event(r, kind, r->time, sp_integrator_state(r->integrator)[SP_Y_JACKET]);
}

/* Whether the controller lets the fan run now; its on-time and its events follow from this alone. */
void sp_run_follow_fan(struct sp_run *r)
{
    const struct sp_fan *f = &r->drive->design->duct[0].fan[0];
    bool allowed = f->fitted && (r->schedule->flags[r->segment] & SP_FLAG_FAN);
    bool asked = f->law == SP_FAN_ALWAYS || (f->law == SP_FAN_SWITCHED && r->modes.fan_on[0]) ||
                 (f->law == SP_FAN_PROPORTIONAL && r->high[SP_W_FAN]);
    bool runs = allowed && asked;
    if (runs == r->fan_runs) return;
    r->fan_runs = runs;
    if (runs) r->fan_since = r->time;
    else r->result->fan.on += r->time - r->fan_since;
    note(r, runs ? SP_EV_FAN_ON : SP_EV_FAN_OFF);
}

/* The lift is continuous over a turn of the play, but the integrator has already stepped past the turn with
 * the old side of it; only where the lift can move does that matter. */
static bool lift_at_stake(const struct sp_run *r)
{
    const struct sp_thermostat *t = &r->drive->design->thermostat;
    double wax = sp_integrator_state(r->integrator)[SP_Y_WAX];
    return wax + t->hysteresis > t->opens && wax < t->full;
}

/* A watch crossed. Returns true when the rates jump, so that the integrator must forget. */
static bool crossed(struct sp_run *r, int w, bool up)
{
    bool play = w == SP_W_PLAY || w == SP_W_PLAY_SHUT;
    if (!play && up == r->high[w]) return false; /* said already */
    r->high[w] = up;
    note(r, up ? sp_watch_event[w].rise : sp_watch_event[w].fall);
    switch (w) {
    case SP_W_FAN:
        if (r->drive->design->duct[0].fan[0].law != SP_FAN_SWITCHED) return false;
        if (up == r->modes.fan_on[0]) return false;
        r->modes.fan_on[0] = up;
        return r->schedule->flags[r->segment] & SP_FLAG_FAN;
    case SP_W_PLAY:
    case SP_W_PLAY_SHUT:
        sp_watch_turn_play(&r->drive->design->thermostat, sp_integrator_state(r->integrator)[SP_Y_WAX],
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
    for (int w = 0; w < SP_WATCHES; ++w) {
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
    for (int w = 0; w < SP_WATCHES; ++w)
        if (sign[w]) jump = crossed(r, w, sign[w] > 0) || jump;
    if (sign[SP_W_PLAY] || sign[SP_W_PLAY_SHUT]) look_at_lift(r);
    r->seen_at = NAN;
    sp_run_follow_fan(r);
    return jump;
}

