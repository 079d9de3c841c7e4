"""Moving frames, turns, appearances and acceleration: edges, limits and the fastest frames."""

from __future__ import annotations

import itertools
import math
from collections.abc import Callable

import mpmath
import numpy as np
import pytest

from tauline.spacetime import (
    aberrated_angle,
    aberrated_direction,
    aberration_shift,
    accelerated_distance,
    accelerated_gamma,
    accelerated_rapidity,
    accelerated_time,
    angle_of_largest_apparent_speed,
    apparent_length,
    apparent_line_speed,
    apparent_transverse_speed,
    boost_along,
    circular_acceleration,
    circular_period,
    clock_rate_ratio,
    closing_speed,
    doppler_factor_at,
    doppler_factor_seen_at,
    from_beta,
    from_proper_velocity,
    horizon_distance,
    largest_apparent_speed,
    last_departure,
    least_rapidity_seen_at,
    proper_time_over,
    proper_time_to_gamma,
    proper_time_to_rapidity,
    proper_time_until,
    proper_velocity,
    relative_velocity,
    rotate,
    successive_boosts,
    thomas_rotation_per_turn,
    to_lightcone,
    viewing_angles,
)

FAST = 30.0
"""At this rapidity β is 1 as a double."""


def exactly(compute: Callable[[], mpmath.mpf]) -> float:
    with mpmath.workdps(50):
        return float(compute())


# --- aberration and Doppler at an angle ---------------------------------------------------------


@pytest.mark.parametrize("phi", [FAST, -FAST])
@pytest.mark.parametrize("angle", [1e-9, 0.5, math.pi / 2, 3.0, math.pi - 1e-3])
def test_fast_doppler_at_both_angles_and_shift(angle: float, phi: float) -> None:
    def cosine() -> mpmath.mpf:
        return mpmath.cos(mpmath.mpf(angle))

    sent = exactly(lambda: mpmath.cosh(phi) + mpmath.sinh(phi) * cosine())
    seen = exactly(lambda: 1 / (mpmath.cosh(phi) - mpmath.sinh(phi) * cosine()))
    shift = exactly(
        lambda: angle - 2 * mpmath.atan(mpmath.exp(-phi) * mpmath.tan(mpmath.mpf(angle) / 2))
    )
    assert float(doppler_factor_at(angle, phi)) == pytest.approx(sent, rel=1e-13, abs=0)
    assert float(doppler_factor_seen_at(angle, phi)) == pytest.approx(seen, rel=1e-13, abs=0)
    assert float(aberration_shift(angle, phi)) == pytest.approx(shift, rel=1e-13, abs=0)


@pytest.mark.parametrize("phi", [FAST, -FAST])
@pytest.mark.parametrize("angle", [1e-12, math.pi - 1e-12])
def test_angle_near_the_ends_at_rapidity_30(angle: float, phi: float) -> None:
    exact = exactly(lambda: 2 * mpmath.atan(mpmath.exp(-phi) * mpmath.tan(mpmath.mpf(angle) / 2)))
    assert float(aberrated_angle(angle, phi)) == pytest.approx(exact, rel=1e-12, abs=0)


@pytest.mark.parametrize("off", [1e-20, 1e-13, 1e-5])
def test_direction_behind_a_fast_frame_keeps_what_an_angle_cannot(off: float) -> None:
    """Straight behind but for ``off``: π − off is π as a double, the vector is not straight."""
    seen = aberrated_direction([-math.cos(off), math.sin(off)], FAST, [1.0, 0.0])
    angle = exactly(lambda: 2 * mpmath.atan(mpmath.exp(-FAST) / mpmath.tan(mpmath.mpf(off) / 2)))
    assert math.atan2(seen[1], seen[0]) == pytest.approx(angle, rel=1e-12, abs=0)


