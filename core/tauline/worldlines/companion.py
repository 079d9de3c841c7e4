"""Lines that keep with another one: rigidly, or by the same programme.

A rigid companion at proper distance s ahead of (+) or behind (−) a line of rapidity φ and proper
acceleration a lies at u − s e^{−φ}, v + s e^{φ}: on the line's own simultaneity line, at rest in
its momentary rest frame. Its clock runs 1 + a s times as fast and its proper acceleration is
a/(1 + a s) (W. Rindler, *Relativity: Special, General, and Cosmological*, 2nd ed. (2006), §3.8;
section from memory). So it exists while 1 + a s > 0: any distance ahead of the acceleration, less
than 1/|a| behind. At a corner the simultaneity line jumps, and the companion with it: it ends.
"""

from __future__ import annotations

import math
from typing import NamedTuple

import msgspec
import numpy as np

from tauline.worldlines.acceleration import ConstantAcceleration
from tauline.worldlines.chain import Chain, Leg, chain, legs_of
from tauline.worldlines.coast import Coast
from tauline.worldlines.protocol import Array

Line = Coast | ConstantAcceleration | Chain


class Companion(NamedTuple):
    """A rigid companion; None where there is none at all.

    It breaks where the accompanied line's proper time is ``breaks_at`` (inf: never): at a corner,
    or where the acceleration allows no more than the distance ``limit`` (NaN for a corner).
    """

    line: Chain | None
    breaks_at: float
    limit: float


def rigid_companion(line: Line, distance: float) -> Companion:
    """Return the line at a constant proper distance (a light-time) along +x from another.

    Where it breaks, it ends; its proper time counts from the accompanied line's zero.
    """
    corners = line.corners
    made: list[Leg] = []
    for offset, leg in legs_of(line):
        rate = 1.0 + leg.proper_acceleration * distance
        if offset in corners:
            return _broken(made, offset, math.nan)
        if rate <= 0.0:
            # a first leg that reaches back without end has no event to break at
            at = max(offset, line.start)
            return _broken(made, at, 1.0 / abs(leg.proper_acceleration))
        made.append(_moved(leg, distance, rate))
    return Companion(chain(made), math.inf, math.nan)


def displaced(line: Line, distance: float, rapidity: float) -> Line:
    """Return the line of the same programme, moved along x by ``distance``.

    As measured in the frame of ``rapidity``: the same proper accelerations at the same readings,
    begun at the same time of that frame.
    """
    shift = np.array([-distance * math.exp(-rapidity), distance * math.exp(rapidity)])
    if isinstance(line, Chain):
        return Chain(
            legs=tuple(_shifted(leg, shift) for leg in line.legs),
            offsets=line.offsets,
            corners=line.corners,
        )
    return _shifted(line, shift)


def _broken(made: list[Leg], at: float, limit: float) -> Companion:
    return Companion(chain(made) if made else None, at, limit)


def _moved(leg: Leg, distance: float, rate: float) -> Leg:
    phi = leg.start_rapidity
    point = leg.point + distance * np.array([-math.exp(-phi), math.exp(phi)])
    start, end = leg.start * rate, leg.end * rate
    if isinstance(leg, Coast):
        return Coast(point=point, start_rapidity=phi, start=start, end=end)
    return ConstantAcceleration(
        point=point,
        start_rapidity=phi,
        proper_acceleration=leg.proper_acceleration / rate,
        start=start,
        end=end,
    )


def _shifted(leg: Leg, shift: Array) -> Leg:
    return msgspec.structs.replace(leg, point=leg.point + shift)
