/* Strict JSON: scanned by ourselves, parsed by cJSON, kept as a tree with lines.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/json.h"

#include "base/file.h"
#include "base/json_scan.h"
#include "base/number.h"

#include <cjson/cJSON.h>
#include <stdlib.h>
#include <string.h>

enum { CJSON_NUMBER_MOST = 63, FILE_MOST = 64 * 1024 * 1024, PATH_MOST = 500 };

struct build {
    const char *text, *name, *named_by;
    const struct sp_json_marks *marks;
    size_t next; /* the mark of the next value */
    struct sp_complaints *complaints;
    char path[PATH_MOST];
    size_t path_length;
};

static char *copy(const char *text, size_t length)
{
    char *to = malloc(length + 1);
    if (!to) return NULL;
    memcpy(to, text, length);
    to[length] = '\0';
    return to;
}

static bool copy_to(char **to, const char *text)
{
    *to = text ? copy(text, strlen(text)) : NULL;
    return *to || !text;
}

/* ---- duplicate keys ------------------------------------------------------------------------ */

struct member {
    const char *key;
    long line;
    size_t index;
};

static int by_key(const void *a, const void *b)
{
    const struct member *x = a, *y = b;
    int order = strcmp(x->key, y->key);
    return order ? order : (x->index > y->index) - (x->index < y->index);
}

static void complain_doubled(struct build *b, const struct member *first, const struct member *again)
{
    struct sp_place place = {b->name, again->line, b->path, b->named_by};
    char found[160], path[PATH_MOST + 130];
    snprintf(path, sizeof path, "%s%s%.120s", b->path, b->path_length ? "." : "", again->key);
    place.path = path;
    snprintf(found, sizeof found, "the key \"%.80s\" again, first on line %ld", again->key, first->line);
    sp_complain(b->complaints, &place, found, "each key once", NULL);
}

static void check_keys(struct build *b, struct member *list, size_t count)
{
    size_t first = 0;
    qsort(list, count, sizeof *list, by_key);
    for (size_t i = 1; i < count; i++) {
        if (strcmp(list[first].key, list[i].key) == 0)
            complain_doubled(b, &list[first], &list[i]);
        else
            first = i;
    }
}

/* ---- from cJSON to our tree ---------------------------------------------------------------- */

static enum sp_json_type type_of(const cJSON *item)
{
    if (cJSON_IsObject(item)) return SP_JSON_OBJECT;
    if (cJSON_IsArray(item)) return SP_JSON_ARRAY;
    if (cJSON_IsString(item)) return SP_JSON_STRING;
    if (cJSON_IsNumber(item)) return SP_JSON_NUMBER;
    return cJSON_IsTrue(item) ? SP_JSON_TRUE : cJSON_IsFalse(item) ? SP_JSON_FALSE : SP_JSON_NULL;
}

/* Appends to the path; too long a path is cut, which harms only the complaint. */
static void step_into(struct build *b, const struct sp_json *node, size_t index)
{
    size_t room = sizeof b->path - b->path_length;
    int n = node->key ? snprintf(b->path + b->path_length, room, "%s%s", b->path_length ? "." : "", node->key)
                      : snprintf(b->path + b->path_length, room, "[%zu]", index);
    b->path_length += n < 0 ? 0 : (size_t)n < room ? (size_t)n : room - 1;
}

static bool build_inside(struct build *b, const cJSON *item, struct sp_json *node);

static struct sp_json *build_node(struct build *b, const cJSON *item, size_t index)
{
    const struct sp_json_mark *mark = &b->marks->list[b->next++];
    struct sp_json *node = calloc(1, sizeof *node);
    size_t path_length = b->path_length;
    bool fine;
    if (!node) return NULL;
    node->type = type_of(item);
    node->line = mark->line;
    fine = copy_to(&node->file, b->name) && copy_to(&node->named_by, b->named_by) &&
           copy_to(&node->key, item->string);
    if (fine && node->type == SP_JSON_NUMBER) {
        sp_number_parse(b->text + mark->at, b->text + mark->at + mark->length, &node->number);
        node->text = copy(b->text + mark->at, mark->length);
        fine = node->text != NULL;
    }
    if (fine && node->type == SP_JSON_STRING) fine = copy_to(&node->text, item->valuestring);
    if (fine && item->child) {
        if (b->next > 1) step_into(b, node, index);
        fine = build_inside(b, item, node);
        b->path_length = path_length;
        b->path[path_length] = '\0';
    }
    if (fine) return node;
    sp_json_free(node);
    return NULL;
}

