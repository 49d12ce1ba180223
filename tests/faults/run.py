#!/usr/bin/env python3
# SPDX-License-Identifier: GPL-3.0-or-later
"""Plants known physics faults one at a time and asks whether the outside tests notice.

    python3 tests/faults/run.py [--at FOLDER] [NAME...]

Each fault of list.py is one edit in a copy of the checkout. The copy is built once; then for every fault:
edit, build, ask the tests of tests/outside until the first turns red, take the edit back. Names choose
faults; without names all are planted. --at keeps the copy and its build in FOLDER for the next call.

First all outside tests must be green without a fault: one that is not is told, left out, counted as failed.
SP_DRIVES is 60 unless set, for the random drives; the model written again (twin.py) goes through one case
unless SP_TWIN_CASES is set. The last line reads "N passed, N failed, N skipped". 0: every fault was caught;
1: some survived or could not be planted; 2: it could not begin.
"""
import os
import re
import shutil
import subprocess
import sys
import tempfile
import time

HERE = os.path.dirname(os.path.abspath(__file__))
ROOT = os.path.abspath(os.path.join(HERE, "..", ".."))
sys.path.insert(0, HERE)
sys.dont_write_bytecode = True
from list import FAULTS  # noqa: E402

SCRIPTS = ("three_cars", "practice_effects", "twin")  # those that ask the command alone
LIMIT = 300  # seconds for one test
SYSTEM = "/usr/bin/python3"  # the one with SciPy
PYTHON = SYSTEM if os.access(SYSTEM, os.X_OK) else sys.executable
OK, RED = "green", "red"


def say(text):
    print(text, flush=True)


def wanted_files():
    """What builds and tests need of the checkout, new files included; the fuzz corpus is not."""
    done = subprocess.run(["git", "ls-files", "-z", "--cached", "--others", "--exclude-standard"], cwd=ROOT,
                          capture_output=True, text=True, check=True)
    names = [n for n in done.stdout.split("\0") if n and not n.startswith("tests/fuzz/corpus/")]
    return [n for n in names if os.path.isfile(os.path.join(ROOT, n))]


def read(path):
    with open(path, "rb") as f:
        return f.read()


def write(path, data):
    with open(path, "wb") as f:
        f.write(data)


class Copy:
    """A copy of the checkout with a build of its own."""

    def __init__(self, folder):
        self.source, self.build = os.path.join(folder, "source"), os.path.join(folder, "build")
        self.env = dict(os.environ, LC_ALL="C", PYTHONDONTWRITEBYTECODE="1")
        self.env.setdefault("SP_DRIVES", "60")
        self.env.setdefault("SP_TWIN_CASES", "harrowmoor")
        names = wanted_files()
        self.drop_strangers(set(names))
        for name in names:
            self.refresh(name)

    def drop_strangers(self, names):
        for folder, _, files in os.walk(self.source):
            for file in files:
                path = os.path.join(folder, file)
                if os.path.relpath(path, self.source) not in names:
                    os.remove(path)

    def refresh(self, name):
        """Only what differs is written, so that only that is built again."""
        there, here = os.path.join(self.source, name), os.path.join(ROOT, name)
        data = read(here)
        if os.path.exists(there) and read(there) == data:
            return
        os.makedirs(os.path.dirname(there), exist_ok=True)
        write(there, data)
        shutil.copymode(here, there)

    def configure(self):
        flags = "-O1 -w"  # a fault may leave something unused
        return self.quiet(["cmake", "-S", self.source, "-B", self.build, "-DSWIRLPOT_TESTS=ON",
                           "-DCMAKE_C_COMPILER=gcc", "-DCMAKE_BUILD_TYPE=None", "-DCMAKE_C_FLAGS=" + flags])

    def make(self, target):
        return self.quiet(["cmake", "--build", self.build, "--target", target, "--", "-j1"])

    def quiet(self, words):
        """What it said if it failed, else nothing."""
        done = subprocess.run(words, capture_output=True, text=True, check=False, env=self.env)
        return done.stdout + done.stderr if done.returncode else ""

    def tests(self):
        """Names of all outside tests, C first: those are quick."""
        names = sorted(os.listdir(os.path.join(self.source, "tests", "outside")))
        programs = [n[:-2] for n in names if n.endswith(".c")]
        return programs + [s for s in SCRIPTS if s + ".py" in names]

    def ask(self, test):
        """("green" or "red", what turned red); a build that fails is an error of its own."""
        script = test in SCRIPTS
        broken = self.make("swirlpot" if script else "test_" + test)
        if broken:
            raise RuntimeError("it does not build:\n" + broken[-2000:])
        words = [PYTHON, os.path.join(self.source, "tests", "outside", test + ".py"),
                 os.path.join(self.build, "swirlpot")]
        if not script:
            words = [os.path.join(self.build, "tests", "test_" + test)]
        try:
            done = subprocess.run(words, capture_output=True, text=True, errors="replace", check=False,
                                  env=self.env, cwd=self.source, timeout=LIMIT)
        except subprocess.TimeoutExpired:
            return RED, f"no end in {LIMIT} s"
        return (RED, first_red(done)) if done.returncode else (OK, "")


