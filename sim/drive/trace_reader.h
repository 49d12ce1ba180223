/* trace_reader.h - the state of reading one trace file, and its stages. Internal.
 *
 * trace.c feeds bytes to libcsv, trace_cells.c takes the cells, trace_rows.c judges and keeps whole
 * rows, trace_finish.c makes the kept rows into a trace.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_DRIVE_TRACE_READER_H
#define SP_DRIVE_TRACE_READER_H

#include "drive/trace_layout.h"

enum {
    SP_TRACE_CELL_SIZE = 65536, /* bytes; a longer cell is a quote that is never closed */
    SP_TRACE_CELLS = 4096,      /* cells in the heading line */
    SP_TRACE_ROWS = 100000000   /* 23 days at 50 Hz */
};

enum sp_trace_stage { SP_STAGE_HEADINGS, SP_STAGE_UNITS, SP_STAGE_ROWS, SP_STAGE_STOPPED };

/* From kept row `row` on, the line in the file is row + `offset`. */
struct sp_line_step {
    size_t row;
    long offset;
};

struct sp_trace_reader {
    struct sp_units *units;
    const struct sp_trace_format *format;
    struct sp_complaints *complaints;
    struct sp_place at; /* file and named_by; line and path are set per complaint */
    bool failed;        /* something was complained of */
    char decimal;       /* ',' or '.' */
    double longest_gap;

    enum sp_trace_stage stage;
    long line, row_line; /* the line being read; the one the row began on */
    bool after_return;   /* a "\r" was the last thing seen, a "\n" belongs to it */
    bool headings_seen;
    long heading_line;
    struct sp_trace_texts headings, unit_cells;
    struct sp_trace_layout layout;
    enum sp_column axis; /* time, or distance when there is no time */

    /* The row being read. Bits by column. */
    size_t cell;
    unsigned got, bad_text, bad_range;
    bool any, stray; /* any cell not blank; a cell that belongs nowhere */
    bool mark_changed;
    double value[SP_COLUMNS];
    double day; /* s added to the clock for the midnights passed */

    /* The rows kept. */
    struct sp_trace *out;
    size_t room;
    unsigned seen; /* columns that have had a value */
    bool leapt;    /* the last kept row came after a gap */
    struct sp_line_step *step;
    size_t steps, step_room;
    char *mark_now; /* the bytes in the mark column of the row before; NULL: blank */
    size_t mark_size;
    char *mark_next; /* a mark that waits for a row to be kept */
    size_t mark_room;
};

/* Complains at the row being read; `path` is a heading or NULL. */
void sp_trace_fault(struct sp_trace_reader *r, const char *path, const char *found, const char *expected,
                    const char *hint);
void sp_trace_no_memory(struct sp_trace_reader *r); /* complains and stops */

/* libcsv callbacks; `data` is the reader. */
void sp_trace_on_cell(void *text, size_t size, void *data);
void sp_trace_on_row(int end, void *data);

/* A cell of the mark column. */
void sp_trace_take_mark(struct sp_trace_reader *r, const char *s, size_t n);

/* The row is complete: judge it, keep it or not. */
void sp_trace_end_row(struct sp_trace_reader *r);

/* All rows are read. */
void sp_trace_finish(struct sp_trace_reader *r);

/* Line in the file of a kept row. */
long sp_trace_line_of(const struct sp_trace_reader *r, size_t row);

#endif
