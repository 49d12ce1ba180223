# SPDX-License-Identifier: GPL-3.0-or-later
"""Section 5, air side: what a core costs the air and what it conducts to it."""
import math

import numpy as np
from scipy.optimize import least_squares

from .fluids import CP_DRY, Steffen, air_film, sutherland


class Fins:
    """Louvred fins between flat tubes: geometry, what they cost the air, what they conduct to it."""

    def __init__(self, core):
        fins, tubes = core["fins"], core["tubes"]
        lp, ll, fp, thick = fins["louvre_pitch"], fins["louvre_length"], fins["pitch"], fins["thickness"]
        tp, td, depth = tubes["pitch"], tubes["height"], core["depth"]
        theta = math.degrees(fins["louvre_angle"])
        gap = length = tp - td
        s = fp - thick
        self.face = core["width"] * core["height"]
        self.sigma = s * gap / (fp * tp)
        fin_area, tube_area = 2 * gap * depth, 2 * s * depth
        self.area_ratio = (fin_area + tube_area) / (s * gap)
        self.fin_share = fin_area / (fin_area + tube_area)
        self.pitch = lp
        hydraulic = 2 * s * (length - thick) / (s + length - thick)
        c = 4.374e-4 * math.exp(6.737 * math.sqrt(self.sigma)) + 0.621
        self.contraction, self.expansion = (1 / c - 1) ** 2, (1 - self.sigma) ** 2
        self.low_power = -0.805 * fp / length
        self.low = 14.39 * math.log(1 + fp / lp) ** 3.04 * math.log((thick / fp) ** 0.48 + 0.9) ** -1.435 \
            * (hydraulic / lp) ** -3.01 * (fp / ll) ** -0.308 * (depth / ll) ** -0.308 \
            * math.exp(-0.1167 * tp / td) * theta ** 0.35
        self.high_power = 0.6049 - 1.064 / theta ** 0.2
        self.high = 4.97 * math.log((thick / fp) ** 0.5 + 0.9) ** -0.527 * (hydraulic / lp) ** -2.966 \
            * (fp / ll) ** (-0.7931 * tp / gap) * (tp / td) ** -0.0446 \
            * math.log(1.2 + (lp / fp) ** 1.4) ** -3.553 * theta ** -0.477
        self.at_130, self.at_230 = self._f_low(130.0), self._f_high(230.0)
        self.turn, self.top = self._turn()
        self.j0 = (theta / 90) ** 0.27 * (fp / lp) ** -0.14 * (length / lp) ** -0.29 * (depth / lp) ** -0.23 \
            * (ll / lp) ** 0.68 * (tp / lp) ** -0.28 * (thick / lp) ** -0.05
        self.fin_length = length / 2 - thick
        self.fin_factor = 2 / (fins["conductivity"] * thick) * (1 + thick / depth)
        self.whole = self.sigma * self.area_ratio * self.face
        self.fouling = core.get("air_fouling", 0.0)
        self.heat_factor = core["heat_factor"]

    def _f_low(self, re):
        return self.low * re ** self.low_power * math.log(0.5 * re) ** -3.01

    def _f_high(self, re):
        return self.high * re ** self.high_power * math.log(0.3 * re) ** -2.966

    def _turn(self):
        """Reynolds number at which f Re^2 would begin to fall, and f Re^2 there."""
        steps = [130 + 0.25 * i for i in range(401)]
        heights = [re * self._blended(re) for re in steps]
        for re, here, there in zip(steps, heights, heights[1:]):
            if here > there:
                return re, here
        return math.inf, 0.0

    def friction_re(self, re):
        blended = self._blended(re)
        return max(blended, self.top / re) if re > self.turn else blended

    def _blended(self, re):
        if re <= 50:
            return 50 * self._f_low(50.0)
        if re <= 130:
            return re * self._f_low(re)
        if re >= 230:
            return re * self._f_high(re)
        w = 3.6 - 0.02 * re
        return re * math.sqrt(((1 + w) * self.at_130 ** 2 + (1 - w) * self.at_230 ** 2) / 2)

    def drops(self, flux, t_in, rho_in, t_out, rho_out):
        """dp_core and dp_heating."""
        g, sq = flux / self.sigma, self.sigma ** 2
        mu = sutherland((t_in + t_out) / 2)
        u = (1 / rho_in + 1 / rho_out) / 2
        core = g * g / 2 * (self.contraction + 1 - sq) / rho_in \
            + self.friction_re(g * self.pitch / mu) * g * mu / (2 * self.pitch) * self.area_ratio * u \
            - g * g / 2 * (1 - sq - self.expansion) / rho_out
        d = 1 / rho_out - 1 / rho_in
        return core + (g * g - flux * flux) / 2 * d, g * g / 2 * d

    def conductance(self, flux, film):
        g = flux / self.sigma
        mu, cf, pr = air_film(film)
        h = self.j0 * max(g * self.pitch / mu, 10.0) ** -0.49 * g * cf * pr ** (-2 / 3)
        h = h / (1 + h * self.fouling)
        x = self.fin_length * math.sqrt(h * self.fin_factor)
        surface = 1 - self.fin_share * (1 - (math.tanh(x) / x if x > 1e-9 else 1.0))
        return surface * h * self.whole * self.heat_factor


