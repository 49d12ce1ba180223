/* Louvred fins: heat, friction, pressure drop. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/louvre.h"

#include <math.h>
#include <stddef.h>

static const double pi = 3.14159265358979323846;
static const double re_blend_low = 130.0, re_blend_high = 230.0;

static double degrees(double radians)
{
    return radians * 180.0 / pi;
}

double sp_core_contraction(double sigma)
{
    double narrowing = 4.374e-4 * exp(6.737 * sqrt(sigma)) + 0.621;
    double k = 1.0 / narrowing - 1.0;
    return k * k;
}

double sp_core_expansion(double sigma)
{
    return (1.0 - sigma) * (1.0 - sigma);
}

static bool possible(const struct sp_louvre *g)
{
    const double lengths[] = {g->louvre_pitch, g->louvre_length, g->fin_pitch,
                              g->fin_length,   g->fin_thickness, g->depth,
                              g->tube_pitch,   g->tube_height,   g->fin_conductivity};
    for (size_t i = 0; i < sizeof lengths / sizeof *lengths; i++)
        if (!(lengths[i] > 0.0 && isfinite(lengths[i]))) return false;
    return g->louvre_angle > 0.0 && g->louvre_angle < 0.5 * pi && g->fin_thickness < g->fin_pitch &&
           g->tube_height < g->tube_pitch && g->fin_thickness < 0.5 * g->fin_length &&
           g->louvre_length <= g->fin_length && g->louvre_pitch <= g->depth;
}

/* The cell between two fin legs and two tubes, taken as a rectangle. */
static void cell(const struct sp_louvre *g, struct sp_louvre_core *out)
{
    double s = g->fin_pitch - g->fin_thickness, height = g->tube_pitch - g->tube_height;
    double fins = 2.0 * height * g->depth, tubes = 2.0 * s * g->depth;
    double leg = g->fin_length - g->fin_thickness;
    out->sigma = s * height / (g->fin_pitch * g->tube_pitch);
    out->area_free = (fins + tubes) / (s * height);
    out->area_frontal = out->area_free * out->sigma;
    out->fin_share = fins / (fins + tubes);
    out->diameter = 2.0 * s * leg / (s + leg);
    out->contraction = sp_core_contraction(out->sigma);
    out->expansion = sp_core_expansion(out->sigma);
}

static double j_scale(const struct sp_louvre *g)
{
    double p = g->louvre_pitch;
    return pow(degrees(g->louvre_angle) / 90.0, 0.27) * pow(g->fin_pitch / p, -0.14) *
           pow(g->fin_length / p, -0.29) * pow(g->depth / p, -0.23) * pow(g->louvre_length / p, 0.68) *
           pow(g->tube_pitch / p, -0.28) * pow(g->fin_thickness / p, -0.05);
}

/* Geometry part of ln f of the low branch; the published power is -0.805 Fp/Fl. */
static double low_branch(const struct sp_louvre *g, double diameter)
{
    double theta = degrees(g->louvre_angle), p = g->louvre_pitch;
    return log(14.39) + 3.04 * log(log(1.0 + g->fin_pitch / p)) -
           1.435 * log(log(pow(g->fin_thickness / g->fin_pitch, 0.48) + 0.9)) - 3.01 * log(diameter / p) -
           0.308 * log(g->fin_pitch / g->louvre_length) - 0.308 * log(g->depth / g->louvre_length) -
           0.1167 * g->tube_pitch / g->tube_height + 0.35 * log(theta);
}

static double high_branch(const struct sp_louvre *g, double diameter)
{
    double theta = degrees(g->louvre_angle), p = g->louvre_pitch;
    double height = g->tube_pitch - g->tube_height;
    return log(4.97) - 0.527 * log(log(sqrt(g->fin_thickness / g->fin_pitch) + 0.9)) -
           2.966 * log(diameter / p) -
           0.7931 * g->tube_pitch / height * log(g->fin_pitch / g->louvre_length) -
           0.0446 * log(g->tube_pitch / g->tube_height) - 3.553 * log(log(1.2 + pow(p / g->fin_pitch, 1.4))) -
           0.477 * log(theta);
}

static double f_low(const struct sp_louvre_core *c, double ln_re)
{
    return exp(c->low_ln + c->low_power * ln_re - 3.01 * log(ln_re + log(0.5)));
}

static double f_high(const struct sp_louvre_core *c, double ln_re)
{
    return exp(c->high_ln + c->high_power * ln_re - 2.966 * log(ln_re + log(0.3)));
}

static void find_summit(struct sp_louvre_core *c);

bool sp_louvre_core_build(const struct sp_louvre *g, struct sp_louvre_core *out)
{
    if (!possible(g)) return false;
    struct sp_louvre_core c = {.pitch = g->louvre_pitch};
    cell(g, &c);
    c.j_scale = j_scale(g);
    c.low_ln = low_branch(g, c.diameter);
    c.low_power = -0.805 * g->fin_pitch / g->fin_length;
    c.high_ln = high_branch(g, c.diameter);
    c.high_power = 0.6049 - 1.064 / pow(degrees(g->louvre_angle), 0.2);
    c.low_end2 = pow(f_low(&c, log(re_blend_low)), 2.0);
    c.high_end2 = pow(f_high(&c, log(re_blend_high)), 2.0);
    double length = 0.5 * g->fin_length - g->fin_thickness;
    c.fin_ml =
        length * sqrt(2.0 / (g->fin_conductivity * g->fin_thickness) * (1.0 + g->fin_thickness / g->depth));
    /* not so for fins thinner than a hundredth of their pitch: a logarithm below 0 to a broken power */
    if (!(isfinite(c.low_end2) && isfinite(c.high_end2) && isfinite(c.j_scale))) return false;
    find_summit(&c);
    *out = c;
    return true;
}

