/* trace_cells.c - cells of a trace file as libcsv hands them over: headings, units, numbers, clock.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/trace_reader.h"

#include "base/number.h"
#include "drive/trace_columns.h"
#include "drive/trace_text.h"

#include <stdio.h>
#include <string.h>

/* An unsigned number of digits only, at most `most` of them; NULL if there is none. */
static const char *digits(const char *p, const char *end, int most, double *out)
{
    const char *from = p;
    *out = 0;
    for (; p < end && *p >= '0' && *p <= '9'; p++) {
        if (p - from >= most) return NULL;
        *out = *out * 10 + (*p - '0');
    }
    return p > from ? p : NULL;
}

/* hh:mm:ss with an optional fraction. Hours may pass 24 in a clock that counts on. */
static bool read_clock(const struct sp_trace_reader *r, char *text, char *end, double *seconds)
{
    double hours, minutes, rest;
    const char *p = text;
    char *comma = r->decimal == ',' ? memchr(text, ',', (size_t)(end - text)) : NULL;
    if (comma) *comma = '.';
    p = digits(p, end, 5, &hours);
    if (!p || p == end || *p++ != ':') return false;
    p = digits(p, end, 2, &minutes);
    if (!p || p == end || *p++ != ':' || p == end || *p < '0' || *p > '9') return false;
    p = sp_number_parse(p, end, &rest);
    if (p != end || minutes >= 60 || rest >= 60) return false;
    *seconds = hours * 3600 + minutes * 60 + rest;
    return true;
}

/* Loggers also write ".5", "-.5" and "5."; the house's numbers want digits on both sides. */
static bool read_bare_point(const char *p, const char *end, double *out)
{
    char text[64];
    size_t n = 0, length = (size_t)(end - p);
    const char *point = memchr(p, '.', length);
    if (!point || length + 2 > sizeof text) return false;
    for (; p < end; p++) {
        bool before = p > end - length && p[-1] >= '0' && p[-1] <= '9';
        bool after = p + 1 < end && p[1] >= '0' && p[1] <= '9';
        if (p != point) {
            text[n++] = *p;
        } else if (!before && !after) {
            return false;
        } else {
            if (!before) text[n++] = '0';
            if (after) text[n++] = '.';
        }
    }
    return sp_number_parse(text, text + n, out) == text + n;
}

/* The cell with its decimal comma made a point; what else stands there is left to the parser. */
static bool read_number(const struct sp_trace_reader *r, char *p, size_t n, double *out)
{
    char *end = p + n, *comma = NULL;
    if (r->decimal == ',') {
        if (memchr(p, '.', n)) return false; /* a point would divide thousands */
        comma = memchr(p, ',', n);
        if (comma) *comma = '.';
    }
    if (sp_number_parse(p, end, out) == end || read_bare_point(p, end, out)) return true;
    if (comma) *comma = ',';
    return false;
}

static void complain_text(struct sp_trace_reader *r, enum sp_column c, const char *s)
{
    char found[96], expected[96] = "a number";
    const char *unit = r->layout.unit[c];
    snprintf(found, sizeof found, "\"%.60s\"", s);
    if (c == SP_COL_TIME && r->format->clock)
        snprintf(expected, sizeof expected, "a clock time hh:mm:ss");
    else if (unit && *unit)
        snprintf(expected, sizeof expected, "a number (in %.60s)", unit);
    sp_trace_fault(r, r->layout.label[c], found, expected, NULL);
}

static void complain_range(struct sp_trace_reader *r, const struct sp_cell_rule *rule, const char *s)
{
    enum sp_column c = (enum sp_column)rule->column;
    char found[160], expected[160];
    const char *unit = r->layout.unit[c] ? r->layout.unit[c] : "";
    const char *between = *unit ? " " : "";
    snprintf(found, sizeof found, "%.60s%s%.60s", s, between, unit);
    snprintf(expected, sizeof expected, "%.6g to %.6g%s%.60s", (rule->low - rule->offset) / rule->scale,
             (rule->high - rule->offset) / rule->scale, between, unit);
    bool share = c == SP_COL_THROTTLE || c == SP_COL_GRADE;
    sp_trace_fault(r, r->layout.label[c], found, expected, share && !*unit ? "is its unit \"%\"?" : NULL);
}

