# SPDX-License-Identifier: GPL-3.0-or-later
"""Sections 7, 8 and 15: engine heat by row, road load, and the schedule of straight lines between rows."""
import math

import numpy as np

from .casefile import trace
from .fluids import GRAVITY, moist_air, ramp, standard_pressure
from .merging import merged

# channels of a row, in this order
SPEED, AIR_SPEED, WAKE, AMBIENT, PRESSURE, GAS, FRICTION, SLOPE, TURNS, POWER = range(10)
OIL, GEARBOX, CHARGE, HEATING = range(10, 14)  # of a car fitted out


class EngineHeat:
    def __init__(self, engine, oil=None):
        self.e, self.heat, self.oil, self.cap = engine, engine["heat"], oil, engine["heat"].get("energy_cap", 0.75)
        self.rated = engine["rated_power"]
        self.idle_extra = 0.0
        if self.heat["law"] == "rated":
            self.fuel_rated = self._fuel(self.rated, engine["rated_speed"])
            self.heat_rated = self.heat["fraction"] * self.rated
        elif self.heat["law"] == "table":
            self._read_table()
        else:
            raise NotImplementedError(self.heat["law"])
        if "idle" in self.heat:
            self.idle_extra = self.heat["idle"] - self._law(0.0, engine["idle_speed"])[0]

    def _read_table(self):
        rows = self.heat["table"]
        self.speeds = sorted({r[0] for r in rows})
        self.powers = sorted({r[1] for r in rows})
        self.grid = {(r[0], r[1]): r[2] for r in rows}

    def _mean_pressure_power(self, key, turns):
        a, b, c = self.e[key]
        return (a + b * turns + c * turns ** 2) * self.e["displacement"] * turns / 2

    def _fuel(self, power, turns):
        return max((power + self._mean_pressure_power("friction", turns)) / self.e["indicated_efficiency"], 0.0)

    def motoring(self, turns):
        return max(self._mean_pressure_power("overrun_friction", turns), 0.0)

    def _law(self, power, turns):
        """Heat and its slope by power, without what is added for idling."""
        if self.heat["law"] == "table":
            return self._bilinear(power, turns)
        n, share = self.heat["exponent"], self._fuel(power, turns) / self.fuel_rated
        slope = n * self.heat_rated * max(share, 0.01) ** (n - 1) / (self.fuel_rated * self.e["indicated_efficiency"])
        return self._capped(self.heat_rated * share ** n, slope, power, turns)

    def _capped(self, heat, slope, power, turns):
        """The energy cap: work and heats come from the fuel."""
        if not self.cap:
            return heat, slope
        room = self.cap * self._fuel(power, turns) - power - self.oil_heat(power, turns)
        gain = self.cap / self.e["indicated_efficiency"] - 1
        if room <= 0:
            return 0.0, gain
        y = heat / room - 0.95
        if y <= 0:
            return heat, slope
        if y >= 0.1:
            return room, gain
        return heat - room * y * y / 0.2, (1 - y / 0.1) * slope + (1.9 * y + y * y) / 0.2 * gain

    def oil_heat(self, power, turns):
        if not self.oil:
            return 0.0
        return self.oil["heat_share"] * max(power, 0.0) + self.oil["friction_share"] * self.motoring(turns)

    def burnt(self, power, turns):
        """Fuel power, faded out as the fuel is cut."""
        cut = ramp(power / self.rated, 0.0, -0.02) * ramp(turns / self.e["idle_speed"], 1.2, 1.5)
        return (1 - cut) * self._fuel(power, turns)

    def _bilinear(self, power, turns):
        s, p = self.speeds, self.powers
        n = min(max(turns, s[0]), s[-1])
        q = min(max(power, p[0]), p[-1])
        i = max(k for k in range(len(s) - 1) if s[k] <= n)
        j = max(k for k in range(len(p) - 1) if p[k] <= q)
        u, w = (n - s[i]) / (s[i + 1] - s[i]), (q - p[j]) / (p[j + 1] - p[j])
        low = (1 - u) * self.grid[s[i], p[j]] + u * self.grid[s[i + 1], p[j]]
        high = (1 - u) * self.grid[s[i], p[j + 1]] + u * self.grid[s[i + 1], p[j + 1]]
        slope = (high - low) / (p[j + 1] - p[j]) if p[0] <= power <= p[-1] else 0.0
        return low + w * (high - low), slope

    def row(self, power, turns):
        """heat_gas, heat_friction and slope."""
        x, y = power / self.rated, turns / self.e["idle_speed"]
        heat, slope = self._law(max(power, 0.0), turns)
        fade = 1 - ramp(y, 1.2, 1.5)
        s = min(max(max(x, 0.0) / 0.10, 0.0), 1.0)
        heat = max(heat + self.idle_extra * min(y, 1.0) * fade * (1 - ramp(max(x, 0.0), 0.0, 0.10)), 0.0)
        slope -= self.idle_extra * fade * 6 * s * (1 - s) / (0.10 * self.rated)
        cut = ramp(x, 0.0, -0.02) * ramp(y, 1.2, 1.5)
        return (1 - cut) * heat, cut * self.e["overrun_share"] * self.motoring(turns), (1 - cut) * slope


