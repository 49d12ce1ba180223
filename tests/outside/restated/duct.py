# SPDX-License-Identifier: GPL-3.0-or-later
"""Sections 4, 5 (air) and 6: the air's way through the car."""
import math

from scipy.optimize import brentq

from .fluids import PressureCurve, air_film, air_viscosity


class Core:
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
        self.j0 = (theta / 90) ** 0.27 * (fp / lp) ** -0.14 * (length / lp) ** -0.29 * (depth / lp) ** -0.23 \
            * (ll / lp) ** 0.68 * (tp / lp) ** -0.28 * (thick / lp) ** -0.05
        self.fin_length = length / 2 - thick
        self.fin_factor = 2 / (fins["conductivity"] * thick) * (1 + thick / depth)
        self.whole = self.sigma * self.area_ratio * self.face
        self.heat_factor = core["heat_factor"]

    def _f_low(self, re):
        return self.low * re ** self.low_power * math.log(0.5 * re) ** -3.01

    def _f_high(self, re):
        return self.high * re ** self.high_power * math.log(0.3 * re) ** -2.966

    def friction_re(self, re):
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
        mu = air_viscosity((t_in + t_out) / 2)
        u = (1 / rho_in + 1 / rho_out) / 2
        core = g * g / 2 * (self.contraction + 1 - sq) / rho_in \
            + self.friction_re(g * self.pitch / mu) * g * mu / (2 * self.pitch) * self.area_ratio * u \
            - g * g / 2 * (1 - sq - self.expansion) / rho_out
        d = 1 / rho_out - 1 / rho_in
        return core, g * g * d - flux * flux / 2 * d

    def conductance(self, flux, film):
        if flux <= 0:
            return 0.0
        g = flux / self.sigma
        mu, cf, pr = air_film(film)
        h = self.j0 * max(g * self.pitch / mu, 10.0) ** -0.49 * g * cf * pr ** (-2 / 3)
        x = self.fin_length * math.sqrt(h * self.fin_factor)
        surface = 1 - self.fin_share * (1 - (math.tanh(x) / x if x > 1e-9 else 1.0))
        return surface * h * self.whole * self.heat_factor


def falling_root(f, guess, top):
    """The root of a falling function with f(0) > 0: secant from a guess, a bracket behind it."""
    x0, y0 = guess, f(guess)
    if y0 == 0:
        return x0
    low = x0 if y0 > 0 else 0.0
    high = x0 if y0 < 0 else math.inf
    x1 = guess * (1 + 1e-5)
    for _ in range(14):
        y1 = f(x1)
        if y1 == 0:
            return x1
        low, high = (max(low, x1), high) if y1 > 0 else (low, min(high, x1))
        if y1 == y0:
            break
        x0, y0, x1 = x1, y1, x1 - y1 * (x1 - x0) / (y1 - y0)
        if abs(x1 - x0) <= 1e-12 * abs(x1):
            return x1
        if not low <= x1 <= high:
            break
    while high == math.inf:
        top = max(top, low) * 4
        low, high = (top, high) if f(top) > 0 else (low, top)
    while low == 0 or high > 16 * low:
        mid = math.sqrt(low * high) if low > 0 else high / 1e6
        if mid < 1e-300:
            return 0.0
        low, high = (mid, high) if f(mid) > 0 else (low, mid)
    return brentq(f, low, high, xtol=1e-300, rtol=1e-14)


