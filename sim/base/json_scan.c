/* A strict scanner of JSON (RFC 8259): finds the first fault and says what stands there.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/json_scan.h"

#include "base/json.h"
#include "base/number.h"
#include "base/text.h"

#include <stdlib.h>
#include <string.h>

struct scan {
    const char *p, *start, *end;
    long line;
    int depth;
    struct sp_place place;
    struct sp_json_marks *marks;
    struct sp_complaints *complaints;
};

static bool fault_on(struct scan *s, long line, const char *found, const char *expected, const char *hint)
{
    struct sp_place place = s->place;
    place.line = line;
    sp_complain(s->complaints, &place, found, expected, hint);
    return false;
}

/* Where the word at p ends; at most 40 bytes of it. */
static const char *word_end(const char *p, const char *end)
{
    if (end - p > 40) end = p + 40;
    while (p < end && (unsigned char)*p > 0x20 && *p != 0x7f && !strchr(",:[]{}\"", *p)) p++;
    return p;
}

/* What stands at p, in words. */
static void describe(const struct scan *s, const char *p, char *out, size_t size)
{
    long code = 0;
    size_t length;
    if (p >= s->end) {
        snprintf(out, size, "%s", s->start == s->end ? "nothing: the text is empty" : "the end of the text");
        return;
    }
    length = sp_text_code(p, s->end, &code);
    if (length == 0)
        snprintf(out, size, "a byte 0x%02x that is no UTF-8", (unsigned)(unsigned char)*p);
    else if (code == 0)
        snprintf(out, size, "a NUL byte");
    else if (code == 0xfeff)
        snprintf(out, size, "a byte order mark");
    else if (code < 0x20 || code == 0x7f)
        snprintf(out, size, "a control character 0x%02lx", (unsigned long)code);
    else if (code == '"')
        snprintf(out, size, "a string");
    else {
        const char *e = word_end(p, s->end);
        snprintf(out, size, "%.*s", e > p ? (int)(e - p) : (int)length, p);
    }
}

static bool fault(struct scan *s, const char *expected, const char *hint)
{
    char found[100];
    describe(s, s->p, found, sizeof found);
    return fault_on(s, s->line, found, expected, hint);
}

static void skip_blanks(struct scan *s)
{
    for (; s->p < s->end; s->p++) {
        if (*s->p == '\n')
            s->line++;
        else if (*s->p != ' ' && *s->p != '\t' && *s->p != '\r')
            return;
    }
}

static bool at(const struct scan *s, char c)
{
    return s->p < s->end && *s->p == c;
}

/* ---- strings ------------------------------------------------------------------------------- */

/* The four digits of a \u at p, or -1. */
static long hex4(const char *p, const char *end)
{
    long code = 0;
    if (end - p < 4) return -1;
    for (int i = 0; i < 4; i++) {
        char c = p[i];
        long digit = c >= '0' && c <= '9'   ? c - '0'
                     : c >= 'a' && c <= 'f' ? c - 'a' + 10
                     : c >= 'A' && c <= 'F' ? c - 'A' + 10
                                            : -1;
        if (digit < 0) return -1;
        code = code * 16 + digit;
    }
    return code;
}

static bool escape_fault(struct scan *s, const char *expected)
{
    char found[32];
    size_t length = 1;
    while (s->p + length < s->end && length < 12 && strchr("\\uU0123456789abcdefABCDEF", s->p[length]) &&
           s->p[length])
        length++;
    if (length == 1 && s->p + 1 < s->end && s->p[1] > 0x20 && s->p[1] < 0x7f) length = 2;
    snprintf(found, sizeof found, "%.*s", (int)length, s->p);
    return fault_on(s, s->line, found, expected, NULL);
}

