/* UTF-8, character by character. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_BASE_TEXT_H
#define SP_BASE_TEXT_H

#include <stdbool.h>
#include <stddef.h>

/* Length in bytes (1..4) of the character at p < end and its code in *code; 0 when the bytes there are
 * not valid UTF-8 (overlong forms, surrogates and codes past U+10FFFF are not; RFC 3629). */
size_t sp_text_code(const char *p, const char *end, long *code);

/* True of control characters (C0, DEL, C1), line separators and marks that reorder a line. */
bool sp_text_unprintable(long code);

/* Longest prefix of `text` (of `length` bytes) of at most `most` bytes that ends between characters. */
size_t sp_text_cut(const char *text, size_t length, size_t most);

#endif
