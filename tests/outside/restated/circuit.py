# SPDX-License-Identifier: GPL-3.0-or-later
"""Sections 5 (coolant), 9 and 11: tubes, flows of the coolant loop, header tank and cap."""
import math

from .fluids import R_MOL, PressureCurve
from .roots import falling_root


class Tubes:
    """Flat tubes with round ends."""

    def __init__(self, core):
        t = core["tubes"]
        wall, self.passes = t["wall"], t["passes"]
        b, w = t.get("height", 0.0) - 2 * wall, core["depth"] / t["rows"] - 2 * wall
        if "diameter" in t:
            b = w = t["diameter"] - 2 * wall
        along, across = core["width"], core["height"]
        if core.get("flow") == "down":
            along, across = across, along
        self.round = b == w
        self.length = along * self.passes
        self.count = max(max(math.floor(across / t["pitch"] + 1e-9), 1) * t["rows"] / self.passes, 1.0)
        self.section = (w - b) * b + math.pi * b * b / 4
        rim = 2 * (w - b) + math.pi * b
        self.bore = 4 * self.section / rim
        self.surface = rim * self.length * self.count
        z = b / w
        self.laminar = 7.541 * (1 - 2.610 * z + 4.970 * z ** 2 - 5.119 * z ** 3 + 2.702 * z ** 4 - 0.548 * z ** 5)
        self.darcy = 96 * (1 - 1.3553 * z + 1.9467 * z ** 2 - 1.7012 * z ** 3 + 0.9564 * z ** 4 - 0.2537 * z ** 5)
        if self.round:
            self.darcy = 64.0
        self.skin = wall / core["fins"]["conductivity"] + core.get("coolant_fouling", 0.0)
        self.heat_factor = core["heat_factor"]

    @staticmethod
    def _xi(re):
        return (1.8 * math.log10(re) - 1.5) ** -2

    def _nu_laminar(self, re, pr):
        gz = re * pr * self.bore / self.length
        if self.round:
            return (3.66 ** 3 + 0.7 ** 3 + (1.615 * gz ** (1 / 3) - 0.7) ** 3
                    + (math.sqrt(gz) * (2 / (1 + 22 * pr)) ** (1 / 6)) ** 3) ** (1 / 3)
        return self.laminar + 0.03 * gz / (1 + 0.016 * gz ** (2 / 3))

    def _nu_turbulent(self, re, pr):
        x = self._xi(re) / 8
        return x * (re - 1000) * pr / (1 + 12.7 * math.sqrt(x) * (pr ** (2 / 3) - 1)) \
            * (1 + (self.bore / self.length) ** (2 / 3))

    def inner(self, flow, coolant, temperature):
        mu, k = coolant.viscosity(temperature), coolant.conductivity(temperature)
        pr = coolant.capacity(temperature) * mu / k
        re = flow / self.count * self.bore / (self.section * mu)
        if re <= 2300:
            nu = self._nu_laminar(re, pr)
        elif re >= 4000:
            nu = self._nu_turbulent(re, pr)
        else:
            s = (re - 2300) / 1700
            nu = (1 - s) * self._nu_laminar(2300.0, pr) + s * self._nu_turbulent(4000.0, pr)
        return self.heat_factor * self.surface / (self.bore / (nu * k) + self.skin)

    def drop(self, flow, rho, mu):
        u = flow / (self.count * self.section)
        re = rho * u * self.bore / mu
        if re <= 2300:
            darcy_re = self.darcy
        elif re >= 4000:
            darcy_re = self._xi(re) * re
        else:
            s = (re - 2300) / 1700
            darcy_re = ((1 - s) * self.darcy / 2300 + s * self._xi(4000.0)) * re
        return (darcy_re * mu * self.length / (2 * self.bore ** 2) + 1.5 * self.passes * rho * u / 2) * u


class GivenDrop:
    def __init__(self, drop):
        self.flow, self.at = drop["flow"], drop["drop"]

    def drop(self, flow, rho, mu):
        return self.at * (rho / 1000) ** 0.75 * (mu / 0.7e-3) ** 0.25 * (flow / self.flow) ** 1.75


class Hose:
    def __init__(self, hose, bends):
        self.bore, self.bends = hose["bore"], bends
        self.section = math.pi / 4 * self.bore ** 2
        self.slender = hose["length"] / self.bore

    def drop(self, flow, rho, mu):
        u = flow / self.section
        re = rho * u * self.bore / mu
        if re <= 0:
            return 0.0
        return (max(64 / re, 0.3164 * re ** -0.25) * self.slender + self.bends) * rho * u * u / 2


