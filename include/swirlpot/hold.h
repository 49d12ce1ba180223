/* swirlpot/hold.h - one speed and one power held for as long as it takes: where the car settles.
 *
 * A point is a drive of one `hold` (or `idle`) from the case's start. It is followed until nothing moves any
 * more, and then solved as a steady problem; or until it is known to swing, to drift on or to run away.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SWIRLPOT_HOLD_H
#define SWIRLPOT_HOLD_H

#include "swirlpot/circuit.h"
#include "swirlpot/drive.h"

#ifdef __cplusplus
extern "C" {
#endif

/* What is held. With neither power nor grade the road is level; standing still as well, the engine idles. */
struct sp_hold_wish {
    double speed;        /* m/s over the road, >= 0 */
    double power;        /* W at the crank; NAN: from the road load */
    double grade;        /* rise over run; NAN: not given */
    double engine_speed; /* rev/s; NAN: from the gears */
};

enum sp_hold_kind {
    SP_HOLD_SETTLES,  /* comes to rest */
    SP_HOLD_SWINGS,   /* a lasting cycle: a switched fan, a hunting thermostat, a pulsing pump */
    SP_HOLD_DRIFTS,   /* still moves when the time is over */
    SP_HOLD_RUNS_AWAY /* hotter than anything that is still a car */
};

/* What is judged, in the order of struct sp_hold_point.limit. */
enum sp_hold_judged {
    SP_HOLD_COOLANT,
    SP_HOLD_GAUGE,
    SP_HOLD_METAL,
    SP_HOLD_OIL,
    SP_HOLD_GEARBOX,
    SP_HOLD_CHARGE,
    SP_HOLD_BOIL_MARGIN,
    SP_HOLD_LIMITS
};

struct sp_hold_limit {
    const char *key; /* "limits.coolant" */
    double limit;    /* K; NAN: none */
    double value;  /* K, where it comes to rest, or the worst of the cycle; NAN: no such thing in this car */
    double left;   /* K of room, negative when broken; NAN without limit */
    double passed; /* s from the start at which it was first passed; INFINITY: never */
};

/* One duct as it is then. Equal ducts side by side count as `copies`. */
struct sp_hold_duct {
    double copies;
    struct sp_duct_inputs in;
    struct sp_duct_state state;
    struct sp_station station[SP_STATIONS];
    struct sp_duct_losses losses;
};

enum { SP_HOLD_DUCTS = 6 };

struct sp_hold_point {
    struct sp_hold_wish wish;
    enum sp_hold_kind kind;
    bool holds;   /* comes to rest, or to a lasting cycle, within all limits */
    double lasts; /* s from the start to the first limit passed on the way to rest beyond it; INFINITY */
    struct sp_hold_limit limit[SP_HOLD_LIMITS];
    int binds;         /* the limit broken first, else the one with least room; -1: none is given */
    double followed;   /* s of drive that were integrated */
    double rest_after; /* s from which on the coolant stays within 1 K of its rest; NAN when there is none */
    struct {           /* of the coolant at the engine's outlet over the last cycles; at rest all the same */
        double least, most, mean; /* K */
        double period;            /* s; 0 at rest, NAN when no cycle is seen */
        double fan;               /* share of time in which a fan is asked to run */
    } coolant;
    struct sp_sample at;         /* everything at rest, or at the hottest moment of the cycle */
    double oil, gearbox, charge; /* K then; NAN: not there */
    double air_in;               /* K of the air that meets the first coolant core */
    double boiling;              /* K, boiling point at the jacket outlet at the pressure there */
    double air_to_water;         /* K, engine outlet over ambient */
    double air_to_boil;          /* K, air temperature at which it would boil, other things equal: boiling -
                                    air_to_water */
    double air_to_boil_100;      /* K, the same with 373.15 K in place of `boiling`, as SAE J1393 has it */
    double ceiling; /* K, ambient at which the coolant would meet its limit, one to one; NAN without limit */
    double dissipation; /* W/K, heat of the coolant's cores over (coolant in - air in) */
    struct {
        double in, air, skin, error;
    } heat; /* W, mean over the cycle; (in - air - skin) / in */
    struct sp_hold_duct duct[SP_HOLD_DUCTS];
    size_t ducts;
};

/* Solves one point; `d` is a whole design, whose own drive and changes are left aside. SP_OK within all
 * limits, SP_NOT beyond some; SP_INPUT with complaints (power and grade given and contradicting each other by
 * more than 1 %, no road load); SP_NUMERICS with a complaint. */
SP_API enum sp_status sp_hold_solve(struct sp_units *u, const struct sp_design *d,
                                    const struct sp_hold_wish *w, struct sp_hold_point *out,
                                    struct sp_complaints *complaints, struct sp_complaints *cautions);

/* The air temperature [K] at which the point just holds limits.coolant, solved anew at each trial: the air
 * thins and the thermostat opens on the way. Good to 1 mK, -60 degC to 70 degC (moist air: -45 degC to 59.8
 * degC); -INFINITY or INFINITY beyond that, then and without a limit (NAN) SP_NOT. */
SP_API enum sp_status sp_hold_ceiling(struct sp_units *u, const struct sp_design *d,
                                      const struct sp_hold_wish *w, double *ambient,
                                      struct sp_complaints *complaints);

/* ---- written out ----------------------------------------------------------------------------------- */

/* Points solved, with the design; `ceiling` one a point, or NULL when it was not asked for. */
struct sp_hold_report {
    const struct sp_design *design;
    const struct sp_hold_point *point;
    const double *ceiling;
    size_t points;
};

/* One point: a page. Several: a table, one line a point. At most 80 columns. */
SP_API void sp_hold_text(const struct sp_hold_report *r, FILE *to);

/* {"points": [...]}. */
SP_API void sp_hold_json(const struct sp_hold_report *r, FILE *to);

#ifdef __cplusplus
}
#endif
#endif
