# SPDX-License-Identifier: GPL-3.0-or-later
"""One duct's air, whatever is in it (section 4)."""
from .duct import Duct
from .inlet import Diffuser, Recovery
from .network import Network, span
from .standing import Standing


class PlainDuct(Duct):
    """One core, one kind of fan, one exit, no way round them: equation (1)."""

    def __init__(self, duct, gas, cp, standing):
        fan = duct["fans"][0] if duct["fans"] else None
        super().__init__(dict(duct, core=duct["cores"][0], fan=fan, exit=duct["exits"][0]), gas, cp, standing.drops,
                         standing.conductance)
        self.eta = Recovery(duct["inlet"])
        self.health = fan["health"] if fan else "sound"

    def fan_pressure(self, m, n, rho, rho_out):
        if self.health == "locked":
            ahead, behind = (rho, rho_out) if self.fan["before"] == "core" else (rho_out, rho)
            way = min(max(m / (0.02 * rho * self.face), -1.0), 1.0)
            here = (1 + way) / 2 * ahead + (1 - way) / 2 * behind
            head = here / 2 * (m / here / self.annulus) ** 2
            return -self.fan["locked_loss"] * head if m >= 0 else self.fan["locked_loss"] * head
        return super().fan_pressure(m, n if self.health == "sound" else 0.0, rho, rho_out)

    def terms(self, m, v, eta, exit_cp, rho, t_air, n, wall, heat):
        if v > 0:
            eta = self.eta(m / (rho * self.inlet) / v)
        return super().terms(m, v, eta, exit_cp, rho, t_air, n, wall, heat)


class AirPath:
    """Either, and what the core's surroundings make of it."""

    def __init__(self, duct, gas, cp, coolant=None):
        open_area = duct["inlet"]["area"] * (1 - duct["inlet"]["blocked"])
        self.standing = [Standing(c, coolant) for c in duct["cores"]]
        bare = Network(duct, gas, cp, self.standing, None)
        diffuser = Diffuser(duct["diffuser"], open_area, bare.face, bare.coefficient())
        self.duct = dict(duct, diffuser={"loss": diffuser.loss})
        if diffuser.unevenness > 0:
            self.standing = [Standing(c, coolant, diffuser.unevenness) for c in duct["cores"]]
        self.skin_share = duct["bay"]["engine_skin"]
        self.network = Network(self.duct, gas, cp, self.standing, Recovery(duct["inlet"]))
        self.plain = PlainDuct(self.duct, gas, cp, self.standing[0]) if plain(duct) else None

    def solve(self, v_air, wake, t_air, pressure, fans, walls, bonnet=False, blower=0.0, skin=0.0):
        if not self.plain or bonnet or blower > 0 or self.duct["inlet"]["spill"] or self.duct.get("interference"):
            return self.network.solve(v_air, wake, t_air, pressure, fans, walls, 0.0, bonnet, blower, skin)
        s = self.plain.solve(v_air, wake, t_air, pressure, fans[0] if fans else 0.0, walls.get(0))
        return {"m": s["m"], "drag": s["drag"], "warm": {0: s["warm"]}, "t_in": {0: t_air}, "loads": {}}


def plain(duct):
    inlet, leak, core = duct["inlet"], duct["leak"], duct["cores"][0]
    parts = [core, *duct["fans"]]
    return len(duct["cores"]) == 1 and len(duct["fans"]) < 2 and len(duct["exits"]) == 1 \
        and all(span(p) == (0.0, 1.0) for p in parts) and not any(g["area"] > 0 for g in leak.values()) \
        and not any(f["flap_area"] > 0 for f in duct["fans"]) and core["carries"] != "heat load" \
        and not any(inlet[k] for k in ("recirculated", "preheat_standing", "preheat_moving")) \
        and not duct["bay"]["engine_skin"]
