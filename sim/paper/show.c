/* Every input as understood: the user's own text, the value in SI, what a default rests on.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/text.h"
#include "case.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* One input to be shown. */
struct entry {
    const struct sp_key *row;
    const struct sp_json *node; /* NULL: not given */
    const char *path;
    const void *at;
};

struct shower {
    struct sp_reader *reader;
    FILE *to;
    bool json, first;
};

/* ---- pieces ---------------------------------------------------------------------------------------- */

/* A text inside JSON quotes, or bare with '?' for what a terminal should not get. */
static void put_text(FILE *to, const char *text, bool json)
{
    const char *end = text + strlen(text);
    while (text < end) {
        long code = 0;
        size_t n = sp_text_code(text, end, &code);
        bool odd = n == 0 || sp_text_unprintable(code);
        if (!odd && json && (*text == '"' || *text == '\\')) fputc('\\', to);
        if (!odd)
            fwrite(text, 1, n, to);
        else if (json && n)
            fprintf(to, "\\u%04lx", (unsigned long)code & 0xffffUL);
        else
            fputc('?', to);
        text += n ? n : 1;
    }
}

/* The shortest digits that read back as the same double. */
static void put_number(FILE *to, double x)
{
    char text[40];
    if (!isfinite(x)) {
        fputs("null", to);
        return;
    }
    for (int digits = 15; digits <= 17; ++digits) {
        snprintf(text, sizeof text, "%.*g", digits, x);
        if (strtod(text, NULL) == x) break;
    }
    fputs(text, to);
}

static void put_numbers(FILE *to, const double *x, size_t n)
{
    fputc('[', to);
    for (size_t i = 0; i < n; ++i) {
        if (i) fputs(", ", to);
        put_number(to, x[i]);
    }
    fputc(']', to);
}

static void put_table(FILE *to, const struct sp_table *t)
{
    if (t->columns <= 1) {
        put_numbers(to, t->cell, t->rows);
        return;
    }
    fputc('[', to);
    for (size_t i = 0; i < t->rows; ++i) {
        if (i) fputs(", ", to);
        put_numbers(to, &t->cell[i * t->columns], t->columns);
    }
    fputc(']', to);
}

/* What the user wrote. `quoted`: within a JSON text. */
static void put_written(FILE *to, const struct sp_json *node, bool json, bool inner)
{
    const char *quote = !inner ? "" : json ? "\\\"" : "\"";
    if (node->type == SP_JSON_STRING) {
        fputs(quote, to);
        put_text(to, node->text, json);
        fputs(quote, to);
    } else if (node->type == SP_JSON_NUMBER) {
        put_text(to, node->text, json);
    } else if (node->type == SP_JSON_ARRAY) {
        fputc('[', to);
        for (const struct sp_json *c = node->child; c; c = c->next) {
            put_written(to, c, json, true);
            if (c->next) fputs(", ", to);
        }
        fputc(']', to);
    } else if (node->type == SP_JSON_OBJECT) {
        fputc('{', to);
        for (const struct sp_json *c = node->child; c; c = c->next) {
            put_text(to, c->key, json);
            fputs(": ", to);
            put_written(to, c, json, true);
            if (c->next) fputs(", ", to);
        }
        fputc('}', to);
    } else {
        fputs(node->type == SP_JSON_TRUE ? "true" : node->type == SP_JSON_FALSE ? "false" : "null", to);
    }
}

static bool is_number(const struct sp_key *row)
{
    return row->shape == SP_SHAPE_QUANTITY || row->shape == SP_SHAPE_LIST || row->shape == SP_SHAPE_MATRIX ||
           row->shape == SP_SHAPE_THREE || row->shape == SP_SHAPE_TABLE;
}

/* ---- one entry ------------------------------------------------------------------------------------- */

static double number_of(const struct entry *e)
{
    double value;
    int whole;
    if (e->row->keep == SP_KEEP_INT) {
        memcpy(&whole, e->at, sizeof whole);
        return whole;
    }
    memcpy(&value, e->at, sizeof value);
    return value;
}