const char *sp_louvre_outside(const struct sp_louvre *g)
{
    const struct {
        const char *name;
        double value, low, high;
    } limits[] = {
        {"fin pitch", g->fin_pitch, 0.5e-3, 3.3e-3},
        {"fin length", g->fin_length, 2.8e-3, 20e-3},
        {"louvre length", g->louvre_length, 2.1e-3, 18.5e-3},
        {"louvre pitch", g->louvre_pitch, 0.5e-3, 3e-3},
        {"depth", g->depth, 15.6e-3, 57.4e-3},
        {"tube pitch", g->tube_pitch, 7.5e-3, 25e-3},
        {"louvre angle", degrees(g->louvre_angle), 8.4, 35.0},
        {"fin thickness", g->fin_thickness, 0.04e-3, 0.16e-3},
    };
    const double slack = 1e-9; /* a limit itself is inside, however its unit was turned */
    for (size_t i = 0; i < sizeof limits / sizeof *limits; i++)
        if (!(limits[i].value >= limits[i].low * (1.0 - slack) &&
              limits[i].value <= limits[i].high * (1.0 + slack)))
            return limits[i].name;
    return NULL;
}

double sp_louvre_reynolds(const struct sp_louvre_core *c, double G, double viscosity)
{
    return fabs(G) * c->pitch / viscosity;
}

double sp_louvre_j(const struct sp_louvre_core *c, double re)
{
    re = fabs(re);
    return c->j_scale * pow(re < SP_LOUVRE_RE_J ? SP_LOUVRE_RE_J : re, -0.49);
}

/* f Re, finite down to nil flow. Between 130 and 230 the branches are blended as amended in 2006. */
static double published_re(const struct sp_louvre_core *c, double re)
{
    re = fabs(re);
    if (re < SP_LOUVRE_RE_F) re = SP_LOUVRE_RE_F;
    if (re <= re_blend_low) return re * f_low(c, log(re));
    if (re < re_blend_high) {
        double w = 3.6 - 0.02 * re;
        return re * sqrt(0.5 * ((1.0 + w) * c->low_end2 + (1.0 - w) * c->high_end2));
    }
    return re * f_high(c, log(re));
}

/* The first summit of f Re^2 over the blend; the branches on either side rise by themselves. */
static void find_summit(struct sp_louvre_core *c)
{
    c->summit_re = INFINITY;
    const int steps = 400; /* of Re 0.25 */
    for (int i = 0; i <= steps; ++i) {
        double re = re_blend_low + (re_blend_high - re_blend_low) * i / steps, value = re * published_re(c, re);
        if (value < c->summit) return;
        c->summit = value;
        c->summit_re = re;
    }
    c->summit_re = INFINITY;
}

static double friction_re(const struct sp_louvre_core *c, double re)
{
    double f_re = published_re(c, re);
    return fabs(re) > c->summit_re ? fmax(f_re, c->summit / fabs(re)) : f_re;
}

double sp_louvre_friction(const struct sp_louvre_core *c, double re)
{
    return friction_re(c, re) / fabs(re);
}

double sp_louvre_film(const struct sp_louvre_core *c, double G, double viscosity, double cp, double prandtl)
{
    double root = cbrt(prandtl);
    return sp_louvre_j(c, sp_louvre_reynolds(c, G, viscosity)) * fabs(G) * cp / (root * root);
}

double sp_louvre_fin_efficiency(const struct sp_louvre_core *c, double h)
{
    double ml = c->fin_ml * sqrt(h);
    return ml < 1e-4 ? 1.0 - ml * ml / 3.0 : tanh(ml) / ml;
}

double sp_louvre_surface_efficiency(const struct sp_louvre_core *c, double h)
{
    return 1.0 - c->fin_share * (1.0 - sp_louvre_fin_efficiency(c, h));
}

struct sp_core_drop sp_louvre_drop(const struct sp_louvre_core *c, double G, double viscosity, double rho1,
                                   double rho2)
{
    double head = 0.5 * G * G, sigma2 = c->sigma * c->sigma;
    double volume = 0.5 * (1.0 / rho1 + 1.0 / rho2); /* mean, as with even heating */
    double f_re = friction_re(c, sp_louvre_reynolds(c, G, viscosity));
    /* G^2/2 f = (G mu / pitch) (f Re) / 2, without a pole at nil flow */
    double shear = 0.5 * fabs(G) * viscosity / c->pitch * f_re;
    return (struct sp_core_drop){
        .entrance = head * (c->contraction + 1.0 - sigma2) / rho1,
        .acceleration = head * 2.0 * (1.0 / rho2 - 1.0 / rho1),
        .friction = shear * volume * c->area_free,
        .exit = -head * (1.0 - sigma2 - c->expansion) / rho2,
    };
}
