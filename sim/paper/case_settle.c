/* What follows from the values: which laws hold, defaults by rule, air pressure, the coolant's mix.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#define CORE "car.duct.core"

static bool given(const struct sp_reader *r, const char *path, const struct sp_key_spot *at)
{
    return sp_case_given_at(r, path, at);
}

static void settle_core(struct sp_reader *r, const struct sp_key_spot *at)
{
    struct sp_core *c = &r->design->duct[at->outer].core[at->inner];
    bool fins = given(r, CORE ".fins", at) && given(r, CORE ".tubes", at);
    if (!given(r, CORE ".pressure_drop", at))
        c->drop_law = SP_DROP_FINS;
    else if (given(r, CORE ".pressure_drop.coefficient", at))
        c->drop_law = SP_DROP_COEFFICIENT;
    else if (given(r, CORE ".pressure_drop.table", at))
        c->drop_law = SP_DROP_TABLE;
    else
        c->drop_law = SP_DROP_LINEAR;
    if (!given(r, CORE ".heat", at))
        c->heat_law = fins ? SP_CORE_FINS : SP_CORE_NO_HEAT;
    else if (given(r, CORE ".heat.rejection", at))
        c->heat_law = SP_CORE_MAKER;
    else
        c->heat_law = SP_CORE_POWER;
}

static void settle_cores(struct sp_reader *r)
{
    struct sp_key_spot at = {0};
    do
        settle_core(r, &at);
    while (sp_case_next(r->tree, CORE, &at));
}

/* A default by rule that comes out of range speaks of odd values elsewhere. */
static void judge(struct sp_reader *r, const struct sp_key *row, const struct sp_key_spot *at, double value)
{
    struct sp_range range;
    char found[200];
    if (isnan(value) || !sp_range_read(r->units, row->kind, row->range, &range)) return;
    if (sp_range_holds(&range, value)) return;
    snprintf(found, sizeof found, "%.6g %s, by the default \"%.100s\"", value, sp_kind_si(row->kind),
             row->fallback);
    sp_case_fault_of(r, row->path, at, found, row->range, NULL);
}

static void apply_rule(struct sp_reader *r, const struct sp_key *row, const struct sp_key_spot *at)
{
    if (sp_case_given_at(r, row->path, at)) return;
    double value = row->rule(r->design, at);
    sp_key_store(row, sp_key_place(row, r->design, at), value);
    judge(r, row, at, value);
}

static void apply_rules(struct sp_reader *r)
{
    const struct sp_key *row;
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i) {
        struct sp_key_spot at = {0};
        if (!row->rule) continue;
        do
            apply_rule(r, row, &at);
        while (sp_case_next(r->tree, row->path, &at));
    }
}

static void settle_air(struct sp_reader *r)
{
    struct sp_air_design *air = &r->design->air;
    if (sp_case_given(r, "air.pressure"))
        air->altitude = NAN;
    else
        air->pressure = sp_isa_pressure(air->altitude);
}

static void settle_coolant(struct sp_reader *r)
{
    struct sp_coolant_design *c = &r->design->coolant;
    if (isnan(c->share)) return;
    if (c->kind == SP_WATER && c->share > 0.0) {
        sp_case_fault(r, "car.coolant.glycol", NULL, "0 %, for the coolant is water", NULL);
        return;
    }
    if (!sp_coolant_mix(c->kind, c->share, &c->fluid))
        sp_case_fault(r, "car.coolant.glycol", NULL,
                      c->kind == SP_PROPYLENE_GLYCOL ? "0 % to 50 %, with propylene glycol" : "0 % to 60 %",
                      NULL);
}

/* Traces lie where the case says, seen from the case. */
static void settle_traces(struct sp_reader *r)
{
    for (size_t i = 0; i < r->design->steps; ++i) {
        struct sp_step *step = &r->design->step[i];
        if (!step->trace) continue;
        char *path = sp_path_join(r->name, step->trace);
        if (!path) r->no_memory = true;
        free(step->trace);
        step->trace = path;
    }
}

void sp_case_settle(struct sp_reader *r)
{
    r->design->file = strdup(r->name);
    if (!r->design->file) r->no_memory = true;
    settle_traces(r);
    settle_air(r);
    if (r->no_car) return;
    settle_cores(r);
    apply_rules(r);
    settle_coolant(r);
}
