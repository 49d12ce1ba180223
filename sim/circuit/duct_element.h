/* What each piece of a duct does to the air: shared by the plain duct and the network. Internal.
 *
 * Every loss is a loss of total pressure [Pa], >= 0, that rises with the mass flow [kg/s] through the piece.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_DUCT_ELEMENT_H
#define SP_CIRCUIT_DUCT_ELEMENT_H

#include "circuit/duct_solve.h"

/* Loss of air drawn in through the exit, on the head there: a sharp edge in a wall. Common practice. */
#define SP_REVERSE_ENTRY 0.5

/* A duct with what it is given, worked out once for all flows. */
struct sp_duct_problem {
    const struct sp_duct *duct;
    const struct sp_duct_inputs *in;
    double density, head, speed; /* kg/m3, Pa, m/s: of the free stream, as far as a car ahead leaves it */
    double across;               /* Pa, head of the wind across */
    double recovery;             /* of total pressure at the inlet */
    double floor;                /* m/s of face velocity below which quadratic losses turn linear */
};

struct sp_duct_problem sp_duct_pose(const struct sp_duct *d, const struct sp_duct_inputs *in);

/* Total pressure over ambient [Pa] that waits at the inlet when it takes in m, and pressure over ambient at
 * an exit or outside a leak: a wind from behind rams an exit, as far as it looks that way, but no leak. */
double sp_duct_available(const struct sp_duct_problem *p, double m);
double sp_duct_back(const struct sp_duct_problem *p, size_t exit);
double sp_duct_back_leak(const struct sp_duct_problem *p);

/* Head [Pa] of mass flow m in area A: m|m| / (2 rho A^2), linear below the floor. Always >= 0. */
double sp_duct_head(const struct sp_duct_problem *p, double m, double rho, double area);

/* The same of a way that takes a share of the duct's air: its floor is that share of the duct's. */
double sp_duct_head_of(const struct sp_duct_problem *p, double m, double rho, double area, double share);

/* Losses of the inlet at either sign of m, air of density rho; outwards `lip` is the head of the jet. */
struct sp_inlet_loss { double lip, screen, diffuser; };
struct sp_inlet_loss sp_duct_inlet_loss(const struct sp_duct_problem *p, double m, double rho);

/* Loss of a core with `face` m2 of it in the way of m, air heated from T_in to T_out. */
struct sp_core_loss sp_duct_core_loss(const struct sp_duct_problem *p, const struct sp_core_ready *core,
                                      double m, double face, double T_in, double T_out, double rho_in,
                                      double rho_out);

/* Pressure [Pa] that fans of kind i add to m, air of `before` kg/m3 ahead of them and `behind` after: what
 * they see is the air that comes, and over a creeping flow one goes over into the other. */
double sp_duct_fan(const struct sp_duct_problem *p, int i, double m, double before, double behind);

/* Loss [Pa] at the exit of coefficient `loss` and head `head` there, the thrown-away head apart: outwards,
 * and drawn in. */
double sp_duct_exit_loss(double loss, double m, double head);

/* A station where m passes `area` with `total` Pa over ambient. */
struct sp_station sp_duct_station(const struct sp_duct_problem *p, double m, double total, double T,
                                  double area);

/* Drag [N] beside that of the air inside: spilled air, and what the duct does to the air outside. Sets
 * out->spill_drag and adds to out->drag. */
void sp_duct_add_outside(const struct sp_duct_problem *p, double inlet_velocity, struct sp_duct_state *out);

/* Thrust [N] that heat gives to a jet of m out at angle `cos_a`, `total` Pa over ambient, tau as hot as the
 * stream. */
double sp_duct_thrust(double m, double total, double rho, double tau, double cos_a);

#endif
