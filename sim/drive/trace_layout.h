/* trace_layout.h - from the headings of a trace file to what each of its cells means. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_DRIVE_TRACE_LAYOUT_H
#define SP_DRIVE_TRACE_LAYOUT_H

#include "swirlpot/trace.h"

/* A growing list of texts: the cells of a heading line or of a row of units. */
struct sp_trace_texts {
    char **text;
    size_t count, room;
};

bool sp_trace_texts_add(struct sp_trace_texts *to, const char *s, size_t n);
void sp_trace_texts_free(struct sp_trace_texts *t);

enum { SP_CELL_IGNORED = -1, SP_CELL_NAMELESS = -2 }; /* nameless: the heading is blank */

/* What the cells of one column of the file mean: si = scale x + offset, low and high in SI. */
struct sp_cell_rule {
    int column; /* an enum sp_column, or one of the above */
    double scale, offset, low, high;
};

struct sp_trace_layout {
    struct sp_cell_rule *rule; /* one a heading */
    size_t rules;
    unsigned present;              /* bit c: column c is in the file */
    const char *label[SP_COLUMNS]; /* the heading in the file, for complaints; owned by the texts */
    char *unit[SP_COLUMNS];        /* the unit, for complaints; NULL if none */
};

/* Finds the columns among `headings` by the mapping of `format` and by their own names, and their units
 * by mapping, row of units (may be empty) or brackets. All faults are complained of at `at` (whose line
 * is that of the headings); returns false if there is any. */
bool sp_trace_layout_build(struct sp_trace_layout *l, struct sp_units *u,
                           const struct sp_trace_format *format, const struct sp_trace_texts *headings,
                           const struct sp_trace_texts *units, const struct sp_place *at,
                           struct sp_complaints *complaints);
void sp_trace_layout_free(struct sp_trace_layout *l);

#endif
