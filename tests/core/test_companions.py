"""Lines that keep with another one: rigidly, and by the same programme."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tauline.worldlines import Chain, Coast, ConstantAcceleration, chain
from tauline.worldlines.companion import displaced, rigid_companion

distances = st.floats(-0.3, 2.0).filter(lambda s: abs(s) > 1e-3)


@st.composite
def smooth_lines(draw: st.DrawFn) -> Chain:
    """Legs without corners, accelerations up to 2, so that 0.3 behind is still rigid."""
    legs: list[Coast | ConstantAcceleration] = []
    point, phi = np.array([0.5, -0.25]), draw(st.floats(-1, 1))
    for _ in range(draw(st.integers(1, 4))):
        duration, a = draw(st.floats(0.1, 1.5)), draw(st.sampled_from([0.0, 1.0, -2.0, 0.5]))
        if a == 0.0:
            leg: Coast | ConstantAcceleration = Coast(point=point, start_rapidity=phi, end=duration)
        else:
            leg = ConstantAcceleration(
                point=point, start_rapidity=phi, proper_acceleration=a, end=duration
            )
        legs.append(leg)
        point, phi = leg.event(duration), phi + a * duration
    return chain(legs)


@given(smooth_lines(), distances, st.floats(0, 1))
def test_the_proper_distance_stays(line: Chain, distance: float, share: float) -> None:
    """On the line's own simultaneity line the companion is at that distance, and at rest."""
    made = rigid_companion(line, distance)
    if made.line is None or math.isfinite(made.breaks_at):
        return
    tau = share * line.end
    here, phi = line.event(tau), float(line.rapidity(tau))
    own = float(made.line.tau_on_plane(here, phi))
    du, dv = made.line.event(own) - here
    assert du * math.exp(phi) == pytest.approx(-distance, rel=1e-8)
    assert dv * math.exp(-phi) == pytest.approx(distance, rel=1e-8)
    assert float(made.line.rapidity(own)) == pytest.approx(phi, abs=1e-7)


@given(smooth_lines(), distances)
def test_the_clocks_differ_by_the_distance_times_the_change_of_rapidity(
    line: Chain, distance: float
) -> None:
    made = rigid_companion(line, distance)
    if made.line is None or math.isfinite(made.breaks_at):
        return
    change = float(line.rapidity(line.end) - line.rapidity(0.0))
    assert made.line.end == pytest.approx(line.end + distance * change, rel=1e-12, abs=1e-12)


def test_rod_of_one_rindler_length() -> None:
    """Tail at 1/a = 1, nose at 2: the nose accelerates half as much, its clock runs twice.

    Rindler, Relativity, 2nd ed., §3.8 (from memory).
    """
    tail = ConstantAcceleration(
        point=np.array([-1.0, 1.0]), start_rapidity=0.0, proper_acceleration=1.0, end=1.5
    )
    made = rigid_companion(tail, 1.0)
    assert made.line is not None
    assert float(made.line.acceleration(0.1)) == pytest.approx(0.5, rel=1e-15)
    assert made.line.end == pytest.approx(3.0, rel=1e-15)


def test_behind_the_acceleration_there_is_a_limit() -> None:
    lead = chain(
        [
            Coast(point=np.zeros(2), start_rapidity=0.0, end=2.0),
            ConstantAcceleration(
                point=np.array([2.0, 2.0]), start_rapidity=0.0, proper_acceleration=0.5
            ),
        ]
    )
    assert math.isinf(rigid_companion(lead, -1.99).breaks_at)
    broken = rigid_companion(lead, -2.0)
    assert (broken.breaks_at, broken.limit) == (2.0, 2.0)
    assert broken.line is not None
    assert broken.line.end == 2.0


def test_a_corner_breaks_it() -> None:
    out = Coast(point=np.zeros(2), start_rapidity=0.5, end=2.0)
    lead = chain([out, Coast(point=out.event(2.0), start_rapidity=-0.5)])
    broken = rigid_companion(lead, 0.1)
    assert broken.breaks_at == 2.0
    assert math.isnan(broken.limit)


@given(smooth_lines(), distances, st.floats(-1, 1))
def test_the_same_programme_elsewhere(line: Chain, distance: float, phi: float) -> None:
    other = displaced(line, distance, phi)
    taus = np.linspace(0.0, line.end, 7)
    step = other.event(taus) - line.event(taus)
    assert np.allclose(step[0] * math.exp(phi), -distance, rtol=1e-9)
    assert np.allclose(step[1] * math.exp(-phi), distance, rtol=1e-9)
    assert np.array_equal(other.rapidity(taus), line.rapidity(taus))
