/* A fan's or pump's pressure over volume flow, with the laws of speed. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_PART_CURVE_H
#define SP_PART_CURVE_H

#include "swirlpot/part.h"
#include <gsl/gsl_interp.h>

/* f(Q) at rated speed: the parabola shutoff (1 - (Q/free)^2), or Steffen's monotone interpolation
 * through pairs with a parabola a - c Q^2 fitted to value and slope beyond the last. Read-only in use. */
struct sp_curve {
    double shutoff, free_flow; /* f(0), and where f is 0 (or the last flow of the pairs) */
    double tail_a, tail_c;     /* a - c Q^2 beyond `last` */
    double first, last;        /* m3/s; last is 0 for the parabola */
    double slope0;             /* f'(0) */
    gsl_interp *interp;
    const double *flow, *pressure; /* owned, one block */
};

/* Complains when pairs are fewer than two, flows do not rise, or the end does not fall. */
bool sp_curve_build(const struct sp_curve_design *d, struct sp_curve *out, const struct sp_place *at,
                    struct sp_complaints *complaints);
void sp_curve_free(struct sp_curve *c);

/* n^2 f(Q/n) at n times the rated speed (n >= 0) and forward flow Q >= 0; regular down to n = 0, where
 * only the parabola's -c Q^2 is left. In reverse flow (Q < 0) f(0) holds, with its slope. */
double sp_curve_at(const struct sp_curve *c, double n, double flow);

#endif
