"""The readouts for whatever is selected."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from itertools import chain

from tauline.readouts.bodies import body_readouts
from tauline.readouts.observers import (
    observer_and_event,
    two_observers,
    velocity_readouts,
    worldline_readouts,
)
from tauline.readouts.pairs import event_readouts, pair_readouts
from tauline.readouts.readout import Readout
from tauline.readouts.signals import pulses_readouts, signal_readouts
from tauline.resolve.results import (
    BodyResult,
    EventResult,
    FrameResult,
    PulsesResult,
    Resolved,
    SignalResult,
    SimultaneityResult,
    WorldlineResult,
)

Selected = (
    EventResult
    | WorldlineResult
    | SignalResult
    | PulsesResult
    | FrameResult
    | SimultaneityResult
    | BodyResult
)


def readouts_for(
    resolved: Resolved, selection: Sequence[str], frame: FrameResult
) -> tuple[Readout, ...]:
    """Return what there is to say, in a frame, of one or two selected things.

    ``selection`` holds ids, the first selected first; ids without a result are passed over, and
    of more than two things the last two are taken.
    """
    found = [thing for name in selection if (thing := find(resolved, name)) is not None]
    match found[-2:]:
        case [EventResult() as first, EventResult() as second]:
            return tuple(pair_readouts(resolved, first, second, frame))
        case [WorldlineResult() as first, WorldlineResult() as second]:
            return tuple(two_observers(resolved, first, second, frame))
        case [WorldlineResult() as line, EventResult() as event] | [
            EventResult() as event,
            WorldlineResult() as line,
        ]:
            return tuple(observer_and_event(resolved, line, event, frame))
        case [*_, last]:
            return tuple(_of_one(resolved, last, frame))
        case _:
            return ()


def find(resolved: Resolved, some_id: str) -> Selected | None:
    """Return what an id resolved to, for those kinds that have readouts."""
    signals = chain.from_iterable(group.signals for group in resolved.pulses.values())
    tables: tuple[dict[str, Selected], ...] = (
        dict(resolved.events),
        dict(resolved.worldlines),
        dict(resolved.signals),
        dict(resolved.pulses),
        dict(resolved.frames),
        dict(resolved.leg_frames),
        dict(resolved.simultaneities),
        dict(resolved.bodies),
        {signal.id: signal for signal in signals},
    )
    return next((table[some_id] for table in tables if some_id in table), None)


def _of_one(resolved: Resolved, thing: Selected, frame: FrameResult) -> Iterator[Readout]:
    match thing:
        case EventResult():
            yield from event_readouts(resolved, thing, frame)
        case WorldlineResult():
            yield from worldline_readouts(resolved, thing, frame)
        case SignalResult():
            yield from signal_readouts(resolved, thing, frame)
        case PulsesResult():
            yield from pulses_readouts(resolved, thing, frame)
        case FrameResult() | SimultaneityResult():
            yield from velocity_readouts(resolved.units, thing.rapidity, frame)
        case BodyResult():
            yield from body_readouts(resolved, thing, frame)
