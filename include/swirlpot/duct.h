/* swirlpot/duct.h - the air's way through a car, as numbers in SI: inlet, diffuser, cores, fans, exits.
 *
 * The same rules as in part.h: filled by the case reader or by hand, read-only from then on; NAN in an
 * optional field means "not given", as do NULL and 0 counts where said. Keys, defaults, ranges and the
 * basis of each stand in docs/case-file.md. A field that is zero leaves its effect out.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SWIRLPOT_DUCT_H
#define SWIRLPOT_DUCT_H

#include "swirlpot/fluid.h"

#ifdef __cplusplus
extern "C" {
#endif

/* A table of numbers as read from a case: `rows` x `columns`, row by row. Owned by the design. */
struct sp_table {
    size_t rows, columns;
    double *cell;
};

/* Head or pressure over volume flow: either the parabola a0 - c Q^2 or pairs. See curve.h. */
struct sp_curve_design {
    double shutoff, free_flow; /* Pa, m3/s; NAN when pairs are given */
    struct sp_table pairs;     /* [m3/s, Pa] */
};

/* One hydraulic resistance: drop at a flow, for coolant of 1000 kg/m3 and viscosity 0.7 mPa s. */
struct sp_resistance { double flow, drop; }; /* m3/s, Pa */

/* ---- duct ---------------------------------------------------------------------------------------- */

struct sp_inlet {
    double area;      /* m2 */
    double recovery;  /* (total pressure available - ambient)/q */
    double lip_loss;  /* k on rho/2 max(V1-V,0)^2 */
    double screen;    /* loss coefficient of mesh on inlet head */
    double blocked;   /* share of the opening that is taped or filled with grass, 0..0.99 */
    double layer_thickness, height; /* m: boundary layer ahead of a slot of that height; 0: thin */
    struct sp_table recovery_table; /* [capture ratio V1/V, recovery] instead of `recovery`; 0 rows: none */
    double recirculated;            /* share of the air behind the cores that is drawn in again, standing ... */
    double recirculation_ends;      /* ... and the speed [m/s] through the air at which that has ceased */
    double preheat_standing, preheat_moving; /* K over ambient of the air at the inlet, at 0 and from 50 km/h on */
    bool spill;        /* count the drag of air that is spilled ... */
    double lip_suction; /* ... less this share of it that the lip's suction gives back */
};

enum sp_diffuser_law { SP_DIFFUSER_GIVEN, SP_DIFFUSER_SUDDEN, SP_DIFFUSER_CONICAL, SP_DIFFUSER_ONE_PLANE };

struct sp_diffuser_design {
    enum sp_diffuser_law kind;
    double loss;       /* on inlet head, when given */
    double length;     /* m */
    double height;     /* m of the inlet, in the plane that opens (one plane) */
    bool core_damping; /* the core's resistance damps the stall; a proposal without published coefficients */
    double jet_share;  /* share of the face that a stalled diffuser blows upon; 0: the jet is spread evenly */
};

enum sp_drop_law { SP_DROP_COEFFICIENT, SP_DROP_LINEAR, SP_DROP_TABLE, SP_DROP_FINS };
enum sp_core_heat_law { SP_CORE_NO_HEAT, SP_CORE_POWER, SP_CORE_MAKER, SP_CORE_FINS };

/* What flows inside a core. */
enum sp_medium {
    SP_CARRIES_COOLANT,
    SP_CARRIES_OIL,      /* the engine's oil */
    SP_CARRIES_GEARBOX,  /* the oil of gearbox or final drive */
    SP_CARRIES_CHARGE,   /* charge air */
    SP_CARRIES_LOAD      /* a condenser or the like: its heat is given */
};
enum sp_fin_kind { SP_FINS_LOUVRED, SP_FINS_PLATE };

