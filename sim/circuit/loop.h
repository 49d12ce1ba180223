/* The coolant loop: how the pump's flow splits between radiator, bypass and tank. Internal.
 *
 * One pump and the jacket in series carry the whole flow; behind the jacket it divides into the radiator
 * branch (thermostat, hoses, core) and the bypass. A small share, the bleed, goes through the header tank.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_LOOP_H
#define SP_CIRCUIT_LOOP_H

#include "base/root.h"
#include "part/core.h"
#include "swirlpot/design.h"

struct sp_loop {
    const struct sp_design *design;
    const struct sp_core_ready *core;
    struct sp_curve pump;
    double valve_full; /* m2, discharge times curtain area at full lift */
};

bool sp_loop_build(const struct sp_design *d, const struct sp_core_ready *core, struct sp_loop *out,
                   const struct sp_place *at, struct sp_complaints *complaints);
void sp_loop_free(struct sp_loop *l);

struct sp_loop_state {
    double pump, radiator, bypass, bleed; /* m3/s; pump is the sum */
    double rise, jacket_drop;             /* Pa over the pump, over the jacket */
};

/* At `speed` times the pump's rated speed, thermostat lift 0..1, coolant at `hot` [K] in the jacket and
 * `cool` [K] in the radiator. All zero when the pump stands. */
enum sp_status sp_loop_solve(const struct sp_loop *l, double speed, double lift, double hot, double cool,
                             struct sp_guess *guess, struct sp_loop_state *out);

/* Speed of the pump over its rated speed: belt-driven by the engine, or electric by voltage while `allowed`. */
double sp_pump_speed(const struct sp_design *d, double engine_speed, bool engine_on, bool allowed);

#endif
