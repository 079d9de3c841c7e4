"""What else is wrong with a table that lacks the form of its kind: its values, one by one."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any, TypeGuard

from tauline.errors import QuantityError
from tauline.scenario.diagnosis import Diagnosis
from tauline.scenario.expression import evaluate
from tauline.scenario.fields import Shape, fields_of_class
from tauline.scenario.forms import form_of
from tauline.scenario.objects import Broken
from tauline.scenario.paths import item, join
from tauline.scenario.units import Quantity, UnitSystem


def value_faults(
    thing: Broken, units: UnitSystem, parameters: Mapping[str, Quantity]
) -> Iterator[Diagnosis]:
    """Find the values of a broken table that are no quantities of their dimension.

    So that all its faults are told at once, not those of its form first and these later.
    """
    form = form_of(thing.kind, thing.table)
    if form is None:
        return
    told = {fault.key for fault in thing.faults}
    for key, shape, value in _quantities(Shape(structs=(form,)), thing.table, ""):
        if key in told:
            continue
        try:
            evaluate(value, units, parameters, shape.dimension)
        except QuantityError as error:
            yield Diagnosis(object=thing.id, key=key, message=error.message, hint=error.hint)


def _quantities(shape: Shape, value: object, path: str) -> Iterator[tuple[str, Shape, float | str]]:
    """All numbers and texts of a table that should be quantities, with their keys."""
    if isinstance(value, dict) and shape.structs:
        table: dict[str, Any] = value
        fields = {field.key: field.shape for field in fields_of_class(shape.struct_for(table))}
        for key, part in table.items():
            if key in fields:
                yield from _quantities(fields[key], part, join(path, key))
    elif isinstance(value, list) and shape.items:
        shapes = shape.items * (len(value) if shape.repeated else 1)
        for number, (inner, part) in enumerate(zip(shapes, value, strict=False), start=1):
            yield from _quantities(inner, part, item(path, number))
    elif shape.dimension is not None and _is_value(value):
        yield path, shape, value


def _is_value(value: object) -> TypeGuard[float | str]:
    return isinstance(value, int | float | str) and not isinstance(value, bool)
