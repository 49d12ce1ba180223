/* Lanes: the elementary intervals between the ends of all spans. SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/duct_lanes.h"

#include <math.h>

/* Ends of spans closer than this are one. */
static const double same = 1e-9;

struct span { double from, to; };

static bool refuse(const struct sp_place *at, struct sp_complaints *to, const char *found,
                   const char *expected)
{
    sp_complain(to, at, found, expected, NULL);
    return false;
}

bool sp_span_is_whole(double from, double to)
{
    return (from == 0.0 && to == 0.0) || (from <= same && to >= 1.0 - same);
}

static struct span span(double from, double to)
{
    return sp_span_is_whole(from, to) ? (struct span){0.0, 1.0} : (struct span){from, to};
}

static struct span core_span(const struct sp_duct *d, int i)
{
    return span(d->design.core[i].span_from, d->design.core[i].span_to);
}

static struct span fan_span(const struct sp_duct *d, int i)
{
    return span(d->design.fan[i].span_from, d->design.fan[i].span_to);
}

static bool covers(struct span s, double x)
{
    return s.from < x && x < s.to;
}

static bool sound(struct span s)
{
    return s.from >= 0.0 && s.to <= 1.0 && s.to - s.from > 1e-6;
}

double sp_lane_face(const struct sp_duct *d, const struct sp_lane *l, int i)
{
    return d->core[l->core[i]].face * l->share[i];
}

double sp_shroud_face(const struct sp_duct *d, int fan)
{
    double sum = 0.0;
    bool first = d->design.fan[fan].before_core;
    double own = d->design.fan[fan].count, all = 0.0;
    for (int f = 0; f < d->fans; ++f)
        if (d->design.fan[f].fitted && d->shroud[f] == d->shroud[fan]) all += d->design.fan[f].count;
    for (int i = 0; i < d->lanes; ++i) {
        const struct sp_lane *l = &d->lane[i];
        if ((first ? l->from : l->to) == d->shroud[fan]) sum += sp_lane_face(d, l, first ? 0 : l->cores - 1);
    }
    return all > own ? sum * own / all : sum;
}

/* ---- shrouds --------------------------------------------------------------------------------------- */

/* Fans of one span on one side share a node. */
static bool name_shrouds(struct sp_duct *d, const struct sp_place *at, struct sp_complaints *to)
{
    d->nodes = 2;
    for (int i = 0; i < d->fans; ++i) {
        struct span s = fan_span(d, i);
        d->shroud[i] = SP_NODE_OUTSIDE;
        if (!d->design.fan[i].fitted) continue;
        if (!sound(s))
            return refuse(at, to, "a fan's span that is no span", "span_from below span_to, 0 to 1");
        for (int j = 0; j < i && d->shroud[i] < 0; ++j) {
            struct span t = fan_span(d, j);
            if (d->shroud[j] < 0 || d->design.fan[j].before_core != d->design.fan[i].before_core) continue;
            if (fabs(s.from - t.from) < same && fabs(s.to - t.to) < same) d->shroud[i] = d->shroud[j];
            else if (s.from < t.to - same && t.from < s.to - same)
                return refuse(at, to, "two shrouds over the same part",
                              "spans of fans that are equal or apart");
        }
        if (d->shroud[i] < 0) d->shroud[i] = d->nodes++;
    }
    return true;
}

static int shroud_over(const struct sp_duct *d, double x, bool before)
{
    for (int i = 0; i < d->fans; ++i)
        if (d->shroud[i] >= 0 && d->design.fan[i].before_core == before && covers(fan_span(d, i), x))
            return d->shroud[i];
    return before ? SP_NODE_FRONT : SP_NODE_BAY;
}

/* ---- lanes ----------------------------------------------------------------------------------------- */

static int add_end(double *end, int ends, double x)
{
    int i = 0;
    while (i < ends && end[i] < x - same) ++i;
    if (i < ends && fabs(end[i] - x) <= same) return ends;
    for (int j = ends; j > i; --j) end[j] = end[j - 1];
    end[i] = x;
    return ends + 1;
}

static int all_ends(const struct sp_duct *d, double *end)
{
    int n = add_end(end, add_end(end, 0, 0.0), 1.0);
    for (int i = 0; i < d->cores; ++i)
        n = add_end(end, add_end(end, n, core_span(d, i).from), core_span(d, i).to);
    for (int i = 0; i < d->fans; ++i)
        if (d->shroud[i] >= 0) n = add_end(end, add_end(end, n, fan_span(d, i).from), fan_span(d, i).to);
    return n;
}

static struct sp_lane lane_between(const struct sp_duct *d, double low, double high)
{
    double middle = 0.5 * (low + high);
    struct sp_lane l = {.from = shroud_over(d, middle, true), .to = shroud_over(d, middle, false)};
    for (int i = 0; i < d->cores; ++i) {
        struct span s = core_span(d, i);
        if (!covers(s, middle)) continue;
        l.core[l.cores] = i;
        l.share[l.cores++] = (high - low) / (s.to - s.from);
    }
    return l;
}

