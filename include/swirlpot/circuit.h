/* swirlpot/circuit.h - the air path of a duct, solved for one condition.
 *
 * Stations: 0 free stream, 1 inlet, 2 core face, 3 core back, 4 behind the fan, 5 exit.
 * Low-Mach flow with the density falling as the air heats; equation (1) of docs/model.md.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SWIRLPOT_CIRCUIT_H
#define SWIRLPOT_CIRCUIT_H

#include "swirlpot/part.h"

#ifdef __cplusplus
extern "C" {
#endif

/* A duct ready for solving: constants worked out once. Opaque; read-only in use, so that one may
 * serve many threads. */
struct sp_duct;

/* Builds from the design; complains when a table cannot be used. NULL on failure. */
SP_API struct sp_duct *sp_duct_build(const struct sp_duct_design *d, const struct sp_coolant *coolant,
                                     const struct sp_place *at, struct sp_complaints *complaints);
SP_API void sp_duct_free(struct sp_duct *d);

/* What the duct is given. */
struct sp_duct_inputs {
    double speed;         /* m/s through the air, negative with a wind from behind */
    double wake;          /* share of free-stream dynamic pressure left, 1 in clean air */
    double temperature;   /* K, free stream */
    double pressure;      /* Pa, free stream */
    double R, cp;         /* J/kgK of the (moist) air */
    double fan_speed;     /* share of rated speed, 0..; negative is taken as 0 */
    bool heat_given;      /* heat is given below, instead of a wall temperature */
    double heat;          /* W to the air, >= 0 */
    double wall;          /* K, mean of the core's metal; only when the core has heat data */
};

/* One station's state. Pressures are absolute. */
struct sp_station {
    double total_pressure, static_pressure, density, temperature, velocity; /* Pa, Pa, kg/m3, K, m/s */
};

enum { SP_STATIONS = 6 };

/* Where each pascal goes: total pressure from the free stream to the exit. */
struct sp_duct_losses {
    double unrecovered; /* (1 - recovery) q */
    double lip, screen, diffuser, core, heating, fan, exit; /* fan: minus its gain */
    double exit_head;   /* dynamic head thrown away with the jet */
};

struct sp_duct_state {
    double mass_flow;      /* kg/s through the core, negative in reverse */
    double effectiveness;  /* heat over (m cp (wall - T2)), 0 cold */
    double heat;           /* W to the air */
    double face_velocity;  /* m/s at the core's front, at inlet-side density */
    double temperature_ratio; /* T3/T2, absolute, in flow direction */
    double exit_velocity;  /* m/s, positive out of the exit */
    double fan_pressure;   /* Pa total, negative when windmilling */
    double drag;           /* N internal: m (V - ve cos a) - (pe - pinf) Ae cos a; in reverse flow the
                            * jet out of the inlet, forwards, takes the place of ve cos a */
    bool diffuser_stalled;
};

/* Solves one condition. SP_OK; SP_INPUT when the flow cannot carry the given heat (none at all, or only by heating
 * it past five times its temperature); SP_NUMERICS when no root was found (which no physical input does). */
SP_API enum sp_status sp_duct_solve(const struct sp_duct *d, const struct sp_duct_inputs *in,
                                    struct sp_duct_state *out);

/* Stations and losses of a solved condition. */
SP_API void sp_duct_stations(const struct sp_duct *d, const struct sp_duct_inputs *in,
                             const struct sp_duct_state *state, struct sp_station station[SP_STATIONS],
                             struct sp_duct_losses *losses);

/* Drag [N] from the losses instead of the exit's momentum: m (V - v_w), v_w the speed far behind when the exit's
 * total pressure has turned into speed again at ambient pressure. The same as `drag` for a jet along the stream
 * leaving at ambient pressure; the difference is a force on the outside. NAN in reverse flow. */
SP_API double sp_duct_wake_drag(const struct sp_duct_state *state, const struct sp_station station[SP_STATIONS]);

#ifdef __cplusplus
}
#endif
#endif
