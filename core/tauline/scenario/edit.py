"""Pure edits: each makes a new scenario and leaves the old one as it is.

An edit that would take away an object's form (a text where a number belongs, a key too many)
raises TaulineError; whether the new value makes sense in spacetime is for the resolution to say.
"""

from __future__ import annotations

import copy
from typing import Any

import msgspec

from tauline.errors import TaulineError, UnknownIdError
from tauline.scenario.editable import Field, fields_of, value_of
from tauline.scenario.fields import fields_of_class
from tauline.scenario.forms import ID, build, names_base, table_of
from tauline.scenario.objects import Broken, Frame, Object, kind_of
from tauline.scenario.parameters import fault_of_parameter_name
from tauline.scenario.paths import split
from tauline.scenario.references import owner_of, references, with_references
from tauline.scenario.scenario import Parameter, Scenario
from tauline.scenario.syntax import nearest
from tauline.scenario.values import BASE, Value

__all__ = [
    "Field",
    "add_object",
    "fields_of",
    "references",
    "remove_object",
    "rename_object",
    "set_field",
    "set_parameter",
    "value_of",
]


def set_field(scenario: Scenario, object_id: str, key: str, value: object) -> Scenario:
    """Give a field of an object another value; None takes it out.

    Parameters
    ----------
    key : path of the field as in diagnoses, such as ``velocity`` or ``leg[2].until.time``. A
        number one beyond the last item of a list adds an item.
    value : a number, a text, a truth value, or a dict or list of them for a whole table or list.

    Raises
    ------
    UnknownIdError
        There is no such object.
    TaulineError
        There is no such field, or it does not take this value.
    """
    thing = _object(scenario, object_id)
    if key == "id":
        if not isinstance(value, str):
            raise TaulineError("an object needs an id")
        return rename_object(scenario, object_id, value)
    table = copy.deepcopy(table_of(thing))
    try:
        steps = split(key)
    except ValueError as error:
        raise TaulineError(str(error)) from None
    if not steps:
        raise TaulineError("no field is named")
    _begin_list(thing, table, steps)
    _put(table, steps, _plain(value), key)
    made = build(kind_of(thing), table, thing.id)
    if isinstance(made, Broken):
        old = thing.faults if isinstance(thing, Broken) else ()
        known = {(fault.key, fault.message) for fault in old}
        new = [f for f in made.faults if (f.key, f.message) not in known or f.key == key]
        if new or not isinstance(thing, Broken):
            raise TaulineError(
                "; ".join(f"{fault.key or object_id}: {fault.message}" for fault in new),
                new[0].hint if new else "",
            )
    return _with_objects(
        scenario, [made if thing is other else other for other in scenario.objects]
    )


def set_parameter(scenario: Scenario, name: str, value: Value | None) -> Scenario:
    """Give a parameter a value, adding it if it is new; None takes it out."""
    others = [parameter for parameter in scenario.parameters if parameter.name != name]
    if value is None:
        return msgspec.structs.replace(scenario, parameters=tuple(others))
    wrong = fault_of_parameter_name(name)
    if wrong is not None:
        raise wrong
    if isinstance(value, bool) or not isinstance(value, int | float | str):
        raise TaulineError(f"{value!r} is neither a number nor a text")
    made = Parameter(name=name, value=value if isinstance(value, str) else float(value))
    if len(others) == len(scenario.parameters):
        return msgspec.structs.replace(scenario, parameters=(*others, made))
    parameters = tuple(made if p.name == name else p for p in scenario.parameters)
    return msgspec.structs.replace(scenario, parameters=parameters)


def add_object(scenario: Scenario, thing: Object) -> Scenario:
    """Add an object as the last one."""
    made = build(kind_of(thing), table_of(thing), thing.id)
    if isinstance(made, Broken):
        fault = made.faults[0]
        raise TaulineError(f"{fault.key or thing.id}: {fault.message}", fault.hint)
    return _with_objects(scenario, [*scenario.objects, made])


def remove_object(scenario: Scenario, object_id: str) -> Scenario:
    """Take out an object; those that refer to it keep their references."""
    gone = _object(scenario, object_id)
    return _with_objects(scenario, [thing for thing in scenario.objects if thing is not gone])


