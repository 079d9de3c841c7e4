"""Where light and worldlines meet, against independent root finding."""

from __future__ import annotations

import math
from itertools import pairwise

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st
from scipy.optimize import brentq

from tauline.meetings import (
    emissions,
    meetings,
    receptions,
    why_no_emission,
    why_no_reception,
)
from tauline.worldlines import Coast, ConstantAcceleration, chain

small = st.floats(-2, 2)
places = st.tuples(small, small).map(np.array)


@st.composite
def endless(draw: st.DrawFn) -> Coast | ConstantAcceleration:
    point, rapidity = draw(places), draw(small)
    acceleration = draw(st.sampled_from([0.0, 0.3, -0.7, 1.5, -1e-9]))
    if acceleration == 0.0:
        return Coast(point=point, start_rapidity=rapidity, start=-math.inf)
    return ConstantAcceleration(
        point=point, start_rapidity=rapidity, proper_acceleration=acceleration, start=-math.inf
    )


@given(endless(), places)
def test_a_reception_lies_on_the_light_cone(
    line: Coast | ConstantAcceleration, point: np.ndarray
) -> None:
    found = receptions(line, point)
    if np.isnan(found.tau):
        # only a horizon keeps light from an endless line
        assert isinstance(line, ConstantAcceleration)
        assert "horizon" in why_no_reception(line, point)
        return
    du, dv = line.event(float(found.tau)) - point
    assert min(abs(du), abs(dv)) <= 1e-9 * (1 + abs(du) + abs(dv))
    assert max(du, dv) >= -1e-9
    assert found.towards == (1 if abs(du) <= abs(dv) else -1) or max(du, dv) < 1e-9


@given(endless(), places)
def test_an_emission_is_received_again(
    line: Coast | ConstantAcceleration, point: np.ndarray
) -> None:
    """Light sent from the line to an event, and an echo: there and back."""
    sent = emissions(line, point)
    assume(not np.isnan(sent.tau))
    start = line.event(float(sent.tau))
    watcher = Coast(point=point, start_rapidity=0.3, start=-math.inf)
    back = receptions(watcher, start)
    assert np.allclose(watcher.event(float(back.tau)), point, atol=1e-9)


@given(endless(), endless())
def test_meetings_are_on_both_lines(
    first: Coast | ConstantAcceleration, second: Coast | ConstantAcceleration
) -> None:
    found = meetings(first, second)
    for meeting in found:
        if math.isfinite(meeting.first):
            one, other = first.event(meeting.first), second.event(meeting.second)
            size = 1 + np.max(np.abs(one))
            assert np.all(np.abs(one - other) <= 1e-7 * size)
    # asked the other way round, the same; but rounding decides whether lines just touch
    mirrored = meetings(second, first)
    for meeting in found:
        if not math.isfinite(meeting.first):
            continue
        tilt = float(first.rapidity(meeting.first) - second.rapidity(meeting.second))
        if abs(tilt) > 1e-6:
            near = 1e-6 * (1 + abs(meeting.first))
            assert any(abs(other.second - meeting.first) < near for other in mirrored)


@given(st.floats(0.2, 2), st.floats(-1.5, 1.5), st.floats(-3, 3), st.floats(-0.8, 0.8))
def test_all_meetings_are_found(a: float, phi: float, x: float, beta: float) -> None:
    """A coasting line against hyperbolic motion, by sign changes and scipy's brentq."""
    rocket = ConstantAcceleration(
        point=np.zeros(2), start_rapidity=phi, proper_acceleration=a, start=-8.0 / a, end=8.0 / a
    )
    coaster = Coast(point=np.array([-x, x]), start_rapidity=math.atanh(beta), start=-math.inf)

    def separation(tau: float) -> float:
        u, v = rocket.event(tau)
        t, place = 0.5 * (u + v), 0.5 * (v - u)
        return float(place - x - beta * t)

    grid = np.linspace(-8.0 / a, 8.0 / a, 4001)
    values = np.array([separation(tau) for tau in grid])
    assume(np.min(np.abs(values)) > 0 and np.all(np.abs(values[[0, -1]]) > 1e-3))
    changes = np.flatnonzero(np.sign(values[1:]) != np.sign(values[:-1]))
    roots = [brentq(separation, grid[k], grid[k + 1], xtol=1e-13) for k in changes]
    # rounding decides whether lines just touch
    assume(all(later - root > 1e-6 for root, later in pairwise(roots)))
    found = [meeting.first for meeting in meetings(rocket, coaster)]
    # a touching pair between two grid points has no sign change: closed form may know more
    assert len(found) >= len(roots)
    for root in roots:
        assert min(abs(tau - root) for tau in found) < 1e-6


def test_a_shared_stretch_is_one_meeting() -> None:
    home = Coast(point=np.zeros(2), start_rapidity=0.0, start=-math.inf)
    resting = Coast(point=np.array([3.0, 3.0]), start_rapidity=0.0, end=2.0)
    (meeting,) = meetings(home, resting)
    assert meeting == (3.0, 0.0, 5.0)


def test_a_traveller_leaves_and_comes_back() -> None:
    """0.6 c out and back, 4 own years each way: home is 10 years older."""
    phi = math.atanh(0.6)
    out = Coast(point=np.zeros(2), start_rapidity=phi, end=4.0)
    traveller = chain([out, Coast(point=out.event(4.0), start_rapidity=-phi, end=5.0)])
    home = Coast(point=np.zeros(2), start_rapidity=0.0, start=-math.inf)
    leaving, coming = meetings(traveller, home)
    assert leaving[:2] == (0.0, 0.0)
    assert coming.first == pytest.approx(8.0, rel=1e-14)
    assert coming.second == pytest.approx(10.0, rel=1e-14)


def test_why_light_does_not_arrive() -> None:
    short = Coast(point=np.array([5.0, 5.0]), start_rapidity=0.0, end=1.0)
    assert "passed before" in why_no_reception(short, np.array([-3.0, 3.0]))
    assert "ends before" in why_no_reception(short, np.array([0.0, 20.0]))
    assert "starts too late" in why_no_emission(short, np.array([0.0, 5.0]))
    assert "has ended" in why_no_emission(short, np.array([30.0, 31.0]))


def test_many_events_at_once_agree_with_one_by_one() -> None:
    line = ConstantAcceleration(
        point=np.array([-1.0, 1.0]), start_rapidity=0.1, proper_acceleration=0.5, start=-math.inf
    )
    points = np.random.default_rng(7).uniform(-4, 4, size=(2, 50))
    together = receptions(line, points)
    for k in range(50):
        alone = receptions(line, points[:, k])
        assert np.array_equal(alone.tau, together.tau[k], equal_nan=True)
        assert alone.towards == together.towards[k]
