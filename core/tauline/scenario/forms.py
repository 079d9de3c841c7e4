"""From a table of the file to an object: which form it takes, and whether it has that form.

Driven by the fields of the object classes (:mod:`tauline.scenario.fields`): a new field needs
nothing here, a new form only its line in :data:`FORMS`. All faults of a table are found at once.
"""

from __future__ import annotations

import math
import re
from collections.abc import Collection, Mapping, Sequence
from typing import Any, TypeVar, cast

import msgspec

from tauline.scenario.diagnosis import Diagnosis
from tauline.scenario.fields import Shape, fields_of_class
from tauline.scenario.objects import (
    Body,
    Broken,
    ClockEvent,
    CoastLine,
    CoastUntil,
    CompanionLine,
    CoordinateEvent,
    DisplacedLine,
    Frame,
    FrameTimeEvent,
    HalfwayFrame,
    Itinerary,
    LightCone,
    MeetingEvent,
    Object,
    Pulses,
    PushUntil,
    RestLine,
    Signal,
    Simultaneity,
    SimultaneousEvent,
    View,
)
from tauline.scenario.paths import item, join
from tauline.scenario.syntax import nearest
from tauline.scenario.values import BASE

ID = re.compile(r"[a-z][a-z0-9_-]*")

FORMS: dict[str, tuple[tuple[type[msgspec.Struct], tuple[str, ...]], ...]] = {
    "frame": ((HalfwayFrame, ("halfway",)), (Frame, ())),
    "worldline": (
        (Itinerary, ("leg",)),
        (CoastLine, ("through",)),
        (CompanionLine, ("companion",)),
        (DisplacedLine, ("displaced",)),
        (RestLine, ("x",)),
    ),
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
"""The forms of each kind of table, each with the keys it is known by; the first match counts."""

_CHOICES = {
    "worldline": "give x (at rest), through (coasting past an event), [[worldline.leg]] tables,"
    " companion (rigidly at a distance) or displaced (the same programme elsewhere)",
    "event": "give t and x; or on with proper_time or time; or meeting; or on with"
    " simultaneous_with",
}

SPEEDS = ("velocity", "rapidity", "gamma", "one_minus_beta")

S = TypeVar("S", bound=msgspec.Struct)


def form_of(kind: str, table: Mapping[str, Any]) -> type[msgspec.Struct] | None:
    """Class of the object a table describes; None if its keys do not tell."""
    for form, keys in FORMS[kind]:
        if all(key in table for key in keys):
            return form
    return None


def build(kind: str, table: Mapping[str, Any], handle: str) -> Object:
    """Make the object of one table.

    A table that does not have the form of its kind becomes Broken, with all its faults; it is
    called ``handle`` (such as ``worldline[2]``) if it has no usable id.
    """
    given = table.get("id")
    check = _Check(str(given) if _is_id(given) else handle)
    form = form_of(kind, table)
    made: msgspec.Struct | None = None
    if form is None:
        check.formless(kind, table)
    else:
        made = check.struct(form, table, "")
    if isinstance(made, Frame) and made.id == BASE and not names_base(made):
        check.fault("id", f"'{BASE}' is the base frame, which has no velocity", "choose another id")
    elif table.get("id") == BASE and kind != "frame":
        check.fault("id", f"'{BASE}' is the id of the base frame", "choose another id")
    if check.faults:
        return broken(kind, table, check.owner, tuple(check.faults))
    return cast(Object, made)


def broken(kind: str, table: Mapping[str, Any], name: str, faults: tuple[Diagnosis, ...]) -> Broken:
    """Keep a table that has faults."""
    label = table.get("label")
    return Broken(
        id=name,
        kind=kind,
        table=dict(table),
        faults=faults,
        label=label if isinstance(label, str) else "",
    )


def names_base(frame: Frame) -> bool:
    """Whether a frame has no velocity of its own and so names the base frame."""
    return frame.relative_to is None and all(getattr(frame, speed) is None for speed in SPEEDS)


def table_of(thing: Object, written: Mapping[str, Any] | None = None) -> dict[str, Any]:
    """Return the table an object stands for in the file.

    Without what is left to its default, unless the table ``written`` says that outright.
    """
    return dict(thing.table) if isinstance(thing, Broken) else _table(thing, written)


def _table(struct: msgspec.Struct, written: object) -> dict[str, Any]:
    written = written if isinstance(written, dict) else {}
    table: dict[str, Any] = {}
    for field in fields_of_class(type(struct)):
        value = getattr(struct, field.name)
        here = written.get(field.key)
        given = field.required or value != field.default or here == _plain(value, here)
        if given and value is not None:
            table[field.key] = _plain(value, here)
    return table


def _plain(value: object, written: object) -> object:
    if isinstance(value, msgspec.Struct):
        return _table(value, written)
    if isinstance(value, tuple):
        there = written if isinstance(written, list) else []
        there = [*there, *[None] * len(value)]
        return [_plain(part, here) for part, here in zip(value, there, strict=False)]
    return value


def _is_id(value: object) -> bool:
    return isinstance(value, str) and ID.fullmatch(value) is not None


class _Check:
    """Collects the faults of one table while it is turned into an object."""

    def __init__(self, owner: str) -> None:
        self.owner = owner
        self.faults: list[Diagnosis] = []

    def fault(self, key: str, message: str, hint: str = "") -> None:
        self.faults.append(Diagnosis(object=self.owner, key=key, message=message, hint=hint))

    def formless(self, kind: str, table: Mapping[str, Any]) -> None:
        """Say what is wrong with a table that has the keys of no form."""
        self.fault("", f"this {kind} does not say where it is", _CHOICES[kind])
        self._id(table)
        known = {field.key for form, _ in FORMS[kind] for field in fields_of_class(form)}
        for key in table:
            if key not in known:
                self._unknown(key, "", sorted(known))

    def struct(self, form: type[S], table: Mapping[str, Any], path: str) -> S | None:
        """Turn a table into a struct, field by field; None if anything is wrong with it."""
        before = len(self.faults)
        fields = {field.key: field for field in fields_of_class(form)}
        for key in table:
            if key not in fields:
                self._unknown(key, path, fields.keys())
        values: dict[str, Any] = {}
        for key, field in fields.items():
            if key == "id":
                self._id(table)
                values["id"] = table.get("id")
            elif key in table:
                values[field.name] = self._value(field.shape, table[key], join(path, key))
            elif field.required:
                self.fault(
                    join(path, key), f"'{key}' is missing", f"give {field.shape.described()}"
                )
        self._rules(form, table, path)
        return form(**values) if len(self.faults) == before else None

    def _unknown(self, key: str, path: str, known: Collection[str]) -> None:
        near = nearest(key, known)
        hint = f"did you mean '{near}'?" if near else "known here: " + ", ".join(known)
        self.fault(join(path, key), f"unknown key '{key}'", hint)

    def _id(self, table: Mapping[str, Any]) -> None:
        given = table.get("id")
        if given is None:
            self.fault("id", "'id' is missing", 'give it one of its own, such as id = "ship"')
        elif not _is_id(given):
            self.fault(
                "id",
                f"{_shown(given)} is not an id",
                "a small letter first, then small letters, digits, _ and -",
            )

    def _value(self, shape: Shape, given: object, path: str) -> object:
        """Turn one value into what its field takes; a fault where it is something else."""
        if isinstance(given, dict) and shape.structs:
            return self.struct(shape.struct_for(given), given, path)
        if isinstance(given, list | tuple) and shape.items:
            return self._items(shape, given, path)
        if isinstance(given, bool):
            right = shape.flag
        elif isinstance(given, int):
            if shape.number:
                return self._number(given, path)
            right = shape.integer
        elif isinstance(given, float):
            if shape.number or not math.isfinite(given):
                return self._number(given, path)
            right = False
        elif isinstance(given, str):
            right = shape.text and (not shape.choices or given in shape.choices)
        else:
            right = False
        if right:
            return given
        near = nearest(given, shape.choices) if isinstance(given, str) else ""
        hint = f"did you mean '{near}'?" if near else ""
        self.fault(path, f"expected {shape.described()}; this is {_shown(given)}", hint)
        return None

    def _number(self, given: float, path: str) -> float:
        try:
            number = float(given)
        except OverflowError:
            number = math.inf
        if not math.isfinite(number):
            self.fault(path, f"{number} is not a finite number")
        return number

    def _items(self, shape: Shape, given: Sequence[object], path: str) -> tuple[object, ...]:
        shapes = shape.items * len(given) if shape.repeated else shape.items
        if len(given) != len(shapes):
            self.fault(path, f"expected {shape.described()}; this has {len(given)}")
        return tuple(
            self._value(part, value, item(path, number))
            for number, (part, value) in enumerate(zip(shapes, given, strict=False), start=1)
        )

    # --- what goes together and what does not ---------------------------------------------

    def _rules(self, form: type[msgspec.Struct], table: Mapping[str, Any], path: str) -> None:
        keys = {field.key for field in fields_of_class(form)}
        if keys.issuperset(SPEEDS):
            self._speed(table, path)
        if keys.issuperset(("frame", "observer")):
            self._simultaneity(table, path)
        if keys.issuperset(("for", "until")) and "for" in table and "until" in table:
            self.fault(join(path, "until"), "a leg ends in one way", "give either for or until")
        if form is CoastUntil:
            self._one_of(table, path, ("time", "x", "proper_time", "event", "meets"))
            self._frame_with(table, path, ("time", "x"))
        elif form is PushUntil:
            self._one_of(table, path, (*SPEEDS, "time", "x", "proper_time", "meets"))
            self._frame_with(table, path, (*SPEEDS, "time", "x"))
        elif form is Signal:
            self._one_of(table, path, ("to", "direction"))
        elif form is Itinerary and table["leg"] == []:
            self.fault(join(path, "leg"), "there is no leg", "begin each with [[worldline.leg]]")
        elif form is MeetingEvent and table.get("which") == 0:
            self.fault(join(path, "which"), "meetings count from 1, or from -1 backwards")
        elif form is Pulses and isinstance(table.get("count"), int) and table["count"] < 1:
            self.fault(join(path, "count"), "the number of pulses is at least 1")

    def _frame_with(self, table: Mapping[str, Any], path: str, keys: tuple[str, ...]) -> None:
        if "frame" in table and not any(key in table for key in keys):
            self.fault(join(path, "frame"), f"a frame goes with {' or '.join(keys)} only")

    def _speed(self, table: Mapping[str, Any], path: str) -> None:
        given = [key for key in SPEEDS if key in table]
        for key in given[1:]:
            self.fault(
                join(path, key),
                f"the velocity is given by '{given[0]}' already",
                "keep one of them",
            )
        signless = [key for key in given if key in ("gamma", "one_minus_beta")]
        if signless and "direction" not in table:
            self.fault(
                join(path, signless[0]),
                f"'{signless[0]}' does not say which way",
                'add direction = "+x" or direction = "-x"',
            )
        if "direction" in table and not signless:
            self.fault(
                join(path, "direction"),
                "a direction goes with gamma or one_minus_beta only",
                "the sign of a velocity or a rapidity says which way it goes",
            )

    def _simultaneity(self, table: Mapping[str, Any], path: str) -> None:
        if "frame" in table and "observer" in table:
            self.fault(
                join(path, "observer"), "simultaneous for one only", "give either frame or observer"
            )
        if "side" in table and "observer" not in table:
            self.fault(join(path, "side"), "a side goes with an observer only")

    def _one_of(self, table: Mapping[str, Any], path: str, keys: tuple[str, ...]) -> None:
        given = [key for key in keys if key in table]
        hint = "give one of " + ", ".join(keys)
        for key in given[1:]:
            if not (key in SPEEDS and given[0] in SPEEDS):
                self.fault(join(path, key), f"'{given[0]}' and '{key}' exclude each other", hint)
        if not given:
            self.fault(path, f"one of {', '.join(keys)} is missing")


def _shown(value: object) -> str:
    if isinstance(value, dict):
        return "a table"
    if isinstance(value, list | tuple):
        return "a list"
    text = str(value).lower() if isinstance(value, bool) else repr(value)
    return text if len(text) <= 40 else text[:37] + "…"
