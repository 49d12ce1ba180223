/* --set PATH=VALUE: looking the path up in the tables and putting the value into the tree.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <stdlib.h>
#include <string.h>

/* One part of a path: a name, or an index. */
struct part {
    char name[80];
    bool is_index;
    size_t index;
};

/* Takes the next part; false at the end, or with *bad when the text is no path. */
static bool next_part(const char **path, bool first, struct part *out, bool *bad)
{
    const char *p = *path;
    if (!*p) return false;
    out->is_index = *p == '[';
    if (out->is_index) {
        size_t digits = strspn(p + 1, "0123456789");
        *bad = first || digits < 1 || digits > 9 || p[1 + digits] != ']';
        if (*bad) return false;
        out->index = strtoul(p + 1, NULL, 10);
        *path = p + digits + 2;
        return true;
    }
    if (!first && *p++ != '.') *bad = true;
    size_t length = strcspn(p, ".[");
    if (length < 1 || length >= sizeof out->name) *bad = true;
    if (*bad) return false;
    memcpy(out->name, p, length);
    out->name[length] = '\0';
    *path = p + length;
    return true;
}

static void label_of(const char *text, char *out, size_t size)
{
    snprintf(out, size, "--set %s", text);
}

/* Labels are the whole setting; a long one is cut. */
enum { LABEL_MAX = 600 };

static bool complain(struct sp_reader *r, const char *text, const char *path, const char *found,
                     const char *expected, const char *hint)
{
    char label[LABEL_MAX];
    label_of(text, label, sizeof label);
    struct sp_place at = {.file = label, .path = path};
    sp_complain(r->complaints, &at, found, expected, hint);
    return false;
}

static bool unknown(struct sp_reader *r, const char *text, const char *path, const char *group,
                    const char *name)
{
    char hint[200];
    const char *nearest = sp_key_nearest(group, name);
    const char *of_car = *group ? NULL : sp_key_nearest("car", name); /* may stand without "car." */
    if (of_car && (!nearest || sp_edit_distance(of_car, name) < sp_edit_distance(nearest, name)))
        nearest = of_car;
    snprintf(hint, sizeof hint, "nearest known key is \"%s\"", nearest ? nearest : "");
    return complain(r, text, path, "an unknown key", "a key of the case or car", nearest ? hint : NULL);
}

/* The pattern ("drive[].speed") of a path, part by part; false with a complaint if no row has it. */
static bool known(struct sp_reader *r, const char *text, const char *shown, const char *path)
{
    char pattern[SP_PATH_MAX] = "", group[SP_PATH_MAX];
    const struct sp_key *row = NULL;
    struct part part;
    bool bad = false, inside = false;
    for (bool first = true; next_part(&path, first, &part, &bad); first = false) {
        size_t length = strlen(pattern);
        memcpy(group, pattern, length + 1);
        if (inside) continue; /* within a table's rows, or a trace's columns */
        if (part.is_index) {
            if (!row) return complain(r, text, shown, "an index", "a key before it", NULL);
            if (row->shape == SP_SHAPE_STEPS)
                snprintf(pattern + length, sizeof pattern - length, "[]");
            else
                inside = row->shape == SP_SHAPE_TABLE || row->shape == SP_SHAPE_LIST ||
                         row->shape == SP_SHAPE_MATRIX || row->shape == SP_SHAPE_THREE;
            if (!inside && row->shape != SP_SHAPE_STEPS)
                return complain(r, text, shown, "an index", "a key that holds no list to have none", NULL);
            row = sp_key_find(pattern);
            continue;
        }
        if (length + strlen(part.name) + 2 > sizeof pattern) return unknown(r, text, shown, group, part.name);
        snprintf(pattern + length, sizeof pattern - length, "%s%s", length ? "." : "", part.name);
        row = sp_key_find(pattern);
        if (!row) return unknown(r, text, shown, group, part.name);
        inside = row->shape == SP_SHAPE_COLUMNS;
    }
    return !bad ||
           complain(r, text, shown, "no path", "keys with points between, such as duct.exit.area", NULL);
}

