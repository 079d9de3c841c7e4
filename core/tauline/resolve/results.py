"""What a scenario resolves to: places in spacetime, without a view.

Coordinates are light-cone coordinates (u, v) of the base frame, in the scenario's time unit with
c = 1 (so a length is a light-time); :class:`tauline.scenario.units.UnitSystem` turns them into
the scenario's units for the reader.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Literal

import msgspec
import numpy as np
from numpy.typing import NDArray

from tauline.resolve.memo import Node, Outcome
from tauline.scenario.diagnosis import Diagnosis, Severity
from tauline.scenario.objects import View
from tauline.scenario.scenario import Scenario
from tauline.scenario.units import Quantity, UnitSystem
from tauline.worldlines.protocol import Worldline

Point = NDArray[np.float64]
"""One event, shape ``(2,)``: u, v."""

State = Literal["resolved", "faulty", "blocked", "not received"]


class FrameResult(msgspec.Struct, frozen=True, kw_only=True):
    """An inertial frame: its rapidity relative to the base frame, and its origin event.

    ``leg_of`` is the worldline whose leg it is the rest frame of, "" for a declared frame.
    """

    id: str
    label: str
    rapidity: float
    origin: Point
    leg_of: str = ""


class Placement(msgspec.Struct, frozen=True):
    """An event's place on a worldline, by the clock carried along it."""

    worldline: str
    proper_time: float


class EventResult(msgspec.Struct, frozen=True, kw_only=True):
    """An event. ``owner`` is the object that made it, "" for one the author placed."""

    id: str
    label: str
    point: Point
    rounding: tuple[float, float] = (0.0, 0.0)
    """How far u and v may be off beyond their own rounding: those of a t and an x are."""
    on: tuple[Placement, ...] = ()
    owner: str = ""


class WorldlineResult(msgspec.Struct, frozen=True, kw_only=True):
    """A worldline and its clock: reading = τ + ``clock_offset``."""

    id: str
    label: str
    line: Worldline
    clock_offset: float
    observer: int
    """Running number of the worldline in the file; picks its colour."""

    def reading(self, tau: float) -> float:
        """Reading of the carried clock at the line's proper time ``tau``."""
        return tau + self.clock_offset


class SignalResult(msgspec.Struct, frozen=True, kw_only=True):
    """Light between two events; ``received`` (or ``sent``) is None where there is none.

    ``reason`` then says why. ``towards`` is +1 for light going to +x, −1 for light to −x.
    ``owner`` is the pulses object it belongs to, "" for a signal of its own. ``source_line`` and
    ``target_line`` are the worldlines it joins, where the author named them.
    """

    id: str
    label: str
    sent: EventResult | None
    received: EventResult | None
    towards: int
    reason: str = ""
    sent_off: bool = False
    """Whether it was sent off to one side and not to anything."""
    owner: str = ""
    source_line: str = ""
    target_line: str = ""


class PulsesResult(msgspec.Struct, frozen=True, kw_only=True):
    """Repeated signals, in order of sending."""

    id: str
    label: str
    signals: tuple[SignalResult, ...]


class SimultaneityResult(msgspec.Struct, frozen=True, kw_only=True):
    """The simultaneity line through an event in the frame of ``rapidity``.

    ``observer`` is the worldline whose momentary rest frame that is, "" for a named frame
    (then ``frame`` is its id).
    """

    id: str
    label: str
    through: EventResult
    rapidity: float
    observer: str = ""
    frame: str = ""


class LightConeResult(msgspec.Struct, frozen=True, kw_only=True):
    """The light cone of an event."""

    id: str
    label: str
    apex: EventResult
    part: Literal["future", "past", "both"]


class BodyResult(msgspec.Struct, frozen=True, kw_only=True):
    """The sheet between two worldlines."""

    id: str
    label: str
    ends: tuple[WorldlineResult, WorldlineResult]


class ViewResult(msgspec.Struct, frozen=True, kw_only=True):
    """A view with its window in diagram units (None: fit)."""

    id: str
    label: str
    frame: str
    t: tuple[float, float] | None
    x: tuple[float, float] | None
    declared: View
    pivot: EventResult | None


Result = (
    FrameResult
    | EventResult
    | WorldlineResult
    | SignalResult
    | PulsesResult
    | SimultaneityResult
    | LightConeResult
    | BodyResult
    | ViewResult
)


class Resolved(msgspec.Struct, frozen=True, kw_only=True):
    """Everything of a scenario that could be resolved, and what is wrong with the rest.

    ``frames`` holds the base frame first, then the declared ones; ``leg_frames`` those of the
    inertial worldlines and legs, with ids such as ``courier.leg-1``. ``events`` holds the
    author's events in file order, then those made by other objects.
    """

    scenario: Scenario
    units: UnitSystem
    parameters: dict[str, Quantity]
    frames: dict[str, FrameResult]
    leg_frames: dict[str, FrameResult]
    worldlines: dict[str, WorldlineResult]
    events: dict[str, EventResult]
    signals: dict[str, SignalResult]
    pulses: dict[str, PulsesResult]
    simultaneities: dict[str, SimultaneityResult]
    light_cones: dict[str, LightConeResult]
    bodies: dict[str, BodyResult]
    views: dict[str, ViewResult]
    states: dict[str, State]
    diagnoses: tuple[Diagnosis, ...]
    memo: Mapping[Node, Outcome]
    """What the next resolution takes over from this one."""

    @property
    def base(self) -> FrameResult:
        """The base frame."""
        return next(iter(self.frames.values()))

    @property
    def faults(self) -> tuple[Diagnosis, ...]:
        """The diagnoses that are faults, or follow from one."""
        return tuple(d for d in self.diagnoses if d.severity is not Severity.NOTE)

    def frame(self, frame_id: str) -> FrameResult:
        """Return a declared frame or a leg's frame; KeyError for neither."""
        return self.frames.get(frame_id) or self.leg_frames[frame_id]
