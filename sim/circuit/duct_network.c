/* What the pieces of the network do at given unknowns, and the residuals.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/duct_network.h"

#include <math.h>
#include <string.h>

static const double most_by_load =
    200.0; /* K over ambient that a load or the engine's skin can heat air to */
static const double most_by_given = 40.0;  /* times ambient, over it, that heat given from outside can */
static const double most_cooling = 50.0;   /* K */
static const double shut = 1e10;           /* k of flaps against their way, times that along it */
static const double hardly = 0.01;        /* m/s of face velocity; see sp_network_soft */
static const double stray =
    1e-9; /* of hardly any: ambient air that keeps a closed loop's temperature known */
static const double given_floor = 1e-6; /* m/s, laminar floor with given heat, which is itself linear there */
static const double preheat_from = 50.0 / 3.6; /* m/s, from which preheat is that of the road */

static double eighth_root(double x)
{
    return sqrt(sqrt(sqrt(x)));
}

static double eighth(double x)
{
    double x2 = x * x, x4 = x2 * x2;
    return x4 * x4;
}

double sp_network_soft(const struct sp_network *n, double inflow, double *slope)
{
    double x = inflow / n->small;
    *slope = 1.0;
    if (x > 100.0) return inflow + stray * n->small;
    double soft = eighth_root(1.0 + eighth(x)), steep = x / soft;
    *slope = steep * steep * steep * (steep * steep * steep * steep);
    return (soft + stray) * n->small;
}

double sp_network_rise(double heat, double rate, double most)
{
    if (heat < 0.0) return -sp_network_rise(-heat, rate, most_cooling);
    if (!(heat > 0.0 && most > 0.0)) return 0.0;
    double x = most * rate / heat;
    return x > 1.0 ? heat / rate / eighth_root(1.0 + eighth(1.0 / x)) : most / eighth_root(1.0 + eighth(x));
}

/* ---- posing ---------------------------------------------------------------------------------------- */

static double preheat(const struct sp_inlet *i, double speed)
{
    double x = fmin(fmax(speed, 0.0) / preheat_from, 1.0);
    return i->preheat_standing + (i->preheat_moving - i->preheat_standing) * x;
}

static double recirculated(const struct sp_inlet *i, double speed)
{
    if (!(i->recirculated > 0.0)) return 0.0;
    double left = i->recirculation_ends > 0.0 ? 1.0 - fmax(speed, 0.0) / i->recirculation_ends : speed <= 0.0;
    return i->recirculated * fmax(left, 0.0);
}

/* Given heat goes to the cores that carry coolant, by their faces; where none does, to all. */
static void share_given_heat(struct sp_network *n)
{
    const struct sp_duct *d = n->p.duct;
    double coolant = 0.0, all = 0.0;
    for (int i = 0; i < d->cores; ++i) {
        all += d->core[i].face;
        if (d->design.core[i].carries == SP_CARRIES_COOLANT) coolant += d->core[i].face;
    }
    for (int i = 0; i < d->cores; ++i)
        n->takes_given[i] = !(coolant > 0.0) || d->design.core[i].carries == SP_CARRIES_COOLANT;
    n->given = n->p.in->heat / (coolant > 0.0 ? coolant : all);
}

static double outside_of(const struct sp_network *n, const struct sp_branch *b)
{
    if (b->kind == SP_BRANCH_INLET) return n->p.recovery * n->p.head;
    if (b->kind == SP_BRANCH_LEAK && b->index == 1) return sp_duct_back_leak(&n->p);
    if (b->kind == SP_BRANCH_EXIT && !n->p.in->bonnet_up) return sp_duct_back(&n->p, (size_t)b->index);
    return 0.0;
}

/* With the bonnet up the bay is one with the still air: a single exit as wide as the cores. */
static int branches_in_use(const struct sp_network *n)
{
    const struct sp_duct *d = n->p.duct;
    return n->p.in->bonnet_up ? d->branches - d->exits + 1 : d->branches;
}

