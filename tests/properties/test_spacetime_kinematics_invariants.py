"""What must hold for any light ray, pair of boosts, moving source and acceleration."""

from __future__ import annotations

import math

import numpy as np
import pytest
import vector
from hypothesis import assume, given
from hypothesis import strategies as st
from numpy.typing import NDArray
from scipy.linalg import polar

from tauline.spacetime import (
    aberrated_angle,
    aberrated_direction,
    aberration_shift,
    accelerated_distance,
    accelerated_gamma,
    accelerated_rapidity,
    accelerated_time,
    apparent_length,
    apparent_transverse_speed,
    beta,
    boost_along,
    clock_rate_ratio,
    closing_speed,
    compose,
    compose_collinear,
    doppler_factor,
    doppler_factor_at,
    doppler_factor_between,
    doppler_factor_seen_at,
    four_velocity,
    gamma,
    largest_apparent_speed,
    proper_time_over,
    proper_time_to_gamma,
    proper_time_until,
    rotate,
    successive_boosts,
    to_lightcone,
    viewing_angles,
    wigner_angle,
)

Array = NDArray[np.float64]

angles = st.floats(0.0, math.pi)
rapidities = st.floats(-5.0, 5.0)
speeds = st.floats(0.01, 2.5)
accelerations = st.floats(1e-3, 1e3) | st.floats(-1e3, -1e-3)


@st.composite
def directions(draw: st.DrawFn, size: int) -> Array:
    parts = np.array([draw(st.floats(-1, 1)) for _ in range(size)])
    length = float(np.linalg.norm(parts))
    assume(length > 0.1)
    return np.asarray(parts / length)


either = st.sampled_from([2, 3])
pairs = either.flatmap(lambda size: st.tuples(directions(size), directions(size)))


# --- aberration and Doppler at an angle ---------------------------------------------------------


@given(pairs, rapidities)
def test_directions_there_and_back(pair: tuple[Array, Array], phi: float) -> None:
    source, motion = pair
    seen = aberrated_direction(source, phi, motion)
    assert float(seen @ seen) == pytest.approx(1.0, rel=1e-14, abs=0)
    back = aberrated_direction(seen / np.linalg.norm(seen), -phi, motion)
    np.testing.assert_allclose(back, source, rtol=0, atol=1e-15 * math.exp(2 * abs(phi)))


@given(pairs, rapidities, rapidities)
def test_two_frames_along_one_line_are_one(
    pair: tuple[Array, Array], phi: float, more: float
) -> None:
    source, motion = pair
    seen = aberrated_direction(source, phi, motion)
    twice = aberrated_direction(seen / np.linalg.norm(seen), more, motion)
    once = aberrated_direction(source, phi + more, motion)
    slack = 1e-14 * math.exp(abs(phi) + abs(more))
    np.testing.assert_allclose(twice, once, rtol=0, atol=slack)


@given(pairs, rapidities)
def test_directions_and_angles_agree(pair: tuple[Array, Array], phi: float) -> None:
    source, motion = pair
    seen = aberrated_direction(source, phi, motion)
    angle = 2 * math.asin(min(1.0, 0.5 * float(np.linalg.norm(source - motion))))
    new = 2 * math.asin(min(1.0, 0.5 * float(np.linalg.norm(seen - motion))))
    # an angle near π from its chord has half the digits, and a fast frame magnifies what is lost
    assert new == pytest.approx(float(aberrated_angle(angle, phi)), abs=1e-7 * math.exp(abs(phi)))


@given(pairs, st.floats(-3.0, 3.0))
def test_photon_against_vector(pair: tuple[Array, Array], phi: float) -> None:
    """A photon from the source, boosted by scikit-hep vector: its direction and its energy."""
    source, motion = pair
    if source.size == 2:
        source, motion = np.append(source, 0.0), np.append(motion, 0.0)
    x, y, z = -source
    # vector moves the object; the frame goes the other way
    against = -math.tanh(phi) * motion
    photon = vector.obj(t=1.0, x=x, y=y, z=z).boost_beta3(
        vector.obj(x=against[0], y=against[1], z=against[2])
    )
    seen = -aberrated_direction(source, phi, motion)
    theirs = np.array([photon.x, photon.y, photon.z]) / photon.t
    np.testing.assert_allclose(seen, theirs, rtol=0, atol=1e-11)
    angle = math.atan2(float(np.linalg.norm(np.cross(source, motion))), float(source @ motion))
    assert float(doppler_factor_at(angle, phi)) == pytest.approx(photon.t, rel=1e-10, abs=0)
    after = math.atan2(float(np.linalg.norm(np.cross(seen, motion))), -float(seen @ motion))
    assert float(doppler_factor_seen_at(after, phi)) == pytest.approx(photon.t, rel=1e-10, abs=0)