class Loop:
    def __init__(self, car, coolant, tubes):
        self.coolant, self.stat = coolant, car["thermostat"]
        hoses, core = car["hoses"], car["duct"]["core"]
        self.curve = PressureCurve(car["pump"]["curve"])
        self.bleed = car["tank"]["bleed"]
        self.jacket, self.bypass = hoses["jacket"], hoses["bypass"]
        self.out, self.back = Hose(hoses["out"], hoses["bends"] / 2), Hose(hoses["back"], hoses["bends"] / 2)
        self.core = GivenDrop(core["drop"]) if "drop" in core else tubes
        self.guess = 1e-4

    def solve(self, t_jacket, t_core, lift, n):
        """Volume flows p, r, b, t; densities; drop of the jacket and rise of the pump."""
        c = self.coolant
        rho_h, rho_c = c.density(t_jacket), c.density(t_core)
        if n <= 1e-4:
            return 0.0, 0.0, 0.0, 0.0, rho_h, 0.0, 0.0
        mu_h, mu_c = c.viscosity(t_jacket), c.viscosity(t_core)
        none = self.stat == "none"
        if none:
            valve = share = 0.0
        else:
            s = self.stat
            area = s["discharge"] * math.pi * s["bore"] * s["lift"] * max(lift + s["leak"] * (1 - lift), 1e-6)
            valve = rho_h / 2 / area ** 2
            share = 1.0 if s["bypass_shut"] > 1 else max(1 - lift / s["bypass_shut"], 0.0)
        by = share * self.bypass["flow"] * math.sqrt(1000 / (rho_h * self.bypass["drop"]))
        jacket = self.jacket["drop"] * rho_h / 1000 / self.jacket["flow"] ** 2
        out, back, core, rest = self.out, self.back, self.core, 1 - self.bleed
        got = [0.0, 0.0]

        def surplus(q):
            dp = valve * q * q + out.drop(q, rho_h, mu_h) + back.drop(q, rho_c, mu_c) + core.drop(q, rho_c, mu_c)
            got[0] = by * dp / (dp * dp + 1) ** 0.25
            got[1] = (q + got[0]) / rest
            return self.curve(n, got[1]) - jacket * got[1] ** 2 - dp

        radiator = self.guess = falling_root(surplus, self.guess, self.curve.free * n)
        surplus(radiator)
        pump = got[1]
        return pump, radiator, got[0], self.bleed * pump, rho_h, jacket * pump ** 2, self.curve(n, pump)


def soft(x):
    return 0.0 if x < -15e3 else x if x > 15e3 else 500 * math.log1p(math.exp(x / 500))


class Tank:
    """Masses of liquid by part, in the order tank, jacket, core, hose out, hose back."""

    def __init__(self, tank, coolant, masses, volume_filled):
        self.t, self.coolant, self.masses = tank, coolant, masses
        self.total = volume_filled + tank["air_space"]

    def liquid(self, temperatures):
        return sum(m / self.coolant.density(t) for m, t in zip(self.masses, temperatures))

    def gas(self, liquid, ambient, t_tank, air):
        """Pressure and volume of the gas."""
        beta = self.t["compliance"]
        vapour = self.coolant.vapour_pressure(t_tank)
        b = self.total - liquid + beta * (vapour - ambient)
        energy = max(air, 0.0) * R_MOL * t_tank
        s = math.sqrt(b * b + 4 * beta * energy)
        x = 2 * energy / (b + s) if b >= 0 else (s - b) / (2 * beta)
        cap = self.t["cap"]
        return min(vapour + x, ambient + cap + max(0.1 * cap, 5000.0)), b + beta * x

    def start(self, temperatures, ambient):
        """Moles of air and volume lost when the drive begins."""
        filled, beta = self.t["filled_at"], self.t["compliance"]
        air = max(ambient - self.coolant.vapour_pressure(filled), 0.0) * self.t["air_space"] / (R_MOL * filled)
        t_tank, lost = temperatures[0], 0.0
        liquid = self.liquid(temperatures)
        p, _ = self.gas(liquid, ambient, t_tank, air)
        if p > ambient + self.t["cap"]:
            reseat = self.t["cap"] - min(5000.0, self.t["cap"] / 10)
            g = self.total + beta * reseat - liquid
            if g < 2e-5:
                lost, g = 2e-5 - g, 2e-5
            air = max(ambient + reseat - self.coolant.vapour_pressure(t_tank), 0.0) * g / (R_MOL * t_tank)
        return air, lost

    def rates(self, p, volume, ambient, t_tank, air, lost):
        out = 1e-8 * soft(p - ambient - self.t["cap"])
        into = 1e-8 * soft(ambient - self.t["vacuum"] - p)
        g, v = max(volume, 0.0), 2e-5
        left = max(self.masses[0] / self.coolant.density(t_tank) - lost, 0.0)
        dn = into * ambient / (R_MOL * t_tank) - (out * air / (g + v) if g > 0 else 0.0)
        return dn, out * left / (left + v) / (1 + (g / v) ** 4)
