"""Rapidities, velocities, boosts in any direction and Doppler factors: domains and edges."""

from __future__ import annotations

import math

import mpmath
import numpy as np
import pytest

from tauline import spacetime
from tauline.spacetime import (
    beta,
    boost,
    boost_along,
    compose,
    compose_collinear,
    doppler_factor,
    doppler_factor_between,
    four_velocity,
    from_beta,
    from_gamma,
    from_gamma_minus_one,
    from_lightcone,
    from_one_minus_beta,
    gamma,
    gamma_minus_one,
    one_minus_beta,
    relative_rapidity,
    relative_velocity,
    rotate,
    to_lightcone,
)


def test_public_names() -> None:
    assert sorted(spacetime.__all__) == spacetime.__all__
    assert all(hasattr(spacetime, name) for name in spacetime.__all__)


@pytest.mark.parametrize("phi", [1e-12, 1e-6, 0.3, 5.0, 20.0, 300.0])
def test_every_digit_of_a_speed(phi: float) -> None:
    with mpmath.workdps(400):
        big = mpmath.mpf(phi)
        exact = {
            gamma: mpmath.cosh(big),
            gamma_minus_one: mpmath.cosh(big) - 1,
            one_minus_beta: 1 - mpmath.tanh(big),
            beta: mpmath.tanh(big),
        }
        for function, value in exact.items():
            assert float(function(phi)) == pytest.approx(float(value), rel=4e-15), function.__name__


def test_the_fastest_speeds_do_not_warn() -> None:
    assert float(one_minus_beta(800.0)) == 0.0
    assert float(one_minus_beta(-800.0)) == 2.0


@pytest.mark.parametrize("phi", [1e-6, 0.3, 1.0, 5.0, 300.0])
@pytest.mark.parametrize("direction", [1, -1])
def test_back_to_the_rapidity(phi: float, direction: int) -> None:
    signed = direction * phi
    assert float(from_one_minus_beta(one_minus_beta(phi), direction)) == pytest.approx(
        signed, rel=1e-14, abs=1e-16
    )
    assert float(from_gamma_minus_one(gamma_minus_one(phi), direction)) == pytest.approx(
        signed, rel=1e-14
    )
    if phi >= 1.0:
        assert float(from_gamma(gamma(phi), direction)) == pytest.approx(signed, rel=1e-14)
    if phi <= 5.0:
        assert float(from_beta(beta(signed))) == pytest.approx(signed, rel=1e-11)


@pytest.mark.parametrize("factor", [1.0 + 2.0**-52, 1.0 + 1e-9, 2.0, 1e8, 1e300, 1.7e308])
def test_rapidity_of_any_lorentz_factor(factor: float) -> None:
    with mpmath.workdps(330):
        exact = float(mpmath.acosh(mpmath.mpf(factor)))
    assert float(from_gamma(factor)) == pytest.approx(exact, rel=1e-15)


@pytest.mark.parametrize("deficit", [5e-324, 1e-300, 1e-16, 5e-5, 0.4, 0.5, 1.0 - 2.0**-53, 1.0])
def test_rapidity_of_any_deficit(deficit: float) -> None:
    with mpmath.workdps(400):
        small = mpmath.mpf(deficit)
        exact = float(mpmath.log((2 - small) / small) / 2)
    assert float(from_one_minus_beta(deficit)) == pytest.approx(exact, rel=1e-14, abs=0.0)


@pytest.mark.parametrize("bad", [1.0, -1.0, 1.5, math.nan, math.inf])
def test_no_speed_of_light_or_beyond(bad: float) -> None:
    with pytest.raises(ValueError, match="above −1 and below 1"):
        from_beta([0.0, bad])
    with pytest.raises(ValueError, match="above −1 and below 1"):
        compose_collinear(0.1, bad)
    with pytest.raises(ValueError, match="below 1"):
        compose([0.0, bad], [0.1, 0.1])


@pytest.mark.parametrize("bad", [0.0, -0.1, 1.1, math.nan])
def test_deficit_outside_its_domain(bad: float) -> None:
    with pytest.raises(ValueError, match="above 0 and at most 1"):
        from_one_minus_beta(bad)


@pytest.mark.parametrize("bad", [0.999, -2.0, math.nan, math.inf])
def test_lorentz_factor_outside_its_domain(bad: float) -> None:
    with pytest.raises(ValueError, match="at least 1"):
        from_gamma(bad)
    with pytest.raises(ValueError, match="at least 0"):
        from_gamma_minus_one(bad - 1.0)


@pytest.mark.parametrize("direction", [0.0, math.nan])
def test_a_direction_needs_a_sign(direction: float) -> None:
    with pytest.raises(ValueError, match="above or below 0"):
        from_gamma(2.0, direction)


def test_convention_of_boosts() -> None:
    """What rests at the origin of the moving frame has x′ = 0 there, and its clock goes slow."""
    phi = math.atanh(0.6)
    event = boost(to_lightcone(5.0, 3.0), phi)
    assert from_lightcone(event).tolist() == pytest.approx([4.0, 0.0], abs=1e-15)


