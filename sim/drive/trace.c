/* trace.c - reads a trace file: bytes to libcsv, row by row into columns of SI.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "swirlpot/trace.h"

#include "base/file.h"
#include "drive/trace_reader.h"
#include "drive/trace_text.h"

#include <csv.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

enum { CHUNK = 65536 };

static const double usual_gap = 30; /* s */

/* A reader with its parser, and how far the skipped lines have come. */
struct feed {
    struct sp_trace_reader reader;
    struct csv_parser csv;
    bool begun, skip_return;
    int skip;
};

static void fault_in_format(struct sp_trace_reader *r, const char *path, const char *found,
                            const char *expected)
{
    r->row_line = 0;
    sp_trace_fault(r, path, found, expected, NULL);
    r->stage = SP_STAGE_STOPPED;
}

static void check_format(struct sp_trace_reader *r)
{
    const struct sp_trace_format *f = r->format;
    char delimiter = f->delimiter ? f->delimiter : ',';
    if (f->decimal && f->decimal != ',' && f->decimal != '.')
        fault_in_format(r, "decimal", "another character", "a point or a comma");
    if (delimiter == r->decimal)
        fault_in_format(r, "decimal", "the delimiter", "a delimiter that is not the decimal sign, such as ;");
    if (strchr("\"\r\n+-.eE0123456789", delimiter))
        fault_in_format(r, "delimiter", "a character that belongs to cells", "a comma, ; or a tab");
    if (f->skip_lines < 0 || f->skip_lines > 1000)
        fault_in_format(r, "skip_lines", "a number out of range", "0 to 1000");
    if (!(f->longest_gap >= 0) || isinf(f->longest_gap))
        fault_in_format(r, "longest_gap", "a number out of range", "a time above 0");
    if (!r->units) fault_in_format(r, NULL, "no table of units", "the unit library with its data");
}

static bool open_feed(struct feed *f, struct sp_units *u, const char *name, const char *named_by,
                      const struct sp_trace_format *format, struct sp_trace *out,
                      struct sp_complaints *complaints)
{
    struct sp_trace_reader *r = &f->reader;
    *f = (struct feed){0};
    *out = (struct sp_trace){0};
    r->units = u;
    r->format = format;
    r->complaints = complaints;
    r->at = (struct sp_place){.file = name, .named_by = named_by};
    r->decimal = format->decimal ? format->decimal : '.';
    r->longest_gap = format->longest_gap > 0 ? format->longest_gap : usual_gap;
    r->line = 1;
    r->out = out;
    f->skip = format->skip_lines;
    if (csv_init(&f->csv, CSV_STRICT | CSV_STRICT_FINI | CSV_APPEND_NULL | CSV_REPALL_NL)) {
        sp_trace_no_memory(r);
        return false;
    }
    csv_set_delim(&f->csv, (unsigned char)(format->delimiter ? format->delimiter : ','));
    csv_set_blk_size(&f->csv, 4096);
    check_format(r);
    return !r->failed;
}

/* Skips the mark of UTF-8 at the very beginning; refuses the one of UTF-16. */
static size_t begin(struct feed *f, const char *text, size_t size)
{
    f->begun = true;
    if (size >= 3 && memcmp(text, "\xEF\xBB\xBF", 3) == 0) return 3;
    if (size >= 2 && (memcmp(text, "\xFF\xFE", 2) == 0 || memcmp(text, "\xFE\xFF", 2) == 0))
        fault_in_format(&f->reader, NULL, "a text in UTF-16", "UTF-8 or ASCII");
    return 0;
}

/* Bytes that belong to the lines to be skipped. A "\n" after a skipped "\r" belongs to it. */
static size_t skip_lines(struct feed *f, const char *text, size_t size)
{
    size_t i = 0;
    while (i < size && (f->skip > 0 || f->skip_return)) {
        char c = text[i];
        if (f->skip_return && c == '\n') {
            f->skip_return = false;
            i++;
            continue;
        }
        f->skip_return = c == '\r' && f->skip > 0;
        if (f->skip == 0) break;
        if (c == '\n' || c == '\r') {
            f->skip--;
            f->reader.line++;
        }
        i++;
    }
    return i;
}

