# SPDX-License-Identifier: GPL-3.0-or-later
"""Case, car and trace as dictionaries in SI units, with the defaults of docs/case-file.md and section 19."""
import csv
import json
import math
import os
import re

from .fluids import standard_altitude, standard_pressure

UNITS = {"": 1, "m": 1, "mm": 1e-3, "km": 1e3, "m2": 1, "cm2": 1e-4, "m3": 1, "l": 1e-3, "m3/s": 1, "l/min": 1e-3 / 60,
         "Pa": 1, "kPa": 1e3, "bar": 1e5, "W": 1, "kW": 1e3, "W/K": 1, "kW/K": 1e3, "J/K": 1, "kJ/K": 1e3, "K": 1,
         "s": 1, "min": 60, "h": 3600, "m/s": 1, "km/h": 1 / 3.6, "rpm": 1 / 60, "rev/s": 1, "kg": 1,
         "deg": math.pi / 180, "kg/s": 1, "kg/m3": 1,
         "rad": 1, "V": 1, "%": 0.01, "W/mK": 1,
         "Pa.s/m": 1, "Pa.s2/m2": 1}
NUMBER = re.compile(r"^\s*([-+]?\d[\d.]*(?:[eE][-+]?\d+)?)\s*(\S*)\s*$")
LIPS = {"sheet edge": 1.0, "hole in a skin": 0.5, "folded": 0.3, "rounded 10 mm": 0.18, "bellmouth": 0.05}


def quantity(value):
    """A text with a unit as a number in SI units; all else as it stands."""
    if isinstance(value, list):
        return [quantity(v) for v in value]
    if isinstance(value, dict):
        return {k: quantity(v) for k, v in value.items()}
    found = NUMBER.match(value) if isinstance(value, str) else None
    if not found:
        return value
    number, unit = float(found.group(1)), found.group(2)
    if unit == "degC":
        return number + 273.15
    return number * UNITS[unit]


def _fill(have, **defaults):
    for key, value in defaults.items():
        have.setdefault(key, value)
    return have


def read(path):
    """The case as text with its car inside and its traces by absolute path."""
    folder = os.path.dirname(os.path.abspath(path))
    with open(path, encoding="utf-8") as f:
        raw = json.load(f)
    if isinstance(raw["car"], str):
        with open(os.path.join(folder, raw["car"]), encoding="utf-8") as f:
            raw["car"] = json.load(f)
    for step in raw["drive"]:
        if "trace" in step:
            step["trace"] = os.path.normpath(os.path.join(folder, step["trace"]))
    return raw


def understood(raw):
    """The case in SI units with every default."""
    case = quantity(raw)
    air = _fill(case["air"], humidity=0.0, wind=0.0)
    if "pressure" in air:
        air["altitude"] = standard_altitude(air["pressure"])
    else:
        air["pressure"] = standard_pressure(air.setdefault("altitude", 0.0))
    _fill(case.setdefault("solver", {}), tolerance=1e-5, merge=0.3)
    start = _fill(case.setdefault("start", {}), coolant=air["ambient"])
    _fill(start, metal=start["coolant"], radiator=start["coolant"])
    _car(case["car"])
    return case


def _car(car):
    _fill(car["body"], rolling_resistance=0.012, rotating_mass=1.05, driveline_efficiency=0.92, gears=None)
    _fill(car.setdefault("electrics", {}), running=13.5, stopped=12.0, alternator_efficiency=0.55)
    _fill(car.setdefault("gauge", {}), place="engine out", lag=9.0, offset=0.0)
    _engine(car["engine"])
    _fill(car["body"], shift_speed=car["engine"]["rated_speed"])
    coolant = _fill(car.setdefault("coolant", {}), kind="ethylene glycol")
    _fill(coolant, glycol=0.0 if coolant["kind"] == "water" else 0.5)
    pump = _fill(car["pump"], drive="belt", ratio=1.15, rated_voltage=13.0, run_on=0.0)
    if isinstance(pump["curve"], dict):
        _fill(pump, power=2 / (3 * math.sqrt(3)) * pump["curve"]["shutoff"] * pump["curve"]["free_flow"] / 0.32)
    if car.setdefault("thermostat", {}) != "none":
        stat = _fill(car["thermostat"], opens=358.15, hysteresis=3.0, lag=12.0, lag_still=40.0, bore=0.035, lift=0.008,
                     discharge=0.6, leak=0.003, bypass_shut=0.8)
        _fill(stat, full=stat["opens"] + 12)
    hoses = _fill(car.setdefault("hoses", {}), bends=4.0, skin=6.0)
    for name in ("out", "back"):
        _fill(hoses.setdefault(name, {}), length=0.8, bore=0.034)
    _fill(hoses.setdefault("jacket", {}), flow=0.1 / 60, drop=40e3)
    _fill(hoses.setdefault("bypass", {}), flow=0.06 / 60, drop=45e3)
    _duct(car["duct"])
    tank = _fill(car.setdefault("tank", {}), filled_at=293.15, cap=1.2e5, vacuum=5e3, compliance=0.03e-3 / 1e5,
                 bleed=0.015, skin=2.0)
    if "air_space" not in tank:
        pipes = sum(math.pi / 4 * hoses[n]["bore"] ** 2 * hoses[n]["length"] for n in ("out", "back"))
        space = 0.11 / 0.89 * (car["engine"]["coolant_volume"] + car["duct"]["core"]["coolant_volume"] + pipes)
        tank["air_space"] = min(space, tank["volume"] / 2) if "volume" in tank else space
    _fill(tank, volume=2 * tank["air_space"])