bool sp_setting_read(struct sp_reader *r, const char *text, struct sp_setting *out)
{
    const char *equals = strchr(text, '=');
    char path[SP_PATH_MAX - 4], first[SP_PATH_MAX];
    if (!equals || equals == text) return complain(r, text, NULL, "no path with a value", "PATH=VALUE", NULL);
    size_t length = (size_t)(equals - text);
    if (length >= sizeof path) return complain(r, text, NULL, "too long a path", "a key of the case", NULL);
    memcpy(path, text, length);
    path[length] = '\0';
    snprintf(first, sizeof first, "car.%.*s", (int)strcspn(path, ".["), path);
    bool of_car = !sp_key_find(first + 4) && sp_key_find(first);
    snprintf(out->path, sizeof out->path, "%s%s", of_car ? "car." : "", path);
    out->text = text;
    return known(r, text, path, out->path);
}

/* ---- into the tree --------------------------------------------------------------------------------- */

static bool misplaced(struct sp_reader *r, const struct sp_setting *s, const struct sp_json *node,
                      const char *expected)
{
    char found[300], path[SP_PATH_MAX];
    sp_json_describe(node, found, sizeof found);
    snprintf(path, sizeof path, "%.*s", (int)strcspn(s->text, "="), s->text);
    return complain(r, s->text, path, found, expected, NULL);
}

/* The link to the element, NULL with a complaint if there is no such element. */
static struct sp_json **element(struct sp_reader *r, const struct sp_setting *s, struct sp_json *array,
                                size_t index)
{
    char found[60], expected[80], path[SP_PATH_MAX];
    size_t n = 0;
    if (array->type != SP_JSON_ARRAY) {
        misplaced(r, s, array, "a list to have that index");
        return NULL;
    }
    struct sp_json **link = &array->child;
    for (; *link && n < index; ++n)
        link = &(*link)->next;
    if (*link) return link;
    snprintf(found, sizeof found, "index %zu", index);
    if (n)
        snprintf(expected, sizeof expected, "an index of 0 to %zu", n - 1);
    else
        snprintf(expected, sizeof expected, "no index, for the list is empty");
    snprintf(path, sizeof path, "%.*s", (int)strcspn(s->text, "="), s->text);
    complain(r, s->text, path, found, expected, NULL);
    return NULL;
}

static void drop_opposite(struct sp_reader *r, const struct sp_setting *s)
{
    struct sp_json *air = sp_json_member(r->tree, "air");
    if (!strcmp(s->path, "air.pressure")) sp_json_drop(air, "altitude");
    if (!strcmp(s->path, "air.altitude")) sp_json_drop(air, "pressure");
}

/* Goes one part down, making objects on the way; NULL with a complaint if it cannot. */
static struct sp_json *down(struct sp_reader *r, const struct sp_setting *s, struct sp_json *node,
                            const struct part *part, const char *label)
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
    child = sp_json_value(label, "{}");
    if (!child || !sp_json_put(node, part->name, child)) {
        r->no_memory = true;
        return NULL;
    }
    return sp_json_member(node, part->name);
}

/* Puts the value at the last part of the path; takes it over. */
static void put(struct sp_reader *r, const struct sp_setting *s, struct sp_json *node,
                const struct part *part, struct sp_json *value)
{
    if (part->is_index) {
        struct sp_json **link = element(r, s, node, part->index), *old = link ? *link : NULL;
        if (!old) {
            sp_json_free(value);
            return;
        }
        value->next = old->next;
        old->next = NULL;
        *link = value;
        sp_json_free(old);
    } else if (node->type != SP_JSON_OBJECT) {
        misplaced(r, s, node, "an object to hold that key");
        sp_json_free(value);
    } else if (!sp_json_put(node, part->name, value)) {
        r->no_memory = true;
    }
}

void sp_setting_apply(struct sp_reader *r, const struct sp_setting *s)
{
    char label[LABEL_MAX];
    label_of(s->text, label, sizeof label);
    struct sp_json *node = r->tree, *value = sp_json_value(label, strchr(s->text, '=') + 1);
    const char *path = s->path;
    struct part part;
    bool bad = false;
    if (!value) {
        r->no_memory = true;
        return;
    }
    for (bool first = true; node && next_part(&path, first, &part, &bad); first = false) {
        if (!*path) {
            put(r, s, node, &part, value);
            drop_opposite(r, s);
            return;
        }
        node = down(r, s, node, &part, label);
    }
    sp_json_free(value);
}
