/* Roots of falling functions. SPDX-License-Identifier: GPL-3.0-or-later */
#include "base/root.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_roots.h>
#include <math.h>
#include <stdalign.h>

enum { QUICK_STEPS = 14, WIDENINGS = 80, BRENT_STEPS = 100, HALVINGS = 1100 };

struct bracket {
    double low, high; /* f(low) > 0 > f(high); infinite while unknown */
};

static void narrow(struct bracket *b, double x, double f)
{
    if (f > 0.0) b->low = fmax(b->low, x);
    else b->high = fmin(b->high, x);
}

/* A point strictly inside the bracket, doubling outwards where a side is open. */
static double inside(const struct bracket *b, double from, double step)
{
    if (isfinite(b->low) && isfinite(b->high)) return 0.5 * (b->low + b->high);
    return isfinite(b->low) ? from + step : from - step;
}

static bool close_enough(double move, double x, double step)
{
    return fabs(move) <= 1e-11 * fabs(x) + 1e-13 * step;
}

/* The fast one. Leaves what it learnt in the bracket when it gives up. */
static bool secant(sp_falling f, const void *context, double step, struct sp_guess *g, struct bracket *b)
{
    double x = g->x, fx = f(x, context);
    double slope = g->slope;
    bool near = false; /* the slope is of a short chord taken here; a guess's or a long chord's may be any */
    for (int i = 0; i < QUICK_STEPS; ++i) {
        if (fx == 0.0) {
            *g = (struct sp_guess){x, slope};
            return true;
        }
        if (!isfinite(fx)) return false;
        narrow(b, x, fx);
        double next = slope < 0.0 ? x - fx / slope : (fx > 0.0 ? x + step : x - step);
        if (!(next > b->low && next < b->high)) next = inside(b, x, step * (double)(1 << (i < 20 ? i : 20)));
        if (slope < 0.0 && close_enough(next - x, x, step)) {
            if (near) {
                *g = (struct sp_guess){next, slope};
                return true;
            }
            next = x + copysign(0.5 * (1e-9 * fabs(x) + 1e-12 * step), fx);
        }
        double fn = f(next, context);
        slope = next != x ? (fn - fx) / (next - x) : 0.0;
        near = fabs(next - x) <= 1e-3 * fabs(next) + 1e-9 * step;
        x = next;
        fx = fn;
    }
    g->x = x;
    return false;
}

static bool widen(sp_falling f, const void *context, double step, double from, struct bracket *b)
{
    double reach = step;
    for (int i = 0; i < WIDENINGS && !(isfinite(b->low) && isfinite(b->high)); ++i, reach *= 2.0) {
        double x = isfinite(b->low) ? b->low + reach : (isfinite(b->high) ? b->high - reach : from);
        double fx = f(x, context);
        if (!isfinite(fx)) return false;
        narrow(b, x, fx);
        if (fx == 0.0) b->low = b->high = x;
    }
    return isfinite(b->low) && isfinite(b->high);
}

struct call {
    sp_falling f;
    const void *context;
};

static double brent_call(double x, void *p)
{
    const struct call *c = p;
    return c->f(x, c->context);
}

static bool narrow_enough(double low, double high, double x, double step)
{
    return fabs(high - low) <= 1e-13 * fabs(x) + 1e-15 * step;
}

/* Where interpolation creeps (a value of 1e100 at one end), halving does not. */
static bool halve(sp_falling f, const void *context, double low, double high, double step, double *x)
{
    for (int i = 0; i < HALVINGS; ++i) {
        *x = 0.5 * (low + high);
        if (narrow_enough(low, high, *x, step) || *x <= low || *x >= high) return true;
        double fx = f(*x, context);
        if (!isfinite(fx)) return false;
        if (fx > 0.0) low = *x;
        else high = *x;
    }
    return false;
}

/* GSL's own solver with its state on the stack instead of the heap. */
static bool brent(sp_falling f, const void *context, const struct bracket *b, double step, double *x)
{
    alignas(max_align_t) unsigned char room[256];
    if (gsl_root_fsolver_brent->size > sizeof room) return false;
    struct call c = {f, context};
    gsl_function wrapped = {brent_call, &c};
    gsl_root_fsolver solver = {.type = gsl_root_fsolver_brent, .state = room};
    if (gsl_root_fsolver_set(&solver, &wrapped, b->low, b->high) != GSL_SUCCESS) return false;
    for (int i = 0; i < BRENT_STEPS; ++i) {
        if (gsl_root_fsolver_iterate(&solver) != GSL_SUCCESS) return false;
        *x = gsl_root_fsolver_root(&solver);
        if (narrow_enough(gsl_root_fsolver_x_lower(&solver), gsl_root_fsolver_x_upper(&solver), *x, step)) return true;
    }
    return halve(f, context, gsl_root_fsolver_x_lower(&solver), gsl_root_fsolver_x_upper(&solver), step, x);
}

enum sp_status sp_root_falling(sp_falling f, const void *context, double step, struct sp_guess *guess)
{
    struct bracket b = {-INFINITY, INFINITY};
    if (!isfinite(guess->x)) *guess = (struct sp_guess){0.0, 0.0};
    if (secant(f, context, step, guess, &b)) return SP_OK;
    double x = guess->x;
    if (!widen(f, context, step, x, &b)) return SP_NUMERICS;
    if (b.low == b.high) x = b.low;
    else if (!brent(f, context, &b, step, &x)) return SP_NUMERICS;
    *guess = (struct sp_guess){x, 0.0};
    return SP_OK;
}

enum sp_status sp_root_between(sp_falling f, const void *context, double low, double high, double step, double *x)
{
    struct bracket b = {low, high};
    return brent(f, context, &b, step, x) ? SP_OK : SP_NUMERICS;
}
