"""Published numbers of facts_kinematics.toml, each computed by the functions of spacetime.

Gravity, media and particle energies are no business of the program: such terms and E/m are
inputs quoted from there.
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
from numpy.typing import ArrayLike, NDArray

from tauline.scenario.units import JULIAN_YEAR, SPEED_OF_LIGHT, STANDARD_GRAVITY
from tauline.spacetime import (
    aberrated_angle,
    aberration_shift,
    accelerated_distance,
    accelerated_gamma,
    accelerated_rapidity,
    accelerated_time,
    apparent_length,
    apparent_transverse_speed,
    beta,
    boost,
    circular_acceleration,
    circular_period,
    clock_rate_ratio,
    closing_speed,
    compose,
    doppler_factor,
    from_beta,
    from_gamma,
    from_lightcone,
    gamma,
    gamma_minus_one,
    horizon_distance,
    largest_apparent_speed,
    last_departure,
    one_minus_beta,
    proper_time_over,
    proper_velocity,
    relative_velocity,
    successive_boosts,
    thomas_rotation_per_turn,
    to_lightcone,
    viewing_angles,
    wigner_angle,
)

Number = Callable[[], SupportsFloat]

LISTED = {
    "C4": "ab",
    "C6": "",
    "C8": "ab",
    "C9": "ab",
    "C12": "",
    "C14": "abc",
    "E3": "ab",
    "E4": "ab",
    "E7": "ab",
    "E12": "",
    "F1": "ab",
    "F3": "abc",
    "F4": "abcd",
    "F6": "",
    "F8": "ab",
    "F10": "ab",
    "G1": "abc",
    "G2": "abcdefgh",
    "T3": "ab",
    "T4": "ab",
    "T6": "ab",
    "T11": "abcdefgh",
}
"""The groups of facts that must be here, with their letters; E1 and T8 are lettered otherwise."""

LISTED_IDS = {group + letter for group, letters in LISTED.items() for letter in letters or ("",)}
LISTED_IDS |= {f"E1.{years}.{what}" for years in (1, 2, 5, 8, 12) for what in "tdg"}
LISTED_IDS |= {"E1.v1", "E1.v2", "E1.q", "T8", "T8b"}


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
    misprint: str = ""


def facts() -> dict[str, Fact]:
    text = (Path(__file__).parent / "facts_kinematics.toml").read_text(encoding="utf-8")
    listed = [msgspec.convert(table, Fact) for table in tomllib.loads(text)["fact"]]
    assert len({fact.id for fact in listed}) == len(listed)
    return {fact.id: fact for fact in listed}


FACTS = facts()
NUMBERS: dict[str, Number] = {}


def facts_of(**computed: Number) -> None:
    for some_id, compute in computed.items():
        assert some_id not in NUMBERS
        NUMBERS[some_id] = compute


def degrees(angle: ArrayLike) -> float:
    return math.degrees(float(np.asarray(angle)))


def at_speed(metres_per_second: float) -> NDArray[np.float64]:
    """Rapidity of a speed in SI units."""
    return from_beta(metres_per_second / SPEED_OF_LIGHT)


def rate_deficit(rapidity: NDArray[np.float64]) -> NDArray[np.float64]:
    """1 − 1/γ, by how much a moving clock is slow, without cancellation."""
    return np.asarray(gamma_minus_one(rapidity) / gamma(rapidity))


def per_year(metres_per_second_squared: float) -> float:
    """Acceleration in ly/yr²."""
    return metres_per_second_squared * JULIAN_YEAR / SPEED_OF_LIGHT


def seen_from(t: float, x: float, rapidity: SupportsFloat) -> tuple[float, float]:
    """Time and place of an event in a moving frame."""
    moved_t, moved_x = from_lightcone(boost(to_lightcone(t, x), float(rapidity)))
    return float(moved_t), float(moved_x)


# --- C: composition, Doppler, aberration --------------------------------------------------------

FORWARD, BACKWARD = 582490203.44, 512671442.9
IONS = -0.5 * np.log(BACKWARD / FORWARD)
PLANE = ((1.0, 0.0), (0.0, 1.0))
EARTH = 2 * math.pi * 1.00000102 * 149597870700 / (365.256363 * 86400 * math.sqrt(1 - 0.0167086**2))
WATER, FLOW = from_beta(1 / 1.333), at_speed(7.06)
PROTON = from_gamma(1 + 14e6 / 938)


def both_orders() -> float:
    """Angle between the two velocities that 0.8 c along x and 0.6 c along y compose to."""
    one, other = compose([0.8, 0.0], [0.0, 0.6]), compose([0.0, 0.6], [0.8, 0.0])
    return math.atan2(one[0] * other[1] - one[1] * other[0], float(one @ other))


def small_speed_added(moving: NDArray[np.float64], flow: NDArray[np.float64]) -> float:
    """(u ⊕ v) − u as sinh φ_v/(γ_w γ_u), which does not cancel."""
    return float(proper_velocity(flow) / (gamma(moving + flow) * gamma(moving)))


facts_of(
    C4a=lambda: FORWARD * doppler_factor(IONS),
    C4b=lambda: beta(IONS),
    C6=lambda: degrees(math.sin(float(aberration_shift(math.pi / 2, at_speed(EARTH))))) * 3600,
    C8a=lambda: np.linalg.norm(compose([0.8, 0.0], [0.0, 0.6])),
    C8b=lambda: gamma(
        successive_boosts(float(from_beta(0.8)), PLANE[0], float(from_beta(0.6)), PLANE[1]).rapidity
    ),
    C9a=lambda: degrees(wigner_angle(from_beta(0.6), from_beta(0.8), math.pi / 2)),
    C9b=lambda: degrees(both_orders()),
    C12=lambda: small_speed_added(WATER, FLOW) / beta(FLOW),
    C14a=lambda: beta(PROTON),
    C14b=lambda: beta(PROTON / 2),
    C14c=lambda: PROTON,
)

# --- E: constant acceleration -------------------------------------------------------------------

SHIP = 1.03
ONE_G = per_year(float(STANDARD_GRAVITY))


def proper_time_by_quadrature(acceleration: float, time: float) -> float:
    """∫ dt/γ over the time of the start's frame, with γ from the rapidity asinh(at)."""
    nodes, weights = np.polynomial.legendre.leggauss(20)
    edges = np.linspace(0.0, time, 401)
    half = 0.5 * np.diff(edges)[:, np.newaxis]
    middle = 0.5 * (edges[1:] + edges[:-1])[:, np.newaxis]
    t = middle + half * nodes
    return float(np.sum(half * weights / np.hypot(1.0, acceleration * t)))


