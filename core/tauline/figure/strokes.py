"""The things of a scenario as strokes and markers in a window."""

from __future__ import annotations

import math
from collections.abc import Iterator

import msgspec
import numpy as np

from tauline.charts.inertial import InertialChart
from tauline.figure.clip import clip_polyline, clip_ray
from tauline.figure.drawing import Marker, Points, Role, Stroke, Window
from tauline.figure.symbols import frame_hue
from tauline.figure.ticks import step_for, tick_text, ticks_between
from tauline.figure.view import DiagramView
from tauline.resolve.results import (
    EventResult,
    Resolved,
    SignalResult,
    SimultaneityResult,
    WorldlineResult,
)
from tauline.scenario.units import TIME
from tauline.worldlines import Worldline

TOLERANCE = 0.03
"""Greatest distance, in points, of a drawn curve from the true one."""
CLOCK_TICK = 26.0
"""Least distance, in points, between the ticks of a clock."""
CLOCK_NUMBER = 56.0
"""Least distance, in points, between its numbers."""
TICK_LENGTH = 5.0


class Scene(msgspec.Struct, frozen=True):
    """A resolved scenario, the view of it, and the printed size of a diagram unit (points)."""

    resolved: Resolved
    view: DiagramView
    scale: float

    @property
    def chart(self) -> InertialChart:
        """Chart of the viewing frame."""
        return self.view.chart

    @property
    def window(self) -> Window:
        """The window."""
        return self.view.window

    def place(self, point: Points) -> Points:
        """Return (x, t) in the view of one event (u, v)."""
        return self.chart.to_chart(point[:, np.newaxis])[:, 0]

    def holds(self, place: Points) -> bool:
        """Whether a place (x, t) is in the window."""
        w = self.window
        return bool(w.x0 <= place[0] <= w.x1 and w.t0 <= place[1] <= w.t1)


def visible_span(
    line: Worldline, chart: InertialChart, window: Window
) -> tuple[float, float] | None:
    """Return the proper times between which a line is in the window's bounding diamond.

    That is u′ from t₀ − x₁ to t₁ − x₀ and v′ from t₀ + x₀ to t₁ + x₁; on a timelike line both
    only grow. None where it is never there.
    """
    corners = np.array(
        [
            [window.t0 - window.x1, window.t1 - window.x0],
            [window.t0 + window.x0, window.t1 + window.x1],
        ]
    )
    stretch = math.exp(chart.rapidity)
    bounds = corners * [[1.0 / stretch], [stretch]] + chart.origin[:, np.newaxis]
    first, last = line.start, line.end
    for row, ask in ((0, line.tau_at_u), (1, line.tau_at_v)):
        first = max(first, _crossing(line, ask(bounds[row, 0]), float(bounds[row, 0]), row))
        last = min(last, _crossing(line, ask(bounds[row, 1]), float(bounds[row, 1]), row))
    return (first, last) if first < last and math.isfinite(last - first) else None


def _crossing(line: Worldline, tau: Points, bound: float, row: int) -> float:
    """Proper time at a bound of u or v; ±inf where the whole line is on one side of it."""
    if not np.isnan(tau):
        return float(tau)
    somewhere = min(max(0.0, line.start), line.end)
    return -math.inf if float(line.event(somewhere)[row]) > bound else math.inf


def curve(scene: Scene, line: Worldline) -> tuple[Points, Points] | None:
    """Return proper times and places ``(N, 2)`` that draw a line through the window."""
    span = visible_span(line, scene.chart, scene.window)
    if span is None:
        return None
    taus = line.samples(*span, TOLERANCE / scene.scale, scene.view.frame.rapidity)
    return taus, scene.chart.to_chart(line.event(taus)).T


def worldline_strokes(scene: Scene, result: WorldlineResult) -> Iterator[Stroke]:
    """A worldline, the ticks of its clock, and marks at its corners."""
    drawn = curve(scene, result.line)
    if drawn is None:
        return
    for piece in clip_polyline(drawn[1], scene.window):
        yield Stroke(source=result.id, role=Role.WORLDLINE, hue=result.observer, points=piece)
    if "clock_ticks" in scene.view.layers:
        yield from _clock_ticks(scene, result)


def corner_markers(scene: Scene, result: WorldlineResult) -> Iterator[Marker]:
    """Marks where the velocity of a worldline jumps."""
    for corner in result.line.corners:
        place = scene.place(result.line.event(corner))
        if scene.holds(place):
            yield Marker(source=result.id, role=Role.CORNER, hue=result.observer, at=_pair(place))


class ClockNumber(msgspec.Struct, frozen=True, kw_only=True):
    """A reading to be written beside a tick of a clock; ``aside`` points across the line."""

    source: str
    hue: int
    at: Points
    aside: Points
    text: str


