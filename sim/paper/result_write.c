/* Pieces all writers share. SPDX-License-Identifier: GPL-3.0-or-later */
#include "result_write.h"

#include <math.h>
#include <stdarg.h>
#include <stdlib.h>
#include <string.h>

#include "base/text.h"

/* ---- numbers --------------------------------------------------------------------------------------- */

/* A locale may have another mark than the point; files have none. */
static void set_point(char *text)
{
    for (; *text; ++text)
        if (!strchr("0123456789+-e", *text)) *text = '.';
}

void sp_number_digits(char text[SP_NUMBER_ROOM], double x, int digits)
{
    snprintf(text, SP_NUMBER_ROOM, "%.*g", digits, x == 0.0 ? 0.0 : x);
    set_point(text);
}

void sp_number_shortest(char text[SP_NUMBER_ROOM], double x)
{
    for (int digits = 15; digits <= 17; ++digits) {
        snprintf(text, SP_NUMBER_ROOM, "%.*g", digits, x == 0.0 ? 0.0 : x);
        if (strtod(text, NULL) == x) break;
    }
    set_point(text);
}

/* ---- JSON ------------------------------------------------------------------------------------------ */

static void put_quoted(FILE *to, const char *text)
{
    const char *end = text + strlen(text);
    fputc('"', to);
    while (text < end) {
        long code = 0;
        size_t n = sp_text_code(text, end, &code);
        if (n == 0) {
            fputc('?', to);
            n = 1;
        } else if (code <= 0xffff && sp_text_unprintable(code)) {
            fprintf(to, "\\u%04lx", (unsigned long)code);
        } else {
            if (*text == '"' || *text == '\\') fputc('\\', to);
            fwrite(text, 1, n, to);
        }
        text += n;
    }
    fputc('"', to);
}

static void begin(struct sp_writer *w, const char *name)
{
    if (w->inside) fputc(',', w->to);
    if (w->depth) fprintf(w->to, "\n%*s", 2 * w->depth, "");
    if (name) fprintf(w->to, "\"%s\": ", name);
    w->inside = true;
}

void sp_write_open(struct sp_writer *w, const char *name, char bracket)
{
    begin(w, name);
    fputc(bracket, w->to);
    ++w->depth;
    w->inside = false;
}

void sp_write_close(struct sp_writer *w, char bracket)
{
    --w->depth;
    if (w->inside) fprintf(w->to, "\n%*s", 2 * w->depth, "");
    fputc(bracket, w->to);
    w->inside = true;
    if (!w->depth) fputc('\n', w->to);
}

void sp_write_number(struct sp_writer *w, const char *name, double x)
{
    char text[SP_NUMBER_ROOM];
    begin(w, name);
    sp_number_shortest(text, isfinite(x) ? x : 0.0);
    fputs(isfinite(x) ? text : "null", w->to);
}

void sp_write_text(struct sp_writer *w, const char *name, const char *text)
{
    begin(w, name);
    if (text)
        put_quoted(w->to, text);
    else
        fputs("null", w->to);
}

void sp_write_bool(struct sp_writer *w, const char *name, bool x)
{
    begin(w, name);
    fputs(x ? "true" : "false", w->to);
}

/* ---- text ------------------------------------------------------------------------------------------ */

/* Characters in n bytes: those that begin one. */
static size_t columns_of(const char *text, size_t n)
{
    size_t columns = 0;
    for (size_t i = 0; i < n; ++i)
        columns += ((unsigned char)text[i] & 0xc0U) != 0x80U;
    return columns;
}

size_t sp_columns(const char *text)
{
    return columns_of(text, strlen(text));
}

static void wrap(FILE *to, const char *text, size_t at, size_t indent)
{
    bool first = true;
    while (*text) {
        size_t n = strcspn(text, " "), columns = columns_of(text, n);
        if (!first && at + 1 + columns > SP_LINE_WIDTH) {
            fprintf(to, "\n%*s", (int)indent, "");
            at = indent;
            first = true;
        }
        if (!first) fputc(' ', to);
        fwrite(text, 1, n, to);
        at += columns + !first;
        first = false;
        text += n;
        text += strspn(text, " ");
    }
    fputc('\n', to);
}

void sp_say(FILE *to, int indent, const char *label, const char *format, ...)
{
    char text[2000];
    size_t length = strlen(label), left = (size_t)indent;
    va_list args;
    va_start(args, format);
    vsnprintf(text, sizeof text, format, args);
    va_end(args);
    fprintf(to, "%-*s", indent, label);
    wrap(to, text, length > left ? length : left, left);
}

void sp_plain(char *out, size_t size, const char *text, size_t columns)
{
    const char *end = text + strlen(text);
    size_t used = 0, count = 0, mark = 0; /* mark: where ".." goes if the text turns out too long */
    while (text < end) {
        long code = 0;
        size_t n = sp_text_code(text, end, &code);
        bool odd = n == 0 || sp_text_unprintable(code);
        size_t room = odd ? 1 : n;
        if (count == columns || used + room + 3 > size) {
            used = mark;
            out[used++] = '.';
            out[used++] = '.';
            break;
        }
        if (count + 2 <= columns) mark = used;
        memcpy(out + used, odd ? "?" : text, room);
        used += room;
        ++count;
        text += n ? n : 1;
    }
    out[used] = '\0';
}
