# SPDX-License-Identifier: GPL-3.0-or-later
"""Sections 10, 12, 13 and 14: the balances of a car in one stretch of its drive."""
import math

import numpy as np

from .circuit import Loop, Tank, Tubes
from .core import Fins, GivenDrop, PowerLaws
from .drive import AIR_SPEED, AMBIENT, FRICTION, GAS, PRESSURE, SLOPE, SPEED, TURNS, WAKE
from .duct import Duct
from .fluids import Coolant, moist_air

METAL, JACKET, TANK, WAX, FAN, GAUGE, AIR, LOST = range(8)
OUT, BACK, CORE = 8, 11, 14
HEAT_IN, HEAT_AIR, SKIN_METAL, SKIN_HOSES, SKIN_TANK, FAN_ENERGY, DRAG_WORK, HEAD_WORK = range(8)


class Plant:
    def __init__(self, case):
        self.case, car = case, case["car"]
        self.car, self.engine, self.stat = car, car["engine"], car["thermostat"]
        air = case["air"]
        self.coolant = Coolant(car["coolant"]["kind"], car["coolant"]["glycol"])
        gas, cp = moist_air(air["ambient"], air["pressure"], air["humidity"])
        self.gas = gas
        core = car["duct"]["core"]
        self.n = int(core["cells"])
        fins = Fins(core) if "fins" in core else None
        tubes = Tubes(core) if "tubes" in core else None
        laws = PowerLaws(core, self.coolant) if "heat" in core else None
        drops = GivenDrop(core) if "pressure_drop" in core else fins
        self.inner = (laws or tubes).inner
        self.duct = Duct(car["duct"], gas, cp, drops.drops, (laws or fins).conductance)
        self.loop = Loop(car, self.coolant, tubes)
        self.fan = car["duct"].get("fan")
        self.plate = CORE + self.n
        self.sums = CORE + 2 * self.n
        self.size = self.sums + 8
        self._masses()
        elec = car["electrics"]
        self.volts = {True: elec["running"], False: elec["stopped"]}
        self.gas_ref = self.engine["gas_temperature"]
        if self.gas_ref != "none" and self.gas_ref <= self.engine["gas_reference"]:
            self.gas_ref = "none"

    def full_speed(self, machine, on):
        """Speed of fan or electric pump at the voltage there is."""
        return (self.volts[on] / machine["rated_voltage"]) ** 0.9

    def pump_speed(self, turns, s):
        """Of rated, in the stretch s of the schedule."""
        pump = self.car["pump"]
        if pump["drive"] == "belt":
            return pump["ratio"] * turns / pump["speed"] if s.on else 0.0
        return self.full_speed(pump, s.on) if s.pump else 0.0

    def wish(self, y, s, switched):
        """The controller's wish of section 13."""
        if not self.fan or not s.fan or self.fan["control"] == "never":
            return 0.0
        full = self.full_speed(self.fan, s.on)
        if self.fan["control"] == "always":
            return full
        if self.fan["control"] == "switch":
            return full if switched else 0.0
        p = self.fan["proportional"]
        x = (float(self.place(y, self.fan["sensor"])) - p["from"]) / (p["to"] - p["from"])
        return full * min(max(20 * x, 0.0), 1.0) * (p["least"] + (1 - p["least"]) * min(max(x, 0.0), 1.0))

    def _masses(self):
        car, hoses = self.car, self.car["hoses"]
        rho = self.coolant.density(car["tank"]["filled_at"])
        pipes = [math.pi / 4 * hoses[k]["bore"] ** 2 * hoses[k]["length"] for k in ("out", "back")]
        volumes = [car["tank"]["volume"] - car["tank"]["air_space"], car["engine"]["coolant_volume"],
                   car["duct"]["core"]["coolant_volume"], *pipes]
        volumes = [max(v, 1e-5) for v in volumes]
        self.m_tank, self.m_jacket, self.m_core, self.m_out, self.m_back = (rho * v for v in volumes)
        self.tank = Tank(car["tank"], self.coolant, [rho * v for v in volumes], sum(volumes))
        n = self.n
        self.cell_mass = np.array([self.m_out / 3] * 3 + [self.m_back / 3] * 3 + [self.m_core / n] * n)

    def parts(self, y):
        """Temperatures of the parts of the tank's liquid balance."""
        return [float(y[TANK]), float(y[JACKET]), float(np.mean(y[CORE:self.plate])),
                float(np.mean(y[OUT:BACK])), float(np.mean(y[BACK:CORE]))]

    def start(self, first_pressure):
        s, y = self.case["start"], np.zeros(self.size)
        y[METAL], y[JACKET], y[TANK], y[WAX] = s["metal"], s["coolant"], s["coolant"], s["coolant"]
        y[OUT:BACK] = s["coolant"]
        y[BACK:self.sums] = s["radiator"]
        y[GAUGE] = self.place(y, self.car["gauge"]["place"])
        y[AIR], y[LOST] = self.tank.start(self.parts(y), first_pressure)
        return y

    def place(self, y, name):
        return y[JACKET] if name == "engine out" else y[self.plate - 1]

    def effective(self, y, mode, held):
        """Y of section 10."""
        if mode == "opening":
            return y[WAX]
        return held if mode == "held" else y[WAX] + self.stat["hysteresis"]

    def lift(self, y, mode, held):
        if self.stat == "none":
            return 1.0
        s = self.stat
        return min(max((self.effective(y, mode, held) - s["opens"]) / (s["full"] - s["opens"]), 0.0), 1.0)

    def flows(self, y, ch, s, mode, held):
        turns = self.pump_speed(ch[TURNS], s)
        lift = self.lift(y, mode, held)
        loop = self.loop.solve(float(y[JACKET]), float(np.add.reduce(y[CORE:self.plate])) / self.n, lift, turns)
        wall = float(np.add.reduce(y[self.plate:self.sums])) / self.n
        air = self.duct.solve(ch[AIR_SPEED], ch[WAKE], ch[AMBIENT], ch[PRESSURE], float(y[FAN]), wall)
        return lift, loop, air, wall

    def heat(self, t_metal, fan_power, ch, s):
        e, z = self.engine, 1.0
        if self.gas_ref != "none":
            z = max((self.gas_ref - t_metal) / (self.gas_ref - e["gas_reference"]), 0.0)
        load = fan_power
        if self.car["pump"]["drive"] == "electric":
            load += self.car["pump"]["power"] * self.pump_speed(0.0, s) ** 3
        load = load / self.car["electrics"]["alternator_efficiency"] if s.on else 0.0
        return (ch[GAS] + ch[SLOPE] * load) * z + ch[FRICTION]

    def fan_power(self, n):
        return self.fan["count"] * self.fan["power"] * n ** 3 if self.fan else 0.0

    def skins(self, y, ch):
        skin, amb = self.engine["skin"], ch[AMBIENT]
        g = skin["standing"] + (skin["moving"] - skin["standing"]) * min(abs(ch[AIR_SPEED]) / (100 / 3.6), 1.0)
        hoses = self.car["hoses"]["skin"] / 6
        return g * (y[METAL] - amb), hoses * (y[OUT:CORE] - amb), self.car["tank"]["skin"] * (y[TANK] - amb)

    def rates(self, y, ch, s, mode, held, switched):
        """dy/dt."""
        _, (q_p, q_r, _, q_t, rho_h, _, _), air, wall = self.flows(y, ch, s, mode, held)
        e, n, core, plate, sums = self.engine, self.n, CORE, self.plate, self.sums
        d = np.zeros(self.size)
        amb, t_metal, t_jacket, t_tank = ch[AMBIENT], float(y[METAL]), float(y[JACKET]), float(y[TANK])
        m_r, m_t = q_r * rho_h, q_t * rho_h
        cap, h = self.coolant.capacities(y[[JACKET, TANK, *range(OUT, plate)]])
        h_jacket, h_tank, hc = h[0], h[1], h[2:]
        # coolant cells in flow order: each takes in what the one ahead lets out
        ahead = np.empty(6 + n)
        ahead[0], ahead[1:3] = h_jacket, hc[0:2]
        ahead[3], ahead[4:6] = hc[5 + n], hc[3:5]
        ahead[6], ahead[7:] = hc[2], hc[6:5 + n]
        flow = m_r * (ahead - hc)
        skin_metal, skin_hoses, skin_tank = self.skins(y, ch)
        flow[:6] -= skin_hoses
        cells = y[core:plate]
        middle = float(np.add.reduce(cells)) / n
        b = self.inner(m_r, self.coolant, middle) / n
        w = weight(b / (m_r * self.coolant.capacity(middle))) if m_r > 0 else 0.0
        before = np.empty(n)
        before[0], before[1:] = y[OUT + 2], cells[:-1]
        q = b * (w * before + (1 - w) * cells - y[plate:sums])
        flow[6:] -= q
        d[OUT:plate] = flow / (self.cell_mass * cap[2:])
        d[plate:sums] = (q - air["warm"] / n * (y[plate:sums] - amb)) / (self.core_metal() / n)
        x = (q_p / e["conductance_flow"]) ** 0.8
        k = e["conductance"] * self.coolant.film_ratio(t_jacket, 0.8) \
            * (self.coolant.density(t_jacket) / 1030.95) ** 0.8 * (x ** 4 + e["conductance_still"] ** 4) ** 0.25
        power = self.fan_power(float(y[FAN]))
        heat = self.heat(t_metal, power, ch, s)
        d[METAL] = (heat - k * (t_metal - t_jacket) - skin_metal) / e["metal_capacity"]
        d[JACKET] = (k * (t_metal - t_jacket) + m_r * (hc[5] - h_jacket) + m_t * (h_tank - h_jacket)) \
            / (self.m_jacket * cap[0])
        d[TANK] = (m_t * (h_jacket - h_tank) - skin_tank) / (self.m_tank * cap[1])
        if self.stat != "none":
            v = self.stat
            lag = 1 / v["lag_still"] + (1 / v["lag"] - 1 / v["lag_still"]) * min(q_p / self.loop.curve.free, 1.0) ** 0.6
            d[WAX] = (t_jacket - y[WAX]) * lag
        if self.fan:
            d[FAN] = (self.wish(y, s, switched) - y[FAN]) / self.fan["spin_up"]
        d[GAUGE] = (self.place(y, self.car["gauge"]["place"]) - y[GAUGE]) / max(self.car["gauge"]["lag"], 0.05)
        lost = float(y[LOST])
        p, volume = self.tank.gas(self.tank.liquid(self.parts(y)) - lost, ch[PRESSURE], t_tank, float(y[AIR]))
        d[AIR], d[LOST] = self.tank.rates(p, volume, ch[PRESSURE], t_tank, float(y[AIR]), lost)
        rho = ch[PRESSURE] / (self.gas * amb)
        d[sums:] = (heat, air["warm"] * (wall - amb), skin_metal, skin_hoses.sum(), skin_tank, power,
                    air["drag"] * ch[SPEED], rho * ch[AIR_SPEED] ** 2 / 2 * ch[SPEED])
        return d

    def core_metal(self):
        return self.car["duct"]["core"]["metal_capacity"]

    def stored(self, y):
        """H of the ledger."""
        cells = [y[JACKET], y[TANK], *y[OUT:self.plate]]
        masses = [self.m_jacket, self.m_tank, *self.cell_mass]
        return self.engine["metal_capacity"] * y[METAL] + self.core_metal() * np.mean(y[self.plate:self.sums]) \
            + float(np.dot(masses, self.coolant.capacities(cells)[1]))

    def report(self, y, ch, s, mode, held):
        """What a sample shows."""
        lift, (q_p, q_r, q_b, q_t, _, jacket, rise), air, wall = self.flows(y, ch, s, mode, held)
        p, _ = self.tank.gas(self.tank.liquid(self.parts(y)) - y[LOST], ch[PRESSURE], float(y[TANK]), float(y[AIR]))
        mix = float(y[JACKET])
        if q_p > 0:
            mix = (q_r * y[CORE - 1] + q_b * y[JACKET] + q_t * y[TANK]) / q_p
        boil = self.coolant.boiling_point
        margin = min(boil(p + rise - jacket) - y[JACKET], boil(p) - mix)
        skin_metal, skin_hoses, skin_tank = self.skins(y, ch)
        power = self.fan_power(float(y[FAN]))
        fan = self.duct.fan_pressure(air["m"], float(y[FAN]), air["rho"], air["hot"])
        c = 273.15
        return {"coolant_engine_out": y[JACKET] - c, "coolant_radiator_in": y[BACK - 1] - c,
                "coolant_radiator_out": y[self.plate - 1] - c, "coolant_pump_in": mix - c, "metal": y[METAL] - c,
                "coolant_tank": y[TANK] - c, "thermostat_wax": y[WAX] - c,
                "gauge": y[GAUGE] - c + self.car["gauge"]["offset"], "thermostat_lift": lift,
                "coolant_flow": q_p * 6e4, "coolant_flow_radiator": q_r * 6e4, "coolant_flow_bypass": q_b * 6e4,
                "air_mass_flow": air["m"], "face_velocity": air["face"], "exit_velocity": air["v_exit"],
                "air_out": air["tau"] * ch[AMBIENT] - c, "fan_speed": y[FAN], "fan_pressure": fan, "fan_power": power,
                "tank_pressure": p / 1e3, "boil_margin": margin, "coolant_lost": y[LOST] * 1e3,
                "heat_in": self.heat(float(y[METAL]), power, ch, s) / 1e3,
                "heat_out": air["warm"] * (wall - ch[AMBIENT]) / 1e3,
                "heat_skin": (skin_metal + skin_hoses.sum() + skin_tank) / 1e3, "drag": air["drag"]}


def weight(k):
    if k < 1e-3:
        return 0.5 - k / 12
    return 1 / k if k > 700 else 1 / k - 1 / math.expm1(k)
