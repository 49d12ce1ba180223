/* The shape of the tree: keys that nobody knows, and objects where objects belong.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <string.h>

static void walk_object(struct sp_reader *r, const struct sp_json *node, const char *pattern,
                        const char *path);

static bool belongs_to_car(const char *key)
{
    bool plural;
    return sp_key_named("car", key, &plural) != NULL;
}

static void unknown(struct sp_reader *r, const struct sp_json *node, const char *pattern, const char *path)
{
    char hint[120], expected[120];
    const char *nearest = sp_key_nearest(pattern, node->key);
    bool of_car = !*pattern && belongs_to_car(node->key);
    if (of_car)
        snprintf(hint, sizeof hint, "a key of the car: it belongs under \"car\"");
    else
        snprintf(hint, sizeof hint, "nearest known key is \"%s\"", nearest ? nearest : "");
    snprintf(expected, sizeof expected, "a known key of %s", *pattern ? pattern : "the case");
    sp_case_fault_at(r, node, path, "an unknown key", expected, of_car || nearest ? hint : NULL);
}

/* The first `most` objects of a list; how many there are, up to one more. */
static size_t walk_list(struct sp_reader *r, const struct sp_json *node, const char *pattern,
                        const char *path, size_t most, const char *expected)
{
    size_t i = 0;
    for (const struct sp_json *c = node->child; c && i <= most; c = c->next, ++i) {
        char here[SP_PATH_MAX];
        if (i == most) continue;
        snprintf(here, sizeof here, "%.200s[%zu]", path, i);
        if (c->type == SP_JSON_OBJECT)
            walk_object(r, c, pattern, here);
        else
            sp_case_fault_at(r, c, here, NULL, expected, NULL);
    }
    return i;
}

static void walk_steps(struct sp_reader *r, const struct sp_json *node, const char *path)
{
    if (node->type != SP_JSON_ARRAY)
        sp_case_fault(r, path, NULL, "a list of steps, such as [ { \"idle\": \"5 min\" } ]", NULL);
    else if (walk_list(r, node, "drive[]", path, SP_STEPS_MAX - 1, "an object: a step of the drive") ==
             SP_STEPS_MAX)
        sp_case_fault(r, path, "too many steps", "at most 9999 steps", NULL);
}

static void walk_changes(struct sp_reader *r, const struct sp_json *node, const char *path)
{
    const char *expected = "an object: a change";
    if (node->type != SP_JSON_ARRAY)
        sp_case_fault(r, path, NULL,
                      "a list of changes, such as [ { \"at\": \"12 min\", \"set\": { "
                      "\"duct.inlet.blocked\": \"40 %\" } } ]",
                      NULL);
    else if (walk_list(r, node, "changes[]", path, SP_CHANGES_MAX, expected) > SP_CHANGES_MAX)
        sp_case_fault(r, path, "too many entries", "at most 200 changes", NULL);
}

/* A list that stands for a group. */
static void walk_groups(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                        const char *path)
{
    char expected[120], found[60];
    size_t n = 0;
    snprintf(expected, sizeof expected, "a list of 1 to %zu objects", row->most);
    if (node->type == SP_JSON_ARRAY) n = walk_list(r, node, row->path, path, row->most, "an object");
    if (n && n <= row->most) return;
    snprintf(found, sizeof found, n ? "more than %zu" : "an empty list", row->most);
    sp_case_fault_at(r, node, path, node->type == SP_JSON_ARRAY ? found : NULL, expected, NULL);
}

/* Both "core" and "cores" in one object: said where the singular stands. */
static void check_both(struct sp_reader *r, const struct sp_key *row, const struct sp_json *object,
                       const struct sp_json *node, const char *path)
{
    char found[120], expected[120];
    if (!row->plural || !sp_json_member(object, row->plural)) return;
    snprintf(found, sizeof found, "both %s and %s", sp_key_name(row), row->plural);
    snprintf(expected, sizeof expected, "one of them; %s is the list", row->plural);
    sp_case_fault_at(r, node, path, found, expected, NULL);
}

static void walk_group(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                       const char *path)
{
    if (node->type == SP_JSON_OBJECT) {
        walk_object(r, node, row->path, path);
        return;
    }
    if (row->or_none && node->type == SP_JSON_STRING && !strcmp(node->text, "none")) return;
    if (!strcmp(row->path, "car") && node->type == SP_JSON_STRING && r->no_car) return;
    char expected[120];
    sp_key_expected(row, expected, sizeof expected);
    sp_case_fault_at(r, node, path, NULL, expected, NULL);
}

static void walk_key(struct sp_reader *r, const struct sp_key *row, bool plural, const struct sp_json *node,
                     const char *path)
{
    if (plural)
        walk_groups(r, row, node, path);
    else if (row->shape == SP_SHAPE_GROUP)
        walk_group(r, row, node, path);
    else if (row->shape == SP_SHAPE_STEPS)
        walk_steps(r, node, path);
    else if (row->shape == SP_SHAPE_CHANGES)
        walk_changes(r, node, path);
    else if (row->or_object && node->type == SP_JSON_OBJECT)
        walk_object(r, node, row->path, path);
}

static void walk_object(struct sp_reader *r, const struct sp_json *node, const char *pattern,
                        const char *path)
{
    for (const struct sp_json *child = node->child; child; child = child->next) {
        char here[SP_PATH_MAX];
        bool plural;
        snprintf(here, sizeof here, "%.120s%s%.120s", path, *path ? "." : "", child->key);
        const struct sp_key *row = sp_key_named(pattern, child->key, &plural);
        if (!row)
            unknown(r, child, pattern, here);
        else
            walk_key(r, row, plural, child, here);
        if (row && !plural) check_both(r, row, node, child, here);
    }
}

void sp_case_walk(struct sp_reader *r)
{
    walk_object(r, r->tree, "", "");
}
