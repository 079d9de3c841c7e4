"""What label placement needs to know of text."""

from __future__ import annotations

from typing import Protocol

from tauline.figure.drawing import Role, Run

SUB_SIZE = 0.75
"""Size of a subscript relative to the text it stands at."""
SUB_DROP = 0.22
"""How far a subscript stands below the line, in sizes of the text."""

DESCENT = 0.24
"""Height of the baseline above the bottom of a text's box, in sizes of the text."""


class TextMeasure(Protocol):
    """Measures text as it will be set: on screen and in each export with their own fonts."""

    def size(self, runs: tuple[Run, ...], role: Role) -> tuple[float, float]:
        """Width and height, in points, of the box around some runs of text."""
        ...
