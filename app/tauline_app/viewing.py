"""From where the window looks at the scenario."""

from __future__ import annotations

import msgspec

from tauline.charts.inertial import InertialChart
from tauline.figure.drawing import Window
from tauline.figure.rail import free_frame
from tauline.figure.view import DEFAULT_LAYERS, DiagramView, default_view, keep_pivot
from tauline.resolve import FrameResult, Resolved
from tauline.scenario.objects import Layer

SAME_FRAME = 1e-12
"""Difference of rapidities below which two frames are one, as typed numbers go."""


class ViewState(msgspec.Struct, frozen=True, kw_only=True):
    """The viewing frame, the window in it, and what is shown.

    ``pivot`` is the id of the event that stays in its place while the frame changes; "" for the
    frame's origin. ``axes`` are the ids of the other frames whose axes are drawn.
    """

    frame: FrameResult
    window: Window
    axes: tuple[str, ...] = ()
    layers: frozenset[Layer] = DEFAULT_LAYERS
    pivot: str = ""

    def diagram_view(self, resolved: Resolved) -> DiagramView:
        """What the drawing is made from."""
        known = {**resolved.frames, **resolved.leg_frames}
        others = tuple(known[name] for name in self.axes if name in known and name != self.frame.id)
        return DiagramView(frame=self.frame, window=self.window, axes=others, layers=self.layers)


def opening_view(resolved: Resolved) -> ViewState:
    """The view a scenario opens with: its first, or the base frame with all in sight."""
    return named_view(resolved, next(iter(resolved.views), None))


def named_view(resolved: Resolved, view_id: str | None) -> ViewState:
    """A view of the scenario; None for the base frame with all in sight."""
    view = default_view(resolved, view_id=view_id)
    named = resolved.views[view_id] if view_id is not None else None
    pivot = named.pivot.id if named is not None and named.pivot is not None else ""
    return ViewState(
        frame=view.frame,
        window=view.window,
        axes=tuple(frame.id for frame in view.axes),
        layers=view.layers,
        pivot=pivot,
    )


def frame_at(resolved: Resolved, rapidity: float) -> FrameResult:
    """The frame of a rapidity relative to the base frame: a declared one, if it is one's own."""
    origin = tuple(resolved.base.origin)
    for frame in resolved.frames.values():
        if abs(frame.rapidity - rapidity) < SAME_FRAME and tuple(frame.origin) == origin:
            return frame
    return free_frame(resolved, rapidity)


def frame_names(resolved: Resolved) -> dict[str, str]:
    """What each frame is called where all are listed, by id: declared ones, then those of legs."""
    names = {frame.id: frame.label or frame.id for frame in resolved.frames.values()}
    declared = set(names.values())
    for frame in resolved.leg_frames.values():
        name = frame.label or frame.id
        names[frame.id] = f"{name} (rest frame)" if name in declared else name
    return names


def seen_from(state: ViewState, resolved: Resolved, frame: FrameResult) -> ViewState:
    """Look from another frame; the pivot event stays in its place on the canvas."""
    event = resolved.events.get(state.pivot)
    pivot = event.point if event is not None else state.frame.origin
    window = keep_pivot(
        state.window,
        pivot,
        InertialChart(state.frame.rapidity, state.frame.origin),
        InertialChart(frame.rapidity, frame.origin),
    )
    return msgspec.structs.replace(state, frame=frame, window=window)


def kept_over(state: ViewState, resolved: Resolved) -> ViewState:
    """Carry a view over to a changed scenario: the same frame, if it is still there."""
    known = {**resolved.frames, **resolved.leg_frames}
    if state.frame.id:
        frame = known.get(state.frame.id, resolved.base)
    else:
        frame = free_frame(resolved, state.frame.rapidity)
    pivot = state.pivot if state.pivot in resolved.events else ""
    axes = tuple(name for name in state.axes if name in known)
    return msgspec.structs.replace(state, frame=frame, pivot=pivot, axes=axes)
