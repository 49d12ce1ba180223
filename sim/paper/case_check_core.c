/* What a core must have: one way to tell its pressure drop, one to tell its heat.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>
#include <string.h>

#define CORE "car.duct.core"

static bool given(const struct sp_reader *r, const char *key)
{
    char path[SP_PATH_MAX];
    snprintf(path, sizeof path, CORE ".%s", key);
    return sp_case_given(r, path);
}

static void lacks(struct sp_reader *r, const char *key, const char *expected)
{
    char path[SP_PATH_MAX];
    snprintf(path, sizeof path, CORE ".%s", key);
    sp_case_fault(r, path, "nothing", expected, NULL);
}

/* ---- geometry -------------------------------------------------------------------------------------- */

/* One length that has to be below another. */
static void below(struct sp_reader *r, const char *key, double value, double bound, const char *expected)
{
    char path[SP_PATH_MAX];
    snprintf(path, sizeof path, CORE ".%s", key);
    if (isnan(value) || isnan(bound) || value < bound) return;
    sp_case_fault(r, path, given(r, key) ? NULL : "its default", expected, NULL);
}

static void check_geometry(struct sp_reader *r)
{
    const struct sp_core *c = &r->design->duct[0].core[0];
    double gap = c->tube_pitch - c->tube_height;
    below(r, "tubes.height", c->tube_height, c->tube_pitch, "tube height below tube pitch");
    below(r, "tubes.wall", 2.0 * c->tube_wall, c->tube_height, "a wall below half the tube's height");
    below(r, "tubes.height", c->tube_height, c->height, "tubes lower than the core");
    below(r, "fins.thickness", c->fin_thickness, c->fin_pitch, "fin thickness below fin pitch");
    below(r, "fins.louvre_length", c->louvre_length, gap * (1.0 + 1e-9),
          "louvres no longer than the gap between tubes");
    below(r, "fins.louvre_pitch", c->louvre_pitch, c->depth, "louvre pitch below the core's depth");
    bool fins = given(r, "fins"), tubes = given(r, "tubes"),
         needs = c->drop_law == SP_DROP_FINS || c->heat_law == SP_CORE_FINS;
    if (fins && needs && !tubes) lacks(r, "tubes", "an object with pitch, height, for fins are given");
    if (fins && tubes && needs && !given(r, "depth")) lacks(r, "depth", "a length such as \"42 mm\"");
}

/* ---- pressure drop --------------------------------------------------------------------------------- */

static void check_table(struct sp_reader *r)
{
    const struct sp_table *t = &r->design->duct[0].core[0].drop_table;
    for (size_t i = 0; i < t->rows; ++i) {
        bool fine = i ? t->cell[2 * i] > t->cell[2 * i - 2] && t->cell[2 * i + 1] > t->cell[2 * i - 1]
                      : (t->cell[0] > 0.0) == (t->cell[1] > 0.0);
        char path[SP_PATH_MAX];
        if (fine) continue;
        snprintf(path, sizeof path, CORE ".pressure_drop.table[%zu]", i);
        sp_case_fault(r, path, NULL, "speed and pressure rising together, from 0 or above", NULL);
    }
    if (t->rows && !(t->cell[2 * t->rows - 2] > 0.0))
        sp_case_fault(r, CORE ".pressure_drop.table", "no point with air moving", "one or more", NULL);
}

static void check_drop(struct sp_reader *r)
{
    bool coefficient = given(r, "pressure_drop.coefficient"), table = given(r, "pressure_drop.table");
    bool linear = given(r, "pressure_drop.linear"), quadratic = given(r, "pressure_drop.quadratic");
    if (!given(r, "pressure_drop")) {
        if (!given(r, "fins"))
            lacks(
                r, "pressure_drop",
                "an object with coefficient, or with linear and quadratic, or with table; or fins and tubes");
        return;
    }
    int laws = coefficient + table + (linear || quadratic);
    if (laws != 1)
        sp_case_fault(r, CORE ".pressure_drop", laws ? "more than one law" : "no law",
                      "exactly one of coefficient, linear with quadratic, table", NULL);
    if (linear && !quadratic)
        lacks(r, "pressure_drop.quadratic", "b of a v + b v^2, such as \"12 Pa.s2/m2\"");
    if (quadratic && !linear) lacks(r, "pressure_drop.linear", "a of a v + b v^2, such as \"60 Pa.s/m\"");
    check_table(r);
}

