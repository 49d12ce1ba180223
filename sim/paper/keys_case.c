/* Keys of the case itself: air, start, limits, solver.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys_row.h"

/* The two tiers below a limit; only the limit itself decides whether the car survives. */
#define TIERS(name, most)                                                                                    \
    {QUANTITY("limits." #name "_caution", TEMPERATURE, limits.name.caution), WHEN("if wanted"),              \
     RANGE("0 degC to " most), SAYS("above it the driver is warned"), OWN},                                  \
    {QUANTITY("limits." #name "_alarm", TEMPERATURE, limits.name.alarm), WHEN("if wanted"),                  \
     RANGE("0 degC to " most), SAYS("above it the driver must act"), OWN}

const struct sp_key sp_keys_case[] = {
    {.path = "title", .shape = SP_SHAPE_TEXT, AT(title), OPTIONAL, SAYS("what this case is called"), OWN},
    {GROUP("car"), REQUIRED, .type = "path or object",
     SAYS("the car: an object, or the path of a file that holds it, relative to the case; an object "
          "with `from` overrides the file named there")},
    {.path = "car.from",
     .shape = SP_SHAPE_TEXT,
     .keep = SP_KEEP_NOTHING,
     OPTIONAL,
     .type = "path",
     SAYS("file of the car that this object overrides key by key"),
     OWN},

    {GROUP("air"), REQUIRED, SAYS("the air the car drives through")},
    {QUANTITY("air.ambient", TEMPERATURE, air.ambient), REQUIRED, RANGE("-60 degC to 70 degC"),
     SAYS("temperature of the free stream"), OWN},
    {QUANTITY("air.altitude", LENGTH, air.altitude), DEFAULT("0 m"), RANGE("-1000 m to 9000 m"),
     SAYS("height above the sea; gives the pressure by the standard atmosphere"),
     SOURCE("US Standard Atmosphere 1976")},
    {QUANTITY("air.pressure", PRESSURE, air.pressure), WHEN("instead of altitude"),
     RANGE("25 kPa to 115 kPa"), SAYS("static pressure of the free stream"), OWN},
    {QUANTITY("air.humidity", NUMBER, air.humidity), DEFAULT("0 %"), RANGE("0 % to 100 %"),
     SAYS("relative humidity"), DEFINITION},
    {QUANTITY("air.cross_wind", SPEED, air.cross_wind), DEFAULT("0 m/s"), RANGE("-40 m/s to 40 m/s"),
     SAYS("wind across the car, from either side"), DEFINITION},
    {QUANTITY("air.wind", SPEED, air.wind), DEFAULT("0 m/s"), RANGE("-40 m/s to 40 m/s"),
     SAYS("head wind; negative from behind"), DEFINITION},

    {GROUP("start"), OPTIONAL, SAYS("temperatures at the start of the drive")},
    {QUANTITY("start.coolant", TEMPERATURE, start.coolant), RULE(sp_rule_start_coolant, "ambient"),
     RANGE("-60 degC to 150 degC"), SAYS("coolant in the engine"), OWN},
    {QUANTITY("start.metal", TEMPERATURE, start.metal), WHEN("else as the coolant"),
     RANGE("-60 degC to 250 degC"), SAYS("metal of the engine"), OWN},
    {QUANTITY("start.radiator", TEMPERATURE, start.radiator), WHEN("else as the coolant"),
     RANGE("-60 degC to 150 degC"), SAYS("core, the hose behind it and what is in them"), OWN},
    {QUANTITY("start.oil", TEMPERATURE, start.oil), WHEN("else as the coolant"), RANGE("-60 degC to 200 degC"),
     SAYS("the engine's oil, where the car has it"), OWN},
    {QUANTITY("start.gearbox", TEMPERATURE, start.gearbox), WHEN("else as the coolant"),
     RANGE("-60 degC to 200 degC"), SAYS("oil of gearbox or final drive, where the car has it"), OWN},

    {GROUP("limits"), FOR_DRIVE, .type = "object with at least one limit",
     SAYS("what must not be passed; a drive needs at least one")},
    {QUANTITY("limits.coolant", TEMPERATURE, limits.coolant.stop), WHEN("one limit is needed"),
     RANGE("0 degC to 200 degC"), SAYS("highest coolant at the engine's outlet"), OWN},
    {QUANTITY("limits.gauge", TEMPERATURE, limits.gauge.stop), WHEN("one limit is needed"),
     RANGE("0 degC to 200 degC"), SAYS("highest reading of the gauge"), OWN},
    {QUANTITY("limits.metal", TEMPERATURE, limits.metal.stop), WHEN("one limit is needed"),
     RANGE("0 degC to 400 degC"), SAYS("highest temperature of the engine's metal"), OWN},
    {QUANTITY("limits.oil", TEMPERATURE, limits.oil.stop), WHEN("one limit is needed"),
     RANGE("0 degC to 250 degC"), SAYS("highest temperature of the engine's oil"), OWN},
    {QUANTITY("limits.gearbox", TEMPERATURE, limits.gearbox.stop), WHEN("one limit is needed"),
     RANGE("0 degC to 250 degC"), SAYS("highest temperature of the oil of gearbox or final drive"), OWN},
    {QUANTITY("limits.charge", TEMPERATURE, limits.charge.stop), WHEN("one limit is needed"),
     RANGE("0 degC to 250 degC"), SAYS("highest temperature of the charge air behind its coolers"), OWN},
    {QUANTITY("limits.boil_margin", TEMP_DIFF, limits.boil_margin), WHEN("one limit is needed"),
     RANGE("0 K to 150 K"), SAYS("least distance of the coolant to its boiling point, at any place"), OWN},
    TIERS(coolant, "200 degC"),
    TIERS(gauge, "200 degC"),
    TIERS(metal, "400 degC"),
    TIERS(oil, "250 degC"),
    TIERS(gearbox, "250 degC"),
    TIERS(charge, "250 degC"),
    {QUANTITY("limits.least_coolant", TEMPERATURE, limits.least_coolant), WHEN("if wanted"),
     RANGE("-40 degC to 150 degC"), SAYS("coolant at the engine's outlet before it is loaded"), OWN},
    {QUANTITY("limits.least_oil", TEMPERATURE, limits.least_oil), WHEN("if wanted"),
     RANGE("-40 degC to 150 degC"), SAYS("the engine's oil before it is loaded"), OWN},
    {QUANTITY("limits.load", POWER, limits.load), WHEN("else a fifth of `rated_power`"), RANGE("0 W to 5 MW"),
     SAYS("brake power above which the engine counts as loaded"), PRACTICE},

    {GROUP("solver"), OPTIONAL, SAYS("how exactly the drive is worked out")},
    {QUANTITY("solver.tolerance", NUMBER, solver.tolerance), DEFAULT("1e-5"), RANGE("1e-10 to 1e-4"),
     SAYS("relative tolerance of the integration"), PRACTICE},
    {QUANTITY("solver.merge", TIME, solver.merge), DEFAULT("0.3 s"), RANGE("0 s to 60 s"),
     SAYS("rows of a trace closer than this are merged into their mean"), PRACTICE},
    END_OF_KEYS};