@given(angles, rapidities)
def test_one_doppler_factor_by_either_angle(angle: float, phi: float) -> None:
    seen = aberrated_angle(angle, phi)
    by_seen = float(doppler_factor_seen_at(seen, phi))
    # behind a fast frame the angle seen decides, and holds what it may
    assert by_seen == pytest.approx(float(doppler_factor_at(angle, phi)), rel=1e-9, abs=0)


@given(angles, rapidities)
def test_doppler_of_a_moving_source_against_four_velocities(angle: float, phi: float) -> None:
    """In the receiver's frame the source moves along x; light leaves it at the angle to x."""
    ray = to_lightcone(1.0, math.cos(angle), math.sin(angle))
    source, receiver = four_velocity(phi, (1.0, 0.0)), four_velocity(0.0, (1.0, 0.0))
    between = float(doppler_factor_between(source, receiver, ray))
    assert float(doppler_factor_seen_at(angle, phi)) == pytest.approx(between, rel=1e-9, abs=0)


@given(angles, rapidities)
def test_shift_is_the_difference(angle: float, phi: float) -> None:
    difference = angle - float(aberrated_angle(angle, phi))
    assert float(aberration_shift(angle, phi)) == pytest.approx(difference, abs=2e-15)


# --- turns --------------------------------------------------------------------------------------


def matrix(phi: float, direction: Array) -> Array:
    """Boost matrix of (t, x, …), passive."""
    c, s = math.cosh(phi), math.sinh(phi)
    result = np.eye(1 + direction.size)
    result[0, 0] = c
    result[0, 1:] = result[1:, 0] = -s * direction
    result[1:, 1:] += (c - 1) * np.outer(direction, direction)
    return result


@given(speeds, speeds, pairs)
def test_split_against_the_polar_decomposition(
    first: float, second: float, pair: tuple[Array, Array]
) -> None:
    one, two = pair
    rotation, pure = polar(matrix(second, two) @ matrix(first, one))
    ours = successive_boosts(first, one, second, two)
    np.testing.assert_allclose(ours.rotation, rotation[1:, 1:], rtol=0, atol=1e-9)
    whole = matrix(ours.rapidity, ours.direction)
    np.testing.assert_allclose(whole, pure, rtol=0, atol=1e-9 * math.exp(first + second))
    alpha = 2 * math.atan2(float(np.linalg.norm(one - two)), float(np.linalg.norm(one + two)))
    assert ours.angle == pytest.approx(float(wigner_angle(first, second, alpha)), abs=1e-12)


@given(speeds, speeds, pairs)
def test_rotation_is_by_the_angle_about_the_axis(
    first: float, second: float, pair: tuple[Array, Array]
) -> None:
    ours = successive_boosts(first, pair[0], second, pair[1])
    size = pair[0].size
    np.testing.assert_allclose(ours.rotation @ ours.rotation.T, np.eye(size), atol=1e-14)
    assert np.linalg.det(ours.rotation) == pytest.approx(1.0, rel=1e-13, abs=0)
    assert np.trace(ours.rotation) == pytest.approx(2 * math.cos(ours.angle) + size - 2, abs=1e-13)
    if size == 3:
        np.testing.assert_allclose(ours.rotation @ ours.axis, ours.axis, atol=1e-14)


@given(speeds, speeds, pairs)
def test_the_two_orders_differ_by_the_turn(
    first: float, second: float, pair: tuple[Array, Array]
) -> None:
    """v ⊕ w and w ⊕ v are equally long; R carries the first into the second."""
    one, two = pair
    v, w = math.tanh(first) * one, math.tanh(second) * two
    here, there = compose(v, w), compose(w, v)
    ours = successive_boosts(first, one, second, two)
    np.testing.assert_allclose(math.tanh(ours.rapidity) * ours.direction, here, atol=1e-12)
    np.testing.assert_allclose(ours.rotation @ here, there, rtol=0, atol=1e-12)


@given(speeds, speeds, pairs, st.integers(0, 2**32 - 1))
def test_split_acts_as_the_two_boosts(
    first: float, second: float, pair: tuple[Array, Array], seed: int
) -> None:
    one, two = pair
    events = np.random.default_rng(seed).uniform(-1, 1, (1 + one.size, 5))
    ours = successive_boosts(first, one, second, two)
    twice = boost_along(boost_along(events, first, one), second, two)
    once = rotate(boost_along(events, ours.rapidity, ours.direction), ours.rotation)
    np.testing.assert_allclose(once, twice, rtol=0, atol=1e-12 * math.exp(first + second))


# --- appearance ---------------------------------------------------------------------------------


