/* What a design consists of as the circuit sees it: ducts to be solved, fans, cores with their fluids and strings.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdio.h>

#include "circuit/circuit.h"
#include "part/oil.h"

static const double smallest = 1.0e-5;     /* m3; a cell of no volume would be infinitely fast */
static const double charge_density = 1.6;  /* kg/m3 in a charge cooler; it sets a lag of some 10 ms only */

struct planning {
    struct sp_circuit *c;
    struct sp_complaints *complaints;
    bool good;
};

static void refuse(struct planning *p, const char *path, const char *found, const char *expected)
{
    struct sp_place at = {.file = p->c->design->file, .path = path};
    sp_complain(p->complaints, &at, found, expected, NULL);
    p->good = false;
}

static size_t at_least_one(size_t n)
{
    return n ? n : 1;
}

static double count_of(const struct sp_duct_design *d)
{
    return d->count >= 1.0 ? d->count : 1.0;
}

/* ---- ducts and fans -------------------------------------------------------------------------------- */

static void plan_fans(struct planning *p, int duct, struct sp_duct_run *run)
{
    struct sp_circuit *c = p->c;
    for (int i = 0; i < SP_FANS; ++i) {
        run->fan[i] = -1;
        if (!run->design->fan[i].fitted) continue;
        for (int f = 0; f < c->fans; ++f) /* runs of one duct share their fans' speed */
            if (c->fan[f].duct == duct && c->fan[f].slot == i) run->fan[i] = f;
        if (run->fan[i] >= 0) continue;
        if (c->fans == SP_FAN_KINDS) {
            refuse(p, "car.ducts", "more kinds of fan than can be followed", "at most 6 in the whole car");
            return;
        }
        c->fan[c->fans] = (struct sp_fan_kind){&run->design->fan[i], duct, i, count_of(run->design)};
        run->fan[i] = c->fans++;
    }
}

static void plan_duct(struct planning *p, int i)
{
    struct sp_circuit *c = p->c;
    const struct sp_duct_design *d = &c->design->duct[i];
    char path[32] = "car.duct";
    if (c->design->ducts > 1) snprintf(path, sizeof path, "car.ducts[%d]", i);
    struct sp_place at = {.file = c->design->file, .path = path};
    c->duct[i] = sp_duct_build(d, &c->design->coolant.fluid, &at, p->complaints);
    if (!c->duct[i]) {
        p->good = false;
        return;
    }
    c->ducts = i + 1;
    int repeats = d->in_series ? (int)count_of(d) : 1;
    for (int r = 0; r < repeats; ++r) {
        if (c->runs == SP_DUCT_RUNS) {
            refuse(p, path, "more ducts than can be solved one by one", "at most 6, equal ones in series counted each");
            return;
        }
        struct sp_duct_run *run = &c->run[c->runs++];
        *run = (struct sp_duct_run){.duct = c->duct[i], .design = d, .copies = d->in_series ? 1.0 : count_of(d)};
        for (int k = 0; k < SP_CORES; ++k) run->exchanger[k] = -1;
        plan_fans(p, i, run);
        if (d->bay_skin > 0.0) c->warms_bay = true;
    }
}

/* ---- cores ----------------------------------------------------------------------------------------- */

static double fluid_mass(const struct sp_circuit *c, const struct sp_core *core)
{
    double volume = fmax(core->coolant_volume, smallest);
    switch (core->carries) {
    case SP_CARRIES_OIL:
    case SP_CARRIES_GEARBOX: return volume * sp_oil_density(SP_ZERO_C + 20.0);
    case SP_CARRIES_CHARGE: return volume * charge_density;
    default: return volume * sp_coolant_density(&c->design->coolant.fluid, c->design->tank.fill_temperature);
    }
}

static bool fitted(const struct sp_design *d, enum sp_medium m)
{
    if (m == SP_CARRIES_OIL) return d->oil.fitted;
    if (m == SP_CARRIES_GEARBOX) return d->gearbox.fitted;
    return m == SP_CARRIES_CHARGE ? d->charge.fitted : true;
}

static const char *const lacking[] = {[SP_CARRIES_COOLANT] = "", [SP_CARRIES_OIL] = "car.oil",
                                      [SP_CARRIES_GEARBOX] = "car.gearbox", [SP_CARRIES_CHARGE] = "car.charge",
                                      [SP_CARRIES_LOAD] = ""};

static void judge_core(struct planning *p, const struct sp_exchanger *x, const char *path)
{
    double cells = x->design->cells;
    if (!(cells >= 1.0 && cells <= SP_CELLS_MAX)) /* a design filled by hand */
        refuse(p, path, "a number of cells that cannot be", "1 to 50 cells");
    if (!sp_core_has_heat(x->ready))
        refuse(p, path, "a core without heat data", "a heat table, conductances, or fins and tubes");
    if (!fitted(p->c->design, x->carries)) refuse(p, path, "a core for a fluid that the car has not", lacking[x->carries]);
}

