/* schedule_merge.c - rows finer than asked for become means over hats, rows on a straight line go.
 *
 * Nodes are rows of the trace at least `width` apart; v_j = int f phi_j / int phi_j over hat functions phi_j
 * on the nodes, exact for the piecewise linear f. The hats add up to one, so that the integral of every
 * channel is kept; a mean does not leave the range of f. A span between nodes that holds no further row
 * gives h/2 f to either end instead (the same sum), so that rows that are coarse already stay as they are.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/schedule_parts.h"

#include <math.h>
#include <stdlib.h>

static const double straight = 1e-9;  /* of a channel's range */
static const double rounding = 4e-16; /* of its largest value: constants that are not quite */
static const double slack = 1e-9;     /* s: 0.5 s asked for, 0.49999999999 s found */

/* ---- spans ------------------------------------------------------------------------------------------ */

static void range_over(double *least, double *most, double x)
{
    if (x < *least) *least = x;
    if (x > *most) *most = x;
}

static void span_begin(struct sp_merge_span *s, const struct sp_row *row)
{
    s->open = false;
    s->segments = 0;
    s->begin = s->end = row->time;
    for (int c = 0; c < SP_INPUTS; c++) {
        s->first[c] = s->last[c] = s->least[c] = s->most[c] = row->in[c];
        s->area[c] = s->moment[c] = 0.0;
    }
}

static void span_extend(struct sp_merge_span *s, const struct sp_row *row)
{
    double s0 = s->end - s->begin, s1 = row->time - s->begin, h = s1 - s0;
    double u0 = h / 6.0 * (2.0 * s0 + s1), u1 = h / 6.0 * (s0 + 2.0 * s1);
    for (int c = 0; c < SP_INPUTS; c++) {
        double f0 = s->last[c], f1 = row->in[c];
        s->area[c] += 0.5 * h * (f0 + f1);
        s->moment[c] += f0 * u0 + f1 * u1;
        s->last[c] = f1;
        range_over(&s->least[c], &s->most[c], f1);
    }
    s->end = row->time;
    s->segments++;
    s->open = true;
}

/* `a` takes in `b`, which begins where `a` ends. */
static void span_join(struct sp_merge_span *a, const struct sp_merge_span *b)
{
    double shift = b->begin - a->begin;
    for (int c = 0; c < SP_INPUTS; c++) {
        a->area[c] += b->area[c];
        a->moment[c] += b->moment[c] + shift * b->area[c];
        a->last[c] = b->last[c];
        range_over(&a->least[c], &a->most[c], b->least[c]);
        range_over(&a->least[c], &a->most[c], b->most[c]);
    }
    a->end = b->end;
    a->segments += b->segments;
}

/* ---- nodes ------------------------------------------------------------------------------------------ */

static void node_begin(struct sp_merge *m, const struct sp_row *row, size_t source)
{
    m->weight = 0.0;
    for (int c = 0; c < SP_INPUTS; c++) {
        m->sum[c] = 0.0;
        m->least[c] = INFINITY;
        m->most[c] = -INFINITY;
    }
    m->node = *row;
    m->node_source = source;
}

/* Gives the node its means and puts it into the table, with the marks of its source row. */
static void node_emit(struct sp_merge *m)
{
    struct sp_row row = m->node;
    for (int c = 0; c < SP_INPUTS && m->weight > 0.0; c++) {
        double v = m->sum[c] / m->weight;
        if (v < m->least[c]) v = m->least[c]; /* rounding */
        if (v > m->most[c]) v = m->most[c];
        row.in[c] = v;
    }
    if (!sp_rows_push(m->to, &row, m->step)) m->failed = true;
    while (!m->failed && m->next_mark < m->marks && m->mark[m->next_mark].row <= m->node_source) {
        if (!sp_rows_mark(m->to, m->to->table.rows - 1, m->mark[m->next_mark].text)) m->failed = true;
        m->next_mark++;
    }
}

static void node_range(struct sp_merge *m, const struct sp_merge_span *s)
{
    for (int c = 0; c < SP_INPUTS; c++) {
        bool plain = s->segments == 1;
        range_over(&m->least[c], &m->most[c], plain ? m->node.in[c] : s->least[c]);
        range_over(&m->least[c], &m->most[c], plain ? m->node.in[c] : s->most[c]);
    }
}

/* The span's share goes to its two nodes; the left one is then complete. `right` is the row at its end. */
static void close_span(struct sp_merge *m, const struct sp_merge_span *s, const struct sp_row *right,
                       size_t right_source)
{
    double h = s->end - s->begin, to_right[SP_INPUTS];
    for (int c = 0; c < SP_INPUTS; c++) {
        bool plain = s->segments == 1;
        to_right[c] = plain ? 0.5 * h * s->last[c] : s->moment[c] / h;
        m->sum[c] += plain ? 0.5 * h * s->first[c] : s->area[c] - to_right[c];
    }
    m->weight += 0.5 * h;
    node_range(m, s);
    node_emit(m);
    node_begin(m, right, right_source);
    for (int c = 0; c < SP_INPUTS; c++) m->sum[c] = to_right[c];
    m->weight = 0.5 * h;
    node_range(m, s);
}

/* ---- the stream --------------------------------------------------------------------------------------- */

void sp_merge_begin(struct sp_merge *m, struct sp_rows *to, double width, unsigned short step,
                    const struct sp_mark *mark, size_t marks)
{
    *m = (struct sp_merge){.to = to, .width = width > 0.0 ? width : 0.0, .step = step, .mark = mark, .marks = marks};
}

static bool marked(const struct sp_merge *m, size_t source)
{
    size_t i = m->next_mark;
    while (i < m->marks && m->mark[i].row < source) i++;
    return i < m->marks && m->mark[i].row == source;
}
