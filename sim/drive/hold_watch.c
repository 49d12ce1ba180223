/* A hold on its way to rest: what is kept of it, and whether it swings.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdlib.h>

#include "drive/hold.h"

enum { POINTS = 4 };                                       /* looked at in each step of the integrator */
static const double least_swing = 0.02;                    /* K: less is rest */
static const double same_value = 0.01, same_period = 0.02; /* of a cycle's range, of its period: it lasts */
static const double same_kelvin = 0.005;                   /* K, on top */

/* ---- recording ------------------------------------------------------------------------------------- */

static bool fan_asked(const struct sp_run *r, const struct sp_inputs *in, const double *y)
{
    for (int f = 0; f < r->circuit->fans; ++f)
        if (sp_circuit_fan_wish(r->circuit, f, in, &r->modes, y) > 0.0) return true;
    return false;
}

static struct sp_hold_record *next_record(struct sp_holding *h)
{
    if (h->records == h->room) {
        size_t room = h->room ? 2 * h->room : 1024;
        struct sp_hold_record *more = realloc(h->record, room * sizeof *more);
        if (!more) return NULL;
        h->record = more;
        h->room = room;
    }
    return &h->record[h->records++];
}

/* The moment at which a limit was passed: its two sides lie in the integrator's last step. */
static double when_passed(struct sp_holding *h, struct sp_run *r, int j, double low, double high)
{
    double value[SP_HOLD_LIMITS];
    const struct sp_hold_limit *limit = &h->out->limit[j];
    for (int i = 0; i < 40 && high - low > 1e-6; ++i) {
        double mid = 0.5 * (low + high);
        if (!sp_integrator_look_back(r->integrator, mid, 0, h->state)) break;
        if (!sp_hold_values(r, mid, h->state, value)) break;
        if (sp_hold_beyond(limit, j, value[j]) > 0.0)
            high = mid;
        else
            low = mid;
    }
    return high;
}

static void note_limits(struct sp_holding *h, struct sp_run *r, double before,
                        const struct sp_hold_record *now)
{
    for (int j = 0; j < SP_HOLD_LIMITS; ++j) {
        struct sp_hold_limit *limit = &h->out->limit[j];
        if (isfinite(limit->passed) || !(sp_hold_beyond(limit, j, now->value[j]) > 0.0)) continue;
        limit->passed = now->time > before ? when_passed(h, r, j, before, now->time) : now->time;
    }
}

static bool note_at(struct sp_holding *h, struct sp_run *r, double before, double t)
{
    struct sp_inputs in;
    struct sp_hold_record now = {.time = t};
    const double *y = h->state;
    if (!sp_integrator_look_back(r->integrator, t, 0, h->state) || !sp_hold_values(r, t, y, now.value))
        return false;
    sp_schedule_at(r->schedule, r->segment, t, &in);
    now.in = y[SP_Y_HEAT_IN];
    now.air = y[SP_Y_HEAT_AIR];
    now.skin = y[SP_Y_HEAT_SKIN];
    now.fan = fan_asked(r, &in, y);
    if (!isnan(h->watch_until) && now.value[SP_HOLD_COOLANT] > h->hottest_at) {
        h->hottest_at = now.value[SP_HOLD_COOLANT];
        h->hottest_modes = r->modes;
        for (int i = 0; i < r->circuit->layout.count; ++i)
            h->hottest[i] = y[i];
    }
    struct sp_hold_record *place = next_record(h);
    if (!place) return false;
    *place = now;
    note_limits(h, r, before, &now); /* takes h->state for itself */
    return true;
}

bool sp_hold_note(struct sp_holding *h, struct sp_run *r, double from)
{
    double before = from;
    if (!h->records && !note_at(h, r, from, from)) return false;
    for (int i = 1; i <= POINTS; ++i) {
        double t = i == POINTS ? r->time : from + (r->time - from) * i / POINTS;
        if (t <= before) continue;
        if (!note_at(h, r, before, t)) return false;
        before = t;
    }
    return true;
}

/* ---- cycles ---------------------------------------------------------------------------------------- */

static double coolant(const struct sp_holding *h, size_t i)
{
    return h->record[i].value[SP_HOLD_COOLANT];
}

/* Least, most and mean of the coolant over records first to last. */
struct range {
    double least, most, mean;
};

static struct range range_of(const struct sp_holding *h, size_t first, size_t last)
{
    struct range g = {coolant(h, first), coolant(h, first), coolant(h, first)};
    double area = 0.0, time = h->record[last].time - h->record[first].time;
    for (size_t i = first + 1; i <= last; ++i) {
        double a = coolant(h, i - 1), b = coolant(h, i);
        g.least = fmin(g.least, b);
        g.most = fmax(g.most, b);
        area += 0.5 * (a + b) * (h->record[i].time - h->record[i - 1].time);
    }
    if (time > 0.0) g.mean = area / time;
    return g;
}

