"""A worldline of constant proper acceleration."""

from __future__ import annotations

import math

import msgspec
import numpy as np
from numpy.typing import ArrayLike, NDArray

from tauline.worldlines.protocol import Array, Side
from tauline.worldlines.span import ROUNDING, within


class ConstantAcceleration(msgspec.Struct, frozen=True, kw_only=True):
    """Hyperbolic motion from ``point`` (u, v) at τ = 0, where the rapidity is ``start_rapidity``.

    With proper acceleration a along +x (a reciprocal time, not 0) the rapidity is φ = φ₀ + aτ,
    and u = u₀ + (e^{−φ₀} − e^{−φ})/a, v = v₀ + (e^{φ} − e^{φ₀})/a (W. Rindler, *Relativity:
    Special, General, and Cosmological*, 2nd ed. (2006), §3.7, uniformly accelerated motion;
    section from memory). Written with expm1 and log1p, so that a small a loses no digits.
    """

    point: NDArray[np.float64]
    start_rapidity: float
    proper_acceleration: float
    start: float = 0.0
    end: float = math.inf

    @property
    def corners(self) -> tuple[float, ...]:
        """None: an empty tuple."""
        return ()

    def event(self, tau: ArrayLike) -> Array:
        """See :meth:`Worldline.event`; inf where the coordinate exceeds the number range."""
        own = np.asarray(tau, dtype=float)
        inside = np.where((own >= self.start) & (own <= self.end), own, np.nan)
        a, phi = self.proper_acceleration, self.start_rapidity
        with np.errstate(over="ignore"):
            du = -np.expm1(-a * inside) / a * math.exp(-phi)
            dv = np.expm1(a * inside) / a * math.exp(phi)
        return np.stack([self.point[0] + du, self.point[1] + dv])

    def rapidity(self, tau: ArrayLike, side: Side = "after") -> Array:  # noqa: ARG002
        """See :meth:`Worldline.rapidity`."""
        return self.start_rapidity + self.proper_acceleration * np.asarray(tau, dtype=float)

    def acceleration(self, tau: ArrayLike, side: Side = "after") -> Array:  # noqa: ARG002
        """See :meth:`Worldline.acceleration`."""
        return np.full(np.shape(tau), self.proper_acceleration)

    def tau_at_u(self, u: ArrayLike) -> Array:
        """See :meth:`Worldline.tau_at_u`; NaN beyond the horizon."""
        return self._from_null(np.asarray(u, dtype=float), 0)

    def tau_at_v(self, v: ArrayLike) -> Array:
        """See :meth:`Worldline.tau_at_v`; NaN beyond the horizon."""
        return self._from_null(np.asarray(v, dtype=float), 1)

    def tau_on_plane(self, points: ArrayLike, rapidity: ArrayLike) -> Array:
        """See :meth:`Worldline.tau_on_plane`.

        In that frame a Δt′ = sinh(φ₀′ + aτ) − sinh φ₀′.
        """
        at = np.asarray(points, dtype=float)
        frame = np.asarray(rapidity, dtype=float)
        grow, shrink = 0.5 * np.exp(frame), 0.5 * np.exp(-frame)
        later = (at[0] - self.point[0]) * grow + (at[1] - self.point[1]) * shrink
        size = (np.abs(at[0]) + abs(self.point[0])) * grow + (
            np.abs(at[1]) + abs(self.point[1])
        ) * shrink
        a = self.proper_acceleration
        speed = np.sinh(self.start_rapidity - frame)
        tau = _asinh_step(speed, a * later) / a
        slack = ROUNDING * (size / np.hypot(1.0, speed + a * later) + np.abs(tau))
        return within(tau, slack, self.start, self.end)

    def samples(self, first: float, last: float, tolerance: float, rapidity: float) -> Array:  # noqa: ARG002
        """See :meth:`Worldline.samples`.

        The sagitta of a chord over Δτ is at most a Δτ²/8, largest where the line is at rest in
        the frame it is drawn in.
        """
        a = abs(self.proper_acceleration)
        step = min(math.sqrt(8 * tolerance / a), 0.25 / a)
        count = min(max(math.ceil((last - first) / step), 1), 4000) + 1
        return np.linspace(first, last, count)

    def _from_null(self, at: Array, row: int) -> Array:
        sign = 1.0 if row else -1.0
        a = self.proper_acceleration
        stretch = math.exp(-sign * self.start_rapidity)
        offset = (at - self.point[row]) * stretch
        ratio = sign * a * offset
        reached = ratio > -1.0
        with np.errstate(invalid="ignore", divide="ignore"):
            tau = np.where(reached, np.log1p(np.where(reached, ratio, 0.0)) * sign / a, np.nan)
            slack = ROUNDING * (np.abs(at) + abs(self.point[row])) * stretch / (1.0 + ratio)
        return within(tau, np.abs(slack) + ROUNDING * np.abs(tau), self.start, self.end)


def _asinh_step(base: Array, step: Array) -> Array:
    """Return asinh(base + step) − asinh(base) without cancellation.

    sinh(A − B) = sinh A cosh B − cosh A sinh B; for sinh A, sinh B of one sign the difference is
    rewritten as (p² − q²)/(p √(1+q²) + q √(1+p²)).
    """
    q, p = np.broadcast_arrays(base, base + step)
    root_q, root_p = np.hypot(1.0, q), np.hypot(1.0, p)
    total = p * root_q + q * root_p
    same = (p * q > 0.0) & (total != 0.0)
    safe = np.where(same, total, 1.0)
    # p + q first divided, then multiplied: neither p² nor step·p may overflow
    return np.asarray(np.arcsinh(np.where(same, step * ((p + q) / safe), p * root_q - q * root_p)))
