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
    double cross_wind;    /* m/s across the car; 0: none */
    double fan_speed[SP_FANS]; /* share of rated speed, 0..; negative is taken as 0 */
    bool heat_given;      /* heat is given below, instead of wall temperatures */
    double heat;          /* W to the air, >= 0, shared by the cores with the air that meets them */
    double wall[SP_CORES]; /* K, mean of each core's metal; only where the core has heat data */
    double bay_heat;      /* W from the engine's skin into the air behind the cores */
    double blower;        /* m3/s that a blower on the ground puts into the inlet; 0: none */
    bool bonnet_up;       /* the bay is open to still air: no exit resists */
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

/* The air side of one core. heat = rate (wall - air_in). */
struct sp_core_air {
    double mass_flow;     /* kg/s through it, net, backwards negative */
    double rate;          /* W/K; 0 where it has no heat data, or its heat is given */
    double air_in;        /* K of the air that meets it, mean as the heat sees it */
    double heat;          /* W to the air */
    double face_velocity; /* m/s, mean at its front */
    double drop;          /* Pa of total pressure, mean over the air that meets it */
};

struct sp_duct_state {
    bool network;            /* solved as one: what a plain duct does not have is told below */
    int cores, fans, exits;  /* of it */
    struct sp_core_air core[SP_CORES];
    double fresh;          /* kg/s in at the inlet, negative when air comes out of it */
    double leak_past, leak_outside; /* kg/s past the cores, and to outside */
    double backwards;      /* kg/s that come back through open parts of the cores, against the main flow */
    double exit_flow[SP_EXITS]; /* kg/s out at each exit */
    double flap_flow;      /* kg/s through flaps in shrouds */
    double front_pressure, front_temperature; /* Pa over ambient, K: ahead of cores and of fans before them */
    double face_pressure, back_pressure;      /* Pa over ambient, mean over the air at the cores' front and back */
    double heating_loss;   /* Pa that heating costs, mean over the air that passes the cores */
    double bay_temperature, bay_pressure; /* K, Pa over ambient: behind cores and fans, ahead of the exits */
    double inlet_temperature;             /* K of the air in the inlet: preheat, wake and recirculation included */
    double fan_flow[SP_FANS]; /* kg/s through each kind of fan, all of that kind */
    double spill_drag, thrust; /* N: drag of spilled air; share of the jet's thrust that the heat brings. `drag` holds both */
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
 * leaving at ambient pressure; the difference is a force on the outside. NAN in reverse flow, and of several exits. */
SP_API double sp_duct_wake_drag(const struct sp_duct_state *state, const struct sp_station station[SP_STATIONS]);

#ifdef __cplusplus
}
#endif
#endif
