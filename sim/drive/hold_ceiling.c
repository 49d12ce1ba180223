/* The hottest air in which a held speed keeps its limit. SPDX-License-Identifier: GPL-3.0-or-later */
#include <gsl/gsl_errno.h>
#include <gsl/gsl_roots.h>
#include <math.h>

#include "swirlpot/hold.h"

static const double coldest[2] = {SP_ZERO_C - 60.0, SP_ZERO_C - 45.0}; /* K: of air.ambient; of moist air */
static const double hottest[2] = {SP_ZERO_C + 70.0, SP_ZERO_C + 59.8};
static const double fine = 1e-3;       /* K */
static const double hopeless = 1000.0; /* K beyond its limit: what runs away counts as */
enum { TRIALS = 60 };

struct search {
    struct sp_units *units;
    const struct sp_design *design;
    const struct sp_hold_wish *wish;
    struct sp_complaints *complaints;
    enum sp_status status; /* of the last trial; SP_OK and SP_NOT alike are fine */
    double nearest, near;  /* K: the trial that came nearest, and how near */
};

/* Room to the coolant's limit [K] at an ambient: falls. */
static double room(double ambient, void *context)
{
    struct search *s = context;
    struct sp_design d = *s->design;
    struct sp_hold_point p;
    struct sp_complaints cautions = {0};
    d.air.ambient = ambient;
    if (s->status == SP_INPUT || s->status == SP_NUMERICS) return -hopeless;
    s->status = sp_hold_solve(s->units, &d, s->wish, &p, s->complaints, &cautions);
    sp_complaints_free(&cautions);
    if (s->status == SP_INPUT || s->status == SP_NUMERICS) return -hopeless;
    double left = fmax(d.limits.coolant.stop - p.limit[SP_HOLD_COOLANT].value, -hopeless);
    if (p.kind == SP_HOLD_RUNS_AWAY) return -hopeless;
    if (fabs(left) < s->near) {
        s->near = fabs(left);
        s->nearest = ambient;
    }
    return left;
}

/* Where the coolant jumps past its limit (a fan that no longer rests), the cool side of the jump. */
static double between(struct search *s, double low, double high)
{
    gsl_root_fsolver *solver = gsl_root_fsolver_alloc(gsl_root_fsolver_brent);
    gsl_function f = {room, s};
    bool good = solver && gsl_root_fsolver_set(solver, &f, low, high) == GSL_SUCCESS;
    for (int i = 0; good && i < TRIALS && s->near > fine && high - low > fine; ++i) {
        good = gsl_root_fsolver_iterate(solver) == GSL_SUCCESS;
        low = gsl_root_fsolver_x_lower(solver);
        high = gsl_root_fsolver_x_upper(solver);
    }
    if (solver) gsl_root_fsolver_free(solver);
    if (!good) return NAN;
    return s->near <= fine ? s->nearest : low;
}

enum sp_status sp_hold_ceiling(struct sp_units *u, const struct sp_design *d, const struct sp_hold_wish *w,
                               double *ambient, struct sp_complaints *complaints)
{
    struct search s = {u, d, w, complaints, SP_OK, NAN, INFINITY};
    *ambient = NAN;
    if (!isfinite(d->limits.coolant.stop)) return SP_NOT;
    bool moist = d->air.humidity > 0.0;
    double low = room(coldest[moist], &s), high = room(hottest[moist], &s);
    if (s.status == SP_INPUT || s.status == SP_NUMERICS) return s.status;
    if (low < 0.0 || high > 0.0) {
        *ambient = low < 0.0 ? -INFINITY : INFINITY;
        return SP_NOT;
    }
    *ambient = low == 0.0    ? coldest[moist]
               : high == 0.0 ? hottest[moist]
                             : between(&s, coldest[moist], hottest[moist]);
    if (s.status == SP_INPUT || s.status == SP_NUMERICS) return s.status;
    return isnan(*ambient) ? SP_NUMERICS : SP_OK;
}
