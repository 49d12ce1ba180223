#!/usr/bin/env python3
"""Writes the drive cycles of this folder: make_cycles.py [FOLDER].

nedc.csv from the regulation's table of operations; harrowmoor.csv, stonemere.csv and stonemere-lap.csv from a
point-mass model of invented cars on invented roads (README.md states it). Only + - * / and square roots are used, and numbers
are rounded when written, so that the files come out the same everywhere.
SPDX-License-Identifier: GPL-3.0-or-later"""

import os
import sys
from math import sqrt

G = 9.81    # m/s2
STEP = 0.01 # s, of the integration

# ---- NEDC -------------------------------------------------------------------------------------------------

# UN Regulation No. 83, type I test: table of operations of the elementary urban cycle (part one) and of the
# extra-urban cycle (part two). Each operation: speed at its end in km/h, duration in s. A change of gear holds
# the speed it begins with, but for the one downwards from 35 to 32 km/h.
URBAN = [(0, 11), (15, 4), (15, 8), (10, 2), (0, 3), (0, 21), (15, 5), (15, 2), (32, 5), (32, 24), (10, 8),
         (0, 3), (0, 21), (15, 5), (15, 2), (35, 9), (35, 2), (50, 8), (50, 12), (35, 8), (35, 13), (32, 2),
         (10, 7), (0, 3), (0, 7)]
EXTRA_URBAN = [(0, 20), (15, 5), (15, 2), (35, 9), (35, 2), (50, 8), (50, 2), (70, 13), (70, 50), (50, 8),
               (50, 69), (70, 13), (70, 50), (100, 35), (100, 30), (120, 20), (120, 10), (80, 16), (50, 8),
               (0, 10), (0, 20)]


def nedc():
    speed = [0.0]
    for end, duration in URBAN * 4 + EXTRA_URBAN:
        begin = speed[-1]
        speed += [begin + (end - begin) * i / duration for i in range(1, duration + 1)]
    return [(str(t), "%.2f" % v) for t, v in enumerate(speed)]


# ---- invented roads ---------------------------------------------------------------------------------------

# A corner: name, radius in m, angle in degrees (left negative), straight before it in m, grade in % from the
# beginning of that straight to the end of the corner.
HARROWMOOR = [
    ("Gatehouse", 62, 55, 150, 5.5), ("Larch Bend", 95, -48, 110, 7.0), ("Quarry", 26, 118, 125, 9.0),
    ("Quarry Exit", 48, -52, 45, 9.5), ("Millrace", 120, 32, 120, 8.0), ("Foxholt", 75, -60, 70, 7.5),
    ("Beacon Hairpin", 14, 172, 115, 10.5), ("Sheepwash", 55, -58, 85, 9.0), ("Long Wall", 160, 34, 105, 6.5),
    ("Raven Step", 40, -78, 130, 8.0), ("Cairn", 58, 66, 40, 8.5), ("Thornside", 105, -42, 75, 7.5),
    ("Kiln", 34, 84, 110, 7.5), ("Summit Gate", 130, -38, 70, 5.5)]
HARROWMOOR_LAST = (95, 5.0)

STONEMERE = [
    ("Reedbank", 48, 92, 540, 0), ("Weir", 70, -55, 120, 0), ("Osier", 130, 60, 180, 0),
    ("Boathouse", 24, 135, 400, 0), ("Causeway", 95, -80, 260, 0), ("Sluice", 60, 75, 180, 0),
    ("Heron", 160, 70, 240, 0), ("Long Mere", 210, -42, 320, 0), ("Withy", 36, 105, 380, 0),
    ("Stonegate", 55, -70, 150, 0), ("Pump House", 85, 70, 200, 0)]
STONEMERE_LAST = (250, 0)


class Road:
    """Curvature and grade on a grid of 1 m, and where each corner begins."""

    def __init__(self, corners, last, laps=1):
        self.curve, self.rise, self.begins = [], [], []
        for lap in range(laps):
            for name, radius, angle, straight, grade in corners:
                arc = int(radius * abs(angle) * 3.141592653589793 / 180 + 0.5)
                self.curve += [0.0] * straight
                self.begins.append((len(self.curve), name, lap))
                self.curve += [1.0 / radius] * arc
                self.rise += [grade / 100.0] * (straight + arc)
            self.curve += [0.0] * last[0]
            self.rise += [last[1] / 100.0] * last[0]
        self.length = len(self.curve)
        self.curve = self.mean(self.curve, 12) # entry and exit curves
        self.rise = self.mean(self.rise, 30)

    @staticmethod
    def mean(values, half):
        total, sums = 0.0, [0.0]
        for v in values:
            total += v
            sums.append(total)
        n = len(values)
        return [(sums[min(n, i + half + 1)] - sums[max(0, i - half)]) / (min(n, i + half + 1) - max(0, i - half))
                for i in range(n)]


