/* trace_finish.c - the kept rows made into a trace: counters spread, time from zero, what is derived.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/trace_reader.h"

#include "drive/trace_columns.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>

/* Below this a distance says nothing of time; m/s. */
static const double standstill = 0.1;

static void fault_at(struct sp_trace_reader *r, long line, const char *path, const char *found,
                     const char *expected)
{
    r->row_line = line;
    sp_trace_fault(r, path, found, expected, NULL);
}

static void check_amount(struct sp_trace_reader *r)
{
    const struct sp_trace_repairs *n = &r->out->repairs;
    if (n->rows_read < 2) {
        fault_at(r, 0, NULL, n->rows_read ? "one row" : "no rows", "two rows or more below the headings");
        return;
    }
    for (int c = 0; c < SP_COL_MARK; c++)
        if (r->layout.present & ~r->seen & 1u << c && !r->failed)
            fault_at(r, 0, r->layout.label[c], "no value in the whole column", "at least one");
    if (r->failed) return;
    if (2 * n->backward_dropped > n->rows_read)
        fault_at(r, 0, r->layout.label[r->axis], "more than half of the rows out of order", "rows in order");
    else if (r->out->rows < 2 || r->out->column[r->axis][r->out->rows - 1] <= r->out->column[r->axis][0])
        fault_at(r, 0, r->layout.label[r->axis], "no two rows apart from each other", "a trace that goes on");
}

static void shrink(struct sp_trace_reader *r)
{
    for (int c = 0; c < SP_COL_MARK; c++) {
        double *p = r->out->column[c];
        if (p && (p = realloc(p, r->out->rows * sizeof *p))) r->out->column[c] = p;
    }
}

/* Rows that share a second divide it evenly. */
static void spread_seconds(double *t, size_t rows)
{
    for (size_t i = 0, n; i < rows; i += n) {
        double second = t[i];
        for (n = 1; i + n < rows && t[i + n] == second;)
            n++;
        for (size_t k = 1; k < n; k++)
            t[i + k] = second + (double)k / (double)n;
    }
}

static void start_from_zero(double *t, size_t rows)
{
    double start = t[0];
    for (size_t i = 0; i < rows; i++)
        t[i] -= start;
}

static double *new_column(struct sp_trace_reader *r, enum sp_column c)
{
    double *p = r->out->column[c] = calloc(r->out->rows, sizeof *p);
    if (!p) sp_trace_no_memory(r);
    return p;
}

/* Mean speed from row i to the next; NAN over a jump. An impossible one is complained of or replaced by
 * the one before. */
static double mean_speed(struct sp_trace_reader *r, size_t i, double before)
{
    const double *t = r->out->column[SP_COL_TIME], *s = r->out->column[SP_COL_DISTANCE];
    double dt = t[i + 1] - t[i], ds = s[i + 1] - s[i], v = ds / dt;
    if (dt == 0 && ds == 0) return NAN;
    if (v >= sp_column_low(SP_COL_SPEED) && v <= sp_column_high(SP_COL_SPEED)) return v;
    r->out->repairs.range_held++;
    if (!r->format->repair) {
        char found[96], expected[64];
        snprintf(found, sizeof found, "%.6g m in %.6g s", ds, dt);
        snprintf(expected, sizeof expected, "a speed of %g to %g m/s", sp_column_low(SP_COL_SPEED),
                 sp_column_high(SP_COL_SPEED));
        fault_at(r, sp_trace_line_of(r, i + 1), r->layout.label[SP_COL_DISTANCE], found, expected);
    }
    return dt == 0 ? NAN : before;
}

/* Speed by the three-point difference for uneven steps, one-sided at the ends and at jumps. */
static void derive_speed(struct sp_trace_reader *r)
{
    const double *t = r->out->column[SP_COL_TIME];
    size_t rows = r->out->rows;
    double *v = new_column(r, SP_COL_SPEED), left = NAN, held = 0;
    if (!v) return;
    for (size_t i = 0; i < rows; i++) {
        double right = i + 1 < rows ? mean_speed(r, i, held) : NAN;
        if (!isnan(left) && !isnan(right)) {
            double h0 = t[i] - t[i - 1], h1 = t[i + 1] - t[i];
            v[i] = left + (right - left) * (h0 / (h0 + h1));
        } else {
            v[i] = !isnan(left) ? left : !isnan(right) ? right : held;
        }
        if (!isnan(right)) held = right;
        left = right;
    }
    if (rows > 2 && t[1] == t[0]) v[0] = v[1];
}

/* Time by the trapezoid of 1/speed over distance. */
static void derive_time(struct sp_trace_reader *r)
{
    const double *s = r->out->column[SP_COL_DISTANCE], *v = r->out->column[SP_COL_SPEED];
    double *t = new_column(r, SP_COL_TIME);
    for (size_t i = 0; t && i < r->out->rows; i++) {
        if (v[i] < standstill) {
            char found[64];
            snprintf(found, sizeof found, "a speed of %.6g m/s without time", v[i]);
            fault_at(r, sp_trace_line_of(r, i), r->layout.label[SP_COL_SPEED], found,
                     "a column of time, or a speed above 0.1 m/s throughout");
        } else if (i > 0 && !r->failed) {
            t[i] = t[i - 1] + 0.5 * (s[i] - s[i - 1]) * (1 / v[i] + 1 / v[i - 1]);
        }
    }
}

/* Rounding may have made one time of three. */
static void check_times(struct sp_trace_reader *r)
{
    const double *t = r->out->column[SP_COL_TIME];
    for (size_t i = 2; i < r->out->rows; i++)
        if (t[i] <= t[i - 2] || t[i] < t[i - 1]) {
            fault_at(r, sp_trace_line_of(r, i), r->layout.label[r->axis], "rows too close to be told apart",
                     "steps above 1e-12 of the whole");
            return;
        }
}

void sp_trace_finish(struct sp_trace_reader *r)
{
    if (r->stage == SP_STAGE_STOPPED) return;
    if (!r->headings_seen) {
        fault_at(r, 0, NULL, r->stage == SP_STAGE_UNITS ? "no row of units" : "no heading line",
                 "a table with a heading line and rows");
        return;
    }
    check_amount(r);
    if (r->failed) return;
    shrink(r);
    if (r->axis == SP_COL_TIME) {
        if (r->format->whole_seconds) spread_seconds(r->out->column[SP_COL_TIME], r->out->rows);
        start_from_zero(r->out->column[SP_COL_TIME], r->out->rows);
        if (!r->out->column[SP_COL_SPEED]) derive_speed(r);
    } else {
        derive_time(r);
    }
    if (!r->failed) check_times(r);
}
