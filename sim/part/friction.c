/* Motoring friction by published formulas. Equations in docs/model.md.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/friction.h"

#include <math.h>

static const double ambient = 101325.0, compression_exponent = 1.3; /* of a motored cycle; from memory */
static const double slowest = 100.0;     /* rev/min: below it the terms in 1/N are held */

double sp_friction_piston_speed(const struct sp_engine *e, double speed)
{
    return 2.0 * e->stroke * speed;
}

double sp_friction_chen_flynn(const struct sp_engine *e, double speed)
{
    const double *c = e->chen_flynn;
    double s = sp_friction_piston_speed(e, speed);
    double peak = ambient * e->overrun_intake * pow(e->compression, compression_exponent);
    return c[0] + c[1] * peak + s * (c[2] + c[3] * s);
}

double sp_friction_diesel(const struct sp_engine *e, double speed)
{
    double s = sp_friction_piston_speed(e, speed);
    return 1e3 * (75.0 + 48.0 * 0.06 * speed + 0.4 * s * s);
}

/* What the petrol formulas work on: mm, rev/min, m/s, mm3 as published. */
struct petrol {
    double bore, stroke, cylinders, volume, speed, piston;
    double starting; /* 1 + N0/N */
    double film;     /* factor on the terms of the oil film */
};

/* Viscosity [cSt] of a 10W-30 oil at t [degC], within -20 to 150; the formulas were fitted at 10.6 cSt. */
static double viscosity(double t)
{
    return 0.76 * 0.1403 * exp(869.72 / (fmin(fmax(t, -20.0), 150.0) + 104.4));
}

static double crank_and_pistons(const struct petrol *g)
{
    const double hydrodynamic = 3.03e-4 * g->film;
    double main = 52.0 / 86.0 * g->bore, rod = 48.0 / 86.0 * g->bore, length = 20.0 / 86.0 * g->bore;
    double bearings = g->cylinders + 1.0, n = g->cylinders;
    double crank = 1.22e5 * main / g->volume +
                   hydrodynamic * g->speed * main * main * main * length * bearings / g->volume +
                   1.35e-10 * main * main * g->speed * g->speed * bearings / n;
    double pistons = 294.0 * g->film * g->piston / g->bore + 4.06e4 * g->starting / (g->bore * g->bore) +
                     hydrodynamic * g->speed * rod * rod * rod * length * n / g->volume;
    return crank + pistons;
}

/* Two camshafts, flat followers, four valves a cylinder; then oil pump, water pump, unloaded alternator. */
static double valves_and_auxiliaries(const struct petrol *g)
{
    const double valves = 4.0; /* a cylinder */
    double lift = 9.0 / 86.0 * g->bore, cam_bearings = 2.0 * (g->cylinders + 1.0);
    double cams = 244.0 * g->film * g->speed * cam_bearings / g->volume + 4.12;
    double followers = 133.0 * g->starting * valves / g->stroke;
    double film = 0.5 * g->film * pow(lift, 1.5) * sqrt(g->speed) * valves / (g->bore * g->stroke);
    double mixed = 10.7 * g->starting * lift * valves / g->stroke;
    return cams + followers + film + mixed + 6.23 + g->speed * (5.22e-3 - 1.79e-7 * g->speed);
}

double sp_friction_petrol(const struct sp_engine *e, double speed, double intake, double oil)
{
    double rpm = fmax(60.0 * speed, slowest);
    struct petrol g = {1e3 * e->bore, 1e3 * e->stroke, e->cylinders, 0.0,
                       rpm, 2.0 * e->stroke * rpm / 60.0, 1.0 + 500.0 / rpm,
                       sqrt(viscosity(oil - SP_ZERO_C) / 10.6)};
    g.volume = g.bore * g.bore * g.stroke * g.cylinders;
    double r = e->compression;
    double gas = 6.89 * intake * (0.088 * g.film * r + 0.182 * pow(r, 1.33 - 0.0238 * g.piston));
    return 1e3 * (crank_and_pistons(&g) + gas + valves_and_auxiliaries(&g));
}

double sp_friction_overrun(const struct sp_engine *e, double speed)
{
    const double *c = e->overrun_pressure;
    switch (e->overrun_law) {
    case SP_FRICTION_CHEN_FLYNN:
        return sp_friction_chen_flynn(e, speed);
    case SP_FRICTION_DIESEL:
        return sp_friction_diesel(e, speed);
    case SP_FRICTION_SI:
        return sp_friction_petrol(e, speed, e->overrun_intake, e->overrun_oil);
    case SP_FRICTION_POLYNOMIAL:
        break;
    }
    return c[0] + speed * (c[1] + speed * c[2]);
}
