/* What follows from the values: which laws hold, defaults by rule, air pressure, the coolant's mix.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static void settle_core(struct sp_reader *r)
{
    struct sp_core *c = &r->design->duct[0].core[0];
    bool fins = sp_case_given(r, "car.duct.core.fins") && sp_case_given(r, "car.duct.core.tubes");
    if (!sp_case_given(r, "car.duct.core.pressure_drop"))
        c->drop_law = SP_DROP_FINS;
    else if (sp_case_given(r, "car.duct.core.pressure_drop.coefficient"))
        c->drop_law = SP_DROP_COEFFICIENT;
    else if (sp_case_given(r, "car.duct.core.pressure_drop.table"))
        c->drop_law = SP_DROP_TABLE;
    else
        c->drop_law = SP_DROP_LINEAR;
    if (!sp_case_given(r, "car.duct.core.heat"))
        c->heat_law = fins ? SP_CORE_FINS : SP_CORE_NO_HEAT;
    else if (sp_case_given(r, "car.duct.core.heat.rejection"))
        c->heat_law = SP_CORE_MAKER;
    else
        c->heat_law = SP_CORE_POWER;
}

/* A default by rule that comes out of range speaks of odd values elsewhere. */
static void judge(struct sp_reader *r, const struct sp_key *row, double value)
{
    struct sp_range range;
    char found[200];
    if (isnan(value) || !sp_range_read(r->units, row->kind, row->range, &range)) return;
    if (sp_range_holds(&range, value)) return;
    snprintf(found, sizeof found, "%.6g %s, by the default \"%.100s\"", value, sp_kind_si(row->kind),
             row->fallback);
    sp_case_fault(r, row->path, found, row->range, NULL);
}

static void apply_rules(struct sp_reader *r)
{
    const struct sp_key *row;
    for (size_t i = 0; (row = sp_key_row(i)) != NULL; ++i) {
        if (!row->rule || sp_case_given(r, row->path)) continue;
        double value = row->rule(r->design);
        sp_key_store(row, sp_key_place(row, r->design, 0), value);
        judge(r, row, value);
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
    settle_core(r);
    apply_rules(r);
    settle_coolant(r);
}