static void complain_syntax(struct feed *f)
{
    struct sp_trace_reader *r = &f->reader;
    if (csv_error(&f->csv) == CSV_ENOMEM) {
        sp_trace_no_memory(r);
        return;
    }
    r->row_line =
        r->line + (f->csv.entry_buf ? sp_trace_text_lines((char *)f->csv.entry_buf, f->csv.entry_pos) : 0);
    sp_trace_fault(r, NULL, "a quote within a cell, or text behind a closing quote",
                   "quotes round the whole cell, doubled within", NULL);
    r->stage = SP_STAGE_STOPPED;
}

/* One chunk; false when reading is over. */
static bool feed(struct feed *f, const char *text, size_t size)
{
    struct sp_trace_reader *r = &f->reader;
    size_t from = f->begun ? 0 : begin(f, text, size);
    from += skip_lines(f, text + from, size - from);
    if (r->stage != SP_STAGE_STOPPED &&
        csv_parse(&f->csv, text + from, size - from, sp_trace_on_cell, sp_trace_on_row, r) != size - from)
        complain_syntax(f);
    if (r->stage != SP_STAGE_STOPPED && f->csv.entry_pos > SP_TRACE_CELL_SIZE) {
        r->row_line = r->line;
        sp_trace_fault(r, NULL, "a cell longer than 64 KiB", "a closing quote or a delimiter", NULL);
        r->stage = SP_STAGE_STOPPED;
    }
    return r->stage != SP_STAGE_STOPPED;
}

static void end_of_file(struct feed *f)
{
    struct sp_trace_reader *r = &f->reader;
    if (r->stage == SP_STAGE_STOPPED) return;
    if (csv_fini(&f->csv, sp_trace_on_cell, sp_trace_on_row, r)) {
        r->row_line = r->line;
        sp_trace_fault(r, NULL, "a quote that is never closed", "a closing quote", NULL);
        return;
    }
    sp_trace_finish(r);
}

static enum sp_status close_feed(struct feed *f)
{
    struct sp_trace_reader *r = &f->reader;
    csv_free(&f->csv);
    sp_trace_texts_free(&r->headings);
    sp_trace_texts_free(&r->unit_cells);
    sp_trace_layout_free(&r->layout);
    free(r->step);
    free(r->mark_now);
    free(r->mark_next);
    if (r->failed) sp_trace_free(r->out);
    return r->failed ? SP_INPUT : SP_OK;
}

enum sp_status sp_trace_parse(struct sp_units *u, const char *name, const char *text, size_t size,
                              const char *named_by, const struct sp_trace_format *format,
                              struct sp_trace *out, struct sp_complaints *complaints)
{
    struct feed f;
    if (open_feed(&f, u, name, named_by, format, out, complaints)) {
        for (size_t at = 0; at < size; at += CHUNK)
            if (!feed(&f, text + at, size - at < CHUNK ? size - at : CHUNK)) break;
        end_of_file(&f);
    }
    return close_feed(&f);
}

enum sp_status sp_trace_read(struct sp_units *u, const char *file, const char *named_by,
                             const struct sp_trace_format *format, struct sp_trace *out,
                             struct sp_complaints *complaints)
{
    struct sp_place at = {.file = file, .named_by = named_by};
    struct feed f;
    struct sp_file_in in;
    char *chunk;
    bool more = true;
    *out = (struct sp_trace){0};
    if (!sp_file_open(&in, &at, complaints)) return SP_INPUT;
    chunk = malloc(CHUNK);
    if (open_feed(&f, u, file, named_by, format, out, complaints)) {
        if (!chunk) sp_trace_no_memory(&f.reader);
        while (chunk && more) {
            size_t n = sp_file_next(&in, chunk, CHUNK);
            more = n > 0 && feed(&f, chunk, n);
        }
        if (!sp_file_close(&in)) f.reader.failed = true, f.reader.stage = SP_STAGE_STOPPED;
        end_of_file(&f);
    } else {
        sp_file_close(&in);
    }
    free(chunk);
    return close_feed(&f);
}

void sp_trace_free(struct sp_trace *t)
{
    if (!t) return;
    for (int c = 0; c < SP_COLUMNS; c++)
        free(t->column[c]);
    for (size_t i = 0; i < t->marks; i++)
        free(t->mark[i].text);
    free(t->mark);
    *t = (struct sp_trace){0};
}
