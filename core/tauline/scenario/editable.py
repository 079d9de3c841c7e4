"""The fields of an object as a panel lists them."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any, Literal, cast

import msgspec

from tauline.scenario.fields import FieldShape, Shape, fields_of_class
from tauline.scenario.forms import FORMS, form_of, table_of
from tauline.scenario.objects import Broken, Object
from tauline.scenario.paths import item, join
from tauline.scenario.render import is_list_of_tables, literal
from tauline.scenario.units import Dimension
from tauline.scenario.values import Value

FieldKind = Literal["quantity", "id", "ids", "text", "choice", "choices", "integer", "flag"]


class Field(msgspec.Struct, frozen=True, kw_only=True):
    """A field of an object as a panel shows it; ``value`` is None where the author left it out.

    ``dimension`` is what a quantity measures, ``refers_to`` the kinds an id may belong to,
    ``choices`` the texts to choose from.
    """

    key: str
    value: Value | bool | tuple[str, ...] | None
    kind: FieldKind
    dimension: Dimension | None = None
    refers_to: tuple[str, ...] = ()
    choices: tuple[str, ...] = ()
    required: bool = False


def fields_of(thing: Object) -> tuple[Field, ...]:
    """All fields of an object, the empty ones too.

    Of a broken one also the keys that do not belong there; what has no place in a field is shown
    as it would be written.
    """
    table = table_of(thing)
    if isinstance(thing, Broken):
        form = form_of(thing.kind, table) or FORMS[thing.kind][-1][0]
    else:
        form = type(thing)
    return tuple(_fields(form, table, ""))


def value_of(text: str) -> Value:
    """Return what somebody typed as a value of the document: a number, or a text with a unit.

    >>> value_of("5"), value_of("5 yr")
    (5.0, '5 yr')
    """
    stripped = text.strip().replace("−", "-")
    if stripped.lower().lstrip("+-") in ("inf", "infinity", "nan") or "_" in stripped:
        return text.strip()
    try:
        return float(stripped)
    except ValueError:
        return text.strip()


def _fields(struct: type[msgspec.Struct], table: Mapping[str, Any], path: str) -> Iterator[Field]:
    fields = fields_of_class(struct)
    for field in fields:
        yield from _within(field, table.get(field.key), join(path, field.key))
    known = {field.key for field in fields}
    for key, value in table.items():
        if key not in known:
            yield _field(Shape(text=True), join(path, key), value, required=False)


def _within(field: FieldShape, value: object, place: str) -> Iterator[Field]:
    """Yield the fields within a field, or the field itself."""
    shape = field.shape
    if is_list_of_tables(value) and shape.items and shape.items[0].structs:
        for number, table in enumerate(value, start=1):
            yield from _fields(shape.items[0].struct_for(table), table, item(place, number))
    elif isinstance(value, dict) and shape.structs:
        yield from _fields(shape.struct_for(value), value, place)
    elif value is None and shape.structs and not shape.text:
        for inner in _fields(shape.struct_for({}), {}, place):
            # within a table that is left out, nothing is needed
            yield msgspec.structs.replace(inner, required=False, value=None)
    elif shape.items and not shape.repeated and (value is None or _fits(shape, value)):
        values = value if isinstance(value, list) else [None for _ in shape.items]
        for number, (part, inner_value) in enumerate(zip(shape.items, values, strict=True), 1):
            yield _field(part, item(place, number), inner_value, field.required)
    elif value is None and field.default not in ((), ""):
        yield _field(shape, place, field.default, field.required)
    else:
        yield _field(shape, place, value, field.required)


def _fits(shape: Shape, value: object) -> bool:
    return isinstance(value, list) and len(value) == len(shape.items)


def _field(shape: Shape, key: str, value: object, required: bool) -> Field:
    inner = shape.items[0] if shape.items else shape
    shown = tuple(value) if isinstance(value, list) else value
    parts = shown if isinstance(shown, tuple) else (shown,)
    if not all(isinstance(part, str | int | float | None) for part in parts):
        shown = literal(value)
    return Field(
        key=key,
        value=cast(Any, shown),
        kind=_kind(inner, listed=bool(shape.items)),
        dimension=inner.dimension,
        refers_to=inner.refers_to,
        choices=inner.choices,
        required=required,
    )


def _kind(shape: Shape, *, listed: bool) -> FieldKind:
    if shape.dimension is not None:
        return "quantity"
    if shape.refers_to:
        return "ids" if listed else "id"
    if shape.choices:
        return "choices" if listed else "choice"
    if shape.integer:
        return "integer"
    return "flag" if shape.flag else "text"