static bool build_inside(struct build *b, const cJSON *item, struct sp_json *node)
{
    struct sp_json **tail = &node->child;
    size_t count = 0, i = 0;
    struct member *members = NULL;
    for (const cJSON *c = item->child; c; c = c->next) count++;
    if (node->type == SP_JSON_OBJECT) {
        members = malloc(count * sizeof *members);
        if (!members) return false;
    }
    for (const cJSON *c = item->child; c; c = c->next, i++) {
        size_t mark = b->next;
        *tail = build_node(b, c, i);
        if (!*tail) break;
        if (members) members[i] = (struct member){(*tail)->key, b->marks->list[mark].key_line, i};
        tail = &(*tail)->next;
    }
    if (members && i == count) check_keys(b, members, count);
    free(members);
    return i == count;
}

/* ---- parsing ------------------------------------------------------------------------------- */

/* Many a cJSON cuts numbers longer than its buffer of 63 and stumbles over the rest; as the values come from
 * our own reading, it gets a copy of the text in which such a number is a 0 and blanks. NULL: no memory. */
static char *shorten_numbers(const char *text, size_t size, const struct sp_json_marks *marks)
{
    char *out = copy(text, size);
    for (size_t i = 0; out && i < marks->count; i++) {
        const struct sp_json_mark *m = &marks->list[i];
        if (m->length <= CJSON_NUMBER_MOST) continue;
        memset(out + m->at, ' ', m->length);
        out[m->at] = '0';
    }
    return out;
}

static void complain_memory(const char *name, const char *named_by, struct sp_complaints *complaints)
{
    struct sp_place place = {name, 0, NULL, named_by};
    sp_complain(complaints, &place, "too little memory", "memory enough for the file", NULL);
}

struct sp_json *sp_json_parse(const char *name, const char *named_by, const char *text, size_t size,
                              struct sp_complaints *complaints)
{
    struct sp_json_marks marks = {0};
    struct build b = {.text = text, .name = name, .named_by = named_by, .marks = &marks,
                      .complaints = complaints};
    struct sp_json *tree = NULL;
    if (sp_json_scan(name, named_by, text, size, &marks, complaints)) {
        char *plain = shorten_numbers(text, size, &marks);
        cJSON *root = plain ? cJSON_ParseWithLengthOpts(plain, size, NULL, false) : NULL;
        tree = root ? build_node(&b, root, 0) : NULL;
        if (!tree) complain_memory(name, named_by, complaints);
        cJSON_Delete(root);
        free(plain);
    }
    free(marks.list);
    return tree;
}

struct sp_json *sp_json_read(const char *file, const char *named_by, struct sp_complaints *complaints)
{
    struct sp_place place = {file, 0, NULL, named_by};
    struct sp_json *tree;
    size_t size;
    char *text;
    if (!sp_file_read(&place, FILE_MOST, &text, &size, complaints)) return NULL;
    tree = sp_json_parse(file, named_by, text, size, complaints);
    free(text);
    return tree;
}

static void forget_lines(struct sp_json *node)
{
    for (; node; node = node->next) {
        node->line = 0;
        forget_lines(node->child);
    }
}

struct sp_json *sp_json_value(const char *name, const char *text)
{
    struct sp_complaints unused = {0};
    struct sp_json *node = sp_json_parse(name, NULL, text, strlen(text), &unused);
    if (unused.count > 0) { /* twice the same key */
        sp_json_free(node);
        node = NULL;
    }
    sp_complaints_free(&unused);
    forget_lines(node); /* there are no lines on a command line */
    if (node) return node;
    node = calloc(1, sizeof *node);
    if (!node) return NULL;
    node->type = SP_JSON_STRING;
    if (copy_to(&node->file, name) && copy_to(&node->text, text)) return node;
    sp_json_free(node);
    return NULL;
}
