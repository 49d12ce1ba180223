/* Keys of the fan.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys_row.h"

static const struct sp_word bases[] = {{"total", 0}, {"static", 1}, {NULL, 0}};
static const struct sp_word befores[] = {{"core", 1}, {NULL, 0}};
static const struct sp_word controls[] = {{"switch", SP_FAN_SWITCHED},
                                          {"proportional", SP_FAN_PROPORTIONAL},
                                          {"always", SP_FAN_ALWAYS},
                                          {"never", SP_FAN_NEVER},
                                          {NULL, 0}};
static const struct sp_word places[] = {
    {"engine out", SP_AT_ENGINE_OUT}, {"radiator out", SP_AT_RADIATOR_OUT}, {NULL, 0}};
static const struct sp_key_column curve_columns[] = {{SP_K_VOLUME_FLOW, "0 m3/s to 100 m3/s"},
                                                     {SP_K_PRESSURE, "0 Pa to 100 kPa"}};

static const struct sp_word healths[] = {
    {"sound", SP_FAN_SOUND}, {"dead", SP_FAN_DEAD}, {"locked", SP_FAN_LOCKED}, {NULL, 0}};

const struct sp_key sp_keys_fan[] = {
    {FITTED_GROUP("car.duct.fan", duct[0].fan[0].fitted), OPTIONAL,
     LISTED("fans", sp_fan, SP_FANS, "side by side, unlike one another"), SAYS("fan or fans; absent: none")},
    {QUANTITY("car.duct.fan.count", NUMBER, duct[0].fan[0].count), DEFAULT("1"), RANGE("1 to 20"), .whole = true,
     SAYS("equal fans side by side"), DEFINITION},
    {TABLE("car.duct.fan.curve", curve_columns, duct[0].fan[0].curve.pairs), REQUIRED, .or_object = true,
     .type = "table of volume flow and pressure, or an object",
     SAYS("pressure over flow of one fan at 1.2 kg/m3, as pairs or as `shutoff` and `free_flow` of a "
          "parabola"),
     OWN},
    {QUANTITY("car.duct.fan.curve.shutoff", PRESSURE, duct[0].fan[0].curve.shutoff), REQUIRED,
     WHEN("without pairs"), RANGE("above 0 Pa, at most 100 kPa"), SAYS("pressure at nil flow"), OWN},
    {QUANTITY("car.duct.fan.curve.free_flow", VOLUME_FLOW, duct[0].fan[0].curve.free_flow), REQUIRED,
     WHEN("without pairs"), RANGE("above 0 m3/s, at most 100 m3/s"), SAYS("flow at nil pressure"), OWN},
    {WORD("car.duct.fan.basis", bases, BOOL, duct[0].fan[0].static_basis), DEFAULT("total"), RANGE("total, static"),
     SAYS("which pressure the curve holds"), DEFINITION},
    {WORD("car.duct.fan.before", befores, BOOL, duct[0].fan[0].before_core), WHEN("else behind the core"),
     RANGE("core"), SAYS("the fan stands ahead of the core"), OWN},
    {QUANTITY("car.duct.fan.diameter", LENGTH, duct[0].fan[0].diameter),
     WHEN("with basis static; else the core's face counts"), RANGE("0.03 m to 3 m"),
     SAYS("of the blades' tips"), OWN},
    {QUANTITY("car.duct.fan.hub", LENGTH, duct[0].fan[0].hub), RULE(sp_rule_fan_hub, "0.35 of the diameter"),
     RANGE("0 m to 2.9 m"), SAYS("diameter of the hub"), PRACTICE},
    {QUANTITY("car.duct.fan.windmill_loss", NUMBER, duct[0].fan[0].windmill_loss), DEFAULT("1.2"),
     RANGE("0 to 100"), SAYS("loss of the freely turning fan on the head in its annulus"), PRACTICE},
    {WORD("car.duct.fan.health", healths, ENUM, duct[0].fan[0].health), DEFAULT("sound"),
     RANGE("sound, dead, locked"), SAYS("a dead fan only windmills, a locked one stands; neither draws current"),
     DEFINITION},
    {QUANTITY("car.duct.fan.locked_loss", NUMBER, duct[0].fan[0].locked_loss), DEFAULT("3"), RANGE("0 to 100"),
     SAYS("loss of the locked fan on the head in its annulus; 2 to 5"), MEMORY},
    {QUANTITY("car.duct.fan.span_from", NUMBER, duct[0].fan[0].span_from), DEFAULT("0"), RANGE("0 to 1"),
     SAYS("the share of the duct's section under its shroud begins here"), DEFINITION},
    {QUANTITY("car.duct.fan.span_to", NUMBER, duct[0].fan[0].span_to), DEFAULT("0"), RANGE("0 to 1"),
     SAYS("and ends here; both 0: all of it. Fans of one duct with the same span share a shroud"), DEFINITION},
    {QUANTITY("car.duct.fan.flap_area", AREA, duct[0].fan[0].flap_area), DEFAULT("0 m2"), RANGE("0 m2 to 10 m2"),
     SAYS("one-way flaps in the shroud, which ram air opens past the fan"), DEFINITION},
    {QUANTITY("car.duct.fan.flap_loss", NUMBER, duct[0].fan[0].flap_loss), DEFAULT("2"), RANGE("0.5 to 100"),
     SAYS("loss of the open flaps on the head in them"), PRACTICE},
    {QUANTITY("car.duct.fan.wiring_drop", VOLTAGE, duct[0].fan[0].wiring_drop), DEFAULT("0 V"), RANGE("0 V to 100 V"),
     SAYS("lost between battery and plug at rated current (rated power over rated voltage), and with the current; "
          "0.3 V to 0.5 V in a good loom, 1 V to 2 V in an old one"),
     PRACTICE},
    {QUANTITY("car.duct.fan.current_limit", CURRENT, duct[0].fan[0].current_limit), DEFAULT("0 A"),
     RANGE("0 A to 2000 A"), SAYS("what the fuse or winding of one fan bears; 0: not watched"), DEFINITION},
    {QUANTITY("car.duct.fan.rated_voltage", VOLTAGE, duct[0].fan[0].rated_voltage), DEFAULT("13 V"),
     RANGE("1 V to 1000 V"), SAYS("voltage for which the curve holds"), PRACTICE},
    {QUANTITY("car.duct.fan.power", POWER, duct[0].fan[0].power),
     RULE(sp_rule_fan_power, "23 % of it is in the air at the curve's best point"), RANGE("0 W to 200 kW"),
     SAYS("electrical power of one fan at that voltage"), PRACTICE},
    {QUANTITY("car.duct.fan.spin_up", TIME, duct[0].fan[0].spin_up), DEFAULT("1.5 s"), RANGE("0.05 s to 120 s"),
     SAYS("time constant of its speed"), PRACTICE},
    {WORD("car.duct.fan.control", controls, ENUM, duct[0].fan[0].law), DEFAULT("switch"),
     RANGE("switch, proportional, always, never"), SAYS("what makes it run"), PRACTICE},
    {GROUP("car.duct.fan.switch"), OPTIONAL, SAYS("a thermo-switch")},
    {QUANTITY("car.duct.fan.switch.on", TEMPERATURE, duct[0].fan[0].on), DEFAULT("96 degC"),
     RANGE("-40 degC to 200 degC"), SAYS("on above"), PRACTICE},
    {QUANTITY("car.duct.fan.switch.off", TEMPERATURE, duct[0].fan[0].off), DEFAULT("91 degC"),
     RANGE("-40 degC to 200 degC"), SAYS("off below"), PRACTICE},
    {GROUP("car.duct.fan.proportional"), OPTIONAL, SAYS("speed rising with temperature")},
    {QUANTITY("car.duct.fan.proportional.from", TEMPERATURE, duct[0].fan[0].from), DEFAULT("90 degC"),
     RANGE("-40 degC to 200 degC"), SAYS("begins to turn"), PRACTICE},
    {QUANTITY("car.duct.fan.proportional.to", TEMPERATURE, duct[0].fan[0].to), DEFAULT("100 degC"),
     RANGE("-40 degC to 200 degC"), SAYS("full speed"), PRACTICE},
    {QUANTITY("car.duct.fan.proportional.least", NUMBER, duct[0].fan[0].least), DEFAULT("0.33"), RANGE("0 to 1"),
     SAYS("share of full speed at which it begins"), SOURCE("a maker's service text")},
    {WORD("car.duct.fan.sensor", places, ENUM, duct[0].fan[0].sensor), DEFAULT("engine out"),
     RANGE("engine out, radiator out"), SAYS("where the temperature is taken that makes it run"), PRACTICE},
    {QUANTITY("car.duct.fan.run_on", TIME, duct[0].fan[0].run_on), DEFAULT("0 s"), RANGE("0 s to 1 d"),
     SAYS("how long it may run after the engine stops"), DEFINITION},
    END_OF_KEYS};
