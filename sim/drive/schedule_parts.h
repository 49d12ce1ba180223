/* schedule_parts.h - the schedule while it is being built. Internal to schedule*.c.
 *
 * schedule.c joins the steps, schedule_trace.c makes rows of a trace, schedule_stopped.c finds engine speeds
 * that a log has lost, schedule_engine.c says what the engine does at a row, schedule_merge.c coarsens rows,
 * schedule_run_on.c sets what runs on after a stop, schedule_work.c checks the road load's work,
 * schedule_rows.c holds rows, schedule_step.c lays over them what a step says of traffic, key and blower,
 * schedule_change.c cuts them where the design changes.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SP_DRIVE_SCHEDULE_PARTS_H
#define SP_DRIVE_SCHEDULE_PARTS_H

#include "drive/schedule.h"
#include "part/engine.h"

#define SP_SCHEDULE_SPAN 8.64e6 /* s, of one step with its repeats: 100 days */
#define SP_OFF_SHARE 0.3 /* of idle speed: below it the engine is off */

enum { SP_SCHEDULE_ROWS = 20000000 }; /* most rows of a drive: 3 GB */

/* ---- rows ------------------------------------------------------------------------------------- */

/* A schedule that grows; `table.distance` stays NULL until the end, the flags hold those of engine, key
 * and bonnet only. */
struct sp_rows {
    struct sp_schedule table;
    size_t room, mark_room;
};

struct sp_row {
    double time;
    double in[SP_INPUTS];
    unsigned char flags;
};

/* All return false when memory ran out or there are too many rows. */
bool sp_rows_reserve(struct sp_rows *r, size_t rows);
bool sp_rows_push(struct sp_rows *r, const struct sp_row *row, unsigned short step);
bool sp_rows_mark(struct sp_rows *r, size_t row, const char *text);

/* Puts `from` behind what `to` holds, in time too. Where the last row of `to` and the first of `from` agree
 * in all channels and flags they become one. */
bool sp_rows_append(struct sp_rows *to, const struct sp_rows *from);

/* A double row at time `at` (within segment k, or at its begin) for each entry, which are sorted. */
struct sp_row_insertion {
    size_t segment;
    double at;
};
bool sp_rows_insert(struct sp_rows *r, const struct sp_row_insertion *insertion, size_t count);

/* Row `from` becomes row `to`. */
void sp_rows_move(struct sp_schedule *s, size_t from, size_t to);

/* ---- merging ---------------------------------------------------------------------------------- */

/* Takes a step's rows one by one and puts the merged ones into `to`. See schedule_merge.c. */
struct sp_merge_span {
    size_t segments;   /* 0: nothing in it */
    double begin, end; /* s */
    size_t source;     /* source row at its end */
    double first[SP_INPUTS], last[SP_INPUTS];
    double area[SP_INPUTS], moment[SP_INPUTS]; /* integrals of f and of f (t - begin) */
    double least[SP_INPUTS], most[SP_INPUTS];
};

struct sp_merge {
    struct sp_rows *to;
    double width; /* s; 0: nothing is merged */
    unsigned short step;
    const struct sp_mark *mark; /* of the source, by source row */
    size_t marks, next_mark, scan_mark;
    bool begun;                       /* a stretch is going on */
    unsigned char flags;              /* of the stretch */
    struct sp_merge_span before, now; /* the last span, kept open, and the growing one */
    struct {                          /* the node at the left end of `before`, or of `now` */
        double time, sum[SP_INPUTS], weight, value[SP_INPUTS], least[SP_INPUTS], most[SP_INPUTS];
        size_t source;
    } node;
    size_t pushed;
    bool failed;
};

void sp_merge_begin(struct sp_merge *m, struct sp_rows *to, double width, unsigned short step,
                    const struct sp_mark *mark, size_t marks);
/* `source` is the row's number in the trace. A row at which a mark begins stays where it is. */
void sp_merge_push(struct sp_merge *m, const struct sp_row *row, size_t source);
/* Ends a continuous stretch: a jump follows, or nothing. */
void sp_merge_break(struct sp_merge *m);

/* Drops rows that lie on the straight line between their neighbours within 1e-9 of each channel's range. */
void sp_rows_thin(struct sp_rows *r);

/* ---- the engine at a row ---------------------------------------------------------------------- */

/* Where power comes from, in order of preference. */
enum sp_power_source {
    SP_POWER_COLUMN,
    SP_POWER_TORQUE,
    SP_POWER_FUEL,
    SP_POWER_AIR,
    SP_POWER_THROTTLE,
    SP_POWER_ROAD,
    SP_POWER_NONE /* not asked for: the heat is given */
};
enum sp_speed_source { SP_ENGINE_COLUMN, SP_ENGINE_GEAR, SP_ENGINE_SHIFTED, SP_ENGINE_ASSUMED };

/* What is known at one instant; NAN where nothing. */
struct sp_moment {
    double speed, air_speed, acceleration, grade; /* acceleration and grade: road load only */
    double density;
    double power, torque, engine_speed, fuel_flow, air_flow, throttle, gear, heat;
};