class Car:
    """mass kg, power W at rated rev/s, limit and idle rev/s, gears: m/s at rated speed, grip, driven share."""

    def __init__(self, **numbers):
        self.__dict__.update(numbers)

    def full_power(self, rev):
        x = min(rev, self.limit) / self.rated
        return self.power * (x + x * x - x * x * x)

    def motoring(self, rev):
        x = rev / self.rated
        return 0.08 * self.power * x * x

    def resistance(self, v, rise):
        return 0.5 * 1.2 * self.drag_area * v * v + self.mass * G * (self.rolling + rise)

    def rev(self, v, gear):
        return self.rated * v / self.gears[gear]


CLIMBER = Car(mass=660.0, power=190e3, rated=8500 / 60, limit=8900 / 60, idle=1800 / 60, slip=5500 / 60,
              gears=[21.0, 29.0, 38.0, 48.0, 59.0], shift=0.08, grip=1.35, driven=0.64, drag_area=0.90,
              rolling=0.018, driveline=0.92, inertia=1.05)
RACER = Car(mass=1250.0, power=350e3, rated=7000 / 60, limit=7300 / 60, idle=1000 / 60, slip=3500 / 60,
            gears=[25.0, 35.0, 46.0, 57.0, 68.0, 80.0], shift=0.10, grip=1.30, driven=0.60, drag_area=0.80,
            rolling=0.016, driveline=0.92, inertia=1.05)


def ceiling(car, road, end_speed):
    """Highest speed at each metre from which every corner ahead can still be taken (friction circle)."""
    grip = car.grip * G
    limit = [sqrt(grip / c) if c > 1e-4 else 1e3 for c in road.curve] + [end_speed]
    for i in range(road.length - 1, -1, -1):
        v = min(limit[i + 1], 120.0)
        side = min(v * v * road.curve[min(i + 1, road.length - 1)] / grip, 1.0)
        brake = 0.95 * grip * sqrt(1.0 - side * side) + car.resistance(v, road.rise[i]) / car.mass
        limit[i] = min(limit[i], sqrt(v * v + 2.0 * brake))
    return limit


def between(values, x):
    i = min(int(x), len(values) - 2)
    return values[i] + (values[i + 1] - values[i]) * (x - i)


def drive(car, road, v, end_speed):
    """Full throttle below the ceiling, along it otherwise. Samples of (s, v, crank power, rev/s) every STEP."""
    limit, s, gear, cut = ceiling(car, road, end_speed), 0.0, 0, 0.0
    while gear + 1 < len(car.gears) and car.rev(v, gear) > 0.93 * car.rated:
        gear += 1
    samples = []
    while s < road.length:
        i = int(s)
        rev = max(car.rev(v, gear), car.slip) # below that the clutch slips
        cut = max(cut - STEP, 0.0)
        if cut == 0.0 and rev >= 0.985 * car.limit and gear + 1 < len(car.gears):
            gear, cut = gear + 1, car.shift
        resistance = car.resistance(v, road.rise[i])
        grip = car.mass * G * car.grip
        side = min(v * v * road.curve[i] / (car.grip * G), 1.0)
        most = car.driven * grip * sqrt(1.0 - side * side)
        through_clutch = car.gears[gear] * rev / car.rated # m/s, of the engine's side of the clutch
        force = 0.0 if cut > 0.0 else min(most, car.full_power(rev) * car.driveline / through_clutch)
        free = v + STEP * (force - resistance) / (car.mass * car.inertia)
        bound = between(limit, min(s + v * STEP, road.length))
        if free > bound: # part throttle or brakes
            force = car.mass * car.inertia * (bound - v) / STEP + resistance
            while gear > 0 and car.rev(bound, gear - 1) < 0.90 * car.rated:
                gear -= 1
        new = min(free, bound)
        if force > 0.0:
            power = force * through_clutch / car.driveline
        else:
            power = -min(car.motoring(rev), -force * v * car.driveline)
        samples.append((s, v, power, rev))
        s += 0.5 * (v + new) * STEP
        v = new
    return samples


