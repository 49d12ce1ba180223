/* Keys of the header tank. Its defaults rest on everything else that holds coolant: last of the tables.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys_row.h"

const struct sp_key sp_keys_tank[] = {
    {GROUP("car.tank"), OPTIONAL, SAYS("header tank, or the swirl pot that serves as one, and its cap")},
    {QUANTITY("car.tank.air_space", VOLUME, tank.air_space),
     RULE(sp_rule_air_space, "11 % of the whole system, or half of a given tank if that is less"),
     RANGE("above 0 l, at most 100 l"), SAYS("air in the tank when filled cold"), PRACTICE},
    {QUANTITY("car.tank.volume", VOLUME, tank.volume), RULE(sp_rule_tank_volume, "twice the air space"),
     RANGE("above 0 l, at most 200 l"), SAYS("volume of the tank"), PRACTICE},
    {QUANTITY("car.tank.filled_at", TEMPERATURE, tank.fill_temperature), DEFAULT("20 degC"),
     RANGE("-40 degC to 80 degC"), SAYS("temperature at which it was filled and shut"), PRACTICE},
    {QUANTITY("car.tank.cap", GAUGE, tank.cap), DEFAULT("1.2 bar"), RANGE("0 bar to 10 bar"),
     SAYS("pressure above ambient at which the cap opens"), PRACTICE},
    {QUANTITY("car.tank.vacuum", PRESSURE, tank.vacuum), DEFAULT("5 kPa"), RANGE("0.1 kPa to 100 kPa"),
     SAYS("pressure below ambient at which the cap lets air in"),
     SOURCE("vacuum valves of 1 to 5 kPa, a "
            "maker's manual")},
    {QUANTITY("car.tank.compliance", COMPLIANCE, tank.compliance), DEFAULT("0.03 l/bar"),
     RANGE("0.0001 l/bar to 5 l/bar"), SAYS("how the hoses give under pressure"), PRACTICE},
    {QUANTITY("car.tank.bleed", NUMBER, tank.bleed), DEFAULT("1.5 %"), RANGE("0 % to 50 %"),
     SAYS("share of the pump's flow that goes through the tank, without bleed_bore"), PRACTICE},
    {QUANTITY("car.tank.bleed_bore", LENGTH, tank.bleed_bore), DEFAULT("0 mm"), RANGE("0 mm to 50 mm"),
     SAYS("bore of the restrictor in the line from engine out to the tank, 1.5 mm to 4 mm: the flow follows "
          "from the pressures, and bleed does not count. 0: none"),
     PRACTICE},
    {QUANTITY("car.tank.lost", VOLUME, tank.lost), DEFAULT("0 l"), RANGE("0 l to 100 l"),
     SAYS("coolant that is missing from the start, or from a change on"), DEFINITION},
    {QUANTITY("car.tank.catch_can", VOLUME, tank.catch_can), DEFAULT("0 l"), RANGE("0 l to 200 l"),
     SAYS("of the can that takes what the cap lets out, 0.9 l to 2 l; 0: not watched"), PRACTICE},
    {QUANTITY("car.tank.skin", CONDUCTANCE, tank.skin), DEFAULT("2 W/K"), RANGE("0 W/K to 500 W/K"),
     SAYS("heat from the tank to the air"), PRACTICE},
    END_OF_KEYS};
