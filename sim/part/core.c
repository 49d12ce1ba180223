/* A core: its losses and conductances. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/core.h"

#include <math.h>

#include "part/unevenness.h"

/* Coolant-side conductance left in standing coolant, of that at the reference flow. Common practice. */
static const double standing_share = 0.02;

static const double reference_density = 1000.0, reference_viscosity = 0.7e-3;

bool sp_core_has_heat(const struct sp_core_ready *c)
{
    return c->design->heat_law != SP_CORE_NO_HEAT;
}

/* ---- air side -------------------------------------------------------------------------------------- */

/* Drop [Pa] of the test at face velocity v, at the test's density. */
static double tested_drop(const struct sp_core_ready *c, double v)
{
    double last = c->drop_v[c->drop_points - 1];
    if (v >= last) return c->drop_p[c->drop_points - 1] * pow(v / last, c->drop_tail);
    double p = 0.0;
    gsl_interp_eval_e(c->drop_curve, c->drop_v, c->drop_p, v, NULL, &p);
    return p;
}

/* Friction of a core tested cold, carried over at equal mass flux. */
static double tested_loss(const struct sp_core_ready *c, double G, double T_mean, double inverse_density)
{
    const struct sp_core *d = c->design;
    double thicker = c->reference_viscosity > 0.0 ? sp_air_sutherland(T_mean) / c->reference_viscosity : 1.0;
    switch (d->drop_law) {
    case SP_DROP_COEFFICIENT:
        return d->coefficient * 0.5 * G * G * inverse_density;
    case SP_DROP_LINEAR:
        return (d->linear * thicker * G + d->quadratic / d->at_density * G * G) * inverse_density;
    default: {
        /* Reynolds number kept: the table is entered at G mu0/mu, and the drop scales with mu^2. */
        double v = G / (d->at_density * thicker);
        return tested_drop(c, v) * thicker * thicker * d->at_density * inverse_density;
    }
    }
}

static struct sp_core_loss finned_loss(const struct sp_core_ready *c, double G, double T_mean, double rho_in,
                                       double rho_out)
{
    double thinner = 1.0 / rho_out - 1.0 / rho_in, viscosity = sp_air_sutherland(T_mean);
    struct sp_core_drop drop = c->design->fin_kind == SP_FINS_PLATE
                                   ? sp_plate_drop(&c->plate, G / c->sigma, viscosity, rho_in, rho_out)
                                   : sp_louvre_drop(&c->louvre, G / c->sigma, viscosity, rho_in, rho_out);
    /* Static drop less the dynamic head gained between equal areas is the loss of total pressure; of the
     * acceleration, half is the heating's own loss, as in a core tested cold. */
    double heating = 0.5 * drop.acceleration;
    return (struct sp_core_loss){drop.entrance + drop.friction + drop.exit + drop.acceleration -
                                     0.5 * G * G * thinner - heating,
                                 heating};
}

/* Of a core, or a strip of one, that is blown evenly at G. */
static struct sp_core_loss even_loss(const struct sp_core_ready *c, double G, double T_in, double T_out,
                                     double rho_in, double rho_out)
{
    double T_mean = 0.5 * (T_in + T_out);
    if (c->design->drop_law == SP_DROP_FINS) return finned_loss(c, G, T_mean, rho_in, rho_out);
    double thinner = 1.0 / rho_out - 1.0 / rho_in; /* m3/kg gained */
    double mean = 0.5 * (1.0 / rho_in + 1.0 / rho_out);
    return (struct sp_core_loss){tested_loss(c, G, T_mean, mean),
                                 0.5 * G * G * thinner / (c->sigma * c->sigma)};
}

struct sp_core_loss sp_core_air_loss(const struct sp_core_ready *c, double G, double T_in, double T_out,
                                     double rho_in, double rho_out)
{
    double local = G / c->open, s = c->uneven;
    struct sp_core_loss loss;
    if (s > 0.0) {
        struct sp_core_loss fast = even_loss(c, (1.0 + s) * local, T_in, T_out, rho_in, rho_out);
        struct sp_core_loss slow = even_loss(c, (1.0 - s) * local, T_in, T_out, rho_in, rho_out);
        loss = (struct sp_core_loss){0.5 * (fast.core + slow.core), 0.5 * (fast.heating + slow.heating)};
    } else {
        loss = even_loss(c, local, T_in, T_out, rho_in, rho_out);
    }
    if (c->incline_loss > 0.0) loss.core += c->incline_loss * 0.5 * G * G / rho_in;
    return loss;
}

/* Film under what dirt [m2K/W] lies on the surface. */
static double fouled(double film, double fouling)
{
    return fouling > 0.0 ? film / (1.0 + film * fouling) : film;
}

