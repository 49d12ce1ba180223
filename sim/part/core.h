/* A core: what it costs the air and the coolant, and what it conducts. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_CORE_H
#define SP_PART_CORE_H

#include "part/curve.h"
#include "part/louvre.h"
#include "part/plate.h"
#include "part/tube.h"

/* A core made ready; read-only in use. */
struct sp_core_ready {
    const struct sp_core *design;
    double face;  /* m2 */
    double sigma; /* free-flow over frontal area for the heating term */
    double open;         /* share of the face that is not shut */
    double uneven;       /* of the air on the open face: standard deviation over mean, all causes */
    double incline_loss; /* on face head, of standing inclined */
    double inside;       /* W/K of the fluid's side at a usual flow, for the halves of an uneven face */
    struct sp_louvre_core louvre; /* either of these two */
    struct sp_plate_core plate;
    struct sp_tube tube;
    double tubes, tube_path; /* tubes side by side per pass; length of the coolant's path, m */
    gsl_interp *drop_curve;  /* of drop_table, with a point at nil flow */
    double *drop_v, *drop_p; /* one block, owned */
    size_t drop_points;
    double drop_tail;        /* exponent beyond the table's end */
    double reference_viscosity; /* at `at_temperature`, 0 without correction */
    /* power laws of conductance: scale (flux/reference)^exponent */
    double air_scale, air_flux, air_power;             /* W/K, kg/m2s */
    double coolant_scale, coolant_flow, coolant_power; /* W/K, kg/s */
};

/* The fins of a design as the correlations take them. */
struct sp_louvre sp_core_louvre(const struct sp_core *d);
struct sp_plate sp_core_plate(const struct sp_core *d);

/* `fluid` is what the maker's table, if there is one, was taken with. Complains of what cannot be used. */
bool sp_core_build(const struct sp_core *d, const struct sp_coolant *fluid, struct sp_core_ready *out,
                   const struct sp_place *at, struct sp_complaints *complaints);
void sp_core_free(struct sp_core_ready *c);

/* Unevenness that comes from outside the core (a stalled diffuser), besides the core's own: root of squares.
 * May be called again; 0 takes it back. */
void sp_core_set_uneven(struct sp_core_ready *c, double extra);

bool sp_core_has_heat(const struct sp_core_ready *c);

/* G is mass flow over the whole face, shut or not: the open part sees G/(1 - blocked).
 *
 * Loss of total pressure [Pa] at face mass flux G > 0 [kg/m2s] with air going from T_in, rho_in to T_out,
 * rho_out. `heating` is the share that comes from speeding up the thinner air. */
struct sp_core_loss { double core, heating; };
struct sp_core_loss sp_core_air_loss(const struct sp_core_ready *c, double G, double T_in, double T_out,
                                     double rho_in, double rho_out);

/* Air-side conductance eta h A [W/K] at face mass flux G >= 0 and film temperature T. */
double sp_core_air_conductance(const struct sp_core_ready *c, double G, double T);

/* Coolant-side conductance [W/K] at mass flow m >= 0 through the core, coolant at T; wall included. */
double sp_core_coolant_conductance(const struct sp_core_ready *c, const struct sp_coolant *fluid, double m,
                                   double T);

/* The same of a core that carries oil or charge air, without properties: power law or table, as given for that
 * fluid. Not for fins and tubes, whose films are the coolant's. */
double sp_core_fluid_conductance(const struct sp_core_ready *c, double m);

/* Coolant-side pressure drop [Pa] at volume flow >= 0, rising with flow. */
double sp_core_coolant_drop(const struct sp_core_ready *c, const struct sp_coolant *fluid, double flow, double T);

/* How film conductance of a coolant at T goes with properties, 1 for 50/50 ethylene glycol at 90 degC:
 * k^0.6 cp^0.4 mu^(0.4-n) for h ~ m^n (Dittus-Boelter form at a given mass flow). */
double sp_coolant_film_ratio(const struct sp_coolant *fluid, double T, double n);

/* Drop of a resistance given at one flow, for turbulent tubes (Blasius): rho^0.75 mu^0.25 V^1.75, or with
 * `fitting` rho V^2, from 1000 kg/m3 and 0.7 mPa s. */
double sp_resistance_drop(const struct sp_resistance *r, bool fitting, double flow, double density,
                          double viscosity);

#endif
