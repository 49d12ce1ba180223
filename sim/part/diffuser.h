/* diffuser.h - loss of total pressure between inlet and core face.
 *
 * Rennels & Hudson, Pipe Flow, 2012 for cones; any other section as the cone of equal areas and
 * length. Methods spread by 25 %; a clean thin inlet layer does better than the fit.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_DIFFUSER_H
#define SP_PART_DIFFUSER_H

#include <stdbool.h>

enum sp_diffuser_kind {
    SP_DIFFUSER_CONE,  /* opens all round; round or rectangular */
    SP_DIFFUSER_PLANE, /* opens in one plane only, from inlet_height on */
    SP_DIFFUSER_STEP   /* sudden */
};

struct sp_diffuser {
    enum sp_diffuser_kind kind;
    double inlet_area, outlet_area; /* m2 */
    double length;                  /* m, along the axis; 0 is a step */
    double inlet_height;            /* m, SP_DIFFUSER_PLANE only */
    double darcy;                   /* wall friction; 0 stands for SP_DIFFUSER_DARCY */
    bool damped;                    /* let the core's resistance lessen the stall loss */
};

/* Darcy factor of a smooth wall at Re 3e5; 1e5..1e6 gives 0.018..0.012, a matter of 0.002 in the loss. */
#define SP_DIFFUSER_DARCY 0.0145

struct sp_diffuser_loss {
    double loss;  /* on the inlet dynamic head */
    double angle; /* rad, full opening angle: of the equivalent cone, or of the plane */
    bool stalled; /* opens beyond the line of first appreciable stall */
};

/* core_loss: the core's coefficient on its face dynamic head, used only if damped. NaN loss unless
 * areas are positive with outlet >= inlet, length >= 0 and what else the kind needs is positive.
 *
 * Stall: line a-a of Reneau, Johnston & Kline (1967), 2 theta = 28 deg (N/W)^-0.45, held outside
 * N/W 1.5..40, +-2 deg, fitted to the chart as remembered. For cones W is the equivalent inlet radius
 * (their charts are drawn over N/R). A step counts as stalled.
 * Damping: c = loss/(1 - 1/AR)^2 above 0.15 becomes 0.15 + (c - 0.15)/(1 + core_loss); a proposal
 * without published coefficients. A step is not damped. */
struct sp_diffuser_loss sp_diffuser_loss(const struct sp_diffuser *d, double core_loss);

/* Sudden expansion of area ratio >= 1: (1 - 1/AR)^2. */
double sp_step_loss(double area_ratio);

/* Cone of full angle [rad] in (0, pi]. The published pieces meet within 0.003 at 20 deg; at 60 deg they
 * leave a step of 0.009 (1 - 1/AR)^2 less the friction term, which ends there. */
double sp_cone_loss(double area_ratio, double angle, double darcy);

/* Full angle [rad] of the cone between two areas [m2] over a length [m]. */
double sp_cone_angle(double inlet_area, double outlet_area, double length);

/* Full angle [rad] of first appreciable stall at length over width. */
double sp_stall_angle(double length_ratio);

#endif
