"""From where, and which part of, the diagram is looked at."""

from __future__ import annotations

import math
from collections.abc import Iterable

import msgspec
import numpy as np

from tauline.charts.inertial import InertialChart
from tauline.errors import UnknownIdError
from tauline.figure.drawing import Points, Window
from tauline.resolve.results import FrameResult, Point, Resolved, ViewResult
from tauline.scenario.objects import Layer

DEFAULT_LAYERS: frozenset[Layer] = frozenset(
    ("clock_ticks", "labels", "signals", "light_cones", "caption")
)
MARGIN = 0.09
"""Share of the larger extent left free around what is fitted."""
LEAST_ASPECT, GREATEST_ASPECT = 0.7, 1.6
"""Bounds of width to height of a fitted window."""


class DiagramView(msgspec.Struct, frozen=True, kw_only=True):
    """The viewing frame, the window in its coordinates, and what is drawn."""

    frame: FrameResult
    window: Window
    axes: tuple[FrameResult, ...] = ()
    layers: frozenset[Layer] = DEFAULT_LAYERS

    @property
    def chart(self) -> InertialChart:
        """Chart of the viewing frame."""
        return InertialChart(self.frame.rapidity, self.frame.origin)


def default_view(
    resolved: Resolved, frame_id: str | None = None, view_id: str | None = None
) -> DiagramView:
    """Return a view of a scenario: a named one, else its first, else the base frame.

    A window the author gave holds in the view's own frame only; from another one, everything is
    fitted. UnknownIdError for a frame or a view there is not.
    """
    if view_id is not None and view_id not in resolved.views:
        known = ", ".join(resolved.views) or "none"
        raise UnknownIdError(f"there is no view '{view_id}'", f"there are: {known}")
    views = resolved.views
    named = views[view_id] if view_id is not None else next(iter(views.values()), None)
    own_frame = None if named is None else named.frame
    frame = _frame(resolved, own_frame if frame_id is None else frame_id)
    fitted = fit_window(resolved, frame)
    if named is None:
        return DiagramView(frame=frame, window=fitted)
    own = named.frame == frame.id
    return DiagramView(
        frame=frame,
        window=_window(fitted, named) if own else fitted,
        axes=tuple(resolved.frame(name) for name in named.declared.axes if name != frame.id),
        layers=frozenset(named.declared.layers),
    )


def fit_window(resolved: Resolved, frame: FrameResult) -> Window:
    """Return a window of a frame that shows all events, ends and corners."""
    chart = InertialChart(frame.rapidity, frame.origin)
    points = list(_places(resolved))
    if not points:
        return Window(-1.0, 1.0, -1.0, 1.0)
    x, t = chart.to_chart(np.stack(points, axis=1))
    finite = np.isfinite(x) & np.isfinite(t)
    x, t = x[finite], t[finite]
    if x.size == 0:
        return Window(-1.0, 1.0, -1.0, 1.0)
    pad = MARGIN * max(float(np.ptp(x)), float(np.ptp(t)))
    if pad <= 1e-12 * max(float(np.max(np.abs(x))), float(np.max(np.abs(t)))):
        # a single place: show the frame's zero too, if that is not where it is
        x, t = np.append(x, 0.0), np.append(t, 0.0)
        pad = MARGIN * max(float(np.ptp(x)), float(np.ptp(t))) or 1.0
    window = Window(
        float(x.min()) - pad, float(x.max()) + pad, float(t.min()) - pad, float(t.max()) + pad
    )
    # a tall or a flat story needs some room beside it for its labels
    aspect = window.width / window.height
    return window_for_aspect(window, min(max(aspect, LEAST_ASPECT), GREATEST_ASPECT))


def window_for_aspect(window: Window, aspect: float) -> Window:
    """Widen a window about its centre to a ratio of width to height; nothing is cut off."""
    x, t = 0.5 * (window.x0 + window.x1), 0.5 * (window.t0 + window.t1)
    width = max(window.width, window.height * aspect)
    height = width / aspect
    return Window(x - 0.5 * width, x + 0.5 * width, t - 0.5 * height, t + 0.5 * height)


def keep_pivot(window: Window, pivot: Point, old: InertialChart, new: InertialChart) -> Window:
    """Shift a window so that an event stays in its place while the chart changes."""
    was = old.to_chart(pivot[:, np.newaxis])[:, 0]
    now = new.to_chart(pivot[:, np.newaxis])[:, 0]
    dx, dt = (float(step) for step in now - was)
    return Window(window.x0 + dx, window.x1 + dx, window.t0 + dt, window.t1 + dt)


def _frame(resolved: Resolved, frame_id: str | None) -> FrameResult:
    if frame_id is None:
        return resolved.base
    try:
        return resolved.frame(frame_id)
    except KeyError:
        known = ", ".join((*resolved.frames, *resolved.leg_frames))
        raise UnknownIdError(f"there is no frame '{frame_id}'", f"there are: {known}") from None


def _window(fitted: Window, named: ViewResult) -> Window:
    x0, x1 = named.x or (fitted.x0, fitted.x1)
    t0, t1 = named.t or (fitted.t0, fitted.t1)
    return Window(x0, x1, t0, t1)


def _places(resolved: Resolved) -> Iterable[Points]:
    for event in resolved.events.values():
        yield event.point
    for result in resolved.worldlines.values():
        line = result.line
        for tau in (line.start, line.end, *line.corners):
            if math.isfinite(tau):
                yield line.event(tau)
