"""What lies under the pointer."""

from __future__ import annotations

import numpy as np

from tauline.figure.drawing import Drawing, Points, Role

EVENT_REACH, LINE_REACH = 9.0, 6.0
LINES = frozenset((Role.WORLDLINE, Role.SIGNAL, Role.SIMULTANEITY))


def thing_at(drawing: Drawing, place: tuple[float, float]) -> str:
    """Id of the nearest event, else the nearest line, within reach of a place; "" for none.

    ``place`` is (x, t) in the diagram; reaches are in pixels.
    """
    at = np.asarray(place)
    events = [m for m in drawing.markers if m.role is Role.EVENT]
    if events:
        apart = np.hypot(*(np.array([m.at for m in events]) - at).T) * drawing.scale
        nearest = int(np.argmin(apart))
        if apart[nearest] <= EVENT_REACH:
            return events[nearest].source
    best, found = LINE_REACH, ""
    for stroke in drawing.strokes:
        if stroke.role in LINES:
            distance = _distance(at, stroke.points) * drawing.scale
            if distance < best:
                best, found = distance, stroke.source
    return found or _sheet_at(drawing, at)


def _distance(at: Points, points: Points) -> float:
    start, step = points[:-1], np.diff(points, axis=0)
    length = np.maximum(np.sum(step * step, axis=1), 1e-300)
    share = np.clip(np.sum((at - start) * step, axis=1) / length, 0.0, 1.0)
    return float(np.min(np.hypot(*(start + share[:, np.newaxis] * step - at).T)))


def _sheet_at(drawing: Drawing, at: Points) -> str:
    """Id of the uppermost body or light cone that a place lies in."""
    for fill in reversed(drawing.fills):
        x, y = fill.points.T
        next_x, next_y = np.roll(x, -1), np.roll(y, -1)
        crosses = (y > at[1]) != (next_y > at[1])
        with np.errstate(divide="ignore", invalid="ignore"):
            where = (next_x - x) * (at[1] - y) / (next_y - y) + x
        if np.count_nonzero(crosses & (at[0] < where)) % 2:
            return fill.source
    return ""
