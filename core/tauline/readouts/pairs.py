"""Readouts of one event, and of two."""

from __future__ import annotations

import math
import sys
from collections.abc import Iterator

import numpy as np

from tauline.charts.inertial import InertialChart
from tauline.readouts.readout import Readout, Working, format_number, readout
from tauline.resolve.results import EventResult, FrameResult, Resolved, WorldlineResult
from tauline.scenario.units import LENGTH, TIME, VELOCITY
from tauline.spacetime import IntervalClass, beta, classify, doppler_factor, gamma

BOOST = "Rindler, Relativity, 2nd ed., §2.6 (section from memory)"
INTERVAL = "Taylor & Wheeler, Spacetime Physics, 2nd ed., ch. 1 (from memory)"
COMPOSITION = "Rindler, Relativity, 2nd ed., §3.6 (section from memory)"
DOPPLER = "Rindler, Relativity, 2nd ed., §4.3 (section from memory)"


def event_readouts(resolved: Resolved, event: EventResult, frame: FrameResult) -> Iterator[Readout]:
    """Coordinates in the frame, and what the clocks there read."""
    units = resolved.units
    t, x = coordinates(event, frame)
    working = Working(
        "t′ = γ(t − βx), x′ = γ(x − βt)", BOOST, f"β = {_short(float(beta(frame.rapidity)))}"
    )
    yield readout(units, "time", "t", t, TIME, frame=frame.label, working=working)
    yield readout(units, "place", "x", x, LENGTH, frame=frame.label, working=working)
    for placement in event.on:
        label = name_of(resolved, placement.worldline)
        yield readout(units, f"clock of {label}", "τ", placement.proper_time, TIME)


def pair_readouts(
    resolved: Resolved, first: EventResult, second: EventResult, frame: FrameResult
) -> Iterator[Readout]:
    """From the first event to the second: differences, interval, the frames it singles out."""
    units = resolved.units
    t1, x1 = coordinates(first, frame)
    t2, x2 = coordinates(second, frame)
    yield readout(units, "time difference", "Δt", t2 - t1, TIME, frame=frame.label)
    yield readout(units, "distance along x", "Δx", x2 - x1, LENGTH, frame=frame.label)
    du, dv = (float(step) for step in second.point - first.point)
    kind = interval_class(first, second)
    yield Readout(name="interval class", symbol="", number=None, unit="", note=describe(kind))
    working = Working("s² = Δt² − Δx² = Δu Δv", INTERVAL, f"Δu = {_short(du)}, Δv = {_short(dv)}")
    if kind is IntervalClass.TIMELIKE:
        yield readout(
            units, "proper time, straight", "Δτ", math.sqrt(du * dv), TIME, working=working
        )
        yield from _singled_out(resolved, "at one place", 0.5 * math.log(dv / du), frame)
    elif kind is IntervalClass.SPACELIKE:
        yield readout(units, "proper distance", "σ", math.sqrt(-du * dv), LENGTH, working=working)
        yield from _singled_out(resolved, "simultaneous", 0.5 * math.log(-dv / du), frame)
    for line in resolved.worldlines.values():
        yield from _along(resolved, line, first, second)
    yield from _between_observers(resolved, first, second, kind)


def interval_class(first: EventResult, second: EventResult) -> IntervalClass:
    """Class of the interval between two events, within the rounding of how they were given."""
    return classify(first.point, second.point, np.add(first.rounding, second.rounding))


def describe(kind: IntervalClass) -> str:
    """Say in a few words what an interval's class means."""
    return {
        IntervalClass.TIMELIKE: "timelike: one order in all frames",
        IntervalClass.SPACELIKE: "spacelike: the order depends on the frame",
        IntervalClass.NULL: "null: light goes from one to the other",
        IntervalClass.SAME: "the same event",
    }[kind]


def light_cone(event: EventResult, frame: FrameResult) -> tuple[float, float]:
    """Coordinates u, v of an event in a frame."""
    u, v = InertialChart(frame.rapidity, frame.origin).light_cone(event.point)
    return float(u), float(v)


def coordinates(event: EventResult, frame: FrameResult) -> tuple[float, float]:
    """Coordinates t, x of an event in a frame, in internal units.

    One that is 0 within the rounding of u and v is 0.
    """
    u, v = light_cone(event, frame)
    dust = 8.0 * sys.float_info.epsilon * (abs(u) + abs(v))
    t, x = 0.5 * (u + v), 0.5 * (v - u)
    return (t if abs(t) > dust else 0.0), (x if abs(x) > dust else 0.0)


