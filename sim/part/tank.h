/* Header tank: a gas spring, a cap, and what the cap lets out. Internal. Pure functions.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_TANK_H
#define SP_PART_TANK_H

#include "swirlpot/part.h"

#define SP_TANK_LAST_GAS 2.0e-5 /* m3 of gas below which liquid goes out with it; common practice */

struct sp_tank_inputs {
    double air;         /* mol of air in the tank */
    double liquid;      /* m3 of liquid in the whole system, at its temperatures */
    double system;      /* m3 of the whole system, unstretched: liquid when filled + air space */
    double temperature; /* K of gas and liquid surface in the tank */
    double vapour;      /* Pa, vapour pressure of the coolant at that temperature */
    double ambient;     /* Pa */
};

struct sp_tank_state {
    double pressure; /* Pa absolute */
    double gas;      /* m3 */
};

/* Pressure of the trapped gas: p = n R T / V_g + p_v, V_g = system + compliance (p - ambient) - liquid;
 * the root of a quadratic. compliance > 0. */
struct sp_tank_state sp_tank_state(const struct sp_tank *t, const struct sp_tank_inputs *in);

/* The most [Pa] that can stand in the tank: an open cap passes whatever steam boils, at a tenth of its setting (5 kPa
 * at least) above it. Common practice. */
double sp_tank_most(const struct sp_tank *t, double ambient);

/* Air [mol] that fills the air space at the filling temperature and ambient pressure `p`. */
double sp_tank_filling(const struct sp_tank *t, double vapour, double p);

/* What passes the cap, outwards positive: air [mol/s] and liquid [m3/s]. Nothing between the vacuum
 * valve's and the cap's setting; beyond, a flow that grows steeply but smoothly with the excess. Air goes
 * first, liquid once the gas is all but gone, and no more than the tank holds (`liquid_left`, m3). */
struct sp_tank_vent { double air, liquid; };
struct sp_tank_vent sp_tank_vent(const struct sp_tank *t, const struct sp_tank_inputs *in,
                                 const struct sp_tank_state *s, double liquid_left);

#endif
