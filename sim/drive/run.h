/* One run of a drive: what its pieces share. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_DRIVE_RUN_H
#define SP_DRIVE_RUN_H

#include "drive/integrate.h"
#include "drive/measured.h"
#include "drive/schedule.h"
#include "drive/watch.h"

struct sp_drive {
    const struct sp_design *design;
    struct sp_circuit circuit;  /* of the design as it begins */
    struct sp_circuit *changed; /* of each change's design; as many as the design has changes */
    size_t changes;
    struct sp_schedule schedule;
};

/* Highest (or, turned round, lowest) value of one quantity so far. */
struct sp_tracked { double best, time; };

/* How long and how far one watch was beyond its limit. */
struct sp_spell { double first, since, over, worst, worst_time; const char *place; size_t segment; };

struct sp_run {
    const struct sp_drive *drive;
    const struct sp_circuit *circuit; /* as it is now, and with it circuit->design */
    const struct sp_schedule *schedule;
    struct sp_integrator *integrator;
    struct sp_modes modes;
    struct sp_guesses guesses;   /* of the right-hand side */
    struct sp_guesses looking;   /* of watches and samples */
    size_t segment;
    double time;
    struct sp_watch_list watches;
    bool high[SP_WATCHES_MOST];  /* which watches are above nil */
    struct sp_spell spell[SP_WATCHES_MOST];
    bool fitted[SP_CHANNELS];    /* which channels the drive has */
    bool fan_runs[SP_FAN_KINDS];
    int fans_run;                /* so many kinds */
    double fan_since[SP_FAN_KINDS], any_fan_since, over_since, full_since;
    double *absolute, *scratch, *before; /* states; scratch holds three lots */
    double **column;                     /* of the Jacobian, then the effects of the means */
    double slope_before;
    size_t samples;              /* taken so far */
    double interval;
    const struct sp_sink *sink;
    const struct sp_run_hook *hook;
    bool ended;                  /* the hook has seen enough */
    struct sp_measured measured;
    struct sp_result *result;
    struct sp_tracked coolant, gauge, metal, oil, gearbox, charge, margin, pressure, over_ambient, head_lost;
    struct sp_room room[SP_ROOMS]; /* nearest so far to each limit as it then was; where the car changes */
    struct { double time, power, thrust; } spill; /* W taken and given, as last looked at; only where it is counted */
    size_t event_room;
    bool lost_event;             /* no memory for one */
    size_t variant;              /* changes that have happened */
    double carried;              /* J that changes of the design have put into the heat held */
    bool ledger_open;            /* the sum did not close; the only fault that a smaller tolerance mends */
    struct sp_watched seen;      /* watches as last looked at ... */
    double seen_at;              /* ... at this time; NAN: not valid */
};

/* Looks on after each step, which began at `from`; true ends the run there. */
struct sp_run_hook {
    void *context;
    bool (*step)(void *context, struct sp_run *r, double from);
};

/* As sp_drive_run, with somebody looking on; NULL: nobody. */
enum sp_status sp_run_hooked(const struct sp_drive *drive, const struct sp_run_options *options,
                             const struct sp_run_hook *hook, struct sp_result *out, struct sp_complaints *complaints);

/* Solves the coupling at a looked-at state. */
enum sp_status sp_run_couple(struct sp_run *r, const struct sp_inputs *in, const double *y, struct sp_coupling *k);

/* ---- events: run_events.c ---- */

/* Lists what is watched and recorded, before anything else. */
void sp_run_list(struct sp_run *r);

/* Records an event at `time`, of the whole car and no failure. */
void sp_run_event(struct sp_run *r, enum sp_event_kind kind, double time, double coolant);

/* Handles what crossed, all at one instant. True when the rates jump, so that the integrator must forget. */
bool sp_run_take_crossings(struct sp_run *r, const int *sign);

/* After a jump of the inputs: a watch may stand on the other side without having crossed. */
bool sp_run_look_again(struct sp_run *r, bool first);

/* Whether the controller lets the fan run now; its on-time and its events follow from this alone. */
void sp_run_follow_fan(struct sp_run *r);

/* Step and engine events on entering r->segment, having driven segment `from` before. */
void sp_run_announce(struct sp_run *r, size_t from);

/* Changes of the design on entering r->segment, each with its event; the state stays. */
void sp_run_change(struct sp_run *r);

/* ---- peaks and samples: run_track.c, sample.c ---- */

/* The watches at time t with state y. 0, or -1 when the coolant split cannot be solved. */
int sp_run_look(struct sp_run *r, double t, const double *y, struct sp_watched *out);

/* Peaks at the time reached. */
bool sp_run_track(struct sp_run *r);

/* Samples and peaks after a step that began at `from`. */
enum sp_status sp_run_after_step(struct sp_run *r, double from);

enum sp_status sp_run_give_sample(struct sp_run *r, double t, const double *y);

/* A sample of everything at time t with state y, in segment k. */
enum sp_status sp_run_sample(struct sp_run *r, size_t k, double t, const double *y, struct sp_sample *out);

/* The channels of parts that not every car has; NAN where this one does not. */
void sp_run_sample_fitted(const struct sp_run *r, const struct sp_inputs *in, const double *y,
                          const struct sp_coupling *k, double *v);

/* Which channels a drive of this circuit has; adds to what is there. */
void sp_run_fit(bool fitted[SP_CHANNELS], const struct sp_circuit *c);

/* ---- verdict.c, failures.c ---- */

/* Lists what failed, once the events are in order. False without memory. */
bool sp_run_failures(struct sp_run *r);

/* The limits that decide, in the order of sp_room; NAN: none. */
void sp_run_limits(const struct sp_limits *l, double out[SP_ROOMS]);

/* Tells of each change when a limit was broken after it. False without memory. */
bool sp_run_tell_changes(struct sp_run *r);

/* Closes the books: ledger, margins, verdict. SP_NUMERICS when the ledger does not close. */
enum sp_status sp_run_settle(struct sp_run *r, const double *start, struct sp_complaints *complaints);

#endif
