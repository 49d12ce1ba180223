/* Fuzzing of the trace reader. Two bytes choose the layout ("00": plain), the rest is the file.
 *
 * Nothing may crash, leak or hang; what is accepted must be finite and in order. For plain files a second,
 * much simpler reader below must come to the same rows and, by strtod, to the same numbers.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "swirlpot/trace.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

#define INSIST(x) ((x) ? (void)0 : (fprintf(stderr, "not so: %s (line %d)\n", #x, __LINE__), abort()))

/* ---- the second reader ------------------------------------------------------------------------ */

enum { MOST_COLUMNS = 64 };

/* A cell at *at: its text without quotes and outer blanks goes to `out`; *end says what ended it: ',' or a
 * line end or 0 for the end of the file. */
static void next_cell(const char **at, const char *stop, char *out, char *end)
{
    const char *p = *at;
    size_t n = 0;
    bool quoted = false;
    while (p < stop && (*p == ' ' || *p == '\t'))
        p++;
    if (p < stop && *p == '"') {
        quoted = true;
        for (p++; p < stop && !(*p == '"' && !(p + 1 < stop && p[1] == '"')); p++) {
            if (*p == '"') p++;
            out[n++] = *p;
        }
        if (p < stop) p++;
    }
    for (; p < stop && *p != ',' && *p != '\n' && *p != '\r'; p++)
        if (!quoted) out[n++] = *p;
    while (!quoted && n > 0 && (out[n - 1] == ' ' || out[n - 1] == '\t'))
        n--;
    out[n] = '\0';
    *end = '\0';
    if (p < stop) *end = *p++;
    *at = p;
}

/* The column a heading names, its scale and offset; -1: none. */
static int column_of(struct sp_units *u, const char *heading, double *scale, double *offset)
{
    char unit[256] = "", why[256], text[256];
    const char *first = heading + strspn(heading, " \t\r\n\f\v");
    for (int c = 0; c < SP_COLUMNS; c++) {
        size_t n = strlen(sp_column_name((enum sp_column)c));
        if (strncmp(first, sp_column_name((enum sp_column)c), n) != 0) continue;
        *scale = 1;
        *offset = 0;
        if (c == SP_COL_MARK) return c;
        snprintf(text, sizeof text, "%s", first + n);
        for (size_t k = strlen(text); k > 0 && (unsigned char)text[k - 1] <= ' ';)
            text[--k] = '\0';
        const char *open = strpbrk(text, "[(");
        if (open && strlen(open) > 2) snprintf(unit, sizeof unit, "%.*s", (int)strlen(open) - 2, open + 1);
        const char *from = unit + strspn(unit, " ");
        size_t k = strlen(from);
        while (k > 0 && from[k - 1] == ' ')
            k--;
        unit[(from - unit) + (ptrdiff_t)k] = '\0';
        if (*from && strcmp(from, "1") != 0 &&
            !sp_unit_scale(u, sp_column_kind((enum sp_column)c), from, scale, offset, why, sizeof why))
            return -1;
        return c;
    }
    return -1;
}

struct second {
    int column[MOST_COLUMNS];
    double scale[MOST_COLUMNS], offset[MOST_COLUMNS], start;
    size_t columns, rows;
};

static double number(const char *cell)
{
    char *end;
    INSIST(strspn(cell, "0123456789+-.eE ") == strlen(cell));
    double x = strtod(cell, &end);
    INSIST(end != cell && isfinite(x));
    INSIST(strspn(end, " ") == strlen(end));
    return x;
}

static bool same(double a, double b)
{
    return fabs(a - b) <= 4e-16 * (fabs(a) + fabs(b));
}

static void compare_cell(struct second *s, const struct sp_trace *t, size_t i, const char *cell)
{
    if (i >= s->columns || s->column[i] < 0 || s->column[i] == SP_COL_MARK) return;
    double x = s->scale[i] * number(cell) + s->offset[i];
    INSIST(s->rows < t->rows);
    if (s->column[i] == SP_COL_TIME) {
        if (s->rows == 0) s->start = x;
        x -= s->start;
    }
    INSIST(same(t->column[s->column[i]][s->rows], x));
}