static void take_number(struct sp_trace_reader *r, const struct sp_cell_rule *rule, char *s, size_t n)
{
    enum sp_column c = (enum sp_column)rule->column;
    double x;
    bool clock = c == SP_COL_TIME && r->format->clock, read;
    while (n > 0 && s[n - 1] == ' ')
        s[--n] = '\0'; /* blanks within quotes; others are gone */
    while (n > 0 && *s == ' ')
        s++, n--;
    read = clock ? read_clock(r, s, s + n, &x) : read_number(r, s, n, &x);
    if (!read) {
        r->bad_text |= 1u << c;
        r->line += sp_trace_text_lines(s, n);
        if (!r->format->repair) complain_text(r, c, s);
        return;
    }
    double si = rule->scale * x + rule->offset;
    if (si >= rule->low && si <= rule->high) {
        r->value[c] = si;
        r->got |= 1u << c;
    } else {
        r->bad_range |= 1u << c;
        if (!r->format->repair) complain_range(r, rule, s);
    }
}

static void take_cell(struct sp_trace_reader *r, char *s, size_t n)
{
    size_t i = r->cell++;
    if (n == 0) return;
    r->any = true;
    if (i < r->layout.rules && r->layout.rule[i].column >= 0 && r->layout.rule[i].column != SP_COL_MARK) {
        take_number(r, &r->layout.rule[i], s, n);
        return;
    }
    r->line += sp_trace_text_lines(s, n);
    if (i < r->layout.rules && r->layout.rule[i].column == SP_COL_MARK) {
        sp_trace_take_mark(r, s, n);
    } else if (i >= r->layout.rules || r->layout.rule[i].column == SP_CELL_NAMELESS) {
        r->stray = true;
        if (r->format->repair) return;
        char found[96];
        snprintf(found, sizeof found, "\"%.60s\" in cell %zu", s, i + 1);
        sp_trace_fault(r, NULL, found, "no more cells than headings, but blank ones", NULL);
    }
}

/* Cells of the heading line and the row of units. */
static void take_text(struct sp_trace_reader *r, const char *s, size_t n)
{
    struct sp_trace_texts *to = r->stage == SP_STAGE_UNITS ? &r->unit_cells : &r->headings;
    if (r->stage == SP_STAGE_HEADINGS) r->heading_line = r->row_line;
    r->cell++;
    r->line += sp_trace_text_lines(s, n);
    if (to->count >= SP_TRACE_CELLS) {
        sp_trace_fault(r, NULL, "more than 4096 cells in a line", "the heading line of a table", NULL);
        r->stage = SP_STAGE_STOPPED;
    } else if (!sp_trace_texts_add(to, s, n)) {
        sp_trace_no_memory(r);
    }
}

void sp_trace_on_cell(void *text, size_t size, void *data)
{
    struct sp_trace_reader *r = data;
    r->after_return = false;
    if (r->cell == 0) r->row_line = r->line;
    if (r->stage == SP_STAGE_ROWS)
        take_cell(r, text, size);
    else if (r->stage != SP_STAGE_STOPPED)
        take_text(r, text, size);
}

static void lay_out(struct sp_trace_reader *r)
{
    struct sp_place at = r->at;
    at.line = r->heading_line;
    r->headings_seen = true;
    r->stage = SP_STAGE_STOPPED;
    if (!sp_trace_layout_build(&r->layout, r->units, r->format, &r->headings, &r->unit_cells, &at,
                               r->complaints)) {
        r->failed = true;
        return;
    }
    r->axis = r->layout.present & 1u << SP_COL_TIME ? SP_COL_TIME : SP_COL_DISTANCE;
    r->stage = SP_STAGE_ROWS;
}

void sp_trace_on_row(int end, void *data)
{
    struct sp_trace_reader *r = data;
    if (r->cell > 0) {
        if (r->stage == SP_STAGE_ROWS)
            sp_trace_end_row(r);
        else if (r->stage == SP_STAGE_HEADINGS && r->format->units_row)
            r->stage = SP_STAGE_UNITS;
        else if (r->stage != SP_STAGE_STOPPED)
            lay_out(r);
        r->cell = 0;
        r->got = r->bad_text = r->bad_range = 0;
        r->any = r->stray = r->mark_changed = false;
    }
    if (end == '\r' || (end == '\n' && !r->after_return)) r->line++;
    r->after_return = end == '\r';
}