def after(function: Callable[[float, float], SupportsFloat], tau: float) -> Number:
    return lambda: function(SHIP, tau)


for _years in (1, 2, 5, 8, 12):
    NUMBERS[f"E1.{_years}.t"] = after(accelerated_time, _years)
    NUMBERS[f"E1.{_years}.d"] = after(accelerated_distance, _years)
    NUMBERS[f"E1.{_years}.g"] = after(accelerated_gamma, _years)

NUMBERS["E1.v1"] = lambda: beta(accelerated_rapidity(SHIP, 1))
NUMBERS["E1.v2"] = lambda: beta(accelerated_rapidity(SHIP, 2))
NUMBERS["E1.q"] = lambda: proper_time_by_quadrature(SHIP, float(accelerated_time(SHIP, 5)))

facts_of(
    E3a=lambda: proper_time_over(per_year(9.8), 27_000),
    E3b=lambda: 2 * proper_time_over(per_year(9.8), 15_000),
    E4a=lambda: proper_velocity(accelerated_rapidity(SHIP, proper_time_over(SHIP, 1_100_000))),
    E4b=lambda: proper_time_over(SHIP, 1_100_000),
    E7a=lambda: horizon_distance(ONE_G),
    E7b=lambda: last_departure(ONE_G) * JULIAN_YEAR / 86_400,
    E12=lambda: clock_rate_ratio(1.0, 1.0),
)

