"""Worldlines: from what the author wrote to a curve, and to the clock carried along it."""

from __future__ import annotations

import math

import msgspec

from tauline.resolve.context import Context, Line, tau_of
from tauline.resolve.itinerary import itinerary_path
from tauline.resolve.memo import Fault
from tauline.resolve.results import FrameResult, Point, WorldlineResult
from tauline.scenario.objects import (
    CoastLine,
    CompanionLine,
    DisplacedLine,
    Itinerary,
    LineEnd,
    RestLine,
    Worldline,
)
from tauline.scenario.units import LENGTH, TIME
from tauline.worldlines import Coast, displaced, rigid_companion


def path(context: Context, thing: Worldline) -> Line:
    """Work out a worldline's curve."""
    match thing:
        case Itinerary():
            return itinerary_path(context, thing)
        case CompanionLine():
            return _companion(context, thing)
        case DisplacedLine():
            frame = context.frame(thing.frame, "frame")
            by = context.quantity(thing.by, LENGTH, "by")
            return displaced(context.path(thing.displaced, "displaced"), by, frame.rapidity)
        case RestLine():
            frame = context.frame(thing.frame, "frame")
            x = context.quantity(thing.x, LENGTH, "x")
            line = Coast(
                point=context.point(0.0, x, frame),
                start_rapidity=frame.rapidity,
                start=-math.inf,
            )
        case CoastLine():
            frame = context.frame(thing.frame, "frame")
            rapidity = context.rapidity(thing, "", frame)
            line = Coast(
                point=context.event(thing.through, "through").point,
                start_rapidity=frame.rapidity if rapidity is None else rapidity,
                start=-math.inf,
            )
    return _cut(context, line, thing.start, thing.end)


def _companion(context: Context, thing: CompanionLine) -> Line:
    lead = context.path(thing.companion, "companion")
    made = rigid_companion(lead, context.quantity(thing.distance, LENGTH, "distance"))
    if math.isinf(made.breaks_at):
        assert made.line is not None
        return made.line
    if math.isnan(made.limit):
        why = f"the velocity of '{thing.companion}' jumps"
    else:
        why = f"behind this acceleration there is room for less than {context.place(made.limit)}"
    if made.line is None:
        raise Fault("distance", f"nothing can keep this distance: {why}")
    t, x = context.coordinates(lead.event(made.breaks_at), context.base)
    context.note(
        thing.id,
        "distance",
        f"it breaks where '{thing.companion}' is at t = {context.time(t)}, x = {context.place(x)}"
        f" of frame '{context.base.id}': {why}",
    )
    return made.line


def worldline(context: Context, thing: Worldline, observer: int) -> WorldlineResult:
    """Set the clock of a worldline."""
    line = context.own_path(thing.id)
    return WorldlineResult(
        id=thing.id,
        label=thing.label,
        line=line,
        clock_offset=_clock_offset(context, thing, line),
        observer=observer,
    )


def _clock_offset(context: Context, thing: Worldline, line: Line) -> float:
    clock = thing.clock
    if clock is None:
        if math.isinf(line.start):
            raise Fault(
                "clock",
                "an endless worldline has no start to count its proper time from",
                'say what its clock reads where: clock = { reads = 0, at = "EVENT" }',
            )
        return -line.start
    reads = context.quantity(clock.reads, TIME, "clock.reads")
    if clock.at == "start":
        if isinstance(thing, Itinerary):
            return reads
        if math.isfinite(line.start):
            return reads - line.start
        if "start" not in context.objects:
            raise Fault(
                "clock.at", "this worldline has no start", 'name an event on it: at = "EVENT"'
            )
    event = context.event(clock.at, "clock.at")
    tau = tau_of(line, event.point)
    if math.isnan(tau):
        raise Fault("clock.at", f"the event '{clock.at}' does not lie on this worldline")
    return reads - tau


def _cut(context: Context, line: Coast, start: LineEnd | None, end: LineEnd | None) -> Coast:
    """Give an endless inertial line its ends; its proper time then counts from the start."""
    first = -math.inf if start is None else _tau_of_end(context, line, start, "start")
    last = math.inf if end is None else _tau_of_end(context, line, end, "end")
    if first >= last:
        raise Fault("end", "this worldline ends before it starts")
    if start is None:
        return msgspec.structs.replace(line, end=last)
    exact = context.event(start, "start").point if isinstance(start, str) else line.event(first)
    return Coast(point=exact, start_rapidity=line.start_rapidity, start=0.0, end=last - first)


def _tau_of_end(context: Context, line: Coast, end: LineEnd, key: str) -> float:
    if isinstance(end, str):
        tau = tau_of(line, context.event(end, key).point)
        if math.isnan(tau):
            raise Fault(
                key,
                f"the event '{end}' does not lie on this worldline",
                "name an event on it, or give a time: { time = … }",
            )
        return tau
    frame = context.frame(end.frame, f"{key}.frame")
    time = context.quantity(end.time, TIME, f"{key}.time")
    return float(line.tau_on_plane(context.point(time, 0.0, frame), frame.rapidity))


def rest_rapidity(line: Line, tau: float, side: str | None, key: str) -> float:
    """Rapidity of a line at τ; at a corner, the side must be named."""
    at_corner = any(
        math.isclose(tau, corner, rel_tol=1e-12, abs_tol=1e-12) for corner in line.corners
    )
    if at_corner and side is None:
        raise Fault(
            key,
            "the velocity jumps here, so there are two rest frames",
            'say which is meant: side = "before" or side = "after"',
        )
    return float(line.rapidity(tau, "before" if side == "before" else "after"))


def rapidity_of(
    context: Context,
    event_point: Point,
    frame: str | None,
    observer: str | None,
    side: str | None,
) -> tuple[float, FrameResult | None]:
    """Rapidity of the frame whose simultaneity is meant: a named one or an observer's."""
    if (frame is None) == (observer is None):
        raise Fault("frame", "simultaneity is that of one frame", "give either frame or observer")
    if observer is None:
        named = context.frame(frame, "frame")
        return named.rapidity, named
    line = context.path(observer, "observer")
    tau = tau_of(line, event_point)
    if math.isnan(tau):
        raise Fault("observer", f"'{observer}' is not at that event, so it has no say there")
    return rest_rapidity(line, tau, side, "side"), None
