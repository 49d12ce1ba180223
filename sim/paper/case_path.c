/* Paths as people write them: taking them apart, and looking them up in the tables.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <stdlib.h>
#include <string.h>

static bool next_index(const char **path, struct sp_path_part *out)
{
    const char *p = *path;
    size_t digits = strspn(p + 1, "0123456789");
    if (digits < 1 || digits > 9 || p[1 + digits] != ']') return false;
    out->index = strtoul(p + 1, NULL, 10);
    *path = p + digits + 2;
    return true;
}

static bool next_name(const char **path, struct sp_path_part *out)
{
    const char *p = *path;
    bool quoted = *p == '"';
    if (quoted) ++p;
    size_t length = strcspn(p, quoted ? "\"" : ".[");
    if (length < 1 || length >= sizeof out->name || (quoted && !p[length])) return false;
    memcpy(out->name, p, length);
    out->name[length] = '\0';
    *path = p + length + quoted;
    return true;
}

bool sp_path_next(const char **path, bool first, struct sp_path_part *out, bool *bad)
{
    if (!**path) return false;
    out->is_index = **path == '[';
    if (out->is_index) {
        *bad = first || !next_index(path, out);
        return !*bad;
    }
    if (!first && *(*path)++ != '.') *bad = true;
    if (!*bad) *bad = !next_name(path, out);
    return !*bad;
}

/* ---- looking up ------------------------------------------------------------------------------------ */

/* On the way along a path. */
struct way {
    struct sp_reader *r;
    struct sp_setting *s;
    char pattern[SP_PATH_MAX];
};

static bool complain(const struct way *w, const char *found, const char *expected, const char *hint)
{
    sp_complain(w->r->complaints, &w->s->source, found, expected, hint);
    return false;
}

static bool unknown(const struct way *w, const char *name)
{
    char hint[200];
    const char *nearest = sp_key_nearest(w->pattern, name);
    const char *of_car = *w->pattern ? NULL : sp_key_nearest("car", name); /* may stand without "car." */
    if (of_car && (!nearest || sp_edit_distance(of_car, name) < sp_edit_distance(nearest, name)))
        nearest = of_car;
    snprintf(hint, sizeof hint, "nearest known key is \"%s\"", nearest ? nearest : "");
    return complain(w, "an unknown key", "a key of the case or car", nearest ? hint : NULL);
}

static bool is_table(const struct sp_key *row)
{
    return row->shape == SP_SHAPE_TABLE || row->shape == SP_SHAPE_LIST || row->shape == SP_SHAPE_MATRIX ||
           row->shape == SP_SHAPE_THREE;
}

/* Keeps the index of the list just named. */
static void keep_index(struct sp_setting *s, size_t index)
{
    const struct sp_key *lists[SP_KEY_LISTS];
    if (sp_key_lists(s->row->path, lists) > 1)
        s->at.inner = index;
    else
        s->at.outer = index;
}

static bool take_index(struct way *w, size_t index)
{
    struct sp_setting *s = w->s;
    char hint[120];
    if (!s->row) return complain(w, "an index", "a key before it", NULL);
    if (s->list || s->row->shape == SP_SHAPE_STEPS || s->row->shape == SP_SHAPE_CHANGES) {
        keep_index(s, index);
        snprintf(w->pattern, sizeof w->pattern, "%s%s", s->row->path, s->list ? "" : "[]");
        s->row = sp_key_find(w->pattern);
        s->list = false;
        return true;
    }
    s->inside = is_table(s->row);
    if (s->inside) return true;
    snprintf(hint, sizeof hint, "the list is \"%s\"", s->row->plural ? s->row->plural : "");
    return complain(w, "an index", "a key that holds no list to have none", s->row->plural ? hint : NULL);
}

static bool take_name(struct way *w, const char *name)
{
    struct sp_setting *s = w->s;
    char expected[120];
    if (s->list) {
        snprintf(expected, sizeof expected, "an index after %s, such as %s[0]", s->row->plural,
                 s->row->plural);
        return complain(w, "a list without an index", expected, NULL);
    }
    if (s->row && s->row->shape == SP_SHAPE_SETTINGS) {
        s->inside = true;
        return true;
    }
    s->row = sp_key_named(w->pattern, name, &s->list);
    if (!s->row) return unknown(w, name);
    snprintf(w->pattern, sizeof w->pattern, "%s", s->row->path);
    s->inside = s->row->shape == SP_SHAPE_COLUMNS;
    return true;
}

/* What a change sets has points in its name: changes[0].set.duct.exit.area is changes[0].set."duct.exit.area". */
static bool into_change(const char *path, char *out, size_t size)
{
    const char *entry = "changes[", *p = path + strlen(entry);
    if (strncmp(path, entry, strlen(entry))) return false;
    p += strspn(p, "0123456789");
    if (strncmp(p, "].set.", 6) && strncmp(p, "].add.", 6)) return false;
    p += 6;
    if (!*p || strchr(p, '"')) return false;
    return snprintf(out, size, "%.*s\"%s\"", (int)(p - path), path, p) < (int)size;
}

/* Puts "car." before a key of the car. */
static void from_the_top(const char *path, char *out, size_t size)
{
    char first[SP_PATH_MAX];
    bool plural;
    if (into_change(path, out, size)) return;
    snprintf(first, sizeof first, "%.*s", (int)strcspn(path, ".["), path);
    bool of_car = !sp_key_named("", first, &plural) && sp_key_named("car", first, &plural);
    snprintf(out, size, "%s%s", of_car ? "car." : "", path);
}

bool sp_setting_look_up(struct sp_reader *r, const char *path, const struct sp_place *source,
                        struct sp_setting *out)
{
    struct way w = {.r = r, .s = out};
    struct sp_path_part part;
    bool bad = false;
    out->source = *source;
    if (strlen(path) >= SP_PATH_MAX - 4) return complain(&w, "too long a path", "a key of the case", NULL);
    snprintf(out->written, sizeof out->written, "%s", path);
    from_the_top(path, out->path, sizeof out->path);
    const char *at = out->path;
    for (bool first = true; sp_path_next(&at, first, &part, &bad); first = false) {
        if (out->inside) continue; /* within a table's rows, or a trace's columns */
        if (part.is_index ? !take_index(&w, part.index) : !take_name(&w, part.name)) return false;
    }
    if (!bad && !out->row) return complain(&w, "an empty path", "a key such as duct.inlet.blocked", NULL);
    return !bad || complain(&w, "no path", "keys with points between, such as duct.exit.area", NULL);
}
