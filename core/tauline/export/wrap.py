"""Breaking text into lines."""

from __future__ import annotations

from tauline.export.measure import PrintMeasure
from tauline.figure.drawing import Role, Run


def wrapped(runs: tuple[Run, ...], width: float, measure: PrintMeasure) -> list[list[Run]]:
    """Break runs into lines no wider than ``width`` (points), between words."""
    words: list[list[Run]] = [[]]
    for run in runs:
        for part in _words(run.text):
            words[-1].append(Run(part, run.style))
            if part.endswith(" "):
                words.append([])
    lines: list[list[Run]] = [[]]
    used = 0.0
    for word in words:
        # the space after a word may hang over
        bare = (*word[:-1], Run(word[-1].text.rstrip(), word[-1].style)) if word else ()
        if lines[-1] and used + measure.size(bare, Role.CAPTION)[0] > width:
            lines.append([])
            used = 0.0
        lines[-1] += word
        used += measure.size(tuple(word), Role.CAPTION)[0]
    return [_merged(line) for line in lines if line]


def _merged(pieces: list[Run]) -> list[Run]:
    """Join neighbours of one style: whoever copies or searches the text meets whole phrases."""
    runs: list[Run] = []
    for piece in pieces:
        if runs and runs[-1].style == piece.style:
            runs[-1] = Run(runs[-1].text + piece.text, piece.style)
        else:
            runs.append(piece)
    return runs


def _words(text: str) -> list[str]:
    parts = text.split(" ")
    return [part + " " for part in parts[:-1]] + ([parts[-1]] if parts[-1] else [])
