"""Where a label may stand: lower left corners of its box, in points on the page, the best first."""

from __future__ import annotations

from itertools import product

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
Size = tuple[float, float]

BESIDE = (0, 0, 1, 1)
"""Sides of the candidates of :func:`beside`."""


def around_point(at: Array, size: Size, gap: float) -> Array:
    """Candidate corners ``(C, 2)`` around a point: close by first, then farther out."""
    width, height = size
    corners = []
    for distance in (gap, gap + 7.0, gap + 16.0, gap + 28.0, gap + 44.0, gap + 64.0, gap + 88.0):
        slant = 0.75 * distance
        corners += [
            (slant, slant),
            (slant, -slant - height),
            (distance, -0.5 * height),
            (-slant - width, slant),
            (-slant - width, -slant - height),
            (-distance - width, -0.5 * height),
            (-0.5 * width, distance),
            (-0.5 * width, -distance - height),
            (-0.2 * width, distance),
            (-0.8 * width, distance),
            (-0.2 * width, -distance - height),
            (-0.8 * width, -distance - height),
        ]
    return np.asarray(at + np.array(corners))


def beside(at: Array, aside: Array, size: Size, gap: float) -> Array:
    """Candidate corners ``(4, 2)`` beside an axis: on one side, near and far, then on the other.

    ``aside`` is the unit vector towards the first side.
    """
    half = 0.5 * np.asarray(size)
    # far enough along that direction for the box to clear the point
    reach = float(np.abs(aside) @ half) + np.array([gap, gap + 5.0])
    return np.asarray(at - half + np.outer(np.concatenate([reach, -reach]), aside))


def along_line(points: Array, size: Size, gap: float) -> tuple[Array, Array]:
    """Candidate corners, and their anchors, beside a polyline ``(N, 2)``: near its end first."""
    steps = np.hypot(*np.diff(points, axis=0).T)
    reach = np.concatenate([[0.0], np.cumsum(steps)])
    half = 0.5 * np.asarray(size)
    corners, anchors = [], []
    for distance, share in product((gap, gap + 8.0), np.arange(0.95, 0.0, -0.05)):
        goal = share * reach[-1]
        k = min(int(np.searchsorted(reach, goal, side="right")) - 1, len(steps) - 1)
        along = (points[k + 1] - points[k]) / max(steps[k], 1e-9)
        at = points[k] + (goal - reach[k]) * along
        right = np.array([along[1], -along[0]])
        for side in (right, -right):
            corners.append(at + side * (distance + float(np.abs(side) @ half)) - half)
            anchors.append(at)
    return np.array(corners), np.array(anchors)
