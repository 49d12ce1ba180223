/* The Jacobian of the circuit, with the coupling taken through its few signals.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "circuit/circuit.h"

#include <math.h>
#include <string.h>

static const double kelvin_step = 1e-3; /* K; the solvers' roots are good to 1e-10 K of it */

static double increment(int j, double y)
{
    switch (j) {
    case SP_Y_FAN: return 1e-4;
    case SP_Y_AIR: return 1e-6 * (fabs(y) + 1e-3);
    case SP_Y_LOST: return 1e-8;
    default: return kelvin_step;
    }
}

/* Integrals feed nothing back: their columns are nil. */
static bool feeds_back(int j)
{
    return j < SP_Y_FEEDBACK || j >= SP_Y_CHAIN;
}

enum sp_status sp_circuit_jacobian(const struct sp_circuit *c, const struct sp_inputs *in,
                                   const struct sp_modes *modes, const double *y,
                                   const struct sp_guesses *guesses, double **jac, double *wall, double *core,
                                   double *work)
{
    const struct sp_layout *l = &c->layout;
    int n = l->count;
    double *base = work, *with = work + n, *moved = work + 2 * n;
    struct sp_signals s;
    struct sp_coupling k;
    struct sp_guesses near = *guesses;
    sp_circuit_signals(c, y, &s);
    enum sp_status status = sp_circuit_couple(c, in, modes, &s, &near, &k);
    if (status) return status;
    sp_circuit_rates(c, in, modes, y, &k, base);

    memcpy(moved, y, (size_t)n * sizeof *y);
    for (int j = 0; j < n; ++j) {
        memset(jac[j], 0, (size_t)n * sizeof *jac[j]);
        if (!feeds_back(j)) continue;
        double step = increment(j, y[j]);
        moved[j] = y[j] + step;
        sp_circuit_rates(c, in, modes, moved, &k, with);
        moved[j] = y[j];
        for (int i = 0; i < n; ++i) jac[j][i] = (with[i] - base[i]) / step;
    }

    /* A signal that is one state adds to that state's column; the two means have columns of their own. */
    const struct { size_t offset; double *column, step; } signal[SP_SIGNALS] = {
        {offsetof(struct sp_signals, wall), wall, kelvin_step},
        {offsetof(struct sp_signals, core), core, kelvin_step},
        {offsetof(struct sp_signals, fan), jac[SP_Y_FAN], 1e-4},
        {offsetof(struct sp_signals, wax), jac[SP_Y_WAX], kelvin_step},
        {offsetof(struct sp_signals, jacket), jac[SP_Y_JACKET], kelvin_step}};
    memset(wall, 0, (size_t)n * sizeof *wall);
    memset(core, 0, (size_t)n * sizeof *core);
    for (int s_i = 0; s_i < SP_SIGNALS; ++s_i) {
        struct sp_signals changed = s;
        struct sp_guesses from = near;
        struct sp_coupling other;
        *(double *)((char *)&changed + signal[s_i].offset) += signal[s_i].step;
        status = sp_circuit_couple(c, in, modes, &changed, &from, &other);
        if (status) return status;
        sp_circuit_rates(c, in, modes, y, &other, with);
        for (int i = 0; i < n; ++i) signal[s_i].column[i] += (with[i] - base[i]) / signal[s_i].step;
    }
    return SP_OK;
}
