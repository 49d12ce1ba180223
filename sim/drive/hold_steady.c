/* A hold at rest: the steady problem solved. SPDX-License-Identifier: GPL-3.0-or-later */
#include <gsl/gsl_errno.h>
#include <gsl/gsl_multiroots.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "drive/hold.h"

static const double coldest = 150.0, hottest = 5000.0; /* K: as the integrator has it */
static const double rest = 1e-9;        /* K: largest imbalance of any state over its own stiffness */
static const double good_enough = 1e-7; /* K, where rounding lets it come no further */
static const double shift =
    1e-8; /* 1/s taken off the Jacobian: heat that goes nowhere keeps it from being singular */
enum { ITERATIONS = 40 };

/* The unknowns and what their equations need; all arrays lie in one block. */
struct steady {
    const struct sp_circuit *circuit;
    const struct sp_modes *modes;
    struct sp_inputs in;
    struct sp_guesses guesses;
    int states, unknowns;
    int *index;                           /* state of each unknown */
    double *y, *f, *scale, *work, *block; /* scale: s, of each unknown */
    double **column, *mean[2 * SP_EXCHANGERS];
};

bool sp_hold_rests(const struct sp_layout *l, int i)
{
    if (i == SP_Y_AIR || i == SP_Y_LOST || i == l->battery) return false;
    return i < SP_Y_HEAT_IN || i >= SP_Y_CHAIN;
}

static bool open_steady(struct steady *s, struct sp_run *r, const double *y)
{
    const struct sp_layout *l = &r->circuit->layout;
    size_t n = (size_t)l->count, means = 2 * (size_t)l->exchangers;
    *s =
        (struct steady){.circuit = r->circuit, .modes = &r->modes, .guesses = r->guesses, .states = l->count};
    sp_schedule_at(r->schedule, r->segment, r->time, &s->in);
    s->index = calloc(n, sizeof *s->index);
    s->column = calloc(n, sizeof *s->column);
    s->block = calloc(n * (6 + n + means), sizeof *s->block);
    if (!s->index || !s->column || !s->block) return false;
    s->y = s->block;
    s->f = s->y + n;
    s->scale = s->f + n;
    s->work = s->scale + n;
    for (size_t j = 0; j < n; ++j)
        s->column[j] = s->work + (3 + j) * n;
    for (size_t m = 0; m < means; ++m)
        s->mean[m] = s->work + (3 + n + m) * n;
    memcpy(s->y, y, n * sizeof *y);
    for (int i = 0; i < l->count; ++i)
        if (sp_hold_rests(l, i)) s->index[s->unknowns++] = i;
    return true;
}

static void close_steady(struct steady *s)
{
    free(s->index);
    free(s->column);
    free(s->block);
}

/* ---- what GSL asks --------------------------------------------------------------------------------- */

static bool take(struct steady *s, const gsl_vector *x)
{
    for (int a = 0; a < s->unknowns; ++a) {
        int i = s->index[a];
        double v = gsl_vector_get(x, (size_t)a);
        if (!isfinite(v)) return false;
        if (sp_layout_kelvin(&s->circuit->layout, i) && !(v > coldest && v < hottest)) return false;
        s->y[i] = v;
    }
    return true;
}

static int imbalance(const gsl_vector *x, void *context, gsl_vector *f)
{
    struct steady *s = context;
    struct sp_signals signals;
    struct sp_coupling k;
    if (!take(s, x)) return GSL_EDOM;
    sp_circuit_signals(s->circuit, &s->in, s->y, &signals);
    if (sp_circuit_couple(s->circuit, &s->in, s->modes, &signals, &s->guesses, &k)) return GSL_EFAILED;
    sp_circuit_rates(s->circuit, &s->in, s->modes, s->y, &k, s->f);
    for (int a = 0; a < s->unknowns; ++a)
        gsl_vector_set(f, (size_t)a, s->scale[a] * s->f[s->index[a]]);
    return GSL_SUCCESS;
}

