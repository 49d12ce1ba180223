/* What goes together in a core, fan, inlet and diffuser beyond the plain ones, and what does not.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>
#include <string.h>

#include "part/inlet.h"

/* One thing that may be wrong, at one element. */
struct rule {
    bool broken;
    const char *key, *found, *expected; /* key: full path of a row; found NULL: what stands there */
};

static void judge(struct sp_reader *r, const struct sp_key_spot *at, const struct rule *rule, size_t n)
{
    for (size_t i = 0; i < n; ++i)
        if (rule[i].broken) sp_case_fault_of(r, rule[i].key, at, rule[i].found, rule[i].expected, NULL);
}
#define JUDGE(list) judge(r, at, list, sizeof(list) / sizeof *(list))

/* A key that has to stand there, said as the reader says it of every required key. */
static void require(struct sp_reader *r, const struct sp_key_spot *at, const char *key)
{
    char expected[400];
    if (sp_case_given_at(r, key, at)) return;
    sp_key_expected(sp_key_find(key), expected, sizeof expected);
    sp_case_fault_of(r, key, at, "nothing", expected, NULL);
}

static bool bad_span(double from, double to)
{
    return !(from == 0.0 && to == 0.0) && from >= to;
}

/* ---- cores ----------------------------------------------------------------------------------------- */

#define CORE "car.duct.core"

/* Does a core with coolant stand before this one in the car's list? */
static bool follows_coolant(const struct sp_reader *r, const struct sp_key_spot *at)
{
    for (size_t d = 0; d <= at->outer; ++d) {
        const struct sp_duct_design *duct = &r->design->duct[d];
        size_t all = duct->cores ? duct->cores : 1, end = d == at->outer ? at->inner : all;
        for (size_t i = 0; i < end; ++i)
            if (duct->core[i].carries == SP_CARRIES_COOLANT) return true;
    }
    return false;
}

static void check_medium(struct sp_reader *r, const struct sp_key_spot *at, const struct sp_core *c)
{
    bool coolant = c->carries == SP_CARRIES_COOLANT, load = c->carries == SP_CARRIES_LOAD;
    const struct rule rules[] = {
        {c->in_series && !coolant, CORE ".feed", NULL, "\"parallel\", for it carries no coolant"},
        {c->in_series && coolant && !follows_coolant(r, at), CORE ".feed", NULL,
         "\"parallel\", for no core with coolant comes before it"},
        {!load && sp_case_given_at(r, CORE ".heat_load", at), CORE ".heat_load", NULL,
         "no heat load, unless the core carries \"heat load\""},
        {load && sp_case_given_at(r, CORE ".heat", at), CORE ".heat", NULL,
         "no heat data, for the heat is given"},
        {!load && !coolant && c->heat_law == SP_CORE_FINS, CORE ".heat", "nothing",
         "a maker's table or power laws: of fins and tubes only the coolant's heat is known"},
        {bad_span(c->span_from, c->span_to), CORE ".span_to", NULL, "a share above span_from"},
        {c->heat_law != SP_CORE_FINS && c->air_fouling > 0.0, CORE ".air_fouling", NULL,
         "no fouling unless the heat follows from fins and tubes; heat_factor serves any core"},
        {(c->heat_law != SP_CORE_FINS || !coolant) && c->coolant_fouling > 0.0, CORE ".coolant_fouling", NULL,
         "no fouling unless the heat follows from fins and tubes; heat_factor serves any core"},
    };
    if (load) require(r, at, CORE ".heat_load");
    JUDGE(rules);
}

static bool object_at(const struct sp_reader *r, const struct sp_key_spot *at, const char *group)
{
    const struct sp_json *node = sp_case_node_at(r, group, at);
    return node && node->type == SP_JSON_OBJECT;
}

