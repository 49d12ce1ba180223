/* swirlpot/part.h - what a car's cooling consists of, as numbers in SI.
 *
 * Plain structs, filled by the case reader (paper.h) or by hand (then within the ranges of
 * docs/case-file.md, which nothing checks again); read-only from then on. Everything is
 * SI and kelvin; rotation is in rev/s. NAN in an optional field means "not given", as do NULL and 0
 * counts where said. Keys, defaults, ranges and the basis of each stand in docs/case-file.md, made from
 * the same tables that read a case.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#ifndef SWIRLPOT_PART_H
#define SWIRLPOT_PART_H

#include "swirlpot/fluid.h"

#ifdef __cplusplus
extern "C" {
#endif

/* A table of numbers as read from a case: `rows` x `columns`, row by row. Owned by the design. */
struct sp_table {
    size_t rows, columns;
    double *cell;
};

/* ---- air and body ----------------------------------------------------------------------------- */

struct sp_air_design {
    double ambient;  /* K */
    double pressure; /* Pa; from altitude when that was given */
    double altitude; /* m geometric; NAN when pressure was given */
    double humidity; /* 0..1 */
    double wind;     /* m/s, head wind positive */
};

struct sp_body {
    double mass, frontal_area; /* kg, m2 */
    double drag_coefficient;   /* as measured on the car: holds its cooling drag already */
    double rolling;            /* rolling resistance coefficient */
    double rotating;           /* effective mass over mass, 1.04 typical */
    double driveline;          /* efficiency crank to road, 0..1 */
    double wheel_radius;       /* m */
    struct sp_table gears;     /* overall ratios crank/wheel, one column, falling; 0 rows: none */
    double shift_speed;        /* rev/s at which the next gear is taken */
};

/* ---- engine ------------------------------------------------------------------------------------ */

enum sp_heat_law { SP_HEAT_RATED, SP_HEAT_TABLE, SP_HEAT_FUEL, SP_HEAT_AIR };

struct sp_engine {
    double displacement;              /* m3 */
    double rated_power, rated_speed;  /* W, rev/s */
    double idle_speed;                /* rev/s */
    enum sp_heat_law heat_law;
    double heat_fraction;             /* heat to coolant over brake power, rated */
    double heat_exponent;             /* heat goes with fuel power to this exponent */
    double idle_heat;                 /* W; NAN: from the law */
    struct sp_table heat_table;       /* rows of [rev/s, W brake, W heat] on a full grid */
    double fuel_share;                /* heat over fuel power, for SP_HEAT_FUEL and SP_HEAT_AIR */
    double air_fuel_ratio, heating_value; /* kg/kg, J/kg */
    double indicated_efficiency;      /* Willans slope e, 0..1 */
    double friction_pressure[3];      /* Pa, Pa s, Pa s2: p_me0 over rev/s of the fired engine */
    double overrun_pressure[3];       /* the same, motored */
    double overrun_share;             /* of motoring work that heats the coolant */
    double gas_temperature;           /* K; NAN: heat does not depend on the metal */
    double gas_reference;             /* K, metal at which the heat law holds */
    double metal_capacity;            /* J/K */
    double coolant_volume;            /* m3 in the jacket */
    double conductance;               /* W/K metal to coolant at conductance_flow, 50/50 glycol at 90 degC */
    double conductance_flow;          /* m3/s */
    double conductance_still;         /* share of `conductance` left without flow */
    double skin_standing, skin_moving; /* W/K to the air, at 0 and at 100 km/h and above */
};

struct sp_electrics {
    double voltage_running, voltage_stopped; /* V at the consumers */
    double alternator_efficiency;            /* battery power over crank power */
};

/* ---- coolant circuit ---------------------------------------------------------------------------- */

/* Head or pressure over volume flow: either the parabola a0 - c Q^2 or pairs. See curve.h. */
struct sp_curve_design {
    double shutoff, free_flow; /* Pa, m3/s; NAN when pairs are given */
    struct sp_table pairs;     /* [m3/s, Pa] */
};

