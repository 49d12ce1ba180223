# SPDX-License-Identifier: GPL-3.0-or-later
"""Section 15, merging: rows closer than M become means over the hat functions of chosen nodes."""
import numpy as np

SLACK = 1e-9


def nodes(t, begins, least):
    """Numbers of the rows kept as nodes of one stretch; `begins` are rows at which a mark begins."""
    out = [0]
    for i in range(1, len(t)):
        last = i == len(t) - 1
        if last or i in begins or t[i] - t[out[-1]] >= least - SLACK or t[i + 1] - t[i] >= least - SLACK:
            out.append(i)
    k = 1
    while k < len(out) - 1:
        short = t[out[k + 1]] - t[out[k]] < least - SLACK
        if short and out[k] not in begins and t[out[k + 1]] - t[out[k - 1]] < 2 * least - SLACK:
            del out[k]
        else:
            k += 1
    return out


def merged(t, rows, begins, least):
    """Times and rows of the nodes."""
    t, rows = np.asarray(t), np.asarray(rows)
    keep = nodes(t, begins, least)
    total, weight = np.zeros((len(keep), rows.shape[1])), np.zeros(len(keep))
    for j, (a, b) in enumerate(zip(keep, keep[1:])):
        span = t[b] - t[a]
        weight[j] += span / 2
        weight[j + 1] += span / 2
        if b == a + 1:
            total[j] += span / 2 * rows[a]
            total[j + 1] += span / 2 * rows[b]
            continue
        for i in range(a, b):
            h = t[i + 1] - t[i]
            u, w = (t[i] - t[a]) / span, (t[i + 1] - t[a]) / span
            mid = (rows[i] + rows[i + 1]) / 2
            total[j + 1] += h / 6 * (u * rows[i] + 2 * (u + w) * mid + w * rows[i + 1])
            total[j] += h / 6 * ((1 - u) * rows[i] + 2 * (2 - u - w) * mid + (1 - w) * rows[i + 1])
    return t[keep].tolist(), (total / weight[:, None]).tolist()
