"""Readouts of one worldline, of two, and of a worldline with an event."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import cast

import numpy as np

from tauline.meetings import comoving, horizon, meetings, radar, receptions
from tauline.readouts.pairs import COMPOSITION, DOPPLER, coordinates, rapidities_at
from tauline.readouts.readout import Readout, Working, format_number, readout
from tauline.resolve.context import Line
from tauline.resolve.results import EventResult, FrameResult, Resolved, WorldlineResult
from tauline.scenario.units import ACCELERATION, LENGTH, NUMBER, TIME, VELOCITY, UnitSystem
from tauline.spacetime import beta, gamma, one_minus_beta
from tauline.worldlines import legs_of

SEEN = "Rindler, Relativity, 2nd ed., §4.4 (section from memory)"
COMOVING = "Misner, Thorne & Wheeler, Gravitation (1973), §6.6 (section from memory)"
RADAR = "Bondi, Relativity and Common Sense (1964), ch. IX (from memory)"
HORIZON = "Rindler, Relativity, 2nd ed., §3.8 (section from memory)"


def worldline_readouts(
    resolved: Resolved, result: WorldlineResult, frame: FrameResult
) -> Iterator[Readout]:
    """Readings at the ends, elapsed times, and the velocity on each leg."""
    units = resolved.units
    line = cast(Line, result.line)
    if math.isfinite(line.start):
        reading = result.reading(line.start)
        yield readout(units, "clock at the start", "τ", reading, TIME)
    if math.isfinite(line.end):
        yield readout(units, "clock at the end", "τ", result.reading(line.end), TIME)
    if math.isfinite(line.end - line.start):
        first, last = (
            coordinates(EventResult(id="", label="", point=line.event(tau)), frame)[0]
            for tau in (line.start, line.end)
        )
        yield readout(units, "elapsed proper time", "Δτ", line.end - line.start, TIME)
        yield readout(units, "elapsed time", "Δt", last - first, TIME, frame=frame.label)
    legs = legs_of(line)
    for number, (_, leg) in enumerate(legs, start=1):
        where = f", leg {number}" if len(legs) > 1 else ""
        acceleration = leg.proper_acceleration
        if acceleration == 0.0:
            yield from velocity_readouts(units, leg.start_rapidity, frame, where)
            continue
        yield readout(units, f"proper acceleration{where}", "α", acceleration, ACCELERATION)
        if math.isfinite(leg.end):
            change = acceleration * leg.end
            yield readout(units, f"change of rapidity{where}", "Δφ", change, NUMBER)
    yield from _horizon(units, line)


def _horizon(units: UnitSystem, line: Line) -> Iterator[Readout]:
    """How far behind an endless acceleration light can still catch up."""
    if all(math.isinf(limit) for limit in horizon(line)):
        return
    _, leg = legs_of(line)[-1]
    distance = -1.0 / leg.proper_acceleration
    working = Working("ξ = −c²/a", HORIZON, f"a = {format_number(leg.proper_acceleration, 6)}")
    yield readout(units, "horizon, from the traveller", "ξ", distance, LENGTH, working=working)


def velocity_readouts(
    units: UnitSystem, rapidity: float, frame: FrameResult, where: str = ""
) -> Iterator[Readout]:
    """Velocity, γ and rapidity of something of this rapidity (in the base frame)."""
    relative = rapidity - frame.rapidity
    near_light = abs(relative) > 4.0
    if near_light:
        deficit = float(one_minus_beta(abs(relative)))
        yield readout(
            units, f"shortfall from c{where}", "1 − β", deficit, NUMBER, frame=frame.label
        )
    else:
        value = float(beta(relative))
        yield readout(units, f"velocity{where}", "v", value, VELOCITY, frame=frame.label)
    value = float(gamma(relative))
    yield readout(units, f"Lorentz factor{where}", "γ", value, NUMBER, frame=frame.label)
    yield readout(units, f"rapidity{where}", "φ", relative, NUMBER, frame=frame.label)


def observer_and_event(
    resolved: Resolved, result: WorldlineResult, event: EventResult, frame: FrameResult
) -> Iterator[Readout]:
    """What an observer's clock reads for an event: simultaneous in the frame, and when seen."""
    units = resolved.units
    name = result.label or result.id
    own = [p.proper_time for p in event.on if p.worldline == result.id]
    for reading in own:
        yield readout(units, f"clock of {name} there", "τ", reading, TIME)
        for rapidity, side in rapidities_at(result, reading):
            where = f" ({side} its corner)" if side else ""
            yield from velocity_readouts(units, rapidity, frame, where)
    if own:
        return
    same_time = float(result.line.tau_on_plane(event.point, frame.rapidity))
    yield _clock(units, f"clock of {name}, simultaneous", result, same_time, frame.label)
    yield from _seen(units, name, result, event)
    yield from _reckoned(units, name, result, event)


