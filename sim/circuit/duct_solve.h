/* The air path from inside the library: with a starting guess kept by the caller. Internal.
 *
 * A plain duct (one core, one kind of fan, one exit, no leak, all over the whole section) is one equation in
 * the mass flow, duct.c; every other is a network of nodes and branches, duct_network.h.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_DUCT_SOLVE_H
#define SP_CIRCUIT_DUCT_SOLVE_H

#include "base/root.h"
#include "part/core.h"
#include "part/fan.h"
#include "swirlpot/circuit.h"

enum {
    SP_SHROUDS = SP_FANS,                         /* plenums between cores and fans, at most */
    SP_LANES = 2 * (SP_CORES + SP_FANS) + 1,      /* elementary intervals of the section */
    SP_DUCT_NODES = 2 + SP_SHROUDS,               /* front plenum, bay, shrouds */
    SP_DUCT_BRANCHES = 3 + SP_LANES + 2 * SP_FANS + SP_EXITS /* inlet, two leaks, lanes, fans, flaps, exits */
};

enum { SP_NODE_OUTSIDE = -1, SP_NODE_FRONT = 0, SP_NODE_BAY = 1 }; /* shrouds follow */

enum sp_branch_kind {
    SP_BRANCH_INLET,
    SP_BRANCH_LANE,
    SP_BRANCH_FAN,
    SP_BRANCH_FLAP,
    SP_BRANCH_LEAK,
    SP_BRANCH_EXIT
};

/* A way from node to node; exits stand last in a duct's list. */
struct sp_branch {
    enum sp_branch_kind kind;
    int index;       /* of the lane, fan (flaps too) or exit; a leak's: 0 past the cores, 1 to outside */
    int from, to;    /* nodes */
    double area, loss; /* m2 and k on the head in it: flaps, leaks, exits */
    double share;      /* of the duct's laminar floor that is its own */
};

/* A part of the section with the same cores one behind the other all over it. */
struct sp_lane {
    int from, to;          /* nodes */
    int cores;             /* how many ... */
    int core[SP_CORES];    /* ... and which, as the air meets them */
    double share[SP_CORES]; /* of each core's face that stands in this lane, 0..1 */
};

struct sp_duct {
    struct sp_duct_design design;
    struct sp_core_ready core[SP_CORES];
    struct sp_fan_ready fan[SP_FANS];
    int cores, fans, exits; /* in use; fans counts places of the list up to the last that is fitted */
    bool plain;
    double count;         /* equal ducts, 1 or more */
    double inlet_area;    /* m2 left open */
    double section;       /* m2 of cores that the air meets first */
    double diffuser_loss; /* on inlet head */
    bool diffuser_stalled;
    double cos_angle[SP_EXITS];
    /* the network, when not plain */
    int lanes, nodes;
    struct sp_lane lane[SP_LANES];
    int shroud[SP_FANS]; /* node of each fan's shroud */
    int branches;
    struct sp_branch branch[SP_DUCT_BRANCHES];
};

/* Where the last solution was; zero: none. Copied by assignment. */
struct sp_duct_guess {
    struct sp_guess plain;
    bool known; /* the network's, below */
    double pressure[SP_DUCT_NODES];        /* Pa over ambient */
    double temperature[SP_DUCT_NODES + 1]; /* K; the last is that of the inlet */
    double flow[SP_DUCT_BRANCHES];         /* kg/s */
};

/* As sp_duct_solve, starting from *guess, which is renewed. */
enum sp_status sp_duct_solve_from(const struct sp_duct *d, const struct sp_duct_inputs *in,
                                  struct sp_duct_guess *guess, struct sp_duct_state *out);

#endif
