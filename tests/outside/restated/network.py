# SPDX-License-Identifier: GPL-3.0-or-later
"""Section 4, "The air network": every node and branch an unknown, handed to SciPy's solver for systems at once."""
import math

import numpy as np
from scipy.optimize import root

from .fluids import PressureCurve

F, B, OUTSIDE = 0, 1, -1


def span(part):
    a, b = part["span_from"], part["span_to"]
    return (a, b) if (a, b) != (0.0, 0.0) else (0.0, 1.0)


def rise(q, c, most):
    """r(Q, C, D)."""
    if q < 0:
        return -rise(-q, c, 50.0)
    if q == 0 or most <= 0:
        return 0.0
    return most / (1 + (most * c / q) ** 8) ** 0.125


class Lane:
    def __init__(self, start, end, cores, shares, faces):
        self.start, self.end, self.cores, self.shares, self.faces = start, end, cores, shares, faces


class Network:
    def __init__(self, duct, gas, cp, standing, recovery):
        self.duct, self.gas, self.cp, self.standing, self.recovery = duct, gas, cp, standing, recovery
        self.curves = [PressureCurve(f["curve"]) for f in duct["fans"]]
        self._section()
        self.last = self.slopes = None

    def _section(self):
        """Shrouds and lanes."""
        cores, fans = self.duct["cores"], self.duct["fans"]
        self.shrouds, self.shroud_of = [], []
        for fan in fans:
            key = (span(fan), fan["before"] == "core")
            if key not in self.shrouds:
                self.shrouds.append(key)
            self.shroud_of.append(2 + self.shrouds.index(key))
        ends = sorted({x for p in (*cores, *fans) for x in span(p)})
        found = {}
        for a, b in zip(ends, ends[1:]):
            mid = (a + b) / 2
            here = tuple(i for i, c in enumerate(cores) if span(c)[0] < mid < span(c)[1])
            start, end = F, B
            for i, ((lo, hi), before) in enumerate(self.shrouds):
                if lo < mid < hi:
                    start, end = (2 + i, end) if before else (start, 2 + i)
            width = found.setdefault((start, end, here), [0.0] * len(here))
            for k, c in enumerate(here):
                lo, hi = span(cores[c])
                width[k] += (b - a) / (hi - lo)
        self.lanes = []
        for (start, end, here), shares in found.items():
            faces = [s * cores[c]["width"] * cores[c]["height"] for s, c in zip(shares, here)]
            self.lanes.append(Lane(start, end, here, shares, faces))
        self.face = sum(lane.faces[0] for lane in self.lanes)
        self.annulus = []
        for i, fan in enumerate(fans):
            if "diameter" in fan:
                self.annulus.append(fan["count"] * math.pi / 4 * (fan["diameter"] ** 2 - fan["hub"] ** 2))
            else:
                node, before = self.shroud_of[i], fan["before"] == "core"
                same = sum(f["count"] for j, f in enumerate(fans) if self.shroud_of[j] == node)
                self.annulus.append(sum(w.faces[0] if before else w.faces[-1] for w in self.lanes
                                        if (w.start if before else w.end) == node) * fan["count"] / same)

    def coefficient(self):
        """K_c of the diffuser."""
        total = 0.0
        for lane in self.lanes:
            first = lane.faces[0]
            total += first * sum(self.standing[c].coefficient() * (first / a) ** 2
                                 for c, a in zip(lane.cores, lane.faces))
        return total / self.face

    # ---- branches ------------------------------------------------------------------------------------------

    def _head(self, m, rho, area, share=1.0):
        floor = self.floor * self.rho * self.face * share
        return abs(m) * math.sqrt(m * m + floor * floor) / (2 * rho * area * area)

    def _fan(self, i, m, n, start, end):
        """dp_fan; densities where it comes from and where it goes."""
        fan = self.duct["fans"][i]
        way = min(max(m / (0.02 * self.rho * self.face), -1.0), 1.0)
        here = (1 + way) / 2 * start + (1 - way) / 2 * end
        head = here / 2 * (m / here / self.annulus[i]) ** 2
        if fan["health"] == "locked":
            return -fan["locked_loss"] * head if m >= 0 else fan["locked_loss"] * head
        n = max(n, 0.0) if fan["health"] == "sound" else 0.0
        raw = here / 1.2 * self.curves[i](n, m / here / fan["count"])
        if m < 0:
            return raw + fan["windmill_loss"] * head
        if fan["basis"] == "static":
            raw += head
            last = n * self.curves[i].free
            if m / here / fan["count"] > last:
                past = here / 2 * (last * fan["count"] / self.annulus[i]) ** 2
                raw = min(raw, here / 1.2 * self.curves[i](n, last) + past)
        return max(raw, -fan["windmill_loss"] * head)

    def _through(self, core, t, m, share, flow):
        """Temperature behind a core, and its conductance to the air in this lane."""
        wall = self.walls.get(core)
        if self.loads.get(core):
            return t + rise(self.loads[core], flow * self.cp, self.most - (t - self.t_air)), 0.0
        if wall is None:
            return t, 0.0
        if m == 0:
            return wall, 0.0
        film = (t + wall) / 2
        face = self.duct["cores"][core]["width"] * self.duct["cores"][core]["height"]
        e = -math.expm1(-share * self.standing[core].conductance(abs(m) / (share * face), film) / (abs(m) * self.cp))
        return t + e * (wall - t), abs(m) * self.cp * e

    def _lane(self, lane, m, t, flows):
        """Loss with its sign, temperature behind, and what each core gave: (core, R, T in, flow)."""
        order = range(len(lane.cores)) if m >= 0 else range(len(lane.cores) - 1, -1, -1)
        loss, gave, ahead = 0.0, [], None
        for k in order:
            core, area = lane.cores[k], lane.faces[k]
            rho = self.p / (self.gas * t)
            if ahead and area > ahead:
                loss += (1 - ahead / area) ** 2 * self._head(m, rho, ahead)
            out, r = self._through(core, t, m, lane.shares[k], flows[core])
            flux, floor = abs(m) / area, self.floor * self.rho
            taken = math.sqrt(flux * flux + floor * floor)
            if taken > 0:
                a, b = self.standing[core].drops(taken, t, rho, out, self.p / (self.gas * out))
                loss += (a + b) * flux / taken
            gave.append((core, r, t, m))
            t, ahead = out, area
        return math.copysign(loss, m), t, gave

    # ---- the system ----------------------------------------------------------------------------------------

    def _outside(self, bonnet):
        """Exits and the leak's outside: area, loss, pressure, cosine."""
        q, behind = self.q, self.v < 0
        out = []
        exits = self.duct["exits"]
        if bonnet:
            exits = [{"area": self.face, "loss": 0.0, "pressure_coefficient": 0.0, "angle": math.pi / 2}]
        for e in exits:
            cos = math.cos(e["angle"]) if not bonnet else 0.0
            out.append((e["area"], e["loss"], cos * cos * q if behind else e["pressure_coefficient"] * q, cos))
        leak = self.duct["leak"]["outside"]
        return out, 0.0 if behind else leak["pressure_coefficient"] * q

    def _unpack(self, x):
        nodes, at = 2 + len(self.shrouds), 0
        p, at = x[:nodes] * self.p0, nodes
        t, at = self.t_air + x[at:at + nodes] * 20, at + nodes
        t1, at = self.t_air + x[at] * 20, at + 1
        return p, t, t1, x[at:] * self.m0

    def _residual(self, x):
        duct, inlet = self.duct, self.duct["inlet"]
        p, t, t1, m = self._unpack(x)
        nodes = len(p)
        if np.any(t < 100) or t1 < 100 or np.any(t > 5000):
            return np.full(len(x), 1e3)
        rho = self.p / (self.gas * t)
        flow, brought = np.zeros(nodes), np.zeros(nodes)  # net into a node, and what m (T - T_a) comes in
        into = np.zeros(nodes)
        gaps, got = [], {"lanes": [], "gave": []}

        def carry(a, c, flux, warm):
            """A flow from a to c of which `warm` is the temperature it arrives with."""
            for node, sign in ((a, -1), (c, 1)):
                if node >= 0:
                    flow[node] += sign * flux
                    if sign * flux > 0:
                        into[node] += sign * flux
                        brought[node] += sign * flux * (warm - self.t_air)

        open_area = inlet["area"] * (1 - inlet["blocked"])
        k, m1 = inlet["screen"] + duct["diffuser"]["loss"], m[0]
        rho1 = self.p / (self.gas * t1)
        eta = 0.0 if self.v < 0 else self.recovery(m1 / (self.rho * open_area) / self.v if self.v > 0 else 1e9)
        if m1 >= 0:
            lip = inlet["lip_loss"] * rho1 / 2 * max(m1 / (rho1 * open_area) - max(self.v, 0.0), 0.0) ** 2
            gaps.append(eta * self.q - p[F] - lip - k * self._head(m1, rho1, open_area))
        else:
            gaps.append(eta * self.q - p[F] + (1 + k) * self._head(m1, rho[F], open_area))
        carry(OUTSIDE, F, m1, t1 if m1 >= 0 else t[F])
        if self.blower > 0:
            carry(OUTSIDE, F, self.blower * self.rho, self.t_air)
        at = 1
        flows = {}
        for lane, flux in zip(self.lanes, m[at:]):
            for core in lane.cores:
                flows[core] = flows.get(core, 0.0) + abs(flux)
        x_sum = y_sum = 0.0
        for lane in self.lanes:
            flux = m[at]
            enters = t[lane.start] if flux >= 0 else t[lane.end]
            loss, out, gave = self._lane(lane, flux, enters, flows)
            gaps.append(p[lane.start] - p[lane.end] - loss)
            carry(lane.start, lane.end, flux, out)
            if flux > 0:
                y_sum += flux
                x_sum += flux * (out - self.t_f)
            got["lanes"].append((flux, enters, out))
            got["gave"] += gave
            at += 1
        for i, fan in enumerate(duct["fans"]):
            a, c = (F, self.shroud_of[i]) if fan["before"] == "core" else (self.shroud_of[i], B)
            flux = m[at]
            gaps.append(p[a] - p[c] + self._fan(i, flux, self.turns[i], rho[a], rho[c]))
            carry(a, c, flux, t[a] if flux >= 0 else t[c])
            at += 1
            if fan["flap_area"] > 0:
                drop = p[a] - p[c]
                flux = self._flap(fan, drop, rho[a] if drop >= 0 else rho[c])
                carry(a, c, flux, t[a] if flux >= 0 else t[c])
        for name, to, outside in (("past_core", B, 0.0), ("outside", OUTSIDE, self.leak_pressure)):
            gap = duct["leak"][name]
            if gap["area"] > 0:
                flux = m[at]
                cold = self.t_air if to == OUTSIDE else t[B]
                warm = t[F] if flux >= 0 else cold
                loss = gap["coefficient"] * self._head(flux, self.p / (self.gas * warm), gap["area"],
                                                       gap["area"] / self.face)
                gaps.append(p[F] - (p[B] if to == B else outside) - math.copysign(loss, flux))
                carry(F, to, flux, warm)
                got[name] = flux
                at += 1
        whole = sum(e[0] for e in self.exits)
        got["exits"] = []
        for area, k, pressure, _ in self.exits:
            flux = m[at]
            if flux >= 0:
                loss = (1 + k) * self._head(flux, rho[B], area, area / whole)
            else:
                loss = -(k + 0.5) * self._head(flux, self.rho, area, area / whole)
            gaps.append(p[B] - pressure - loss)
            carry(B, OUTSIDE, flux, t[B] if flux >= 0 else self.t_air)
            got["exits"].append(flux)
            at += 1
        m0 = 0.01 * self.rho * self.face

        def soft(s):
            return (s ** 8 + m0 ** 8) ** 0.125 + 1e-9 * m0

        mixed = np.array([brought[i] / soft(into[i]) for i in range(nodes)])
        if self.skin:
            mixed[B] += rise(self.skin, into[B] * self.cp, 200 - mixed[B])
        got.update(m1=m1, rho=rho, t=t, t1=t1, p=p, open=open_area)
        self.got = got
        warmed = self.t_f + self.round * x_sum / soft(y_sum)
        return np.array([*(np.array(gaps) / self.p0), *(flow / self.m0), *((self.t_air + mixed - t) / 20),
                         (warmed - t1) / 20])

    def _flap(self, fan, drop, rho):
        k = fan["flap_loss"] * (1.0 if drop >= 0 else 1e10)
        floor = self.floor * self.rho * fan["flap_area"]
        x = abs(drop) * 2 * rho * fan["flap_area"] ** 2 / k
        squared = 2 * x * x / (floor ** 2 + math.sqrt(floor ** 4 + 4 * x * x)) if x else 0.0
        return math.copysign(math.sqrt(squared), drop)

    def solve(self, v_air, wake, t_air, pressure, turns, walls, heat=0.0, bonnet=False, blower=0.0, skin=0.0):
        inlet = self.duct["inlet"]
        self.v, self.t_air, self.p = v_air * math.sqrt(max(wake, 0.0)), t_air, pressure
        self.rho = pressure / (self.gas * t_air)
        self.q = self.rho * self.v ** 2 / 2
        self.turns, self.walls, self.skin, self.blower = turns, walls, skin, blower
        self.floor, self.most = (1e-6, 40 * t_air) if heat > 0 else (1e-3, 200.0)
        self.loads = {i: c["heat_load"] for i, c in enumerate(self.duct["cores"]) if c["carries"] == "heat load"}
        self._given(heat)
        share = min(max(v_air, 0.0) / (50 / 3.6), 1.0)
        self.t_f = t_air + inlet["preheat_standing"] * (1 - share) + inlet["preheat_moving"] * share
        self.round = inlet["recirculated"] * max(1 - max(v_air, 0.0) / inlet["recirculation_ends"], 0.0)
        self.exits, self.leak_pressure = self._outside(bonnet)
        self.p0, self.m0 = self.q + 50.0, 0.3 * self.rho * self.face * math.sqrt(2 * (self.q + 50) / self.rho) / 4
        found = self._search()
        return self._told(found, heat)

    def _given(self, heat):
        if heat <= 0:
            return
        cores = self.duct["cores"]
        takes = [i for i, c in enumerate(cores) if c["carries"] == "coolant"] or list(range(len(cores)))
        faces = {i: cores[i]["width"] * cores[i]["height"] for i in takes}
        for i in takes:
            self.loads[i] = self.loads.get(i, 0.0) + heat * faces[i] / sum(faces.values())

    def _count(self):
        """Unknowns: pressures and temperatures of the nodes, that of the inlet, all flows but those of the flaps."""
        return 2 * (2 + len(self.shrouds)) + 2 + len(self.lanes) + self._others()

    def _others(self):
        return len(self.duct["fans"]) + len(self.exits) + sum(g["area"] > 0 for g in self.duct["leak"].values())

    def _starts(self):
        nodes, count = 2 + len(self.shrouds), self._others()
        if self.last is not None and len(self.last) == self._count():
            yield self.last
        for sign in (1, -1):
            for size in (1.0, 0.2, 3.0, 0.02):
                p = np.linspace(0.6, 0.1, nodes) * sign
                m = np.full(1 + len(self.lanes) + count, size * sign)
                m[1:1 + len(self.lanes)] /= len(self.lanes)
                m[-len(self.exits):] /= len(self.exits)
                yield np.concatenate([p, np.full(nodes + 1, 0.5), m])
        rng = np.random.default_rng(5)
        for _ in range(60):
            yield np.concatenate([rng.normal(0, 0.5, nodes), rng.uniform(0, 2, nodes + 1),
                                  rng.normal(0.3, 0.7, 1 + len(self.lanes) + count)])

    def _chord(self):
        """From the last answer with the last slopes: enough while little has changed."""
        x, gap = self.last, 1.0
        if self.slopes is None or len(x) != len(self.slopes):
            return None
        for _ in range(12):
            r = self._residual(x)
            before, gap = gap, float(np.max(np.abs(r)))
            if gap < 1e-12:
                return x
            if not gap < 0.5 * before:
                return None
            x = x - self.slopes @ r
        return None

    def _learn(self, x):
        base, step = self._residual(x), 1e-7
        columns = [(self._residual(x + step * e) - base) / step for e in np.eye(len(x))]
        try:
            self.slopes = np.linalg.inv(np.array(columns).T)
        except np.linalg.LinAlgError:
            self.slopes = None

    def _search(self):
        if self.last is not None and len(self.last) == self._count():
            x = self._chord()
            if x is not None:
                self.last = x
                return x
        for x in self._starts():
            found = root(self._residual, x, method="hybr", tol=1e-13)
            if np.max(np.abs(self._residual(found.x))) < 1e-9:
                self.last = found.x
                self._learn(found.x)
                return found.x
        raise RuntimeError("no balance of the air found")

    def _face(self, gave):
        """Mean velocity at the front of the first core that carries coolant, else of the first."""
        cores = self.duct["cores"]
        first = next((i for i, c in enumerate(cores) if c.get("carries", "coolant") == "coolant"), 0)
        volume = sum(m * t * self.gas / self.p for core, _, t, m in gave if core == first)
        return volume / (cores[first]["width"] * cores[first]["height"])

    def _told(self, x, heat):
        self._residual(x)
        g, n = self.got, self.duct["count"]
        t = g["t"]
        m_in = max(g["m1"], 0.0) + max(-g.get("outside", 0.0), 0.0) + sum(max(-m, 0.0) for m in g["exits"])
        drag = self.v * m_in
        for m, (area, _, pressure, cos) in zip(g["exits"], self.exits):
            drag -= (m * m / (g["rho"][B] * area) * cos if m > 0 else 0.0) + pressure * area * cos
        if g["m1"] < 0:
            drag += g["m1"] ** 2 / (g["rho"][F] * g["open"])
        if self.duct["inlet"]["spill"] and self.v > 0:
            v1 = max(g["m1"] * self.gas * g["t1"] / (self.p * g["open"]), 0.0)
            if v1 < self.v:
                drag += (1 - self.duct["inlet"]["lip_suction"]) * self.q * g["open"] * (1 - v1 / self.v) ** 2
        drag += math.copysign(self.q, self.v) * self.duct.get("interference", 0.0) / n if self.v else 0.0
        warm, weighted = {}, {}
        for core, r, t_in, _ in g["gave"]:
            warm[core] = warm.get(core, 0.0) + r
            weighted[core] = weighted.get(core, 0.0) + r * t_in
        before = {}  # a load's air comes in at one temperature in the cases made here
        for core, _, at, _ in g["gave"]:
            before.setdefault(core, at)
        t_in = {c: weighted[c] / warm[c] if warm[c] > 0 else self.t_air for c in warm}
        m = sum(f for f, _, _ in g["lanes"])
        taken = sum(f for f, _, _ in g["lanes"] if f > 0)
        t3 = sum(f * out for f, _, out in g["lanes"] if f > 0) / taken if taken > 0 else None
        flows = {}
        for lane, (f, _, _) in zip(self.lanes, g["lanes"]):
            for c in lane.cores:
                flows[c] = flows.get(c, 0.0) + abs(f)
        loads = {c: flows[c] * self.cp * rise(q, flows[c] * self.cp, self.most - (before[c] - self.t_air))
                 for c, q in self.loads.items()} if self.loads and not heat else {}
        return {"m": m, "loads": loads, "drag": drag, "warm": warm, "t_in": t_in, "t": t, "t3": t3, "m1": g["m1"],
                "exits": g["exits"], "face": self._face(g["gave"])}