def test_direction_shapes_and_poles() -> None:
    old = np.array([[1.0, -1.0, 0.0], [0.0, 0.0, 0.6], [0.0, 0.0, 0.8]])
    seen = aberrated_direction(old, [[0.5], [-2.0]], [1.0, 0.0, 0.0])
    assert seen.shape == (3, 2, 3)
    np.testing.assert_allclose(seen[:, :, 0], [[1, 1], [0, 0], [0, 0]], atol=1e-15)
    np.testing.assert_allclose(seen[:, :, 1], [[-1, -1], [0, 0], [0, 0]], atol=1e-15)
    np.testing.assert_allclose(seen[0, :, 2], np.tanh([0.5, -2.0]), rtol=1e-14)
    # across the motion y and z keep their ratio
    np.testing.assert_allclose(seen[2, :, 2] / seen[1, :, 2], 4 / 3, rtol=1e-14)
    assert aberrated_direction([0.0, 1.0], 0.0, [1.0, 0.0]).tolist() == [0.0, 1.0]


def test_the_way_of_light_is_the_opposite_direction() -> None:
    """Light going across goes forward in the frame it is carried past: cos θ = β."""
    going = float(aberrated_angle(math.pi / 2, from_beta(0.6)))
    coming = float(aberrated_angle(math.pi / 2, from_beta(-0.6)))
    assert math.cos(going) == pytest.approx(0.6, rel=1e-14, abs=0)
    assert going + coming == pytest.approx(math.pi, rel=1e-15, abs=0)


@pytest.mark.parametrize(
    ("direction", "motion"),
    [([1.0], [1.0]), ([1.0, 0.0, 0.0], [1.0, 0.0]), ([1.0, 0.0], [1.0, 0.0, 0.0])],
)
def test_directions_must_match(direction: list[float], motion: list[float]) -> None:
    with pytest.raises(ValueError, match="2 or 3 components"):
        aberrated_direction(direction, 0.1, motion)


@pytest.mark.parametrize(
    ("direction", "motion"),
    [([1.0, 0.1], [1.0, 0.0]), ([1.0, 0.0], [0.9, 0.0]), ([math.nan, 0.0], [1.0, 0.0])],
)
def test_directions_must_be_unit_vectors(direction: list[float], motion: list[float]) -> None:
    with pytest.raises(ValueError, match="unit vectors"):
        aberrated_direction(direction, 0.1, motion)


def test_shift_takes_an_angle() -> None:
    with pytest.raises(ValueError, match="between 0 and π"):
        aberration_shift(3.2, 0.5)
    assert float(aberration_shift(math.pi / 2, 1e-9)) == pytest.approx(1e-9, rel=1e-15, abs=0)


def test_transverse_doppler_in_both_frames() -> None:
    """Sent across: blue by γ; seen across: red by 1/γ."""
    phi = from_beta(0.6)
    assert float(doppler_factor_at(math.pi / 2, phi)) == pytest.approx(1.25, rel=1e-15, abs=0)
    assert float(doppler_factor_seen_at(math.pi / 2, phi)) == pytest.approx(0.8, rel=1e-15, abs=0)


# --- turns --------------------------------------------------------------------------------------


def test_sense_of_the_turn() -> None:
    """Boosts along x, then y: components turn from x to y, about +z."""
    result = successive_boosts(0.7, [1.0, 0.0], 1.1, [0.0, 1.0])
    assert result.axis.tolist() == [0.0, 0.0, 1.0]
    assert result.rotation[1, 0] == pytest.approx(math.sin(result.angle))
    assert result.rotation[1, 0] > 0.1
    other = successive_boosts(1.1, [0.0, 1.0], 0.7, [1.0, 0.0])
    assert other.axis.tolist() == [0.0, 0.0, -1.0]
    np.testing.assert_allclose(other.rotation, result.rotation.T, atol=1e-15)


