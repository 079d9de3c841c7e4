"""A drawing as PDF, SVG or PNG, by matplotlib (without pyplot)."""

from __future__ import annotations

import io
import math
import warnings
from collections import Counter
from pathlib import Path
from typing import TYPE_CHECKING, Any

import msgspec
import numpy as np

from tauline.errors import ExportError
from tauline.export.measure import FAMILY, PrintMeasure, families
from tauline.export.wrap import wrapped
from tauline.figure.arrows import arrow_head
from tauline.figure.diagram import diagram
from tauline.figure.drawing import Drawing, Label, Points, Role, Run, Window
from tauline.figure.measure import DESCENT, SUB_DROP, SUB_SIZE
from tauline.figure.style import PRINT, Colour, Style
from tauline.figure.symbols import one_line
from tauline.figure.view import DiagramView, default_view, window_for_aspect
from tauline.files import replace_file
from tauline.resolve.results import Resolved
from tauline.scenario.units import LENGTH, TIME

if TYPE_CHECKING:
    from matplotlib.axes import Axes

POINTS_PER_MM = 72.0 / 25.4
FORMATS = ("pdf", "svg", "png")
DEFAULT_WIDTH = 130.0
GREATEST_HEIGHT = 190.0
"""Millimetres: a page's width and height with room for its margins."""
LEAST_SIDE, LEAST_WIDTH, GREATEST_SIDE = 20.0, 60.0, 2000.0
"""Least side, least width where none was asked for, greatest side."""
PIXELS_PER_INCH = 300
CAPTION_GAP = 6.0


def export_figure(
    resolved: Resolved,
    path: Path,
    *,
    frame: str | None = None,
    view: str | None = None,
    width_mm: float | None = None,
    height_mm: float | None = None,
    time_window: tuple[float, float] | None = None,
    place_window: tuple[float, float] | None = None,
) -> None:
    """Write a scenario's diagram to a file, in the format its ending names.

    ``frame`` and ``view`` are ids (default: the scenario's first view, else the base frame). The
    windows are in that frame and in the scenario's units. Without a height, it follows from the
    window; with both, the window is widened to fill them. UnknownIdError for an id there is not,
    ExportError for a format, a size or a place that will not do.
    """
    kind = path.suffix.lower().removeprefix(".")
    if kind not in FORMATS:
        raise ExportError(
            f"'{path.name}' does not end in a format that can be written",
            "end it in " + ", ".join(f".{name}" for name in FORMATS),
        )
    chosen = default_view(resolved, frame, view)
    window = _cut(resolved, chosen.window, time_window, place_window)
    data = figure_bytes(
        resolved,
        msgspec.structs.replace(chosen, window=window),
        kind,
        width_mm=width_mm,
        height_mm=height_mm,
    )
    try:
        replace_file(path, data)
    except OSError as error:
        reason = error.strerror or str(error)
        raise ExportError(f"{path} cannot be written: {reason}") from error


def figure_bytes(
    resolved: Resolved,
    view: DiagramView,
    kind: str,
    *,
    width_mm: float | None = None,
    height_mm: float | None = None,
    style: Style = PRINT,
) -> bytes:
    """Return the contents of a figure file of a view: ``pdf``, ``svg`` or ``png``."""
    for side in (width_mm, height_mm):
        if side is not None and not LEAST_SIDE <= side <= GREATEST_SIDE:
            raise ExportError(
                f"a side of {side:g} mm will not do",
                f"from {LEAST_SIDE:g} to {GREATEST_SIDE:g} mm",
            )
    measure = PrintMeasure(style)
    width, height = _page_size(view.window, width_mm, height_mm)
    if height_mm is None:
        # a tall or a flat window is widened: the page's sides are bounded
        view = msgspec.structs.replace(view, window=window_for_aspect(view.window, width / height))
    lines = 0
    if "caption" in view.layers:
        probe = diagram(resolved, view, width / view.window.width, measure).caption
        lines = len(wrapped(probe, width, measure))
    below = lines * style.text_size * 1.35 + (CAPTION_GAP if lines else 0.0)
    if height_mm is not None:
        window = window_for_aspect(view.window, width / max(height - below, 1.0))
        view = msgspec.structs.replace(view, window=window)
    drawing = diagram(resolved, view, width / view.window.width, measure)
    return drawing_bytes(drawing, kind, below, style, resolved.scenario.description)


