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

/* A car made ready; read-only during a drive, so that several drives may share it. */
struct sp_circuit {
    const struct sp_design *design;
    struct sp_duct *duct;
    struct sp_loop loop;
    struct sp_layout layout;
    struct sp_moist air;
    double mass_jacket, mass_tank, mass_out, mass_back, mass_core; /* kg of coolant, when filled */
    double system_volume;                                         /* m3, liquid when filled and air space */
    double reference_flow;                                        /* m3/s at which the wax follows fastest */
};

bool sp_circuit_build(const struct sp_design *d, struct sp_circuit *out, struct sp_complaints *complaints);
void sp_circuit_free(struct sp_circuit *c);

/* What changes only at events. */
struct sp_modes {
    enum sp_play play;
    double held;  /* K, effective wax temperature while held */
    bool fan_on;  /* the switch, for a switched fan */
};

struct sp_signals { double wall, fan, wax, jacket, core; }; /* K, -, K, K, K */
enum { SP_SIGNALS = 5 };

struct sp_coupling {
    struct sp_duct_state duct;
    struct sp_loop_state loop;
    double lift;
    double mass_pump, mass_radiator, mass_bypass, mass_bleed; /* kg/s */
    double jacket_conductance, core_conductance;              /* W/K */
    double core_rate;                                         /* W/K, of the coolant through the core */
};

struct sp_guesses { struct sp_guess duct, loop; };

void sp_circuit_signals(const struct sp_circuit *c, const double *y, struct sp_signals *out);

/* The coolant side alone: lift, flows and pressures. Fills only these of *out. */
enum sp_status sp_circuit_split(const struct sp_circuit *c, const struct sp_inputs *in,
                                const struct sp_modes *modes, const struct sp_signals *s,
                                struct sp_guess *guess, struct sp_coupling *out);

/* Both sides. SP_NUMERICS when a solver fails. */
enum sp_status sp_circuit_couple(const struct sp_circuit *c, const struct sp_inputs *in,
                                 const struct sp_modes *modes, const struct sp_signals *s,
                                 struct sp_guesses *guesses, struct sp_coupling *out);

/* Fan speed over rated that the controller asks for. */
double sp_circuit_fan_wish(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                           const double *y);

/* Temperature at a sensor's place. */
double sp_circuit_place(const struct sp_circuit *c, enum sp_place_of place, const double *y);

/* Temperature [K] of what enters the pump: the mix of radiator, bypass and tank; the jacket's when it stands. */
double sp_circuit_pump_inlet(const struct sp_circuit *c, const double *y, const struct sp_coupling *k);

/* Tank pressure and gas from the state. */
struct sp_tank_state sp_circuit_tank(const struct sp_circuit *c, const struct sp_inputs *in, const double *y,
                                     struct sp_tank_inputs *inputs);

/* Heat [W] that the engine gives its metal, the alternator's load by fans and electric pump included. */
double sp_circuit_engine_heat(const struct sp_circuit *c, const struct sp_inputs *in, const double *y);

void sp_circuit_rates(const struct sp_circuit *c, const struct sp_inputs *in, const struct sp_modes *modes,
                      const double *y, const struct sp_coupling *k, double *dydt);

/* Jacobian by columns, jac[j][i] = d f_i / d y_j with the mean wall and mean core coolant of the coupling
 * held, and the effect of these two means, wall[i] and core[i]. Differences of the rates with the coupling
 * held, and of the coupling along its five signals. `work` holds 3 * layout.count doubles. */
enum sp_status sp_circuit_jacobian(const struct sp_circuit *c, const struct sp_inputs *in,
                                   const struct sp_modes *modes, const double *y,
                                   const struct sp_guesses *guesses, double **jac, double *wall, double *core,
                                   double *work);

/* Heat held [J] by coolant and metals, from 0 degC. */
double sp_circuit_heat_held(const struct sp_circuit *c, const double *y);

/* Least distance to boiling [K] over the jacket outlet (at its pressure) and the pump inlet. */
double sp_circuit_boil_margin(const struct sp_circuit *c, const double *y, const struct sp_coupling *k,
                              double tank_pressure);

/* State at the start: temperatures from `start`, tank filled cold and brought to temperature, vented through
 * the cap where it would have been. */
void sp_circuit_start(const struct sp_circuit *c, const struct sp_inputs *in, double *y);

#endif
