# SPDX-License-Identifier: GPL-3.0-or-later
"""Section 12, "The car fitted out": balances of a car with several ducts, cores, fans and fluids."""
import math

import numpy as np

from .airpath import AirPath
from .circuit import Tank
from .drive import (AIR_SPEED, AMBIENT, CHARGE, FRICTION, GAS, GEARBOX, HEATING, OIL, POWER, PRESSURE, SLOPE, SPEED,
                    TURNS, WAKE)
from .fitted import FittedLoop
from .fluids import Coolant, moist_air
from .plant import AIR, BACK, CORE, FAN, GAUGE, JACKET, LOST, METAL, OUT, TANK, WAX, Plant, weight

KELVIN = 273.15


def oil_density(temperature):
    return 870 / (1 + 7e-4 * (temperature - 288.15))


def oil_enthalpy(temperature):
    t = temperature - KELVIN
    return (1825 + 1.875 * t) * t


def oil_capacity(temperature):
    return 1825 + 3.75 * (temperature - KELVIN)


def counterflow(conductance, one, other):
    """W/K that pass between two streams of capacities one and other."""
    least, most = min(one, other), max(one, other)
    if least <= 0 or conductance <= 0:
        return 0.0
    ntu, ratio = conductance / least, least / most
    if abs(1 - ratio) < 1e-9:
        return least * ntu / (1 + ntu)
    fall = math.exp(-ntu * (1 - ratio))
    return least * (1 - fall) / (1 - ratio * fall)


class Exchanger:
    """A core with a fluid in it: where its cells stand in the state, and what they hold."""

    def __init__(self, core, run, index, copies, standing):
        self.core, self.run, self.index, self.copies, self.standing = core, run, index, copies, standing
        self.n, self.medium = int(core["cells"]), core["carries"]
        self.inner = (standing.laws or standing.tubes).inner

    def place(self, first):
        self.fluid, self.wall = slice(first, first + self.n), slice(first + self.n, first + 2 * self.n)
        return first + 2 * self.n

    def rates(self, y, d, flow, enters, props, warm, t_air):
        """Cells of one of the equal cores; `props`: mass, capacities, enthalpies, theirs ahead, mean capacity, B."""
        mass, cap, h, h_in, c_mean, b = props
        n, cells, walls = self.n, y[self.fluid], y[self.wall]
        w = weight(b / n / (flow * c_mean)) if flow > 0 else 0.0
        before = np.append(enters, cells[:-1])
        q = b / n * (w * before + (1 - w) * cells - walls)
        d[self.fluid] = (flow * (np.append(h_in, h[:-1]) - h) - q) / (mass / n * cap)
        d[self.wall] = (q - warm / n * (walls - t_air)) / (self.core["metal_capacity"] / n)


