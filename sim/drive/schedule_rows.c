/* schedule_rows.c - rows that grow, join and make room. SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/schedule_parts.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static bool grow(void **array, size_t room, size_t size)
{
    void *wider = realloc(*array, room * size);
    if (wider) *array = wider;
    return wider != NULL;
}

static bool grow_doubles(double **array, size_t room)
{
    void *p = *array;
    bool fine = grow(&p, room, sizeof **array);
    *array = p;
    return fine;
}

bool sp_rows_reserve(struct sp_rows *r, size_t rows)
{
    struct sp_schedule *s = &r->table;
    if (rows > SP_SCHEDULE_ROWS) return false;
    if (rows <= r->room) return true;
    size_t room = r->room + r->room / 2 + 16;
    if (room < rows) room = rows;
    bool fine = grow_doubles(&s->time, room);
    for (int c = 0; c < SP_INPUTS; c++)
        fine = fine && grow_doubles(&s->channel[c], room);
    void *flags = s->flags, *step = s->step;
    fine = fine && grow(&flags, room, sizeof *s->flags);
    fine = fine && grow(&step, room, sizeof *s->step);
    s->flags = flags;
    s->step = step;
    if (fine) r->room = room;
    return fine;
}

bool sp_rows_push(struct sp_rows *r, const struct sp_row *row, unsigned short step)
{
    struct sp_schedule *s = &r->table;
    if (!sp_rows_reserve(r, s->rows + 1)) return false;
    s->time[s->rows] = row->time;
    for (int c = 0; c < SP_INPUTS; c++)
        s->channel[c][s->rows] = row->in[c];
    s->flags[s->rows] = row->flags;
    s->step[s->rows] = step;
    s->rows++;
    return true;
}

bool sp_rows_mark(struct sp_rows *r, size_t row, const char *text)
{
    struct sp_schedule *s = &r->table;
    if (s->marks == r->mark_room) {
        void *mark = s->mark;
        size_t room = r->mark_room + r->mark_room / 2 + 16;
        if (s->marks >= SP_SCHEDULE_ROWS || !grow(&mark, room, sizeof *s->mark)) return false;
        s->mark = mark;
        r->mark_room = room;
    }
    size_t size = strlen(text) + 1;
    char *copy = malloc(size);
    if (!copy) return false;
    memcpy(copy, text, size);
    s->mark[s->marks++] = (struct sp_mark){row, copy};
    return true;
}

static bool same(double a, double b)
{
    return a == b || (isnan(a) && isnan(b));
}

/* The last row of `to` and the first of `from` are one state of the car. The flags of the last row are those
 * of the segment that ends there. */
static bool join(const struct sp_schedule *to, const struct sp_schedule *from)
{
    if (to->rows == 0 || to->flags[to->rows - 1] != from->flags[0]) return false;
    for (int c = 0; c < SP_INPUTS; c++)
        if (!same(to->channel[c][to->rows - 1], from->channel[c][0])) return false;
    return true;
}

bool sp_rows_append(struct sp_rows *to, const struct sp_rows *from)
{
    struct sp_schedule *a = &to->table;
    const struct sp_schedule *b = &from->table;
    if (b->rows == 0) return true;
    bool joined = join(a, b);
    size_t at = joined ? a->rows - 1 : a->rows;
    double shift = a->rows > 0 ? a->time[a->rows - 1] - b->time[0] : 0.0;
    if (!sp_rows_reserve(to, at + b->rows)) return false;
    for (size_t i = joined ? 1 : 0; i < b->rows; i++)
        a->time[at + i] = b->time[i] + shift;
    if (!joined && at > 0) a->time[at] = a->time[at - 1]; /* equal, whatever the rounding */
    for (int c = 0; c < SP_INPUTS; c++)
        memcpy(a->channel[c] + at, b->channel[c], b->rows * sizeof *b->channel[c]);
    memcpy(a->flags + at, b->flags, b->rows * sizeof *b->flags);
    memcpy(a->step + at, b->step, b->rows * sizeof *b->step);
    a->rows = at + b->rows;
    for (size_t i = 0; i < b->marks; i++)
        if (!sp_rows_mark(to, at + b->mark[i].row, b->mark[i].text)) return false;
    return true;
}

void sp_rows_move(struct sp_schedule *s, size_t from, size_t to)
{
    if (from == to) return;
    s->time[to] = s->time[from];
    for (int c = 0; c < SP_INPUTS; c++)
        s->channel[c][to] = s->channel[c][from];
    s->flags[to] = s->flags[from];
    s->step[to] = s->step[from];
}

static double between(double a, double b, double share)
{
    return a + share * (b - a);
}

/* Row `to` becomes the state at time `at` between rows `low` and `high` (which may be `to` itself: done
 * last). */
static void interpolate(struct sp_schedule *s, size_t low, size_t high, double at, size_t to)
{
    double h = s->time[high] - s->time[low], share = h > 0.0 ? (at - s->time[low]) / h : 0.0;
    for (int c = 0; c < SP_INPUTS; c++)
        s->channel[c][to] =
            share > 0.0 ? between(s->channel[c][low], s->channel[c][high], share) : s->channel[c][low];
    s->flags[to] = s->flags[low];
    s->step[to] = s->step[low];
    s->time[to] = at;
}

/* From the back, so that everything is moved once. An insertion at the very begin of its segment doubles that
 * row; within it puts two new rows. */
bool sp_rows_insert(struct sp_rows *r, const struct sp_row_insertion *insertion, size_t count)
{
    struct sp_schedule *s = &r->table;
    size_t more = 0, mark = s->marks;
    for (size_t i = 0; i < count; i++)
        more += s->time[insertion[i].segment] == insertion[i].at ? 1 : 2;
    if (!sp_rows_reserve(r, s->rows + more)) return false;
    size_t next = s->rows; /* first old row that is already in its new place */
    s->rows += more;
    for (size_t i = count; i-- > 0;) {
        size_t k = insertion[i].segment;
        bool begin = s->time[k] == insertion[i].at;
        while (next > k + 1) {
            next--;
            sp_rows_move(s, next, next + more);
            for (; mark > 0 && s->mark[mark - 1].row == next; mark--)
                s->mark[mark - 1].row += more;
        }
        size_t upper = k + 1 + more; /* the end of the segment, or the pair put in before it */
        if (begin) {
            sp_rows_move(s, k, upper - 1);
            more--;
        } else {
            double at = insertion[i].at;
            interpolate(s, k, upper, at, upper - 1);
            interpolate(s, k, upper, at, upper - 2);
            more -= 2;
        }
    }
    return true;
}
