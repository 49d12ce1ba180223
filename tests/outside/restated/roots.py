# SPDX-License-Identifier: GPL-3.0-or-later
"""The one root of a falling function."""
import math

from scipy.optimize import brentq


def falling_root(f, guess, top):
    """The root of a falling function with f(0) > 0: secant from a guess, a bracket behind it."""
    x0, y0 = guess, f(guess)
    if y0 == 0:
        return x0
    low = x0 if y0 > 0 else 0.0
    high = x0 if y0 < 0 else math.inf
    x1 = guess * (1 + 1e-5)
    for _ in range(14):
        y1 = f(x1)
        if y1 == 0:
            return x1
        low, high = (max(low, x1), high) if y1 > 0 else (low, min(high, x1))
        if y1 == y0:
            break
        x0, y0, x1 = x1, y1, x1 - y1 * (x1 - x0) / (y1 - y0)
        if abs(x1 - x0) <= 1e-12 * abs(x1):
            return x1
        if not low <= x1 <= high:
            break
    while high == math.inf:
        top = max(top, low) * 4
        low, high = (top, high) if f(top) > 0 else (low, top)
    while low == 0 or high > 16 * low:
        mid = math.sqrt(low * high) if low > 0 else high / 1e6
        if mid < 1e-300:
            return 0.0
        low, high = (mid, high) if f(mid) > 0 else (low, mid)
    return brentq(f, low, high, xtol=1e-300, rtol=1e-14)
