/* Motoring friction by published formulas. Internal. Pure functions.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_FRICTION_H
#define SP_PART_FRICTION_H

#include "swirlpot/part.h"

/* Mean piston speed [m/s] at N [rev/s]. */
double sp_friction_piston_speed(const struct sp_engine *e, double speed);

/* a + b p_max + c S_p + d S_p^2 [Pa] with the four of chen_flynn (form of Chen & Flynn, SAE 650733, 1965).
 * Motored, p_max [Pa] is that of compression: 101325 overrun_intake compression^1.3. Without gas exchange. */
double sp_friction_chen_flynn(const struct sp_engine *e, double speed);

/* 75 kPa + 48 kPa n + 0.4 kPa S_p^2, n in 1000 rev/min: diesel with direct injection, motored (Heywood 1988
 * ch. 13, from memory). */
double sp_friction_diesel(const struct sp_engine *e, double speed);

/* Petrol engine with two camshafts and four valves a cylinder [Pa]: Patton, Nitschke & Heywood, SAE 890836,
 * 1989, as SAE 2003-01-0725 restates it. `intake` is manifold over ambient pressure, 0..1; `oil` [K], held to
 * -20..150 degC, thickens the terms of the oil film by the root of its viscosity (10W-30) over the fit's
 * 10.6 cSt. Bearings and valves are scaled from the bore. Without gas exchange. */
double sp_friction_petrol(const struct sp_engine *e, double speed, double intake, double oil);

/* Mean pressure [Pa] of the motored engine by its overrun_law. */
double sp_friction_overrun(const struct sp_engine *e, double speed);

#endif
