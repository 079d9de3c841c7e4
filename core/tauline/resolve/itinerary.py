"""Itineraries: legs laid end to end, each from where the one before it ended."""

from __future__ import annotations

import math

import msgspec
import numpy as np

from tauline.meetings import meetings
from tauline.resolve.context import MAX_RAPIDITY, Context, Line
from tauline.resolve.memo import Fault
from tauline.resolve.results import FrameResult, Point
from tauline.scenario.objects import AcceleratedLeg, CoastLeg, Itinerary, PushUntil
from tauline.scenario.units import ACCELERATION, LENGTH, TIME
from tauline.worldlines import Chain, Coast, ConstantAcceleration, Leg, chain

UNTIL_COAST = "time, x, proper_time, event or meets"


class _Traveller(msgspec.Struct):
    """Where the traveller is between two legs."""

    point: Point
    rapidity: float
    elapsed: float
    start_reading: float | None


def itinerary_path(context: Context, thing: Itinerary) -> Chain:
    """Work out the legs of an itinerary one after the other."""
    frame = context.frame(thing.frame, "frame")
    rapidity = context.rapidity(thing, "", frame)
    now = _Traveller(
        point=context.event(thing.start, "start").point,
        rapidity=frame.rapidity if rapidity is None else rapidity,
        elapsed=0.0,
        start_reading=_start_reading(context, thing),
    )
    legs: list[Leg] = []
    if thing.endless_past:
        legs.append(Coast(point=now.point, start_rapidity=now.rapidity, start=-math.inf, end=0.0))
    for number, leg in enumerate(thing.legs, start=1):
        key = f"leg[{number}]"
        if legs and not math.isfinite(legs[-1].end):
            raise Fault(f"leg[{number - 1}]", "this leg never ends, so none can follow it")
        if isinstance(leg, CoastLeg):
            made: Leg = _coast(context, leg, now, frame, key)
        else:
            made = _accelerate(context, leg, now, frame, key)
        legs.append(made)
        if math.isfinite(made.end):
            now.elapsed += made.end
    return chain(legs)


def _start_reading(context: Context, thing: Itinerary) -> float | None:
    """Reading of the traveller's clock at the start; None where it is set elsewhere."""
    if thing.clock is None:
        return None if thing.endless_past else 0.0
    if thing.clock.at in ("start", thing.start, f"{thing.id}.start"):
        return context.quantity(thing.clock.reads, TIME, "clock.reads")
    return None


def _coast(
    context: Context, leg: CoastLeg, now: _Traveller, default: FrameResult, key: str
) -> Coast:
    frame = context.frame(leg.frame, f"{key}.frame") if leg.frame else default
    given = context.rapidity(leg, f"{key}.", frame)
    until = leg.until
    goal: Point | None = None
    if until is not None and until.event is not None:
        goal = context.event(until.event, f"{key}.until.event").point
        if given is None:
            given = _rapidity_to(goal, now.point, until.event, f"{key}.until.event")
    now.rapidity = now.rapidity if given is None else given
    endless = Coast(point=now.point, start_rapidity=now.rapidity)
    if leg.duration is not None:
        duration = context.quantity(leg.duration, TIME, f"{key}.for")
        place = f"{key}.for"
    elif until is None:
        return endless
    else:
        place, duration = _coast_duration(context, leg, now, endless, frame, key)
    if math.isnan(duration) or duration <= 0.0:
        raise Fault(place, *_no_length(context, now, frame))
    made = Coast(point=now.point, start_rapidity=now.rapidity, end=duration)
    now.point = made.event(duration) if goal is None else goal
    return made


def _coast_duration(
    context: Context,
    leg: CoastLeg,
    now: _Traveller,
    endless: Coast,
    frame: FrameResult,
    key: str,
) -> tuple[str, float]:
    """Own proper time until the leg's end, and the key that says where that is."""
    until = leg.until
    assert until is not None
    key = f"{key}.until"
    if until.frame is not None:
        frame = context.frame(until.frame, f"{key}.frame")
    if until.time is not None:
        time = context.quantity(until.time, TIME, f"{key}.time")
        tau = float(endless.tau_on_plane(context.point(time, 0.0, frame), frame.rapidity))
        return f"{key}.time", tau
    if until.x is not None:
        goal = context.quantity(until.x, LENGTH, f"{key}.x")
        here = context.coordinates(now.point, frame)[1]
        pace = math.sinh(now.rapidity - frame.rapidity)
        if pace == 0.0 or (goal - here) / pace <= 0.0:
            speed = math.tanh(now.rapidity - frame.rapidity)
            raise Fault(
                f"{key}.x",
                f"this leg never gets to x = {context.place(goal)}: it starts at"
                f" x = {context.place(here)} and moves at {speed:.6g} c",
                f"in the frame '{frame.id}'",
            )
        return f"{key}.x", (goal - here) / pace
    if until.proper_time is not None:
        return f"{key}.proper_time", _until_reading(
            context, until.proper_time, now, f"{key}.proper_time"
        )
    if until.event is not None:
        goal_point = context.event(until.event, f"{key}.event").point
        tau = float(endless.tau_at_u(goal_point[0]))
        there = endless.event(tau)
        if not bool(np.all(np.abs(there - goal_point) <= 1e-9 * np.max(np.abs(goal_point)))):
            raise Fault(
                f"{key}.event",
                f"at this velocity the leg does not pass through '{until.event}'",
                "leave the velocity out to go straight there",
            )
        return f"{key}.event", tau
    assert until.meets is not None
    return f"{key}.meets", _until_meeting(context, until.meets, endless, f"{key}.meets")


