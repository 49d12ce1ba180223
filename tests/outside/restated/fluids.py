# SPDX-License-Identifier: GPL-3.0-or-later
"""Sections 1 to 3: standard atmosphere, moist air, films of air, coolants, Steffen's interpolation."""
import math

import numpy as np

GRAVITY = 9.80665
R_DRY, R_VAPOUR, CP_DRY, CP_VAPOUR, R_MOL = 287.05287, 461.523, 1004.685, 1872.0, 8.314462618


def standard_pressure(z):
    height = 6356766.0 * z / (6356766.0 + z)
    return 101325.0 * ((288.15 - 0.0065 * height) / 288.15) ** (GRAVITY / (0.0065 * R_DRY))


def standard_altitude(p):
    height = 288.15 / 0.0065 * (1 - (p / 101325.0) ** (0.0065 * R_DRY / GRAVITY))
    return 6356766.0 * height / (6356766.0 - height)


def moist_air(temperature, pressure, humidity):
    """Gas constant and heat capacity."""
    if humidity <= 0:
        return R_DRY, CP_DRY
    t = temperature - 273.15
    e = min(humidity * 611.2 * math.exp(17.62 * t / (243.12 + t)), pressure / 2)
    x = (e / R_VAPOUR) / ((pressure - e) / R_DRY + e / R_VAPOUR)
    return (1 - x) * R_DRY + x * R_VAPOUR, (1 - x) * CP_DRY + x * CP_VAPOUR


def sutherland(temperature):
    """Viscosity for pressure drops."""
    return 1.458e-6 * temperature * math.sqrt(temperature) / (temperature + 110.4)


def air_film(temperature):
    """Viscosity, heat capacity and Prandtl number."""
    t = min(max(temperature, 240.0), 420.0)
    mu = 1.4923e-6 * t * math.sqrt(t) / (t + 118.06)
    k = 7.850e-4 + 9.624e-5 * t - 3.642e-8 * t * t
    cf = 1032.35 - 0.20993 * t + 4.1104e-4 * t * t
    return mu, cf, mu * cf / k


def ramp(x, a, b):
    s = (x - a) / (b - a)
    return 0.0 if s <= 0 else 1.0 if s >= 1 else s * s * (3 - 2 * s)


class Steffen:
    """Interpolation through pairs; two of them make a straight line."""

    def __init__(self, x, y):
        self.x, self.y = list(x), list(y)
        h = [b - a for a, b in zip(x, x[1:])]
        s = [(b - a) / w for a, b, w in zip(y, y[1:], h)]
        d = [s[0]] + [0.0] * (len(x) - 2) + [s[-1]]
        for i in range(1, len(x) - 1):
            p = (s[i - 1] * h[i] + s[i] * h[i - 1]) / (h[i - 1] + h[i])
            d[i] = ((math.copysign(1, s[i - 1]) if s[i - 1] else 0) + (math.copysign(1, s[i]) if s[i] else 0)) \
                * min(abs(s[i - 1]), abs(s[i]), abs(p) / 2)
        self.h, self.s, self.slope = h, s, d

    def __call__(self, x):
        i = 0
        while i < len(self.h) - 1 and x >= self.x[i + 1]:
            i += 1
        d, h, s, a, b = x - self.x[i], self.h[i], self.s[i], self.slope[i], self.slope[i + 1]
        return self.y[i] + d * (a + d * ((3 * s - 2 * a - b) / h + d * (a + b - 2 * s) / (h * h)))


class PressureCurve:
    """F(n, Q) of section 6, of fans and pumps."""

    def __init__(self, curve):
        self.line = None
        if isinstance(curve, dict):
            self.a, self.free = curve["shutoff"], curve["free_flow"]
            self.c, self.low, self.low_slope = self.a / self.free ** 2, self.a, 0.0
            self.first = 0.0
            return
        flows, heads = zip(*curve)
        self.line = Steffen(flows, heads)
        self.first, self.free = flows[0], flows[-1]
        slope = self.line.slope[-1]
        if slope >= 0:
            slope = (heads[-1] - heads[-2]) / (flows[-1] - flows[-2])
        self.c = -slope / (2 * self.free)
        self.a = heads[-1] + self.c * self.free ** 2
        self.low_slope = min(self.line.slope[0], 0.0)
        self.low = heads[0] - self.low_slope * self.first

    def __call__(self, n, q):
        if q < n * self.first or q < 0:
            return n * n * self.low + n * self.low_slope * q
        if self.line is None or q >= n * self.free:
            return n * n * self.a - self.c * q * q
        return n * n * self.line(q / n)


DENSITY = {"ethylene glycol": [(0, (1000.28, -1.00767, -51.3622, 10.4206)), (.3, (1051.78, -27.7743, -24.3162, 0)),
                               (.4, (1066.80, -30.7379, -24.3234, 0)), (.5, (1081.08, -33.8140, -24.3219, 0)),
                               (.6, (1094.64, -36.9825, -24.3249, 0))],
           "propylene glycol": [(0, (1000.28, -1.00767, -51.3622, 10.4206)), (.5, (1052.70, -44.0366, -25.6715, 0))]}
