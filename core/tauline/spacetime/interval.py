"""The interval between two events: its square, its class, proper time and proper distance.

s² = Δu Δv − Δy² − Δz² = Δt² − Δr², positive for timelike separation (E. F. Taylor & J. A.
Wheeler, *Spacetime Physics*, 2nd ed. (1992), ch. 1 and 6; chapters from memory).
"""

from __future__ import annotations

from enum import StrEnum

import numpy as np
from numpy.typing import ArrayLike, NDArray

from tauline.spacetime.lightcone import Array, as_rows

ROUNDING = 8 * np.finfo(np.float64).eps
"""A difference of two coordinates counts as 0 below this share of their sizes."""


class IntervalClass(StrEnum):
    """How two events are separated."""

    TIMELIKE = "timelike"
    NULL = "null"
    SPACELIKE = "spacelike"
    SAME = "same"


def interval_squared(first: ArrayLike, second: ArrayLike) -> Array:
    """Return s² between events ``(rows, *N)``, in the square of their unit.

    >>> float(interval_squared([0.0, 0.0], [2.0, 24.0]))
    48.0
    """
    step = as_rows(second) - as_rows(first)
    return np.asarray(step[0] * step[1] - np.sum(step[2:] ** 2, axis=0))


def classify(first: ArrayLike, second: ArrayLike, rounding: ArrayLike = 0.0) -> IntervalClass:
    """Return the class of the interval between two events, each ``(rows,)``.

    In 1+1 it comes from the signs of Δu and Δv alone, and a boost keeps both signs: the class is
    the same in every frame. A step counts as 0 below 8 ε (|a| + |b|), with ε = 2.2e-16 the
    rounding of a double and a, b the two coordinates it is the difference of; the events are
    then null separated, or the same where both steps are 0.

    In 2+1 and 3+1, s² counts as 0 below 8 ε S Σ|Δ|, with S the largest |a| + |b| of all rows and
    the sum over the steps of all rows. A boost mixes the rows, so this bound is not the same in
    every frame: classify events by their source, not by what a fast frame sees of them.

    u = t − x of large t and x may hold a larger error than its own size tells. ``rounding`` adds
    such an error, in rows like the coordinates; it scales under a boost as they do.

    ValueError unless all coordinates are finite.
    """
    return _MEMBERS[int(_codes(as_rows(first), as_rows(second), rounding))]


def classify_many(
    first: ArrayLike, second: ArrayLike, rounding: ArrayLike = 0.0
) -> NDArray[np.object_]:
    """Return the class of each interval between events ``(rows, *N)``, as in classify."""
    codes = _codes(as_rows(first), as_rows(second), rounding)
    result = np.empty(codes.shape, dtype=object)
    for code, member in enumerate(_MEMBERS):
        result[codes == code] = member
    return result


def order(first: ArrayLike, second: ArrayLike) -> int:
    """Return +1 if the second event is later in every frame, −1 if earlier, 0 if that depends.

    Events ``(rows,)``; 0 for spacelike separation and for the same event.
    """
    kind = classify(first, second)
    if kind in (IntervalClass.SPACELIKE, IntervalClass.SAME):
        return 0
    step = as_rows(second) - as_rows(first)
    return 1 if float(step[0] + step[1]) > 0.0 else -1


def proper_time(first: ArrayLike, second: ArrayLike) -> Array:
    """Proper time √s² of a straight worldline between events ``(rows, *N)``.

    0 where they are null separated or the same, NaN where spacelike.
    """
    codes = _codes(as_rows(first), as_rows(second), 0.0)
    root = np.sqrt(np.abs(interval_squared(first, second)))
    return np.select([codes >= _NULL, codes == _TIMELIKE], [0.0, root], np.nan)


def proper_distance(first: ArrayLike, second: ArrayLike) -> Array:
    """Proper distance √(−s²), measured in the frame in which both happen at one time.

    0 where they are null separated or the same, NaN where timelike.
    """
    codes = _codes(as_rows(first), as_rows(second), 0.0)
    root = np.sqrt(np.abs(interval_squared(first, second)))
    return np.select([codes >= _NULL, codes == _SPACELIKE], [0.0, root], np.nan)


_MEMBERS = (
    IntervalClass.SPACELIKE,
    IntervalClass.TIMELIKE,
    IntervalClass.NULL,
    IntervalClass.SAME,
)
_SPACELIKE, _TIMELIKE, _NULL, _SAME = range(len(_MEMBERS))


def _codes(first: Array, second: Array, rounding: ArrayLike) -> NDArray[np.intp]:
    """Return the place in ``_MEMBERS`` of the class of each interval."""
    a, b = np.broadcast_arrays(first, second)
    step, size = b - a, np.abs(a) + np.abs(b)
    if not np.all(np.isfinite(size)):
        raise ValueError("only events with finite coordinates have an interval class")
    if a.shape[0] == 2:
        zero = np.abs(step) <= ROUNDING * size + rounding
        same, null = zero[0] & zero[1], zero[0] | zero[1]
        timelike = step[0] * np.sign(step[1]) > 0.0
    else:
        # the rows share one scale once a boost or a rotation has mixed them
        slack = np.max(ROUNDING * size + rounding, axis=0)
        same = np.all(np.abs(step) <= slack, axis=0)
        square = interval_squared(a, b)
        null = np.abs(square) <= slack * np.sum(np.abs(step), axis=0)
        timelike = square > 0.0
    return np.select([same, null, timelike], [_SAME, _NULL, _TIMELIKE], _SPACELIKE)
