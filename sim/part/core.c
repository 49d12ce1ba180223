/* A core: its losses and conductances. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/core.h"

#include <gsl/gsl_errno.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "part/core_fit.h"

/* Coolant-side conductance left in standing coolant, of that at the reference flow. Common practice. */
static const double standing_share = 0.02;
/* Loss of entrance, exit and tanks on the head in the tubes. Common practice. */
static const double tank_loss = 1.5;
/* A fit to a maker's table worse than this is said. */
static const double poor_fit = 0.05;

static const double reference_density = 1000.0, reference_viscosity = 0.7e-3;

static bool refuse(const struct sp_place *at, struct sp_complaints *to, const char *found, const char *expected)
{
    sp_complain(to, at, found, expected, NULL);
    return false;
}

/* ---- building -------------------------------------------------------------------------------------- */

struct sp_louvre sp_core_louvre(const struct sp_core *d)
{
    return (struct sp_louvre){.louvre_pitch = d->louvre_pitch, .louvre_angle = d->louvre_angle,
                              .louvre_length = d->louvre_length, .fin_pitch = d->fin_pitch,
                              .fin_length = d->tube_pitch - d->tube_height, .fin_thickness = d->fin_thickness,
                              .fin_conductivity = d->fin_conductivity, .depth = d->depth,
                              .tube_pitch = d->tube_pitch, .tube_height = d->tube_height};
}

static bool build_fins(const struct sp_core *d, struct sp_core_ready *c, const struct sp_place *at,
                       struct sp_complaints *to)
{
    struct sp_louvre g = sp_core_louvre(d);
    if (!sp_louvre_core_build(&g, &c->louvre))
        return refuse(at, to, "fins and tubes that do not fit together",
                      "louvres shorter than the gap between tubes, fins thinner than their pitch, a depth");
    c->sigma = c->louvre.sigma;
    return true;
}

static bool build_tubes(const struct sp_core *d, struct sp_core_ready *c, const struct sp_place *at,
                        struct sp_complaints *to)
{
    double all = fmax(floor(d->height / d->tube_pitch + 1e-9), 1.0) * d->rows; /* 290 mm at 10 mm are 29 */
    c->tubes = fmax(all / d->passes, 1.0);
    c->tube_path = d->width * d->passes;
    struct sp_tube_shape shape = {.height = d->tube_height - 2.0 * d->tube_wall,
                                  .width = d->depth / d->rows - 2.0 * d->tube_wall,
                                  .length = c->tube_path, .loss = tank_loss * d->passes,
                                  .wall = SP_WALL_TEMPERATURE, .rule = SP_RULE_2013};
    if (sp_tube_build(&shape, &c->tube)) return true;
    return refuse(at, to, "tubes without a bore", "a tube height above two walls and a depth above the tube height");
}

static bool build_drop_table(const struct sp_core *d, struct sp_core_ready *c, const struct sp_place *at,
                             struct sp_complaints *to)
{
    struct sp_table given = d->drop_table;
    if (given.rows && given.cell[0] == 0.0 && given.cell[1] == 0.0) { /* the point at nil flow is ours anyway */
        given.cell += 2;
        --given.rows;
    }
    const struct sp_table *t = &given;
    if (!t->rows) return refuse(at, to, "a drop table without a moving point", "one or more pairs above 0");
    for (size_t i = 0; i < t->rows; ++i) {
        double v = t->cell[2 * i], p = t->cell[2 * i + 1];
        double v0 = i ? t->cell[2 * i - 2] : 0.0, p0 = i ? t->cell[2 * i - 1] : 0.0;
        if (!(v > v0 && p > p0)) return refuse(at, to, "a drop table out of order", "velocity and drop rising from above 0");
    }
    size_t n = c->drop_points = t->rows + 1;
    c->drop_v = calloc(2 * n, sizeof *c->drop_v);
    if (!c->drop_v) return refuse(at, to, "no memory", "room for the drop table");
    c->drop_p = c->drop_v + n;
    for (size_t i = 0; i < t->rows; ++i) {
        c->drop_v[i + 1] = t->cell[2 * i];
        c->drop_p[i + 1] = t->cell[2 * i + 1];
    }
    c->drop_curve = gsl_interp_alloc(n >= 3 ? gsl_interp_steffen : gsl_interp_linear, n);
    if (!c->drop_curve || gsl_interp_init(c->drop_curve, c->drop_v, c->drop_p, n))
        return refuse(at, to, "a drop table that cannot be interpolated", "rising pairs");
    c->drop_tail = 1.75;
    if (n >= 3)
        c->drop_tail = fmin(fmax(log(c->drop_p[n - 1] / c->drop_p[n - 2]) / log(c->drop_v[n - 1] / c->drop_v[n - 2]),
                                 1.0), 2.0);
    return true;
}

