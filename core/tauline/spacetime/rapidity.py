"""Speeds as rapidities: β = tanh φ, γ = cosh φ.

Rapidities along one line add, and keep every digit of a speed near that of light (E. F. Taylor &
J. A. Wheeler, *Spacetime Physics*, 1st ed. (1966), ch. 1; W. Rindler, *Relativity*, 2nd ed.,
§2.11; sections from memory). Arguments are numbers or arrays of any shape.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from tauline.spacetime.lightcone import Array


def beta(rapidity: ArrayLike) -> Array:
    """Velocity in units of c: tanh φ."""
    return np.asarray(np.tanh(np.asarray(rapidity, dtype=float)))


def gamma(rapidity: ArrayLike) -> Array:
    """Lorentz factor: cosh φ."""
    return np.asarray(np.cosh(np.asarray(rapidity, dtype=float)))


def gamma_minus_one(rapidity: ArrayLike) -> Array:
    """γ − 1 = 2 sinh²(φ/2), right to the last digits for slow motion too."""
    half = np.sinh(0.5 * np.asarray(rapidity, dtype=float))
    return 2.0 * half * half


def one_minus_beta(rapidity: ArrayLike) -> Array:
    """1 − β = 2/(1 + e^{2φ}), right to the last digits near the speed of light too."""
    # e^{2φ} may exceed the number range, where 1 − β is 0 as a double
    with np.errstate(over="ignore"):
        return 2.0 / (1.0 + np.exp(2.0 * np.asarray(rapidity, dtype=float)))


def from_beta(velocity: ArrayLike) -> Array:
    """Rapidity of a velocity in units of c; ValueError unless −1 < β < 1."""
    value = np.asarray(velocity, dtype=float)
    if not np.all(np.abs(value) < 1.0):
        raise ValueError("a velocity in units of c must be above −1 and below 1")
    return np.asarray(np.arctanh(value))


def from_one_minus_beta(deficit: ArrayLike, direction: ArrayLike = 1.0) -> Array:
    """Rapidity ½ ln((2 − ε)/ε) of a speed 1 − ε; the sign of ``direction`` is its sign.

    ValueError unless 0 < ε ≤ 1 and the direction has a sign.
    """
    value = np.asarray(deficit, dtype=float)
    if not np.all((value > 0.0) & (value <= 1.0)):
        raise ValueError("1 − β must be above 0 and at most 1")
    return np.asarray(_signed(direction) * 0.5 * (np.log1p(1.0 - value) - np.log(value)))


def from_gamma(lorentz_factor: ArrayLike, direction: ArrayLike = 1.0) -> Array:
    """Rapidity arcosh γ; the sign of ``direction`` is its sign.

    ValueError unless γ ≥ 1 and the direction has a sign. A γ near 1, as a double, does not hold
    the speed to all digits: :func:`from_gamma_minus_one` does.
    """
    value = np.asarray(lorentz_factor, dtype=float)
    if not np.all((value >= 1.0) & np.isfinite(value)):
        raise ValueError("a Lorentz factor γ must be finite and at least 1")
    return np.asarray(_signed(direction) * np.arccosh(value))


def from_gamma_minus_one(excess: ArrayLike, direction: ArrayLike = 1.0) -> Array:
    """Rapidity 2 arsinh √((γ − 1)/2), for slow motion too; ``direction`` gives its sign.

    ValueError unless γ − 1 ≥ 0 and the direction has a sign.
    """
    value = np.asarray(excess, dtype=float)
    if not np.all((value >= 0.0) & np.isfinite(value)):
        raise ValueError("γ − 1 must be finite and at least 0")
    return np.asarray(_signed(direction) * 2.0 * np.arcsinh(np.sqrt(0.5 * value)))


def _signed(direction: ArrayLike) -> Array:
    sign = np.sign(np.asarray(direction, dtype=float))
    if not np.all(np.abs(sign) == 1.0):
        raise ValueError("a direction must be above or below 0, for +x or −x")
    return np.asarray(sign)
