"""Drawings: right, within the window, finite, and the same each time."""

from __future__ import annotations

import math
from functools import cache
from itertools import combinations, pairwise

import msgspec
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tauline.charts.inertial import InertialChart
from tauline.figure.diagram import diagram
from tauline.figure.drawing import Drawing, Label, Role, Run, Stroke, Window
from tauline.figure.rail import free_frame
from tauline.figure.view import DiagramView, default_view, fit_window
from tauline.resolve import Resolved, resolve
from tauline.resources import scenarios_folder
from tauline.scenario.objects import Layer
from tauline.scenario.read import parse, read

ALL_LAYERS: frozenset[Layer] = frozenset(
    ("grid", "hyperbolas", "clock_ticks", "labels", "signals", "light_cones", "caption")
)
FEW = settings(max_examples=30)
"""A whole drawing takes some tens of milliseconds."""
SHIPPED = ("courier", "rod-and-shed", "three-beacons")

EVERYTHING = """
tauline = 1
[units]
time = "yr"
length = "ly"
[[frame]]
id = "harbour"
[[frame]]
id = "fast"
velocity = "0.5 c"
[[event]]
id = "o"
label = "Origin"
t = 0
x = 0
[[event]]
id = "p"
t = 3
x = 1
[[event]]
id = "q"
t = 8
x = 0
[[event]]
id = "far"
t = 0
x = -2
[[worldline]]
id = "home"
x = 0
start = "o"
end = "q"
[[worldline]]
id = "pole"
x = -2
clock = { reads = 5, at = "far" }
[[worldline]]
id = "twin"
start = "o"
[[worldline.leg]]
velocity = "0.6 c"
for = "3 yr"
[[worldline.leg]]
velocity = "-0.8 c"
for = "2 yr"
[[worldline.leg]]
acceleration = "1.2 ly/yr^2"
[[body]]
id = "sheet"
between = ["home", "pole"]
[[region]]
id = "cone"
light_cone = "p"
[[simultaneity]]
id = "now"
through = "p"
frame = "fast"
[[signal]]
id = "lost"
from = "q"
direction = "+x"
[[signal]]
id = "caught"
from = "q"
to = "twin"
"""


class EvenMeasure:
    """Every character is as wide as the next."""

    def size(self, runs: tuple[Run, ...], role: Role) -> tuple[float, float]:  # noqa: ARG002
        return 5.0 * sum(len(run.text) for run in runs), 8.0


@cache
def all_kinds() -> Resolved:
    resolved = resolve(parse(EVERYTHING).scenario)
    assert resolved.faults == ()
    return resolved


@pytest.fixture
def everything() -> Resolved:
    return all_kinds()


@cache
def shipped(name: str) -> Resolved:
    return resolve(read(scenarios_folder() / f"{name}.toml").scenario)


def drawn(resolved: Resolved, view: DiagramView, width: float = 400.0) -> Drawing:
    return diagram(resolved, view, width / view.window.width, EvenMeasure())


def seen_from(resolved: Resolved, rapidity: float, window: Window | None = None) -> DiagramView:
    frame = free_frame(resolved, rapidity)
    return DiagramView(
        frame=frame,
        window=window or fit_window(resolved, frame),
        axes=tuple(resolved.frames.values()),
        layers=ALL_LAYERS,
    )


def strokes_of(drawing: Drawing, role: Role, source: str | None = None) -> list[Stroke]:
    return [s for s in drawing.strokes if s.role is role and (source is None or s.source == source)]


# --- within the window, and finite ------------------------------------------------------------


@FEW
@given(
    st.floats(-6.0, 6.0) | st.floats(-290.0, 290.0),
    st.floats(-10.0, 4.0),
    st.floats(-1.0, 2.0),
    st.floats(-1.0, 2.0),
)
def test_nothing_far_away_or_endless_reaches_a_painter(
    rapidity: float, zoom: float, across: float, up: float
) -> None:
    resolved = all_kinds()
    fitted = seen_from(resolved, rapidity).window
    side = fitted.width * 10.0**zoom
    x, t = fitted.x0 + across * fitted.width, fitted.t0 + up * fitted.height
    if side < 1e-11 * max(abs(x), abs(t)):
        # closer than the numbers of the places themselves can tell
        side = 1e-11 * max(abs(x), abs(t))
    window = Window(x, x + side, t, t + side)
    drawing = drawn(resolved, seen_from(resolved, rapidity, window))
    # ticks reach across their axes by some points
    margin = 12.0 / drawing.scale + 1e-9 * side
    low, high = np.array([x, t]) - margin, np.array([x, t]) + side + margin
    outlines = [fill.points for fill in drawing.fills] + [s.points for s in drawing.strokes]
    outlines += [np.array([marker.at]) for marker in drawing.markers]
    outlines += [np.array([label.at]) for label in drawing.labels]
    for points in outlines:
        assert np.all(np.isfinite(points))
        assert np.all((points >= low) & (points <= high))


