"""Appearance: what light delay makes of a moving thing, as distinct from what is measured of it.

Angles are those between the thing's velocity and the way from it to the observer, in the
observer's frame: 0 coming straight on, π going straight away. The observer is far off, so that
the angle stays the same. The rapidity φ is that of the thing, at least 0 unless said otherwise.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from tauline.spacetime.aberration import doppler_factor_seen_at
from tauline.spacetime.lightcone import Array


def apparent_transverse_speed(rapidity: ArrayLike, angle: ArrayLike) -> Array:
    """Speed β sin θ/(1 − β cos θ) across the line of sight, as seen, in units of c.

    May exceed 1: the light of later places has a shorter way to go (M. J. Rees, Nature 211 (1966)
    468; from memory). Written as sinh φ sin θ/(e^{−φ} cos²(θ/2) + e^{φ} sin²(θ/2)), which is D
    sinh φ sin θ. A negative rapidity turns the sign.
    """
    phi, theta = np.asarray(rapidity, dtype=float), np.asarray(angle, dtype=float)
    return np.asarray(np.sinh(phi) * np.sin(theta) * doppler_factor_seen_at(theta, phi))


def largest_apparent_speed(rapidity: ArrayLike) -> Array:
    """Return the largest apparent transverse speed βγ = sinh φ at any angle, in units of c."""
    return np.asarray(np.sinh(np.abs(np.asarray(rapidity, dtype=float))))


def angle_of_largest_apparent_speed(rapidity: ArrayLike) -> Array:
    """Angle in radians at which it is seen: cos θ = β, that is tan(θ/2) = e^{−φ}."""
    return np.asarray(2.0 * np.arctan(np.exp(-np.asarray(rapidity, dtype=float))))


def viewing_angles(apparent_speed: ArrayLike, rapidity: ArrayLike) -> tuple[Array, Array]:
    """Return the smaller and the larger angle, in radians, that show this apparent speed.

    Roots of β sin θ = w(1 − β cos θ). With tan(θ/2) = q e^{−φ} it reads w(1 + q²) = 2q sinh φ, so
    that the two q are reciprocal and neither cancels. The two are equal at the largest apparent
    speed. ValueError unless φ > 0 and 0 ≤ w ≤ sinh φ.
    """
    speed, phi = np.asarray(apparent_speed, dtype=float), np.asarray(rapidity, dtype=float)
    most = np.sinh(phi)
    if not np.all(phi > 0.0):
        raise ValueError("the rapidity of the thing seen must be above 0")
    if not np.all((speed >= 0.0) & (speed <= most)):
        raise ValueError("an apparent speed is at least 0 and at most βγ, the largest at any angle")
    total = most + np.sqrt((most - speed) * (most + speed))
    stretch = np.exp(phi)
    return (
        np.asarray(2.0 * np.arctan2(speed, total * stretch)),
        np.asarray(2.0 * np.arctan2(total, speed * stretch)),
    )


def least_rapidity_seen_at(apparent_speed: ArrayLike) -> Array:
    """Rapidity arsinh w of the slowest thing that can show the apparent speed w at any angle."""
    return np.asarray(np.arcsinh(np.abs(np.asarray(apparent_speed, dtype=float))))


def apparent_length(proper_length: ArrayLike, rapidity: ArrayLike, angle: ArrayLike) -> Array:
    """Length along its motion of a rod moving lengthways, between ends seen at one moment.

    ℓ = L/(γ(1 − β cos θ)) = D L, in the unit of the proper length L, with θ the angle between
    velocity and way to the observer: longer than L coming on, √((1 + β)/(1 − β)) L at the most;
    shorter going away, by the inverse; L/γ, the measured length, where θ = 90° (R. Weinstein, Am.
    J. Phys. 28 (1960) 607, from memory; follows from t − x cos θ being equal at both ends). What
    of it lies across the line of sight is ℓ sin θ. ValueError unless L ≥ 0.
    """
    length = np.asarray(proper_length, dtype=float)
    if not np.all(length >= 0.0):
        raise ValueError("a proper length is at least 0")
    return np.asarray(length * doppler_factor_seen_at(angle, rapidity))


def apparent_line_speed(rapidity: ArrayLike) -> Array:
    """Speed β/(1 − β), as seen, of a thing coming straight on, in units of c.

    Of one going away, with negative rapidity: −|β|/(1 + |β|), always slower than half that of
    light. Equal to (e^{2φ} − 1)/2 (from memory).
    """
    phi = np.asarray(rapidity, dtype=float)
    return np.asarray(0.5 * np.expm1(2.0 * phi))
