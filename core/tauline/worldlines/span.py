"""Proper times kept within the span of a line."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]

ROUNDING = 16 * np.finfo(np.float64).eps
"""Relative slack granted at the ends of a span: a few roundings of a difference."""


def within(tau: Array, slack: Array, start: float, end: float) -> Array:
    """Return ``tau`` where it lies in ``start … end``, NaN elsewhere.

    A proper time outside by no more than ``slack`` (its own rounding bound, shape of ``tau``)
    is put on the end it overshot, so that a line's last event is found on the line.
    """
    clipped = np.clip(tau, start, end)
    with np.errstate(invalid="ignore"):
        return np.where(
            np.abs(tau - clipped) <= slack, clipped, np.where(tau == clipped, tau, np.nan)
        )
