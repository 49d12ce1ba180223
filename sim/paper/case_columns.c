/* Which heading of a trace is which of our columns.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <stdlib.h>
#include <string.h>

static bool column_of(const char *name, enum sp_column *out)
{
    for (int c = 0; c < SP_COLUMNS; ++c) {
        if (strcmp(sp_column_name((enum sp_column)c), name)) continue;
        *out = (enum sp_column)c;
        return true;
    }
    return false;
}

static void unknown(struct sp_reader *r, const struct sp_json *node, const char *path)
{
    const char *best = sp_column_name((enum sp_column)0);
    char hint[120];
    for (int c = 1; c < SP_COLUMNS; ++c) {
        const char *name = sp_column_name((enum sp_column)c);
        if (sp_edit_distance(name, node->key) < sp_edit_distance(best, node->key)) best = name;
    }
    bool near = sp_key_near(node->key, sp_edit_distance(best, node->key));
    snprintf(hint, sizeof hint, "nearest known key is \"%s\"", best);
    sp_case_fault_at(r, node, path, "an unknown key", "a column of a trace", near ? hint : NULL);
}

/* A text of its own for the format; NULL with a complaint when it will not do. */
static const char *text_of(struct sp_reader *r, const struct sp_json *node, const char *path,
                           const char *expected)
{
    char *copy = NULL;
    if (node->type != SP_JSON_STRING || !*node->text) {
        sp_case_fault_at(r, node, path, NULL, expected, NULL);
        return NULL;
    }
    copy = strdup(node->text);
    if (!copy) r->no_memory = true;
    return copy;
}

static void check_unit(struct sp_reader *r, const struct sp_json *node, const char *path, enum sp_column c)
{
    double scale, offset;
    char why[300];
    if (node->type != SP_JSON_STRING) return;
    if (c == SP_COL_MARK)
        sp_case_fault_at(r, node, path, NULL, "no unit, for marks are text", NULL);
    else if (!sp_unit_scale(r->units, sp_column_kind(c), node->text, &scale, &offset, why, sizeof why))
        sp_case_fault_at(r, node, path, NULL, why, NULL);
}

static void read_mapping(struct sp_reader *r, const struct sp_json *node, const char *path, enum sp_column c,
                         struct sp_trace_format *format)
{
    bool named = false;
    for (const struct sp_json *m = node->child; m; m = m->next) {
        char here[SP_PATH_MAX];
        snprintf(here, sizeof here, "%.120s.%.100s", path, m->key);
        if (!strcmp(m->key, "name")) {
            format->column[c].heading = text_of(r, m, here, "the heading in the file");
            named = true;
        } else if (!strcmp(m->key, "unit")) {
            format->column[c].unit = text_of(r, m, here, "a unit");
            check_unit(r, m, here, c);
        } else {
            sp_case_fault_at(r, m, here, "an unknown key", "name or unit", NULL);
        }
    }
    if (!named) sp_case_fault_at(r, node, path, "no name", "{\"name\": ..., \"unit\": ...}", NULL);
}

void sp_case_columns(struct sp_reader *r, const struct sp_json *node, const char *path, struct sp_step *step)
{
    if (node->type != SP_JSON_OBJECT) {
        sp_case_fault_at(r, node, path, NULL, "an object: the columns and their headings", NULL);
        return;
    }
    for (const struct sp_json *m = node->child; m; m = m->next) {
        enum sp_column c;
        char here[SP_PATH_MAX];
        snprintf(here, sizeof here, "%.120s.%.100s", path, m->key);
        if (!column_of(m->key, &c))
            unknown(r, m, here);
        else if (m->type == SP_JSON_OBJECT)
            read_mapping(r, m, here, c, &step->format);
        else
            step->format.column[c].heading =
                text_of(r, m, here, "the heading in the file, or an object with name and unit");
    }
}
