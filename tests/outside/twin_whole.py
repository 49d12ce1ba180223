#!/usr/bin/env python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""swirlpot's whole car against a restatement from docs/model.md alone, with SciPy's solvers.

usage: twin_whole.py PATH_TO_SWIRLPOT

As twin.py, for what may be fitted: networks of air, strings of cores, oils, charge air, heater and so on. Environment:
SP_TWIN_CASES limits drives and ducts to names that hold one of these words.
"""
import copy
import csv
import json
import os
import subprocess
import sys
import tempfile
import time

HERE = os.path.dirname(os.path.abspath(__file__))
KELVIN = ("coolant_engine_out", "coolant_radiator_in", "coolant_radiator_out", "metal", "coolant_tank",
          "thermostat_wax", "gauge", "oil", "oil_gearbox", "charge_in", "charge_out", "boil_margin", "coolant_pump_in")
SHARES = ("coolant_flow", "coolant_flow_radiator", "coolant_flow_bypass", "tank_pressure", "air_mass_flow", "drag",
          "fan_power")
RTOL = 1e-9


class Tally:
    def __init__(self):
        self.passed = self.failed = 0

    def check(self, what, difference, limit, note=""):
        good = bool(difference <= limit)
        self.passed += good
        self.failed += not good
        print(f"  {'ok  ' if good else 'FAIL'} {what:<44} {difference:10.3g}  allowed {limit:8.3g}  {note}")


class Refused(Exception):
    """The program gives no answer where it should."""


def command(program, *arguments):
    done = subprocess.run([program, *arguments], capture_output=True, text=True, check=False)
    if done.returncode not in (0, 1):
        raise Refused(f"{' '.join(arguments)}: status {done.returncode}\n{done.stderr}")
    return done.stdout


def run_program(program, raw, folder):
    case = copy.deepcopy(raw)
    case.setdefault("solver", {})["tolerance"] = RTOL
    path, out = os.path.join(folder, "case.json"), os.path.join(folder, "out")
    with open(path, "w", encoding="utf-8") as f:
        json.dump(case, f)
    command(program, "run", path, "-o", out, "--exact")
    with open(os.path.join(out, "series.csv"), encoding="utf-8", newline="") as f:
        rows = list(csv.reader(f))
    heads = [h.split(" [")[0] for h in rows[0]]
    series = {h: np.array([float(r[j] or "nan") for r in rows[1:]]) for j, h in enumerate(heads)}
    with open(os.path.join(out, "result.json"), encoding="utf-8") as f:
        return series, json.load(f)


def compare_drive(tally, program, name, raw, folder):
    began = time.process_time()
    twin = wholemarch.WholeDrive(raw, RTOL, "LSODA").run()
    mine = twin.series()
    print(f"{name}: twin's own time {time.process_time() - began:.1f} s, {twin.evaluations} evaluations")
    theirs, result = run_program(program, raw, folder)
    for column in mine:
        if column not in theirs or column == "time":
            continue
        gap, size = np.abs(mine[column] - theirs[column]), 1.0
        if column not in KELVIN:
            size = max(float(np.max(np.abs(mine[column]))), 1e-3)
        worst = int(np.argmax(np.where(np.isnan(gap), np.inf, gap)))
        tally.check(f"{name}: {column}", float(gap[worst]) / size, 1e-4,
                    f"at {mine['time'][worst]:g} s: {theirs[column][worst]:.9g}, twin {mine[column][worst]:.9g}")
    sums = twin.end[twin.plant.sums:]
    ledger = result["ledger"]
    for key, value in (("heat_in_J", sums[0]), ("heat_out_air_J", sums[1]), ("heat_out_skin_J", sum(sums[2:5]))):
        tally.check(f"{name}: ledger {key} [of heat in]", abs(ledger[key] - value) / sums[0], 1e-5,
                    f"{ledger[key]:.9g}, twin {value:.9g}")


def compare_point(point, path, air, heat):
    """Relative differences of one point of `swirlpot duct --json`."""
    fans = [1.0 if point["fan_on"] else 0.0] * len(path.duct["fans"])
    s = path.network.solve(point["air_speed_m_s"], 1.0, air["ambient"], air["pressure"], fans, {}, heat)
    m = max(abs(s["m"]), abs(s["m1"]), 1e-3)
    v = abs(point["air_speed_m_s"]) + abs(point["exit_velocity_m_s"] or 0.0)
    yield "mass flow", point["mass_flow_kg_s"], s["m"], m
    yield "face velocity", point["face_velocity_m_s"], s["face"], m / path.network.face
    yield "drag", point["internal_drag_N"], s["drag"], 1e-3 + m * v + abs(s["drag"])
    if s["m"] > 1e-6 and s["t3"] and all(f > 0 for f in s["exits"]):
        yield "temperature ratio", point["temperature_ratio"], s["t3"] / s["t"][0], 1.0


def compare_ducts(tally, program, name, raw, folder):
    case = wholefile.understood(raw)
    air, path = case["air"], os.path.join(folder, "duct.json")
    gas, cp = moist_air(air["ambient"], air["pressure"], air["humidity"])
    mine = airpath.AirPath(case["car"]["ducts"][0], gas, cp)
    with open(path, "w", encoding="utf-8") as f:
        json.dump(raw, f)
    worst, count = {}, 0
    for wind, heat, speeds in ((0.0, 0.0, (0, 3, 12, 30)), (-12.0, 0.0, (0, 5, 20)), (0.0, 12e3, (8, 20, 40))):
        for fan in ("off", "on"):
            arguments = [a for v in speeds for a in ("--speed", f"{v} m/s")]
            if heat > 0:
                arguments += ["--heat", f"{heat:g} W"]
            told = json.loads(command(program, "duct", path, *arguments, "--fan", fan, "--json",
                                      "--set", f"air.wind={wind} m/s"))
            for point in told["points"]:
                count += 1
                for what, theirs, here, size in compare_point(point, mine, air, heat):
                    gap = abs(theirs - here) / size
                    note = f"{theirs:.9g}, twin {here:.9g} at {point['speed_m_s']} m/s, wind {wind}, {fan}, {heat:g} W"
                    if not gap <= worst.get(what, (0.0,))[0]:
                        worst[what] = (gap, note)
    for what, (gap, note) in worst.items():
        tally.check(f"{name}: {what}, {count} points", gap, 1e-8, note)


def attempt(compare, tally, program, name, raw, folder):
    try:
        compare(tally, program, name, raw, folder)
    except Refused as refused:
        tally.check(f"{name}: answers", float("inf"), 0.0, str(refused).strip())


def wanted(name):
    words = [w for w in os.environ.get("SP_TWIN_CASES", "").split(",") if w]
    return not words or any(w in name for w in words)


def main(arguments):
    if len(arguments) != 1:
        print(__doc__)
        return 2
    tally = Tally()
    with tempfile.TemporaryDirectory() as folder:
        for name, raw in wholecases.ducts():
            if wanted(name):
                attempt(compare_ducts, tally, arguments[0], name, raw, folder)
        for name, raw in wholecases.drives():
            if wanted(name):
                attempt(compare_drive, tally, arguments[0], name, raw, folder)
    print(f"{tally.passed} passed, {tally.failed} failed, 0 skipped")
    return 1 if tally.failed else 0


try:
    import numpy as np
    import scipy

    assert scipy
except ImportError:
    print("no scipy here: the twin does not run")
    print("0 passed, 0 failed, 1 skipped")
    sys.exit(0)
sys.dont_write_bytecode = True
sys.path.insert(0, HERE)
from restated import airpath, wholecases, wholefile, wholemarch  # noqa: E402
from restated.fluids import moist_air  # noqa: E402

if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