def rename_object(scenario: Scenario, old: str, new: str) -> Scenario:
    """Give an object another id, and refer to it by that everywhere.

    What an object makes is renamed with it: ``old.sent``, ``old.leg-1``, ``old.3.received``.
    """
    renamed = _object(scenario, old)
    if old == new:
        return scenario
    if not ID.fullmatch(new):
        raise TaulineError(
            f"'{new}' is not an id", "a small letter first, then small letters, digits, _ and -"
        )

    def new_name(name: str) -> str:
        return new + name[len(old) :] if owner_of(name) == old else name

    objects: list[Object] = []
    for thing in scenario.objects:
        affected = any(owner_of(name) == old for name in references(thing))
        if thing is not renamed and not affected:
            objects.append(thing)
            continue
        table = with_references(thing, new_name) if affected else table_of(thing)
        if thing is renamed:
            table = {"id": new} | {key: part for key, part in table.items() if key != "id"}
        objects.append(build(kind_of(thing), table, thing.id))
    return _with_objects(scenario, objects)


# --- within -------------------------------------------------------------------------------------


def _object(scenario: Scenario, object_id: str) -> Object:
    thing = scenario.find(object_id)
    if thing is None:
        near = nearest(object_id, [other.id for other in scenario.objects])
        hint = f"did you mean '{near}'?" if near else ""
        raise UnknownIdError(f"nothing has the id '{object_id}'", hint)
    return thing


def _with_objects(scenario: Scenario, objects: list[Object]) -> Scenario:
    """Make sure that the ids differ and that one frame at most names the base frame."""
    seen: set[str] = set()
    base = ""
    before = {id(thing) for thing in scenario.objects}
    for thing in objects:
        if thing.id in seen:
            raise TaulineError(f"the id '{thing.id}' is taken", "choose another one")
        seen.add(thing.id)
        if isinstance(thing, Frame) and names_base(thing):
            if base:
                raise TaulineError(
                    f"'{base}' is the base frame already",
                    "the other frame needs a velocity, or relative_to",
                )
            base = thing.id
        if thing.id == BASE and kind_of(thing) != "frame" and id(thing) not in before:
            raise TaulineError(f"'{BASE}' is the id of the base frame", "choose another one")
    return msgspec.structs.replace(scenario, objects=tuple(objects))


def _begin_list(thing: Object, table: dict[str, Any], steps: tuple[str | int, ...]) -> None:
    """Let a window of a view that is left out begin at zero, so that its ends can be set singly."""
    fields = () if isinstance(thing, Broken) else fields_of_class(type(thing))
    shapes = {field.key: field.shape for field in fields}
    if len(steps) == 2 and steps[0] in shapes and steps[0] not in table:
        shape = shapes[str(steps[0])]
        if shape.items and not shape.repeated:
            table[str(steps[0])] = [0.0 for _ in shape.items]


def _put(table: dict[str, Any], steps: tuple[str | int, ...], value: object, key: str) -> None:
    """Set, add or (for None) take out what stands at a path below a table."""
    *above, last = steps
    trail: list[tuple[Any, Any]] = []
    place: Any = table
    for step, after in zip(above, steps[1:], strict=True):
        index = _index(place, step, key)
        if isinstance(place, dict):
            place.setdefault(index, [] if isinstance(after, int) else {})
        elif index == len(place):
            raise TaulineError(f"there is no field '{key}'")
        trail.append((place, index))
        place = place[index]
    index = _index(place, last, key)
    if value is not None and isinstance(place, list):
        place[index : index + 1] = [value]
    elif value is not None:
        place[index] = value
    elif isinstance(place, list):
        del place[index : index + 1]
    else:
        place.pop(index, None)
    for holder, index in reversed(trail):
        # a table that has become empty says nothing
        if isinstance(holder, dict) and holder[index] in ({}, []):
            del holder[index]


def _index(place: object, step: str | int, key: str) -> Any:  # noqa: ANN401 - of a dict or a list
    """Turn a step of a path into what to index with; TaulineError if the path leads nowhere."""
    if isinstance(place, dict) and isinstance(step, str):
        return step
    if isinstance(place, list) and isinstance(step, int) and 1 <= step <= len(place) + 1:
        return step - 1
    raise TaulineError(f"there is no field '{key}'")


def _plain(value: object) -> object:
    if isinstance(value, dict):
        return {name: _plain(part) for name, part in value.items()}
    if isinstance(value, list | tuple):
        return [_plain(part) for part in value]
    return value
