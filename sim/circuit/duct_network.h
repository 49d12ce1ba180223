/* The air path as a network: nodes of one total pressure and temperature, branches with a flow. Internal.
 *
 * Nodes: the plenum ahead of the cores, the bay behind them, and one per shroud. Unknown are the pressures
 * and temperatures of the nodes, the temperature at the inlet and the flows in the branches; one residual
 * each. SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_DUCT_NETWORK_H
#define SP_CIRCUIT_DUCT_NETWORK_H

#include "circuit/duct_element.h"

enum {
    SP_DUCT_WARMTHS = SP_DUCT_NODES + 1,
    SP_INLET_AIR = SP_DUCT_NODES
}; /* temperatures; the inlet's is last */

#define SP_SPECK 1e-10 /* heads: two idle fans share the air evenly, and an inlet without loss has a slope */

struct sp_network {
    struct sp_duct_problem p;
    int nodes, branches;
    double outside[SP_DUCT_BRANCHES]; /* Pa over ambient at a branch's outer end */
    double fresh;                     /* K of the air ahead of the inlet */
    double recirculated;              /* share at this speed */
    double blown;                     /* kg/s from a blower, at ambient temperature, into the front plenum */
    double small;                     /* kg/s that counts as hardly any */
    double most_rise;                 /* K over ambient that loads or given heat reach at most, ... */
    double most_in_bay;               /* ... and the engine's skin */
    double given;                     /* W per share of face of the cores that take given heat */
    bool takes_given[SP_CORES];
    double speck;                     /* heads that fans and inlet cost beside what they do */
    double felt; /* share of its warmth that a node's air feels: 1, or less on the way there */
    bool wild;                        /* Newton's steps may make it worse for a while */
    bool frozen;                      /* temperatures of nodes stay as they are; only flows are sought */
};

/* Unknowns. */
struct sp_net_state {
    double pressure[SP_DUCT_NODES], temperature[SP_DUCT_WARMTHS], flow[SP_DUCT_BRANCHES];
};

/* What follows: loss and leaving temperature of each branch, and the residuals. */
struct sp_net_look {
    double loss[SP_DUCT_BRANCHES], out[SP_DUCT_BRANCHES];
    double passing[SP_CORES]; /* kg/s through each core, all lanes, either way */
    double balance[SP_DUCT_BRANCHES]; /* Pa; of flaps kg/s */
    double mass[SP_DUCT_NODES], warmth[SP_DUCT_WARMTHS]; /* kg/s, K */
    double inflow[SP_DUCT_WARMTHS],
        gain[SP_DUCT_WARMTHS]; /* kg/s into a node; sum of flow times rise, K kg/s */
};

/* One core in one lane. */
struct sp_lane_core {
    double T_in, T_out, rate, heat; /* K, K, W/K, W */
    double drop, heating;           /* Pa; the jet's loss ahead of it is in `drop` */
};

/* What a branch does at flow m, the air that enters it being of `upstream` K. */
struct sp_branch_does { double loss, out; }; /* Pa from its `from` to its `to`, K */

struct sp_network sp_network_pose(const struct sp_duct *d, const struct sp_duct_inputs *in);

/* `look` for what passes each core; `from`/`to` K at the branch's ends (of the outside: as drawn in). */
struct sp_branch_does sp_network_branch(const struct sp_network *n, int b, double m, double from, double to,
                                        const struct sp_net_look *look);

/* Flow [kg/s] through flaps under a drop of total pressure [Pa], and its slope [kg/s Pa]. */
struct sp_flap_does { double flow, yield; };
struct sp_flap_does sp_network_flap(const struct sp_network *n, int b, double drop,
                                    const struct sp_net_state *x);

/* Total pressure [Pa] that falls between a branch's ends. */
double sp_network_drop(const struct sp_network *n, int b, const struct sp_net_state *x);

/* The lane alone, with each core's part, in the order of the list. */
struct sp_branch_does sp_network_lane(const struct sp_network *n, const struct sp_lane *l, double m,
                                      double upstream, const struct sp_net_look *look,
                                      struct sp_lane_core *core);

/* Temperature [K] at either end of a branch. */
double sp_network_end(const struct sp_network *n, int b, bool to, const struct sp_net_state *x);

/* All residuals at x. */
void sp_network_look(const struct sp_network *n, const struct sp_net_state *x, struct sp_net_look *look);

/* Flow that a temperature is mixed over: `inflow`, but never less than hardly any; and its slope. */
double sp_network_soft(const struct sp_network *n, double inflow, double *slope);

/* Density [kg/m3] at T, at ambient pressure. */
double sp_network_density(const struct sp_network *n, double T);

/* Rise [K] of air of `rate` W/K by `heat` W, at most `most`; smooth, and finite at nil flow. */
double sp_network_rise(double heat, double rate, double most);

/* Newton's full step of all unknowns from x. False where the system is singular. */
bool sp_network_step(const struct sp_network *n, const struct sp_net_state *x, const struct sp_net_look *look,
                     struct sp_net_state *out);

/* Newton on all residuals from x, which becomes the solution. */
bool sp_network_newton(const struct sp_network *n, struct sp_net_state *x, struct sp_net_look *look);

enum sp_status sp_network_solve(const struct sp_duct *d, const struct sp_duct_inputs *in,
                                struct sp_duct_guess *guess, struct sp_duct_state *out);

/* With given heat, from the solution without it in *guess and *out. */
enum sp_status sp_network_solve_heated(const struct sp_duct *d, const struct sp_duct_inputs *in,
                                       struct sp_duct_guess *guess, struct sp_duct_state *out);

/* Fills *out from a solution. */
void sp_network_report(const struct sp_network *n, const struct sp_net_state *x,
                       const struct sp_net_look *look, struct sp_duct_state *out);

void sp_network_stations(const struct sp_duct *d, const struct sp_duct_inputs *in,
                         const struct sp_duct_state *state, struct sp_station s[SP_STATIONS],
                         struct sp_duct_losses *losses);

#endif
