"""Views: what is fitted, what is kept in place, and which frame one looks from."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tauline.charts.inertial import InertialChart
from tauline.errors import UnknownIdError
from tauline.figure.drawing import Window
from tauline.figure.rail import free_frame
from tauline.figure.view import default_view, fit_window, keep_pivot, window_for_aspect
from tauline.resolve import Resolved, resolve
from tauline.scenario.read import parse

TWO_EVENTS = """
tauline = 1
[[frame]]
id = "ground"
[[frame]]
id = "train"
velocity = "0.6 c"
[[event]]
id = "a"
t = 0
x = 0
[[event]]
id = "b"
t = 4
x = 1
[[view]]
id = "early"
frame = "ground"
t = [-1, 2]
x = [-3, 3]
axes = ["train"]
"""


def resolved_of(text: str) -> Resolved:
    return resolve(parse(text).scenario)


@pytest.fixture(scope="module")
def two() -> Resolved:
    return resolved_of(TWO_EVENTS)


def test_an_empty_scenario_has_a_window() -> None:
    empty = resolved_of("tauline = 1")
    window = fit_window(empty, empty.base)
    assert window.width > 0.0
    assert window.height > 0.0
    assert window.x0 < 0.0 < window.x1


@pytest.mark.parametrize("place", [0.0, 3.0, -1e-9, 1e12])
def test_a_single_event_lies_well_inside_a_window_of_some_size(place: float) -> None:
    lone = resolved_of(f'tauline = 1\n[[event]]\nid = "a"\nt = 2.0e-3\nx = {place!r}')
    window = fit_window(lone, lone.base)
    assert window.x0 + 0.05 * window.width < place < window.x1 - 0.05 * window.width
    assert window.width > 1e-9 * abs(place)


@given(st.floats(-8.0, 8.0))
def test_everything_is_inside_what_is_fitted_from_every_frame(rapidity: float) -> None:
    two = resolved_of(TWO_EVENTS)
    frame = free_frame(two, rapidity)
    window = fit_window(two, frame)
    chart = InertialChart(frame.rapidity, frame.origin)
    for event in two.events.values():
        x, t = chart.to_chart(event.point)
        assert window.x0 < x < window.x1
        assert window.t0 < t < window.t1


def test_endless_lines_do_not_widen_it(two: Resolved) -> None:
    text = TWO_EVENTS + '[[worldline]]\nid = "w"\nthrough = "a"\nvelocity = "0.99 c"\n'
    endless = resolved_of(text)
    assert fit_window(endless, endless.base) == fit_window(two, two.base)


positive = st.floats(1e-3, 1e3)


@given(st.floats(-1e3, 1e3), positive, st.floats(-1e3, 1e3), positive, st.floats(0.05, 20.0))
def test_a_window_is_widened_never_cut(
    x0: float, width: float, t0: float, height: float, aspect: float
) -> None:
    window = Window(x0, x0 + width, t0, t0 + height)
    wider = window_for_aspect(window, aspect)
    slack = 1e-9 * (abs(x0) + width + abs(t0) + height)
    assert wider.width / wider.height == pytest.approx(aspect, rel=1e-6)
    assert wider.x0 <= window.x0 + slack
    assert wider.x1 >= window.x1 - slack
    assert wider.t0 <= window.t0 + slack
    assert wider.t1 >= window.t1 - slack
    fills = wider.width <= window.width + slack or wider.height <= window.height + slack
    assert fills


@given(st.floats(-3.0, 3.0), st.floats(-3.0, 3.0), st.floats(-5.0, 5.0), st.floats(-5.0, 5.0))
def test_a_pivot_stays_where_it_is(before: float, after: float, u: float, v: float) -> None:
    origin, pivot = np.array([1.0, 2.0]), np.array([u, v])
    old, new = InertialChart(before, origin), InertialChart(after, origin)
    window = Window(-2.0, 6.0, -1.0, 5.0)
    shifted = keep_pivot(window, pivot, old, new)
    x_old, t_old = old.to_chart(pivot)
    x_new, t_new = new.to_chart(pivot)
    assert x_new - shifted.x0 == pytest.approx(x_old - window.x0, abs=1e-10)
    assert t_new - shifted.t0 == pytest.approx(t_old - window.t0, abs=1e-10)
    assert shifted.width == pytest.approx(window.width)


def test_the_first_view_is_shown_unless_another_is_asked_for(two: Resolved) -> None:
    view = default_view(two)
    assert view.frame.id == "ground"
    assert view.window == Window(-3.0, 3.0, -1.0, 2.0)
    assert [frame.id for frame in view.axes] == ["train"]
    # from another frame the author's window does not hold
    other = default_view(two, "train")
    assert other.frame.rapidity == pytest.approx(math.atanh(0.6))
    assert other.window == fit_window(two, other.frame)
    assert other.axes == ()


def test_what_there_is_not_is_named_with_what_there_is(two: Resolved) -> None:
    with pytest.raises(UnknownIdError, match=r"'bus'.*ground, train"):
        default_view(two, "bus")
    with pytest.raises(UnknownIdError, match=r"'late'.*early"):
        default_view(two, None, "late")