def name_of(resolved: Resolved, object_id: str) -> str:
    """Label of an object, or its id."""
    thing = resolved.scenario.find(object_id)
    return thing.label or thing.id if thing is not None else object_id


def _singled_out(
    resolved: Resolved, what: str, rapidity: float, frame: FrameResult
) -> Iterator[Readout]:
    """The velocity, seen from the frame, of the frame in which two events are so related."""
    relative = rapidity - frame.rapidity
    yield readout(
        resolved.units,
        f"frame where they are {what}",
        "v",
        float(beta(relative)),
        VELOCITY,
        frame=frame.label,
        working=Working(
            "β = Δx/Δt (one place), β = Δt/Δx (simultaneous)",
            INTERVAL,
            f"rapidity {_short(relative)}",
        ),
    )


def _along(
    resolved: Resolved,
    line: WorldlineResult,
    first: EventResult,
    second: EventResult,
) -> Iterator[Readout]:
    """Proper time elapsed along a worldline on which both events lie."""
    readings = [
        placement.proper_time
        for event in (first, second)
        for placement in event.on
        if placement.worldline == line.id
    ]
    if len(readings) != 2:
        return
    elapsed = readings[1] - readings[0]
    yield readout(
        resolved.units,
        f"elapsed on {line.label or line.id}",
        "Δτ",
        elapsed,
        TIME,
        working=Working(
            "Δτ = ∫ √(1 − β²) dt",
            "Taylor & Wheeler, Spacetime Physics, 2nd ed., ch. 5 (from memory)",
            f"from {_short(readings[0])} to {_short(readings[1])} {resolved.units.time}",
        ),
    )


def _between_observers(
    resolved: Resolved, first: EventResult, second: EventResult, kind: IntervalClass
) -> Iterator[Readout]:
    """Relative velocity of observers at the two events, and the Doppler factor of light."""
    for here in first.on:
        for there in second.on:
            if here.worldline == there.worldline:
                continue
            sender = resolved.worldlines[here.worldline]
            receiver = resolved.worldlines[there.worldline]
            names = f"{receiver.label or receiver.id} rel. to {sender.label or sender.id}"
            for phi_1, side_1 in rapidities_at(sender, here.proper_time):
                for phi_2, side_2 in rapidities_at(receiver, there.proper_time):
                    relative = phi_2 - phi_1
                    note = _sides(side_1, side_2)
                    yield readout(
                        resolved.units,
                        f"velocity of {names}{note}",
                        "v",
                        float(beta(relative)),
                        VELOCITY,
                        working=Working(
                            "β = (β₂ − β₁)/(1 − β₁β₂), that is φ = φ₂ − φ₁",
                            COMPOSITION,
                            f"φ₁ = {_short(phi_1)}, φ₂ = {_short(phi_2)};"
                            f" γ = {_short(float(gamma(relative)))}",
                        ),
                    )
                    if kind is IntervalClass.NULL:
                        yield _doppler(first, second, relative, note)


def _doppler(first: EventResult, second: EventResult, relative: float, note: str) -> Readout:
    du, dv = np.abs(second.point - first.point)
    towards = 1.0 if du < dv else -1.0
    earlier = float(np.sum(second.point - first.point))
    # the receiver moving along with the ray sees the source recede
    receding = towards * relative if earlier >= 0.0 else -towards * relative
    sender = first if earlier >= 0.0 else second
    receiver = second if earlier >= 0.0 else first
    return Readout(
        name=f"Doppler factor, {sender.label or sender.id} → {receiver.label or receiver.id}{note}",
        symbol="D",
        number=float(doppler_factor(receding)),
        unit="",
        working=Working(
            "D = f received / f emitted = e^(−φ), φ the rapidity of recession",
            DOPPLER,
            f"φ = {_short(receding)}",
        ),
    )


def rapidities_at(line: WorldlineResult, reading: float) -> tuple[tuple[float, str], ...]:
    """Rapidity where the clock reads so; before and after, at a corner."""
    tau = reading - line.clock_offset
    corner = any(math.isclose(tau, c, rel_tol=1e-12, abs_tol=1e-12) for c in line.line.corners)
    if not corner:
        return ((float(line.line.rapidity(tau)), ""),)
    return (
        (float(line.line.rapidity(tau, "before")), "before"),
        (float(line.line.rapidity(tau, "after")), "after"),
    )


def _sides(first: str, second: str) -> str:
    named = [f"{side} its corner" for side in (first, second) if side]
    return f" ({', '.join(named)})" if named else ""


def _short(number: float) -> str:
    return format_number(number, 6)
