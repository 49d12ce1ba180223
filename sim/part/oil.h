/* Oil with a heat of its own: properties, flow through its coolers, its thermostat. Internal. Pure functions.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_OIL_H
#define SP_PART_OIL_H

#include "swirlpot/part.h"

/* Density [kg/m3], heat capacity [J/kgK] and enthalpy [J/kg, from 0 degC] of lubricating oil at T [K]. From
 * memory: 870 kg/m3 at 15 degC falling by 7e-4/K; 1900 J/kgK at 20 degC to 2200 at 100 degC, a straight line.
 */
double sp_oil_density(double T);
double sp_oil_cp(double T);
double sp_oil_enthalpy(double T);

/* Heat [W] that work and friction put into it: heat_share of the power [W] and friction_share of what
 * motoring the engine takes [W] at its speed. Power counts by its size for a gearbox, fired only for an
 * engine. */
double sp_oil_heat(const struct sp_oil *o, double power, double motoring);

/* Volume flow [m3/s] that the oil pump sends round at an engine speed [rev/s]. */
double sp_oil_flow(const struct sp_oil *o, double engine_speed);

/* Share 0..1 of that flow that its thermostat sends through the air cooler at oil temperature T [K]. */
double sp_oil_to_cooler(const struct sp_oil *o, double T);

/* Conductance [W/K] of the plate cooler to the coolant; none while the oil stands. */
double sp_oil_plate(const struct sp_oil *o, double engine_speed);

#endif
