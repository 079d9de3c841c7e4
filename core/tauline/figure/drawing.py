"""A drawing as data: what the canvas paints and what every export writes.

Points are ``(x, t)`` in diagram units: the viewing frame's coordinates, both in the scenario's
time unit (x in light-times), so that light runs at 45° under equal scales. Sizes are in points
(1/72 inch; on screen: device-independent pixels). ``source`` is the id of the object a primitive
belongs to ("" for none); ``hue`` is the index of its owner's colour, −1 for the neutral ink.
"""

from __future__ import annotations

from collections.abc import Mapping
from enum import StrEnum

import msgspec
import numpy as np
from numpy.typing import NDArray

Points = NDArray[np.float64]
NEUTRAL = -1


class Role(StrEnum):
    """What a primitive is; a style turns it into colour, width, dash and size."""

    FRAME_AXIS = "frame_axis"
    OTHER_AXIS = "other_axis"
    GRID = "grid"
    HYPERBOLA = "hyperbola"
    WORLDLINE = "worldline"
    CLOCK_TICK = "clock_tick"
    CLOCK_NUMBER = "clock_number"
    CORNER = "corner"
    SIGNAL = "signal"
    SIMULTANEITY = "simultaneity"
    LIGHT_CONE = "light_cone"
    LIGHT_CONE_EDGE = "light_cone_edge"
    BODY = "body"
    EVENT = "event"
    AXIS_TICK = "axis_tick"
    AXIS_NUMBER = "axis_number"
    AXIS_TITLE = "axis_title"
    EVENT_LABEL = "event_label"
    LINE_LABEL = "line_label"
    LEADER = "leader"
    CAPTION = "caption"


class Run(msgspec.Struct, frozen=True):
    """A stretch of text in one style: ``roman``, ``italic``, or ``sub`` (roman, lowered)."""

    text: str
    style: str = "roman"


class Window(msgspec.Struct, frozen=True):
    """The part of the diagram shown, in diagram units."""

    x0: float
    x1: float
    t0: float
    t1: float

    @property
    def width(self) -> float:
        """Extent in x."""
        return self.x1 - self.x0

    @property
    def height(self) -> float:
        """Extent in t."""
        return self.t1 - self.t0


class Stroke(msgspec.Struct, frozen=True, kw_only=True):
    """A polyline ``(N, 2)``; ``arrow`` is where along it an arrowhead sits (0 to 1)."""

    source: str = ""
    role: Role
    hue: int = NEUTRAL
    points: Points
    arrow: float | None = None


class Fill(msgspec.Struct, frozen=True, kw_only=True):
    """A filled polygon ``(N, 2)``."""

    source: str = ""
    role: Role
    hue: int = NEUTRAL
    points: Points


class Marker(msgspec.Struct, frozen=True, kw_only=True):
    """A dot or another sign at one place."""

    source: str = ""
    role: Role
    hue: int = NEUTRAL
    at: tuple[float, float]


class Label(msgspec.Struct, frozen=True, kw_only=True):
    """Upright text.

    ``at`` is the anchor in diagram units; the lower left corner of the text's box lies
    ``offset`` (right, up; points) from it; ``size`` is the box's width and height in points as
    measured when it was placed. ``overlaps`` says that no free place was found.
    """

    source: str = ""
    role: Role
    hue: int = NEUTRAL
    at: tuple[float, float]
    offset: tuple[float, float]
    size: tuple[float, float]
    runs: tuple[Run, ...]
    overlaps: bool = False

    @property
    def text(self) -> str:
        """The plain characters."""
        return "".join(run.text for run in self.runs)


class Drawing(msgspec.Struct, frozen=True, kw_only=True):
    """Everything to be painted, back to front within each kind: fills, strokes, markers, labels.

    ``scale`` is points per diagram unit, the same both ways; ``caption`` stands below the
    diagram in exports, and is shown apart from it on screen.
    """

    window: Window
    scale: float
    fills: tuple[Fill, ...] = ()
    strokes: tuple[Stroke, ...] = ()
    markers: tuple[Marker, ...] = ()
    labels: tuple[Label, ...] = ()
    caption: tuple[Run, ...] = ()
    title: str = ""
    choices: Mapping[tuple[str, str, str], int] = {}
    """Which candidate place each label took, for the next drawing to keep it there."""
