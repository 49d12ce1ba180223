/* trace_text.c - encodings, blanks, line ends and nearness of texts in a trace file.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/trace_text.h"

#include "base/text.h"

#include <stdlib.h>
#include <string.h>

bool sp_trace_text_is_utf8(const char *s, size_t n)
{
    long code;
    for (size_t i = 0, length; i < n; i += length)
        if ((length = sp_text_code(s + i, s + n, &code)) == 0) return false;
    return true;
}

static char *from_latin1(const char *s, size_t n)
{
    char *out = malloc(2 * n + 1), *to = out;
    if (!out) return NULL;
    for (size_t i = 0; i < n; i++) {
        unsigned char c = (unsigned char)s[i];
        if (c < 0x80) {
            *to++ = (char)(c ? c : '?');
        } else {
            *to++ = (char)(0xC0 | c >> 6);
            *to++ = (char)(0x80 | (c & 0x3F));
        }
    }
    *to = '\0';
    return out;
}

/* Decodes well-formed UTF-8 once into bytes, in place, if those bytes are again UTF-8 with more than
 * plain ASCII in it; that is the trace a file leaves that was encoded twice. */
static void undo_double(char *s)
{
    size_t n = strlen(s), m = 0;
    bool plain = true;
    char *once = malloc(n + 1);
    if (!once) return; /* the text stays as it is: a heading not found says so */
    for (size_t i = 0, length; i < n; i += length) {
        long point = 0;
        length = sp_text_code(s + i, s + n, &point);
        if (length == 0 || point > 0xFF) {
            free(once);
            return;
        }
        plain = plain && point < 0x80;
        once[m++] = (char)point;
    }
    if (!plain && sp_trace_text_is_utf8(once, m)) {
        memcpy(s, once, m);
        s[m] = '\0';
    }
    free(once);
}

static bool blank(char c)
{
    return (c > 0 && c <= ' ') || c == 0x7F;
}

char *sp_trace_text_clean(const char *s, size_t n)
{
    while (n > 0 && blank(s[0]))
        s++, n--;
    while (n > 0 && blank(s[n - 1]))
        n--;
    char *out;
    if (!sp_trace_text_is_utf8(s, n)) {
        out = from_latin1(s, n);
    } else if ((out = malloc(n + 1))) {
        memcpy(out, s, n);
        out[n] = '\0';
        for (size_t i = 0; i < n; i++)
            if (out[i] == '\0') out[i] = '?';
        undo_double(out);
    }
    for (char *p = out; p && *p; p++)
        if (blank(*p)) *p = ' ';
    return out;
}

long sp_trace_text_lines(const char *s, size_t n)
{
    long lines = 0;
    for (size_t i = 0; i < n; i++)
        if (s[i] == '\n' || (s[i] == '\r' && !(i + 1 < n && s[i + 1] == '\n'))) lines++;
    return lines;
}

size_t sp_trace_text_distance(const char *a, const char *b, size_t most)
{
    enum { LONGEST = 64 };
    size_t n = strlen(a), m = strlen(b), row[LONGEST + 1];
    if (n > LONGEST || m > LONGEST) return most;
    for (size_t j = 0; j <= m; j++)
        row[j] = j;
    for (size_t i = 1; i <= n; i++) {
        size_t diagonal = row[0];
        row[0] = i;
        for (size_t j = 1; j <= m; j++) {
            size_t replace = diagonal + (a[i - 1] != b[j - 1]);
            diagonal = row[j];
            size_t shift = 1 + (row[j] < row[j - 1] ? row[j] : row[j - 1]);
            row[j] = replace < shift ? replace : shift;
        }
    }
    return row[m] < most ? row[m] : most;
}
