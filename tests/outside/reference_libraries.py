#!/usr/bin/env python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""Compares the library with two independent ones, through the program `probe`.

    python3 tests/outside/reference_libraries.py PATH_TO_PROBE

iapws: IAPWS-IF97 water, the IAPWS humid-air equation, Lemmon's air. fluids: US Standard Atmosphere
1976, Rennels & Hudson's cones, Idelchik's rounded entrances, friction factors.
The last line reads "N passed, N failed, N skipped"; the status is 1 if any failed.
"""
import math
import subprocess
import sys


class Tally:
    """Collects questions, asks the probe once, then judges."""

    def __init__(self):
        self.cases = []
        self.skipped = 0

    def expect(self, name, args, want, rtol, atol=0.0):
        self.cases.append((name, [float(a) for a in args], float(want), rtol, atol))

    def skip(self, library, count):
        print(f"skipped: no library {library}")
        self.skipped += count

    def judge(self, probe):
        lines = "".join(f"{n} {' '.join(repr(a) for a in args)}\n" for n, args, *_ in self.cases)
        run = subprocess.run([probe], input=lines, capture_output=True, text=True, check=False)
        answers = run.stdout.split()
        if run.returncode != 0 or len(answers) != len(self.cases):
            print(f"probe failed: status {run.returncode}, {len(answers)} answers of {len(self.cases)}")
            print(run.stderr)
            return 0, max(1, len(self.cases))
        passed = failed = 0
        worst = {}
        for (name, args, want, rtol, atol), text in zip(self.cases, answers):
            got = float(text)
            off = abs(got - want)
            worst[name] = max(worst.get(name, 0.0), off / abs(want) if want else off)
            if off <= rtol * abs(want) + atol:  # false for NaN
                passed += 1
            else:
                failed += 1
                print(f"FAILED {name} {args}: {got!r}, expected {want!r} (off by {off / abs(want or 1):.2e})")
        for name in sorted(worst):
            print(f"{name}: largest relative difference {worst[name]:.2e}")
        return passed, failed


WATER, IDLE = 0, 0.0


def water(tally):
    """Errors stated with the fits: 0.033, 0.15, 0.19, 0.38 %; saturation 0.3 % from 40 degC."""
    from iapws import IAPWS97, iapws97

    for t in range(0, 131, 2):
        kelvin = max(t, 0.01) + 273.15
        ref = IAPWS97(T=kelvin, P=0.3)
        args = (WATER, IDLE, kelvin)
        tally.expect("coolant_density", args, ref.rho, 3.4e-4)
        tally.expect("coolant_cp", args, ref.cp * 1e3, 1.5e-3)
        tally.expect("coolant_conductivity", args, ref.k, 1.95e-3)
        tally.expect("coolant_viscosity", args, ref.mu, 3.85e-3)
        base = IAPWS97(T=273.15, P=0.3).h
        tally.expect("coolant_enthalpy", args, (ref.h - base) * 1e3, 1.5e-3, 20.0)
    for t in range(40, 151, 2):
        kelvin = t + 273.15
        pressure = iapws97._PSat_T(kelvin) * 1e6
        tally.expect("coolant_vapour_pressure", (WATER, IDLE, kelvin), pressure, 3.1e-3)
        tally.expect("coolant_boiling", (WATER, IDLE, pressure), kelvin, 0.0, 0.08)
    for t in range(0, 60, 3):
        kelvin = t + 273.15
        tally.expect("vapour_saturation", (kelvin,), iapws97._PSat_T(kelvin) * 1e6, 3.3e-3)


def air(tally):
    """Stated: viscosity 0.13, conductivity 0.06, cp 0.01 %; density ideal to 0.12 %."""
    from iapws.humidAir import Air

    for kelvin in range(240, 421, 10):
        ref = Air(T=kelvin, P=0.101325)
        tally.expect("air_viscosity", (kelvin,), ref.mu, 1.3e-3)
        tally.expect("air_conductivity", (kelvin,), ref.k, 6.5e-4)
        tally.expect("air_cp_film", (kelvin,), ref.cp * 1e3, 1.2e-4)
        tally.expect("air_density", (kelvin, 101325, 0), ref.rho, 1.2e-3)


def humid_air(tally):
    """Ideal mixing with constant heat capacities against the virial equation: 0.1 and 0.5 %."""
    from iapws.humidAir import HumidAir

    for kelvin, humidity in ((283.15, 0.8), (293.15, 0.5), (303.15, 0.6), (313.15, 0.4), (318.15, 0.6)):
        saturation = 611.2 * math.exp(17.62 * (kelvin - 273.15) / (kelvin - 273.15 + 243.12))
        e = humidity * saturation
        ratio = 0.62198 * e / (101325 - e)
        ref = HumidAir(T=kelvin, P=0.101325, W=ratio)
        tally.expect("air_density", (kelvin, 101325, humidity), ref.rho, 1e-3)
        tally.expect("moist_cp", (kelvin, 101325, humidity), ref.cp * 1e3, 5e-3)


def atmosphere(tally):
    from fluids.atmosphere import ATMOSPHERE_1976

    for z in range(-500, 11001, 250):
        ref = ATMOSPHERE_1976(z)
        tally.expect("isa_temperature", (z,), ref.T, 1e-8)
        tally.expect("isa_pressure", (z,), ref.P, 2e-6)
        tally.expect("air_density", (ref.T, ref.P, 0), ref.rho, 1e-6)


def cones(tally):
    from fluids.fittings import diffuser_conical

    for ratio in (1.2, 1.5, 2.0, 3.0, 3.9, 4.4, 6.0, 9.0):
        for degrees in (3, 6, 10, 15, 19.9, 20.1, 25, 35, 45, 59.9, 60.1, 75, 90, 120, 180):
            for darcy in (0.012, 0.02):
                want = diffuser_conical(Di1=0.2, Di2=0.2 * math.sqrt(ratio), angle=degrees, fd=darcy, Re=3e5,
                                        method="Rennels")
                radians = min(math.radians(degrees), math.pi)
                tally.expect("cone_loss", (ratio, radians, darcy), want, 1e-10)


def entrances(tally):
    """The knots are the library's own to its two decimals; between them it draws a curve."""
    from fluids.fittings import entrance_rounded

    for ratio in (0.0, 0.01, 0.02, 0.03, 0.04, 0.05, 0.06, 0.08, 0.12, 0.16, 0.2, 0.3):
        want = entrance_rounded(Di=1.0, rc=ratio, method="Idelchik")
        tally.expect("lip_coefficient", (ratio,), want, 0.0, 1e-6)
    for ratio in (0.005, 0.015, 0.035, 0.07, 0.1, 0.14, 0.18):
        want = entrance_rounded(Di=1.0, rc=ratio, method="Idelchik")
        tally.expect("lip_coefficient", (ratio,), want, 0.0, 0.01)


def friction(tally):
    """Smooth tubes: Konakov and Filonenko against the solved Colebrook-Prandtl law."""
    from fluids.friction import friction_factor

    for re in (4e3, 1e4, 3e4, 1e5, 3e5, 1e6):
        smooth = friction_factor(Re=re, eD=0.0)
        tally.expect("xi_konakov", (re,), smooth, 0.02)
        tally.expect("xi_filonenko", (re,), smooth, 0.04)


def main():
    if len(sys.argv) != 2:
        print("usage: reference_libraries.py PATH_TO_PROBE", file=sys.stderr)
        return 2
    tally = Tally()
    sources = (("iapws", (water, air, humid_air)), ("fluids", (atmosphere, cones, entrances, friction)))
    for library, parts in sources:
        for part in parts:
            before = len(tally.cases)
            try:
                part(tally)
            except ImportError:
                del tally.cases[before:]
                tally.skip(library, 1)
    passed, failed = tally.judge(sys.argv[1])
    print(f"{passed} passed, {failed} failed, {tally.skipped} skipped")
    return 1 if failed else 0


if __name__ == "__main__":
    sys.exit(main())
