# SPDX-License-Identifier: GPL-3.0-or-later
"""Section 15: from event to event through a drive with one of SciPy's solvers."""
import math

import numpy as np
from scipy.integrate import solve_ivp

from .drive import Schedule
from .plant import AIR, JACKET, LOST, WAX, Plant


class Drive:
    def __init__(self, case, rtol, method, every=1.0):
        self.case, self.rtol, self.method, self.every = case, rtol, method, every
        self.plant, self.schedule = Plant(case), Schedule(case)
        self.fan, self.stat = self.plant.fan, self.plant.stat
        size = self.plant.size
        self.atol = np.full(size, 10 * rtol)
        self.samples, self.events, self.fan_on_s, self.evaluations = [], [], 0.0, 0
        self.peak, self.full_s = (-math.inf, 0.0), 0.0

    def run(self):
        plant, segments = self.plant, self.schedule.segments
        first = segments[0]
        y = plant.start(first.a[4])
        self.atol[AIR] = self.rtol * (y[AIR] + 1e-3)
        self.atol[LOST] = 1e-3 * self.rtol
        self.atol[plant.sums:] = 1e6 * self.rtol
        self.start = y.copy()
        self.mode, self.held = "held", float(y[WAX])
        self.levels = self._levels()
        self.on = self._sensed(y) >= self.levels[1] if self.fan else False
        self.band = self._band(y)
        self._sample(0.0, y, first)
        for before, s in zip([None, *segments], segments):
            if before and self.on and before.fan != s.fan:
                self.events.append((s.t0, "fan on" if s.fan else "fan off"))
            y = self._segment(y, s)
        self.end = y
        return self

    def _sensed(self, y):
        return self.plant.place(y, self.fan["sensor"])

    def _band(self, y):
        if self.stat == "none":
            return 2
        level = self.plant.effective(y, self.mode, self.held)
        return 0 if level <= self.stat["opens"] else 1 if level <= self.stat["full"] else 2

    def _levels(self):
        """Temperatures at which the fan is no longer, and is, asked for."""
        control = self.fan["control"] if self.fan else "never"
        if control == "switch":
            return self.fan["switch"]["off"], self.fan["switch"]["on"]
        if control == "proportional":
            return (self.fan["proportional"]["from"],) * 2
        return (-math.inf, -math.inf) if control == "always" else (math.inf, math.inf)

    def _watch(self):
        """What may happen next: names with functions that change sign, and the direction."""
        out = []
        if self.fan and self.fan["control"] in ("switch", "proportional"):
            level = self.levels[0] - 1e-9 if self.on else self.levels[1]
            out.append(("fan", lambda t, y: self._sensed(y) - level, -1 if self.on else 1))
        if self.stat == "none":
            return out
        stat, held, mode = self.stat, self.held, self.mode
        h = stat["hysteresis"]
        if mode == "held":
            out.append(("opening", lambda t, y: y[WAX] - held - 1e-4, 1))
            out.append(("shutting", lambda t, y: y[WAX] - held + h + 1e-4, -1))
            return out
        if h > 0:
            out.append(("held", lambda t, y: y[JACKET] - y[WAX], -1 if mode == "opening" else 1))
        shift = 0.0 if mode == "opening" else h
        if self.band < 2:
            up = stat["opens"] if self.band == 0 else stat["full"]
            out.append(("up", lambda t, y: y[WAX] + shift - up - 1e-8, 1))
        if self.band > 0:
            low = stat["opens"] if self.band == 1 else stat["full"]
            out.append(("down", lambda t, y: y[WAX] + shift - low + 1e-8, -1))
        return out

    def _happen(self, name, t, y):
        if name == "fan":
            self.on = not self.on
            name = "fan on" if self.on else "fan off"
        elif name == "held":
            self.held = self.plant.effective(y, self.mode, 0.0)
            self.mode = "held"
        elif name in ("up", "down"):
            self.band += 1 if name == "up" else -1
            name = {("up", 1): "begins to open", ("up", 2): "fully open", ("down", 1): "regulates again",
                    ("down", 0): "shut"}[name, self.band]
        else:
            self.mode = name
        self.events.append((t, name))

    def _segment(self, y, s):
        plant, t = self.plant, s.t0
        while t < s.t1 - 1e-12:
            watch = self._watch()
            on, mode, held = self.on, self.mode, self.held
            width = s.t1 - s.t0
            a, slope = s.a, [(q - p) / width for p, q in zip(s.a, s.b)]

            def rates(now, state):
                past = now - s.t0
                ch = [p + k * past for p, k in zip(a, slope)]
                self.evaluations += 1
                return plant.rates(state, ch, s, mode, held, on)

            functions = []
            for _, f, direction in watch:
                def event(now, state, f=f):
                    return f(now, state)
                event.terminal, event.direction = True, direction
                functions.append(event)
            sol = solve_ivp(rates, (t, s.t1), y, method=self.method, rtol=self.rtol, atol=self.atol,
                            events=functions, dense_output=True)
            if sol.status < 0:
                raise RuntimeError(sol.message)
            self._collect(t, sol, s)
            if s.fan and on:
                self.fan_on_s += sol.t[-1] - t
            if self.band == 2 and self.stat != "none":
                self.full_s += sol.t[-1] - t
            y, t = sol.y[:, -1].copy(), float(sol.t[-1])
            if sol.status == 1:
                for (name, _, _), when in zip(watch, sol.t_events):
                    if len(when):
                        self._happen(name, t, y)
        return y

    def _collect(self, t0, sol, s):
        t1 = float(sol.t[-1])
        k = math.floor(t0 / self.every + 1e-9) + 1
        while k * self.every <= t1 + 1e-9:
            at = min(k * self.every, t1)
            self._sample(k * self.every, sol.y[:, -1] if at == t1 else sol.sol(at), s)
            k += 1
        best = int(np.argmax(sol.y[JACKET]))
        if sol.y[JACKET][best] > self.peak[0] - 0.02:
            lo, hi = sol.t[max(best - 1, 0)], sol.t[min(best + 1, len(sol.t) - 1)]
            grid = np.linspace(lo, hi, 201)
            values = sol.sol(grid)[JACKET]
            top = int(np.argmax(values))
            if values[top] > self.peak[0]:
                self.peak = (float(values[top]), float(grid[top]))

    def _sample(self, t, y, s):
        if self.samples and abs(self.samples[-1][0] - t) < 1e-9:
            return
        self.samples.append((t, y.copy(), s, self.mode, self.held))

    def series(self):
        """Columns over the samples, each shown as it stood before a jump."""
        rows = [self.plant.report(y, s.at(min(t, s.t1)), s, mode, held) for t, y, s, mode, held in self.samples]
        out = {k: np.array([r[k] for r in rows]) for k in rows[0]}
        out["time"] = np.array([r[0] for r in self.samples])
        return out
