"""Readouts of one worldline, of two, and of a worldline with an event."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import cast

import numpy as np

from tauline.meetings import meetings, receptions
from tauline.readouts.pairs import COMPOSITION, DOPPLER, coordinates, rapidities_at
from tauline.readouts.readout import Readout, Working, format_number, readout
from tauline.resolve.context import Line
from tauline.resolve.results import EventResult, FrameResult, Resolved, WorldlineResult
from tauline.scenario.units import ACCELERATION, NUMBER, TIME, VELOCITY, UnitSystem
from tauline.spacetime import beta, gamma, one_minus_beta
from tauline.worldlines import legs_of


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
    seen = float(receptions(result.line, event.point).tau)
    yield _clock(units, f"clock of {name} when it sees it", result, seen, "", "never seen")


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
