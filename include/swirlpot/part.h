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

#include "swirlpot/duct.h"

#ifdef __cplusplus
extern "C" {
#endif

/* ---- air and body ----------------------------------------------------------------------------- */

struct sp_air_design {
    double ambient;  /* K */
    double pressure; /* Pa; from altitude when that was given */
    double altitude; /* m geometric; NAN when pressure was given */
    double humidity; /* 0..1 */
    double wind;     /* m/s, head wind positive */
    double cross_wind; /* m/s */
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

enum sp_heat_law {
    SP_HEAT_RATED, SP_HEAT_TABLE, SP_HEAT_FUEL, SP_HEAT_AIR,
    SP_HEAT_CORRELATION, /* Taylor and Toong */
    SP_HEAT_GIVEN        /* no engine: heat_given + heat_loss |power| */
};
enum sp_friction_law { SP_FRICTION_POLYNOMIAL, SP_FRICTION_CHEN_FLYNN, SP_FRICTION_DIESEL, SP_FRICTION_SI };

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
    double cylinders, bore, stroke, compression; /* -, m, m, - */
    double correlation_constant;      /* C of the correlation, 10.4 */
    bool diesel;                      /* its gas temperature in the correlation is a diesel's */
    double stoichiometric;            /* kg of air per kg of fuel at equivalence ratio 1 */

    enum sp_friction_law overrun_law;
    double chen_flynn[4];             /* Pa, -, Pa s/m, Pa s2/m2 */
    double overrun_intake;            /* pressure in the inlet manifold over ambient, motored with the fuel cut */
    double overrun_oil;               /* K of the oil on overrun, for SP_FRICTION_SI */
    double heat_given, heat_loss;     /* W; share of |power|; both for SP_HEAT_GIVEN */
    double energy_cap;                /* most of the fuel's energy that leaves as work, coolant and oil heat; 0: none */
    double metal_capacity;            /* J/K */
    double coolant_volume;            /* m3 in the jacket */
    double wetted_area;               /* m2 of jacket that boils first; 0: local boiling is not judged */
    double breathes_bay;              /* share of the intake air that comes from the bay of the first duct */
    double conductance;               /* W/K metal to coolant at conductance_flow, 50/50 glycol at 90 degC */
    double conductance_flow;          /* m3/s */
    double conductance_still;         /* share of `conductance` left without flow */
    double skin_standing, skin_moving; /* W/K to the air, at 0 and at 100 km/h and above */
};

struct sp_electrics {
    double voltage_running, voltage_stopped; /* V at the consumers */
    double alternator_efficiency;            /* battery power over crank power */
    double battery;                          /* C (ampere seconds) of charge usable; 0: not watched */
    double idle_load;                        /* W of other consumers with the key on and the engine off */
};

/* Oil with heat and coolers of its own: the engine's, or that of gearbox or final drive. */
struct sp_oil {
    bool fitted;
    double volume;                   /* m3 */
    double metal_capacity;           /* J/K of sump, bearings and housing that warm with it */
    double heat_share;               /* of brake power (gearbox: of the power through it) that heats it */
    double friction_share;           /* of motoring power at the engine's speed that heats it, fired or not */
    double block;                    /* W/K to the engine's metal */
    double skin_standing, skin_moving; /* W/K to the air, at 0 and at 100 km/h and above */
    double flow, flow_speed;         /* m3/s through its coolers at that engine speed [rev/s], proportional below ... */
    double flow_most;                /* ... and never above this, m3/s (relief valve) */
    double plate;                    /* W/K of a plate cooler to the coolant entering the engine; 0: none */
    double opens, full;              /* K of its thermostat to the air cooler; NAN: none, the cooler stands open */
    double still;                    /* share of the flow that passes the cooler with the thermostat shut */
};

/* Charge air: what the compressor makes of it. Its cooler is a core that carries it. */
struct sp_charge {
    bool fitted;
    double pressure_ratio;  /* at rated power; falls to 1 with air flow squared */
    double efficiency;      /* isentropic, of the compressor */
    double intake_rise;     /* K over ambient of the air it breathes */
    double air_flow;        /* kg/s at rated power; goes with fuel flow */
};

/* ---- coolant circuit ---------------------------------------------------------------------------- */

enum sp_pump_law { SP_PUMP_FIXED, SP_PUMP_OVER_TEMPERATURE, SP_PUMP_OVER_SPEED, SP_PUMP_PULSING };

struct sp_pump {
    bool electric;
    struct sp_curve_design curve; /* at `speed` */
    double speed;                 /* rev/s of the pump for which the curve holds (belt) */
    double ratio;                 /* pump speed over engine speed (belt) */
    double power;                 /* W electrical at full speed (electric) */
    double rated_voltage;         /* V for which the curve holds (electric) */
    double run_on;                /* s the electric pump runs after the engine stops */
    enum sp_pump_law law;         /* electric */
    double from, to, least;       /* K, K, share of full speed up to `from` (over temperature) */
    double full_at;               /* rev/s of the engine from which it runs at full speed (over engine speed) */
    double target, pulse_on, pulse_off; /* K below which it runs for so many s and stands for so many (pulsing) */
    bool failed;                  /* belt off or motor dead */
    double npsh;                  /* m of head it needs at its inlet at rated speed, with speed squared; 0: not watched */
    double suction_drop, suction_flow; /* Pa at m3/s lost between tank and pump inlet beyond the hoses */
};

struct sp_thermostat {
    bool none;                  /* no thermostat: the radiator branch stands open, the bypass is shut */
    double opens, full;         /* K */
    double hysteresis;          /* K between opening and shutting paths */
    double lag, lag_still;      /* s at full coolant flow, and in standing coolant */
    double bore, lift;          /* m: the valve's curtain area is pi * bore * lift */
    double discharge;           /* discharge coefficient of the valve */
    double leak;                /* share of the full opening left when shut */
    double restrictor;          /* m bore of a plate in its place; 0: none. The radiator branch stands open */
    bool inlet_side;            /* stands where the coolant enters the engine and senses the mix there */
    double mapped_shift;        /* K by which it opens earlier ... */
    double mapped_power;        /* ... at brake power above this, W; 0: not mapped */
    double bypass_shut;         /* lift (0..1) at which the bypass disc has closed; > 1 never */
};

struct sp_hoses {
    double length_out, bore_out;   /* m: engine to radiator */
    double length_back, bore_back; /* m: radiator to pump */
    double bends;                  /* loss coefficient of bends and joints, both hoses together */
    struct sp_resistance jacket;   /* engine passages */
    struct sp_resistance bypass;   /* bypass branch with its disc fully open */
    double skin;                   /* W/K to the air, both hoses together */
    double pot;                    /* m3 of a swirl pot in the hose to the radiator; 0: none */
    struct sp_resistance heater;   /* heater or auxiliary branch, flow 0: none */
    double heater_conductance;     /* W/K from its coolant to `heater_air` */
    double heater_air;             /* K; NAN: ambient */
    bool heater_off;
};

struct sp_tank {
    double volume;           /* m3 of the tank */
    double air_space;        /* m3 of air in it when filled cold */
    double fill_temperature; /* K at which it was filled */
    double cap;              /* Pa gauge at which the cap opens */
    double vacuum;           /* Pa below ambient at which it lets air in */
    double compliance;       /* m3/Pa of hoses */
    double bleed;            /* share of the pump flow that goes through the tank, where bleed_bore is 0 */
    double bleed_bore;       /* m of the restrictor in the bleed line: the flow follows from the pressures */
    double lost;             /* m3 of coolant missing at the start, or lost by a change */
    double catch_can;        /* m3; 0: not watched */
    double skin;             /* W/K */
};

struct sp_coolant_design {
    enum sp_coolant_kind kind;
    double share; /* glycol by volume */
    struct sp_coolant fluid;
};

#ifdef __cplusplus
}
#endif
#endif
