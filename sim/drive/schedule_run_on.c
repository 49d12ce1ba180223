/* schedule_run_on.c - pump and fan after the engine has stopped. SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/schedule_parts.h"

#include <math.h>
#include <stdlib.h>

static const double slack = 1e-9; /* s: an end so close to a row is that row's */

struct windows {
    double pump, fan;
}; /* s of run-on */

static double window(bool fitted, double time)
{
    return fitted && time > 0.0 ? time : 0.0;
}

/* The longest of all fans: while one may run on, all may. */
static double fans_window(const struct sp_design *d)
{
    double longest = 0.0;
    for (size_t i = 0; i < SP_DUCTS; ++i)
        for (size_t f = 0; f < SP_FANS; ++f)
            longest = fmax(longest, window(d->duct[i].fan[f].fitted, d->duct[i].fan[f].run_on));
    return longest;
}

/* Goes through the segments and tells since when the engine has been off; NAN while it runs or when it has
 * not run yet in this drive. */
static double stopped_at(const struct sp_schedule *s, size_t k, bool *running, double stop)
{
    if (s->flags[k] & SP_FLAG_ENGINE) {
        *running = true;
        return NAN;
    }
    if (!*running) return stop;
    *running = false;
    return s->time[k];
}

/* A double row at `end` if it falls into segment k, unless there is one. */
static size_t insertion(const struct sp_schedule *s, size_t k, double end, struct sp_row_insertion *to)
{
    double begin = s->time[k];
    if (end < begin - slack || end >= s->time[k + 1] - slack || isnan(end)) return 0;
    bool at_begin = end <= begin + slack;
    if (at_begin && (k == 0 || s->time[k - 1] >= begin)) return 0; /* a jump already */
    *to = (struct sp_row_insertion){k, at_begin ? begin : end};
    return 1;
}

/* At most two to a segment; `to` may be NULL for counting. */
static size_t find(const struct sp_schedule *s, const struct windows *w, struct sp_row_insertion *to)
{
    bool running = false;
    double stop = NAN, first = fmin(w->pump, w->fan), second = fmax(w->pump, w->fan);
    size_t count = 0;
    for (size_t k = 0; k + 1 < s->rows; k++) {
        if (s->time[k + 1] <= s->time[k]) continue;
        stop = stopped_at(s, k, &running, stop);
        struct sp_row_insertion here[2];
        size_t n = first > 0.0 ? insertion(s, k, stop + first, &here[0]) : 0;
        if (second - first > slack) n += insertion(s, k, stop + second, &here[n]);
        for (size_t i = 0; i < n && to; i++)
            to[count + i] = here[i];
        count += n;
    }
    return count;
}

static void set_flags(struct sp_schedule *s, const struct windows *w)
{
    bool running = false;
    double stop = NAN;
    for (size_t k = 0; k + 1 < s->rows; k++) {
        if (s->time[k + 1] <= s->time[k]) {
            if (k > 0) s->flags[k] = s->flags[k - 1]; /* no time passes in a jump */
            continue;
        }
        stop = stopped_at(s, k, &running, stop);
        unsigned flags = s->flags[k] & (SP_FLAG_ENGINE | SP_FLAG_KEY | SP_FLAG_BONNET);
        bool on = flags & (SP_FLAG_ENGINE | SP_FLAG_KEY);
        double middle = 0.5 * (s->time[k] + s->time[k + 1]);
        if (on || middle < stop + w->pump) flags |= SP_FLAG_PUMP;
        if (on || middle < stop + w->fan) flags |= SP_FLAG_FAN;
        s->flags[k] = (unsigned char)flags;
    }
    if (s->rows > 1) s->flags[s->rows - 1] = s->flags[s->rows - 2];
}

bool sp_schedule_run_on(struct sp_rows *r, const struct sp_design *d)
{
    struct windows w = {window(d->pump.electric, d->pump.run_on),
                        fans_window(d)};
    size_t count = find(&r->table, &w, NULL);
    if (count > 0) {
        struct sp_row_insertion *list = malloc(count * sizeof *list);
        if (!list) return false;
        find(&r->table, &w, list);
        bool fine = sp_rows_insert(r, list, count);
        free(list);
        if (!fine) return false;
    }
    set_flags(&r->table, &w);
    return true;
}
