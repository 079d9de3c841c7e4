"""Published numbers against the functions of spacetime and the units.

The facts, each with its source, stand in facts_spacetime.toml. Gravity, a medium, the energy of
a particle, measured counts are inputs quoted from there.
"""

from __future__ import annotations

import math
import tomllib
from collections.abc import Callable
from pathlib import Path
from typing import SupportsFloat

import msgspec
import numpy as np
import pytest
from numpy.typing import NDArray

from tauline.scenario.expression import evaluate
from tauline.scenario.units import (
    ACCELERATION,
    JULIAN_YEAR,
    SPEED_OF_LIGHT,
    STANDARD_GRAVITY,
    TIME,
    UNITS,
    UnitSystem,
)
from tauline.spacetime import (
    beta,
    boost,
    compose_collinear,
    doppler_factor,
    from_beta,
    from_gamma,
    from_lightcone,
    gamma,
    gamma_minus_one,
    interval_squared,
    one_minus_beta,
    proper_time,
    to_lightcone,
)

Number = Callable[[], SupportsFloat]

YEARS = UnitSystem("yr", "ly")
NANOSECONDS = UnitSystem("ns", "lns")
ORIGIN = to_lightcone(0, 0)

KINDS = ("A", "B", "C1", "C3", "D1", "D2", "D7", "D8", "D9", "D10", "D12", "G3")
"""The groups of facts that must be here."""


class Fact(msgspec.Struct, frozen=True, forbid_unknown_fields=True):
    """One published number; texts, so that its digits are kept."""

    id: str
    inputs: str
    quantity: str
    units: str
    expected: str
    tolerance: str
    exact: str
    source: str
    seen: str


def facts() -> dict[str, Fact]:
    text = (Path(__file__).parent / "facts_spacetime.toml").read_text(encoding="utf-8")
    listed = [msgspec.convert(table, Fact) for table in tomllib.loads(text)["fact"]]
    return {fact.id: fact for fact in listed}


FACTS = facts()
NUMBERS: dict[str, Number] = {}


def fact(some_id: str) -> Callable[[Number], Number]:
    """Mark the function that computes a fact."""

    def mark(compute: Number) -> Number:
        assert some_id not in NUMBERS
        NUMBERS[some_id] = compute
        return compute

    return mark


def facts_of(**computed: Number) -> None:
    for some_id, compute in computed.items():
        fact(some_id)(compute)


def at_speed(metres_per_second: float) -> NDArray[np.float64]:
    """Rapidity of a speed in SI units."""
    return from_beta(metres_per_second / SPEED_OF_LIGHT)


def rate_deficit(rapidity: NDArray[np.float64]) -> NDArray[np.float64]:
    """1 − 1/γ, by how much a moving clock is slow, without cancellation."""
    return np.asarray(gamma_minus_one(rapidity) / gamma(rapidity))


def seen_from(t: float, x: float, rapidity: SupportsFloat) -> tuple[float, float]:
    """Time and place of an event in a moving frame."""
    moved_t, moved_x = from_lightcone(boost(to_lightcone(t, x), float(rapidity)))
    return float(moved_t), float(moved_x)


# --- A: constants and units -------------------------------------------------------------------

facts_of(
    A1=lambda: SPEED_OF_LIGHT,
    A2a=lambda: UNITS["yr"].size,
    A2b=lambda: UNITS["ly"].size,
    A3a=lambda: UNITS["pc"].size,
    A3b=lambda: evaluate("1 pc / ly", YEARS, {}, None).value,
    A4=lambda: UNITS["g"].size,
    A5a=lambda: YEARS.to_reader(YEARS.unit("g").value, ACCELERATION),
    A5b=lambda: evaluate("9.81 m/s^2", YEARS, {}, ACCELERATION).value,
)

# --- B: moving clocks -------------------------------------------------------------------------

MUON_LIFE = 2.1969811e-6
RING_GAMMA = 29.33
FLIGHT = 1907 / (0.994 * SPEED_OF_LIGHT)
GPS_SPEED = math.sqrt(3.986004418e14 / 26_600e3)
GROUND = 40_000e3 / 86_400