# --- light ------------------------------------------------------------------------------------


@FEW
@given(st.floats(-3.0, 3.0))
def test_light_runs_at_45_degrees_in_every_view(rapidity: float) -> None:
    courier = shipped("courier")
    drawing = drawn(courier, seen_from(courier, rapidity))
    light = strokes_of(drawing, Role.SIGNAL)
    assert len(light) >= 12
    for stroke in light:
        dx, dt = stroke.points[-1] - stroke.points[0]
        assert abs(dx) == pytest.approx(dt, rel=1e-9)


def test_a_light_cone_is_shaded_within_45_degrees(everything: Resolved) -> None:
    drawing = drawn(everything, seen_from(everything, 0.4))
    apex = InertialChart(0.4, everything.base.origin).to_chart(everything.events["p"].point)
    cones = [fill for fill in drawing.fills if fill.role is Role.LIGHT_CONE]
    assert len(cones) == 2
    for fill in cones:
        away = fill.points - apex
        assert np.all(np.abs(away[:, 1]) >= np.abs(away[:, 0]) - 1e-9)
    for edge in strokes_of(drawing, Role.LIGHT_CONE_EDGE):
        dx, dt = edge.points[-1] - edge.points[0]
        assert abs(dx) == pytest.approx(abs(dt))


def test_light_never_received_goes_to_the_edge(everything: Resolved) -> None:
    view = seen_from(everything, 0.0)
    (ray,) = strokes_of(drawn(everything, view), Role.SIGNAL, "lost")
    assert ray.points[0] == pytest.approx([0.0, 8.0])
    x, t = ray.points[-1]
    assert t == pytest.approx(view.window.t1) or x == pytest.approx(view.window.x1)


# --- events and worldlines --------------------------------------------------------------------


@FEW
@given(st.floats(-3.0, 3.0))
def test_events_are_where_the_chart_puts_them(rapidity: float) -> None:
    everything = all_kinds()
    drawing = drawn(everything, seen_from(everything, rapidity))
    chart = InertialChart(rapidity, everything.base.origin)
    dots = {marker.source: marker.at for marker in drawing.markers if marker.role is Role.EVENT}
    assert set(dots) >= {"o", "p", "q", "far"}
    for name, at in dots.items():
        assert at == pytest.approx(tuple(chart.to_chart(everything.events[name].point)))


@FEW
@given(st.floats(-2.0, 2.0))
def test_worldlines_stay_within_a_fraction_of_a_point(rapidity: float) -> None:
    """Halfway along each drawn chord, the true line is less than 0.3 points away."""
    everything = all_kinds()
    drawing = drawn(everything, seen_from(everything, rapidity))
    chart = InertialChart(rapidity, everything.base.origin)
    line = everything.worldlines["twin"].line
    for stroke in strokes_of(drawing, Role.WORLDLINE, "twin"):
        for first, last in pairwise(stroke.points):
            middle = 0.5 * (first + last)
            plane = chart.from_chart(middle)
            tau = line.tau_on_plane(plane, rapidity)
            x, _ = chart.to_chart(line.event(tau))
            assert abs(x - middle[0]) * drawing.scale < 0.3


def test_corners_are_marked_where_the_velocity_jumps(everything: Resolved) -> None:
    drawing = drawn(everything, seen_from(everything, 0.0))
    corners = [m.at for m in drawing.markers if m.role is Role.CORNER]
    # 3 years at 0.6 c; after 2 more years of the same clock at −0.8 c it only accelerates
    assert corners == [pytest.approx((2.25, 3.75))]


