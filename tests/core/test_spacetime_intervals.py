"""The interval between two events, and light-cone arrays."""

from __future__ import annotations

import math

import numpy as np
import pytest

from tauline.spacetime import (
    IntervalClass,
    classify,
    classify_many,
    from_lightcone,
    interval_squared,
    order,
    proper_distance,
    proper_time,
    to_lightcone,
)

ORIGIN = to_lightcone(0, 0)


def test_rows_broadcast() -> None:
    events = to_lightcone(np.zeros((3, 1)), np.arange(4.0), 2.0)
    assert events.shape == (3, 3, 4)
    assert np.all(events[2] == 2.0)


@pytest.mark.parametrize("transverse", [(), (7.0,), (7.0, -1.0)])
def test_there_and_back(transverse: tuple[float, ...]) -> None:
    events = to_lightcone(5.0, 3.0, *transverse)
    assert events[:2].tolist() == [2.0, 8.0]
    assert from_lightcone(events).tolist() == [5.0, 3.0, *transverse]


def test_at_most_three_dimensions_of_space() -> None:
    with pytest.raises(ValueError, match="at most three"):
        to_lightcone(0, 0, 0, 0, 0)


@pytest.mark.parametrize("shape", [(), (1,), (5, 2)])
def test_an_array_without_the_rows_is_refused(shape: tuple[int, ...]) -> None:
    with pytest.raises(ValueError, match="2, 3 or 4 rows"):
        from_lightcone(np.zeros(shape))


@pytest.mark.parametrize(
    ("t", "x", "expected"),
    [
        (5, 3, "timelike"),
        (-5, 3, "timelike"),
        (3, 5, "spacelike"),
        (0, 5, "spacelike"),
        (5, 5, "null"),
        (-5, 5, "null"),
        (0, 0, "same"),
    ],
)
def test_class_in_one_dimension(t: float, x: float, expected: str) -> None:
    assert classify(ORIGIN, to_lightcone(t, x)) == expected
    assert classify(to_lightcone(t, x), ORIGIN) == expected


@pytest.mark.parametrize(
    ("t", "r", "expected"),
    [
        (3.0, (2, 2, 1), "null"),
        (3.001, (2, 2, 1), "timelike"),
        (2.999, (2, 2, 1), "spacelike"),
        (0.0, (0, 0, 0), "same"),
        (5.0, (3, 4), "null"),
        (5.1, (3, 4), "timelike"),
        (4.9, (3, 4), "spacelike"),
    ],
)
def test_class_in_more_dimensions(t: float, r: tuple[float, ...], expected: str) -> None:
    origin = to_lightcone(0, *(0 for _ in r))
    assert classify(origin, to_lightcone(t, *r)) == expected


def test_a_difference_that_is_all_rounding_is_null() -> None:
    # 0.1 + 0.2 is one rounding away from 0.3
    first, second = [0.1 + 0.2, 1.0], [0.3, 2.0]
    assert classify(first, second) is IntervalClass.NULL
    assert classify([0.1 + 0.2, 1.0], [0.3, 1.0]) is IntervalClass.SAME


def test_a_difference_may_bring_a_larger_rounding_along() -> None:
    first, second = to_lightcone(100.1, 100.3), to_lightcone(100.4, 100.6)
    assert classify(first, second) is IntervalClass.TIMELIKE
    rounding = [4 * 2.0**-52 * 100.6, 4 * 2.0**-52 * 100.6]
    assert classify(first, second, rounding) is IntervalClass.NULL
    assert classify_many(first, second, rounding).tolist() is IntervalClass.NULL


def test_a_difference_beyond_rounding_is_not_null() -> None:
    late, early = to_lightcone(1e6 + 1e-6, 1e6), to_lightcone(0.0, 0.0)
    assert classify(early, late) is IntervalClass.TIMELIKE


def test_classes_of_many() -> None:
    others = to_lightcone([5.0, 3.0, 4.0, 0.0], [3.0, 5.0, 4.0, 0.0])
    assert classify_many(ORIGIN[:, np.newaxis], others).tolist() == [
        IntervalClass.TIMELIKE,
        IntervalClass.SPACELIKE,
        IntervalClass.NULL,
        IntervalClass.SAME,
    ]


def test_no_class_without_finite_coordinates() -> None:
    with pytest.raises(ValueError, match="finite"):
        classify(ORIGIN, [math.nan, 1.0])


def test_order() -> None:
    assert order(ORIGIN, to_lightcone(5, 3)) == 1
    assert order(ORIGIN, to_lightcone(-5, 3)) == -1
    assert order(ORIGIN, to_lightcone(5, -5)) == 1
    assert order(ORIGIN, to_lightcone(-5, -5)) == -1
    assert order(ORIGIN, to_lightcone(3, 5)) == 0
    assert order(ORIGIN, ORIGIN) == 0


def test_proper_time_and_distance() -> None:
    ends = to_lightcone([5.0, 3.0, 4.0], [3.0, 5.0, -4.0])
    origin = ORIGIN[:, np.newaxis]
    np.testing.assert_array_equal(interval_squared(origin, ends), [16.0, -16.0, 0.0])
    np.testing.assert_array_equal(proper_time(origin, ends), [4.0, np.nan, 0.0])
    np.testing.assert_array_equal(proper_distance(origin, ends), [np.nan, 4.0, 0.0])


def test_proper_time_with_transverse_steps() -> None:
    assert float(proper_time(to_lightcone(0, 0, 0, 0), to_lightcone(9, 4, 4, 7))) == 0.0
    assert float(proper_time(to_lightcone(0, 0, 0), to_lightcone(13, 3, 4))) == 12.0
    assert float(proper_distance(to_lightcone(0, 0, 0), to_lightcone(5, 5, 12))) == 12.0
