"""Two motions in one frame, motion told by its own clock, and motion in a circle."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from tauline.spacetime.lightcone import Array


def closing_speed(behind: ArrayLike, ahead: ArrayLike) -> Array:
    """Rate β₁ − β₂ at which the gap between two things shrinks, in the frame of both rapidities.

    ``behind`` is the one at smaller x; the rapidities are along +x, in one frame, which is also
    that of the gap and of the time. Up to 2 in units of c: it is the velocity of neither as seen
    from the other, which is tanh(φ₁ − φ₂), see :func:`compose_collinear`. Negative where the gap
    grows. For two that go one way it is written as sinh(φ₁ − φ₂)/(cosh φ₁ cosh φ₂), so that fast
    things one behind the other lose no digits (E. F. Taylor & J. A. Wheeler, *Spacetime Physics*,
    2nd ed. (1992), ch. 3; chapter from memory). ValueError unless |φ| ≤ 350.
    """
    one, two = np.asarray(behind, dtype=float), np.asarray(ahead, dtype=float)
    if not (np.all(np.abs(one) <= 350.0) and np.all(np.abs(two) <= 350.0)):
        raise ValueError("rapidities here must lie between −350 and 350")
    alike = np.sinh(one - two) / np.cosh(one) / np.cosh(two)
    return np.asarray(np.where(one * two > 0.0, alike, np.tanh(one) - np.tanh(two)))


def proper_velocity(rapidity: ArrayLike) -> Array:
    """Way in the frame per proper time, dx/dτ = βγ = sinh φ, in units of c and without a limit."""
    return np.asarray(np.sinh(np.asarray(rapidity, dtype=float)))


def from_proper_velocity(velocity: ArrayLike) -> Array:
    """Rapidity arsinh w of a proper velocity in units of c."""
    return np.asarray(np.arcsinh(np.asarray(velocity, dtype=float)))


def circular_acceleration(rapidity: ArrayLike, radius: ArrayLike) -> Array:
    """Proper acceleration γ²β²/r = sinh²φ/r, towards the centre, on a circle of radius r.

    The radius, as a light-time, and the steady speed in the frame of the centre; the result in the
    reciprocal of the radius's unit (W. Rindler, *Relativity*, 2nd ed. (2006), §3.7; section from
    memory). ValueError unless r > 0.
    """
    return np.asarray(np.sinh(np.asarray(rapidity, dtype=float)) ** 2 / _positive(radius))


def circular_period(rapidity: ArrayLike, radius: ArrayLike) -> Array:
    """Proper time 2πr/(βγ) of one turn of a circle, in the unit of the radius.

    Radius and rapidity in the frame of the centre, whose own time of a turn is γ times as long.
    The sense of the turn is that of the rapidity's sign and does not matter here. ValueError
    unless r > 0 and the rapidity is not 0.
    """
    phi = np.asarray(rapidity, dtype=float)
    if not np.all(phi != 0.0):
        raise ValueError("what rests makes no turn: the rapidity must not be 0")
    return np.asarray(2.0 * np.pi * _positive(radius) / np.sinh(np.abs(phi)))


def _positive(radius: ArrayLike) -> Array:
    value = np.asarray(radius, dtype=float)
    if not np.all(value > 0.0):
        raise ValueError("a radius must be above 0")
    return value