def test_clock_ticks_stand_across_the_line_at_round_readings(everything: Resolved) -> None:
    drawing = drawn(everything, seen_from(everything, 0.0))
    ticks = strokes_of(drawing, Role.CLOCK_TICK, "pole")
    middles = [0.5 * (tick.points[0] + tick.points[-1]) for tick in ticks]
    assert len(ticks) > 3
    for tick, (x, t) in zip(ticks, middles, strict=True):
        assert x == pytest.approx(-2.0)
        assert (t + 5.0) % 0.5 == pytest.approx(0.0, abs=1e-9)
        assert tick.points[0, 1] == tick.points[-1, 1]
    numbers = [label for label in drawing.labels if label.role is Role.CLOCK_NUMBER]
    pole = [label for label in numbers if label.source == "pole"]
    # at rest in this view, yet five years off its t axis: so it has numbers of its own
    assert pole
    for label in pole:
        assert float(label.text) == pytest.approx(label.at[1] + 5.0)
    # that of home agrees with the t axis
    assert not [label for label in numbers if label.source == "home"]


# --- bodies -----------------------------------------------------------------------------------


def covers(drawing: Drawing, source: str, x: float, t: float) -> bool:
    """Whether a place is in a fill, by the crossings of a ray (even-odd rule)."""
    inside = False
    for fill in drawing.fills:
        if fill.source == source:
            for (x0, t0), (x1, t1) in zip(
                fill.points, np.roll(fill.points, -1, axis=0), strict=True
            ):
                if (t0 > t) != (t1 > t) and x < x0 + (t - t0) * (x1 - x0) / (t1 - t0):
                    inside = not inside
    return inside


@FEW
@given(st.floats(-2.0, 2.0), st.floats(-1.9, -0.1), st.floats(-5.0, 12.0))
def test_a_body_is_where_both_its_ends_are(rapidity: float, x: float, t: float) -> None:
    """Between x = −2 and x = 0, from t = 0 to t = 8 of the rest frame, in every view."""
    everything = all_kinds()
    if min(abs(t), abs(t - 8.0)) < 1e-3:
        return
    at = InertialChart(rapidity, everything.base.origin).to_chart(np.array([t - x, t + x]))
    window = Window(at[0] - 30.0, at[0] + 30.0, at[1] - 30.0, at[1] + 30.0)
    drawing = drawn(everything, seen_from(everything, rapidity, window))
    assert covers(drawing, "sheet", *at) == (0.0 < t < 8.0)


def test_a_body_fills_a_window_that_lies_inside_it() -> None:
    rods = shipped("rod-and-shed")
    window = Window(13.0, 13.2, 20.0, 20.2)  # in ns; the shed reaches from 0 to 26.7 ns
    drawing = drawn(rods, seen_from(rods, 0.0, window))
    (shed,) = [fill for fill in drawing.fills if fill.source == "shed-body"]
    assert np.ptp(shed.points, axis=0) == pytest.approx([0.2, 0.2])


# --- axes -------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("velocity", "stretch"), [(0.5, 1.29), (0.6, 1.46), (0.8, 2.13), (0.9, 3.09)]
)
def test_the_unit_of_a_tilted_axis_is_stretched(velocity: float, stretch: float) -> None:
    """√((1+β²)/(1−β²)): arXiv 0706.2123 gives these four values."""
    text = f'tauline = 1\n[[frame]]\nid = "a"\n[[frame]]\nid = "b"\nvelocity = "{velocity} c"\n'
    resolved = resolve(parse(text).scenario)
    view = DiagramView(
        frame=resolved.base,
        window=Window(-8.0, 8.0, -8.0, 8.0),
        axes=(resolved.frames["b"],),
        layers=ALL_LAYERS,
    )
    drawing = drawn(resolved, view, 1200.0)
    hue = strokes_of(drawing, Role.OTHER_AXIS)[0].hue
    numbers = [
        label for label in drawing.labels if label.role is Role.AXIS_NUMBER and label.hue == hue
    ]
    assert len(numbers) >= 6
    for label in numbers:
        value = float(label.text.replace("−", "-"))
        assert math.hypot(*label.at) == pytest.approx(abs(value) * stretch, rel=0.004)
        # on the t′ axis x = βt, on the x′ axis t = βx
        low, high = sorted(abs(part) for part in label.at)
        assert low == pytest.approx(velocity * high, rel=1e-9)


