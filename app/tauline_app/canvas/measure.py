"""Text metrics of the screen."""

from __future__ import annotations

from functools import lru_cache

from PySide6.QtGui import QFont, QFontMetricsF

from tauline.figure.drawing import Role, Run
from tauline.figure.measure import SUB_SIZE
from tauline.figure.style import Style


class ScreenMeasure:
    """Measures runs as the canvas sets them, in device-independent pixels."""

    def __init__(self, style: Style) -> None:
        self._style = style

    def size(self, runs: tuple[Run, ...], role: Role) -> tuple[float, float]:
        """See :class:`tauline.figure.measure.TextMeasure`."""
        size = self._style.size(role)
        return sum(run_width(run, size) for run in runs), size


@lru_cache(maxsize=64)
def run_font(style: str, size: float) -> QFont:
    """Font of a run in text of a size."""
    font = QFont()
    font.setPixelSize(max(1, round(size * SUB_SIZE if style == "sub" else size)))
    font.setItalic(style == "italic")
    return font


@lru_cache(maxsize=8192)
def _advance(text: str, style: str, size: float) -> float:
    return QFontMetricsF(run_font(style, size)).horizontalAdvance(text)


def run_width(run: Run, size: float) -> float:
    """Width of a run in text of a size."""
    return _advance(run.text, run.style, size)
