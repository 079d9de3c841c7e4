"""Other libraries as referees: scikit-hep vector, astropy, scipy.constants."""

from __future__ import annotations

import math

import astropy.constants
import astropy.units
import numpy as np
import pytest
import scipy.constants
import vector
from hypothesis import given
from hypothesis import strategies as st

from tauline.scenario.units import (
    ASTRONOMICAL_UNIT,
    JULIAN_YEAR,
    SPEED_OF_LIGHT,
    STANDARD_GRAVITY,
    UNITS,
)
from tauline.spacetime import (
    boost,
    boost_along,
    doppler_factor,
    from_beta,
    from_lightcone,
    to_lightcone,
)

velocities = st.floats(-0.99, 0.99)
coordinates = st.floats(-1e3, 1e3)


@given(coordinates, coordinates, coordinates, coordinates, velocities)
def test_boost_against_vector(t: float, x: float, y: float, z: float, velocity: float) -> None:
    ours = from_lightcone(boost(to_lightcone(t, x, y, z), from_beta(velocity)))
    # vector moves the object; the frame goes the other way
    theirs = vector.obj(t=t, x=x, y=y, z=z).boostX(beta=-velocity)
    size = 20.0 * (abs(t) + abs(x)) + 1e-290
    np.testing.assert_allclose(
        ours, [theirs.t, theirs.x, theirs.y, theirs.z], rtol=0, atol=1e-13 * size
    )


@given(
    coordinates,
    coordinates,
    coordinates,
    coordinates,
    velocities,
    st.floats(0, math.pi),
    st.floats(-math.pi, math.pi),
)
def test_boost_in_any_direction_against_vector(
    t: float, x: float, y: float, z: float, velocity: float, theta: float, angle: float
) -> None:
    direction = np.array(
        [
            math.cos(theta),
            math.sin(theta) * math.cos(angle),
            math.sin(theta) * math.sin(angle),
        ]
    )
    ours = from_lightcone(
        boost_along(to_lightcone(t, x, y, z), float(from_beta(velocity)), direction)
    )
    against = -velocity * direction
    theirs = vector.obj(t=t, x=x, y=y, z=z).boost_beta3(
        vector.obj(x=against[0], y=against[1], z=against[2])
    )
    size = 20.0 * (abs(t) + abs(x) + abs(y) + abs(z)) + 1e-290
    np.testing.assert_allclose(
        ours, [theirs.t, theirs.x, theirs.y, theirs.z], rtol=0, atol=1e-12 * size
    )


@given(velocities, st.floats(0.1, 10))
def test_doppler_against_astropy(velocity: float, frequency: float) -> None:
    rest = frequency * astropy.units.GHz
    theirs = (velocity * astropy.constants.c).to(
        astropy.units.GHz, equivalencies=astropy.units.doppler_relativistic(rest)
    )
    ours = frequency * float(doppler_factor(from_beta(velocity)))
    assert ours == pytest.approx(float(theirs.value), rel=1e-13)


def test_constants_against_scipy_and_astropy() -> None:
    assert scipy.constants.c == astropy.constants.c.value == SPEED_OF_LIGHT
    assert scipy.constants.Julian_year == JULIAN_YEAR
    assert scipy.constants.au == astropy.constants.au.value == ASTRONOMICAL_UNIT
    assert scipy.constants.g == astropy.constants.g0.value == float(STANDARD_GRAVITY)


@pytest.mark.parametrize(
    ("ours", "theirs"),
    [
        ("min", scipy.constants.minute),
        ("h", scipy.constants.hour),
        ("d", scipy.constants.day),
        ("yr", scipy.constants.Julian_year),
        ("ly", scipy.constants.light_year),
        ("au", scipy.constants.au),
        ("pc", scipy.constants.parsec),
        ("kpc", 1000 * scipy.constants.parsec),
        ("ft", scipy.constants.foot),
        ("km", scipy.constants.kilo),
        ("um", scipy.constants.micro),
        ("nm", scipy.constants.nano),
        ("c", scipy.constants.c),
        ("g", scipy.constants.g),
        ("deg", scipy.constants.degree),
    ],
)
def test_units_against_scipy(ours: str, theirs: float) -> None:
    assert float(UNITS[ours].size) == pytest.approx(theirs, rel=3e-16)


@pytest.mark.parametrize(
    ("ours", "theirs"),
    [
        ("yr", "yr"),
        ("kyr", "kyr"),
        ("Myr", "Myr"),
        ("ns", "ns"),
        ("ly", "lyr"),
        ("Mly", "Mlyr"),
        ("au", "AU"),
        ("pc", "pc"),
        ("kpc", "kpc"),
        ("µm", "um"),
        ("cm", "cm"),
    ],
)
def test_units_against_astropy(ours: str, theirs: str) -> None:
    base = astropy.units.s if UNITS[ours].dimension.time else astropy.units.m
    assert float(UNITS[ours].size) == pytest.approx(
        float(astropy.units.Unit(theirs).to(base)), rel=3e-16
    )
