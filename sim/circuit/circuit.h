/* The ODE of a drive: dy/dt = f(t, y), and its Jacobian. Internal.
 *
 * Three steps, so that the expensive part is done once and the Jacobian sees the true structure:
 *   signals   the few scalars of y on which the coupled solvers depend,
 *   coupling  the air path and the coolant split solved for these signals,
 *   rates     the balances of every cell with that coupling.
 * Nothing here allocates or keeps a state of its own; starting guesses live in the caller's struct.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_CIRCUIT_CIRCUIT_H
#define SP_CIRCUIT_CIRCUIT_H

#include "circuit/duct_solve.h"
#include "circuit/inputs.h"
#include "circuit/loop.h"
#include "circuit/state.h"
#include "part/tank.h"
#include "part/thermostat.h"

enum { SP_DUCT_RUNS = 6 }; /* ducts solved one by one, at most: equal ones side by side count once */

/* A core with a fluid of its own; one of `copies` equal ones. */
struct sp_exchanger {
    int run, slot; /* which duct, which core of it */
    enum sp_medium carries;
    const struct sp_core *design;
    const struct sp_core_ready *ready;
    double copies;
    int string;    /* of the coolant loop; -1: another fluid */
    bool first;    /* its fluid comes from the hose, sump or compressor, not from the core before it */
    double mass;   /* kg of fluid in one copy */
};

/* A duct as it is solved. Equal ducts that the coolant passes one after the other are runs of their own. */
struct sp_duct_run {
    const struct sp_duct *duct;
    const struct sp_duct_design *design;
    double copies;
    int exchanger[SP_CORES]; /* of each core; -1: none */
    int fan[SP_FANS];        /* kind in the car's list, of each fan; -1: none */
};

/* A kind of fan, with the speed of one. */
struct sp_fan_kind {
    const struct sp_fan *design;
    int duct, slot; /* place in the design */
    double copies;  /* equal ducts; each holds design->count of it */
};

/* A car made ready; read-only during a drive, so that several drives may share it. */
struct sp_circuit {
    const struct sp_design *design;
    struct sp_duct *duct[SP_DUCTS]; /* owned */
    struct sp_duct_run run[SP_DUCT_RUNS];
    struct sp_exchanger exchanger[SP_EXCHANGERS]; /* coolant string by string, then oil, gearbox oil, charge air */
    struct sp_fan_kind fan[SP_FAN_KINDS];
    int ducts, runs, exchangers, fans;
    struct sp_loop loop;
    struct sp_layout layout;
    struct sp_moist air;
    double mass_jacket, mass_tank, mass_out, mass_back; /* kg of coolant, when filled */
    double mass_oil, mass_gearbox;                      /* kg */
    double system_volume;  /* m3, liquid when filled and air space */
    double reference_flow; /* m3/s at which the wax follows fastest */
    bool warms_bay;        /* some bay takes up heat of the engine's skin */
};

/* Fills ducts, runs, fans, exchangers, layout and loop of *c from its design. */
bool sp_circuit_plan(struct sp_circuit *c, struct sp_complaints *complaints);

/* False with complaints; *out is freed with sp_circuit_free either way. */
bool sp_circuit_build(const struct sp_design *d, struct sp_circuit *out, struct sp_complaints *complaints);
void sp_circuit_free(struct sp_circuit *c);

/* What changes only at events. */
struct sp_modes {
    enum sp_play play;
    double held;                 /* K, effective wax temperature while held */
    bool fan_on[SP_FAN_KINDS];   /* the switch, for a switched fan */
    bool pulse_off;              /* a pulsing electric pump stands */
    double pulse_until;          /* s at which that changes */
};

/* What the coupled solvers see of the state: means and single states, K; fans over rated speed. */
struct sp_signals {
    double wall[SP_EXCHANGERS], fluid[SP_EXCHANGERS], fan[SP_FAN_KINDS], wax, jacket, metal, oil, gearbox;
    double tank, returns; /* Pa absolute, and K of the hose back: where cavitation is watched; else 0 */
};

/* The fluid side of one core. */
struct sp_core_flow {
    double flow;        /* kg/s through one copy */
    double rate;        /* W/K, of that flow */
    double conductance; /* W/K, fluid to metal, one copy */
};

struct sp_coupling {
    struct sp_duct_state duct[SP_DUCT_RUNS];
    struct sp_loop_state loop;
    struct sp_core_flow core[SP_EXCHANGERS];
    double lift;
    double mass_pump, mass_radiator, mass_bypass, mass_bleed, mass_heater; /* kg/s */
    double jacket_conductance;                                             /* W/K */
};

struct sp_guesses {
    struct sp_duct_guess duct[SP_DUCT_RUNS];
    struct sp_loop_guess loop;
};

void sp_circuit_signals(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                        struct sp_signals *out);

/* Mean of n states. */
double sp_circuit_mean(const double *y, int n);

/* Speed of the pump over its rated speed, with the coolant at so many kelvin. */
double sp_circuit_pump_speed(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                             double coolant);

