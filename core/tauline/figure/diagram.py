"""(Resolved, view, scale, text metrics) → Drawing: the one picture all painters share."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from itertools import chain

import numpy as np

from tauline.figure import strokes as parts
from tauline.figure.axes import (
    AxisText,
    axes_of,
    axis_strokes,
    axis_texts,
    grid_strokes,
    hyperbola_strokes,
)
from tauline.figure.candidates import BESIDE, along_line, around_point, beside
from tauline.figure.caption import caption
from tauline.figure.cover import Cover, segments_of
from tauline.figure.drawing import Drawing, Fill, Label, Marker, Points, Role, Run, Stroke
from tauline.figure.labels import Placed, Request, keep_labels, leader_of, place_labels
from tauline.figure.measure import TextMeasure
from tauline.figure.sheets import body_fills, light_cone_parts
from tauline.figure.strokes import Scene
from tauline.figure.symbols import one_line
from tauline.figure.view import DiagramView
from tauline.resolve.results import EventResult, Resolved, SignalResult

_ToPage = Callable[[Points], Points]

EVENT_GAP, AXIS_GAP, LINE_GAP, CLOCK_GAP = 5.0, 5.0, 4.0, 5.0
TITLE_SLIDES = (0.0, 6.0, 12.0, 18.0, 26.0, 36.0, 48.0)

KEPT_OFF = frozenset(
    (
        Role.WORLDLINE,
        Role.SIGNAL,
        Role.SIMULTANEITY,
        Role.FRAME_AXIS,
        Role.OTHER_AXIS,
        Role.LIGHT_CONE_EDGE,
    )
)
"""Lines that labels keep off."""


def diagram(
    resolved: Resolved,
    view: DiagramView,
    scale: float,
    measure: TextMeasure,
    previous: Drawing | None = None,
    *,
    moving: bool = False,
) -> Drawing:
    """Draw a scenario.

    ``scale`` is the printed size, in points, of a diagram unit. ``previous`` is the drawing shown
    before, if any: labels stay in their places where these are still free. While ``moving`` they
    stay in any case, which takes half the time; draw once more when the motion is over.
    """
    scene = Scene(resolved, view, scale)
    axes = [axis for frame in (view.frame, *view.axes) for axis in axes_of(scene, frame)]
    own_axes = [axis for axis in axes if axis.primary]
    fills, strokes = _behind(scene)
    if "grid" in view.layers:
        strokes += grid_strokes(scene, own_axes)
    if "hyperbolas" in view.layers:
        strokes += hyperbola_strokes(scene, own_axes)
    for axis in reversed(axes):
        strokes += axis_strokes(scene, axis)
    strokes += _lines(scene)
    markers = list(_markers(scene))
    texts = [text for axis in axes for text in axis_texts(scene, axis)]
    requests = _requests(scene, texts, strokes, measure)
    if moving and previous is not None:
        placed = keep_labels(requests, previous.choices)
    else:
        placed = place_labels(
            requests,
            _cover(scene, strokes, markers),
            previous.choices if previous is not None else None,
        )
    labels, leaders = _set(scene, placed)
    return Drawing(
        window=view.window,
        scale=scale,
        fills=tuple(fills),
        strokes=(*strokes, *leaders),
        markers=tuple(markers),
        labels=labels,
        caption=caption(resolved, view) if "caption" in view.layers else (),
        title=one_line(resolved.scenario.title),
        choices={item.request.key: item.choice for item in placed},
    )


def _behind(scene: Scene) -> tuple[list[Fill], list[Stroke]]:
    fills: list[Fill] = []
    strokes: list[Stroke] = []
    if "light_cones" in scene.view.layers:
        for cone in scene.resolved.light_cones.values():
            shades, edges = light_cone_parts(scene, cone)
            fills += shades
            strokes += edges
    for body in scene.resolved.bodies.values():
        fills += body_fills(scene, body)
    return fills, strokes


def _lines(scene: Scene) -> Iterator[Stroke]:
    for thing in scene.resolved.simultaneities.values():
        yield from parts.simultaneity_strokes(scene, thing)
    if "signals" in scene.view.layers:
        for signal in signals_of(scene.resolved):
            yield from parts.signal_strokes(scene, signal)
    for line in scene.resolved.worldlines.values():
        yield from parts.worldline_strokes(scene, line)


def signals_of(resolved: Resolved) -> Iterator[SignalResult]:
    """All signals, those of pulses too."""
    groups = (group.signals for group in resolved.pulses.values())
    return chain(resolved.signals.values(), chain.from_iterable(groups))


def _markers(scene: Scene) -> Iterator[Marker]:
    for line in scene.resolved.worldlines.values():
        yield from parts.corner_markers(scene, line)
    for event in scene.resolved.events.values():
        if event.owner in scene.resolved.pulses:
            continue
        marker = parts.event_marker(scene, event)
        if marker is not None:
            yield marker


def _page_of(scene: Scene) -> _ToPage:
    """How a place of the diagram becomes one on the page, in points."""
    corner = np.array([scene.window.x0, scene.window.t0])

    def on_page(points: Points) -> Points:
        return np.asarray((points - corner) * scene.scale)

    return on_page


def _requests(
    scene: Scene, texts: Sequence[AxisText], strokes: Sequence[Stroke], measure: TextMeasure
) -> list[Request]:
    """All labels to be placed, the least free to move first.

    Numbers beside tilted lines come last: they can be spared.
    """
    on_page = _page_of(scene)
    titles = [text for text in texts if text.role is Role.AXIS_TITLE]
    own = [text for text in texts if text.role is Role.AXIS_NUMBER and text.primary]
    others = [text for text in texts if text.role is Role.AXIS_NUMBER and not text.primary]
    requests = [*_axis_requests(titles, measure, on_page), *_axis_requests(own, measure, on_page)]
    if "labels" in scene.view.layers:
        requests += _event_requests(scene, measure, on_page)
        requests += _line_requests(scene, strokes, measure, on_page)
    requests += _axis_requests(others, measure, on_page)
    if "clock_ticks" in scene.view.layers:
        requests += _clock_requests(scene, measure, on_page)
    return _without_doubles(requests)


def _cover(scene: Scene, strokes: Sequence[Stroke], markers: Sequence[Marker]) -> Cover:
    """What labels keep off."""
    w, on_page = scene.window, _page_of(scene)
    lines = [stroke for stroke in strokes if stroke.role in KEPT_OFF]
    obstacles = segments_of(on_page(stroke.points) for stroke in lines)
    dots = np.array([(*on_page(np.asarray(marker.at)), 3.5) for marker in markers]).reshape(-1, 3)
    return Cover(obstacles, dots, (w.width * scene.scale, w.height * scene.scale))


def _set(scene: Scene, placed: Sequence[Placed]) -> tuple[tuple[Label, ...], list[Stroke]]:
    """Labels as primitives, and the lines that lead to those that had to go far."""
    corner = np.array([scene.window.x0, scene.window.t0])
    labels = tuple(_label(item, corner, scene.scale) for item in placed)
    leaders = [
        Stroke(source=item.request.source, role=Role.LEADER, points=ends / scene.scale + corner)
        for item in placed
        if (ends := leader_of(item)) is not None
    ]
    return labels, leaders


def _without_doubles(requests: Sequence[Request]) -> list[Request]:
    """Leave out a clock's numbers that an axis along its worldline writes at the same places."""
    on_axes = [r for r in requests if r.role is Role.AXIS_NUMBER]

    def doubled(request: Request) -> bool:
        return request.role is Role.CLOCK_NUMBER and any(
            other.runs == request.runs and np.hypot(*(other.anchors - request.anchors)) < 2.0
            for other in on_axes
        )

    return [request for request in requests if not doubled(request)]