def test_boosts_along_one_line_turn_nothing() -> None:
    for second, rapidity, direction in ((0.5, 1.5, 1.0), (-2.5, 1.5, -1.0)):
        result = successive_boosts(1.0, [0.6, 0.8], second, [0.6, 0.8])
        assert result.rapidity == pytest.approx(rapidity, rel=1e-14, abs=0)
        np.testing.assert_allclose(result.direction, [0.6 * direction, 0.8 * direction], rtol=1e-14)
        assert result.angle == 0.0
        assert result.axis.tolist() == [0.0, 0.0, 0.0]
        assert result.rotation.tolist() == [[1.0, 0.0], [0.0, 1.0]]
    nothing = successive_boosts(1.0, [1.0, 0.0], -1.0, [1.0, 0.0])
    assert (nothing.rapidity, nothing.direction.tolist()) == (0.0, [1.0, 0.0])


def test_fast_boosts_against_mpmath() -> None:
    alpha = 2.0
    result = successive_boosts(FAST, [1, 0], FAST, [math.cos(alpha), math.sin(alpha)])
    rapidity = exactly(
        lambda: mpmath.acosh(mpmath.cosh(FAST) ** 2 + mpmath.sinh(FAST) ** 2 * mpmath.cos(alpha))
    )
    square = exactly(lambda: mpmath.tanh(FAST / 2) ** 2)
    angle = exactly(
        lambda: 2 * mpmath.atan2(square * mpmath.sin(alpha), 1 + square * mpmath.cos(alpha))
    )
    assert result.rapidity == pytest.approx(rapidity, rel=1e-14, abs=0)
    assert result.angle == pytest.approx(angle, rel=1e-14, abs=0)


@pytest.mark.parametrize(
    ("one", "two", "message"),
    [
        ([1.0, 0.0], [1.0, 0.0, 0.0], "equally many"),
        ([1.0], [1.0], "unit vector"),
        ([1.0, 0.0], [1.0, 1.0], "unit vector"),
    ],
)
def test_boosts_need_directions(one: list[float], two: list[float], message: str) -> None:
    with pytest.raises(ValueError, match=message):
        successive_boosts(0.1, one, 0.2, two)


def test_thomas_turn_from_small_boosts_round_a_circle() -> None:
    """Carried round a circle at 0.6 c anticlockwise, axes turn clockwise by 360° (γ − 1).

    Each small boost, pure in the carried axes, leads from one velocity to the next and leaves a
    rotation behind. Components turn anticlockwise, so the axes turn against the orbit.
    """
    steps, phi = 720, float(from_beta(0.6))
    around = 2 * math.pi * np.arange(steps + 1) / steps
    ways = np.stack([np.cos(around), np.sin(around)], axis=1)
    turned = 0.0
    for here, there in itertools.pairwise(ways):
        step = relative_velocity(0.6 * there, 0.6 * here)
        size = float(np.linalg.norm(step))
        split = successive_boosts(phi, here, float(from_beta(size)), step / size)
        np.testing.assert_allclose(split.direction, there, rtol=0, atol=1e-12)
        turned += split.angle * float(split.axis[2])
    assert turned == pytest.approx(float(thomas_rotation_per_turn(phi)), rel=1e-4, abs=0)


def test_order_of_boosts_is_that_of_boost_along() -> None:
    first, second = [0.6, 0.0, 0.8], [0.0, 1.0, 0.0]
    events = to_lightcone([1.0, 0.0], [0.5, 2.0], [0.25, -1.0], [3.0, 0.0])
    result = successive_boosts(0.9, first, 0.4, second)
    twice = boost_along(boost_along(events, 0.9, first), 0.4, second)
    once = rotate(boost_along(events, result.rapidity, result.direction), result.rotation)
    np.testing.assert_allclose(once, twice, rtol=1e-12, atol=1e-12)


# --- appearance ---------------------------------------------------------------------------------


def test_appearance_at_rapidity_30() -> None:
    """A jet nearly at the speed of light, seen where it seems fastest."""
    angle = float(angle_of_largest_apparent_speed(FAST))
    assert angle == pytest.approx(exactly(lambda: mpmath.acos(mpmath.tanh(FAST))), rel=1e-14, abs=0)
    most = exactly(lambda: mpmath.sinh(FAST))
    assert float(largest_apparent_speed(FAST)) == pytest.approx(most, rel=1e-14, abs=0)
    assert float(apparent_transverse_speed(FAST, angle)) == pytest.approx(most, rel=1e-13, abs=0)

    def at_small_angle() -> mpmath.mpf:
        b, t = mpmath.tanh(FAST), mpmath.mpf(1e-13)
        return b * mpmath.sin(t) / (1 - b * mpmath.cos(t))

    assert float(apparent_transverse_speed(FAST, 1e-13)) == pytest.approx(
        exactly(at_small_angle), rel=1e-13, abs=0
    )


