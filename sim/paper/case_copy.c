/* Copies of trees, places included.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <stdlib.h>
#include <string.h>

static bool copy_text(char **to, const char *text)
{
    *to = text ? strdup(text) : NULL;
    return *to || !text;
}

/* The node alone, without what it holds. */
static struct sp_json *copy_one(const struct sp_json *node)
{
    struct sp_json *out = calloc(1, sizeof *out);
    if (!out) return NULL;
    out->type = node->type;
    out->number = node->number;
    out->line = node->line;
    if (copy_text(&out->key, node->key) && copy_text(&out->text, node->text) &&
        copy_text(&out->file, node->file) && copy_text(&out->named_by, node->named_by))
        return out;
    sp_json_free(out);
    return NULL;
}

struct sp_json *sp_case_copy(const struct sp_json *node)
{
    struct sp_json *out = copy_one(node), **tail = out ? &out->child : NULL;
    for (const struct sp_json *c = node->child; c && out; c = c->next) {
        *tail = sp_case_copy(c);
        if (*tail) {
            tail = &(*tail)->next;
            continue;
        }
        sp_json_free(out);
        out = NULL;
    }
    return out;
}
