"""Where light and worldlines meet, in 1+1.

A ray towards +x keeps its u, one towards −x its v; along a timelike line u and v only grow. So
the line meets the future light cone of an event at most once, and the past one at most once, in
every frame alike: these meetings never change with the view.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from tauline.worldlines import Worldline
from tauline.worldlines.protocol import Array
from tauline.worldlines.span import ROUNDING

TOWARDS_PLUS_X = 1
TOWARDS_MINUS_X = -1


class LightMeeting(NamedTuple):
    """Proper times of the meetings, and which way the light goes (+1: to +x, −1: to −x).

    Where there is none, NaN and 0.
    """

    tau: Array
    towards: NDArray[np.intp]


def receptions(line: Worldline, points: ArrayLike) -> LightMeeting:
    """Where light from each event (``points``: ``(2, *shape)``) is received on the line."""
    return _meet(line, np.asarray(points, dtype=float), later=True)


def emissions(line: Worldline, points: ArrayLike) -> LightMeeting:
    """Where light that reaches each event (``(2, *shape)``) was sent from the line."""
    return _meet(line, np.asarray(points, dtype=float), later=False)


def why_no_reception(line: Worldline, point: Array) -> str:
    """Say why light from an event ``(2,)`` is never received on the line."""
    if np.isfinite(line.end):
        last = line.event(line.end)
        if not _caused_by(point, last):
            return "the worldline ends before the light gets there"
    if np.isfinite(line.start) and _caused_by(point, line.event(line.start)):
        return "the light has passed before the worldline starts"
    return "the light never catches up: the event lies behind the horizon of the worldline"


def why_no_emission(line: Worldline, point: Array) -> str:
    """Say why no light sent from the line reaches an event ``(2,)``."""
    if np.isfinite(line.start) and not _caused_by(line.event(line.start), point):
        return "the worldline starts too late for its light to get there"
    if np.isfinite(line.end) and _caused_by(line.event(line.end), point):
        return "the worldline has ended before the light would have to leave"
    return "no light of the worldline gets there: the event lies beyond its past horizon"


def _meet(line: Worldline, points: Array, *, later: bool) -> LightMeeting:
    """Take the ray whose meeting lies on the wanted side of the other null coordinate."""
    sign = 1.0 if later else -1.0
    on_u, on_v = line.tau_at_u(points[0]), line.tau_at_v(points[1])
    # towards +x the reception has the emission's u and a later v; the slack lets an event on
    # the line itself be received (and sent) there at once
    at_u, at_v = line.event(on_u), line.event(on_v)
    by_u = sign * (at_u[1] - points[1]) >= -(_slack(points) + _slack(at_u))
    by_v = sign * (at_v[0] - points[0]) >= -(_slack(points) + _slack(at_v))
    tau = np.where(by_u, on_u, np.where(by_v, on_v, np.nan))
    towards = np.where(by_u, TOWARDS_PLUS_X, np.where(by_v, TOWARDS_MINUS_X, 0))
    return LightMeeting(tau, towards)


def _slack(points: Array) -> Array:
    return np.asarray(ROUNDING * np.max(np.abs(points), axis=0))


def _caused_by(cause: Array, effect: Array) -> bool:
    """Whether ``effect`` lies in or on the future light cone of ``cause``."""
    slack = float(_slack(np.asarray(cause)) + _slack(np.asarray(effect)))
    return bool(np.all(effect - cause >= -slack))
