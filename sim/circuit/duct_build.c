/* Makes a duct ready: parts, diffuser, and the network's nodes and branches.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <stdlib.h>

#include "circuit/duct_lanes.h"
#include "part/diffuser.h"
#include "part/inlet.h"
#include "part/unevenness.h"

static bool refuse(const struct sp_place *at, struct sp_complaints *to, const char *found,
                   const char *expected)
{
    sp_complain(to, at, found, expected, NULL);
    return false;
}

/* The core's loss coefficient on its face head, at a speed where cores are tested. */
static double core_coefficient(const struct sp_core_ready *core)
{
    const double rho = 1.2, v = 6.0, T = 293.15;
    struct sp_core_loss loss = sp_core_air_loss(core, rho * v, T, T, rho, rho);
    return loss.core / (0.5 * rho * v * v);
}

/* All cores that stand behind one another in a lane, on the head at the first one's face. */
static double lane_coefficient(const struct sp_duct *d, const struct sp_lane *l)
{
    double sum = 0.0, first = sp_lane_face(d, l, 0);
    for (int i = 0; i < l->cores; ++i) {
        double narrower = first / sp_lane_face(d, l, i);
        sum += core_coefficient(&d->core[l->core[i]]) * narrower * narrower;
    }
    return sum;
}

/* Mean over the section. */
static double resistance(const struct sp_duct *d)
{
    double sum = 0.0;
    for (int i = 0; i < d->lanes; ++i)
        sum += lane_coefficient(d, &d->lane[i]) * (sp_lane_face(d, &d->lane[i], 0) / d->section);
    return sum;
}

/* A stalled diffuser blows upon a part of the cores that the air meets first. */
static void blow_unevenly(struct sp_duct *d, double K)
{
    double uneven = sp_jet_unevenness(d->section / d->inlet_area, K, d->design.diffuser.jet_share);
    for (int i = 0; i < d->lanes; ++i) sp_core_set_uneven(&d->core[d->lane[i].core[0]], uneven);
}

static void set_diffuser(struct sp_duct *d)
{
    const struct sp_diffuser_design *g = &d->design.diffuser;
    d->diffuser_loss = g->loss;
    if (g->kind == SP_DIFFUSER_GIVEN) return;
    d->diffuser_loss = 0.0;
    if (d->section <= d->inlet_area) return;
    static const enum sp_diffuser_kind kind[] = {[SP_DIFFUSER_SUDDEN] = SP_DIFFUSER_STEP,
                                                 [SP_DIFFUSER_CONICAL] = SP_DIFFUSER_CONE,
                                                 [SP_DIFFUSER_ONE_PLANE] = SP_DIFFUSER_PLANE};
    struct sp_diffuser shape = {.kind = kind[g->kind], .inlet_area = d->inlet_area, .outlet_area = d->section,
                                .length = g->length, .inlet_height = g->height, .damped = g->core_damping};
    double K = resistance(d);
    struct sp_diffuser_loss loss = sp_diffuser_loss(&shape, K);
    d->diffuser_loss = loss.loss;
    d->diffuser_stalled = loss.stalled;
    if (loss.stalled && g->jet_share > 0.0) blow_unevenly(d, K);
}

static bool no_leaks(const struct sp_duct_design *g)
{
    return !(g->past_core.area > 0.0) && !(g->outside.area > 0.0);
}

static bool as_outside(const struct sp_inlet *i)
{
    return i->recirculated == 0.0 && i->preheat_standing == 0.0 && i->preheat_moving == 0.0;
}

static bool is_plain(const struct sp_duct *d)
{
    const struct sp_duct_design *g = &d->design;
    const struct sp_fan *f = &g->fan[0];
    bool fan_whole = !f->fitted || (sp_span_is_whole(f->span_from, f->span_to) && !(f->flap_area > 0.0));
    return d->cores == 1 && d->exits == 1 && d->fans <= 1 && fan_whole && no_leaks(g) &&
           as_outside(&g->inlet) && sp_span_is_whole(g->core[0].span_from, g->core[0].span_to) &&
           g->core[0].carries != SP_CARRIES_LOAD;
}

static void settle(struct sp_leak *l)
{
    if (!(l->area > 0.0)) l->area = l->gap * l->length;
}

/* How many of each list are in use. */
static bool count(struct sp_duct *d, const struct sp_place *at, struct sp_complaints *to)
{
    const struct sp_duct_design *g = &d->design;
    if (g->cores > SP_CORES || g->exits > SP_EXITS)
        return refuse(at, to, "too many cores or exits", "at most 5 and 8");
    d->cores = g->cores ? (int)g->cores : 1;
    d->exits = g->exits ? (int)g->exits : 1;
    for (int i = 0; i < SP_FANS; ++i)
        if (g->fan[i].fitted) d->fans = i + 1;
    d->count = g->count > 1.0 ? g->count : 1.0;
    d->inlet_area = sp_inlet_area(&g->inlet);
    settle(&d->design.past_core);
    settle(&d->design.outside);
    for (int i = 0; i < d->exits; ++i) d->cos_angle[i] = cos(g->exit[i].angle);
    return true;
}

static bool build_parts(struct sp_duct *d, const struct sp_coolant *coolant, const struct sp_place *at,
                        struct sp_complaints *to)
{
    bool good = true;
    for (int i = 0; i < d->cores; ++i)
        good = sp_core_build(&d->design.core[i], coolant, &d->core[i], at, to) && good;
    if (!sp_lanes_build(d, at, to)) return false;
    for (int i = 0; i < d->fans; ++i)
        good = sp_fan_build(&d->design.fan[i], sp_shroud_face(d, i), &d->fan[i], at, to) && good;
    return good;
}

struct sp_duct *sp_duct_build(const struct sp_duct_design *design, const struct sp_coolant *coolant,
                              const struct sp_place *at, struct sp_complaints *complaints)
{
    struct sp_duct *d = calloc(1, sizeof *d);
    if (!d) {
        refuse(at, complaints, "no memory", "room for the duct");
        return NULL;
    }
    d->design = *design;
    if (count(d, at, complaints) && build_parts(d, coolant, at, complaints)) {
        set_diffuser(d);
        d->plain = is_plain(d);
        if (sp_branches_build(d, at, complaints)) return d;
    }
    sp_duct_free(d);
    return NULL;
}

void sp_duct_free(struct sp_duct *d)
{
    if (!d) return;
    for (int i = 0; i < SP_CORES; ++i) sp_core_free(&d->core[i]);
    for (int i = 0; i < SP_FANS; ++i) sp_fan_free(&d->fan[i]);
    free(d);
}