def _engine(engine):
    swept = engine["displacement"]
    _fill(engine, idle_speed=850 / 60, indicated_efficiency=0.40, friction=[1.55e5, 0.0, 0.046e5],
          overrun_friction=[0.97e5, 0.15e5, 0.05e5], overrun_share=0.40, gas_temperature=840.0, gas_reference=378.15,
          metal_capacity=30e3 * swept / 1e-3, coolant_volume=1.25 * swept, conductance=1250 * swept / 1e-3,
          conductance_flow=swept, conductance_still=0.05)
    for key in ("friction", "overrun_friction"):
        a, b, c = engine[key]
        engine[key] = (a, b * 60 / 1000, c * (60 / 1000) ** 2)
    _fill(engine["heat"], law="rated", exponent=0.85)
    _fill(engine.setdefault("skin", {}), standing=20.0, moving=55.0)


def _duct(duct):
    inlet = _fill(duct["inlet"], recovery=1.0, lip="sheet edge", screen=0.0)
    _fill(inlet, lip_loss=LIPS[inlet["lip"]])
    _fill(duct.setdefault("diffuser", {}), loss=0.0)
    _fill(duct["exit"], loss=0.0, pressure_coefficient=0.0, angle=0.0)
    core = _fill(duct["core"], heat_factor=1.0, cells=10)
    bulk = core["width"] * core["height"] * core["depth"]
    _fill(core, metal_capacity=900 * (0.33 * bulk / 1e-3 + 2.5 * core["height"] / 0.4),
          coolant_volume=0.13 * bulk + 1.3e-3 * core["height"] / 0.4)
    if "tubes" in core:
        tubes = _fill(core["tubes"], wall=0.3e-3, rows=1, passes=1)
        _fill(core["fins"], thickness=0.1e-3, conductivity=180.0)
        if core["fins"].get("kind") != "plate":
            _fill(core["fins"], louvre_length=0.85 * (tubes["pitch"] - tubes["height"]))
    else:
        core.setdefault("drop", {"flow": 0.1 / 60, "drop": 18e3})
    if "fan" in duct:
        fan = _fill(duct["fan"], count=1, basis="total", before=None, windmill_loss=1.2, rated_voltage=13.0,
                    spin_up=1.5, control="switch", switch={}, proportional={}, sensor="engine out", run_on=0.0)
        if "diameter" in fan:
            _fill(fan, hub=0.35 * fan["diameter"])
        _fill(fan["switch"], on=369.15, off=364.15)
        _fill(fan["proportional"], **{"from": 363.15, "to": 373.15, "least": 0.33})


def trace(path):
    """Columns of a file of rows, in SI units, from the heading `name [unit]`."""
    with open(path, encoding="utf-8", newline="") as f:
        rows = list(csv.reader(f))
    columns = {}
    for j, head in enumerate(rows[0]):
        name, _, unit = head.partition("[")
        name, unit = name.strip(), unit.strip(" ]")
        cells = [r[j].strip() for r in rows[1:] if r]
        columns[name] = cells if name == "mark" else [quantity(c + " " + unit) for c in cells]
    columns["time"] = [t - columns["time"][0] for t in columns["time"]]
    return columns