class GivenDrop:
    """`pressure_drop`: a coefficient, a polynomial or a table."""

    def __init__(self, core):
        p = self.p = core["pressure_drop"]
        self.rho = p.get("at_density", 1.2)
        self.at = sutherland(p["at_temperature"]) if "at_temperature" in p else None
        self.sigma = core.get("free_area_ratio", 1.0)
        if "table" in p:
            rows = p["table"]
            self.line = Steffen([0.0] + [r[0] for r in rows], [0.0] + [r[1] for r in rows])
            power = 1.75
            if len(rows) > 1:
                (v0, p0), (v1, p1) = rows[-2:]
                power = math.log(p1 / p0) / math.log(v1 / v0)
            self.power = min(max(power, 1.0), 2.0)

    def _table(self, v):
        end, top = self.line.x[-1], self.line.y[-1]
        return self.line(v) if v <= end else top * (v / end) ** self.power

    def drops(self, flux, t_in, rho_in, t_out, rho_out):
        r = sutherland((t_in + t_out) / 2) / self.at if self.at else 1.0
        u, d = (1 / rho_in + 1 / rho_out) / 2, 1 / rho_out - 1 / rho_in
        if "coefficient" in self.p:
            core = self.p["coefficient"] * flux ** 2 / 2 * u
        elif "table" in self.p:
            core = self._table(flux / (self.rho * r)) * r * r * self.rho * u
        else:
            core = (self.p["linear"] * r * flux + self.p["quadratic"] / self.rho * flux ** 2) * u
        return core, flux ** 2 / 2 * d / self.sigma ** 2


class PowerLaws:
    """`heat`: conductances of either side as power laws of mass flow, given or recovered from a maker's table."""

    def __init__(self, core, coolant):
        h, self.factor = core["heat"], core["heat_factor"]
        self.medium = core.get("carries", "coolant")
        self.face = core["width"] * core["height"]
        self.rho = h.get("at_density", 1.2)
        if "rejection" in h:
            self._recover(core, h, coolant)
        else:
            self.air, self.speed, self.a = h["air_conductance"], h["at_face_velocity"], h.get("air_exponent", 0.5)
            self.water, self.flow = h["coolant_conductance"], h["at_coolant_flow"]
            self.b = h.get("coolant_exponent", 0.8)
            self.nominal = self.water

    def _recover(self, core, h, coolant):
        v, m = np.array(h["face_velocity"]), np.array(h["coolant_flow"])
        y, n = np.array(h["rejection"]), int(core["cells"])
        self.speed, self.flow = math.sqrt(v[0] * v[-1]), math.sqrt(m[0] * m[-1])
        inside = {"engine oil": 2100.0, "gearbox oil": 2100.0, "charge air": 1007.0}
        c_c = (m * (inside.get(self.medium) or coolant.capacity(363.15)))[None, :]
        c_a = (self.rho * v * self.face * CP_DRY)[:, None]
        free = [True, len(m) > 1, len(v) > 2, len(m) > 2]

        def unpack(x):
            x = iter(x)
            a0 = math.exp(next(x))
            b0 = math.exp(next(x)) if free[1] else 4 * a0
            return a0, b0, next(x) if free[2] else 0.5, next(x) if free[3] else 0.8

        def miss(x):
            a0, b0, a, b = unpack(x)
            e = c_a * -np.expm1(-a0 * (v / self.speed)[:, None] ** a / c_a)
            bb = b0 * (m / self.flow)[None, :] ** b
            j, k = bb * e / (bb + e) / n, bb / n / c_c
            w = 1 / k - 1 / np.expm1(k)
            return (c_c * (1 - ((c_c - j * w) / (c_c + j * (1 - w))) ** n) / y - 1).ravel()

        first = [x for x, f in zip((math.log(2 * y[-1, -1]), math.log(8 * y[-1, -1]), 0.5, 0.8), free) if f]
        fit = least_squares(miss, first, xtol=1e-14, ftol=1e-14, gtol=1e-14)
        self.air, self.water, self.a, self.b = unpack(fit.x)
        self.nominal = self.water
        if self.medium == "coolant":
            self.water /= coolant.film_ratio(363.15, self.b)

    def conductance(self, flux, film):
        return self.factor * self.air * (flux / (self.speed * self.rho)) ** self.a

    def inner(self, flow, coolant, temperature):
        x = (flow / self.flow) ** self.b
        films = coolant.film_ratio(temperature, self.b) if self.medium == "coolant" else 1.0
        return self.factor * self.water * films * (x ** 4 + 0.02 ** 4) ** 0.25
