"""Readouts of a body between two worldlines."""

from __future__ import annotations

import math
from collections.abc import Iterator

from tauline.readouts.pairs import INTERVAL
from tauline.readouts.readout import Readout, Working, format_number, readout
from tauline.resolve.results import BodyResult, FrameResult, Resolved
from tauline.scenario.units import LENGTH
from tauline.spacetime import gamma
from tauline.worldlines import Coast


def body_readouts(resolved: Resolved, body: BodyResult, frame: FrameResult) -> Iterator[Readout]:
    """Length in the frame and proper length, where the ends coast at one velocity.

    Ends at (u₁, v₁), (u₂, v₂) with rapidity φ are |Δv e^{−φ} − Δu e^{φ}|/2 apart in their rest
    frame, which no shift of either event along its own worldline changes.
    """
    first, second = (end.line for end in body.ends)
    if not (
        isinstance(first, Coast)
        and isinstance(second, Coast)
        and math.isclose(first.start_rapidity, second.start_rapidity, rel_tol=1e-12, abs_tol=1e-15)
    ):
        note = "its ends do not share a rest frame for good: take two simultaneous events"
        yield Readout(name="length", symbol="L", number=None, unit="", note=note)
        return
    du, dv = (float(step) for step in second.point - first.point)
    phi = first.start_rapidity
    proper = 0.5 * abs(dv * math.exp(-phi) - du * math.exp(phi))
    factor = float(gamma(phi - frame.rapidity))
    yield readout(resolved.units, "proper length", "L₀", proper, LENGTH)
    yield readout(
        resolved.units,
        "length",
        "L",
        proper / factor,
        LENGTH,
        frame=frame.label,
        working=Working("L = L₀/γ", INTERVAL, f"γ = {format_number(factor, 6)}"),
    )
