"""The event table: every event in every chosen frame, from one resolution."""

from __future__ import annotations

from collections.abc import Sequence

import msgspec

from tauline.errors import UnknownIdError
from tauline.readouts.pairs import coordinates as coordinates_in
from tauline.readouts.pairs import interval_class, light_cone
from tauline.resolve.results import EventResult, FrameResult, Placement, Resolved
from tauline.scenario.units import LENGTH, TIME, UnitSystem


class Coordinates(msgspec.Struct, frozen=True):
    """An event in one frame: ``t`` and ``x`` in the scenario's units, ``u``, ``v`` in times."""

    t: float
    x: float
    u: float
    v: float


class EventRow(msgspec.Struct, frozen=True, kw_only=True):
    """One event, with its coordinates in each frame of the table."""

    id: str
    label: str
    coordinates: tuple[Coordinates, ...]
    on: tuple[Placement, ...]
    interval_class: str = ""


class WorldlineRow(msgspec.Struct, frozen=True, kw_only=True):
    """One worldline: the events at its ends (ids; None: no event there) and its proper time.

    ``start`` and ``end`` are clock readings in the scenario's time unit, None where it is
    endless; so is ``proper_time``, the time elapsed between them.
    """

    id: str
    label: str
    start: float | None
    end: float | None
    proper_time: float | None


class EventTable(msgspec.Struct, frozen=True, kw_only=True):
    """Events by rows, frames by columns. ``interval_from`` is the event classes refer to."""

    units: UnitSystem
    frames: tuple[FrameResult, ...]
    rows: tuple[EventRow, ...]
    worldlines: tuple[WorldlineRow, ...]
    interval_from: str = ""


def event_table(
    resolved: Resolved,
    frames: Sequence[FrameResult] | None = None,
    interval_from: str = "",
) -> EventTable:
    """Tabulate all events in the given frames (default: the declared ones, base frame first).

    With ``interval_from``, each row also names the class of the interval from that event.
    Raises UnknownIdError if there is no such event.
    """
    chosen = tuple(resolved.frames.values()) if frames is None else tuple(frames)
    if interval_from and interval_from not in resolved.events:
        raise UnknownIdError(f"there is no event '{interval_from}'")
    origin = resolved.events.get(interval_from)
    return EventTable(
        units=resolved.units,
        frames=chosen,
        rows=tuple(_row(resolved, event, chosen, origin) for event in resolved.events.values()),
        worldlines=_worldlines(resolved),
        interval_from=interval_from,
    )


def chosen_frames(resolved: Resolved, ids: Sequence[str]) -> tuple[FrameResult, ...]:
    """Return the frames of these ids; UnknownIdError names those there are."""
    known = resolved.frames | resolved.leg_frames
    missing = [frame_id for frame_id in ids if frame_id not in known]
    if missing:
        raise UnknownIdError(f"there is no frame '{missing[0]}'", "there are: " + ", ".join(known))
    return tuple(known[frame_id] for frame_id in ids)


def _row(
    resolved: Resolved,
    event: EventResult,
    frames: tuple[FrameResult, ...],
    origin: EventResult | None,
) -> EventRow:
    units = resolved.units
    coordinates = []
    for frame in frames:
        u, v = light_cone(event, frame)
        t, x = coordinates_in(event, frame)
        coordinates.append(
            Coordinates(t=units.to_reader(t, TIME), x=units.to_reader(x, LENGTH), u=u, v=v)
        )
    return EventRow(
        id=event.id,
        label=event.label,
        coordinates=tuple(coordinates),
        on=event.on,
        interval_class=str(interval_class(origin, event)) if origin is not None else "",
    )


def _worldlines(resolved: Resolved) -> tuple[WorldlineRow, ...]:
    rows = []
    for result in resolved.worldlines.values():
        line = result.line
        start, end = (
            result.reading(tau) if abs(tau) != float("inf") else None
            for tau in (line.start, line.end)
        )
        finite = start is not None and end is not None
        rows.append(
            WorldlineRow(
                id=result.id,
                label=result.label,
                start=start,
                end=end,
                proper_time=line.end - line.start if finite else None,
            )
        )
    return tuple(rows)
