"""A worldline without acceleration."""

from __future__ import annotations

import math

import msgspec
import numpy as np
from numpy.typing import ArrayLike, NDArray

from tauline.worldlines.protocol import Array, Side
from tauline.worldlines.span import ROUNDING, within


class Coast(msgspec.Struct, frozen=True, kw_only=True):
    """Inertial motion at rapidity ``start_rapidity``, through ``point`` (u, v) at τ = 0.

    u = u₀ + τ e^{−φ}, v = v₀ + τ e^{φ} (W. Rindler, *Relativity: Special, General, and
    Cosmological*, 2nd ed. (2006), §5.5, four-velocity γ(1, β); section from memory).
    """

    point: NDArray[np.float64]
    start_rapidity: float
    start: float = 0.0
    end: float = math.inf

    @property
    def corners(self) -> tuple[float, ...]:
        """None: an empty tuple."""
        return ()

    @property
    def proper_acceleration(self) -> float:
        """Zero."""
        return 0.0

    def event(self, tau: ArrayLike) -> Array:
        """See :meth:`Worldline.event`."""
        own = np.asarray(tau, dtype=float)
        inside = np.where((own >= self.start) & (own <= self.end), own, np.nan)
        rates = np.exp([-self.start_rapidity, self.start_rapidity])
        return self.point.reshape((2,) + (1,) * own.ndim) + np.multiply.outer(rates, inside)

    def rapidity(self, tau: ArrayLike, side: Side = "after") -> Array:  # noqa: ARG002
        """See :meth:`Worldline.rapidity`."""
        return np.full(np.shape(tau), self.start_rapidity)

    def acceleration(self, tau: ArrayLike, side: Side = "after") -> Array:  # noqa: ARG002
        """See :meth:`Worldline.acceleration`."""
        return np.zeros(np.shape(tau))

    def tau_at_u(self, u: ArrayLike) -> Array:
        """See :meth:`Worldline.tau_at_u`."""
        return self._from_null(np.asarray(u, dtype=float), self.point[0], self.start_rapidity)

    def tau_at_v(self, v: ArrayLike) -> Array:
        """See :meth:`Worldline.tau_at_v`."""
        return self._from_null(np.asarray(v, dtype=float), self.point[1], -self.start_rapidity)

    def tau_on_plane(self, points: ArrayLike, rapidity: ArrayLike) -> Array:
        """See :meth:`Worldline.tau_on_plane`."""
        at = np.asarray(points, dtype=float)
        frame = np.asarray(rapidity, dtype=float)
        later = 0.5 * (
            (at[0] - self.point[0]) * np.exp(frame) + (at[1] - self.point[1]) * np.exp(-frame)
        )
        size = 0.5 * (
            (np.abs(at[0]) + abs(self.point[0])) * np.exp(frame)
            + (np.abs(at[1]) + abs(self.point[1])) * np.exp(-frame)
        )
        gamma = np.cosh(self.start_rapidity - frame)
        return within(later / gamma, ROUNDING * size / gamma, self.start, self.end)

    def samples(self, first: float, last: float, tolerance: float, rapidity: float) -> Array:  # noqa: ARG002
        """See :meth:`Worldline.samples`: a straight line needs its ends alone."""
        return np.array([first, last])

    def _from_null(self, at: Array, origin: float, rapidity: float) -> Array:
        stretch = math.exp(rapidity)
        slack = ROUNDING * (np.abs(at) + abs(origin)) * stretch
        return within((at - origin) * stretch, slack, self.start, self.end)
