/* --set PATH=VALUE, and what a change sets: putting a value into the tree.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <stdlib.h>
#include <string.h>

static bool complain(struct sp_reader *r, const struct sp_setting *s, const char *found, const char *expected,
                     const char *hint)
{
    sp_complain(r->complaints, &s->source, found, expected, hint);
    return false;
}

bool sp_setting_read(struct sp_reader *r, const char *text, struct sp_setting *out)
{
    const char *equals = strchr(text, '=');
    *out = (struct sp_setting){.text = equals ? equals + 1 : NULL};
    snprintf(out->label, sizeof out->label, "--set %s", text);
    out->source.file = out->label;
    if (!equals || equals == text) return complain(r, out, "no path with a value", "PATH=VALUE", NULL);
    size_t length = (size_t)(equals - text);
    if (length >= SP_PATH_MAX - 4) return complain(r, out, "too long a path", "a key of the case", NULL);
    memcpy(out->written, text, length);
    char path[SP_PATH_MAX];
    snprintf(path, sizeof path, "%s", out->written);
    struct sp_place source = {.file = out->label, .path = out->written};
    return sp_setting_look_up(r, path, &source, out);
}

static bool misplaced(struct sp_reader *r, const struct sp_setting *s, const struct sp_json *node,
                      const char *expected)
{
    char found[300];
    sp_json_describe(node, found, sizeof found);
    return complain(r, s, found, expected, NULL);
}

/* An index past the end of a list of n. */
static bool past_end(struct sp_reader *r, const struct sp_setting *s, size_t index, size_t n)
{
    char found[60], expected[100];
    snprintf(found, sizeof found, "index %zu", index);
    if (n > 1)
        snprintf(expected, sizeof expected, "an index of 0 to %zu, for there are %zu", n - 1, n);
    else
        snprintf(expected, sizeof expected,
                 n ? "index 0, for there is 1" : "no index, for the list is empty");
    return complain(r, s, found, expected, NULL);
}

/* ---- one or a list --------------------------------------------------------------------------------- */

/* On the way along a path: what is found so far, and where that is. */
struct way {
    struct sp_reader *r;
    struct sp_setting *s;
    const struct sp_json *node; /* NULL: not there yet */
    char pattern[SP_PATH_MAX];
};

static void add(struct way *w, const char *text)
{
    size_t length = strlen(w->s->place);
    snprintf(w->s->place + length, sizeof w->s->place - length, "%s", text);
    w->node = *w->s->place ? sp_case_node(w->r->tree, w->s->place) : w->r->tree;
}

static void add_name(struct way *w, const char *name)
{
    char text[90];
    bool quote = strpbrk(name, ".[") != NULL;
    snprintf(text, sizeof text, "%s%s%s%s", *w->s->place ? "." : "", quote ? "\"" : "", name,
             quote ? "\"" : "");
    add(w, text);
}

static void add_index(struct way *w, size_t index)
{
    char text[40];
    snprintf(text, sizeof text, "[%zu]", index);
    add(w, text);
}

static size_t length_of(const struct sp_json *array)
{
    size_t n = 0;
    for (const struct sp_json *c = array->type == SP_JSON_ARRAY ? array->child : NULL; c; c = c->next)
        ++n;
    return n;
}

/* "cores[0]..." was written where there is one `core`, or none. */
static bool element_of_one(struct way *w, const struct sp_key *row, size_t index, const struct sp_json *one)
{
    char found[60], expected[160];
    if (one && index == 0) {
        add_name(w, sp_key_name(row));
        return true;
    }
    snprintf(found, sizeof found, "index %zu", index);
    if (one)
        snprintf(expected, sizeof expected, "index 0, for there is 1, as \"%s\"", sp_key_name(row));
    else
        snprintf(expected, sizeof expected, "no index, for there are no %s", row->plural);
    return complain(w->r, w->s, found, expected, NULL);
}

/* "core..." was written where there is a list. */
static bool one_of_list(struct way *w, const struct sp_key *row, const struct sp_json *list)
{
    char expected[160], hint[100];
    size_t n = length_of(list);
    if (list->type != SP_JSON_ARRAY) return misplaced(w->r, w->s, list, "a list there");
    add_name(w, row->plural);
    if (n == 1) {
        add_index(w, 0);
        return true;
    }
    snprintf(expected, sizeof expected, "an index, for %s is a list of %zu", row->plural, n);
    snprintf(hint, sizeof hint, "the first is \"%s[0]\"", row->plural);
    char found[100];
    snprintf(found, sizeof found, "\"%s\" alone", sp_key_name(row));
    return complain(w->r, w->s, found, expected, n ? hint : NULL);
}

