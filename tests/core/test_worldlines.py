"""Every kind of worldline keeps the one protocol: closed forms against quadrature and inverses."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad

from tauline.worldlines import Chain, Coast, ConstantAcceleration, Worldline, chain

rapidities = st.floats(-5, 5)
accelerations = st.floats(-3, 3).filter(lambda a: abs(a) > 1e-6)
durations = st.floats(0.01, 3)
coordinates = st.floats(-10, 10)


@st.composite
def coasts(draw: st.DrawFn) -> Coast:
    point = np.array([draw(coordinates), draw(coordinates)])
    return Coast(point=point, start_rapidity=draw(rapidities), end=draw(durations))


@st.composite
def accelerated(draw: st.DrawFn) -> ConstantAcceleration:
    point = np.array([draw(coordinates), draw(coordinates)])
    return ConstantAcceleration(
        point=point,
        start_rapidity=draw(rapidities),
        proper_acceleration=draw(accelerations),
        end=draw(durations),
    )


@st.composite
def chains(draw: st.DrawFn) -> Chain:
    legs: list[Coast | ConstantAcceleration] = []
    point = np.array([draw(coordinates), draw(coordinates)])
    for _ in range(draw(st.integers(1, 4))):
        rapidity = draw(st.floats(-2, 2))
        if draw(st.booleans()):
            leg: Coast | ConstantAcceleration = Coast(
                point=point, start_rapidity=rapidity, end=draw(durations)
            )
        else:
            leg = ConstantAcceleration(
                point=point,
                start_rapidity=rapidity,
                proper_acceleration=draw(accelerations),
                end=draw(durations),
            )
        legs.append(leg)
        point = leg.event(leg.end)
    return chain(legs)


lines = st.one_of(coasts(), accelerated(), chains())


@given(lines, st.floats(0, 1))
def test_every_inverse_finds_the_proper_time(line: Worldline, share: float) -> None:
    tau = line.start + share * (line.end - line.start)
    event = line.event(tau)
    for found in (
        line.tau_at_u(event[0]),
        line.tau_at_v(event[1]),
        line.tau_on_plane(event, float(line.rapidity(tau))),
        line.tau_on_plane(event, 0.0),
    ):
        there = line.event(found)
        # compared as events: along a fast leg one null coordinate hardly tells the proper time
        assert np.allclose(there, event, rtol=1e-9, atol=1e-9)


@given(lines, st.floats(0, 1), st.floats(0, 1))
def test_u_and_v_only_grow(line: Worldline, one: float, other: float) -> None:
    early, late = sorted((one, other))
    span = line.end - line.start
    if late - early < 1e-3:
        return
    first, second = line.event(early * span), line.event(late * span)
    assert np.all(second >= first)


@given(accelerated(), st.floats(0.1, 1))
def test_proper_time_is_the_integral_over_coordinate_time(
    line: ConstantAcceleration, share: float
) -> None:
    """∫ √(1 − β²) dt, by scipy's adaptive quadrature, β from the velocity in coordinate time."""
    tau = share * line.end
    first, last = (0.5 * float(line.event(t).sum()) for t in (0.0, tau))
    a, phi = line.proper_acceleration, line.start_rapidity

    def rate(t: float) -> float:
        # dx/dt of hyperbolic motion: the momentum per mass grows as sinh φ + a t
        momentum = math.sinh(phi) + a * (t - first)
        return 1.0 / math.hypot(1.0, momentum)

    elapsed, _ = quad(rate, first, last, epsabs=1e-12, epsrel=1e-12, limit=200)
    assert elapsed == pytest.approx(tau, rel=1e-8, abs=1e-10)


@given(accelerated(), st.floats(0.05, 0.95))
def test_derivatives_give_velocity_and_acceleration(
    line: ConstantAcceleration, share: float
) -> None:
    tau, step = share * line.end, 1e-5
    after, before = line.event(tau + step), line.event(tau - step)
    u_rate, v_rate = (after - before) / (2 * step)
    assert 0.5 * math.log(v_rate / u_rate) == pytest.approx(float(line.rapidity(tau)), abs=1e-4)
    assert u_rate * v_rate == pytest.approx(1.0, rel=1e-3)


