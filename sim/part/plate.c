/* Plain plate fins on round tubes. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/plate.h"

#include <math.h>
#include <stddef.h>

/* Narrowest way of the air from tube to tube, m. */
static double way_between(const struct sp_plate *g, double collar)
{
    double across = g->pitch_across - collar;
    if (g->rows < 2.0) return across;
    /* staggered: twice the way on the slant, if that is the narrower */
    double slant = hypot(0.5 * g->pitch_across, g->pitch_along) - collar;
    return fmin(across, 2.0 * slant);
}

/* Outer over inner radius of the round fin that does as much as a tube's share of the plate: hexagons of
 * staggered rows, the rectangle of a single one. Schmidt. */
static double radius_ratio(const struct sp_plate *g, double radius)
{
    double M = 0.5 * g->pitch_across, L = 0.5 * g->depth;
    if (g->rows < 2.0) {
        double least = fmin(M, L), most = fmax(M, L);
        return 1.28 * least / radius * sqrt(most / least - 0.2);
    }
    L = 0.5 * hypot(0.5 * g->pitch_across, g->pitch_along);
    return 1.27 * M / radius * sqrt(fmax(L / M - 0.3, 0.05));
}

static void set_heat(const struct sp_plate *g, double gap, struct sp_plate_core *c)
{
    c->j_scale = 0.14 * pow(g->pitch_across / g->pitch_along, -0.502) * pow(gap / c->collar, 0.0312);
    c->j_power = -0.328;
    if (g->rows >= 4.0) return;
    double power = 0.607 * (4.0 - g->rows);
    c->j_scale *= 0.991 * pow(2.24 * pow(0.25 * g->rows, -0.031), power);
    c->j_power -= 0.092 * power;
}

static void set_friction(const struct sp_plate *g, struct sp_plate_core *c)
{
    double open = g->pitch_across / c->collar;
    double bank = 4.0 / M_PI * (open - 1.0) * (0.25 + 0.118 / pow(open - 1.0, 1.08)); /* per area of tube */
    c->fin_friction = 0.508 * pow(open, 1.318) * c->fin_share;
    c->tube_friction = bank * (1.0 - c->fin_share) * (1.0 - g->fin_thickness / g->fin_pitch);
}

bool sp_plate_core_build(const struct sp_plate *g, struct sp_plate_core *c)
{
    double gap = g->fin_pitch - g->fin_thickness;
    c->collar = g->diameter + 2.0 * g->fin_thickness;
    double way = way_between(g, c->collar);
    bool possible = g->diameter > 0.0 && g->fin_thickness > 0.0 && gap > 0.0 && g->fin_conductivity > 0.0 &&
                    g->rows >= 1.0 && way > 0.0 && g->pitch_along > 0.0 && g->depth >= c->collar;
    if (!possible) return false;
    double cell = g->pitch_across * g->fin_pitch; /* of the face */
    double hole = 0.25 * M_PI * c->collar * c->collar * g->rows;
    double fins = 2.0 * (g->pitch_across * g->depth - hole), tubes = M_PI * c->collar * gap * g->rows;
    if (!(fins > 0.0)) return false;
    c->sigma = way * gap / cell;
    c->area_frontal = (fins + tubes) / cell;
    c->area_free = c->area_frontal / c->sigma;
    c->fin_share = fins / (fins + tubes);
    c->contraction = sp_core_contraction(c->sigma);
    c->expansion = sp_core_expansion(c->sigma);
    set_heat(g, gap, c);
    set_friction(g, c);
    double ratio = radius_ratio(g, 0.5 * c->collar);
    double phi = fmax((ratio - 1.0) * (1.0 + 0.35 * log(ratio)), 0.0);
    c->fin_ml = 0.5 * c->collar * phi * sqrt(2.0 / (g->fin_conductivity * g->fin_thickness));
    return isfinite(c->j_scale) && isfinite(c->fin_friction) && isfinite(c->tube_friction) &&
           isfinite(c->fin_ml);
}

const char *sp_plate_outside(const struct sp_plate *g)
{
    double collar = g->diameter + 2.0 * g->fin_thickness;
    const struct {
        const char *name;
        double value, low, high;
    } data[] = {
        {"tube pitch over diameter", g->pitch_across / collar, 1.97, 2.55},
        {"row pitch over diameter", g->pitch_along / collar, 1.70, 2.58},
        {"gap between fins over diameter", (g->fin_pitch - g->fin_thickness) / collar, 0.08, 0.64},
    };
    for (size_t i = 0; i < sizeof data / sizeof *data; ++i)
        if (!(data[i].value >= data[i].low && data[i].value <= data[i].high)) return data[i].name;
    return NULL;
}

double sp_plate_reynolds(const struct sp_plate_core *c, double G, double viscosity)
{
    return fabs(G) * c->collar / viscosity;
}

double sp_plate_j(const struct sp_plate_core *c, double re)
{
    return c->j_scale * pow(fmax(fabs(re), SP_PLATE_RE_LEAST), c->j_power);
}

/* f Re, finite at nil flow. */
static double friction_re(const struct sp_plate_core *c, double re)
{
    re = fmax(fabs(re), SP_PLATE_RE_LEAST);
    return re * (c->fin_friction * pow(re, -0.521) + c->tube_friction * pow(re, -0.16));
}

double sp_plate_friction(const struct sp_plate_core *c, double re)
{
    return friction_re(c, re) / fabs(re);
}

double sp_plate_film(const struct sp_plate_core *c, double G, double viscosity, double cp, double prandtl)
{
    double root = cbrt(prandtl);
    return sp_plate_j(c, sp_plate_reynolds(c, G, viscosity)) * fabs(G) * cp / (root * root);
}

double sp_plate_fin_efficiency(const struct sp_plate_core *c, double h)
{
    double ml = c->fin_ml * sqrt(h);
    return ml < 1e-4 ? 1.0 - ml * ml / 3.0 : tanh(ml) / ml;
}

double sp_plate_surface_efficiency(const struct sp_plate_core *c, double h)
{
    return 1.0 - c->fin_share * (1.0 - sp_plate_fin_efficiency(c, h));
}

struct sp_core_drop sp_plate_drop(const struct sp_plate_core *c, double G, double viscosity, double rho1,
                                  double rho2)
{
    double head = 0.5 * G * G, sigma2 = c->sigma * c->sigma;
    double volume = 0.5 * (1.0 / rho1 + 1.0 / rho2);
    double shear = 0.5 * fabs(G) * viscosity / c->collar * friction_re(c, sp_plate_reynolds(c, G, viscosity));
    return (struct sp_core_drop){
        .entrance = head * (c->contraction + 1.0 - sigma2) / rho1,
        .acceleration = head * 2.0 * (1.0 / rho2 - 1.0 / rho1),
        .friction = shear * volume * c->area_free,
        .exit = -head * (1.0 - sigma2 - c->expansion) / rho2,
    };
}