static bool build_maker(const struct sp_core *d, const struct sp_coolant *fluid, struct sp_core_ready *c,
                        const struct sp_place *at, struct sp_complaints *to)
{
    double tested = SP_ZERO_C + 90.0;
    struct sp_core_fit fit;
    if (!sp_core_fit(d, c->face, (int)d->cells, sp_coolant_cp(fluid, tested), &fit))
        return refuse(at, to, "a heat table that no conductance gives",
                      "heat per kelvin above 0 and below what air and coolant flow can carry");
    if (fit.worst > poor_fit) {
        char found[80];
        snprintf(found, sizeof found, "a heat table that the two conductances miss by %.0f %%", 100.0 * fit.worst);
        return refuse(at, to, found, "heat that rises smoothly with both flows (within 5 %)");
    }
    c->air_scale = fit.air.scale;
    c->air_flux = fit.air.reference * d->heat_at_density;
    c->air_power = fit.air.power;
    c->coolant_power = fit.coolant.power;
    c->coolant_flow = fit.coolant.reference;
    c->coolant_scale = fit.coolant.scale / sp_coolant_film_ratio(fluid, tested, c->coolant_power);
    return true;
}

static void build_power(const struct sp_core *d, struct sp_core_ready *c)
{
    c->air_scale = d->air_conductance;
    c->air_flux = d->at_face_velocity * d->heat_at_density;
    c->air_power = d->air_exponent;
    c->coolant_scale = d->coolant_conductance;
    c->coolant_flow = d->at_coolant_flow;
    c->coolant_power = d->coolant_exponent;
}

bool sp_core_build(const struct sp_core *d, const struct sp_coolant *fluid, struct sp_core_ready *out,
                   const struct sp_place *at, struct sp_complaints *complaints)
{
    memset(out, 0, sizeof *out);
    out->design = d;
    out->face = d->width * d->height;
    out->sigma = d->free_area_ratio;
    bool good = true, fins = d->drop_law == SP_DROP_FINS || d->heat_law == SP_CORE_FINS;
    if (fins) good = build_fins(d, out, at, complaints);
    bool tubes = d->heat_law == SP_CORE_FINS || !(d->drop.flow > 0.0);
    if (good && tubes && d->tube_pitch > 0.0) good = build_tubes(d, out, at, complaints);
    if (d->drop_law == SP_DROP_TABLE) good = build_drop_table(d, out, at, complaints) && good;
    if (d->drop_law != SP_DROP_FINS) out->sigma = d->free_area_ratio;
    if (isfinite(d->at_temperature)) out->reference_viscosity = sp_air_sutherland(d->at_temperature);
    if (d->heat_law == SP_CORE_POWER) build_power(d, out);
    if (d->heat_law == SP_CORE_MAKER && good) good = build_maker(d, fluid, out, at, complaints);
    return good;
}

void sp_core_free(struct sp_core_ready *c)
{
    if (c->drop_curve) gsl_interp_free(c->drop_curve);
    free(c->drop_v);
    memset(c, 0, sizeof *c);
}

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
    case SP_DROP_COEFFICIENT: return d->coefficient * 0.5 * G * G * inverse_density;
    case SP_DROP_LINEAR:
        return (d->linear * thicker * G + d->quadratic / d->at_density * G * G) * inverse_density;
    default: {
        /* Reynolds number kept: the table is entered at G mu0/mu, and the drop scales with mu^2. */
        double v = G / (d->at_density * thicker);
        return tested_drop(c, v) * thicker * thicker * d->at_density * inverse_density;
    }
    }
}

