/* A hold on its way to rest: what its pieces share. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_DRIVE_HOLD_H
#define SP_DRIVE_HOLD_H

#include "drive/run.h"
#include "swirlpot/hold.h"

/* One moment of the way. */
struct sp_hold_record {
    double time;                  /* s */
    double value[SP_HOLD_LIMITS]; /* K, what is judged; NAN where it is not there */
    double in, air, skin;         /* J so far */
    bool fan;                     /* some fan is asked to run in the stretch that ends here */
};

/* The last cycles of the way, or the last stretch of it. */
struct sp_hold_cycle {
    size_t first, last; /* records */
    double period;      /* s; NAN: no cycle in it */
};

struct sp_holding {
    struct sp_hold_point *out;
    struct sp_hold_record *record; /* owned */
    size_t records, room;
    double *state, *rates, *hottest; /* n each; owned by sp_hold_solve */
    double next_look, next_try;      /* s: when to look for a cycle, to solve for rest */
    struct sp_hold_cycle cycle;
    double watch_until; /* s: end of the cycle whose hottest moment is sought; NAN: not yet */
    double hottest_at;  /* K */
    struct sp_modes hottest_modes;
    bool failed; /* no memory */
};

/* Called after each step of the run; true when all is known. */
bool sp_hold_step(void *context, struct sp_run *r, double from);

/* ---- hold_watch.c: the way ---- */

/* Records the step that began at `from`, and when limits were passed in it. False: no memory, or no solution.
 */
bool sp_hold_note(struct sp_holding *h, struct sp_run *r, double from);

/* Looks for a lasting cycle in the last half of the way: its first and its last round are the same. */
bool sp_hold_find_cycle(const struct sp_holding *h, struct sp_hold_cycle *out);

/* The last `span` seconds, whatever there is in them. */
struct sp_hold_cycle sp_hold_last(const struct sp_holding *h, double span);

/* Range, mean, fan and heat over a stretch of the way, into the point. */
void sp_hold_sum_up(const struct sp_holding *h, const struct sp_hold_cycle *c, struct sp_hold_point *out);

/* ---- hold_steady.c ---- */

/* Solves rates(y) = 0 from y with the modes as they are: by Powell's hybrid method (GSL) over all states that
 * feed back, but for the air and the liquid in the tank, which stay. False, y as it was, when it does not
 * come to rest. *moved gets the largest change [K]. */
bool sp_hold_steady(struct sp_run *r, double *y, double *moved);

/* Is state i one that comes to rest? */
bool sp_hold_rests(const struct sp_layout *l, int i);

/* ---- hold_point.c ---- */

/* Everything of a state, into the point. */
enum sp_status sp_hold_describe(struct sp_run *r, const double *y, struct sp_hold_point *out);

/* Values that are judged, at state y of time t. False when they cannot be had. */
bool sp_hold_values(struct sp_run *r, double t, const double *y, double value[SP_HOLD_LIMITS]);

/* How far beyond its limit a value is, K; negative within it, NAN without one. */
double sp_hold_beyond(const struct sp_hold_limit *l, int judged, double value);

/* Keys and limits of the design; nothing passed yet. */
void sp_hold_limits(const struct sp_design *d, struct sp_hold_limit limit[SP_HOLD_LIMITS]);

/* Judges the point by its values. */
void sp_hold_judge(struct sp_hold_point *p);

#endif