def muon_at_its_decay() -> tuple[float, float]:
    """Where a muon of 0.950 c decays, 2.20 µs of its own after it came to be."""
    return seen_from(2.20e-6, 0.0, -from_beta(0.950))


def around_the_world(ground_speed: float) -> float:
    """By how many ns a clock flown once around an equator runs ahead of one left behind."""
    left, flown = at_speed(GROUND), at_speed(GROUND + ground_speed)
    lead = (gamma_minus_one(left) - gamma_minus_one(flown)) / gamma(flown)
    return float(40_000e3 / abs(ground_speed) * lead * 1e9)


def sum_of_terms(text: str) -> float:
    return evaluate(text, NANOSECONDS, {}, TIME).value


facts_of(
    B1=lambda: gamma_minus_one(at_speed(5830)),
    B2a=lambda: muon_at_its_decay()[0] * 1e6,
    B2b=lambda: muon_at_its_decay()[1] * SPEED_OF_LIGHT / 1000,
    # the place it came from, when the muon's own clock stands at its decay
    B2c=lambda: (
        -seen_from(2.20e-6 / float(gamma(from_beta(0.950))), 0, from_beta(0.950))[1]
        * SPEED_OF_LIGHT
        / 1000
    ),
    B4a=lambda: seen_from(MUON_LIFE, 0.0, -from_gamma(RING_GAMMA))[0] * 1e6,
    B4b=lambda: 64.368 / gamma(from_gamma(RING_GAMMA)),
    B4c=lambda: (
        (gamma(from_gamma(RING_GAMMA)) * beta(from_gamma(RING_GAMMA)) * SPEED_OF_LIGHT) ** 2
        / (7 * float(STANDARD_GRAVITY))
    ),
    B5a=lambda: gamma(from_beta(0.9950)),
    B5b=lambda: gamma(from_beta(0.9954)),
    B5c=lambda: FLIGHT / (MUON_LIFE * math.log(563 / 408)),
    B5d=lambda: 563 * math.exp(-FLIGHT / MUON_LIFE),
    B6a=lambda: -rate_deficit(at_speed(3874)),
    B6b=lambda: -rate_deficit(at_speed(3874)) * 86_400e9,
    B6c=lambda: GPS_SPEED / 1000,
    B6d=lambda: rate_deficit(at_speed(GPS_SPEED)) * 86_400e6,
    B7a=lambda: around_the_world(271),
    B7b=lambda: around_the_world(-271),
    B7c=lambda: sum_of_terms("-184 ns + 144 ns"),
    B7d=lambda: sum_of_terms("96 ns + 179 ns"),
    B7e=lambda: math.degrees(
        math.acos(SPEED_OF_LIGHT * math.sqrt(280e-9 / (4 * math.pi * 7.292115e-5)) / 6_378_137)
    ),
    B8=lambda: rate_deficit(at_speed(7670)) * 1.577e7 * 1000,
)

# --- C: composition and Doppler ---------------------------------------------------------------

facts_of(
    C1a=lambda: compose_collinear(0.5, 0.75),
    C1b=lambda: compose_collinear(0.5, -0.75),
    C1c=lambda: beta(from_beta(0.75) - from_beta(0.25)),
    C1d=lambda: beta(from_beta(0.95) - from_beta(0.75)),
    C3a=lambda: 0.525 / doppler_factor(from_beta(0.825)),
    C3b=lambda: 1.50 * doppler_factor(from_beta(0.350)),
)

# --- D: journeys, rods, clocks ----------------------------------------------------------------

EINSTEIN = at_speed(30e3)
ARROW = from_beta(0.8)


def canopus() -> NDArray[np.float64]:
    return to_lightcone(99 / float(beta(from_beta(99 / 101))), 99)


