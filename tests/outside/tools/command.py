# SPDX-License-Identifier: GPL-3.0-or-later
"""What the Python checks of the command share: keeping count, and running a case."""
import csv
import json
import os
import subprocess
import tempfile

ROOT = os.path.abspath(os.path.join(os.path.dirname(__file__), "..", "..", ".."))


class Tally:
    """Counts checks and prints those that fail; `told` also prints those that pass."""

    def __init__(self, told=False):
        self.passed = self.failed = self.skipped = 0
        self.told = told

    def within(self, what, got, low, high):
        got = float("nan") if got is None else got
        good = low <= got <= high  # false for NaN
        self.passed += good
        self.failed += not good
        if self.told or not good:
            print(f"{'ok    ' if good else 'FAILED'} {what}: {got:.6g}, expected {low:.6g} to {high:.6g}")

    def near(self, what, got, want, share):
        width = share * abs(want)
        self.within(what, got, want - width, want + width)

    def holds(self, what, good):
        self.passed += bool(good)
        self.failed += not good
        if self.told or not good:
            print(f"{'ok    ' if good else 'FAILED'} {what}")

    def skip(self, why, count=1):
        print(f"skipped: {why}")
        self.skipped += count

    def close(self):
        print(f"{self.passed} passed, {self.failed} failed, {self.skipped} skipped")
        return 1 if self.failed else 0


class Run:
    """One `swirlpot run`: status, the JSON document, and the series as columns of numbers."""

    def __init__(self, program, case, sets=(), limit=300):
        words = [program, "run", case if os.path.isabs(case) else os.path.join(ROOT, case), "--json"]
        for s in sets:
            words += ["--set", s]
        with tempfile.TemporaryDirectory() as folder:
            done = subprocess.run(words + ["-o", folder], capture_output=True, text=True, check=False, timeout=limit)
            self.status, self.said = done.returncode, done.stderr
            self.result = json.loads(done.stdout) if done.returncode in (0, 1) else None
            self.series = {}
            if self.result:
                with open(os.path.join(folder, "series.csv"), newline="", encoding="utf-8") as f:
                    rows = list(csv.reader(f))
                for i, heading in enumerate(rows[0]):
                    self.series[heading.split(" [")[0]] = [float(r[i]) if r[i] else float("nan") for r in rows[1:]]

    def last(self, name):
        return self.series[name][-1]


def require(program, case, sets=()):
    """A run that must come to its end."""
    run = Run(program, case, sets)
    if run.result is None:
        print(f"status {run.status} from {case} with {list(sets)}:\n{run.said}\n0 passed, 1 failed, 0 skipped")
        raise SystemExit(1)
    return run