struct sp_network sp_network_pose(const struct sp_duct *d, const struct sp_duct_inputs *in)
{
    struct sp_network n;
    memset(&n, 0, sizeof n);
    n.p = sp_duct_pose(d, in);
    if (in->heat_given && in->heat > 0.0) n.p.floor = given_floor;
    n.nodes = d->nodes;
    n.speck = SP_SPECK;
    n.felt = 1.0;
    n.branches = branches_in_use(&n);
    for (int b = 0; b < n.branches; ++b) n.outside[b] = outside_of(&n, &d->branch[b]);
    n.fresh = in->temperature + preheat(&d->design.inlet, in->speed);
    n.recirculated = recirculated(&d->design.inlet, in->speed);
    n.blown = fmax(in->blower, 0.0) * n.p.density;
    n.small = n.p.density * d->section * hardly;
    n.most_rise = in->heat_given && in->heat > 0.0 ? most_by_given * in->temperature : most_by_load;
    n.most_in_bay = most_by_load;
    if (in->heat_given && in->heat > 0.0) share_given_heat(&n);
    return n;
}

double sp_network_density(const struct sp_network *n, double T)
{
    return n->p.density * (n->p.in->temperature / T);
}

/* ---- branches -------------------------------------------------------------------------------------- */

static double inlet_loss(const struct sp_network *n, double m, double rho)
{
    struct sp_inlet_loss loss = sp_duct_inlet_loss(&n->p, m, rho);
    double unrecovered = n->p.recovery * n->p.head - sp_duct_available(&n->p, m);
    double speck = n->speck * sp_duct_head(&n->p, m, rho, n->p.duct->inlet_area);
    return unrecovered + copysign(loss.lip + loss.screen + loss.diffuser + speck, m);
}

static double exit_loss(const struct sp_network *n, const struct sp_branch *b, double m, double rho)
{
    bool open = n->p.in->bonnet_up;
    double head = sp_duct_head_of(&n->p, m, rho, open ? n->p.duct->section : b->area, open ? 1.0 : b->share);
    double loss = sp_duct_exit_loss(open ? 0.0 : b->loss, m, head);
    return m >= 0.0 ? loss + head : -loss;
}

static double fan_loss(const struct sp_network *n, const struct sp_branch *b, double m, double from,
                       double to)
{
    double before = sp_network_density(n, from), behind = sp_network_density(n, to);
    double head = sp_duct_head(&n->p, m, m >= 0.0 ? before : behind, b->area);
    return copysign(n->speck * head, m) - sp_duct_fan(&n->p, b->index, m, before, behind);
}

struct sp_branch_does sp_network_branch(const struct sp_network *n, int b, double m, double from, double to,
                                        const struct sp_net_look *look)
{
    const struct sp_branch *branch = &n->p.duct->branch[b];
    double upstream = m >= 0.0 ? from : to, rho = sp_network_density(n, upstream), loss = 0.0;
    switch (branch->kind) {
    case SP_BRANCH_LANE: return sp_network_lane(n, &n->p.duct->lane[branch->index], m, upstream, look, NULL);
    case SP_BRANCH_INLET: loss = inlet_loss(n, m, rho); break;
    case SP_BRANCH_EXIT: loss = exit_loss(n, branch, m, rho); break;
    case SP_BRANCH_FAN: loss = fan_loss(n, branch, m, from, to); break;
    case SP_BRANCH_LEAK:
        loss = copysign(branch->loss * sp_duct_head_of(&n->p, m, rho, branch->area, branch->share), m);
        break;
    case SP_BRANCH_FLAP: break; /* see sp_network_flap */
    }
    return (struct sp_branch_does){loss, upstream};
}

/* ---- residuals ------------------------------------------------------------------------------------- */

double sp_network_end(const struct sp_network *n, int b, bool to, const struct sp_net_state *x)
{
    const struct sp_branch *branch = &n->p.duct->branch[b];
    int node = to ? branch->to : branch->from;
    if (node >= 0) return x->temperature[node];
    return branch->kind == SP_BRANCH_INLET ? x->temperature[SP_INLET_AIR] : n->p.in->temperature;
}

static void add_passing(const struct sp_network *n, const struct sp_net_state *x, struct sp_net_look *look)
{
    const struct sp_duct *d = n->p.duct;
    for (int b = 0; b < n->branches; ++b) {
        if (d->branch[b].kind != SP_BRANCH_LANE) continue;
        const struct sp_lane *l = &d->lane[d->branch[b].index];
        for (int i = 0; i < l->cores; ++i) look->passing[l->core[i]] += fabs(x->flow[b]);
    }
}