def drawing_bytes(
    drawing: Drawing, kind: str, below: float, style: Style, description: str = ""
) -> bytes:
    """Return the contents of a figure file of a drawing, with room for its caption below."""
    import matplotlib as mpl
    from matplotlib.figure import Figure

    settings: dict[Any, Any] = {
        "pdf.fonttype": 42,
        "svg.fonttype": "none",
        "svg.hashsalt": "tauline",
        "font.family": [FAMILY],
        "font.sans-serif": [FAMILY],
        "path.simplify": False,
        "text.parse_math": False,
        # runs are set side by side, so their widths must be those measured
        "text.hinting": "none",
    }
    width = drawing.window.width * drawing.scale
    height = drawing.window.height * drawing.scale + below
    with mpl.rc_context(settings), warnings.catch_warnings():
        # a sign that no installed font has is drawn as a box
        warnings.filterwarnings("ignore", message="Glyph .* missing")
        figure = Figure(figsize=(width / 72.0, height / 72.0), facecolor=_hex(style.ground))
        axes = figure.add_axes((0.0, 0.0, 1.0, 1.0))
        axes.set_axis_off()
        axes.set_xlim(0.0, width)
        axes.set_ylim(0.0, height)
        _Painter(axes, drawing, style, below, kind).paint()
        buffer = io.BytesIO()
        figure.savefig(
            buffer, format=kind, dpi=PIXELS_PER_INCH, metadata=_metadata(kind, drawing, description)
        )
    return buffer.getvalue()


class _Painter:
    """Turns the primitives of a drawing into matplotlib artists, back to front."""

    def __init__(self, axes: Axes, drawing: Drawing, style: Style, below: float, kind: str) -> None:
        self._axes = axes
        self._drawing = drawing
        self._style = style
        self._shift = np.array([0.0, below])
        self._measure = PrintMeasure(style)
        self._depth = 0
        # an SVG file is set with the fonts of whoever looks at it
        self._generic = ("sans-serif",) if kind == "svg" else ()
        self._groups: Counter[str] = Counter()

    def paint(self) -> None:
        from matplotlib.lines import Line2D

        for fill in self._drawing.fills:
            self._polygon(
                self._page(fill.points),
                self._style.colour(fill.role, fill.hue),
                self._group(fill.role, fill.source),
            )
        for stroke in self._drawing.strokes:
            points = self._page(stroke.points)
            colour = self._style.colour(stroke.role, stroke.hue)
            line = Line2D(
                points[:, 0],
                points[:, 1],
                color=_hex(colour),
                linewidth=self._style.width(stroke.role),
                solid_capstyle="butt",
                dash_capstyle="butt",
                solid_joinstyle="round",
                zorder=self._next(),
                gid=self._group(stroke.role, stroke.source),
            )
            dash = self._style.dash(stroke.role, stroke.hue)
            if dash:
                line.set_linestyle((0.0, tuple(d / self._style.width(stroke.role) for d in dash)))
            self._axes.add_line(line)
            head = None if stroke.arrow is None else arrow_head(points, stroke.arrow)
            if head is not None:
                self._polygon(head, colour, self._group(stroke.role, stroke.source))
        for marker in self._drawing.markers:
            self._marker(marker.role, marker.hue, marker.at, marker.source)
        for label in self._drawing.labels:
            self._label(label)
        self._caption()

    def _page(self, points: Points) -> Points:
        w = self._drawing.window
        return np.asarray((points - (w.x0, w.t0)) * self._drawing.scale + self._shift)

    def _next(self) -> int:
        self._depth += 1
        return self._depth

    def _group(self, role: Role, source: str) -> str | None:
        """Id of a group in an SVG file: ``role:source``, numbered from the second on."""
        if not source:
            return None
        name = f"{role}:{source}"
        self._groups[name] += 1
        count = self._groups[name]
        return name if count == 1 else f"{name}:{count}"

    def _polygon(self, points: Points, colour: Colour, gid: str | None) -> None:
        from matplotlib.patches import Polygon

        self._axes.add_patch(
            Polygon(
                points,
                closed=True,
                facecolor=_hex(colour),
                edgecolor="none",
                linewidth=0.0,
                zorder=self._next(),
                gid=gid,
            )
        )

    def _marker(self, role: Role, hue: int, at: tuple[float, float], source: str) -> None:
        from matplotlib.patches import Circle, Polygon

        centre = self._page(np.asarray(at))
        radius = 0.5 * self._style.event_diameter
        colour, ground = _hex(self._style.colour(role, hue)), _hex(self._style.ground)
        if role is Role.CORNER:
            spots = centre + 1.25 * radius * np.array([(1, 0), (0, 1), (-1, 0), (0, -1)])
            self._axes.add_patch(
                Polygon(
                    spots,
                    closed=True,
                    facecolor=ground,
                    edgecolor=colour,
                    linewidth=0.8,
                    zorder=self._next(),
                    gid=self._group(role, source),
                )
            )
            return
        cased = radius + self._style.casing
        for size, paint, gid in (
            (cased, ground, None),
            (radius, colour, self._group(role, source)),
        ):
            self._axes.add_patch(
                Circle(
                    (float(centre[0]), float(centre[1])),
                    size,
                    facecolor=paint,
                    edgecolor="none",
                    linewidth=0.0,
                    zorder=self._next(),
                    gid=gid,
                )
            )

    def _label(self, label: Label) -> None:
        corner = self._page(np.asarray(label.at)) + label.offset
        self._runs(
            label.runs, corner, label.role, self._style.colour(label.role, label.hue), label.source
        )

    def _caption(self) -> None:
        width = self._drawing.window.width * self._drawing.scale
        size = self._style.text_size
        y = float(self._shift[1]) - CAPTION_GAP - size
        for line in wrapped(self._drawing.caption, width, self._measure):
            colour = self._style.colour(Role.CAPTION)
            self._runs(tuple(line), np.array([1.0, y]), Role.CAPTION, colour, "caption")
            y -= size * 1.35

    def _runs(
        self, runs: tuple[Run, ...], corner: Points, role: Role, colour: Colour, source: str
    ) -> None:
        size = self._style.size(role)
        x, baseline = float(corner[0]), float(corner[1]) + DESCENT * size
        for run in runs:
            sub = run.style == "sub"
            # SVG drops spaces in front of a text
            text = run.text.lstrip(" ")
            indent = self._measure.width(Run(" ", run.style), size) * (len(run.text) - len(text))
            self._axes.text(
                x + indent,
                baseline - (SUB_DROP * size if sub else 0.0),
                text,
                fontfamily=[*families(text), *self._generic],
                fontsize=size * SUB_SIZE if sub else size,
                fontstyle="italic" if run.style == "italic" else "normal",
                color=_hex(colour),
                ha="left",
                va="baseline",
                zorder=self._next(),
                gid=self._group(role, source),
            )
            x += self._measure.width(run, size)


