/* trace_rows.c - whole rows of a trace file: what is missing, doubled, out of order; what is kept.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/trace_reader.h"

#include "drive/trace_text.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define MARK_BIT (1u << SP_COL_MARK)

static const double half_day = 43200, day = 86400; /* s */

static double last_value(const struct sp_trace_reader *r, enum sp_column c)
{
    return r->out->column[c][r->out->rows - 1];
}

void sp_trace_take_mark(struct sp_trace_reader *r, const char *s, size_t n)
{
    r->got |= MARK_BIT;
    if (r->mark_now && r->mark_size == n && memcmp(r->mark_now, s, n) == 0) return;
    char *now = malloc(n), *next = sp_trace_text_clean(s, n);
    if (!now || !next) {
        free(now);
        free(next);
        sp_trace_no_memory(r);
        return;
    }
    memcpy(now, s, n);
    free(r->mark_now);
    r->mark_now = now;
    r->mark_size = n;
    if (*next) {
        free(r->mark_next);
        r->mark_next = next;
        r->mark_changed = true;
    } else {
        free(next);
    }
}

static void complain_blank(struct sp_trace_reader *r, enum sp_column c)
{
    char found[64] = "a blank cell";
    if (r->cell < r->layout.rules) snprintf(found, sizeof found, "a row that ends after %zu cells", r->cell);
    sp_trace_fault(r, r->layout.label[c], found, "a value in every cell", NULL);
}

/* The axis has no value: without it the row has no place. */
static void drop_placeless(struct sp_trace_reader *r)
{
    unsigned bit = 1u << r->axis;
    if (!r->format->repair && !((r->bad_text | r->bad_range) & bit)) complain_blank(r, r->axis);
    if (r->bad_range & bit)
        r->out->repairs.range_held++;
    else
        r->out->repairs.text_held++;
}

/* Holds what the row does not say, or complains of it. False: the row cannot be kept. */
static bool fill(struct sp_trace_reader *r, unsigned missing)
{
    struct sp_trace_repairs *n = &r->out->repairs;
    if (missing & 1u << r->axis) {
        drop_placeless(r);
        return false;
    }
    for (int c = 0; c < SP_COL_MARK; c++) {
        unsigned bit = 1u << c;
        if (!(missing & bit)) continue;
        if (r->bad_text & bit)
            n->text_held++;
        else if (r->bad_range & bit)
            n->range_held++;
        else if (r->format->blank == SP_BLANK_HOLD)
            n->cells_held++;
        else
            complain_blank(r, (enum sp_column)c);
        r->value[c] = r->out->rows ? last_value(r, (enum sp_column)c) : 0;
    }
    return true;
}

static bool is_double(const struct sp_trace_reader *r)
{
    if (!r->format->drop_doubles || r->out->rows == 0 || r->mark_changed) return false;
    if (r->got & ~r->seen & ~MARK_BIT) return false;
    for (int c = 0; c < SP_COL_MARK; c++)
        if (r->layout.present & 1u << c && r->value[c] != last_value(r, (enum sp_column)c)) return false;
    return true;
}

/* One wild stamp ahead of its time would make all later rows look late: if the row before came after a
 * gap and this one follows well on the row before that, the row before is the one at fault. */
static bool last_row_is_wild(const struct sp_trace_reader *r)
{
    const double *axis = r->out->column[r->axis];
    size_t rows = r->out->rows;
    double x = r->value[r->axis];
    return r->format->repair && r->leapt && rows >= 2 && x >= axis[rows - 2] &&
           x - axis[rows - 2] <= r->longest_gap;
}

static void pass_midnight(struct sp_trace_reader *r)
{
    r->value[SP_COL_TIME] += r->day;
    if (r->out->rows == 0 || r->value[SP_COL_TIME] >= last_value(r, SP_COL_TIME) - half_day) return;
    if (last_row_is_wild(r)) return;
    r->day += day;
    r->value[SP_COL_TIME] += day;
}

static void complain_order(struct sp_trace_reader *r, const char *what, double from)
{
    char found[120];
    bool time = r->axis == SP_COL_TIME;
    snprintf(found, sizeof found, "%s (%.9g %s after %.9g %s)", what, r->value[r->axis], time ? "s" : "m",
             from, time ? "s" : "m");
    sp_trace_fault(r, r->layout.label[r->axis], found,
                   time ? "time that rises, or two rows at one time for a jump"
                        : "distance that rises, or two rows at one place for a jump",
                   NULL);
}

static bool take_step(struct sp_trace_reader *r, double from)
{
    double step = r->value[r->axis] - from;
    r->leapt = r->axis == SP_COL_TIME && step > r->longest_gap;
    if (r->leapt) r->out->repairs.gaps++;
    if (r->leapt && !r->format->repair) {
        char found[64], expected[64];
        snprintf(found, sizeof found, "a gap of %.6g s", step);
        snprintf(expected, sizeof expected, "at most %.6g s between rows", r->longest_gap);
        sp_trace_fault(r, r->layout.label[r->axis], found, expected, NULL);
    }
    return true;
}

