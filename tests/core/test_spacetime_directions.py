"""Aberration, Doppler at an angle, and the rotations that boosts leave over."""

from __future__ import annotations

import math

import mpmath
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.linalg import polar

from tauline.spacetime import (
    aberrated_angle,
    boost_along,
    doppler_factor,
    doppler_factor_at,
    doppler_factor_between,
    four_velocity,
    from_beta,
    thomas_rotation_per_turn,
    to_lightcone,
    wigner_angle,
)

angles = st.floats(0.0, math.pi)
rapidities = st.floats(-3.0, 3.0)


@given(angles, rapidities)
def test_there_and_back(angle: float, phi: float) -> None:
    assert float(aberrated_angle(aberrated_angle(angle, phi), -phi)) == pytest.approx(
        angle, rel=1e-12, abs=1e-12
    )


@given(angles, rapidities)
def test_against_the_boost_of_a_ray(angle: float, phi: float) -> None:
    """Light from a source at the angle goes the other way; its null vector is boosted whole."""
    ray = to_lightcone(1.0, -math.cos(angle), -math.sin(angle))
    seen = boost_along(ray, phi, (1.0, 0.0))
    along = 0.5 * (seen[1] - seen[0])
    assert float(aberrated_angle(angle, phi)) == pytest.approx(
        math.atan2(-seen[2], -along), rel=1e-9, abs=1e-9
    )
    rest = four_velocity(0.0, (1.0, 0.0))
    moving = four_velocity(phi, (1.0, 0.0))
    between = float(doppler_factor_between(rest, moving, ray))
    assert float(doppler_factor_at(angle, phi)) == pytest.approx(between, rel=1e-10)


@given(rapidities)
def test_straight_ahead_and_behind(phi: float) -> None:
    assert float(doppler_factor_at(0.0, phi)) == pytest.approx(float(doppler_factor(-phi)))
    assert float(doppler_factor_at(math.pi, phi)) == pytest.approx(float(doppler_factor(phi)))
    assert float(aberrated_angle(math.pi, phi)) == pytest.approx(math.pi)


@pytest.mark.parametrize("phi", [30.0, -30.0])
@pytest.mark.parametrize("angle", [1e-8, 1.0, 3.1415])
def test_at_rapidity_30_against_mpmath(angle: float, phi: float) -> None:
    with mpmath.workdps(50):
        exact = 2 * mpmath.atan(mpmath.exp(-phi) * mpmath.tan(mpmath.mpf(angle) / 2))
    assert float(aberrated_angle(angle, phi)) == pytest.approx(float(exact), rel=1e-14, abs=0)


def test_an_angle_must_be_one() -> None:
    with pytest.raises(ValueError, match="between 0 and π"):
        aberrated_angle(-0.1, 0.5)


def matrix(phi: float, direction: tuple[float, float]) -> np.ndarray:
    n = np.array(direction)
    c, s = math.cosh(phi), math.sinh(phi)
    return np.block(
        [[np.array([[c]]), -s * n], [-s * n[:, None], np.eye(2) + (c - 1) * np.outer(n, n)]]
    )


@given(st.floats(0.01, 2.5), st.floats(0.01, 2.5), st.floats(0.0, math.pi))
def test_against_the_polar_decomposition(first: float, second: float, angle: float) -> None:
    """Product of the boost matrices = rotation times boost, split by scipy."""
    product = matrix(second, (math.cos(angle), math.sin(angle))) @ matrix(first, (1.0, 0.0))
    rotation, _ = polar(product)
    turned = math.atan2(rotation[2, 1], rotation[1, 1])
    # components turn one way, so the axes they belong to are turned the other way
    assert turned == pytest.approx(float(wigner_angle(first, second, angle)), abs=1e-7)


def test_c9_perpendicular_boosts() -> None:
    """C9: boosts of 0.6 c and 0.8 c at a right angle turn by 18.92464°.

    Physics.SE question 558913 (number and formula read); O'Donnell & Visser 2011.
    """
    turned = math.degrees(float(wigner_angle(from_beta(0.6), from_beta(0.8), math.pi / 2)))
    assert turned == pytest.approx(18.92464, abs=5e-6)
    assert turned == pytest.approx(18.924644416051234, rel=1e-13)


def test_c6_constant_of_annual_aberration() -> None:
    """C6: 20.49552″, from the mean speed 2πa/(P√(1 − e²)) of the Earth.

    dictionary.obspm.fr, "constant of aberration" (formula and number read).
    """
    speed = 2 * math.pi * 1.00000102 * 149597870700 / (365.256363 * 86400)
    speed /= math.sqrt(1 - 0.0167086**2)
    phi = float(from_beta(speed / 299792458))
    shift = math.pi / 2 - float(aberrated_angle(math.pi / 2, phi))
    assert math.degrees(shift) * 3600 == pytest.approx(20.49552, abs=5e-5)


def test_f3_thomas_precession() -> None:
    """F3: 90° per turn at 0.6 c; Ω/ω = 5.0004e-5 at 0.01 c, near β²/2.

    B. Crowell, Special Relativity, ch. 8.3 (formula for slow motion read; numbers derived).
    """
    assert math.degrees(float(thomas_rotation_per_turn(from_beta(0.6)))) == pytest.approx(
        90.0, abs=1e-10
    )
    ratio = float(thomas_rotation_per_turn(from_beta(0.01))) / (2 * math.pi)
    assert ratio == pytest.approx(5e-5, abs=1e-8)
    assert ratio == pytest.approx(0.0000500037503125, rel=1e-10)
