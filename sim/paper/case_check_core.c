/* What a core must have: one way to tell its pressure drop, one to tell its heat.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>
#include <string.h>

/* The core in hand. */
struct room {
    struct sp_reader *r;
    const struct sp_core *core;
    char path[SP_PATH_MAX - 60]; /* as the file has it: "car.ducts[1].cores[0]" */
};

static void path_of(const struct room *m, const char *key, char out[SP_PATH_MAX])
{
    snprintf(out, SP_PATH_MAX, "%s%s%.50s", m->path, *key ? "." : "", key);
}

static bool given(const struct room *m, const char *key)
{
    char path[SP_PATH_MAX];
    path_of(m, key, path);
    return sp_case_given(m->r, path);
}

static void fault(const struct room *m, const char *key, const char *found, const char *expected)
{
    char path[SP_PATH_MAX];
    path_of(m, key, path);
    sp_case_fault(m->r, path, found, expected, NULL);
}

static void lacks(const struct room *m, const char *key, const char *expected)
{
    fault(m, key, "nothing", expected);
}

/* ---- geometry -------------------------------------------------------------------------------------- */

/* One length that has to be below another. */
static void below(const struct room *m, const char *key, double value, double bound, const char *expected)
{
    if (isnan(value) || isnan(bound) || value < bound) return;
    fault(m, key, given(m, key) ? NULL : "its default", expected);
}

static void check_geometry(const struct room *m)
{
    const struct sp_core *c = m->core;
    double gap = c->tube_pitch - c->tube_height;
    below(m, "tubes.height", c->tube_height, c->tube_pitch, "tube height below tube pitch");
    below(m, "tubes.wall", 2.0 * c->tube_wall, c->tube_height, "a wall below half the tube's height");
    below(m, "tubes.height", c->tube_height, c->height, "tubes lower than the core");
    below(m, "fins.thickness", c->fin_thickness, c->fin_pitch, "fin thickness below fin pitch");
    below(m, "fins.louvre_length", c->louvre_length, gap * (1.0 + 1e-9),
          "louvres no longer than the gap between tubes");
    below(m, "fins.louvre_pitch", c->louvre_pitch, c->depth, "louvre pitch below the core's depth");
    bool fins = given(m, "fins"), tubes = given(m, "tubes"),
         needs = c->drop_law == SP_DROP_FINS || c->heat_law == SP_CORE_FINS;
    if (fins && needs && !tubes) lacks(m, "tubes", "an object with pitch, height, for fins are given");
    if (fins && tubes && needs && !given(m, "depth")) lacks(m, "depth", "a length such as \"42 mm\"");
}

/* ---- pressure drop --------------------------------------------------------------------------------- */

static void check_table(const struct room *m)
{
    const struct sp_table *t = &m->core->drop_table;
    for (size_t i = 0; i < t->rows; ++i) {
        bool fine = i ? t->cell[2 * i] > t->cell[2 * i - 2] && t->cell[2 * i + 1] > t->cell[2 * i - 1]
                      : (t->cell[0] > 0.0) == (t->cell[1] > 0.0);
        char key[50];
        if (fine) continue;
        snprintf(key, sizeof key, "pressure_drop.table[%zu]", i);
        fault(m, key, NULL, "speed and pressure rising together, from 0 or above");
    }
    if (t->rows && !(t->cell[2 * t->rows - 2] > 0.0))
        fault(m, "pressure_drop.table", "no point with air moving", "one or more");
}

static void check_drop(const struct room *m)
{
    bool coefficient = given(m, "pressure_drop.coefficient"), table = given(m, "pressure_drop.table");
    bool linear = given(m, "pressure_drop.linear"), quadratic = given(m, "pressure_drop.quadratic");
    if (!given(m, "pressure_drop")) {
        if (!given(m, "fins"))
            lacks(
                m, "pressure_drop",
                "an object with coefficient, or with linear and quadratic, or with table; or fins and tubes");
        return;
    }
    int laws = coefficient + table + (linear || quadratic);
    if (laws != 1)
        fault(m, "pressure_drop", laws ? "more than one law" : "no law",
              "exactly one of coefficient, linear with quadratic, table");
    if (linear && !quadratic)
        lacks(m, "pressure_drop.quadratic", "b of a v + b v^2, such as \"12 Pa.s2/m2\"");
    if (quadratic && !linear) lacks(m, "pressure_drop.linear", "a of a v + b v^2, such as \"60 Pa.s/m\"");
    check_table(m);
}