def _event_requests(scene: Scene, measure: TextMeasure, on_page: _ToPage) -> Iterator[Request]:
    for event in scene.resolved.events.values():
        place = scene.place(event.point)
        if event.owner or not scene.holds(place):
            continue
        runs = (Run(_event_name(event)),)
        size = measure.size(runs, Role.EVENT_LABEL)
        at = on_page(place)
        yield Request(
            source=event.id,
            role=Role.EVENT_LABEL,
            hue=-1,
            runs=runs,
            size=size,
            boxes=around_point(at, size, EVENT_GAP),
            anchors=at,
            leads=True,
        )


def _event_name(event: EventResult) -> str:
    return one_line(event.label) or event.id


def _line_requests(
    scene: Scene, strokes: Sequence[Stroke], measure: TextMeasure, on_page: _ToPage
) -> Iterator[Request]:
    longest: dict[str, Stroke] = {}
    for stroke in strokes:
        if stroke.role in (Role.WORLDLINE, Role.SIMULTANEITY):
            known = longest.get(stroke.source)
            if known is None or len(stroke.points) > len(known.points):
                longest[stroke.source] = stroke
    for source, stroke in longest.items():
        result = scene.resolved.worldlines.get(source)
        thing = result or scene.resolved.simultaneities[source]
        name = one_line(thing.label) or (thing.id if result is not None else "")
        if not name:
            continue
        runs = (Run(name),)
        size = measure.size(runs, Role.LINE_LABEL)
        boxes, anchors = along_line(on_page(stroke.points), size, LINE_GAP)
        yield Request(
            source=source,
            role=Role.LINE_LABEL,
            hue=stroke.hue,
            runs=runs,
            size=size,
            boxes=boxes,
            anchors=anchors,
        )


def _clock_requests(scene: Scene, measure: TextMeasure, on_page: _ToPage) -> Iterator[Request]:
    for number in parts.clock_numbers(scene):
        runs = (Run(number.text),)
        size = measure.size(runs, Role.CLOCK_NUMBER)
        at = on_page(number.at)
        yield Request(
            source=number.source,
            role=Role.CLOCK_NUMBER,
            hue=number.hue,
            runs=runs,
            size=size,
            boxes=beside(at, number.aside, size, CLOCK_GAP),
            anchors=at,
            optional=True,
            row=number.source,
            sides=BESIDE,
        )


def _axis_requests(
    texts: Sequence[AxisText], measure: TextMeasure, on_page: _ToPage
) -> Iterator[Request]:
    for text in texts:
        size = measure.size(text.runs, text.role)
        at = on_page(text.at)
        # an axis ends at the window's edge, so its title may slide back along it
        backs = TITLE_SLIDES if text.role is Role.AXIS_TITLE else (0.0,)
        boxes = np.vstack(
            [beside(at - back * text.along, text.aside, size, AXIS_GAP) for back in backs]
        )
        yield Request(
            source="",
            role=text.role,
            hue=text.hue,
            runs=text.runs,
            size=size,
            boxes=boxes,
            anchors=at,
            optional=text.role is Role.AXIS_NUMBER,
            row=text.axis if text.role is Role.AXIS_NUMBER else "",
            sides=BESIDE if text.role is Role.AXIS_NUMBER else (),
        )


def _label(item: Placed, corner: Points, scale: float) -> Label:
    at = item.anchor / scale + corner
    offset = item.corner - item.anchor
    return Label(
        source=item.request.source,
        role=item.request.role,
        hue=item.request.hue,
        at=(float(at[0]), float(at[1])),
        offset=(float(offset[0]), float(offset[1])),
        size=item.request.size,
        runs=item.request.runs,
        overlaps=item.overlaps,
    )
