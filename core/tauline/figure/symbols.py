"""Symbols and colours of frames: they belong to the frame and stay the same in every view."""

from __future__ import annotations

import math

from tauline.figure.drawing import NEUTRAL, Run
from tauline.resolve.results import FrameResult, Resolved
from tauline.scenario.units import LENGTH, TIME

PRIME = "\N{PRIME}"
MOST_PRIMES = 3


def one_line(text: str) -> str:
    """What an author wrote, without line ends and signs that cannot be printed."""
    return " ".join("".join(sign if sign.isprintable() else " " for sign in text).split())


def mark(resolved: Resolved, frame: FrameResult) -> tuple[Run, ...]:
    """What follows t and x in this frame: nothing, primes, or a subscript."""
    declared = list(resolved.frames)
    if frame.id in declared:
        number = declared.index(frame.id)
        if number == 0:
            return ()
        if number <= MOST_PRIMES:
            return (Run(PRIME * number),)
        return (Run(str(number), "sub"),)
    if frame.id:
        owner, _, leg = frame.id.partition(".leg-")
        several = sum(1 for name in resolved.leg_frames if name.startswith(f"{owner}.leg-")) > 1
        line = resolved.worldlines.get(owner)
        name = one_line(line.label) or owner if line is not None else owner
        return (Run(f"{name} {leg}" if several else name, "sub"),)
    return (Run("view", "sub"),)


def axis_title(resolved: Resolved, frame: FrameResult, axis: str) -> tuple[Run, ...]:
    """Title of an axis, such as t′ (yr); ``axis`` is ``t`` or ``x``."""
    unit = resolved.units.symbol(TIME if axis == "t" else LENGTH)
    return (Run(axis, "italic"), *mark(resolved, frame), Run(f" ({unit})"))


def frame_hue(resolved: Resolved, frame: FrameResult) -> int:
    """Colour of a frame: neutral for the base frame, else that of an observer at rest in it."""
    if frame.id == resolved.base.id:
        return NEUTRAL
    if frame.leg_of:
        return resolved.worldlines[frame.leg_of].observer
    for result in resolved.worldlines.values():
        legs = [leg for leg in resolved.leg_frames.values() if leg.leg_of == result.id]
        if any(_alike(leg.rapidity, frame.rapidity) for leg in legs) and frame.rapidity != 0.0:
            return result.observer
    declared = list(resolved.frames)
    number = declared.index(frame.id) if frame.id in declared else len(declared)
    return len(resolved.worldlines) + number - 1


def _alike(first: float, second: float) -> bool:
    return math.isclose(first, second, rel_tol=1e-12, abs_tol=1e-15)
