"""The rotation left over by boosts in different directions: Thomas and Wigner.

Two boosts one after the other are one boost and one rotation. For boosts at an angle α with
half-rapidity tangents t₁ = tanh(φ₁/2), t₂ = tanh(φ₂/2) the rotation has

    tan(ω/2) = t₁ t₂ sin α / (1 + t₁ t₂ cos α)

(K. O'Donnell & M. Visser, Eur. J. Phys. 32 (2011) 1033, arXiv:1102.2001; formula from memory).
"""

from __future__ import annotations

from typing import NamedTuple

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


class BoostAndRotation(NamedTuple):
    """A pure boost, then a rotation of the axes of space; both passive.

    ``rapidity`` ≥ 0 and the unit vector ``direction`` ``(n,)``, on the first axes, are those of
    the boost; ``rotation`` ``(n, n)`` then acts on components, x′ = R x, as :func:`rotate` has it.
    It turns components by ``angle``, in radians from 0 to π, right-handed about ``axis``, a unit
    vector of 3 components (0, 0, ±1 in the plane; all 0 where nothing is turned).
    """

    rapidity: float
    direction: Array
    rotation: Array
    angle: float
    axis: Array


def successive_boosts(
    first: float, first_direction: ArrayLike, second: float, second_direction: ArrayLike
) -> BoostAndRotation:
    """Decompose two pure boosts, the first made first, into one pure boost and one rotation.

    Directions are unit vectors of 2 or 3 components: the first on the axes one starts from, the
    second on those of the frame then reached. Seeing events by boost_along with the first and then
    the second is the same as seeing them by boost_along with the result, then rotate. Components
    turn from the first direction towards the second (so do not the axes: they turn back, as
    :func:`wigner_angle` says); the opposite order has the same rapidity and the opposite rotation.

    With c = cosh(φ/2), s = sinh(φ/2): tan(ω/2) = s₁s₂ sin α/(c₁c₂ + s₁s₂ cos α), and the vector
    s₁c₂ n₁ + c₁s₂ n₂ has length sinh(φ/2) and stands ω/2 from the boost's direction towards n₂
    (product of two exponentials of Pauli matrices; from memory). ValueError unless the directions
    are unit vectors within 1e-12; a boost by nothing is given the first direction.
    """
    one = _in_space(first_direction)
    two = _in_space(second_direction)
    size = np.shape(first_direction)
    if size != np.shape(second_direction):
        raise ValueError("the two directions must have equally many components")
    c1, s1 = np.cosh(0.5 * first), np.sinh(0.5 * first)
    c2, s2 = np.cosh(0.5 * second), np.sinh(0.5 * second)
    normal = s1 * s2 * np.cross(one, two)
    turn = float(np.sqrt(normal @ normal))
    half = float(np.arctan2(turn, c1 * c2 + s1 * s2 * (one @ two)))
    axis = normal / turn if turn > 0.0 else np.zeros(3)
    leaning = s1 * c2 * one + c1 * s2 * two
    length = float(np.sqrt(leaning @ leaning))
    direction = _turn(axis, -half) @ (leaning / length) if length > 0.0 else one
    return BoostAndRotation(
        rapidity=float(2.0 * np.arcsinh(length)),
        direction=direction[: size[0]],
        rotation=_turn(axis, 2.0 * half)[: size[0], : size[0]],
        angle=2.0 * half,
        axis=axis,
    )


def _in_space(direction: ArrayLike) -> Array:
    """Return a unit vector of 2 or 3 components as one of 3."""
    unit = np.asarray(direction, dtype=float)
    if unit.shape not in ((2,), (3,)) or not abs(float(unit @ unit) - 1.0) <= 1e-12:
        raise ValueError("a direction must be a unit vector of 2 or 3 components")
    return np.concatenate([unit, np.zeros(3 - unit.size)])


def _turn(axis: Array, angle: float) -> Array:
    """Return the matrix of a right-handed turn about an axis (Rodrigues; from memory)."""
    x, y, z = axis
    across = np.array([[0.0, -z, y], [z, 0.0, -x], [-y, x, 0.0]])
    return np.asarray(
        np.eye(3) + np.sin(angle) * across + 2.0 * np.sin(0.5 * angle) ** 2 * (across @ across)
    )
