"""What the fields of an object class take, found from their types.

The one place that looks at type hints; checking, editing and the JSON Schema go by it.
"""

from __future__ import annotations

import types
import typing
from collections.abc import Mapping
from functools import cache
from typing import Annotated, Any, Literal, Union

import msgspec

from tauline.scenario.units import Dimension


class Shape(msgspec.Struct, frozen=True, kw_only=True):
    """What a value of the file may be; several of these at once is a choice."""

    text: bool = False
    number: bool = False
    integer: bool = False
    flag: bool = False
    choices: tuple[str, ...] = ()
    """The texts allowed, if not any."""
    structs: tuple[type[msgspec.Struct], ...] = ()
    """The tables allowed."""
    items: tuple[Shape, ...] = ()
    """Shapes of the items of a list."""
    repeated: bool = False
    """Whether a list has any number of items, all of the shape ``items[0]``."""
    dimension: Dimension | None = None
    """What a number or an expression measures."""
    refers_to: tuple[str, ...] = ()
    """The kinds of thing that a text is the id of."""
    words: tuple[str, ...] = ()
    """Texts that are no id although others are."""

    def described(self) -> str:
        """Say in words what is expected."""
        words: list[str] = []
        if self.number:
            words.append("a number or a text with a unit" if self.text else "a number")
        elif self.choices:
            words.append("one of " + ", ".join(f"'{choice}'" for choice in self.choices))
        elif self.refers_to:
            words.append(f"the id of {with_article(*self.refers_to)}")
        elif self.text:
            words.append("a text")
        if self.integer:
            words.append("a whole number")
        if self.flag:
            words.append("true or false")
        if self.structs:
            keys = ", ".join(field.key for field in fields_of_class(self.structs[0]))
            words.append(f"a table {{ {keys} }}")
        if self.items:
            size = "" if self.repeated else f"{len(self.items)} of them: "
            words.append(f"a list, {size}each {self.items[0].described()}")
        return " or ".join(words)

    def struct_for(self, table: Mapping[str, Any]) -> type[msgspec.Struct]:
        """Choose among the tables allowed: the one that this table gives the most needed keys of.

        A class without needed keys is the choice when no other fits.
        """

        def fit(struct: type[msgspec.Struct]) -> int:
            needed = [field.key for field in fields_of_class(struct) if field.required]
            return len(needed) if all(key in table for key in needed) else -1

        return max(self.structs, key=fit)


class FieldShape(msgspec.Struct, frozen=True, kw_only=True):
    """A field of a class: its name in Python, its key in the file, and what it takes."""

    name: str
    key: str
    shape: Shape
    required: bool
    default: Any = None


@cache
def fields_of_class(struct: type[msgspec.Struct]) -> tuple[FieldShape, ...]:
    """List the fields of a class; ``id`` and ``label`` come first."""
    hints = typing.get_type_hints(struct, include_extras=True)
    fields = [
        FieldShape(
            name=field.name,
            key=field.encode_name,
            shape=_shape(hints[field.name]),
            required=field.required,
            default=None if field.required else field.default,
        )
        for field in msgspec.structs.fields(struct)
    ]
    return tuple(sorted(fields, key=lambda field: field.name not in ("id", "label")))


def _shape(hint: Any) -> Shape:  # noqa: ANN401 - a type hint is anything
    origin, arguments = typing.get_origin(hint), typing.get_args(hint)
    if origin is Annotated:
        extra: dict[str, Any] = {}
        for meta in arguments[1:]:
            extra |= meta.extra or {}
        return msgspec.structs.replace(_shape(arguments[0]), **extra)
    if origin in (Union, types.UnionType):
        return _either([_shape(part) for part in arguments if part is not type(None)])
    if origin is Literal:
        return Shape(text=True, choices=arguments)
    if origin is tuple:
        repeated = arguments[-1] is Ellipsis
        items = arguments[:1] if repeated else arguments
        return Shape(items=tuple(_shape(part) for part in items), repeated=repeated)
    if isinstance(hint, type) and issubclass(hint, msgspec.Struct):
        return Shape(structs=(hint,))
    plain = {
        str: Shape(text=True),
        float: Shape(number=True),
        int: Shape(integer=True),
        bool: Shape(flag=True),
    }
    return plain[hint]


def _either(shapes: list[Shape]) -> Shape:
    """Join shapes to one that allows what any of them allows."""
    return Shape(
        text=any(shape.text for shape in shapes),
        number=any(shape.number for shape in shapes),
        integer=any(shape.integer for shape in shapes),
        flag=any(shape.flag for shape in shapes),
        choices=sum((shape.choices for shape in shapes), ()),
        structs=sum((shape.structs for shape in shapes), ()),
        items=next((shape.items for shape in shapes if shape.items), ()),
        repeated=any(shape.repeated for shape in shapes),
        dimension=next((shape.dimension for shape in shapes if shape.dimension), None),
        refers_to=sum((shape.refers_to for shape in shapes), ()),
        words=sum((shape.words for shape in shapes), ()),
    )


def with_article(*kinds: str) -> str:
    """Name kinds of thing in words.

    >>> with_article("event", "worldline")
    'an event or a worldline'
    """
    return " or ".join(f"an {kind}" if kind[0] in "aeiou" else f"a {kind}" for kind in kinds)
