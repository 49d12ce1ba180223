/* Keys of the engine: size, heat, friction, capacities.
 * SPDX-License-Identifier: GPL-3.0-or-later */
#include "keys_row.h"

static const struct sp_word laws[] = {{"rated", SP_HEAT_RATED},
                                      {"table", SP_HEAT_TABLE},
                                      {"fuel", SP_HEAT_FUEL},
                                      {"air", SP_HEAT_AIR},
                                      {"correlation", SP_HEAT_CORRELATION},
                                      {"given", SP_HEAT_GIVEN},
                                      {NULL, 0}};
static const struct sp_word formulas[] = {{"polynomial", SP_FRICTION_POLYNOMIAL},
                                          {"Chen-Flynn", SP_FRICTION_CHEN_FLYNN},
                                          {"diesel", SP_FRICTION_DIESEL},
                                          {"petrol", SP_FRICTION_SI},
                                          {NULL, 0}};
static const struct sp_key_column heat_columns[] = {
    {SP_K_ROTATION, "0 rpm to 30000 rpm"}, {SP_K_POWER, "0 kW to 3000 kW"}, {SP_K_POWER, "0 kW to 3000 kW"}};

/* Needed of an engine, not of a heat that is given. */
#define UNLESS_GIVEN                                                                                         \
    FOR_DRIVE, WHEN("required for a drive, but with heat.law given"), .unless = "car.engine.heat.law",       \
                                                                      .unless_word = "given"