/* A group that may be a list; takes the index after the list's name along. */
static bool resolve_group(struct way *w, const struct sp_key *row, bool plural, const char **path)
{
    const struct sp_json *one = sp_json_member(w->node, sp_key_name(row)),
                         *list = sp_json_member(w->node, row->plural);
    struct sp_path_part part;
    bool bad = false;
    if (plural && **path == '[' && !list) {
        sp_path_next(path, false, &part, &bad);
        return element_of_one(w, row, part.index, one);
    }
    if (!plural && list && !one) return one_of_list(w, row, list);
    add_name(w, plural ? row->plural : sp_key_name(row));
    if (!plural || **path != '[') return true;
    sp_path_next(path, false, &part, &bad);
    if (list->type != SP_JSON_ARRAY) return misplaced(w->r, w->s, list, "a list to have that index");
    if (part.index >= length_of(list)) return past_end(w->r, w->s, part.index, length_of(list));
    add_index(w, part.index);
    return true;
}

bool sp_setting_resolve(struct sp_reader *r, struct sp_setting *s)
{
    struct way w = {.r = r, .s = s, .node = r->tree};
    const char *path = s->path;
    struct sp_path_part part;
    const struct sp_key *row = NULL;
    bool bad = false, known = true;
    *s->place = '\0';
    for (bool first = true; sp_path_next(&path, first, &part, &bad); first = false) {
        bool plural = false;
        if (part.is_index) {
            add_index(&w, part.index);
            bool entry = row && (row->shape == SP_SHAPE_STEPS || row->shape == SP_SHAPE_CHANGES);
            if (entry) snprintf(w.pattern, sizeof w.pattern, "%s[]", row->path);
            continue;
        }
        row = known ? sp_key_named(w.pattern, part.name, &plural) : NULL;
        known = row != NULL;
        if (row) snprintf(w.pattern, sizeof w.pattern, "%s", row->path);
        if (!row || !row->plural)
            add_name(&w, part.name);
        else if (!resolve_group(&w, row, plural, &path))
            return false;
    }
    return true;
}

/* ---- into the tree --------------------------------------------------------------------------------- */

/* The link to the element, NULL with a complaint if there is no such element. */
static struct sp_json **element(struct sp_reader *r, const struct sp_setting *s, struct sp_json *array,
                                size_t index)
{
    size_t n = 0;
    if (array->type != SP_JSON_ARRAY) {
        misplaced(r, s, array, "a list to have that index");
        return NULL;
    }
    struct sp_json **link = &array->child;
    for (; *link && n < index; ++n)
        link = &(*link)->next;
    if (*link) return link;
    past_end(r, s, index, n);
    return NULL;
}

/* What cannot stand beside the new value. */
static void drop_opposite(struct sp_reader *r, const struct sp_setting *s)
{
    struct sp_json *air = sp_json_member(r->tree, "air");
    if (!strcmp(s->path, "air.pressure")) sp_json_drop(air, "altitude");
    if (!strcmp(s->path, "air.altitude")) sp_json_drop(air, "pressure");
}

/* Goes one part down, making objects on the way; NULL with a complaint if it cannot. */
static struct sp_json *down(struct sp_reader *r, const struct sp_setting *s, struct sp_json *node,
                            const struct sp_path_part *part)
{
    if (part->is_index) {
        struct sp_json **link = element(r, s, node, part->index);
        return link ? *link : NULL;
    }
    if (node->type != SP_JSON_OBJECT) {
        misplaced(r, s, node, "an object to hold that key");
        return NULL;
    }
    struct sp_json *child = sp_json_member(node, part->name);
    if (child) return child;
    child = sp_json_value(s->source.file, "{}");
    if (child) child->line = s->source.line;
    if (!child || !sp_json_put(node, part->name, child)) {
        r->no_memory = true;
        return NULL;
    }
    return sp_json_member(node, part->name);
}

/* Puts the value at the last part of the path; takes it over. */
static bool put(struct sp_reader *r, const struct sp_setting *s, struct sp_json *node,
                const struct sp_path_part *part, struct sp_json *value)
{
    if (part->is_index) {
        struct sp_json **link = element(r, s, node, part->index), *old = link ? *link : NULL;
        if (!old) {
            sp_json_free(value);
            return false;
        }
        value->next = old->next;
        old->next = NULL;
        *link = value;
        sp_json_free(old);
        return true;
    }
    if (node->type != SP_JSON_OBJECT) {
        sp_json_free(value);
        return misplaced(r, s, node, "an object to hold that key");
    }
    if (s->list) sp_json_drop(node, sp_key_name(s->row)); /* the list stands for the one */
    if (sp_json_put(node, part->name, value)) return true;
    r->no_memory = true;
    return false;
}

bool sp_setting_apply(struct sp_reader *r, struct sp_setting *s)
{
    if (!sp_setting_resolve(r, s)) return false;
    struct sp_json *node = r->tree,
                   *value = s->node ? sp_case_copy(s->node) : sp_json_value(s->label, s->text);
    const char *path = s->place;
    struct sp_path_part part;
    bool bad = false;
    if (!value) {
        r->no_memory = true;
        return false;
    }
    for (bool first = true; node && sp_path_next(&path, first, &part, &bad); first = false) {
        if (!*path) {
            bool fine = put(r, s, node, &part, value);
            drop_opposite(r, s);
            return fine;
        }
        node = down(r, s, node, &part);
    }
    sp_json_free(value);
    return false;
}