@given(st.floats(0.01, 10.0), st.floats(0.0, 1.0))
def test_both_viewing_angles_show_the_speed(phi: float, share: float) -> None:
    most = float(largest_apparent_speed(phi))
    speed = min(share * most, most)
    small, large = viewing_angles(speed, phi)
    assert 0.0 <= float(small) <= float(large) <= math.pi
    for angle in (small, large):
        seen = float(apparent_transverse_speed(phi, angle))
        assert seen == pytest.approx(speed, rel=1e-9, abs=1e-14 * (1 + most))


@given(st.floats(0.01, 10.0), angles)
def test_nothing_seems_faster_than_the_most(phi: float, angle: float) -> None:
    seen = float(apparent_transverse_speed(phi, angle))
    assert -1e-15 * math.exp(phi) <= seen
    assert seen <= float(largest_apparent_speed(phi)) * (1 + 1e-14)


@given(st.floats(0.0, 3.0), angles, st.floats(0.1, 100.0))
def test_seen_speed_and_length_from_when_the_light_arrives(
    phi: float, angle: float, length: float
) -> None:
    """Two flashes of one end, and of both ends, timed by t − x cos θ far away."""
    b, cosine = math.tanh(phi), math.cos(angle)
    arrivals = 1.0 - b * cosine
    seen = float(apparent_transverse_speed(phi, angle))
    assert seen == pytest.approx(b * math.sin(angle) / arrivals, rel=1e-9, abs=1e-14)
    # the end in front, L/γ ahead, sends the light that arrives together with the other's
    measured = length / math.cosh(phi)
    later = measured * cosine / arrivals
    assert float(apparent_length(length, phi, angle)) == pytest.approx(
        measured + b * later, rel=1e-9, abs=0
    )


# --- motions and acceleration -------------------------------------------------------------------


@given(st.floats(-3, 3), st.floats(-3, 3))
def test_closing_speed_is_not_the_relative_velocity(one: float, two: float) -> None:
    closing = float(closing_speed(one, two))
    first, second = math.tanh(one), math.tanh(two)
    assert closing == pytest.approx(first - second, abs=1e-14)
    relative = float(compose_collinear(first, -second))
    assert relative * (1 - first * second) == pytest.approx(closing, abs=1e-14)
    assert closing == pytest.approx(-float(closing_speed(two, one)), rel=1e-14, abs=0)


@given(accelerations, st.floats(-10, 10))
def test_acceleration_relations(a: float, phi: float) -> None:
    """(1 + ax)² − (at)² = 1; the speed is that of the way; γ = 1 + ax; and all of it inverts."""
    tau = phi / a
    t, x = float(accelerated_time(a, tau)), float(accelerated_distance(a, tau))
    factor = float(accelerated_gamma(a, tau))
    assert factor == pytest.approx(1 + a * x, rel=1e-13, abs=0)
    assert (1 + a * x) ** 2 - (a * t) ** 2 == pytest.approx(1.0, abs=1e-14 * factor**2)
    speed = float(beta(accelerated_rapidity(a, tau)))
    assert speed * factor == pytest.approx(a * t, rel=1e-12, abs=1e-300)
    assert float(proper_time_until(a, t)) == pytest.approx(tau, rel=1e-12, abs=1e-300)
    # a displacement below the smallest double keeps no time
    if abs(phi) > 1e-100:
        assert float(proper_time_over(a, x)) == pytest.approx(abs(tau), rel=1e-12, abs=0)
    assert float(proper_time_to_gamma(a, factor)) == pytest.approx(abs(tau), abs=1e-7 / abs(a))


@given(st.floats(0.01, 100), st.floats(-0.99, 10))
def test_clock_rates_are_the_doppler_factor_along_the_rod(a: float, span: float) -> None:
    """Light from the base reaches the other end, on its hyperbola, at φ with e^{φ} = 1 + aL."""
    distance = span / a
    far = 1 / a + distance
    # on X = T + 1/a (forward) or X = 1/a − T (back), with X² − T² = far²
    sense = 1.0 if distance >= 0 else -1.0
    phi = sense * math.log(far * a)
    reception = far * math.sinh(phi), far * math.cosh(phi)
    assert reception[1] - sense * reception[0] == pytest.approx(1 / a, rel=1e-12, abs=0)
    ray = to_lightcone(1.0, sense)
    received = doppler_factor_between(four_velocity(0.0), four_velocity(phi), ray)
    assert 1 / float(received) == pytest.approx(
        float(clock_rate_ratio(a, distance)), rel=1e-12, abs=0
    )
    assert float(received) == pytest.approx(float(doppler_factor(sense * phi)), rel=1e-12, abs=0)
    assert float(gamma(phi)) >= 1.0
