"""What is on a page already, and what a box placed there would cover."""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

CLEARANCE = 1.5
"""Points kept free around a label."""

_OUTSIDE, _ON_LABEL, _ON_MARKER, _ON_LINE = 1000.0, 60.0, 25.0, 8.0


class Cover:
    """Lines, dots and labels on a page; in points, from its lower left corner.

    Parameters
    ----------
    segments : lines to keep off, ``(S, 4)``: x0, y0, x1, y1.
    marks : dots to keep off, ``(M, 3)``: x, y, radius.
    page : width and height.
    """

    def __init__(self, segments: Array, marks: Array, page: tuple[float, float]) -> None:
        self._segments = segments
        self._marks = marks
        self._page = np.asarray(page)
        self._labels = np.empty((0, 4))

    def take(self, corner: Array, size: Array, leader: Array | None = None) -> None:
        """Put a label on the page, and the line ``(2, 2)`` that leads to it."""
        half = 0.5 * size
        self._labels = np.vstack([self._labels, [*(corner + half), *(half + CLEARANCE)]])
        if leader is not None:
            self._segments = np.vstack([self._segments, leader.reshape(1, 4)])

    def cost(self, corners: Array, sizes: Array) -> Array:
        """What boxes with lower left ``corners`` ``(C, 2)`` cover; 0 for a free place.

        ``sizes`` is ``(2,)`` or ``(C, 2)``.
        """
        centres = corners + 0.5 * sizes
        halves = np.broadcast_to(0.5 * sizes + CLEARANCE, centres.shape)
        low, high = centres - halves, centres + halves
        outside = np.any((low < 0.0) | (high > self._page), axis=1)
        return np.asarray(
            _OUTSIDE * outside
            + _ON_LABEL * _touching(centres, halves, self._labels)
            + _ON_MARKER * _dotted(centres, halves, self._marks)
            + _ON_LINE * np.sum(_cut(centres, halves, _near(self._segments, low, high)), axis=1)
        )

    def crossed(self, leaders: Array) -> NDArray[np.bool_]:
        """Which leader lines ``(C, 4)`` cross a label that is there."""
        labels = self._labels
        return np.asarray(np.any(_cut(labels[:, :2], labels[:, 2:], leaders), axis=0))


def segments_of(polylines: Iterable[Array]) -> Array:
    """Join polylines ``(N, 2)`` into segments ``(S, 4)``."""
    parts = [np.hstack([line[:-1], line[1:]]) for line in polylines if len(line) > 1]
    return np.vstack(parts) if parts else np.empty((0, 4))


def _touching(centres: Array, halves: Array, labels: Array) -> Array:
    """How many labels (centre, half size) each box touches."""
    apart = np.abs(centres[:, np.newaxis] - labels[:, :2])
    return np.asarray(np.sum(np.all(apart < halves[:, np.newaxis] + labels[:, 2:], axis=2), axis=1))


def _dotted(centres: Array, halves: Array, marks: Array) -> Array:
    """How many dots (x, y, radius) each box touches."""
    beyond = np.maximum(np.abs(centres[:, np.newaxis] - marks[:, :2]) - halves[:, np.newaxis], 0.0)
    return np.asarray(np.sum(np.sum(beyond**2, axis=2) < marks[:, 2] ** 2, axis=1))


def _near(segments: Array, low: Array, high: Array) -> Array:
    """Those segments whose bounding boxes reach into that of all the boxes."""
    first, last = segments[:, :2], segments[:, 2:]
    reach = (np.maximum(first, last) >= low.min(axis=0)) & (
        np.minimum(first, last) <= high.max(axis=0)
    )
    return np.asarray(segments[reach[:, 0] & reach[:, 1]])


def _cut(centres: Array, halves: Array, segments: Array) -> NDArray[np.bool_]:
    """Which boxes ``(C,)`` which segments ``(S,)`` cut, ``(C, S)``: no axis separates them."""
    step = 0.5 * (segments[:, 2:] - segments[:, :2])
    middle = segments[:, :2] + step
    dx = centres[:, :1] - middle[:, 0]
    dy = centres[:, 1:] - middle[:, 1]
    width, height = halves[:, :1], halves[:, 1:]
    sx, sy = np.abs(step[:, 0]), np.abs(step[:, 1])
    return np.asarray(
        (np.abs(dx) < width + sx)
        & (np.abs(dy) < height + sy)
        & (np.abs(step[:, 0] * dy - step[:, 1] * dx) < width * sy + height * sx)
    )