/* ---- heat ------------------------------------------------------------------------------------------ */

static void check_list(const struct room *m, const char *key, const struct sp_table *t)
{
    for (size_t i = 1; i < t->rows; ++i) {
        char path[50];
        if (t->cell[i] > t->cell[i - 1]) continue;
        snprintf(path, sizeof path, "heat.%s[%zu]", key, i);
        fault(m, path, NULL, "a list that rises");
    }
}

static void check_maker(const struct room *m)
{
    const struct sp_core *c = m->core;
    const struct sp_table *t = &c->heat_per_kelvin;
    if (!given(m, "heat.face_velocity"))
        lacks(m, "heat.face_velocity", "the face velocities of the rows of rejection");
    if (!given(m, "heat.coolant_flow"))
        lacks(m, "heat.coolant_flow", "the coolant flows of the columns of rejection");
    check_list(m, "face_velocity", &c->heat_velocity);
    check_list(m, "coolant_flow", &c->heat_flow);
    if (!t->rows || !c->heat_velocity.rows || !c->heat_flow.rows) return;
    if (t->rows == c->heat_velocity.rows && t->columns == c->heat_flow.rows) return;
    char found[80], expected[120];
    snprintf(found, sizeof found, "%zu rows of %zu", t->rows, t->columns);
    snprintf(expected, sizeof expected, "%zu rows of %zu, as face_velocity and coolant_flow have",
             c->heat_velocity.rows, c->heat_flow.rows);
    fault(m, "heat.rejection", found, expected);
}

static void check_heat(const struct room *m)
{
    static const char *const maker[] = {"heat.rejection", "heat.face_velocity", "heat.coolant_flow"};
    static const char *const power[] = {"heat.air_conductance", "heat.at_face_velocity",
                                        "heat.coolant_conductance", "heat.at_coolant_flow"};
    size_t makers = 0, powers = 0;
    if (!given(m, "heat")) return;
    for (size_t i = 0; i < 3; ++i)
        makers += given(m, maker[i]);
    for (size_t i = 0; i < 4; ++i)
        powers += given(m, power[i]);
    if (!makers == !powers) {
        fault(m, "heat", makers ? "both a maker's table and power laws" : "neither of the two forms",
              "either rejection with face_velocity and coolant_flow, or air_conductance, at_face_velocity, "
              "coolant_conductance and at_coolant_flow");
        return;
    }
    for (size_t i = 0; powers && i < 4; ++i)
        if (!given(m, power[i])) lacks(m, power[i], "a value, as the other power-law keys have");
    if (makers && !given(m, "heat.rejection"))
        lacks(m, "heat.rejection", "rows of heat over temperature difference");
    else if (makers)
        check_maker(m);
}

static void check_for_drive(const struct room *m)
{
    const struct sp_core *c = m->core;
    if (!given(m, "heat") && !given(m, "fins") && c->carries != SP_CARRIES_LOAD)
        lacks(m, "heat", "heat data, or fins and tubes: a drive needs a core that conducts");
    if (given(m, "depth") || !(c->width > 0.0 && c->height > 0.0)) return;
    if (!given(m, "metal_capacity"))
        lacks(m, "metal_capacity", "a heat capacity such as \"7 kJ/K\", or the core's depth");
    if (!given(m, "coolant_volume") && c->carries == SP_CARRIES_COOLANT)
        lacks(m, "coolant_volume", "a volume such as \"2.1 l\", or the core's depth");
}

void sp_case_check_core(struct sp_reader *r, const struct sp_key_spot *at)
{
    struct room room = {.r = r, .core = &r->design->duct[at->outer].core[at->inner]}, *m = &room;
    sp_case_path(r->tree, "car.duct.core", at, room.path, sizeof room.path);
    const struct sp_json *node = sp_case_node(r->tree, room.path);
    if (!node || node->type != SP_JSON_OBJECT) return;
    check_geometry(m);
    check_drop(m);
    check_heat(m);
    if (given(m, "drop.flow") != given(m, "drop.drop"))
        lacks(m, given(m, "drop.flow") ? "drop.drop" : "drop.flow", "the other of flow and drop");
    if (r->purpose == SP_FOR_DRIVE) check_for_drive(m);
}
