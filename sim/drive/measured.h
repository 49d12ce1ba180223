/* How the model stands against a trace's measured coolant, and how no model at all would. Internal.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_DRIVE_MEASURED_H
#define SP_DRIVE_MEASURED_H

#include <stdbool.h>
#include <stddef.h>

/* Pairs of measured and modelled coolant [K] over time [s], at sample instants. */
struct sp_measured {
    size_t count, room;
    double *time, *logged, *modelled;
};

bool sp_measured_add(struct sp_measured *m, double time, double logged, double modelled);
void sp_measured_free(struct sp_measured *m);

struct sp_measured_score {
    double rms, warmup_rms, time_to_85, logged_time_to_85; /* K, K, s, s; NAN where there is none */
    double none_rms, none_warmup_rms;
};

/* Scores. Warm-up ends when the log first stands within 2 K of its set point (the median of its hotter
 * half). "No model at all" is a straight line from the first reading to the set point at that instant and
 * the set point from then on: it knows the answer's end and still is no model. */
struct sp_measured_score sp_measured_score(const struct sp_measured *m);

#endif
