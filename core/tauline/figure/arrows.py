"""Arrowheads, the same for every painter."""

from __future__ import annotations

import numpy as np

from tauline.figure.drawing import Points

LENGTH, WIDTH = 5.5, 4.0


def arrow_head(points: Points, share: float, factor: float = 1.0) -> Points | None:
    """Return the triangle of an arrowhead at a share of a polyline's length.

    ``points`` ``(N, 2)`` are on the page, in points; the tip comes first. None where the line is
    too short to carry one.
    """
    steps = np.hypot(*np.diff(points, axis=0).T)
    reach = np.concatenate([[0.0], np.cumsum(steps)])
    length = LENGTH * factor
    if reach[-1] < 1.5 * length:
        return None
    # a head in the middle is centred there, one at the end has its tip there
    goal = min(share * reach[-1] + 0.5 * length, reach[-1])
    k = min(int(np.searchsorted(reach, goal, side="left")), len(steps)) - 1
    k = max(k, 0)
    along = (points[k + 1] - points[k]) / max(float(steps[k]), 1e-9)
    tip = points[k] + (goal - reach[k]) * along
    right = np.array([along[1], -along[0]]) * (0.5 * WIDTH * factor)
    base = tip - along * length
    return np.array([tip, base + right, base - right])
