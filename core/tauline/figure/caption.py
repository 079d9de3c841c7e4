"""The line below a figure: from where it is seen, and whose axes are whose."""

from __future__ import annotations

from tauline.figure.drawing import Run
from tauline.figure.symbols import mark, one_line
from tauline.figure.view import DiagramView
from tauline.readouts.readout import format_number
from tauline.resolve.results import FrameResult, Resolved
from tauline.spacetime import beta, one_minus_beta

NEAR_LIGHT = 4.0


def caption(resolved: Resolved, view: DiagramView) -> tuple[Run, ...]:
    """Say which frame the diagram is seen from, and name the other axes in it."""
    runs = [Run(f"Seen from {_name(view.frame)}")]
    if view.frame.id != resolved.base.id:
        runs += [
            Run(" ("),
            *speed(view.frame.rapidity),
            Run(f" relative to {_name(resolved.base)})"),
        ]
    for frame in view.axes:
        after = mark(resolved, frame)
        runs += [Run("; "), Run("t", "italic"), *after, Run(", "), Run("x", "italic"), *after]
        runs.append(Run(f": {_name(frame)}"))
    runs.append(Run("."))
    return tuple(runs)


def speed(rapidity: float) -> tuple[Run, ...]:
    """Write a velocity as β = …, or as 1 − |β| = … where β would show as ±1."""
    if abs(rapidity) < NEAR_LIGHT:
        return Run("β", "italic"), Run(f" = {format_number(float(beta(rapidity)), 4)}")
    deficit = format_number(float(one_minus_beta(abs(rapidity))), 3)
    sign = "+" if rapidity > 0.0 else "−"
    return Run("1 − |"), Run("β", "italic"), Run(f"| = {deficit}, towards {sign}x")


def _name(frame: FrameResult) -> str:
    return one_line(frame.label) or frame.id or "a frame of its own"
