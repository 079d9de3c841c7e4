"""The Doppler factor D = f received / f emitted; Bondi's k is 1/D."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from tauline.spacetime.lightcone import Array, as_rows


def doppler_factor(recession: ArrayLike) -> Array:
    """Doppler factor e^{−φ} of a source receding along the line of sight at rapidity φ.

    Negative for approach. Equal to √((1 − β)/(1 + β)) (W. Rindler, *Relativity*, 2nd ed. (2006),
    §4.3; section from memory).
    """
    return np.asarray(np.exp(-np.asarray(recession, dtype=float)))


def doppler_factor_between(emitter: ArrayLike, receiver: ArrayLike, ray: ArrayLike) -> Array:
    """Doppler factor (k·U_receiver)/(k·U_emitter) of light along ``ray``.

    Four-velocities and the null vector k as rows (u, v, y, z); the direction of k is that in
    which the light goes (W. Rindler, *Relativity*, 2nd ed. (2006), §5.7; section from memory).
    ValueError if k is not null within 1e-9 of its size.
    """
    k = as_rows(ray)
    square = product(k, k)
    if not np.all(np.abs(square) <= 1e-9 * np.sum(k * k, axis=0)):
        raise ValueError("light follows a null vector")
    return np.asarray(product(k, as_rows(receiver)) / product(k, as_rows(emitter)))


def product(first: ArrayLike, second: ArrayLike) -> Array:
    """Scalar product ½(u₁v₂ + v₁u₂) − y₁y₂ − z₁z₂ of vectors given as light-cone rows."""
    a, b = as_rows(first), as_rows(second)
    return np.asarray(0.5 * (a[0] * b[1] + a[1] * b[0]) - np.sum(a[2:] * b[2:], axis=0))