/* k rho/2 v |v| with the laminar floor, solved for the flow: m sqrt(m^2 + floor^2) = c. */
struct sp_flap_does sp_network_flap(const struct sp_network *n, int b, double drop,
                                    const struct sp_net_state *x)
{
    const struct sp_branch *branch = &n->p.duct->branch[b];
    double rho = sp_network_density(n, sp_network_end(n, b, drop < 0.0, x));
    double floor = n->p.density * n->p.duct->section * n->p.floor * branch->share;
    double k = drop < 0.0 ? shut * branch->loss : branch->loss,
           per = 2.0 * rho * branch->area * branch->area / k;
    double c = per * fabs(drop), f2 = floor * floor, m = c * sqrt(2.0 / (f2 + sqrt(f2 * f2 + 4.0 * c * c)));
    return (struct sp_flap_does){copysign(m, drop), per * sqrt(m * m + f2) / (2.0 * m * m + f2)};
}

static double pressure_end(const struct sp_network *n, int b, int node, const struct sp_net_state *x)
{
    return node >= 0 ? x->pressure[node] : n->outside[b];
}

double sp_network_drop(const struct sp_network *n, int b, const struct sp_net_state *x)
{
    const struct sp_branch *branch = &n->p.duct->branch[b];
    return pressure_end(n, b, branch->from, x) - pressure_end(n, b, branch->to, x);
}

/* Flow into and out of nodes, and the warmth it brings. */
static void add_flow(const struct sp_network *n, int b, double m, struct sp_net_look *look)
{
    const struct sp_branch *branch = &n->p.duct->branch[b];
    double ambient = n->p.in->temperature;
    int into = m >= 0.0 ? branch->to : branch->from, from = m >= 0.0 ? branch->from : branch->to;
    if (from >= 0) look->mass[from] -= fabs(m);
    if (into >= 0) {
        look->mass[into] += fabs(m);
        look->inflow[into] += fabs(m);
        look->gain[into] += fabs(m) * (look->out[b] - ambient);
    }
    if (branch->kind != SP_BRANCH_LANE || m < 0.0) return;
    look->inflow[SP_INLET_AIR] += m;
    look->gain[SP_INLET_AIR] += m * (look->out[b] - n->fresh);
}

static void look_at_warmth(const struct sp_network *n, const struct sp_net_state *x, struct sp_net_look *look)
{
    double slope, ambient = n->p.in->temperature;
    for (int i = 0; i < n->nodes; ++i) {
        double mixed = look->gain[i] / sp_network_soft(n, look->inflow[i], &slope);
        if (i == SP_NODE_BAY)
            mixed +=
                sp_network_rise(n->p.in->bay_heat, look->inflow[i] * n->p.in->cp, n->most_in_bay - mixed);
        look->warmth[i] = x->temperature[i] - ambient - n->felt * mixed;
    }
    double drawn = look->gain[SP_INLET_AIR] / sp_network_soft(n, look->inflow[SP_INLET_AIR], &slope);
    look->warmth[SP_INLET_AIR] = x->temperature[SP_INLET_AIR] - n->fresh - n->felt * n->recirculated * drawn;
}

void sp_network_look(const struct sp_network *n, const struct sp_net_state *x, struct sp_net_look *look)
{
    memset(look, 0, sizeof *look);
    add_passing(n, x, look);
    look->mass[SP_NODE_FRONT] = look->inflow[SP_NODE_FRONT] = n->blown;
    for (int b = 0; b < n->branches; ++b) {
        struct sp_branch_does does = sp_network_branch(n, b, x->flow[b], sp_network_end(n, b, false, x),
                                                       sp_network_end(n, b, true, x), look);
        look->loss[b] = does.loss;
        look->out[b] = does.out;
        double drop = sp_network_drop(n, b, x);
        bool flap = n->p.duct->branch[b].kind == SP_BRANCH_FLAP;
        look->balance[b] = flap ? sp_network_flap(n, b, drop, x).flow - x->flow[b] : drop - does.loss;
        add_flow(n, b, x->flow[b], look);
    }
    look_at_warmth(n, x, look);
}