def test_ticks_are_parallel_to_the_other_axis_of_their_frame(everything: Resolved) -> None:
    view = DiagramView(
        frame=everything.base,
        window=fit_window(everything, everything.base),
        axes=(everything.frames["fast"],),
    )
    drawing = drawn(everything, view)
    hue = strokes_of(drawing, Role.OTHER_AXIS)[0].hue
    ticks = [s for s in strokes_of(drawing, Role.AXIS_TICK) if s.hue == hue]
    assert len(ticks) > 10
    slopes = set()
    for tick in ticks:
        dx, dt = tick.points[-1] - tick.points[0]
        slopes.add(round(dt / dx, 6))
    # along x′ (slope β) on the t′ axis, along t′ (slope 1/β) on the x′ axis
    assert slopes == {0.5, 2.0}


def test_numbers_are_in_the_units_of_the_scenario() -> None:
    rods = shipped("rod-and-shed")
    view = DiagramView(frame=rods.base, window=Window(-10.0, 60.0, -10.0, 60.0))
    drawing = drawn(rods, view)
    titles = {label.text for label in drawing.labels if label.role is Role.AXIS_TITLE}
    assert titles == {"t (ns)", "x (m)"}
    found = 0
    for label in drawing.labels:
        if label.role is Role.AXIS_NUMBER:
            value = float(label.text.replace("−", "-"))
            along_x = abs(label.at[1]) < 1e-9 and abs(label.at[0]) > 1e-9
            # a metre is 1/0.299792458 ns of light
            expected = value / 0.299792458 if along_x else value
            assert label.at[0 if along_x else 1] == pytest.approx(expected)
            found += along_x
    assert found >= 3


def test_the_axes_of_the_view_stay_inside_when_their_zero_is_not(everything: Resolved) -> None:
    view = DiagramView(frame=everything.base, window=Window(100.0, 110.0, 200.0, 210.0))
    drawing = drawn(everything, view)
    axes = strokes_of(drawing, Role.FRAME_AXIS)
    assert len(axes) == 2
    numbers = [label.text for label in drawing.labels if label.role is Role.AXIS_NUMBER]
    assert {"102", "104", "204", "206"} <= set(numbers)


def test_symbols_belong_to_frames_and_not_to_views() -> None:
    frames = "".join(
        f'[[frame]]\nid = "f{k}"\nlabel = "F{k}"\n' + (f'velocity = "0.{k} c"\n' if k else "")
        for k in range(6)
    )
    resolved = resolve(parse("tauline = 1\n" + frames).scenario)
    expected = ["t", "t′", "t′′", "t′′′", "t4", "t5"]
    for frame in resolved.frames.values():
        others = tuple(f for f in resolved.frames.values() if f.id != frame.id)
        view = DiagramView(frame=frame, window=Window(-2.0, 2.0, -2.0, 2.0), axes=others)
        titles = [label.text for label in drawn(resolved, view).labels if "(yr)" in label.text]
        assert sorted(title.removesuffix(" (yr)") for title in titles) == sorted(expected)


def test_hyperbolas_join_equal_intervals(everything: Resolved) -> None:
    drawing = drawn(everything, seen_from(everything, 0.0))
    curves = strokes_of(drawing, Role.HYPERBOLA)
    assert len(curves) > 4
    for curve in curves:
        x, t = curve.points.T
        interval = t**2 - x**2
        inner = interval[1:-1]
        assert np.ptp(inner) <= 1e-9 * np.max(x**2 + t**2)


# --- labels -----------------------------------------------------------------------------------


def boxes_of(drawing: Drawing) -> list[tuple[Label, float, float, float, float]]:
    w = drawing.window
    found = []
    for label in drawing.labels:
        x = (label.at[0] - w.x0) * drawing.scale + label.offset[0]
        y = (label.at[1] - w.t0) * drawing.scale + label.offset[1]
        found.append((label, x, y, x + label.size[0], y + label.size[1]))
    return found


@pytest.mark.parametrize("name", SHIPPED)
@pytest.mark.parametrize("rapidity", [-0.7, -0.2, 0.0, 0.3, 0.7])
def test_labels_are_on_the_page_and_off_each_other(name: str, rapidity: float) -> None:
    resolved = shipped(name)
    drawing = drawn(resolved, seen_from(resolved, rapidity))
    page = drawing.window.width * drawing.scale, drawing.window.height * drawing.scale
    boxes = [box for box in boxes_of(drawing) if not box[0].overlaps]
    assert len(boxes) > 10
    for _, x0, y0, x1, y1 in boxes:
        assert x0 >= 0.0
        assert y0 >= 0.0
        assert x1 <= page[0]
        assert y1 <= page[1]
    for (_, a0, b0, a1, b1), (_, c0, d0, c1, d1) in combinations(boxes, 2):
        assert a1 <= c0 or c1 <= a0 or b1 <= d0 or d1 <= b0


