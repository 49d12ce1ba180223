/* Heat from gas to jacket by a correlation over many engines. Internal. Pure functions.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_CORRELATION_H
#define SP_PART_CORRELATION_H

#include "swirlpot/part.h"

/* Dynamic viscosity [Pa s] and conductivity [W/mK] of the gas, taken as air at T [K]. From memory. */
double sp_correlation_viscosity(double T);
double sp_correlation_conductivity(double T);

/* Mean temperature [K] of the gas over a cycle at equivalence ratio phi, held to 0.75..1.4 for petrol and to
 * 0.2..0.8 for diesel. From memory of Taylor's chart, good to 80 K. */
double sp_correlation_gas(bool diesel, double phi);

/* Conductance [W/K] from gas at T [K] to jacket, `charge` [kg/s] being air and fuel of all cylinders:
 * Nu = C Re^0.75 on the bore (Taylor & Toong, ASME 57-HT-17, 1957). Engines scatter by 20 % about it. */
double sp_correlation_conductance(const struct sp_engine *e, double charge, double T);

#endif
