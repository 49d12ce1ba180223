/* Elements of lists: as the file writes them, "cores": [..], or "core": {..} for one alone.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <string.h>

/* Appends `length` characters; a path too long is cut. */
static void append(char *out, size_t size, const char *text, size_t length)
{
    size_t have = strlen(out);
    if (have + length + 1 > size) length = size - have - 1;
    memcpy(out + have, text, length);
    out[have + length] = '\0';
}

/* The node of a path that ends in a point, or is empty. */
static const struct sp_json *group_node(const struct sp_json *tree, const char *path)
{
    char group[SP_PATH_MAX];
    size_t length = strlen(path);
    if (!length) return tree;
    snprintf(group, sizeof group, "%.*s", (int)(length - 1), path);
    return sp_case_node(tree, group);
}

void sp_case_path(const struct sp_json *tree, const char *pattern, const struct sp_key_spot *at, char *out,
                  size_t size)
{
    const struct sp_key *lists[SP_KEY_LISTS];
    const size_t index[SP_KEY_LISTS] = {at->outer, at->inner};
    size_t n = sp_key_lists(pattern, lists), done = 0;
    *out = '\0';
    for (size_t i = 0; i < n && i < SP_KEY_LISTS; ++i) {
        const char *name = sp_key_name(lists[i]);
        append(out, size, pattern + done, (size_t)(name - lists[i]->path) - done);
        done = strlen(lists[i]->path);
        if (sp_json_member(group_node(tree, out), lists[i]->plural)) {
            char element[80];
            snprintf(element, sizeof element, "%s[%zu]", lists[i]->plural, index[i]);
            append(out, size, element, strlen(element));
        } else {
            append(out, size, name, strlen(name));
        }
    }
    append(out, size, pattern + done, strlen(pattern + done));
}

struct sp_json *sp_case_node_at(const struct sp_reader *r, const char *pattern, const struct sp_key_spot *at)
{
    char path[SP_PATH_MAX];
    sp_case_path(r->tree, pattern, at, path, sizeof path);
    return sp_case_node(r->tree, path);
}

bool sp_case_given_at(const struct sp_reader *r, const char *pattern, const struct sp_key_spot *at)
{
    return sp_case_node_at(r, pattern, at) != NULL;
}

void sp_case_fault_of(struct sp_reader *r, const char *pattern, const struct sp_key_spot *at,
                      const char *found, const char *expected, const char *hint)
{
    char path[SP_PATH_MAX];
    sp_case_path(r->tree, pattern, at, path, sizeof path);
    sp_case_fault(r, path, found, expected, hint);
}

void sp_case_caution_of(struct sp_reader *r, const char *pattern, const struct sp_key_spot *at,
                        const char *found, const char *expected)
{
    char path[SP_PATH_MAX];
    sp_case_path(r->tree, pattern, at, path, sizeof path);
    sp_case_caution(r, path, found, expected);
}

/* ---- lists ----------------------------------------------------------------------------------------- */

const struct sp_json *sp_case_list(const struct sp_json *tree, const struct sp_key *list,
                                   const struct sp_key_spot *at)
{
    char path[SP_PATH_MAX];
    sp_case_path(tree, list->path, at, path, sizeof path);
    char *bracket = strrchr(path, '[');
    if (!bracket || path[strlen(path) - 1] != ']') return NULL;
    *bracket = '\0';
    return sp_case_node(tree, path);
}

size_t sp_case_elements(const struct sp_json *tree, const struct sp_key *list, const struct sp_key_spot *at)
{
    const struct sp_json *array = sp_case_list(tree, list, at);
    size_t n = 0;
    if (array && array->type == SP_JSON_ARRAY)
        for (const struct sp_json *c = array->child; c && n < list->most; c = c->next)
            ++n;
    return n ? n : 1;
}

bool sp_case_next(const struct sp_json *tree, const char *pattern, struct sp_key_spot *at)
{
    const struct sp_key *lists[SP_KEY_LISTS];
    size_t n = sp_key_lists(pattern, lists);
    if (n > 1 && at->inner + 1 < sp_case_elements(tree, lists[1], at)) {
        ++at->inner;
        return true;
    }
    at->inner = 0;
    ++at->outer;
    return n > 0 && at->outer < sp_case_elements(tree, lists[0], at);
}