def test_boost_of_one_event_to_many_frames() -> None:
    seen = boost(to_lightcone(1.0, 0.0, 2.0, 3.0), [0.0, 1.0, 2.0])
    assert seen.shape == (4, 3)
    assert seen[2:].tolist() == [[2.0] * 3, [3.0] * 3]


@pytest.mark.parametrize("phi", [-20.0, -1.0, 0.5, 20.0])
@pytest.mark.parametrize("direction", [(1.0,), (1.0, 0.0), (1.0, 0.0, 0.0)])
def test_boost_along_x_is_the_boost(phi: float, direction: tuple[float, ...]) -> None:
    """To the last digits, at rapidity 20 too."""
    events = to_lightcone(3.0, 1.0, *[2.0, 5.0][: len(direction) - 1])
    np.testing.assert_allclose(boost_along(events, phi, direction), boost(events, phi), rtol=1e-15)
    backwards = [-part for part in direction]
    np.testing.assert_allclose(boost_along(events, phi, backwards), boost(events, -phi), rtol=1e-15)


@pytest.mark.parametrize("direction", [(0.6, 0.7), (1.0,), (0.0, 0.0), (math.nan, 0.0)])
def test_a_direction_is_a_unit_vector(direction: tuple[float, ...]) -> None:
    with pytest.raises(ValueError, match="must"):
        boost_along(to_lightcone(0, 0, 0), 1.0, direction)


def test_a_rotation_is_orthogonal() -> None:
    with pytest.raises(ValueError, match="orthogonal 2×2"):
        rotate(to_lightcone(0, 1, 0), [[1, 1], [0, 1]])
    turned = rotate(to_lightcone(0, 1, 0), [[0, -1], [1, 0]])
    np.testing.assert_allclose(from_lightcone(turned), [0, 0, 1], atol=1e-15)


def test_four_velocity_needs_a_unit_vector() -> None:
    with pytest.raises(ValueError, match="unit vector"):
        four_velocity(1.0, (1.0, 1.0))


@pytest.mark.parametrize("phi", [1e-9, 1e-3, 0.7, 20.0])
def test_relative_rapidity_of_slow_and_fast(phi: float) -> None:
    for base in (0.0, 3.0, -7.0):
        first, second = four_velocity(base), four_velocity(base + phi)
        # of two rounded rapidities only the difference of the roundings is lost
        assert float(relative_rapidity(first, second)) == pytest.approx(phi, rel=1e-14, abs=1e-15)


def test_relative_velocity_at_right_angles() -> None:
    """|w|² = u² + v² − u²v² for velocities at right angles, from either side."""
    v, u = np.array([0.6, 0.0]), np.array([0.0, 0.8])
    speed = math.sqrt(0.36 + 0.64 - 0.36 * 0.64)
    assert np.linalg.norm(relative_velocity(u, v)) == pytest.approx(speed, rel=1e-15)
    assert np.linalg.norm(relative_velocity(v, u)) == pytest.approx(speed, rel=1e-15)
    # but not in the same direction: the two rest frames are turned against one another
    assert relative_velocity(u, v).tolist() == pytest.approx([-0.6, 0.64])
    assert relative_velocity(v, u).tolist() == pytest.approx([0.36, -0.8])


def test_doppler_of_recession_and_approach() -> None:
    phi = math.atanh(0.6)
    assert float(doppler_factor(phi)) == pytest.approx(0.5, rel=1e-15)
    assert float(doppler_factor(-phi)) == pytest.approx(2.0, rel=1e-15)


def test_doppler_along_the_ray() -> None:
    """Light that goes towards +x from a rest source to a receiver that flees at 0.6 c."""
    rest, fleeing = four_velocity(0.0), four_velocity(math.atanh(0.6))
    towards_plus_x = to_lightcone(1.0, 1.0)
    assert float(doppler_factor_between(rest, fleeing, towards_plus_x)) == pytest.approx(0.5)
    assert float(doppler_factor_between(fleeing, rest, to_lightcone(1, -1))) == pytest.approx(0.5)
    assert float(doppler_factor_between(fleeing, rest, towards_plus_x)) == pytest.approx(2.0)


def test_transverse_doppler() -> None:
    """A source that crosses the line of sight is seen slowed by its γ alone."""
    phi = math.atanh(0.6)
    source, receiver = four_velocity(phi, (1.0, 0.0)), four_velocity(0.0, (1.0, 0.0))
    across = to_lightcone(1.0, 0.0, 1.0)
    assert float(doppler_factor_between(source, receiver, across)) == pytest.approx(0.8, rel=1e-15)


def test_light_follows_null_vectors() -> None:
    rest = four_velocity(0.0)
    with pytest.raises(ValueError, match="null vector"):
        doppler_factor_between(rest, rest, to_lightcone(1.0, 0.5))
