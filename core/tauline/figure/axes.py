"""Axes of the viewing frame and of others: lines, ticks, numbers, titles; grid, hyperbolas."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import Literal

import msgspec
import numpy as np

from tauline.figure.clip import clip_line, clip_polyline
from tauline.figure.drawing import Points, Role, Run, Stroke, Window
from tauline.figure.strokes import Scene
from tauline.figure.symbols import axis_title, frame_hue
from tauline.figure.ticks import minor_step, step_for, tick_text, ticks_between
from tauline.resolve.results import FrameResult
from tauline.scenario.units import LENGTH, TIME

NUMBER_SPACING = 42.0
"""Least distance, in points, between numbered ticks."""
EDGE = 12.0
"""Distance, in points, from the window's edge of an axis whose zero lies outside."""
MAJOR, MINOR = 6.0, 3.5
LEAST_SINE, MOST_STRETCH = 0.55, 2.5
"""Where a frame's axes close in on each other below this, their ticks are longer, up to so much."""


class AxisText(msgspec.Struct, frozen=True, kw_only=True):
    """A number or a title to be placed beside an axis.

    ``aside`` is the unit vector on the page towards the side where it should stand, ``along``
    that along the axis. ``axis`` names the axis, ``primary`` says that it is the viewing frame's.
    """

    axis: str
    primary: bool
    role: Role
    hue: int
    at: Points
    aside: Points
    along: Points
    runs: tuple[Run, ...]


class Axis(msgspec.Struct, frozen=True, kw_only=True):
    """One axis in the view: events ``at + s direction``, s in internal units from its zero."""

    name: Literal["t", "x"]
    frame: FrameResult
    primary: bool
    at: Points
    direction: Points
    across: Points
    span: tuple[float, float]
    step: float
    """Between numbered ticks, in the scenario's unit."""


def axes_of(scene: Scene, frame: FrameResult) -> list[Axis]:
    """Return the axes of a frame that cross the window.

    Those of the viewing frame are moved to the edge where their zero lies outside.
    """
    primary = frame is scene.view.frame
    relative = frame.rapidity - scene.view.frame.rapidity
    zero = scene.place(frame.origin)
    directions = {
        "t": np.array([math.sinh(relative), math.cosh(relative)]),
        "x": np.array([math.cosh(relative), math.sinh(relative)]),
    }
    found = []
    for name, across in (("t", "x"), ("x", "t")):
        at = _kept_inside(zero, scene, name) if primary else zero
        span = clip_line(at, directions[name], scene.window)
        if span is None:
            continue
        dimension = TIME if name == "t" else LENGTH
        printed = scene.scale * float(np.hypot(*directions[name]))
        least = scene.resolved.units.to_reader(NUMBER_SPACING / printed, dimension)
        found.append(
            Axis(
                name=name,  # type: ignore[arg-type]
                frame=frame,
                primary=primary,
                at=at,
                direction=directions[name],
                across=directions[across],
                span=span,
                step=step_for(least),
            )
        )
    return found


def axis_strokes(scene: Scene, axis: Axis) -> Iterator[Stroke]:
    """The axis with an arrowhead at its positive end, and its ticks."""
    hue = frame_hue(scene.resolved, axis.frame)
    role = Role.FRAME_AXIS if axis.primary else Role.OTHER_AXIS
    ends = np.array([axis.at + s * axis.direction for s in axis.span])
    yield Stroke(role=role, hue=hue, points=ends, arrow=1.0)
    for values, length in (
        (_places(scene, axis, minor_step(axis.step)), MINOR),
        (_places(scene, axis, axis.step), MAJOR),
    ):
        half = 0.5 * length / scene.scale * _tick_direction(axis)
        for s in values:
            at = axis.at + s * axis.direction
            yield Stroke(role=Role.AXIS_TICK, hue=hue, points=np.array([at - half, at + half]))


def _tick_direction(axis: Axis) -> Points:
    """Along the frame's other axis; longer where both run close together, to stay visible."""
    along, across = (d / float(np.hypot(*d)) for d in (axis.direction, axis.across))
    sine = abs(float(along[0] * across[1] - along[1] * across[0]))
    return np.asarray(across * min(max(LEAST_SINE / max(sine, 1e-9), 1.0), MOST_STRETCH))


