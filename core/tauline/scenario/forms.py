"""From a table of the file to an object: which form it takes, and whether it has that form.

Driven by the fields of the object classes, so that a new field or a new form needs nothing here
but its place in :data:`FORMS`. All faults of a table are found at once.
"""

from __future__ import annotations

import math
import re
import types
import typing
from collections.abc import Mapping
from difflib import get_close_matches
from typing import Any, TypeVar

import msgspec

from tauline.scenario.diagnosis import Diagnosis
from tauline.scenario.objects import (
    AcceleratedLeg,
    Body,
    Broken,
    ClockEvent,
    CoastLeg,
    CoastLine,
    CoastUntil,
    CoordinateEvent,
    Frame,
    FrameTimeEvent,
    Itinerary,
    LightCone,
    MeetingEvent,
    Object,
    Pulses,
    RestLine,
    Signal,
    SimultaneousEvent,
    Simultaneity,
    SpeedUntil,
    Velocity,
    View,
)

ID = re.compile(r"[a-z][a-z0-9_-]*")

S = TypeVar("S", bound=msgspec.Struct)
Table = Mapping[str, Any]

FORMS: dict[str, tuple[tuple[type[Any], tuple[str, ...]], ...]] = {
    "frame": ((Frame, ()),),
    "worldline": ((Itinerary, ("leg",)), (CoastLine, ("through",)), (RestLine, ("x",))),
    "event": (
        (MeetingEvent, ("meeting",)),
        (SimultaneousEvent, ("simultaneous_with",)),
        (ClockEvent, ("on", "proper_time")),
        (FrameTimeEvent, ("on", "time")),
        (CoordinateEvent, ("t",)),
        (CoordinateEvent, ("x",)),
    ),
    "signal": ((Signal, ()),),
    "pulses": ((Pulses, ()),),
    "simultaneity": ((Simultaneity, ()),),
    "region": ((LightCone, ()),),
    "body": ((Body, ()),),
    "view": ((View, ()),),
}
"""The forms a kind of table can take, each with the keys it is recognised by."""

CHOICES = {
    "worldline": "give x (at rest), through (coasting), or legs under [[worldline.leg]]",
    "event": "give t and x; on with proper_time or time; meeting; or simultaneous_with",
}

SPEEDS = ("velocity", "rapidity", "gamma", "one_minus_beta")
LEGS = "leg"


def build(kind: str, index: int, table: object) -> Object:
    """Make the object of one table, the ``index``-th (from 0) of its kind.

    A table that does not have the form of its kind becomes Broken, with all its faults.
    """
    handle = f"{kind}[{index + 1}]"
    if not isinstance(table, dict):
        fault = Diagnosis(
            object=handle, message=f"this is not a table; start each with [[{kind}]]"
        )
        return Broken(id=handle, kind=kind, table={}, faults=(fault,))
    given = table.get("id")
    own_id = given if isinstance(given, str) and ID.fullmatch(given) else handle
    check = _Check(own_id)
    form = _form(kind, table)
    made: Any = None
    if form is None:
        check.fault("", f"this {kind} does not say where it is", CHOICES[kind])
        check.id_of(table)
    else:
        made = check.struct(form, table, "")
    if check.faults or made is None:
        label = table.get("label")
        return Broken(
            id=own_id,
            kind=kind,
            table=dict(table),
            faults=tuple(check.faults),
            label=label if isinstance(label, str) else "",
        )
    return typing.cast(Object, made)


def _form(kind: str, table: Table) -> type[Any] | None:
    for form, keys in FORMS[kind]:
        if all(key in table for key in keys):
            return form
    return None


