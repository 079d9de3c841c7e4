"""The objects of a scenario, as frozen values.

Every object has an ``id`` (unique over all kinds) and an optional ``label`` for the reader.
A :data:`Value` is kept as the author wrote it: a number in the scenario's units, or a text with
a unit or an expression over parameters; it gets its meaning when the scenario is resolved.
References are ids. A field left out by the author is ``None``.

A class per form of an object; which form a table of the file has follows from its keys
(:mod:`tauline.scenario.forms`).
"""

from __future__ import annotations

from typing import Any, Literal

import msgspec

from tauline.scenario.diagnosis import Diagnosis
from tauline.scenario.values import (
    Acceleration,
    Direction,
    EventId,
    EventOrStart,
    FrameId,
    Length,
    Named,
    NamedVelocity,
    PlaceId,
    Time,
    Velocity,
    WorldlineId,
)
from tauline.worldlines.protocol import Side

# --- frames -----------------------------------------------------------------------------------


class Frame(NamedVelocity, frozen=True, kw_only=True, omit_defaults=True):
    """An inertial frame moving along x relative to another one.

    A frame without a velocity and without ``relative_to`` names the base frame; a scenario has
    at most one such. ``origin`` is the event at t′ = x′ = 0 (default: that of the base frame).
    """

    relative_to: FrameId | None = None
    origin: EventId | None = None


class HalfwayFrame(Named, frozen=True, kw_only=True, omit_defaults=True):
    """The frame half-way between two others: it sees them go with opposite velocities."""

    halfway: tuple[FrameId, FrameId]
    origin: EventId | None = None


# --- worldlines -------------------------------------------------------------------------------


class FrameTime(msgspec.Struct, frozen=True, kw_only=True, omit_defaults=True):
    """A time in a named frame (default: the base frame)."""

    time: Time
    frame: FrameId | None = None


LineEnd = EventId | FrameTime
"""Where a worldline starts or ends: at an event (its id) or at a time of a frame."""


class Clock(msgspec.Struct, frozen=True, kw_only=True, omit_defaults=True):
    """The clock carried along a worldline shows ``reads`` at ``at``: an event, or ``start``.

    ``start`` is where the worldline starts; on one without a start, an event of that id.
    """

    reads: Time
    at: EventOrStart = "start"


class RestLine(Named, frozen=True, kw_only=True, omit_defaults=True):
    """At rest at place ``x`` of a frame; endless where no ``start`` or ``end`` is given.

    As on every worldline, the clock counts from 0 at the start unless ``clock`` says otherwise.
    """

    clock: Clock | None = None
    x: Length
    frame: FrameId | None = None
    start: LineEnd | None = None
    end: LineEnd | None = None


class CoastLine(NamedVelocity, frozen=True, kw_only=True, omit_defaults=True):
    """Through an event at a velocity measured in ``frame``."""

    clock: Clock | None = None
    through: EventId
    frame: FrameId | None = None
    start: LineEnd | None = None
    end: LineEnd | None = None


class CoastUntil(msgspec.Struct, frozen=True, kw_only=True, omit_defaults=True):
    """Where a coasting leg ends; exactly one of time, x, proper_time, event and meets.

    ``time`` and ``x`` are coordinates of ``frame``; ``proper_time`` is a reading of the
    traveller's own clock; ``event`` an event the leg goes straight to; ``meets`` another
    worldline.
    """

    time: Time | None = None
    x: Length | None = None
    frame: FrameId | None = None
    proper_time: Time | None = None
    event: EventId | None = None
    meets: WorldlineId | None = None


class CoastLeg(Velocity, frozen=True, kw_only=True, omit_defaults=True):
    """A stretch without acceleration.

    Without a velocity it goes on as the leg before ended (or straight to ``until.event``). A
    velocity other than that makes a corner. ``for`` is the leg's own proper time. Without
    ``for`` and ``until`` the leg is endless, which only the last one may be.
    """

    frame: FrameId | None = None
    duration: Time | None = msgspec.field(default=None, name="for")
    until: CoastUntil | None = None


