/* A core made ready: geometry, drop table, conductances. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/core.h"

#include <gsl/gsl_errno.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "part/core_fit.h"
#include "part/unevenness.h"

/* Loss of entrance, exit and tanks on the head in the tubes. Common practice. */
static const double tank_loss = 1.5;
/* A fit to a maker's table worse than this is said. */
static const double poor_fit = 0.05;
/* Where a maker's table was taken, K; and the speed in the tubes that cores are made for, m/s. */
static const double tested = SP_ZERO_C + 90.0, usual_speed = 1.0;
/* Heat capacity, J/kgK, of what flows in a cooler of oil, and of charge air. Common practice. */
static const double oil_cp = 2100.0, charge_cp = 1007.0;

static bool refuse(const struct sp_place *at, struct sp_complaints *to, const char *found,
                   const char *expected)
{
    sp_complain(to, at, found, expected, NULL);
    return false;
}

struct sp_louvre sp_core_louvre(const struct sp_core *d)
{
    return (struct sp_louvre){.louvre_pitch = d->louvre_pitch,
                              .louvre_angle = d->louvre_angle,
                              .louvre_length = d->louvre_length,
                              .fin_pitch = d->fin_pitch,
                              .fin_length = d->tube_pitch - d->tube_height,
                              .fin_thickness = d->fin_thickness,
                              .fin_conductivity = d->fin_conductivity,
                              .depth = d->depth,
                              .tube_pitch = d->tube_pitch,
                              .tube_height = d->tube_height};
}

struct sp_plate sp_core_plate(const struct sp_core *d)
{
    double along = d->tube_pitch_along > 0.0 ? d->tube_pitch_along : d->depth;
    return (struct sp_plate){.fin_pitch = d->fin_pitch,
                             .fin_thickness = d->fin_thickness,
                             .fin_conductivity = d->fin_conductivity,
                             .diameter = d->tube_diameter,
                             .pitch_across = d->tube_pitch,
                             .pitch_along = along,
                             .rows = d->rows,
                             .depth = d->depth};
}

static bool build_louvres(const struct sp_core *d, struct sp_core_ready *c, const struct sp_place *at,
                          struct sp_complaints *to)
{
    struct sp_louvre g = sp_core_louvre(d);
    if (!sp_louvre_core_build(&g, &c->louvre))
        return refuse(at, to, "fins and tubes that do not fit together",
                      "louvres shorter than the gap between tubes, fins thinner than their pitch, a depth");
    c->sigma = c->louvre.sigma;
    return true;
}

static bool build_plates(const struct sp_core *d, struct sp_core_ready *c, const struct sp_place *at,
                         struct sp_complaints *to)
{
    struct sp_plate g = sp_core_plate(d);
    if (!sp_plate_core_build(&g, &c->plate))
        return refuse(
            at, to, "plate fins and tubes that do not fit together",
            "tubes apart from each other, fins thinner than their pitch, a depth that holds the rows");
    c->sigma = c->plate.sigma;
    return true;
}

static bool build_fins(const struct sp_core *d, struct sp_core_ready *c, const struct sp_place *at,
                       struct sp_complaints *to)
{
    return d->fin_kind == SP_FINS_PLATE ? build_plates(d, c, at, to) : build_louvres(d, c, at, to);
}

static bool build_tubes(const struct sp_core *d, struct sp_core_ready *c, const struct sp_place *at,
                        struct sp_complaints *to)
{
    double across = d->down_flow ? d->width : d->height, along = d->down_flow ? d->height : d->width;
    double all = fmax(floor(across / d->tube_pitch + 1e-9), 1.0) * d->rows; /* 290 mm at 10 mm are 29 */
    bool round = d->fin_kind == SP_FINS_PLATE;
    c->tubes = fmax(all / d->passes, 1.0);
    c->tube_path = along * d->passes;
    struct sp_tube_shape shape = {.height = (round ? d->tube_diameter : d->tube_height) - 2.0 * d->tube_wall,
                                  .width =
                                      (round ? d->tube_diameter : d->depth / d->rows) - 2.0 * d->tube_wall,
                                  .length = c->tube_path,
                                  .loss = tank_loss * d->passes,
                                  .wall = SP_WALL_TEMPERATURE,
                                  .rule = SP_RULE_2013};
    if (sp_tube_build(&shape, &c->tube)) return true;
    return refuse(at, to, "tubes without a bore",
                  "a tube height above two walls and a depth above the tube height");
}

