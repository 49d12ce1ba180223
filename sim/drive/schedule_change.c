/* schedule_change.c - a jump in the schedule at each change of the design, and which design holds where.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/schedule_parts.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>

static const double slack = 1e-9; /* s: a change so close to a row is at that row */

/* Changes that have happened at time t. */
static size_t happened(const struct sp_design *d, double t)
{
    size_t n = 0;
    while (n < d->changes && d->change[n].at <= t + slack) ++n;
    return n;
}

/* Double rows for the changes inside the drive that fall on no jump; `to` may be NULL for counting. */
static size_t find(const struct sp_schedule *s, const struct sp_design *d, struct sp_row_insertion *to)
{
    size_t count = 0, next = 0;
    for (size_t k = 0; k + 1 < s->rows; ++k) {
        if (s->time[k + 1] <= s->time[k]) continue;
        while (next < d->changes && d->change[next].at < s->time[k + 1] - slack) {
            double at = d->change[next++].at, begin = s->time[k];
            bool there = at <= begin + slack; /* at the row itself */
            if (there && (k == 0 || s->time[k - 1] >= begin)) continue; /* a jump, or the start */
            bool again = next > 1 && d->change[next - 2].at >= at - slack; /* two changes at one time */
            if (again) continue;
            if (to) to[count] = (struct sp_row_insertion){k, there ? begin : at};
            ++count;
        }
    }
    return count;
}

bool sp_schedule_changes(struct sp_rows *r, const struct sp_design *d)
{
    struct sp_schedule *s = &r->table;
    if (!d->changes) return true;
    size_t count = find(s, d, NULL);
    if (count > 0) {
        struct sp_row_insertion *list = malloc(count * sizeof *list);
        if (!list) return false;
        find(s, d, list);
        bool fine = sp_rows_insert(r, list, count);
        free(list);
        if (!fine) return false;
    }
    s->variant = calloc(s->rows, sizeof *s->variant);
    if (!s->variant) return false;
    for (size_t k = 0; k < s->rows; ++k) {
        bool jump = k + 1 < s->rows && s->time[k + 1] <= s->time[k];
        s->variant[k] = (unsigned short)(jump && k > 0 ? s->variant[k - 1] : happened(d, s->time[k]));
    }
    return true;
}

/* ---- changes that never happen --------------------------------------------------------------------- */

/* "14 min 30.5 s" */
static void write_time(double seconds, char *out, size_t size)
{
    double minutes = floor(seconds / 60.0 + 1e-9), rest = fmax(seconds - 60.0 * minutes, 0.0);
    if (seconds < 60.0)
        snprintf(out, size, "%.6g s", seconds);
    else if (rest < 1e-3)
        snprintf(out, size, "%.0f min", minutes);
    else
        snprintf(out, size, "%.0f min %.3g s", minutes, rest);
}

static bool entry_said(const struct sp_design *d, size_t i, double end)
{
    for (size_t k = 0; k < i; ++k)
        if (d->change[k].entry == d->change[i].entry && d->change[k].at >= end - slack) return true;
    return false;
}

static void caution_late(struct sp_complaints *to, const struct sp_design *d, size_t i, double end)
{
    const struct sp_change *c = &d->change[i];
    char path[60], found[60], over[60], expected[160];
    struct sp_place at = {.file = c->file ? c->file : d->file, .line = c->line, .path = path};
    snprintf(path, sizeof path, "changes[%zu].at", c->entry);
    write_time(c->at, found, sizeof found);
    write_time(end, over, sizeof over);
    for (size_t k = 0; k < i; ++k)
        if (d->change[k].entry == c->entry) snprintf(path, sizeof path, "changes[%zu].times", c->entry);
    snprintf(expected, sizeof expected, "a time within the drive, which ends at %s; it never comes to pass", over);
    sp_complain(to, &at, found, expected, NULL);
}

void sp_schedule_caution_changes(struct sp_scheduling *b)
{
    const struct sp_schedule *s = &b->rows.table;
    double end = s->time[s->rows - 1];
    for (size_t i = 0; i < b->design->changes; ++i)
        if (b->design->change[i].at >= end - slack && !entry_said(b->design, i, end))
            caution_late(b->cautions, b->design, i, end);
}
