"""Writing TOML text: values, tables, a whole scenario that has no text yet."""

from __future__ import annotations

import datetime
import json
import math
import re
from collections.abc import Mapping
from typing import Any, TypeGuard

from tauline.errors import TaulineError
from tauline.scenario.forms import table_of
from tauline.scenario.objects import kind_of
from tauline.scenario.scenario import Scenario

_BARE = re.compile(r"[A-Za-z0-9_-]+")
_MUST_ESCAPE = re.compile('[\x00-\x08\x0b-\x1f\x7f\\\\]|"""|"$')


def literal(value: object) -> str:
    """Write a value as TOML, in one line.

    >>> literal({"time": 5.0, "frame": "out"})
    '{ time = 5, frame = "out" }'
    """
    match value:
        case bool():
            return "true" if value else "false"
        case int():
            return str(value)
        case float():
            return _number(value)
        case str():
            return _string(value)
        case dict():
            inner = ", ".join(f"{key(name)} = {literal(part)}" for name, part in value.items())
            return f"{{ {inner} }}" if inner else "{}"
        case list() | tuple():
            return f"[{', '.join(literal(part) for part in value)}]"
        case datetime.datetime() | datetime.date() | datetime.time():
            return value.isoformat()
        case _:
            raise TaulineError(f"{value!r} cannot be written to a file")


def key(name: str) -> str:
    """Write a key, in quotes where it needs them."""
    return name if _BARE.fullmatch(name) else _string(name)


def text_block(text: str) -> str:
    """Write a text; one of several lines as several lines."""
    if "\n" not in text:
        return literal(text)
    return f'"""\n{_MUST_ESCAPE.sub(lambda m: _string(m[0])[1:-1], text)}"""'


def statements(table: Mapping[str, Any]) -> str:
    """Write the lines of a table, those below sub-headers left out."""
    return "".join(
        f"{key(name)} = {literal(value)}\n"
        for name, value in table.items()
        if not is_list_of_tables(value)
    )


def object_text(header: str, table: Mapping[str, Any]) -> str:
    """Write a table under ``[[header]]``, its lists of tables under headers of their own."""
    text = f"[[{header}]]\n{statements(table)}"
    for name, value in table.items():
        if is_list_of_tables(value):
            text += "".join(
                f"\n[[{header}.{key(name)}]]\n{statements_of_item(part)}" for part in value
            )
    return text


def statements_of_item(table: Mapping[str, Any]) -> str:
    """Write the lines of a table within a list: all of them, whatever they hold."""
    return "".join(f"{key(name)} = {literal(value)}\n" for name, value in table.items())


def is_list_of_tables(value: object) -> TypeGuard[list[dict[str, Any]]]:
    """Whether a value is a list of tables, and so may stand under headers."""
    return isinstance(value, list) and bool(value) and all(isinstance(v, dict) for v in value)


def scenario_text(scenario: Scenario) -> str:
    """Write a scenario that has no text yet."""
    text = "tauline = 1\n"
    if scenario.title:
        text += f"title = {literal(scenario.title)}\n"
    if scenario.description:
        text += f"description = {text_block(scenario.description)}\n"
    units = {"time": scenario.units.time, "length": scenario.units.length}
    text += f"\n[units]\n{statements(units)}"
    if scenario.parameters:
        parameters = {parameter.name: parameter.value for parameter in scenario.parameters}
        text += f"\n[parameters]\n{statements(parameters)}"
    for thing in scenario.objects:
        text += f"\n{object_text(kind_of(thing), table_of(thing))}"
    return text


def _number(value: float) -> str:
    if math.isnan(value):
        return "nan"
    if math.isinf(value):
        return "inf" if value > 0 else "-inf"
    if value.is_integer() and abs(value) < 1e15 and str(value) != "-0.0":
        return str(int(value))
    return repr(value)


def _string(text: str) -> str:
    if any("\ud800" <= character <= "\udfff" for character in text):
        raise TaulineError("the text has a character that no file can hold", "type it anew")
    # the escapes of JSON are those of TOML; DEL alone must be escaped in TOML only
    return json.dumps(text, ensure_ascii=False).replace("\x7f", "\\u007F")
