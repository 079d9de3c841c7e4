"""Constant proper acceleration along a line, from rest: φ = aτ.

Time t and distance x in the frame of the start, from where and when the motion began, at rest;
lengths as light-times, so that an acceleration is a reciprocal time. The motion is along +x for
a > 0, along −x for a < 0; before the start (τ < 0) it came the same way in. Formulas: W. Rindler,
*Relativity: Special, General, and Cosmological*, 2nd ed. (2006), §3.7–3.8; C. W. Misner, K. S.
Thorne & J. A. Wheeler, *Gravitation* (1973), §6.2 (sections from memory). No digits are lost for
small aτ; for a = 0, at rest for good, the forward functions hold too.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from tauline.spacetime.lightcone import Array
from tauline.spacetime.rapidity import from_gamma, gamma


def accelerated_rapidity(acceleration: ArrayLike, proper_time: ArrayLike) -> Array:
    """Rapidity aτ at a proper time."""
    return np.asarray(np.multiply(acceleration, proper_time, dtype=float))


def accelerated_gamma(acceleration: ArrayLike, proper_time: ArrayLike) -> Array:
    """Lorentz factor cosh aτ at a proper time."""
    return gamma(accelerated_rapidity(acceleration, proper_time))


def accelerated_time(acceleration: ArrayLike, proper_time: ArrayLike) -> Array:
    """Time t = sinh(aτ)/a at a proper time."""
    tau = np.asarray(proper_time, dtype=float)
    return np.asarray(tau * _ratio(np.sinh, accelerated_rapidity(acceleration, tau)))


def accelerated_distance(acceleration: ArrayLike, proper_time: ArrayLike) -> Array:
    """Displacement x = (cosh aτ − 1)/a = 2 sinh²(aτ/2)/a at a proper time; of the sign of a."""
    a, tau = np.asarray(acceleration, dtype=float), np.asarray(proper_time, dtype=float)
    return np.asarray(0.5 * a * (tau * _ratio(np.sinh, 0.5 * a * tau)) ** 2)


def proper_time_until(acceleration: ArrayLike, time: ArrayLike) -> Array:
    """Proper time arsinh(at)/a at a time of the frame of the start."""
    t = np.asarray(time, dtype=float)
    return np.asarray(t * _ratio(np.arcsinh, np.multiply(acceleration, t)))


def proper_time_over(acceleration: ArrayLike, distance: ArrayLike) -> Array:
    """Proper time arcosh(1 + ax)/|a| = 2 arsinh(√(ax/2))/|a| after which a displacement is reached.

    ValueError unless a is not 0 and the displacement is not against it.
    """
    a, x = _nonzero(acceleration), np.asarray(distance, dtype=float)
    if not np.all(a * x >= 0.0):
        raise ValueError("a displacement from rest has the sign of the acceleration")
    return np.asarray(2.0 * np.arcsinh(np.sqrt(0.5 * a * x)) / np.abs(a))


def proper_time_to_rapidity(acceleration: ArrayLike, rapidity: ArrayLike) -> Array:
    """Proper time φ/a at which a rapidity is reached; ValueError unless a is not 0."""
    return np.asarray(np.asarray(rapidity, dtype=float) / _nonzero(acceleration))


def proper_time_to_gamma(acceleration: ArrayLike, lorentz_factor: ArrayLike) -> Array:
    """Proper time arcosh γ/|a| after which a Lorentz factor is reached.

    ValueError unless a is not 0 and γ ≥ 1. A γ near 1 holds few digits of the motion.
    """
    return np.asarray(from_gamma(lorentz_factor) / np.abs(_nonzero(acceleration)))


def horizon_distance(acceleration: ArrayLike) -> Array:
    """Proper distance 1/|a|, against the acceleration, of the horizon of endless acceleration.

    It is the same in every momentary rest frame; nothing sent from beyond ever catches up (W.
    Rindler, ibid., §3.8, from memory). ValueError unless a is not 0.
    """
    return np.asarray(1.0 / np.abs(_nonzero(acceleration)))


def last_departure(acceleration: ArrayLike, place: ArrayLike = 0.0) -> Array:
    """Time 1/|a| + x·sign(a) before which light must leave a place x to catch up at all.

    Time and place in the frame of the start; acceleration without end. Light leaving at that very
    time never arrives. From the start's own place, 1/|a|; from the horizon's, 1/|a| against the
    acceleration, time 0. ValueError unless a is not 0.
    """
    a = _nonzero(acceleration)
    return np.asarray(1.0 / np.abs(a) + np.sign(a) * np.asarray(place, dtype=float))


def clock_rate_ratio(acceleration: ArrayLike, distance: ArrayLike) -> Array:
    """Rate 1 + aL of a clock at proper distance L on a rigid rod, in units of that of its base.

    ``acceleration`` is that of the base, L > 0 ahead and L < 0 behind for a > 0. Also the factor
    by which light from the base is reddened on its way to that clock: it arrives with the Doppler
    factor 1/(1 + aL) (W. Rindler, ibid., §3.8, from memory). ValueError where 1 + aL ≤ 0, beyond
    the horizon, where no rigid rod reaches.
    """
    ratio = 1.0 + np.multiply(acceleration, distance, dtype=float)
    if not np.all(ratio > 0.0):
        raise ValueError("a rigid rod ends before the horizon: 1 + aL must be above 0")
    return np.asarray(ratio)


def _ratio(function: np.ufunc, argument: Array) -> Array:
    """Return f(z)/z, which tends to 1 where z goes to 0."""
    z = np.asarray(argument, dtype=float)
    return np.asarray(np.divide(function(z), z, out=np.ones_like(z), where=z != 0.0))


def _nonzero(acceleration: ArrayLike) -> Array:
    a = np.asarray(acceleration, dtype=float)
    if not np.all((a != 0.0) & np.isfinite(a)):
        raise ValueError("a proper acceleration must be finite and not 0")
    return a