/* ---- heat ------------------------------------------------------------------------------------------ */

static void check_list(struct sp_reader *r, const char *key, const struct sp_table *t)
{
    for (size_t i = 1; i < t->rows; ++i) {
        char path[SP_PATH_MAX];
        if (t->cell[i] > t->cell[i - 1]) continue;
        snprintf(path, sizeof path, CORE ".heat.%s[%zu]", key, i);
        sp_case_fault(r, path, NULL, "a list that rises", NULL);
    }
}

static void check_maker(struct sp_reader *r)
{
    const struct sp_core *c = &r->design->duct[0].core[0];
    const struct sp_table *m = &c->heat_per_kelvin;
    if (!given(r, "heat.face_velocity"))
        lacks(r, "heat.face_velocity", "the face velocities of the rows of rejection");
    if (!given(r, "heat.coolant_flow"))
        lacks(r, "heat.coolant_flow", "the coolant flows of the columns of rejection");
    check_list(r, "face_velocity", &c->heat_velocity);
    check_list(r, "coolant_flow", &c->heat_flow);
    if (!m->rows || !c->heat_velocity.rows || !c->heat_flow.rows) return;
    if (m->rows == c->heat_velocity.rows && m->columns == c->heat_flow.rows) return;
    char found[80], expected[120];
    snprintf(found, sizeof found, "%zu rows of %zu", m->rows, m->columns);
    snprintf(expected, sizeof expected, "%zu rows of %zu, as face_velocity and coolant_flow have",
             c->heat_velocity.rows, c->heat_flow.rows);
    sp_case_fault(r, CORE ".heat.rejection", found, expected, NULL);
}

static void check_heat(struct sp_reader *r)
{
    static const char *const maker[] = {"heat.rejection", "heat.face_velocity", "heat.coolant_flow"};
    static const char *const power[] = {"heat.air_conductance", "heat.at_face_velocity",
                                        "heat.coolant_conductance", "heat.at_coolant_flow"};
    size_t makers = 0, powers = 0;
    if (!given(r, "heat")) return;
    for (size_t i = 0; i < 3; ++i)
        makers += given(r, maker[i]);
    for (size_t i = 0; i < 4; ++i)
        powers += given(r, power[i]);
    if (!makers == !powers) {
        sp_case_fault(
            r, CORE ".heat", makers ? "both a maker's table and power laws" : "neither of the two forms",
            "either rejection with face_velocity and coolant_flow, or air_conductance, at_face_velocity, "
            "coolant_conductance and at_coolant_flow",
            NULL);
        return;
    }
    for (size_t i = 0; powers && i < 4; ++i)
        if (!given(r, power[i])) lacks(r, power[i], "a value, as the other power-law keys have");
    if (makers && !given(r, "heat.rejection"))
        lacks(r, "heat.rejection", "rows of heat over temperature difference");
    else if (makers)
        check_maker(r);
}

static void check_for_drive(struct sp_reader *r)
{
    const struct sp_core *c = &r->design->duct[0].core[0];
    if (!given(r, "heat") && !given(r, "fins"))
        lacks(r, "heat", "heat data, or fins and tubes: a drive needs a core that conducts");
    if (given(r, "depth") || !(c->width > 0.0 && c->height > 0.0)) return;
    if (!given(r, "metal_capacity"))
        lacks(r, "metal_capacity", "a heat capacity such as \"7 kJ/K\", or the core's depth");
    if (!given(r, "coolant_volume"))
        lacks(r, "coolant_volume", "a volume such as \"2.1 l\", or the core's depth");
}

void sp_case_check_core(struct sp_reader *r)
{
    if (!sp_case_given(r, CORE)) return;
    check_geometry(r);
    check_drop(r);
    check_heat(r);
    if (given(r, "drop.flow") != given(r, "drop.drop"))
        lacks(r, given(r, "drop.flow") ? "drop.drop" : "drop.flow", "the other of flow and drop");
    if (r->purpose == SP_FOR_DRIVE) check_for_drive(r);
}
