/* tube.h - heat and pressure drop inside the tubes of a core, flat or round.
 *
 * Flat tubes have round ends: inner height b, inner width W, alpha = b/W. Laminar values of the
 * rectangle of that alpha (Shah & London 1978); developing flow: for flat tubes the increment of
 * parallel plates at constant wall temperature (Edwards, Denny & Mills 1979) is added to them, an
 * approximation; for round tubes the formula of the VDI Heat Atlas G1. Turbulent: Gnielinski.
 * Between: Nu linear in Re, by either of two published rules. Wall properties are taken as the bulk's.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_TUBE_H
#define SP_PART_TUBE_H

#include <stdbool.h>

enum sp_tube_wall { SP_WALL_TEMPERATURE, SP_WALL_HEAT_FLUX };

enum sp_tube_rule {
    SP_RULE_2013, /* Gnielinski 2013: transition 2300 to 4000, then his 1976 form with (Re - 1000) */
    SP_RULE_VDI   /* Gnielinski 1995, VDI G1: transition 2300 to 10000, then the form with Re */
};

/* Geometry: m. A round tube has height == width. */
struct sp_tube_shape {
    double height, width; /* inner */
    double length;
    double loss;            /* entrance, exit and tanks, on the velocity head in the tube; 1.5 is usual */
    enum sp_tube_wall wall; /* thermal condition of the laminar values of flat tubes */
    enum sp_tube_rule rule;
};

/* What follows from the shape alone. */
struct sp_tube {
    double area, perimeter, diameter, length, loss;
    bool round;
    double nu;    /* laminar, fully developed */
    double f_re;  /* laminar, Fanning */
    double entry; /* 1 + (Dh/L)^(2/3), entrance factor of turbulent flow */
    enum sp_tube_rule rule;
    double re_end;          /* upper end of the transition */
    double xi_low, xi_high; /* Darcy factors at the ends of the transition */
};

#define SP_TUBE_RE_LAMINAR 2300.0

/* False unless 0 < height <= width, length > 0, loss >= 0 and all are finite. */
bool sp_tube_build(const struct sp_tube_shape *shape, struct sp_tube *out);

/* Reynolds number at mass flow [kg/s] in ONE tube; its sign is ignored, as Re's is below. */
double sp_tube_reynolds(const struct sp_tube *t, double flow, double viscosity);

/* Nusselt number on the hydraulic diameter; film coefficient [W/m2K] of one tube's flow. */
double sp_tube_nusselt(const struct sp_tube *t, double re, double prandtl);
double sp_tube_film(const struct sp_tube *t, double flow, double viscosity, double conductivity,
                    double prandtl);

/* Darcy friction factor; infinite at re = 0. */
double sp_tube_darcy(const struct sp_tube *t, double re);

/* Pressure drop [Pa] over a tube with its end losses: odd in flow, ever rising. */
double sp_tube_drop(const struct sp_tube *t, double flow, double density, double viscosity);

/* ---- the pieces ------------------------------------------------------------------------------- */

/* Rectangle of aspect 0..1 (0: parallel plates). */
double sp_nu_rectangle(double aspect, enum sp_tube_wall wall);
double sp_f_re_rectangle(double aspect); /* Fanning */

/* What developing flow between plates adds to Nu at Gz = Re Pr Dh/L. */
double sp_nu_plates_entry(double gz);

/* Round tube, hydrodynamically and thermally developing, constant wall temperature. */
double sp_nu_round(double gz, double prandtl);

double sp_xi_filonenko(double re);
double sp_xi_konakov(double re);

/* Gnielinski's turbulent form with friction factor xi: with re_less = 1000 that of 1976, with 0 that
 * of VDI G1; entry as in struct sp_tube. */
double sp_nu_gnielinski(double re, double re_less, double prandtl, double xi, double entry);

#endif
