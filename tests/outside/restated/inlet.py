# SPDX-License-Identifier: GPL-3.0-or-later
"""Section 4: the inlet as built and the diffuser."""
import math


def layer_factor(inlet):
    """What the layer on the wall leaves of the recovery."""
    d, h = inlet.get("layer_thickness", 0.0), inlet.get("height")
    if d <= 0:
        return 1.0
    return 0.8 * (h / d) ** (2 / 7) if h <= d else 1 - 0.175 * d / (h - 0.125 * d)


class Recovery:
    """eta over V_1/V."""

    def __init__(self, inlet):
        self.rows = inlet.get("recovery_table")
        self.level = inlet["recovery"]
        self.factor = layer_factor(inlet)

    def __call__(self, ratio):
        eta = self.level if not self.rows else max(self._line(ratio), 0.0)
        return eta * self.factor if eta > 0 else eta

    def _line(self, x):
        rows = self.rows
        (x0, y0), (x1, y1) = rows[0], rows[1]
        if x < x0:
            return y0 + (y1 - y0) / (x1 - x0) * (x - x0) if y1 > y0 else y0
        for (x0, y0), (x1, y1) in zip(rows, rows[1:]):
            if x <= x1:
                return y0 + (y1 - y0) * (x - x0) / (x1 - x0)
        return rows[-1][1]


def _cone_angle(diffuser, a1, a2):
    if diffuser["kind"] == "one plane":
        return 2 * math.atan(0.5 * diffuser["height"] * (a2 / a1 - 1) / diffuser["length"])
    return 2 * math.atan((math.sqrt(a2 / math.pi) - math.sqrt(a1 / math.pi)) / diffuser["length"])


def _conical(alpha, ratio):
    deg, b = math.degrees(alpha), 1 / ratio ** 2
    n = max(3.28 * (0.0625 - b), 0.0)
    if deg <= 20:
        c = 8.30 * math.tan(alpha / 2) ** 1.75
    elif deg <= 60:
        c = 1.366 * math.sqrt(math.sin(2 * math.pi * (deg - 15) / 180)) - 0.170 - n * math.sqrt(0.025 * (deg - 20))
    else:
        w = 0.20 if b >= 0.0625 else 12.8 * b ** 1.5
        c = 1.205 - n - w * math.sqrt((deg - 60) / 120)
    k = c * (1 - 1 / ratio) ** 2
    return k + 0.125 * 0.0145 * (1 - b) / math.sin(alpha / 2) if deg <= 60 else k


class Diffuser:
    """Loss k_d on the inlet's head, and the unevenness that its jet makes. `core`: coefficient of the core."""

    def __init__(self, diffuser, a1, face, core):
        self.loss, self.unevenness = diffuser.get("loss", 0.0), 0.0
        kind, ratio = diffuser.get("kind"), face / a1
        if not kind:
            return
        self.loss, stalled = 0.0, False
        if ratio <= 1:
            return
        if kind == "sudden":
            self.loss, stalled = (1 - 1 / ratio) ** 2, True
        else:
            round_angle = _cone_angle(dict(diffuser, kind="conical"), a1, face)
            self.loss = _conical(round_angle, ratio)
            across = diffuser["height"] if kind == "one plane" else math.sqrt(a1 / math.pi)
            slender = min(max(diffuser["length"] / across, 1.5), 40.0)
            stalled = _cone_angle(diffuser, a1, face) > math.radians(28) * slender ** -0.45
            share = self.loss / (1 - 1 / ratio) ** 2
            if diffuser.get("core_damping") and share > 0.15:
                self.loss = (0.15 + (share - 0.15) / (1 + core)) * (1 - 1 / ratio) ** 2
        if stalled and diffuser.get("jet_share", 0.0) > 0:
            self.unevenness = jet(diffuser["jet_share"], ratio ** 2 / core)


def jet(s, head):
    """Two streams: v_j^2 = v_d^2 + head, s v_j + (1 - s) v_d = 1."""
    if 1 / s ** 2 <= head:
        v_j, v_d = 1 / s, 0.0
    else:
        # (1 - s v_j)^2/(1 - s)^2 = v_j^2 - head
        a, b, c = s * s - (1 - s) ** 2, -2 * s, 1 + head * (1 - s) ** 2
        if abs(a) < 1e-12:
            v_j = -c / b
        else:
            roots = [(-b + sign * math.sqrt(b * b - 4 * a * c)) / (2 * a) for sign in (1, -1)]
            v_j = next(r for r in roots if 1 - 1e-12 <= r <= 1 / s + 1e-12)
        v_d = (1 - s * v_j) / (1 - s)
    return min(math.sqrt(s * (v_j - 1) ** 2 + (1 - s) * (1 - v_d) ** 2), 0.99)