CAPACITY = {"ethylene glycol": [(0, (4212.35, -169.452, 223.819, -49.1156)), (.3, (3588.61, 283.667, 0, 0)),
                                (.4, (3400.99, 335.444, 0, 0)), (.5, (3203.38, 386.156, 0, 0)),
                                (.6, (2996.61, 436.023, 0, 0))],
            "propylene glycol": [(0, (4212.35, -169.452, 223.819, -49.1156)), (.5, (3454.72, 385.855, 0, 0))]}
CONDUCTIVITY = {"ethylene glycol": [(0, (0.556842, 0.229626, -0.135282, 0.0258325)),
                                    (.3, (0.42908, 0.133727, -0.0591133, 0)), (.4, (0.394737, 0.110669, -0.048256, 0)),
                                    (.5, (0.363772, 0.0901658, -0.0381595, 0)),
                                    (.6, (0.33622, 0.0721748, -0.0296594, 0))],
                "propylene glycol": [(0, (0.556842, 0.229626, -0.135282, 0.0258325)), (.5, (0.36, 0, 0, 0))]}
LN_VISCOSITY = {"ethylene glycol": [(0, (0.579119, -3.33873, 2.56604, -1.43667, 0.362961, 0)),
                                    (.3, (1.42340, -3.68383, 2.90723, -2.36208, 1.35035, -0.34940)),
                                    (.4, (1.76230, -4.01677, 3.81952, -3.90839, 2.50888, -0.67026)),
                                    (.5, (2.08595, -4.17051, 3.63543, -3.75307, 2.57819, -0.73151)),
                                    (.6, (2.48886, -4.55996, 2.96008, -1.78067, 0.81799, -0.18600))],
                "propylene glycol": [(0, (0.579119, -3.33873, 2.56604, -1.43667, 0.362961, 0)),
                                     (.5, (2.91249, -5.88965, 4.46798, -2.47466, 0.91456, -0.16260))]}
SHARES = {"ethylene glycol": [(0, (0.0, 0.0)), (.3, (.324, -15.0)), (.4, (.425, -24.0)), (.5, (.524, -30.0)),
                              (.6, (.622, -30.0))],
          "propylene glycol": [(0, (0.0, 0.0)), (.5, (.5089016, -30.0))]}


def _mixed(table, share):
    for (s0, a), (s1, b) in zip(table, table[1:]):
        if share <= s1:
            w = (share - s0) / (s1 - s0)
            return [(1 - w) * u + w * v for u, v in zip(a, b)]
    raise ValueError("share of glycol beyond the table")


class Coolant:
    def __init__(self, kind, share):
        table = "ethylene glycol" if kind == "water" else kind
        self.rho, self.cap, self.lam, self.vis = (
            _mixed(t[table], share) for t in (DENSITY, CAPACITY, CONDUCTIVITY, LN_VISCOSITY))
        w, low = _mixed(SHARES[table], share)
        self.low, self.kind = low, kind
        glycol = 76.095 if kind == "propylene glycol" else 62.068
        water = (1 - w) / 18.0153
        self.water = water / (water + w / glycol)

    def _x(self, temperature):
        return min(max(temperature - 273.15, self.low), 140.0) / 100

    def density(self, temperature):
        a, b, c, d = self.rho
        x = self._x(temperature)
        return a + x * (b + x * (c + x * d))

    def capacity(self, temperature):
        a, b, c, d = self.cap
        x = self._x(temperature)
        return a + x * (b + x * (c + x * d))

    def conductivity(self, temperature):
        a, b, c, d = self.lam
        x = self._x(temperature)
        return a + x * (b + x * (c + x * d))

    def viscosity(self, temperature):
        a, b, c, d, e, f = self.vis
        x = self._x(temperature)
        return 1e-3 * math.exp(a + x * (b + x * (c + x * (d + x * (e + x * f)))))

    def capacities(self, temperatures):
        """Heat capacity and enthalpy of an array of temperatures."""
        t = np.asarray(temperatures) - 273.15
        x = np.minimum(np.maximum(t, self.low), 140.0) * 0.01
        a, b, c, d = self.cap
        cap = a + x * (b + x * (c + x * d))
        h = 100 * x * (a + x * (b / 2 + x * (c / 3 + x * (d / 4)))) + (t - 100 * x) * cap
        return cap, h

    def film_ratio(self, temperature, n):
        return (self.conductivity(temperature) / 0.414) ** 0.6 * (self.capacity(temperature) / 3551) ** 0.4 \
            * (self.viscosity(temperature) / 0.82e-3) ** (0.4 - n)

    def vapour_pressure(self, temperature):
        t = min(max(temperature, 173.15), 973.15)
        p = self.water * 133.3224 * 10 ** (7.96682 - 1668.21 / (t - 273.15 + 228))
        if self.kind == "ethylene glycol" and self.water < 1:
            p += (1 - self.water) * math.exp(68.11797 - 9617.267 / t - 5.83171 * math.log(t) - 1.13705e-6 * t * t)
        return p

    def boiling_point(self, pressure):
        """Newton's method on ln P over 1/T, which is nearly a straight line."""
        goal = math.log(min(max(pressure, 1e3), 4.99e6))
        t = 380.0
        for _ in range(30):
            here = math.log(self.vapour_pressure(t))
            slope = (math.log(self.vapour_pressure(t * (1 + 1e-6))) - here) / (1 / (t * (1 + 1e-6)) - 1 / t)
            new = 1 / (1 / t + (goal - here) / slope)
            if abs(new - t) < 1e-9:
                return new
            t = new
        return t
