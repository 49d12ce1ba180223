/* One value out of the tree into its place in the design.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* Density of 50/50 ethylene glycol at 90 degC, which turns a volume flow into a mass flow: the state for
 * which heat data are given (ASHRAE's table). */
static const double reference_density = SP_COOLANT_REFERENCE;

void sp_key_store(const struct sp_key *row, void *to, double value)
{
    if (row->keep == SP_KEEP_DOUBLE) {
        memcpy(to, &value, sizeof value);
    } else if (row->keep == SP_KEEP_INT) {
        int whole = (int)value;
        memcpy(to, &whole, sizeof whole);
    } else if (row->keep == SP_KEEP_CHAR) {
        *(char *)to = (char)value;
    } else if (row->keep == SP_KEEP_ENUM) {
        unsigned word = (unsigned)value; /* what the compilers make of our enums */
        memcpy(to, &word, sizeof word);
    } else if (row->keep == SP_KEEP_BOOL) {
        *(bool *)to = value != 0.0;
    }
}

void sp_key_expected(const struct sp_key *row, char *out, size_t size)
{
    const char *also = row->or_none ? ", or \"none\"" : "";
    if (row->shape == SP_SHAPE_QUANTITY && row->whole)
        snprintf(out, size, "a whole number");
    else if (row->shape == SP_SHAPE_QUANTITY)
        snprintf(out, size, "%s%s", sp_kind_sample(row->kind), also);
    else if (row->shape == SP_SHAPE_WORD)
        snprintf(out, size, "%s%s", strchr(row->range, ',') ? "one of " : "", row->range);
    else if (row->shape == SP_SHAPE_FLAG || row->shape == SP_SHAPE_THREE)
        snprintf(out, size, "%s", sp_key_type(row));
    else if (row->shape == SP_SHAPE_GROUP && row->or_none)
        snprintf(out, size, "an object, or \"none\"");
    else
        snprintf(out, size, "%s %s", strchr("aeiou", *sp_key_type(row)) ? "an" : "a", sp_key_type(row));
}

/* ---- one number ------------------------------------------------------------------------------------ */

/* What a number has to be. */
struct want {
    enum sp_kind kind;
    const char *range;
    bool or_volume, whole;
};

static bool read_text(struct sp_reader *r, const struct want *w, const struct sp_json *node, const char *path,
                      double *out)
{
    char why[300], other[300];
    if (sp_quantity_read(r->units, w->kind, node->text, out, why, sizeof why)) return true;
    if (w->or_volume && sp_quantity_read(r->units, SP_K_VOLUME_FLOW, node->text, out, other, sizeof other)) {
        *out *= reference_density;
        return true;
    }
    sp_case_fault_at(r, node, path, NULL, why, NULL);
    return false;
}

/* Reads and judges one number. */
static bool read_number(struct sp_reader *r, const struct want *w, const struct sp_json *node,
                        const char *path, double *out)
{
    struct sp_range range;
    char expected[200];
    if (node->type == SP_JSON_STRING) {
        if (!read_text(r, w, node, path, out)) return false;
    } else if (node->type == SP_JSON_NUMBER && w->kind == SP_K_NUMBER) {
        *out = node->number;
    } else {
        sp_case_fault_at(r, node, path, NULL, sp_kind_sample(w->kind), NULL);
        return false;
    }
    snprintf(expected, sizeof expected, "%s%s", w->whole ? "a whole number, " : "", w->range);
    if (!sp_range_read(r->units, w->kind, w->range, &range) || !sp_range_holds(&range, *out) ||
        (w->whole && floor(*out) != *out)) {
        sp_case_fault_at(r, node, path, NULL, expected, NULL);
        return false;
    }
    return true;
}

static void read_quantity(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                          const char *path, void *to)
{
    struct want w = {row->kind, row->range, row->or_volume, row->whole};
    double value;
    if (row->or_none && node->type == SP_JSON_STRING && !strcmp(node->text, "none")) {
        sp_key_store(row, to, NAN);
        return;
    }
    if (read_number(r, &w, node, path, &value)) sp_key_store(row, to, value);
}

/* ---- lists and tables ------------------------------------------------------------------------------ */

static size_t count(const struct sp_json *array)
{
    size_t n = 0;
    for (const struct sp_json *c = array->child; c; c = c->next)
        ++n;
    return n;
}

/* Number of elements when it is a list of 1 to SP_ROWS_MAX of them; else 0 with a complaint. */
static size_t list_size(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                        const char *path)
{
    char expected[160];
    size_t n = node->type == SP_JSON_ARRAY ? count(node) : 0;
    if (n > SP_ROWS_MAX) {
        sp_case_fault_at(r, node, path, "too long a list", "at most 4096 rows", NULL);
        return 0;
    }
    if (n) return n;
    sp_key_expected(row, expected, sizeof expected);
    sp_case_fault_at(r, node, path, node->type == SP_JSON_ARRAY ? "an empty list" : NULL, expected, NULL);
    return 0;
}

static bool make_table(struct sp_reader *r, struct sp_table *t, size_t rows, size_t columns)
{
    t->cell = calloc(rows * columns, sizeof *t->cell);
    if (!t->cell) r->no_memory = true;
    t->rows = t->cell ? rows : 0;
    t->columns = t->cell ? columns : 0;
    return t->cell != NULL;
}

static void drop_table(struct sp_table *t)
{
    free(t->cell);
    *t = (struct sp_table){0};
}

