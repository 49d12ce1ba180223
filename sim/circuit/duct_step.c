/* One step of Newton's method on all of the network at once: the global gradient method of Todini & Pilati
 * (1988). The flows are eliminated branch by branch and only the nodes remain, with the nodes' temperatures
 * beside their pressures. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "circuit/duct_network.h"

enum { MOST = SP_DUCT_NODES + SP_DUCT_WARMTHS };

/* A branch linearized: dq = offset + yield (dp_from - dp_to - loss_T dT - loss_D dD), dT_out = out_q dq +
 * out_T dT, T the temperature that enters and D that behind, which creeping air in a fan feels too. */
struct tangent {
    double offset, yield, loss_T, loss_D, out_q, out_T;
    int upstream, downstream; /* indices of temperatures; -1: constant, or not felt */
};

struct system {
    int size;
    double a[MOST][MOST + 1]; /* the last column is the right-hand side */
};

/* ---- linearizing ----------------------------------------------------------------------------------- */

static int warmth_at(const struct sp_network *n, int b, bool to)
{
    const struct sp_branch *branch = &n->p.duct->branch[b];
    int node = to ? branch->to : branch->from;
    if (node >= 0) return node;
    return branch->kind == SP_BRANCH_INLET ? SP_INLET_AIR : -1;
}

/* Flaps the other way round, flow over pressure: that is what hardly changes where they shut. */
static struct tangent flap_tangent(const struct sp_network *n, int b, const struct sp_net_state *x,
                                   const struct sp_net_look *look)
{
    double drop = sp_network_drop(n, b, x);
    struct tangent t = {.upstream = warmth_at(n, b, drop < 0.0), .downstream = -1, .out_T = 1.0};
    struct sp_flap_does does = sp_network_flap(n, b, drop, x);
    t.yield = does.yield;
    t.offset = look->balance[b];
    t.loss_T = 0.5 * does.flow / (does.yield * sp_network_end(n, b, drop < 0.0, x));
    return t;
}

static struct tangent tangent_at(const struct sp_network *n, int b, const struct sp_net_state *x,
                                 const struct sp_net_look *look)
{
    const double flattest = 1e-7; /* Pa per m/s of face velocity: a fan's curve may be level (or even rise) */
    double m = x->flow[b], from = sp_network_end(n, b, false, x), to = sp_network_end(n, b, true, x);
    double dm = copysign(1e-7 * (fabs(m) + 1e-2 * n->small), m), dT = 1e-3, T = m >= 0.0 ? from : to;
    struct sp_branch_does more = sp_network_branch(n, b, m + dm, from, to, look);
    double slope = (more.loss - look->loss[b]) / dm, least = flattest / (n->p.density * n->p.duct->section);
    struct tangent t = {.upstream = warmth_at(n, b, m < 0.0), .downstream = -1};
    t.yield = 1.0 / (fabs(slope) > least ? slope : least);
    t.offset = t.yield * look->balance[b];
    t.out_q = (more.out - look->out[b]) / dm;
    if (t.upstream >= 0) {
        struct sp_branch_does warm =
            sp_network_branch(n, b, m, m >= 0.0 ? T + dT : from, m >= 0.0 ? to : T + dT, look);
        t.loss_T = (warm.loss - look->loss[b]) / dT;
        t.out_T = (warm.out - look->out[b]) / dT;
    }
    if (n->p.duct->branch[b].kind == SP_BRANCH_FAN) {
        t.downstream = warmth_at(n, b, m >= 0.0);
        T = m >= 0.0 ? to : from;
        struct sp_branch_does warm =
            sp_network_branch(n, b, m, m >= 0.0 ? from : T + dT, m >= 0.0 ? T + dT : to, look);
        t.loss_D = (warm.loss - look->loss[b]) / dT;
    }
    return t;
}

/* Column of a temperature in the system. */
static int warmth_column(const struct sp_network *n, int i)
{
    return n->nodes + (i == SP_INLET_AIR ? n->nodes : i);
}

/* Adds `factor` times dq of the branch to a row. */
static void add_flow(const struct sp_network *n, int b, const struct tangent *t, double factor, double *row,
                     int size)
{
    const struct sp_branch *branch = &n->p.duct->branch[b];
    double y = factor * t->yield;
    if (branch->from >= 0) row[branch->from] += y;
    if (branch->to >= 0) row[branch->to] -= y;
    if (t->upstream >= 0) row[warmth_column(n, t->upstream)] -= y * t->loss_T;
    if (t->downstream >= 0) row[warmth_column(n, t->downstream)] -= y * t->loss_D;
    row[size] -= factor * t->offset;
}

/* Slopes of a mixed temperature with the flow that enters and with the warmth it brings. */
struct mixing { double with_flow, with_gain; };

static struct mixing mixing_at(const struct sp_network *n, int node, const struct sp_net_look *look)
{
    double slope, soft = sp_network_soft(n, look->inflow[node], &slope);
    struct mixing m = {-n->felt * look->gain[node] / (soft * soft) * slope, n->felt / soft};
    if (node != SP_NODE_BAY || n->p.in->bay_heat == 0.0) return m;
    /* the skin's heat: by differences, of a smooth function */
    const struct sp_duct_inputs *in = n->p.in;
    double mixed = look->gain[node] / soft, S = look->inflow[node], dS = 1e-6 * (S + n->small), dT = 1e-3,
           most = n->most_in_bay;
    double rise = sp_network_rise(in->bay_heat, S * in->cp, most - mixed);
    double with_S = (sp_network_rise(in->bay_heat, (S + dS) * in->cp, most - mixed) - rise) / dS;
    double with_T = (sp_network_rise(in->bay_heat, S * in->cp, most - mixed - dT) - rise) / dT;
    return (struct mixing){m.with_flow * (1.0 + with_T) + n->felt * with_S, m.with_gain * (1.0 + with_T)};
}

