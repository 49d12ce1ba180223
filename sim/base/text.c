/* UTF-8, character by character.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/text.h"

size_t sp_text_code(const char *p, const char *end, long *code)
{
    static const long least[5] = {0, 0, 0x80, 0x800, 0x10000};
    unsigned char first = (unsigned char)*p;
    size_t n = first < 0x80 ? 1 : first >= 0xf0 ? 4 : first >= 0xe0 ? 3 : 2;
    if (n == 1) {
        *code = first;
        return 1;
    }
    if (first < 0xc2 || first > 0xf4 || (size_t)(end - p) < n) return 0;
    *code = first & (0x7f >> n);
    for (size_t i = 1; i < n; i++) {
        if (((unsigned char)p[i] & 0xc0) != 0x80) return 0;
        *code = *code << 6 | ((unsigned char)p[i] & 0x3f);
    }
    if (*code < least[n] || *code > 0x10ffff || (*code >= 0xd800 && *code <= 0xdfff)) return 0;
    return n;
}

bool sp_text_unprintable(long code)
{
    return code < 0x20 || (code >= 0x7f && code < 0xa0) || (code >= 0x2028 && code <= 0x202e) ||
           (code >= 0x2066 && code <= 0x2069) || code == 0x200e || code == 0x200f;
}

size_t sp_text_cut(const char *text, size_t length, size_t most)
{
    if (length <= most) return length;
    while (most > 0 && ((unsigned char)text[most] & 0xc0) == 0x80) most--;
    return most;
}
