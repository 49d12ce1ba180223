/* The table of recorded channels and of events. SPDX-License-Identifier: GPL-3.0-or-later */
#include "swirlpot/drive.h"

/* The four channels of the core with number n, and the speed of fan n. */
#define CORE(n)                                                                                              \
    [SP_CH_CORE + 4 * (n - 2)] = {"core_" #n "_fluid_out", "degC", "fluid leaving core " #n, 1, SP_ZERO_C},  \
    [SP_CH_CORE + 4 * (n - 2) + 1] = {"core_" #n "_air_in", "degC", "air that meets core " #n, 1, SP_ZERO_C}, \
    [SP_CH_CORE + 4 * (n - 2) + 2] = {"core_" #n "_air_flow", "kg/s", "air through core " #n, 1, 0},         \
    [SP_CH_CORE + 4 * (n - 2) + 3] = {"core_" #n "_heat", "kW", "heat of core " #n " to the air", 1e3, 0}
#define FAN(n) [SP_CH_FAN_MORE + n - 2] = {"fan_" #n "_speed", "1", "speed of fan " #n " over rated", 1, 0}

static const struct sp_channel_info channel[SP_CHANNELS] = {
    [SP_CH_TIME] = {"time", "s", "time since the start of the drive", 1, 0},
    [SP_CH_DISTANCE] = {"distance", "m", "distance driven", 1, 0},
    [SP_CH_SPEED] = {"speed", "km/h", "speed over the road", 1 / 3.6, 0},
    [SP_CH_POWER] = {"power", "kW", "brake power of the engine", 1e3, 0},
    [SP_CH_ENGINE_SPEED] = {"engine_speed", "rpm", "engine speed", 1 / 60.0, 0},
    [SP_CH_AMBIENT] = {"ambient", "degC", "air ahead of the car", 1, SP_ZERO_C},
    [SP_CH_ENGINE_OUT] = {"coolant_engine_out", "degC", "coolant at the jacket outlet", 1, SP_ZERO_C},
    [SP_CH_RADIATOR_IN] = {"coolant_radiator_in", "degC", "coolant entering the core", 1, SP_ZERO_C},
    [SP_CH_RADIATOR_OUT] = {"coolant_radiator_out", "degC", "coolant leaving the core", 1, SP_ZERO_C},
    [SP_CH_PUMP_IN] = {"coolant_pump_in", "degC", "coolant entering the pump, mixed", 1, SP_ZERO_C},
    [SP_CH_METAL] = {"metal", "degC", "metal of the jacket", 1, SP_ZERO_C},
    [SP_CH_TANK] = {"coolant_tank", "degC", "header tank", 1, SP_ZERO_C},
    [SP_CH_WAX] = {"thermostat_wax", "degC", "wax of the thermostat", 1, SP_ZERO_C},
    [SP_CH_GAUGE] = {"gauge", "degC", "what the driver reads", 1, SP_ZERO_C},
    [SP_CH_MEASURED] = {"coolant_measured", "degC", "measured coolant, where the trace has it", 1, SP_ZERO_C},
    [SP_CH_LIFT] = {"thermostat_lift", "1", "lift of the thermostat, 0 shut to 1 open", 1, 0},
    [SP_CH_PUMP_FLOW] = {"coolant_flow", "l/min", "coolant through the pump", 1e-3 / 60.0, 0},
    [SP_CH_RADIATOR_FLOW] = {"coolant_flow_radiator", "l/min", "coolant through the core", 1e-3 / 60.0, 0},
    [SP_CH_BYPASS_FLOW] = {"coolant_flow_bypass", "l/min", "coolant through the bypass", 1e-3 / 60.0, 0},
    [SP_CH_AIR_FLOW] = {"air_mass_flow", "kg/s", "air through the cores of all ducts, negative in reverse", 1, 0},
    [SP_CH_FACE_VELOCITY] = {"face_velocity", "m/s", "air speed at the core's front", 1, 0},
    [SP_CH_EXIT_VELOCITY] = {"exit_velocity", "m/s", "air speed out of the exit", 1, 0},
    [SP_CH_AIR_OUT] = {"air_out", "degC", "air leaving the core", 1, SP_ZERO_C},
    [SP_CH_FAN_SPEED] = {"fan_speed", "1", "fan speed over rated", 1, 0},
    [SP_CH_FAN_PRESSURE] = {"fan_pressure", "Pa", "total pressure the fan adds, negative when windmilling", 1, 0},
    [SP_CH_FAN_POWER] = {"fan_power", "W", "electrical power of the fans", 1, 0},
    [SP_CH_TANK_PRESSURE] = {"tank_pressure", "kPa", "header tank, absolute", 1e3, 0},
    [SP_CH_BOIL_MARGIN] = {"boil_margin", "K", "least distance to boiling of jacket outlet and pump inlet", 1, 0},
    [SP_CH_LOST] = {"coolant_lost", "l", "liquid lost through the cap", 1e-3, 0},
    [SP_CH_HEAT_IN] = {"heat_in", "kW", "heat from the engine", 1e3, 0},
    [SP_CH_HEAT_OUT] = {"heat_out", "kW", "heat to the air through the core", 1e3, 0},
    [SP_CH_HEAT_SKIN] = {"heat_skin", "kW", "heat to the air from engine, hoses and tank", 1e3, 0},
    [SP_CH_DRAG] = {"drag", "N", "internal drag of the duct", 1, 0},
    [SP_CH_OIL] = {"oil", "degC", "oil of the engine", 1, SP_ZERO_C},
    [SP_CH_GEARBOX] = {"oil_gearbox", "degC", "oil of gearbox or final drive", 1, SP_ZERO_C},
    [SP_CH_CHARGE_IN] = {"charge_in", "degC", "charge air from the compressor", 1, SP_ZERO_C},
    [SP_CH_CHARGE_OUT] = {"charge_out", "degC", "charge air behind its coolers", 1, SP_ZERO_C},
    [SP_CH_INTAKE] = {"intake_air", "degC", "air that the engine breathes, partly from the bay", 1, SP_ZERO_C},
    [SP_CH_BAY] = {"bay", "degC", "air behind cores and fans of the first duct", 1, SP_ZERO_C},
    [SP_CH_BAY_PRESSURE] = {"bay_pressure", "Pa", "of that air, over ambient", 1, 0},
    [SP_CH_LEAK_PAST] = {"leak_past_core", "kg/s", "air that leaks past the cores", 1, 0},
    [SP_CH_LEAK_OUTSIDE] = {"leak_outside", "kg/s", "air that leaks from ahead of the cores to outside", 1, 0},
    [SP_CH_BACKWARDS] = {"air_backwards", "kg/s", "air that comes back through open parts of the cores", 1, 0},
    [SP_CH_SPILL] = {"drag_spill", "N", "of the drag: air spilled by the inlets", 1, 0},
    [SP_CH_THRUST] = {"heat_thrust", "N", "thrust that the heat brings, already taken off the drag", 1, 0},
    [SP_CH_FAN_CURRENT] = {"fan_current", "A", "of one fan, the most that any draws", 1, 0},
    [SP_CH_BATTERY] = {"battery_left", "1", "share of the battery's charge that is left", 1, 0},
    [SP_CH_NPSH_MARGIN] = {"npsh_margin", "m", "head at the pump's inlet over what it needs", 1, 0},
    [SP_CH_LOCAL_MARGIN] = {"local_boil_margin", "K", "what the jacket's wall lacks to boil coolant", 1, 0},
    [SP_CH_TANK_LEVEL] = {"tank_level", "l", "coolant in the header tank", 1e-3, 0},
    CORE(2), CORE(3), CORE(4), CORE(5), CORE(6), CORE(7), CORE(8),
    FAN(2), FAN(3), FAN(4), FAN(5), FAN(6),
};

/* Over and back, of the three tiers of one quantity. */
#define TIERS(of, name)                                                                                      \
    [SP_EV_TIER + 6 * (of)] = name " over caution", name " back under caution", name " over alarm",          \
                      name " back under alarm", name " over limit", name " back under limit"

static const char *const event[SP_EVENT_KINDS] = {
    [SP_EV_STEP] = "step begins",
    [SP_EV_ENGINE_STARTS] = "engine starts",
    [SP_EV_ENGINE_STOPS] = "engine stops",
    [SP_EV_FAN_ON] = "fan on",
    [SP_EV_FAN_OFF] = "fan off",
    [SP_EV_THERMOSTAT_OPENS] = "thermostat begins to open",
    [SP_EV_THERMOSTAT_FULL] = "thermostat fully open",
    [SP_EV_THERMOSTAT_REGULATES] = "thermostat regulates again",
    [SP_EV_THERMOSTAT_SHUT] = "thermostat shut",
    [SP_EV_CAP_OPENS] = "cap opens",
    [SP_EV_CAP_SHUTS] = "cap shuts",
    [SP_EV_COOLANT_OVER] = "coolant over limit",
    [SP_EV_COOLANT_BACK] = "coolant back under limit",
    [SP_EV_GAUGE_OVER] = "gauge over limit",
    [SP_EV_GAUGE_BACK] = "gauge back under limit",
    [SP_EV_METAL_OVER] = "metal over limit",
    [SP_EV_METAL_BACK] = "metal back under limit",
    [SP_EV_BOIL_MARGIN_UNDER] = "boil margin under limit",
    [SP_EV_BOIL_MARGIN_BACK] = "boil margin back over limit",
    [SP_EV_BOILING] = "coolant boils",
    [SP_EV_BOILING_ENDS] = "boiling ends",
    [SP_EV_PEAK] = "coolant peak",
    [SP_EV_CHANGE] = "the car changes",
    [SP_EV_LOST] = "coolant is lost",
    [SP_EV_EMPTY] = "tank is empty",
    [SP_EV_EMPTY_BACK] = "tank is empty no more",
    [SP_EV_CAN] = "catch can overflows",
    [SP_EV_CAN_BACK] = "catch can no longer overflows",
    [SP_EV_LOCAL] = "local boiling",
    [SP_EV_LOCAL_ENDS] = "local boiling ends",
    [SP_EV_CAVITATES] = "pump cavitates",
    [SP_EV_CAVITATION_ENDS] = "cavitation ends",
    [SP_EV_CURRENT] = "fan over current",
    [SP_EV_CURRENT_BACK] = "fan current back under limit",
    [SP_EV_FLAT] = "battery flat",
    [SP_EV_FLAT_BACK] = "battery no longer flat",
    [SP_EV_COLD_COOLANT] = "loaded with cold coolant",
    [SP_EV_COLD_COOLANT_ENDS] = "no longer loaded with cold coolant",
    [SP_EV_COLD_OIL] = "loaded with cold oil",
    [SP_EV_COLD_OIL_ENDS] = "no longer loaded with cold oil",
    TIERS(SP_LIMITED_COOLANT, "coolant"),
    TIERS(SP_LIMITED_GAUGE, "gauge"),
    TIERS(SP_LIMITED_METAL, "metal"),
    TIERS(SP_LIMITED_OIL, "oil"),
    TIERS(SP_LIMITED_GEARBOX, "gearbox oil"),
    TIERS(SP_LIMITED_CHARGE, "charge air"),
};

const struct sp_channel_info *sp_channel_at(enum sp_channel c)
{
    return (int)c >= 0 && c < SP_CHANNELS ? &channel[c] : NULL;
}

const char *sp_event_text(enum sp_event_kind kind)
{
    return (int)kind >= 0 && kind < SP_EVENT_KINDS ? event[kind] : "?";
}

const char *sp_severity_text(enum sp_severity s)
{
    static const char *const text[] = {"note", "caution", "alarm", "stop"};
    return (unsigned)s < sizeof text / sizeof text[0] ? text[s] : "?";
}
