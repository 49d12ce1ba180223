/* Pressure over flow with the laws of speed. SPDX-License-Identifier: GPL-3.0-or-later */
#include "part/curve.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static bool refuse(const struct sp_place *at, struct sp_complaints *to, const char *found, const char *expected)
{
    sp_complain(to, at, found, expected, NULL);
    return false;
}

static bool rising(const struct sp_table *t)
{
    for (size_t i = 0; i + 1 < t->rows; ++i)
        if (!(t->cell[2 * i + 2] > t->cell[2 * i] && t->cell[2 * i + 3] <= t->cell[2 * i + 1])) return false;
    return t->rows >= 2 && t->cell[0] >= 0.0;
}

static bool from_pairs(const struct sp_table *t, struct sp_curve *c, const struct sp_place *at,
                       struct sp_complaints *to)
{
    if (!rising(t)) return refuse(at, to, "pairs out of order",
                      "two or more pairs with flow rising from 0 up and pressure that never rises");
    double *block = malloc(2 * t->rows * sizeof *block);
    if (!block) return refuse(at, to, "no memory", "room for the curve");
    double *pressure = block + t->rows;
    for (size_t i = 0; i < t->rows; ++i) {
        block[i] = t->cell[2 * i];
        pressure[i] = t->cell[2 * i + 1];
    }
    c->flow = block;
    c->pressure = pressure;
    c->interp = gsl_interp_alloc(t->rows >= 3 ? gsl_interp_steffen : gsl_interp_linear, t->rows);
    if (!c->interp || gsl_interp_init(c->interp, c->flow, c->pressure, t->rows))
        return refuse(at, to, "a curve that cannot be interpolated", "pairs with rising flow");
    c->first = c->flow[0];
    c->last = c->flow[t->rows - 1];
    double slope = 0.0;
    gsl_interp_eval_deriv_e(c->interp, c->flow, c->pressure, c->last, NULL, &slope);
    if (!(slope < 0.0)) slope = (pressure[t->rows - 1] - pressure[t->rows - 2]) / (c->last - block[t->rows - 2]);
    if (!(slope < 0.0)) return refuse(at, to, "a curve that does not fall at its end", "pressure falling with flow");
    c->tail_c = -slope / (2.0 * c->last);
    c->tail_a = pressure[t->rows - 1] + c->tail_c * c->last * c->last;
    gsl_interp_eval_deriv_e(c->interp, c->flow, c->pressure, c->first, NULL, &c->slope0);
    c->slope0 = fmin(c->slope0, 0.0);
    c->shutoff = pressure[0] - c->slope0 * c->first;
    c->free_flow = c->last;
    return true;
}

bool sp_curve_build(const struct sp_curve_design *d, struct sp_curve *out, const struct sp_place *at,
                    struct sp_complaints *complaints)
{
    memset(out, 0, sizeof *out);
    if (d->pairs.rows) return from_pairs(&d->pairs, out, at, complaints);
    if (!(d->shutoff > 0.0 && d->free_flow > 0.0))
        return refuse(at, complaints, "no curve", "pairs of flow and pressure, or shutoff and free_flow above 0");
    out->shutoff = out->tail_a = d->shutoff;
    out->free_flow = d->free_flow;
    out->tail_c = d->shutoff / (d->free_flow * d->free_flow);
    return true;
}

void sp_curve_free(struct sp_curve *c)
{
    if (c->interp) gsl_interp_free(c->interp);
    free((void *)(size_t)c->flow);
    memset(c, 0, sizeof *c);
}

double sp_curve_at(const struct sp_curve *c, double n, double flow)
{
    if (flow < n * c->first) return n * n * c->shutoff + n * c->slope0 * flow;
    if (!(flow < n * c->last)) return n * n * c->tail_a - c->tail_c * flow * flow; /* NaN too: it stays one */
    double f = 0.0, at_rated = fmin(fmax(flow / n, c->first), c->last); /* rounding may leave the pairs */
    gsl_interp_eval_e(c->interp, c->flow, c->pressure, at_rated, NULL, &f);
    return n * n * f;
}
