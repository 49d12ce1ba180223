/* trace_layout.c - headings, mapping and units of a trace file.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/trace_layout.h"

#include "drive/trace_columns.h"
#include "drive/trace_text.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* What one call of sp_trace_layout_build works on. */
struct build {
    struct sp_trace_layout *l;
    struct sp_units *u;
    const struct sp_trace_format *format;
    const struct sp_trace_texts *headings, *units;
    struct sp_place at;
    struct sp_complaints *to;
    bool mapped; /* any heading is mapped: then unknown headings are none of our business */
    bool fine;
};

bool sp_trace_texts_add(struct sp_trace_texts *to, const char *s, size_t n)
{
    if (to->count == to->room) {
        size_t room = to->room ? 2 * to->room : 16;
        char **text = realloc(to->text, room * sizeof *text);
        if (!text) return false;
        to->text = text;
        to->room = room;
    }
    char *text = sp_trace_text_clean(s, n);
    if (!text) return false;
    to->text[to->count++] = text;
    return true;
}

void sp_trace_texts_free(struct sp_trace_texts *t)
{
    for (size_t i = 0; i < t->count; i++)
        free(t->text[i]);
    free(t->text);
    *t = (struct sp_trace_texts){0};
}

void sp_trace_layout_free(struct sp_trace_layout *l)
{
    free(l->rule);
    for (int c = 0; c < SP_COLUMNS; c++)
        free(l->unit[c]);
    *l = (struct sp_trace_layout){0};
}

static void complain(struct build *b, const char *path, const char *found, const char *expected,
                     const char *hint)
{
    struct sp_place at = b->at;
    at.path = path;
    sp_complain(b->to, &at, found, expected, hint);
    b->fine = false;
}

/* Where the bracketed unit at the end of a heading opens, or NULL. "[" ends at "]", "(" at ")". */
static const char *bracket(const char *heading)
{
    size_t n = strlen(heading);
    char last = n ? heading[n - 1] : '\0';
    if (last != ']' && last != ')') return NULL;
    return strrchr(heading, last == ']' ? '[' : '(');
}

/* The heading without its unit equals `name`. */
static bool name_is(const char *heading, const char *name)
{
    const char *open = bracket(heading);
    size_t n = open ? (size_t)(open - heading) : strlen(heading);
    while (n > 0 && heading[n - 1] == ' ')
        n--;
    return strlen(name) == n && memcmp(heading, name, n) == 0;
}

static void claim(struct build *b, size_t heading, enum sp_column c)
{
    const char *text = b->headings->text[heading];
    char line[80];
    if (b->l->present & 1u << c) {
        snprintf(line, sizeof line, "a second column for %s", sp_column_name(c));
        complain(b, text, line, "one", NULL);
        return;
    }
    if (b->l->rule[heading].column >= 0) {
        snprintf(line, sizeof line, "a heading mapped to both %s and %s",
                 sp_column_name((enum sp_column)b->l->rule[heading].column), sp_column_name(c));
        complain(b, text, line, "one meaning a heading", NULL);
        return;
    }
    b->l->rule[heading].column = (int)c;
    b->l->present |= 1u << c;
    b->l->label[c] = text;
}

/* The heading nearest to `text`, as a hint. */
static const char *near_heading(const struct build *b, const char *text, char *hint, size_t size)
{
    size_t best = strlen(text) / 2 + 1, at = b->headings->count;
    for (size_t i = 0; i < b->headings->count; i++) {
        size_t d = sp_trace_text_distance(text, b->headings->text[i], best);
        if (d < best) best = d, at = i;
    }
    if (at == b->headings->count) return NULL;
    snprintf(hint, size, "the nearest heading is \"%.80s\"", b->headings->text[at]);
    return hint;
}

/* The whole heading first; without its unit only if the whole one stands nowhere. */
static void find_mapped(struct build *b, enum sp_column c)
{
    char *want = sp_trace_text_clean(b->format->column[c].heading, strlen(b->format->column[c].heading));
    size_t found = 0;
    if (!want) {
        complain(b, NULL, "no memory left", "enough for the headings", NULL);
        return;
    }
    for (size_t i = 0; i < b->headings->count && *want; i++)
        if (strcmp(b->headings->text[i], want) == 0) claim(b, i, c), found++;
    for (size_t i = 0, whole = found; i < b->headings->count && *want && whole == 0; i++)
        if (name_is(b->headings->text[i], want)) claim(b, i, c), found++;
    if (found == 0) {
        char hint[128], line[128];
        snprintf(line, sizeof line, "a column headed \"%.80s\", mapped to %s", want, sp_column_name(c));
        complain(b, sp_column_name(c), "no such heading", line, near_heading(b, want, hint, sizeof hint));
    }
    free(want);
}

static bool find_own(struct build *b, size_t heading)
{
    for (int c = 0; c < SP_COLUMNS; c++) {
        if (b->format->column[c].heading ||
            !name_is(b->headings->text[heading], sp_column_name((enum sp_column)c)))
            continue;
        claim(b, heading, (enum sp_column)c);
        return true;
    }
    return false;
}

