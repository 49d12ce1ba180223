# SPDX-License-Identifier: GPL-3.0-or-later
"""Invented cars that together have every fitted part at least once, and their drives."""
import copy


def core(width=0.45, height=0.35, ua=2600, water=9000, **more):
    return {"width": f"{width} m", "height": f"{height} m", "depth": "40 mm", "cells": 3, "metal_capacity": "4 kJ/K",
            "coolant_volume": "1.8 l", "drop": {"flow": "100 l/min", "drop": "20 kPa"},
            "pressure_drop": {"linear": "14 Pa.s/m", "quadratic": "4.1 Pa.s2/m2", "at_temperature": "20 degC"},
            "heat": {"air_conductance": f"{ua} W/K", "at_face_velocity": "8 m/s", "air_exponent": 0.45,
                     "coolant_conductance": f"{water} W/K", "at_coolant_flow": "1.6 kg/s"}, **more}


def duct(**more):
    return {"inlet": {"area": "500 cm2", "recovery": 0.9}, "exit": {"area": "800 cm2", "loss": 0.4,
                                                                   "pressure_coefficient": -0.1},
            "core": core(),
            "fan": {"curve": {"shutoff": "230 Pa", "free_flow": "0.75 m3/s"}, "power": "210 W", "control": "proportional",
                    "proportional": {"from": "84 degC", "to": "96 degC"}}, **more}


def base(**car):
    return {"air": {"ambient": "28 degC", "altitude": "300 m", "humidity": "40 %"},
            "car": {"body": {"mass": "1200 kg", "frontal_area": "1.9 m2", "drag_coefficient": 0.4},
                    "engine": {"displacement": "2 l", "rated_power": "150 kW", "rated_speed": "6500 rpm",
                               "heat": {"law": "rated", "fraction": 0.5, "idle": "6 kW"}},
                    "pump": {"curve": {"shutoff": "160 kPa", "free_flow": "240 l/min"}, "speed": "7000 rpm"},
                    "tank": {"volume": "3 l", "air_space": "1.2 l"}, "duct": duct(), **car},
            "start": {"coolant": "88 degC", "metal": "98 degC", "radiator": "70 degC"},
            "limits": {"coolant": "140 degC"},
            "drive": [{"hold": "40 s", "speed": "100 km/h", "power": "50 kW", "engine_speed": "4000 rpm"},
                      {"hold": "30 s", "speed": "60 km/h", "power": "90 kW", "engine_speed": "5500 rpm"},
                      {"idle": "20 s"}]}


def side_by_side():
    """Two unlike ducts side by side, and the first twice."""
    c = base()
    car = c["car"]
    first = car.pop("duct")
    first["count"] = 2
    first["inlet"]["area"] = "250 cm2"
    second = duct(core=core(0.3, 0.3, 1500, 5000, angle="35 deg", blocked="10 %"))
    del second["fan"]
    car["ducts"] = [first, second]
    car["tank"]["bleed_bore"] = "3 mm"
    car["hoses"] = {"pot": "1 l"}
    return c


def in_series():
    """The coolant through one duct after the other, at a thermostat on the inlet side."""
    c = base()
    c["car"]["duct"].update(count=2, coolant="series")
    c["car"]["thermostat"] = {"opens": "78 degC", "full": "90 degC", "side": "inlet", "hysteresis": "2 K"}
    c["start"].update(coolant="80 degC", metal="88 degC")
    return c


def heater():
    """Plate in place of the thermostat, heater, electric pump over temperature, coolant lost."""
    c = base()
    car = c["car"]
    car["thermostat"] = {"restrictor": "20 mm", "bypass_shut": 2}
    car["hoses"] = {"heater": {"flow": "12 l/min", "conductance": "90 W/K", "air": "15 degC"}}
    car["pump"].update(drive="electric", power="300 W", control="temperature",
                       temperature={"from": "80 degC", "to": "95 degC"}, least=0.3)
    car["tank"]["lost"] = "0.4 l"
    c["drive"].append({"soak": "30 s", "key_on": True})
    return c


def traffic():
    """Behind another car, a mapped thermostat, a fan with a long wire, changes on the way."""
    c = base()
    car = c["car"]
    car["thermostat"] = {"mapped": {"power": "60 kW", "shift": "8 K"}}
    car["duct"]["fan"].update(control="switch", wiring_drop="1.2 V", switch={"on": "84 degC", "off": "80 degC"})
    c["drive"] = [{"hold": "30 s", "speed": "90 km/h", "power": "40 kW", "engine_speed": "3500 rpm", "following": "15 m"},
                  {"hold": "40 s", "speed": "70 km/h", "power": "64 kW", "engine_speed": "5000 rpm", "following": "30 m"},
                  {"soak": "40 s", "key_on": True}]
    c["changes"] = [{"at": "20 s", "set": {"duct.inlet.blocked": "40 %"}},
                    {"at": "50 s", "set": {"duct.core.blocked": "30 %", "duct.fan.health": "locked"}},
                    {"at": "90 s", "set": {"duct.fan.health": "sound"}}]
    return c


def cavitating():
    """A pump that lacks head, and pulses."""
    c = base()
    pump = c["car"]["pump"]
    pump.update(npsh="5 m", suction={"drop": "25 kPa"})
    c["start"].update(coolant="104 degC", metal="114 degC")
    c["car"]["tank"]["cap"] = "0.1 bar"
    c["drive"] = [{"hold": "60 s", "speed": "80 km/h", "power": "80 kW", "engine_speed": "6200 rpm"}]
    return c


def pulsing():
    c = base()
    c["car"]["pump"].update(drive="electric", power="300 W", control="pulsing",
                            pulse={"target": "86 degC", "on": "6 s", "off": "15 s"})
    c["start"].update(coolant="70 degC", metal="72 degC")
    c["car"]["thermostat"] = {"opens": "60 degC"}
    return c


def drives():
    yield "plain", base()
    yield "side by side", side_by_side()
    yield "in series", in_series()
    yield "heater and plate", heater()
    yield "traffic and changes", traffic()
    yield "cavitating", cavitating()
    yield "pulsing", pulsing()


assert copy
