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

/* ---- spans ------------------------------------------------------------------------------------ */

static void range_over(double *least, double *most, double x)
{
    if (x < *least) *least = x;
    if (x > *most) *most = x;
}

static double length(const struct sp_merge_span *s)
{
    return s->end - s->begin;
}

static void span_begin(struct sp_merge_span *s, double time, const double in[SP_INPUTS])
{
    s->segments = 0;
    s->begin = s->end = time;
    for (int c = 0; c < SP_INPUTS; c++) {
        s->first[c] = s->last[c] = s->least[c] = s->most[c] = in[c];
        s->area[c] = s->moment[c] = 0.0;
    }
}

static void span_extend(struct sp_merge_span *s, const struct sp_row *row, size_t source)
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
    s->source = source;
    s->segments++;
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
    a->source = b->source;
    a->segments += b->segments;
}

/* ---- nodes ------------------------------------------------------------------------------------ */

static void node_begin(struct sp_merge *m, double time, const double value[SP_INPUTS], size_t source)
{
    m->node.time = time;
    m->node.weight = 0.0;
    m->node.source = source;
    for (int c = 0; c < SP_INPUTS; c++) {
        m->node.sum[c] = 0.0;
        m->node.value[c] = value[c];
        m->node.least[c] = INFINITY;
        m->node.most[c] = -INFINITY;
    }
}

/* Gives the node its means and puts it into the table, with the marks of its source row. */
static void node_emit(struct sp_merge *m)
{
    struct sp_row row = {.time = m->node.time, .flags = m->flags};
    for (int c = 0; c < SP_INPUTS; c++) {
        double v = m->node.weight > 0.0 ? m->node.sum[c] / m->node.weight : m->node.value[c];
        if (v < m->node.least[c] && m->node.weight > 0.0) v = m->node.least[c]; /* rounding */
        if (v > m->node.most[c] && m->node.weight > 0.0) v = m->node.most[c];
        row.in[c] = v;
    }
    if (!sp_rows_push(m->to, &row, m->step)) m->failed = true;
    while (!m->failed && m->next_mark < m->marks && m->mark[m->next_mark].row <= m->node.source) {
        if (!sp_rows_mark(m->to, m->to->table.rows - 1, m->mark[m->next_mark].text)) m->failed = true;
        m->next_mark++;
    }
}

/* Half of the span's weight to the node, with its part of the integral. */
static void node_add(struct sp_merge *m, const struct sp_merge_span *s, const double part[SP_INPUTS])
{
    bool plain = s->segments == 1;
    m->node.weight += 0.5 * length(s);
    for (int c = 0; c < SP_INPUTS; c++) {
        m->node.sum[c] += part[c];
        range_over(&m->node.least[c], &m->node.most[c], plain ? m->node.value[c] : s->least[c]);
        range_over(&m->node.least[c], &m->node.most[c], plain ? m->node.value[c] : s->most[c]);
    }
}

/* The span goes to its two nodes; the left one is then complete. */
static void close_span(struct sp_merge *m, struct sp_merge_span *s)
{
    double left[SP_INPUTS], right[SP_INPUTS], h = length(s);
    for (int c = 0; c < SP_INPUTS; c++) {
        bool plain = s->segments == 1;
        right[c] = plain ? 0.5 * h * s->last[c] : s->moment[c] / h;
        left[c] = plain ? 0.5 * h * s->first[c] : s->area[c] - right[c];
    }
    node_add(m, s, left);
    node_emit(m);
    node_begin(m, s->end, s->last, s->source);
    node_add(m, s, right);
    s->segments = 0;
}

/* ---- the stream ------------------------------------------------------------------------------- */

void sp_merge_begin(struct sp_merge *m, struct sp_rows *to, double width, unsigned short step,
                    const struct sp_mark *mark, size_t marks)
{
    *m = (struct sp_merge){
        .to = to, .width = width > 0.0 ? width : 0.0, .step = step, .mark = mark, .marks = marks};
}

static bool marked(struct sp_merge *m, size_t source)
{
    while (m->scan_mark < m->marks && m->mark[m->scan_mark].row < source)
        m->scan_mark++;
    return m->scan_mark < m->marks && m->mark[m->scan_mark].row == source;
}

static bool long_enough(const struct sp_merge *m, double h)
{
    return h >= m->width - slack;
}

/* The growing span ends at its last row. When it is short it goes into the one before, unless that would
 * make one too long. With `stay` that row must be a node, so nothing later may be joined to the span. */
static void end_span(struct sp_merge *m, bool stay)
{
    struct sp_merge_span *before = &m->before, *now = &m->now;
    double time = now->end, in[SP_INPUTS];
    for (int c = 0; c < SP_INPUTS; c++)
        in[c] = now->last[c];
    if (before->segments > 0 && !long_enough(m, length(now)) &&
        length(before) + length(now) < 2.0 * m->width) {
        span_join(before, now);
    } else if (now->segments > 0) {
        if (before->segments > 0) close_span(m, before);
        *before = *now;
    }
    if (stay && before->segments > 0) close_span(m, before);
    span_begin(now, time, in);
}

