"""The chart of an inertial frame: there and back, light at 45°, intervals unchanged."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tauline.charts.inertial import InertialChart

rapidities = st.floats(-12.0, 12.0)
numbers = st.floats(-1e6, 1e6)
places = st.tuples(numbers, numbers)


def chart_of(rapidity: float, origin: tuple[float, float]) -> InertialChart:
    return InertialChart(rapidity, np.array(origin))


@given(rapidities, places, places)
def test_there_and_back(
    rapidity: float, origin: tuple[float, float], at: tuple[float, float]
) -> None:
    chart = chart_of(rapidity, origin)
    point = np.array(at)
    back = chart.from_chart(chart.to_chart(point))
    # (u, v) → (x, t) → (u, v) rounds at the larger of u′ and v′, stretched on the way back
    size = np.sum(np.abs(chart.light_cone(point))) * np.exp(abs(rapidity)) + np.max(np.abs(origin))
    np.testing.assert_allclose(back, point, rtol=0.0, atol=4e-16 * size + 1e-300)


@given(rapidities, places, places, st.floats(1e-3, 1e3), st.sampled_from([0, 1]))
def test_light_runs_at_45_degrees(
    rapidity: float, origin: tuple[float, float], at: tuple[float, float], far: float, row: int
) -> None:
    """Along a ray u or v is constant, to the last bit, in every frame."""
    chart = chart_of(rapidity, origin)
    ends = np.array([at, at]).T
    ends[1 - row, 1] += far
    shown = chart.light_cone(ends)
    assert shown[row, 0] == shown[row, 1]


@given(rapidities, places, places, places)
def test_intervals_are_those_of_the_base_frame(
    rapidity: float,
    origin: tuple[float, float],
    first: tuple[float, float],
    second: tuple[float, float],
) -> None:
    chart = chart_of(rapidity, origin)
    du, dv = np.subtract(first, second)
    shown = chart.light_cone(np.array([first, second]).T)
    du_shown, dv_shown = shown[:, 0] - shown[:, 1]
    size = (np.abs(first) + np.abs(second) + np.abs(origin)).prod()
    total = sum(np.abs(np.concatenate([first, second, origin]))) ** 2
    assert du_shown * dv_shown == pytest.approx(du * dv, rel=0.0, abs=1e-14 * (size + total))


def test_the_zero_is_the_origin_event() -> None:
    chart = chart_of(0.8, (3.0, -2.0))
    assert chart.to_chart(np.array([3.0, -2.0])).tolist() == [0.0, 0.0]
    assert chart.from_chart([0.0, 0.0]).tolist() == [3.0, -2.0]


def test_a_body_at_rest_in_the_frame_keeps_its_place() -> None:
    """β = 3/5: t = 5, x = 3 is t′ = 4, x′ = 0 (γ = 5/4)."""
    chart = chart_of(np.arctanh(0.6), (0.0, 0.0))
    x, t = chart.to_chart(np.array([5.0 - 3.0, 5.0 + 3.0]))
    assert (x, t) == (pytest.approx(0.0, abs=1e-15), pytest.approx(4.0))


def test_arrays_of_any_shape_go_through() -> None:
    chart = chart_of(0.3, (1.0, 1.0))
    points = np.arange(24.0).reshape(2, 3, 4)
    shown = chart.to_chart(points)
    assert shown.shape == points.shape
    np.testing.assert_allclose(chart.from_chart(shown), points, atol=1e-13)
