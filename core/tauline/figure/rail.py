"""The velocity rail: frames and observers along a ruler linear in rapidity."""

from __future__ import annotations

from collections.abc import Mapping
from functools import cache

import msgspec

from tauline.errors import QuantityError
from tauline.figure.caption import speed
from tauline.figure.symbols import frame_hue
from tauline.resolve.results import FrameResult, Point, Resolved
from tauline.scenario.expression import evaluate, names_in
from tauline.scenario.units import NUMBER, VELOCITY
from tauline.spacetime import from_beta

RULER_BETAS = (0.0, 0.2, 0.4, 0.6, 0.8, 0.9, 0.95, 0.99, 0.999)
"""Where the ruler is labelled, to both sides."""


class RulerMark(msgspec.Struct, frozen=True):
    """A labelled place of the ruler."""

    rapidity: float
    text: str


class Flag(msgspec.Struct, frozen=True, kw_only=True):
    """A frame or an observer on the rail; ``rapidity`` is relative to the base frame.

    ``target`` is the id of the frame it leads to, "" for the momentary rest frame of an
    accelerating observer. ``is_frame`` tells a declared frame from an observer.
    """

    target: str
    label: str
    hue: int
    rapidity: float
    is_frame: bool


@cache
def ruler_marks() -> tuple[RulerMark, ...]:
    """The labelled places of the ruler, from left to right."""
    right = [RulerMark(float(from_beta(b)), f"{b:g}") for b in RULER_BETAS]
    left = [RulerMark(-mark.rapidity, f"−{mark.text}") for mark in right[:0:-1]]
    return (*left, *right)


def flags(resolved: Resolved, scrubbed: Mapping[str, float] | None = None) -> tuple[Flag, ...]:
    """All flags: every declared frame, and every observer that moves in the base frame.

    An observer at rest in a declared frame has that frame's flag. ``scrubbed`` gives the clock
    reading at which an accelerating observer is met; without one, its coasting legs have flags.
    """
    found = [
        Flag(
            target=frame.id,
            label=frame.label,
            hue=frame_hue(resolved, frame),
            rapidity=frame.rapidity,
            is_frame=True,
        )
        for frame in resolved.frames.values()
    ]
    readings = scrubbed or {}
    for result in resolved.worldlines.values():
        if result.id in readings:
            tau = readings[result.id] - result.clock_offset
            found.append(
                Flag(
                    target="",
                    label=f"{result.label or result.id}, now",
                    hue=result.observer,
                    rapidity=float(result.line.rapidity(tau)),
                    is_frame=False,
                )
            )
        for frame in resolved.leg_frames.values():
            if frame.leg_of == result.id and not _known(found, frame.rapidity):
                found.append(
                    Flag(
                        target=frame.id,
                        label=frame.label,
                        hue=result.observer,
                        rapidity=frame.rapidity,
                        is_frame=False,
                    )
                )
    return tuple(found)


def free_frame(resolved: Resolved, rapidity: float, origin: Point | None = None) -> FrameResult:
    """A frame nobody declared, at some rapidity, with the base frame's origin."""
    text = "".join(run.text for run in speed(rapidity))
    return FrameResult(
        id="",
        label=text,
        rapidity=rapidity,
        origin=resolved.base.origin if origin is None else origin,
    )


def typed_rapidity(text: str, resolved: Resolved) -> float:
    """Rapidity of a velocity somebody typed: ``0.6``, ``−0.8 c``, ``φ = 1.2``, an expression.

    Relative to the base frame; a bare number is β. QuantityError says what is wrong with it.
    """
    name, is_named, rest = text.partition("=")
    wanted = name.strip().lower() if is_named else ""
    value = rest if is_named else text
    known = {n: resolved.parameters[n] for n in names_in(value) if n in resolved.parameters}
    found = evaluate(value, resolved.units, known, None)
    if wanted in ("φ", "phi", "rapidity", "η", "θ"):
        if found.dimension != NUMBER or abs(found.value) > 300.0:
            raise QuantityError("a rapidity is a pure number up to 300")
        return found.value
    if wanted not in ("", "β", "beta", "v"):
        raise QuantityError(f"'{name.strip()}' is not asked for here", "write β = … or φ = …")
    if found.dimension not in (NUMBER, VELOCITY):
        raise QuantityError("this is not a velocity", "write '0.6 c'")
    if not abs(found.value) < 1.0:
        raise QuantityError(f"a speed of {abs(found.value):.6g} c is not below that of light")
    return float(from_beta(found.value))


def _known(found: list[Flag], rapidity: float) -> bool:
    return any(abs(flag.rapidity - rapidity) < 1e-12 for flag in found)
