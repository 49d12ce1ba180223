/* The Jacobian of the circuit, with the coupling taken through its few signals.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include <math.h>
#include <string.h>

#include "circuit/circuit.h"

static const double kelvin_step = 1e-3; /* K; the solvers' roots are good to 1e-10 K of it */
static const double speed_step = 1e-4;  /* of a fan, over rated */

struct differences {
    const struct sp_circuit *c;
    const struct sp_inputs *in;
    const struct sp_modes *modes;
    const double *y;
    const struct sp_guesses *near;
    const struct sp_signals *signals;
    const struct sp_coupling *coupling;
    const double *base; /* rates at y */
    double *with;       /* room for rates */
};

static double increment(const struct sp_layout *l, int j, double y)
{
    if (j == SP_Y_AIR) return 1e-6 * (fabs(y) + 1e-3);
    if (j == SP_Y_LOST) return 1e-8;
    return sp_layout_kelvin(l, j) ? kelvin_step : speed_step;
}

/* Integrals feed nothing back: their columns are nil. */
static bool feeds_back(const struct sp_layout *l, int j)
{
    return (j < SP_Y_HEAT_IN || j >= SP_Y_CHAIN) && j != l->battery;
}

/* ---- columns with the coupling held ---------------------------------------------------------------- */

static void hold_coupling(const struct differences *d, double *moved, double **jac)
{
    const struct sp_layout *l = &d->c->layout;
    int n = l->count;
    memcpy(moved, d->y, (size_t)n * sizeof *moved);
    for (int j = 0; j < n; ++j) {
        memset(jac[j], 0, (size_t)n * sizeof *jac[j]);
        if (!feeds_back(l, j)) continue;
        double step = increment(l, j, d->y[j]);
        moved[j] = d->y[j] + step;
        sp_circuit_rates(d->c, d->in, d->modes, moved, d->coupling, d->with);
        moved[j] = d->y[j];
        for (int i = 0; i < n; ++i) jac[j][i] = (d->with[i] - d->base[i]) / step;
    }
}

/* ---- along the signals ----------------------------------------------------------------------------- */

/* What has to be solved again when a signal moves. */
enum part { PART_SPLIT = -1, PART_FLUIDS = -2 }; /* 0 and up: the duct of that run */

/* Adds the effect of one signal, moved by `step` at `offset`, to a column. A signal acts through one duct, through the
 * coolant's split, or through the fluid side of the cores alone. */
static enum sp_status along(const struct differences *d, size_t offset, double step, int part, double *column)
{
    struct sp_signals changed = *d->signals;
    struct sp_coupling other = *d->coupling;
    enum sp_status status = SP_OK;
    *(double *)((char *)&changed + offset) += step;
    if (part >= 0) {
        struct sp_duct_guess from = d->near->duct[part];
        status = sp_circuit_air(d->c, d->in, &changed, part, &from, &other);
    } else {
        struct sp_loop_guess from = d->near->loop;
        if (part == PART_SPLIT) status = sp_circuit_split(d->c, d->in, d->modes, &changed, &from, &other);
        sp_circuit_fluids(d->c, d->in, &changed, &other);
    }
    if (status) return status;
    sp_circuit_rates(d->c, d->in, d->modes, d->y, &other, d->with);
    for (int i = 0; i < d->c->layout.count; ++i) column[i] += (d->with[i] - d->base[i]) / step;
    return SP_OK;
}

static size_t wall_at(int e) { return offsetof(struct sp_signals, wall) + (size_t)e * sizeof(double); }
static size_t fluid_at(int e) { return offsetof(struct sp_signals, fluid) + (size_t)e * sizeof(double); }
static size_t fan_at(int f) { return offsetof(struct sp_signals, fan) + (size_t)f * sizeof(double); }

static enum sp_status along_cores(const struct differences *d, double **mean)
{
    size_t bytes = (size_t)d->c->layout.count * sizeof(double);
    for (int e = 0; e < d->c->exchangers; ++e) {
        const struct sp_exchanger *x = &d->c->exchanger[e];
        memset(mean[2 * e], 0, bytes);
        memset(mean[2 * e + 1], 0, bytes);
        int part = x->string >= 0 ? PART_SPLIT : PART_FLUIDS;
        enum sp_status status = along(d, wall_at(e), kelvin_step, x->run, mean[2 * e]);
        if (!status) status = along(d, fluid_at(e), kelvin_step, part, mean[2 * e + 1]);
        if (status) return status;
    }
    return SP_OK;
}

/* Signals that are one state add to that state's column. */
static enum sp_status along_states(const struct differences *d, double **jac)
{
    const struct sp_circuit *c = d->c;
    const struct sp_layout *l = &c->layout;
    enum sp_status status = SP_OK;
    for (int r = 0; r < c->runs && !status; ++r) {
        for (int i = 0; i < SP_FANS && !status; ++i) {
            int f = c->run[r].fan[i];
            if (f >= 0) status = along(d, fan_at(f), speed_step, r, jac[l->fan[f]]);
        }
        if (c->run[r].design->bay_skin > 0.0 && !status)
            status = along(d, offsetof(struct sp_signals, metal), kelvin_step, r, jac[SP_Y_METAL]);
    }
    const struct { size_t offset; int state, part; } single[] = {
        {offsetof(struct sp_signals, wax), SP_Y_WAX, PART_SPLIT},
        {offsetof(struct sp_signals, jacket), SP_Y_JACKET, PART_SPLIT},
        {offsetof(struct sp_signals, oil), l->oil, PART_FLUIDS},
        {offsetof(struct sp_signals, gearbox), l->gearbox, PART_FLUIDS}};
    for (size_t i = 0; i < sizeof single / sizeof single[0] && !status; ++i)
        if (single[i].state >= 0)
            status = along(d, single[i].offset, kelvin_step, single[i].part, jac[single[i].state]);
    return status;
}

enum sp_status sp_circuit_jacobian(const struct sp_circuit *c, const struct sp_inputs *in,
                                   const struct sp_modes *modes, const double *y,
                                   const struct sp_guesses *guesses, double **jac, double **mean, double *work)
{
    int n = c->layout.count;
    double *base = work;
    struct sp_signals s;
    struct sp_coupling k;
    struct sp_guesses near = *guesses;
    sp_circuit_signals(c, in, y, &s);
    enum sp_status status = sp_circuit_couple(c, in, modes, &s, &near, &k);
    if (status) return status;
    sp_circuit_rates(c, in, modes, y, &k, base);
    struct differences d = {c, in, modes, y, &near, &s, &k, base, work + n};
    hold_coupling(&d, work + 2 * n, jac);
    status = along_cores(&d, mean);
    return status ? status : along_states(&d, jac);
}
