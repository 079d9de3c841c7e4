"""Ink: colour, width, dash and text size for every role, on light and on dark ground.

Colours by observer are those of M. Okabe & K. Ito, *Color Universal Design* (2008,
jfly.uni-koeln.de/color), then three of the muted ones of P. Tol, *Colour Schemes* (SRON technical
note, issue 3.2), darkened or lightened until they stand out from the ground by 3:1 (WCAG 2.2,
success criterion 1.4.11); text by 4.5:1 (1.4.3). Pale colours are blends computed towards the
ground, never transparent.
"""

from __future__ import annotations

import msgspec

from tauline.figure.drawing import NEUTRAL, Role

Colour = tuple[int, int, int]

OKABE_ITO: tuple[Colour, ...] = (
    (0, 114, 178),
    (213, 94, 0),
    (0, 158, 115),
    (204, 121, 167),
    (86, 180, 233),
    (230, 159, 0),
)
"""Blue, vermillion, bluish green, reddish purple, sky blue, orange."""
TOL_MUTED: tuple[Colour, ...] = ((136, 34, 85), (51, 34, 136), (153, 153, 51))
"""Wine, indigo, olive."""
PALETTE = OKABE_ITO + TOL_MUTED

GRAPHICS_CONTRAST, TEXT_CONTRAST = 3.0, 4.5

SOLID: tuple[float, ...] = ()

WIDTHS: dict[Role, float] = {
    Role.WORLDLINE: 1.5,
    Role.CLOCK_TICK: 0.8,
    Role.SIGNAL: 0.8,
    Role.SIMULTANEITY: 0.8,
    Role.FRAME_AXIS: 0.8,
    Role.OTHER_AXIS: 0.8,
    Role.AXIS_TICK: 0.6,
    Role.LIGHT_CONE_EDGE: 0.6,
    Role.GRID: 0.35,
    Role.HYPERBOLA: 0.35,
    Role.LEADER: 0.5,
}
DASHES: dict[Role, tuple[float, ...]] = {
    Role.SIMULTANEITY: (4.0, 2.5),
    Role.LIGHT_CONE_EDGE: (1.5, 2.0),
}
BLENDS: dict[Role, float] = {
    Role.BODY: 0.82,
    Role.LIGHT_CONE: 0.93,
    Role.GRID: 0.72,
    Role.HYPERBOLA: 0.55,
    Role.LIGHT_CONE_EDGE: 0.4,
    Role.LEADER: 0.4,
}
"""Share of the ground in a role's colour."""

SMALL = frozenset((Role.AXIS_NUMBER, Role.CLOCK_NUMBER))
TEXTS = frozenset(
    (
        Role.AXIS_NUMBER,
        Role.AXIS_TITLE,
        Role.CLOCK_NUMBER,
        Role.EVENT_LABEL,
        Role.LINE_LABEL,
        Role.CAPTION,
    )
)


class Style(msgspec.Struct, frozen=True, kw_only=True):
    """The ground, the neutral ink, and two sizes of text (points; on screen: pixels)."""

    ground: Colour = (255, 255, 255)
    ink: Colour = (26, 26, 26)
    text_size: float = 8.0
    small_size: float = 7.0
    width_factor: float = 1.0
    event_diameter: float = 4.5
    casing: float = 1.2

    def colour(self, role: Role, hue: int = NEUTRAL) -> Colour:
        """Colour of a role in an observer's hue."""
        full = self.ink if hue == NEUTRAL else PALETTE[hue % len(PALETTE)]
        if role in TEXTS:
            return legible(full, self.ground, TEXT_CONTRAST)
        share = BLENDS.get(role, 0.0)
        if share == 0.0:
            return legible(full, self.ground, GRAPHICS_CONTRAST)
        return blend(full, self.ground, share)

    def width(self, role: Role) -> float:
        """Width of a stroke."""
        return WIDTHS[role] * self.width_factor

    def dash(self, role: Role, hue: int = NEUTRAL) -> tuple[float, ...]:
        """Lengths of dashes and gaps; empty for a solid line.

        Hues beyond the palette are dashed too, so that no two observers look alike.
        """
        if role is Role.WORLDLINE and hue >= len(PALETTE):
            return tuple(length * self.width_factor for length in (7.0, 2.0))
        return tuple(length * self.width_factor for length in DASHES.get(role, SOLID))

    def size(self, role: Role) -> float:
        """Size of text."""
        return self.small_size if role in SMALL else self.text_size


PRINT = Style()
SCREEN_LIGHT = Style(
    ground=(255, 255, 255),
    ink=(32, 36, 42),
    text_size=13.0,
    small_size=11.0,
    width_factor=1.3,
    event_diameter=8.0,
    casing=1.8,
)
SCREEN_DARK = msgspec.structs.replace(SCREEN_LIGHT, ground=(22, 25, 30), ink=(222, 226, 232))


def blend(colour: Colour, towards: Colour, share: float) -> Colour:
    """Mix a share of one colour into another."""
    r, g, b = (
        round(one * (1.0 - share) + other * share)
        for one, other in zip(colour, towards, strict=True)
    )
    return r, g, b


def luminance(colour: Colour) -> float:
    """Relative luminance (WCAG 2.2, definition)."""
    linear = [
        part / 12.92 if part <= 0.04045 else ((part + 0.055) / 1.055) ** 2.4
        for part in (component / 255.0 for component in colour)
    ]
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]


def contrast(first: Colour, second: Colour) -> float:
    """Contrast ratio, 1 to 21 (WCAG 2.2, definition)."""
    low, high = sorted((luminance(first), luminance(second)))
    return (high + 0.05) / (low + 0.05)


def legible(colour: Colour, ground: Colour, ratio: float) -> Colour:
    """Darken or lighten a colour, away from the ground, until it stands out by a ratio."""
    away: Colour = (0, 0, 0) if luminance(ground) > 0.18 else (255, 255, 255)
    for step in range(21):
        tried = blend(colour, away, step / 20.0)
        if contrast(tried, ground) >= ratio:
            return tried
    return away
