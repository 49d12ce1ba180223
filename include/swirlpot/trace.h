/* swirlpot/trace.h - a trace: what was driven, as a table over time.
 *
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SWIRLPOT_TRACE_H
#define SWIRLPOT_TRACE_H

#include "swirlpot/base.h"

#ifdef __cplusplus
extern "C" {
#endif

/* Columns a trace may have. One row each in the table of trace.c: name, kind, range, meaning. */
enum sp_column {
    SP_COL_TIME,         /* s */
    SP_COL_DISTANCE,     /* m */
    SP_COL_SPEED,        /* m/s */
    SP_COL_POWER,        /* W at the crank */
    SP_COL_TORQUE,       /* N m at the crank */
    SP_COL_ENGINE_SPEED, /* rev/s */
    SP_COL_FUEL_FLOW,    /* kg/s */
    SP_COL_AIR_FLOW,     /* kg/s */
    SP_COL_THROTTLE,     /* 0..1 */
    SP_COL_GEAR,         /* number, 0 neutral */
    SP_COL_GRADE,        /* rise over run, 0.05 is 5 % */
    SP_COL_ALTITUDE,     /* m */
    SP_COL_AMBIENT,      /* K */
    SP_COL_WAKE,         /* share of free-stream dynamic pressure left, 0..1.5 */
    SP_COL_COOLANT,      /* K, measured */
    SP_COL_HEAT,         /* W to the coolant, with heat law given */
    SP_COL_MARK,         /* text: corner names and the like */
    SP_COLUMNS
};

/* How a column is called: its key and heading ("engine_speed"), its kind. SP_COL_MARK has no kind. */
SP_API const char *sp_column_name(enum sp_column c);
SP_API enum sp_kind sp_column_kind(enum sp_column c);
SP_API const char *sp_column_meaning(enum sp_column c);

/* What is done about rows that are not as they should be. */
enum sp_blank { SP_BLANK_REFUSE, SP_BLANK_HOLD }; /* empty cell: complain, or hold the last value */

/* How a file is laid out and which of its headings mean what. Zero-initialised it means: comma,
 * decimal point, one heading line with "name [unit]", nothing repaired. */
struct sp_trace_format {
    char delimiter;     /* 0: comma */
    char decimal;       /* 0: point */
    int skip_lines;     /* lines before the heading, 0..1000 */
    bool units_row;     /* a row of units stands below the heading */
    bool clock;         /* the time column is hh:mm:ss[.mmm]; midnight is passed over */
    bool whole_seconds; /* the clock counts whole seconds only: rows that share a second are spread
                           evenly over it */
    enum sp_blank blank;
    bool drop_doubles;  /* a row equal in all mapped columns to the one before is dropped, counted */
    bool repair;        /* backward or repeated time, text or NaN in a number, impossible values:
                           drop the row (or hold the cell) and count it, instead of refusing */
    double longest_gap; /* s; a longer step in time is a complaint, or counted with repair; 0: 30 s */
    /* Mapping: heading text in the file (matched after trimming blanks, encoding as is or doubly
     * encoded UTF-8) and unit; NULL heading means: look for the column's own name. */
    struct { const char *heading, *unit; } column[SP_COLUMNS];
};

struct sp_mark { size_t row; char *text; };

/* What reading did to the rows. */
struct sp_trace_repairs {
    size_t rows_read, doubles_dropped, backward_dropped, cells_held, text_held, range_held, gaps;
};

/* A trace in SI. Either time or distance is present; absent columns are NULL. */
struct sp_trace {
    size_t rows;
    double *column[SP_COLUMNS]; /* each `rows` long; SP_COL_MARK always NULL */
    struct sp_mark *mark;       /* rows at which a new mark begins */
    size_t marks;
    struct sp_trace_repairs repairs;
};

/* Reads FILE into *out (freed with sp_trace_free, also after a failure). All faults go to
 * `complaints` with file, row line and column; returns SP_OK or SP_INPUT.
 * `named_by` is the case that names the file, or NULL. When the trace has distance and speed but no
 * time, time is computed by the trapezoid of 1/speed (a standstill without time is a complaint). */
SP_API enum sp_status sp_trace_read(struct sp_units *u, const char *file, const char *named_by,
                                    const struct sp_trace_format *format, struct sp_trace *out,
                                    struct sp_complaints *complaints);

/* The same from `size` bytes of text; `name` stands for the file in complaints. */
SP_API enum sp_status sp_trace_parse(struct sp_units *u, const char *name, const char *text,
                                     size_t size, const char *named_by,
                                     const struct sp_trace_format *format, struct sp_trace *out,
                                     struct sp_complaints *complaints);

SP_API void sp_trace_free(struct sp_trace *t);

#ifdef __cplusplus
}
#endif
#endif