def clock_numbers(scene: Scene) -> Iterator[ClockNumber]:
    """The readings at the ticks of all clocks but those that agree with the view's t axis."""
    units = scene.resolved.units
    for result in scene.resolved.worldlines.values():
        found = _clock_places(scene, result, CLOCK_NUMBER)
        if found is None:
            continue
        readings, places, across, step = found
        shown = units.to_reader(step, TIME)
        for reading, place, aside in zip(readings, places, across, strict=True):
            agrees = aside[1] == 0.0 and abs(place[1] - reading) < 1e-6 * step
            if scene.holds(place) and not agrees:
                yield ClockNumber(
                    source=result.id,
                    hue=result.observer,
                    at=place,
                    aside=aside,
                    text=tick_text(units.to_reader(float(reading), TIME), shown),
                )


def _clock_ticks(scene: Scene, result: WorldlineResult) -> Iterator[Stroke]:
    """Short strokes across a worldline at 1-2-5 readings of the carried clock."""
    found = _clock_places(scene, result, CLOCK_TICK)
    if found is None:
        return
    for place, aside in zip(found[1], found[2], strict=True):
        if scene.holds(place):
            half = aside * (0.5 * TICK_LENGTH / scene.scale)
            yield Stroke(
                source=result.id,
                role=Role.CLOCK_TICK,
                hue=result.observer,
                points=np.array([place - half, place + half]),
            )


def _clock_places(
    scene: Scene, result: WorldlineResult, apart: float
) -> tuple[Points, Points, Points, float] | None:
    """Round readings of a clock, at least ``apart`` points apart, and the step between them.

    With them their places, and the unit vectors across the line there.
    """
    span = visible_span(result.line, scene.chart, scene.window)
    if span is None:
        return None
    units, line = scene.resolved.units, result.line
    relative = float(line.rapidity(0.5 * sum(span))) - scene.view.frame.rapidity
    printed = scene.scale * math.hypot(math.sinh(relative), math.cosh(relative))
    step = units.from_reader(step_for(units.to_reader(apart / printed, TIME)), TIME)
    readings = ticks_between(result.reading(span[0]), result.reading(span[1]), step)
    if readings.size == 0:
        return None
    taus = np.clip(readings - result.clock_offset, line.start, line.end)
    places = scene.chart.to_chart(line.event(taus)).T
    slopes = line.rapidity(taus) - scene.view.frame.rapidity
    # the line runs along (sinh, cosh) on the page; turned by a right angle
    across = np.stack([np.ones_like(slopes), -np.tanh(slopes)], axis=1)
    across /= np.hypot(*across.T)[:, np.newaxis]
    return readings, places, across, step


def signal_strokes(scene: Scene, signal: SignalResult) -> Iterator[Stroke]:
    """Light from emission to reception; to the window's edge where there is none."""
    towards = np.array([float(signal.towards), 1.0])
    if signal.sent is not None and signal.received is not None:
        ends = np.array([scene.place(signal.sent.point), scene.place(signal.received.point)])
        pieces = clip_polyline(ends, scene.window)
    elif signal.sent is not None:
        ray = clip_ray(scene.place(signal.sent.point), towards, scene.window)
        pieces = [] if ray is None else [ray]
    elif signal.received is not None:
        ray = clip_ray(scene.place(signal.received.point), -towards, scene.window)
        pieces = [] if ray is None else [ray[::-1]]
    else:
        pieces = []
    line = scene.resolved.worldlines.get(signal.source_line)
    hue = line.observer if line is not None else _hue_at(scene, signal.sent)
    source = signal.owner or signal.id
    for piece in pieces:
        yield Stroke(source=source, role=Role.SIGNAL, hue=hue, points=piece, arrow=0.5)


def _hue_at(scene: Scene, event: EventResult | None) -> int:
    """Colour of the first observer at an event: light has the colour of who sends it."""
    placed = scene.resolved.events.get(event.id) if event is not None else None
    if placed is None or not placed.on:
        return -1
    return scene.resolved.worldlines[placed.on[0].worldline].observer


def simultaneity_strokes(scene: Scene, thing: SimultaneityResult) -> Iterator[Stroke]:
    """The line of all events simultaneous with one, across the window."""
    relative = thing.rapidity - scene.view.frame.rapidity
    at = scene.place(thing.through.point)
    direction = np.array([math.cosh(relative), math.sinh(relative)])
    if thing.observer:
        hue = scene.resolved.worldlines[thing.observer].observer
    else:
        hue = frame_hue(scene.resolved, scene.resolved.frame(thing.frame))
    forward = clip_ray(at, direction, scene.window)
    back = clip_ray(at, -direction, scene.window)
    ends = [ray[end] for ray, end in ((back, 1), (forward, 1)) if ray is not None]
    if len(ends) == 1:
        only = forward if forward is not None else back
        assert only is not None
        ends = [only[0], only[1]]
    if ends:
        yield Stroke(source=thing.id, role=Role.SIMULTANEITY, hue=hue, points=np.array(ends))


def event_marker(scene: Scene, event: EventResult) -> Marker | None:
    """The dot of an event, in the colour of the last worldline it lies on."""
    place = scene.place(event.point)
    if not scene.holds(place):
        return None
    return Marker(source=event.id, role=Role.EVENT, at=_pair(place))


def _pair(place: Points) -> tuple[float, float]:
    return float(place[0]), float(place[1])
