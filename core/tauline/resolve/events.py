"""Events the author places: by coordinates, on worldlines, at meetings, by simultaneity."""

from __future__ import annotations

import math

import numpy as np

from tauline.meetings import meetings
from tauline.resolve.context import ROUNDING, Context, Line
from tauline.resolve.lines import rapidity_of
from tauline.resolve.memo import Fault
from tauline.resolve.results import EventResult, Point
from tauline.scenario.objects import (
    ClockEvent,
    CoordinateEvent,
    Event,
    FrameTimeEvent,
    MeetingEvent,
    SimultaneousEvent,
)
from tauline.scenario.units import LENGTH, TIME
from tauline.worldlines.span import within

COORDINATE_ROUNDING = 4 * np.finfo(np.float64).eps
"""Share of |t| + |x| by which t ∓ x may be off: both were rounded, and so was their difference."""

MAX_COORDINATE = 1e150
"""Beyond it the square of an interval leaves the range of numbers."""


def event(context: Context, thing: Event) -> EventResult:
    """Work out where an event is."""
    rounding = (0.0, 0.0)
    match thing:
        case CoordinateEvent():
            frame = context.frame(thing.frame, "frame")
            t = context.quantity(thing.t, TIME, "t")
            x = context.quantity(thing.x, LENGTH, "x")
            point = context.point(t, x, frame)
            # the roundings of t and x outlast the difference of the two
            stretch, size = math.exp(frame.rapidity), COORDINATE_ROUNDING * (abs(t) + abs(x))
            rounding = (size / stretch, size * stretch)
        case ClockEvent():
            point = _by_clock(context, thing)
        case FrameTimeEvent():
            point = _by_frame_time(context, thing)
        case MeetingEvent():
            point = _by_meeting(context, thing)
        case SimultaneousEvent():
            point = _by_simultaneity(context, thing)
    if not np.all(np.abs(point) <= MAX_COORDINATE):
        raise Fault(
            "",
            "it is too far away to be reckoned with",
            f"t ± x in the base frame goes up to {MAX_COORDINATE:g} {context.units.time}",
        )
    return EventResult(id=thing.id, label=thing.label, point=point, rounding=rounding)


def _by_clock(context: Context, thing: ClockEvent) -> Point:
    carrier = context.worldline(thing.on, "on")
    reading = context.quantity(thing.proper_time, TIME, "proper_time")
    wanted = np.asarray(reading - carrier.clock_offset)
    slack = ROUNDING * np.asarray(abs(reading) + abs(carrier.clock_offset))
    tau = float(within(wanted, slack, carrier.line.start, carrier.line.end))
    if math.isnan(tau):
        first = carrier.reading(carrier.line.start)
        last = carrier.reading(carrier.line.end)
        raise Fault(
            "proper_time",
            f"the clock of '{thing.on}' never reads {context.time(reading)}",
            f"it runs from {_span(context, first, last)}",
        )
    return carrier.line.event(tau)


def _by_frame_time(context: Context, thing: FrameTimeEvent) -> Point:
    line = context.path(thing.on, "on")
    frame = context.frame(thing.frame, "frame")
    time = context.quantity(thing.time, TIME, "time")
    tau = float(line.tau_on_plane(context.point(time, 0.0, frame), frame.rapidity))
    if math.isnan(tau):
        ends = (
            context.coordinates(line.event(end), frame)[0] if math.isfinite(end) else end
            for end in (line.start, line.end)
        )
        raise Fault(
            "time",
            f"'{thing.on}' does not exist at {context.time(time)} of frame '{frame.id}'",
            f"it exists from {_span(context, *ends)}",
        )
    return line.event(tau)


def _by_meeting(context: Context, thing: MeetingEvent) -> Point:
    names = thing.meeting
    first, second = (
        context.path(name, f"meeting[{number}]") for number, name in enumerate(names, start=1)
    )
    found = meetings(first, second)
    if any(math.isinf(meeting.first) for meeting in found):
        raise Fault("meeting", f"'{names[0]}' and '{names[1]}' are together from the endless past")
    places = [first.event(meeting.first) for meeting in found]
    if thing.after is not None:
        earlier = context.event(thing.after, "after").point
        places = [place for place in places if _later(place, earlier)]
    if not places:
        when = f" after '{thing.after}'" if thing.after else ""
        raise Fault("meeting", f"'{names[0]}' and '{names[1]}' never meet{when}")
    if thing.which == 0 or not -len(places) <= thing.which <= len(places):
        raise Fault(
            "which",
            f"there is no meeting number {thing.which}",
            f"they meet {len(places)} time{'s' if len(places) > 1 else ''}; count from 1, or from"
            " −1 backwards",
        )
    return places[thing.which - 1 if thing.which > 0 else thing.which]


def _by_simultaneity(context: Context, thing: SimultaneousEvent) -> Point:
    origin = context.event(thing.simultaneous_with, "simultaneous_with")
    rapidity, _ = rapidity_of(context, origin.point, thing.frame, thing.observer, thing.side)
    line: Line = context.path(thing.on, "on")
    tau = float(line.tau_on_plane(origin.point, rapidity))
    if math.isnan(tau):
        raise Fault(
            "simultaneous_with",
            f"no event of '{thing.on}' is simultaneous with '{thing.simultaneous_with}' there:"
            " the worldline has not begun or has ended",
        )
    return line.event(tau)


def _later(place: Point, earlier: Point) -> bool:
    size = float(max(np.max(np.abs(place)), np.max(np.abs(earlier))))
    step = place - earlier
    return bool(np.all(step >= -ROUNDING * size) and np.any(step > 1e-9 * size))


def _span(context: Context, first: float, last: float) -> str:
    start = "the endless past" if math.isinf(first) else context.time(first)
    end = "on without end" if math.isinf(last) else f"to {context.time(last)}"
    return f"{start} {end}"