static bool scan_unicode(struct scan *s)
{
    long code = hex4(s->p + 2, s->end), low;
    if (code < 0) return escape_fault(s, "\\u and four hexadecimal digits");
    if (code == 0) return escape_fault(s, "no NUL in a string");
    if (code >= 0xdc00 && code <= 0xdfff) return escape_fault(s, "a high surrogate before the low one");
    if (code >= 0xd800 && code <= 0xdbff) {
        low = s->end - s->p >= 12 && s->p[6] == '\\' && s->p[7] == 'u' ? hex4(s->p + 8, s->end) : -1;
        if (low < 0xdc00 || low > 0xdfff) return escape_fault(s, "a low surrogate behind the high one");
        s->p += 6;
    }
    s->p += 6;
    return true;
}

static bool scan_escape(struct scan *s)
{
    if (s->end - s->p < 2) {
        s->p = s->end;
        return fault(s, "the string's closing quote", NULL);
    }
    if (s->p[1] == 'u') return scan_unicode(s);
    if (s->p[1] == '\0' || !strchr("\"\\/bfnrt", s->p[1]))
        return escape_fault(s, "one of \\\" \\\\ \\/ \\b \\f \\n \\r \\t \\uXXXX");
    s->p += 2;
    return true;
}

static bool scan_string(struct scan *s)
{
    s->p++;
    while (s->p < s->end && *s->p != '"') {
        long code;
        size_t length;
        if (*s->p == '\\') {
            if (!scan_escape(s)) return false;
            continue;
        }
        length = sp_text_code(s->p, s->end, &code);
        if (length == 0) return fault(s, "UTF-8 in a string", NULL);
        if (code < 0x20) return fault(s, "no raw control character in a string", "write \\n, \\t or \\uXXXX");
        s->p += length;
    }
    if (s->p == s->end) return fault(s, "the string's closing quote", NULL);
    s->p++;
    return true;
}

/* ---- numbers and words --------------------------------------------------------------------- */

static const char *digits(const char *p, const char *end)
{
    while (p < end && *p >= '0' && *p <= '9') p++;
    return p;
}

/* The end of a number of RFC 8259 at p, or NULL. */
static const char *number_end(const char *p, const char *end)
{
    const char *q;
    if (p < end && *p == '-') p++;
    q = digits(p, end);
    if (q == p || (*p == '0' && q - p > 1)) return NULL;
    if (q < end && *q == '.') {
        p = q + 1;
        q = digits(p, end);
        if (q == p) return NULL;
    }
    if (q < end && (*q == 'e' || *q == 'E')) {
        p = q + 1;
        if (p < end && (*p == '+' || *p == '-')) p++;
        q = digits(p, end);
        if (q == p) return NULL;
    }
    return q;
}

static bool scan_number(struct scan *s, struct sp_json_mark *mark)
{
    const char *e = number_end(s->p, s->end);
    double value;
    if (!e || (e < s->end && word_end(e, s->end) > e))
        return fault(s, "a number such as 1.5, -3 or 2e6", NULL);
    if (!sp_number_parse(s->p, e, &value)) return fault(s, "a number below 1.8e308", NULL);
    mark->at = (size_t)(s->p - s->start);
    mark->length = (size_t)(e - s->p);
    s->p = e;
    return true;
}

static bool scan_word(struct scan *s, const char *expected)
{
    static const char *const words[] = {"true", "false", "null"};
    static const struct { const char *word, *hint; } hints[] = {
        {"NaN", "JSON has no NaN"}, {"nan", "JSON has no NaN"}, {"Infinity", "JSON has no infinity"},
        {"inf", "JSON has no infinity"}, {"True", "write true"}, {"False", "write false"},
        {"None", "write null"}, {"//", "JSON has no comments"}, {"/*", "JSON has no comments"},
        {"#", "JSON has no comments"}, {"'", "strings stand in double quotes"}};
    const char *e = word_end(s->p, s->end), *hint = NULL;
    size_t length = (size_t)(e - s->p);
    for (size_t i = 0; i < 3; i++) {
        if (length != strlen(words[i]) || memcmp(s->p, words[i], length) != 0) continue;
        s->p = e;
        return true;
    }
    for (size_t i = 0; !hint && i < sizeof hints / sizeof *hints; i++) {
        size_t n = strlen(hints[i].word);
        if (length >= n && memcmp(s->p, hints[i].word, n) == 0) hint = hints[i].hint;
    }
    return fault(s, expected, hint);
}

