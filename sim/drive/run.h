/* One run of a drive: what its pieces share. Internal. */
#ifndef SP_DRIVE_RUN_H
#define SP_DRIVE_RUN_H

#include "drive/integrate.h"
#include "drive/measured.h"
#include "drive/schedule.h"
#include "drive/watch.h"

struct sp_drive {
    const struct sp_design *design;
    struct sp_circuit circuit;
    struct sp_schedule schedule;
};

/* Highest (or, turned round, lowest) value of one quantity so far. */
struct sp_tracked { double best, time; };

struct sp_run {
    const struct sp_drive *drive;
    const struct sp_circuit *circuit;
    const struct sp_schedule *schedule;
    struct sp_integrator *integrator;
    struct sp_modes modes;
    struct sp_guesses guesses;   /* of the right-hand side */
    struct sp_guesses looking;   /* of watches and samples */
    size_t segment;
    double time;
    bool high[SP_WATCHES];       /* which watches are above nil */
    bool fan_runs;
    double fan_since, over_since, full_since;
    double *absolute, *scratch, *before; /* states; scratch holds three lots */
    double *means, **column;             /* of the Jacobian */
    double slope_before;
    size_t samples;              /* taken so far */
    double interval;
    const struct sp_sink *sink;
    struct sp_measured measured;
    struct sp_result *result;
    struct sp_tracked coolant, gauge, metal, margin, pressure, over_ambient;
    size_t event_room;
    bool lost_event;             /* no memory for one */
    struct sp_watched seen;      /* watches as last looked at ... */
    double seen_at;              /* ... at this time; NAN: not valid */
};

/* Solves the coupling at a looked-at state. */
enum sp_status sp_run_couple(struct sp_run *r, const struct sp_inputs *in, const double *y, struct sp_coupling *k);

/* Records an event at `time`. */
void sp_run_event(struct sp_run *r, enum sp_event_kind kind, double time, double coolant);

/* Mark that holds in segment k, or NULL. */
const char *sp_schedule_mark(const struct sp_schedule *s, size_t k);

/* A sample of everything at time t with state y, in segment k. */
enum sp_status sp_run_sample(struct sp_run *r, size_t k, double t, const double *y, struct sp_sample *out);

/* Closes the books: ledger, margins, verdict. SP_NUMERICS when the ledger does not close. */
enum sp_status sp_run_settle(struct sp_run *r, const double *start, struct sp_complaints *complaints);

#endif
