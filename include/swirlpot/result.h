/* swirlpot/result.h - what came of a drive or of a duct, written out: text, JSON, CSV.
 *
 * The writers only print what they are given: the same result gives the same bytes. Numbers in JSON are the
 * shortest digits that read back as the same double; what is undefined is null there and empty in CSV.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SWIRLPOT_RESULT_H
#define SWIRLPOT_RESULT_H

#include "swirlpot/circuit.h"
#include "swirlpot/drive.h"
#include "swirlpot/paper.h"

#ifdef __cplusplus
extern "C" {
#endif

/* ---- a drive --------------------------------------------------------------------------------------- */

/* One drive that was run to its end (SP_OK or SP_NOT); all three outlive the report. */
struct sp_report {
    const struct sp_design *design;
    const struct sp_drive *drive;
    const struct sp_result *result;
    struct sp_defaults defaults; /* what the case leaves at its defaults, to be told; zeros: not told */
};

/* The verdict for a person, at most 80 columns wide: whole degrees, or with `exact` more digits. */
SP_API void sp_report_text(const struct sp_report *r, bool exact, FILE *to);

/* The same for a program: one JSON document. */
SP_API void sp_report_json(const struct sp_report *r, FILE *to);

/* All events as CSV: headings "name [unit]", one event a line. */
SP_API void sp_report_events(const struct sp_report *r, FILE *to);

/* ---- files of a drive ------------------------------------------------------------------------------ */

/* result.json, series.csv and events.csv in one directory, written beside their places while the drive
 * runs and put there by sp_report_files_finish: all of it is there afterwards, or what was there before. */
struct sp_report_files;

/* Makes the directory when it is missing, and those above it. NULL with complaints. The list of
 * complaints must outlive the files. */
SP_API struct sp_report_files *sp_report_files_open(const char *directory, struct sp_complaints *complaints);

/* Takes the samples of the run: one line of series.csv each. */
SP_API const struct sp_sink *sp_report_files_sink(struct sp_report_files *f);

/* Writes the rest and puts the files in place. False with complaints. Frees in any case. */
SP_API bool sp_report_files_finish(struct sp_report_files *f, const struct sp_report *r);

/* Leaves nothing behind, and frees. NULL is fine. */
SP_API void sp_report_files_abandon(struct sp_report_files *f);

/* ---- a duct ---------------------------------------------------------------------------------------- */

/* One solved condition. */
struct sp_duct_point {
    double speed; /* m/s over the road; in.speed is through the air */
    int duct;      /* which of several unlike ones, from 1; 0: there is but one */
    double copies; /* equal ducts, whose flows and forces are told together; 0: one */
    struct sp_duct_inputs in;
    struct sp_duct_state state;
    struct sp_station station[SP_STATIONS];
    struct sp_duct_losses losses;
    const struct sp_duct_design *design; /* for the names of its cores and exits; NULL: they have numbers */
};

/* Solves the duct of a design for one road speed, with the design's air and wind; `heat` W to the air of one duct and
 * `fan_speed` of all fans as share of rated speed. Status as sp_duct_solve. */
SP_API enum sp_status sp_duct_point_solve(const struct sp_duct *duct, const struct sp_air_design *air,
                                          double speed, double heat, double fan_speed,
                                          struct sp_duct_point *out);

/* Station by station, and where each pascal goes. */
SP_API void sp_duct_point_text(const struct sp_duct_point *p, FILE *to);

/* {"points": [...]}. */
SP_API void sp_duct_points_json(const struct sp_duct_point *p, size_t count, FILE *to);

#ifdef __cplusplus
}
#endif
#endif