@pytest.mark.parametrize("name", SHIPPED)
def test_every_event_and_worldline_of_the_author_is_named(name: str) -> None:
    resolved = shipped(name)
    drawing = drawn(resolved, default_view(resolved))
    texts = {label.text for label in drawing.labels}
    shown = {marker.source for marker in drawing.markers}
    for event in resolved.events.values():
        if event.id in shown and not event.owner:
            assert (event.label or event.id) in texts
    for line in resolved.worldlines.values():
        assert line.label in texts


def test_labels_stay_where_they_are_when_nothing_moves() -> None:
    courier = shipped("courier")
    view = default_view(courier)
    first = drawn(courier, view)
    second = diagram(courier, view, first.scale, EvenMeasure(), first)
    assert [label.offset for label in first.labels] == [label.offset for label in second.labels]


def test_while_moving_labels_go_along_with_what_they_name() -> None:
    resolved = shipped("courier")
    before = drawn(resolved, seen_from(resolved, 0.0))
    view = seen_from(resolved, 0.02, before.window)
    moved = diagram(resolved, view, before.scale, EvenMeasure(), before, moving=True)
    was = {(x.source, x.text): x for x in before.labels if x.role is Role.EVENT_LABEL}
    for label in moved.labels:
        old = was.get((label.source, label.text))
        if old is not None and label.role is Role.EVENT_LABEL:
            assert label.offset == pytest.approx(old.offset, abs=1e-9)
    settled = diagram(resolved, view, before.scale, EvenMeasure(), moved)
    assert sum(label.overlaps for label in settled.labels) == 0
    assert [s.points.tolist() for s in strokes_of(settled, Role.WORLDLINE)] == [
        s.points.tolist() for s in strokes_of(moved, Role.WORLDLINE)
    ]


def test_labels_are_one_line_of_signs_that_can_be_printed() -> None:
    text = 'tauline = 1\n[[event]]\nid = "a"\nlabel = "one\\ntwo\\u0007 three"\nt = 0\nx = 0\n'
    resolved = resolve(parse(text).scenario)
    labels = [label.text for label in drawn(resolved, default_view(resolved)).labels]
    assert "one two three" in labels


# --- as a whole -------------------------------------------------------------------------------


def test_layers_leave_out_what_they_name(everything: Resolved) -> None:
    bare = msgspec.structs.replace(seen_from(everything, 0.0), layers=frozenset())
    drawing = drawn(everything, bare)
    roles = {stroke.role for stroke in drawing.strokes}
    roles |= {fill.role for fill in drawing.fills} | {label.role for label in drawing.labels}
    assert roles & {Role.WORLDLINE, Role.FRAME_AXIS} == {Role.WORLDLINE, Role.FRAME_AXIS}
    assert not roles & {
        Role.GRID,
        Role.HYPERBOLA,
        Role.CLOCK_TICK,
        Role.CLOCK_NUMBER,
        Role.EVENT_LABEL,
        Role.LINE_LABEL,
        Role.SIGNAL,
        Role.LIGHT_CONE,
    }
    assert drawing.caption == ()
    full = drawn(everything, seen_from(everything, 0.0))
    assert {Role.GRID, Role.HYPERBOLA, Role.SIGNAL} <= {stroke.role for stroke in full.strokes}


@pytest.mark.parametrize("name", SHIPPED)
def test_the_same_drawing_each_time(name: str) -> None:
    one, other = (
        drawn(resolved, default_view(resolved)) for resolved in (shipped(name), shipped(name))
    )
    assert len(one.strokes) == len(other.strokes)
    for first, second in zip(one.strokes, other.strokes, strict=True):
        assert first.points.tobytes() == second.points.tobytes()
    assert one.labels == other.labels
    assert one.markers == other.markers


def test_the_caption_names_the_frame_and_its_velocity() -> None:
    courier = shipped("courier")
    text = "".join(run.text for run in drawn(courier, default_view(courier, "homebound")).caption)
    assert text == "Seen from Homebound (β = −0.6 relative to Station); t′, x′: Outbound."
