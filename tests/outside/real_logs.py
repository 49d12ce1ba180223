#!/usr/bin/env python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""Logs of real cars and published cycles, end to end, with cars of likely values that nobody fitted.

    python3 tests/outside/real_logs.py PATH_TO_SWIRLPOT

The logs lie outside the tree, in the folder that SWIRLPOT_DATA names or in ../shared/data; without it all of
this is skipped, but for NEDC, which is at home. kit: M. Weber, "Automotive OBD-II Dataset", KIT 2023, DOI
10.35097/1130. carobd: repository eron93br/carOBD. accessport: repository stevendaniluk/MotecLogGenerator.
Cycles: UN GTR 15, UN R83, US EPA.

What is judged: every log and cycle comes to a verdict, its ledger closes, two readings of one drive (the raw
log and what another program made of it) agree, the work of the road load is what can be reckoned from the
cycle alone, and the scores of "no model at all" are what can be reckoned from the log alone. How far an unfitted
car is from the log is printed and not judged.
"""
import csv
import glob
import os
import statistics
import sys

here = os.path.dirname(os.path.abspath(__file__))
sys.path.insert(0, os.path.join(here, "tools"))
from command import ROOT, Run, Tally  # noqa: E402

CASES = os.path.join(here, "cases")
RAW = (("kit", "2017-08-07_Seat_Leon_KA_RT_Frei.csv", "kit_2017-08-07_KA_RT_Frei_1hz.csv"),
       ("kit", "2018-03-01_Seat_Leon_RT_S_Normal.csv", "kit_2018-03-01_RT_S_Normal_1hz.csv"),
       ("carobd", "carobd_live23.csv", "carobd_live23_1hz.csv"),
       ("carobd", "carobd_live31.csv", "carobd_live31_1hz.csv"))
GRAVITY, WREN = 9.80665, {"mass": 1160.0, "rolling": 0.011, "drag_area": 0.33 * 2.1}


def data_folder():
    folder = os.environ.get("SWIRLPOT_DATA") or os.path.join(ROOT, "..", "shared", "data")
    return folder if os.path.isdir(folder) else None


def columns(path, *names):
    with open(path, newline="", encoding="utf-8") as f:
        rows = list(csv.DictReader(f))
    return [[float(r[n]) for r in rows] for n in names]


def ambient_of(path):
    """No ambient in the carobd logs: the first intake temperature of a cold start (23 to 31 degC), else 28."""
    coolant, intake = columns(path, "coolant_C", "intake_air_C")
    return intake[0] if coolant[0] < 45 and 23 <= intake[0] <= 31 else 28.0


def sets_for(case, trace, resampled):
    sets = [f"drive[0].trace={trace}", f"start.coolant={columns(resampled, 'coolant_C')[0][0]:g} degC"]
    return sets + ([f"air.ambient={ambient_of(resampled):g} degC"] if case.startswith("carobd") else [])


def verdict(tally, program, case, sets, label):
    run = Run(program, case if os.path.isabs(case) else os.path.join(CASES, case), sets)
    tally.holds(f"{label}: status {run.status}, wanted 0 or 1\n{run.said}", run.status in (0, 1))
    if run.result is None:
        return None
    tally.within(f"{label}: ledger", abs(run.result["ledger"]["relative_error"]), 0, 1e-4)
    tally.within(f"{label}: coolant's peak, degC", run.result["peak"]["coolant_degC"], 20, 130)
    return run


def no_model(seconds, logged):
    """A straight line to the set point (median of the hotter half), reached when the log first stands within
    2 K of it; the set point from then on. RMS over the whole and over the warm-up; seconds to 85 degC."""
    target = statistics.median(sorted(logged)[len(logged) // 2:])
    end = next(i for i, x in enumerate(logged) if x >= target - 2)
    off = [(logged[0] + (target - logged[0]) * i / end if i < end else target) - x for i, x in enumerate(logged)]

    def rms(x):
        return (sum(y * y for y in x) / len(x)) ** 0.5 if x else float("nan")
    reached = [s for s, x in zip(seconds, logged) if x >= 85]
    return rms(off), rms(off[:end]), (reached[0] if reached else None), end


def say(label, score):
    def s(x, unit):
        return "none" if x is None else f"{x:.1f} {unit}"
    print(f"{label}: warm-up RMS {s(score['warmup_rms_K'], 'K')} "
          f"(no model at all {s(score['no_model_warmup_rms_K'], 'K')}), "
          f"whole drive {s(score['rms_K'], 'K')} ({s(score['no_model_rms_K'], 'K')}); "
          f"85 degC after {s(score['time_to_85_s'], 's')} (log {s(score['measured_time_to_85_s'], 's')})")


def close_or_both_none(tally, what, a, b, width):
    if a is None or b is None:
        tally.holds(f"{what}: {a} and {b}", a is None and b is None)
    else:
        tally.within(what, a - b, -width, width)


def scores(tally, label, run, path):
    score = run.result["measured"]
    tally.holds(f"{label}: scores against the log", bool(score))
    if not score:
        return
    say(label, score)
    seconds, logged = columns(path, "time_s", "coolant_C")
    whole, warm, reached, end = no_model(seconds, logged)
    tally.within(f"{label}: 'no model at all' over the drive against the log alone, K", score["no_model_rms_K"],
                 0.93 * whole - 0.1, 1.07 * whole + 0.1)
    if end > 60:
        tally.within(f"{label}: the same over the warm-up, K", score["no_model_warmup_rms_K"],
                     0.93 * warm - 0.1, 1.07 * warm + 0.1)
    close_or_both_none(tally, f"{label}: the log's time to 85 degC, s", score["measured_time_to_85_s"], reached, 15)


def raw_logs(tally, program, data):
    """The raw log through a mapping, and the same drive as another program resampled it."""
    for logger, raw, resampled in RAW:
        raw_case, case, raw = logger + "_raw.json", logger + "_1hz.json", "raw/" + raw
        path = os.path.join(data, resampled)
        a = verdict(tally, program, raw_case, sets_for(raw_case, os.path.join(data, raw), path), raw)
        b = verdict(tally, program, case, sets_for(case, path, path), resampled)
        if not a or not b:
            continue
        tally.holds(f"{raw}: says what it repaired", "blanks" in a.said and "doubles" in a.said)
        scores(tally, raw, a, path)
        for key, width in (("duration_s", 2.0), ("distance_m", 0.01 * b.result["distance_m"])):
            tally.within(f"{raw}: {key} less that of the resampled", a.result[key] - b.result[key], -width, width)
        one, two = a.result["measured"], b.result["measured"]
        tally.within(f"{raw}: RMS less that of the resampled, K", one["rms_K"] - two["rms_K"], -1, 1)
        tally.within(f"{raw}: peak less that of the resampled, K",
                     a.result["peak"]["coolant_degC"] - b.result["peak"]["coolant_degC"], -2.5, 2.5)


def resampled_logs(tally, program, data):
    for path in sorted(glob.glob(os.path.join(data, "*_1hz.csv"))):
        name = os.path.basename(path)
        if name.startswith("cycle"):
            continue
        case = "kit_1hz.json" if name.startswith("kit") else "carobd_1hz.json"
        sets = sets_for(case, path, path)
        if name.startswith("sti"):
            sets += ["car=turbo_saloon.json", "air.ambient=25 degC"]
        run = verdict(tally, program, case, sets, name)
        if run:
            scores(tally, name, run, path)


def reckoned(path):
    """Rolling and drag work of the example road car from the cycle alone; speed linear between rows, no wind.
    v^3 of a straight line from v0 to v1 has the mean (v0 + v1)(v0^2 + v1^2)/4."""
    seconds, speed = columns(path, "time_s", "speed_kmh")
    v = [x / 3.6 for x in speed]
    steps = [(t1 - t0, v0, v1) for t0, t1, v0, v1 in zip(seconds, seconds[1:], v, v[1:])]
    distance = sum(h * (v0 + v1) / 2 for h, v0, v1 in steps)
    cube = sum(h * (v0 + v1) * (v0 * v0 + v1 * v1) / 4 for h, v0, v1 in steps)
    return distance, WREN["mass"] * GRAVITY * WREN["rolling"] * distance, 0.5 * WREN["drag_area"] * cube


def cycle(tally, program, case, sets, path, label):
    run = verdict(tally, program, case, sets, label)
    if not run:
        return
    work, (distance, rolling, drag) = run.result["work"], reckoned(path)
    density = (100129 - 0.378 * 0.4 * 3169) / (287.05 * 298.15)  # standard pressure at 100 m; 25 degC, 40 % humid
    tally.near(f"{label}: distance, m", run.result["distance_m"], distance, 2e-4)
    tally.near(f"{label}: rolling work, J", work["rolling_J"], rolling, 2e-4)
    tally.near(f"{label}: drag work, J", work["drag_J"], density * drag, 2e-4)
    parts = sum(work[k] for k in ("kinetic_J", "potential_J", "drag_J", "rolling_J", "brakes_J"))
    tally.near(f"{label}: work at the wheels against its parts, J", work["wheel_J"], parts, 1e-3)
    tally.within(f"{label}: kinetic energy gained, J", work["kinetic_J"], -1, 1)
    # A small petrol car takes 5 to 9 l/100 km of 32 MJ/l, of which a fifth to a third heats the coolant.
    per_km = run.result["ledger"]["heat_in_J"] / run.result["distance_m"] / 1e3
    tally.within(f"{label}: heat to the coolant, MJ/km", per_km, 0.05 * 32 / 5, 0.09 * 32 / 3)
    print(f"{label}: peak {run.result['peak']['coolant_degC']:.1f} degC at {run.result['peak']['time_s']:.0f} s, "
          f"heat {per_km:.2f} MJ/km, work at the wheels {work['wheel_J'] / 1e6:.2f} MJ")
    return run


def nedc_at_home(tally, program):
    """docs/examples/nedc.json: regulated to the end, between the thermostat's opening and what the fan allows."""
    trace = os.path.join(ROOT, "drivecycles", "nedc.csv")
    run = verdict(tally, program, os.path.join(ROOT, "docs", "examples", "nedc.json"), [], "nedc.json")
    if not run:
        return
    tally.holds("nedc.json: survives", run.status == 0)
    tally.within("nedc.json: peak between opening and fully open, degC", run.result["peak"]["coolant_degC"], 87, 99)
    tally.within("nedc.json: fan's time, s", run.result["fan"]["on_s"], 0, 0)
    with open(trace, newline="", encoding="utf-8") as f:
        v = [float(r[1]) / 3.6 for r in list(csv.reader(f))[1:]]
    distance = sum((a + b) / 2 for a, b in zip(v, v[1:]))
    tally.near("nedc.json: distance, m", run.result["distance_m"], distance, 1e-4)
    tally.near("nedc.json: rolling work, J", run.result["work"]["rolling_J"],
               WREN["mass"] * GRAVITY * WREN["rolling"] * distance, 1e-3)


def main():
    if len(sys.argv) != 2:
        print(__doc__)
        return 2
    tally, program, data = Tally(), sys.argv[1], data_folder()
    nedc_at_home(tally, program)
    if not data:
        tally.skip("no folder of logs (SWIRLPOT_DATA or ../shared/data)", 3)
        return tally.close()
    for path in sorted(glob.glob(os.path.join(data, "cycle_*_1hz.csv"))):
        cycle(tally, program, "cycle.json", [f"drive[0].trace={path}"], path, os.path.basename(path))
    raw_logs(tally, program, data)
    resampled_logs(tally, program, data)
    return tally.close()


if __name__ == "__main__":
    sys.exit(main())
