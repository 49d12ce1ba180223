/* What a case must have besides the car: one way to tell the pressure, limits, steps that are one thing.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "case.h"

#include <math.h>
#include <string.h>

static void check_air(struct sp_reader *r)
{
    if (sp_case_given(r, "air.pressure") && sp_case_given(r, "air.altitude"))
        sp_case_fault(r, "air.pressure", "both altitude and pressure", "one of them", NULL);
}

static void check_limits(struct sp_reader *r)
{
    static const char *const deciding[] = {"coolant", "gauge", "metal", "boil_margin", "oil", "gearbox", "charge"};
    const struct sp_json *limits = sp_json_member(r->tree, "limits");
    if (r->purpose != SP_FOR_DRIVE || !limits || limits->type != SP_JSON_OBJECT) return;
    for (size_t i = 0; i < sizeof deciding / sizeof *deciding; ++i)
        if (sp_json_member(limits, deciding[i])) return;
    const struct sp_design *d = r->design;
    char expected[120];
    snprintf(expected, sizeof expected, "at least one of coolant, gauge, metal, boil_margin%s%s%s",
             d->oil.fitted ? ", oil" : "", d->gearbox.fitted ? ", gearbox" : "", d->charge.fitted ? ", charge" : "");
    sp_case_fault(r, "limits", "no limit", expected, NULL);
}

/* One quantity's tiers: each below the next, and only for what the car has. */
static void check_tiers(struct sp_reader *r, const char *name, const struct sp_tiers *t, bool fitted)
{
    const struct { const char *end; double at; } tier[] = {{"_caution", t->caution}, {"_alarm", t->alarm}, {"", t->stop}};
    double below = -INFINITY;
    for (int i = 0; i < 3; ++i) {
        char path[SP_PATH_MAX];
        snprintf(path, sizeof path, "limits.%s%s", name, tier[i].end);
        if (!isfinite(tier[i].at)) continue;
        if (!fitted) sp_case_fault(r, path, "a limit of what the car does not have", "a limit of a fitted part", NULL);
        else if (!(tier[i].at > below))
            sp_case_fault(r, path, NULL, "a temperature above the tiers before it: caution < alarm < limit", NULL);
        below = tier[i].at;
    }
}

static void check_all_tiers(struct sp_reader *r)
{
    const struct sp_design *d = r->design;
    const struct sp_limits *l = &d->limits;
    check_tiers(r, "coolant", &l->coolant, true);
    check_tiers(r, "gauge", &l->gauge, true);
    check_tiers(r, "metal", &l->metal, true);
    check_tiers(r, "oil", &l->oil, d->oil.fitted);
    check_tiers(r, "gearbox", &l->gearbox, d->gearbox.fitted);
    check_tiers(r, "charge", &l->charge, d->charge.fitted);
    if (isfinite(l->least_oil) && !d->oil.fitted)
        sp_case_fault(r, "limits.least_oil", "a limit of what the car does not have", "a limit of a fitted part", NULL);
}

static const struct sp_json *member(const struct sp_json *step, const char *key)
{
    return sp_json_member(step, key);
}

static void fault(struct sp_reader *r, const struct sp_json *at, size_t i, const char *key, const char *found,
                  const char *expected)
{
    char path[SP_PATH_MAX];
    snprintf(path, sizeof path, "drive[%zu]%s%s", i, *key ? "." : "", key);
    sp_case_fault_at(r, at, path, found, expected, NULL);
}

/* Keys that mean nothing in a step of another kind. */
static void check_strays(struct sp_reader *r, const struct sp_json *node, size_t i, enum sp_step_kind kind)
{
    static const struct {
        const char *key;
        enum sp_step_kind kind;
        const char *with;
    } owners[] = {
        {"speed", SP_STEP_HOLD, "no such key but with hold"},
        {"power", SP_STEP_HOLD, "no such key but with hold"},
        {"engine_speed", SP_STEP_HOLD, "no such key but with hold"},
        {"grade", SP_STEP_HOLD, "no such key but with hold"},
        {"key_on", SP_STEP_SOAK, "no such key but with soak"},
        {"smooth", SP_STEP_TRACE, "no such key but with trace"},
        {"columns", SP_STEP_TRACE, "no such key but with trace"},
        {"layout", SP_STEP_TRACE, "no such key but with trace"},
    };
    for (size_t k = 0; k < sizeof owners / sizeof *owners; ++k) {
        const struct sp_json *stray = member(node, owners[k].key);
        if (stray && owners[k].kind != kind) fault(r, stray, i, owners[k].key, NULL, owners[k].with);
    }
}

static void check_step(struct sp_reader *r, const struct sp_json *node, size_t i)
{
    static const char *const kinds[] = {
        [SP_STEP_TRACE] = "trace", [SP_STEP_IDLE] = "idle", [SP_STEP_HOLD] = "hold", [SP_STEP_SOAK] = "soak"};
    struct sp_step *step = &r->design->step[i];
    int n = 0;
    for (int k = 0; k < 4; ++k) {
        if (!member(node, kinds[k])) continue;
        step->kind = (enum sp_step_kind)k;
        ++n;
    }
    if (n != 1) {
        fault(r, node, i, "", n ? "more than one kind of step" : "no kind of step",
              "exactly one of trace, idle, hold, soak");
        return;
    }
    check_strays(r, node, i, step->kind);
    if (step->kind == SP_STEP_HOLD && !member(node, "speed"))
        fault(r, node, i, "speed", "nothing", "a speed such as \"60 km/h\"");
    if (step->kind == SP_STEP_TRACE && step->format.decimal && step->format.decimal == step->format.delimiter)
        fault(r, node, i, "layout", "one character for both delimiter and decimal", "two different ones");
}

void sp_case_check_drive(struct sp_reader *r)
{
    const struct sp_json *drive = sp_json_member(r->tree, "drive");
    size_t i = 0;
    check_air(r);
    check_limits(r);
    check_all_tiers(r);
    if (!drive || drive->type != SP_JSON_ARRAY) return;
    for (const struct sp_json *c = drive->child; c && i < r->design->steps; c = c->next, ++i)
        if (c->type == SP_JSON_OBJECT) check_step(r, c, i);
}