@given(st.floats(-2, 2), st.floats(1e-14, 1e-9), st.floats(0.1, 5))
def test_a_vanishing_acceleration_is_coasting(phi: float, a: float, tau: float) -> None:
    point = np.array([0.3, -0.2])
    pushed = ConstantAcceleration(point=point, start_rapidity=phi, proper_acceleration=a)
    free = Coast(point=point, start_rapidity=phi)
    # they part by ½ a τ² e^{±φ}
    apart = a * tau**2 * math.exp(abs(phi))
    assert np.allclose(pushed.event(tau), free.event(tau), rtol=1e-12, atol=apart)
    assert np.allclose(pushed.tau_on_plane([1.0, 2.0], 0.4), free.tau_on_plane([1.0, 2.0], 0.4))


@given(chains())
def test_legs_join_and_corners_are_where_the_velocity_jumps(line: Chain) -> None:
    for before, offset in zip(line.legs, line.offsets[1:], strict=False):
        jump = abs(float(line.rapidity(offset, "after")) - float(line.rapidity(offset, "before")))
        assert (offset in line.corners) == (jump > 1e-11)
        assert np.allclose(line.event(offset), before.event(before.end), rtol=1e-14, atol=0)


@given(chains(), st.floats(1e-4, 1e-1))
def test_chords_stay_within_the_tolerance(line: Chain, tolerance: float) -> None:
    taus = line.samples(line.start, line.end, tolerance, 0.0)
    points = line.event(taus)
    middles = line.event(0.5 * (taus[1:] + taus[:-1]))
    chords = points[:, 1:] - points[:, :-1]
    offsets = middles - points[:, :-1]
    # (t, x) = ((u + v)/2, (v − u)/2) is a rotation of (u, v)/√2: distances scale by √2
    across = np.abs(chords[0] * offsets[1] - chords[1] * offsets[0]) / np.hypot(*chords)
    assert np.all(across / math.sqrt(2) <= tolerance * 1.01 + 1e-12)


@given(lines)
def test_outside_the_span_there_is_nothing(line: Worldline) -> None:
    assert np.all(np.isnan(line.event([line.start - 0.1, line.end + 0.1])))
    beyond = line.event(line.end) + 1.0
    assert np.isnan(line.tau_at_u(beyond[0]))
    assert np.isnan(line.tau_at_v(beyond[1]))
    assert np.isnan(line.tau_on_plane(beyond, 0.0))


def test_the_end_of_the_line_is_on_the_line() -> None:
    line = Coast(point=np.array([0.1, 0.7]), start_rapidity=math.atanh(0.6), end=4.0)
    u, v = line.event(4.0)
    assert float(line.tau_at_u(u)) == 4.0
    assert float(line.tau_at_v(np.nextafter(v, 99))) == 4.0


def test_horizon_of_an_accelerating_line() -> None:
    """Light of the horizon event at a distance 1/a behind never gets there."""
    line = ConstantAcceleration(
        point=np.array([-1.0, 1.0]), start_rapidity=0.0, proper_acceleration=1.0
    )
    assert np.isnan(line.tau_at_u(0.0))
    assert float(line.tau_at_u(-1e-12)) == pytest.approx(math.log(1e12))


def test_scalars_and_arrays_agree() -> None:
    line = chain(
        [
            Coast(point=np.zeros(2), start_rapidity=0.5, end=1.0),
            Coast(point=np.exp([-0.5, 0.5]), start_rapidity=-0.5),
        ]
    )
    taus = np.array([[0.0, 0.5], [1.0, 3.0]])
    grid = line.event(taus)
    assert grid.shape == (2, 2, 2)
    assert np.array_equal(grid[:, 1, 1], line.event(3.0))
    assert np.array_equal(line.tau_on_plane(grid, 0.2)[1, 1], line.tau_on_plane(grid[:, 1, 1], 0.2))


def test_only_the_last_leg_may_be_endless() -> None:
    endless = Coast(point=np.zeros(2), start_rapidity=0.0)
    with pytest.raises(ValueError, match="only the last leg"):
        chain([endless, endless])
