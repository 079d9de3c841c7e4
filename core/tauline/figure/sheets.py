"""Filled parts of the plane: light cones, and bodies between two worldlines."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from tauline.figure.clip import clip_polygon, clip_polyline
from tauline.figure.drawing import Fill, Points, Role, Stroke
from tauline.figure.strokes import TOLERANCE, Scene
from tauline.resolve.results import BodyResult, LightConeResult
from tauline.worldlines import Worldline

Span = tuple[float, float]


def light_cone_parts(scene: Scene, thing: LightConeResult) -> tuple[list[Fill], list[Stroke]]:
    """The shaded cone of an event and its edges."""
    at = scene.place(thing.apex.point)
    window = scene.window
    reach = float(np.sum(np.abs(at))) + 2.0 * (
        window.width + window.height + abs(window.x0) + abs(window.t0)
    )
    fills, edges = [], []
    for part, sign in (("future", 1.0), ("past", -1.0)):
        if thing.part not in (part, "both"):
            continue
        ends = at + sign * reach * np.array([[1.0, 1.0], [-1.0, 1.0]])
        inside = clip_polygon(np.vstack([at, ends]), window)
        if len(inside):
            fills.append(Fill(source=thing.id, role=Role.LIGHT_CONE, points=inside))
        for end in ends:
            edges += [
                Stroke(source=thing.id, role=Role.LIGHT_CONE_EDGE, points=piece)
                for piece in clip_polyline(np.array([at, end]), window)
            ]
    return fills, edges


def body_fills(scene: Scene, body: BodyResult) -> Iterator[Fill]:
    """The sheet between two worldlines, as far as both exist.

    Where one ends before the other, the sheet is cut along the simultaneity line of its end, in
    its rest frame there: the cut of a body that stops being a body, the same in every view.
    """
    lines = body.ends[0].line, body.ends[1].line
    spans = _common(lines)
    edges = [_edge(scene, line, span) for line, span in zip(lines, spans, strict=True)]
    if edges[0] is None or edges[1] is None:
        return
    inside = clip_polygon(np.vstack([edges[0], edges[1][::-1]]), scene.window)
    if len(inside) >= 3:
        yield Fill(source=body.id, role=Role.BODY, hue=body.ends[1].observer, points=inside)


def _common(lines: tuple[Worldline, Worldline]) -> tuple[Span, Span]:
    """The stretches of both lines that bound their sheet."""
    spans = [[line.start, line.end] for line in lines]
    for which in (0, 1):
        for own, other in ((0, 1), (1, 0)):
            tau = spans[own][which]
            if not math.isfinite(tau):
                continue
            line = lines[own]
            rapidity = line.rapidity(tau, "after" if which == 0 else "before")
            cut = float(lines[other].tau_on_plane(line.event(tau), rapidity))
            if math.isfinite(cut):
                spans[other][which] = cut
                break
    return (spans[0][0], spans[0][1]), (spans[1][0], spans[1][1])


def _edge(scene: Scene, line: Worldline, span: Span) -> Points | None:
    """A line from the window's first to its last time, however far beside it: ``(N, 2)``.

    One point, its end, where it is no more; None where its places are beyond all numbers.
    """
    w = scene.window
    planes = scene.chart.from_chart([[w.x0, w.x0], [w.t0, w.t1]])
    asked = [float(tau) for tau in line.tau_on_plane(planes, scene.view.frame.rapidity)]
    ends: list[float] = []
    for tau, near, far in zip(asked, span, span[::-1], strict=True):
        # NaN where the line has not begun, or is no more
        found = next((value for value in (tau, near, far) if math.isfinite(value)), math.nan)
        ends.append(min(max(found, span[0]), span[1]))
    if ends[0] < ends[1]:
        taus = line.samples(ends[0], ends[1], TOLERANCE / scene.scale, scene.view.frame.rapidity)
    else:
        taus = np.array(ends[:1])
    places = scene.chart.to_chart(line.event(taus)).T
    return places if np.all(np.isfinite(places)) else None
