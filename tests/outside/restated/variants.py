# SPDX-License-Identifier: GPL-3.0-or-later
"""The drives that are compared: the examples, and variants that ask for other parts of the model."""


def _proportional(raw):
    """Fan by degrees from the radiator's outlet, running on; electric pump, running on; the gauge elsewhere."""
    car = raw["car"]
    car["duct"]["fan"].update(control="proportional", sensor="radiator out", run_on="90 s",
                              proportional={"from": "76 degC", "to": "92 degC", "least": 0.4})
    car["pump"].update(drive="electric", run_on="200 s")
    car["gauge"] = {"place": "radiator out", "lag": "4 s", "offset": "2 K"}
    car["thermostat"]["bypass_shut"] = 2
    return raw


def _following_wind(raw):
    """Air backwards through the core in the queue and the paddock, the fan ahead of the core."""
    raw["air"]["wind"] = "-9 m/s"
    raw["car"]["duct"]["fan"].update(before="core", basis="total", control="always", run_on="40 s")
    raw["car"]["thermostat"]["hysteresis"] = "0 K"
    hold = {"hold": "50 s", "speed": "30 km/h", "power": "9 kW", "engine_speed": "2400 rpm"}
    raw["drive"] = [raw["drive"][0], hold, dict(hold, power="-2 kW", engine_speed="2600 rpm"), *raw["drive"][1:]]
    return raw


def _makers_table(raw):
    """A core known by its maker's tables, two fans by pairs, a small tank that loses coolant."""
    car = raw["car"]
    core = car["duct"]["core"]
    for key in ("fins", "tubes"):
        del core[key]
    core["pressure_drop"] = {"table": [["2 m/s", "38 Pa"], ["4 m/s", "110 Pa"], ["6 m/s", "208 Pa"],
                                       ["8 m/s", "330 Pa"]],
                             "at_temperature": "25 degC", "at_density": "1.18 kg/m3"}
    core["free_area_ratio"] = 0.72
    core["heat"] = {"face_velocity": ["2 m/s", "4 m/s", "6 m/s", "8 m/s"],
                    "coolant_flow": ["0.5 kg/s", "1 kg/s", "2 kg/s"],
                    "rejection": [["265 W/K", "285 W/K", "297 W/K"], ["415 W/K", "470 W/K", "505 W/K"],
                                  ["520 W/K", "608 W/K", "666 W/K"], ["598 W/K", "717 W/K", "799 W/K"]]}
    car["duct"]["fan"].update(count=2, curve=[["0.02 m3/s", "150 Pa"], ["0.15 m3/s", "118 Pa"], ["0.25 m3/s", "51 Pa"],
                                              ["0.3 m3/s", "0 Pa"]])
    car["tank"] = {"volume": "0.5 l", "air_space": "0.15 l", "cap": "0.5 bar"}
    raw["start"] = {"coolant": "60 degC", "metal": "75 degC", "radiator": "40 degC"}
    raw["limits"] = {"coolant": "140 degC"}
    return raw


def _laps(raw, folder):
    """Three laps with rows merged, no thermostat but an engine that feels its metal, power laws in the core."""
    raw["drive"] = [{"trace": folder + "/stonemere.csv"}, {"soak": "60 s"}, {"idle": "60 s"}]
    raw["solver"] = {"merge": "2.5 s"}
    car = raw["car"]
    car["engine"].update(heat={"fraction": 0.4, "idle": "7 kW"}, gas_temperature="800 K", skin={})
    car["pump"] = {"curve": [["0 l/min", "210 kPa"], ["120 l/min", "180 kPa"], ["260 l/min", "60 kPa"]],
                   "speed": "7000 rpm", "ratio": 0.9}
    car["tank"]["bleed"] = "2 %"
    core = car["duct"]["core"]
    core["heat"] = {"air_conductance": "2600 W/K", "at_face_velocity": "8 m/s", "air_exponent": 0.45,
                    "coolant_conductance": "11 kW/K", "at_coolant_flow": "2.5 kg/s"}
    core["pressure_drop"] = {"linear": "14 Pa.s/m", "quadratic": "4.1 Pa.s2/m2", "at_temperature": "20 degC"}
    del core["tubes"], core["fins"]
    return raw


def _propylene(raw):
    """The road car on propylene glycol in a head wind, its core a plain loss coefficient with fins' heat."""
    raw["air"].update(wind="4 m/s", pressure="93 kPa", humidity="0 %")
    raw["air"].pop("altitude")
    raw["car"]["coolant"] = {"kind": "propylene glycol", "glycol": "35 %"}
    raw["car"]["duct"]["core"]["pressure_drop"] = {"coefficient": 9.5}
    raw["car"]["duct"]["core"]["heat_factor"] = 0.9
    raw["drive"] = [dict(raw["drive"][0], smooth="2.5 s"), {"soak": "200 s"}, {"idle": "150 s"}]
    raw["start"] = {"coolant": "70 degC"}
    return raw


def variants(example, folder):
    for name in ("harrowmoor", "nedc", "ashlow", "pennock", "thornby"):
        yield name, example(name)
    yield "harrowmoor, proportional fan, electric pump", _proportional(example("harrowmoor"))
    yield "harrowmoor, following wind", _following_wind(example("harrowmoor"))
    yield "harrowmoor, maker's table", _makers_table(example("harrowmoor"))
    yield "ashlow, laps of stonemere", _laps(example("ashlow"), folder)
    yield "nedc, propylene glycol, head wind", _propylene(example("nedc"))
