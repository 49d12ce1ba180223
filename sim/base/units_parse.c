/* The grammar of units.
 *
 *   unit = term { sign term }      sign = " " | "." | "*" | "-" | "/"
 *   term = name [power] | "(" unit ")" [power]
 *   power = ["^"] ["+" | "-"] digit
 *
 * Names alone go to the unit library, so that nothing of its own grammar (time stamps, shifted and
 * logarithmic scales, factors) can get through by accident.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/text.h"
#include "base/units_inner.h"

#include <math.h>
#include <string.h>

enum { POWER_MOST = 30, PARENTHESES_MOST = 8 };

struct reader {
    struct sp_units *units;
    const char *p;
    int depth;
    struct sp_unit_error *error;
};

static bool letter(char c)
{
    return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || c == '_';
}

static bool is_digit(char c)
{
    return c >= '0' && c <= '9';
}

static bool fail(struct reader *r, enum sp_unit_fault fault, const char *word, size_t length)
{
    if (length > SP_UNIT_MOST) length = SP_UNIT_MOST;
    r->error->fault = fault;
    memcpy(r->error->word, word, length);
    r->error->word[length] = '\0';
    return false;
}

static bool fail_here(struct reader *r)
{
    size_t length;
    long code;
    if (*r->p == '@') return fail(r, SP_UNIT_SHIFT, "@", 1);
    if (is_digit(*r->p)) return fail(r, SP_UNIT_DIGIT, r->p, strspn(r->p, "0123456789."));
    if (*r->p == '\0') return fail(r, SP_UNIT_SIGN, "", 0);
    length = sp_text_code(r->p, r->p + strlen(r->p), &code);
    return fail(r, SP_UNIT_SIGN, r->p, length ? length : 1);
}

static bool one_of(const char *name, const char *const *list)
{
    for (; *list; list++)
        if (strcmp(name, *list) == 0) return true;
    return false;
}

static bool look_up(struct reader *r, const char *name, struct sp_measure *out)
{
    static const char *const shifts[] = {"since", "after", "from", "ref", "re", NULL};
    static const char *const logarithms[] = {"lg", "ln", "log", "dB", "dBA", "dBm", "dBW", "dBZ", NULL};
    const struct sp_measure *alias = sp_alias_find(name);
    const char *hint = sp_ambiguous_find(name);
    if (one_of(name, shifts)) return fail(r, SP_UNIT_SHIFT, name, strlen(name));
    if (one_of(name, logarithms)) return fail(r, SP_UNIT_LOGARITHM, name, strlen(name));
    if (hint) {
        r->error->hint = hint;
        return fail(r, SP_UNIT_AMBIGUOUS, name, strlen(name));
    }
    if (alias) {
        *out = *alias;
        return true;
    }
    return sp_unit_name(r->units, name, out, r->error);
}

/* The 2 of "inH2O" belongs to the name. */
static bool in_water(const char *p, const char *start)
{
    return p > start && *p == '2' && (p[-1] == 'H' || p[-1] == 'h') && (p[1] == 'O' || p[1] == 'o');
}

static bool read_name(struct reader *r, struct sp_measure *out)
{
    char name[SP_UNIT_MOST + 1];
    const char *start = r->p;
    size_t length;
    while (letter(*r->p) || in_water(r->p, start)) r->p++;
    length = (size_t)(r->p - start); /* the whole text is no longer than SP_UNIT_MOST */
    memcpy(name, start, length);
    name[length] = '\0';
    return look_up(r, name, out);
}

/* m^n, n from -9 to 9 and not 0, or out of bounds. */
static bool raise(struct reader *r, struct sp_measure *m, int n)
{
    double scale = 1.0;
    for (int i = 0; i < (n < 0 ? -n : n); i++) scale *= m->scale;
    m->scale = n < 0 ? 1.0 / scale : scale;
    for (int i = 0; i < SP_BASES; i++) {
        m->power[i] *= n;
        if (m->power[i] > POWER_MOST || m->power[i] < -POWER_MOST) return fail(r, SP_UNIT_RANGE, "", 0);
    }
    return true;
}

