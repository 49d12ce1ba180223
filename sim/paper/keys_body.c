/* Keys of the car's body, electrics and gauge.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys_row.h"

static const struct sp_word places[] = {
    {"engine out", SP_AT_ENGINE_OUT}, {"radiator out", SP_AT_RADIATOR_OUT}, {NULL, 0}};

const struct sp_key sp_keys_body[] = {
    {GROUP("car.body"), FOR_DRIVE, SAYS("body and drivetrain: what the road asks of the engine")},
    {QUANTITY("car.body.mass", MASS, body.mass), WHEN("when power comes from the road load"),
     RANGE("above 0 kg, at most 60000 kg"), SAYS("mass with driver and fuel"), OWN},
    {QUANTITY("car.body.frontal_area", AREA, body.frontal_area), FOR_DRIVE,
     RANGE("above 0 m2, at most 20 m2"), SAYS("frontal area, the reference of all drag coefficients"), OWN},
    {QUANTITY("car.body.drag_coefficient", NUMBER, body.drag_coefficient),
     WHEN("when power comes from the road load"), RANGE("0 to 3"),
     SAYS("drag coefficient as measured on the car, cooling drag included"), OWN},
    {QUANTITY("car.body.rolling_resistance", NUMBER, body.rolling), DEFAULT("0.012"), RANGE("0 to 0.2"),
     SAYS("rolling force over weight"), PRACTICE},
    {QUANTITY("car.body.rotating_mass", NUMBER, body.rotating), DEFAULT("1.05"), RANGE("1 to 3"),
     SAYS("effective mass, with what rotates, over mass"), MEMORY},
    {QUANTITY("car.body.driveline_efficiency", NUMBER, body.driveline), DEFAULT("0.92"), RANGE("0.3 to 1"),
     SAYS("power at the wheels over power at the crank"), PRACTICE},
    {QUANTITY("car.body.wheel_radius", LENGTH, body.wheel_radius), WHEN("with gears"),
     RANGE("0.05 m to 1.5 m"), SAYS("rolling radius of the driven wheels"), OWN},
    {LIST("car.body.gears", NUMBER, body.gears), OPTIONAL, RANGE("0.2 to 100"), .type = "list of numbers",
     SAYS("turns of the crank a turn of the wheel in each gear, lowest gear first, so falling"), OWN},
    {QUANTITY("car.body.shift_speed", ROTATION, body.shift_speed),
     RULE(sp_rule_shift_speed, "the rated speed"), RANGE("500 rpm to 30000 rpm"),
     SAYS("engine speed at which the next gear is taken"), PRACTICE},

    {GROUP("car.electrics"), OPTIONAL, SAYS("what the consumers get and what it costs the engine")},
    {QUANTITY("car.electrics.running", VOLTAGE, electrics.voltage_running), DEFAULT("13.5 V"),
     RANGE("1 V to 1000 V"), SAYS("at the consumers with the engine running"), PRACTICE},
    {QUANTITY("car.electrics.stopped", VOLTAGE, electrics.voltage_stopped), DEFAULT("12 V"),
     RANGE("1 V to 1000 V"), SAYS("the same with the engine off"), PRACTICE},
    {QUANTITY("car.electrics.alternator_efficiency", NUMBER, electrics.alternator_efficiency),
     DEFAULT("0.55"), RANGE("0.05 to 1"), SAYS("electrical power over crank power"),
     SOURCE("one maker's figure for car alternators")},
    {QUANTITY("car.electrics.battery", CHARGE, electrics.battery), DEFAULT("0 A.h"), RANGE("0 A.h to 1000 A.h"),
     SAYS("charge that may be drawn with the engine off, half of what is stamped on it; 0: not watched"), PRACTICE},
    {QUANTITY("car.electrics.idle_load", POWER, electrics.idle_load), DEFAULT("0 W"), RANGE("0 W to 50 kW"),
     SAYS("other consumers with the key on and the engine off; lights and logger 150 W"), PRACTICE},

    {GROUP("car.gauge"), OPTIONAL, SAYS("what the driver sees")},
    {WORD("car.gauge.place", places, ENUM, gauge.place), DEFAULT("engine out"),
     RANGE("engine out, radiator out"), SAYS("where its sender sits"), PRACTICE},
    {QUANTITY("car.gauge.lag", TIME, gauge.lag), DEFAULT("9 s"), RANGE("0 s to 600 s"),
     SAYS("time constant of the sender"), PRACTICE},
    {QUANTITY("car.gauge.offset", TEMP_DIFF, gauge.offset), DEFAULT("0 K"), RANGE("-50 K to 50 K"),
     SAYS("reads so much too high"), PRACTICE},
    END_OF_KEYS};
