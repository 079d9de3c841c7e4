"""The rotation left over by boosts in different directions: Thomas and Wigner.

Two boosts one after the other are one boost and one rotation. For boosts at an angle α with
half-rapidity tangents t₁ = tanh(φ₁/2), t₂ = tanh(φ₂/2) the rotation has

    tan(ω/2) = t₁ t₂ sin α / (1 + t₁ t₂ cos α)

(K. O'Donnell & M. Visser, Eur. J. Phys. 32 (2011) 1033, arXiv:1102.2001; formula from memory).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from tauline.spacetime.lightcone import Array
from tauline.spacetime.rapidity import gamma_minus_one


def wigner_angle(first: ArrayLike, second: ArrayLike, angle: ArrayLike) -> Array:
    """Thomas–Wigner angle, in radians, of two pure boosts one after the other.

    The second boost, of rapidity ``second``, is made in the frame of the first, at ``angle`` from
    the first one's direction. The axes of the frame so reached are turned against those of the
    frame reached from the start by a single pure boost, by this angle in the sense opposite to
    that from the first direction to the second; the result is positive for angles from 0 to π.
    """
    one = np.tanh(0.5 * np.asarray(first, dtype=float))
    other = np.tanh(0.5 * np.asarray(second, dtype=float))
    alpha = np.asarray(angle, dtype=float)
    product = one * other
    return np.asarray(2.0 * np.arctan2(product * np.sin(alpha), 1.0 + product * np.cos(alpha)))


def thomas_rotation_per_turn(rapidity: ArrayLike) -> Array:
    """Angle 2π(γ − 1), in radians, by which carried axes turn in one turn of a circular orbit.

    For axes that are never turned by their carrier (Fermi–Walker transport), as seen from the
    frame of the circle's centre; against the sense of the orbit (J. D. Jackson, *Classical
    Electrodynamics*, 3rd ed. (1999), §11.8, from memory).
    """
    return np.asarray(2.0 * np.pi * gamma_minus_one(rapidity))
