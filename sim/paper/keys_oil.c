/* Keys of oil with a heat of its own, the engine's and the gearbox's, and of charge air.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys_row.h"

/* Both oils have the same keys; what is likely of them differs. `g`: oil or gearbox. */
#define SKIN_ROWS(g, standing_, moving_)                                                                     \
    {GROUP("car." #g ".skin"), OPTIONAL, SAYS("heat from its housing to the air")},                          \
        {QUANTITY("car." #g ".skin.standing", CONDUCTANCE, g.skin_standing), DEFAULT(standing_),             \
         RANGE("0 W/K to 1000 W/K"), SAYS("standing"), PRACTICE},                                            \
    {                                                                                                        \
        QUANTITY("car." #g ".skin.moving", CONDUCTANCE, g.skin_moving), DEFAULT(moving_),                    \
            RANGE("0 W/K to 2000 W/K"), SAYS("at 100 km/h and above"), PRACTICE                              \
    }

#define COOLER_ROWS(g, flow_, most_)                                                                         \
    {QUANTITY("car." #g ".flow", VOLUME_FLOW, g.flow), DEFAULT(flow_), RANGE("0.01 l/min to 2000 l/min"),    \
     SAYS("through its coolers at flow_speed; below it goes with engine speed"), PRACTICE},                  \
        {QUANTITY("car." #g ".flow_speed", ROTATION, g.flow_speed), DEFAULT("4000 rpm"),                     \
         RANGE("100 rpm to 30000 rpm"), SAYS("engine speed of that flow"), PRACTICE},                        \
        {QUANTITY("car." #g ".flow_most", VOLUME_FLOW, g.flow_most), RULE(most_, "that flow"),               \
         RANGE("0.01 l/min to 2000 l/min"), SAYS("what the relief valve lets through at most"), PRACTICE},   \
        {QUANTITY("car." #g ".plate", CONDUCTANCE, g.plate), DEFAULT("0 W/K"), RANGE("0 W/K to 20 kW/K"),    \
         SAYS("a plate cooler's, at flow_most, to the coolant that enters the engine, with the flow of "     \
              "oil; 150 W/K to 400 W/K; 0: none"),                                                           \
         PRACTICE},                                                                                          \
    {                                                                                                        \
        QUANTITY("car." #g ".opens", TEMPERATURE, g.opens), WHEN("else its air cooler stands open"),         \
            RANGE("0 degC to 180 degC"),                                                                     \
            SAYS("its thermostat begins to open the air cooler; 80 degC to 95 degC"), OWN                    \
    }

/* From the time constants of the trade: some 500 s for oil without an air cooler, 1100 s for a gearbox. */
#define METAL_ROW(g, rule_)                                                                                  \
    {                                                                                                        \
        QUANTITY("car." #g ".metal_capacity", CAPACITY, g.metal_capacity),                                   \
            RULE(rule_, "7 kJ/K for each litre of it"), RANGE("0 kJ/K to 1000 kJ/K"),                        \
            SAYS("metal that warms with it: sump, bearings, housing"), PRACTICE                              \
    }

#define THERMOSTAT_ROWS(g, full_)                                                                            \
    {QUANTITY("car." #g ".full", TEMPERATURE, g.full), RULE(full_, "10 K above opens"),                      \
     RANGE("0 degC to 200 degC"), SAYS("its thermostat is open; straight in between, without lag"),          \
     PRACTICE},                                                                                              \
    {                                                                                                        \
        QUANTITY("car." #g ".still", NUMBER, g.still), DEFAULT("0.1"), RANGE("0 to 1"),                      \
            SAYS("share of the flow that passes the air cooler with the thermostat shut"), PRACTICE          \
    }

const struct sp_key sp_keys_oil[] = {
    {FITTED_GROUP("car.oil", oil.fitted), OPTIONAL,
     SAYS("the engine's oil with a temperature of its own; absent: its heat goes with the coolant's, and "
          "`heat.fraction` holds it. With it, take the oil's part off `heat.fraction`: it comes on top. Its air "
          "coolers are cores that carry it")},
    {QUANTITY("car.oil.volume", VOLUME, oil.volume), DEFAULT("4.5 l"), RANGE("0.1 l to 200 l"),
     SAYS("in all, without its coolers; road 3.5 l to 6.5 l, dry sump 6 l to 12 l"), PRACTICE},
    {QUANTITY("car.oil.heat_share", NUMBER, oil.heat_share),
     RULE(sp_rule_oil_share,
          "0.09 of rated power in all, less what friction_share makes of it at rated speed"),
     RANGE("0 to 0.5"),
     SAYS("heat into it over brake power: with the friction's 0.05 to 0.14 in a club engine, 0.09 to 0.20 "
          "with piston "
          "jets, 0.12 to 0.22 in a race engine"),
     PRACTICE},
    {QUANTITY("car.oil.friction_share", NUMBER, oil.friction_share), DEFAULT("0.12"), RANGE("0 to 1"),
     SAYS("heat into it over motoring power at the engine's speed, fired or not"), PRACTICE},
    {QUANTITY("car.oil.block", CONDUCTANCE, oil.block), DEFAULT("75 W/K"), RANGE("0 W/K to 20 kW/K"),
     SAYS("from it to the engine's metal; 50 W/K to 100 W/K"), PRACTICE},
    METAL_ROW(oil, sp_rule_oil_metal),
    COOLER_ROWS(oil, "25 l/min", sp_rule_oil_most),
    THERMOSTAT_ROWS(oil, sp_rule_oil_full),
    SKIN_ROWS(oil, "3 W/K", "12 W/K"),

    {FITTED_GROUP("car.gearbox", gearbox.fitted), OPTIONAL,
     SAYS("the oil of gearbox or final drive; absent: left out")},
    {QUANTITY("car.gearbox.volume", VOLUME, gearbox.volume), DEFAULT("2 l"), RANGE("0.1 l to 200 l"),
     SAYS("in all; add 0.4 l for each kilogram of gears and shafts that warms with it, half the housing too"),
     PRACTICE},
    {QUANTITY("car.gearbox.heat_share", NUMBER, gearbox.heat_share), DEFAULT("0.025"), RANGE("0 to 0.5"),
     SAYS("heat into it over the power through it, either way; gearbox 0.015 to 0.045, hypoid axle 0.025 to "
          "0.06"),
     PRACTICE},
    {QUANTITY("car.gearbox.friction_share", NUMBER, gearbox.friction_share), DEFAULT("0"), RANGE("0 to 1"),
     SAYS("heat into it over the engine's motoring power at its speed, for what goes with speed alone"),
     PRACTICE},
    {QUANTITY("car.gearbox.block", CONDUCTANCE, gearbox.block), DEFAULT("0 W/K"), RANGE("0 W/K to 20 kW/K"),
     SAYS("from it to the engine's metal"), PRACTICE},
    METAL_ROW(gearbox, sp_rule_gearbox_metal),
    COOLER_ROWS(gearbox, "8 l/min", sp_rule_gearbox_most),
    THERMOSTAT_ROWS(gearbox, sp_rule_gearbox_full),
    SKIN_ROWS(gearbox, "4 W/K", "15 W/K"),

    {FITTED_GROUP("car.charge", charge.fitted), OPTIONAL,
     SAYS("air from a compressor; absent: none. Its cooler is a core that carries it")},
    {QUANTITY("car.charge.pressure_ratio", NUMBER, charge.pressure_ratio), REQUIRED, RANGE("1 to 10"),
     SAYS("of the compressor at air_flow, 1.4 to 2.5; its excess over 1 falls with air flow squared, and "
          "beyond air_flow it stays"),
     OWN},
    {QUANTITY("car.charge.efficiency", NUMBER, charge.efficiency), DEFAULT("0.70"), RANGE("0.2 to 1"),
     SAYS("isentropic, of the compressor; 0.60 to 0.76"), PRACTICE},
    {QUANTITY("car.charge.intake_rise", TEMP_DIFF, charge.intake_rise), DEFAULT("5 K"), RANGE("0 K to 150 K"),
     SAYS("of the air at the compressor's inlet over ambient; a closed box on a cold duct 1 K to 8 K, a "
          "filter open in the bay "
          "8 K to 35 K"),
     PRACTICE},
    {QUANTITY("car.charge.air_flow", MASS_FLOW, charge.air_flow),
     RULE(sp_rule_charge_flow, "fuel of the Willans line at rated power times heat.air_fuel_ratio"),
     RANGE("above 0 kg/s, at most 20 kg/s"),
     SAYS("air at rated power; it goes with the fuel's flow where the trace has no air_flow"), PRACTICE},
    END_OF_KEYS};
