"""How an observer reckons an event: by co-moving simultaneity, and by radar.

Two conventions that agree for an observer who coasts for good and differ for any other; each
answer names its own. When light of the event arrives (``receptions``) is a third thing.
"""

from __future__ import annotations

import math
from typing import NamedTuple

import numpy as np

from tauline.meetings.light import emissions, receptions
from tauline.worldlines import Chain, Coast, ConstantAcceleration, Leg, legs_of
from tauline.worldlines.protocol import Array
from tauline.worldlines.span import ROUNDING

Line = Coast | ConstantAcceleration | Chain


class Reckoning(NamedTuple):
    """When, by the observer's proper time, and how far off along +x an event is reckoned."""

    tau: float
    distance: float


def comoving(line: Line, point: Array) -> tuple[Reckoning, ...]:
    """All proper times at whose momentary simultaneity line an event ``(2,)`` lies.

    Counted only where the observer's own rigid frame reaches: 1 + a ξ > 0 with ξ the distance
    (C. W. Misner, K. S. Thorne & J. A. Wheeler, *Gravitation* (1973), §6.6; section from memory).
    None where no such line passes, more than one beyond what a turn sweeps over twice; a corner
    leaves out what its jump skips, and what both its sides reach is counted on each.
    """
    found: list[Reckoning] = []
    for offset, leg in legs_of(line):
        reckoned = _on_leg(leg, point)
        if reckoned is not None:
            found.append(Reckoning(reckoned.tau + offset, reckoned.distance))
    return tuple(_without_doubles(found))


def radar(line: Line, point: Array) -> Reckoning | None:
    """Radar time (τ₁ + τ₂)/2 and distance (τ₂ − τ₁)/2; None where the echo fails.

    Light leaves the observer at τ₁, meets the event and is back at τ₂; the distance is positive
    towards +x (H. Bondi, *Relativity and Common Sense* (1964), ch. IX, from memory).
    """
    sent, back = emissions(line, point), receptions(line, point)
    if np.isnan(sent.tau) or np.isnan(back.tau):
        return None
    first, second = float(sent.tau), float(back.tau)
    return Reckoning(0.5 * (first + second), math.copysign(0.5 * (second - first), sent.towards))


def horizon(line: Line) -> tuple[float, float]:
    """Return the u and the v that light must stay below ever to be received on a line.

    Light towards +x (of one u) never catches up with an endless acceleration towards +x from
    u ≥ u₀ + e^{−φ₀}/a on, and likewise towards −x; inf where there is no such limit (W. Rindler,
    *Relativity*, 2nd ed. (2006), §3.8; section from memory).
    """
    _, leg = legs_of(line)[-1]
    a = leg.proper_acceleration
    if a == 0.0 or math.isfinite(line.end):
        return math.inf, math.inf
    u, v = (float(x) for x in leg.point)
    if a > 0.0:
        return u + math.exp(-leg.start_rapidity) / a, math.inf
    return math.inf, v - math.exp(leg.start_rapidity) / a


def _on_leg(leg: Leg, point: Array) -> Reckoning | None:
    """Where the leg's momentary simultaneity line passes through an event; None if nowhere.

    On a coasting leg all these lines are parallel. On an accelerated one all pass through the
    event 1/a behind, so the line's rapidity follows from the direction to the event from there.
    """
    du, dv = (float(step) for step in point - leg.point)
    phi, a = leg.start_rapidity, leg.proper_acceleration
    u, v = du * math.exp(phi), dv * math.exp(-phi)
    if a == 0.0:
        tau, distance = 0.5 * (u + v), 0.5 * (v - u)
    else:
        # in the rest frame at the leg's own zero, from the event at −1/a: (1 − a u, 1 + a v)
        behind, ahead = 1.0 - a * u, 1.0 + a * v
        if behind <= 0.0 or ahead <= 0.0:
            return None
        tau = 0.5 * math.log(ahead / behind) / a
        distance = (math.sqrt(ahead * behind) - 1.0) / a
        if abs(a * distance) < 1e-4:
            # √(1 + ε) − 1 written so that a small ε keeps its digits
            excess = a * (v - u) - a * a * u * v
            distance = excess / (math.sqrt(1.0 + excess) + 1.0) / a
    slack = 8.0 * ROUNDING * (abs(tau) + float(np.max(np.abs(leg.point))))
    clipped = min(max(tau, leg.start), leg.end)
    return Reckoning(clipped, distance) if abs(tau - clipped) <= slack else None


def _without_doubles(found: list[Reckoning]) -> list[Reckoning]:
    """Leave out what two neighbouring legs both report at their joint."""
    kept: list[Reckoning] = []
    for item in found:
        if not kept or not (
            math.isclose(item.tau, kept[-1].tau, rel_tol=1e-12, abs_tol=1e-14)
            and math.isclose(item.distance, kept[-1].distance, rel_tol=1e-9, abs_tol=1e-12)
        ):
            kept.append(item)
    return kept