/* Row of a temperature: what branch b brings to it. */
static void add_warmth(const struct sp_network *n, int b, const struct tangent *t,
                       const struct sp_net_look *look, double m, double base, const struct mixing *mix,
                       double share, double *row, int size)
{
    double way = m >= 0.0 ? 1.0 : -1.0;
    double by_flow = way * (mix->with_flow + mix->with_gain * (look->out[b] - base));
    double with_q = share * (by_flow + mix->with_gain * fabs(m) * t->out_q);
    add_flow(n, b, t, -with_q, row, size);
    if (t->upstream >= 0) row[warmth_column(n, t->upstream)] -= share * mix->with_gain * fabs(m) * t->out_T;
}

static void assemble(const struct sp_network *n, const struct sp_net_state *x, const struct sp_net_look *look,
                     const struct tangent *t, struct system *s)
{
    struct mixing mix[SP_DUCT_WARMTHS];
    double ambient = n->p.in->temperature;
    *s = (struct system){.size = 2 * n->nodes + 1};
    for (int i = 0; i < n->nodes; ++i) {
        mix[i] = mixing_at(n, i, look);
        s->a[i][s->size] = -look->mass[i];
        s->a[n->nodes + i][n->nodes + i] = 1.0;
        s->a[n->nodes + i][s->size] = n->frozen ? 0.0 : -look->warmth[i];
    }
    int last = warmth_column(n, SP_INLET_AIR);
    mix[SP_INLET_AIR] = mixing_at(n, SP_INLET_AIR, look);
    s->a[last][last] = 1.0;
    s->a[last][s->size] = n->frozen ? 0.0 : -look->warmth[SP_INLET_AIR];
    for (int b = 0; b < n->branches; ++b) {
        const struct sp_branch *branch = &n->p.duct->branch[b];
        double m = x->flow[b];
        int into = m >= 0.0 ? branch->to : branch->from;
        if (branch->from >= 0) add_flow(n, b, &t[b], -1.0, s->a[branch->from], s->size);
        if (branch->to >= 0) add_flow(n, b, &t[b], 1.0, s->a[branch->to], s->size);
        if (n->frozen) continue;
        if (into >= 0)
            add_warmth(n, b, &t[b], look, m, ambient, &mix[into], 1.0, s->a[n->nodes + into], s->size);
        if (branch->kind == SP_BRANCH_LANE && m >= 0.0 && n->recirculated > 0.0)
            add_warmth(n, b, &t[b], look, m, n->fresh, &mix[SP_INLET_AIR], n->recirculated, s->a[last],
                       s->size);
    }
}

/* ---- solving --------------------------------------------------------------------------------------- */

static void swap_rows(struct system *s, int i, int j)
{
    for (int k = 0; i != j && k <= s->size; ++k) {
        double keep = s->a[i][k];
        s->a[i][k] = s->a[j][k];
        s->a[j][k] = keep;
    }
}

/* Gauss with row pivots; the solution lands in the last column. */
static bool eliminate(struct system *s)
{
    for (int c = 0; c < s->size; ++c) {
        int best = c;
        for (int i = c + 1; i < s->size; ++i)
            if (fabs(s->a[i][c]) > fabs(s->a[best][c])) best = i;
        if (!(fabs(s->a[best][c]) > 0.0) || !isfinite(s->a[best][c])) return false;
        swap_rows(s, c, best);
        for (int i = c + 1; i < s->size; ++i) {
            double f = s->a[i][c] / s->a[c][c];
            for (int k = c; f != 0.0 && k <= s->size; ++k) s->a[i][k] -= f * s->a[c][k];
        }
    }
    for (int c = s->size - 1; c >= 0; --c) {
        for (int k = c + 1; k < s->size; ++k) s->a[c][s->size] -= s->a[c][k] * s->a[k][s->size];
        s->a[c][s->size] /= s->a[c][c];
    }
    return true;
}

bool sp_network_step(const struct sp_network *n, const struct sp_net_state *x, const struct sp_net_look *look,
                      struct sp_net_state *out)
{
    struct tangent t[SP_DUCT_BRANCHES];
    struct system s;
    for (int b = 0; b < n->branches; ++b)
        t[b] = (n->p.duct->branch[b].kind == SP_BRANCH_FLAP ? flap_tangent : tangent_at)(n, b, x, look);
    assemble(n, x, look, t, &s);
    if (!eliminate(&s)) return false;
    for (int i = 0; i < n->nodes; ++i) {
        out->pressure[i] = s.a[i][s.size];
        out->temperature[i] = s.a[n->nodes + i][s.size];
    }
    out->temperature[SP_INLET_AIR] = s.a[2 * n->nodes][s.size];
    for (int b = 0; b < n->branches; ++b) {
        const struct sp_branch *branch = &n->p.duct->branch[b];
        double drive = (branch->from >= 0 ? out->pressure[branch->from] : 0.0) -
                       (branch->to >= 0 ? out->pressure[branch->to] : 0.0);
        if (t[b].upstream >= 0) drive -= t[b].loss_T * out->temperature[t[b].upstream];
        if (t[b].downstream >= 0) drive -= t[b].loss_D * out->temperature[t[b].downstream];
        out->flow[b] = t[b].offset + t[b].yield * drive;
    }
    return true;
}
