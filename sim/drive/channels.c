/* The table of recorded channels and of events. SPDX-License-Identifier: GPL-3.0-or-later */
#include "swirlpot/drive.h"


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
    [SP_CH_AIR_FLOW] = {"air_mass_flow", "kg/s", "air through the core, negative in reverse", 1, 0},
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
};

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
};

const struct sp_channel_info *sp_channel_at(enum sp_channel c)
{
    return (int)c >= 0 && c < SP_CHANNELS ? &channel[c] : NULL;
}

const char *sp_event_text(enum sp_event_kind kind)
{
    return (int)kind >= 0 && kind < SP_EVENT_KINDS ? event[kind] : "?";
}
