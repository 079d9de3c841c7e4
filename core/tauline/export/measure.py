"""Fonts and text metrics of exported figures: the DejaVu Sans that comes with matplotlib."""

from __future__ import annotations

import warnings
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
def families(text: str) -> tuple[str, ...]:
    """Font families to set a text in: our own, then installed ones for signs it does not have."""
    from matplotlib.font_manager import findfont, fontManager

    signs = {ord(sign) for sign in text}
    missing = signs - _signs_of(findfont(FAMILY))
    names = [FAMILY]
    for font in sorted(fontManager.ttflist, key=lambda font: (font.name, font.fname)):
        if not missing:
            break
        if font.style == "normal" and missing & _signs_of(font.fname):
            missing -= _signs_of(font.fname)
            names.append(font.name)
    return tuple(names)


@lru_cache(maxsize=512)
def _signs_of(file: str) -> frozenset[int]:
    from matplotlib.ft2font import FT2Font

    try:
        return frozenset(FT2Font(file).get_charmap())
    except (OSError, RuntimeError):
        return frozenset()


@lru_cache(maxsize=4096)
def _unit_width(text: str, italic: bool) -> float:
    from matplotlib.font_manager import FontProperties
    from matplotlib.textpath import text_to_path

    # measured large and scaled down: hinting rounds small text to whole pixels
    font = FontProperties(family=list(families(text)), size=100.0)
    font.set_style("italic" if italic else "normal")
    with warnings.catch_warnings():
        # a sign that no installed font has is drawn as a box
        warnings.filterwarnings("ignore", message="Glyph .* missing")
        width, _, _ = text_to_path.get_text_width_height_descent(text, font, ismath=False)
    return float(width) / 100.0
