"""Spacetime as array functions: light-cone coordinates, boosts, intervals, rapidities, Doppler."""

from tauline.spacetime.aberration import aberrated_angle, doppler_factor_at
from tauline.spacetime.boost import boost, boost_along, rotate
from tauline.spacetime.doppler import doppler_factor, doppler_factor_between
from tauline.spacetime.interval import (
    IntervalClass,
    classify,
    classify_many,
    interval_squared,
    order,
    proper_distance,
    proper_time,
)
from tauline.spacetime.lightcone import from_lightcone, to_lightcone
from tauline.spacetime.rapidity import (
    beta,
    from_beta,
    from_gamma,
    from_gamma_minus_one,
    from_one_minus_beta,
    gamma,
    gamma_minus_one,
    one_minus_beta,
)
from tauline.spacetime.rotation import thomas_rotation_per_turn, wigner_angle
from tauline.spacetime.velocity import (
    compose,
    compose_collinear,
    four_velocity,
    relative_rapidity,
    relative_velocity,
)

__all__ = [
    "IntervalClass",
    "aberrated_angle",
    "beta",
    "boost",
    "boost_along",
    "classify",
    "classify_many",
    "compose",
    "compose_collinear",
    "doppler_factor",
    "doppler_factor_at",
    "doppler_factor_between",
    "four_velocity",
    "from_beta",
    "from_gamma",
    "from_gamma_minus_one",
    "from_lightcone",
    "from_one_minus_beta",
    "gamma",
    "gamma_minus_one",
    "interval_squared",
    "one_minus_beta",
    "order",
    "proper_distance",
    "proper_time",
    "relative_rapidity",
    "relative_velocity",
    "rotate",
    "thomas_rotation_per_turn",
    "to_lightcone",
    "wigner_angle",
]
