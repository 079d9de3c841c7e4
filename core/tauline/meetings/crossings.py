"""Where two worldlines meet, in 1+1.

On every leg of constant proper acceleration a (zero for a coasting one), counted from its point
(u₀, v₀) at rapidity φ, the parameter z = (e^{aτ} − 1)/a gives

    u = u₀ + e^{−φ} z/(1 + a z),   v = v₀ + e^{φ} z,

and the events of another such leg with (U₀, V₀), rapidity ψ and acceleration b all obey

    b ΔU ΔV + e^{ψ} ΔU − e^{−ψ} ΔV = 0.

Together they leave one quadratic in z, well conditioned as the accelerations go to 0.
"""

from __future__ import annotations

import math
from typing import NamedTuple

import numpy as np

from tauline.worldlines import Chain, Coast, ConstantAcceleration, Leg, legs_of
from tauline.worldlines.span import ROUNDING

Line = Coast | ConstantAcceleration | Chain


class Meeting(NamedTuple):
    """A meeting: the proper times of both lines, earliest first where they stay together.

    ``together_until`` is the first line's proper time at which they part again; equal to
    ``first`` for a meeting at one event.
    """

    first: float
    second: float
    together_until: float


class Coefficients(NamedTuple):
    """A quadratic in z; a coefficient within its rounding bound is set to 0.

    ``blur`` is the rounding bound of its discriminant.
    """

    square: float
    linear: float
    constant: float
    blur: float


def meetings(first: Line, second: Line) -> tuple[Meeting, ...]:
    """All meetings of two lines, in order of the first one's proper time.

    A stretch travelled together counts as one meeting, at its earliest event; where that lies in
    the endless past, its ``first`` and ``second`` are −inf.
    """
    found: list[Meeting] = []
    for offset_a, leg_a in legs_of(first):
        for offset_b, leg_b in legs_of(second):
            found += [
                Meeting(m.first + offset_a, m.second + offset_b, m.together_until + offset_a)
                for m in _leg_meetings(leg_a, leg_b)
            ]
    return _merge(sorted(found))


def _leg_meetings(leg: Leg, other: Leg) -> list[Meeting]:
    quadratic = _quadratic(leg, other)
    if quadratic[:3] == (0.0, 0.0, 0.0):
        return _shared_stretch(leg, other)
    found = []
    for z in _roots(quadratic):
        tau = _tau_of(leg, z)
        if math.isnan(tau):
            continue
        event = leg.event(tau)
        # u or v, whichever the other leg runs through faster, tells its proper time better
        ask = other.tau_at_u if other.start_rapidity < 0 else other.tau_at_v
        partner = float(ask(event[0] if other.start_rapidity < 0 else event[1]))
        if math.isnan(partner) or not _same_place(event, other.event(partner)):
            continue
        found.append(Meeting(tau, partner, tau))
    return found


def _quadratic(leg: Leg, other: Leg) -> Coefficients:
    a, p, q = _constants(leg)
    b, d, c = _constants(other)
    du, dv = (float(x) for x in leg.point - other.point)
    size_u, size_v = (float(x) for x in np.abs(leg.point) + np.abs(other.point))
    rise = p + a * du
    size_rise = p + abs(a) * size_u
    square = b * rise * q - d * a * q
    linear = b * (du * q + rise * dv) + c * rise - d * (q + a * dv)
    constant = b * du * dv + c * du - d * dv
    bounds = (
        q * (abs(b) * size_rise + d * abs(a)),
        abs(b) * (size_u * q + size_rise * size_v) + c * size_rise + d * (q + abs(a) * size_v),
        abs(b) * size_u * size_v + c * size_u + d * size_v,
    )
    values = (square, linear, constant)
    errors = [ROUNDING * bound for bound in bounds]
    kept = [0.0 if abs(v) <= e else v for v, e in zip(values, errors, strict=True)]
    blur = (
        2.0 * abs(linear) * errors[1]
        + 4.0 * (abs(square) * errors[2] + abs(constant) * errors[0])
        + ROUNDING * (linear * linear + abs(4.0 * square * constant))
    )
    return Coefficients(kept[0], kept[1], kept[2], blur)


def _constants(leg: Leg) -> tuple[float, float, float]:
    return leg.proper_acceleration, math.exp(-leg.start_rapidity), math.exp(leg.start_rapidity)


def _roots(quadratic: Coefficients) -> list[float]:
    """Real roots, by the form that does not cancel (Numerical Recipes, 3rd ed., §5.6)."""
    square, linear, constant, blur = quadratic
    if square == 0.0:
        return [-constant / linear] if linear != 0.0 else []
    discriminant = linear * linear - 4.0 * square * constant
    if discriminant < -blur:
        return []
    if discriminant <= blur:
        # the lines touch, as far as rounding lets one tell
        return [-0.5 * linear / square]
    half = -0.5 * (linear + math.copysign(math.sqrt(discriminant), linear))
    return [half / square, constant / half]


def _tau_of(leg: Leg, z: float) -> float:
    a = leg.proper_acceleration
    if 1.0 + a * z <= ROUNDING:
        # the factor 1 + a z that cleared the fraction has a zero of its own, which is no meeting
        return math.nan
    tau = math.log1p(a * z) / a if a else z
    if math.isfinite(tau):
        u, v = np.abs(leg.point)
        slack = (
            8
            * ROUNDING
            * (abs(tau) + u * math.exp(leg.start_rapidity) + v * math.exp(-leg.start_rapidity))
        )
        clipped = min(max(tau, leg.start), leg.end)
        if abs(tau - clipped) <= slack:
            return clipped
    return math.nan


def _same_place(event: np.ndarray, other: np.ndarray) -> bool:
    size = float(np.max(np.abs(event)) + np.max(np.abs(other)))
    return bool(np.all(np.abs(event - other) <= 1e-9 * size))


def _shared_stretch(leg: Leg, other: Leg) -> list[Meeting]:
    """Both legs lie on one curve: the stretch that both of them travel."""
    shift = float(other.tau_at_u(leg.point[0])) if _holds(other, leg) else math.nan
    if math.isnan(shift):
        # leg's own zero is not on the other leg: count from the other one's zero instead
        shift = -float(leg.tau_at_u(other.point[0])) if _holds(leg, other) else math.nan
    if math.isnan(shift):
        return []
    low = max(leg.start, other.start - shift)
    high = min(leg.end, other.end - shift)
    return [Meeting(low, low + shift, high)] if low <= high else []


def _holds(leg: Leg, other: Leg) -> bool:
    return not math.isnan(float(leg.tau_at_u(other.point[0])))


def _merge(found: list[Meeting]) -> tuple[Meeting, ...]:
    """Join meetings that two neighbouring legs both report."""
    merged: list[Meeting] = []
    for meeting in found:
        last = merged[-1] if merged else None
        if last is not None and (
            meeting.first <= last.together_until
            or math.isclose(meeting.first, last.together_until, rel_tol=1e-9, abs_tol=0.0)
            or abs(meeting.second - last.second) <= 1e-12 * abs(last.second)
        ):
            merged[-1] = last._replace(
                together_until=max(last.together_until, meeting.together_until)
            )
        else:
            merged.append(meeting)
    return tuple(merged)