# --- F: circles, light clocks, appearances ------------------------------------------------------

ALPHA = 7.2973525693e-3
MUON = from_gamma(29.33)
LIGHT_CLOCK = from_beta(0.6)


def longitudinal_leg(back: bool) -> float:
    """Time in the lab of one way of light along an arm of 1 that moves along itself at 0.6 c."""
    turned = seen_from(1.0, 1.0, -LIGHT_CLOCK)[0]
    return seen_from(2.0, 0.0, -LIGHT_CLOCK)[0] - turned if back else turned


def share_of_turn(rapidity: NDArray[np.float64]) -> float:
    return float(thomas_rotation_per_turn(rapidity)) / (2 * math.pi)


def angle_for(index: int) -> float:
    return degrees(viewing_angles(25 / 7, from_beta(0.997))[index])


facts_of(
    F1a=lambda: circular_acceleration(MUON, 7.0) * SPEED_OF_LIGHT**2,
    F1b=lambda: circular_period(from_beta(0.6), 1.0),
    F3a=lambda: degrees(thomas_rotation_per_turn(from_beta(0.6))),
    F3b=lambda: share_of_turn(from_beta(0.01)),
    F3c=lambda: share_of_turn(from_beta(ALPHA)),
    F4a=lambda: seen_from(2.0, 0.0, -LIGHT_CLOCK)[0],
    # light goes across in the clock's frame; in the lab's, which moves the other way
    F4b=lambda: degrees(aberrated_angle(math.pi / 2, LIGHT_CLOCK)),
    F4c=lambda: longitudinal_leg(back=False),
    F4d=lambda: longitudinal_leg(back=True),
    F6=lambda: apparent_transverse_speed(from_beta(5 / 6), math.atan2(3, 4)),
    F8a=lambda: largest_apparent_speed(from_beta(0.99)),
    F8b=lambda: largest_apparent_speed(from_beta(0.999)),
    F10a=lambda: angle_for(0),
    F10b=lambda: angle_for(1),
)

# --- G: particles near the speed of light -------------------------------------------------------

PROTON_MASS = 938.27208816e6
OH_MY_GOD, IN_1994 = from_gamma(3.2e20 / PROTON_MASS), from_gamma(3.0e20 / PROTON_MASS)


def days_to_cross(rapidity: NDArray[np.float64]) -> float:
    """Proper time in days over 1.5e9 ly."""
    return 1.5e9 * 365.25 / float(proper_velocity(rapidity))


facts_of(
    G1a=lambda: gamma(from_gamma(6.5e12 / PROTON_MASS)),
    G1b=lambda: gamma(from_gamma(7e12 / PROTON_MASS)),
    G1c=lambda: SPEED_OF_LIGHT * one_minus_beta(from_gamma(7e12 / PROTON_MASS)),
    G2a=lambda: gamma(OH_MY_GOD),
    G2b=lambda: one_minus_beta(OH_MY_GOD),
    G2c=lambda: one_minus_beta(IN_1994),
    # at the energy that was used in 1994
    G2d=lambda: IN_1994,
    G2e=lambda: 0.01 / (SPEED_OF_LIGHT * one_minus_beta(OH_MY_GOD)) / JULIAN_YEAR,
    G2f=lambda: SPEED_OF_LIGHT * JULIAN_YEAR * one_minus_beta(IN_1994) * 1e9,
    G2g=lambda: days_to_cross(OH_MY_GOD),
    G2h=lambda: days_to_cross(from_gamma(3.2e11)),
)

# --- T: traps -----------------------------------------------------------------------------------

GROUND = 40_000e3 / 86_400
HEIGHT_TERM = 193.4595686864294


def around_the_world(ground_speed: float) -> float:
    """By how many ns a clock flown once around an equator runs ahead of one left behind."""
    left, flown = at_speed(GROUND), at_speed(GROUND + ground_speed)
    lead = (gamma_minus_one(left) - gamma_minus_one(flown)) / gamma(flown)
    return float(40_000e3 / abs(ground_speed) * lead * 1e9)


