# SPDX-License-Identifier: GPL-3.0-or-later
"""A drive of the car fitted out: traffic, changes, key on, several fans, pulses of the pump."""
import copy
import math

import numpy as np

from .casefile import quantity
from .drive import EngineHeat, Schedule, Segment
from .march import Drive
from .plant import AIR, AMBIENT, LOST, WAX
from .whole import WholePlant
from .wholefile import understood

WAKES = ((5.0, 0.50, 6.0), (10.0, 0.60, 4.0), (20.0, 0.75, 2.5), (40.0, 0.90, 1.5), (80.0, 1.0, 0.0))


def behind(x):
    """Share of dynamic pressure left and warmth, x metres behind a car."""
    if x <= 5:
        return WAKES[0][1:]
    if x >= 80:
        return 1.0, 0.0
    for (x0, *a), (x1, *b) in zip(WAKES, WAKES[1:]):
        if x <= x1:
            f = math.log(x / x0) / math.log(x1 / x0)
            return tuple((1 - f) * p + f * q for p, q in zip(a, b))
    raise AssertionError


class WholeSchedule(Schedule):
    FLAGS = ("key_on", "bonnet_up", "blower")

    def __init__(self, case):
        self.step = {}
        steps, case = case["drive"], dict(case, drive=[])
        super().__init__(case)
        car = self.car
        self.engine = EngineHeat(car["engine"], car.get("oil"))
        for step in steps:
            self.step = step
            for _ in range(int(step.get("repeat", 1))):
                begin = len(self.segments)
                if "soak" in step:
                    self._steady(step["soak"], 0.0, 0.0, 0.0, False)
                elif "idle" in step:
                    self._steady(step["idle"], 0.0, 0.0, self.idle, True)
                elif "trace" in step:
                    self._trace(step)
                else:
                    self._steady(step["hold"], step["speed"], step["power"], step["engine_speed"], True)
                for s in self.segments[begin:]:
                    s.more = {k: step[k] for k in self.FLAGS if k in step}
        self.segments = self._run_on(self.segments)
        self._pulses()
        self._cut([c["at"] for c in case.get("changes", [])])

    def _run_on(self, segments):
        longest = max([f["run_on"] for d in self.car["ducts"] for f in d["fans"]] or [0.0])
        self.car["duct"].setdefault("fan", {})["run_on"] = longest
        return super()._run_on(segments)

    def _cut(self, times):
        for t in times:
            out = []
            for s in self.segments:
                if s.t0 < t - 1e-9 and t + 1e-9 < s.t1:
                    for t0, t1 in ((s.t0, t), (t, s.t1)):
                        piece = Segment(t0, t1, s.at(t0), s.at(t1), s.on, **s.more)
                        piece.fan, piece.pump = s.fan, s.pump
                        out.append(piece)
                else:
                    out.append(s)
            self.segments = out

    def _pulses(self):
        pump = self.car["pump"]
        if pump["drive"] != "electric" or pump["control"] != "pulsing":
            return
        on, off, end = pump["pulse"]["on"], pump["pulse"]["off"], self.segments[-1].t1
        period = on + off
        self._cut([t for k in range(int(end / period) + 1) for t in (k * period, k * period + on)])
        for s in self.segments:
            s.more = dict(s.more, pulse=(s.t0 + 1e-6) % period < on)

    def _row(self, v, ambient, pressure, power, turns, on):
        row = super()._row(v, ambient, pressure, power, turns, on)
        if "following" in self.step:
            w, warmth = behind(self.step["following"])
            f = min(v / 3, 1.0)
            row[2] *= 1 - (1 - w) * f
            row[3] += warmth * f
        return row + (self._more(power, turns) if on else [0.0] * 4)

    def _more(self, power, turns):
        """Oil, gearbox, charge flow and heating."""
        car, engine = self.car, self.engine
        gearbox = charge = heating = 0.0
        if "gearbox" in car:
            g = car["gearbox"]
            gearbox = g["heat_share"] * abs(power) + g["friction_share"] * engine.motoring(turns)
        if "charge" in car:
            c = car["charge"]
            charge = c["air_flow"] * engine.burnt(power, turns) / engine.fuel_rated
            ratio = 1 + (c["pressure_ratio"] - 1) * min(charge / c["air_flow"], 1.0) ** 2
            heating = (ratio ** (2 / 7) - 1) / c["efficiency"]
        return [engine.oil_heat(power, turns), gearbox, charge, heating]


