/* The shape of the tree: keys that nobody knows, and objects where objects belong.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <string.h>

static void walk_object(struct sp_reader *r, const struct sp_json *node, const char *pattern,
                        const char *path);

static bool belongs_to_car(const char *key)
{
    char path[SP_PATH_MAX];
    snprintf(path, sizeof path, "car.%.120s", key);
    return sp_key_find(path) != NULL;
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

static void walk_steps(struct sp_reader *r, const struct sp_json *node, const char *path)
{
    size_t i = 0;
    if (node->type != SP_JSON_ARRAY) {
        sp_case_fault(r, path, NULL, "a list of steps, such as [ { \"idle\": \"5 min\" } ]", NULL);
        return;
    }
    for (const struct sp_json *step = node->child; step && i < SP_STEPS_MAX; step = step->next, ++i) {
        char here[SP_PATH_MAX];
        snprintf(here, sizeof here, "%.200s[%zu]", path, i);
        if (step->type == SP_JSON_OBJECT)
            walk_object(r, step, "drive[]", here);
        else
            sp_case_fault_at(r, step, here, NULL, "an object: a step of the drive", NULL);
    }
    if (i == SP_STEPS_MAX) sp_case_fault(r, path, "too many steps", "at most 9999 steps", NULL);
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

static void walk_object(struct sp_reader *r, const struct sp_json *node, const char *pattern,
                        const char *path)
{
    for (const struct sp_json *child = node->child; child; child = child->next) {
        char here[SP_PATH_MAX], kind[SP_PATH_MAX];
        snprintf(here, sizeof here, "%.120s%s%.120s", path, *path ? "." : "", child->key);
        snprintf(kind, sizeof kind, "%.120s%s%.120s", pattern, *pattern ? "." : "", child->key);
        const struct sp_key *row = strpbrk(child->key, ".[") ? NULL : sp_key_find(kind);
        if (!row)
            unknown(r, child, pattern, here);
        else if (row->shape == SP_SHAPE_GROUP)
            walk_group(r, row, child, here);
        else if (row->shape == SP_SHAPE_STEPS)
            walk_steps(r, child, here);
        else if (row->or_object && child->type == SP_JSON_OBJECT)
            walk_object(r, child, kind, here);
    }
}

void sp_case_walk(struct sp_reader *r)
{
    walk_object(r, r->tree, "", "");
}