def test_viewing_angles_at_the_ends() -> None:
    phi = from_beta(0.6)
    small, large = viewing_angles(0.0, phi)
    assert (float(small), float(large)) == (0.0, math.pi)
    small, large = viewing_angles(largest_apparent_speed(phi), phi)
    assert float(small) == float(large)
    assert float(small) == pytest.approx(math.acos(0.6), rel=1e-15, abs=0)
    with pytest.raises(ValueError, match="at most βγ"):
        viewing_angles(0.76, phi)
    with pytest.raises(ValueError, match="at least 0"):
        viewing_angles(-0.1, phi)
    with pytest.raises(ValueError, match="above 0"):
        viewing_angles(0.0, 0.0)


def test_slowest_that_can_seem_so_fast() -> None:
    phi = least_rapidity_seen_at(7.0)
    assert float(largest_apparent_speed(phi)) == pytest.approx(7.0, rel=1e-15, abs=0)
    with pytest.raises(ValueError, match="at most βγ"):
        viewing_angles(7.0, 0.999 * phi)


def test_seen_length_of_a_rod() -> None:
    phi = from_beta(0.6)
    np.testing.assert_allclose(
        apparent_length(2.0, phi, [0.0, math.pi / 2, math.pi]), [4.0, 1.6, 1.0], rtol=1e-15
    )
    with pytest.raises(ValueError, match="at least 0"):
        apparent_length(-1.0, phi, 0.0)


def test_seen_speed_along_the_line_of_sight() -> None:
    np.testing.assert_allclose(
        apparent_line_speed(from_beta([0.8, -0.8, 1e-12])), [4.0, -4 / 9, 1e-12], rtol=1e-11
    )
    # the seen length over the seen speed is the time a point sees it pass, L/(βγ)
    for phi in (1.3, -1.3):
        angle = 0.0 if phi > 0 else math.pi
        seen = float(apparent_length(1.0, abs(phi), angle)) / abs(float(apparent_line_speed(phi)))
        assert seen == pytest.approx(1 / math.sinh(1.3), rel=1e-14, abs=0)


# --- motions ------------------------------------------------------------------------------------


def test_closing_speed_of_two_fast_things() -> None:
    exact = exactly(lambda: mpmath.tanh(FAST + 1) - mpmath.tanh(FAST))
    assert float(closing_speed(FAST + 1, FAST)) == pytest.approx(exact, rel=1e-13, abs=0)
    assert float(closing_speed(FAST, FAST + 1)) == pytest.approx(-exact, rel=1e-13, abs=0)
    assert float(closing_speed(FAST, -FAST)) == 2.0
    with pytest.raises(ValueError, match="350"):
        closing_speed(351.0, 0.0)


def test_proper_velocity_there_and_back() -> None:
    values = np.array([-1e10, -0.75, 0.0, 1e-12, 4.0])
    np.testing.assert_allclose(proper_velocity(from_proper_velocity(values)), values, rtol=1e-13)
    assert float(from_proper_velocity(0.75)) == pytest.approx(math.atanh(0.6), rel=1e-15, abs=0)


def test_circle() -> None:
    """At 0.6 c round a circle of radius 2: γ²β²/r = 0.28125, a turn of 4π/0.75."""
    phi = from_beta(0.6)
    assert float(circular_acceleration(phi, 2.0)) == pytest.approx(0.28125, rel=1e-14, abs=0)
    np.testing.assert_allclose(circular_period([phi, -phi], 2.0), 4 * math.pi / 0.75, rtol=1e-14)
    assert float(circular_acceleration(0.0, 2.0)) == 0.0
    with pytest.raises(ValueError, match="radius"):
        circular_acceleration(phi, 0.0)
    with pytest.raises(ValueError, match="radius"):
        circular_period(phi, -1.0)
    with pytest.raises(ValueError, match="no turn"):
        circular_period(0.0, 1.0)