def _until_meeting(context: Context, other: str, endless: Leg, key: str) -> float:
    found = _first_meeting(endless, context.path(other, key))
    if math.isnan(found):
        raise Fault(key, f"this leg never meets '{other}' after it has begun")
    return found


def _first_meeting(endless: Leg, line: Line) -> float:
    """Proper time of the first meeting after the leg has begun; NaN for none."""
    size = float(np.max(np.abs(endless.point)))
    later = (m.first for m in meetings(endless, line) if m.first > 1e-12 * (size + m.first))
    return next(later, math.nan)


def _until_reading(context: Context, reading: float | str, now: _Traveller, key: str) -> float:
    if now.start_reading is None:
        raise Fault(
            key,
            "the clock is not set at the start of this worldline",
            "set it there (clock at the start), or give the leg's own duration with 'for'",
        )
    return context.quantity(reading, TIME, key) - now.start_reading - now.elapsed


def _accelerate(
    context: Context, leg: AcceleratedLeg, now: _Traveller, default: FrameResult, key: str
) -> ConstantAcceleration:
    acceleration = context.quantity(leg.acceleration, ACCELERATION, f"{key}.acceleration")
    if acceleration == 0.0:
        raise Fault(
            f"{key}.acceleration", "no acceleration at all", "leave it out for a coasting leg"
        )
    endless = ConstantAcceleration(
        point=now.point, start_rapidity=now.rapidity, proper_acceleration=acceleration
    )
    target: float | None = None
    if leg.duration is not None:
        place = f"{key}.for"
        duration = context.quantity(leg.duration, TIME, place)
    elif leg.until is None:
        return endless
    else:
        frame = context.frame(leg.until.frame, f"{key}.until.frame") if leg.until.frame else default
        target = context.rapidity(leg.until, f"{key}.until.", frame)
        if target is None:
            place, duration = _push_duration(context, leg.until, now, endless, frame, key)
        else:
            place, duration = f"{key}.until", (target - now.rapidity) / acceleration
            if duration <= 0.0:
                raise Fault(
                    place,
                    "this acceleration leads away from that velocity",
                    "change the sign of the acceleration",
                )
    if math.isnan(duration) or duration <= 0.0:
        raise Fault(place, *_no_length(context, now, default))
    reached = now.rapidity + acceleration * duration if target is None else target
    if abs(reached) > MAX_RAPIDITY:
        raise Fault(place, f"it ends at a rapidity of {reached:.4g}, beyond ±{MAX_RAPIDITY:g}")
    made = msgspec.structs.replace(endless, end=duration)
    now.point = made.event(duration)
    now.rapidity = reached
    return made


def _push_duration(
    context: Context,
    until: PushUntil,
    now: _Traveller,
    endless: ConstantAcceleration,
    frame: FrameResult,
    key: str,
) -> tuple[str, float]:
    """Own proper time until an accelerated leg's end, and the key that says where that is."""
    key = f"{key}.until"
    if until.time is not None:
        time = context.quantity(until.time, TIME, f"{key}.time")
        tau = float(endless.tau_on_plane(context.point(time, 0.0, frame), frame.rapidity))
        return f"{key}.time", tau
    if until.x is not None:
        goal = context.quantity(until.x, LENGTH, f"{key}.x")
        resting = Coast(
            point=context.point(0.0, goal, frame), start_rapidity=frame.rapidity, start=-math.inf
        )
        tau = _first_meeting(endless, resting)
        if math.isnan(tau):
            here = context.place(context.coordinates(now.point, frame)[1])
            raise Fault(
                f"{key}.x",
                f"this leg never gets to x = {context.place(goal)}: it starts at x = {here}",
                f"in the frame '{frame.id}'",
            )
        return f"{key}.x", tau
    if until.proper_time is not None:
        place = f"{key}.proper_time"
        return place, _until_reading(context, until.proper_time, now, place)
    assert until.meets is not None
    return f"{key}.meets", _until_meeting(context, until.meets, endless, f"{key}.meets")


def _rapidity_to(goal: Point, here: Point, event_id: str, key: str) -> float:
    du, dv = (float(step) for step in goal - here)
    if du <= 0.0 or dv <= 0.0:
        later = du + dv
        need = "it is not later" if later <= 0.0 else f"that takes {abs((dv - du) / later):.6g} c"
        raise Fault(
            key,
            f"the event '{event_id}' cannot be reached from here below the speed of light: {need}",
        )
    return 0.5 * math.log(dv / du)


def _no_length(context: Context, now: _Traveller, frame: FrameResult) -> tuple[str, str]:
    t, x = context.coordinates(now.point, frame)
    return (
        "this leg would end before it begins: it begins at"
        f" t = {context.time(t)}, x = {context.place(x)} of frame '{frame.id}'",
        "give a later end",
    )