static double finned_conductance(const struct sp_core_ready *c, double G, double T)
{
    double mu = sp_air_viscosity(T), cp = sp_air_cp_film(T), pr = sp_air_prandtl(T),
           dirt = c->design->air_fouling;
    if (c->design->fin_kind == SP_FINS_PLATE) {
        double h = fouled(sp_plate_film(&c->plate, G / c->plate.sigma, mu, cp, pr), dirt);
        return c->design->heat_factor * sp_plate_surface_efficiency(&c->plate, h) * h *
               c->plate.area_frontal * c->face;
    }
    double h = fouled(sp_louvre_film(&c->louvre, G / c->louvre.sigma, mu, cp, pr), dirt);
    return c->design->heat_factor * sp_louvre_surface_efficiency(&c->louvre, h) * h * c->louvre.area_frontal *
           c->face;
}

/* Of the whole core, blown evenly at G. */
static double even_conductance(const struct sp_core_ready *c, double G, double T)
{
    if (c->design->heat_law == SP_CORE_FINS) return finned_conductance(c, G, T);
    double x = G / c->air_flux;
    return c->design->heat_factor * c->air_scale * (c->air_power == 0.5 ? sqrt(x) : pow(x, c->air_power));
}

double sp_core_air_conductance(const struct sp_core_ready *c, double G, double T)
{
    double local = G / c->open, s = c->uneven;
    if (!(s > 0.0 && local > 0.0)) return c->open * even_conductance(c, local, T);
    double fast = even_conductance(c, (1.0 + s) * local, T), slow = even_conductance(c, (1.0 - s) * local, T);
    double rate =
        local * c->face * sp_air_cp_film(T); /* of the whole core at this flux, as the conductances */
    return c->open * sp_uneven_conductance(s, fast, slow, rate, c->inside);
}

/* ---- coolant side ---------------------------------------------------------------------------------- */

double sp_coolant_film_ratio(const struct sp_coolant *fluid, double T, double n)
{
    /* 50 % ethylene glycol at 90 degC, ASHRAE: k 0.414 W/mK, cp 3551 J/kgK, mu 0.82 mPa s. */
    double k = sp_coolant_conductivity(fluid, T) / 0.414, cp = sp_coolant_cp(fluid, T) / 3551.0;
    double mu = sp_coolant_viscosity(fluid, T) / 0.82e-3;
    return exp(0.6 * log(k) + 0.4 * log(cp) + (0.4 - n) * log(mu));
}

static double power_law(const struct sp_core_ready *c, double ratio, double m)
{
    double moving = m > 0.0 ? pow(m / c->coolant_flow, c->coolant_power) : 0.0;
    double still = standing_share * standing_share;
    return c->design->heat_factor * c->coolant_scale * ratio *
           sqrt(sqrt(moving * moving * moving * moving + still * still));
}

double sp_core_fluid_conductance(const struct sp_core_ready *c, double m)
{
    return power_law(c, 1.0, m);
}

double sp_core_coolant_conductance(const struct sp_core_ready *c, const struct sp_coolant *fluid, double m,
                                   double T)
{
    const struct sp_core *d = c->design;
    if (d->heat_law == SP_CORE_FINS) {
        double h = sp_tube_film(&c->tube, m / c->tubes, sp_coolant_viscosity(fluid, T),
                                sp_coolant_conductivity(fluid, T), sp_coolant_prandtl(fluid, T));
        double area = c->tube.perimeter * c->tube_path * c->tubes;
        return d->heat_factor * area / (1.0 / h + d->tube_wall / d->fin_conductivity + d->coolant_fouling);
    }
    return power_law(c, sp_coolant_film_ratio(fluid, T, c->coolant_power), m);
}

double sp_resistance_drop(const struct sp_resistance *r, bool fitting, double flow, double density,
                          double viscosity)
{
    double x = flow / r->flow;
    if (!(x > 0.0)) return 0.0;
    if (fitting) return r->drop * density / reference_density * x * x;
    double thicker = viscosity / reference_viscosity;
    double denser = density / reference_density;
    return r->drop * denser * sqrt(sqrt(thicker / denser)) * x * x / sqrt(sqrt(x));
}

double sp_core_coolant_drop(const struct sp_core_ready *c, const struct sp_coolant *fluid, double flow,
                            double T)
{
    double rho = sp_coolant_density(fluid, T), mu = sp_coolant_viscosity(fluid, T);
    if (c->design->drop.flow > 0.0) return sp_resistance_drop(&c->design->drop, false, flow, rho, mu);
    if (!(c->tubes > 0.0)) return 0.0;
    return sp_tube_drop(&c->tube, rho * flow / c->tubes, rho, mu);
}
