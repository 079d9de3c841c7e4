"""What every kind of worldline can answer.

Proper time ``tau`` is counted from the line's own zero (for a line that has a start: from
there); readings of a carried clock are a constant offset away and belong to the resolved
scenario. Arrays of proper times have any shape; events come as ``(2, *shape)`` light-cone
coordinates (u, v) of the base frame, in the scenario's time unit with c = 1. An answer that
does not exist is NaN.
"""

from __future__ import annotations

from typing import Literal, Protocol

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]
Side = Literal["before", "after"]


class Worldline(Protocol):
    """A timelike curve of the (t, x) plane, with one proper time."""

    @property
    def start(self) -> float:
        """Proper time of the first event; −inf for an endless past."""
        ...

    @property
    def end(self) -> float:
        """Proper time of the last event; +inf for an endless future."""
        ...

    @property
    def corners(self) -> tuple[float, ...]:
        """Proper times at which the velocity jumps."""
        ...

    def event(self, tau: ArrayLike) -> Array:
        """Events at proper times; NaN outside ``start … end``."""
        ...

    def rapidity(self, tau: ArrayLike, side: Side = "after") -> Array:
        """Rapidity in the base frame; at a corner, just before or just after it."""
        ...

    def acceleration(self, tau: ArrayLike, side: Side = "after") -> Array:
        """Proper acceleration along +x."""
        ...

    def tau_at_u(self, u: ArrayLike) -> Array:
        """Proper time at which the line crosses u = t − x (a ray towards +x)."""
        ...

    def tau_at_v(self, v: ArrayLike) -> Array:
        """Proper time at which the line crosses v = t + x (a ray towards −x)."""
        ...

    def tau_on_plane(self, points: ArrayLike, rapidity: ArrayLike) -> Array:
        """Proper time at which the line crosses the simultaneity line through each point.

        ``points`` is ``(2, *shape)``; the line is that of the inertial frame of this rapidity.
        """
        ...

    def samples(self, first: float, last: float, tolerance: float, rapidity: float) -> Array:
        """Proper times whose events, joined by chords, stay within ``tolerance`` of the line.

        As drawn in the frame of this rapidity, from ``first`` to ``last`` (both finite). For
        display alone: no number is ever computed from it.
        """
        ...
