"""Velocities: composition, relative velocity, four-velocity.

Collinear: rapidities add. In general, with w = v ⊕ u the velocity in the base frame of something
that moves with u in a frame (axes not turned) moving with v: w = [v + u/γ_v + γ_v/(1 + γ_v) (v·u)
v]/(1 + v·u) (K. O'Donnell & M. Visser, Eur. J. Phys. 32 (2011) 1033, eq. 2; from memory).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from tauline.spacetime.lightcone import Array


def compose_collinear(first: ArrayLike, second: ArrayLike) -> Array:
    """Compose velocities along one line (units of c): (u + v)/(1 + uv).

    ValueError unless both are between −1 and 1.
    """
    u, v = np.asarray(first, dtype=float), np.asarray(second, dtype=float)
    if not (np.all(np.abs(u) < 1.0) and np.all(np.abs(v) < 1.0)):
        raise ValueError("velocities must be between −c and c")
    return np.asarray((u + v) / (1.0 + u * v))


def compose(frame: ArrayLike, inside: ArrayLike) -> Array:
    """Velocity vector ``(n,)``, in units of c, of ``inside`` as seen from outside ``frame``.

    The order matters: the frame's boost comes first. ValueError unless both speeds are below 1.
    """
    v, u = np.asarray(frame, dtype=float), np.asarray(inside, dtype=float)
    if v @ v >= 1.0 or u @ u >= 1.0:
        raise ValueError("speeds must be below c")
    gamma = 1.0 / np.sqrt(1.0 - v @ v)
    dot = v @ u
    return np.asarray((v + u / gamma + gamma / (1.0 + gamma) * dot * v) / (1.0 + dot))


def four_velocity(rapidity: ArrayLike, direction: ArrayLike = (1.0,)) -> Array:
    """Rows (u̇, v̇, ẏ, ż) = dx/dτ of motion with a rapidity along a unit vector.

    Along x: (e^{−φ}, e^{φ}).
    """
    phi = np.asarray(rapidity, dtype=float)
    unit = np.asarray(direction, dtype=float)
    if unit.size == 1:
        return np.stack([np.exp(-phi * unit[0]), np.exp(phi * unit[0])])
    space = np.multiply.outer(unit, np.sinh(phi))
    return np.concatenate(
        [(np.cosh(phi) - space[0])[np.newaxis], (np.cosh(phi) + space[0])[np.newaxis], space[1:]]
    )
