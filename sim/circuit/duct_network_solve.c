/* Solves the network: from where it was, else from thick air. SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "circuit/duct_network.h"

/* Face velocity [m/s] below which losses are linear at the start of the long way: then the network is nearly
 * linear. */
static const double thick = 100.0;

static void recall(const struct sp_duct_guess *g, struct sp_net_state *x)
{
    memcpy(x->pressure, g->pressure, sizeof x->pressure);
    memcpy(x->temperature, g->temperature, sizeof x->temperature);
    memcpy(x->flow, g->flow, sizeof x->flow);
}

static void remember(const struct sp_net_state *x, struct sp_duct_guess *g)
{
    memcpy(g->pressure, x->pressure, sizeof g->pressure);
    memcpy(g->temperature, x->temperature, sizeof g->temperature);
    memcpy(g->flow, x->flow, sizeof g->flow);
    g->known = true;
}

static void rest(const struct sp_network *n, struct sp_net_state *x)
{
    memset(x, 0, sizeof *x);
    for (int i = 0; i < SP_DUCT_WARMTHS; ++i) x->temperature[i] = n->p.in->temperature;
    x->temperature[SP_INLET_AIR] = n->fresh;
    x->flow[0] = -n->blown; /* what a blower brings can leave by the inlet */
}

static bool turns(const struct sp_network *n, int fan)
{
    const struct sp_fan *f = n->p.duct->fan[fan].design;
    return f && f->health == SP_FAN_SOUND && n->p.in->fan_speed[fan] > 0.0;
}

static bool driven(const struct sp_network *n)
{
    bool any = n->blown > 0.0;
    for (int b = 0; b < n->branches; ++b) any = any || n->outside[b] != 0.0;
    for (int i = 0; i < n->p.duct->fans; ++i) any = any || turns(n, i);
    return any;
}

/* Follows the answer while *knob falls from where it is to `last`, in steps that shorten where one fails; in
 * the end it leaps, for there may be a fold in the way. */
static bool turn_down(struct sp_network *easy, double *knob, double last, struct sp_net_state *x,
                      struct sp_net_look *look)
{
    double factor = 0.1, done = *knob;
    while (done > last && factor < 0.995) {
        struct sp_net_state next = *x;
        *knob = fmax(done * factor, last);
        if (sp_network_newton(easy, &next, look)) {
            *x = next;
            done = *knob;
            factor = fmax(factor * factor, 0.01);
        } else {
            factor = sqrt(factor);
        }
    }
    for (double far = 0.9; done > last && far > 1e-3; far *= 0.5) {
        struct sp_net_state next = *x;
        *knob = fmax(done * far, last);
        easy->wild = true;
        bool found = sp_network_newton(easy, &next, look);
        easy->wild = false;
        if (!found) continue;
        *x = next;
        return turn_down(easy, knob, last, x, look);
    }
    return done <= last;
}

/* Flows alone, at the temperatures of x: every loss rises with its flow, so that there is one answer (but for
 * fans whose total pressure rises with flow). From linear losses to the true ones, with fans whose curves
 * fall for sure and inlets that resist; then to what these are. */
static bool fall_to_flows(const struct sp_network *n, struct sp_net_state *x, struct sp_net_look *look)
{
    struct sp_network easy = *n;
    easy.frozen = true;
    easy.p.floor = thick;
    easy.speck = 1.0;
    return sp_network_newton(&easy, x, look) && turn_down(&easy, &easy.p.floor, n->p.floor, x, look) &&
           turn_down(&easy, &easy.speck, n->speck, x, look);
}

/* Parallel fans whose total pressure rises with flow settle with some of them ahead and some back: bit i of
 * `which` says that fan i starts back. */
static void set_fans(const struct sp_network *n, unsigned which, struct sp_net_state *x)
{
    for (int b = 0; b < n->branches; ++b) {
        const struct sp_branch *branch = &n->p.duct->branch[b];
        if (branch->kind != SP_BRANCH_FAN) continue;
        const struct sp_fan_ready *f = &n->p.duct->fan[branch->index];
        double free = n->p.density * f->curve.free_flow * f->design->count;
        x->flow[b] = which >> branch->index & 1u ? -0.7 * free : 1.3 * free;
    }
}

