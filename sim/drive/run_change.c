/* A run passing from one design to the next. SPDX-License-Identifier: GPL-3.0-or-later */
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
    memset(&r->guesses, 0, sizeof r->guesses);
    memset(&r->looking, 0, sizeof r->looking);
    for (; r->variant < now; ++r->variant) {
        sp_run_event(r, SP_EV_CHANGE, r->time, y[SP_Y_JACKET]);
        if (r->lost_event) return;
        r->result->event[r->result->events - 1].mark = r->drive->design->change[r->variant].text;
    }
}
