"""Simultaneity lines, light cones, bodies and views."""

from __future__ import annotations

from tauline.resolve.context import Context
from tauline.resolve.lines import rapidity_of
from tauline.resolve.memo import Fault
from tauline.resolve.results import (
    BodyResult,
    LightConeResult,
    SimultaneityResult,
    ViewResult,
)
from tauline.scenario.objects import Body, LightCone, Simultaneity, View
from tauline.scenario.units import LENGTH, TIME, Dimension
from tauline.scenario.values import Value

WIDEST = 1e100
"""Farthest edge of a window: squares of places on its page must stay numbers."""


def simultaneity(context: Context, thing: Simultaneity) -> SimultaneityResult:
    """Work out the slope of a simultaneity line."""
    origin = context.event(thing.through, "through")
    rapidity, frame = rapidity_of(context, origin.point, thing.frame, thing.observer, thing.side)
    return SimultaneityResult(
        id=thing.id,
        label=thing.label,
        through=origin,
        rapidity=rapidity,
        observer=thing.observer or "",
        frame=frame.id if frame else "",
    )


def light_cone(context: Context, thing: LightCone) -> LightConeResult:
    """Find the apex of a light cone."""
    return LightConeResult(
        id=thing.id,
        label=thing.label,
        apex=context.event(thing.light_cone, "light_cone"),
        part=thing.part,
    )


def body(context: Context, thing: Body) -> BodyResult:
    """Find the two worldlines of a body's ends."""
    first, second = (
        context.worldline(name, f"between[{number}]")
        for number, name in enumerate(thing.between, start=1)
    )
    return BodyResult(id=thing.id, label=thing.label, ends=(first, second))


def view(context: Context, thing: View) -> ViewResult:
    """Work out the window of a view, and see that all it names exists."""
    for number, name in enumerate(thing.axes, start=1):
        context.frame(name, f"axes[{number}]")
    return ViewResult(
        id=thing.id,
        label=thing.label,
        frame=context.frame(thing.frame, "frame").id,
        t=_range(context, thing.t, TIME, "t"),
        x=_range(context, thing.x, LENGTH, "x"),
        declared=thing,
        pivot=context.event(thing.pivot, "pivot") if thing.pivot else None,
    )


def _range(
    context: Context, given: tuple[Value, Value] | None, dimension: Dimension, key: str
) -> tuple[float, float] | None:
    if given is None:
        return None
    low, high = (
        context.quantity(value, dimension, f"{key}[{number}]")
        for number, value in enumerate(given, start=1)
    )
    if max(abs(low), abs(high)) > WIDEST:
        raise Fault(key, "this window reaches farther than can be drawn", "choose a smaller one")
    if not low < high:
        raise Fault(key, "a window must end after it begins", "put the smaller value first")
    return low, high
