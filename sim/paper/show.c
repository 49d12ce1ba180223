/* Every input as understood: the user's own text, the value in SI, what a default rests on.
 * SPDX-License-Identifier: GPL-3.0-or-later */
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
    struct sp_defaults *count; /* count what rests on what instead of writing */
};

/* ---- pieces ---------------------------------------------------------------------------------------- */

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
        sp_written_text(to, e->row->fallback ? e->row->basis : "worked out from other inputs", json);
        return;
    }
    sp_written_text(to, e->node->file ? e->node->file : "", json);
    if (e->node->line) fprintf(to, " line %ld", e->node->line);
}

static void put_json(struct shower *s, const struct entry *e)
{
    fprintf(s->to, "%s\n  {\"path\": \"%s\", \"text\": ", s->first ? "" : ",", e->path);
    if (e->node || e->row->fallback) {
        fputc('"', s->to);
        if (e->node)
            sp_written_node(s->to, e->node, true, false);
        else
            sp_written_text(s->to, e->row->fallback, true);
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
        sp_written_node(s->to, e->node, false, false);
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

static void count_entry(struct sp_defaults *count, const struct entry *e)
{
    const char *basis = e->row->basis;
    if (e->node || !basis) return;
    count->practice += !strcmp(basis, "common practice");
    count->memory += !strcmp(basis, "from memory");
}

static void put_entry(struct shower *s, const struct entry *e)
{
    if (s->count)
        count_entry(s->count, e);
    else if (s->json)
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
static bool of_absent_part(const struct sp_design *d, const char *path, const struct sp_key_spot *at)
{
    if (d->thermostat.none && !strncmp(path, "car.thermostat.", 15)) return true;
    if (!strncmp(path, "car.duct.fan.", 13)) return !d->duct[at->outer].fan[at->inner].fitted;
    if (strncmp(path, "car.duct.core.", 14)) return false;
    const struct sp_core *c = &d->duct[at->outer].core[at->inner];
    return (c->drop_law == SP_DROP_FINS && !strncmp(path + 14, "pressure_drop.", 14)) ||
           ((c->heat_law == SP_CORE_FINS || c->heat_law == SP_CORE_NO_HEAT) &&
            !strncmp(path + 14, "heat.", 5));
}

static bool path_of_duct(const char *path)
{
    return !strncmp(path, "car.duct.", 9);
}

/* Defaults that nothing in this car uses: keys that begin so, and whether what they belong to is there. */
static bool unused(const struct sp_design *d, const char *path, const struct sp_key_spot *at)
{
    const struct sp_duct_design *duct = &d->duct[path_of_duct(path) ? at->outer : 0];
    const struct sp_fan *fan = &duct->fan[!strncmp(path, "car.duct.fan.", 13) ? at->inner : 0];
    const struct sp_pump *pump = &d->pump;
    const struct sp_thermostat *t = &d->thermostat;
    const struct sp_engine *e = &d->engine;
    const struct sp_core *core = &duct->core[!strncmp(path, "car.duct.core.", 14) ? at->inner : 0];
    bool fins = core->drop_law == SP_DROP_FINS || core->heat_law == SP_CORE_FINS;
    bool tubes = fins || (core->tube_pitch > 0.0 && !(core->drop.flow > 0.0)); /* the coolant's drop goes by them */
    bool shape = e->heat_law == SP_HEAT_CORRELATION || e->overrun_law != SP_FRICTION_POLYNOMIAL;
    const struct {
        const char *begins;
        bool used;
    } parts[] = {
        {"car.oil.", d->oil.fitted},
        {"car.gearbox.", d->gearbox.fitted},
        {"car.charge.", d->charge.fitted},
        {"car.hoses.heater.", d->hoses.heater.flow > 0.0},
        {"car.pump.ratio", !pump->electric},
        {"car.pump.power", pump->electric},
        {"car.pump.rated_voltage", pump->electric},
        {"car.pump.run_on", pump->electric},
        {"car.pump.control", pump->electric},
        {"car.pump.least", pump->electric && pump->law != SP_PUMP_FIXED && pump->law != SP_PUMP_PULSING},
        {"car.pump.full_at", pump->electric && pump->law == SP_PUMP_OVER_SPEED},
        {"car.pump.temperature.", pump->electric && pump->law == SP_PUMP_OVER_TEMPERATURE},
        {"car.pump.pulse.", pump->electric && pump->law == SP_PUMP_PULSING},
        {"car.pump.suction.", pump->npsh > 0.0},
        {"car.engine.bore", shape},
        {"car.engine.stroke", shape},
        {"car.engine.cylinders", shape},
        {"car.engine.compression", shape},
        {"car.engine.heat.correlation_constant", e->heat_law == SP_HEAT_CORRELATION},
        {"car.engine.heat.stoichiometric", e->heat_law == SP_HEAT_CORRELATION},
        {"car.engine.heat.diesel", e->heat_law == SP_HEAT_CORRELATION},
        {"car.engine.overrun.intake", e->overrun_law == SP_FRICTION_SI},
        {"car.engine.overrun.oil", e->overrun_law == SP_FRICTION_SI},
        {"car.engine.overrun.a", e->overrun_law == SP_FRICTION_CHEN_FLYNN},
        {"car.engine.overrun.b", e->overrun_law == SP_FRICTION_CHEN_FLYNN},
        {"car.engine.overrun.c", e->overrun_law == SP_FRICTION_CHEN_FLYNN},
        {"car.engine.overrun.d", e->overrun_law == SP_FRICTION_CHEN_FLYNN},
        {"car.thermostat.mapped.", t->mapped_power > 0.0},
        {"car.duct.core.fins.kind", tubes},
        {"car.duct.core.fins.thickness", fins},
        {"car.duct.core.fins.conductivity", fins},
        {"car.duct.core.fins.louvre_length", fins && core->fin_kind != SP_FINS_PLATE},
        {"car.duct.core.tubes.", tubes},
        {"car.duct.fan.switch.", fan->law == SP_FAN_SWITCHED},
        {"car.duct.fan.proportional.", fan->law == SP_FAN_PROPORTIONAL},
        {"car.duct.fan.locked_loss", fan->health == SP_FAN_LOCKED},
        {"car.duct.fan.flap_loss", fan->flap_area > 0.0},
        {"car.duct.leak.past_core.", duct->past_core.area > 0.0 || duct->past_core.gap > 0.0},
        {"car.duct.leak.outside.", duct->outside.area > 0.0 || duct->outside.gap > 0.0},
        {"car.duct.inlet.recirculation_ends", duct->inlet.recirculated > 0.0},
        {"car.duct.inlet.lip_suction", duct->inlet.spill},
    };
    for (size_t i = 0; i < sizeof parts / sizeof *parts; ++i)
        if (!parts[i].used && !strncmp(path, parts[i].begins, strlen(parts[i].begins))) return true;
    return false;
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
            struct entry e = {row, sp_case_node(s->reader->tree, path), path,
                              sp_key_place(row, d, &(struct sp_key_spot){i, 0})};
            if (worth_showing(&e) && (e.node || !of_other_step(&d->step[i], key))) put_entry(s, &e);
        }
    }
}

static void show_absent(struct shower *s, const char *path, bool absent)
{
    if (!absent || s->count) return;
    if (s->json)
        fprintf(s->to,
                "%s\n  {\"path\": \"%s\", \"text\": \"none\", \"si\": null, \"unit\": \"\", \"basis\": \"\", "
                "\"default\": %s}",
                s->first ? "" : ",", path, sp_case_given(s->reader, path) ? "false" : "true");
    else
        fprintf(s->to, "%-44s none\n", path);
    s->first = false;
}

/* A part that may be left out, for each duct. */
static void show_part(struct shower *s, const struct sp_key *row, const struct sp_key_spot *at,
                      const char *path)
{
    const struct sp_design *d = s->reader->design;
    if (!strcmp(row->path, "car.duct.fan")) show_absent(s, path, !d->duct[at->outer].fan[at->inner].fitted);
    if (!strcmp(row->path, "car.thermostat")) show_absent(s, path, d->thermostat.none);
}

static void show_element(struct shower *s, const struct sp_key *row, const struct sp_key_spot *at)
{
    struct sp_design *d = s->reader->design;
    char path[SP_PATH_MAX];
    sp_case_path(s->reader->tree, row->path, at, path, sizeof path);
    if (row->shape == SP_SHAPE_GROUP) {
        show_part(s, row, at, path);
        return;
    }
    struct entry e = {row, sp_case_node(s->reader->tree, path), path, sp_key_place(row, d, at)};
    if (!e.node && unused(d, row->path, at)) return;
    if (worth_showing(&e) && !of_absent_part(d, row->path, at)) put_entry(s, &e);
}

/* One change as it comes to pass: what is set, its time, and where that stands. */
static void show_change(struct shower *s, const struct sp_turn *turn, const struct sp_change *change)
{
    char path[60];
    const bool json = s->json;
    snprintf(path, sizeof path, "changes[%zu]", turn->entry);
    fprintf(s->to, json ? "%s\n  {\"path\": \"%s\", \"text\": \"" : "%s%-44s ", s->first || !json ? "" : ",",
            path);
    sp_written_text(s->to, change->text, json);
    fputs(json ? "\", \"si\": " : " at ", s->to);
    put_number(s->to, change->at);
    fputs(json ? ", \"unit\": \"s\", \"basis\": \"" : " s  (", s->to);
    sp_written_text(s->to, turn->node->file ? turn->node->file : "", json);
    if (turn->node->line) fprintf(s->to, " line %ld", turn->node->line);
    fputs(json ? "\", \"default\": false}" : ")\n", s->to);
    s->first = false;
}

static void show_row(struct shower *s, const struct sp_key *row)
{
    struct sp_key_spot at = {0};
    do
        show_element(s, row, &at);
    while (sp_case_next(s->reader->tree, row->path, &at));
}

static void show_all(struct shower *s)
{
    const struct sp_design *d = s->reader->design;
    const struct sp_key *row;
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i) {
        if (row->shape == SP_SHAPE_STEPS)
            show_steps(s);
        else if (!sp_key_of_step(row) && !sp_key_of_change(row) && row->shape != SP_SHAPE_CHANGES)
            show_row(s, row);
    }
    for (size_t i = 0; i < d->changes && !s->count; ++i)
        show_change(s, &s->reader->turn[i], &d->change[i]);
}

void sp_case_show_all(struct sp_reader *r, FILE *to, bool json)
{
    struct shower s = {r, to, json, true, NULL};
    if (json) fputc('[', to);
    show_all(&s);
    if (json) fputs("\n]\n", to);
}

bool sp_case_defaults(struct sp_units *u, const char *file, char *const *set, size_t sets, struct sp_defaults *out)
{
    struct sp_complaints own = {0}, cautions = {0};
    struct sp_reader r = {.units = u, .name = file, .purpose = SP_FOR_DUCT, .complaints = &own, .cautions = &cautions};
    bool fine = sp_case_open(&r, NULL, 0, set, sets);
    *out = (struct sp_defaults){0, 0};
    struct shower s = {&r, NULL, false, true, out};
    if (fine) show_all(&s);
    sp_complaints_free(&own);
    sp_complaints_free(&cautions);
    sp_case_close(&r);
    return fine;
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
