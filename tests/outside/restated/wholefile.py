# SPDX-License-Identifier: GPL-3.0-or-later
"""The whole car's case in SI units, with the defaults of what may be fitted (docs/case-file.md)."""
import copy

from . import casefile
from .casefile import _fill, quantity

casefile.UNITS.update({"cm": 1e-2, "kg/s": 1, "A": 1, "m2K/W": 1, "mm2": 1e-6, "kWh": 3.6e6, "bar.s/m": 1e5})


def _listed(have, one, many):
    """A list of elements, whether there is one or several."""
    if many in have:
        return have[many]
    return [have[one]] if one in have else []


def understood(raw):
    """Every duct with lists of cores, fans and exits; `duct`, `core` and so on are the first of them."""
    raw = copy.deepcopy(raw)
    car = raw["car"]
    car["ducts"] = _listed(car, "duct", "ducts")
    for duct in car["ducts"]:
        duct["cores"], duct["fans"] = _listed(duct, "core", "cores"), _listed(duct, "fan", "fans")
        duct["exits"] = _listed(duct, "exit", "exits")
    first = car["duct"] = copy.deepcopy(car["ducts"][0])
    for one, many in (("core", "cores"), ("fan", "fans"), ("exit", "exits")):
        if first[many]:
            first[one] = first[many][0]
    if "engine" in car:
        case = casefile.understood(raw)
    else:
        case = quantity(raw)
        air = _fill(case["air"], humidity=0.0, wind=0.0)
        if "pressure" not in air:
            air["pressure"] = casefile.standard_pressure(air.setdefault("altitude", 0.0))
    for duct in case["car"]["ducts"]:
        _duct(duct)
    if "engine" in car:
        _fitted(case["car"])
    return case


def _duct(duct):
    _fill(duct, count=1, coolant="parallel")
    _fill(duct["inlet"], recovery=1.0, lip="sheet edge", screen=0.0, blocked=0.0, recirculated=0.0,
          recirculation_ends=50 / 3.6, preheat_standing=0.0, preheat_moving=0.0, spill=False, lip_suction=0.0)
    _fill(duct["inlet"], lip_loss=casefile.LIPS[duct["inlet"]["lip"]])
    _fill(duct.setdefault("diffuser", {}), loss=0.0)
    leak = duct.setdefault("leak", {})
    for name in ("past_core", "outside"):
        gap = _fill(leak.setdefault(name, {}), coefficient=2.6, pressure_coefficient=0.0)
        _fill(gap, area=gap.get("gap", 0.0) * gap.get("length", 0.0))
    _fill(duct.setdefault("bay", {}), engine_skin=0.0)
    for exit_ in duct["exits"]:
        _fill(exit_, loss=0.0, pressure_coefficient=0.0, angle=0.0)
    for core in duct["cores"]:
        _core(core)
    for fan in duct["fans"]:
        one = {"inlet": {}, "exit": {}, "core": copy.deepcopy(duct["cores"][0]), "fan": fan}
        casefile._duct(one)
        _fill(fan, health="sound", locked_loss=3.0, span_from=0.0, span_to=0.0, flap_area=0.0, flap_loss=2.0,
              wiring_drop=0.0)


def _core(core):
    _fill(core, heat_factor=1.0, cells=10, carries="coolant", feed="parallel", span_from=0.0, span_to=0.0,
          blocked=0.0, angle=0.0, angle_loss=1.0, air_fouling=0.0, coolant_fouling=0.0, flow="across", depth=0.0)
    bulk = core["width"] * core["height"] * core["depth"]
    _fill(core, metal_capacity=900 * (0.33 * bulk / 1e-3 + 2.5 * core["height"] / 0.4),
          coolant_volume=0.13 * bulk + 1.3e-3 * core["height"] / 0.4)
    if "tubes" in core:
        tubes = _fill(core["tubes"], wall=0.3e-3, rows=1, passes=1)
        fins = _fill(core["fins"], thickness=0.1e-3, conductivity=180.0, kind="louvred")
        if fins["kind"] == "louvred":
            _fill(fins, louvre_length=0.85 * (tubes["pitch"] - tubes["height"]))
    else:
        core.setdefault("drop", {"flow": 0.1 / 60, "drop": 18e3})


def _fitted(car):
    _fill(car["pump"], control="fixed", least=0.15, full_at=4000 / 60, failed=False, npsh=0.0)
    _fill(car["pump"].setdefault("temperature", {}), **{"from": 353.15, "to": 368.15})
    _fill(car["pump"].setdefault("pulse", {}), target=358.15, on=10.0, off=30.0)
    _fill(car["pump"].setdefault("suction", {}), drop=0.0, flow=0.1 / 60)
    if car["thermostat"] != "none":
        _fill(car["thermostat"], restrictor=0.0, side="outlet")
        _fill(car["thermostat"].setdefault("mapped", {}), power=0.0, shift=15.0)
    _fill(car["hoses"], pot=0.0)
    _fill(car["hoses"].setdefault("heater", {}), flow=0.0, drop=30e3, conductance=0.0, air=None, off=False)
    _fill(car["tank"], bleed_bore=0.0, lost=0.0)
    _fill(car["electrics"], idle_load=0.0)
    for name, volume, flow, skin in (("oil", 4.5e-3, 25e-3 / 60, (3.0, 12.0)),
                                     ("gearbox", 2e-3, 8e-3 / 60, (4.0, 15.0))):
        if name not in car:
            continue
        oil = _fill(car[name], volume=volume, flow=flow, flow_speed=4000 / 60, plate=0.0, opens=None, still=0.1,
                    block=75.0 if name == "oil" else 0.0)
        _fill(oil, metal_capacity=7e6 * oil["volume"])
        _fill(oil, flow_most=oil["flow"], full=(oil["opens"] or 0) + 10)
        if name == "gearbox":
            _fill(oil, heat_share=0.025)
        _fill(oil.setdefault("skin", {}), standing=skin[0], moving=skin[1])
        _fill(oil, friction_share=0.12 if name == "oil" else 0.0)
    if "charge" in car:
        _fill(car["charge"], efficiency=0.70, intake_rise=5.0)
