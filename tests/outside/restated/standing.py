# SPDX-License-Identifier: GPL-3.0-or-later
"""Section 5, "How the core stands in the car": blocked, uneven, inclined, dirty; and plate fins."""
import math

from .core import Fins, GivenDrop, PowerLaws
from .circuit import Tubes
from .fluids import air_film, sutherland

ANGLES = ((0.0, 0.10), (30.0, 0.12), (45.0, 0.17), (60.0, 0.27), (70.0, 0.38))


def by_angle(angle):
    deg = math.degrees(angle)
    for (x0, y0), (x1, y1) in zip(ANGLES, ANGLES[1:]):
        if deg <= x1 or x1 == 70.0:
            return y0 + (y1 - y0) * (deg - x0) / (x1 - x0)
    raise AssertionError


class Plates:
    """Plain continuous fins on staggered round tubes."""

    def __init__(self, core):
        f, t = core["fins"], core["tubes"]
        delta, fp, depth, rows = f["thickness"], f["pitch"], core["depth"], t["rows"]
        d, pt, pl = t["diameter"] + 2 * delta, t["pitch"], t.get("pitch_along", core["depth"])
        s = fp - delta
        self.face, self.d, self.rows, self.k, self.delta = core["width"] * core["height"], d, rows, \
            f["conductivity"], delta
        way = pt - d if rows == 1 else min(pt - d, 2 * (math.sqrt(pt ** 2 / 4 + pl ** 2) - d))
        self.sigma = way * s / (pt * fp)
        fin, tube = 2 * (pt * depth - rows * math.pi * d ** 2 / 4), rows * math.pi * d * s
        self.per_face = (fin + tube) / (pt * fp)
        self.area_ratio, self.y = self.per_face / self.sigma, fin / (fin + tube)
        c = 4.374e-4 * math.exp(6.737 * math.sqrt(self.sigma)) + 0.621
        self.contraction, self.expansion = (1 / c - 1) ** 2, (1 - self.sigma) ** 2
        x = pt / d - 1
        self.fin_f = 0.508 * (pt / d) ** 1.318 * self.y
        self.tube_f = 4 / math.pi * x * (0.25 + 0.118 * x ** -1.08) * (1 - self.y) * (1 - delta / fp)
        self.j4 = 0.14 * (pt / pl) ** -0.502 * (s / d) ** 0.0312
        if rows == 1:
            m, big = min(pt / 2, depth / 2), max(pt / 2, depth / 2)
            q = 1.28 * (2 * m / d) * math.sqrt(big / m - 0.2)
        else:
            ls = math.sqrt(pt ** 2 / 4 + pl ** 2) / 2
            q = 1.27 * (pt / d) * math.sqrt(ls / (pt / 2) - 0.3)
        self.reach = d / 2 * (q - 1) * (1 + 0.35 * math.log(q))
        self.heat_factor, self.fouling = core["heat_factor"], core.get("air_fouling", 0.0)

    def drops(self, flux, t_in, rho_in, t_out, rho_out):
        g, sq, mu = flux / self.sigma, self.sigma ** 2, sutherland((t_in + t_out) / 2)
        re = max(g * self.d / mu, 10.0)
        f_re = re * (self.fin_f * re ** -0.521 + self.tube_f * re ** -0.16)
        u, d = (1 / rho_in + 1 / rho_out) / 2, 1 / rho_out - 1 / rho_in
        core = g * g / 2 * (self.contraction + 1 - sq) / rho_in \
            + f_re * g * mu / (2 * self.d) * self.area_ratio * u - g * g / 2 * (1 - sq - self.expansion) / rho_out
        return core + (g * g - flux * flux) / 2 * d, g * g / 2 * d

    def conductance(self, flux, film):
        g = flux / self.sigma
        mu, cf, pr = air_film(film)
        re = max(g * self.d / mu, 10.0)
        j = self.j4 * re ** -0.328
        if self.rows < 4:
            j *= 0.991 * (2.24 * re ** -0.092 * (self.rows / 4) ** -0.031) ** (0.607 * (4 - self.rows))
        h = j * g * cf * pr ** (-2 / 3)
        h = h / (1 + h * self.fouling)
        x = self.reach * math.sqrt(2 * h / (self.k * self.delta))
        surface = 1 - self.y * (1 - (math.tanh(x) / x if x > 1e-9 else 1.0))
        return surface * h * self.per_face * self.face * self.heat_factor


class Standing:
    """A core's laws for the air, as it stands in the car. `more`: unevenness behind its diffuser."""

    def __init__(self, core, coolant=None, more=0.0):
        self.core, self.tubes, self.laws, made = core, None, None, None
        if "fins" in core:
            made = Plates(core) if core["fins"].get("kind") == "plate" else Fins(core)
            self.tubes = Tubes(core)
        if "heat" in core:
            self.laws = PowerLaws(core, coolant)
        self.law = GivenDrop(core) if "pressure_drop" in core else made
        self.air = self.laws or made
        self.face = core["width"] * core["height"]
        self.open, self.angle = 1 - core.get("blocked", 0.0), core.get("angle", 0.0)
        own = core.get("unevenness")
        if own is None:
            own = by_angle(self.angle) if self.angle > 0 else 0.0
        self.s = min(math.hypot(own, more), 0.99)
        self.tilt = core.get("angle_loss", 1.0) * math.tan(self.angle) ** 2
        self.inside = self._inside(coolant) if self.s > 0 and self.air and coolant else None

    def _inside(self, coolant):
        """B at its one flow."""
        if self.laws:
            return self.core["heat_factor"] * self.laws.nominal
        t = self.tubes
        return t.inner(t.count * t.section * coolant.density(363.15), coolant, 363.15)

    def coefficient(self):
        """On face head at 6 m/s, 1.2 kg/m3, 293.15 K, unheated."""
        flux = 1.2 * 6.0
        return self.drops(flux, 293.15, 1.2, 293.15, 1.2)[0] / (flux * flux / 2 / 1.2)

    def drops(self, flux, t_in, rho_in, t_out, rho_out):
        g = flux / self.open
        if self.s > 0:
            a = self.law.drops((1 + self.s) * g, t_in, rho_in, t_out, rho_out)
            b = self.law.drops((1 - self.s) * g, t_in, rho_in, t_out, rho_out)
            core, heating = (a[0] + b[0]) / 2, (a[1] + b[1]) / 2
        else:
            core, heating = self.law.drops(g, t_in, rho_in, t_out, rho_out)
        return core + self.tilt * flux ** 2 / (2 * rho_in), heating

    def conductance(self, flux, film):
        g = flux / self.open
        if self.s <= 0:
            return self.open * self.air.conductance(g, film)
        r, b = g * self.face * air_film(film)[1], self.inside

        def half(z):
            x = z * r / 2 * -math.expm1(-self.air.conductance(z * g, film) / (z * r))
            return 1 / (1 / x + 2 / b)

        k = half(1 + self.s) + half(1 - self.s)
        return self.open * -r * math.log(max(1 - 1 / (1 / k - 1 / b) / r, 1e-15))