def smooth(t, v, half):
    """Value and slope of the quadratic fit about each row."""
    out, slopes = [], []
    for i, now in enumerate(t):
        lo = hi = i
        while lo > 0 and t[lo - 1] >= now - half - 1e-9:
            lo -= 1
        while hi < len(t) - 1 and t[hi + 1] <= now + half + 1e-9:
            hi += 1
        while hi - lo < 2 or t[hi] - t[lo] < half - 1e-9:
            before = now - t[lo - 1] if lo > 0 else math.inf
            after = t[hi + 1] - now if hi < len(t) - 1 else math.inf
            if before <= after:
                lo -= 1
            else:
                hi += 1
        x, y = np.array(t[lo:hi + 1]), np.array(v[lo:hi + 1])
        n, mean = len(x), float(np.mean(x))
        x = x - mean
        m2, m3, m4 = ((x ** k).sum() for k in (2, 3, 4))
        if m4 - m3 ** 2 / m2 - m2 ** 2 / n <= 1e-3 * m2 ** 2 / n:
            raise NotImplementedError("a window of two clusters")
        c = np.linalg.lstsq(np.stack([x ** 0, x, x * x], axis=1), y, rcond=None)[0]
        d = now - mean
        out.append(float(c[0] + c[1] * d + c[2] * d * d))
        slopes.append(float(c[1] + 2 * c[2] * d))
    return out, slopes


def central(t, v):
    n = len(t) - 1
    return [(v[min(i + 1, n)] - v[max(i - 1, 0)]) / (t[min(i + 1, n)] - t[max(i - 1, 0)]) for i in range(n + 1)]


class Segment:
    """A stretch of straight channels from t0 to t1, `a` and `b` at its ends; engine on, fan and pump allowed."""

    def __init__(self, t0, t1, a, b, on, **more):
        self.t0, self.t1, self.a, self.b, self.on, self.more = t0, t1, a, b, on, more
        self.fan = self.pump = on

    def at(self, t):
        w = (t - self.t0) / (self.t1 - self.t0)
        return [(1 - w) * p + w * q for p, q in zip(self.a, self.b)]