/* What the means of walls and fluids do belongs to each of their cells. */
static void spread_means(struct steady *s)
{
    const struct sp_layout *l = &s->circuit->layout;
    for (int e = 0; e < l->exchangers; ++e) {
        const struct sp_cells_at *at = &l->exchanger[e];
        for (int c = 0; c < at->cells; ++c)
            for (int i = 0; i < s->states; ++i) {
                s->column[at->wall + c][i] += s->mean[2 * e][i] / at->cells;
                s->column[at->fluid + c][i] += s->mean[2 * e + 1][i] / at->cells;
            }
    }
}

static bool differentiate(struct steady *s)
{
    if (sp_circuit_jacobian(s->circuit, &s->in, s->modes, s->y, &s->guesses, s->column, s->mean, s->work))
        return false;
    spread_means(s);
    for (int i = 0; i < s->states; ++i)
        s->column[i][i] -= shift;
    return true;
}

static int slopes(const gsl_vector *x, void *context, gsl_matrix *J)
{
    struct steady *s = context;
    if (!take(s, x)) return GSL_EDOM;
    if (!differentiate(s)) return GSL_EFAILED;
    for (int a = 0; a < s->unknowns; ++a)
        for (int b = 0; b < s->unknowns; ++b)
            gsl_matrix_set(J, (size_t)a, (size_t)b, s->scale[a] * s->column[s->index[b]][s->index[a]]);
    return GSL_SUCCESS;
}

static int both(const gsl_vector *x, void *context, gsl_vector *f, gsl_matrix *J)
{
    int status = imbalance(x, context, f);
    return status ? status : slopes(x, context, J);
}

/* ---- solving --------------------------------------------------------------------------------------- */

/* Each rate is counted in kelvin: over the state's own stiffness. */
static bool set_scale(struct steady *s)
{
    if (!differentiate(s)) return false;
    for (int a = 0; a < s->unknowns; ++a)
        s->scale[a] = 1.0 / fabs(s->column[s->index[a]][s->index[a]]);
    return true;
}

static double worst(const gsl_vector *f)
{
    double most = 0.0;
    for (size_t a = 0; a < f->size; ++a) {
        double off = fabs(gsl_vector_get(f, a));
        if (!(off <= most)) most = off; /* also NAN */
    }
    return most;
}

static bool iterate(struct steady *s, gsl_multiroot_fdfsolver *solver, gsl_vector *x)
{
    size_t n = (size_t)s->unknowns;
    gsl_multiroot_function_fdf problem = {imbalance, slopes, both, n, s};
    for (size_t a = 0; a < n; ++a)
        gsl_vector_set(x, a, s->y[s->index[a]]);
    if (gsl_multiroot_fdfsolver_set(solver, &problem, x) != GSL_SUCCESS) return false;
    for (int i = 0; i < ITERATIONS && worst(solver->f) > rest; ++i)
        if (gsl_multiroot_fdfsolver_iterate(solver) != GSL_SUCCESS) break;
    return worst(solver->f) <= good_enough && take(s, solver->x);
}

static bool solve(struct steady *s)
{
    size_t n = (size_t)s->unknowns;
    gsl_multiroot_fdfsolver *solver = gsl_multiroot_fdfsolver_alloc(gsl_multiroot_fdfsolver_hybridsj, n);
    gsl_vector *x = gsl_vector_alloc(n);
    bool found = solver && x && set_scale(s) && iterate(s, solver, x);
    if (x) gsl_vector_free(x);
    if (solver) gsl_multiroot_fdfsolver_free(solver);
    return found;
}

bool sp_hold_steady(struct sp_run *r, double *y, double *moved)
{
    struct steady s;
    bool found = open_steady(&s, r, y) && solve(&s);
    *moved = found ? 0.0 : INFINITY;
    for (int i = 0; found && i < s.states; ++i) {
        *moved = fmax(*moved, fabs(s.y[i] - y[i]));
        y[i] = s.y[i];
    }
    close_steady(&s);
    return found;
}
