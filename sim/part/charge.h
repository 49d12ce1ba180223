/* Charge air: what the compressor makes of it. Internal. Pure functions.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_CHARGE_H
#define SP_PART_CHARGE_H

#include "swirlpot/part.h"

#define SP_CHARGE_CP 1007.0 /* J/kgK, air at 300 to 400 K */

/* Air flow [kg/s] at a fuel power [W]: that at rated power times the share of the fuel power there [W]. 0
 * where no fuel power is known. */
double sp_charge_flow(const struct sp_charge *c, double fuel, double rated_fuel);

/* Pressure ratio of the compressor at an air flow [kg/s]: 1 + (pressure_ratio - 1) min(m/m_rated, 1)^2. */
double sp_charge_ratio(const struct sp_charge *c, double flow);

/* Rise of its temperature over that at its inlet, both absolute: (ratio^(2/7) - 1)/efficiency, 2/7 being
 * R/c_p of a gas of two atoms. */
double sp_charge_heating(const struct sp_charge *c, double flow);

#endif
