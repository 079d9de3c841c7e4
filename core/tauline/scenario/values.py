"""What the fields of a scenario's objects hold: values, references, velocities.

A :data:`Value` is kept as the author wrote it: a number in the scenario's units, or a text with
a unit or an expression over parameters; it gets its meaning when the scenario is resolved.
References are ids.
"""

from __future__ import annotations

from typing import Annotated, Literal

import msgspec

from tauline.scenario.units import ACCELERATION, LENGTH, NUMBER, TIME, VELOCITY, Dimension

Value = float | str


def _of(dimension: Dimension) -> msgspec.Meta:
    return msgspec.Meta(extra={"dimension": dimension})


def _id_of(*kinds: str) -> msgspec.Meta:
    return msgspec.Meta(extra={"refers_to": kinds})


# The types of fields: what a value measures, what an id refers to. Reading, editing and the JSON
# Schema all follow from them.
PureNumber = Annotated[Value, _of(NUMBER)]
Time = Annotated[Value, _of(TIME)]
Length = Annotated[Value, _of(LENGTH)]
Speed = Annotated[Value, _of(VELOCITY)]
Acceleration = Annotated[Value, _of(ACCELERATION)]
FrameId = Annotated[str, _id_of("frame")]
EventId = Annotated[str, _id_of("event")]
WorldlineId = Annotated[str, _id_of("worldline")]
PlaceId = Annotated[str, _id_of("event", "worldline")]
EventOrStart = Annotated[str, msgspec.Meta(extra={"refers_to": ("event",), "words": ("start",)})]

Direction = Literal["+x", "-x"]

BASE = "base"
"""Id of the base frame unless the file names it."""


class Velocity(msgspec.Struct, frozen=True, kw_only=True, omit_defaults=True):
    """A velocity along x, given in one of four ways.

    ``velocity`` (with a unit, or in the scenario's units), ``rapidity`` (a pure number), or
    ``gamma`` or ``one_minus_beta`` (pure numbers), each of the last two with a ``direction``.
    ``one_minus_beta`` keeps every digit of a speed very near that of light.
    """

    velocity: Speed | None = None
    rapidity: PureNumber | None = None
    gamma: PureNumber | None = None
    one_minus_beta: PureNumber | None = None
    direction: Direction | None = None


class Named(msgspec.Struct, frozen=True, kw_only=True, omit_defaults=True):
    """What every object has."""

    id: str
    label: str = ""


class NamedVelocity(Velocity, frozen=True, kw_only=True, omit_defaults=True):
    """The same, for an object with a velocity (a struct has one base)."""

    id: str
    label: str = ""