/* Keys of the one kind of fin are none of the other. */
static void check_kind(struct sp_reader *r, const struct sp_key_spot *at, const struct sp_core *c)
{
    static const char *const louvred[] = {CORE ".fins.louvre_pitch", CORE ".fins.louvre_angle",
                                          CORE ".tubes.height"};
    static const char *const plate[] = {CORE ".tubes.diameter", CORE ".tubes.pitch_along"};
    bool plates = c->fin_kind == SP_FINS_PLATE, fins = object_at(r, at, CORE ".fins"),
         tubes = object_at(r, at, CORE ".tubes");
    for (size_t i = 0; i < 3; ++i) {
        if (!plates && (i < 2 ? fins : tubes)) require(r, at, louvred[i]);
        if (plates && sp_case_given_at(r, louvred[i], at))
            sp_case_fault_of(r, louvred[i], at, NULL, "no louvres and no flat tubes with kind \"plate\"",
                             NULL);
    }
    if (plates && tubes) require(r, at, plate[0]);
    if (plates && tubes && c->rows > 1.0) require(r, at, plate[1]);
    for (size_t i = 0; i < 2; ++i)
        if (!plates && sp_case_given_at(r, plate[i], at))
            sp_case_fault_of(r, plate[i], at, NULL, "no round tubes without fins of kind \"plate\"", NULL);
}

static void check_plates(struct sp_reader *r, const struct sp_key_spot *at, const struct sp_core *c)
{
    double collar = c->tube_diameter + 2.0 * c->fin_thickness;
    const struct rule rules[] = {
        {collar >= c->tube_pitch, CORE ".tubes.diameter", NULL,
         "a diameter below the tube pitch, fins' collars included"},
        {2.0 * c->tube_wall >= c->tube_diameter, CORE ".tubes.wall", NULL,
         "a wall below half the tube's diameter"},
        {(c->rows - 1.0) * c->tube_pitch_along + collar > c->depth, CORE ".depth", NULL,
         "a depth that holds all rows of tubes"},
        {c->rows > 1.0 && hypot(0.5 * c->tube_pitch, c->tube_pitch_along) <= collar,
         CORE ".tubes.pitch_along", NULL, "rows of tubes that do not touch"},
    };
    if (c->fin_kind == SP_FINS_PLATE) JUDGE(rules);
}

static void check_core(struct sp_reader *r, const struct sp_key_spot *at)
{
    const struct sp_core *c = &r->design->duct[at->outer].core[at->inner];
    if (!sp_case_given_at(r, CORE, at)) return;
    check_medium(r, at, c);
    check_kind(r, at, c);
    check_plates(r, at, c);
}

/* ---- inlet, diffuser, fan -------------------------------------------------------------------------- */

#define INLET "car.duct.inlet"

static void check_recovery(struct sp_reader *r, const struct sp_key_spot *at, const struct sp_table *t)
{
    bool rising = true, by_table = sp_case_weight(r, INLET ".recovery_table", at) > sp_case_weight(r, INLET ".recovery", at);
    for (size_t i = 1; i < t->rows; ++i)
        rising = rising && t->cell[2 * i] > t->cell[2 * i - 2];
    const struct rule rules[] = {
        {t->rows && sp_case_given_at(r, INLET ".recovery", at), by_table ? INLET ".recovery_table" : INLET ".recovery",
         "recovery and its table",
         "one of them"},
        {t->rows && sp_case_given_at(r, INLET ".layer_thickness", at), INLET ".layer_thickness", NULL,
         "no layer besides recovery_table, which has it in it"},
        {!rising, INLET ".recovery_table", "ratios that do not rise", "rows with V1/V rising"},
        {rising && !sp_inlet_recovery_single(t), INLET ".recovery_table",
         "a recovery that rises the steeper, or again",
         "one that rises ever less, then falls: else the duct has several flows"},
    };
    JUDGE(rules);
}

static void check_inlet(struct sp_reader *r, const struct sp_key_spot *at)
{
    const struct sp_inlet *d = &r->design->duct[at->outer].inlet;
    const struct rule rules[] = {
        {d->lip_suction > 0.0 && !d->spill, INLET ".lip_suction", NULL,
         "spill true with it; else nothing is given back"},
        {!(d->layer_thickness > 0.0) && sp_case_given_at(r, INLET ".height", at), INLET ".layer_thickness",
         "nothing", "a thickness above 0, for a height is given"},
    };
    if (!sp_case_given_at(r, INLET, at)) return;
    check_recovery(r, at, &d->recovery_table);
    if (d->layer_thickness > 0.0) require(r, at, INLET ".height");
    JUDGE(rules);
}

