"""What no change of frame may change, on random events and frames."""

from __future__ import annotations

import math

import numpy as np
from hypothesis import assume, given
from hypothesis import strategies as st
from numpy.typing import NDArray

from tauline.spacetime import (
    IntervalClass,
    beta,
    boost,
    boost_along,
    classify,
    classify_many,
    compose,
    compose_collinear,
    doppler_factor,
    doppler_factor_between,
    four_velocity,
    from_beta,
    interval_squared,
    order,
    proper_distance,
    proper_time,
    relative_rapidity,
    rotate,
    to_lightcone,
)

Array = NDArray[np.float64]

rapidities = st.floats(-20, 20)
coordinates = st.floats(-1e6, 1e6)
whole = st.integers(-1000, 1000)

TINY = 1e-290
"""Below it a double has fewer digits."""


@st.composite
def events(draw: st.DrawFn, rows: int) -> Array:
    return np.array([draw(coordinates) for _ in range(rows)])


@st.composite
def directions(draw: st.DrawFn, size: int) -> Array:
    parts = np.array([draw(st.floats(-1, 1)) for _ in range(size)])
    length = float(np.linalg.norm(parts))
    assume(length > 0.1)
    return np.asarray(parts / length)


def turn(first: float, second: float) -> Array:
    c, s = math.cos(first), math.sin(first)
    about_z = np.array([[c, -s, 0.0], [s, c, 0.0], [0.0, 0.0, 1.0]])
    c, s = math.cos(second), math.sin(second)
    return np.asarray(about_z @ np.array([[1.0, 0.0, 0.0], [0.0, c, -s], [0.0, s, c]]))


@given(events(2), events(2), rapidities)
def test_interval_is_the_same_in_every_frame(a: Array, b: Array, phi: float) -> None:
    seen = interval_squared(boost(a, phi), boost(b, phi))
    scale = float(np.prod(np.abs(a) + np.abs(b)))
    assert abs(float(seen - interval_squared(a, b))) <= 1e-14 * scale + TINY


@given(whole, whole, whole, whole, rapidities)
def test_class_and_order_are_the_same_in_every_frame(
    t: int, x: int, t2: int, x2: int, phi: float
) -> None:
    """Of whole coordinates, so that null pairs are among them."""
    a, b = to_lightcone(t, x), to_lightcone(t2, x2)
    exact = (t2 - t) ** 2 - (x2 - x) ** 2
    kind = classify(a, b)
    if (t, x) == (t2, x2):
        assert kind is IntervalClass.SAME
    else:
        names = {1: IntervalClass.TIMELIKE, 0: IntervalClass.NULL, -1: IntervalClass.SPACELIKE}
        assert kind is names[(exact > 0) - (exact < 0)]
    assert classify(boost(a, phi), boost(b, phi)) is kind
    assert order(boost(a, phi), boost(b, phi)) == order(a, b)
    assert order(b, a) == -order(a, b)


@given(events(2), st.floats(-1e6, 1e6), st.booleans(), rapidities)
def test_null_by_construction_stays_null(
    a: Array, length: float, towards_plus_x: bool, phi: float
) -> None:
    b = a.copy()
    b[1 if towards_plus_x else 0] += length
    assert classify(boost(a, phi), boost(b, phi)) in (IntervalClass.NULL, IntervalClass.SAME)


@given(st.integers(-60, 60), st.integers(-60, 60), whole, whole, st.floats(-3, 3), directions(3))
def test_class_in_space_is_the_same_in_every_frame(
    m: int, n: int, p: int, q: int, phi: float, direction: Array
) -> None:
    """A Pythagorean quadruple makes an exactly null step; a second one is random."""
    x, y, z = 2 * m * n, m * m - n * n, 0
    origin, ray = np.array([3.0, 7.0, 1.0, -2.0]), to_lightcone(m * m + n * n, x, y, z)
    other = to_lightcone(p, q, m, n)
    for step in (ray, other):
        pair = origin, origin + step
        kind = classify(*pair)
        moved = [boost_along(event, phi, direction) for event in pair]
        # what the boost rounds is as large as the coordinates on its way
        largest = max(float(np.max(np.abs(event))) for event in pair)
        rounding = 8 * np.finfo(float).eps * largest * math.exp(abs(phi))
        assert classify(moved[0], moved[1], rounding) is kind


@given(events(2), events(2), rapidities)
def test_one_of_proper_time_and_distance(a: Array, b: Array, phi: float) -> None:
    time, distance = float(proper_time(a, b)), float(proper_distance(a, b))
    kind = classify(a, b)
    assert math.isnan(time) == (kind is IntervalClass.SPACELIKE)
    assert math.isnan(distance) == (kind is IntervalClass.TIMELIKE)
    assert classify_many(a[:, np.newaxis], b[:, np.newaxis]).tolist() == [kind]


@given(events(2), rapidities, rapidities)
def test_rapidities_add(a: Array, first: float, second: float) -> None:
    twice = boost(boost(a, first), second)
    once = boost(a, first + second)
    assert np.all(np.abs(twice - once) <= 2e-14 * np.abs(once) + TINY)


