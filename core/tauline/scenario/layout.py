"""Where everything stands in the text of a TOML file.

A scanner for text that is known to be valid TOML (version 1.0); what the values are is left to
the TOML reader of the standard library.
"""

from __future__ import annotations

import re
import tomllib
from bisect import bisect_right

import msgspec

from tauline.scenario.paths import item, join

_BLANK = re.compile(r"(?:[ \t\r\n]|#[^\n]*)*+")
_SPACE = re.compile(r"[ \t]*+")
_REST_OF_LINE = re.compile(r"[^\n]*\n?")
_KEY = re.compile(r"""[A-Za-z0-9_-]+|"(?:[^"\\]|\\.)*+"|'[^']*'""")
_SCALAR = re.compile(
    r'''"""(?:[^"\\]|\\.|"(?!""))*+""""{0,2}'''
    r"""|'''(?:[^']|'(?!''))*+''''{0,2}"""
    r'''|"(?:[^"\\]|\\.)*+"'''
    r"""|'[^']*'"""
    r"|[^\s,\]}#]+(?: [0-9]{2}:[0-9]{2}[^\s,\]}#]*)?",
    re.DOTALL,
)


class Span(msgspec.Struct, frozen=True):
    """A stretch of the text, from the character ``start`` to before ``end``."""

    start: int
    end: int


class Header(msgspec.Struct, frozen=True):
    """A line ``[path]`` or ``[[path]]``; the path names the item it begins."""

    path: str
    span: Span


class Statement(msgspec.Struct, frozen=True):
    """``key = value`` with the whole of its lines, and the header it stands under (-1: none)."""

    path: str
    span: Span
    header: int


class Layout:
    """The headers, the statements and the values of a text, in order.

    Attributes
    ----------
    headers : the table headers.
    statements : the lines ``key = value``.
    values : spans of all values by path, those within arrays and inline tables too.
    lines : line, from 1, of every header, key and item by path.
    """

    def __init__(self, text: str) -> None:
        self.text = text
        self.headers: list[Header] = []
        self.statements: list[Statement] = []
        self.values: dict[str, Span] = {}
        self.lines: dict[str, int] = {}
        self._newlines = [match.start() for match in re.finditer("\n", text)]
        self._counts: dict[str, int] = {}
        self._at = 1 if text.startswith("\ufeff") else 0
        self._scan()

    def line_at(self, offset: int) -> int:
        """Line, from 1, of a character."""
        return bisect_right(self._newlines, offset - 1) + 1

    def _scan(self) -> None:
        table = ""
        self._skip(_BLANK)
        while self._at < len(self.text):
            start = self._line_start()
            if self.text[self._at] == "[":
                table = self._header(start)
            else:
                path = self._keys(table)
                self._skip(_SPACE)
                self._at += 1  # the sign =
                self._skip(_SPACE)
                self._value(path)
                self._skip(_REST_OF_LINE)
                here = Statement(path, Span(start, self._at), len(self.headers) - 1)
                self.statements.append(here)
            self._skip(_BLANK)

    def _header(self, start: int) -> str:
        is_array = self.text.startswith("[[", self._at)
        begin = self._at
        self._at += 2 if is_array else 1
        names = self._names()
        path = ""
        for name in names[:-1]:
            path = join(path, name)
            if path in self._counts:
                path = item(path, self._counts[path])
        path = join(path, names[-1])
        if is_array:
            self._counts[path] = self._counts.get(path, 0) + 1
            self.lines.setdefault(path, self.line_at(begin))
            path = item(path, self._counts[path])
        self.lines.setdefault(path, self.line_at(begin))
        self._skip(_REST_OF_LINE)
        self.headers.append(Header(path, Span(start, self._at)))
        return path

    def _keys(self, path: str) -> str:
        """Read a dotted key; return the path it leads to."""
        line = self.line_at(self._at)
        for name in self._names():
            path = join(path, name)
            self.lines.setdefault(path, line)
        return path

    def _names(self) -> list[str]:
        names: list[str] = []
        while True:
            self._skip(_SPACE)
            raw = self._take(_KEY)
            names.append(tomllib.loads(f"k = {raw}")["k"] if raw[0] in "\"'" else raw)
            self._skip(_SPACE)
            if not self.text.startswith(".", self._at):
                return names
            self._at += 1

    def _value(self, path: str) -> None:
        start = self._at
        opening = self.text[start]
        if opening in "[{":
            self._at += 1
            number = 0
            self._skip(_BLANK)
            while self.text[self._at] not in "]}":
                if opening == "[":
                    number += 1
                    inner = item(path, number)
                    self.lines.setdefault(inner, self.line_at(self._at))
                else:
                    inner = self._keys(path)
                    self._skip(_SPACE)
                    self._at += 1  # the sign =
                    self._skip(_BLANK)
                self._value(inner)
                self._skip(_BLANK)
                if self.text[self._at] == ",":
                    self._at += 1
                    self._skip(_BLANK)
            self._at += 1
        else:
            self._skip(_SCALAR)
        self.values[path] = Span(start, self._at)

    def _line_start(self) -> int:
        return self.text.rfind("\n", 0, self._at) + 1 or (1 if self.text[:1] == "\ufeff" else 0)

    def _skip(self, pattern: re.Pattern[str]) -> None:
        match = pattern.match(self.text, self._at)
        if match is not None:
            self._at = match.end()

    def _take(self, pattern: re.Pattern[str]) -> str:
        start = self._at
        self._skip(pattern)
        return self.text[start : self._at]
