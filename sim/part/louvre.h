/* louvre.h - air side of a core of louvred corrugated fins between flat tubes.
 *
 * Heat: Chang & Wang, Int. J. Heat Mass Transfer 40 (1997) 533-544, eq. 9, 100 < Re < 3000, most data
 * within 15 %. Friction: Chang, Hsu, Lin & Wang, same journal 43 (2000) 2237-2243 with the amendment
 * 49 (2006) 4250-4253. Pressure drop: Kays & London, ch. 2, with their infinite-Reynolds entrance and
 * exit coefficients. Re is on louvre pitch and on the velocity in the free-flow area; the friction
 * factor is Fanning's. SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_LOUVRE_H
#define SP_PART_LOUVRE_H

#include <stdbool.h>

/* Geometry: m, rad, W/mK. */
struct sp_louvre {
    double louvre_pitch;  /* along the flow */
    double louvre_angle;  /* rad */
    double louvre_length; /* of the cut, across the fin */
    double fin_pitch;     /* from one fin leg to the next: half a wave */
    double fin_length;    /* of a leg from tube to tube */
    double fin_thickness;
    double fin_conductivity; /* W/mK */
    double depth;            /* along the flow */
    double tube_pitch;
    double tube_height; /* outer, the small side of the tube */
};

/* What follows from the geometry alone, worked out once. */
struct sp_louvre_core {
    double pitch;                  /* louvre pitch, m */
    double sigma;                  /* free-flow over frontal area */
    double area_free;              /* whole air-side surface over free-flow area */
    double area_frontal;           /* whole air-side surface over frontal area */
    double fin_share;              /* fin surface over whole surface */
    double diameter;               /* hydraulic, m */
    double contraction, expansion; /* Kc, Ke */
    double j_scale;                /* j = j_scale Re^-0.49 */
    double low_ln, low_power;      /* low branch:  ln f = low_ln + low_power ln Re - 3.01 ln ln(Re/2) */
    double high_ln, high_power;    /* high branch: ln f = ... - 2.966 ln ln(0.3 Re) */
    double low_end2, high_end2;    /* squares of f at the ends of the blend, Re 130 and 230 */
    double summit_re, summit; /* where f Re^2 first stops rising, and its value; Re infinite if it never does */
    double fin_ml;                 /* fin parameter m l = fin_ml sqrt(h) */
};

/* Reynolds numbers of the published range of j. Outside it j is a guess; below SP_LOUVRE_RE_J j is
 * held, so that the film coefficient is linear at nil flow; below SP_LOUVRE_RE_F the product f Re is
 * held, as in laminar flow, for ln(0.5 Re) has a pole at 2. */
#define SP_LOUVRE_RE_LEAST 100.0
#define SP_LOUVRE_RE_MOST  3000.0
#define SP_LOUVRE_RE_J     10.0
#define SP_LOUVRE_RE_F     50.0

/* False if the geometry is impossible or no friction can be had of it (fin thickness must exceed one
 * hundredth of the fin pitch). */
bool sp_louvre_core_build(const struct sp_louvre *g, struct sp_louvre_core *out);

/* Name of the first dimension outside the data the correlations rest on (as remembered: fin pitch 0.5
 * to 3.3 mm, fin length 2.8 to 20, louvre length 2.1 to 18.5, louvre pitch 0.5 to 3, depth 15.6 to
 * 57.4, tube pitch 7.5 to 25, angle 8.4 to 35 deg, fin thickness 0.04 to 0.16 mm), or NULL. */
const char *sp_louvre_outside(const struct sp_louvre *g);

/* Reynolds number at mass flux G [kg/m2s] in the free-flow area. Signs of G and Re are ignored below. */
double sp_louvre_reynolds(const struct sp_louvre_core *c, double G, double viscosity);

double sp_louvre_j(const struct sp_louvre_core *c, double re);
/* As published, save that f Re^2, to which the drop is proportional, never falls: for some geometries the
 * published blend lets it between Re 130 and some 300, which no core does and which would give one duct
 * several flows. There f Re^2 is held at its summit. */
double sp_louvre_friction(const struct sp_louvre_core *c, double re);

/* Film coefficient [W/m2K] = j G cp Pr^(-2/3). */
double sp_louvre_film(const struct sp_louvre_core *c, double G, double viscosity, double cp, double prandtl);

/* Efficiency of a fin (tip at half the leg) and of the whole surface at film coefficient h [W/m2K]. */
double sp_louvre_fin_efficiency(const struct sp_louvre_core *c, double h);
double sp_louvre_surface_efficiency(const struct sp_louvre_core *c, double h);

/* Drop of static pressure [Pa] from face to back; the exit term is negative, a recovery. */
struct sp_core_drop {
    double entrance, acceleration, friction, exit;
};

/* At mass flux G, mean viscosity, density 1 before and 2 behind the core. */
struct sp_core_drop sp_louvre_drop(const struct sp_louvre_core *c, double G, double viscosity, double rho1,
                                   double rho2);

/* Entrance and exit coefficients of a core of free-area ratio sigma (0..1], Re = infinity. */
double sp_core_contraction(double sigma);
double sp_core_expansion(double sigma);

#endif
