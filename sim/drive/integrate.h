/* The integrator: the only place that knows CVODE. Internal.
 *
 * BDF with Newton; one instance a run; the caller steps it segment by segment. Between the first and the
 * last step nothing is allocated.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_DRIVE_INTEGRATE_H
#define SP_DRIVE_INTEGRATE_H

#include "circuit/arrow.h"

/* What is integrated. Callbacks return 0, +1 (try a smaller step) or -1 (give up). */
struct sp_problem {
    void *context;
    struct sp_layout layout; /* of the states */
    int watches;
    int (*rates)(double t, const double *y, double *dydt, void *context);
    int (*jacobian)(double t, const double *y, struct sp_arrow *out, void *context);
    int (*watch)(double t, const double *y, double *g, void *context);
};

struct sp_integrator;

/* Starts at t with y; absolute tolerances one a state. NULL when memory fails. */
struct sp_integrator *sp_integrator_open(const struct sp_problem *p, double t, const double *y, double relative,
                                         const double *absolute);
void sp_integrator_close(struct sp_integrator *i);

/* Forgets the past: for jumps of the inputs or of a mode. */
bool sp_integrator_restart(struct sp_integrator *i, double t);

enum sp_advance { SP_ADV_STEP, SP_ADV_END, SP_ADV_CROSSED, SP_ADV_FAILED };

/* One step, at most to `end`; sets *t. With SP_ADV_CROSSED crossed[] holds +1, -1 or 0 a watch. */
enum sp_advance sp_integrator_step(struct sp_integrator *i, double end, double *t, int *crossed);

double *sp_integrator_state(struct sp_integrator *i); /* at the time reached; y may be read only */

/* State (order 0) or its derivative (order 1) at a time within the last step, into out. */
bool sp_integrator_look_back(struct sp_integrator *i, double t, int order, double *out);

struct sp_integrator_work { long steps, rates, jacobians; };
struct sp_integrator_work sp_integrator_work(const struct sp_integrator *i);

/* Words for the last failure. */
const char *sp_integrator_trouble(const struct sp_integrator *i);

#endif