struct sp_core_loss sp_core_air_loss(const struct sp_core_ready *c, double G, double T_in, double T_out,
                                     double rho_in, double rho_out)
{
    double thinner = 1.0 / rho_out - 1.0 / rho_in; /* m3/kg gained */
    double T_mean = 0.5 * (T_in + T_out);
    if (c->design->drop_law == SP_DROP_FINS) {
        struct sp_core_drop drop = sp_louvre_drop(&c->louvre, G / c->sigma, sp_air_sutherland(T_mean), rho_in, rho_out);
        /* Static drop less the dynamic head gained between equal areas is the loss of total pressure; of the
         * acceleration, half is the heating's own loss, as in a core tested cold. */
        double heating = 0.5 * drop.acceleration;
        return (struct sp_core_loss){drop.entrance + drop.friction + drop.exit + drop.acceleration -
                                     0.5 * G * G * thinner - heating, heating};
    }
    double mean = 0.5 * (1.0 / rho_in + 1.0 / rho_out);
    return (struct sp_core_loss){tested_loss(c, G, T_mean, mean), 0.5 * G * G * thinner / (c->sigma * c->sigma)};
}

double sp_core_air_conductance(const struct sp_core_ready *c, double G, double T)
{
    double factor = c->design->heat_factor;
    if (c->design->heat_law != SP_CORE_FINS) {
        double x = G / c->air_flux;
        return factor * c->air_scale * (c->air_power == 0.5 ? sqrt(x) : pow(x, c->air_power));
    }
    double h = sp_louvre_film(&c->louvre, G / c->louvre.sigma, sp_air_viscosity(T), sp_air_cp_film(T), sp_air_prandtl(T));
    return factor * sp_louvre_surface_efficiency(&c->louvre, h) * h * c->louvre.area_frontal * c->face;
}

/* ---- coolant side ---------------------------------------------------------------------------------- */

double sp_coolant_film_ratio(const struct sp_coolant *fluid, double T, double n)
{
    /* 50 % ethylene glycol at 90 degC, ASHRAE: k 0.414 W/mK, cp 3551 J/kgK, mu 0.82 mPa s. */
    double k = sp_coolant_conductivity(fluid, T) / 0.414, cp = sp_coolant_cp(fluid, T) / 3551.0;
    double mu = sp_coolant_viscosity(fluid, T) / 0.82e-3;
    return exp(0.6 * log(k) + 0.4 * log(cp) + (0.4 - n) * log(mu));
}

double sp_core_coolant_conductance(const struct sp_core_ready *c, const struct sp_coolant *fluid, double m, double T)
{
    const struct sp_core *d = c->design;
    if (d->heat_law == SP_CORE_FINS) {
        double h = sp_tube_film(&c->tube, m / c->tubes, sp_coolant_viscosity(fluid, T),
                                sp_coolant_conductivity(fluid, T), sp_coolant_prandtl(fluid, T));
        double area = c->tube.perimeter * c->tube_path * c->tubes;
        return d->heat_factor * area / (1.0 / h + d->tube_wall / d->fin_conductivity);
    }
    double ratio = sp_coolant_film_ratio(fluid, T, c->coolant_power);
    double moving = m > 0.0 ? pow(m / c->coolant_flow, c->coolant_power) : 0.0;
    double still = standing_share * standing_share;
    return d->heat_factor * c->coolant_scale * ratio * sqrt(sqrt(moving * moving * moving * moving + still * still));
}

double sp_resistance_drop(const struct sp_resistance *r, bool fitting, double flow, double density, double viscosity)
{
    double x = flow / r->flow;
    if (!(x > 0.0)) return 0.0;
    if (fitting) return r->drop * density / reference_density * x * x;
    double thicker = viscosity / reference_viscosity;
    double denser = density / reference_density;
    return r->drop * denser * sqrt(sqrt(thicker / denser)) * x * x / sqrt(sqrt(x));
}

double sp_core_coolant_drop(const struct sp_core_ready *c, const struct sp_coolant *fluid, double flow, double T)
{
    double rho = sp_coolant_density(fluid, T), mu = sp_coolant_viscosity(fluid, T);
    if (c->design->drop.flow > 0.0) return sp_resistance_drop(&c->design->drop, false, flow, rho, mu);
    if (!(c->tubes > 0.0)) return 0.0;
    return sp_tube_drop(&c->tube, rho * flow / c->tubes, rho, mu);
}