static void complain_unknown(struct build *b, const char *heading)
{
    char hint[160] = "", name[64], found[120];
    const char *open = bracket(heading);
    size_t best = 6, n = open ? (size_t)(open - heading) : strlen(heading);
    snprintf(name, sizeof name, "%.*s", (int)(n < 63 ? n : 63), heading);
    while (*name && name[strlen(name) - 1] == ' ')
        name[strlen(name) - 1] = '\0';
    for (int c = 0; c < SP_COLUMNS; c++) {
        size_t d = sp_trace_text_distance(name, sp_column_name((enum sp_column)c), best);
        if (d >= best) continue;
        best = d;
        snprintf(hint, sizeof hint, "the nearest known column is %s", sp_column_name((enum sp_column)c));
    }
    if (b->headings->count == 1 && strpbrk(heading, ";\t|"))
        snprintf(hint, sizeof hint, "the cells seem to be divided by another character than the delimiter");
    snprintf(found, sizeof found, "the unknown heading \"%.80s\"", heading);
    complain(b, heading, found, "a known column, or a mapping of the columns wanted", *hint ? hint : NULL);
}

/* The text of the unit of `heading`, newly allocated, "" if none stands anywhere; NULL: no memory. */
static char *unit_text(const struct build *b, size_t heading, enum sp_column c)
{
    const char *text = b->format->column[c].unit, *open;
    size_t n;
    if (text) return sp_trace_text_clean(text, strlen(text));
    text = heading < b->units->count ? b->units->text[heading] : "";
    if (!*text)
        text = b->headings->text[heading];
    else if (!bracket(text))
        return sp_trace_text_clean(text, strlen(text));
    open = bracket(text);
    n = open ? strlen(open) : 0;
    return n < 2 ? sp_trace_text_clean("", 0) : sp_trace_text_clean(open + 1, n - 2);
}

static void set_unit(struct build *b, size_t heading, enum sp_column c)
{
    struct sp_cell_rule *rule = &b->l->rule[heading];
    enum sp_kind kind = sp_column_kind(c);
    char why[160] = "", found[120], expected[200];
    char *unit = b->l->unit[c] = unit_text(b, heading, c);
    if (!unit) {
        complain(b, NULL, "no memory left", "enough for the units", NULL);
    } else if (kind == SP_K_NUMBER && (!*unit || strcmp(unit, "1") == 0)) {
        *unit = '\0';
    } else if (!*unit) {
        snprintf(expected, sizeof expected, "a unit of %s, as in \"%s [%s]\"", sp_kind_name(kind),
                 sp_column_name(c), sp_kind_si(kind));
        complain(b, b->l->label[c], "a heading without unit", expected, NULL);
    } else if (!sp_unit_scale(b->u, kind, unit, &rule->scale, &rule->offset, why, sizeof why)) {
        snprintf(found, sizeof found, "the unit \"%.80s\"", unit);
        complain(b, b->l->label[c], found, *why ? why : "a known unit", NULL);
    }
}

static void set_rule(struct build *b, size_t heading)
{
    struct sp_cell_rule *rule = &b->l->rule[heading];
    enum sp_column c = (enum sp_column)rule->column;
    if (rule->column < 0) return;
    rule->scale = 1;
    rule->low = sp_column_low(c);
    rule->high = sp_column_high(c);
    if (c == SP_COL_MARK || (c == SP_COL_TIME && b->format->clock)) return;
    set_unit(b, heading, c);
}

/* A drive needs an axis and a speed, or the two axes that give a speed. */
static void check_enough(struct build *b)
{
    bool time = b->l->present & 1u << SP_COL_TIME, distance = b->l->present & 1u << SP_COL_DISTANCE;
    bool speed = b->l->present & 1u << SP_COL_SPEED;
    if (!time && !distance)
        complain(b, NULL, "neither a column of time nor one of distance", "one of the two", NULL);
    if (!speed && !(time && distance))
        complain(b, NULL, "no column of speed", "speed, or both time and distance to take it from", NULL);
}

bool sp_trace_layout_build(struct sp_trace_layout *l, struct sp_units *u,
                           const struct sp_trace_format *format, const struct sp_trace_texts *headings,
                           const struct sp_trace_texts *units, const struct sp_place *at,
                           struct sp_complaints *complaints)
{
    struct build b = {l, u, format, headings, units, *at, complaints, false, true};
    *l = (struct sp_trace_layout){0};
    l->rule = calloc(headings->count ? headings->count : 1, sizeof *l->rule);
    if (!l->rule) {
        complain(&b, NULL, "no memory left", "enough for the headings", NULL);
        return false;
    }
    l->rules = headings->count;
    for (size_t i = 0; i < l->rules; i++)
        l->rule[i].column = *headings->text[i] ? SP_CELL_IGNORED : SP_CELL_NAMELESS;
    for (int c = 0; c < SP_COLUMNS; c++) {
        if (!format->column[c].heading) continue;
        b.mapped = true;
        find_mapped(&b, (enum sp_column)c);
    }
    for (size_t i = 0; i < l->rules; i++) {
        if (l->rule[i].column != SP_CELL_IGNORED || find_own(&b, i) || b.mapped) continue;
        complain_unknown(&b, headings->text[i]);
    }
    for (size_t i = 0; i < l->rules; i++) {
        if (b.mapped && l->rule[i].column == SP_CELL_NAMELESS) l->rule[i].column = SP_CELL_IGNORED;
        set_rule(&b, i);
    }
    if (b.fine) check_enough(&b);
    return b.fine;
}