class PushUntil(Velocity, frozen=True, kw_only=True, omit_defaults=True):
    """Where an accelerated leg ends; exactly one of a velocity, time, x, proper_time and meets.

    The velocity, ``time`` and ``x`` are those in ``frame``; ``proper_time`` is a reading of the
    traveller's own clock; ``meets`` another worldline.
    """

    time: Time | None = None
    x: Length | None = None
    frame: FrameId | None = None
    proper_time: Time | None = None
    meets: WorldlineId | None = None


class AcceleratedLeg(msgspec.Struct, frozen=True, kw_only=True, omit_defaults=True):
    """A stretch of constant proper acceleration along x.

    ``for`` is the leg's own proper time. Without ``for`` and ``until`` the leg is endless, which
    only the last one may be.
    """

    acceleration: Acceleration
    duration: Time | None = msgspec.field(default=None, name="for")
    until: PushUntil | None = None


Leg = CoastLeg | AcceleratedLeg


class Itinerary(NamedVelocity, frozen=True, kw_only=True, omit_defaults=True):
    """Legs one after the other from the event ``start``.

    ``velocity`` (measured in ``frame``, which is also the default frame of the legs) is that at
    the start; without one the traveller starts at rest in ``frame``. With ``endless_past`` the
    worldline reaches ``start`` from the endless past at that velocity.
    """

    clock: Clock | None = None
    start: EventId
    frame: FrameId | None = None
    endless_past: bool = False
    legs: tuple[Leg, ...] = msgspec.field(name="leg")


class CompanionLine(Named, frozen=True, kw_only=True, omit_defaults=True):
    """A line at a constant proper ``distance`` along +x from the line ``companion``: Born rigid.

    It ends where that breaks: at a corner, or where the distance is more than c²/|a| behind the
    acceleration.
    """

    clock: Clock | None = None
    companion: WorldlineId
    distance: Length


class DisplacedLine(Named, frozen=True, kw_only=True, omit_defaults=True):
    """A line of the same programme as ``displaced``, moved by the length ``by`` along +x.

    The length is measured in ``frame``, and the programme begins there at the same time.
    """

    clock: Clock | None = None
    displaced: WorldlineId
    by: Length
    frame: FrameId | None = None


# --- events -----------------------------------------------------------------------------------


class CoordinateEvent(Named, frozen=True, kw_only=True, omit_defaults=True):
    """At ``t``, ``x`` of a frame (default: the base frame)."""

    t: Time
    x: Length
    frame: FrameId | None = None


class ClockEvent(Named, frozen=True, kw_only=True, omit_defaults=True):
    """On a worldline where its clock reads ``proper_time``."""

    on: WorldlineId
    proper_time: Time


class FrameTimeEvent(Named, frozen=True, kw_only=True, omit_defaults=True):
    """On a worldline at ``time`` of a frame."""

    on: WorldlineId
    time: Time
    frame: FrameId | None = None


class MeetingEvent(Named, frozen=True, kw_only=True, omit_defaults=True):
    """Where two worldlines meet.

    Of several meetings the ``which``-th is meant, counted from 1 (from −1 backwards: the last);
    those not later than the event ``after``, where given, are left out of the count.
    """

    meeting: tuple[WorldlineId, WorldlineId]
    which: int = 1
    after: EventId | None = None


class SimultaneousEvent(Named, frozen=True, kw_only=True, omit_defaults=True):
    """On a worldline, simultaneous with an event.

    Simultaneous in ``frame``, or in the momentary rest frame of the worldline ``observer`` at
    that event (which must lie on it); one of the two. At a corner of the observer, ``side`` says
    which of its two rest frames is meant.
    """

    on: WorldlineId
    simultaneous_with: EventId
    frame: FrameId | None = None
    observer: WorldlineId | None = None
    side: Side | None = None


# --- light and simultaneity -------------------------------------------------------------------


