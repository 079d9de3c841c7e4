"""Velocities: composition, relative velocity, four-velocity.

Collinear: rapidities add. In general, with w = v ⊕ u the velocity in the base frame of something
that moves with u in a frame (axes not turned) moving with v: w = [v + u/γ_v + γ_v/(1 + γ_v) (v·u)
v]/(1 + v·u) (K. O'Donnell & M. Visser, Eur. J. Phys. 32 (2011) 1033, eq. 2; from memory).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from tauline.spacetime.lightcone import Array, as_rows


def compose_collinear(first: ArrayLike, second: ArrayLike) -> Array:
    """Compose velocities along one line (units of c): (u + v)/(1 + uv).

    ValueError unless both are between −1 and 1.
    """
    u, v = np.asarray(first, dtype=float), np.asarray(second, dtype=float)
    if not (np.all(np.abs(u) < 1.0) and np.all(np.abs(v) < 1.0)):
        raise ValueError("velocities in units of c must be above −1 and below 1")
    return np.asarray((u + v) / (1.0 + u * v))


def compose(frame: ArrayLike, inside: ArrayLike) -> Array:
    """Velocity vector ``(n,)``, in units of c, of ``inside`` as seen from outside ``frame``.

    The order matters: the frame's boost comes first. ValueError unless both speeds are below 1.
    """
    v, u = np.asarray(frame, dtype=float), np.asarray(inside, dtype=float)
    if not (v @ v < 1.0 and u @ u < 1.0):
        raise ValueError("speeds in units of c must be below 1")
    gamma = 1.0 / np.sqrt(1.0 - v @ v)
    dot = v @ u
    return np.asarray((v + u / gamma + gamma / (1.0 + gamma) * dot * v) / (1.0 + dot))


def four_velocity(rapidity: ArrayLike, direction: ArrayLike = (1.0,)) -> Array:
    """Rows (u̇, v̇, ẏ, ż) = dx/dτ of motion with a rapidity along a unit vector.

    Along x: (e^{−φ}, e^{φ}). ValueError unless the direction has length 1 within 1e-12.
    """
    phi = np.asarray(rapidity, dtype=float)
    unit = np.asarray(direction, dtype=float)
    if unit.shape not in ((1,), (2,), (3,)) or not abs(float(unit @ unit) - 1.0) <= 1e-12:
        raise ValueError("the direction must be a unit vector of 1, 2 or 3 components")
    # cosh φ ∓ n sinh φ as sums of positive terms, so that nothing cancels
    forward, backward = 0.5 * (1.0 + unit[0]), 0.5 * (1.0 - unit[0])
    slow, fast = np.exp(-phi), np.exp(phi)
    return np.stack(
        [
            forward * slow + backward * fast,
            backward * slow + forward * fast,
            *(part * np.sinh(phi) for part in unit[1:]),
        ]
    )


def relative_velocity(of: ArrayLike, seen_from: ArrayLike) -> Array:
    """Velocity vector ``(n,)`` of one motion in the rest frame of another, in units of c.

    Both given in one frame; the axes of the rest frame are not turned against that one's.
    ValueError unless both speeds are below 1.
    """
    return compose(-np.asarray(seen_from, dtype=float), of)


def relative_rapidity(first: ArrayLike, second: ArrayLike) -> Array:
    """Rapidity φ ≥ 0 between two motions given by their four-velocities, rows (u̇, v̇, ẏ, ż).

    From −(U − V)² = 2 (U·V − 1) = 4 sinh²(φ/2), with U·V = cosh φ (W. Rindler, *Relativity*,
    2nd ed. (2006), §5.5, U·V = γ of the relative velocity; section from memory). Exact to the
    last digits for motions along x, however slow or fast; across it, as far as the rows hold
    the digits.
    """
    step = np.asarray(as_rows(second) - as_rows(first))
    square = np.sum(step[2:] ** 2, axis=0) - step[0] * step[1]
    return np.asarray(2.0 * np.arcsinh(0.5 * np.sqrt(np.maximum(square, 0.0))))