class _Check:
    """Collects the faults of one table while it is turned into an object."""

    def __init__(self, owner: str) -> None:
        self.owner = owner
        self.faults: list[Diagnosis] = []

    def fault(self, key: str, message: str, hint: str = "") -> None:
        self.faults.append(Diagnosis(object=self.owner, key=key, message=message, hint=hint))

    def id_of(self, table: Table) -> None:
        given = table.get("id")
        if given is None:
            self.fault("id", "the id is missing", "give it one of its own, such as id = \"ship\"")
        elif not (isinstance(given, str) and ID.fullmatch(given)):
            self.fault(
                "id",
                f"{given!r} is not an id",
                "a small letter first, then small letters, digits, _ and -",
            )

    def struct(self, form: type[S], table: Table, prefix: str) -> S | None:
        """Turn a table into a struct field by field; None if anything is wrong with it."""
        before = len(self.faults)
        fields = {field.encode_name: field for field in msgspec.structs.fields(form)}
        hints = typing.get_type_hints(form)
        if "id" in fields:
            self.id_of(table)
        for key in table:
            if key not in fields:
                near = get_close_matches(key, list(fields), n=1)
                known = ", ".join(fields)
                hint = f"did you mean '{near[0]}'?" if near else f"known here: {known}"
                self.fault(prefix + key, f"unknown key '{key}'", hint)
        values: dict[str, Any] = {}
        for key, field in fields.items():
            if key in table:
                values[field.name] = self.value(hints[field.name], table[key], prefix + key)
            elif field.required and key != "id":
                self.fault(prefix + key, f"'{key}' is missing")
        self._rules(form, table, prefix)
        return form(**values) if len(self.faults) == before else None

    def value(self, wanted: Any, given: object, key: str) -> object:
        """Turn one value into what its field takes; a fault where it is something else."""
        if key == LEGS or key.endswith("." + LEGS):
            return self._legs(given, key)
        structs = [part for part in _parts(wanted) if _is_struct(part)]
        if structs and isinstance(given, dict):
            return self.struct(structs[0], given, f"{key}.")
        if not _all_finite(given):
            self.fault(key, "this is not a finite number")
            return None
        try:
            return msgspec.convert(given, wanted, strict=True)
        except (msgspec.ValidationError, OverflowError, RecursionError):
            self.fault(key, f"expected {_described(wanted)}, got {_shown(given)}")
            return None

    def _legs(self, given: object, key: str) -> object:
        if not isinstance(given, list) or not given:
            self.fault(key, "expected legs", "start each with [[worldline.leg]]")
            return ()
        legs = []
        for number, table in enumerate(given, start=1):
            place = f"{key}[{number}]"
            if not isinstance(table, dict):
                self.fault(place, f"expected a table, got {_shown(table)}")
                continue
            form = AcceleratedLeg if "acceleration" in table else CoastLeg
            legs.append(self.struct(form, table, f"{place}."))
        return tuple(legs)

    def _rules(self, form: type[Any], table: Table, prefix: str) -> None:
        """Check what goes together and what does not."""
        if issubclass(form, Velocity):
            self._speed(table, prefix)
        if form in (CoastLeg, AcceleratedLeg) and "for" in table and "until" in table:
            self.fault(f"{prefix}until", "a leg ends in one way", "give either for or until")
        if form is CoastUntil:
            self._one_of(table, prefix, ("time", "x", "proper_time", "event", "meets"))
            if "frame" in table and not {"time", "x"} & set(table):
                self.fault(f"{prefix}frame", "a frame goes with time or x only")
        if form is SpeedUntil:
            self._one_of(table, prefix, (*SPEEDS, "proper_time"))

    def _speed(self, table: Table, prefix: str) -> None:
        given = [key for key in SPEEDS if key in table]
        if len(given) > 1:
            self.fault(
                prefix + given[1], f"the velocity is given twice: {' and '.join(given)}"
            )
        if given and given[0] in ("gamma", "one_minus_beta"):
            if "direction" not in table:
                self.fault(
                    prefix + given[0],
                    f"'{given[0]}' does not say which way",
                    'add direction = "+x" or direction = "-x"',
                )
        elif "direction" in table and given:
            self.fault(
                f"{prefix}direction", f"the sign of '{given[0]}' says which way it goes already"
            )

    def _one_of(self, table: Table, prefix: str, keys: tuple[str, ...]) -> None:
        given = [key for key in keys if key in table]
        if len(given) != 1:
            what = "nothing" if not given else " and ".join(given)
            place = prefix + given[1] if given else prefix.rstrip(".")
            self.fault(place, f"a leg ends in one way, this says {what}", "one of " + ", ".join(keys))


def _parts(wanted: Any) -> tuple[Any, ...]:
    if typing.get_origin(wanted) in (typing.Union, types.UnionType):
        return tuple(part for arg in typing.get_args(wanted) for part in _parts(arg))
    return (wanted,)


def _is_struct(part: Any) -> bool:
    return isinstance(part, type) and issubclass(part, msgspec.Struct)


def _all_finite(value: object) -> bool:
    if isinstance(value, float):
        return math.isfinite(value)
    if isinstance(value, list):
        return all(_all_finite(item) for item in value)
    return True


def _described(wanted: Any) -> str:
    names = {str: "a text", float: "a number", int: "a whole number", bool: "true or false"}
    words = []
    for part in _parts(wanted):
        if part is type(None):
            continue
        origin, arguments = typing.get_origin(part), typing.get_args(part)
        if origin is typing.Literal:
            words.append("one of " + ", ".join(repr(item) for item in arguments))
        elif origin is tuple:
            if arguments[-1] is Ellipsis:
                words.append(f"a list, each {_described(arguments[0])}")
            else:
                words.append(f"a list of {len(arguments)}, each {_described(arguments[0])}")
        elif _is_struct(part):
            keys = ", ".join(field.encode_name for field in msgspec.structs.fields(part))
            words.append(f"a table {{ {keys} }}")
        else:
            words.append(names.get(part, str(part)))
    return " or ".join(dict.fromkeys(words))


def _shown(value: object) -> str:
    if isinstance(value, dict):
        return "a table"
    text = "true" if value is True else "false" if value is False else repr(value)
    return text if len(text) <= 40 else text[:37] + "…"
