"""Changes to the text of a file that leave alone whatever they do not concern."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from typing import Any

import msgspec

from tauline.scenario.layout import Layout
from tauline.scenario.paths import item, join, parent, split
from tauline.scenario.render import is_list_of_tables, key, literal, statements_of_item

_COMMENT = re.compile(r"[ \t]*#")


class Piece(msgspec.Struct):
    """A stretch of the text: a table with its sub-tables, or what comes before the first one.

    ``owner`` is the place of the table, such as ``worldline[2]`` or ``units`` ("" before the
    first table). Comment lines just above its header belong to it; blank lines and comments
    after its last statement are its ``tail``.
    """

    owner: str
    start: int
    content_end: int
    end: int


class Patch:
    """Collects changes to one text and applies them.

    Paths are those of the whole file, as in :class:`Layout`: ``worldline[2].leg[1].until``.
    """

    def __init__(self, text: str) -> None:
        self.text = text
        self.layout = Layout(text)
        self.newline = "\r\n" if "\r\n" in text else "\n"
        self._edits: list[tuple[int, int, str]] = []
        # where the statements below each header end; at the last place, those below none
        self._ends = [header.span.end for header in self.layout.headers]
        self._ends.append(1 if text.startswith("\ufeff") else 0)
        for statement in self.layout.statements:
            self._ends[statement.header] = statement.span.end

    # --- changes --------------------------------------------------------------------------

    def change(self, path: str, old: object, new: object) -> None:
        """Turn the value at a path, which is ``old``, into ``new``."""
        if same(old, new):
            return
        span = self.layout.values.get(path)
        if span is not None:
            parts = _parts(path, old, new)
            if parts and all(inner in self.layout.values for inner, _, _ in parts):
                for inner, before, after in parts:
                    self.change(inner, before, after)
            else:
                self._edits.append((span.start, span.end, literal(new)))
        elif isinstance(old, dict) and isinstance(new, dict):
            self._change_table(path, old, new)
        elif is_list_of_tables(old) and is_list_of_tables(new):
            self._change_list(path, old, new)
        else:
            self.remove(path)
            last = split(path)[-1]
            self.insert(parent(path), str(last), new)

    def _change_table(self, path: str, old: Mapping[str, Any], new: Mapping[str, Any]) -> None:
        for name in old:
            if name not in new:
                self.remove(join(path, name))
        for name, value in new.items():
            if name in old:
                self.change(join(path, name), old[name], value)
            else:
                self.insert(path, name, value)

    def _change_list(self, path: str, old: Sequence[Any], new: Sequence[Any]) -> None:
        """Change a list of ``[[tables]]``, keeping the text of those that stay."""
        first = 0
        while first < min(len(old), len(new)) and same(old[first], new[first]):
            first += 1
        last = 0
        while last < min(len(old), len(new)) - first and same(old[-1 - last], new[-1 - last]):
            last += 1
        before, after = old[first : len(old) - last], new[first : len(new) - last]
        paired = min(len(before), len(after))
        for number in range(paired):
            self.change(item(path, first + number + 1), before[number], after[number])
        for number in range(paired, len(before)):
            self.remove(item(path, first + number + 1))
        place = first + paired
        at = self._end_of(item(path, place)) if place else self._own_end(parent(path))
        for table in after[paired:]:
            self._insert_at(at, self._sub_table(path, table))

    def remove(self, path: str) -> None:
        """Take out a key, or a table with all that belongs to it."""
        for statement in self.layout.statements:
            if _is_under(statement.path, path):
                self._edits.append((statement.span.start, statement.span.end, ""))
        for number, header in enumerate(self.layout.headers):
            if _is_under(header.path, path):
                self._edits.append((self._start_of(number), header.span.end, ""))

    def _start_of(self, number: int) -> int:
        """Where a sub-table begins: with its comments and the blank line above them."""
        start = self._with_comments(number)
        owners = {
            _owner(header.path) for header in self.layout.headers[max(0, number - 1) : number + 1]
        }
        if len(owners) == 1 and self.text[:start].endswith(2 * self.newline):
            start -= len(self.newline)
        return start

    def insert(self, path: str, name: str, value: object, before: str | None = None) -> None:
        """Add a key to the table at a path: after its last one, or after the key ``before``.

        With "" for ``before`` it becomes the first one.
        """
        if is_list_of_tables(value) and path:
            for table in value:
                text = self._sub_table(join(path, name), table)
                self._insert_at(self._end_of(path), text)
            return
        names = key(name)
        at = None if before is None else self._behind(path, before)
        while path and not any(header.path == path for header in self.layout.headers):
            names = f"{key(str(split(path)[-1]))}.{names}"
            path = parent(path)
        at = self._own_end(path) if at is None else at
        self._insert_at(at, f"{names} = {literal(value)}\n")

    def _behind(self, path: str, name: str) -> int | None:
        """Where the statement of a key ends, or (for "") the header of its table."""
        place = join(path, name) if name else path
        parts = self.layout.statements if name else self.layout.headers
        return next((part.span.end for part in parts if part.path == place), None)

    def _sub_table(self, path: str, table: Mapping[str, Any]) -> str:
        header = ".".join(key(step) for step in split(path) if isinstance(step, str))
        return f"\n[[{header}]]\n{statements_of_item(table)}"

    def _insert_at(self, at: int, text: str) -> None:
        text = text.replace("\n", self.newline)
        if at and not self.text[:at].endswith(("\n", "\ufeff")):
            text = self.newline + text
        self._edits.append((at, at, text))

    def _own_end(self, path: str) -> int:
        """Where the statements just below the header of a path end."""
        numbers = [n for n, header in enumerate(self.layout.headers) if header.path == path]
        return self._ends[numbers[-1] if path else -1]

    def _end_of(self, path: str) -> int:
        """Where all that belongs to a path ends."""
        headers = [h.span.end for h in self.layout.headers if _is_under(h.path, path)]
        ends = [s.span.end for s in self.layout.statements if _is_under(s.path, path)]
        return max(headers + ends)

    def _with_comments(self, number: int) -> int:
        """Where the comment lines just above a header begin."""
        start, floor = self.layout.headers[number].span.start, self._ends[number - 1]
        while start > floor:
            above = self.text.rfind("\n", 0, start - 1) + 1
            if above < floor or not _COMMENT.match(self.text, above):
                break
            start = above
        return start

    # --- pieces ---------------------------------------------------------------------------

    def pieces(self) -> list[Piece]:
        """Take the text apart; the pieces in order make the whole text."""
        found = [Piece("", 0, self._ends[-1], len(self.text))]
        for number, header in enumerate(self.layout.headers):
            owner = _owner(header.path)
            if found[-1].owner == owner:
                found[-1].content_end = self._ends[number]
            else:
                found[-1].end = self._with_comments(number)
                found.append(Piece(owner, found[-1].end, self._ends[number], len(self.text)))
        return found

    def content(self, piece: Piece) -> str:
        """Return a piece without its tail, with the changes made."""
        mine = [edit for edit in self._edits if self._is_in(piece, *edit[:2])]
        text, at = "", piece.start
        # what is put in at one place stays in order, and behind what is taken out before it
        for start, end, new in sorted(mine, key=lambda edit: (edit[0], edit[1])):
            text += self.text[at : max(at, start)] + new
            at = max(at, end)
        return text + self.text[at : piece.content_end]

    @staticmethod
    def _is_in(piece: Piece, start: int, end: int) -> bool:
        """Whether an edit falls in a piece; what is put in at its start is of the one before."""
        begin = piece.start + (start == end and bool(piece.owner))
        return begin <= start and end <= piece.content_end

    def tail(self, piece: Piece) -> str:
        """Return the blank lines and comments after the content of a piece."""
        return self.text[piece.content_end : piece.end]


def same(one: object, other: object) -> bool:
    """Whether two values of a file mean the same; unlike ``==``, true is not 1."""
    if isinstance(one, bool) or isinstance(other, bool):
        return one is other
    if isinstance(one, dict) and isinstance(other, dict):
        return one.keys() == other.keys() and all(same(one[name], other[name]) for name in one)
    if isinstance(one, list) and isinstance(other, list):
        return len(one) == len(other) and all(map(same, one, other))
    return bool(one == other) or (one != one and other != other)


def _parts(path: str, old: object, new: object) -> list[tuple[str, object, object]]:
    """Pair the values within two of the same make; none if they differ in make."""
    if isinstance(old, dict) and isinstance(new, dict) and old.keys() == new.keys():
        return [(join(path, name), old[name], new[name]) for name in old]
    if isinstance(old, list) and isinstance(new, list) and len(old) == len(new):
        return [(item(path, n), a, b) for n, (a, b) in enumerate(zip(old, new, strict=True), 1)]
    return []


def _is_under(path: str, above: str) -> bool:
    return path == above or path.startswith((f"{above}.", f"{above}["))


def _owner(path: str) -> str:
    steps = split(path)
    owner = join("", str(steps[0]))
    if len(steps) > 1 and isinstance(steps[1], int):
        owner = item(owner, steps[1])
    return owner
