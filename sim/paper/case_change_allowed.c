/* What may change during a drive, and by how much a number grows.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static const char asked[] = "no change: what is asked of the engine is worked out before the drive";
static const char laid_out[] = "no change: how the parts are joined is laid out before the drive";
static const char filled[] = "no change: coolant and oil are filled in before the drive";

static const char named[] = "no change: a name is read once";

/* Keys, or all keys of a group, that stay as they are. */
static const struct {
    const char *path, *expected;
} fixed[] = {
    {"car.from", "no change: the car is read once"},
    {"car.engine", asked},
    {"car.body", asked},
    {"car.gauge", "no change: the gauge is the driver's one"},
    {"car.coolant.kind", filled},
    {"car.coolant.glycol", filled},
    {"car.duct.count", laid_out},
    {"car.duct.coolant", laid_out},
    {"car.duct.core.cells", laid_out},
    {"car.duct.core.carries", laid_out},
    {"car.duct.core.feed", laid_out},
    {"car.duct.core.name", named},
    {"car.duct.exit.place", named},
    {"car.duct.fan.count", laid_out},
    {"car.electrics.battery", laid_out},
    {"car.oil.volume", filled},
    {"car.oil.metal_capacity", filled},
    {"car.gearbox.metal_capacity", filled},
    {"car.oil.heat_share", asked},
    {"car.oil.friction_share", asked},
    {"car.gearbox.volume", filled},
    {"car.gearbox.heat_share", asked},
    {"car.gearbox.friction_share", asked},
    {"car.charge", asked},
};

static bool within(const char *group, const char *path)
{
    size_t length = strlen(group);
    return !strncmp(group, path, length) && (!path[length] || path[length] == '.');
}

static bool refuse(struct sp_reader *r, const struct sp_setting *s, const char *found, const char *expected)
{
    sp_complain(r->complaints, &s->source, found, expected, NULL);
    return false;
}

/* A part that may be left out has to be there to be changed. One that may not, and is absent, is a fault said
 * already. */
static bool part_there(struct sp_reader *r, const struct sp_setting *s)
{
    const struct sp_key *group;
    for (size_t i = 0; (group = sp_key_row(i)) != NULL; ++i) {
        char found[120];
        bool must =
            group->need == SP_NEED_ALWAYS || (group->need == SP_NEED_DRIVE && r->purpose == SP_FOR_DRIVE);
        bool part = group->keep == SP_KEEP_BOOL && !group->or_none;
        if (group->shape != SP_SHAPE_GROUP || !(must || part) || !within(group->path, s->row->path)) continue;
        if (sp_case_given_at(r, group->path, &s->at)) continue;
        if (must) return false;
        snprintf(found, sizeof found, "no %s from the start", sp_key_name(group));
        return refuse(r, s, found, "one that is there, to be changed");
    }
    return true;
}

bool sp_change_allowed(struct sp_reader *r, const struct sp_setting *s)
{
    const char *path = s->row->path;
    if (strncmp(path, "car.", 4) && !within("limits", path))
        return refuse(r, s, "a change of it",
                      "a key of the car or of limits: all else is read once, before the drive");
    for (size_t i = 0; i < sizeof fixed / sizeof *fixed; ++i)
        if (within(fixed[i].path, path)) return refuse(r, s, "a change of it", fixed[i].expected);
    if (s->list || s->row->shape == SP_SHAPE_GROUP)
        return refuse(r, s, "all of a group at once", "its keys one by one, such as duct.inlet.blocked");
    return part_there(r, s);
}

/* ---- what was built -------------------------------------------------------------------------------- */

/* The last change that reached into the core is the one to blame. */
static bool other_law(struct sp_reader *r, const struct sp_key_spot *at)
{
    char core[SP_PATH_MAX];
    const struct sp_placed *blamed = NULL;
    sp_case_path(r->tree, "car.duct.core", at, core, sizeof core);
    for (size_t i = 0; i < r->places; ++i)
        if (within(core, r->placed[i].path) && (!blamed || r->placed[i].turn >= blamed->turn))
            blamed = &r->placed[i];
    sp_case_fault(r, blamed ? blamed->path : core, "another law of the core's heat",
                  "the law that it has from the start", NULL);
    return false;
}

bool sp_change_same_build(struct sp_reader *r, const struct sp_design *first)
{
    struct sp_key_spot at = {0};
    bool same = true;
    do {
        const struct sp_core *a = &first->duct[at.outer].core[at.inner];
        const struct sp_core *b = &r->design->duct[at.outer].core[at.inner];
        if (a->heat_law != b->heat_law) same = other_law(r, &at);
    } while (sp_case_next(r->tree, "car.duct.core", &at));
    return same;
}

/* ---- growing --------------------------------------------------------------------------------------- */

/* What follows the number in "1 %". */
static const char *unit_of(const char *text)
{
    char *end;
    strtod(text, &end);
    return end + strspn(end, " ");
}

static bool read_addend(struct sp_reader *r, const struct sp_setting *s, enum sp_kind kind,
                        const struct sp_json *node, double *out)
{
    char found[300], why[300];
    sp_json_describe(node, found, sizeof found);
    snprintf(why, sizeof why, "%s", sp_kind_sample(kind));
    if (node->type == SP_JSON_NUMBER && kind == SP_K_NUMBER) {
        *out = node->number;
        return true;
    }
    if (node->type == SP_JSON_STRING && sp_quantity_read(r->units, kind, node->text, out, why, sizeof why))
        return true;
    return refuse(r, s, found, why);
}

/* In the unit of what was added, as its user will know it. */
static struct sp_json *sum_node(struct sp_reader *r, const struct sp_json *node, enum sp_kind kind,
                                double sum)
{
    double scale = 1.0, offset = 0.0;
    char why[300], text[120];
    const char *unit = node->type == SP_JSON_STRING ? unit_of(node->text) : "";
    if (*unit && !sp_unit_scale(r->units, kind, unit, &scale, &offset, why, sizeof why)) {
        unit = sp_kind_si(kind);
        scale = 1.0;
        offset = 0.0;
    }
    snprintf(text, sizeof text, "\"%.12g%s%.60s\"", (sum - offset) / scale, *unit ? " " : "", unit);
    struct sp_json *out = sp_json_value(node->file ? node->file : r->name, text);
    if (out)
        out->line = node->line;
    else
        r->no_memory = true;
    return out;
}

/* A list too long is a fault said before: there is no room for all of it. */
static bool has_room(const struct sp_setting *s)
{
    const struct sp_key *lists[SP_KEY_LISTS];
    size_t n = sp_key_lists(s->row->path, lists);
    return (n < 1 || s->at.outer < lists[0]->most) && (n < 2 || s->at.inner < lists[1]->most);
}

struct sp_json *sp_change_grown(struct sp_reader *r, const struct sp_setting *s, const struct sp_json *node,
                                struct sp_design *now, bool faulty)
{
    bool number = s->row->shape == SP_SHAPE_QUANTITY && !s->inside;
    enum sp_kind kind = s->row->kind == SP_K_TEMPERATURE ? SP_K_TEMP_DIFF : s->row->kind;
    double addend, have;
    if (!number) {
        refuse(r, s, "a key that holds no single number", "a number, to be added to; or the key in set");
        return NULL;
    }
    if (!read_addend(r, s, kind, node, &addend) || !has_room(s)) return NULL;
    have = sp_key_double(s->row, now, &s->at);
    if (isnan(have)) {
        if (!faulty) refuse(r, s, "nothing to add to", "a number there until then; or the key in set");
        return NULL;
    }
    return sum_node(r, node, kind, have + addend);
}