class WholeDrive(Drive):
    """`raw`: the case as written, for its changes are made in it."""

    def __init__(self, raw, rtol, method, every=1.0):
        case = understood(raw)
        self.case, self.rtol, self.method, self.every = case, rtol, method, every
        self.plant, self.schedule = WholePlant(case), WholeSchedule(case)
        self.changes = sorted(((quantity(c["at"]), c["set"]) for c in raw.get("changes", [])), key=lambda c: c[0])
        self.raw = copy.deepcopy(raw)
        self.fan, self.stat = None, self.plant.stat
        self.atol = np.full(self.plant.size, 10 * rtol)
        self.samples, self.events, self.fan_on_s, self.evaluations = [], [], 0.0, 0
        self.peak, self.full_s = (-math.inf, 0.0), 0.0

    def run(self):
        self.fan = None
        segments = self.schedule.segments
        plant, y = self.plant, self.plant.start(segments[0].a[4])
        self._tolerances(y)
        self.start, self.mode, self.held = y.copy(), "held", float(y[WAX])
        self.on = [self._asked(f, y) for f, _ in plant.fans]
        self.band = self._band(y)
        self._sample(0.0, y, segments[0])
        for s in segments:
            while self.changes and self.changes[0][0] <= s.t0 + 1e-9:
                self._change(self.changes.pop(0)[1])
            y = self._segment(y, s)
        self.end = y
        return self

    def _tolerances(self, y):
        self.atol[AIR], self.atol[LOST] = self.rtol * (y[AIR] + 1e-3), 1e-3 * self.rtol
        self.atol[self.plant.sums:] = 1e6 * self.rtol

    def _change(self, settings):
        for path, value in settings.items():
            place = self.raw["car"]
            *way, last = path.replace("[", ".").replace("]", "").split(".")
            for key in way:
                place = place[int(key)] if key.isdigit() else place.setdefault(key, {})
            place[last] = value
        old, self.plant = self.plant, WholePlant(understood(self.raw))
        self.plant.loop.guess = old.loop.guess
        self.stat = self.plant.stat

    def _asked(self, fan, y):
        t = float(self.plant.place(y, fan["sensor"]))
        return t >= fan["switch"]["on"] if fan["control"] == "switch" else False

    def _watch(self):
        out = []
        for i, (fan, _) in enumerate(self.plant.fans):
            if fan["control"] == "switch":
                level = fan["switch"]["off"] - 1e-9 if self.on[i] else fan["switch"]["on"]
                out.append((f"fan {i}", lambda t, y, f=fan, x=level: self.plant.place(y, f["sensor"]) - x,
                            -1 if self.on[i] else 1))
        stat = self.stat
        if stat != "none" and stat["restrictor"] == 0:
            side = stat["side"]
            for name, f, way in super()._watch():
                if name == "held" and side == "inlet":
                    def f(t, y):
                        return self._enters(t, y) - y[WAX]
                out.append((name, f, way))
        return out

    def _enters(self, t, y):
        s = self.now
        ch = s.at(t)
        _, loop, _ = self.plant.flows(y, ch, s, self.mode, self.held)
        return self.plant.entering(y, loop, ch[AMBIENT])

    def _happen(self, name, t, y):
        if name.startswith("fan "):
            i = int(name[4:])
            self.on = [not v if k == i else v for k, v in enumerate(self.on)]
            self.events.append((t, name))
        else:
            super()._happen(name, t, y)

    def _band(self, y):
        return 2 if self.stat != "none" and self.stat["restrictor"] > 0 else super()._band(y)

    def _segment(self, y, s):
        self.now = s
        return super()._segment(y, s)

    def _sample(self, t, y, s):
        if self.samples and abs(self.samples[-1][0] - t) < 1e-9:
            return
        self.samples.append((t, y.copy(), s, self.mode, self.held, self.plant))

    def series(self):
        rows = [p.report(y, s.at(min(t, s.t1)), s, mode, held) for t, y, s, mode, held, p in self.samples]
        out = {k: np.array([r[k] for r in rows]) for k in rows[0]}
        out["time"] = np.array([r[0] for r in self.samples])
        return out