class WholePlant(Plant):
    def __init__(self, case):
        self.case, car = case, case["car"]
        self.car, self.engine, self.stat = car, car["engine"], car["thermostat"]
        self.coolant = Coolant(car["coolant"]["kind"], car["coolant"]["glycol"])
        self.gas, self.cp = moist_air(case["air"]["ambient"], case["air"]["pressure"], case["air"]["humidity"])
        elec = car["electrics"]
        self.volts = {True: elec["running"], False: elec["stopped"]}
        self.gas_ref = self.engine["gas_temperature"]
        if self.gas_ref != "none" and self.gas_ref <= self.engine["gas_reference"]:
            self.gas_ref = "none"
        self._lay_out()
        self.loop = FittedLoop(car, self.coolant, [(s[0].copies, [(e.core, e.standing.tubes) for e in s])
                                                   for s in self.strings])
        self._weigh()

    def _lay_out(self):
        """Runs of air, fans, oils, cores and strings, with their places in the state."""
        self.runs, self.cores, self.fans = [], [], []  # a run: air path, how many, fans
        self.strings, at = [], CORE
        for duct in self.car["ducts"]:
            series = duct["coolant"] == "series"
            for k in range(duct["count"] if series else 1):
                copies = 1 if series else duct["count"]
                path = AirPath(duct, self.gas, self.cp, self.coolant)
                places = []
                for fan in duct["fans"]:
                    places.append(len(self.fans))
                    self.fans.append((fan, copies))
                self.runs.append((path, copies, places))
                for i, core in enumerate(duct["cores"]):
                    if core["carries"] == "heat load":
                        continue
                    e = Exchanger(core, len(self.runs) - 1, i, copies, path.standing[i])
                    self.cores.append(e)
                    if e.medium != "coolant":
                        continue
                    if core["feed"] == "parallel" and k == 0:
                        self.strings.append([])
                    self.strings[-1].append(e)
        self.fan_at = [FAN] + list(range(at, at + max(len(self.fans) - 1, 0)))
        at += max(len(self.fans) - 1, 0)
        self.oils = {}
        for name, medium, channel in (("oil", "engine oil", OIL), ("gearbox", "gearbox oil", GEARBOX)):
            if name in self.car:
                self.oils[name] = (at, [e for e in self.cores if e.medium == medium], channel)
                at += 1
        self.charge = [e for e in self.cores if e.medium == "charge air"]
        self.water = [e for e in self.cores if e.medium == "coolant"]
        for e in self.cores:
            at = e.place(at)
        self.sums, self.size = at, at + 8

    def _weigh(self):
        car, hoses = self.car, self.car["hoses"]
        rho = self.coolant.density(car["tank"]["filled_at"])
        pipes = [math.pi / 4 * hoses[k]["bore"] ** 2 * hoses[k]["length"] for k in ("out", "back")]
        pipes[0] += hoses["pot"]
        volumes = [car["tank"]["volume"] - car["tank"]["air_space"], car["engine"]["coolant_volume"], *pipes]
        volumes = [max(v, 1e-5) for v in volumes]
        self.m_tank, self.m_jacket, self.m_out, self.m_back = (rho * v for v in volumes)
        inside = [max(e.core["coolant_volume"], 1e-5) for e in self.water]
        masses = [rho * v for v in volumes] + [rho * v * e.copies for v, e in zip(inside, self.water)]
        for e in self.cores:
            density = {"coolant": rho, "charge air": 1.6}.get(e.medium, oil_density(293.15))
            e.mass = density * max(e.core["coolant_volume"], 1e-5)
        self.tank = Tank(car["tank"], self.coolant, masses, sum(masses) / rho)
        self.lost_to_begin = car["tank"]["lost"]

    def parts(self, y):
        return [float(y[TANK]), float(y[JACKET]), float(np.mean(y[OUT:BACK])), float(np.mean(y[BACK:CORE])),
                *(float(np.mean(y[e.fluid])) for e in self.water)]

    def start(self, first_pressure):
        s, y = self.case["start"], np.zeros(self.size)
        y[METAL], y[JACKET], y[TANK], y[WAX] = s["metal"], s["coolant"], s["coolant"], s["coolant"]
        y[OUT:BACK], y[BACK:CORE] = s["coolant"], s["radiator"]
        for name, (at, cores, _) in self.oils.items():
            y[at] = s.get(name, s["coolant"])
            for e in cores:
                y[e.fluid] = y[e.wall] = y[at]
        for e in self.water:
            y[e.fluid] = y[e.wall] = s["radiator"]
        for e in self.charge:
            y[e.fluid] = y[e.wall] = self.case["air"]["ambient"]
        y[GAUGE] = self.place(y, self.car["gauge"]["place"])
        y[AIR], y[LOST] = self._start_tank(y, first_pressure)
        return y

    def _start_tank(self, y, pressure):
        """`lost` coolant is off the liquid, and air has taken its place."""
        lost, t, space = self.lost_to_begin, self.tank.t, self.car["tank"]["air_space"]
        self.tank.t = dict(t, air_space=space + lost)
        whole = self.tank.total
        old, self.tank.total = whole, whole + lost
        got = self.tank.start(self.parts(y), pressure)
        self.tank.t, self.tank.total = t, old
        return got

    def place(self, y, name):
        return y[JACKET] if name == "engine out" else y[self.water[0].fluid][-1]

    # ---- what follows at once ------------------------------------------------------------------------------

    def pump_speed(self, turns, s, y=None):
        pump = self.car["pump"]
        if pump["failed"]:
            return 0.0
        if pump["drive"] == "belt":
            return pump["ratio"] * turns / pump["speed"] if s.on else 0.0
        if not s.pump:
            return 0.0
        full, control, t = self.full_speed(pump, s.on), pump["control"], float(y[JACKET])
        if control == "temperature":
            p = pump["temperature"]
            x = min(max((t - p["from"]) / (p["to"] - p["from"]), 0.0), 1.0)
            return full * (pump["least"] + (1 - pump["least"]) * x)
        if control == "engine speed":
            return full * max(pump["least"], min(turns / pump["full_at"], 1.0))
        if control == "pulsing" and not s.more.get("pulse", True):
            return full * min(max(t - pump["pulse"]["target"] + 1, 0.0), 1.0)
        return full

    def fan_full(self, fan, on):
        u, rated, w = self.volts[on], fan["rated_voltage"], fan["wiring_drop"]
        x = u / rated
        if w > 0:
            for _ in range(60):
                x -= (x + w / rated * x ** 1.7 - u / rated) / (1 + 1.7 * w / rated * x ** 0.7)
        return x ** 0.9

    def wish_of(self, fan, y, s, switched):
        if not s.fan or fan["control"] == "never" or fan["health"] != "sound":
            return 0.0
        full = self.fan_full(fan, s.on)
        if fan["control"] == "always":
            return full
        if fan["control"] == "switch":
            return full if switched else 0.0
        p = fan["proportional"]
        x = (float(self.place(y, fan["sensor"])) - p["from"]) / (p["to"] - p["from"])
        return full * min(max(20 * x, 0.0), 1.0) * (p["least"] + (1 - p["least"]) * min(max(x, 0.0), 1.0))

    def lift(self, y, mode, held, power=0.0):
        s = self.stat
        if s == "none" or s["restrictor"] > 0:
            return 1.0
        level = self.effective(y, mode, held)
        if s["mapped"]["power"] > 0:
            x = min(max((power / s["mapped"]["power"] - 1) / 0.1, 0.0), 1.0)
            level += s["mapped"]["shift"] * x * x * (3 - 2 * x)
        return min(max((level - s["opens"]) / (s["full"] - s["opens"]), 0.0), 1.0)

    def fan_powers(self, y, s):
        """What each kind of fan draws from the battery, wires included."""
        out, volts = [], self.volts[s.on]
        for (fan, copies), at in zip(self.fans, self.fan_at):
            one = fan["power"] * max(float(y[at]), 0.0) ** 3 if fan["health"] == "sound" else 0.0
            wire = fan["wiring_drop"] * fan["rated_voltage"] / fan["power"]
            current = 2 * one / (volts + math.sqrt(max(volts ** 2 - 4 * wire * one, 0.0)))
            out.append(copies * fan["count"] * current * volts)
        return out

    def air(self, y, ch, s, skin):
        """Every run of air, solved by itself."""
        out = []
        for path, copies, places in self.runs:
            walls = {e.index: float(np.mean(y[e.wall])) for e in self.cores
                     if e.run == len(out)}
            fans = [float(y[self.fan_at[p]]) for p in places]
            out.append(path.solve(ch[AIR_SPEED], ch[WAKE], ch[AMBIENT], ch[PRESSURE], fans, walls,
                                  bonnet=s.more.get("bonnet_up", False), blower=s.more.get("blower", 0.0),
                                  skin=skin * path.skin_share / path.duct["count"]))
        return out

    def flows(self, y, ch, s, mode, held):
        lift = self.lift(y, mode, held, ch[POWER])
        p, _ = self.tank.gas(self._liquid(y), ch[PRESSURE], float(y[TANK]), float(y[AIR]))
        means = [float(np.mean(np.concatenate([y[e.fluid] for e in string]))) for string in self.strings]
        loop = self.loop.solve(float(y[JACKET]), means, lift, self.pump_speed(ch[TURNS], s, y), p, float(y[CORE - 1]))
        return lift, loop, p

    def _liquid(self, y):
        return self.tank.liquid(self.parts(y)) - float(y[LOST]) - self.car["tank"]["lost"]

    def entering(self, y, loop, amb):
        """T_p: what enters the pump."""
        if loop["p"] <= 0:
            return float(y[JACKET])
        hot = loop["p"] - loop["r"] - loop["t"] - loop["h"]
        back = y[JACKET]
        if loop["h"] > 0:
            back -= self._heater(loop, y[JACKET], amb) / (loop["h"] * loop["rho"] * self.coolant.capacity(y[JACKET]))
        return (loop["r"] * y[CORE - 1] + hot * y[JACKET] + loop["h"] * back + loop["t"] * y[TANK]) / loop["p"]

    def heat(self, t_metal, fan_power, ch, s, pump=0.0):
        e, z = self.engine, 1.0
        if self.gas_ref != "none":
            z = max((self.gas_ref - t_metal) / (self.gas_ref - e["gas_reference"]), 0.0)
        load = fan_power
        if self.car["pump"]["drive"] == "electric":
            load += self.car["pump"]["power"] * pump ** 3
        load = load / self.car["electrics"]["alternator_efficiency"] if s.on else 0.0
        return (ch[GAS] + ch[SLOPE] * load) * z + ch[FRICTION]

    def skin(self, skin, ch):
        return skin["standing"] + (skin["moving"] - skin["standing"]) * min(abs(ch[AIR_SPEED]) / (100 / 3.6), 1.0)

    def skins(self, y, ch):
        amb = ch[AMBIENT]
        return self.skin(self.engine["skin"], ch) * (y[METAL] - amb), \
            self.car["hoses"]["skin"] / 6 * (y[OUT:CORE] - amb), self.car["tank"]["skin"] * (y[TANK] - amb)

    # ---- balances ------------------------------------------------------------------------------------------

    def rates(self, y, ch, s, mode, held, switched):
        _, loop, _ = self.flows(y, ch, s, mode, held)
        d, amb, e = np.zeros(self.size), ch[AMBIENT], self.engine
        skin_metal, skin_hoses, skin_tank = self.skins(y, ch)
        air = self.air(y, ch, s, skin_metal)
        rho, t_metal, t_jacket = loop["rho"], float(y[METAL]), float(y[JACKET])
        m_r, m_t = loop["r"] * rho, loop["t"] * rho
        cap, h = self.coolant.capacities(y[[JACKET, TANK, *range(OUT, CORE)]])
        back = self._strings(y, d, loop, air, h[4])
        ahead = np.array([h[0], h[2], h[3], back, h[5], h[6]])
        mass = np.array([self.m_out / 3] * 3 + [self.m_back / 3] * 3)
        d[OUT:CORE] = (m_r * (ahead - h[2:]) - skin_hoses) / (mass * cap[2:])
        x = (loop["p"] / e["conductance_flow"]) ** 0.8
        k = e["conductance"] * self.coolant.film_ratio(t_jacket, 0.8) \
            * (self.coolant.density(t_jacket) / 1030.95) ** 0.8 * (x ** 4 + e["conductance_still"] ** 4) ** 0.25
        power = sum(self.fan_powers(y, s))
        heat = self.heat(t_metal, power, ch, s, self.pump_speed(ch[TURNS], s, y))
        enters = float(self.entering(y, loop, ch[AMBIENT]))
        to_metal, to_coolant, oil_in, oil_skin = self._oils(y, d, ch, air, enters, loop)
        charged = self._charge(y, d, ch, air)
        heater = self._heater(loop, t_jacket, amb)
        d[METAL] = (heat - k * (t_metal - t_jacket) - skin_metal + to_metal) / e["metal_capacity"]
        d[JACKET] = (k * (t_metal - t_jacket) + m_r * (h[7] - h[0]) + m_t * (h[1] - h[0]) - heater + to_coolant) \
            / (self.m_jacket * cap[0])
        d[TANK] = (m_t * (h[0] - h[1]) - skin_tank) / (self.m_tank * cap[1])
        self._small(y, d, ch, s, loop, switched, enters)
        loads = sum(n * sum(a["loads"].values()) for a, (_, n, _) in zip(air, self.runs))
        warm = sum(n * sum(a["warm"].get(x.index, 0.0) * (float(np.mean(y[x.wall])) - a["t_in"][x.index])
                           for x in self.cores if x.run == i) for i, (a, (_, n, _)) in enumerate(zip(air, self.runs)))
        free = ch[PRESSURE] / (self.gas * amb)
        drag = sum(n * a["drag"] for a, (_, n, _) in zip(air, self.runs))
        d[self.sums:] = (heat + oil_in + charged + loads, warm + loads, skin_metal,
                         skin_hoses.sum() + heater + oil_skin, skin_tank, power, drag * ch[SPEED],
                         free * ch[AIR_SPEED] ** 2 / 2 * ch[SPEED])
        return d

    def _strings(self, y, d, loop, air, h_hot):
        """Cores that carry coolant; the enthalpy of the mix that comes back."""
        total = 0.0
        for q, string in zip(loop["q"], self.strings):
            enters, h_in = y[BACK - 1], h_hot
            for e in string:
                flow = q * loop["rho"] / e.copies
                cells = y[e.fluid]
                cap, h = self.coolant.capacities(cells)
                mean = float(np.mean(cells))
                b = e.inner(flow, self.coolant, mean)
                e.rates(y, d, flow, enters, (e.mass, cap, h, h_in, self.coolant.capacity(mean), b),
                        air[e.run]["warm"][e.index], air[e.run]["t_in"][e.index])
                enters, h_in = cells[-1], h[-1]
            total += q * h_in
        return total / sum(loop["q"]) if loop["r"] > 0 else 0.0

    def _oils(self, y, d, ch, air, enters, loop):
        """Oil's sump and coolers: heat to metal and to coolant, what it takes in, and what its skin loses."""
        to_metal = to_coolant = taken = lost = 0.0
        for name, (at, cores, channel) in self.oils.items():
            o, t = self.car[name], float(y[at])
            pumped = min(o["flow"] * ch[TURNS] / o["flow_speed"], o["flow_most"])
            x = 1.0 if o["opens"] is None else min(max((t - o["opens"]) / (o["full"] - o["opens"]), 0.0), 1.0)
            share = x if o["opens"] is None else o["still"] + (1 - o["still"]) * x
            flow = pumped * share * oil_density(t)
            last, h_in = t, oil_enthalpy(t)
            for e in cores:
                cells = y[e.fluid]
                h, mean = oil_enthalpy(cells), float(np.mean(cells))
                props = (e.mass, oil_capacity(cells), h, h_in, oil_capacity(mean),
                         e.inner(flow / e.copies, None, mean))
                e.rates(y, d, flow / e.copies, last, props, air[e.run]["warm"][e.index], air[e.run]["t_in"][e.index])
                last, h_in = cells[-1], h[-1]
            block = o["block"] * (t - y[METAL])
            plate = counterflow(o["plate"] * pumped / o["flow_most"], pumped * oil_density(t) * oil_capacity(t),
                                loop["p"] * loop["rho"] * self.coolant.capacity(enters)) * (t - enters)
            skin = self.skin(o["skin"], ch) * (t - ch[AMBIENT])
            through = flow * (oil_enthalpy(t) - h_in) if cores else 0.0
            d[at] = (ch[channel] - block - plate - skin - through) \
                / (o["volume"] * oil_density(293.15) * oil_capacity(t) + o["metal_capacity"])
            to_metal, to_coolant = to_metal + block, to_coolant + plate
            taken, lost = taken + ch[channel], lost + skin
        return to_metal, to_coolant, taken, lost

    def _charge(self, y, d, ch, air):
        if not self.charge:
            return 0.0
        t1, flow, cp = self.compressed(ch), ch[CHARGE], self.charge_cp
        last = t1
        for e in self.charge:
            cells = y[e.fluid]
            props = (e.mass, np.full(e.n, cp), cp * cells, cp * last, cp, e.inner(flow / e.copies, None, 0.0))
            e.rates(y, d, flow / e.copies, last, props, air[e.run]["warm"][e.index], air[e.run]["t_in"][e.index])
            last = cells[-1]
        return flow * cp * (t1 - last)

    charge_cp = 1007.0

    def compressed(self, ch):
        return (ch[AMBIENT] + self.car["charge"]["intake_rise"]) * (1 + ch[HEATING])

    def _heater(self, loop, t_jacket, amb):
        o, m = self.car["hoses"]["heater"], loop["h"] * loop["rho"]
        if m <= 0 or o["conductance"] <= 0:
            return 0.0
        c = self.coolant.capacity(t_jacket)
        return m * c * -math.expm1(-o["conductance"] / (m * c)) * (t_jacket - (amb if o["air"] is None else o["air"]))

    def _small(self, y, d, ch, s, loop, switched, enters):
        """Wax, fans, gauge and what the tank holds."""
        v = self.stat if self.stat != "none" else {"lag": 12.0, "lag_still": 40.0, "side": "outlet"}
        lag = 1 / v["lag_still"] + (1 / v["lag"] - 1 / v["lag_still"]) \
            * min(loop["p"] / self.loop.curve.free, 1.0) ** 0.6
        d[WAX] = ((enters if v["side"] == "inlet" else y[JACKET]) - y[WAX]) * lag
        for i, ((fan, _), at) in enumerate(zip(self.fans, self.fan_at)):
            d[at] = (self.wish_of(fan, y, s, switched[i]) - y[at]) / fan["spin_up"]
        d[GAUGE] = (self.place(y, self.car["gauge"]["place"]) - y[GAUGE]) / max(self.car["gauge"]["lag"], 0.05)
        t_tank = float(y[TANK])
        p, volume = self.tank.gas(self._liquid(y), ch[PRESSURE], t_tank, float(y[AIR]))
        d[AIR], d[LOST] = self.tank.rates(p, volume, ch[PRESSURE], t_tank, float(y[AIR]), float(y[LOST]))

    def report(self, y, ch, s, mode, held):
        lift, loop, p = self.flows(y, ch, s, mode, held)
        skin_metal, _, _ = self.skins(y, ch)
        air = self.air(y, ch, s, skin_metal)
        boil, mix = self.coolant.boiling_point, float(self.entering(y, loop, ch[AMBIENT]))
        margin = min(boil(p + loop["rise"] - loop["jacket"]) - y[JACKET], boil(p) - mix)
        c = KELVIN
        out = {"coolant_engine_out": y[JACKET] - c, "coolant_radiator_in": y[BACK - 1] - c, "coolant_pump_in": mix - c,
               "metal": y[METAL] - c, "coolant_tank": y[TANK] - c, "thermostat_wax": y[WAX] - c,
               "gauge": y[GAUGE] - c + self.car["gauge"]["offset"], "thermostat_lift": lift,
               "coolant_flow": loop["p"] * 6e4, "coolant_flow_radiator": loop["r"] * 6e4,
               "coolant_flow_bypass": loop["b"] * 6e4, "tank_pressure": p / 1e3, "boil_margin": margin,
               "air_mass_flow": sum(n * a["m"] for a, (_, n, _) in zip(air, self.runs)),
               "drag": sum(n * a["drag"] for a, (_, n, _) in zip(air, self.runs)),
               "fan_power": sum(self.fan_powers(y, s)), "coolant_radiator_out": self.place(y, "radiator out") - c}
        if "oil" in self.oils:
            out["oil"] = y[self.oils["oil"][0]] - c
        if "gearbox" in self.oils:
            out["oil_gearbox"] = y[self.oils["gearbox"][0]] - c
        if self.charge:
            out["charge_out"] = y[self.charge[-1].fluid][-1] - c
            out["charge_in"] = self.compressed(ch) - c
        return out

