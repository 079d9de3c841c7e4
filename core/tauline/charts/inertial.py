"""The chart of an inertial frame."""

from __future__ import annotations

import math

import msgspec
import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[np.float64]


class InertialChart(msgspec.Struct, frozen=True):
    """Coordinates of the frame of ``rapidity`` (along +x) whose zero is the event ``origin``.

    u′ = (u − u₀) e^{φ}, v′ = (v − v₀) e^{−φ}. It covers all of spacetime.
    """

    rapidity: float
    origin: Array

    def light_cone(self, points: ArrayLike) -> Array:
        """Return (u′, v′) of base-frame events ``(2, *N)``."""
        events = np.asarray(points, dtype=float)
        start = self.origin.reshape((2,) + (1,) * (events.ndim - 1))
        stretch = np.exp([self.rapidity, -self.rapidity]).reshape(start.shape)
        return (events - start) * stretch

    def to_chart(self, points: ArrayLike) -> Array:
        """Return (x′, t′) of base-frame events ``(2, *N)``."""
        u, v = self.light_cone(points)
        return np.stack([0.5 * (v - u), 0.5 * (u + v)])

    def from_chart(self, places: ArrayLike) -> Array:
        """Return base-frame events (u, v) at (x′, t′) ``(2, *N)``."""
        x, t = np.asarray(places, dtype=float)
        shape = (1,) * np.ndim(x)
        start = self.origin.reshape((2, *shape))
        stretch = math.exp(self.rapidity)
        return np.stack([(t - x) / stretch, (t + x) * stretch]) + start
