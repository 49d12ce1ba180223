#!/usr/bin/env python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""Three cars known in words: steady water temperature and face velocity against two independent sums.

    python3 tests/outside/three_cars.py PATH_TO_SWIRLPOT

The cars (docs/examples/thornby.json, ashlow.json, pennock.json: climb 190 kW, circuit 350 kW, student 60 kW)
are a sheet's likely values of common practice, and PRINTED holds what that sheet worked out for them by hand:
a calculation on paper, not a measurement. The formulas below were written from the published ones alone: core
by Chang & Wang 1997 and Chang et al. 2000/2006 with the Kays & London pressure drop, tubes by Gnielinski 2013,
effectiveness of both streams unmixed by Mason's series, air path as a total-pressure balance of a heated duct.

They differ from the program in three things, each judged here:
  1. leaks past the core (area 0.025, 0.025, 0.06 of the core's face) are in the sheet but not in the program
     yet. The own sum without them shows what they are worth: 3 to 4 % of face velocity, 2 to 3 % of the
     inlet difference.
  2. the sheet's factor for uneven air and narrow tanks (0.93, 0.93, 0.92) is on heat, `heat_factor` is on
     conductance; `equal_factor` turns the one into the other; the cases hold the result.
  3. the program's cells mix the coolant across a tube's depth: 0.3 to 1 % less heat than both unmixed.
"""
import math
import os
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "tools"))
from command import ROOT, Tally, require  # noqa: E402

R, CP = 287.055, 1006.5  # J/kgK of air, Lemmon et al. near 320 K
# Water at 365 K, Incropera & DeWitt table A.6 (from memory; IAPWS-IF97 agrees to 0.3 %): kg/m3, J/kgK, Pa s, W/mK.
WATER = {"rho": 963.4, "cp": 4209.0, "mu": 306e-6, "k": 0.677}
LEAK_LOSS = 2.6  # on the leak's head: 1/0.62^2, common practice


def root(f, low, high):
    """Bisection; f changes sign between the two."""
    sign = f(low) > 0
    for _ in range(44):
        mid = 0.5 * (low + high)
        low, high = (mid, high) if (f(mid) > 0) == sign else (low, mid)
    return 0.5 * (low + high)


def viscosity(t):
    """Sutherland, US Standard Atmosphere 1976."""
    return 1.458e-6 * t ** 1.5 / (t + 110.4)


def conductivity(t):
    return 2.64638e-3 * t ** 1.5 / (t + 245.4 * 10 ** (-12 / t))


def unmixed(ntu, cr):
    """Mason 1955, both streams unmixed."""
    def incomplete(n, x):
        return 1.0 - math.exp(-x) * sum(x ** m / math.factorial(m) for m in range(n))
    return sum(incomplete(n + 1, ntu) * incomplete(n + 1, cr * ntu) for n in range(40)) / (cr * ntu)


class Core:
    """Louvred fins between flat tubes; lengths in m, angle in degrees."""

    def __init__(self, size, fin, louvre, tube):
        self.width, self.height, self.depth = size
        self.pitch, self.thick = fin
        self.lp, self.angle = louvre
        self.tp, self.dm, self.rows = tube
        self.gap = self.tp - self.dm
        self.ll = 0.85 * self.gap
        self.face = self.width * self.height
        s = self.pitch - self.thick
        self.sigma = s * self.gap / (self.pitch * self.tp)
        fins, bare = 2 * self.gap * self.depth, 2 * s * self.depth
        self.over_flow = (fins + bare) / (s * self.gap)
        self.over_face = (fins + bare) / (self.pitch * self.tp)
        self.fin_share = fins / (fins + bare)
        high = self.gap - self.thick
        self.dh = 2 * s * high / (s + high)

    def j(self, re):
        """Chang & Wang, Int. J. Heat Mass Transfer 40 (1997) 533, eq. 9."""
        lp = self.lp
        return (re ** -0.49 * (self.angle / 90) ** 0.27 * (self.pitch / lp) ** -0.14 * (self.gap / lp) ** -0.29
                * (self.depth / lp) ** -0.23 * (self.ll / lp) ** 0.68 * (self.tp / lp) ** -0.28
                * (self.thick / lp) ** -0.05)

    def f(self, re):
        """Chang et al., Int. J. Heat Mass Transfer 43 (2000) 2237, joined as in 49 (2006) 4250."""
        if re <= 130:
            return self.f_low(re)
        if re >= 230:
            return self.f_high(re)
        w = 3.6 - 0.02 * re
        return math.sqrt(0.5 * ((1 + w) * self.f_low(130) ** 2 + (1 - w) * self.f_high(230) ** 2))

    def f_low(self, re):
        p, ln = self.pitch, math.log
        return (14.39 * re ** (-0.805 * p / self.gap) * ln(1 + p / self.lp) ** 3.04
                * ln((self.thick / p) ** 0.48 + 0.9) ** -1.435 * (self.dh / self.lp) ** -3.01 * ln(0.5 * re) ** -3.01
                * (p / self.ll) ** -0.308 * (self.depth / self.ll) ** -0.308
                * math.exp(-0.1167 * self.tp / self.dm) * self.angle ** 0.35)

    def f_high(self, re):
        p, ln = self.pitch, math.log
        return (4.97 * re ** (0.6049 - 1.064 / self.angle ** 0.2) * ln((self.thick / p) ** 0.5 + 0.9) ** -0.527
                * (self.dh / self.lp * ln(0.3 * re)) ** -2.966 * (p / self.ll) ** (-0.7931 * self.tp / self.gap)
                * (self.tp / self.dm) ** -0.0446 * ln(1.2 + (self.lp / p) ** 1.4) ** -3.553 * self.angle ** -0.477)

    def drop(self, v, rho, t, t_out):
        """Static drop between equal areas, Kays & London ch. 2 with the uniform-profile end losses."""
        thin = rho * t / t_out
        g = rho * v / self.sigma
        re = g * self.lp / viscosity(0.5 * (t + t_out))
        narrow = 4.374e-4 * math.exp(6.737 * math.sqrt(self.sigma)) + 0.621
        kc, ke, s2 = (1 / narrow - 1) ** 2, (1 - self.sigma) ** 2, self.sigma ** 2
        friction = self.f(re) * self.over_flow * 0.5 * (1 / rho + 1 / thin)
        return 0.5 * g * g * ((kc + 1 - s2) / rho + 2 * (1 / thin - 1 / rho) + friction - (1 - s2 - ke) / thin)

    def air_side(self, v, rho, t):
        """eta h A, W/K."""
        g, mu = rho * v / self.sigma, viscosity(t)
        prandtl = mu * CP / conductivity(t)
        h = self.j(g * self.lp / mu) * g * CP / prandtl ** (2 / 3)
        m = math.sqrt(2 * h / (180.0 * self.thick) * (1 + self.thick / self.depth))
        half = 0.5 * self.gap - self.thick
        return (1 - self.fin_share * (1 - math.tanh(m * half) / (m * half))) * h * self.over_face * self.face

    def water_side(self, flow):
        """h A, W/K: Gnielinski 2013, plates below Re 2300, a straight line to 4000; walls of 0.3 mm."""
        b, w = self.dm - 0.6e-3, self.depth / self.rows - 0.6e-3
        section, rim = (w - b) * b + math.pi * b * b / 4, 2 * (w - b) + math.pi * b
        dh, tubes = 4 * section / rim, self.height / self.tp * self.rows
        pr = WATER["mu"] * WATER["cp"] / WATER["k"]
        re = flow / tubes / section * WATER["rho"] * dh / WATER["mu"]

        def turbulent(x):
            xi = (1.8 * math.log10(x) - 1.5) ** -2
            over = xi / 8 * (x - 1000) * pr / (1 + 12.7 * math.sqrt(xi / 8) * (pr ** (2 / 3) - 1))
            return over * (1 + (dh / self.width) ** (2 / 3))

        def laminar(x):
            gz = x * pr * dh / self.width
            return 7.54 + 0.03 * gz / (1 + 0.016 * gz ** (2 / 3))

        if re >= 4000:
            nu = turbulent(re)
        elif re <= 2300:
            nu = laminar(re)
        else:
            nu = laminar(2300) + (re - 2300) / 1700 * (turbulent(4000) - laminar(2300))
        area = rim * self.width * tubes
        return 1 / (1 / (nu * WATER["k"] / dh * area) + 0.3e-3 / (180.0 * area))


class Car:
    def __init__(self, core, **given):
        self.core = core
        self.__dict__.update(given)


def state(car, v, leaks, ambient, warmer, factor_on_heat, factor):
    """Everything at face velocity v, and what is left over of the total-pressure balance."""
    core, p = car.core, 1e5
    t, q = ambient + warmer, 0.5 * p / (R * ambient) * car.speed ** 2
    front = p / (R * t)
    air = front * v * core.face
    rate, flow = air * CP, WATER["rho"] * WATER["cp"] * car.flow
    ua = 1 / (1 / core.air_side(v, front, t + 15) + 1 / core.water_side(car.flow))
    ua *= 1 if factor_on_heat else factor
    least, most = min(rate, flow), max(rate, flow)
    per_kelvin = unmixed(ua / least, least / most) * least * (factor if factor_on_heat else 1)
    rise = car.heat / rate
    drop = core.drop(v, front, t, t + rise)
    leak = car.leak * core.face * math.sqrt(2 * drop * front / LEAK_LOSS) if leaks else 0.0
    all_air, back = air + leak, front * t / (t + rise)
    v1 = all_air / (front * car.inlet * core.face)
    exit_rho = p / (R * (t + rise * air / all_air))
    v_exit = all_air / (exit_rho * car.exit * core.face)
    lost = car.lip * 0.5 * front * max(v1 - car.speed, 0) ** 2 + (car.screen + 0.38) * 0.5 * front * v1 ** 2
    lost += drop - 0.5 * (front * v) ** 2 * (1 / back - 1 / front)
    lost += car.fan * 0.5 * air ** 2 / back + car.cp * q + (1 + car.kn) * 0.5 * exit_rho * v_exit ** 2
    return car.eta * q - lost, {"ratio": v / car.speed, "face": v, "mouth": v1 / car.speed, "drop": drop,
                                "loss": drop / (0.5 * front * v * v), "per_kelvin": per_kelvin, "rise": rise,
                                "itd": car.heat / per_kelvin, "water": car.heat / flow,
                                "out": t + car.heat / per_kelvin - 273.15}


def solve(car, leaks, ambient=303.15, warmer=None, factor_on_heat=True, factor=None):
    warmer = car.warmer if warmer is None else warmer
    factor = car.factor if factor is None else factor
    arguments = (leaks, ambient, warmer, factor_on_heat, factor)
    v = root(lambda x: state(car, x, *arguments)[0], 0.05 * car.speed, 0.45 * car.speed)
    return state(car, v, *arguments)[1]


ANNULUS = math.pi / 4 * 0.255 ** 2 * (1 - 0.35 ** 2)  # m2, hub 0.35 of the diameter
CARS = {
    "thornby": Car(Core((0.48, 0.34, 0.042), (1.9e-3, 0.10e-3), (1.4e-3, 23), (10e-3, 2e-3, 2)),
                   speed=120 / 3.6, flow=105 / 6e4, heat=41.8e3, factor=0.93, warmer=2, eta=0.98, lip=0.18,
                   screen=0.6, inlet=0.28, leak=0.025, cp=-0.18, kn=1.7, exit=0.52, fan=0),
    "ashlow": Car(Core((0.68, 0.46, 0.048), (1.4e-3, 0.085e-3), (1.1e-3, 27), (9e-3, 1.8e-3, 2)),
                  speed=150 / 3.6, flow=190 / 6e4, heat=109e3, factor=0.93, warmer=2, eta=0.88, lip=0.30,
                  screen=0.6, inlet=0.34, leak=0.025, cp=-0.20, kn=0.6, exit=0.48, fan=0),
    "pennock": Car(Core((0.30, 0.27, 0.032), (1.3e-3, 0.075e-3), (1.0e-3, 27), (8.2e-3, 1.7e-3, 1)),
                   speed=50 / 3.6, flow=32 / 6e4, heat=9.9e3, factor=0.92, warmer=4, eta=0.75, lip=0.30,
                   screen=0.0, inlet=0.42, leak=0.06, cp=-0.12, kn=0.2, exit=0.63, fan=1.2 / ANNULUS ** 2),
}
PRINTED = {
    "thornby": {"ratio": 0.190, "face": 6.3, "mouth": 0.70, "drop": 162, "loss": 7.1, "per_kelvin": 620,
                "itd": 67.4, "rise": 35, "out": 99, "water": 5.9},
    "ashlow": {"ratio": 0.190, "face": 7.9, "mouth": 0.59, "drop": 425, "loss": 11.8, "per_kelvin": 1790,
               "itd": 61.1, "rise": 38, "out": 93, "water": 8.5},
    "pennock": {"ratio": 0.174, "face": 2.4, "mouth": 0.47, "drop": 57, "loss": 17, "per_kelvin": 166,
                "itd": 59.8, "rise": 44, "out": 94, "water": 4.6},
}
# Inlet difference at other speeds with the same heat, as the sheet prints it: km/h, K, share allowed. The sheet
# keeps the water's properties; the student car at 100 km/h is at 71 degC, where its tubes are all but laminar
# (Re 2400 for 3150): 33.8 K by the own sum with hot water, 37 K by the program.
OTHER_SPEEDS = {"thornby": ((60, 113, 0.06), (100, 76, 0.06)), "ashlow": ((60, 140, 0.06), (100, 85, 0.06)),
                "pennock": ((60, 51, 0.06), (100, 34, 0.10))}


def read_right(tally, name):
    """The formulas above give the sheet's numbers, so they are the sheet's sum."""
    got = solve(CARS[name], leaks=True)
    for key, want in PRINTED[name].items():
        width = {"out": 0.006, "ratio": 0.01, "itd": 0.005, "per_kelvin": 0.005}.get(key, 0.035)
        tally.near(f"{name}, own sum with leaks, {key}", got[key], want, width)


def equal_factor(tally, name):
    """The case's `heat_factor` does to heat what the sheet's factor does (the case holds two digits)."""
    car = CARS[name]
    want = solve(car, leaks=False)["per_kelvin"]
    equal = root(lambda g: solve(car, False, factor_on_heat=False, factor=g)["per_kelvin"] - want, 0.5, 1.0)
    with open(os.path.join(ROOT, "docs", "examples", name + ".json"), encoding="utf-8") as f:
        held = float(f.read().split('"heat_factor": ')[1].split(",")[0])
    tally.within(f"{name}, heat_factor on conductance for {car.factor} on heat", held, equal - 0.006, equal + 0.006)


def against_both(tally, program, name):
    run = require(program, f"docs/examples/{name}.json")
    sheet, car = PRINTED[name], CARS[name]
    t_air = run.last("ambient")
    got = {"ratio": run.last("face_velocity") / car.speed, "face": run.last("face_velocity"),
           "itd": run.last("coolant_radiator_in") - t_air, "rise": run.last("air_out") - t_air,
           "out": run.last("coolant_engine_out"),
           "water": run.last("coolant_radiator_in") - run.last("coolant_radiator_out")}
    tally.near(f"{name}, coolant flow as stated, l/min", run.last("coolant_flow"), car.flow * 6e4, 0.005)
    tally.near(f"{name}, heat as stated, kW", run.last("heat_in"), car.heat / 1e3, 0.003)
    tally.near(f"{name}, settled: heat out over heat in", run.last("heat_out") / run.last("heat_in"), 1, 1e-4)
    tally.near(f"{name}, face over road speed against the sheet", got["ratio"], sheet["ratio"], 0.05)
    tally.near(f"{name}, inlet difference against the sheet, K", got["itd"], sheet["itd"], 0.06)
    tally.near(f"{name}, air's rise through the core against the sheet, K", got["rise"], sheet["rise"], 0.06)
    tally.near(f"{name}, coolant in less out against the sheet, K", got["water"], sheet["water"], 0.03)
    tally.within(f"{name}, engine out against the sheet, degC", got["out"], sheet["out"] - 3, sheet["out"] + 3)
    alike = solve(car, leaks=False, ambient=t_air + 273.15, warmer=0)
    tally.near(f"{name}, face over road speed against the own sum without leaks", got["ratio"], alike["ratio"], 0.01)
    tally.near(f"{name}, inlet difference against the own sum without leaks, K", got["itd"], alike["itd"],
               0.025 if name == "pennock" else 0.015)  # the student car's tubes at Re 3150 feel whole tubes and warmth
    tally.near(f"{name}, air's rise against the own sum without leaks, K", got["rise"], alike["rise"], 0.015)
    print(f"{name}: face over road speed {got['ratio']:.4f} (sheet {sheet['ratio']}, own sum without leaks "
          f"{alike['ratio']:.4f}, with leaks {solve(car, True)['ratio']:.4f}); inlet difference {got['itd']:.2f} K "
          f"(sheet {sheet['itd']}, own without {alike['itd']:.2f}, with {solve(car, True)['itd']:.2f}); "
          f"engine out {got['out']:.1f} degC (sheet {sheet['out']})")


def at_other_speeds(tally, program, name):
    """The sheet's sum at other speeds holds the same heat; the hotter ones pass boiling, which is no matter here."""
    for speed, want, share in OTHER_SPEEDS[name]:
        run = require(program, f"docs/examples/{name}.json", [f"drive[0].speed={speed} km/h"])
        tally.near(f"{name} at {speed} km/h, inlet difference against the sheet, K",
                   run.last("coolant_radiator_in") - run.last("ambient"), want, share)


def main():
    if len(sys.argv) != 2:
        print(__doc__)
        return 2
    tally = Tally()
    for name in CARS:
        read_right(tally, name)
        equal_factor(tally, name)
        against_both(tally, sys.argv[1], name)
        at_other_speeds(tally, sys.argv[1], name)
    return tally.close()


if __name__ == "__main__":
    sys.exit(main())
