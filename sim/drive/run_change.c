/* A run passing from one design to the next. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "drive/run.h"

/* The design as it is once `n` changes have happened. */
static const struct sp_circuit *circuit_after(const struct sp_drive *d, size_t n)
{
    return n ? &d->changed[n - 1] : &d->circuit;
}

void sp_run_change(struct sp_run *r)
{
    const struct sp_schedule *s = r->schedule;
    size_t now = s->variant ? s->variant[r->segment] : 0;
    if (now == r->variant) return;
    const double *y = sp_integrator_state(r->integrator);
    const struct sp_circuit *next = circuit_after(r->drive, now);
    /* A changed capacity holds another heat at the same temperature: that is no heat from anywhere. */
    r->carried += sp_circuit_heat_held(next, y) - sp_circuit_heat_held(r->circuit, y);
    r->circuit = next;
    const double wax = y[SP_Y_WAX], play = fmax(next->design->thermostat.hysteresis, 0.0);
    r->modes.held = fmin(fmax(r->modes.held, wax), wax + play); /* another thermostat may have less play */
    memset(&r->guesses, 0, sizeof r->guesses);
    memset(&r->looking, 0, sizeof r->looking);
    for (; r->variant < now; ++r->variant) {
        sp_run_event(r, SP_EV_CHANGE, r->time, y[SP_Y_JACKET]);
        if (r->lost_event) return;
        r->result->event[r->result->events - 1].mark = r->drive->design->change[r->variant].text;
    }
}

/* ---- what came after each --------------------------------------------------------------------------- */

/* Of what happened after event `from`, and of what was so already, the first that breaks a limit. */
static void tell(const struct sp_result *out, size_t from, struct sp_told_change *to)
{
    const struct sp_event *change = &out->event[from];
    for (size_t i = 0; i < out->events && isnan(to->to_limit); ++i) {
        const struct sp_event *e = &out->event[i];
        if (e->severity != SP_SEVERITY_STOP) continue;
        bool after = i > from, over = true;
        for (size_t j = i + 1; !after && over && j < out->events && out->event[j].time <= change->time; ++j)
            over = out->event[j].kind != e->kind + 1; /* each kind is followed by the one that ends it */
        if (!over) continue;
        to->to_limit = after ? e->time - change->time : 0.0;
        to->broken = e->kind;
    }
}

bool sp_run_tell_changes(struct sp_run *r)
{
    struct sp_result *out = r->result;
    const struct sp_design *d = r->drive->design;
    if (!d->changes) return true;
    out->change = calloc(d->changes, sizeof *out->change);
    if (!out->change) return false;
    out->changes = d->changes;
    for (size_t i = 0; i < d->changes; ++i)
        out->change[i] = (struct sp_told_change){d->change[i].text, NAN, NAN, SP_EVENT_KINDS};
    for (size_t i = 0, n = 0; i < out->events && n < d->changes; ++i) {
        if (out->event[i].kind != SP_EV_CHANGE) continue;
        out->change[n].time = out->event[i].time;
        tell(out, i, &out->change[n++]);
    }
    return true;
}