/* ---- values -------------------------------------------------------------------------------- */

static bool add_mark(struct scan *s, long key_line, size_t *index)
{
    struct sp_json_marks *m = s->marks;
    if (m->count >= SP_JSON_VALUES) return fault_on(s, s->line, "more than 1000000 values", "fewer", NULL);
    if (m->count == m->room) {
        size_t room = m->room ? 2 * m->room : 64;
        struct sp_json_mark *list = realloc(m->list, room * sizeof *list);
        if (!list) return fault_on(s, s->line, "too little memory", "memory enough for the file", NULL);
        m->list = list;
        m->room = room;
    }
    *index = m->count++;
    m->list[*index] = (struct sp_json_mark){s->line, key_line, 0, 0};
    return true;
}

static bool scan_value(struct scan *s, long key_line, const char *expected);

static bool scan_key(struct scan *s, const char *expected, long *line)
{
    skip_blanks(s);
    *line = s->line;
    if (!at(s, '"')) return fault(s, expected, at(s, '\'') ? "keys stand in double quotes" : NULL);
    if (!scan_string(s)) return false;
    skip_blanks(s);
    if (!at(s, ':')) return fault(s, "a colon behind the key", NULL);
    s->p++;
    return true;
}

/* An array or an object, from behind its opening bracket. */
static bool scan_inside(struct scan *s, bool object)
{
    const char close = object ? '}' : ']';
    long key_line = 0;
    size_t count = 0;
    skip_blanks(s);
    while (!at(s, close) || count > 0) {
        const char *first = object ? "a key in double quotes, or }" : "a value, or ]";
        const char *next = object ? "a key in double quotes behind the comma" : "a value behind the comma";
        if (object && count == SP_JSON_KEYS)
            return fault_on(s, s->line, "more than 1000 keys in an object", "fewer", NULL);
        if (object && !scan_key(s, count ? next : first, &key_line)) return false;
        if (!scan_value(s, key_line, object ? "a value behind the colon" : count ? next : first))
            return false;
        count++;
        skip_blanks(s);
        if (at(s, close)) break;
        if (!at(s, ',')) return fault(s, object ? "a comma, or }" : "a comma, or ]", NULL);
        s->p++;
    }
    s->p++;
    return true;
}

static bool scan_value(struct scan *s, long key_line, const char *expected)
{
    size_t index = 0;
    bool fine;
    skip_blanks(s);
    if (s->p == s->end) return fault(s, expected, NULL);
    if (!add_mark(s, key_line, &index)) return false;
    if (*s->p == '"') return scan_string(s);
    if (*s->p == '-' || (*s->p >= '0' && *s->p <= '9')) return scan_number(s, &s->marks->list[index]);
    if (*s->p != '{' && *s->p != '[') return scan_word(s, expected);
    if (s->depth == SP_JSON_DEPTH)
        return fault_on(s, s->line, "values nested more than 64 deep", "nesting of at most 64", NULL);
    s->depth++;
    s->p++;
    fine = scan_inside(s, s->p[-1] == '{');
    s->depth--;
    return fine;
}

bool sp_json_scan(const char *name, const char *named_by, const char *text, size_t size,
                  struct sp_json_marks *out, struct sp_complaints *complaints)
{
    const char *start = text ? text : "";
    if (!text) size = 0;
    struct scan s = {start, start, start + size, 1, 0, {name, 1, NULL, named_by}, out, complaints};
    if (size >= 3 && memcmp(start, "\xef\xbb\xbf", 3) == 0)
        return fault(&s, "plain UTF-8, beginning with the value", "save the file without a byte order mark");
    if (size >= 2 && (memcmp(start, "\xff\xfe", 2) == 0 || memcmp(start, "\xfe\xff", 2) == 0))
        return fault_on(&s, 1, "UTF-16", "UTF-8", "save the file as UTF-8");
    if (!scan_value(&s, 0, "a JSON value")) return false;
    skip_blanks(&s);
    return s.p == s.end || fault(&s, "nothing behind the value", NULL);
}