@given(events(4), rapidities)
def test_boost_there_and_back(a: Array, phi: float) -> None:
    back = boost(boost(a, phi), -phi)
    assert np.all(np.abs(back - a) <= 4e-16 * np.abs(a) + TINY)


@given(events(4), events(4), st.floats(-3, 3), directions(3))
def test_boost_in_any_direction_keeps_the_interval(
    a: Array, b: Array, phi: float, direction: Array
) -> None:
    seen = [boost_along(event, phi, direction) for event in (a, b)]
    scale = sum(float(np.sum(event * event)) for event in (a, b, *seen))
    difference = float(interval_squared(*seen) - interval_squared(a, b))
    assert abs(difference) <= 1e-13 * scale + TINY


@given(events(4), st.floats(-3, 3), st.floats(-4, 4), st.floats(-4, 4))
def test_boost_in_any_direction_is_a_turned_boost(
    a: Array, phi: float, first: float, second: float
) -> None:
    """Turn the direction onto x, boost along x, turn back."""
    rotation = turn(first, second)
    direction = rotation.T @ np.array([1.0, 0.0, 0.0])
    there = rotate(boost(rotate(a, rotation), phi), rotation.T)
    size = float(np.max(np.abs(a))) * math.exp(abs(phi))
    np.testing.assert_allclose(boost_along(a, phi, direction), there, atol=1e-14 * size + TINY)


@given(events(4), st.floats(-4, 4), st.floats(-4, 4))
def test_rotation_keeps_the_interval_and_the_time(a: Array, first: float, second: float) -> None:
    turned = rotate(a, turn(first, second))
    zero = np.zeros(4)
    scale = float(np.sum(a * a))
    assert (
        abs(float(interval_squared(zero, turned) - interval_squared(zero, a)))
        <= 1e-14 * scale + TINY
    )
    assert abs((turned[0] + turned[1]) - (a[0] + a[1])) <= 1e-14 * float(np.sum(np.abs(a))) + TINY


@given(st.floats(-0.999, 0.999), st.floats(-0.999, 0.999))
def test_collinear_composition_adds_rapidities(first: float, second: float) -> None:
    total = float(beta(from_beta(first) + from_beta(second)))
    assert math.isclose(
        float(compose_collinear(first, second)), total, rel_tol=1e-12, abs_tol=1e-15
    )
    assert math.isclose(
        float(compose([first, 0.0, 0.0], [second, 0.0, 0.0])[0]),
        total,
        rel_tol=1e-10,
        abs_tol=1e-12,
    )


@given(st.floats(-3, 3), directions(3), st.floats(-3, 3), directions(3))
def test_composition_is_what_a_boost_does_to_a_motion(
    frame: float, frame_direction: Array, inside: float, inside_direction: Array
) -> None:
    v, u = math.tanh(frame) * frame_direction, math.tanh(inside) * inside_direction
    motion = four_velocity(inside, inside_direction)
    outside = boost_along(motion, -frame, frame_direction)
    time = 0.5 * (outside[0] + outside[1])
    velocity = np.array([0.5 * (outside[1] - outside[0]), *outside[2:]]) / time
    np.testing.assert_allclose(compose(v, u), velocity, atol=1e-12)


@given(st.floats(-5, 5), directions(3), st.floats(-5, 5), directions(3), st.floats(-3, 3))
def test_relative_rapidity_is_the_same_in_every_frame(
    first: float, one: Array, second: float, other: Array, phi: float
) -> None:
    a, b = four_velocity(first, one), four_velocity(second, other)
    seen = boost_along(a, phi, one), boost_along(b, phi, one)
    # cosh φ − 1 is a difference of products of this size
    slack = 1e-14 * float(sum(np.sum(row * row) for row in (a, b, *seen)))
    cosh = [math.cosh(float(relative_rapidity(*pair))) for pair in ((a, b), seen)]
    assert abs(cosh[0] - cosh[1]) <= slack


@given(st.floats(-20, 20), directions(3))
def test_four_velocity_is_a_unit_vector(phi: float, direction: Array) -> None:
    motion = four_velocity(phi, direction)
    square = float(interval_squared(np.zeros(4), motion))
    assert abs(square - 1.0) <= 1e-14 * float(np.sum(motion * motion))
    assert motion[0] > 0.0
    assert motion[1] > 0.0


@given(rapidities, rapidities, rapidities)
def test_doppler_factors_multiply(first: float, second: float, third: float) -> None:
    """Along one ray, from one to the next to the third as from the first to the third."""
    motions = [four_velocity(phi) for phi in (first, second, third)]
    ray = to_lightcone(1.0, 1.0)
    steps = [float(doppler_factor_between(motions[i], motions[i + 1], ray)) for i in (0, 1)]
    whole_way = float(doppler_factor_between(motions[0], motions[2], ray))
    assert math.isclose(steps[0] * steps[1], whole_way, rel_tol=1e-14)
    assert math.isclose(steps[0], float(doppler_factor(second - first)), rel_tol=1e-13)
