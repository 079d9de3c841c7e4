"""The text a scenario was read from, and where in it everything stands."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from pathlib import Path

import msgspec

Place = tuple[str, str]
"""An object's id (or handle) and a key path below it, as in a diagnosis."""

_HEADER = re.compile(r"^\s*(\[\[?)\s*([^\[\]]+?)\s*\]\]?\s*(?:#.*)?$")
_KEY = re.compile(r"""^\s*((?:[A-Za-z0-9_\-]+|"[^"]*"|'[^']*')(?:\s*\.\s*(?:[A-Za-z0-9_\-]+|"[^"]*"|'[^']*'))*)\s*=""")
_INLINE_KEY = re.compile(r"[{,]\s*([A-Za-z0-9_\-]+)\s*=")


class Source(msgspec.Struct, frozen=True, kw_only=True):
    """The text of a scenario file; ``path`` is None for one that was never saved."""

    path: Path | None
    text: str
    lines: Mapping[Place, int]

    def line_of(self, object_id: str, key: str) -> int | None:
        """Line of a key, or else of what it stands in, or else of the object; None if unknown."""
        while True:
            line = self.lines.get((object_id, key))
            if line is not None or not key:
                return line
            key = re.sub(r"(\.[^.\[]*|\[\d+\]|^[^.\[]+)$", "", key)


class Entry(msgspec.Struct, frozen=True):
    """A header or a key of the text: where, and its path of names and indices."""

    line: int
    path: tuple[str | int, ...]


def entries(text: str) -> Iterator[Entry]:
    """Yield every table header and key of a valid TOML text, with its line (from 1).

    Arrays of tables count from 0. Keys of inline tables are those on the line of their table.
    """
    counts: dict[tuple[str | int, ...], int] = {}
    prefix: tuple[str | int, ...] = ()
    lines = text.splitlines()
    number = 0
    while number < len(lines):
        line = lines[number]
        number += 1
        header = _HEADER.match(line)
        if header:
            prefix = _header_path(header.group(2), header.group(1) == "[[", counts)
            yield Entry(number, prefix)
            continue
        key = _KEY.match(line)
        if not key:
            continue
        path = prefix + tuple(_names(key.group(1)))
        yield Entry(number, path)
        rest = line[key.end() :]
        for inner in _INLINE_KEY.finditer(_without_strings(rest)):
            yield Entry(number, (*path, inner.group(1)))
        number = _end_of_value(lines, number, rest)


def locate(text: str, names: Mapping[tuple[str, int], str]) -> dict[Place, int]:
    """Return the line of every place of a text.

    ``names`` gives the id of each object by its kind and its index among those of its kind.
    """
    found: dict[Place, int] = {}
    for entry in entries(text):
        head, *rest = entry.path
        if rest and isinstance(rest[0], int) and isinstance(head, str):
            owner = names.get((head, rest[0]), f"{head}[{rest[0] + 1}]")
            found.setdefault((owner, _key_path(rest[1:])), entry.line)
        else:
            found.setdefault(("", _key_path(list(entry.path))), entry.line)
    return found


def _key_path(parts: list[str | int]) -> str:
    text = ""
    for part in parts:
        text += f"[{part + 1}]" if isinstance(part, int) else f".{part}" if text else part
    return text


def _names(text: str) -> list[str]:
    parts = re.findall(r"""[A-Za-z0-9_\-]+|"[^"]*"|'[^']*'""", text)
    return [part.strip("\"'") for part in parts]


def _header_path(
    text: str, is_array: bool, counts: dict[tuple[str | int, ...], int]
) -> tuple[str | int, ...]:
    names = _names(text)
    path: tuple[str | int, ...] = ()
    for depth, name in enumerate(names):
        path = (*path, name)
        last = depth == len(names) - 1
        if last and is_array:
            counts[path] = counts.get(path, -1) + 1
        if path in counts:
            path = (*path, counts[path])
    return path


def _without_strings(text: str) -> str:
    return re.sub(r"\"(?:[^\"\\]|\\.)*\"|'[^']*'", lambda match: " " * len(match.group()), text)


def _end_of_value(lines: list[str], number: int, rest: str) -> int:
    """Number of lines read once the value that begins in ``rest`` is over."""
    for quotes in ('"""', "'''"):
        if rest.lstrip().startswith(quotes):
            inside = rest.lstrip()[3:]
            while quotes not in inside and number < len(lines):
                inside = lines[number]
                number += 1
            return number
    depth = _depth(rest)
    while depth > 0 and number < len(lines):
        depth += _depth(lines[number])
        number += 1
    return number


def _depth(text: str) -> int:
    bare = _without_strings(text).partition("#")[0]
    return sum(bare.count(sign) for sign in "[{") - sum(bare.count(sign) for sign in "]}")
