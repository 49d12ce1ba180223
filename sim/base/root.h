/* Roots of falling functions: a safeguarded secant in front, GSL's Brent behind it. Internal.
 * Allocates nothing.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_BASE_ROOT_H
#define SP_BASE_ROOT_H

#include "swirlpot/base.h"

/* Where the last root was and how steep; in and out, so that a neighbouring problem starts close. */
struct sp_guess {
    double x;
    double slope; /* 0: unknown */
};

typedef double (*sp_falling)(double x, const void *context);

/* Finds x with f(x) = 0 for a function that falls over all x from plus to minus. `step` > 0 is a length
 * typical of x, the first step where the slope is unknown. The secant stops when its step is below 1e-11 |x|
 * (the next error is far smaller), Brent at 1e-13 |x| + 1e-15 step. SP_NUMERICS when no sign change is found or f is not finite. */
enum sp_status sp_root_falling(sp_falling f, const void *context, double step, struct sp_guess *guess);

/* The root between two places of opposite sign, by Brent's method; good as above. */
enum sp_status sp_root_between(sp_falling f, const void *context, double low, double high, double step, double *x);

#endif
