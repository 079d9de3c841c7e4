"""Lorentz boosts and rotations of light-cone arrays.

Passive: the result holds the same events as seen from a frame that moves with the given rapidity.
Always boost from the source, never a boosted array again: roundings add up.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from tauline.spacetime.lightcone import Array, as_rows


def boost(coordinates: ArrayLike, rapidity: ArrayLike) -> Array:
    """See events from a frame that moves along +x with this rapidity.

    u′ = u e^{φ}, v′ = v e^{−φ}, y and z unchanged (W. Rindler, *Relativity*, 2nd ed. (2006),
    §2.8; section from memory). ``coordinates`` is ``(rows, *N)``; the rapidity broadcasts
    against ``N``.

    >>> boost([2.0, 8.0], 0.0).tolist()
    [2.0, 8.0]
    """
    rows = as_rows(coordinates)
    phi = np.asarray(rapidity, dtype=float)
    # written into place: a stack of the rows would copy them once more
    result = np.empty((rows.shape[0], *np.broadcast_shapes(rows.shape[1:], phi.shape)))
    np.multiply(rows[0], np.exp(phi), out=result[0, ...])
    np.multiply(rows[1], np.exp(-phi), out=result[1, ...])
    for k in range(2, rows.shape[0]):
        result[k, ...] = rows[k]
    return result


def boost_along(coordinates: ArrayLike, rapidity: float, direction: ArrayLike) -> Array:
    """See events from a frame that moves with this rapidity along any direction.

    ``direction`` is a unit vector of as many components as there are dimensions of space; the
    axes of the new frame are not turned against the old ones (a pure boost: J. D. Jackson,
    *Classical Electrodynamics*, 3rd ed. (1999), eq. 11.19, from memory). ValueError unless the
    direction has length 1 within 1e-12.
    """
    rows = as_rows(coordinates)
    unit = np.asarray(direction, dtype=float)
    if unit.shape != (rows.shape[0] - 1,):
        raise ValueError(f"the direction must have {rows.shape[0] - 1} components")
    if not abs(float(unit @ unit) - 1.0) <= 1e-12:
        raise ValueError("the direction must be a unit vector")
    if unit.size == 1:
        return boost(rows, rapidity * unit[0])
    # Light-cone coordinates of the direction itself, t ∓ n·r, are where a boost is a product. They
    # are formed from u and v without a detour over t and x, which would cost digits near x.
    forward, backward = 0.5 * (1.0 + unit[0]), 0.5 * (1.0 - unit[0])
    sideways = np.tensordot(unit[1:], rows[2:], axes=1)
    near = forward * rows[0] + backward * rows[1] - sideways
    far = backward * rows[0] + forward * rows[1] + sideways
    new_near, new_far = near * np.exp(rapidity), far * np.exp(-rapidity)
    # the part of x at right angles to the direction, which stays
    across = 0.5 * (rows[1] - rows[0]) * float(unit[1:] @ unit[1:]) - unit[0] * sideways
    moved = 0.5 * ((new_far - far) - (new_near - near))
    return np.stack(
        [
            forward * new_near + backward * new_far - across,
            backward * new_near + forward * new_far + across,
            *(row + part * moved for row, part in zip(rows[2:], unit[1:], strict=True)),
        ]
    )


def rotate(coordinates: ArrayLike, rotation: ArrayLike) -> Array:
    """Turn the axes of space: x′ = R x with an orthogonal matrix R ``(n, n)``.

    ValueError unless R is orthogonal within 1e-12.
    """
    rows = as_rows(coordinates)
    matrix = np.asarray(rotation, dtype=float)
    size = rows.shape[0] - 1
    if matrix.shape != (size, size) or not np.allclose(matrix @ matrix.T, np.eye(size), atol=1e-12):
        raise ValueError(f"a rotation is an orthogonal {size}×{size} matrix")
    time = 0.5 * (rows[0] + rows[1])
    space = np.tensordot(matrix, np.concatenate([0.5 * (rows[1:2] - rows[:1]), rows[2:]]), axes=1)
    return np.concatenate([(time - space[0])[np.newaxis], (time + space[0])[np.newaxis], space[1:]])
