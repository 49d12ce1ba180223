# SPDX-License-Identifier: GPL-3.0-or-later
"""Invented cars that together have every fitted part at least once, and their drives."""
import copy


def core(width=0.45, height=0.35, ua=2600, water=9000, cells=3, **more):
    return {"width": f"{width} m", "height": f"{height} m", "depth": "40 mm", "cells": cells,
            "metal_capacity": "4 kJ/K", "coolant_volume": "1.8 l", "drop": {"flow": "100 l/min", "drop": "20 kPa"},
            "pressure_drop": {"linear": "14 Pa.s/m", "quadratic": "4.1 Pa.s2/m2", "at_temperature": "20 degC"},
            "heat": {"air_conductance": f"{ua} W/K", "at_face_velocity": "8 m/s", "air_exponent": 0.45,
                     "coolant_conductance": f"{water} W/K", "at_coolant_flow": "1.6 kg/s"}, **more}


def condenser(heat, width, height, **more):
    c = core(width, height, carries="heat load", heat_load=heat, **more)
    for key in ("heat", "drop", "cells", "metal_capacity", "coolant_volume"):
        del c[key]
    return c


def duct(**more):
    return {"inlet": {"area": "500 cm2", "recovery": 0.9}, "exit": {"area": "800 cm2", "loss": 0.4,
                                                                   "pressure_coefficient": -0.1},
            "core": core(),
            "fan": {"curve": {"shutoff": "230 Pa", "free_flow": "0.75 m3/s"}, "power": "210 W",
                    "control": "proportional", "proportional": {"from": "84 degC", "to": "96 degC"}}, **more}


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
    c["drive"] = [dict(c["drive"][0], hold="30 s", power="40 kW", following="15 m"),
                  dict(c["drive"][1], power="64 kW", following="30 m"),
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


def leaking():
    """Leaks, half a shroud with flaps, two exits, recirculation, warm bay, then the bonnet up and a blower."""
    c = base()
    d = c["car"]["duct"]
    d["leak"] = {"past_core": {"gap": "4 mm", "length": "1.5 m"}, "outside": {"area": "10 cm2"}}
    d["inlet"].update(recirculated=0.2, preheat_standing="6 K", preheat_moving="1 K", spill=True)
    d["fan"].update(span_from=0, span_to=0.55, flap_area="50 cm2", diameter="300 mm")
    d["bay"] = {"engine_skin": 0.6}
    del d["exit"]
    d["exits"] = EXITS
    c["drive"] = [{"hold": "40 s", "speed": "80 km/h", "power": "60 kW", "engine_speed": "4500 rpm"}, {"idle": "25 s"},
                  {"idle": "15 s", "bonnet_up": True, "blower": "0.3 m3/s"}, {"soak": "20 s"}]
    return c


def oils():
    """Oil, gearbox and charge air cooled in one duct ahead of the radiator, beside a condenser."""
    c = base()
    d, car = c["car"]["duct"], c["car"]

    def small(medium, flow, lo, hi, **heat):
        x = core(0.15, 0.3, 500, 900, carries=medium, span_from=lo, span_to=hi, coolant_volume="0.6 l",
                 metal_capacity="1.5 kJ/K", cells=2)
        x["heat"]["at_coolant_flow"] = flow
        x["heat"].update(heat)
        del x["drop"]
        return x

    radiator = d.pop("core")
    d["cores"] = [small("engine oil", "0.3 kg/s", 0, 0.3), small("gearbox oil", "0.1 kg/s", 0.3, 0.5),
                  small("charge air", "0.15 kg/s", 0.5, 0.8, coolant_exponent=0.7), condenser("3 kW", 0.1, 0.3,
                                                                                           span_from=0.8, span_to=1),
                  radiator]
    car["oil"] = {"heat_share": 0.06, "plate": "200 W/K", "opens": "85 degC", "volume": "5 l"}
    car["gearbox"] = {"friction_share": 0.02, "block": "8 W/K"}
    car["charge"] = {"pressure_ratio": 1.8, "air_flow": "0.16 kg/s"}
    c["start"].update(oil="86 degC", gearbox="80 degC")
    c["drive"] = [dict(c["drive"][0], hold="15 s"), dict(c["drive"][1], hold="8 s"), {"idle": "4 s"}]
    return c


def dirty():
    """Geometry on both cores, the second fed by the first: louvres down and uneven, plates behind; all of it dirty."""
    c = base()
    d = c["car"]["duct"]
    louvred = core(0.4, 0.35, depth="30 mm", unevenness=0.25, blocked="5 %", air_fouling="2e-4 m2K/W",
                   coolant_fouling="1e-4 m2K/W", flow="down", heat_factor=0.95)
    louvred.update(fins={"pitch": "1.3 mm", "louvre_pitch": "1.1 mm", "louvre_angle": "26 deg"},
                   tubes={"pitch": "9.5 mm", "height": "2 mm"})
    plates = core(0.35, 0.35, depth="44 mm", feed="after the one before", angle="40 deg", air_fouling="1e-4 m2K/W")
    plates.update(fins={"kind": "plate", "pitch": "1.8 mm", "thickness": "0.12 mm"},
                  tubes={"diameter": "9.5 mm", "pitch": "25 mm", "pitch_along": "22 mm", "rows": 2, "passes": 2})
    for x in (louvred, plates):
        for key in ("pressure_drop", "heat", "drop"):
            del x[key]
    del d["core"]
    d["cores"] = [louvred, plates]
    c["car"]["pump"].update(drive="electric", power="250 W", control="engine speed", full_at="5000 rpm")
    c["drive"][2] = {"idle": "10 s"}
    return c


def drives():
    yield "plain", base()
    yield "side by side", side_by_side()
    yield "in series", in_series()
    yield "heater and plate", heater()
    yield "traffic and changes", traffic()
    yield "cavitating", cavitating()
    yield "pulsing", pulsing()
    yield "leaking", leaking()
    yield "dirty", dirty()
    yield "oils and charge air", oils()


# ---- networks of air -----------------------------------------------------------------------------------------


def _air(**more):
    d = duct(**more)
    d["inlet"] = dict(d["inlet"], **more.pop("more_inlet", {}))
    d.pop("more_inlet", None)
    return {"air": {"ambient": "28 degC", "altitude": "300 m"}, "car": {"duct": d}}


FANS = [{"curve": {"shutoff": "230 Pa", "free_flow": "0.45 m3/s"}, "power": "150 W", "span_from": 0, "span_to": 0.5,
         "diameter": "300 mm"},
        {"curve": [["0 m3/s", "190 Pa"], ["0.1 m3/s", "170 Pa"], ["0.3 m3/s", "60 Pa"], ["0.4 m3/s", "0 Pa"]],
         "power": "110 W", "span_from": 0.6, "span_to": 1, "basis": "static", "diameter": "280 mm", "health": "sound"}]
EXITS = [{"area": "400 cm2", "loss": 0.5, "pressure_coefficient": -0.15},
         {"area": "300 cm2", "loss": 1.2, "pressure_coefficient": 0.1, "angle": "90 deg"}]


def several(key, *parts):
    """A duct with a list in place of one."""
    c = _air()
    del c["car"]["duct"][key[:-1]]
    c["car"]["duct"][key] = list(parts)
    return c


def ducts():
    leak = {"past_core": {"gap": "5 mm", "length": "1.5 m"}}
    outside = {"outside": {"area": "20 cm2", "coefficient": 1.5, "pressure_coefficient": -0.2}}
    yield "leak past the core", _air(leak=leak)
    yield "leak to outside", _air(leak=outside)
    half = _air()
    half["car"]["duct"]["fan"].update(span_from=0, span_to=0.6)
    yield "half a shroud", half
    flaps = copy.deepcopy(half)
    flaps["car"]["duct"]["fan"].update(flap_area="60 cm2", flap_loss=1.8)
    yield "half a shroud with flaps", flaps
    yield "two fans", several("fans", *FANS)
    ahead = several("fans", *(dict(f, before="core") for f in FANS))
    yield "two fans ahead of the core", ahead
    yield "two exits", several("exits", *EXITS)
    small = core(0.25, 0.3, 900, 3000, carries="engine oil", span_from=0.1, span_to=0.6)
    yield "oil cooler ahead", several("cores", small, core())
    yield "condenser ahead", several("cores", condenser("3 kW", 0.4, 0.3), core())
    stack = several("cores", core(0.3, 0.35, 1500, 5000, span_from=0, span_to=0.5),
                    core(0.2, 0.35, 900, 3000, span_from=0.5, span_to=1, blocked="20 %"), core(angle="30 deg"))
    yield "two beside each other ahead of a third", stack
    yield "preheat and recirculation", _air(more_inlet={"recirculated": 0.2, "preheat_standing": "8 K",
                                                        "preheat_moving": "2 K"})
    yield "spill and interference", _air(more_inlet={"spill": True, "lip_suction": 0.4}, interference="0.02 m2")
    table = _air(leak=leak, diffuser={"kind": "conical", "length": "200 mm"})
    rows = [[0.2, 0.5], [0.4, 0.7], [0.7, 0.8], [1, 0.6]]
    table["car"]["duct"]["inlet"] = {"area": "300 cm2", "recovery_table": rows}
    yield "table of recovery, diffuser and leak", table
    sudden = _air(diffuser={"kind": "sudden", "jet_share": 0.35})
    sudden["car"]["duct"]["inlet"]["area"] = "300 cm2"
    yield "step with a jet", sudden
    everything = copy.deepcopy(stack)
    d = everything["car"]["duct"]
    d["inlet"].update(recirculated=0.15, preheat_standing="4 K", blocked="10 %", screen=0.6)
    d["leak"] = dict(leak, **outside)
    del d["fan"], d["exit"]
    d["fans"], d["exits"] = copy.deepcopy(FANS), EXITS
    d["fans"][0].update(flap_area="40 cm2")
    d["cores"][1] = condenser("2 kW", 0.2, 0.35, span_from=0.5, span_to=1, blocked="20 %")
    yield "all at once", everything