class Duct:
    def __init__(self, duct, gas, cp, heat_core=None):
        inlet, exit_ = duct["inlet"], duct["exit"]
        self.inlet, self.lip = inlet["area"], inlet["lip_loss"]
        self.recovery, self.exit_cp = inlet["recovery"], exit_["pressure_coefficient"]
        self.screen, self.diffuser = inlet["screen"], duct["diffuser"]["loss"]
        self.exit, self.exit_loss, self.cos = exit_["area"], exit_["loss"], math.cos(exit_["angle"])
        self.core = heat_core or Core(duct["core"])
        self.face = self.core.face
        self.gas, self.cp = gas, cp
        self.fan = duct.get("fan")
        if self.fan:
            f = self.fan
            self.curve = PressureCurve(f["curve"])
            self.annulus = f["count"] * math.pi / 4 * (f["diameter"] ** 2 - f["hub"] ** 2) if "diameter" in f else self.face
            self.static, self.windmill = f["basis"] == "static", f["windmill_loss"]
        self.guess = 0.1

    def fan_pressure(self, m, n, rho, rho_out):
        if not self.fan:
            return 0.0
        before = self.fan["before"] == "core"
        here = rho if before == (m >= 0) else rho_out
        flow = m / here / self.fan["count"]
        head = here / 2 * (m / here / self.annulus) ** 2
        raw = here / 1.2 * self.curve(n, flow)
        if m < 0:
            return raw + self.windmill * head
        if self.static:
            raw += head
            last = n * self.curve.free
            if flow > last:
                past = here / 2 * (last * self.fan["count"] / self.annulus) ** 2
                raw = min(raw, here / 1.2 * self.curve(n, last) + past)
        return max(raw, -self.windmill * head)

    def tau(self, m, t_air, wall, heat):
        """Temperature ratio and effectiveness of the core."""
        if wall is None:
            return 1 + (heat / (abs(m) * self.cp * t_air) if heat > 0 else 0.0), 0.0
        if m == 0:
            e = 1.0
        else:
            ntu = self.core.conductance(abs(m) / self.face, (t_air + wall) / 2) / (abs(m) * self.cp)
            e = -math.expm1(-ntu)
        return 1 + e * (wall / t_air - 1), e

    def terms(self, m, v, eta, exit_cp, rho, t_air, n, wall, heat):
        """All terms of equation (1) at mass flow m, in pascal, with their signs as losses."""
        tau, _ = self.tau(m, t_air, wall, heat)
        hot = rho / tau
        size, q = abs(m), rho * v * v / 2
        floor = 0.0 if (wall is None and heat > 0) else 1e-3 * rho
        mf2 = (floor * self.face) ** 2

        def head(density, area):
            return size * math.sqrt(m * m + mf2) / (2 * density * area * area)

        flux = size / self.face
        taken = math.sqrt(flux * flux + floor * floor)
        share = flux / taken if taken > 0 else 0.0
        core, heating = self.core.drops(taken, t_air, rho, tau * t_air, hot)
        fan = self.fan_pressure(m, n, rho, hot)
        out = {"ram": eta * q, "back": exit_cp * q, "fan": fan, "core": core * share, "heating": heating * share}
        if m >= 0:
            through = head(rho, self.inlet)
            out.update(lip=self.lip * rho / 2 * max(m / (rho * self.inlet) - max(v, 0.0), 0.0) ** 2,
                       screen=self.screen * through, diffuser=self.diffuser * through,
                       exit=self.exit_loss * head(hot, self.exit), exit_head=head(hot, self.exit))
            out["sum"] = out["ram"] - out["back"] + fan - out["lip"] - out["screen"] - out["diffuser"] - out["core"] \
                - out["heating"] - out["exit"] - out["exit_head"]
        else:
            out["sum"] = out["ram"] - out["back"] + fan + out["core"] + out["heating"] \
                + (1 + self.screen + self.diffuser) * head(hot, self.inlet) \
                + (self.exit_loss + 0.5) * head(rho, self.exit)
        return out

    def solve(self, v_air, wake, t_air, pressure, n, wall=None, heat=0.0):
        """Mass flow and what hangs on it."""
        v = v_air * math.sqrt(max(wake, 0.0))
        rho = pressure / (self.gas * t_air)
        eta, exit_cp = (0.0, self.cos ** 2) if v_air < 0 else (self.recovery, self.exit_cp)
        size = 1e-300

        def surplus(m):
            return self.terms(m, v, eta, exit_cp, rho, t_air, n, wall, heat)["sum"]

        given = wall is None and heat > 0
        still = surplus(size) if given else (eta - exit_cp) * rho * v * v / 2 + self.fan_pressure(0.0, n, rho, rho)
        if still == 0 and not given:
            m = 0.0
        elif still > 0 or given:
            m = self.guess = falling_root(surplus, self.guess, 1.0)
        else:
            m = -falling_root(lambda x: -surplus(-x), 0.1, 1.0)
        tau, e = self.tau(m, t_air, wall, heat)
        behind = rho / tau if m >= 0 else rho
        v_exit = m / (behind * self.exit)
        drag = m * (v - v_exit * self.cos) - exit_cp * rho * v * v / 2 * self.exit * self.cos
        warm = abs(m) * self.cp * e
        return {"m": m, "tau": tau, "rho": rho, "hot": rho / tau, "e": e, "warm": warm, "v": v, "face": m / (rho * self.face),
                "v_exit": v_exit, "drag": drag, "eta": eta, "exit_cp": exit_cp,
                "q": rho * v * v / 2}
