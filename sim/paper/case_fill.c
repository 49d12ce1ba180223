/* Values and plain defaults into the design, row by row.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static bool needed(const struct sp_reader *r, const struct sp_key *row)
{
    return row->need == SP_NEED_ALWAYS || (row->need == SP_NEED_DRIVE && r->purpose == SP_FOR_DRIVE);
}

/* A word elsewhere that makes the key needless. */
static bool excused(const struct sp_reader *r, const struct sp_key *row)
{
    const struct sp_json *word = row->unless ? sp_case_node(r->tree, row->unless) : NULL;
    return word && word->type == SP_JSON_STRING && !strcmp(word->text, row->unless_word);
}

/* "an object with displacement, rated_power": what a missing group would have to hold. */
static void group_expected(const struct sp_reader *r, const struct sp_key *group, char *out, size_t size)
{
    const struct sp_key *row;
    size_t length;
    const char *between = " with ";
    sp_key_expected(group, out, size);
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i) {
        if (!sp_key_child(row, group->path) || !needed(r, row)) continue;
        length = strlen(out);
        snprintf(out + length, size - length, "%s%s", between, sp_key_name(row));
        between = ", ";
    }
}

static void missing(struct sp_reader *r, const struct sp_key *row, const char *path)
{
    char expected[400];
    if (row->shape == SP_SHAPE_GROUP)
        group_expected(r, row, expected, sizeof expected);
    else
        sp_key_expected(row, expected, sizeof expected);
    sp_case_fault(r, path, "nothing", expected, NULL);
}

/* Is the group that a value stands in there, as an object? */
static bool group_there(const struct sp_reader *r, const char *path)
{
    char group[SP_PATH_MAX];
    const char *dot = strrchr(path, '.');
    if (!dot) return true;
    snprintf(group, sizeof group, "%.*s", (int)(dot - path), path);
    const struct sp_json *node = sp_case_node(r->tree, group);
    return node && node->type == SP_JSON_OBJECT;
}

/* An element of a list: what is wrong with the list is said already. */
static bool of_list(const char *path)
{
    return path[strlen(path) - 1] == ']';
}

/* ---- defaults -------------------------------------------------------------------------------------- */

static void default_three(struct sp_reader *r, const struct sp_key *row, double *to)
{
    const double thousand = 1000.0 / 60.0;
    double scale = 1.0;
    const char *text = row->fallback;
    for (int i = 0; i < 3; ++i, scale *= thousand) {
        char one[32], why[200];
        size_t length = strcspn(text, ",");
        snprintf(one, sizeof one, "%.*s", (int)length, text);
        if (!sp_quantity_read(r->units, row->kind, one, &to[i], why, sizeof why)) to[i] = NAN;
        to[i] /= scale;
        text += length;
        text += strspn(text, ", ");
    }
}

static void set_default(struct sp_reader *r, const struct sp_key *row, void *to)
{
    char why[200];
    double value = 0.0;
    if (!row->fallback || row->rule) return;
    if (row->shape == SP_SHAPE_THREE) {
        default_three(r, row, to);
        return;
    }
    if (row->shape == SP_SHAPE_WORD)
        sp_word_value(row, row->fallback, &value);
    else if (row->shape == SP_SHAPE_QUANTITY &&
             !sp_quantity_read(r->units, row->kind, row->fallback, &value, why, sizeof why))
        value = NAN;
    sp_key_store(row, to, value);
}

/* Numbers are NAN until something is known of them. */
static void blank(const struct sp_key *row, void *to)
{
    if (row->shape == SP_SHAPE_QUANTITY && row->keep == SP_KEEP_DOUBLE) sp_key_store(row, to, NAN);
}

/* ---- filling --------------------------------------------------------------------------------------- */

/* How many a list holds; 0 where none stands. */
static void fill_count(struct sp_reader *r, const struct sp_key *list, const struct sp_key_spot *at)
{
    size_t *count = sp_key_count_place(list, r->design, at);
    if (count && sp_case_list(r->tree, list, at)) *count = sp_case_elements(r->tree, list, at);
}

