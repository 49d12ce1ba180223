/* schedule_work.c - the work of the road load, reckoned two ways. SPDX-License-Identifier: GPL-3.0-or-later
 */
#include "drive/schedule_parts.h"

#include <math.h>

static const double closes = 1e-3; /* of the work the engine does at the wheels */

void sp_schedule_add_work(struct sp_scheduling *b, struct sp_schedule *s, const struct sp_row row[2],
                          const struct sp_wheel_power wheel[2], double rise)
{
    const struct sp_design *d = b->design;
    const struct sp_body *body = &d->body;
    double h = row[1].time - row[0].time, v0 = row[0].in[SP_IN_SPEED], v1 = row[1].in[SP_IN_SPEED];
    double engine[2], density[2];
    for (int k = 0; k < 2; k++) {
        engine[k] = wheel[k].rolling + wheel[k].climb + wheel[k].drag + wheel[k].inertia + wheel[k].brakes;
        density[k] = sp_density_of(d, row[k].in[SP_IN_AMBIENT], row[k].in[SP_IN_PRESSURE]);
    }
    double middle = 0.5 * (v0 + v1), air = middle + d->air.wind;
    double area = 0.5 * (density[0] + density[1]) * 0.5 * body->drag_coefficient * body->frontal_area;
    double drag = area * air * fabs(air) * middle;
    s->work.wheel += 0.5 * h * (engine[0] + engine[1]);
    b->work_done += 0.5 * h * (fmax(engine[0], 0.0) + fmax(engine[1], 0.0));
    s->work.brakes += 0.5 * h * (wheel[0].brakes + wheel[1].brakes);
    s->work.rolling += 0.5 * h * (wheel[0].rolling + wheel[1].rolling);
    s->work.kinetic += 0.5 * body->rotating * body->mass * (v1 * v1 - v0 * v0);
    s->work.drag += h / 6.0 * (wheel[0].drag + 4.0 * drag + wheel[1].drag); /* Simpson: a cubic in time */
    s->work.potential +=
        isnan(rise) ? 0.5 * h * (wheel[0].climb + wheel[1].climb) : body->mass * SP_GRAVITY * rise;
}

void sp_schedule_check_work(struct sp_scheduling *b)
{
    const struct sp_schedule *s = &b->rows.table;
    double spent = s->work.kinetic + s->work.potential + s->work.drag + s->work.rolling + s->work.brakes;
    double off = s->work.wheel - spent;
    if (!s->power_from_road || fabs(off) <= closes * b->work_done) return;
    char found[160];
    snprintf(found, sizeof found,
             "a road load of %.6g J at the wheels against %.6g J in speed, height, drag, rolling and brakes",
             s->work.wheel, spent);
    struct sp_place at = {.file = b->design->file, .path = "drive"};
    sp_complain(b->cautions, &at, found,
                "the two within 0.1 %; rows closer in time, or altitude and speed that agree", NULL);
}