def axis_texts(scene: Scene, axis: Axis) -> Iterator[AxisText]:
    """The title and the numbers of an axis, and the side they belong on.

    Numbers of the viewing frame stand outside (left and below), those of other frames between
    their axis and the light line, where the viewing frame has none.
    """
    hue = frame_hue(scene.resolved, axis.frame)
    along = axis.direction / float(np.hypot(*axis.direction))
    right = np.array([along[1], -along[0]])
    outer = -right if axis.name == "t" else right
    relative = axis.frame.rapidity - scene.view.frame.rapidity
    aside = outer if axis.primary or relative < 0.0 else -outer
    name = f"{axis.frame.id} {axis.name}"
    yield AxisText(
        axis=name,
        primary=axis.primary,
        role=Role.AXIS_TITLE,
        hue=hue,
        at=axis.at + axis.span[1] * axis.direction,
        aside=-aside if axis.primary else aside,
        along=along,
        runs=axis_title(scene.resolved, axis.frame, axis.name),
    )
    per_unit = _per_unit(scene, axis)
    for s in _places(scene, axis, axis.step):
        value = s / per_unit
        if abs(value) < 0.5 * axis.step and _zero_is_written(scene, axis):
            continue
        yield AxisText(
            axis=name,
            primary=axis.primary,
            role=Role.AXIS_NUMBER,
            hue=hue,
            at=axis.at + s * axis.direction,
            aside=aside,
            along=along,
            runs=(Run(tick_text(value, axis.step)),),
        )


def grid_strokes(scene: Scene, axes: list[Axis]) -> Iterator[Stroke]:
    """Lines of one time and of one place of the viewing frame, at its numbered ticks."""
    w = scene.window
    for axis in axes:
        for s in _places(scene, axis, axis.step):
            x, t = axis.at + s * axis.direction
            ends = ((w.x0, t), (w.x1, t)) if axis.name == "t" else ((x, w.t0), (x, w.t1))
            yield Stroke(role=Role.GRID, points=np.array(ends))


def hyperbola_strokes(scene: Scene, axes: list[Axis]) -> Iterator[Stroke]:
    """Calibration hyperbolas through the numbered ticks of the viewing frame's axes.

    All events at one interval from its origin: where a frame's axis crosses one, that frame's
    clocks and rods show the same number (H. Minkowski, Raum und Zeit (1908), §I; from memory).
    """
    zero = scene.place(scene.view.frame.origin)
    w = scene.window
    reach = float(np.max(np.abs([w.x0 - zero[0], w.x1 - zero[0], w.t0 - zero[1], w.t1 - zero[1]])))
    for axis in axes:
        for s in _places(scene, axis, axis.step):
            if s == 0.0 or abs(s) > reach:
                continue
            opening = np.linspace(-1.0, 1.0, 161) * math.acosh(max(2.0 * reach / abs(s), 1.0))
            near, far = abs(s) * np.sinh(opening), s * np.cosh(opening)
            rows = (near, far) if axis.name == "t" else (far, near)
            for piece in clip_polyline(zero + np.stack(rows, axis=1), w):
                yield Stroke(role=Role.HYPERBOLA, points=piece)


def _kept_inside(zero: Points, scene: Scene, name: str) -> Points:
    w: Window = scene.window
    inset = EDGE * 2.2 / scene.scale
    x = min(max(zero[0], w.x0 + inset), w.x1 - inset) if name == "t" else zero[0]
    t = min(max(zero[1], w.t0 + inset), w.t1 - inset) if name == "x" else zero[1]
    return np.array([x, t])


def _per_unit(scene: Scene, axis: Axis) -> float:
    dimension = TIME if axis.name == "t" else LENGTH
    return scene.resolved.units.from_reader(1.0, dimension)


def _places(scene: Scene, axis: Axis, step: float) -> Points:
    """Parameters of the ticks, short of the arrowhead."""
    per_unit = _per_unit(scene, axis)
    room = 9.0 / scene.scale / float(np.hypot(*axis.direction))
    low, high = axis.span[0] / per_unit, (axis.span[1] - room) / per_unit
    return ticks_between(low, high, step) * per_unit


def _zero_is_written(scene: Scene, axis: Axis) -> bool:
    """Whether the zero stands elsewhere: once where axes cross, on the viewing frame's t axis."""
    crosses = scene.holds(scene.place(axis.frame.origin))
    return crosses and not (axis.primary and axis.name == "t")
