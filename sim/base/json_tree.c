/* JSON trees: finding, putting, merging, describing.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/json.h"
#include "base/text.h"

#include <stdlib.h>
#include <string.h>

void sp_json_free(struct sp_json *node)
{
    while (node) {
        struct sp_json *next = node->next;
        sp_json_free(node->child);
        free(node->key);
        free(node->text);
        free(node->file);
        free(node->named_by);
        free(node);
        node = next;
    }
}

/* Frees a node without its siblings. */
static void free_one(struct sp_json *node)
{
    if (node) node->next = NULL;
    sp_json_free(node);
}

/* The link that holds the member, or the empty link at the end. */
static struct sp_json **link_of(struct sp_json *object, const char *key)
{
    struct sp_json **link = &object->child;
    while (*link && !((*link)->key && strcmp((*link)->key, key) == 0)) link = &(*link)->next;
    return link;
}

struct sp_json *sp_json_member(const struct sp_json *object, const char *key)
{
    struct sp_json *node = object && object->type == SP_JSON_OBJECT ? object->child : NULL;
    while (node && !(node->key && strcmp(node->key, key) == 0)) node = node->next;
    return node;
}

/* Sets `node` in the place of what the link holds. */
static void replace(struct sp_json **link, struct sp_json *node)
{
    struct sp_json *old = *link;
    node->next = old ? old->next : NULL;
    *link = node;
    free_one(old);
}

bool sp_json_put(struct sp_json *object, const char *key, struct sp_json *value)
{
    size_t size = strlen(key) + 1;
    char *own;
    if (!value) return false;
    own = object && object->type == SP_JSON_OBJECT ? malloc(size) : NULL;
    if (!own) {
        free_one(value);
        return false;
    }
    memcpy(own, key, size);
    free(value->key);
    value->key = own;
    replace(link_of(object, own), value);
    return true;
}

bool sp_json_drop(struct sp_json *object, const char *key)
{
    struct sp_json **link, *node;
    if (!object || object->type != SP_JSON_OBJECT) return false;
    link = link_of(object, key);
    node = *link;
    if (!node) return false;
    *link = node->next;
    free_one(node);
    return true;
}

/* `over` takes the key of `under`, which is consumed. */
static struct sp_json *take_key(struct sp_json *under, struct sp_json *over)
{
    free(over->key);
    over->key = under->key;
    under->key = NULL;
    free_one(under);
    return over;
}

struct sp_json *sp_json_merge(struct sp_json *under, struct sp_json *over)
{
    struct sp_json *member;
    if (!under || !over) return under ? under : over;
    if (under->type != SP_JSON_OBJECT || over->type != SP_JSON_OBJECT) {
        over->next = under->next; /* a sibling of the one it replaces */
        return take_key(under, over);
    }
    while ((member = over->child) != NULL) {
        struct sp_json **link = link_of(under, member->key);
        over->child = member->next;
        member->next = NULL;
        *link = sp_json_merge(*link, member);
    }
    free_one(over);
    return under;
}

static void describe_text(const char *text, const char *quote, char *out, size_t size)
{
    size_t length = strlen(text), kept = sp_text_cut(text, length, 60);
    snprintf(out, size, "%s%.*s%s%s", quote, (int)kept, text, kept < length ? "..." : "", quote);
}

void sp_json_describe(const struct sp_json *node, char *out, size_t size)
{
    static const char *const words[] = {[SP_JSON_NULL] = "null",      [SP_JSON_FALSE] = "false",
                                        [SP_JSON_TRUE] = "true",      [SP_JSON_NUMBER] = "a number",
                                        [SP_JSON_STRING] = "a string", [SP_JSON_ARRAY] = "an array",
                                        [SP_JSON_OBJECT] = "an object"};
    if (size == 0) return;
    if (!node)
        snprintf(out, size, "nothing");
    else if (node->type == SP_JSON_STRING && node->text)
        describe_text(node->text, "\"", out, size);
    else if (node->type == SP_JSON_NUMBER && node->text)
        describe_text(node->text, "", out, size);
    else
        snprintf(out, size, "%s", words[node->type]);
}
