"""Readouts of light signals and of pulses."""

from __future__ import annotations

import math
from collections.abc import Iterator

import msgspec

from tauline.readouts.pairs import coordinates, pair_readouts
from tauline.readouts.readout import Readout, readout
from tauline.resolve.results import FrameResult, PulsesResult, Resolved, SignalResult
from tauline.scenario.units import TIME


def signal_readouts(
    resolved: Resolved, signal: SignalResult, frame: FrameResult
) -> Iterator[Readout]:
    """When it was sent and received, on the clocks there and in the frame; Doppler factors."""
    units = resolved.units
    ends = [
        (what, resolved.events.get(event.id, event))
        for what, event in (("sent", signal.sent), ("received", signal.received))
        if event is not None
    ]
    for what, event in ends:
        yield readout(units, what, "t", coordinates(event, frame)[0], TIME, frame=frame.label)
        for placement in event.on:
            line = resolved.worldlines[placement.worldline]
            name = f"{what}, clock of {line.label or line.id}"
            yield readout(units, name, "τ", placement.proper_time, TIME)
    if len(ends) == 2:
        for item in pair_readouts(resolved, ends[0][1], ends[1][1], frame):
            if item.symbol in ("D", "v", "Δt"):
                yield item
    else:
        missing = "received" if signal.sent is not None else "sent"
        yield Readout(name=missing, symbol="", number=None, unit="", note=f"never: {signal.reason}")


def pulses_readouts(
    resolved: Resolved, pulses: PulsesResult, frame: FrameResult, frame_time: float = math.inf
) -> Iterator[Readout]:
    """How many pulses were sent and received by a time of the frame (internal units)."""
    sent = [s for s in pulses.signals if s.sent and coordinates(s.sent, frame)[0] <= frame_time]
    received = [s for s in sent if s.received and coordinates(s.received, frame)[0] <= frame_time]
    missed = [s for s in sent if s.received is None]
    counts = (
        ("sent", len(sent)),
        ("received", len(received)),
        ("never received", len(missed)),
        ("in flight", len(sent) - len(received) - len(missed)),
    )
    for name, number in counts:
        if name != "in flight" or number:
            yield Readout(name=f"pulses {name}", symbol="n", number=float(number), unit="")
    if pulses.signals:
        yield from _first_and_last(resolved, pulses, frame)


def _first_and_last(
    resolved: Resolved, pulses: PulsesResult, frame: FrameResult
) -> Iterator[Readout]:
    """Doppler factors of the first and the last pulse that travels at all."""
    factors = (
        item
        for signal in pulses.signals
        for item in signal_readouts(resolved, signal, frame)
        if item.symbol == "D"
    )
    backwards = (
        item
        for signal in reversed(pulses.signals)
        for item in signal_readouts(resolved, signal, frame)
        if item.symbol == "D"
    )
    for what, item in (("first", next(factors, None)), ("last", next(backwards, None))):
        if item is not None:
            yield msgspec.structs.replace(item, name=f"Doppler factor, {what} pulse")