struct sp_core {
    enum sp_medium carries;
    bool in_series;                 /* coolant comes from the coolant core before it, not from the hose */
    double heat_load;               /* W to the air, SP_CARRIES_LOAD */
    double span_from, span_to;      /* share of the duct's section that it stands in, 0..1; both 0: all of it */
    double blocked;                 /* share of the face that is shut, 0..0.99 */
    double unevenness;              /* standard deviation over mean of the face velocity, given */
    double angle, angle_loss;       /* rad from square-on to the air; c in c tan^2(angle) on face head */
    double air_fouling, coolant_fouling; /* m2K/W, with fins and tubes */
    bool down_flow;                 /* tubes run along the height */
    enum sp_fin_kind fin_kind;
    double tube_diameter, tube_pitch_along; /* m, round tubes through plate fins; pitch from row to row */
    double width, height, depth;    /* m */
    double free_area_ratio;         /* sigma */
    enum sp_drop_law drop_law;
    double coefficient;             /* on face head, front density */
    double linear, quadratic;       /* Pa s/m, Pa s2/m2 */
    struct sp_table drop_table;     /* [m/s, Pa] */
    double at_density;              /* kg/m3 */
    double at_temperature;          /* K; NAN: no viscosity correction */
    /* fins and tubes (louvred fin, flat tube) */
    double fin_pitch, fin_thickness, fin_conductivity;
    double louvre_pitch, louvre_angle, louvre_length; /* angle in rad */
    double tube_pitch, tube_height, tube_wall;
    double rows, passes;
    /* heat */
    enum sp_core_heat_law heat_law;
    double air_conductance, air_exponent, at_face_velocity, heat_at_density;
    double coolant_conductance, coolant_exponent, at_coolant_flow; /* at 50/50 glycol 90 degC; kg/s */
    struct sp_table heat_velocity, heat_flow; /* m/s, kg/s: one column each */
    struct sp_table heat_per_kelvin;          /* W/K, velocity rows x flow columns */
    double heat_factor;                       /* on the air-side and coolant-side conductance */
    double metal_capacity, coolant_volume;    /* J/K, m3 */
    struct sp_resistance drop;                /* coolant side; flow NAN: from tubes */
    double cells;                             /* number of cells along the coolant path */
    char *name;                               /* owned by the design; NULL: none */
};

enum sp_place_of { SP_AT_ENGINE_OUT, SP_AT_RADIATOR_OUT };
enum sp_fan_law { SP_FAN_SWITCHED, SP_FAN_PROPORTIONAL, SP_FAN_ALWAYS, SP_FAN_NEVER };

enum sp_fan_health { SP_FAN_SOUND, SP_FAN_DEAD, SP_FAN_LOCKED }; /* dead: windmills; locked: stands */

struct sp_fan {
    bool fitted;
    enum sp_fan_health health;
    double locked_loss;           /* on annulus head, standing still */
    double span_from, span_to;    /* share of the duct's section under its shroud; both 0: all of it. Fans of one
                                   * duct with the same span share a shroud */
    double flap_area, flap_loss;  /* m2 of one-way flaps in the shroud, loss on the speed in them */
    double wiring_drop;           /* V lost between battery and plug at rated current */
    double current_limit;         /* A of its fuse or winding, one fan; 0: not watched */
    double count;
    struct sp_curve_design curve; /* one fan, at rated speed, 1.2 kg/m3 */
    bool static_basis;            /* curve is static pressure; else total */
    bool before_core;
    double diameter, hub;         /* m; diameter NAN: not known */
    double windmill_loss;         /* on annulus head */
    double rated_voltage;         /* V */
    double power;                 /* W electrical, one fan at rated voltage */
    double spin_up;               /* s */
    enum sp_fan_law law;
    double on, off;               /* K (switched) */
    double from, to, least;       /* K, K, share of full speed at `from` (proportional) */
    enum sp_place_of sensor;
    double run_on;                /* s after the engine stops during which it may run */
};

struct sp_exit {
    double area, loss;           /* m2; k on exit head */
    double pressure_coefficient; /* Cp */
    double angle;                /* rad to the stream */
    char *place;                 /* where it is, in words; owned by the design; NULL: not said */
};

enum { SP_DUCTS = 4, SP_CORES = 5, SP_FANS = 3, SP_EXITS = 8 }; /* at most, in a car or a duct */

/* A gap: flow through an opening with loss coefficient k on the speed in it. */
struct sp_leak {
    double area;        /* m2; 0: gap times length ... */
    double gap, length; /* m; ... and where that is 0 too there is none */
    double coefficient, pressure_coefficient; /* k; Cp of where it leads */
};

struct sp_duct_design {
    double count;       /* equal ducts; 0: one */
    bool in_series;     /* coolant goes through equal ducts one after the other */
    size_t cores, exits; /* in the lists below; 0: one. Cores stand in the order the air meets them */
    struct sp_leak past_core; /* from ahead of the cores to behind them */
    struct sp_leak outside;   /* from ahead of the cores to outside */
    double interference;      /* m2, drag area that the duct adds (or takes) on the outside, all equal ducts */
    double bay_skin;          /* share of the engine's skin heat that this duct's bay takes up, 0..1 */
    struct sp_inlet inlet;
    struct sp_diffuser_design diffuser;
    struct sp_core core[SP_CORES];
    struct sp_fan fan[SP_FANS];
    struct sp_exit exit[SP_EXITS];
};

#ifdef __cplusplus
}
#endif
#endif
