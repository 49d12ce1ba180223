#!/usr/bin/env python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""swirlpot against its twin: the model written again from docs/model.md alone, with SciPy's integrators.

usage: twin.py PATH_TO_SWIRLPOT [--bench]

Nothing of the program is used but its command. Environment: SP_TWIN_CASES limits the drives to names that hold one of
these words, as SP_TWIN_CASES=harrowmoor,nedc.
"""
import copy
import csv
import json
import math
import os
import subprocess
import sys
import tempfile
import time

HERE = os.path.dirname(os.path.abspath(__file__))
EXAMPLES = os.path.join(HERE, "..", "..", "docs", "examples")

TEMPERATURES = ("coolant_engine_out", "coolant_radiator_in", "coolant_radiator_out", "coolant_pump_in", "metal",
                "coolant_tank", "thermostat_wax", "gauge", "boil_margin")
MIXED = ("coolant_pump_in", "boil_margin")  # these follow the thermostat at once
# drives that are compared at the program's default tolerance too
PLAIN = ("harrowmoor", "nedc")
FLOWS = ("tank_pressure", "coolant_flow", "coolant_flow_radiator", "coolant_flow_bypass", "air_mass_flow",
         "face_velocity", "exit_velocity", "fan_pressure", "drag", "heat_in", "heat_out", "heat_skin", "coolant_lost")
EVENTS = {"fan on": "fan on", "fan off": "fan off", "thermostat begins to open": "begins to open",
          "thermostat fully open": "fully open", "thermostat regulates again": "regulates again",
          "thermostat shut": "shut"}
TIGHT, LIKE_DEFAULT = 1e-9, 3e-6
# what is allowed: temperatures, those that follow the thermostat at once, flows and pressures as a share of their
# greatest, times of events, the share of the found shift in time that series may show, seconds left out about an event
ALLOWED_TIGHT = {"kelvin": 3e-3, "mixed": 3e-3, "share": 3e-4, "time": 0.01, "shift": 0.0, "unrest": 1.0,
                 "ledger": 5e-6, "coefficient": 1e-6}
ALLOWED_DEFAULT = {"kelvin": 0.05, "mixed": 0.2, "share": 2e-3, "time": 0.5, "shift": 1.5, "unrest": 5.0,
                   "ledger": 1e-3, "coefficient": 1e-4}


class Tally:
    def __init__(self):
        self.passed = self.failed = 0

    def check(self, what, difference, limit, note=""):
        good = bool(difference <= limit)
        self.passed += good
        self.failed += not good
        print(f"  {'ok  ' if good else 'FAIL'} {what:<38} {difference:10.3g}  allowed {limit:8.3g}  {note}")


def command(program, *arguments):
    done = subprocess.run([program, *arguments], capture_output=True, text=True, check=False)
    if done.returncode not in (0, 1):
        raise RuntimeError(f"{' '.join(arguments)}: status {done.returncode}\n{done.stderr}")
    return done.stdout


def run_program(program, raw, folder, tolerance):
    """Series, events and results of the case at a tolerance."""
    case = copy.deepcopy(raw)
    case.setdefault("solver", {})["tolerance"] = tolerance
    path, out = os.path.join(folder, "case.json"), os.path.join(folder, "out")
    with open(path, "w", encoding="utf-8") as f:
        json.dump(case, f)
    command(program, "run", path, "-o", out, "--exact")
    with open(os.path.join(out, "series.csv"), encoding="utf-8", newline="") as f:
        rows = list(csv.reader(f))
    heads = [h.split(" [")[0] for h in rows[0]]
    series = {h: np.array([float(r[j] or "nan") for r in rows[1:]]) for j, h in enumerate(heads)}
    with open(os.path.join(out, "events.csv"), encoding="utf-8", newline="") as f:
        events = [(float(r[0]), r[1]) for r in list(csv.reader(f))[1:]]
    with open(os.path.join(out, "result.json"), encoding="utf-8") as f:
        return series, events, json.load(f)


def largest(tally, what, mine, theirs, at, limit, shift, keep=None, relative=False):
    """The largest difference of a column, of its own greatest size where relative, less what a shift in time explains.

    A threshold crossed a moment earlier shows in all that moves fast just then.
    """
    size = max(float(np.max(np.abs(mine))), 1e-3) if relative else 1.0
    steps = np.abs(np.diff(mine) / np.diff(at))
    steep = np.maximum(np.append(steps, 0.0), np.insert(steps, 0, 0.0))
    gap = np.maximum(np.abs(mine - theirs) - shift * steep, 0.0) / size
    if keep is not None:
        gap, mine, theirs, at = gap[keep], mine[keep], theirs[keep], at[keep]
    if not len(at):
        return
    worst = int(np.argmax(gap))
    tally.check(what, float(gap[worst]), limit, f"at {at[worst]:g} s: {theirs[worst]:.8g}, twin {mine[worst]:.8g}")


def compare_series(tally, twin, theirs, events, slip, allowed):
    mine, t, shift = twin.series(), theirs["time"], allowed["shift"] * slip
    tally.check("samples", float(np.max(np.abs(mine["time"] - t))) if len(t) == len(mine["time"]) else math.inf, 1e-9)
    for name in TEMPERATURES:
        if name != "thermostat_wax" or twin.stat != "none":
            limit = allowed["mixed" if name in MIXED else "kelvin"]
            largest(tally, name + " [K]", mine[name], theirs[name], t, limit, shift)
    # flows jump with the fan, and bend with the thermostat: seconds behind such a moment are judged by its time
    calm = np.ones(len(t), bool)
    for when, what in events:
        if what in EVENTS:
            calm &= (t < when - allowed["unrest"]) | (t > when + allowed["unrest"])
    for name in FLOWS:
        largest(tally, name + " [of its greatest]", mine[name], theirs[name], t, allowed["share"], shift, calm, True)
    flowing = calm & (mine["air_mass_flow"] > 1e-6)
    largest(tally, "air_out [K]", mine["air_out"], theirs["air_out"], t, 2 * allowed["kelvin"], shift, flowing)
    for name in ("fan_speed", "thermostat_lift"):
        largest(tally, name + " [1]", mine[name], theirs[name], t, allowed["share"], shift, calm)


def compare_events(tally, twin, events, allowed):
    """The largest difference in time, which the series are then allowed."""
    mine = [e for e in twin.events if e[1] in EVENTS.values() and e[0] > 0]
    theirs = [(t, EVENTS[what]) for t, what in events if what in EVENTS and t > 0]
    same, slip = [e[1] for e in mine] == [e[1] for e in theirs], 0.0
    tally.check("order of events", 0.0 if same else math.inf, 0.0, f"{len(theirs)} of them")
    if same and mine:
        gaps = [abs(a[0] - b[0]) for a, b in zip(mine, theirs)]
        slip = max(gaps)
        worst = int(np.argmax(gaps))
        tally.check("time of events [s]", gaps[worst], allowed["time"],
                    f"{mine[worst][1]}: {theirs[worst][0]:.6f} s, twin {mine[worst][0]:.6f} s")
    return slip


def compare_results(tally, twin, result, allowed):
    plant, end, kelvin = twin.plant, twin.end, 273.15
    sums = end[plant.sums:]
    tally.check("peak of coolant [K]", abs(result["peak"]["coolant_degC"] + kelvin - twin.peak[0]), allowed["kelvin"],
                f"{result['peak']['coolant_degC']:.6f} degC, twin {twin.peak[0] - kelvin:.6f}")
    skin = float(sums[2] + sums[3] + sums[4])
    stored = float(plant.stored(end) - plant.stored(twin.start))
    whole = float(sums[0])
    ledger = result["ledger"]
    for key, value in (("heat_in_J", whole), ("heat_out_air_J", float(sums[1])), ("heat_out_skin_J", skin),
                       ("heat_stored_J", stored)):
        tally.check(f"ledger {key} [of heat in]", abs(ledger[key] - value) / whole, allowed["ledger"],
                    f"{ledger[key]:.9g}, twin {value:.9g}")
    tally.check("ledger of the twin itself", abs(whole - float(sums[1]) - skin - stored) / whole, 1e-7)
    drag, head = float(sums[6]), float(sums[7])
    if head > 0:
        mine = drag / (twin.case["car"]["body"]["frontal_area"] * head)
        tally.check("mean drag coefficient [relative]", abs(result["drag"]["mean_coefficient"] / mine - 1),
                    allowed["coefficient"], f"{result['drag']['mean_coefficient']:.9g}, twin {mine:.9g}")
    tally.check("fan on [s]", abs(result["fan"]["on_s"] - twin.fan_on_s), allowed["time"],
                f"{result['fan']['on_s']:.6f}, twin {twin.fan_on_s:.6f}")
    if sums[5] > 1:
        tally.check("fan energy [relative]", abs(result["fan"]["energy_J"] / float(sums[5]) - 1), allowed["share"])
    if twin.stat != "none":
        tally.check("thermostat fully open [s]", abs(result["time_above_band_s"] - twin.full_s), allowed["time"])
    if result.get("work") and twin.schedule.work:
        for key, value in twin.schedule.work.items():
            tally.check(f"work {key} [relative]", abs(result["work"][key + "_J"] / value - 1), 1e-9)


def compare_drive(tally, program, name, raw, folder):
    began = time.process_time()
    twin = march.Drive(casefile.understood(raw), TIGHT, METHOD).run()
    print(f"{name}: twin's own time {time.process_time() - began:.1f} s, {twin.evaluations} evaluations")
    for label, tolerance, allowed in (("tight", 1e-9, ALLOWED_TIGHT), ("default", 1e-5, ALLOWED_DEFAULT)):
        if label == "default" and name not in PLAIN:
            continue
        print(f" {name}, swirlpot {label}:")
        series, events, result = run_program(program, raw, folder, tolerance)
        slip = compare_events(tally, twin, events, allowed)
        compare_series(tally, twin, series, events, slip, allowed)
        compare_results(tally, twin, result, allowed)


def duct_gaps(point, d, air):
    """Relative differences of one point of `swirlpot duct --json`."""
    from restated.ducts import stations
    mine = stations(d, air, point)
    for key, value in mine.items():
        theirs = point
        for part in key.split("."):
            theirs = theirs[int(part) if part.isdigit() else part]
        yield key, math.inf if theirs is None else theirs, value


def compare_ducts(tally, program):
    """Speeds, heat and fan over all examples that are whole cases."""
    from restated.ducts import car_duct, flows, scale
    for name in sorted(n[:-5] for n in os.listdir(EXAMPLES) if n.endswith(".json")):
        path = os.path.join(EXAMPLES, name + ".json")
        with open(path, encoding="utf-8") as f:
            if "air" not in json.load(f):
                continue
        worst, count = (0.0, ""), 0
        raw = casefile.read(path)
        if "ducts" in raw["car"]:
            continue  # fitted out: twin_whole.py
        case = casefile.understood(raw)
        duct = car_duct(case)
        for wind in (0.0, 7.0, -15.0):
            for fan in ("off", "on"):
                if fan == "on" and not duct.fan:
                    continue
                for heat in (0.0, 4e3, 30e3):
                    speeds = [0.0, 0.5, 2.0, 5.0, 9.0, 14.0, 20.0, 30.0, 45.0, 60.0]
                    if heat > 0:
                        speeds = [v for v in speeds if flows(duct, case["air"], v + wind, fan == "on", heat)]
                    if not speeds:
                        continue
                    arguments = [a for v in speeds for a in ("--speed", f"{v} m/s")]
                    if heat > 0:
                        arguments += ["--heat", f"{heat:g} W"]
                    told = json.loads(command(program, "duct", path, *arguments, "--fan", fan, "--json",
                                              "--set", f"air.wind={wind} m/s"))
                    for point in told["points"]:
                        count += 1
                        for key, theirs, mine in duct_gaps(point, duct, case["air"]):
                            gap = abs(theirs - mine) / scale(key, point)
                            if gap > worst[0] or math.isnan(gap):
                                worst = (gap, f"{key}: {theirs:.9g}, twin {mine:.9g} at {point['speed_m_s']} m/s, wind "
                                              f"{wind} m/s, fan {fan}, {heat:g} W")
        tally.check(f"duct of {name}, {count} points [relative]", worst[0], 1e-6, worst[1])


def bench():
    raw = casefile.read(os.path.join(EXAMPLES, "harrowmoor.json"))
    exact = None
    for label, rtol in (("tight", TIGHT), ("like swirlpot's default", LIKE_DEFAULT)):
        began = time.perf_counter()
        twin = march.Drive(casefile.understood(raw), rtol, METHOD).run()
        wall = time.perf_counter() - began
        mine = twin.series()["coolant_engine_out"]
        exact = mine if exact is None else exact
        print(f"twin, harrowmoor, {label}, relative tolerance {rtol:g}: {wall:.3f} s, coolant off by at most "
              f"{float(np.max(np.abs(mine - exact))):.2g} K, mean {float(np.mean(np.abs(mine - exact))):.2g} K")


def drives():
    """Names and cases: the examples as they stand, and variants of them that ask for other parts of the model."""
    from restated.variants import variants
    wanted = [w for w in os.environ.get("SP_TWIN_CASES", "").split(",") if w]
    cycles = os.path.normpath(os.path.join(EXAMPLES, "..", "..", "drivecycles"))
    for name, raw in variants(lambda n: casefile.read(os.path.join(EXAMPLES, n + ".json")), cycles):
        if not wanted or any(w in name for w in wanted):
            yield name, raw


def main(arguments):
    if "--bench" in arguments:
        bench()
        return 0
    if len(arguments) != 1:
        print(__doc__)
        return 2
    tally = Tally()
    compare_ducts(tally, arguments[0])
    with tempfile.TemporaryDirectory() as folder:
        for name, raw in drives():
            compare_drive(tally, arguments[0], name, raw, folder)
    bench()
    print(f"{tally.passed} passed, {tally.failed} failed, 0 skipped")
    return 1 if tally.failed else 0


METHOD = "LSODA"
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
from restated import casefile, march  # noqa: E402

if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