static bool find_flows(const struct sp_network *n, struct sp_net_state *x, struct sp_net_look *look)
{
    struct sp_network wild = *n;
    wild.frozen = wild.wild = true;
    if (fall_to_flows(n, x, look)) return true;
    for (unsigned which = 0; which < 1u << SP_FANS; ++which) {
        struct sp_net_state next = *x;
        set_fans(n, which, &next);
        if (!sp_network_newton(&wild, &next, look)) continue;
        *x = next;
        return true;
    }
    return false;
}

/* Temperatures by a share of the way to what the flows mix. */
static void warm(const struct sp_network *n, double share, struct sp_net_state *x, struct sp_net_look *look)
{
    sp_network_look(n, x, look);
    for (int i = 0; i < n->nodes; ++i) x->temperature[i] -= share * look->warmth[i];
    x->temperature[SP_INLET_AIR] -= share * look->warmth[SP_INLET_AIR];
}

/* From flows at the temperatures of fresh air: warmth is let in bit by bit. */
static bool warm_up(const struct sp_network *n, struct sp_net_state *x, struct sp_net_look *look)
{
    const double shortest = 1e-5;
    struct sp_network easy = *n;
    double done = 0.0;
    for (double step = 0.1; done < 1.0 && step > shortest;) {
        struct sp_net_state next = *x;
        easy.felt = fmin(done + step, 1.0);
        if (sp_network_newton(&easy, &next, look)) {
            *x = next;
            done = easy.felt;
            step *= 2.0;
        } else {
            step *= 0.25;
        }
    }
    return done >= 1.0;
}

/* Flows and temperatures in turn. The last resort, for air that circles with next to nothing coming in: its
 * temperature is at worst as good as that many turns make it; flows and pressures are balanced. */
static bool in_turn(const struct sp_network *n, struct sp_net_state *x, struct sp_net_look *look)
{
    enum { TURNS = 300, TRY = 10 }; /* both at once is tried again after so many */
    struct sp_network frozen = *n;
    frozen.frozen = true;
    for (int i = 0; i < TURNS; ++i) {
        warm(n, 0.5, x, look);
        if (!sp_network_newton(&frozen, x, look) && !find_flows(n, x, look)) return false;
        struct sp_net_state both = *x;
        if (i % TRY != TRY - 1 || !sp_network_newton(n, &both, look)) continue;
        *x = both;
        return true;
    }
    sp_network_look(n, x, look);
    return true;
}

/* Flows at the temperatures of fresh air, then temperatures, then both at once. */
static bool long_way(const struct sp_network *n, struct sp_net_state *x, struct sp_net_look *look)
{
    struct sp_network frozen = *n;
    frozen.frozen = true;
    rest(n, x);
    if (!find_flows(n, x, look)) return false;
    struct sp_net_state flows = *x, both;
    for (int i = 0; i < 8; ++i) {
        for (int sweep = 0; sweep < 4; ++sweep) warm(n, i < 4 ? 1.0 : 0.5, x, look);
        both = *x;
        if (sp_network_newton(n, &both, look)) {
            *x = both;
            return true;
        }
        if (!sp_network_newton(&frozen, x, look)) break;
    }
    *x = flows;
    if (warm_up(n, x, look)) return true;
    *x = flows;
    return in_turn(n, x, look);
}

static bool find(const struct sp_network *n, struct sp_duct_guess *guess, struct sp_net_state *x,
                 struct sp_net_look *look)
{
    if (!driven(n)) { /* the answer is exactly nil; only the temperatures of standing air are to be found */
        rest(n, x);
        return sp_network_newton(n, x, look);
    }
    if (guess->known) {
        recall(guess, x);
        if (sp_network_newton(n, x, look)) return true;
    }
    return long_way(n, x, look);
}

/* Given heat that the air does not take: no flow, or so little that it comes out five times as hot. */
static bool too_hot(const struct sp_duct_inputs *in, const struct sp_duct_state *out)
{
    const double hottest_ratio = 5.0;
    if (!in->heat_given || !(in->heat > 0.0)) return false;
    return out->heat < in->heat * (1.0 - 1e-4) || out->temperature_ratio > hottest_ratio;
}

