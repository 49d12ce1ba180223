/* Flow and heat inside tubes. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/tube.h"

#include <math.h>

static const double pi = 3.14159265358979323846;

static double square(double x)
{
    return x * x;
}

static double polynomial(const double *a, int count, double x)
{
    double sum = 0.0;
    for (int i = count - 1; i >= 0; i--)
        sum = sum * x + a[i];
    return sum;
}

double sp_nu_rectangle(double aspect, enum sp_tube_wall wall)
{
    static const double temperature[] = {1.0, -2.610, 4.970, -5.119, 2.702, -0.548};
    static const double flux[] = {1.0, -2.0421, 3.0853, -2.4765, 1.0578, -0.1861};
    if (!(aspect >= 0.0 && aspect <= 1.0)) return NAN;
    if (wall == SP_WALL_HEAT_FLUX) return 8.235 * polynomial(flux, 6, aspect);
    return 7.541 * polynomial(temperature, 6, aspect);
}

double sp_f_re_rectangle(double aspect)
{
    static const double a[] = {1.0, -1.3553, 1.9467, -1.7012, 0.9564, -0.2537};
    if (!(aspect >= 0.0 && aspect <= 1.0)) return NAN;
    return 24.0 * polynomial(a, 6, aspect);
}

double sp_nu_plates_entry(double gz)
{
    return 0.03 * gz / (1.0 + 0.016 * square(cbrt(gz)));
}

double sp_nu_round(double gz, double prandtl)
{
    double root = cbrt(gz);
    double third = sqrt(gz) * pow(2.0 / (1.0 + 22.0 * prandtl), 1.0 / 6.0);
    /* At gz = 0 the two middle terms cancel and 3.66 remains. */
    double second = 1.615 * root - 0.7;
    return cbrt(3.66 * 3.66 * 3.66 + 0.343 + second * second * second + third * third * third);
}

double sp_xi_filonenko(double re)
{
    return 1.0 / square(1.82 * log10(re) - 1.64);
}

double sp_xi_konakov(double re)
{
    return 1.0 / square(1.8 * log10(re) - 1.5);
}

double sp_nu_gnielinski(double re, double re_less, double prandtl, double xi, double entry)
{
    double e = 0.125 * xi;
    return e * (re - re_less) * prandtl / (1.0 + 12.7 * sqrt(e) * (square(cbrt(prandtl)) - 1.0)) * entry;
}

static void flat(const struct sp_tube_shape *s, struct sp_tube *out)
{
    double straight = s->width - s->height, aspect = s->height / s->width;
    out->area = straight * s->height + 0.25 * pi * s->height * s->height;
    out->perimeter = 2.0 * straight + pi * s->height;
    out->round = s->height == s->width;
    out->nu = out->round ? 3.66 : sp_nu_rectangle(aspect, s->wall);
    out->f_re = out->round ? 16.0 : sp_f_re_rectangle(aspect);
}

bool sp_tube_build(const struct sp_tube_shape *s, struct sp_tube *out)
{
    if (!(s->height > 0.0 && s->width >= s->height && isfinite(s->width) && s->length > 0.0 &&
          isfinite(s->length) && s->loss >= 0.0 && isfinite(s->loss)))
        return false;
    struct sp_tube t = {.length = s->length, .loss = s->loss, .rule = s->rule};
    flat(s, &t);
    t.diameter = 4.0 * t.area / t.perimeter;
    t.entry = 1.0 + square(cbrt(t.diameter / t.length));
    t.re_end = s->rule == SP_RULE_VDI ? 1e4 : 4000.0;
    t.xi_low = 4.0 * t.f_re / SP_TUBE_RE_LAMINAR;
    t.xi_high = sp_xi_konakov(t.re_end);
    *out = t;
    return true;
}

double sp_tube_reynolds(const struct sp_tube *t, double flow, double viscosity)
{
    return fabs(flow) * t->diameter / (t->area * viscosity);
}

static double laminar(const struct sp_tube *t, double re, double prandtl)
{
    double gz = re * prandtl * t->diameter / t->length;
    return t->round ? sp_nu_round(gz, prandtl) : t->nu + sp_nu_plates_entry(gz);
}

static double turbulent(const struct sp_tube *t, double re, double prandtl, double xi)
{
    return sp_nu_gnielinski(re, t->rule == SP_RULE_VDI ? 0.0 : 1000.0, prandtl, xi, t->entry);
}

double sp_tube_nusselt(const struct sp_tube *t, double re, double prandtl)
{
    re = fabs(re);
    if (re <= SP_TUBE_RE_LAMINAR) return laminar(t, re, prandtl);
    if (re >= t->re_end) return turbulent(t, re, prandtl, sp_xi_konakov(re));
    double share = (re - SP_TUBE_RE_LAMINAR) / (t->re_end - SP_TUBE_RE_LAMINAR);
    return (1.0 - share) * laminar(t, SP_TUBE_RE_LAMINAR, prandtl) +
           share * turbulent(t, t->re_end, prandtl, t->xi_high);
}

double sp_tube_film(const struct sp_tube *t, double flow, double viscosity, double conductivity,
                    double prandtl)
{
    double re = sp_tube_reynolds(t, flow, viscosity);
    return sp_tube_nusselt(t, re, prandtl) * conductivity / t->diameter;
}

/* xi Re, finite at nil flow. The transition takes the same share as Nu does. */
static double darcy_re(const struct sp_tube *t, double re)
{
    re = fabs(re);
    if (re <= SP_TUBE_RE_LAMINAR) return 4.0 * t->f_re;
    if (re >= t->re_end) return sp_xi_konakov(re) * re;
    double share = (re - SP_TUBE_RE_LAMINAR) / (t->re_end - SP_TUBE_RE_LAMINAR);
    return ((1.0 - share) * t->xi_low + share * t->xi_high) * re;
}

double sp_tube_darcy(const struct sp_tube *t, double re)
{
    return darcy_re(t, re) / fabs(re);
}

double sp_tube_drop(const struct sp_tube *t, double flow, double density, double viscosity)
{
    double u = flow / (density * t->area);
    double wall =
        0.5 * darcy_re(t, sp_tube_reynolds(t, flow, viscosity)) * viscosity * t->length / square(t->diameter);
    return (wall + 0.5 * t->loss * density * fabs(u)) * u;
}