static void put_si(FILE *to, const struct entry *e)
{
    struct sp_table table;
    double three[3];
    if (e->row->shape == SP_SHAPE_QUANTITY) {
        put_number(to, number_of(e));
    } else if (e->row->shape == SP_SHAPE_THREE) {
        memcpy(three, e->at, sizeof three);
        put_numbers(to, three, 3);
    } else if (is_number(e->row)) {
        memcpy(&table, e->at, sizeof table);
        put_table(to, &table);
    } else {
        fputs("null", to);
    }
}

static const char *unit_of(const struct sp_key *row)
{
    if (row->shape == SP_SHAPE_THREE) return "Pa, Pa s, Pa s2"; /* a polynomial in rev/s */
    if (row->shape == SP_SHAPE_TABLE || !is_number(row)) return "";
    return sp_kind_si(row->kind);
}

static void put_basis(FILE *to, const struct entry *e, bool json)
{
    if (!e->node) {
        put_text(to, e->row->fallback ? e->row->basis : "worked out from other inputs", json);
        return;
    }
    put_text(to, e->node->file ? e->node->file : "", json);
    if (e->node->line) fprintf(to, " line %ld", e->node->line);
}

static void put_json(struct shower *s, const struct entry *e)
{
    fprintf(s->to, "%s\n  {\"path\": \"%s\", \"text\": ", s->first ? "" : ",", e->path);
    if (e->node || e->row->fallback) {
        fputc('"', s->to);
        if (e->node)
            put_written(s->to, e->node, true, false);
        else
            put_text(s->to, e->row->fallback, true);
        fputc('"', s->to);
    } else {
        fputs("null", s->to);
    }
    fputs(", \"si\": ", s->to);
    put_si(s->to, e);
    fprintf(s->to, ", \"unit\": \"%s\", \"basis\": \"", unit_of(e->row));
    put_basis(s->to, e, true);
    fprintf(s->to, "\", \"default\": %s}", e->node ? "false" : "true");
    s->first = false;
}

static void put_line(struct shower *s, const struct entry *e)
{
    fprintf(s->to, "%-44s ", e->path);
    if (e->node)
        put_written(s->to, e->node, false, false);
    else
        fputs(e->row->fallback ? e->row->fallback : "-", s->to);
    if (is_number(e->row)) {
        const char *unit = unit_of(e->row);
        fputs(" = ", s->to);
        put_si(s->to, e);
        if (*unit && strcmp(unit, "1")) fprintf(s->to, " %s", unit);
    }
    fputs(e->node ? "  (" : "  (default, ", s->to);
    put_basis(s->to, e, false);
    fputs(")\n", s->to);
}

static void put_entry(struct shower *s, const struct entry *e)
{
    if (s->json)
        put_json(s, e);
    else
        put_line(s, e);
}

/* ---- all of them ----------------------------------------------------------------------------------- */

/* An absent key is worth a line when something was put in its place. */
static bool worth_showing(const struct entry *e)
{
    if (e->node) return !(e->row->or_object && e->node->type == SP_JSON_OBJECT);
    if (e->row->fallback)
        return e->row->shape != SP_SHAPE_QUANTITY || e->row->or_none || !isnan(number_of(e));
    return e->row->shape == SP_SHAPE_QUANTITY && !sp_key_of_step(e->row) && !isnan(number_of(e));
}

/* Keys of parts that are not there. */
static bool of_absent_part(const struct sp_design *d, const char *path)
{
    return (!d->duct[0].fan[0].fitted && !strncmp(path, "car.duct.fan.", 13)) ||
           (d->duct[0].core[0].drop_law == SP_DROP_FINS && !strncmp(path, "car.duct.core.pressure_drop.", 28)) ||
           ((d->duct[0].core[0].heat_law == SP_CORE_FINS || d->duct[0].core[0].heat_law == SP_CORE_NO_HEAT) &&
            !strncmp(path, "car.duct.core.heat.", 19)) ||
           (d->thermostat.none && !strncmp(path, "car.thermostat.", 15));
}