/* Where a core's complaints belong, as the reader writes paths. */
static void core_path(const struct sp_circuit *c, const struct sp_duct_run *run, int slot, char *out, size_t size)
{
    int duct = (int)(run->design - c->design->duct);
    char at[24] = "car.duct";
    if (c->design->ducts > 1) snprintf(at, sizeof at, "car.ducts[%d]", duct);
    if (run->design->cores > 1) snprintf(out, size, "%s.cores[%d].heat", at, slot);
    else snprintf(out, size, "%s.core.heat", at);
}

/* Is this run the next of equal ducts in series? */
static bool again(const struct sp_circuit *c, int run)
{
    return run > 0 && c->run[run].duct == c->run[run - 1].duct;
}

/* A string goes on with cores fed by the one before, and with the next of equal ducts in series. */
static bool goes_on(const struct sp_circuit *c, int run, const struct sp_core *core, int strings)
{
    return strings > 0 && (core->in_series || again(c, run));
}

/* Strings that begin in a run. */
static int strings_of(const struct sp_circuit *c, int run)
{
    int n = 0;
    for (int e = 0; e < c->exchangers; ++e)
        n += c->exchanger[e].run == run && c->exchanger[e].string >= 0 && c->exchanger[e].first;
    return n;
}

static void plan_core(struct planning *p, int run, int slot, int *strings)
{
    struct sp_circuit *c = p->c;
    const struct sp_core *core = &c->run[run].design->core[slot];
    char path[64];
    core_path(c, &c->run[run], slot, path, sizeof path);
    if (c->exchangers == SP_EXCHANGERS) {
        refuse(p, path, "more cores than can be followed", "at most 8 in the whole car");
        return;
    }
    struct sp_exchanger *x = &c->exchanger[c->exchangers];
    *x = (struct sp_exchanger){.run = run, .slot = slot, .carries = core->carries, .design = core,
                               .ready = &c->run[run].duct->core[slot], .copies = c->run[run].copies, .string = -1,
                               .mass = fluid_mass(c, core)};
    bool before = c->exchangers > 0 && x[-1].carries == core->carries;
    x->first = !before;
    if (core->carries == SP_CARRIES_COOLANT) {
        if (again(c, run) && strings_of(c, run - 1) > 1)
            refuse(p, path, "cores side by side on the coolant, in equal ducts one after the other",
                   "coolant \"parallel\", or cores fed by the one before");
        x->first = !goes_on(c, run, core, *strings);
        if (x->first) ++*strings;
        x->string = *strings - 1;
        if (!x->first && x[-1].copies != x->copies)
            refuse(p, path, "coolant that goes on from another number of ducts", "equal counts along a string");
    }
    c->run[run].exchanger[slot] = c->exchangers++;
    judge_core(p, x, path);
}

static int plan_cores(struct planning *p)
{
    static const enum sp_medium order[] = {SP_CARRIES_COOLANT, SP_CARRIES_OIL, SP_CARRIES_GEARBOX, SP_CARRIES_CHARGE};
    struct sp_circuit *c = p->c;
    int strings = 0;
    for (size_t m = 0; m < sizeof order / sizeof order[0]; ++m)
        for (int r = 0; r < c->runs; ++r)
            for (size_t i = 0; i < at_least_one(c->run[r].design->cores); ++i)
                if (c->run[r].design->core[i].carries == order[m]) plan_core(p, r, (int)i, &strings);
    if (!strings) refuse(p, "car.duct", "no core that carries coolant", "at least one");
    if (strings > SP_LOOP_STRINGS) refuse(p, "car.duct", "too many cores side by side on the coolant", "at most 8");
    return strings;
}

/* ---- the whole ------------------------------------------------------------------------------------- */

static void plan_layout(struct sp_circuit *c, int strings)
{
    struct sp_layout_wish w = {.exchangers = c->exchangers, .fans = c->fans, .oil = c->design->oil.fitted,
                               .gearbox = c->design->gearbox.fitted, .battery = c->design->electrics.battery > 0.0};
    for (int e = 0; e < c->exchangers; ++e) {
        w.cells[e] = (int)c->exchanger[e].design->cells;
        if (strings == 1 && c->exchanger[e].string == 0) ++w.chained;
    }
    c->layout = sp_layout_make(&w);
}

static bool plan_loop(struct planning *p, int strings)
{
    struct sp_circuit *c = p->c;
    struct sp_loop_string string[SP_LOOP_STRINGS] = {{.cores = 0}};
    for (int e = 0; e < c->exchangers && c->exchanger[e].string >= 0; ++e) {
        struct sp_loop_string *s = &string[c->exchanger[e].string];
        s->core[s->cores++] = c->exchanger[e].ready;
        s->copies = c->exchanger[e].copies;
    }
    struct sp_place at = {.file = c->design->file, .path = "car.pump.curve"};
    return sp_loop_build(c->design, string, strings, &c->loop, &at, p->complaints);
}

bool sp_circuit_plan(struct sp_circuit *c, struct sp_complaints *complaints)
{
    struct planning p = {c, complaints, true};
    for (size_t i = 0; i < at_least_one(c->design->ducts); ++i) plan_duct(&p, (int)i);
    if (!p.good) return false;
    int strings = plan_cores(&p);
    if (!p.good) return false;
    plan_layout(c, strings);
    return plan_loop(&p, strings);
}
