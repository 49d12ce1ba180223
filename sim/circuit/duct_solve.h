/* The air path from inside the library: with a starting guess kept by the caller. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_DUCT_SOLVE_H
#define SP_CIRCUIT_DUCT_SOLVE_H

#include "base/root.h"
#include "part/core.h"
#include "part/fan.h"
#include "swirlpot/circuit.h"

struct sp_duct {
    struct sp_duct_design design;
    struct sp_core_ready core;
    struct sp_fan_ready fan;
    double diffuser_loss; /* on inlet head */
    bool diffuser_stalled;
    double cos_angle;
};

/* As sp_duct_solve, starting from *guess (mass flow), which is renewed. */
enum sp_status sp_duct_solve_from(const struct sp_duct *d, const struct sp_duct_inputs *in,
                                  struct sp_guess *guess, struct sp_duct_state *out);

#endif