static bool build_drop_table(const struct sp_core *d, struct sp_core_ready *c, const struct sp_place *at,
                             struct sp_complaints *to)
{
    struct sp_table given = d->drop_table;
    if (given.rows && given.cell[0] == 0.0 &&
        given.cell[1] == 0.0) { /* the point at nil flow is ours anyway */
        given.cell += 2;
        --given.rows;
    }
    const struct sp_table *t = &given;
    if (!t->rows) return refuse(at, to, "a drop table without a moving point", "one or more pairs above 0");
    for (size_t i = 0; i < t->rows; ++i) {
        double v = t->cell[2 * i], p = t->cell[2 * i + 1];
        double v0 = i ? t->cell[2 * i - 2] : 0.0, p0 = i ? t->cell[2 * i - 1] : 0.0;
        if (!(v > v0 && p > p0))
            return refuse(at, to, "a drop table out of order", "velocity and drop rising from above 0");
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
        c->drop_tail = fmin(
            fmax(log(c->drop_p[n - 1] / c->drop_p[n - 2]) / log(c->drop_v[n - 1] / c->drop_v[n - 2]), 1.0),
            2.0);
    return true;
}

/* Heat capacity of what the core carries, as its maker had it. */
static double tested_cp(const struct sp_core *d, const struct sp_coolant *fluid)
{
    switch (d->carries) {
    case SP_CARRIES_OIL:
    case SP_CARRIES_GEARBOX:
        return oil_cp;
    case SP_CARRIES_CHARGE:
        return charge_cp;
    default:
        return sp_coolant_cp(fluid, tested);
    }
}

static bool build_maker(const struct sp_core *d, const struct sp_coolant *fluid, struct sp_core_ready *c,
                        const struct sp_place *at, struct sp_complaints *to)
{
    struct sp_core_fit fit;
    if (!sp_core_fit(d, c->face, (int)d->cells, tested_cp(d, fluid), &fit))
        return refuse(at, to, "a heat table that no conductance gives",
                      "heat per kelvin above 0 and below what air and coolant flow can carry");
    if (fit.worst > poor_fit) {
        char found[80];
        snprintf(found, sizeof found, "a heat table that the two conductances miss by %.0f %%",
                 100.0 * fit.worst);
        return refuse(at, to, found, "heat that rises smoothly with both flows (within 5 %)");
    }
    c->air_scale = fit.air.scale;
    c->air_flux = fit.air.reference * d->heat_at_density;
    c->air_power = fit.air.power;
    c->coolant_power = fit.coolant.power;
    c->coolant_flow = fit.coolant.reference;
    c->coolant_scale = fit.coolant.scale;
    c->inside = fit.coolant.scale * d->heat_factor;
    if (d->carries == SP_CARRIES_COOLANT)
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
    c->inside = d->coolant_conductance * d->heat_factor;
}

/* Conductance inside fins and tubes at the usual speed of the coolant. */
static void set_inside(const struct sp_coolant *fluid, struct sp_core_ready *c)
{
    double m = sp_coolant_density(fluid, tested) * usual_speed * c->tube.area * c->tubes;
    c->inside = sp_core_coolant_conductance(c, fluid, m, tested);
}

/* ---- how it stands in the car ---------------------------------------------------------------------- */

static double own_unevenness(const struct sp_core *d)
{
    if (isfinite(d->unevenness)) return d->unevenness;
    return d->angle > 0.0 ? sp_uneven_by_angle(d->angle) : 0.0;
}

void sp_core_set_uneven(struct sp_core_ready *c, double extra)
{
    c->uneven = sp_uneven_joint(own_unevenness(c->design), extra);
}

static void place(const struct sp_core *d, struct sp_core_ready *c)
{
    double incline = d->angle > 0.0 ? tan(d->angle) : 0.0;
    c->open = 1.0 - d->blocked;
    c->incline_loss = d->angle_loss * incline * incline;
    sp_core_set_uneven(c, 0.0);
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
    place(d, out);
    if (isfinite(d->at_temperature)) out->reference_viscosity = sp_air_sutherland(d->at_temperature);
    if (d->heat_law == SP_CORE_POWER) build_power(d, out);
    if (d->heat_law == SP_CORE_MAKER && good) good = build_maker(d, fluid, out, at, complaints);
    if (d->heat_law == SP_CORE_FINS && good) set_inside(fluid, out);
    return good;
}

void sp_core_free(struct sp_core_ready *c)
{
    if (c->drop_curve) gsl_interp_free(c->drop_curve);
    free(c->drop_v);
    memset(c, 0, sizeof *c);
}