def first_red(done):
    """The name of the first check that failed, as the test itself says it."""
    said = done.stdout + done.stderr
    cmocka = re.search(r"\[  FAILED  \] (?!\d)(\S+)", said)
    if cmocka:
        return cmocka.group(1)
    script = re.search(r"^ *FAIL(?:ED)? +([^:\n]+?)(?::|  |$)", said, re.M)
    return script.group(1) if script else f"status {done.returncode}"


def plant(copy, fault):
    """The file with the fault in it, and what stood there before. Line breaks in between do not matter."""
    path = os.path.join(copy.source, fault.file)
    before = read(path)
    pattern = r"\s*".join(re.escape(t) for t in re.findall(r"\w+|[^\w\s]", fault.old))
    text, found = re.subn(pattern, lambda _: fault.new, before.decode())
    if found != 1:
        raise RuntimeError(f"the text to change stands {found} times in {fault.file}, not once")
    write(path, text.encode())
    return path, before


def caught_by(copy, fault, tests):
    """(test, check) that turned red, or None."""
    path, before = plant(copy, fault)
    try:
        for test in [t for t in fault.first if t in tests] + [t for t in tests if t not in fault.first]:
            state, what = copy.ask(test)
            if state == RED:
                return test, what
        return None
    finally:
        write(path, before)


def green_tests(copy):
    """Those outside tests that are green without any fault, and how many are not."""
    green, others = [], 0
    for test in copy.tests():
        try:
            state, what = copy.ask(test)
        except RuntimeError as e:
            state, what = RED, str(e)
        if state == OK:
            green.append(test)
        else:
            say(f"left out, for it is red without a fault: {test}, {what}")
            others += 1
    return green, others


def go(folder, faults):
    copy = Copy(folder)
    broken = copy.configure()
    if broken:
        say("run.py: cmake refuses:\n" + broken[-2000:])
        return 2
    tests, failed_before = green_tests(copy)
    say(f"{len(tests)} outside tests are green without a fault\n")
    say(f"{'fault':24} {'file':26} {'s':>4}  turned red")
    caught = lost = 0
    for fault in faults:
        begun = time.monotonic()
        try:
            red = caught_by(copy, fault, tests)
            verdict = f"{red[0]}: {red[1]}" if red else "SURVIVED: " + fault.wrong
        except RuntimeError as e:
            red, verdict = None, "NOT PLANTED: " + str(e)
        caught, lost = caught + bool(red), lost + (not red)
        say(f"{fault.name:24} {fault.file[4:]:26} {time.monotonic() - begun:4.0f}  {verdict}")
    say(f"{caught} passed, {lost + failed_before} failed, 0 skipped")
    return 1 if lost or failed_before else 0


def main():
    words, folder = sys.argv[1:], None
    if words[:1] == ["--at"] and len(words) > 1:
        folder, words = os.path.abspath(words[1]), words[2:]
    known = {f.name: f for f in FAULTS}
    if any(w not in known for w in words):
        say(__doc__ + "\nFaults:\n" + "\n".join(f"  {f.name:24} {f.wrong}" for f in FAULTS))
        return 2
    faults = [known[w] for w in words] or list(FAULTS)
    if folder:
        return go(folder, faults)
    with tempfile.TemporaryDirectory(prefix="swirlpot-faults-") as temporary:
        return go(temporary, faults)


if __name__ == "__main__":
    sys.exit(main())
