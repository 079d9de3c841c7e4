"""Ink: contrast on both grounds, and observers told apart by more than one cue."""

from __future__ import annotations

from itertools import combinations

import pytest

from tauline.figure.drawing import NEUTRAL, Role
from tauline.figure.style import (
    BLENDS,
    PALETTE,
    PRINT,
    SCREEN_DARK,
    SCREEN_LIGHT,
    TEXTS,
    WIDTHS,
    Style,
    contrast,
    legible,
    luminance,
)

STYLES = [PRINT, SCREEN_LIGHT, SCREEN_DARK]
HUES = [NEUTRAL, *range(2 * len(PALETTE))]


def test_contrast_is_that_of_the_guideline() -> None:
    """WCAG 2.2, "contrast ratio": 21 for black on white; #767676 on white is the known 4.54."""
    assert contrast((0, 0, 0), (255, 255, 255)) == pytest.approx(21.0)
    assert contrast((255, 255, 255), (0, 0, 0)) == pytest.approx(21.0)
    assert contrast((118, 118, 118), (255, 255, 255)) == pytest.approx(4.54, abs=0.005)
    assert luminance((255, 255, 255)) == pytest.approx(1.0)


@pytest.mark.parametrize(
    ("colour", "ratio"), [((0, 114, 178), 5.19), ((213, 94, 0), 3.87), ((86, 180, 233), 2.31)]
)
def test_contrast_of_the_palette_on_white(colour: tuple[int, int, int], ratio: float) -> None:
    """Blue, vermillion and sky blue of Okabe & Ito on white, computed from WCAG's definition."""
    assert contrast(colour, (255, 255, 255)) == pytest.approx(ratio, abs=0.01)


@pytest.mark.parametrize("style", STYLES)
@pytest.mark.parametrize("hue", HUES)
def test_lines_and_texts_stand_out_from_the_ground(style: Style, hue: int) -> None:
    for role in Role:
        found = contrast(style.colour(role, hue), style.ground)
        if role in TEXTS:
            assert found >= 4.5, role
        elif role not in BLENDS:
            assert found >= 3.0, role


@pytest.mark.parametrize("style", STYLES)
def test_pale_fills_leave_the_text_on_them_legible(style: Style) -> None:
    ink = style.colour(Role.EVENT_LABEL)
    for hue in HUES:
        for role in (Role.BODY, Role.LIGHT_CONE):
            assert contrast(ink, style.colour(role, hue)) >= 7.0


@pytest.mark.parametrize("style", STYLES)
def test_no_two_observers_look_alike(style: Style) -> None:
    looks = [
        (style.colour(Role.WORLDLINE, hue), style.dash(Role.WORLDLINE, hue)) for hue in HUES[1:]
    ]
    assert all(one != other for one, other in combinations(looks, 2))


def test_a_colour_that_stands_out_stays_as_it_is() -> None:
    assert legible((0, 114, 178), (255, 255, 255), 3.0) == (0, 114, 178)


def test_the_heavier_ink_belongs_to_the_worldlines() -> None:
    assert WIDTHS[Role.WORLDLINE] == max(WIDTHS.values())
    assert WIDTHS[Role.GRID] == min(WIDTHS.values())
    for role in WIDTHS:
        assert PRINT.width(role) > 0.0
