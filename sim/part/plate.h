/* plate.h - air side of a core of plain continuous fins on staggered round tubes.
 *
 * Heat and friction: Gray & Webb, Proc. 8th Int. Heat Transfer Conf. 6 (1986) 2745-2750, constants from
 * memory; bank of bare tubes in their friction after Jakob (1938), from memory. Fins: Schmidt's hexagons
 * (1949), from memory. Pressure drop: Kays & London, as for louvred fins. Re is on the collar diameter and
 * the velocity in the narrowest area; friction factors are Fanning's. Lanced or wavy plates do better than
 * this. SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_PLATE_H
#define SP_PART_PLATE_H

#include "part/louvre.h"

/* Geometry: m, W/mK. */
struct sp_plate {
    double fin_pitch, fin_thickness, fin_conductivity;
    double diameter;     /* outer, of the bare tube; the collar adds two fin thicknesses */
    double pitch_across; /* from tube to tube across the air */
    double pitch_along;  /* from row to row along the air */
    double rows;
    double depth; /* of the fins along the air */
};

/* What follows from the geometry alone. */
struct sp_plate_core {
    double sigma, area_free, area_frontal, fin_share; /* as in struct sp_louvre_core */
    double collar;                                    /* m */
    double contraction, expansion;                    /* Kc, Ke */
    double j_scale, j_power;                          /* j = j_scale Re^j_power */
    double fin_friction; /* f = fin_friction Re^-0.521 + tube_friction Re^-0.16 */
    double tube_friction;
    double fin_ml; /* fin parameter m r phi = fin_ml sqrt(h) */
};

/* Re below which j and f Re are held. */
#define SP_PLATE_RE_LEAST 10.0

/* False if the geometry is impossible. */
bool sp_plate_core_build(const struct sp_plate *g, struct sp_plate_core *out);

/* Name of the first dimension outside the data (as remembered: pitch across 1.97 to 2.55 collars, pitch along
 * 1.70 to 2.58, gap between fins 0.08 to 0.64), or NULL. */
const char *sp_plate_outside(const struct sp_plate *g);

double sp_plate_reynolds(const struct sp_plate_core *c, double G, double viscosity);
double sp_plate_j(const struct sp_plate_core *c, double re);
double sp_plate_friction(const struct sp_plate_core *c, double re);
double sp_plate_film(const struct sp_plate_core *c, double G, double viscosity, double cp, double prandtl);
double sp_plate_fin_efficiency(const struct sp_plate_core *c, double h);
double sp_plate_surface_efficiency(const struct sp_plate_core *c, double h);
struct sp_core_drop sp_plate_drop(const struct sp_plate_core *c, double G, double viscosity, double rho1,
                                  double rho2);

#endif