void sp_merge_break(struct sp_merge *m)
{
    if (!m->begun) return;
    end_span(m, true);
    node_emit(m);
    m->begun = false;
}

void sp_merge_push(struct sp_merge *m, const struct sp_row *row, size_t source)
{
    if (m->begun && (row->time <= m->now.end || row->flags != m->flags)) sp_merge_break(m);
    m->pushed++;
    if (!m->begun) {
        m->begun = true;
        m->flags = row->flags;
        m->before.segments = 0;
        node_begin(m, row->time, row->in, source);
        span_begin(&m->now, row->time, row->in);
        return;
    }
    if (m->now.segments > 0 && long_enough(m, row->time - m->now.end)) end_span(m, false);
    span_extend(&m->now, row, source);
    if (marked(m, source))
        end_span(m, true);
    else if (long_enough(m, length(&m->now)))
        end_span(m, false);
}

/* ---- rows on a straight line ------------------------------------------------------------------ */

/* From the row kept last, the slopes of each channel that pass all rows since within tolerance. */
struct cone {
    double tolerance[SP_INPUTS], low[SP_INPUTS], high[SP_INPUTS];
};

static void cone_open(struct cone *k)
{
    for (int c = 0; c < SP_INPUTS; c++) {
        k->low[c] = -INFINITY;
        k->high[c] = INFINITY;
    }
}

static void cone_tolerances(struct cone *k, const struct sp_schedule *s)
{
    for (int c = 0; c < SP_INPUTS; c++) {
        double least = INFINITY, most = -INFINITY;
        for (size_t i = 0; i < s->rows; i++)
            range_over(&least, &most, s->channel[c][i]);
        double range = most >= least ? most - least : 0.0;
        double size = most >= least ? fmax(fabs(least), fabs(most)) : 0.0;
        k->tolerance[c] = straight * range + rounding * size;
    }
}

/* May the rows between `from` and `to` go? */
static bool cone_holds(const struct cone *k, const struct sp_schedule *s, size_t from, size_t to)
{
    double h = s->time[to] - s->time[from];
    for (int c = 0; c < SP_INPUTS; c++) {
        double a = s->channel[c][from], b = s->channel[c][to];
        if (isnan(a) && isnan(b) && !isnan(k->low[c])) continue;
        double slope = (b - a) / h;
        if (!(slope >= k->low[c] && slope <= k->high[c])) return false;
    }
    return true;
}

static void cone_narrow(struct cone *k, const struct sp_schedule *s, size_t from, size_t to)
{
    double h = s->time[to] - s->time[from];
    for (int c = 0; c < SP_INPUTS; c++) {
        double a = s->channel[c][from], b = s->channel[c][to];
        if (isnan(a) && isnan(b)) continue;
        double low = (b - k->tolerance[c] - a) / h, high = (b + k->tolerance[c] - a) / h;
        if (!(low <= k->low[c])) k->low[c] = low; /* also when NAN: the cone is then shut */
        if (!(high >= k->high[c])) k->high[c] = high;
    }
}

/* A row that must stay: an end, one of a jump's two, or one with a mark. */
static bool stays(const struct sp_schedule *s, size_t i, bool has_mark)
{
    return has_mark || i == 0 || i + 1 == s->rows || s->time[i] <= s->time[i - 1] ||
           s->time[i + 1] <= s->time[i] || s->flags[i] != s->flags[i - 1];
}

void sp_rows_thin(struct sp_rows *r)
{
    struct sp_schedule *s = &r->table;
    struct cone k;
    if (s->rows < 3) return;
    cone_tolerances(&k, s);
    cone_open(&k);
    size_t kept = 0, anchor = 0, mark = 0; /* row `anchor` now stands at `kept`; later rows still in place */
    while (mark < s->marks && s->mark[mark].row == 0)
        mark++;
    for (size_t i = 1; i < s->rows; i++) {
        if (i - 1 > anchor && !cone_holds(&k, s, kept, i)) {
            anchor = i - 1;
            sp_rows_move(s, anchor, ++kept);
            cone_open(&k);
        }
        bool has_mark = mark < s->marks && s->mark[mark].row == i;
        if (stays(s, i, has_mark)) {
            anchor = i;
            sp_rows_move(s, i, ++kept);
            cone_open(&k);
            for (; mark < s->marks && s->mark[mark].row == i; mark++)
                s->mark[mark].row = kept;
        } else {
            cone_narrow(&k, s, kept, i);
        }
    }
    s->rows = kept + 1;
}