def _page_size(
    window: Window, width_mm: float | None, height_mm: float | None
) -> tuple[float, float]:
    """Width and height in points; the height without the caption where it is not given."""
    aspect = window.width / window.height
    tallest = GREATEST_SIDE
    if width_mm is None and height_mm is None:
        tallest = GREATEST_HEIGHT
        width_mm = max(min(DEFAULT_WIDTH, tallest * aspect), LEAST_WIDTH)
    if width_mm is None:
        assert height_mm is not None
        width_mm = min(max(height_mm * aspect, LEAST_SIDE), GREATEST_SIDE)
    if height_mm is None:
        height_mm = min(max(width_mm / aspect, LEAST_SIDE), tallest)
    return width_mm * POINTS_PER_MM, height_mm * POINTS_PER_MM


def _cut(
    resolved: Resolved,
    window: Window,
    time_window: tuple[float, float] | None,
    place_window: tuple[float, float] | None,
) -> Window:
    units = resolved.units
    for given in (time_window, place_window):
        if given is not None and not all(math.isfinite(value) for value in given):
            raise ExportError(f"a window from {given[0]:g} to {given[1]:g} has no bounds")
        if given is not None and not given[0] < given[1]:
            raise ExportError(f"a window from {given[0]:g} to {given[1]:g} is empty")
    t0, t1 = (
        (window.t0, window.t1)
        if time_window is None
        else (units.from_reader(value, TIME) for value in time_window)
    )
    x0, x1 = (
        (window.x0, window.x1)
        if place_window is None
        else (units.from_reader(value, LENGTH) for value in place_window)
    )
    return Window(x0, x1, t0, t1)


def _metadata(kind: str, drawing: Drawing, description: str) -> dict[str, Any]:
    from tauline import __version__

    title, program = drawing.title or "Spacetime diagram", f"Tauline {__version__}"
    about = one_line(description)
    if kind == "pdf":
        # no date: the same scenario gives the same bytes
        return {"Title": title, "Subject": about, "Creator": program, "CreationDate": None}
    if kind == "svg":
        return {"Title": title, "Description": about, "Creator": program, "Date": None}
    return {"Title": title, "Description": about, "Software": program}


def _hex(colour: Colour) -> str:
    return "#{:02x}{:02x}{:02x}".format(*colour)