static void read_list(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                      const char *path, struct sp_table *t)
{
    struct want w = {row->kind, row->range, row->or_volume, row->whole};
    size_t n = list_size(r, row, node, path), i = 0;
    bool fine = true;
    if (!n || !make_table(r, t, n, 1)) return;
    for (const struct sp_json *c = node->child; c; c = c->next, ++i) {
        char here[SP_PATH_MAX];
        snprintf(here, sizeof here, "%.200s[%zu]", path, i);
        fine = read_number(r, &w, c, here, &t->cell[i]) && fine;
    }
    if (!fine) drop_table(t);
}

/* One row of a table or matrix into `cell`. */
static bool read_row(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                     const char *path, size_t width, double *cell)
{
    bool fine = true;
    size_t j = 0;
    if (node->type != SP_JSON_ARRAY || count(node) != width) {
        char expected[80], found[60];
        snprintf(found, sizeof found, "a row of %zu", node->type == SP_JSON_ARRAY ? count(node) : 0);
        snprintf(expected, sizeof expected, "a row of %zu", width);
        sp_case_fault_at(r, node, path, node->type == SP_JSON_ARRAY ? found : NULL, expected, NULL);
        return false;
    }
    for (const struct sp_json *c = node->child; c; c = c->next, ++j) {
        struct want w = {row->kind, row->range, false, false};
        char here[SP_PATH_MAX];
        snprintf(here, sizeof here, "%.200s[%zu]", path, j);
        if (row->columns) w = (struct want){row->columns[j].kind, row->columns[j].range, false, false};
        fine = read_number(r, &w, c, here, &cell[j]) && fine;
    }
    return fine;
}

static void read_table(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                       const char *path, struct sp_table *t)
{
    size_t n = list_size(r, row, node, path), i = 0, width = row->width;
    bool fine = true;
    if (!n) return;
    if (!width && node->child->type == SP_JSON_ARRAY) width = count(node->child);
    if (!width || width > SP_ROWS_MAX || n * width > 65536) {
        sp_case_fault_at(r, node->child, path, NULL, "rows, each a list of numbers, 65536 in all at most",
                         NULL);
        return;
    }
    if (!make_table(r, t, n, width)) return;
    for (const struct sp_json *c = node->child; c; c = c->next, ++i) {
        char here[SP_PATH_MAX];
        snprintf(here, sizeof here, "%.180s[%zu]", path, i);
        fine = read_row(r, row, c, here, width, &t->cell[i * width]) && fine;
    }
    if (!fine) drop_table(t);
}

/* Coefficients over N in 1000 rev/min, kept over rev/s. */
static void read_three(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                       const char *path, double *to)
{
    const double thousand = 1000.0 / 60.0; /* rev/s */
    double three[3] = {0};
    if (node->type != SP_JSON_ARRAY) {
        sp_case_fault_at(r, node, path, NULL, "a list of three pressures", NULL);
        return;
    }
    if (!read_row(r, row, node, path, 3, three)) return;
    to[0] = three[0];
    to[1] = three[1] / thousand;
    to[2] = three[2] / (thousand * thousand);
}

/* ---- words and the rest ---------------------------------------------------------------------------- */

static void read_word(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                      const char *path, void *to)
{
    char expected[300];
    double value;
    if (node->type == SP_JSON_STRING && sp_word_value(row, node->text, &value)) {
        sp_key_store(row, to, value);
        return;
    }
    sp_key_expected(row, expected, sizeof expected);
    sp_case_fault_at(r, node, path, NULL, expected, NULL);
}

static void read_string(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                        const char *path, char **to)
{
    char expected[160];
    if (node->type == SP_JSON_STRING && *node->text) {
        *to = strdup(node->text);
        if (!*to) r->no_memory = true;
        return;
    }
    sp_key_expected(row, expected, sizeof expected);
    sp_case_fault_at(r, node, path, NULL, expected, NULL);
}

static void read_flag(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                      const char *path, void *to)
{
    if (node->type == SP_JSON_TRUE || node->type == SP_JSON_FALSE)
        sp_key_store(row, to, node->type == SP_JSON_TRUE);
    else
        sp_case_fault_at(r, node, path, NULL, "true or false", NULL);
}

void sp_case_value(struct sp_reader *r, const struct sp_key *row, const struct sp_json *node,
                   const char *path, void *to)
{
    if (node->type == SP_JSON_NULL) {
        char expected[300];
        sp_key_expected(row, expected, sizeof expected);
        sp_case_fault_at(r, node, path, NULL, expected, NULL);
        return;
    }
    switch (row->shape) {
    case SP_SHAPE_QUANTITY:
        read_quantity(r, row, node, path, to);
        break;
    case SP_SHAPE_WORD:
        read_word(r, row, node, path, to);
        break;
    case SP_SHAPE_FLAG:
        read_flag(r, row, node, path, to);
        break;
    case SP_SHAPE_TEXT:
        if (row->keep != SP_KEEP_NOTHING) read_string(r, row, node, path, to);
        break;
    case SP_SHAPE_LIST:
        read_list(r, row, node, path, to);
        break;
    case SP_SHAPE_THREE:
        read_three(r, row, node, path, to);
        break;
    case SP_SHAPE_TABLE:
    case SP_SHAPE_MATRIX:
        read_table(r, row, node, path, to);
        break;
    default:
        break;
    }
}
