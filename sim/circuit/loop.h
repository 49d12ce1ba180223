/* The coolant loop: how the pump's flow splits between radiators, bypass, heater and tank. Internal.
 *
 * One pump and the jacket in series carry the whole flow; behind the jacket it divides into the radiator
 * branch (thermostat or plate, hoses, cores), the bypass, a heater, and the bleed through the header tank.
 * The cores stand in strings side by side between the hoses. What is absent costs and changes nothing.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_LOOP_H
#define SP_CIRCUIT_LOOP_H

#include "base/root.h"
#include "part/core.h"
#include "swirlpot/design.h"

enum { SP_LOOP_STRINGS = 8, SP_STRING_CORES = 8 };

/* Cores that the coolant passes one after the other, in `copies` equal ducts side by side. */
struct sp_loop_string {
    const struct sp_core_ready *core[SP_STRING_CORES];
    int cores;
    double copies; /* 0: one */
};

struct sp_loop {
    const struct sp_design *design;
    struct sp_loop_string string[SP_LOOP_STRINGS];
    int strings;
    struct sp_curve pump;
    double valve_full;  /* m2, discharge times curtain area at full lift */
    double plate;       /* 1/m4: drop of the restrictor plate over density and flow squared; 0: none */
    double heater_gain; /* m3/s per sqrt(Pa) at 1000 kg/m3; 0: none */
    double bleed_gain;  /* the same of the restrictor in the bleed line; 0: the bleed is a share */
};

/* Complains when the pump's curve is none, or when strings side by side include one without resistance. */
bool sp_loop_build(const struct sp_design *d, const struct sp_loop_string *strings, int count,
                   struct sp_loop *out, const struct sp_place *at, struct sp_complaints *complaints);
void sp_loop_free(struct sp_loop *l);

struct sp_loop_inputs {
    double speed, lift;           /* pump over rated; thermostat 0..1 */
    double hot;                   /* K, coolant in the jacket */
    double cool[SP_LOOP_STRINGS]; /* K, coolant in the cores of each string, in the mean */
    double tank;    /* Pa absolute in the header tank; read only where the pump's npsh is above 0 */
    double returns; /* K of what comes back from the radiators; 0: the mean of `cool`. As tank */
};

/* Where the last roots were; zero at first. */
struct sp_loop_guess {
    struct sp_guess flow, starved;          /* flow of the first string; the same when the pump cavitates */
    struct sp_guess ratio[SP_LOOP_STRINGS]; /* flow of a string over that of the first */
};

struct sp_loop_state {
    double pump, radiator, bypass, bleed; /* m3/s; pump is the sum of these and the heater */
    double rise, jacket_drop;             /* Pa over the pump, over the jacket */
    double heater;                        /* m3/s */
    double string[SP_LOOP_STRINGS];       /* m3/s, all copies of a string together; their sum is radiator */
    double npsh_available, npsh_required; /* m; 0 where not watched */
    double head_factor;                   /* share of the pump's rise left by cavitation, 1: none is lost */
};

/* All flows zero when the pump stands. */
enum sp_status sp_loop_solve(const struct sp_loop *l, const struct sp_loop_inputs *in,
                             struct sp_loop_guess *guess, struct sp_loop_state *out);

/* Head [m] at the pump's inlet over the vapour pressure of coolant at `inlet` [K]. The tank's line joins
 * ahead of the pump: what the hose behind the radiator costs lies before that and does not count, what
 * `suction_drop` costs does. The coolant's speed is in it, for the tank's pressure is of coolant at rest. */
double sp_npsh_available(const struct sp_design *d, double tank, double inlet, double flow);

/* Share of its pressure rise that a pump keeps: 0.97 where available equals required (the definition of
 * required), nearly the ratio of the two far below, exactly 1 from four times required up. */
double sp_npsh_factor(double available, double required);

/* What sets the pump's speed. */
struct sp_pump_wish {
    double engine_speed;     /* rev/s */
    bool engine_on, allowed; /* allowed: an electric pump may run */
    double volts;            /* at an electric pump */
    double coolant;          /* K where its controller measures */
    bool pulse_off;          /* the clock of a pulsing pump says: stand */
};

/* Speed of the pump over its rated speed: belt-driven by the engine, or electric by law and voltage; 0 if
 * failed. Continuous in everything but the flags. */
double sp_pump_speed(const struct sp_design *d, const struct sp_pump_wish *wish);

#endif