static void fill_group(struct sp_reader *r, const struct sp_key *row, const struct sp_key_spot *at,
                       const char *path)
{
    const struct sp_json *node = sp_case_node(r->tree, path);
    if (row->plural) fill_count(r, row, at);
    if (!node && needed(r, row) && group_there(r, path) && !of_list(path)) missing(r, row, path);
    if (row->keep != SP_KEEP_BOOL) return;
    bool object = node && node->type == SP_JSON_OBJECT;
    sp_key_store(row, sp_key_place(row, r->design, at), row->or_none ? node && !object : object);
}

static void fill_row(struct sp_reader *r, const struct sp_key *row, const struct sp_key_spot *at,
                     const char *path)
{
    void *to = sp_key_place(row, r->design, at);
    const struct sp_json *node = sp_case_node(r->tree, path);
    if (row->shape == SP_SHAPE_STEPS || row->shape == SP_SHAPE_CHANGES) {
        if (!node && needed(r, row)) missing(r, row, path);
        return;
    }
    if (row->or_object && node && node->type == SP_JSON_OBJECT) return;
    if (node)
        sp_case_value(r, row, node, path, to);
    else if (needed(r, row) && !excused(r, row) && group_there(r, path))
        missing(r, row, path);
    else
        set_default(r, row, to);
}

static void fill_step(struct sp_reader *r, const struct sp_json *node, size_t i)
{
    const struct sp_key_spot at = {i, 0};
    for (const struct sp_key *row = sp_keys_drive; row->path; ++row)
        if (sp_key_of_step(row)) blank(row, sp_key_place(row, r->design, &at));
    for (const struct sp_key *row = sp_keys_drive; row->path; ++row) {
        if (!sp_key_of_step(row) || row->shape == SP_SHAPE_GROUP) continue;
        const char *rest = row->path + strlen("drive[].");
        const struct sp_json *value = sp_case_node(node, rest);
        char path[SP_PATH_MAX];
        snprintf(path, sizeof path, "drive[%zu].%s", i, rest);
        if (!value)
            set_default(r, row, sp_key_place(row, r->design, &at));
        else if (row->shape == SP_SHAPE_COLUMNS)
            sp_case_columns(r, value, path, &r->design->step[i]);
        else
            sp_case_value(r, row, value, path, sp_key_place(row, r->design, &at));
    }
}

static void fill_steps(struct sp_reader *r)
{
    const struct sp_json *drive = sp_json_member(r->tree, "drive");
    size_t n = 0, i = 0;
    if (!drive || drive->type != SP_JSON_ARRAY || r->changed) return;
    for (const struct sp_json *c = drive->child; c; c = c->next)
        ++n;
    if (!n) {
        sp_case_fault(r, "drive", "an empty list", "at least one step", NULL);
        return;
    }
    if (n >= SP_STEPS_MAX) return; /* said already */
    r->design->step = calloc(n, sizeof *r->design->step);
    if (!r->design->step) {
        r->no_memory = true;
        return;
    }
    r->design->steps = n;
    for (const struct sp_json *c = drive->child; c; c = c->next, ++i)
        fill_step(r, c, i);
}

static bool passed_over(const struct sp_reader *r, const struct sp_key *row)
{
    return sp_key_of_step(row) || !strcmp(row->path, "drive[]") || sp_key_of_change(row) ||
           (r->changed && row->shape == SP_SHAPE_STEPS) ||
           (r->no_car && (sp_key_of_car(row) || !strcmp(row->path, "car")));
}

static void fill_elements(struct sp_reader *r, const struct sp_key *row)
{
    struct sp_key_spot at = {0};
    do {
        char path[SP_PATH_MAX];
        sp_case_path(r->tree, row->path, &at, path, sizeof path);
        if (row->shape == SP_SHAPE_GROUP)
            fill_group(r, row, &at, path);
        else
            fill_row(r, row, &at, path);
    } while (sp_case_next(r->tree, row->path, &at));
}

void sp_case_fill(struct sp_reader *r)
{
    const struct sp_key *row;
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i) {
        struct sp_key_spot at = {0};
        if (sp_key_of_step(row) || sp_key_of_change(row)) continue;
        do
            blank(row, sp_key_place(row, r->design, &at));
        while (sp_case_next(r->tree, row->path, &at));
    }
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i)
        if (!passed_over(r, row)) fill_elements(r, row);
    fill_steps(r);
}