/* The coolant side alone: lift, flows and pressures. Fills only these of *out. */
enum sp_status sp_circuit_split(const struct sp_circuit *c, const struct sp_inputs *in,
                                const struct sp_modes *modes, const struct sp_signals *s,
                                struct sp_loop_guess *guess, struct sp_coupling *out);

/* What the duct of a run is given. */
struct sp_duct_inputs sp_circuit_duct_inputs(const struct sp_circuit *c, const struct sp_inputs *in,
                                             const struct sp_signals *s, int of);

/* One duct: fills out->duct[run]. */
enum sp_status sp_circuit_air(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_signals *s,
                              int run, struct sp_duct_guess *guess, struct sp_coupling *out);

/* The fluid side of every core, once the split is known: fills out->core and the jacket's conductance. */
void sp_circuit_fluids(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_signals *s,
                       struct sp_coupling *out);

/* All sides. SP_NUMERICS when a solver fails. */
enum sp_status sp_circuit_couple(const struct sp_circuit *c, const struct sp_inputs *in,
                                 const struct sp_modes *modes, const struct sp_signals *s,
                                 struct sp_guesses *guesses, struct sp_coupling *out);

/* Speed over rated that the controller asks of a kind of fan. */
double sp_circuit_fan_wish(const struct sp_circuit *c, int kind, const struct sp_inputs *in,
                           const struct sp_modes *modes, const double *y);

/* Volts between battery and consumers. */
double sp_circuit_volts(const struct sp_circuit *c, const struct sp_inputs *in);

/* Electrical power [W] at the battery of all fans, and of an electric pump. */
double sp_circuit_fan_power(const struct sp_circuit *c, const struct sp_inputs *in, const double *y);
double sp_circuit_pump_power(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                             const double *y);

/* Temperature at a sensor's place. */
double sp_circuit_place(const struct sp_circuit *c, enum sp_place_of place, const double *y);

/* Temperature [K] of what enters the pump: the mix of radiator, bypass and tank; the jacket's when it stands. */
double sp_circuit_pump_inlet(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                             const struct sp_coupling *k);

/* Temperature [K] that the thermostat's wax follows: the jacket's outlet, or the mix entering the pump. */
double sp_circuit_wax_sees(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                           const struct sp_coupling *k);

/* Temperature [K] of the charge air as it leaves the compressor, and its coolers, the ambient's with the
 * engine off; NAN without charge air. Without a cooler the bay's share in what is breathed is left out of the latter. */
double sp_circuit_charge_in(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_coupling *k);
double sp_circuit_charge_out(const struct sp_circuit *c, const struct sp_inputs *in, const double *y);

/* Temperature [K] of the air that the engine breathes, ahead of any compressor: ambient, and its share of the first
 * duct's bay. With k NULL the bay counts as ambient. */
double sp_circuit_intake(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_coupling *k);

/* Heat [W] that a heater or auxiliary branch takes, and the temperature [K] at which its coolant returns. */
double sp_circuit_heater(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                         const struct sp_coupling *k, double *returns);

/* Drag [N] of all ducts. */
double sp_circuit_drag(const struct sp_circuit *c, const struct sp_coupling *k);

/* Conductance of a skin [W/K], between standing and 100 km/h through the air. */
double sp_circuit_skin_conductance(const struct sp_inputs *in, double standing, double moving);

/* Heat [W] from the engine's skin to the air. */
double sp_circuit_skin(const struct sp_circuit *c, const struct sp_inputs *in, double metal);

/* Tank pressure and gas from the state. */
struct sp_tank_state sp_circuit_tank(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                                     struct sp_tank_inputs *inputs);

/* Coolant [m3] that has gone or was never filled in, and what the tank holds when none is missing. */
double sp_circuit_missing(const struct sp_circuit *c, const double *y);
double sp_circuit_in_tank(const struct sp_circuit *c, const double *y);

/* Heat [W] that the engine gives its metal, the alternator's load by fans and electric pump included. */
double sp_circuit_engine_heat(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                              const double *y);

void sp_circuit_rates(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                      const double *y, const struct sp_coupling *k, double *dydt);

/* Jacobian by columns, jac[j][i] = d f_i / d y_j with the means of walls and fluids held, and the effect of these
 * means, mean[2 e][i] of the walls and mean[2 e + 1][i] of the fluid of core e. Differences of the rates with the
 * coupling held, and of the coupling along its signals. `work` holds 3 * layout.count doubles. */
enum sp_status sp_circuit_jacobian(const struct sp_circuit *c, const struct sp_inputs *in,
                                   const struct sp_modes *modes, const double *y,
                                   const struct sp_guesses *guesses, double **jac, double **mean, double *work);

/* Heat held [J] by coolant and metals, from 0 degC. */
double sp_circuit_heat_held(const struct sp_circuit *c, const double *y);

/* Least distance to boiling [K] over the jacket outlet (at its pressure) and the pump inlet. */
double sp_circuit_boil_margin(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                              const struct sp_coupling *k, double tank_pressure);

/* State at the start: temperatures from `start`, tank filled cold and brought to temperature, vented through
 * the cap where it would have been. */
void sp_circuit_start(const struct sp_circuit *c, const struct sp_inputs *in, double *y);

#endif
