/* Newton's method on the network, damped. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>

#include "circuit/duct_network.h"

enum { ITERATIONS = 60, HALVINGS = 14 };

/* Typical pressure [Pa]: what drives. */
static double driving(const struct sp_network *n)
{
    const struct sp_duct *d = n->p.duct;
    double most = fmax(1e-9, sp_duct_head(&n->p, n->blown, n->p.density, d->inlet_area));
    for (int b = 0; b < n->branches; ++b) most = fmax(most, fabs(n->outside[b]));
    for (int i = 0; i < d->fans; ++i) {
        double speed = n->p.in->fan_speed[i];
        if (d->fan[i].design) most = fmax(most, speed * speed * d->fan[i].curve.shutoff);
    }
    return most;
}

static double square(double x)
{
    return x * x;
}

static double size_of(const struct sp_network *n, const struct sp_net_look *look, double pressure)
{
    double flow = n->p.density * n->p.duct->section * sqrt(pressure), sum = 0.0;
    for (int b = 0; b < n->branches; ++b)
        sum += square(look->balance[b] / (n->p.duct->branch[b].kind == SP_BRANCH_FLAP ? flow : pressure));
    for (int i = 0; i < n->nodes; ++i) sum += square(look->mass[i] / flow);
    if (n->frozen) return sum;
    for (int i = 0; i < n->nodes; ++i) sum += square(look->warmth[i] / 10.0);
    return sum + square(look->warmth[SP_INLET_AIR] / 10.0);
}

static void go(const struct sp_network *n, const struct sp_net_state *from, const struct sp_net_state *step,
               double t, struct sp_net_state *to)
{
    double coldest = 0.5 * n->p.in->temperature;
    *to = *from;
    for (int i = 0; i < n->nodes; ++i) to->pressure[i] += t * step->pressure[i];
    for (int i = 0; i < n->nodes; ++i)
        to->temperature[i] = fmax(to->temperature[i] + t * step->temperature[i], coldest);
    to->temperature[SP_INLET_AIR] =
        fmax(to->temperature[SP_INLET_AIR] + t * step->temperature[SP_INLET_AIR], coldest);
    for (int b = 0; b < n->branches; ++b) to->flow[b] += t * step->flow[b];
}

/* Largest change, in shares of the largest flow and of 100 K. */
static double length_of(const struct sp_network *n, const struct sp_net_state *x,
                        const struct sp_net_state *step)
{
    double flow = 1e-3 * n->small, moved = 0.0, warmed = fabs(step->temperature[SP_INLET_AIR]);
    for (int b = 0; b < n->branches; ++b) {
        flow = fmax(flow, fabs(x->flow[b]));
        moved = fmax(moved, fabs(step->flow[b]));
    }
    for (int i = 0; i < n->nodes; ++i) warmed = fmax(warmed, fabs(step->temperature[i]));
    return fmax(moved / flow, warmed / 100.0);
}

/* Where the residuals are and how large. */
struct place {
    struct sp_net_state x;
    double size;
};

/* Share of a step that warms no node by more than so much. */
static double bounded(const struct sp_net_state *step, int nodes)
{
    const double most = 80.0; /* K */
    double warmed = fabs(step->temperature[SP_INLET_AIR]);
    for (int i = 0; i < nodes; ++i) warmed = fmax(warmed, fabs(step->temperature[i]));
    return warmed > most ? most / warmed : 1.0;
}

static void try(const struct sp_network *n, const struct place *from, const struct sp_net_state *step,
                double t, double pressure, struct place *to, struct sp_net_look *look)
{
    go(n, &from->x, step, t, &to->x);
    sp_network_look(n, &to->x, look);
    to->size = size_of(n, look, pressure);
}

/* Halves the step until the residuals shrink. Two parallel ways of which one costs next to nothing (an idle
 * fan and flaps) must pass through larger ones: near the end, where the step would have to be short, `leaps`
 * of the whole of it are free. */
static bool take(const struct sp_network *n, const struct sp_net_state *step, double length, double pressure,
                 struct place *at, int *leaps, struct sp_net_look *look)
{
    const double shortest = 0.3, end = 0.02;
    struct place from = *at;
    bool leap = (n->wild || length < end) && *leaps > 0;
    double t = bounded(step, n->nodes);
    for (int h = 0; h < HALVINGS && !(leap && t < shortest); ++h, t *= 0.5) {
        try(n, &from, step, t, pressure, at, look);
        if (at->size < from.size * (1.0 - 1e-3 * t) || at->size == 0.0) return true;
    }
    if (!leap) {
        *at = from;
        return false;
    }
    --*leaps;
    try(n, &from, step, bounded(step, n->nodes), pressure, at, look);
    return isfinite(at->size);
}

bool sp_network_newton(const struct sp_network *n, struct sp_net_state *x, struct sp_net_look *look)
{
    const double near = 1e-9;     /* a step shorter than this leaves an error far smaller ... */
    const double next = 1e-11;    /* ... as does one after which the next would be shorter than this */
    const double nothing = 1e-26; /* residuals (squared) that cannot be told from rounding */
    double pressure = driving(n);
    double last = 0.0;
    int leaps = n->wild ? ITERATIONS : 10;
    sp_network_look(n, x, look);
    struct place at = {*x, size_of(n, look, pressure)};
    for (int i = 0; i < ITERATIONS; ++i) {
        struct sp_net_state step;
        if (!isfinite(at.size) || !sp_network_step(n, &at.x, look, &step)) return false;
        double length = length_of(n, &at.x, &step);
        if (!isfinite(length)) return false;
        bool shrinks = length * length <= next * last;
        last = length;
        if (length <= near || shrinks || (i > 8 && at.size < nothing)) {
            go(n, &at.x, &step, 1.0, x);
            sp_network_look(n, x, look);
            return true;
        }
        if (!take(n, &step, length, pressure, &at, &leaps, look)) break;
    }
    /* Two idle fans side by side cost next to nothing: how they share the air is lost in rounding. */
    *x = at.x;
    sp_network_look(n, x, look);
    return at.size < 1e6 * nothing;
}
