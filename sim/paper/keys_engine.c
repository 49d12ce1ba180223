/* Keys of the engine: size, heat, friction, capacities.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys_row.h"

static const struct sp_word laws[] = { { "rated", SP_HEAT_RATED }, { "table", SP_HEAT_TABLE },
    { "fuel", SP_HEAT_FUEL }, { "air", SP_HEAT_AIR }, { NULL, 0 } };
static const struct sp_key_column heat_columns[] = { { SP_K_ROTATION, "0 rpm to 30000 rpm" },
    { SP_K_POWER, "0 kW to 3000 kW" }, { SP_K_POWER, "0 kW to 3000 kW" } };

const struct sp_key sp_keys_engine[] = {
    { GROUP("car.engine"), FOR_DRIVE, SAYS("the engine as a source of heat") },
    { QUANTITY("car.engine.displacement", VOLUME, engine.displacement), FOR_DRIVE,
      RANGE("above 0 l, at most 100 l"), SAYS("swept volume"), OWN },
    { QUANTITY("car.engine.rated_power", POWER, engine.rated_power), FOR_DRIVE,
      RANGE("above 0 kW, at most 3000 kW"), SAYS("highest brake power"), OWN },
    { QUANTITY("car.engine.rated_speed", ROTATION, engine.rated_speed), FOR_DRIVE,
      RANGE("500 rpm to 30000 rpm"), SAYS("engine speed of that power"), OWN },
    { QUANTITY("car.engine.idle_speed", ROTATION, engine.idle_speed), DEFAULT("850 rpm"),
      RANGE("100 rpm to 6000 rpm"), SAYS("engine speed when idling"), PRACTICE },
    { QUANTITY("car.engine.indicated_efficiency", NUMBER, engine.indicated_efficiency), DEFAULT("0.40"),
      RANGE("0.1 to 0.7"), SAYS("slope of the Willans line: work of the gas over fuel energy"), MEMORY },
    { .path = "car.engine.friction", .shape = SP_SHAPE_THREE, .kind = SP_K_PRESSURE,
      AT(engine.friction_pressure), DEFAULT("1.55 bar, 0 bar, 0.046 bar"), RANGE("-20 bar to 20 bar"),
      .type = "three pressures", SAYS("a, b, c of the fired engine's friction and gas exchange as mean "
      "pressure a + b N + c N^2, N in 1000 rev/min"), MEMORY },
    { .path = "car.engine.overrun_friction", .shape = SP_SHAPE_THREE, .kind = SP_K_PRESSURE,
      AT(engine.overrun_pressure), DEFAULT("0.97 bar, 0.15 bar, 0.05 bar"), RANGE("-20 bar to 20 bar"),
      .type = "three pressures", SAYS("the same of the motored engine"),
      SOURCE("Barnes-Moss, after Heywood 1988 ch. 13") },
    { QUANTITY("car.engine.overrun_share", NUMBER, engine.overrun_share), DEFAULT("0.40"), RANGE("0 to 1"),
      SAYS("share of the motoring work that heats the coolant"), PRACTICE },
    { QUANTITY("car.engine.gas_temperature", TEMPERATURE, engine.gas_temperature), DEFAULT("840 K"),
      RANGE("450 K to 2500 K"), .or_none = true,
      SAYS("mean temperature of the gas: a cold engine takes more heat, a hot one less; `none`: heat "
           "does not depend on the metal"), MEMORY },
    { QUANTITY("car.engine.gas_reference", TEMPERATURE, engine.gas_reference), DEFAULT("378.15 K"),
      RANGE("250 K to 440 K"), SAYS("metal temperature at which the heat law holds"), PRACTICE },
    { QUANTITY("car.engine.metal_capacity", CAPACITY, engine.metal_capacity),
      RULE(sp_rule_metal, "30 kJ/K per litre of displacement"), RANGE("100 J/K to 10000 kJ/K"),
      SAYS("heat capacity of the metal that takes part"), PRACTICE },
    { QUANTITY("car.engine.coolant_volume", VOLUME, engine.coolant_volume),
      RULE(sp_rule_jacket, "1.25 l per litre of displacement"), RANGE("0.0001 l to 500 l"),
      SAYS("coolant in the engine"), PRACTICE },
    { QUANTITY("car.engine.conductance", CONDUCTANCE, engine.conductance),
      RULE(sp_rule_conductance, "1.25 kW/K per litre of displacement"), RANGE("0.01 W/K to 1000 kW/K"),
      SAYS("metal to coolant at `conductance_flow`, 50/50 glycol at 90 degC"), PRACTICE },
    { QUANTITY("car.engine.conductance_flow", VOLUME_FLOW, engine.conductance_flow),
      RULE(sp_rule_conductance_flow, "60 l/min per litre of displacement"), RANGE("0.001 l/min to 20000 l/min"),
      SAYS("coolant flow of that conductance"), PRACTICE },
    { QUANTITY("car.engine.conductance_still", NUMBER, engine.conductance_still), DEFAULT("0.05"),
      RANGE("0.001 to 1"), SAYS("share of the conductance left in standing coolant"), PRACTICE },

    { GROUP("car.engine.heat"), FOR_DRIVE, SAYS("how much heat goes to the coolant") },
    { WORD("car.engine.heat.law", laws, ENUM, engine.heat_law), DEFAULT("rated"),
      RANGE("rated, table, fuel, air"), SAYS("`rated`: from `fraction` by fuel power; `table`: from `table`; "
      "`fuel`, `air`: from the trace's fuel or air flow"), PRACTICE },
    { QUANTITY("car.engine.heat.fraction", NUMBER, engine.heat_fraction), WHEN("for a drive, with law rated"),
      RANGE("0.02 to 3"), SAYS("heat to the coolant over brake power, at rated power; road petrol 0.65, turbo "
      "0.57, club-tuned 0.48, race 0.36, rotary 0.85"), PRACTICE },
    { QUANTITY("car.engine.heat.exponent", NUMBER, engine.heat_exponent), DEFAULT("0.85"), RANGE("0.3 to 1.5"),
      SAYS("heat goes with fuel power to this exponent"), PRACTICE },
    { QUANTITY("car.engine.heat.idle", POWER, engine.idle_heat), WHEN("else from the law"),
      RANGE("0 kW to 200 kW"), SAYS("heat to the coolant when idling"), OWN },
    { TABLE("car.engine.heat.table", heat_columns, engine.heat_table), WHEN("with law table"),
      .type = "table of engine speed, brake power and heat", SAYS("rows of engine speed, brake power, heat "
      "to the coolant; every speed with every power"), OWN },
    { QUANTITY("car.engine.heat.of_fuel", NUMBER, engine.fuel_share), DEFAULT("0.30"), RANGE("0.01 to 0.9"),
      SAYS("heat to the coolant over fuel power, for the laws `fuel` and `air`"), PRACTICE },
    { QUANTITY("car.engine.heat.air_fuel_ratio", NUMBER, engine.air_fuel_ratio), DEFAULT("14.7"),
      RANGE("1 to 200"), SAYS("mass of air over mass of fuel, for the law `air`"), DEFINITION },
    { QUANTITY("car.engine.heat.heating_value", HEATING_VALUE, engine.heating_value), DEFAULT("42.6 MJ/kg"),
      RANGE("1 MJ/kg to 150 MJ/kg"), SAYS("lower heating value of the fuel"), MEMORY },

    { GROUP("car.engine.skin"), OPTIONAL, SAYS("heat from the engine's surface to the air") },
    { QUANTITY("car.engine.skin.standing", CONDUCTANCE, engine.skin_standing), DEFAULT("20 W/K"),
      RANGE("0 W/K to 2000 W/K"), SAYS("standing"), PRACTICE },
    { QUANTITY("car.engine.skin.moving", CONDUCTANCE, engine.skin_moving), DEFAULT("55 W/K"),
      RANGE("0 W/K to 5000 W/K"), SAYS("at 100 km/h and above"), PRACTICE },
    END_OF_KEYS
};