static bool of_other_step(const struct sp_step *step, const char *key)
{
    bool trace = !strcmp(key, "smooth") || !strncmp(key, "layout.", 7);
    return (trace && step->kind != SP_STEP_TRACE) || (!strcmp(key, "grade") && step->kind != SP_STEP_HOLD);
}

static void show_steps(struct shower *s)
{
    struct sp_design *d = s->reader->design;
    for (size_t i = 0; i < d->steps; ++i) {
        for (const struct sp_key *row = sp_keys_drive; row->path; ++row) {
            char path[SP_PATH_MAX];
            if (!sp_key_of_step(row) || row->shape == SP_SHAPE_GROUP) continue;
            const char *key = row->path + strlen("drive[].");
            snprintf(path, sizeof path, "drive[%zu].%s", i, key);
            struct entry e = {row, sp_case_node(s->reader->tree, path), path, sp_key_place(row, d, i)};
            if (worth_showing(&e) && (e.node || !of_other_step(&d->step[i], key))) put_entry(s, &e);
        }
    }
}

static void show_absent(struct shower *s, const struct sp_key *row, bool absent)
{
    if (!absent) return;
    if (s->json)
        fprintf(s->to,
                "%s\n  {\"path\": \"%s\", \"text\": \"none\", \"si\": null, \"unit\": \"\", \"basis\": \"\", "
                "\"default\": %s}",
                s->first ? "" : ",", row->path, sp_case_given(s->reader, row->path) ? "false" : "true");
    else
        fprintf(s->to, "%-44s none\n", row->path);
    s->first = false;
}

static void show_all(struct shower *s)
{
    struct sp_design *d = s->reader->design;
    const struct sp_key *row;
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i) {
        if (row->shape == SP_SHAPE_STEPS) show_steps(s);
        if (!strcmp(row->path, "car.duct.fan")) show_absent(s, row, !d->duct[0].fan[0].fitted);
        if (!strcmp(row->path, "car.thermostat")) show_absent(s, row, d->thermostat.none);
        if (sp_key_of_step(row) || row->shape == SP_SHAPE_GROUP || row->shape == SP_SHAPE_STEPS) continue;
        struct entry e = {row, sp_case_node(s->reader->tree, row->path), row->path, sp_key_place(row, d, 0)};
        if (worth_showing(&e) && !of_absent_part(d, row->path)) put_entry(s, &e);
    }
}

void sp_case_show_all(struct sp_reader *r, FILE *to, bool json)
{
    struct shower s = {r, to, json, true};
    if (json) fputc('[', to);
    show_all(&s);
    if (json) fputs("\n]\n", to);
}

static enum sp_status show(struct sp_units *u, const char *file, char *const *set, size_t sets, FILE *to,
                           bool json, struct sp_complaints *complaints)
{
    struct sp_complaints own = {0}, cautions = {0};
    /* A case good enough for its duct is shown; what a drive lacks is said when it is driven. */
    struct sp_reader r = {
        .units = u, .name = file, .purpose = SP_FOR_DUCT, .complaints = &own, .cautions = &cautions};
    bool fine = sp_case_open(&r, NULL, 0, set, sets);
    if (fine) sp_case_show_all(&r, to, json);
    for (size_t i = 0; i < own.count; ++i) {
        struct sp_place at = {own.list[i].file, own.list[i].line, own.list[i].path, own.list[i].named_by};
        sp_complain(complaints, &at, own.list[i].found, own.list[i].expected, own.list[i].hint);
    }
    sp_complaints_free(&own);
    sp_complaints_free(&cautions);
    sp_case_close(&r);
    return fine ? SP_OK : SP_INPUT;
}

enum sp_status sp_case_show(struct sp_units *u, const char *file, char *const *set, size_t sets, FILE *to,
                            struct sp_complaints *complaints)
{
    return show(u, file, set, sets, to, false, complaints);
}

enum sp_status sp_case_show_json(struct sp_units *u, const char *file, char *const *set, size_t sets,
                                 FILE *to, struct sp_complaints *complaints)
{
    return show(u, file, set, sets, to, true, complaints);
}
