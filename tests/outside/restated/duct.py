# SPDX-License-Identifier: GPL-3.0-or-later
"""Sections 4 and 6: the air's way through the car, with its fan."""
import math

from scipy.optimize import brentq

from .fluids import PressureCurve
from .roots import falling_root


class Duct:
    def __init__(self, duct, gas, cp, drops, conductance=None):
        """`drops` and `conductance` are the core's functions for the air."""
        inlet, exit_ = duct["inlet"], duct["exit"]
        self.inlet, self.lip = inlet["area"] * (1 - inlet.get("blocked", 0.0)), inlet["lip_loss"]
        self.recovery, self.exit_cp = inlet["recovery"], exit_["pressure_coefficient"]
        self.screen, self.diffuser = inlet["screen"], duct["diffuser"]["loss"]
        self.exit, self.exit_loss, self.cos = exit_["area"], exit_["loss"], math.cos(exit_["angle"])
        self.drops, self.conductance = drops, conductance
        self.face = duct["core"]["width"] * duct["core"]["height"]
        self.gas, self.cp = gas, cp
        self.fan = duct.get("fan")
        if self.fan:
            f = self.fan
            self.curve = PressureCurve(f["curve"])
            self.annulus = self.face
            if "diameter" in f:
                self.annulus = f["count"] * math.pi / 4 * (f["diameter"] ** 2 - f["hub"] ** 2)
            self.static, self.windmill = f["basis"] == "static", f["windmill_loss"]
        self.guess = 0.1

    def fan_pressure(self, m, n, rho, rho_out):
        if not self.fan:
            return 0.0
        ahead, behind = (rho, rho_out) if self.fan["before"] == "core" else (rho_out, rho)
        way = min(max(m / (0.02 * rho * self.face), -1.0), 1.0)
        here = (1 + way) / 2 * ahead + (1 - way) / 2 * behind
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
            ntu = self.conductance(abs(m) / self.face, (t_air + wall) / 2) / (abs(m) * self.cp)
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
        core, heating = self.drops(taken, t_air, rho, tau * t_air, hot)
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

    @staticmethod
    def _heated(surplus, cold):
        """The root below the unheated flow. Given heat can choke the flow altogether: then there is none."""
        sign, high = math.copysign(1, cold), abs(cold) * 1.0001
        low = high * 0.97
        while low > 1e-5 * abs(cold):
            if sign * surplus(sign * low) > 0:
                return sign * brentq(lambda x: sign * surplus(sign * x), low, high, xtol=1e-300, rtol=1e-14)
            high, low = low, low * 0.97
        return None

    def solve(self, v_air, wake, t_air, pressure, n, wall=None, heat=0.0):
        """Mass flow and what hangs on it."""
        v = v_air * math.sqrt(max(wake, 0.0))
        rho = pressure / (self.gas * t_air)
        eta, exit_cp = (0.0, self.cos ** 2) if v_air < 0 else (self.recovery, self.exit_cp)
        def surplus(m):
            return self.terms(m, v, eta, exit_cp, rho, t_air, n, wall, heat)["sum"]

        still = (eta - exit_cp) * rho * v * v / 2 + self.fan_pressure(0.0, n, rho, rho)
        if wall is None and heat > 0:
            cold = self.solve(v_air, wake, t_air, pressure, n)["m"]
            m = self._heated(surplus, cold)
            if m is None:
                return None
        elif still == 0:
            m = 0.0
        elif still > 0:
            m = self.guess = falling_root(surplus, self.guess, 1.0)
        else:
            m = -falling_root(lambda x: -surplus(-x), 0.1, 1.0)
        tau, e = self.tau(m, t_air, wall, heat)
        behind = rho / tau if m >= 0 else rho
        v_exit = m / (behind * self.exit)
        drag = m * (v - v_exit * self.cos) if m >= 0 else -m * (v - m * tau / (rho * self.inlet))
        drag -= exit_cp * rho * v * v / 2 * self.exit * self.cos
        warm = abs(m) * self.cp * e
        return {"m": m, "tau": tau, "rho": rho, "hot": rho / tau, "e": e, "warm": warm, "v": v, "q": rho * v * v / 2,
                "face": m / (rho * self.face), "v_exit": v_exit, "drag": drag, "eta": eta, "exit_cp": exit_cp}