static void compare(struct sp_units *u, const struct sp_trace *t, const char *text, size_t size)
{
    struct second s = {0};
    const char *at = text, *stop = text + size;
    char *cell = malloc(size + 1), end = '\n';
    bool headings = true;
    if (!cell) return;
    if (size >= 3 && memcmp(text, "\xEF\xBB\xBF", 3) == 0) at += 3;
    while (at < stop) {
        bool any = false;
        const char *line = at;
        for (int pass = 0; pass < 2; pass++) { /* first whether the row has anything, then what */
            size_t i = 0;
            at = line;
            do {
                next_cell(&at, stop, cell, &end);
                any = any || *cell;
                if (pass == 1 && any && headings) {
                    if (i >= MOST_COLUMNS) {
                        free(cell);
                        return;
                    }
                    s.column[i] = column_of(u, cell, &s.scale[i], &s.offset[i]);
                    s.columns = i + 1;
                } else if (pass == 1 && any) {
                    compare_cell(&s, t, i, cell);
                }
                i++;
            } while (end == ',');
        }
        if (any && !headings) s.rows++;
        headings = headings && !any;
    }
    INSIST(s.rows == t->rows);
    free(cell);
}

/* ---- what holds of every accepted trace --------------------------------------------------------- */

static void check_trace(const struct sp_trace *t)
{
    const double *time = t->column[SP_COL_TIME], *speed = t->column[SP_COL_SPEED];
    INSIST(t->rows >= 2 && time && speed && time[0] == 0 && time[t->rows - 1] > 0);
    for (int c = 0; c < SP_COLUMNS; c++)
        for (size_t i = 0; t->column[c] && i < t->rows; i++)
            INSIST(isfinite(t->column[c][i]));
    for (size_t i = 1; i < t->rows; i++)
        INSIST(time[i] >= time[i - 1] && (i < 2 || time[i] > time[i - 2]));
    for (size_t i = 0; i < t->rows; i++)
        INSIST(speed[i] >= -5 && speed[i] <= 150);
    for (size_t i = 0; i < t->marks; i++) {
        INSIST(t->mark[i].row < t->rows && t->mark[i].text[0]);
        INSIST(i == 0 || t->mark[i].row > t->mark[i - 1].row);
    }
    INSIST(!t->column[SP_COL_MARK]);
}

/* The two bytes as a layout; bits against '0', so that seeds can be typed. */
static struct sp_trace_format layout(uint8_t a, uint8_t b)
{
    struct sp_trace_format f = {0};
    a ^= '0';
    b ^= '0';
    if (a & 1) f.blank = SP_BLANK_HOLD;
    f.drop_doubles = a & 2;
    f.repair = a & 4;
    f.clock = a & 8;
    f.whole_seconds = a & 16;
    f.units_row = a & 32;
    if (a & 64) {
        f.column[SP_COL_TIME].heading = "Time";
        f.column[SP_COL_TIME].unit = "s";
        f.column[SP_COL_SPEED].heading = "v [km/h]";
        f.column[SP_COL_COOLANT].heading = "T_W\xC3\xA4sser";
        f.column[SP_COL_COOLANT].unit = "degC";
    }
    if (a & 128) f.delimiter = ';', f.decimal = ',';
    f.skip_lines = b & 3;
    if (b & 4) f.longest_gap = 1e9;
    if (b & 8) f.delimiter = '\t';
    return f;
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    static struct sp_units *units;
    struct sp_complaints complaints = {0};
    struct sp_trace t;
    if (size < 2) return 0;
    if (!units) units = sp_units_open();
    struct sp_trace_format f = layout(data[0], data[1]);
    const char *text = (const char *)data + 2;
    enum sp_status status = sp_trace_parse(units, "f.csv", text, size - 2, NULL, &f, &t, &complaints);
    INSIST(status == SP_OK || status == SP_INPUT);
    INSIST((status == SP_OK) == (complaints.count == 0));
    if (status == SP_OK) {
        check_trace(&t);
        if (data[0] == '0' && (data[1] == '0' || data[1] == '4')) compare(units, &t, text, size - 2);
    } else {
        INSIST(t.rows == 0 && !t.column[SP_COL_TIME] && !t.mark);
    }
    sp_trace_free(&t);
    sp_complaints_free(&complaints);
    return 0;
}
