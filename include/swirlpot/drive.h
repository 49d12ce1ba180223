/* swirlpot/drive.h - a drive: a design run over its steps, with what came of it.
 *
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SWIRLPOT_DRIVE_H
#define SWIRLPOT_DRIVE_H

#include "swirlpot/design.h"

#ifdef __cplusplus
extern "C" {
#endif

/* ---- what is recorded over time ------------------------------------------------------------------- */

/* Channels of a sample; name, unit and meaning stand in the table of channels.c. */
enum sp_channel {
    SP_CH_TIME, SP_CH_DISTANCE, SP_CH_SPEED, SP_CH_POWER, SP_CH_ENGINE_SPEED, SP_CH_AMBIENT,
    SP_CH_ENGINE_OUT, SP_CH_RADIATOR_IN, SP_CH_RADIATOR_OUT, SP_CH_PUMP_IN, SP_CH_METAL, SP_CH_TANK,
    SP_CH_WAX, SP_CH_GAUGE, SP_CH_MEASURED, SP_CH_LIFT, SP_CH_PUMP_FLOW, SP_CH_RADIATOR_FLOW,
    SP_CH_BYPASS_FLOW, SP_CH_AIR_FLOW, SP_CH_FACE_VELOCITY, SP_CH_EXIT_VELOCITY, SP_CH_AIR_OUT, SP_CH_FAN_SPEED,
    SP_CH_FAN_PRESSURE, SP_CH_FAN_POWER, SP_CH_TANK_PRESSURE, SP_CH_BOIL_MARGIN, SP_CH_LOST,
    SP_CH_HEAT_IN, SP_CH_HEAT_OUT, SP_CH_HEAT_SKIN, SP_CH_DRAG,
    /* From here on only where the part is fitted. */
    SP_CH_OIL, SP_CH_GEARBOX, SP_CH_CHARGE_IN, SP_CH_CHARGE_OUT, SP_CH_INTAKE, SP_CH_BAY, SP_CH_BAY_PRESSURE,
    SP_CH_LEAK_PAST, SP_CH_LEAK_OUTSIDE, SP_CH_BACKWARDS, SP_CH_SPILL, SP_CH_THRUST, SP_CH_FAN_CURRENT,
    SP_CH_BATTERY, SP_CH_NPSH_MARGIN, SP_CH_LOCAL_MARGIN, SP_CH_TANK_LEVEL,
    SP_CH_CORE, /* fluid out, air in, air flow, heat of the second core with a fluid, then of the next ... */
    SP_CH_FAN_MORE = SP_CH_CORE + 4 * 7, /* speed of the second kind of fan, then of the next ... */
    SP_CHANNELS = SP_CH_FAN_MORE + 5
};

struct sp_channel_info {
    const char *name;    /* "coolant_engine_out" */
    const char *unit;    /* as shown: "degC", "kPa", "1" */
    const char *meaning;
    double scale, offset; /* shown = (SI - offset) / scale */
};

SP_API const struct sp_channel_info *sp_channel_at(enum sp_channel c);

struct sp_sample {
    double value[SP_CHANNELS]; /* SI; NAN where nothing is fitted */
    const bool *fitted;        /* channels that this drive has */
};

/* Where samples go. Return false to stop the drive (counts as SP_INPUT: the file cannot be written). */
struct sp_sink {
    void *context;
    bool (*row)(void *context, const struct sp_sample *sample);
    bool (*again)(void *context); /* forget all rows, the drive begins anew; NULL: cannot, then it does not */
};

/* ---- events ------------------------------------------------------------------------------------------ */

enum sp_event_kind {
    SP_EV_STEP, SP_EV_ENGINE_STARTS, SP_EV_ENGINE_STOPS, SP_EV_FAN_ON, SP_EV_FAN_OFF,
    SP_EV_THERMOSTAT_OPENS, SP_EV_THERMOSTAT_FULL, SP_EV_THERMOSTAT_REGULATES, SP_EV_THERMOSTAT_SHUT,
    SP_EV_CAP_OPENS, SP_EV_CAP_SHUTS,
    SP_EV_COOLANT_OVER, SP_EV_COOLANT_BACK, SP_EV_GAUGE_OVER, SP_EV_GAUGE_BACK, SP_EV_METAL_OVER,
    SP_EV_METAL_BACK, SP_EV_BOIL_MARGIN_UNDER, SP_EV_BOIL_MARGIN_BACK, SP_EV_BOILING, SP_EV_BOILING_ENDS,
    SP_EV_PEAK, SP_EV_CHANGE,
    SP_EV_LOST, SP_EV_EMPTY, SP_EV_EMPTY_BACK, SP_EV_CAN, SP_EV_CAN_BACK, SP_EV_LOCAL, SP_EV_LOCAL_ENDS,
    SP_EV_CAVITATES, SP_EV_CAVITATION_ENDS,
    SP_EV_CURRENT, SP_EV_CURRENT_BACK, SP_EV_FLAT, SP_EV_FLAT_BACK, SP_EV_COLD_COOLANT, SP_EV_COLD_COOLANT_ENDS,
    SP_EV_COLD_OIL, SP_EV_COLD_OIL_ENDS,
    SP_EV_TIER, /* over and back: 6 times sp_limited, plus 2 times the tier (0 caution, 1 alarm, 2 stop), plus 1: back */
    SP_EVENT_KINDS = SP_EV_TIER + 36
};

/* What has limits in tiers. The stops of the first three have their own kinds of event. */
enum sp_limited { SP_LIMITED_COOLANT, SP_LIMITED_GAUGE, SP_LIMITED_METAL, SP_LIMITED_OIL, SP_LIMITED_GEARBOX,
                  SP_LIMITED_CHARGE, SP_LIMITED };

