/* From files to one tree: the case, the car it names, the overrides.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <stdlib.h>
#include <string.h>

enum { CARS_MAX = 8 }; /* longest chain of cars that name each other */

/* Takes a member out of its object. */
static struct sp_json *take(struct sp_json *object, const char *key)
{
    for (struct sp_json **link = &object->child; *link; link = &(*link)->next) {
        struct sp_json *node = *link;
        if (strcmp(node->key, key)) continue;
        *link = node->next;
        node->next = NULL;
        return node;
    }
    return NULL;
}

static bool refuse(struct sp_reader *r, const struct sp_json *node, const char *found, const char *expected)
{
    struct sp_place at = {.file = node->file,
                          .line = node->line,
                          .path = node->key ? node->key : NULL,
                          .named_by = node->named_by};
    char text[300];
    sp_json_describe(node, text, sizeof text);
    sp_complain(r->complaints, &at, found ? found : text, expected, NULL);
    return false;
}

static bool base_on(struct sp_reader *r, struct sp_json **car, const char *namer, int depth);

/* The car in the file that `name` gives, seen from `namer`; NULL with a complaint. */
static struct sp_json *car_of(struct sp_reader *r, const struct sp_json *name, const char *namer, int depth)
{
    if (name->type != SP_JSON_STRING || !*name->text) {
        refuse(r, name, NULL, "the path of a car's file");
        return NULL;
    }
    if (r->no_files || depth >= CARS_MAX) {
        refuse(r, name, NULL,
               r->no_files ? "an object, for no files are read here"
                           : "no more than 8 cars that name each other");
        return NULL;
    }
    char *file = sp_path_join(namer, name->text);
    if (!file) {
        r->no_memory = true;
        return NULL;
    }
    struct sp_json *car = sp_json_read(file, namer, r->complaints);
    if (car && car->type != SP_JSON_OBJECT) {
        refuse(r, car, NULL, "an object: the car");
        sp_json_free(car);
        car = NULL;
    }
    if (car && !base_on(r, &car, file, depth + 1)) {
        sp_json_free(car);
        car = NULL;
    }
    free(file);
    return car;
}

/* Where a list is laid over a single group, or over another list, it stands for all of it. */
static void give_way(struct sp_json *under, const struct sp_json *over, const char *group)
{
    for (const struct sp_json *c = over->child; c; c = c->next) {
        bool plural;
        const struct sp_key *row = sp_key_named(group, c->key, &plural);
        struct sp_json *below = row ? sp_json_member(under, sp_key_name(row)) : NULL;
        if (!row || !below) continue;
        if (plural)
            sp_json_drop(under, sp_key_name(row));
        else if (c->type == SP_JSON_OBJECT && below->type == SP_JSON_OBJECT)
            give_way(below, c, row->path);
    }
}

/* Lays a car that has `from` over the one named there. */
static bool base_on(struct sp_reader *r, struct sp_json **car, const char *namer, int depth)
{
    struct sp_json *from = take(*car, "from");
    if (!from) return true;
    struct sp_json *under = car_of(r, from, namer, depth);
    sp_json_free(from);
    if (!under) return false;
    give_way(under, *car, "car");
    *car = sp_json_merge(under, *car);
    return *car != NULL;
}

static bool load_car(struct sp_reader *r)
{
    struct sp_json *car = sp_json_member(r->tree, "car");
    if (!car || (car->type != SP_JSON_STRING && car->type != SP_JSON_OBJECT)) return true; /* seen later */
    car = take(r->tree, "car");
    bool fine = true;
    if (car->type == SP_JSON_STRING) {
        struct sp_json *read = car_of(r, car, r->name, 0);
        fine = read != NULL;
        sp_json_free(car);
        car = read;
    } else {
        fine = base_on(r, &car, r->name, 0);
    }
    if (car && !sp_json_put(r->tree, "car", car)) {
        r->no_memory = true;
        return false;
    }
    return fine;
}

static bool names_car(const struct sp_setting *s)
{
    return !strcmp(s->path, "car") || !strcmp(s->path, "car.from");
}

/* Applies the settings that name the car, or all others. */
static void apply(struct sp_reader *r, char *const *set, size_t sets, bool of_car)
{
    for (size_t i = 0; i < sets; ++i) {
        struct sp_setting s;
        struct sp_complaints aside = {0}, *to = r->complaints;
        if (of_car) r->complaints = &aside; /* what is wrong with it is said once, in the second round */
        bool fine = sp_setting_read(r, set[i], &s);
        r->complaints = to;
        sp_complaints_free(&aside);
        if (!fine || names_car(&s) != of_car) continue;
        if (r->no_car && !strncmp(s.path, "car.", 4)) continue;
        sp_setting_apply(r, &s);
    }
}

/* A car's file where a case belongs, which would be a complaint for each of its keys. */
static bool is_car(struct sp_reader *r)
{
    static const char *const telling[] = {"body", "engine", "duct", "ducts"};
    const struct sp_json *key = NULL;
    if (sp_json_member(r->tree, "car")) return false;
    for (size_t i = 0; i < sizeof telling / sizeof *telling && !key; ++i)
        key = sp_json_member(r->tree, telling[i]);
    if (!key) return false;
    struct sp_place at = {.file = key->file, .line = key->line, .path = key->key, .named_by = key->named_by};
    sp_complain(r->complaints, &at, "a key of a car", "the keys of a case: air, car, drive, limits",
                "this looks like a car; name it under \"car\"");
    return true;
}

bool sp_case_load(struct sp_reader *r, const char *text, size_t size, char *const *set, size_t sets)
{
    r->tree = text ? sp_json_parse(r->name, NULL, text, size, r->complaints)
                   : sp_json_read(r->name, NULL, r->complaints);
    if (!r->tree) return false;
    if (r->tree->type != SP_JSON_OBJECT) return refuse(r, r->tree, NULL, "an object: the case");
    apply(r, set, sets, true);
    if (is_car(r)) return false;
    r->no_car = !load_car(r);
    apply(r, set, sets, false);
    return true;
}