/* Whether the row may follow on the last one kept. */
static bool in_order(struct sp_trace_reader *r)
{
    const double *axis = r->out->column[r->axis];
    double x = r->value[r->axis];
    bool counter = r->format->whole_seconds && r->axis == SP_COL_TIME, third;
    if (counter && fabs(x - nearbyint(x)) > 1e-6)
        sp_trace_fault(r, r->layout.label[r->axis], "a fraction of a second", "a counter of whole seconds",
                       NULL);
    if (r->out->rows > 0 && x < axis[r->out->rows - 1] && last_row_is_wild(r)) {
        r->out->rows--;
        r->out->repairs.gaps--;
        r->out->repairs.backward_dropped++;
        r->leapt = false;
    }
    if (r->out->rows == 0) return true;
    double last = axis[r->out->rows - 1];
    if (x > last) return take_step(r, last);
    third = r->out->rows >= 2 && axis[r->out->rows - 2] == last;
    if (x == last && (counter || !third)) return true;
    r->out->repairs.backward_dropped++;
    if (r->format->repair) return false;
    complain_order(r, x < last ? "a step back" : "a third row at one place", last);
    return true; /* kept, so that what follows is judged by it */
}

static bool make_room(struct sp_trace_reader *r)
{
    size_t room = r->room + r->room / 2 + 1024;
    if (r->out->rows < r->room) return true;
    for (int c = 0; c < SP_COL_MARK; c++) {
        if (!(r->layout.present & 1u << c)) continue;
        double *grown = realloc(r->out->column[c], room * sizeof *grown);
        if (!grown) return false;
        r->out->column[c] = grown;
    }
    r->room = room;
    return true;
}

/* Notes where line and row part company; most files need one step only. */
static bool note_line(struct sp_trace_reader *r)
{
    size_t row = r->out->rows;
    long offset = r->row_line - (long)row;
    while (r->steps > 0 && r->step[r->steps - 1].row >= row)
        r->steps--;
    if (r->steps > 0 && r->step[r->steps - 1].offset == offset) return true;
    if (r->steps == r->step_room) {
        size_t room = 2 * r->step_room + 16;
        struct sp_line_step *grown = realloc(r->step, room * sizeof *grown);
        if (!grown) return false;
        r->step = grown;
        r->step_room = room;
    }
    r->step[r->steps++] = (struct sp_line_step){row, offset};
    return true;
}

static bool keep_mark(struct sp_trace_reader *r)
{
    struct sp_trace *t = r->out;
    if (!r->mark_next) return true;
    if (t->marks > 0 && t->mark[t->marks - 1].row >= t->rows) free(t->mark[--t->marks].text);
    if (t->marks == r->mark_room) {
        size_t room = 2 * r->mark_room + 16;
        struct sp_mark *grown = realloc(t->mark, room * sizeof *grown);
        if (!grown) return false;
        t->mark = grown;
        r->mark_room = room;
    }
    t->mark[t->marks++] = (struct sp_mark){t->rows, r->mark_next};
    r->mark_next = NULL;
    return true;
}

/* A column's first value stands for the rows before it. */
static void fill_back(struct sp_trace_reader *r, unsigned first)
{
    for (int c = 0; c < SP_COL_MARK; c++)
        for (size_t i = 0; first & 1u << c && i < r->out->rows; i++)
            r->out->column[c][i] = r->value[c];
    r->seen |= first;
}

static void keep(struct sp_trace_reader *r)
{
    if (r->out->rows >= SP_TRACE_ROWS) {
        sp_trace_fault(r, NULL, "more than 100 million rows", "fewer", NULL);
        r->stage = SP_STAGE_STOPPED;
        return;
    }
    if (!make_room(r) || !note_line(r) || !keep_mark(r)) {
        sp_trace_no_memory(r);
        return;
    }
    unsigned first = r->got & ~r->seen & ~MARK_BIT;
    if (first) fill_back(r, first);
    for (int c = 0; c < SP_COL_MARK; c++)
        if (r->layout.present & 1u << c) r->out->column[c][r->out->rows] = r->value[c];
    r->out->rows++;
}

void sp_trace_end_row(struct sp_trace_reader *r)
{
    unsigned missing = r->layout.present & ~r->got & ~MARK_BIT;
    if (!r->any) return; /* a row of blanks is no row */
    r->out->repairs.rows_read++;
    if (r->layout.present & ~r->got & MARK_BIT) {
        free(r->mark_now);
        r->mark_now = NULL;
    }
    if (r->stray && r->format->repair) {
        r->out->repairs.text_held++;
        return;
    }
    if (missing && !fill(r, missing)) return;
    if (r->format->clock && r->axis == SP_COL_TIME) pass_midnight(r);
    if (is_double(r))
        r->out->repairs.doubles_dropped++;
    else if (in_order(r))
        keep(r);
}

long sp_trace_line_of(const struct sp_trace_reader *r, size_t row)
{
    size_t low = 0, high = r->steps;
    while (high - low > 1) {
        size_t middle = low + (high - low) / 2;
        if (r->step[middle].row <= row)
            low = middle;
        else
            high = middle;
    }
    return r->steps ? (long)row + r->step[low].offset : 0;
}
