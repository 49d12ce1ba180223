# SPDX-License-Identifier: GPL-3.0-or-later
"""Section 9, "The loop fitted out": all flows of the coolant at once, by SciPy's solver for systems."""
import math

from scipy.optimize import root

from .circuit import GivenDrop, Hose
from .fluids import GRAVITY, PressureCurve

P_CAVITY = math.log(2) / math.log(1 / 0.97)


def open_branch(branch, rho, dp):
    """Flow of bypass or heater, with nothing in its way."""
    if branch["flow"] <= 0:
        return 0.0
    return branch["flow"] * math.sqrt(1000 / (rho * branch["drop"])) * dp / (dp * dp + 1) ** 0.25


class FittedLoop:
    """`strings`: for each, its number of equal ducts and the laws of the cores in it."""

    def __init__(self, car, coolant, strings):
        self.car, self.coolant, self.stat, self.strings = car, coolant, car["thermostat"], strings
        hoses = car["hoses"]
        self.out, self.back = Hose(hoses["out"], hoses["bends"] / 2), Hose(hoses["back"], hoses["bends"] / 2)
        self.curve, self.hoses = PressureCurve(car["pump"]["curve"]), hoses
        self.laws = [[GivenDrop(c["drop"]) if "drop" in c else tubes for c, tubes in cores] for _, cores in strings]
        self.area = math.pi / 4 * car["tank"]["bleed_bore"] ** 2
        self.guess = {}

    def _valve(self, lift, rho):
        """Pressure over flow squared."""
        s = self.stat
        if s == "none":
            return 0.0
        if s["restrictor"] > 0:
            f = min((s["restrictor"] / self.hoses["out"]["bore"]) ** 2, 1.0)
            return (1.707 - f) ** 2 * rho / 2 / (math.pi / 4 * s["restrictor"] ** 2) ** 2
        area = s["discharge"] * math.pi * s["bore"] * s["lift"] * max(lift + s["leak"] * (1 - lift), 1e-6)
        return rho / 2 / area ** 2

    def _share(self, lift):
        s = self.stat
        if s == "none":
            return 0.0
        return 1.0 if s["bypass_shut"] > 1 else max(1 - lift / s["bypass_shut"], 0.0)

    def _string(self, i, q, t):
        rho, mu = self.coolant.density(t), self.coolant.viscosity(t)
        return sum(law.drop(q / self.strings[i][0], rho, mu) for law in self.laws[i])

    def solve(self, t_jacket, t_strings, lift, n, pressure, t_back):
        """Volume flows by name, and pressures."""
        rho_h = self.coolant.density(t_jacket)
        if n <= 1e-4:
            return {"p": 0.0, "r": 0.0, "b": 0.0, "t": 0.0, "h": 0.0, "q": [0.0] * len(t_strings), "rho": rho_h,
                    "jacket": 0.0, "rise": 0.0}
        got = self._balance(t_jacket, t_strings, lift, n, None)
        pump = self.car["pump"]
        if pump["npsh"] > 0:
            mix = t_jacket + got["r"] / got["p"] * (t_back - t_jacket)
            head = (pressure, mix, pump["npsh"] * n * n)
            if self._left(got["p"], head) < 1:
                got = self._balance(t_jacket, t_strings, lift, n, head)
        return got

    def _left(self, flow, head):
        """Share of the pump's rise that cavitation leaves."""
        pressure, mix, required = head
        rho, suction = self.coolant.density(mix), self.car["pump"]["suction"]
        at = pressure - suction["drop"] * rho / 1000 * (flow / suction["flow"]) ** 2 - self.coolant.vapour_pressure(mix)
        x = at / (rho * GRAVITY) / 0.1
        r = 0.1 * (x if x > 30 else math.log1p(math.exp(x))) / required
        return 1.0 if r >= 4 else (1 + r ** -P_CAVITY) ** (-1 / P_CAVITY)

    def _balance(self, t_jacket, t_strings, lift, n, head):
        c, car = self.coolant, self.car
        weights = [s[0] for s in self.strings]
        t_core = sum(w * t for w, t in zip(weights, t_strings)) / sum(weights)
        rho_h, rho_c = c.density(t_jacket), c.density(t_core)
        mu_h, mu_c = c.viscosity(t_jacket), c.viscosity(t_core)
        inlet_side = self.stat != "none" and self.stat["side"] == "inlet"
        valve, share = self._valve(lift, rho_c if inlet_side else rho_h), self._share(lift)
        heater, jacket = self.hoses["heater"], self.hoses["jacket"]
        k_j = jacket["drop"] * rho_h / 1000 / jacket["flow"] ** 2
        scale = self.curve.free * max(n, 0.05)
        out = {}

        def residual(x):
            q = [max(v, 1e-9) * scale for v in x]
            r = sum(q)
            drops = [self._string(i, v, t) for i, (v, t) in enumerate(zip(q, t_strings))]
            dp = valve * r * r + self.out.drop(r, rho_h, mu_h) + self.back.drop(r, rho_c, mu_c) + drops[0]
            b = share * open_branch(self.hoses["bypass"], rho_h, dp)
            h = 0.0 if heater["off"] else open_branch(heater, rho_h, dp)
            if self.area > 0:
                t = 0.6 * self.area * math.sqrt(2 / rho_h) * dp / (dp * dp + 1) ** 0.25
                p = r + b + h + t
            else:
                p = (r + b + h) / (1 - car["tank"]["bleed"])
                t = car["tank"]["bleed"] * p
            rise = self.curve(n, p)
            if head and rise > 0:
                rise *= self._left(p, head)
            out.update(p=p, r=r, b=b, t=t, h=h, q=q, rho=rho_h, jacket=k_j * p * p, rise=rise)
            unit = n * n * self.curve.a
            return [(rise - k_j * p * p - dp) / unit] + [(d - drops[0]) / unit * 10 for d in drops[1:]]

        key = len(t_strings)
        for guess in (self.guess.get(key, [0.2 / key] * key), [0.3 / key] * key, [0.05 / key] * key, [1e-3] * key):
            found = root(residual, guess, method="hybr", tol=1e-13)
            if max(abs(v) for v in residual(found.x)) < 1e-10:
                self.guess[key] = list(found.x)
                return dict(out)
        raise RuntimeError(f"no flow of coolant: {found.message}")
