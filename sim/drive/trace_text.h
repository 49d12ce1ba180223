/* trace_text.h - texts of a trace file as logger programs leave them. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_DRIVE_TRACE_TEXT_H
#define SP_DRIVE_TRACE_TEXT_H

#include <stdbool.h>
#include <stddef.h>

/* True when the bytes are well-formed UTF-8 (no overlong forms, surrogates or values past U+10FFFF). */
bool sp_trace_text_is_utf8(const char *s, size_t n);

/* A copy fit to be compared and printed: blanks at both ends trimmed, control characters made blanks,
 * NUL made '?', doubly encoded UTF-8 decoded once, what is not UTF-8 read as Latin-1. NULL: no memory. */
char *sp_trace_text_clean(const char *s, size_t n);

/* Lines ended by \n, \r\n or \r within the bytes. */
long sp_trace_text_lines(const char *s, size_t n);

/* Edit distance (insert, delete, replace one byte each), stopped at `most`. */
size_t sp_trace_text_distance(const char *a, const char *b, size_t most);

#endif
