# SPDX-License-Identifier: GPL-3.0-or-later
"""What `swirlpot duct` reports, worked out again (section 4, results of the air path)."""
import math

from .core import Fins, GivenDrop
from .duct import Duct
from .fluids import moist_air


def car_duct(case):
    core, air = case["car"]["duct"]["core"], case["air"]
    drops = GivenDrop(core) if "pressure_drop" in core else Fins(core)
    return Duct(case["car"]["duct"], *moist_air(air["ambient"], air["pressure"], air["humidity"]), drops.drops)


def flows(duct, air, speed, fan, heat):
    """Whether there is a steady flow at all."""
    return duct.solve(speed, 1.0, air["ambient"], air["pressure"], 1.0 if fan else 0.0, None, heat) is not None


def stations(duct, air, point):
    """Values by their place in the JSON of a point."""
    t, p, heat = air["ambient"], air["pressure"], point["heat_W"]
    n = 1.0 if point["fan_on"] else 0.0
    s = duct.solve(point["air_speed_m_s"], 1.0, t, p, n, None, heat)
    m, rho, hot, q = s["m"], s["rho"], s["hot"], s["q"]
    terms = duct.terms(m, s["v"], s["eta"], s["exit_cp"], rho, t, n, None, heat)
    out = {"mass_flow_kg_s": m, "face_velocity_m_s": s["face"], "temperature_ratio": s["tau"],
           "exit_velocity_m_s": s["v_exit"], "internal_drag_N": s["drag"], "fan_pressure_Pa": terms["fan"]}
    if m < 0:
        return out
    total = [q, s["eta"] * q - terms["lip"]]
    before = terms["fan"] if duct.fan and duct.fan["before"] == "core" else 0.0
    total.append(total[1] - terms["screen"] - terms["diffuser"] + before)
    total.append(total[2] - terms["core"] - terms["heating"])
    total.append(total[3] + terms["fan"] - before)
    total.append(total[4] - terms["exit"])
    if total[5] > 0:
        out["wake_drag_N"] = m * (s["v"] - math.sqrt(2 * total[5] / hot))
    areas = [None, duct.inlet, duct.face, duct.face, duct.face, duct.exit]
    for i, high in enumerate(total):
        density = rho if i < 3 else hot
        speed = s["v"] if i == 0 else m / (density * areas[i])
        out[f"stations.{i}.total_pressure_Pa"] = p + high
        out[f"stations.{i}.static_pressure_Pa"] = p + high - density * speed * speed / 2
        out[f"stations.{i}.velocity_m_s"] = speed
    for name in ("lip", "screen", "diffuser", "core", "heating", "exit", "exit_head"):
        out[f"losses_Pa.{name}"] = terms[name]
    return out


def scale(key, point):
    """What a difference is taken relative to: pressures to the largest at play, drag to its own two parts."""
    if "Pa" in key:
        return 1.0 + max(abs(v) for v in point["losses_Pa"].values())
    if "drag" in key:
        return 1e-3 + abs(point["mass_flow_kg_s"]) * (abs(point["air_speed_m_s"]) + abs(point["exit_velocity_m_s"]))
    value = point
    for part in key.split("."):
        value = value[int(part) if part.isdigit() else part]
    return max(abs(value), 1e-6)