enum sp_severity { SP_SEVERITY_NOTE, SP_SEVERITY_CAUTION, SP_SEVERITY_ALARM, SP_SEVERITY_STOP };

SP_API const char *sp_event_text(enum sp_event_kind kind); /* "fan on" */
SP_API const char *sp_severity_text(enum sp_severity s);   /* "caution" */

struct sp_event {
    enum sp_event_kind kind;
    double time, distance; /* s, m */
    double coolant;        /* K, jacket outlet then */
    size_t step;           /* index of the drive's step */
    const char *mark;      /* owned by the drive; NULL when there is none */
    const char *place;     /* "jacket", "duct 2, fan 1"; static; NULL: of the whole car */
    enum sp_severity severity;
};

/* Something that was over its limit or failed, over the whole drive. */
struct sp_failure {
    enum sp_event_kind kind; /* of the event that says it */
    const char *place;
    enum sp_severity severity;
    double time, distance;   /* of the first time */
    size_t step;
    const char *mark;
    double worst, worst_time; /* the most it was beyond its limit, SI */
    const char *unit;         /* of worst as shown: worst over scale */
    double scale;
    double over;              /* s in all */
    double share;             /* worst over what counts as grave: see docs/model.md 16 */
};

/* ---- the result -------------------------------------------------------------------------------------- */

/* A change of the car during the drive, and how long it then was until a limit that stops it was broken. */
struct sp_told_change {
    const char *text;          /* what was set; the design's */
    double time;               /* s; NAN: the drive ends before it */
    double to_limit;           /* s; 0: a limit was over already; NAN: none is broken after it */
    enum sp_event_kind broken; /* event of that limit; SP_EVENT_KINDS: none */
};

struct sp_peak { double value, time, distance; size_t step; const char *mark; };

/* A limit that decides, and how near the drive came to it. */
enum { SP_ROOM_BOIL = 3, SP_ROOMS = 7 }; /* coolant, gauge, metal, boil margin, oil, gearbox, charge */
/* K; NAN: none. Where a change moved the limit: when it was nearest. */
struct sp_room { double limit, came_to, left; };

struct sp_result {
    bool survives;
    const char *limit;         /* key of the limit that binds: the broken one first in time, else the closest */
    struct sp_room room[SP_ROOMS];
    struct sp_peak coolant, gauge, metal; /* K */
    struct sp_peak oil, gearbox, charge;  /* K; NAN where not fitted */
    struct sp_peak boil_margin;           /* least, K */
    struct sp_peak tank_pressure;         /* highest, Pa absolute */
    double margin;             /* K, coolant limit less peak; NAN without that limit */
    double over_ambient;       /* K, the most that coolant stood over ambient */
    double time_over_limit;    /* s with the coolant over its limit */
    double time_above_band;    /* s with the thermostat fully open */
    double duration, distance; /* s, m */
    struct { double in, out_air, out_skin, stored, error; } ledger; /* J, relative */
    /* -, J; of the energy what spilled air takes and the heat's thrust gives: 0 where the design does not count it. */
    struct { double mean_coefficient, energy, spill, thrust; } drag;
    struct { double on, energy; } fan;                              /* s that any runs, J */
    struct { const char *place; double on; } each_fan[6];           /* s, of each kind of fan */
    size_t fan_kinds;
    double liquid_lost;        /* m3 through the cap */
    double tank_left;          /* m3 of coolant that the tank holds at its filling temperature */
    double pump_head_left;     /* least share of the pump's rise that cavitation left; NAN: not watched */
    struct { double used, left; } battery; /* J drawn with the engine off, share left; NAN: not watched */
    struct {                   /* against the trace's measured coolant; NAN where there is none */
        double rms, warmup_rms, time_to_85, measured_time_to_85;    /* K, K, s, s */
        double none_rms, none_warmup_rms; /* of no model at all: straight line to the set point, then constant */
    } measured;
    struct sp_event *event;
    size_t events;
    struct sp_failure *failure; /* by the time each began */
    size_t failures;
    struct sp_told_change *change; /* as many and in the same order as the design has */
    size_t changes;
    const struct sp_failure *first, *worst; /* of these, cautions aside; NULL: nothing failed */
    struct { long steps, rates, jacobians, roots, restarts; } work;
};

/* A design with its schedule and circuit made ready; read-only in a run. */
struct sp_drive;

/* Builds; NULL with complaints. The design must outlive the drive. */
SP_API struct sp_drive *sp_drive_build(struct sp_units *u, const struct sp_design *d,
                                       struct sp_complaints *complaints, struct sp_complaints *cautions);
SP_API void sp_drive_free(struct sp_drive *drive);

/* What the traces said of work when power came from speed; zeros otherwise. J. */
struct sp_work { bool from_road; double wheel, kinetic, potential, drag, rolling, brakes; };
SP_API struct sp_work sp_drive_work(const struct sp_drive *drive);

struct sp_run_options {
    double interval;            /* s between samples; 0: 1 s */
    double tolerance;           /* relative; 0: the design's */
    const struct sp_sink *sink; /* NULL: no samples */
};

/* Runs; should the ledger not close, again at a tenth of the tolerance, twice at most. SP_OK survives, SP_NOT
 * overheats, SP_NUMERICS with a complaint, SP_INPUT when the sink stops it.
 * *out is freed with sp_result_free whatever came. Marks in it live as long as the drive. */
SP_API enum sp_status sp_drive_run(const struct sp_drive *drive, const struct sp_run_options *options,
                                   struct sp_result *out, struct sp_complaints *complaints);
SP_API void sp_result_free(struct sp_result *r);

#ifdef __cplusplus
}
#endif
#endif