static bool alike(const struct sp_lane *a, const struct sp_lane *b)
{
    bool same_way = a->from == b->from && a->to == b->to && a->cores == b->cores;
    for (int i = 0; same_way && i < a->cores; ++i) same_way = a->core[i] == b->core[i];
    return same_way;
}

/* Lanes with the same cores between the same nodes have the same flow per face: they are one. */
static void add_lane(struct sp_duct *d, const struct sp_lane *l)
{
    int at = 0;
    while (at < d->lanes && !alike(&d->lane[at], l)) ++at;
    if (at == d->lanes) {
        d->lane[d->lanes++] = *l;
        return;
    }
    for (int i = 0; i < l->cores; ++i) d->lane[at].share[i] += l->share[i];
}

bool sp_lanes_build(struct sp_duct *d, const struct sp_place *at, struct sp_complaints *to)
{
    double end[2 * SP_LANES];
    if (!name_shrouds(d, at, to)) return false;
    for (int i = 0; i < d->cores; ++i)
        if (!sound(core_span(d, i)))
            return refuse(at, to, "a core's span that is no span", "span_from below span_to, 0 to 1");
    int ends = all_ends(d, end);
    for (int i = 0; i + 1 < ends; ++i) {
        struct sp_lane l = lane_between(d, end[i], end[i + 1]);
        if (!l.cores)
            return refuse(at, to, "a part of the section with no core in it",
                          "spans of cores that leave no hole; a gap beside a core is a leak");
        add_lane(d, &l);
    }
    d->section = 0.0;
    for (int i = 0; i < d->lanes; ++i) d->section += sp_lane_face(d, &d->lane[i], 0);
    return true;
}

/* ---- branches -------------------------------------------------------------------------------------- */

static double all_exits(const struct sp_duct *d)
{
    double sum = 0.0;
    for (int i = 0; i < d->exits; ++i) sum += d->design.exit[i].area;
    return sum;
}

/* Several exits share the floor by their areas, so that one cut in two stays what it was; leaks and flaps
 * have one of the same velocity in them. */
static void add(struct sp_duct *d, struct sp_branch b)
{
    b.share = 1.0;
    if (b.kind == SP_BRANCH_EXIT) b.share = b.area / all_exits(d);
    if (b.kind == SP_BRANCH_LEAK || b.kind == SP_BRANCH_FLAP) b.share = fmin(b.area / d->section, 1.0);
    d->branch[d->branches++] = b;
}

static void add_fan(struct sp_duct *d, int i)
{
    const struct sp_fan *f = &d->design.fan[i];
    int from = f->before_core ? SP_NODE_FRONT : d->shroud[i],
        to = f->before_core ? d->shroud[i] : SP_NODE_BAY;
    if (d->shroud[i] < 0) return;
    add(d, (struct sp_branch){
               .kind = SP_BRANCH_FAN, .index = i, .from = from, .to = to, .area = d->fan[i].annulus});
    if (f->flap_area > 0.0)
        add(d, (struct sp_branch){SP_BRANCH_FLAP, i, from, to, f->flap_area, f->flap_loss, 1.0});
}

static bool holds(const struct sp_leak *l)
{
    return l->area > 0.0;
}

bool sp_branches_build(struct sp_duct *d, const struct sp_place *at, struct sp_complaints *to)
{
    const struct sp_duct_design *g = &d->design;
    add(d, (struct sp_branch){SP_BRANCH_INLET, 0, SP_NODE_OUTSIDE, SP_NODE_FRONT, d->inlet_area, 0.0, 1.0});
    for (int i = 0; i < d->lanes; ++i)
        add(d, (struct sp_branch){SP_BRANCH_LANE, i, d->lane[i].from, d->lane[i].to, 0.0, 0.0, 1.0});
    for (int i = 0; i < d->fans; ++i) add_fan(d, i);
    if (holds(&g->past_core))
        add(d, (struct sp_branch){SP_BRANCH_LEAK, 0, SP_NODE_FRONT, SP_NODE_BAY, g->past_core.area,
                                  g->past_core.coefficient, 1.0});
    if (holds(&g->outside))
        add(d, (struct sp_branch){SP_BRANCH_LEAK, 1, SP_NODE_FRONT, SP_NODE_OUTSIDE, g->outside.area,
                                  g->outside.coefficient, 1.0});
    for (int i = 0; i < d->exits; ++i)
        add(d, (struct sp_branch){SP_BRANCH_EXIT, i, SP_NODE_BAY, SP_NODE_OUTSIDE, g->exit[i].area,
                                  g->exit[i].loss, 1.0});
    for (int i = 0; i < d->branches; ++i) {
        const struct sp_branch *b = &d->branch[i];
        bool needs_loss = b->kind == SP_BRANCH_LEAK || b->kind == SP_BRANCH_FLAP;
        if (needs_loss && !(b->loss > 0.0))
            return refuse(at, to, "a leak or flaps without a loss coefficient", "a coefficient above 0");
    }
    return true;
}
