"""Text metrics of exported figures: the DejaVu Sans that comes with matplotlib."""

from __future__ import annotations

from functools import lru_cache

from tauline.figure.drawing import Role, Run
from tauline.figure.measure import SUB_SIZE
from tauline.figure.style import Style

FAMILY = "DejaVu Sans"


class PrintMeasure:
    """Measures runs as :mod:`tauline.export.figure` sets them."""

    def __init__(self, style: Style) -> None:
        self._style = style

    def size(self, runs: tuple[Run, ...], role: Role) -> tuple[float, float]:
        """See :class:`tauline.figure.measure.TextMeasure`."""
        size = self._style.size(role)
        return sum(self.width(run, size) for run in runs), size

    def width(self, run: Run, size: float) -> float:
        """Width of one run in text of a size, in points."""
        own = size * SUB_SIZE if run.style == "sub" else size
        return _unit_width(run.text, run.style == "italic") * own


@lru_cache(maxsize=4096)
def _unit_width(text: str, italic: bool) -> float:
    from matplotlib.font_manager import FontProperties
    from matplotlib.textpath import text_to_path

    # measured large and scaled down: hinting rounds small text to whole pixels
    font = FontProperties(family=FAMILY, style="italic" if italic else "normal", size=100.0)
    width, _, _ = text_to_path.get_text_width_height_descent(text, font, ismath=False)
    return float(width) / 100.0