facts_of(
    D1a=lambda: 1 / doppler_factor(from_gamma(100)),
    D1b=lambda: one_minus_beta(from_gamma(100)),
    D2a=lambda: 12 / beta(from_beta(0.87)),
    D2b=lambda: proper_time(ORIGIN, to_lightcone(12 / 0.87, 12)),
    D7a=lambda: JULIAN_YEAR * rate_deficit(EINSTEIN),
    # (1 − 1/γ)/(β²/2) = 2γ/(γ + 1), which exceeds 1 by this
    D7b=lambda: gamma_minus_one(EINSTEIN) / (gamma(EINSTEIN) + 1),
    D8a=lambda: 2 * from_lightcone(canopus())[0],
    D8b=lambda: 2 * proper_time(ORIGIN, canopus()),
    # the arrow's tail passes the near face at 15/0.8 of its own time; times speed, in the box frame
    D9a=lambda: 0.8 * seen_from(15 / 0.8, -15, -ARROW)[0],
    D9b=lambda: seen_from(12.5, 10, ARROW)[0] * float(gamma(ARROW)),
    D9c=lambda: seen_from(9 / 0.8, 0, ARROW)[0],
    D9d=lambda: -seen_from(0, 10, ARROW)[0] / float(gamma(ARROW)),
    D9e=lambda: 10 / 0.8 - seen_from(15 / 0.8, -15, -ARROW)[0],
    D9f=lambda: proper_time(ORIGIN, to_lightcone(10 / 0.8, 10)),
    # lamps 26 m apart in the car, flashing together on the platform
    D10=lambda: (
        seen_from(0, 26 / float(gamma(from_beta(0.5))), from_beta(0.5))[0] / SPEED_OF_LIGHT * 1e9
    ),
    # light sent at 1 comes along u = 1, its echo back along v = 4
    D12a=lambda: from_lightcone([1, 4])[0],
    D12b=lambda: from_lightcone([1, 4])[1],
)

# --- G: Lorentz transformations ---------------------------------------------------------------


def group_law() -> float:
    """How far B(0.8) after B(0.6) is from B(35/37), at most, on the unit vectors of t and x."""
    units = to_lightcone([1, 0], [0, 1])
    twice = boost(boost(units, float(from_beta(0.6))), float(from_beta(0.8)))
    once = boost(units, float(from_beta(35 / 37)))
    return float(np.max(np.abs(from_lightcone(twice) - from_lightcone(once))))


facts_of(
    G3a=lambda: seen_from(13, 11, from_beta(0.6))[0],
    G3b=lambda: seen_from(13, 11, from_beta(0.6))[1],
    G3c=lambda: interval_squared(
        boost(ORIGIN, float(from_beta(0.6))), boost(to_lightcone(13, 11), float(from_beta(0.6)))
    ),
    G3d=group_law,
    G3e=lambda: compose_collinear(compose_collinear(0.9, 0.9), 0.9),
)


def test_every_listed_fact_is_computed() -> None:
    assert sorted(NUMBERS) == sorted(FACTS)


@pytest.mark.parametrize("kind", KINDS)
def test_every_group_is_there(kind: str) -> None:
    rest = len(kind)
    assert any(i.startswith(kind) and not (rest > 1 and i[rest:][:1].isdigit()) for i in FACTS)


@pytest.mark.parametrize("some_id", FACTS)
def test_every_fact_names_its_source(some_id: str) -> None:
    assert FACTS[some_id].source
    assert FACTS[some_id].seen


@pytest.mark.parametrize("some_id", FACTS)
def test_published_number(some_id: str) -> None:
    """Within the tolerance of the publication."""
    stated = FACTS[some_id]
    slack = float(stated.tolerance) + 4e-16 * abs(float(stated.expected))
    assert float(NUMBERS[some_id]()) == pytest.approx(float(stated.expected), rel=0, abs=slack)


@pytest.mark.parametrize("some_id", FACTS)
def test_exact_number(some_id: str) -> None:
    """To 1e-12 of what the inputs give in more digits."""
    stated = FACTS[some_id]
    exact = float(stated.exact)
    # where the exact number is nothing, it is next to numbers of size 1
    slack = 1e-12 * abs(exact) if abs(exact) > 1e-30 else 1e-15
    assert float(NUMBERS[some_id]()) == pytest.approx(exact, rel=0, abs=slack)
