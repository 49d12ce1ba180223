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
    SP_CHANNELS
};

struct sp_channel_info {
    const char *name;    /* "coolant_engine_out" */
    const char *unit;    /* as shown: "degC", "kPa", "1" */
    const char *meaning;
    double scale, offset; /* shown = (SI - offset) / scale */
};

SP_API const struct sp_channel_info *sp_channel_at(enum sp_channel c);

struct sp_sample { double value[SP_CHANNELS]; }; /* SI */

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
    SP_EV_PEAK, SP_EV_CHANGE, SP_EVENT_KINDS
};

SP_API const char *sp_event_text(enum sp_event_kind kind); /* "fan on" */

struct sp_event {
    enum sp_event_kind kind;
    double time, distance; /* s, m */
    double coolant;        /* K, jacket outlet then */
    size_t step;           /* index of the drive's step */
    const char *mark;      /* owned by the drive; NULL when there is none */
};

/* ---- the result -------------------------------------------------------------------------------------- */

struct sp_peak { double value, time, distance; size_t step; const char *mark; };

struct sp_result {
    bool survives;
    const char *limit;         /* key of the limit that binds: the broken one first in time, else the closest */
    struct sp_peak coolant, gauge, metal; /* K */
    struct sp_peak boil_margin;           /* least, K */
    struct sp_peak tank_pressure;         /* highest, Pa absolute */
    double margin;             /* K, coolant limit less peak; NAN without that limit */
    double over_ambient;       /* K, the most that coolant stood over ambient */
    double time_over_limit;    /* s with the coolant over its limit */
    double time_above_band;    /* s with the thermostat fully open */
    double duration, distance; /* s, m */
    struct { double in, out_air, out_skin, stored, error; } ledger; /* J, relative */
    struct { double mean_coefficient, energy; } drag;               /* -, J */
    struct { double on, energy; } fan;                              /* s, J */
    double liquid_lost;        /* m3 through the cap */
    struct {                   /* against the trace's measured coolant; NAN where there is none */
        double rms, warmup_rms, time_to_85, measured_time_to_85;    /* K, K, s, s */
        double none_rms, none_warmup_rms; /* of no model at all: straight line to the set point, then constant */
    } measured;
    struct sp_event *event;
    size_t events;
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
