"""Units, dimensions, and the scenario's own system of units.

Inside, every quantity is held in powers of one unit, the scenario's time unit, with c = 1: a
length is a light-time, a velocity a pure number, an acceleration a reciprocal time. Unit scales
are exact fractions, so that ``1 ly`` in a scenario of years is exactly 1.

Sources: metre, second, c: BIPM, SI Brochure, 9th ed. (2019), §2.2-2.3; minute, hour, day,
astronomical unit: ibid., table 8; Julian year and light-year: IAU Style Manual (1989), table 6;
parsec: IAU 2015 resolution B2; standard acceleration of gravity: 3rd CGPM (1901);
foot: exactly 0.3048 m, international yard and pound agreement (1959).
"""

from __future__ import annotations

import math
from fractions import Fraction
from typing import NamedTuple

import msgspec

from tauline.errors import QuantityError

SPEED_OF_LIGHT = 299_792_458
"""Metres per second, exact."""

JULIAN_YEAR = 31_557_600
"""Seconds: 365.25 days of 86 400 s."""

STANDARD_GRAVITY = Fraction(980665, 100000)
"""Metres per second squared, exact."""

ASTRONOMICAL_UNIT = 149_597_870_700
"""Metres, exact."""


class Dimension(NamedTuple):
    """Exponents of time and length."""

    time: int
    length: int

    def __str__(self) -> str:
        names = {
            (0, 0): "a pure number",
            (1, 0): "a time",
            (0, 1): "a length",
            (-1, 1): "a velocity",
            (-2, 1): "an acceleration",
            (-1, 0): "a frequency",
        }
        return names.get((self.time, self.length), f"time^{self.time} length^{self.length}")


NUMBER = Dimension(0, 0)
TIME = Dimension(1, 0)
LENGTH = Dimension(0, 1)
VELOCITY = Dimension(-1, 1)
ACCELERATION = Dimension(-2, 1)


class Quantity(NamedTuple):
    """A magnitude in the scenario's time unit with c = 1, and its dimension."""

    value: float
    dimension: Dimension


class Unit(NamedTuple):
    """A unit: its exact size in metres and seconds, and its dimension."""

    size: Fraction
    dimension: Dimension


def _times() -> dict[str, Fraction]:
    second = Fraction(1)
    return {
        "s": second,
        "ms": second / 10**3,
        "us": second / 10**6,
        "µs": second / 10**6,
        "ns": second / 10**9,
        "ps": second / 10**12,
        "fs": second / 10**15,
        "min": second * 60,
        "h": second * 3600,
        "d": second * 86_400,
        "yr": second * JULIAN_YEAR,
        "kyr": second * JULIAN_YEAR * 10**3,
        "Myr": second * JULIAN_YEAR * 10**6,
        "Gyr": second * JULIAN_YEAR * 10**9,
    }


def _lengths() -> dict[str, Fraction]:
    metre = Fraction(1)
    light = {
        "ly" if name == "yr" else name.replace("yr", "ly") if "yr" in name else "l" + name: size
        * SPEED_OF_LIGHT
        for name, size in _times().items()
    }
    parsec = Fraction(648_000) / Fraction(math.pi) * ASTRONOMICAL_UNIT
    return light | {
        "m": metre,
        "km": metre * 1000,
        "cm": metre / 100,
        "mm": metre / 1000,
        "um": metre / 10**6,
        "µm": metre / 10**6,
        "nm": metre / 10**9,
        "ft": Fraction(3048, 10000),
        "au": metre * ASTRONOMICAL_UNIT,
        "pc": parsec,
        "kpc": parsec * 1000,
    }


UNITS: dict[str, Unit] = (
    {name: Unit(size, TIME) for name, size in _times().items()}
    | {name: Unit(size, LENGTH) for name, size in _lengths().items()}
    | {
        "c": Unit(Fraction(SPEED_OF_LIGHT), VELOCITY),
        "g": Unit(STANDARD_GRAVITY, ACCELERATION),
        "Hz": Unit(Fraction(1), Dimension(-1, 0)),
        "rad": Unit(Fraction(1), NUMBER),
        "deg": Unit(Fraction(math.pi) / 180, NUMBER),
    }
)
"""Every unit a scenario may use, by its symbol."""


class UnitSystem(msgspec.Struct, frozen=True):
    """The scenario's units of time and length.

    >>> UnitSystem("yr", "ly").from_reader(1.0, LENGTH)
    1.0
    """

    time: str = "yr"
    length: str = "ly"

    def scale(self, dimension: Dimension) -> float:
        """Size of one scenario unit of this dimension in internal units (time unit, c = 1)."""
        return float(self._length_in_light_time() ** dimension.length)

    def from_reader(self, number: float, dimension: Dimension) -> float:
        """Turn a number in the scenario's units into internal units."""
        return number * self.scale(dimension)

    def to_reader(self, value: float, dimension: Dimension) -> float:
        """Turn an internal value into a number in the scenario's units."""
        return value / self.scale(dimension)

    def unit(self, name: str) -> Quantity:
        """Return one of a unit as an internal quantity; QuantityError for an unknown name."""
        try:
            size, dimension = UNITS[name]
        except KeyError:
            raise QuantityError(f"unknown unit '{name}'", hint_for_unit(name)) from None
        second = 1 / UNITS[self.time].size
        metre = second / SPEED_OF_LIGHT
        return Quantity(float(size * second**dimension.time * metre**dimension.length), dimension)

    def symbol(self, dimension: Dimension) -> str:
        """Symbol of the scenario's unit of a dimension; velocities are shown in c.

        >>> UnitSystem("yr", "ly").symbol(ACCELERATION)
        'ly/yr²'
        """
        match dimension:
            case (0, 0):
                return ""
            case (1, 0):
                return self.time
            case (0, 1):
                return self.length
            case (-1, 1):
                return "c"
            case (-2, 1):
                return f"{self.length}/{self.time}²"
            case (-1, 0):
                return f"1/{self.time}"
            case _:
                return f"{self.time}^{dimension.time} {self.length}^{dimension.length}"

    def _length_in_light_time(self) -> Fraction:
        return UNITS[self.length].size / (UNITS[self.time].size * SPEED_OF_LIGHT)


def hint_for_unit(name: str) -> str:
    """Name the units whose symbols differ from ``name`` by case only, or all of them."""
    near = [unit for unit in UNITS if unit.lower() == name.lower()]
    if near:
        return f"did you mean '{near[0]}'?"
    return "known units: " + ", ".join(UNITS)