ROUNDED_YEAR = 365 * 86_400
ROUNDED_G = 9.8 * ROUNDED_YEAR / 3e8

facts_of(
    T3a=lambda: gamma_minus_one(from_beta(0.6)),
    T3b=lambda: rate_deficit(from_beta(0.6)),
    T4a=lambda: closing_speed(from_beta(0.8), from_beta(-0.8)),
    T4b=lambda: relative_velocity([0.8], [-0.8])[0],
    T6a=lambda: gamma(
        successive_boosts(float(from_beta(0.6)), PLANE[0], float(from_beta(0.8)), PLANE[1]).rapidity
    ),
    T6b=lambda: math.hypot(0.6, 0.8),
    T8=lambda: apparent_length(1.0, from_beta(0.6), 0.0),
    T8b=lambda: apparent_length(1.0, from_beta(0.6), math.pi),
    T11a=lambda: 19 + 42.2 / proper_velocity(from_beta(0.991)),
    T11b=lambda: 1 / doppler_factor(from_beta(0.866)),
    T11c=lambda: 2 * proper_time_over(per_year(9.81), 11.9 / 2),
    T11d=lambda: days_to_cross(OH_MY_GOD),
    T11e=lambda: 2 * accelerated_distance(ROUNDED_G, 10) / 1000,
    T11f=lambda: rate_deficit(at_speed(7670)) * 1.577e7 * 1000,
    T11g=lambda: around_the_world(271) + HEIGHT_TERM,
    T11h=lambda: around_the_world(-271) + HEIGHT_TERM,
)


def test_every_listed_fact_is_there_and_computed() -> None:
    assert set(FACTS) == LISTED_IDS
    assert set(NUMBERS) == LISTED_IDS


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
    exact = float(FACTS[some_id].exact)
    assert float(NUMBERS[some_id]()) == pytest.approx(exact, rel=1e-12, abs=0)


@pytest.mark.parametrize("some_id", [i for i, stated in FACTS.items() if stated.misprint])
def test_a_misprint_is_not_reproduced(some_id: str) -> None:
    stated = FACTS[some_id]
    off = abs(float(NUMBERS[some_id]()) - float(stated.misprint))
    assert off > 2 * float(stated.tolerance)


def test_every_slip_has_its_misprint() -> None:
    assert {i for i, stated in FACTS.items() if stated.misprint} == {f"T11{i}" for i in "abcdefgh"}


@pytest.mark.parametrize(
    ("right", "wrong"), [("T3a", "T3b"), ("T4b", "T4a"), ("T8", "T8b"), ("G2g", "G2h")]
)
def test_a_trap_is_not_the_answer(right: str, wrong: str) -> None:
    """The number asked for is not the one that is easily taken for it."""
    off = abs(float(NUMBERS[right]()) - float(FACTS[wrong].exact))
    assert off > 2 * float(FACTS[wrong].tolerance)


def test_velocities_across_one_another_do_not_add_as_in_a_triangle() -> None:
    """T6: 0.6 c and 0.8 c do not make c."""
    speed = float(np.linalg.norm(compose([0.6, 0.0], [0.0, 0.8])))
    assert speed < float(FACTS["T6b"].exact) - 0.1
    assert float(gamma(from_beta(speed))) == pytest.approx(
        float(FACTS["T6a"].exact), rel=1e-13, abs=0
    )


def test_seen_lengths_are_not_the_measured_one() -> None:
    """T8: measured, a rod at 0.6 c has 0.8 of its length, coming or going."""
    measured = 1 / float(gamma(from_beta(0.6)))
    assert measured == pytest.approx(0.8, rel=1e-15, abs=0)
    # across the way to the observer the two agree
    side = float(apparent_length(1.0, from_beta(0.6), math.pi / 2))
    assert side == pytest.approx(measured, rel=1e-15, abs=0)
