"""A number for the reader, with its unit, its frame, and how it comes about."""

from __future__ import annotations

import math

import msgspec

from tauline.scenario.units import VELOCITY, Dimension, UnitSystem

UNDEFINED = "—"


class Working(msgspec.Struct, frozen=True):
    """How a number comes about: the formula, where it is published, and what was put in."""

    formula: str
    source: str
    substitution: str = ""

    def __str__(self) -> str:
        put_in = f"\n{self.substitution}" if self.substitution else ""
        return f"{self.formula}{put_in}\n[{self.source}]"


class Readout(msgspec.Struct, frozen=True, kw_only=True):
    """One quantity of a scenario.

    ``number`` is in ``unit`` (the scenario's units; velocities in c), None where the quantity
    has no value, and ``note`` then says why. ``frame`` is the label of the frame it holds in, ""
    for a quantity that is the same in all.
    """

    name: str
    symbol: str
    number: float | None
    unit: str
    frame: str = ""
    note: str = ""
    working: Working | None = None

    def text(self, digits: int = 6) -> str:
        """Write the number with its unit, to so many significant digits."""
        if self.number is None:
            return self.note or UNDEFINED
        shown = format_number(self.number, digits)
        return f"{shown} {self.unit}".rstrip()

    def full(self) -> str:
        """Write the number alone at full precision, as it is copied."""
        return "" if self.number is None else repr(self.number)


def format_number(number: float, digits: int) -> str:
    """Write a number to so many significant digits, with a true minus sign.

    >>> format_number(-0.6, 4)
    '−0.6'
    >>> format_number(4.3e-24, 2)
    '4.3·10⁻²⁴'
    """
    if not math.isfinite(number):
        return "−∞" if number < 0 else "∞" if number > 0 else UNDEFINED
    mantissa, _, exponent = f"{number:.{digits}g}".partition("e")
    if exponent:
        raised = str(int(exponent)).translate(str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹"))
        mantissa += "·10" + raised
    return mantissa.replace("-", "−")


def readout(
    units: UnitSystem,
    name: str,
    symbol: str,
    value: float,
    dimension: Dimension,
    *,
    frame: str = "",
    note: str = "",
    working: Working | None = None,
) -> Readout:
    """Make a readout of an internal value; a NaN has no number."""
    known = not math.isnan(value)
    number = value if dimension == VELOCITY else units.to_reader(value, dimension)
    return Readout(
        name=name,
        symbol=symbol,
        number=number if known else None,
        unit=units.symbol(dimension),
        frame=frame,
        note=note,
        working=working,
    )
