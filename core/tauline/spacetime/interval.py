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


def classify(first: ArrayLike, second: ArrayLike) -> IntervalClass:
    """Return the class of the interval between two events, each ``(rows,)``.

    In 1+1 it comes from the signs of Δu and Δv alone, and a boost keeps both signs: the class is
    the same in every frame. A step counts as 0 within 8 units of relative rounding of the
    coordinates it is the difference of; the events are then null separated (or the same). In
    2+1 and 3+1, s² counts as 0 within the same bound of its terms.
    """
    return classify_many(first, second).item()  # type: ignore[no-any-return]


def classify_many(first: ArrayLike, second: ArrayLike) -> NDArray[np.object_]:
    """Return the class of each interval between events ``(rows, *N)``, as in classify."""
    a, b = np.broadcast_arrays(as_rows(first), as_rows(second))
    step, size = b - a, np.abs(a) + np.abs(b)
    if a.shape[0] == 2:
        zero = np.abs(step) <= ROUNDING * size
        same, null = zero[0] & zero[1], zero[0] | zero[1]
        timelike = step[0] * np.sign(step[1]) > 0.0
    else:
        square = interval_squared(a, b)
        # the parts of an event share one scale once y and z are mixed in
        scale = np.max(size, axis=0)
        same = np.all(np.abs(step) <= ROUNDING * scale, axis=0)
        reach = np.sum(np.abs(step), axis=0)
        null = np.abs(square) <= ROUNDING * scale * reach
        timelike = square > 0.0
    result = np.full(same.shape, IntervalClass.SPACELIKE, dtype=object)
    result[timelike] = IntervalClass.TIMELIKE
    result[null] = IntervalClass.NULL
    result[same] = IntervalClass.SAME
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

    NaN where the separation is spacelike.
    """
    square = interval_squared(first, second)
    return np.where(square >= 0.0, np.sqrt(np.abs(square)), np.nan)


def proper_distance(first: ArrayLike, second: ArrayLike) -> Array:
    """Proper distance √(−s²), measured in the frame in which both happen at one time.

    NaN where the separation is timelike.
    """
    square = interval_squared(first, second)
    return np.where(square <= 0.0, np.sqrt(np.abs(square)), np.nan)
