/* Engine heat: what goes into the jacket's metal, from power, fuel or air; motoring friction. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_ENGINE_H
#define SP_PART_ENGINE_H

#include "swirlpot/part.h"

/* Fuel power [W] of the fired, warm engine at brake power P [W] and N [rev/s], by the Willans line:
 * (P + p_me0(N) V_d N/2) / e, never below 0. */
double sp_engine_fuel_power(const struct sp_engine *e, double power, double speed);

/* The same at rated power and speed. */
double sp_engine_rated_fuel(const struct sp_engine *e);

/* Power [W] it takes to motor the engine at N [rev/s], by its overrun_law: p(N) V_d N/2, never below 0. */
double sp_engine_motoring(const struct sp_engine *e, double speed);

/* What one row of a trace tells of the engine; NAN where not known. */
struct sp_engine_row {
    double power, speed, fuel_flow, air_flow;
};

struct sp_engine_heat {
    double gas;       /* W from the gas side, metal at gas_reference */
    double friction;  /* W from motoring (overrun) */
    double per_power; /* W of heat per W of further brake power at this point */
    double fuel;      /* W of fuel burnt: measured, or of the Willans line and faded out with the cut */
    double oil;       /* W into the engine's oil */
    double cut;       /* W that energy_cap took off `gas` */
};

/* A heat law made ready (the table's interpolation); read-only in use. */
struct sp_engine_law;
struct sp_engine_law *sp_engine_law_build(const struct sp_engine *e, const struct sp_place *at,
                                          struct sp_complaints *complaints);
void sp_engine_law_free(struct sp_engine_law *law);

/* Lets the law know of the engine's oil: its heat is told too, and counts against energy_cap. */
void sp_engine_law_oil(struct sp_engine_law *law, const struct sp_oil *oil);

/* Heat at one row. Engine off (speed 0 or NAN with power NAN) gives zeros; power <= 0 well above idle
 * speed is overrun with the fuel cut, faded in over a band of speed and power so that the heat has no
 * jump; idle follows the law at power 0, or idle_heat when given. */
struct sp_engine_heat sp_engine_heat(const struct sp_engine_law *law, const struct sp_engine_row *row);

/* Engine speed [rev/s] that goes with a brake power P [W] where neither a column nor gears tell it:
 * rated_speed (0.25 m + 0.55 P/rated_power), between idle and rated speed, with m rising from 0 to 1
 * between standstill and 3 m/s over the road. An assumption of this program; the schedule cautions. */
double sp_engine_assumed_speed(const struct sp_engine *e, double power, double road_speed);

/* Brake power [W] from fuel flow [kg/s] at N [rev/s]: the Willans line turned round, not below what
 * motoring takes. */
double sp_engine_power_from_fuel(const struct sp_engine *e, double fuel_flow, double speed);

/* Share of the gas-side heat that a metal at T [K] still takes: (Tg - T)/(Tg - Tref), 0 above Tg; 1 when
 * gas_temperature is NAN. */
double sp_engine_gas_factor(const struct sp_engine *e, double metal);

#endif
