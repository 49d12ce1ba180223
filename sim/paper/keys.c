/* Finding rows in the key tables, and what their texts mean.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys.h"

#include "base/units_inner.h"

#include <string.h>

/* The order matters: a rule may use what stands in an earlier table. */
static const struct sp_key *const tables[] = {sp_keys_case,    sp_keys_drive, sp_keys_body, sp_keys_engine,
                                              sp_keys_oil,     sp_keys_circuit, sp_keys_duct, sp_keys_exit,
                                              sp_keys_core,    sp_keys_fan,   sp_keys_tank, sp_keys_change};
enum { TABLES = sizeof tables / sizeof *tables };

const struct sp_key *sp_key_row(size_t i)
{
    for (size_t t = 0; t < TABLES; ++t)
        for (const struct sp_key *row = tables[t]; row->path; ++row)
            if (i-- == 0) return row;
    return NULL;
}

const struct sp_key *sp_key_find(const char *path)
{
    for (size_t t = 0; t < TABLES; ++t)
        for (const struct sp_key *row = tables[t]; row->path; ++row)
            if (!strcmp(row->path, path)) return row;
    return NULL;
}

bool sp_key_child(const struct sp_key *row, const char *group)
{
    size_t length = strlen(group);
    if (strncmp(row->path, group, length)) return false;
    const char *rest = row->path + length;
    if (length && *rest++ != '.') return false;
    return *rest && !strpbrk(rest, ".[");
}

const char *sp_key_name(const struct sp_key *row)
{
    const char *dot = strrchr(row->path, '.');
    return dot ? dot + 1 : row->path;
}

const struct sp_key *sp_key_named(const char *group, const char *key, bool *plural)
{
    *plural = false;
    for (size_t t = 0; t < TABLES; ++t)
        for (const struct sp_key *row = tables[t]; row->path; ++row) {
            bool list = row->plural && !strcmp(row->plural, key);
            if ((!list && strcmp(sp_key_name(row), key)) || !sp_key_child(row, group)) continue;
            *plural = list;
            return row;
        }
    return NULL;
}

static bool leads_to(const char *group, const char *path)
{
    size_t length = strlen(group);
    return !strncmp(group, path, length) && (!path[length] || path[length] == '.');
}

/* Such a group is the first row of its table: this is asked often. */
size_t sp_key_lists(const char *path, const struct sp_key *lists[SP_KEY_LISTS])
{
    size_t n = 0;
    for (size_t t = 0; t < TABLES && n < SP_KEY_LISTS; ++t)
        if (tables[t]->plural && leads_to(tables[t]->path, path)) lists[n++] = tables[t];
    return n;
}

bool sp_key_of_change(const struct sp_key *row)
{
    return !strncmp(row->path, "changes[]", 9);
}

bool sp_key_of_step(const struct sp_key *row)
{
    return !strncmp(row->path, "drive[].", 8);
}

bool sp_key_of_car(const struct sp_key *row)
{
    return !strncmp(row->path, "car.", 4);
}

/* ---- nearest key ----------------------------------------------------------------------------------- */

enum { LONGEST_KEY = 64 };

static size_t least(size_t a, size_t b, size_t c)
{
    size_t m = a < b ? a : b;
    return m < c ? m : c;
}

size_t sp_edit_distance(const char *a, const char *b)
{
    size_t row[LONGEST_KEY + 1], na = strnlen(a, LONGEST_KEY), nb = strnlen(b, LONGEST_KEY);
    for (size_t j = 0; j <= nb; ++j)
        row[j] = j;
    for (size_t i = 1; i <= na; ++i) {
        size_t corner = row[0];
        row[0] = i;
        for (size_t j = 1; j <= nb; ++j) {
            size_t above = row[j];
            row[j] = least(above + 1, row[j - 1] + 1, corner + (a[i - 1] != b[j - 1]));
            corner = above;
        }
    }
    return row[nb];
}

bool sp_key_near(const char *written, size_t distance)
{
    size_t length = strlen(written), most = length / 2;
    if (length >= 3 && most < 2) most = 2; /* two letters that changed places count as two */
    return distance <= (most > 1 ? most : 1);
}