class Signal(Named, frozen=True, kw_only=True, omit_defaults=True):
    """Light from one place to another.

    ``from`` and ``to`` are an event and a worldline in either order (``to`` a worldline: where
    it is received; ``from`` a worldline: where it was sent, so as to arrive at the event), or two
    events a light ray joins. With ``direction`` instead of ``to`` it goes off towards that side.
    Its ends are the events ``ID.sent`` and ``ID.received``.
    """

    source: PlaceId = msgspec.field(name="from")
    to: PlaceId | None = None
    direction: Direction | None = None


class Pulses(Named, frozen=True, kw_only=True, omit_defaults=True):
    """Light sent from one worldline to another, over and over.

    The first pulse leaves one period ``every`` (of the sender's proper time) after ``start``,
    the last not later than ``end`` (events on the sender; default: where its worldline starts
    and ends) or after ``count`` pulses. Pulse k is ``ID.k``, its ends ``ID.k.sent`` and
    ``ID.k.received``.
    """

    source: WorldlineId = msgspec.field(name="from")
    to: WorldlineId
    every: Time
    start: EventId | None = None
    end: EventId | None = None
    count: int | None = None


class Simultaneity(Named, frozen=True, kw_only=True, omit_defaults=True):
    """The line of all events simultaneous with one.

    In ``frame``, or in the momentary rest frame of ``observer`` at that event, as in
    :class:`SimultaneousEvent`.
    """

    through: EventId
    frame: FrameId | None = None
    observer: WorldlineId | None = None
    side: Side | None = None


# --- surfaces and views -----------------------------------------------------------------------


class LightCone(Named, frozen=True, kw_only=True, omit_defaults=True):
    """The shaded light cone of an event (a ``[[region]]``)."""

    light_cone: EventId
    part: Literal["future", "past", "both"] = "both"


class Body(Named, frozen=True, kw_only=True, omit_defaults=True):
    """A rod, a train, a shed: the sheet swept between two worldlines."""

    between: tuple[WorldlineId, WorldlineId]


Layer = Literal["grid", "hyperbolas", "clock_ticks", "labels", "signals", "light_cones", "caption"]


class View(Named, frozen=True, kw_only=True, omit_defaults=True):
    """From where and how the scenario is looked at.

    ``t`` and ``x`` are the window, in coordinates of ``frame``; ``axes`` the other frames whose
    axes are drawn; ``layers`` what is drawn besides worldlines and events (default: all but
    ``grid`` and ``hyperbolas``); ``pivot`` the event kept in place while boosting.
    """

    frame: FrameId | None = None
    t: tuple[Time, Time] | None = None
    x: tuple[Length, Length] | None = None
    axes: tuple[FrameId, ...] = ()
    layers: tuple[Layer, ...] = ("clock_ticks", "labels", "signals", "light_cones", "caption")
    pivot: EventId | None = None


class Broken(msgspec.Struct, frozen=True, kw_only=True):
    """A table that does not have the form of its kind; kept, so that nothing is lost.

    ``id`` is a handle such as ``worldline[2]`` where the table has no usable id of its own.
    """

    id: str
    kind: str
    table: dict[str, Any]
    faults: tuple[Diagnosis, ...]
    label: str = ""


Worldline = RestLine | CoastLine | Itinerary | CompanionLine | DisplacedLine
Event = CoordinateEvent | ClockEvent | FrameTimeEvent | MeetingEvent | SimultaneousEvent
Object = (
    Frame
    | HalfwayFrame
    | Worldline
    | Event
    | Signal
    | Pulses
    | Simultaneity
    | LightCone
    | Body
    | View
    | Broken
)


def kind_of(thing: Object) -> str:
    """Name of the file's table an object stands in, such as ``worldline``."""
    match thing:
        case Broken():
            return thing.kind
        case RestLine() | CoastLine() | Itinerary() | CompanionLine() | DisplacedLine():
            return "worldline"
        case Signal():
            return "signal"
        case Pulses():
            return "pulses"
        case LightCone():
            return "region"
        case Frame() | HalfwayFrame():
            return "frame"
        case Simultaneity() | Body() | View():
            return type(thing).__name__.lower()
        case _:
            return "event"
