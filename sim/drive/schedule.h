/* The schedule: the whole drive's inputs as one table of straight segments. Internal.
 *
 * Steps (traces, idles, holds, soaks, with repeats) are joined end to end; whatever depends on nothing but
 * the trace is worked out here once: engine heat, engine speed, air pressure, distance. Between rows every
 * channel is linear in time; two rows at the same time are a jump (restart the integrator there).
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_DRIVE_SCHEDULE_H
#define SP_DRIVE_SCHEDULE_H

#include "circuit/inputs.h"
#include "swirlpot/design.h"

struct sp_schedule {
    size_t rows;
    double *time;     /* s, not falling */
    double *distance; /* m since the start, exact for the linear speeds */
    double *channel[SP_INPUTS];
    unsigned char *flags; /* of the segment that begins at the row */
    unsigned short *step; /* index of the drive step the row belongs to */
    unsigned short *variant; /* how many of the design's changes hold in the segment that begins at the row; NULL: none
                              * ever */
    struct sp_mark *mark; /* texts by row, from the traces' mark columns */
    size_t marks;
    bool power_from_road; /* power came from the road-load model somewhere */
    bool measured;        /* some trace holds measured coolant */
    /* Work over the drive [J], for the check that is printed when power came from road load. */
    struct {
        double wheel, kinetic, potential, drag, rolling, brakes;
    } work;
    struct sp_trace_repairs repairs;
    size_t rows_merged; /* rows of traces that were merged away */
};

/* Reads the traces and builds the schedule. Everything that is missing (no power and no road load, no
 * engine speed and no gears) is a complaint that says what would be enough. */
enum sp_status sp_schedule_build(struct sp_units *u, const struct sp_design *d, struct sp_schedule *out,
                                 struct sp_complaints *complaints, struct sp_complaints *cautions);
void sp_schedule_free(struct sp_schedule *s);

/* Inputs at time t within segment k (rows k and k+1): linear. */
void sp_schedule_at(const struct sp_schedule *s, size_t k, double t, struct sp_inputs *out);

/* The row whose segment holds the time: of two rows at one time the later. */
size_t sp_schedule_row(const struct sp_schedule *s, double time);

/* Mark that holds in segment k, or NULL. */
const char *sp_schedule_mark(const struct sp_schedule *s, size_t k);

#endif