const char *sp_key_nearest(const char *group, const char *key)
{
    const char *best = NULL;
    size_t distance = 0;
    const struct sp_key *row;
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i) {
        const char *const names[] = {sp_key_name(row), row->plural};
        if (!sp_key_child(row, group)) continue;
        for (size_t k = 0; k < 2 && names[k]; ++k) {
            size_t d = sp_edit_distance(names[k], key);
            if (best && d >= distance) continue;
            best = names[k];
            distance = d;
        }
    }
    return best && sp_key_near(key, distance) ? best : NULL;
}

/* ---- ranges ---------------------------------------------------------------------------------------- */

static bool bound(struct sp_units *u, enum sp_kind kind, const char *from, size_t length, double *out)
{
    char text[64], why[200];
    if (length >= sizeof text) return false;
    memcpy(text, from, length);
    text[length] = '\0';
    return sp_quantity_read(u, kind, text, out, why, sizeof why);
}

bool sp_range_read(struct sp_units *u, enum sp_kind kind, const char *text, struct sp_range *out)
{
    const char *cut;
    *out = (struct sp_range){0};
    out->low_open = !strncmp(text, "above ", 6);
    if (out->low_open) text += 6;
    size_t gap = 0;
    if ((cut = strstr(text, ", at most ")) != NULL)
        gap = 10;
    else if ((cut = strstr(text, ", below ")) != NULL)
        gap = 8;
    else if ((cut = strstr(text, " to ")) != NULL)
        gap = 4;
    if (!cut) return false;
    out->high_open = gap == 8;
    return bound(u, kind, text, (size_t)(cut - text), &out->low) &&
           bound(u, kind, cut + gap, strlen(cut + gap), &out->high);
}

bool sp_range_holds(const struct sp_range *r, double x)
{
    return (r->low_open ? x > r->low : x >= r->low) && (r->high_open ? x < r->high : x <= r->high);
}

/* ---- texts ----------------------------------------------------------------------------------------- */

const char *sp_kind_sample(enum sp_kind kind)
{
    return sp_kind_row(kind)->example;
}

bool sp_word_value(const struct sp_key *row, const char *text, double *value)
{
    for (const struct sp_word *w = row->words; w->text; ++w) {
        if (strcmp(w->text, text)) continue;
        *value = w->value;
        return true;
    }
    return false;
}

const char *sp_key_type(const struct sp_key *row)
{
    if (row->type) return row->type;
    switch (row->shape) {
    case SP_SHAPE_QUANTITY:
        return row->whole ? "whole number" : sp_kind_name(row->kind);
    case SP_SHAPE_WORD:
        return "word";
    case SP_SHAPE_FLAG:
        return "true or false";
    case SP_SHAPE_TEXT:
        return "text";
    default:
        return "object";
    }
}

const char *sp_key_need(const struct sp_key *row)
{
    if (row->when) return row->when;
    if (row->fallback) return "default";
    if (row->need == SP_NEED_ALWAYS) return "required";
    return row->need == SP_NEED_DRIVE ? "required for a drive" : "optional";
}

static bool has_unit(const struct sp_key *row)
{
    return row->shape == SP_SHAPE_QUANTITY || row->shape == SP_SHAPE_LIST || row->shape == SP_SHAPE_MATRIX ||
           row->shape == SP_SHAPE_THREE;
}

size_t sp_key_count(void)
{
    size_t n = 0;
    while (sp_key_row(n))
        ++n;
    return n;
}

bool sp_key_at(size_t i, struct sp_key_info *out)
{
    const struct sp_key *row = sp_key_row(i);
    if (!row) return false;
    *out = (struct sp_key_info){.path = row->path,
                                .type = sp_key_type(row),
                                .unit = has_unit(row) ? sp_kind_si(row->kind) : "",
                                .fallback = row->fallback,
                                .need = sp_key_need(row),
                                .range = row->range ? row->range : "",
                                .meaning = row->meaning,
                                .basis = row->basis ? row->basis : ""};
    return true;
}
