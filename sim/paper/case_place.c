/* Paths, nodes and complaints with their places.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <stdlib.h>
#include <string.h>

static struct sp_json *nth(const struct sp_json *array, size_t index)
{
    struct sp_json *node = array && array->type == SP_JSON_ARRAY ? array->child : NULL;
    while (node && index--)
        node = node->next;
    return node;
}

/* Takes the first part off `path`, a name or an index, and goes there. */
static struct sp_json *go(const struct sp_json *from, const char **path)
{
    const char *p = *path;
    if (*p == '[') {
        char *end;
        unsigned long index = strtoul(p + 1, &end, 10);
        *path = *end == ']' ? end + 1 : end;
        return nth(from, index);
    }
    if (*p == '.') ++p;
    char name[SP_PATH_MAX];
    bool quoted = *p == '"';
    if (quoted) ++p;
    size_t length = strcspn(p, quoted ? "\"" : ".[");
    *path = p + length + (quoted && p[length]);
    if (length >= sizeof name) return NULL;
    memcpy(name, p, length);
    name[length] = '\0';
    return sp_json_member(from, name);
}

/* The node at a path, and in *above the last one on the way to it. */
static struct sp_json *find(const struct sp_json *tree, const char *path, const struct sp_json **above)
{
    struct sp_json *node = NULL;
    const struct sp_json *at = tree;
    *above = tree;
    while (*path && at) {
        at = node = go(at, &path);
        if (node) *above = node;
    }
    return node;
}

struct sp_json *sp_case_node(const struct sp_json *tree, const char *path)
{
    const struct sp_json *above;
    return find(tree, path, &above);
}

bool sp_case_given(const struct sp_reader *r, const char *path)
{
    return sp_case_node(r->tree, path) != NULL;
}

/* Keys of the car stand without "car." in a file of their own, and may be set without. */
static const char *as_in_file(const struct sp_reader *r, const char *file, const char *path)
{
    if (strncmp(path, "car.", 4)) return path;
    if (!strncmp(file, "--set ", 6)) return strncmp(file, "--set car", 9) ? path + 4 : path;
    return strcmp(file, r->name) ? path + 4 : path;
}

static bool leads_to(const char *above, const char *path)
{
    size_t length = strlen(above);
    return !strncmp(above, path, length) && (!path[length] || strchr(".[", path[length]));
}

const char *sp_case_source(const struct sp_reader *r, const char *path, char *out, size_t size)
{
    for (size_t i = r->places; i-- > 0;) {
        const struct sp_placed *p = &r->placed[i];
        if (!leads_to(p->path, path)) continue;
        snprintf(out, size, "%s%.120s", p->source, path + strlen(p->path));
        return out;
    }
    return NULL;
}

/* `node` is NULL where nothing stands; `above` is it, or the nearest one above. */
static void complain(struct sp_reader *r, struct sp_complaints *to, const struct sp_json *node,
                     const struct sp_json *above, const char *path, const char *found, const char *expected,
                     const char *hint)
{
    const char *file = above && above->file ? above->file : r->name;
    char own[2 * SP_PATH_MAX];
    const char *source = sp_case_source(r, path, own, sizeof own);
    struct sp_place at = {.file = file,
                          .line = above ? above->line : 0,
                          .path = source ? source : as_in_file(r, file, path),
                          .named_by = above ? above->named_by : NULL};
    char text[300];
    sp_json_describe(node, text, sizeof text);
    sp_complain(to, &at, found ? found : text, expected, hint);
}

void sp_case_fault(struct sp_reader *r, const char *path, const char *found, const char *expected,
                   const char *hint)
{
    const struct sp_json *above, *node = find(r->tree, path, &above);
    complain(r, r->complaints, node, above, path, found, expected, hint);
}

void sp_case_fault_at(struct sp_reader *r, const struct sp_json *node, const char *path, const char *found,
                      const char *expected, const char *hint)
{
    complain(r, r->complaints, node, node, path, found, expected, hint);
}

void sp_case_caution(struct sp_reader *r, const char *path, const char *found, const char *expected)
{
    const struct sp_json *above, *node = find(r->tree, path, &above);
    complain(r, r->cautions, node, above, path, found, expected, NULL);
}

char *sp_path_join(const char *file, const char *path)
{
    const char *slash = strrchr(file, '/');
    size_t length = slash && *path != '/' ? (size_t)(slash - file) + 1 : 0;
    char *out = malloc(length + strlen(path) + 1);
    if (!out) return NULL;
    memcpy(out, file, length);
    memcpy(out + length, path, strlen(path) + 1);
    return out;
}