struct sp_pump {
    bool electric;
    struct sp_curve_design curve; /* at `speed` */
    double speed;                 /* rev/s of the pump for which the curve holds (belt) */
    double ratio;                 /* pump speed over engine speed (belt) */
    double power;                 /* W electrical at full speed (electric) */
    double rated_voltage;         /* V for which the curve holds (electric) */
    double run_on;                /* s the electric pump runs after the engine stops */
};

struct sp_thermostat {
    bool none;                  /* no thermostat: the radiator branch stands open, the bypass is shut */
    double opens, full;         /* K */
    double hysteresis;          /* K between opening and shutting paths */
    double lag, lag_still;      /* s at full coolant flow, and in standing coolant */
    double bore, lift;          /* m: the valve's curtain area is pi * bore * lift */
    double discharge;           /* discharge coefficient of the valve */
    double leak;                /* share of the full opening left when shut */
    double bypass_shut;         /* lift (0..1) at which the bypass disc has closed; > 1 never */
};

/* One hydraulic resistance: drop at a flow, for coolant of 1000 kg/m3 and viscosity 0.7 mPa s. */
struct sp_resistance { double flow, drop; }; /* m3/s, Pa */

struct sp_hoses {
    double length_out, bore_out;   /* m: engine to radiator */
    double length_back, bore_back; /* m: radiator to pump */
    double bends;                  /* loss coefficient of bends and joints, both hoses together */
    struct sp_resistance jacket;   /* engine passages */
    struct sp_resistance bypass;   /* bypass branch with its disc fully open */
    double skin;                   /* W/K to the air, both hoses together */
};

struct sp_tank {
    double volume;           /* m3 of the tank */
    double air_space;        /* m3 of air in it when filled cold */
    double fill_temperature; /* K at which it was filled */
    double cap;              /* Pa gauge at which the cap opens */
    double vacuum;           /* Pa below ambient at which it lets air in */
    double compliance;       /* m3/Pa of hoses */
    double bleed;            /* share of the pump flow that goes through the tank */
    double skin;             /* W/K */
};

struct sp_coolant_design {
    enum sp_coolant_kind kind;
    double share; /* glycol by volume */
    struct sp_coolant fluid;
};

/* ---- duct ---------------------------------------------------------------------------------------- */

struct sp_inlet {
    double area;      /* m2 */
    double recovery;  /* (total pressure available - ambient)/q */
    double lip_loss;  /* k on rho/2 max(V1-V,0)^2 */
    double screen;    /* loss coefficient of mesh on inlet head */
};

enum sp_diffuser_law { SP_DIFFUSER_GIVEN, SP_DIFFUSER_SUDDEN, SP_DIFFUSER_CONICAL };

struct sp_diffuser_design {
    enum sp_diffuser_law kind;
    double loss;       /* on inlet head, when given */
    double length;     /* m */
    bool core_damping; /* the core's resistance damps the stall (DA 3.4 proposal) */
};

enum sp_drop_law { SP_DROP_COEFFICIENT, SP_DROP_LINEAR, SP_DROP_TABLE, SP_DROP_FINS };
enum sp_core_heat_law { SP_CORE_NO_HEAT, SP_CORE_POWER, SP_CORE_MAKER, SP_CORE_FINS };

struct sp_core {
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
};

enum sp_place_of { SP_AT_ENGINE_OUT, SP_AT_RADIATOR_OUT };
enum sp_fan_law { SP_FAN_SWITCHED, SP_FAN_PROPORTIONAL, SP_FAN_ALWAYS, SP_FAN_NEVER };

struct sp_fan {
    bool fitted;
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
};

enum { SP_DUCTS = 4, SP_CORES = 5, SP_FANS = 3, SP_EXITS = 8 }; /* at most, in a car or a duct */

struct sp_duct_design {
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
