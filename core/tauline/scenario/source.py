"""The text a scenario was read from, and the line of everything in it."""

from __future__ import annotations

import re
from collections.abc import Mapping
from pathlib import Path

import msgspec

from tauline.scenario.layout import Layout
from tauline.scenario.paths import parent

_ITEM = re.compile(r"([\w-]+\[[0-9]+\])(?:\.(.*))?", re.DOTALL)


class Source(msgspec.Struct, frozen=True, kw_only=True):
    """The text of a scenario file.

    ``path`` is None for a text that is no file; ``lines`` has the line, from 1, of every place:
    an object's id (or handle, or "" for the file as a whole) and a key path below it, as in a
    diagnosis.
    """

    path: Path | None
    text: str
    lines: Mapping[tuple[str, str], int]

    def line_of(self, object_id: str, key: str = "") -> int | None:
        """Line of a key, or else of what it stands in, or else of the object.

        An id made by an object, such as ``greeting.3.received``, is where that object is. None
        for what is nowhere in the text.
        """
        owner = object_id
        if (owner, "") not in self.lines:
            owner, key = object_id.partition(".")[0], ""
        while key and (owner, key) not in self.lines:
            key = parent(key)
        return self.lines.get((owner, key))


def source_of(path: Path | None, text: str, ids: Mapping[str, str], layout: Layout) -> Source:
    """Make the source of a text that was read.

    ``ids`` gives the id of each object by its place in the file, such as ``worldline[2]``.
    """
    lines: dict[tuple[str, str], int] = {("", ""): 1}
    for place, line in layout.lines.items():
        match = _ITEM.fullmatch(place)
        if match is not None and match[1] in ids:
            lines.setdefault((ids[match[1]], match[2] or ""), line)
        else:
            lines.setdefault(("", place), line)
    return Source(path=path, text=text, lines=lines)