class Schedule:
    def __init__(self, case):
        self.case, self.car, self.air = case, case["car"], case["air"]
        self.engine = EngineHeat(self.car["engine"])
        self.idle = self.car["engine"]["idle_speed"]
        self.segments, self.now, self.pressure, self.first_z = [], 0.0, self.air["pressure"], None
        self.work = None
        for step in case["drive"]:
            for _ in range(int(step.get("repeat", 1))):
                if "trace" in step:
                    self._trace(step)
                elif "soak" in step:
                    self._steady(step["soak"], 0.0, 0.0, 0.0, False)
                elif "idle" in step:
                    self._steady(step["idle"], 0.0, 0.0, self.idle, True)
                else:
                    self._steady(step["hold"], step["speed"], step["power"], step["engine_speed"], True)
        self.segments = self._run_on(self._thinned())

    def _run_on(self, segments):
        """Stretches without the engine cut where a run-on ends."""
        fan, pump = (self.car["duct"].get("fan") or {}).get("run_on", 0.0), self.car["pump"]["run_on"]
        out, stop = [], None
        for s in segments:
            if s.on:
                stop = s.t1
                out.append(s)
                continue
            cuts = sorted({s.t0, s.t1} | {stop + r for r in (fan, pump) if stop is not None and s.t0 < stop + r < s.t1})
            for t0, t1 in zip(cuts, cuts[1:]):
                piece = Segment(t0, t1, s.at(t0), s.at(t1), False, **s.more)
                piece.fan = s.more.get("key_on", False) or stop is not None and t0 < stop + fan
                piece.pump = s.more.get("key_on", False) or stop is not None and t0 < stop + pump
                out.append(piece)
        return out

    def _row(self, v, ambient, pressure, power, turns, on):
        heats = self.engine.row(power, turns) if on else (0.0, 0.0, 0.0)
        return [v, v + self.air["wind"], 1.0, ambient, pressure, *heats, turns if on else 0.0, power if on else 0.0]

    def _steady(self, length, v, power, turns, on):
        row = self._row(v, self.air["ambient"], self.pressure, power, turns, on)
        self.segments.append(Segment(self.now, self.now + length, row, row, on))
        self.now += length

    def _trace(self, step):
        have = trace(step["trace"])
        t, v = have["time"], have["speed"]
        if step.get("smooth", 0) > 0:
            v, accel = smooth(t, v, step["smooth"])
        else:
            accel = central(t, v)
        rows = []
        for i, speed in enumerate(v):
            pressure = self._pressure(have["altitude"][i]) if "altitude" in have else self.pressure
            if "power" in have:
                power, turns = have["power"][i], have["engine_speed"][i]
            else:
                power, turns = self._road_load(speed, accel[i], pressure)[:2]
            rows.append(self._row(speed, self.air["ambient"], pressure, power, turns, True))
        if "power" not in have:
            self._add_work(t, v, accel, rows)
        if min(r[TURNS] for r in rows) < 0.3 * self.idle:
            raise NotImplementedError("an engine that stops within a trace")
        least = self.case["solver"]["merge"]
        if min(b - a for a, b in zip(t, t[1:])) < least - 1e-9:
            marks = have.get("mark", [])
            t, rows = merged(t, rows, {i for i in range(1, len(marks)) if marks[i] != marks[i - 1]}, least)
        for i in range(len(t) - 1):
            self.segments.append(Segment(self.now + t[i], self.now + t[i + 1], rows[i], rows[i + 1], True))
        self.now += t[-1]
        self.pressure = rows[-1][PRESSURE]

    def _pressure(self, z):
        if self.first_z is None:
            self.first_z = z
        base = self.air["altitude"]
        return self.air["pressure"] * standard_pressure(min(max(base + z - self.first_z, -2000.0), 11000.0)) \
            / standard_pressure(base)

    def _density(self, pressure):
        gas, _ = moist_air(self.air["ambient"], pressure, self.air["humidity"])
        return pressure / (gas * self.air["ambient"])

    def _drag(self, v, rho):
        body, air = self.car["body"], v + self.air["wind"]
        return rho / 2 * body["drag_coefficient"] * body["frontal_area"] * air * abs(air)

    def _road_load(self, v, accel, pressure):
        """Power at the crank, engine speed, and power asked for at the wheels."""
        body = self.car["body"]
        force = self._rolling(v) + self._drag(v, self._density(pressure)) + body["rotating_mass"] * body["mass"] * accel
        wheel = abs(v) / (2 * math.pi * body["wheel_radius"])
        below = [g for g in body["gears"] if wheel * g < body["shift_speed"]]
        turns = max(wheel * (below[0] if below else body["gears"][-1]), self.idle)
        power, eff = force * v, body["driveline_efficiency"]
        crank = power / eff if power >= 0 else max(power * eff, -self.engine.motoring(turns))
        return crank, turns, power

    def _rolling(self, v):
        body = self.car["body"]
        return body["mass"] * GRAVITY * body["rolling_resistance"] * (-1 if v < 0 else 1)

    def _add_work(self, t, v, accel, rows):
        """Work at the wheels of section 16, on a level road."""
        eff, w = self.car["body"]["driveline_efficiency"], dict.fromkeys(("wheel", "rolling", "drag", "brakes"), 0.0)
        asked = [self._road_load(x, a, r[PRESSURE])[2] for x, a, r in zip(v, accel, rows)]
        given = [r[POWER] * eff if r[POWER] >= 0 else r[POWER] / eff for r in rows]
        rho = [self._density(r[PRESSURE]) for r in rows]
        for i in range(len(t) - 1):
            h, j = t[i + 1] - t[i], i + 1
            w["wheel"] += h / 2 * (given[i] + given[j])
            w["rolling"] += h / 2 * (self._rolling(v[i]) * v[i] + self._rolling(v[j]) * v[j])
            w["brakes"] += h / 2 * (given[i] - asked[i] + given[j] - asked[j])
            u, mean = (v[i] + v[j]) / 2, (rho[i] + rho[j]) / 2
            w["drag"] += h / 6 * (self._drag(v[i], rho[i]) * v[i] + 4 * self._drag(u, mean) * u
                                  + self._drag(v[j], rho[j]) * v[j])
        self.work = w

    def _thinned(self):
        """Rows on a straight line dropped, which changes nothing but the number of restarts."""
        if not self.segments:
            return []
        rows = np.array([s.a for s in self.segments] + [s.b for s in self.segments])
        slack = 1e-11 * (np.ptp(rows, axis=0) + 1e-9)
        out, i = [], 0
        while i < len(self.segments):
            first, j = self.segments[i], i
            while j + 1 < len(self.segments) and self._joins(i, j + 1, slack):
                j += 1
            out.append(Segment(first.t0, self.segments[j].t1, first.a, self.segments[j].b, first.on, **first.more))
            i = j + 1
        return out

    def _joins(self, i, j, slack):
        first, last = self.segments[i], self.segments[j]
        if first.on != last.on or first.more != last.more:
            return False
        if np.any(np.abs(np.array(self.segments[j - 1].b) - last.a) > slack):
            return False
        whole = Segment(first.t0, last.t1, first.a, last.b, first.on)
        return all(np.all(np.abs(np.array(whole.at(s.t0)) - s.a) <= slack) for s in self.segments[i + 1:j + 1])