const struct sp_key sp_keys_engine[] = {
    {GROUP("car.engine"), FOR_DRIVE, SAYS("the engine as a source of heat")},
    {QUANTITY("car.engine.displacement", VOLUME, engine.displacement), UNLESS_GIVEN,
     RANGE("above 0 l, at most 100 l"), SAYS("swept volume"), OWN},
    {QUANTITY("car.engine.rated_power", POWER, engine.rated_power), UNLESS_GIVEN,
     RANGE("above 0 kW, at most 3000 kW"), SAYS("highest brake power"), OWN},
    {QUANTITY("car.engine.rated_speed", ROTATION, engine.rated_speed), UNLESS_GIVEN,
     RANGE("500 rpm to 30000 rpm"), SAYS("engine speed of that power"), OWN},
    {QUANTITY("car.engine.idle_speed", ROTATION, engine.idle_speed), DEFAULT("850 rpm"),
     RANGE("100 rpm to 6000 rpm"), SAYS("engine speed when idling"), PRACTICE},
    {QUANTITY("car.engine.cylinders", NUMBER, engine.cylinders), DEFAULT("4"), RANGE("1 to 24"),
     .whole = true, SAYS("for the law `correlation` and the formula `petrol`"), PRACTICE},
    {QUANTITY("car.engine.bore", LENGTH, engine.bore),
     RULE(sp_rule_bore, "from displacement; as the stroke where that is not given"),
     RANGE("above 0 mm, at most 2 m"), SAYS("of a cylinder; for the same"), PRACTICE},
    {QUANTITY("car.engine.stroke", LENGTH, engine.stroke), RULE(sp_rule_stroke, "from displacement and bore"),
     RANGE("above 0 mm, at most 4 m"), SAYS("of a cylinder; for all formulas but the polynomial"), PRACTICE},
    {QUANTITY("car.engine.compression", NUMBER, engine.compression), DEFAULT("10.5"), RANGE("4 to 30"),
     SAYS("compression ratio; for the formulas `petrol` and `Chen-Flynn`"), PRACTICE},
    {QUANTITY("car.engine.indicated_efficiency", NUMBER, engine.indicated_efficiency), DEFAULT("0.40"),
     RANGE("0.1 to 0.7"), SAYS("slope of the Willans line: work of the gas over fuel energy"), MEMORY},
    {.path = "car.engine.friction",
     .shape = SP_SHAPE_THREE,
     .kind = SP_K_PRESSURE,
     AT(engine.friction_pressure),
     DEFAULT("1.55 bar, 0 bar, 0.046 bar"),
     RANGE("-20 bar to 20 bar"),
     .type = "three pressures",
     SAYS("a, b, c of the fired engine's friction and gas exchange as mean "
          "pressure a + b N + c N^2, N in 1000 rev/min"),
     MEMORY},
    {.path = "car.engine.overrun_friction",
     .shape = SP_SHAPE_THREE,
     .kind = SP_K_PRESSURE,
     AT(engine.overrun_pressure),
     DEFAULT("0.97 bar, 0.15 bar, 0.05 bar"),
     RANGE("-20 bar to 20 bar"),
     .type = "three pressures",
     SAYS("the same of the motored engine"),
     SOURCE("Barnes-Moss, after Heywood 1988 ch. 13")},
    {QUANTITY("car.engine.overrun_share", NUMBER, engine.overrun_share),
     RULE(sp_rule_overrun_share,
          "0.40; 0.50 with the formulas `petrol` and `Chen-Flynn`, which hold no pumping"),
     RANGE("0 to 1"), SAYS("share of the motoring work that heats the coolant"), PRACTICE},
    {QUANTITY("car.engine.gas_temperature", TEMPERATURE, engine.gas_temperature),
     RULE(sp_rule_gas_temperature, "840 K; with the law `correlation` by its equivalence ratio"),
     RANGE("450 K to 2500 K"), .or_none = true,
     SAYS("mean temperature of the gas: a cold engine takes more heat, a hot one less; `none`: heat "
          "does not depend on the metal"),
     MEMORY},
    {QUANTITY("car.engine.gas_reference", TEMPERATURE, engine.gas_reference), DEFAULT("378.15 K"),
     RANGE("250 K to 440 K"), SAYS("metal temperature at which the heat law holds"), PRACTICE},
    {QUANTITY("car.engine.metal_capacity", CAPACITY, engine.metal_capacity),
     RULE(sp_rule_metal, "30 kJ/K per litre of displacement"), RANGE("100 J/K to 10000 kJ/K"),
     SAYS("heat capacity of the metal that takes part"), PRACTICE},
    {QUANTITY("car.engine.coolant_volume", VOLUME, engine.coolant_volume),
     RULE(sp_rule_jacket, "1.25 l per litre of displacement"), RANGE("0.0001 l to 500 l"),
     SAYS("coolant in the engine"), PRACTICE},
    {QUANTITY("car.engine.conductance", CONDUCTANCE, engine.conductance),
     RULE(sp_rule_conductance, "1.25 kW/K per litre of displacement"), RANGE("0.01 W/K to 1000 kW/K"),
     SAYS("metal to coolant at `conductance_flow`, 50/50 glycol at 90 degC"), PRACTICE},
    {QUANTITY("car.engine.conductance_flow", VOLUME_FLOW, engine.conductance_flow),
     RULE(sp_rule_conductance_flow, "60 l/min per litre of displacement"),
     RANGE("0.001 l/min to 20000 l/min"), SAYS("coolant flow of that conductance"), PRACTICE},
    {QUANTITY("car.engine.conductance_still", NUMBER, engine.conductance_still), DEFAULT("0.05"),
     RANGE("0.001 to 1"), SAYS("share of the conductance left in standing coolant"), PRACTICE},

    {QUANTITY("car.engine.wetted_area", AREA, engine.wetted_area), DEFAULT("0 m2"), RANGE("0 m2 to 50 m2"),
     SAYS("hot surface of the jacket that boils first, some 0.08 m2 per litre around the exhaust valves; 0: "
          "local "
          "boiling is not judged"),
     PRACTICE},
    {QUANTITY("car.engine.breathes_bay", NUMBER, engine.breathes_bay), DEFAULT("0"), RANGE("0 to 1"),
     SAYS("share of the engine's air that comes from the bay behind the first duct's cores"), DEFINITION},

    {GROUP("car.engine.heat"), FOR_DRIVE, SAYS("how much heat goes to the coolant")},
    {WORD("car.engine.heat.law", laws, ENUM, engine.heat_law), DEFAULT("rated"),
     RANGE("rated, table, fuel, air, correlation, given"),
     SAYS("`rated`: from `fraction` by fuel power; `table`: from `table`; "
          "`fuel`, `air`: from the trace's fuel or air flow; `correlation`: from bore and gas flow after "
          "Taylor & "
          "Toong 1957, engines scatter by 20 % about it; `given`: `given` and `loss`, for what is no engine"),
     PRACTICE},
    {QUANTITY("car.engine.heat.fraction", NUMBER, engine.heat_fraction), WHEN("for a drive, with law rated"),
     RANGE("0.02 to 3"),
     SAYS("heat to the coolant over brake power, at rated power; road petrol 0.65, turbo "
          "0.57, club-tuned 0.48, race 0.36, rotary 0.85"),
     PRACTICE},
    {QUANTITY("car.engine.heat.exponent", NUMBER, engine.heat_exponent), DEFAULT("0.85"), RANGE("0.3 to 1.5"),
     SAYS("heat goes with fuel power to this exponent"), PRACTICE},
    {QUANTITY("car.engine.heat.idle", POWER, engine.idle_heat), WHEN("else from the law"),
     RANGE("0 kW to 200 kW"), SAYS("heat to the coolant when idling"), OWN},
    {TABLE("car.engine.heat.table", heat_columns, engine.heat_table), WHEN("with law table"),
     .type = "table of engine speed, brake power and heat",
     SAYS("rows of engine speed, brake power, heat "
          "to the coolant; every speed with every power"),
     OWN},
    {QUANTITY("car.engine.heat.of_fuel", NUMBER, engine.fuel_share), DEFAULT("0.30"), RANGE("0.01 to 0.9"),
     SAYS("heat to the coolant over fuel power, for the laws `fuel` and `air`"), PRACTICE},
    {QUANTITY("car.engine.heat.air_fuel_ratio", NUMBER, engine.air_fuel_ratio), DEFAULT("14.7"),
     RANGE("1 to 200"),
     SAYS("mass of air over mass of fuel, for the laws `air` and `correlation`, and for charge air"),
     DEFINITION},
    {QUANTITY("car.engine.heat.heating_value", HEATING_VALUE, engine.heating_value), DEFAULT("42.6 MJ/kg"),
     RANGE("1 MJ/kg to 150 MJ/kg"), SAYS("lower heating value of the fuel"), MEMORY},
    {QUANTITY("car.engine.heat.energy_cap", NUMBER, engine.energy_cap), DEFAULT("0.75"), RANGE("0 to 1"),
     SAYS("a fired engine's work, coolant heat and oil heat take no more than this share of the fuel's "
          "energy, of the "
          "Willans line or as measured: beyond it the coolant's heat is cut, with a caution; not with "
          "`table` or "
          "`given`; 0: no cap"),
     PRACTICE},
    {QUANTITY("car.engine.heat.correlation_constant", NUMBER, engine.correlation_constant), DEFAULT("10.4"),
     RANGE("1 to 50"),
     SAYS("C of Nu = C Re^0.75, for the law `correlation`; 7 to 12 covers most engines: fit it to one "
          "measured point"),
     SOURCE("C. F. Taylor, The Internal-Combustion Engine, as two public programs quote it")},
    {QUANTITY("car.engine.heat.stoichiometric", NUMBER, engine.stoichiometric), DEFAULT("14.7"),
     RANGE("1 to 200"),
     SAYS("mass of air over mass of fuel at which both are used up, for the law `correlation`; diesel 14.5, "
          "E85 9.8, "
          "methanol 6.5"),
     MEMORY},
    {FLAG("car.engine.heat.diesel", engine.diesel), DEFAULT("false"),
     SAYS("the gas temperature of the law `correlation` is a diesel's; its mixture is lean, air_fuel_ratio "
          "18 to 70"),
     DEFINITION},
    {QUANTITY("car.engine.heat.given", POWER, engine.heat_given), DEFAULT("0 W"), RANGE("0 W to 3000 kW"),
     SAYS("heat to the coolant whatever the power, for the law `given`"), OWN},
    {QUANTITY("car.engine.heat.loss", NUMBER, engine.heat_loss), DEFAULT("0"), RANGE("0 to 1"),
     SAYS("heat to the coolant over power, driving or braking, for the law `given`; motor and inverter "
          "together 0.06 "
          "to 0.12, their coolant no hotter than 50 degC to 65 degC"),
     PRACTICE},

    {GROUP("car.engine.overrun"), OPTIONAL,
     SAYS("what it takes to motor the engine with the fuel cut; no formula is "
          "better than some 20 % for an engine it was not fitted to")},
    {WORD("car.engine.overrun.formula", formulas, ENUM, engine.overrun_law), DEFAULT("polynomial"),
     RANGE("polynomial, Chen-Flynn, diesel, petrol"),
     SAYS("`polynomial`: overrun_friction, high for a modern engine; `Chen-Flynn`: a + b p_max + c S + d S^2 "
          "with S the "
          "mean piston speed (SAE 650733); `diesel`: 75 kPa + 48 kPa N/(1000/min) + 0.4 kPa S^2 (Heywood "
          "1988, from memory); "
          "`petrol`: Patton, Nitschke & Heywood (SAE 890836, as restated in SAE 2003-01-0725)"),
     PRACTICE},
    {QUANTITY("car.engine.overrun.a", PRESSURE, engine.chen_flynn[0]), DEFAULT("0.137 bar"),
     RANGE("-10 bar to 10 bar"), SAYS("a of Chen-Flynn"), MEMORY},
    {QUANTITY("car.engine.overrun.b", NUMBER, engine.chen_flynn[1]), DEFAULT("0.005"), RANGE("-1 to 1"),
     SAYS("b of Chen-Flynn, on the peak pressure of the motored engine; SI engines 0.010 to 0.015 with a 0.4 "
          "bar to "
          "0.6 bar, another account says"),
     MEMORY},
    {QUANTITY("car.engine.overrun.c", LINEAR_DROP, engine.chen_flynn[2]), DEFAULT("0.162 bar.s/m"),
     RANGE("-10 bar.s/m to 10 bar.s/m"), SAYS("c of Chen-Flynn"), MEMORY},
    {QUANTITY("car.engine.overrun.d", QUADRATIC_DROP, engine.chen_flynn[3]), DEFAULT("0 Pa.s2/m2"),
     RANGE("-1 bar.s2/m2 to 1 bar.s2/m2"), SAYS("d of Chen-Flynn"), MEMORY},
    {QUANTITY("car.engine.overrun.intake", NUMBER, engine.overrun_intake), DEFAULT("0.3"), RANGE("0.05 to 4"),
     SAYS("pressure in the inlet manifold over ambient on overrun, for `petrol` and `Chen-Flynn`; without a "
          "throttle 1"),
     PRACTICE},
    {QUANTITY("car.engine.overrun.oil", TEMPERATURE, engine.overrun_oil), DEFAULT("85 degC"),
     RANGE("-40 degC to 180 degC"), SAYS("temperature of the oil (10W-30) on overrun, for `petrol`"),
     PRACTICE},

    {GROUP("car.engine.skin"), OPTIONAL, SAYS("heat from the engine's surface to the air")},
    {QUANTITY("car.engine.skin.standing", CONDUCTANCE, engine.skin_standing), DEFAULT("20 W/K"),
     RANGE("0 W/K to 2000 W/K"), SAYS("standing"), PRACTICE},
    {QUANTITY("car.engine.skin.moving", CONDUCTANCE, engine.skin_moving), DEFAULT("55 W/K"),
     RANGE("0 W/K to 5000 W/K"), SAYS("at 100 km/h and above"), PRACTICE},
    END_OF_KEYS};
