/* swirlpot/design.h - the whole design: parts, sensors, limits, and the drive to be driven.
 *
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SWIRLPOT_DESIGN_H
#define SWIRLPOT_DESIGN_H

#include "swirlpot/part.h"
#include "swirlpot/trace.h"

#ifdef __cplusplus
extern "C" {
#endif

/* ---- sensors, limits, start, drive --------------------------------------------------------------- */

struct sp_gauge {
    enum sp_place_of place;
    double lag, offset; /* s, K */
};

/* Limits of one temperature, K; NAN: none. Only `stop` decides whether the car survives. */
struct sp_tiers { double caution, alarm, stop; };

struct sp_limits {
    struct sp_tiers coolant, gauge, metal, oil, gearbox, charge; /* keys: limits.coolant is .coolant.stop */
    double boil_margin;               /* K, least; NAN: none */
    double least_coolant, least_oil;  /* K, wanted before power above `load` [W] is asked for; NAN: none */
    double load;
};

struct sp_start {
    double coolant, metal, radiator; /* K; NAN metal and radiator: as coolant */
    double oil, gearbox;             /* K; NAN: as coolant */
};

enum sp_step_kind { SP_STEP_TRACE, SP_STEP_IDLE, SP_STEP_HOLD, SP_STEP_SOAK };

struct sp_step {
    enum sp_step_kind kind;
    char *trace;                    /* path to open: the case's own text, from where the case stands */
    double time;                    /* s, the other kinds */
    double speed, power, engine_speed, grade; /* hold; power NAN: from road load */
    double repeat;                  /* times, 1.. */
    double smooth;                  /* s half-width for the speed of a trace, 0: none */
    double following;               /* m behind another car; NAN or 0: none */
    bool key_on;                    /* soak: pump and fans may run on the battery */
    bool bonnet_up;                 /* the bay is open: see docs/model.md */
    double blower;                  /* m3/s that a blower on the ground puts into each inlet */
    struct sp_trace_format format;  /* headings and units owned by the design */
};

struct sp_solver {
    double tolerance; /* relative */
    double merge;     /* s: rows finer than this are merged */
};

/* What changes during a drive: from `at` on the design is `to`. */
struct sp_change {
    double at;            /* s from the start of the drive */
    char *text;           /* what is set, for events: "duct.inlet.blocked=40 %" */
    struct sp_design *to; /* the whole design from then on, owned; its own `change` is empty */
    size_t entry;         /* which of the case's `changes` it is of ... */
    char *file;           /* ... and where that stands, owned */
    long line;            /* 0: not known */
};

/* The whole design. Build with sp_case_read (paper.h), free with sp_design_free. */
struct sp_design {
    char *title;
    struct sp_air_design air;
    struct sp_body body;
    struct sp_engine engine;
    struct sp_electrics electrics;
    struct sp_coolant_design coolant;
    struct sp_pump pump;
    struct sp_thermostat thermostat;
    struct sp_hoses hoses;
    struct sp_oil oil, gearbox;
    struct sp_charge charge;
    struct sp_tank tank;
    struct sp_duct_design duct[SP_DUCTS];
    size_t ducts; /* 0: one */
    struct sp_gauge gauge;
    struct sp_limits limits;
    struct sp_start start;
    struct sp_step *step;
    size_t steps;
    struct sp_change *change; /* by time */
    size_t changes;
    struct sp_solver solver;
    char *file; /* the case's file, for complaints and relative paths */
};

SP_API void sp_design_free(struct sp_design *d);

#ifdef __cplusplus
}
#endif
#endif
