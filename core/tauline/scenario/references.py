"""Which ids an object names, and what it takes to rename one."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any

from tauline.scenario.fields import Shape, fields_of_class
from tauline.scenario.forms import FORMS, form_of, table_of
from tauline.scenario.objects import Object, kind_of


def references(thing: Object) -> frozenset[str]:
    """All ids an object names, those of events and frames made by others included.

    >>> from tauline.scenario.objects import Signal
    >>> sorted(references(Signal(id="answer", source="greeting.3.received", to="station")))
    ['greeting.3.received', 'station']
    """
    found: set[str] = set()

    def note(name: str) -> str:
        found.add(name)
        return name

    with_references(thing, note)
    return frozenset(found)


def owner_of(name: str) -> str:
    """Id of the object that an id belongs to.

    >>> owner_of("greeting.3.received")
    'greeting'
    """
    return name.partition(".")[0]


def with_references(thing: Object, new_name: Callable[[str], str]) -> dict[str, Any]:
    """Return the table of an object with every id it names replaced by ``new_name`` of it."""
    table = table_of(thing)
    form = form_of(kind_of(thing), table) or FORMS[kind_of(thing)][-1][0]
    return _in_table(Shape(structs=(form,)), table, new_name)


def _in_table(
    shape: Shape, table: Mapping[str, Any], new_name: Callable[[str], str]
) -> dict[str, Any]:
    fields = {field.key: field.shape for field in fields_of_class(shape.struct_for(table))}
    return {
        key: _in_value(fields[key], value, new_name) if key in fields else value
        for key, value in table.items()
    }


def _in_value(shape: Shape, value: object, new_name: Callable[[str], str]) -> object:
    if isinstance(value, str) and shape.refers_to and value not in shape.words:
        return new_name(value)
    if isinstance(value, dict) and shape.structs:
        return _in_table(shape, value, new_name)
    if isinstance(value, list) and shape.items:
        shapes = shape.items * (len(value) if shape.repeated else 1)
        rest = value[len(shapes) :]
        return [_in_value(s, v, new_name) for s, v in zip(shapes, value, strict=False)] + rest
    return value