static bool read_power(struct reader *r, struct sp_measure *m)
{
    const char *at = r->p;
    int sign = 1;
    if (*at == '^') at++;
    if (*at == '+' || *at == '-') sign = *at++ == '-' ? -1 : 1;
    if (!is_digit(*at)) {
        if (*r->p != '^' && *r->p != '+') return true; /* no power; a '-' may join two names */
        return fail(r, SP_UNIT_SIGN, r->p, 1);
    }
    if (*at == '0' || is_digit(at[1])) return fail(r, SP_UNIT_DIGIT, at, strspn(at, "0123456789"));
    r->p = at + 1;
    if (letter(*r->p) || *r->p == '(') return fail_here(r); /* "m2K": power or name? */
    return raise(r, m, sign * (*at - '0'));
}

static bool read_unit(struct reader *r, struct sp_measure *out);

static bool read_term(struct reader *r, struct sp_measure *out)
{
    if (letter(*r->p)) return read_name(r, out) && read_power(r, out);
    if (*r->p != '(') return fail_here(r);
    if (++r->depth > PARENTHESES_MOST) return fail_here(r);
    r->p++;
    if (!read_unit(r, out)) return false;
    if (*r->p != ')') return fail_here(r);
    r->p++;
    r->depth--;
    return read_power(r, out);
}

/* The sign between two terms; '\0' where the unit ends. Blanks may stand round a sign. */
static char read_sign(struct reader *r)
{
    const char *at = r->p;
    char sign = ' ';
    at += strspn(at, " ");
    if (*at && strchr(".*-/", *at)) {
        sign = *at++;
        at += strspn(at, " ");
    } else if (at == r->p || *at == ')' || *at == '\0') {
        return '\0';
    }
    r->p = at;
    return sign;
}

static bool multiply(struct reader *r, struct sp_measure *a, const struct sp_measure *b, int way)
{
    a->scale = way > 0 ? a->scale * b->scale : a->scale / b->scale;
    a->seen |= b->seen;
    for (int i = 0; i < SP_BASES; i++) {
        a->power[i] += way * b->power[i];
        if (a->power[i] > POWER_MOST || a->power[i] < -POWER_MOST) return fail(r, SP_UNIT_RANGE, "", 0);
    }
    return true;
}

static bool read_unit(struct reader *r, struct sp_measure *out)
{
    bool divided = false;
    char sign;
    if (!read_term(r, out)) return false;
    while ((sign = read_sign(r)) != '\0') {
        const char *start = r->p;
        struct sp_measure term = {0};
        if (!read_term(r, &term)) return false;
        if (sign != '/' && divided) return fail(r, SP_UNIT_ORDER, start, (size_t)(r->p - start));
        divided = sign == '/';
        if (!multiply(r, out, &term, divided ? -1 : 1)) return false;
    }
    return true;
}

bool sp_unit_measure(struct sp_units *u, const char *text, struct sp_measure *out,
                     struct sp_unit_error *error)
{
    struct reader r = {u, text, 0, error};
    *out = (struct sp_measure){0};
    if (strlen(text) > SP_UNIT_MOST) return fail(&r, SP_UNIT_LONG, "", 0);
    if (!read_unit(&r, out)) return false;
    if (*r.p) return fail_here(&r);
    if (!isfinite(out->scale) || !(out->scale > 0.0)) return fail(&r, SP_UNIT_RANGE, "", 0);
    return true;
}

bool sp_unit_plain(const char *unit, size_t length, char *out, size_t size)
{
    static const struct { const char *sign, *plain; } signs[] = {
        {"\xc2\xb2", "2"},      {"\xc2\xb3", "3"},      {"\xc2\xb7", "."},  {"\xe2\x8b\x85", "."},
        {"\xc2\xb0""C", "degC"}, {"\xc2\xb0""F", "degF"}, {"\xc2\xb0", "deg"}, {"\xc2\xb5", "u"},
        {"\xce\xbc", "u"},
    };
    size_t n = 0;
    while (length > 0) {
        const char *plain = unit;
        size_t taken = 1, put = 1;
        for (size_t i = 0; i < sizeof signs / sizeof *signs; i++) {
            size_t m = strlen(signs[i].sign);
            if (m > length || memcmp(unit, signs[i].sign, m) != 0) continue;
            plain = signs[i].plain;
            taken = m;
            put = strlen(plain);
            break;
        }
        if (n + put >= size) return false;
        memcpy(out + n, plain, put);
        n += put;
        unit += taken;
        length -= taken;
    }
    out[n] = '\0';
    return true;
}
