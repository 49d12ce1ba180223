/* trace_columns.c - the table of columns a trace may have, one row each.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "drive/trace_columns.h"

struct row {
    const char *name;
    enum sp_kind kind;
    double low, high; /* SI, absolute limits of the possible */
    const char *meaning;
};

/* Limits are common practice: far outside anything a road or racing car does, inside anything a
 * broken sensor, a wrong unit or a lost decimal point gives. Time stamps may count from 1970. */
static const struct row table[SP_COLUMNS] = {
    [SP_COL_TIME] = {"time", SP_K_TIME, -1e11, 1e11, "time from any origin"},
    [SP_COL_DISTANCE] = {"distance", SP_K_LENGTH, -1e9, 1e9, "distance driven from any origin"},
    [SP_COL_SPEED] = {"speed", SP_K_SPEED, -5, 150, "speed over ground; negative only creeping backwards"},
    [SP_COL_POWER] = {"power", SP_K_POWER, -1e6, 3e6, "power at the crank; negative on overrun"},
    [SP_COL_TORQUE] = {"torque", SP_K_TORQUE, -2000, 5000, "torque at the crank; negative on overrun"},
    [SP_COL_ENGINE_SPEED] = {"engine_speed", SP_K_ROTATION, 0, 400, "engine speed; 0 is off"},
    [SP_COL_FUEL_FLOW] = {"fuel_flow", SP_K_MASS_FLOW, 0, 1, "fuel burnt"},
    [SP_COL_AIR_FLOW] = {"air_flow", SP_K_MASS_FLOW, 0, 10, "air drawn by the engine"},
    [SP_COL_THROTTLE] = {"throttle", SP_K_NUMBER, -0.05, 1.05, "throttle or pedal, 0 to 1"},
    [SP_COL_GEAR] = {"gear", SP_K_NUMBER, -3, 20, "gear; 0 neutral, negative reverse"},
    [SP_COL_GRADE] = {"grade", SP_K_NUMBER, -0.6, 0.6, "rise over run; 0.05 is 5 %"},
    [SP_COL_ALTITUDE] = {"altitude", SP_K_LENGTH, -500, 9000, "height above sea level"},
    [SP_COL_AMBIENT] = {"ambient", SP_K_TEMPERATURE, 200, 500, "air temperature ahead of the car"},
    [SP_COL_WAKE] = {"wake", SP_K_NUMBER, 0, 1.5, "share of free-stream dynamic pressure left"},
    [SP_COL_COOLANT] = {"coolant", SP_K_TEMPERATURE, 200, 500, "measured coolant temperature"},
    [SP_COL_HEAT] = {"heat", SP_K_POWER, -1e6, 3e6, "heat to the coolant, with car.engine.heat.law `given`"},
    [SP_COL_MARK] = {"mark", SP_KINDS, 0, 0, "text: a corner, a lap; begins where the text changes"},
};

static bool known(enum sp_column c)
{
    return (int)c >= 0 && c < SP_COLUMNS;
}

const char *sp_column_name(enum sp_column c)
{
    return known(c) ? table[c].name : NULL;
}

enum sp_kind sp_column_kind(enum sp_column c)
{
    return known(c) ? table[c].kind : SP_KINDS;
}

const char *sp_column_meaning(enum sp_column c)
{
    return known(c) ? table[c].meaning : NULL;
}

double sp_column_low(enum sp_column c)
{
    return known(c) ? table[c].low : 0;
}

double sp_column_high(enum sp_column c)
{
    return known(c) ? table[c].high : 0;
}