def _seen(
    units: UnitSystem, name: str, result: WorldlineResult, event: EventResult
) -> Iterator[Readout]:
    """When light of the event arrives, and how far off it then seems to have happened."""
    found = receptions(result.line, event.point)
    tau = float(found.tau)
    yield _clock(units, f"clock of {name} when it sees it", result, tau, "", "never seen")
    if math.isnan(tau):
        return
    phi = float(result.line.rapidity(tau))
    du, dv = (float(step) for step in result.line.event(tau) - event.point)
    # light comes from the side it goes away from
    distance = 0.5 * (du * math.exp(phi) - dv * math.exp(-phi))
    working = Working("x′ of the event in the rest frame at reception", SEEN)
    yield readout(units, f"place where {name} sees it", "x", distance, LENGTH, working=working)


def _reckoned(
    units: UnitSystem, name: str, result: WorldlineResult, event: EventResult
) -> Iterator[Readout]:
    """When and where the observer reckons the event, by each convention and every branch."""
    branches = comoving(cast(Line, result.line), event.point)
    working = Working("the event lies on the observer's momentary simultaneity line", COMOVING)
    for number, branch in enumerate(branches, start=1):
        which = f", {number} of {len(branches)}" if len(branches) > 1 else ""
        how = f"{name}, co-moving{which}"
        reading = result.reading(branch.tau)
        yield readout(units, f"reckoned time, {how}", "τ", reading, TIME, working=working)
        yield readout(units, f"reckoned place, {how}", "ξ", branch.distance, LENGTH)
    if not branches:
        note = "none: no momentary simultaneity line passes there"
        yield readout(units, f"reckoned time, {name}, co-moving", "τ", math.nan, TIME, note=note)
    echo = radar(cast(Line, result.line), event.point)
    if echo is None:
        note = "none: no light goes there and comes back"
        yield readout(units, f"radar time of {name}", "τ", math.nan, TIME, note=note)
        return
    working = Working("(τ₁ + τ₂)/2, (τ₂ − τ₁)/2", RADAR)
    reading = result.reading(echo.tau)
    yield readout(units, f"radar time of {name}", "τ", reading, TIME, working=working)
    yield readout(units, f"radar place of {name}", "x", echo.distance, LENGTH, working=working)


def _clock(
    units: UnitSystem,
    name: str,
    result: WorldlineResult,
    tau: float,
    frame: str,
    missing: str = "not on the worldline",
) -> Readout:
    return readout(units, name, "τ", result.reading(tau), TIME, frame=frame, note=missing)


def two_observers(
    resolved: Resolved, first: WorldlineResult, second: WorldlineResult, frame: FrameResult
) -> Iterator[Readout]:
    """Relative velocity of two observers: if both coast for good, else where they meet."""
    units = resolved.units
    names = f"{second.label or second.id} rel. to {first.label or first.id}"
    lines = cast(Line, first.line), cast(Line, second.line)
    if all(
        len(legs_of(line)) == 1 and not legs_of(line)[0][1].proper_acceleration for line in lines
    ):
        rapidities = [float(legs_of(line)[0][1].start_rapidity) for line in lines]
        relative = rapidities[1] - rapidities[0]
        yield _relative(units, f"velocity of {names}", relative)
        yield Readout(
            name="Doppler factor, receding | approaching",
            symbol="D",
            number=None,
            unit="",
            note=" | ".join(
                format_number(float(np.exp(sign * abs(relative))), 6) for sign in (-1, 1)
            ),
            working=Working("D = e^(∓φ)", DOPPLER, f"φ = {format_number(abs(relative), 6)}"),
        )
        closing = math.tanh(rapidities[1] - frame.rapidity) - math.tanh(
            rapidities[0] - frame.rapidity
        )
        yield readout(
            units, "difference of their velocities", "Δv", closing, VELOCITY, frame=frame.label
        )
        return
    for number, meeting in enumerate(meetings(*lines), start=1):
        if not math.isfinite(meeting.first):
            continue
        where = f" at meeting {number}"
        for result, tau in ((first, meeting.first), (second, meeting.second)):
            label = result.label or result.id
            yield readout(units, f"clock of {label}{where}", "τ", result.reading(tau), TIME)
        relative = float(lines[1].rapidity(meeting.second)) - float(
            lines[0].rapidity(meeting.first)
        )
        yield _relative(units, f"velocity of {names}{where}", relative)
    yield Readout(
        name="relative velocity elsewhere",
        symbol="v",
        number=None,
        unit="",
        note="select an event on each: it is between two stated points",
    )


def _relative(units: UnitSystem, name: str, relative: float) -> Readout:
    return readout(
        units,
        name,
        "v",
        float(beta(relative)),
        VELOCITY,
        working=Working(
            "β = (β₂ − β₁)/(1 − β₁β₂), that is φ = φ₂ − φ₁",
            COMPOSITION,
            f"φ = {format_number(relative, 6)}, γ = {format_number(float(gamma(relative)), 6)}",
        ),
    )