# --- acceleration -------------------------------------------------------------------------------


@pytest.mark.parametrize("a", [1.03, -0.25])
@pytest.mark.parametrize("phi", [1e-9, -1e-4, 0.7, FAST, -FAST])
def test_acceleration_against_mpmath(a: float, phi: float) -> None:
    tau = phi / a
    product = mpmath.mpf(a) * mpmath.mpf(tau)
    time = exactly(lambda: mpmath.sinh(mpmath.mpf(a) * tau) / a)
    distance = exactly(lambda: (mpmath.cosh(mpmath.mpf(a) * tau) - 1) / a)
    assert float(accelerated_rapidity(a, tau)) == pytest.approx(float(product), rel=1e-15, abs=0)
    assert float(accelerated_gamma(a, tau)) == pytest.approx(math.cosh(a * tau), rel=1e-15, abs=0)
    assert float(accelerated_time(a, tau)) == pytest.approx(time, rel=1e-13, abs=0)
    assert float(accelerated_distance(a, tau)) == pytest.approx(distance, rel=1e-13, abs=0)
    assert float(proper_time_until(a, time)) == pytest.approx(tau, rel=1e-13, abs=0)
    assert float(proper_time_over(a, distance)) == pytest.approx(abs(tau), rel=1e-13, abs=0)
    assert float(proper_time_to_rapidity(a, phi)) == pytest.approx(tau, rel=1e-15, abs=0)


def test_acceleration_of_nothing() -> None:
    assert float(accelerated_time(0.0, 3.0)) == 3.0
    assert float(accelerated_distance(0.0, 3.0)) == 0.0
    assert float(accelerated_gamma(0.0, 3.0)) == 1.0
    assert float(proper_time_until(0.0, 3.0)) == 3.0
    assert accelerated_time(2.0, np.zeros((2, 3))).tolist() == np.zeros((2, 3)).tolist()
    for ask in (proper_time_over, proper_time_to_rapidity, proper_time_to_gamma):
        with pytest.raises(ValueError, match="not 0"):
            ask(0.0, 1.0)
    for ask_of in (horizon_distance, last_departure):
        with pytest.raises(ValueError, match="not 0"):
            ask_of(0.0)


def test_acceleration_has_a_direction() -> None:
    assert float(proper_time_over(-2.0, -3.0)) == float(proper_time_over(2.0, 3.0))
    with pytest.raises(ValueError, match="sign of the acceleration"):
        proper_time_over(2.0, -3.0)
    assert float(proper_time_to_gamma(-2.0, math.cosh(3.0))) == pytest.approx(1.5, rel=1e-14, abs=0)


def test_horizon_and_last_departure() -> None:
    assert float(horizon_distance(-0.5)) == 2.0
    assert float(last_departure(0.5)) == 2.0
    assert float(last_departure(0.5, -2.0)) == 0.0
    assert float(last_departure(-0.5, 2.0)) == 0.0
    # light that leaves the start a little before is caught up with late, but it is
    before = 2.0 * (1 - 1e-9)
    tau = -2.0 * math.log1p(-0.5 * before)
    chased = accelerated_time(0.5, tau) - accelerated_distance(0.5, tau)
    assert float(chased) == pytest.approx(before, abs=1e-6)


def test_rate_along_a_rod() -> None:
    assert clock_rate_ratio(0.5, [2.0, 0.0, -1.0]).tolist() == [2.0, 1.0, 0.5]
    assert float(clock_rate_ratio(-0.5, -2.0)) == 2.0
    for beyond in (-2.0, -3.0):
        with pytest.raises(ValueError, match="horizon"):
            clock_rate_ratio(0.5, beyond)