static enum sp_status tell(const struct sp_network *n, const struct sp_net_state *x,
                           const struct sp_net_look *look, struct sp_duct_guess *guess,
                           struct sp_duct_state *out)
{
    remember(x, guess);
    sp_network_report(n, x, look, out);
    if (too_hot(n->p.in, out)) return SP_INPUT;
    return isfinite(out->mass_flow) && isfinite(out->heat) && isfinite(out->drag) ? SP_OK : SP_NUMERICS;
}

static enum sp_status solve_once(const struct sp_duct *d, const struct sp_duct_inputs *in,
                                 struct sp_duct_guess *guess, struct sp_duct_state *out)
{
    struct sp_network n = sp_network_pose(d, in);
    struct sp_net_state x;
    struct sp_net_look look;
    memset(out, 0, sizeof *out);
    if (isfinite(n.p.head + n.p.across + n.blown + n.given) && find(&n, guess, &x, &look))
        return tell(&n, &x, &look, guess, out);
    guess->known = false;
    return SP_NUMERICS;
}

static bool pushed(const struct sp_duct *d, const struct sp_duct_inputs *in)
{
    bool runs = in->speed != 0.0 || in->blower > 0.0;
    for (int i = 0; i < d->fans; ++i) runs = runs || in->fan_speed[i] > 0.0;
    return runs;
}

/* A duct that is driven and yet passes nothing may have been led there by where the search began: air that goes round
 * in a hot closed loop answers the equations too. From nowhere the flow that goes through is found, if there is one. */
enum sp_status sp_network_solve(const struct sp_duct *d, const struct sp_duct_inputs *in,
                                struct sp_duct_guess *guess, struct sp_duct_state *out)
{
    const double nothing = 1e-6; /* m/s of face velocity */
    bool led = guess->known;
    enum sp_status status = solve_once(d, in, guess, out);
    double still = nothing * d->section * in->pressure / (in->R * in->temperature);
    if (!led || (status == SP_OK && fabs(out->mass_flow) > still) || !pushed(d, in)) return status;
    struct sp_duct_guess anew;
    struct sp_duct_state other;
    memset(&anew, 0, sizeof anew);
    if (solve_once(d, in, &anew, &other) || (status == SP_OK && fabs(other.mass_flow) <= fabs(out->mass_flow)))
        return status;
    *guess = anew;
    *out = other;
    return SP_OK;
}

/* Only from where the guess is. */
static enum sp_status near_by(const struct sp_duct *d, const struct sp_duct_inputs *in,
                              struct sp_duct_guess *guess, struct sp_duct_state *out)
{
    struct sp_network n = sp_network_pose(d, in);
    struct sp_net_state x;
    struct sp_net_look look;
    memset(out, 0, sizeof *out);
    recall(guess, &x);
    return sp_network_newton(&n, &x, &look) ? tell(&n, &x, &look, guess, out) : SP_NUMERICS;
}

/* Less air comes out hotter, and hot air resists the more: of several answers the duct comes to the one with
 * the largest flow, on the way from no heat. Where the flow falls away under the heat, it cannot carry it. */
enum sp_status sp_network_solve_heated(const struct sp_duct *d, const struct sp_duct_inputs *in,
                                       struct sp_duct_guess *guess, struct sp_duct_state *out)
{
    const double shortest = 1e-4, largest_jump = 0.15;
    struct sp_duct_inputs part = *in;
    double done = 0.0, flow = out->mass_flow;
    for (double step = 0.25; done < 1.0 && step > shortest;) {
        struct sp_duct_guess try = *guess;
        double next = fmin(done + step, 1.0);
        part.heat = next * in->heat;
        enum sp_status status = near_by(d, &part, &try, out);
        if (status != SP_OK || fabs(out->mass_flow - flow) > largest_jump * fabs(flow)) {
            step *= 0.5;
            continue;
        }
        *guess = try;
        flow = out->mass_flow;
        done = next;
        step *= 1.5;
    }
    return done < 1.0 ? SP_INPUT : SP_OK;
}