def slow_down(car, samples, seconds, rise):
    """From the last sample evenly to a stand, clutch out below idle."""
    s, v0, rev0 = samples[-1][0], samples[-1][1], samples[-1][3]
    n = int(seconds / STEP + 0.5)
    for k in range(1, n + 1):
        v = v0 * (n - k) / n
        rev = max(rev0 * v / v0, car.idle)
        s += v * STEP
        wanted = car.mass * car.inertia * v0 / seconds - car.resistance(v, rise)
        power = -min(car.motoring(rev), max(wanted, 0.0) * v * car.driveline) if rev > car.idle else 0.0
        samples.append((s, v, power, rev))


def second(samples, k, end):
    """Values at whole second k; power as the mean over half a second to either side, so that its integral
    is kept although gear changes fall between the rows."""
    per = int(1.0 / STEP + 0.5)
    at = min(k * per, len(samples) - 1)
    low, high = max(0, at - per // 2), min(end, at + per // 2)
    power = sum(x[2] for x in samples[low:high]) / (high - low)
    return samples[at], power


def harrowmoor():
    car, road, start = CLIMBER, Road(HARROWMOOR, HARROWMOOR_LAST), 240.0
    samples = drive(car, road, 0.0, 200.0)
    finish = samples[-1][0]
    # slow down over 15 s at least, to a whole second
    seconds = 15.0 + (-len(samples) % 100) * STEP
    slow_down(car, samples, seconds, 0.02)
    height = [start]
    for r in road.rise:
        height.append(height[-1] + r)
    rows = []
    for k in range(len(samples) // 100 + 1):
        (s, v, _, rev), power = second(samples, k, len(samples))
        mark = "Start"
        for begin, name, _ in road.begins:
            if s >= begin:
                mark = name
        if s >= finish:
            mark = "Finish"
        z = between(height, s) if s <= road.length else height[-1] + 0.02 * (s - road.length)
        rows.append(("%d" % k, "%.2f" % (3.6 * v), "%.1f" % (power / 1e3), "%.0f" % (60 * rev), "%.1f" % z, mark))
    return rows


def stonemere():
    car, road = RACER, Road(STONEMERE, STONEMERE_LAST, laps=5)
    lap = road.length // 5
    samples = [x for x in drive(car, road, 30.0, 200.0) if x[0] >= lap] # the first lap is run up
    laps = [i for i, x in enumerate(samples) if x[0] < 4 * lap]
    rows = []
    for k in range(len(laps) // 100 + 1):
        (s, v, _, rev), power = second(samples, k, len(samples))
        number = int(s / lap)
        mark = "Lap %d" % number
        for begin, name, on in road.begins:
            if on == number and s >= begin:
                mark = "Lap %d %s" % (number, name)
        rows.append(("%d" % k, "%.2f" % (3.6 * v), "%.1f" % (power / 1e3), "%.0f" % (60 * rev), mark))
    return rows


def stonemere_lap():
    """One flying lap that ends as it begins, to be driven over and over."""
    car, road = RACER, Road(STONEMERE, STONEMERE_LAST, laps=5)
    lap = road.length // 5
    samples = drive(car, road, 30.0, 200.0)
    first = next(i for i, x in enumerate(samples) if x[0] >= 2 * lap)
    beyond = next(i for i, x in enumerate(samples) if x[0] >= 3 * lap)
    rows = []
    for k in range((beyond - first) // 100 + 1):
        (s, v, _, rev), power = second(samples[first - 100:], k + 1, len(samples))
        mark = "Line"
        for begin, name, on in road.begins:
            if on == 2 and s >= begin:
                mark = name
        rows.append(("%d" % k, "%.2f" % (3.6 * v), "%.1f" % (power / 1e3), "%.0f" % (60 * rev), mark))
    return rows + [("%.2f" % ((beyond - first) * STEP),) + rows[0][1:]]


def write(folder, name, headings, rows):
    with open(os.path.join(folder, name), "w", newline="\n", encoding="ascii") as out:
        out.write(",".join(headings) + "\n")
        for row in rows:
            out.write(",".join("0" + cell[2:] if cell.startswith("-0") and not cell.strip("-0.") else cell
                               for cell in row) + "\n")


def main():
    folder = sys.argv[1] if len(sys.argv) > 1 else os.path.dirname(os.path.abspath(__file__))
    time, speed, power, rev = "time [s]", "speed [km/h]", "power [kW]", "engine_speed [rpm]"
    write(folder, "nedc.csv", [time, speed], nedc())
    write(folder, "harrowmoor.csv", [time, speed, power, rev, "altitude [m]", "mark"], harrowmoor())
    write(folder, "stonemere.csv", [time, speed, power, rev, "mark"], stonemere())
    write(folder, "stonemere-lap.csv", [time, speed, power, rev, "mark"], stonemere_lap())


if __name__ == "__main__":
    main()
