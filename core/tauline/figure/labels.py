"""Placing labels where they cover nothing: deterministic, and steady while a view is dragged.

Works in points on the page (x right, y up, from the window's lower left corner). Every label
brings candidate boxes in order of preference; it takes the first that is free, else the one that
covers least.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence

import msgspec
import numpy as np
from numpy.typing import NDArray

from tauline.figure.drawing import Role, Run

Array = NDArray[np.float64]
Key = tuple[str, str, str]
"""Source, role and text of a label: what it is recognised by from one placement to the next."""

CLEARANCE = 1.5
"""Points kept free around a label."""
LEADER_FROM = 20.0
"""A label farther than this from its point gets a leader line."""

_OUTSIDE, _ON_LABEL, _ON_MARKER, _ON_LINE = 1000.0, 60.0, 25.0, 8.0


class Request(msgspec.Struct, frozen=True, kw_only=True):
    """A label to be placed.

    ``boxes`` are the lower left corners ``(C, 2)`` of its candidate places, the best first;
    ``anchors`` the points they belong to, one for all ``(2,)`` or one each ``(C, 2)``.
    ``optional`` ones are left out where no place is free.
    """

    source: str
    role: Role
    hue: int
    runs: tuple[Run, ...]
    size: tuple[float, float]
    boxes: Array
    anchors: Array
    optional: bool = False

    @property
    def key(self) -> Key:
        """What it is recognised by."""
        return self.source, str(self.role), "".join(run.text for run in self.runs)


class Placed(msgspec.Struct, frozen=True, kw_only=True):
    """Where a label has gone: its lower left corner, its anchor, which candidate it took."""

    request: Request
    corner: Array
    anchor: Array
    choice: int
    cost: float


def place_labels(
    requests: Sequence[Request],
    segments: Array,
    marks: Array,
    page: tuple[float, float],
    previous: Mapping[Key, int] | None = None,
) -> list[Placed]:
    """Place labels in the order given, the most important first.

    ``segments`` ``(S, 4)`` are lines to keep off (x0, y0, x1, y1), ``marks`` ``(M, 3)`` dots (x,
    y, radius), ``page`` the width and height to stay within. ``previous`` holds the choices of
    the placement before: a label keeps its place while that is free.
    """
    kept = previous or {}
    taken: list[tuple[float, float, float, float]] = []
    placed: list[Placed] = []
    for request in requests:
        lows = request.boxes - CLEARANCE
        highs = request.boxes + np.asarray(request.size) + CLEARANCE
        cost = _cost(lows, highs, segments, marks, np.array(taken).reshape(-1, 4), page)
        choice = kept.get(request.key, -1)
        if not (0 <= choice < len(cost) and cost[choice] == 0.0):
            choice = int(np.argmin(cost))
        if request.optional and cost[choice] > 0.0:
            continue
        anchor = request.anchors if request.anchors.ndim == 1 else request.anchors[choice]
        taken.append((*lows[choice], *highs[choice]))
        placed.append(
            Placed(
                request=request,
                corner=request.boxes[choice],
                anchor=anchor,
                choice=choice,
                cost=float(cost[choice]),
            )
        )
    return placed


def around_point(at: Array, size: tuple[float, float], gap: float) -> Array:
    """Candidate corners around a point: close by first, then farther out, in eight directions."""
    width, height = size
    corners = []
    for distance in (gap, gap + 7.0, gap + 16.0, gap + 28.0, gap + 44.0, gap + 64.0):
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
        ]
    return np.asarray(at + np.array(corners))


def beside(at: Array, aside: Array, size: tuple[float, float], gap: float) -> Array:
    """Candidate corners beside an axis: on one side at two distances, then on the other."""
    half = 0.5 * np.asarray(size)
    corners = []
    for side, distance in ((aside, gap), (aside, gap + 5.0), (-aside, gap)):
        # far enough along that direction for the box to clear the point
        reach = distance + float(np.abs(side) @ half)
        corners.append(at + side * reach - half)
    return np.array(corners)


def along_line(points: Array, size: tuple[float, float], gap: float) -> tuple[Array, Array]:
    """Candidate corners, and their anchors, beside a polyline: near its end first."""
    steps = np.hypot(*np.diff(points, axis=0).T)
    reach = np.concatenate([[0.0], np.cumsum(steps)])
    half = 0.5 * np.asarray(size)
    corners, anchors = [], []
    for share in (0.95, 0.88, 0.8, 0.7, 0.6, 0.5, 0.4, 0.3, 0.2, 0.1, 0.05):
        goal = share * reach[-1]
        k = min(int(np.searchsorted(reach, goal, side="right")) - 1, len(steps) - 1)
        along = (points[k + 1] - points[k]) / max(steps[k], 1e-9)
        at = points[k] + (goal - reach[k]) * along
        right = np.array([along[1], -along[0]])
        for side in (right, -right):
            corners.append(at + side * (gap + float(np.abs(side) @ half)) - half)
            anchors.append(at)
    return np.array(corners), np.array(anchors)


def _cost(
    lows: Array,
    highs: Array,
    segments: Array,
    marks: Array,
    taken: Array,
    page: tuple[float, float],
) -> Array:
    """What each candidate box covers; 0 for a free place."""
    cost = np.zeros(len(lows))
    cost += _OUTSIDE * np.any((lows < 0.0) | (highs > np.asarray(page)), axis=1)
    if len(taken):
        apart = (
            (taken[:, 0] >= highs[:, :1])
            | (taken[:, 2] <= lows[:, :1])
            | (taken[:, 1] >= highs[:, 1:])
            | (taken[:, 3] <= lows[:, 1:])
        )
        cost += _ON_LABEL * np.sum(~apart, axis=1)
    if len(marks):
        nearest = np.clip(marks[np.newaxis, :, :2], lows[:, np.newaxis], highs[:, np.newaxis])
        distance = np.hypot(*np.moveaxis(nearest - marks[np.newaxis, :, :2], -1, 0))
        cost += _ON_MARKER * np.sum(distance < marks[:, 2], axis=1)
    if len(segments):
        near = _near(segments, lows.min(axis=0), highs.max(axis=0))
        cost += _ON_LINE * np.sum(_hits(lows, highs, segments[near]), axis=1)
    return cost


def _near(segments: Array, low: Array, high: Array) -> NDArray[np.bool_]:
    x = np.sort(segments[:, 0::2], axis=1)
    y = np.sort(segments[:, 1::2], axis=1)
    return np.asarray(
        (x[:, 1] >= low[0]) & (x[:, 0] <= high[0]) & (y[:, 1] >= low[1]) & (y[:, 0] <= high[1])
    )


def _hits(lows: Array, highs: Array, segments: Array) -> NDArray[np.bool_]:
    """Which boxes ``(C,)`` which segments ``(S,)`` cut (Liang & Barsky 1984), ``(C, S)``."""
    start, step = segments[:, :2], segments[:, 2:] - segments[:, :2]
    enter = np.zeros((len(lows), len(segments)))
    leave = np.ones_like(enter)
    with np.errstate(divide="ignore", invalid="ignore"):
        for axis in (0, 1):
            one = (lows[:, axis, np.newaxis] - start[:, axis]) / step[:, axis]
            other = (highs[:, axis, np.newaxis] - start[:, axis]) / step[:, axis]
            flat = step[:, axis] == 0.0
            inside = (start[:, axis] > lows[:, axis, np.newaxis]) & (
                start[:, axis] < highs[:, axis, np.newaxis]
            )
            near = np.where(flat, np.where(inside, -np.inf, np.inf), np.minimum(one, other))
            far = np.where(flat, np.where(inside, np.inf, -np.inf), np.maximum(one, other))
            enter, leave = np.maximum(enter, near), np.minimum(leave, far)
    return np.asarray(enter < leave)


def segments_of(polylines: Iterable[Array]) -> Array:
    """Join polylines ``(N, 2)`` into segments ``(S, 4)``."""
    parts = [np.hstack([line[:-1], line[1:]]) for line in polylines if len(line) > 1]
    return np.vstack(parts) if parts else np.empty((0, 4))