static void check_diffuser(struct sp_reader *r, const struct sp_key_spot *at)
{
    const struct sp_diffuser_design *d = &r->design->duct[at->outer].diffuser;
    bool plane = d->kind == SP_DIFFUSER_ONE_PLANE;
    const struct rule rules[] = {
        {!plane && sp_case_given_at(r, "car.duct.diffuser.height", at), "car.duct.diffuser.height", NULL,
         "no height without kind \"one plane\""},
        {d->jet_share > 0.0 && d->kind == SP_DIFFUSER_GIVEN, "car.duct.diffuser.jet_share", NULL,
         "a kind with it: a given loss tells nothing of stall"},
    };
    if (plane) require(r, at, "car.duct.diffuser.length");
    if (plane) require(r, at, "car.duct.diffuser.height");
    JUDGE(rules);
}

/* Area, or gap with length. */
static void check_leak(struct sp_reader *r, const struct sp_key_spot *at, const char *leak)
{
    char area[80], gap[80], length[80];
    snprintf(area, sizeof area, "%s.area", leak);
    snprintf(gap, sizeof gap, "%s.gap", leak);
    snprintf(length, sizeof length, "%s.length", leak);
    bool by_gap = sp_case_given_at(r, gap, at), by_length = sp_case_given_at(r, length, at);
    const struct rule rules[] = {
        {sp_case_given_at(r, area, at) && (by_gap || by_length), area, NULL, "either area, or gap and length"},
    };
    if (by_gap) require(r, at, length);
    if (by_length) require(r, at, gap);
    JUDGE(rules);
}

static void check_leaks(struct sp_reader *r, const struct sp_key_spot *at)
{
    check_leak(r, at, "car.duct.leak.past_core");
    check_leak(r, at, "car.duct.leak.outside");
}

/* No more than all of the engine's skin. */
static void check_bay(struct sp_reader *r, const struct sp_key_spot *at)
{
    double all = 0.0;
    for (size_t i = 0; i <= at->outer; ++i) all += r->design->duct[i].bay_skin;
    const struct rule rules[] = {
        {all > 1.0 + 1e-9 && sp_case_given_at(r, "car.duct.bay.engine_skin", at), "car.duct.bay.engine_skin", NULL,
         "shares of all ducts that make up 1 at most"},
    };
    JUDGE(rules);
}

/* The same span, or none in common: fans of one span share a shroud. */
static bool shrouds_go(const struct sp_fan *a, const struct sp_fan *b)
{
    const double same = 1e-9;
    double from = a->span_from, to = a->span_to == 0.0 ? 1.0 : a->span_to; /* 0 to 0: all of it */
    double other = b->span_from, end = b->span_to == 0.0 ? 1.0 : b->span_to;
    if (a->before_core != b->before_core || (fabs(from - other) < same && fabs(to - end) < same)) return true;
    return !(from < end - same && other < to - same);
}

static bool shroud_over_another(const struct sp_reader *r, const struct sp_key_spot *at)
{
    const struct sp_duct_design *d = &r->design->duct[at->outer];
    for (size_t i = 0; i < at->inner; ++i)
        if (d->fan[i].fitted && !shrouds_go(&d->fan[i], &d->fan[at->inner])) return true;
    return false;
}

static void check_fan(struct sp_reader *r, const struct sp_key_spot *at)
{
    const struct sp_fan *f = &r->design->duct[at->outer].fan[at->inner];
    const struct rule rules[] = {
        {bad_span(f->span_from, f->span_to), "car.duct.fan.span_to", NULL, "a share above span_from"},
        {f->fitted && shroud_over_another(r, at), "car.duct.fan.span_from", "a shroud over part of another fan's",
         "a span that is another's, or has nothing in common with it"},
        {f->current_limit > 0.0 && f->power == 0.0, "car.duct.fan.power", NULL,
         "a power above 0, for a current is watched"},
    };
    if (f->fitted) JUDGE(rules);
}

void sp_case_check_fitted(struct sp_reader *r)
{
    static const struct {
        const char *group;
        void (*check)(struct sp_reader *r, const struct sp_key_spot *at);
    } parts[] = {{"car.duct", check_inlet},
                 {"car.duct", check_diffuser},
                 {"car.duct", check_leaks},
                 {"car.duct", check_bay},
                 {CORE, check_core},
                 {"car.duct.fan", check_fan}};
    for (size_t i = 0; i < sizeof parts / sizeof *parts; ++i) {
        struct sp_key_spot at = {0};
        do
            parts[i].check(r, &at);
        while (sp_case_next(r->tree, parts[i].group, &at));
    }
}
