"""A worldline of legs, one after the other."""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence

import msgspec
import numpy as np
from numpy.typing import ArrayLike, NDArray

from tauline.worldlines.acceleration import ConstantAcceleration
from tauline.worldlines.coast import Coast
from tauline.worldlines.protocol import Array, Side

Leg = Coast | ConstantAcceleration


class Chain(msgspec.Struct, frozen=True, kw_only=True):
    """Legs joined end to end; τ = 0 where the second endpoint of no leg has passed yet.

    Each leg counts its own proper time from its first event (the first leg may reach back to
    −inf); ``offsets`` are the chain's proper times at those events. Build it with :func:`chain`.
    """

    legs: tuple[Leg, ...]
    offsets: tuple[float, ...]
    corners: tuple[float, ...]

    @property
    def start(self) -> float:
        """See :attr:`Worldline.start`."""
        return self.legs[0].start

    @property
    def end(self) -> float:
        """See :attr:`Worldline.end`."""
        return self.offsets[-1] + self.legs[-1].end

    def event(self, tau: ArrayLike) -> Array:
        """See :meth:`Worldline.event`."""
        own = np.asarray(tau, dtype=float)
        result = np.full((2, *own.shape), np.nan)
        index = self.leg_index(own)
        for k, leg in self._present(index):
            here = index == k
            # the sum of the durations may overshoot the last leg's own end by a rounding
            result[:, here] = leg.event(np.clip(own[here] - self.offsets[k], leg.start, leg.end))
        outside = (own < self.start) | (own > self.end)
        result[:, outside] = np.nan
        return result

    def rapidity(self, tau: ArrayLike, side: Side = "after") -> Array:
        """See :meth:`Worldline.rapidity`."""
        return self._by_leg(tau, side, lambda leg, own: leg.rapidity(own))

    def acceleration(self, tau: ArrayLike, side: Side = "after") -> Array:
        """See :meth:`Worldline.acceleration`."""
        return self._by_leg(tau, side, lambda leg, own: leg.acceleration(own))

    def tau_at_u(self, u: ArrayLike) -> Array:
        """See :meth:`Worldline.tau_at_u`."""
        at = np.asarray(u, dtype=float)
        joints = self._joints()[0]
        return self._found(
            np.searchsorted(joints, at, side="right"), lambda leg, here: leg.tau_at_u(at[here])
        )

    def tau_at_v(self, v: ArrayLike) -> Array:
        """See :meth:`Worldline.tau_at_v`."""
        at = np.asarray(v, dtype=float)
        joints = self._joints()[1]
        return self._found(
            np.searchsorted(joints, at, side="right"), lambda leg, here: leg.tau_at_v(at[here])
        )

    def tau_on_plane(self, points: ArrayLike, rapidity: ArrayLike) -> Array:
        """See :meth:`Worldline.tau_on_plane`."""
        at = np.asarray(points, dtype=float)
        frame = np.broadcast_to(np.asarray(rapidity, dtype=float), at.shape[1:])
        grow, shrink = np.exp(frame), np.exp(-frame)
        passed = np.zeros(at.shape[1:], dtype=np.intp)
        for u, v in self._joints().T:
            passed += (at[0] - u) * grow + (at[1] - v) * shrink >= 0.0
        return self._found(passed, lambda leg, here: leg.tau_on_plane(at[:, here], frame[here]))

    def samples(self, first: float, last: float, tolerance: float, rapidity: float) -> Array:
        """See :meth:`Worldline.samples`; every joint is among them."""
        parts = [np.array([first])]
        for offset, leg in zip(self.offsets, self.legs, strict=True):
            low, high = max(first, offset + leg.start), min(last, offset + leg.end)
            if low < high:
                part = leg.samples(low - offset, high - offset, tolerance, rapidity) + offset
                parts.append(part[1:])
        taus = np.concatenate(parts)
        taus[-1] = last
        return taus

    def leg_index(self, tau: Array, side: Side = "after") -> NDArray[np.intp]:
        """Return which leg a proper time falls on; at a joint, the one before or after it."""
        where = np.searchsorted(self.offsets[1:], tau, side="right" if side == "after" else "left")
        return np.asarray(where, dtype=np.intp)

    def _present(self, index: NDArray[np.intp]) -> list[tuple[int, Leg]]:
        """The legs that any of the answers lies on."""
        return [(int(k), self.legs[k]) for k in np.unique(index)]

    def _joints(self) -> Array:
        points = [leg.point for leg in self.legs[1:]]
        return np.stack(points, axis=1) if points else np.empty((2, 0))

    def _by_leg(self, tau: ArrayLike, side: Side, ask: Callable[[Leg, Array], Array]) -> Array:
        own = np.asarray(tau, dtype=float)
        result = np.empty(own.shape)
        index = self.leg_index(own, side)
        for k, leg in self._present(index):
            here = index == k
            result[here] = ask(leg, own[here] - self.offsets[k])
        return result

    def _found(
        self, index: NDArray[np.intp], ask: Callable[[Leg, NDArray[np.bool_]], Array]
    ) -> Array:
        result = np.full(np.shape(index), np.nan)
        for k, leg in self._present(index):
            here = np.asarray(index == k)
            result[here] = ask(leg, here) + self.offsets[k]
        return result


def chain(legs: Sequence[Leg]) -> Chain:
    """Join legs; all but the last must end.

    A joint is a corner where the rapidities on its two sides differ by more than rounding.
    """
    offsets = [0.0]
    for leg in legs[:-1]:
        if not math.isfinite(leg.end):
            raise ValueError("only the last leg may be endless")
        offsets.append(offsets[-1] + leg.end)
    corners = [
        offset
        for offset, before, after in zip(offsets[1:], legs[:-1], legs[1:], strict=True)
        if not math.isclose(
            float(before.rapidity(before.end)), after.start_rapidity, rel_tol=1e-12, abs_tol=1e-12
        )
    ]
    return Chain(legs=tuple(legs), offsets=tuple(offsets), corners=tuple(corners))


def legs_of(line: Coast | ConstantAcceleration | Chain) -> tuple[tuple[float, Leg], ...]:
    """Return the legs of a line with the proper time at which each begins to count."""
    if isinstance(line, Chain):
        return tuple(zip(line.offsets, line.legs, strict=True))
    return ((0.0, line),)
