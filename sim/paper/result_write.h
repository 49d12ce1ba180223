/* Pieces all writers share: JSON, one member a line; wrapped text; numbers whatever the locale. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PAPER_RESULT_WRITE_H
#define SP_PAPER_RESULT_WRITE_H

#include "swirlpot/base.h"

/* ---- JSON ------------------------------------------------------------------------------------------ */

/* Zeroed but for `to`. Names are plain ASCII and need no escapes. */
struct sp_writer {
    FILE *to;
    int depth;
    bool inside; /* the object or array at hand has something in it already */
};

/* `name` NULL: a member of an array, or the document itself. */
void sp_write_open(struct sp_writer *w, const char *name, char bracket);     /* '{' or '[' */
void sp_write_close(struct sp_writer *w, char bracket);                      /* '}' or ']' */
void sp_write_number(struct sp_writer *w, const char *name, double x);       /* null when not finite */
void sp_write_text(struct sp_writer *w, const char *name, const char *text); /* NULL: null */
void sp_write_bool(struct sp_writer *w, const char *name, bool x);

/* One point of a duct as a member of an array: result_duct.c. */
struct sp_duct_point;
void sp_duct_point_write(struct sp_writer *w, const struct sp_duct_point *p);

/* What a duct has beyond a plain one: leaks, bay, flows core by core, fan by fan, exit by exit. */
void sp_duct_network_write(struct sp_writer *w, const struct sp_duct_point *p);
void sp_duct_network_say(const struct sp_duct_point *p, FILE *to);

/* ---- numbers --------------------------------------------------------------------------------------- */

enum { SP_NUMBER_ROOM = 40 };

/* The shortest digits that read back as the same double, or so many digits; always with a point, -0 as 0. */
void sp_number_shortest(char text[SP_NUMBER_ROOM], double x);
void sp_number_digits(char text[SP_NUMBER_ROOM], double x, int digits);

/* ---- text ------------------------------------------------------------------------------------------ */

enum { SP_LINE_WIDTH = 80, SP_LABEL_WIDTH = 17 };

size_t sp_columns(const char *text); /* characters of it */

/* A label, then text wrapped at blanks; it begins, and goes on in further lines, at column `indent`. */
void sp_say(FILE *to, int indent, const char *label, const char *format, ...)
    __attribute__((format(printf, 4, 5)));

/* Copies text with '?' for what a terminal should not get, cut to `columns` characters with "..". */
void sp_plain(char *out, size_t size, const char *text, size_t columns);

#endif