struct sp_engine_sources {
    const struct sp_design *design;
    const struct sp_engine_law *law;
    enum sp_power_source power;
    enum sp_speed_source speed;
    bool lacks_flow; /* the heat law wants a flow that the trace has not */
};

/* Wheel power of the road load by its parts, W: rolling, climbing, drag, speeding up; and what the brakes
 * take of it. */
struct sp_wheel_power {
    double rolling, climb, drag, inertia, brakes;
};

/* Fills power, engine speed, heats and charge air of a row. `wheel` is filled when power comes from the road;
 * may be NULL. Returns what the energy cap took off the heat, W. */
double sp_engine_row_fill(const struct sp_engine_sources *s, const struct sp_moment *at, double in[SP_INPUTS],
                          struct sp_wheel_power *wheel);

/* Heats and charge air from power [W] and speed [rev/s] in `row`, and a heat [W] that was measured (NAN:
 * none). Returns as above. */
double sp_engine_row_heat(const struct sp_design *d, const struct sp_engine_law *law,
                          const struct sp_engine_row *row, double heat, double in[SP_INPUTS]);

/* Engine speed [rev/s] below which the engine is off; with a given heat none. */
double sp_off_speed(const struct sp_engine *e);

/* True when the body holds what the road load needs. */
bool sp_road_load_known(const struct sp_body *b);

double sp_density_of(const struct sp_design *d, double ambient, double pressure);

/* ---- the parts -------------------------------------------------------------------------------- */

/* The whole build. */
struct sp_scheduling {
    struct sp_units *units;
    const struct sp_design *design;
    struct sp_engine_law *law;
    struct sp_rows rows;
    struct sp_complaints *complaints, *cautions;
    bool failed;
    double datum; /* altitude [m] at which air.pressure holds in the traces' own count; NAN: none seen yet */
    double base, base_pressure; /* m, Pa: where air.pressure belongs in the standard atmosphere */
    double pressure;            /* Pa, at the end of what is built so far */
    double work_done;           /* J put into the wheels by the engine, what the sum of work is judged by */
    bool cautioned_speed, cautioned_throttle, cautioned_flow;
};

void sp_schedule_fault(struct sp_scheduling *b, size_t step, const char *key, const char *found,
                       const char *expected);
void sp_schedule_caution(struct sp_scheduling *b, size_t step, const char *found, const char *expected);
void sp_schedule_caution_sources(struct sp_scheduling *b, size_t step, const struct sp_engine_sources *s);

/* A caution when power somewhere in a step is far above rated power. */
void sp_schedule_caution_power(struct sp_scheduling *b, size_t step, double most);
/* A caution when the energy cap took so much [W] off the heat somewhere in a step. */
void sp_schedule_caution_cap(struct sp_scheduling *b, size_t step, double cut);

/* True of an engine that stands and yet gives power [W]; false where either is NAN. */
bool sp_schedule_stopped(const struct sp_engine *e, double engine_speed, double power);

/* Rows that say so are a complaint, or with layout.repair get the last good engine speed, counted. False
 * after a complaint. */
bool sp_schedule_find_speeds(struct sp_scheduling *b, size_t step, struct sp_trace *trace,
                             const struct sp_engine_sources *sources);

/* Reads the trace of a step and puts its rows, merged, into `to` (empty). False when it failed. */
bool sp_schedule_trace(struct sp_scheduling *b, size_t step, struct sp_rows *to);

/* Adds what the engine does at the wheels over a segment, by trapezoids as the schedule has it, and what
 * becomes of it, worked out from speeds, heights and forces instead. `rise` in m; NAN: from the grade. */
void sp_schedule_add_work(struct sp_scheduling *b, struct sp_schedule *s, const struct sp_row row[2],
                          const struct sp_wheel_power wheel[2], double rise);
/* A caution when the two differ by more than 0.1 % of the engine's work at the wheels. */
void sp_schedule_check_work(struct sp_scheduling *b);

/* Flags that a step sets besides the engine's. */
unsigned char sp_schedule_step_flags(const struct sp_step *step);

/* What a step does to a row's air: the car it follows, the blower. `ambient_told`: the row's ambient comes from the
 * trace, and holds any warmth already. */
void sp_schedule_step_air(const struct sp_step *step, bool ambient_told, double in[SP_INPUTS]);

/* A jump at each change of the design, and which variant holds where; the last of all. False: no memory. */
bool sp_schedule_changes(struct sp_rows *r, const struct sp_design *d);
/* A caution for each entry of which a change lies at the drive's end or past it. */
void sp_schedule_caution_changes(struct sp_scheduling *b);

/* Sets the flags of pump and fan over the whole drive. False: no memory. */
bool sp_schedule_run_on(struct sp_rows *r, const struct sp_design *d);

/* Slope of altitude over distance along the road (a sine), by row: the mean over `half` metres to either
 * side, cut off at the ends of the trace. `distance` does not fall. */
void sp_schedule_slope(size_t rows, const double *distance, const double *altitude, double half,
                       double *slope);

/* Acceleration as the difference over the two neighbours, one-sided at ends and jumps: with trapezoids over
 * the rows its work is then exactly the change of kinetic energy, however uneven the rows. */
void sp_schedule_acceleration(size_t rows, const double *time, const double *speed, double *acceleration);

#endif