static size_t first_after(const struct sp_holding *h, double time)
{
    size_t i = h->records - 1;
    while (i > 0 && h->record[i - 1].time >= time)
        --i;
    return i;
}

/* A round from one rise through `level` to the next. */
struct round {
    size_t first, last;
    double period;
    struct range range;
};

/* Where the coolant rises through `level` between records i - 1 and i; NAN: it does not. */
static double rise_at(const struct sp_holding *h, size_t i, double level)
{
    double a = coolant(h, i - 1), b = coolant(h, i);
    if (!(a < level && b >= level)) return NAN;
    return h->record[i - 1].time + (level - a) / (b - a) * (h->record[i].time - h->record[i - 1].time);
}

/* First and last full round from record `from` on; returns how many there are. */
static int rounds(const struct sp_holding *h, size_t from, double level, struct round *first,
                  struct round *last)
{
    int count = 0;
    size_t began = 0;
    double since = NAN;
    for (size_t i = from + 1; i < h->records; ++i) {
        double t = rise_at(h, i, level);
        if (isnan(t)) continue;
        if (!isnan(since)) {
            *last = (struct round){began, i, t - since, range_of(h, began, i)};
            if (!count++) *first = *last;
        }
        began = i;
        since = t;
    }
    return count;
}

static bool alike(const struct round *a, const struct round *b)
{
    double near = same_value * (b->range.most - b->range.least) + same_kelvin;
    return fabs(a->period - b->period) <= same_period * b->period &&
           fabs(a->range.most - b->range.most) <= near && fabs(a->range.least - b->range.least) <= near;
}

/* The window holds three rounds at least. */
static bool look(const struct sp_holding *h, size_t from, bool strict, struct sp_hold_cycle *out)
{
    struct round first = {0}, last = {0};
    struct range all = range_of(h, from, h->records - 1);
    if (all.most - all.least < least_swing) return false;
    int count = rounds(h, from, all.mean, &first, &last);
    if (count < 3 || (strict && !alike(&first, &last))) return false;
    double span = h->record[last.last].time - h->record[first.first].time;
    *out = strict ? (struct sp_hold_cycle){last.first, last.last, last.period}
                  : (struct sp_hold_cycle){first.first, last.last, span / count};
    return true;
}

bool sp_hold_find_cycle(const struct sp_holding *h, struct sp_hold_cycle *out)
{
    return look(h, first_after(h, 0.5 * h->record[h->records - 1].time), true, out);
}

struct sp_hold_cycle sp_hold_last(const struct sp_holding *h, double span)
{
    size_t last = h->records - 1, from = first_after(h, h->record[last].time - span);
    struct sp_hold_cycle c;
    if (!look(h, from, false, &c)) c = (struct sp_hold_cycle){from, last, NAN};
    return c;
}

/* ---- sums ------------------------------------------------------------------------------------------ */

/* The worst of each judged value. */
static void worst_values(const struct sp_holding *h, const struct sp_hold_cycle *c, struct sp_hold_point *out)
{
    for (int j = 0; j < SP_HOLD_LIMITS; ++j) {
        double worst = h->record[c->first].value[j];
        for (size_t i = c->first; i <= c->last; ++i) {
            double v = h->record[i].value[j];
            worst = j == SP_HOLD_BOIL_MARGIN ? fmin(worst, v) : fmax(worst, v);
        }
        out->limit[j].value = worst;
    }
}

void sp_hold_sum_up(const struct sp_holding *h, const struct sp_hold_cycle *c, struct sp_hold_point *out)
{
    const struct sp_hold_record *a = &h->record[c->first], *b = &h->record[c->last];
    struct range g = range_of(h, c->first, c->last);
    double time = b->time - a->time, fan = 0.0;
    for (size_t i = c->first + 1; i <= c->last; ++i)
        if (h->record[i].fan) fan += h->record[i].time - h->record[i - 1].time;
    out->coolant.least = g.least;
    out->coolant.most = g.most;
    out->coolant.mean = g.mean;
    out->coolant.period = c->period;
    out->coolant.fan = time > 0.0 ? fan / time : b->fan;
    out->heat.in = (b->in - a->in) / time;
    out->heat.air = (b->air - a->air) / time;
    out->heat.skin = (b->skin - a->skin) / time;
    worst_values(h, c, out);
}
