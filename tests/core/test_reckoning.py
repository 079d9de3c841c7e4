"""Happened, seen and reckoned: three descriptions, each by its own convention."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tauline.meetings import receptions
from tauline.meetings.reckoning import comoving, horizon, radar
from tauline.worldlines import Chain, Coast, ConstantAcceleration, chain, rigid_companion

events = st.tuples(st.floats(-5, 5), st.floats(-5, 5)).map(np.array)


@given(events, st.floats(-3, 3))
def test_for_a_coasting_observer_both_conventions_are_the_frame(
    point: np.ndarray, phi: float
) -> None:
    observer = Coast(point=np.array([0.3, -0.2]), start_rapidity=phi, start=-math.inf)
    u, v = (point - observer.point) * np.exp([phi, -phi])
    (moving,) = comoving(observer, point)
    echo = radar(observer, point)
    assert echo is not None
    for reckoned in (moving, echo):
        assert reckoned.tau == pytest.approx(0.5 * (u + v), rel=1e-9, abs=1e-9)
        assert reckoned.distance == pytest.approx(0.5 * (v - u), rel=1e-9, abs=1e-9)


def rocket(a: float = 1.0) -> ConstantAcceleration:
    return ConstantAcceleration(
        point=np.array([-1.0 / a, 1.0 / a]),
        start_rapidity=0.0,
        proper_acceleration=a,
        start=-math.inf,
    )


@given(st.floats(-0.9, 3), st.floats(-2, 2), st.sampled_from([1.0, -0.5, 2.0]))
def test_a_rigid_companion_is_reckoned_at_its_distance(share: float, tau: float, a: float) -> None:
    lead, distance = rocket(a), share / a
    companion = rigid_companion(lead, distance).line
    assert companion is not None
    place = companion.event(tau * (1.0 + a * distance))
    (found,) = comoving(lead, place)
    assert found.tau == pytest.approx(tau, rel=1e-9, abs=1e-9)
    assert found.distance == pytest.approx(distance, rel=1e-9, abs=1e-9)


@given(st.floats(0.1, 5), st.floats(-1.5, 1.5))
def test_radar_of_an_accelerated_observer(x: float, tau: float) -> None:
    """Radar distance (1/a) ln(x a) at distance x from the event all its lines pass through.

    The logarithm of the Rindler coordinate (W. Rindler, Relativity, 2nd ed., §12.4, from memory).
    """
    observer = rocket()
    place = x * np.array([-math.exp(-tau), math.exp(tau)])
    echo = radar(observer, place)
    assert echo is not None
    assert echo.tau == pytest.approx(tau, abs=1e-9)
    assert echo.distance == pytest.approx(math.log(x), abs=1e-9)
    (moving,) = comoving(observer, place)
    assert moving.tau == pytest.approx(tau, abs=1e-9)
    assert moving.distance == pytest.approx(x - 1.0, abs=1e-9)


@pytest.mark.parametrize("place", [(2.0, 0.5), (-0.5, -3.0), (0.1, -0.1)])
def test_beyond_the_horizon_nothing_is_reckoned(place: tuple[float, float]) -> None:
    assert comoving(rocket(), np.array(place)) == ()
    assert radar(rocket(), np.array(place)) is None


def turner(phi: float = math.atanh(0.6)) -> Chain:
    out = Coast(point=np.zeros(2), start_rapidity=phi, end=4.0)
    return chain([out, Coast(point=out.event(4.0), start_rapidity=-phi, end=4.0)])


def test_a_corner_skips_what_lies_on_the_turning_side() -> None:
    """At home, t = 3.2 to 6.8 yr is nobody's now: the jump of 0.6 c at 5 yr, 3 ly away."""
    line = turner()
    assert comoving(line, np.array([5.0, 5.0])) == ()
    assert len(comoving(line, np.array([3.0, 3.0]))) == 1


def test_a_corner_counts_twice_what_lies_on_the_other_side() -> None:
    far = np.array([5.0 - 8.0, 5.0 + 8.0])
    both = comoving(turner(), far)
    assert [branch.tau for branch in both] == sorted(branch.tau for branch in both)
    assert len(both) == 2


@given(st.floats(0.1, 3), st.floats(-1, 1), st.floats(-2, 2))
def test_light_is_received_just_below_the_horizon_and_not_above(
    a: float, phi: float, x: float
) -> None:
    line = ConstantAcceleration(
        point=np.array([0.4, 0.1]), start_rapidity=phi, proper_acceleration=a
    )
    limit, other = horizon(line)
    assert math.isinf(other)
    below, above = limit - 1e-9, limit + 1e-9
    start = float(line.point[1])
    assert not np.isnan(receptions(line, [below, min(start, below + 2 * x)]).tau)
    assert np.isnan(receptions(line, [above, above + abs(x)]).tau) or above + abs(x) < start


def test_a_line_that_ends_or_coasts_has_no_horizon() -> None:
    assert horizon(Coast(point=np.zeros(2), start_rapidity=1.0)) == (math.inf, math.inf)
    ended = ConstantAcceleration(
        point=np.zeros(2), start_rapidity=0.0, proper_acceleration=1.0, end=2.0
    )
    assert horizon(ended) == (math.inf, math.inf)
