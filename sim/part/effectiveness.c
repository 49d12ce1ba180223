/* Effectiveness-NTU relations. SPDX-License-Identifier: GPL-3.0-or-later
 *
 * All differences of exponentials are written with expm1 so that small cr and small NTU keep their digits. */
#include "part/effectiveness.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_roots.h>
#include <math.h>
#include <stdbool.h>
#include <stddef.h>

/* 1 - exp(-x) */
static double rise(double x)
{
    return -expm1(-x);
}

static double counterflow(double ntu, double cr)
{
    if (cr == 1.0) return ntu / (1.0 + ntu);
    double d = rise(ntu * (1.0 - cr));
    return d / ((1.0 - cr) + cr * d);
}

static double both_mixed(double ntu, double cr)
{
    return 1.0 / (1.0 / rise(ntu) + cr / rise(cr * ntu) - 1.0 / ntu);
}

static double two_rows(double ntu, double cr)
{
    double k = rise(0.5 * ntu);
    return rise(2.0 * k * cr) / cr - exp(-2.0 * k * cr) * k * k;
}

static double unmixed_approx(double ntu, double cr)
{
    double n = pow(ntu, 0.22);
    return rise(n * rise(cr * ntu / n) / cr);
}

/* (1/z) sum over n >= 0 of P(n+1, x) P(n+1, z), z = cr x. P(n+1, x) is the chance that a Poisson
 * number of mean x exceeds n; both chances fall by one Poisson term a step, relative to P(1) without
 * loss. */
static double unmixed(double ntu, double cr)
{
    double x = ntu, z = cr * ntu;
    double term_x = exp(-x), term_z = exp(-z); /* Poisson terms of n */
    double tail_x = rise(x), tail_z = rise(z);
    double sum = 0.0;
    for (int n = 0; n < 4000; n++) {
        sum += fmax(tail_x, 0.0) * fmax(tail_z, 0.0);
        term_x *= x / (n + 1);
        term_z *= z / (n + 1);
        tail_x -= term_x;
        tail_z -= term_z;
        /* Past the mean the terms fall at least geometrically and bound the rest. */
        if (n > 2.0 * z && term_z <= 1e-18 * z) break;
    }
    return fmin(sum / z, 1.0);
}

double sp_effectiveness(enum sp_arrangement a, double ntu, double cr)
{
    if (!(ntu >= 0.0 && isfinite(ntu) && cr >= 0.0 && cr <= 1.0)) return NAN;
    if (a == SP_CROSS_UNMIXED && ntu > SP_NTU_MAX) return NAN;
    if (ntu < 1e-15) return ntu; /* to the last digit, and no 0/0 below */
    bool one_sided = cr < 1e-15;
    switch (a) {
    case SP_CROSS_UNMIXED:
        return one_sided ? rise(ntu) : unmixed(ntu, cr);
    case SP_CROSS_UNMIXED_APPROX:
        return one_sided ? rise(ntu) : unmixed_approx(ntu, cr);
    case SP_CROSS_MAX_MIXED:
        return one_sided ? rise(ntu) : rise(cr * rise(ntu)) / cr;
    case SP_CROSS_MIN_MIXED:
        return one_sided ? rise(ntu) : rise(rise(cr * ntu) / cr);
    case SP_CROSS_BOTH_MIXED:
        return one_sided ? rise(ntu) : both_mixed(ntu, cr);
    case SP_CROSS_TWO_ROWS:
        return one_sided ? rise(ntu) : two_rows(ntu, cr);
    case SP_COUNTERFLOW:
        return counterflow(ntu, cr);
    case SP_PARALLEL_FLOW:
        return rise(ntu * (1.0 + cr)) / (1.0 + cr);
    }
    return NAN;
}

struct wanted {
    enum sp_arrangement a;
    double eps, cr;
};

static double surplus(double ntu, void *context)
{
    const struct wanted *w = context;
    return sp_effectiveness(w->a, ntu, w->cr) - w->eps;
}

/* Root of f between low and high, where f changes sign. The solver's state lies on the stack: nothing
 * to run out of, and the library's abort-on-error handler is never reached. */
static double root_between(gsl_function *f, double low, double high)
{
    max_align_t state[16];
    const gsl_root_fsolver_type *type = gsl_root_fsolver_brent;
    if (type->size > sizeof state) return NAN;
    gsl_root_fsolver solver = {.type = type, .state = state};
    if (gsl_root_fsolver_set(&solver, f, low, high) != GSL_SUCCESS) return NAN;
    for (int i = 0; i < 200; i++) {
        if (gsl_root_fsolver_iterate(&solver) != GSL_SUCCESS) return NAN;
        double a = gsl_root_fsolver_x_lower(&solver), b = gsl_root_fsolver_x_upper(&solver);
        if (b - a <= 1e-14 * b) break;
    }
    return gsl_root_fsolver_root(&solver);
}

double sp_ntu(enum sp_arrangement a, double eps, double cr)
{
    if (!(eps >= 0.0 && eps < 1.0 && cr >= 0.0 && cr <= 1.0) || a == SP_CROSS_BOTH_MIXED) return NAN;
    if (eps < 1e-15) return eps;
    struct wanted w = {a, eps, cr};
    gsl_function f = {surplus, &w};
    double low = 0.0, high = eps; /* eps <= 1 - exp(-ntu) < ntu */
    for (;;) {
        double f_high = surplus(high, &w);
        if (isnan(f_high)) return NAN;
        if (f_high >= 0.0) break;
        if (high >= SP_NTU_MAX) return NAN;
        low = high;
        high = fmin(2.0 * high, SP_NTU_MAX);
    }
    return root_between(&f, low, high);
}
